"""Does it balance, fore and aft and sideways?"""

from __future__ import annotations

from collections.abc import Iterator

from buildgen.checks.desk import Check, Desk, verdict

LATERAL_MM = 3.0
"""Greatest sideways offset of the CG that trim takes easily; common practice, no source."""


def balance(desk: Desk) -> Iterator[Check]:
    """Static margin in its band with the movable items where they can go."""
    b = desk.balance
    low, high = b.target_cg_x_mm
    x = b.cg_mm[0]
    inside = low <= x <= high
    sure = low <= x - b.cg_sigma_mm and x + b.cg_sigma_mm <= high
    limit = high if x > (low + high) / 2 else low
    advice = ""
    if not inside:
        more = b.ballast[0] if b.ballast else None
        advice = (
            f"The CG lies {'aft' if x > high else 'forward'} of its range with every movable item"
            f" at its stop: move equipment, or add {more.mass_g:.0f} g at x = {more.x_mm:.0f} mm."
            if more else "Move equipment."
        )
    elif not sure:
        advice = (f"The CG is in range, but within one standard deviation ({b.cg_sigma_mm:.1f} mm)"
                  " of its end: weigh the parts as you build.")
    yield Check(
        "balance", "Centre of gravity in its range", verdict(inside and sure, inside), x, limit,
        "mm", f"sum over the parts; {desk.neutral.basis}", advice,
    )
    if b.static_margin is not None:
        wanted = desk.definition.balance
        least = wanted.static_margin - wanted.band
        yield Check(
            "static-margin", "Static margin", verdict(b.static_margin >= least - 1e-6, False),
            b.static_margin, least, "MAC", desk.neutral.basis,
            "" if b.static_margin >= least - 1e-6 else "Move mass forward or enlarge the tail.",
        )


def lateral(desk: Desk) -> Iterator[Check]:
    """Left against right."""
    y = desk.balance.cg_mm[1]
    good = abs(y) <= LATERAL_MM
    side = "right" if y > 0 else "left"
    yield Check(
        "lateral-balance", "Sideways balance", verdict(good, abs(y) <= 3 * LATERAL_MM), abs(y),
        LATERAL_MM, "mm", "sum over the parts; common practice, no source",
        "" if good else f"The {side} side is heavy: move equipment towards the middle.",
    )
