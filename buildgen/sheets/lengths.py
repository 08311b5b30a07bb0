"""One-dimensional cutting from several stock lengths: cutting patterns solved as a programme.

After P. C. Gilmore and R. E. Gomory, A linear programming approach to the cutting-stock problem,
Operations Research 9 (1961) 849-859; here all patterns are listed, which for the few lengths of a
kit gives the proven optimum instead of a bound.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

MOST_PATTERNS = 6000
"""More than that take longer than a person waits."""
OFFCUT_COST = 1e-3
"""Of an offcut's length: it is there anyhow, but a short one is taken before a long one."""


@dataclass(frozen=True, slots=True)
class Length:
    """Bars of one length; `count` of them, or as many as it takes."""

    length_mm: float
    count: int | None = None

    @property
    def cost(self) -> float:
        return self.length_mm * (1.0 if self.count is None else OFFCUT_COST)


Cut = tuple[int, tuple[float, ...]]
"""Which of the stock lengths, and what is cut from it, the longest first."""


def cut_from(
    pieces: Sequence[float], stock: Sequence[Length], saw_mm: float
) -> tuple[list[Cut], bool] | None:
    """Bars with the least length bought, and whether that is proven; None where stock runs out.

    Args:
        pieces: lengths wanted, mm.
        stock: lengths at hand; counted ones are offcuts and used first.
        saw_mm: lost at each cut between two pieces.
    """
    wanted = sorted(set(pieces), reverse=True)
    demand = [list(pieces).count(w) for w in wanted]
    patterns: list[tuple[int, tuple[int, ...]]] = []
    for k, bar in enumerate(stock):
        for counts in _patterns(wanted, demand, bar.length_mm + saw_mm, saw_mm):
            patterns.append((k, counts))
            if len(patterns) > MOST_PATTERNS:
                found = _longest_first(list(pieces), stock, saw_mm)
                return None if found is None else (found, False)
    chosen = _solved(patterns, demand, stock)
    if chosen is None:
        return None
    left = list(demand)
    cuts: list[Cut] = []
    for k, counts in chosen:
        taken = [min(n, left[i]) for i, n in enumerate(counts)]
        left = [a - b for a, b in zip(left, taken, strict=True)]
        if any(taken):
            cuts.append((k, tuple(w for w, n in zip(wanted, taken, strict=True)
                                  for _ in range(n))))
    return cuts, True


def _patterns(
    wanted: Sequence[float], demand: Sequence[int], room: float, saw: float
) -> Iterator[tuple[int, ...]]:
    """Ways to fill a bar to which no further piece can be added."""
    if not wanted:
        yield ()
        return
    each = wanted[0] + saw
    most = min(demand[0], int((room + 1e-6) / each))
    for n in range(most, -1, -1):
        left = room - n * each
        for rest in _patterns(wanted[1:], demand[1:], left, saw):
            free = left - sum((w + saw) * r for w, r in zip(wanted[1:], rest, strict=True))
            if n == demand[0] or free < each - 1e-6:
                yield (n, *rest)


def _solved(
    patterns: Sequence[tuple[int, tuple[int, ...]]], demand: Sequence[int],
    stock: Sequence[Length],
) -> list[tuple[int, tuple[int, ...]]] | None:
    """How often each pattern is cut, by HiGHS to a gap of 0; each pattern as often as used."""
    from scipy.optimize import Bounds, LinearConstraint, milp

    patterns = [p for p in patterns if any(p[1])]
    if not patterns:
        return None
    counts = np.array([p[1] for p in patterns], float).T
    kinds = np.array([[p[0] == k for p in patterns] for k in range(len(stock))], float)
    cost = np.array([stock[p[0]].cost for p in patterns])
    most = [np.inf if s.count is None else s.count for s in stock]
    found = milp(
        cost, integrality=np.ones(len(patterns)), bounds=Bounds(0, np.inf),
        constraints=[LinearConstraint(counts, demand, np.inf), LinearConstraint(kinds, 0, most)],
        options={"mip_rel_gap": 0.0},
    )
    if found.x is None or found.status != 0:
        return None
    return [p for p, n in zip(patterns, np.round(found.x).astype(int), strict=True)
            for _ in range(n)]


def _longest_first(
    pieces: list[float], stock: Sequence[Length], saw: float
) -> list[Cut] | None:
    """Each piece into the first bar with room; else a new one of the cheapest that holds it."""
    bars: list[tuple[int, list[float], float]] = []
    used = [0] * len(stock)
    for piece in sorted(pieces, reverse=True):
        for n, (k, held, room) in enumerate(bars):
            if piece <= room + 1e-6:
                bars[n] = (k, [*held, piece], room - piece - saw)
                break
        else:
            open_ = [k for k, s in enumerate(stock) if s.length_mm >= piece - 1e-6
                     and (s.count is None or used[k] < s.count)]
            if not open_:
                return None
            k = min(open_, key=lambda k: (stock[k].cost, k))
            used[k] += 1
            bars.append((k, [piece], stock[k].length_mm - piece - saw))
    return [(k, tuple(held)) for k, held, _ in bars]
