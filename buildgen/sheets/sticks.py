"""Sticks, tubes and rods cut from stock lengths with the least stock, proven by HiGHS."""

from __future__ import annotations

import csv
import math
import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from io import StringIO

import numpy as np

from buildgen.design.schema import Stock
from buildgen.part import Kit, Part, Stick
from buildgen.problems import DesignError, Problem
from buildgen.sheets.lengths import Length, cut_from
from buildgen.shelf import Shelf

SAW_MM = 1.0
"""Width of a razor saw's or cutting disc's cut with its clean-up; common practice, no source."""


@dataclass(frozen=True, slots=True)
class StickPiece:
    """One part in a bar, or one piece of a part that is scarfed together.

    Attributes:
        part: "S1R"; "S1R.2" for the second piece of a scarfed one.
        length_mm: with the slopes at its ends.
        scarf_mm: length of the slope at each joined end; 0 for a whole stick.
    """

    part: str
    length_mm: float
    scarf_mm: float = 0.0


@dataclass(frozen=True, slots=True)
class StickBar:
    """One length of stock and what is cut from it."""

    pieces: tuple[StickPiece, ...]
    left_mm: float


@dataclass(frozen=True, slots=True)
class StickPlan:
    """All bars of one material, section and stock length.

    Attributes:
        proven: no plan for this material and section buys less.
    """

    material: str
    section: str
    stock_length_mm: float
    bars: tuple[StickBar, ...]
    proven: bool = True


def plan_sticks(
    kit: Kit, shelf: Shelf, kits: int = 1, stock: Stock | None = None
) -> tuple[StickPlan, ...]:
    """A cut plan for each material, section and length of stock.

    Args:
        kits: how many kits to cut together; above 1 each piece tells its kit, "S1R/2".
        stock: lengths and offcuts at hand, and the slope of scarf joints; None for the shelf's.

    Raises:
        DesignError: a stick is longer than any stock, or the stock runs out; with part and key.
    """
    stock = stock or Stock()
    groups: dict[tuple[str, str], list[Part]] = {}
    for part in kit.of("stick"):
        assert isinstance(part.form, Stick)
        copies = [part] if kits == 1 else [
            replace(part, id=f"{part.id}/{n}") for n in range(1, kits + 1)
        ]
        groups.setdefault((part.material, part.form.section), []).extend(copies)
    plans: list[StickPlan] = []
    problems: list[Problem] = []
    for (material, section), parts in groups.items():
        listed = shelf.material(material, parts[0].from_key).lengths_mm or (1000.0,)
        at_hand = lengths_of(stock, material, section)
        if all(s.count is not None for s in at_hand):
            at_hand.append(Length(max(listed)))
        try:
            pieces = _pieces(parts, section, at_hand, stock.scarf_ratio)
            plans += _planned(material, section, pieces, at_hand, parts[0])
        except DesignError as error:
            problems += error.problems
    if problems:
        raise DesignError(*problems)
    return tuple(plans)


def lengths_of(stock: Stock, material: str, section: str) -> list[Length]:
    """The lengths at hand that the definition states."""
    return [Length(s.length_mm, s.count) for s in stock.stick
            if s.material == material and s.section in (None, section)]


def _length(part: Part) -> float:
    assert isinstance(part.form, Stick)
    return part.form.length_mm


def _pieces(
    parts: Sequence[Part], section: str, stock: Sequence[Length], ratio: float | None
) -> list[StickPiece]:
    """What is cut for the parts, the longest first; parts longer than their stock in pieces.

    Raises:
        DesignError: such a part cannot be scarfed, or no slope is stated.
    """
    longest = max(s.length_mm for s in stock)
    thin = scarfed_across(section)
    found, problems = [], []
    for part in parts:
        length = _length(part)
        if length <= longest:
            found.append(StickPiece(part.id, length))
        elif thin is None or ratio is None or 2 * ratio * thin >= longest:
            problems.append(_too_long(part, longest, thin is not None))
        else:
            found += _in_pieces(part.id, length, longest, ratio * thin)
    if problems:
        raise DesignError(*problems)
    return sorted(found, key=lambda p: (-p.length_mm, p.part))


def scarfed_across(section: str) -> float | None:
    """The thinner side of a rectangular stick, along which its scarf slopes; None for others."""
    size = re.fullmatch(r"([\d.]+) x ([\d.]+)", section)
    return min(float(size[1]), float(size[2])) if size else None


def _in_pieces(id: str, length: float, longest: float, scarf: float) -> list[StickPiece]:
    """As few pieces as reach, each joint taking one slope's length; all of one length."""
    count = math.ceil((length - scarf) / (longest - scarf) - 1e-9)
    each = (length + (count - 1) * scarf) / count
    return [StickPiece(f"{id}.{n}", each, scarf) for n in range(1, count + 1)]


def _too_long(part: Part, stock: float, can_be_scarfed: bool) -> Problem:
    scarf = " or set stock.scarf_ratio to have it scarfed," if can_be_scarfed else ""
    return Problem(
        part.from_key, f"{part.id} ({part.name}) is {_length(part):.0f} mm long, its stock"
        f" {stock:g} mm.", f"Shorten the panel, break the spar with a joiner,{scarf} or state"
        " longer stock under [[stock.stick]].",
    )


def _planned(
    material: str, section: str, pieces: list[StickPiece], stock: list[Length], part: Part
) -> list[StickPlan]:
    """Plans of one material and section, one for each stock length used.

    Raises:
        DesignError: the bars at hand are too few.
    """
    if len(stock) == 1 and stock[0].count is None:
        bars, proven = _bars(pieces, stock[0].length_mm)
        return [StickPlan(material, section, stock[0].length_mm, bars, proven)]
    found = cut_from([p.length_mm for p in pieces], stock, SAW_MM)
    if found is None:
        raise DesignError(Problem(
            part.from_key, f"The sticks at hand are too few for {len(pieces)} pieces of {material}"
            f" {section}.", "State a length without count under [[stock.stick]]."))
    rest = list(pieces)
    bars_of: dict[int, list[StickBar]] = {}
    for k, lengths in found[0]:
        taken = tuple(rest.pop(next(i for i, p in enumerate(rest) if p.length_mm == n))
                      for n in lengths)
        bars_of.setdefault(k, []).append(_bar(taken, stock[k].length_mm))
    return [StickPlan(material, section, stock[k].length_mm, _in_order(bars_of[k]), found[1])
            for k in sorted(bars_of, key=lambda k: (-stock[k].length_mm, k))]


def _bar(pieces: tuple[StickPiece, ...], stock: float) -> StickBar:
    used = sum(p.length_mm + SAW_MM for p in pieces) - SAW_MM
    return StickBar(pieces, max(0.0, stock - used))


def _in_order(bars: Sequence[StickBar]) -> tuple[StickBar, ...]:
    return tuple(sorted(bars, key=lambda b: (b.left_mm, b.pieces[0].part)))


def _bars(pieces: Sequence[StickPiece], stock: float) -> tuple[tuple[StickBar, ...], bool]:
    """Fewest bars, and whether that is proven; the pieces of each from the longest down."""
    lengths = [p.length_mm for p in pieces]
    groups = _first_fit(lengths, stock)
    least = int(np.ceil((sum(lengths) + SAW_MM * len(lengths)) / (stock + SAW_MM) - 1e-9))
    proven = len(groups) <= max(1, least)
    if not proven:
        solved = _solved(lengths, stock, len(groups))
        groups, proven = solved or groups, solved is not None
    return _in_order([_bar(tuple(pieces[i] for i in g), stock) for g in groups]), proven


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
    found = milp(cost, constraints=rules, bounds=Bounds(0, 1), integrality=np.ones(size),
                 options={"mip_rel_gap": 0.0})
    if found.x is None or found.status != 0:
        return None
    chosen = np.round(found.x[: n * m]).reshape(n, m)
    groups = [[int(i) for i in np.nonzero(chosen[:, k])[0]] for k in range(m)]
    return [g for g in groups if g]


def sticks_csv(plans: Sequence[StickPlan]) -> str:
    """One line for each piece: what to cut from which bar."""
    out = StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(["material", "section_mm", "stock_length_mm", "bar", "part", "length_mm",
                     "left_on_bar_mm", "scarf_mm", "least_stock_proven"])
    for plan in plans:
        for number, bar in enumerate(plan.bars, start=1):
            for piece in bar.pieces:
                writer.writerow([plan.material, plan.section, f"{plan.stock_length_mm:g}", number,
                                 piece.part, f"{piece.length_mm:.1f}", f"{bar.left_mm:.1f}",
                                 f"{piece.scarf_mm:.1f}" if piece.scarf_mm else "",
                                 "yes" if plan.proven else "no"])
    return out.getvalue()
