"""Density and time of the nesting engine on the project's own part sets; run by hand.

    python tests/benchmarks/bench_nesting.py [effort] [group ...]

``eq`` is sheets - 1 + used length of the emptiest sheet over its usable length. "best" is the
best single run of any engine measured on the same sets with the same spacing (1.5 mm) and
margin (5 mm), the longest of them 94 s; it is not a proven optimum. The groups "grown" repeat
a set for the growth of time with the number of parts. No classic strip-packing instance is
here: none comes with a library at hand, and their data is not known by heart.

The first run after an installation compiles the inner loops once (7 to 17 s were seen).
"""

from __future__ import annotations

import json
import sys
import time
from pathlib import Path

from shapely.geometry import Polygon

from buildgen.sheets import NestPart, NestStock, nest, placed

DATA = Path(__file__).parent / "data"
BALSA = NestStock("balsa", 914.0, 100.0)
PLY = NestStock("ply", 600.0, 300.0)
GROUPS: dict[str, tuple[str, str, NestStock, float, int, float | None]] = {
    "small-balsa2": ("small", "balsa2", BALSA, 0.0, 1, 1.139),
    "small-ply3": ("small", "ply3", PLY, 0.0, 1, None),
    "medium-balsa2": ("medium", "balsa2", BALSA, 0.0, 1, 1.869),
    "medium-balsa3": ("medium", "balsa3", BALSA, 0.0, 1, None),
    "medium-ply3": ("medium", "ply3", PLY, 0.0, 1, 0.644),
    "medium-balsa2-lean5": ("medium", "balsa2", BALSA, 5.0, 1, 1.869),
    "grown-136": ("medium", "balsa2", BALSA, 0.0, 2, None),
    "grown-408": ("medium", "balsa2", BALSA, 0.0, 6, None),
}


def parts_of(size: str, material: str, lean_deg: float, times: int) -> list[NestPart]:
    """One group of a part set."""
    rows = json.loads((DATA / f"nesting-{size}.json").read_text())
    return [
        NestPart(
            f"{row['id']}", Polygon(row["poly"][0], row["poly"][1:]), times,
            tuple(row["rot"]), lean_deg,
        )
        for row in rows
        if row["mat"] == material
    ]


def run(name: str, effort: str) -> None:
    """Nest one group and print its line."""
    size, material, stock, lean, times, best = GROUPS[name]
    parts = parts_of(size, material, lean, times)
    begin = time.perf_counter()
    result = nest(parts, [stock], spacing_mm=1.5, margin_mm=5.0, effort=effort)  # type: ignore[arg-type]
    took = time.perf_counter() - begin
    by_id = {p.id: p for p in parts}
    usable = (stock.width_mm - 10.0) * (stock.height_mm - 10.0)
    eq = len(result.layouts) - 1 + min(
        (max(placed(by_id[p.part_id], p).bounds[2] for p in lay.placements) - 5.0)
        / (stock.width_mm - 10.0)
        for lay in result.layouts
    )
    area = sum(p.polygon.area * p.quantity for p in parts)
    line = f"{name:22} {effort:7} {sum(p.quantity for p in parts):4} parts {took:6.1f} s "
    line += f"{len(result.layouts)} sheets  eq {eq:.3f}  density {area / eq / usable:.3f}"
    if best:
        line += f"  best eq {best:.3f}  density/best {best / eq:.3f}"
    print(line, flush=True)


if __name__ == "__main__":
    chosen = sys.argv[2:] or list(GROUPS)
    for group in chosen:
        run(group, sys.argv[1] if len(sys.argv) > 1 else "normal")
