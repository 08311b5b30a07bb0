"""Weights, balance and the checks: figures, a picture, and a verdict in words."""

from __future__ import annotations

from functools import partial

from reportlab.platypus import Flowable, PageBreak

from buildgen.checks.report import Balance, Check
from buildgen.packet import words
from buildgen.packet.amounts import fixed, grams, plain
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, WIDTH_MM, Column, Heading, gap, table, text
from buildgen.packet.pen import (
    ACCENT,
    HAIR_PT,
    HEAVY_PT,
    INK,
    LINE_PT,
    PALE,
    SMALL_PT,
    SOFT,
    THIN_PT,
    WHITE,
    Pen,
    Picture,
)
from buildgen.packet.three_view import cg_mark, diamond, draw_solid, round_scale
from buildgen.packet.view import FROM_LEFT, View, view_of

LANE_MM, MOST_HIGH_MM = 6.0, 60.0
GROUP_COLUMNS = (
    Column(words.GROUP, 70), Column(words.MASS_G, 26, True), Column(words.SIGMA_G, 26, True),
    Column(words.ARM, 26, True), Column(words.MOMENT, 26, True),
)
CHECK_COLUMNS = (
    Column(words.VERDICT, 17), Column(words.CHECK, 57), Column(words.FOUND, 22, True),
    Column(words.LIMIT, 22, True), Column(words.BASIS, 56),
)


def balance_pages(package: Package) -> list[Flowable]:
    """The weights table, the picture, the verdict, and the checks, worst first."""
    b = package.balance
    rows = [_group_row(r.group, r.mass_g, r.mass_sigma_g, r.arm_mm) for r in b.table]
    rows.append(_group_row(words.TOTAL, b.mass_g, b.mass_sigma_g, b.cg_mm[0]))
    story: list[Flowable] = [
        PageBreak(),
        Heading(words.BALANCE),
        balance_picture(package),
        gap(3),
        *[text(line) for line in verdict(b)],
        gap(2),
        Heading(words.BALANCE_TABLE, 1),
        table(GROUP_COLUMNS, rows, total=True),
        gap(1.5),
        text(words.ARM_NOTE, NOTE),
    ]
    return [*story, *_movable(b), *_checks(package)]


def _group_row(group: str, mass_g: float, sigma_g: float, arm_mm: float) -> list[str]:
    return [group, fixed(mass_g), fixed(sigma_g), fixed(arm_mm), fixed(mass_g * arm_mm, 0)]


def verdict(b: Balance) -> list[str]:
    """Where the centre of gravity lies and whether that is well, in sentences."""
    percent = (b.cg_mm[0] - b.mac_le_x_mm) / b.mac_mm * 100 if b.mac_mm else 0.0
    lines = [
        words.CG_TEXT.format(
            cg=fixed(abs(b.cg_mm[0])),
            where=words.BEHIND_LE if b.cg_mm[0] >= 0 else words.AHEAD_OF_LE,
            sigma=fixed(b.cg_sigma_mm), percent=fixed(percent),
            mac=fixed(b.mac_mm), mac_le=fixed(b.mac_le_x_mm),
        )
    ]
    if b.neutral_point_x_mm is not None and b.static_margin is not None:
        lines.append(words.NEUTRAL_TEXT.format(
            np=fixed(b.neutral_point_x_mm), margin=fixed(b.static_margin * 100)))
    fore, aft = b.target_cg_x_mm
    lines.append(words.TARGET_TEXT.format(
        fore=fixed(fore), aft=fixed(aft), verdict=_in_words(b.cg_mm[0], fore, aft, b.cg_sigma_mm)))
    lines += [
        words.BALLAST_TEXT.format(item=x.item, mass=grams(x.mass_g), x=fixed(x.x_mm))
        for x in b.ballast
    ]
    return lines


def _in_words(cg: float, fore: float, aft: float, sigma: float) -> str:
    if cg < fore:
        return words.TOO_FAR_FORE.format(by=fixed(fore - cg))
    if cg > aft:
        return words.TOO_FAR_AFT.format(by=fixed(cg - aft))
    room = min(cg - fore, aft - cg)
    said = words.IN_RANGE if room >= sigma else words.IN_RANGE_BARELY
    return said.format(room=fixed(room))


def _movable(b: Balance) -> list[Flowable]:
    if not b.movable:
        return []
    columns = (Column(words.ITEM, 96), Column(words.AT, 26, True), Column(words.FROM, 26, True),
               Column(words.TO, 26, True))
    rows = [[m.item, fixed(m.x_mm), *map(fixed, m.range_mm)] for m in b.movable]
    return [Heading(words.MOVABLE, 1), table(columns, rows)]


def _checks(package: Package) -> list[Flowable]:
    checks = package.checks_worst_first
    if not checks:
        return [Heading(words.CHECKS, 1), text(words.NO_CHECKS)]
    counts = {v: sum(c.verdict == v for c in checks) for v in words.VERDICTS}
    said = words.COUNTS.format(fail=counts["fail"], warn=counts["warn"], passed=counts["pass"])
    return [
        PageBreak(),
        Heading(words.CHECKS),
        text(said),
        text(words.CHECKS_NOTE, NOTE),
        gap(2),
        table(CHECK_COLUMNS, [_check_row(c) for c in checks]),
    ]


def _check_row(check: Check) -> list[str]:
    def figure(value: float | None) -> str:
        if value is None:
            return "–"
        digits = 3 if abs(value) < 1 else 2 if abs(value) < 10 else 1
        return f"{plain(value, digits)} {check.unit}".strip()

    told = f"{check.title}. {check.advice}" if check.advice else check.title
    return [words.VERDICTS[check.verdict], told, figure(check.value), figure(check.limit),
            check.basis]


def balance_picture(package: Package) -> Picture:
    """The side view over lanes that show, on the same x, all that bears on the balance."""
    b = package.balance
    view = view_of(package.kit, FROM_LEFT)
    n = round_scale((WIDTH_MM - 4, MOST_HIGH_MM), view.size_mm)
    lanes = 2 + (b.neutral_point_x_mm is not None) + len(b.movable)
    height = view.size_mm[1] / n + 5 + lanes * LANE_MM
    return Picture(WIDTH_MM, height, partial(_paint, view, b, n, height, lanes))


def _paint(view: View, b: Balance, n: float, height: float, lanes: int, pen: Pen) -> None:
    low_x, _, high_x, high_y = view.bounds
    at_x = WIDTH_MM / 2 - (low_x + high_x) / 2 / n
    inner = pen.scaled(1 / n, (at_x, height - high_y / n))
    draw_solid(inner, view, n)
    cg_x = at_x + b.cg_mm[0] / n
    pen.line([(cg_x, 0), (cg_x, height)], HAIR_PT, INK, dash=(4, 2, 1, 2))
    cg_mark(inner, view.way.flat(b.cg_mm), 2.0)
    y = (lanes - 0.5) * LANE_MM
    sigma = b.cg_sigma_mm / n
    _lane(pen, y, words.CG, f"{fixed(b.cg_mm[0])} ± {fixed(b.cg_sigma_mm)} mm")
    pen.line([(cg_x - sigma, y), (cg_x + sigma, y)], HEAVY_PT, INK)
    cg_mark(pen, (cg_x, y), 1.3)
    y -= LANE_MM
    fore, aft = (at_x + x / n for x in b.target_cg_x_mm)
    _lane(pen, y, words.RANGE_KEY, " … ".join(fixed(x) for x in b.target_cg_x_mm) + " mm")
    pen.box((fore, y - 1.1), (aft, y + 1.1), LINE_PT, ACCENT, fill=WHITE)
    if b.neutral_point_x_mm is not None:
        y -= LANE_MM
        _lane(pen, y, words.NEUTRAL_KEY, f"{fixed(b.neutral_point_x_mm)} mm")
        diamond(pen, (at_x + b.neutral_point_x_mm / n, y), 1)
    for item in b.movable:
        y -= LANE_MM
        _lane(pen, y, item.item, f"{fixed(item.x_mm)} mm")
        ends = [at_x + x / n for x in item.range_mm]
        pen.arrow((ends[0], y), (ends[1], y), THIN_PT, SOFT, both=True)
        x = at_x + item.x_mm / n
        pen.box((x - 1.1, y - 1.1), (x + 1.1, y + 1.1), LINE_PT, INK, fill=WHITE)


def _lane(pen: Pen, y: float, name: str, figure: str) -> None:
    pen.line([(0, y), (WIDTH_MM, y)], HAIR_PT, PALE)
    pen.text((0, y + 0.8), name, SMALL_PT - 0.5, ink=SOFT, halo=True)
    pen.text((WIDTH_MM, y + 0.8), figure, SMALL_PT - 0.5, "right", ink=INK, halo=True)
