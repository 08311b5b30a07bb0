"""Figures as people read them."""

from __future__ import annotations

import re

MM_PER_INCH = 25.4


def plain(value: float, digits: int = 1) -> str:
    """A number with no trailing zeros: ``3``, ``2.5``; never minus zero."""
    shown = f"{round(value, digits) + 0.0:.{digits}f}"
    return shown.rstrip("0").rstrip(".") if "." in shown else shown


def fixed(value: float, digits: int = 1) -> str:
    """A number with all its digits, for columns; never minus zero."""
    return f"{round(value, digits) + 0.0:.{digits}f}"


def grams(value: float) -> str:
    """Mass in g: one decimal from 10 g on, two below."""
    return fixed(value, 1 if abs(value) >= 10 else 2)


def with_inches(value_mm: float) -> str:
    """``3 mm (0.118 in)``, for what is bought over the counter."""
    inches = value_mm / MM_PER_INCH
    return f"{plain(value_mm, 2)} mm ({plain(inches, 3 if inches < 1 else 1)} in)"


def size_with_inches(*values_mm: float) -> str:
    """``100 x 1000 mm (3.9 x 39.4 in)``."""
    metric = " x ".join(plain(v, 1) for v in values_mm)
    inches = " x ".join(plain(v / MM_PER_INCH, 1) for v in values_mm)
    return f"{metric} mm ({inches} in)"


def section_with_inches(section: str) -> str:
    """``8 x 6 mm tube (0.315 x 0.236 in)`` of ``8 x 6 tube``."""
    found = list(re.finditer(r"[0-9]+(?:\.[0-9]+)?", section))
    if not found:
        return section
    end = found[-1].end()
    inches = " x ".join(plain(float(f.group()) / MM_PER_INCH, 3) for f in found)
    return f"{section[:end]} mm{section[end:]} ({inches} in)"


def listed(ids: list[str], most: int = 12) -> str:
    """Ids in words, the tail counted where there are many."""
    if len(ids) <= most:
        return ", ".join(ids)
    return ", ".join(ids[:most]) + f" +{len(ids) - most}"
