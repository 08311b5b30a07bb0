"""Joiners at dihedral breaks: a bent wire in the bores of the tubes that meet there.

A wire much thinner than the bore is centred by printed sleeves; a little play is packed with
thread and epoxy.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise

import numpy as np

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members.spars import GLUE_GAP_MM, STEP, SparRun, pieces, vector
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT, WingShape
from buildgen.design.schema import Spar
from buildgen.part import Joint, Part, Printed
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Mirrored, Placed, Pose, Rod, Shape, Union

BREAK = "Wing: panels joined"
SLEEVE_MATERIAL = "petg"
PACKED_MM = 0.65
"""Play on each side that thread and epoxy still fill; common practice, no source."""
SLEEVE_PLAY_MM = 0.1
"""Inside and outside of a sleeve, which is sanded to fit."""


@dataclass(frozen=True, eq=False)
class Arm:
    """One arm of a joiner in its tube: from the tube's end along the way in."""

    id: str
    run: SparRun
    start: Array
    way: Array
    length_mm: float


@dataclass(frozen=True, eq=False)
class Joiner:
    """A bent rod in the bores of two tubes that meet at a dihedral break, or at the root."""

    shop: Shop
    inner: SparRun | None
    outer: SparRun
    on_centre_rib: bool = False
    """Both tubes share the rib on the centre line: the joiner goes in with them, not later."""

    @property
    def step(self) -> str:
        return STEP if self.on_centre_rib and self.inner is None else BREAK

    @cached_property
    def radius_mm(self) -> float:
        """Of the wire."""
        return _wire_radius(self.shop, self.outer.spar, self.outer.key)

    @property
    def wall_mm(self) -> float:
        """Of a sleeve that would fill the bore, with the play it needs inside and outside."""
        return self.outer.spar.inner_mm / 2 - self.radius_mm - 2 * SLEEVE_PLAY_MM

    @property
    def sleeved(self) -> bool:
        """The bore is so much wider that a sleeve of one printed line at least goes between."""
        return self.wall_mm >= self.shop.print_settings.line_width_mm - 1e-9

    @property
    def arms(self) -> tuple[Arm, ...]:
        """Where the wire lies in its tubes, starboard."""
        reach, name = self.outer.spar.joiner_mm, f"B{self.outer.letter}"
        ends = [(self.outer, self.outer.a, self.outer.bar.axis)]
        if self.inner is not None:
            ends.append((self.inner, self.inner.b, -self.inner.bar.axis))
        return tuple(
            Arm(f"{name}{n}", run, end, way,
                reach - float(np.linalg.norm(end - self.outer.meet)))
            for n, (run, end, way) in enumerate(ends, start=1)
        )

    @property
    def parts(self) -> tuple[Part, ...]:
        """The wire, and its sleeves where the bore is much wider."""
        if not self.sleeved:
            return self.wires
        return (*self.wires, *(s for arm in self.arms for s in self._sleeves(arm)))

    def _sleeves(self, arm: Arm) -> Iterable[Part]:
        """Printed rings along an arm, starboard and port: equal solids."""
        slip = SLEEVE_PLAY_MM
        shape = Rod(self.radius_mm + slip + self.wall_mm, arm.length_mm, self.radius_mm + slip)
        first = f"{arm.id}R"
        form = Printed(shape, self.shop.print_settings, (1.0, 0.0, 0.0), first)
        for side, name, sign in (("R", "right", 1), ("L", "left", -1)):
            pose = Pose.at(arm.start * (1, sign, 1), arm.way * (1, sign, 1), AFT)
            yield self.shop.part(f"{arm.id}{side}", f"sleeve of the joiner, {name}",
                                 SLEEVE_MATERIAL, form, pose, self.step, self.outer.key)

    @cached_property
    def wires(self) -> tuple[Part, ...]:
        spar, radius = self.outer.spar, self.radius_mm
        reach = spar.joiner_mm
        here = self.outer.meet
        out = here + reach * self.outer.bar.axis
        back = out * (1, -1, 1) if self.inner is None else here - reach * self.inner.bar.axis
        arm = _rod(here, out, radius)
        other: Shape = Mirrored(arm, 1) if self.inner is None else _rod(here, back, radius)
        bend = float(np.degrees(np.arccos(np.clip(
            np.dot(_unit(here - back), _unit(out - here)), -1, 1))))
        number = f"J{self.outer.letter}"
        size = f"{2 * radius:g} rod"
        key = self.outer.key
        made = self.shop.stick(
            number if self.inner is None else f"{number}R",
            f"joiner of spar {self.outer.number}, bent {bend:.1f} degrees",
            spar.joiner_material, size, Union((arm, other)), 2 * reach, self.step, key,
            ((reach, bend),),
        )
        if self.inner is None:
            return (made,)
        return made, made.mirrored(f"{number}L", made.name)

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Both arms in their bores: each slides in along its tube, before the other panel."""
        found: list[Joint] = []
        for arm in self.arms:
            for side, k in (("R", 0), ("L", -1)):
                joiner, tube = self.wires[k].id, arm.run.parts[k].id
                way = vector(arm.way * (1, -1 if k else 1, 1))
                if not self.sleeved:
                    found.append(Joint("joiner in tube", joiner, tube, (0.0, PACKED_MM), way))
                    continue
                sleeve = f"{arm.id}{side}"
                band = (0.0, SLEEVE_PLAY_MM + GLUE_GAP_MM)
                found += [Joint("sleeve in tube", sleeve, tube, band, way),
                          Joint("joiner in sleeve", joiner, sleeve, band, way)]
        return tuple(found)


def _unit(v: Array) -> Array:
    return np.asarray(v / np.linalg.norm(v))


def _rod(start: Array, end: Array, radius: float) -> Shape:
    pose = Pose.at(start, end - start, AFT)
    return Placed(Rod(radius, float(np.linalg.norm(end - start))), pose)


def _wire_radius(shop: Shop, spar: Spar, key: str) -> float:
    """The thickest stock rod that slides into the bore."""
    room = spar.inner_mm - 2 * shop.slip_mm + 0.1
    stock = shop.material(spar.joiner_material, f"{key}.joiner_material", "rod").diameters_mm
    fits = [d for d in stock if d <= room]
    if not fits:
        raise DesignError(
            Problem(f"{key}.inner_mm", f"No {spar.joiner_material} goes into a bore of"
                    f" {spar.inner_mm:g} mm.", "Take a wider tube, or end the spar at the break.")
        )
    return max(fits) / 2


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Joiner]:
    """Joiners between the pieces of every tube, and at a root where two halves meet."""
    for spar, found in pieces(shop, wing):
        if spar.kind == "tube" and spar.inner_mm and spar.joiner_mm:
            if found and spar.from_mm == 0 and not found[0].through:
                yield Joiner(shop, None, found[0], wing.flat_centre)
            for inner, outer in pairwise(found):
                yield Joiner(shop, inner, outer)
