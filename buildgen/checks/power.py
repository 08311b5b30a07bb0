"""Do the discs clear each other and the body, and does the current fit?"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations

import numpy as np

from buildgen.airframe.power import Thrust
from buildgen.checks.desk import Check, Desk, verdict


def tip_gaps(desk: Desk) -> Iterator[Check]:
    """Least gap between neighbouring discs, and from a disc to the fuselage."""
    power = desk.definition.power
    if power is None or power.place != "wing":
        return
    radius = power.propeller.diameter_mm / 2
    least = power.min_tip_gap_mm
    lines = desk.frame.drive.thrusts
    pairs = [(disc_gap(a, b, radius), a, b) for a, b in combinations(lines, 2)]
    gap, a, b = min(pairs, key=lambda p: p[0])
    yield Check(
        "disc-gap", "Gap between neighbouring propellers", verdict(gap >= least), gap, least, "mm",
        "distance of the disc centres less the diameter, where the discs overlap fore and aft",
        "" if gap >= least else f"Motors {a.motor} {a.side} and {b.motor} {b.side}: widen"
        " power.spacing_mm or take a smaller propeller.",
    )
    body = desk.frame.body
    if body is None:
        return
    room = []
    for line in lines:
        x = float(np.clip(line.disc[0], *body.ends_mm))
        ahead = line.disc[0] < body.ends_mm[0]
        half = 0.0 if ahead else body.width(x) / 2
        room.append((abs(float(line.disc[1])) - radius - half, line))
    gap, line = min(room, key=lambda r: r[0])
    yield Check(
        "disc-body", "Gap from propeller to fuselage", verdict(gap >= least), gap, least, "mm",
        "station less radius less half the fuselage's width at the disc",
        "" if gap >= least else f"Move motor {line.motor} outboard (power.first_mm) or take a"
        " smaller propeller.",
    )


def disc_gap(a: Thrust, b: Thrust, radius_mm: float) -> float:
    """Gap between two discs of equal radius seen along x."""
    return float(np.hypot(*(a.disc - b.disc)[1:])) - 2 * radius_mm


def current(desk: Desk) -> Iterator[Check]:
    """All motors at their greatest current against the supply wire of one."""
    power = desk.definition.power
    if power is None or power.motor.max_current_a is None:
        return
    wire = desk.frame.shop.shelf.wire(power.wire, "power.wire")
    found = power.motor.max_current_a
    yield Check(
        "wire-current", "Motor current in its supply wire", verdict(found <= wire.current_a),
        found, wire.current_a, "A", f"{power.wire.upper()}: {wire.source}",
        "" if found <= wire.current_a else "Take a thicker wire (power.wire).",
    )
