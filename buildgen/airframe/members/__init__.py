"""Members: what runs through ribs and formers.

A member makes its own parts and answers each blank that it passes with the cut it needs there.
A new kind is one module here and one line in MAKERS.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import Protocol

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members import (
    blocks,
    braces,
    capstrips,
    controls,
    edges,
    gussets,
    joiners,
    servos,
    skins,
    spars,
    tip_fins,
    tips,
    torque,
    webs,
    wiring,
)
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part


class Member(Protocol):
    """One member of the starboard wing; its parts cover both sides."""

    @property
    def parts(self) -> tuple[Part, ...]: ...

    def cut(self, blank: Blank) -> Cut:
        """What this member takes from a rib's blank; an empty cut where it does not pass."""
        ...

    def joint(self, blank: Blank) -> Joint | None:
        """How it meets the rib, for the dry fit; None where it does not."""
        ...

    @property
    def joints(self) -> tuple[Joint, ...]:
        """How its parts meet other members."""
        ...


MAKERS: tuple[Callable[[Shop, WingShape, tuple[Bay, ...]], Iterable[Member]], ...] = (
    spars.make,
    joiners.make,
    edges.leading,
    edges.trailing,
    blocks.make,
    gussets.make,
    controls.make,
    servos.make,
    torque.make,
    webs.make,
    braces.make,
    skins.make,
    capstrips.make,
    tip_fins.make,
    tips.make,
    wiring.make,
)


def make_members(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> tuple[Member, ...]:
    """Every member of the wing, in the order in which ribs ask them."""
    return tuple(m for make in MAKERS for m in make(shop, wing, bays))
