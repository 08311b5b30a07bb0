"""The dry fit: does the kit assemble, part by part, before anything is cut.

Three questions, each answered from the solids themselves: do two parts stand in one space, is
every declared joint within its play and in contact, and can every part be put in, in order.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Literal, TypeAlias

from buildgen.checks.fit_joint import Measured, measure
from buildgen.checks.fit_space import CLASH_MM3, Clash, clashes, pairs, solids
from buildgen.checks.fit_way import Way, ways
from buildgen.checks.report import Check, Verdict
from buildgen.part import Kit

if TYPE_CHECKING:
    from buildgen.checks.desk import Desk

Fault: TypeAlias = Literal["clash", "tight", "loose", "no contact", "no way in"]


@dataclass(frozen=True, slots=True)
class Finding:
    """One thing that does not fit.

    Attributes:
        inner, outer: part ids; of a clash in the order of the build.
        value: what was found: shared volume, play, area in contact.
        limit: what it was held against, in the same unit.
        at_mm: x, y, z of the middle of it.
    """

    fault: Fault
    kind: str
    inner: str
    outer: str
    value: float
    limit: float
    unit: str
    at_mm: tuple[float, float, float]

    @property
    def says(self) -> str:
        """In words."""
        x, y, z = (f"{v:.0f}" for v in self.at_mm)
        what = {
            "clash": f"share {self.value:.1f} mm3",
            "tight": f"{self.kind}: {self.value:.2f} mm of play, least {self.limit:.2f}",
            "loose": f"{self.kind}: {self.value:.2f} mm of play, greatest {self.limit:.2f}",
            "no contact": f"{self.kind}: {self.value:.0f} mm2 in contact,"
                          f" least {self.limit:.0f}",
            "no way in": f"{self.kind}: {self.value:.1f} mm3 stand in the way",
        }[self.fault]
        return f"{self.inner} and {self.outer}: {what}, at x {x}, y {y}, z {z}"


@dataclass(frozen=True, eq=False)
class Fit:
    """The whole dry fit.

    Attributes:
        pair_count: pairs of solids that were intersected.
        clashes: the worst first.
        joints: every declared joint as measured, in the order of the kit.
        ways: every part that goes in along a declared way.
    """

    pair_count: int
    clashes: tuple[Clash, ...]
    joints: tuple[Measured, ...]
    ways: tuple[Way, ...]
    limit_mm3: float = CLASH_MM3

    @cached_property
    def findings(self) -> tuple[Finding, ...]:
        """Everything that does not fit: clashes, then joints, then ways."""
        return (*self._clashing, *(f for m in self.joints for f in _of_joint(m)), *self._stuck)

    @property
    def _clashing(self) -> Iterator[Finding]:
        for c in self.clashes:
            yield Finding("clash", "share space", c.first, c.second, c.volume_mm3,
                          self.limit_mm3, "mm3", c.at_mm)

    @property
    def _stuck(self) -> Iterator[Finding]:
        for way in self.ways:
            if (c := way.blocked_by) is not None:
                yield Finding("no way in", "on the way in", c.first, c.second, c.volume_mm3,
                              self.limit_mm3, "mm3", c.at_mm)

    def count(self, *faults: Fault) -> int:
        """How many findings of these kinds."""
        found = Counter(f.fault for f in self.findings)
        return sum(found[f] for f in faults)

    def worst(self, *faults: Fault) -> str:
        """The first finding of these kinds in words; empty where there is none."""
        return next((f.says for f in self.findings if f.fault in faults), "")


def _of_joint(m: Measured) -> Iterator[Finding]:
    j = m.joint
    low, high = j.gap_mm
    if m.tight and m.gap_mm:
        yield Finding("tight", j.kind, j.inner, j.outer, m.gap_mm[0], low, "mm", m.at_mm)
    if m.loose and m.gap_mm:
        yield Finding("loose", j.kind, j.inner, j.outer, m.gap_mm[1], high, "mm", m.at_mm)
    if m.bare and m.contact_mm2 is not None:
        yield Finding("no contact", j.kind, j.inner, j.outer, m.contact_mm2, m.wanted_mm2, "mm2",
                      m.at_mm)


def fit_of(kit: Kit) -> Fit:
    """The dry fit of a kit, from its parts and declared joints alone.

    Raises:
        KeyError: a joint names a part that is not in the kit or has no solid (a fault of ours).
    """
    things = solids(kit)
    by_id = {thing.id: thing for thing in things}
    near = tuple(pairs(things, CLASH_MM3))
    return Fit(
        len(near),
        clashes(near),
        tuple(measure(j, by_id[j.inner], by_id[j.outer]) for j in kit.joints),
        ways(kit, by_id),
    )


def dry_fit(desk: Desk) -> Iterator[Check]:
    """Space, joints and order of the build, each its own check."""
    fit = desk.fit
    yield _check(fit, "dry-fit", "Pairs of parts in one space", "fail", ("clash",),
                 f"every pair of solids, above {CLASH_MM3:g} mm3")
    yield _check(fit, "joint-fit", "Joints outside their play or without contact", "warn",
                 ("tight", "loose", "no contact"), f"{len(fit.joints)} declared joints, measured")
    yield _check(fit, "way-in", "Parts that cannot be put in", "fail", ("no way in",),
                 f"{len(fit.ways)} ways, swept in the order of the build steps")


def _check(
    fit: Fit, id: str, title: str, bad: Verdict, faults: tuple[Fault, ...], basis: str
) -> Check:
    count = fit.count(*faults)
    worst = fit.worst(*faults)
    return Check(id, title, bad if count else "pass", float(count), 0.0, "", basis,
                 f"{worst}." if worst else "")
