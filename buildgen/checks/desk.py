"""What every check may look at."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from buildgen.airframe import Airframe
from buildgen.checks.balance import Neutral, neutral_point
from buildgen.checks.fit import Fit, fit_of
from buildgen.checks.report import Balance, Check, Verdict
from buildgen.design.schema import Definition
from buildgen.part import Kit


@dataclass(frozen=True, eq=False)
class Desk:
    """The kit on the desk: parts, shape and balance, each made once before the checks."""

    kit: Kit
    frame: Airframe
    balance: Balance

    @property
    def definition(self) -> Definition:
        return self.frame.shop.definition

    @cached_property
    def fit(self) -> Fit:
        """The dry fit of the kit."""
        return fit_of(self.kit)

    @cached_property
    def neutral(self) -> Neutral:
        return neutral_point(self.frame)


def verdict(good: bool, tolerable: bool = False) -> Verdict:
    """pass, else warn where it is tolerable, else fail."""
    return "pass" if good else ("warn" if tolerable else "fail")


__all__ = ["Check", "Desk", "verdict"]
