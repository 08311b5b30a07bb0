"""The cutting ticket: what a sheet costs in path, material and, where speeds are known, time."""

from __future__ import annotations

import csv
from collections.abc import Sequence
from dataclasses import dataclass
from io import StringIO

import numpy as np

from buildgen.design.schema import Laser, Speed
from buildgen.part import G_PER_MM3, Kit
from buildgen.sheets.drawing import Drawing, draw
from buildgen.sheets.sheet import Sheet
from buildgen.solid import Array


@dataclass(frozen=True, slots=True)
class Ticket:
    """One sheet.

    Attributes:
        inside_mm, outside_mm, mark_mm: path by layer; bridges are left out of the outside.
        parts_g: what ends up in the aircraft.
        left_g: the largest whole rectangle left.
        waste_g: the rest of the sheet, what the beam burns included.
        leftover_mm: largest whole rectangle left: width, height.
        minutes: cutting and engraving at the user's speeds, without the moves between; None
            where no speed is stated for this material and thickness.
        outside: parts whose id stands beside them, for it did not fit inside.
        guests: parts that lie in the opening of another.
        turned: parts that lie upside down, their ids on the face that lies up.
    """

    file: str
    material: str
    thickness_mm: float
    kerf_mm: float
    parts: int
    inside_mm: float
    outside_mm: float
    mark_mm: float
    parts_g: float
    left_g: float
    waste_g: float
    leftover_mm: tuple[float, float]
    minutes: float | None
    outside: tuple[str, ...]
    guests: tuple[str, ...]
    turned: tuple[str, ...] = ()


def ticket(sheet: Sheet, kit: Kit, laser: Laser, drawing: Drawing | None = None) -> Ticket:
    """The figures of one sheet."""
    pieces = (drawing or draw(sheet, kit, laser)).pieces
    outside = sum(_length(r) for p in pieces for r in (p.outside or [_closed(p.path.outside)]))
    inside = sum(_length(_closed(r)) for p in pieces for r in p.path.inside)
    inside += sum(2 * np.pi * r for p in pieces for *_, r in p.path.circles)
    mark = sum(_length(s) for p in pieces for s in p.strokes)
    density = sheet.parts[0].density_kg_m3 if sheet.parts else 0.0
    per_mm2 = sheet.thickness_mm * density * G_PER_MM3
    parts = sum(p.mass_g for p in sheet.parts)
    left = sheet.leftover_mm[2] * sheet.leftover_mm[3] * per_mm2
    waste = max(0.0, float(sheet.outline.area) * per_mm2 - parts - left)
    return Ticket(
        sheet.file, sheet.material, sheet.thickness_mm, sheet.kerf_mm, len(sheet.parts),
        float(inside), float(outside), float(mark), parts, left, waste,
        sheet.leftover_mm[2:], _minutes(sheet, laser, float(inside + outside), float(mark)),
        tuple(p.part for p in pieces if not p.id_inside), tuple(p.part for p in pieces if p.guest),
        tuple(at.label for at in sheet.placements if at.flipped),
    )


def _closed(ring: Array) -> Array:
    return np.vstack([ring, ring[:1]])


def _length(line: Array) -> float:
    return float(np.linalg.norm(np.diff(line, axis=0), axis=1).sum())


def _minutes(sheet: Sheet, laser: Laser, cut_mm: float, mark_mm: float) -> float | None:
    speed = speed_of(sheet, laser)
    if speed is None:
        return None
    mark = mark_mm / speed.mark_mm_s if speed.mark_mm_s else 0.0
    return (cut_mm / speed.cut_mm_s + mark) / 60


def speed_of(sheet: Sheet, laser: Laser) -> Speed | None:
    """The user's speeds for this material and thickness."""
    for speed in laser.speed:
        if speed.material == sheet.material and abs(speed.thickness_mm
                                                    - sheet.thickness_mm) < 1e-6:
            return speed
    return None


def tickets_csv(tickets: Sequence[Ticket]) -> str:
    """One line for each sheet; the time is left blank where no speeds are stated."""
    out = StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow([
        "sheet", "material", "thickness_mm", "kerf_mm", "parts", "cut_inside_mm",
        "cut_outside_mm", "mark_mm", "parts_g", "left_g", "waste_g", "left_width_mm",
        "left_height_mm", "minutes_without_moves", "ids_beside_parts",
        "cut_before_their_opening", "turned_over",
    ])
    for t in tickets:
        writer.writerow([
            t.file, t.material, f"{t.thickness_mm:g}", f"{t.kerf_mm:g}", t.parts,
            f"{t.inside_mm:.0f}", f"{t.outside_mm:.0f}", f"{t.mark_mm:.0f}", f"{t.parts_g:.1f}",
            f"{t.left_g:.1f}", f"{t.waste_g:.1f}", f"{t.leftover_mm[0]:.0f}",
            f"{t.leftover_mm[1]:.0f}",
            "" if t.minutes is None else f"{t.minutes:.1f}", " ".join(t.outside),
            " ".join(t.guests), " ".join(t.turned),
        ])
    return out.getvalue()


def tickets_text(tickets: Sequence[Ticket]) -> str:
    """The same for a terminal, with the sum; and what to look out for."""
    rows = [f"  {'sheet':<22}  inside m  outside m  marks m  parts g  left g  waste g  minutes"]
    for t in tickets:
        time = "-" if t.minutes is None else f"{t.minutes:.1f}"
        rows.append(f"  {t.file:<22}  {t.inside_mm / 1000:8.2f}  {t.outside_mm / 1000:9.2f}"
                    f"  {t.mark_mm / 1000:7.2f}  {t.parts_g:7.1f}  {t.left_g:6.1f}"
                    f"  {t.waste_g:7.1f}  {time:>7}")
    rows.append(f"  {'all':<22}  {sum(t.inside_mm for t in tickets) / 1000:8.2f}"
                f"  {sum(t.outside_mm for t in tickets) / 1000:9.2f}"
                f"  {sum(t.mark_mm for t in tickets) / 1000:7.2f}"
                f"  {sum(t.parts_g for t in tickets):7.1f}"
                f"  {sum(t.left_g for t in tickets):6.1f}"
                f"  {sum(t.waste_g for t in tickets):7.1f}")
    if any(t.minutes is None for t in tickets):
        rows.append("  time: state your machine's speeds under [[laser.speed]]")
    rows += [f"  {t.file}: cut {', '.join(t.guests)} before the opening round it"
             for t in tickets if t.guests]
    rows += [f"  {t.file}: ids stand beside {', '.join(t.outside)}" for t in tickets if t.outside]
    rows += [f"  {t.file}: upside down lie {', '.join(t.turned)}" for t in tickets if t.turned]
    return "\n".join(rows)
