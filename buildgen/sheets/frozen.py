"""Sheets that have been cut, held against the design from then on."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Literal, TypeAlias

import numpy as np
import shapely
from shapely.geometry import Polygon

from buildgen.design.load import SHIPPED, Design
from buildgen.part import Kit, Part, Plate
from buildgen.problems import DesignError, Problem, nearest
from buildgen.sheets.record import frozen_text, read_frozen, record_path
from buildgen.sheets.relief import relieved
from buildgen.sheets.sheet import Sheet

STILL_GOOD_MM = 0.03
"""Outlines this near are the same part: five times what their record is rounded by."""

State: TypeAlias = Literal[
    "still good", "must be re-cut", "cut again since", "no longer in the design"
]


@dataclass(frozen=True, slots=True)
class Kept:
    """How one part that was cut stands to the design of today."""

    part: str
    sheet: str
    state: State
    why: str = ""


@dataclass(frozen=True, slots=True)
class CutBefore:
    """The record of a design.

    Attributes:
        recorded: sheets as they were cut.
        sheets: the same, with `good` set for placements that need not be cut again, and with
            the parts of today where these are good.
        kept: how each part stands.
    """

    recorded: tuple[Sheet, ...]
    sheets: tuple[Sheet, ...]
    kept: tuple[Kept, ...]


def cut_before(kit: Kit, design: Design) -> CutBefore:
    """The sheets recorded beside a definition, held against its kit.

    Raises:
        DesignError: the record cannot be understood.
    """
    recorded = read_frozen(record_path(design.folder, design.file))
    laser = design.definition.laser
    wanted = {p.id: relieved(p, laser) for p in kit.of("cut")} if recorded else {}
    return CutBefore(recorded, *reconciled(recorded, wanted))


def freeze(build_sheets: Sequence[Sheet], names: Sequence[str], kit: Kit, design: Design) -> Path:
    """Record that sheets have been cut.

    Args:
        build_sheets: the sheets of today.
        names: of those that were cut, as their files are called.

    Returns:
        The record's file.

    Raises:
        DesignError: no such sheet, the sheet is recorded already, or the file cannot be written.
    """
    path = record_path(design.folder, design.file)
    if design.folder.resolve() == SHIPPED.resolve():
        raise DesignError(Problem("", "A shipped design keeps no record of cut sheets.",
                                  "Copy its file to a folder of your own.", design.file))
    recorded = read_frozen(path)
    fresh = {s.file: s for s in build_sheets if not s.cut_from}
    names = [n.removesuffix(".dxf").removesuffix(".svg") for n in names]
    problems = [_no_sheet(n, fresh, recorded) for n in names if n not in fresh]
    if problems:
        raise DesignError(*problems)
    text = frozen_text([*recorded, *(fresh[n] for n in dict.fromkeys(names))], kit.title.line)
    try:
        path.write_text(text, "utf-8", newline="\n")
    except OSError as error:
        raise DesignError(Problem("", f"{path.name} cannot be written.", f"{error.strerror}.",
                                  str(path))) from None
    return path


def _no_sheet(name: str, fresh: dict[str, Sheet], recorded: Sequence[Sheet]) -> Problem:
    if any(s.file == name for s in recorded):
        return Problem("", f"Sheet {name} is recorded as cut already.",
                       "To cut it anew, delete its tables in the record.")
    return Problem("", f'There is no sheet "{name}" to cut.', nearest(name, tuple(fresh)))


def reconciled(
    sheets: Sequence[Sheet], wanted: dict[str, Part]
) -> tuple[tuple[Sheet, ...], tuple[Kept, ...]]:
    """Sheets that were cut, held against the parts of today.

    Args:
        wanted: parts by id, as they would be cut today.

    Returns:
        The sheets with `good` set for the placements that need not be cut again, and how each
        part stands.
    """
    found, told = [], []
    for sheet in sheets:
        places, parts = [], []
        for at, old in zip(sheet.placements, sheet.parts, strict=True):
            kept = _stands(sheet, old, wanted.get(old.id), at.label)
            good = kept.state == "still good"
            places.append(replace(at, good=good))
            parts.append(wanted[old.id] if good else old)
            told.append(kept)
        found.append(replace(sheet, placements=tuple(places), parts=tuple(parts)))
    good_ones = {k.part for k in told if k.state == "still good"}
    return tuple(found), tuple(
        replace(k, state="cut again since", why="")
        if k.state == "must be re-cut" and k.part in good_ones else k
        for k in told
    )


def _stands(sheet: Sheet, old: Part, new: Part | None, label: str) -> Kept:
    if new is None or not isinstance(new.form, Plate):
        return Kept(label, sheet.file, "no longer in the design")
    assert isinstance(old.form, Plate)
    if new.material != sheet.material or abs(new.form.thickness_mm - sheet.thickness_mm) > 1e-6:
        return Kept(label, sheet.file, "must be re-cut",
                    f"now {new.material} {new.form.thickness_mm:g} mm")
    off = _differs(old.form, new.form)
    if off is None:
        return Kept(label, sheet.file, "must be re-cut", "other openings")
    if off > STILL_GOOD_MM:
        return Kept(label, sheet.file, "must be re-cut", f"its outline differs by {off:.2f} mm")
    return Kept(label, sheet.file, "still good")


def _differs(old: Plate, new: Plate) -> float | None:
    """Largest distance between two plates' edges; None where they have not the same openings."""
    if (len(old.outline.interiors) != len(new.outline.interiors)
            or len(old.circles) != len(new.circles)):
        return None
    off = _apart(old.outline, new.outline)
    for one, two in zip(sorted(old.circles), sorted(new.circles), strict=True):
        off = max(off, float(np.abs(np.array(one) - np.array(two)).max()))
    return off


def _apart(one: Polygon, two: Polygon) -> float:
    """Hausdorff distance of outlines, from the vertices of each to the edges of the other."""
    pairs = ((one, two), (two, one))
    return max(float(shapely.distance(shapely.points(shapely.get_coordinates(a)),
                                      b.boundary).max()) for a, b in pairs)


def kept_text(kept: Sequence[Kept]) -> str:
    """What a person reads: the parts to cut again, and how many are still good."""
    kept = [k for k in kept if k.state != "cut again since"]
    good = sum(k.state == "still good" for k in kept)
    rows = [f"  cut before: {good} of {len(kept)} parts are still good"]
    rows += [f"    {k.part} on {k.sheet}: {k.state}{f' ({k.why})' if k.why else ''}"
             for k in kept if k.state != "still good"]
    return "\n".join(rows)
