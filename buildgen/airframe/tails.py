"""Which tail a definition asks for."""

from __future__ import annotations

from collections.abc import Iterator

from buildgen.airframe.fuselage import Body
from buildgen.airframe.hinge import LEAF_MM
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.airframe.tail import SheetTail
from buildgen.airframe.tail_t import TTail
from buildgen.airframe.tail_v import VTail
from buildgen.design.schema import Tail
from buildgen.problems import DesignError, Problem

ARRANGEMENTS: dict[str, type[SheetTail]] = {
    "conventional": SheetTail, "t-tail": TTail, "v-tail": VTail,
}


def make_tail(shop: Shop, wing: WingShape, body: Body | None, given: Tail) -> SheetTail:
    """The tail on this body; without one it still knows its `seat`."""
    tail = ARRANGEMENTS[given.arrangement](shop, wing, body, given)
    problems = [p for name in ("tailplane", "fin") for p in _hinge_faults(tail, name)]
    if problems:
        raise DesignError(*problems)
    return tail


def _hinge_faults(tail: SheetTail, name: str) -> Iterator[Problem]:
    """Hinges must sit on the moving surface, with wood on both sides of the leaf."""
    given, outline = getattr(tail.given, name), getattr(tail, name)
    if given is None or outline is None:
        return
    margin = LEAF_MM[1] / 2 + 2.0
    low = 0.0 if tail.clear_mm == 0 and name == "tailplane" else tail.clear_mm + margin
    high = outline.span_mm - margin
    for at in given.hinge_at_mm:
        if not low <= at <= high:
            yield Problem(f"tail.{name}.hinge_at_mm",
                          f"A hinge {at:g} mm from the root lies off the moving surface.",
                          f"Hinges may stand from {low:.0f} to {high:.0f} mm.")
