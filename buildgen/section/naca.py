"""NACA four-digit, modified four-digit, five-digit and reflexed five-digit sections.

Sources: E. N. Jacobs, K. E. Ward, R. M. Pinkerton, NACA TR 460 (1933), four-digit; E. N. Jacobs,
R. M. Pinkerton, NACA TR 537 (1935), five-digit; J. Stack, A. E. von Doenhoff, NACA TR 492 (1934),
modified four-digit; C. L. Ladson et al., NASA TM 4741 (1996), all of them as equations.
Report numbers from memory.
"""

from __future__ import annotations

import re

import numpy as np

from buildgen.problems import DesignError, Problem
from buildgen.section.curve import DENSE, Array, Section, cosine, from_dense

# r and k1 of the five-digit mean lines by their first three digits (TR 537, table).
PLAIN = {210: (0.0580, 361.4), 220: (0.1260, 51.64), 230: (0.2025, 15.957),
         240: (0.2900, 6.643), 250: (0.3910, 3.230)}
# r, k1 and k2/k1 of the reflexed ones.
REFLEXED = {221: (0.1300, 51.990, 0.000764), 231: (0.2170, 15.793, 0.00677),
            241: (0.3180, 6.520, 0.0303), 251: (0.4410, 3.191, 0.1355)}
NAME = re.compile(r"^(?:naca[\s_-]*)?(\d{4,5})(?:-(\d)(\d))?(-closed)?$", re.IGNORECASE)
FORMS = 'four digits ("naca2412"), four digits modified ("naca0012-64"), five ("naca23012")'


def is_naca(name: str) -> bool:
    """Does this read as a NACA designation?"""
    return NAME.match(name.strip()) is not None


def naca(designation: str, closed: bool = False) -> Section:
    """The section of that designation by its published equations.

    Args:
        designation: "naca2412", "NACA 0012-64", "23012"; "-closed" at the end closes the edge.
        closed: close the trailing edge by changing the last thickness coefficient (0.1036
            instead of 0.1015).

    Raises:
        DesignError: no such section.
    """
    match = NAME.match(designation.strip())
    if match is None:
        raise DesignError(Problem("", f'"{designation}" is no NACA section.', f"Allowed: {FORMS}."))
    digits, nose, place, word = match.groups()
    closed = closed or bool(word)
    thick = int(digits[-2:]) / 100
    if thick <= 0:
        raise DesignError(Problem("", f"{designation}: the last two digits give no thickness."))
    x = cosine(DENSE)
    if nose:
        half = _modified(x, thick, int(nose), int(place), designation, closed)
    else:
        half = _half(x, thick, closed)
    mean, slope = mean_line(digits, x)
    angle = np.arctan(slope)
    upper = np.column_stack([x - half * np.sin(angle), mean + half * np.cos(angle)])
    lower = np.column_stack([x + half * np.sin(angle), mean - half * np.cos(angle)])
    label = f"NACA {digits}" + (f"-{nose}{place}" if nose else "") + (" closed" if closed else "")
    return from_dense(label, "NACA equations: TR 460, TR 537, TR 492, NASA TM 4741",
                      np.vstack([upper[::-1], lower[1:]]))


def _half(x: Array, thick: float, closed: bool) -> Array:
    """Half thickness of the four- and five-digit families. Source: TR 460."""
    last = 0.1036 if closed else 0.1015
    return np.asarray(
        5 * thick * (0.2969 * np.sqrt(x) - 0.1260 * x - 0.3516 * x**2 + 0.2843 * x**3
                     - last * x**4)
    )


# d1 of the aft part over the thickness, by the place of greatest thickness (TR 492, table).
AFT_SLOPE = {2: 1.000, 3: 1.170, 4: 1.575, 5: 2.325, 6: 3.500}


def _modified(
    x: Array, thick: float, nose: int, place: int, name: str, closed: bool
) -> Array:
    """Half thickness of the modified family: a front and an aft curve that meet at m.

    Source: TR 492; the front's coefficients follow from equal ordinate, slope zero and equal
    curvature at m, as in TM 4741. Closed by d0 = 0, d0 being half the edge (common practice, no
    source).
    """
    if place not in AFT_SLOPE:
        raise DesignError(
            Problem("", f"{name}: greatest thickness at {place} tenths is not tabulated.",
                    f"Allowed last digits: {', '.join(map(str, AFT_SLOPE))}.")
        )
    m, t = place / 10, thick
    d0, d1 = 0.0 if closed else 0.01 * t, AFT_SLOPE[place] * t
    gap = 1 - m
    system = np.array([[gap**2, gap**3], [-2 * gap, -3 * gap**2]])
    d2, d3 = np.linalg.solve(system, [t / 2 - d0 - d1 * gap, d1])
    curvature = 2 * d2 + 6 * d3 * gap
    # index 6 is the normal nose, 9 one of three times its radius
    radius = 1.1019 * t**2 * (3 if nose == 9 else (nose / 6) ** 2)
    a0 = np.sqrt(2 * radius)
    front = np.array([[m, m**2, m**3], [1, 2 * m, 3 * m**2], [0, 2, 6 * m]])
    a1, a2, a3 = np.linalg.solve(
        front, [t / 2 - a0 * np.sqrt(m), -a0 / (2 * np.sqrt(m)), curvature + a0 / (4 * m**1.5)]
    )
    ahead = a0 * np.sqrt(x) + a1 * x + a2 * x**2 + a3 * x**3
    behind = d0 + d1 * (1 - x) + d2 * (1 - x) ** 2 + d3 * (1 - x) ** 3
    return np.asarray(np.where(x < m, ahead, behind))


def mean_line(designation: str, x: Array) -> tuple[Array, Array]:
    """Mean line and its slope, four- or five-digit.

    Args:
        designation: as for `naca`.
        x: (n,) fractions of the chord.

    Returns:
        (n,) ordinates [chord] and (n,) slopes.

    Raises:
        DesignError: no such mean line.
    """
    digits = re.sub(r"\D", "", designation.split("-")[0])
    return _mean_four(x, digits) if len(digits) == 4 else _mean_five(x, digits)


def _mean_four(x: Array, digits: str) -> tuple[Array, Array]:
    """Mean line and slope of the four-digit family. Source: TR 460."""
    m, p = int(digits[0]) / 100, int(digits[1]) / 10
    if m == 0:
        return np.zeros_like(x), np.zeros_like(x)
    if p == 0:
        raise DesignError(
            Problem("", f"NACA {digits}: a cambered mean line needs its place.",
                    "The second digit is the place of the camber in tenths of the chord.")
        )
    ahead = x < p
    mean = np.where(ahead, m / p**2 * (2 * p * x - x**2),
                    m / (1 - p) ** 2 * (1 - 2 * p + 2 * p * x - x**2))
    slope = np.where(ahead, 2 * m / p**2 * (p - x), 2 * m / (1 - p) ** 2 * (p - x))
    return mean, slope


def _mean_five(x: Array, digits: str) -> tuple[Array, Array]:
    """Mean line and slope of the five-digit family, design lift 0.3 scaled by the first digit."""
    code = int(digits[:3])
    lift = int(digits[0]) / 2
    key = 200 + code % 100
    known = sorted({*PLAIN, *REFLEXED})
    if key not in PLAIN and key not in REFLEXED or lift == 0:
        listed = ", ".join(f"{k}xx" for k in known)
        raise DesignError(
            Problem("", f"NACA {digits}: its mean line is not tabulated.", f"Allowed: {listed}.")
        )
    if key in PLAIN:
        r, k1 = PLAIN[key]
        ahead = x < r
        mean = np.where(ahead, k1 / 6 * (x**3 - 3 * r * x**2 + r**2 * (3 - r) * x),
                        k1 / 6 * r**3 * (1 - x))
        slope = np.where(ahead, k1 / 6 * (3 * x**2 - 6 * r * x + r**2 * (3 - r)),
                         -k1 / 6 * r**3)
        return lift * mean, lift * slope
    r, k1, k21 = REFLEXED[key]
    rest = k21 * (1 - r) ** 3 * x + r**3 * x
    mean = k1 / 6 * np.where(x < r, (x - r) ** 3 - rest + r**3, k21 * (x - r) ** 3 - rest + r**3)
    flat = k21 * (1 - r) ** 3 + r**3
    slope = k1 / 6 * np.where(x < r, 3 * (x - r) ** 2 - flat, 3 * k21 * (x - r) ** 2 - flat)
    return lift * mean, lift * slope
