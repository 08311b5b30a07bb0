"""Sticks, tubes and rods cut from stock lengths with the least stock, proven by HiGHS."""

from __future__ import annotations

import csv
from collections.abc import Sequence
from dataclasses import dataclass, replace
from io import StringIO

import numpy as np

from buildgen.part import Kit, Part, Stick
from buildgen.problems import DesignError, Problem
from buildgen.shelf import Shelf

SAW_MM = 1.0
"""Width of a razor saw's or cutting disc's cut with its clean-up; common practice, no source."""


@dataclass(frozen=True, slots=True)
class StickPiece:
    """One part in a bar."""

    part: str
    length_mm: float


@dataclass(frozen=True, slots=True)
class StickBar:
    """One length of stock and what is cut from it."""

    pieces: tuple[StickPiece, ...]
    left_mm: float


@dataclass(frozen=True, slots=True)
class StickPlan:
    """All bars of one material and section."""

    material: str
    section: str
    stock_length_mm: float
    bars: tuple[StickBar, ...]


def plan_sticks(kit: Kit, shelf: Shelf, kits: int = 1) -> tuple[StickPlan, ...]:
    """A cut plan for each material and section.

    Args:
        kits: how many kits to cut together; above 1 each piece tells its kit, "S1R/2".

    Raises:
        DesignError: a stick is longer than any stock, with its part and key.
    """
    groups: dict[tuple[str, str], list[Part]] = {}
    for part in kit.of("stick"):
        assert isinstance(part.form, Stick)
        copies = [part] if kits == 1 else [
            replace(part, id=f"{part.id}/{n}") for n in range(1, kits + 1)
        ]
        groups.setdefault((part.material, part.form.section), []).extend(copies)
    plans, problems = [], []
    for (material, section), parts in groups.items():
        lengths = shelf.material(material, parts[0].from_key).lengths_mm or (1000.0,)
        stock = max(lengths)
        long = [p for p in parts if _length(p) > stock]
        problems += [_too_long(p, stock) for p in long]
        if not long:
            plans.append(StickPlan(material, section, stock, _bars(parts, stock)))
    if problems:
        raise DesignError(*problems)
    return tuple(plans)


def _length(part: Part) -> float:
    assert isinstance(part.form, Stick)
    return part.form.length_mm


def _too_long(part: Part, stock: float) -> Problem:
    return Problem(
        part.from_key, f"{part.id} ({part.name}) is {_length(part):.0f} mm long, its stock"
        f" {stock:g} mm.", "Shorten the panel, break the spar with a joiner, or put longer stock on"
        " a shelf file of your own.",
    )


def _bars(parts: Sequence[Part], stock: float) -> tuple[StickBar, ...]:
    """Fewest bars; the pieces of each from the longest down."""
    order = sorted(parts, key=lambda p: (-_length(p), p.id))
    lengths = [_length(p) for p in order]
    groups = _first_fit(lengths, stock)
    least = int(np.ceil((sum(lengths) + SAW_MM * len(lengths)) / (stock + SAW_MM)))
    if len(groups) > max(1, least):
        groups = _solved(lengths, stock, len(groups)) or groups
    bars = []
    for group in groups:
        pieces = tuple(StickPiece(order[i].id, lengths[i]) for i in group)
        used = sum(lengths[i] + SAW_MM for i in group) - SAW_MM
        bars.append(StickBar(pieces, max(0.0, stock - used)))
    return tuple(sorted(bars, key=lambda b: (b.left_mm, b.pieces[0].part)))


def _first_fit(lengths: list[float], stock: float) -> list[list[int]]:
    """Longest first into the first bar with room: a good start and an upper bound."""
    groups: list[list[int]] = []
    room: list[float] = []
    for i, length in enumerate(lengths):
        for k, left in enumerate(room):
            if length <= left + 1e-9:
                groups[k].append(i)
                room[k] -= length + SAW_MM
                break
        else:
            groups.append([i])
            room.append(stock - length - SAW_MM)
    return groups


def _solved(lengths: list[float], stock: float, most: int) -> list[list[int]] | None:
    """The bin packing as an integer programme: x[i, k] piece i from bar k, y[k] bar k used."""
    from scipy.optimize import Bounds, LinearConstraint, milp

    n, m = len(lengths), most
    if n * m > 600:
        return None
    size = n * m + m
    once = np.zeros((n, size))
    fits = np.zeros((m, size))
    for k in range(m):
        for i in range(n):
            once[i, i * m + k] = 1
            fits[k, i * m + k] = lengths[i] + SAW_MM
        fits[k, n * m + k] = -(stock + SAW_MM)
    order = np.zeros((m - 1, size))
    for k in range(m - 1):
        order[k, n * m + k], order[k, n * m + k + 1] = -1, 1
    cost = np.r_[np.zeros(n * m), np.ones(m)]
    rules = [LinearConstraint(once, 1, 1), LinearConstraint(fits, -np.inf, 0),
             LinearConstraint(order, -np.inf, 0)]
    found = milp(cost, constraints=rules, bounds=Bounds(0, 1), integrality=np.ones(size))
    if found.x is None:
        return None
    chosen = np.round(found.x[: n * m]).reshape(n, m)
    groups = [[int(i) for i in np.nonzero(chosen[:, k])[0]] for k in range(m)]
    return [g for g in groups if g]


def sticks_csv(plans: Sequence[StickPlan]) -> str:
    """One line for each piece: what to cut from which bar."""
    out = StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(["material", "section_mm", "stock_length_mm", "bar", "part", "length_mm",
                     "left_on_bar_mm"])
    for plan in plans:
        for number, bar in enumerate(plan.bars, start=1):
            for piece in bar.pieces:
                writer.writerow([plan.material, plan.section, f"{plan.stock_length_mm:g}", number,
                                 piece.part, f"{piece.length_mm:.1f}", f"{bar.left_mm:.1f}"])
    return out.getvalue()
