"""Will the parts survive being made: walls of prints, printer bed."""

from __future__ import annotations

from collections.abc import Iterator

from buildgen.checks.desk import Check, Desk, verdict
from buildgen.part import Printed


def walls(desk: Desk) -> Iterator[Check]:
    """Walls of the mounts against what the printer can lay down."""
    mounts = desk.frame.drive.mounts
    if not mounts:
        return
    least = desk.frame.shop.print_settings.wall_mm
    found = min(m.wall for m in mounts)
    yield Check(
        "print-walls", "Walls of printed mounts", verdict(found >= least - 1e-9), found, least,
        "mm", "line width times perimeters of the print settings",
        "" if found >= least - 1e-9 else "Raise power.mount.wall_mm.",
    )


def bounds(desk: Desk) -> Iterator[Check]:
    """Every print on the printer's bed."""
    prints = [p for p in desk.kit.of("print") if isinstance(p.form, Printed)]
    if not prints:
        return
    bed = sorted(desk.definition.print.bed_mm)
    worst = 0.0
    name = ""
    for part in prints:
        solid = part.solid
        assert solid is not None
        x0, y0, z0, x1, y1, z1 = solid.bounding_box()
        size = sorted((x1 - x0, y1 - y0, z1 - z0))
        over = max(s / b for s, b in zip(size, bed, strict=True))
        if over > worst:
            worst, name = over, part.id
    yield Check(
        "print-bed", "Largest print on the printer's bed", verdict(worst <= 1.0), 100 * worst,
        100.0, "%", "bounding box against print.bed_mm",
        "" if worst <= 1.0 else f"{name} is larger than the bed: make it smaller.",
    )
