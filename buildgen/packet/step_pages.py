"""The build, step by step: what is new, where it comes from, where it goes."""

from __future__ import annotations

from reportlab.lib.units import mm
from reportlab.platypus import CondPageBreak, Flowable, KeepTogether, PageBreak

from buildgen.packet import words
from buildgen.packet.amounts import grams
from buildgen.packet.cautions import caution
from buildgen.packet.kit_json import quantity
from buildgen.packet.package import Package
from buildgen.packet.page import BOX, NOTE, WIDTH_MM, Column, Heading, gap, table, text
from buildgen.packet.shaded import part_triangles, shaded
from buildgen.packet.tables import where_from
from buildgen.part import Bought, Cover, Part

COLUMNS = (
    Column("", 6), Column(words.ID, 24), Column(words.NAME, 58), Column(words.MATERIAL, 34),
    Column(words.SHEET_OF, 38), Column(words.MASS_G, 14, True),
)
HIGH_MM = (50.0, 105.0)
LABEL_MOST, SHORT_TABLE = 60, 12
CAUTION_KEYS = {"propeller": ("propeller", "outrunner", "motor"), "battery": ("battery",)}
"""Cautions that a step carries when one of these comes on board."""


def step_pages(package: Package) -> list[Flowable]:
    """One block for each step of the kit, in order."""
    story: list[Flowable] = [PageBreak(), Heading(words.STEPS), text(words.STEP_NOTE, NOTE),
                             gap(2), caution("dust", "glue")]
    earlier: list[Part] = []
    for number, step in enumerate(package.kit.steps, start=1):
        new = [p for p in package.kit.parts if p.step == step]
        story += _block(package, words.STEP.format(number=number, name=step), new, earlier)
        earlier += [p for p in new if not p.tool]
    return story


def _block(package: Package, title: str, new: list[Part], earlier: list[Part]) -> list[Flowable]:
    rows = [
        [BOX, p.id, _counted(p), p.material, where_from(package, p), grams(p.mass_g)] for p in new
    ]
    head: list[Flowable] = [Heading(title, 1)]
    if any(part_triangles(p) is not None for p in new):
        head.append(step_picture(new, earlier))
    listed = table(COLUMNS, rows)
    if places := [p for p, keys in CAUTION_KEYS.items() if any(_is(part, keys) for part in new)]:
        head.insert(1, caution(*places))
    if len(rows) <= SHORT_TABLE:
        return [KeepTogether([*head, listed]), gap(4)]
    return [CondPageBreak((HIGH_MM[1] + 40) * mm), *head, listed, gap(4)]


def _is(part: Part, words_: tuple[str, ...]) -> bool:
    """Whether a bought part is one of these, by what it is."""
    return isinstance(part.form, Bought) and any(w in part.material for w in words_)


def _counted(part: Part) -> str:
    pieces = quantity(part)
    return part.name if pieces == 1 else f"{pieces} x {part.name}"


def step_picture(new: list[Part], earlier: list[Part]) -> Flowable:
    """New parts strong, earlier ones pale and without their coverings, framed on the new."""
    bare = [p for p in earlier if not isinstance(p.form, Cover)]
    return shaded(new, WIDTH_MM, HIGH_MM, bare, label=len(new) <= LABEL_MOST)
