"""The bill of materials: what to make, what stock that takes, what to buy."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from itertools import groupby
from typing import Literal, TypeAlias

from buildgen.packet import words
from buildgen.packet.amounts import plain, section_with_inches, size_with_inches, with_inches
from buildgen.packet.kit_json import quantity
from buildgen.packet.package import Package
from buildgen.part import Allowance, Bought, Cover, Part, Plate, Printed, Stick
from buildgen.solid import skin_figures

Section: TypeAlias = Literal["make", "stock", "buy"]


@dataclass(frozen=True)
class Line:
    """One line of the bill.

    Attributes:
        mass_g: of the whole line; None where only the parts made of it are weighed.
        parts: ids that it stands for.
    """

    section: Section
    item: str
    size: str
    amount: float
    unit: str
    mass_g: float | None
    parts: tuple[str, ...] = ()

    @property
    def quantity(self) -> str:
        unit = words.ONE.get(self.unit, self.unit) if self.amount == 1 else self.unit
        return f"{plain(self.amount, 2)} {unit}".strip()


def bill(package: Package) -> tuple[Line, ...]:
    """Every line in reading order: to make, stock, to buy."""
    return (*_to_make(package), *_stock(package), *_to_buy(package))


def _grouped(parts: Iterable[Part]) -> list[tuple[tuple[str, ...], list[Part]]]:
    """Parts by material and size, in alphabetical order; parts keep theirs."""
    def where(part: Part) -> tuple[str, ...]:
        return (part.material, part_size(part))

    return [(k, list(g)) for k, g in groupby(sorted(parts, key=where), where)]


def part_size(part: Part) -> str:
    """What decides the stock of a part: a sheet's thickness, a stick's section."""
    match part.form:
        case Plate():
            return with_inches(part.form.thickness_mm)
        case Stick():
            return section_with_inches(part.form.section)
    return ""


def _to_make(package: Package) -> list[Line]:
    kinds = (("cut", words.CUT_PARTS), ("stick", words.STICK_PARTS),
             ("print", words.PRINTED_PARTS), ("cover", words.COVERED_PARTS))
    return [
        Line("make", f"{title}, {material}", size, len(parts), words.PIECES,
             sum(p.mass_g for p in parts), tuple(p.id for p in parts))
        for process, title in kinds
        for (material, size), parts in _grouped(package.kit.of(process))  # type: ignore[arg-type]
    ]


def _stock(package: Package) -> list[Line]:
    lines = [*_sheets(package), *_lengths(package)]
    prints = [p for p in package.kit.parts if isinstance(p.form, Printed)]
    for (material, _), parts in _grouped(prints):
        mass = sum(p.mass_g for p in parts)
        lines.append(Line("stock", f"{words.FILAMENT}, {material}", "", round(mass, 1), "g", mass,
                          tuple(p.id for p in parts)))
    covers = [p for p in package.kit.parts if isinstance(p.form, Cover)]
    for (material, _), parts in _grouped(covers):
        area_m2 = sum(covered_mm2(p) for p in parts) * 1e-6
        lines.append(Line("stock", f"{words.COVERING_STOCK}, {material}", "", round(area_m2, 3),
                          "m²", sum(p.mass_g for p in parts), tuple(p.id for p in parts)))
    for part in package.kit.parts:
        if isinstance(part.form, Allowance):
            lines.append(Line("stock", f"{words.ALLOWANCE}: {part.name}", "",
                              round(part.mass_g, 1), "g", part.mass_g, (part.id,)))
    return lines


def covered_mm2(part: Part) -> float:
    """Area of a covering as laid on."""
    assert isinstance(part.form, Cover)
    return skin_figures(part.form.skin.vertices, part.form.skin.faces)[0]


def _sheets(package: Package) -> list[Line]:
    counts: dict[tuple[str, float, float, float], list[str]] = {}
    for sheet in package.sheets:
        key = (sheet.material, sheet.thickness_mm, sheet.width_mm, sheet.height_mm)
        counts.setdefault(key, []).append(sheet.file)
    return [
        Line("stock", f"{words.SHEET_STOCK}, {material} {with_inches(thickness)}",
             size_with_inches(width, height), len(files), words.SHEETS_UNIT, None, tuple(files))
        for (material, thickness, width, height), files in sorted(counts.items())
    ]


def _lengths(package: Package) -> list[Line]:
    return [
        Line("stock", f"{words.STICK_STOCK}, {plan.material} {section_with_inches(plan.section)}",
             size_with_inches(plan.stock_length_mm), len(plan.bars), words.LENGTHS_UNIT, None,
             tuple(piece.part for bar in plan.bars for piece in bar.pieces))
        for plan in package.stick_plans
    ]


def _to_buy(package: Package) -> list[Line]:
    bought = [p for p in package.kit.parts if isinstance(p.form, Bought)]
    lines: dict[tuple[str, str], list[Part]] = {}
    for part in bought:
        assert isinstance(part.form, Bought)
        lines.setdefault((part.material, part.form.order), []).append(part)
    return [
        Line("buy", order or material, material if order else "", sum(map(quantity, parts)),
             words.PIECES, sum(p.mass_g for p in parts), tuple(p.id for p in parts))
        for (material, order), parts in lines.items()
    ]
