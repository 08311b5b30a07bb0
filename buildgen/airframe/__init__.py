"""The shape in space and the parts it is made of: Design -> Airframe -> Kit."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

from buildgen.airframe.boards import make_boards
from buildgen.airframe.covering import glue, plate_covers, wing_covers
from buildgen.airframe.equipment import Movable, make_equipment
from buildgen.airframe.fuselage import Body
from buildgen.airframe.hinge import Horn
from buildgen.airframe.jigs import make_jigs
from buildgen.airframe.members import make_members
from buildgen.airframe.moving import control_places
from buildgen.airframe.power import Drive
from buildgen.airframe.ribs import make_ribs
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape, shape_wing
from buildgen.airframe.tail import SheetTail
from buildgen.airframe.tails import make_tail
from buildgen.airframe.woods import check_materials
from buildgen.design.schema import Definition, Wing
from buildgen.part import Joint, Kit, Part, Title
from buildgen.problems import DesignError, Problem
from buildgen.section import Section, find
from buildgen.shelf import Shelf


@dataclass(frozen=True, eq=False)
class Airframe:
    """The aircraft's shape: wing, fuselage, tail and thrust lines; parts come from it."""

    shop: Shop
    wing: WingShape
    body: Body | None
    tail: SheetTail | None
    drive: Drive

    @cached_property
    def equipment(self) -> tuple[tuple[Part, ...], tuple[Movable, ...]]:
        level = self.body.middle if self.body else (lambda x: 0.0)
        parts, movable = make_equipment(self.shop, level)
        return tuple(parts), tuple(movable)

    @property
    def horns(self) -> tuple[Horn, ...]:
        """Where pushrods take hold: every surface that moves has one."""
        wing = (h for p in control_places(self.shop, self.wing) for h in p.horns)
        return (*wing, *(self.tail.horns if self.tail else ()))

    @property
    def movable(self) -> tuple[Movable, ...]:
        return self.equipment[1]


def find_sections(wing: Wing, folders: tuple[Path, ...]) -> dict[str, Section]:
    """Every section that the wing names; all missing ones are reported at once."""
    places = {wing.section: "wing.section"}
    for i, panel in enumerate(wing.panel, start=1):
        if panel.section:
            places.setdefault(panel.section, f"wing.panel[{i}].section")
    found: dict[str, Section] = {}
    problems: list[Problem] = []
    for name, path in places.items():
        try:
            found[name] = find(name, folders)
        except DesignError as error:
            problems += [Problem(path, p.says, p.hint, p.file, p.line) for p in error.problems]
    if problems:
        raise DesignError(*problems)
    return found


def shape_airframe(
    definition: Definition, shelf: Shelf, folders: tuple[Path, ...] = ()
) -> Airframe:
    """Place everything in space; raises DesignError for what cannot be."""
    shop = Shop(definition, shelf)
    check_materials(shop)
    wing = shape_wing(definition.wing, find_sections(definition.wing, folders))
    seat = make_tail(shop, wing, None, definition.tail).seat if definition.tail else None
    body = Body(shop, wing, definition.fuselage, seat) if definition.fuselage else None
    tail = make_tail(shop, wing, body, definition.tail) if definition.tail else None
    drive = Drive(shop, wing, body.nose_seat if body else None)
    return Airframe(shop, wing, body, tail, drive)


def make_kit(frame: Airframe, title: Title) -> Kit:
    """Every part of the airframe, in the order of the build."""
    shop, wing, drive = frame.shop, frame.wing, frame.drive
    members = make_members(shop, wing, drive.bays)
    ribs = make_ribs(shop, wing, drive.bays, members, drive.rib_cuts)
    wing_parts = [*ribs.parts, *(p for m in members for p in m.parts)]
    body = list(frame.body.parts) if frame.body else []
    tail = list(frame.tail.parts) if frame.tail else []
    power = list(drive.parts)
    covers = wing_covers(shop, wing)
    definition = shop.definition
    if frame.body and definition.fuselage:
        sheets = [p for p in body if p.id.startswith(("FS", "FT", "FB"))]
        covers += plate_covers(shop, sheets, "CF", "covering of the fuselage",
                               definition.fuselage.covering, "fuselage.covering", False)
    if definition.tail:
        covers += plate_covers(shop, tail, "CT", "covering of the tail", definition.tail.covering,
                               "tail.covering", True)
    groups = {"wing": wing_parts, "fuselage": body, "tail": tail, "mounts": power}
    parts = [*make_jigs(shop, wing, drive.bays), *wing_parts, *body, *tail, *covers, *power,
             *frame.equipment[0], *glue(shop, groups)]
    more: list[Joint] = [*ribs.joints, *(j for m in members for j in m.joints)]
    more += frame.body.joints if frame.body else ()
    more += frame.tail.joints if frame.tail else ()
    more += drive.joints(ribs.of_bay)
    boards = make_boards(wing, wing_parts, body, tail)
    return Kit(title, tuple(parts), tuple(more), boards)


__all__ = ["Airframe", "make_kit", "shape_airframe"]
