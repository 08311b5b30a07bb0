"""Numbers and verdicts from the kit.

A check is a function of the Desk that yields `Check`s; adding one is one function in a module
here and one line in CHECKS.
"""

from __future__ import annotations

from buildgen.checks import build, fit, fly, motor_out, power, propel, strong, weigh
from buildgen.checks.desk import Desk
from buildgen.checks.report import Check

CHECKS = (
    weigh.balance,
    weigh.lateral,
    fly.tail_volumes,
    fly.loading,
    fly.stall,
    power.tip_gaps,
    power.current,
    propel.thrust,
    propel.cruise,
    motor_out.motor_out,
    strong.spars,
    strong.joiners,
    build.walls,
    build.bounds,
    fit.dry_fit,
)


def run_checks(desk: Desk) -> tuple[Check, ...]:
    """Every check, in the order of the tuple."""
    return tuple(c for check in CHECKS for c in check(desk))


__all__ = ["CHECKS", "Check", "Desk", "run_checks"]
