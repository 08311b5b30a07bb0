"""What the commands print: plain tables, colour only on a terminal."""

from __future__ import annotations

import os
import sys
from pathlib import Path
from typing import TYPE_CHECKING

from buildgen.checks.report import WORST_FIRST, Check
from buildgen.sheets.frozen import kept_text
from buildgen.sheets.ticket import ticket, tickets_text

if TYPE_CHECKING:
    from buildgen.build import Build

TONES = {"pass": "32", "warn": "33", "fail": "31"}


def coloured() -> bool:
    """Colour on a terminal, unless NO_COLOR is set."""
    return sys.stdout.isatty() and not os.environ.get("NO_COLOR")


def _toned(word: str, verdict: str) -> str:
    return f"\033[{TONES[verdict]}m{word}\033[0m" if coloured() else word


def summary(made: Build, folder: Path) -> str:
    """After a packet: where it is, what it holds, how it stands."""
    b = made.balance
    counts = {v: sum(c.verdict == v for c in made.checks) for v in WORST_FIRST}
    rows = [
        f"{made.title.title}  ({made.title.line})",
        f"  packet        {folder}",
        f"  parts         {len(made.parts)}: {len(made.of('cut'))} cut from"
        f" {len(made.sheets)} sheets, {len(made.of('stick'))} sticks,"
        f" {len(made.of('print'))} prints",
        f"  mass          {b.mass_g:.0f} g +/- {b.mass_sigma_g:.0f}",
        *_balance_lines(made),
        "  checks        " + ", ".join(
            f"{counts[v]} {v}" for v in ("pass", "warn", "fail") if counts[v]),
    ]
    bad = [c for v in ("fail", "warn") for c in made.checks if c.verdict == v]
    return "\n".join([*rows, *(_check_line(c) for c in bad)])


def _balance_lines(made: Build) -> list[str]:
    b = made.balance
    low, high = b.target_cg_x_mm
    lines = [
        f"  CG            x = {b.cg_mm[0]:.1f} mm +/- {b.cg_sigma_mm:.1f}"
        f"  (range {low:.1f} to {high:.1f}, from the root's leading edge)",
    ]
    if b.static_margin is not None:
        lines.append(f"  static margin {100 * b.static_margin:.1f} % of the mean chord"
                     f" {b.mac_mm:.1f} mm")
    lines += [
        f"  {m.item}: middle at x = {m.x_mm:.0f} mm (may stand from {m.range_mm[0]:.0f} to"
        f" {m.range_mm[1]:.0f})" for m in b.movable
    ]
    lines += [f"  {w.item}: {w.mass_g:.0f} g at x = {w.x_mm:.0f} mm" for w in b.ballast]
    return lines


def balance_table(made: Build) -> str:
    """Weights by group, the whole, the centre of gravity and what moves."""
    b = made.balance
    wide = max(len(r.group) for r in b.table)
    rows = [f"{made.title.title}  ({made.title.line})", "",
            f"  {'group':<{wide}}  {'mass g':>8}  {'+/-':>6}  {'arm mm':>8}"]
    rows += [
        f"  {r.group:<{wide}}  {r.mass_g:8.1f}  {r.mass_sigma_g:6.1f}  {r.arm_mm:8.1f}"
        for r in b.table
    ]
    rows += [f"  {'all':<{wide}}  {b.mass_g:8.1f}  {b.mass_sigma_g:6.1f}  {b.cg_mm[0]:8.1f}", ""]
    rows += _balance_lines(made)
    if b.neutral_point_x_mm is not None:
        rows.append(f"  neutral point x = {b.neutral_point_x_mm:.1f} mm")
    rows += [_check_line(c) for c in made.checks if c.id in ("balance", "static-margin")]
    return "\n".join(rows)


def checks_table(made: Build) -> str:
    """Every check, worst first, with what to change."""
    rows = [f"{made.title.title}  ({made.title.line})"]
    for verdict in WORST_FIRST:
        rows += [_check_line(c) for c in made.checks if c.verdict == verdict]
    return "\n".join(rows)


def _check_line(c: Check) -> str:
    figure = ""
    if c.value is not None:
        unit = f" {c.unit}" if c.unit else ""
        figure = f"{c.value:.3g}{unit}"
        if c.limit is not None:
            figure += f" (limit {c.limit:.3g})"
    line = f"  {_toned(c.verdict.upper(), c.verdict):<5} {c.title}: {figure}"
    return f"{line}\n        {c.advice}" if c.advice else line


def cut_table(made: Build, folder: Path) -> str:
    """Sheets and sticks that were written."""
    rows = [f"{made.title.title}  ({made.title.line})", f"  written to {folder}"]
    rows += [
        f"  {s.file:<22} {s.width_mm:g} x {s.height_mm:g} mm  {len(s.parts):3d} parts"
        f"  {100 * s.used_fraction:5.1f} % used  {s.cut_length_mm / 1000:6.2f} m to cut"
        for s in made.sheets if not s.cut_from
    ]
    fresh = [ticket(s, made, made.laser) for s in made.sheets if not s.cut_from]
    rows += [kept_text(made.cut_before.kept)] if made.cut_before.kept else []
    rows += [tickets_text(fresh)] if fresh else []
    rows += [
        f"  {p.material} {p.section}: {len(p.bars)} of {p.stock_length_mm:g} mm"
        for p in made.stick_plans
    ]
    return "\n".join(rows)


def mounts_table(made: Build, folder: Path) -> str:
    """Printed parts that were written."""
    rows = [f"{made.title.title}  ({made.title.line})", f"  written to {folder}"]
    rows += [
        f"  {p.id:<6} {p.name}  {p.material}  {p.mass_g:.1f} g  {p.files_key}.step .stl .3mf"
        for p in made.of("print")
    ]
    return "\n".join(rows)
