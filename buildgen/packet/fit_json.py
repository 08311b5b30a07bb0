"""The dry fit as data: what was intersected and measured, and what does not fit."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from buildgen.checks.fit import Finding, Fit
    from buildgen.checks.fit_joint import Measured
    from buildgen.checks.fit_way import Way

DIGITS = 3
"""A micrometre: finer than any fit, coarser than the last digits of a float."""


def fit_json(fit: Fit | None) -> dict[str, Any] | None:
    """Findings, every joint and every way in; None where no dry fit was made."""
    if fit is None:
        return None
    return {
        "limit_mm3": number(fit.limit_mm3),
        "pairs": fit.pair_count,
        "findings": [_finding(f) for f in fit.findings],
        "joints": [_joint(m) for m in fit.joints],
        "ways": [_way(w) for w in fit.ways],
    }


def number(value: float) -> float:
    """As written; never minus zero."""
    return round(float(value), DIGITS) + 0.0


def _finding(f: Finding) -> dict[str, Any]:
    return {
        "fault": f.fault, "kind": f.kind, "inner": f.inner, "outer": f.outer,
        "value": number(f.value), "limit": number(f.limit), "unit": f.unit,
        "at_mm": [number(v) for v in f.at_mm], "says": f.says,
    }


def _joint(m: Measured) -> dict[str, Any]:
    return {
        "kind": m.joint.kind, "inner": m.joint.inner, "outer": m.joint.outer,
        "band_mm": [number(v) for v in m.joint.gap_mm],
        "gap_mm": None if m.gap_mm is None else [number(v) for v in m.gap_mm],
        "contact_mm2": None if m.contact_mm2 is None else number(m.contact_mm2),
        "fits": not (m.tight or m.loose or m.bare),
    }


def _way(w: Way) -> dict[str, Any]:
    return {
        "part": w.part, "into": list(w.into), "way": [number(v) for v in w.way],
        "free": w.blocked_by is None,
    }
