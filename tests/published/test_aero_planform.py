"""Planform geometry held against published closed forms; sources in data/aero_*.toml."""

from __future__ import annotations

import math
import tomllib
from pathlib import Path

import pytest

from buildgen.aero.planform import Panel, area_mm2, mean_aerodynamic_chord, wetted_area_mm2

DATA = tomllib.loads(
    (Path(__file__).parent / "data" / "aero_lifting_surface.toml").read_text(encoding="utf-8")
)


def test_mean_chord_of_a_trapezoid() -> None:
    """ls-mac: closed form of any aerodynamics text; root 250 mm, taper 0.6, half span 600 mm."""
    check = next(c for c in DATA["check"] if c["id"] == "ls-mac")
    given = {k: v["value"] for k, v in check["inputs"].items()}
    expected = {e["quantity"]: e for e in check["expected"]}
    root, span = 1000 * given["root_chord"], 1000 * given["semispan"]
    sweep = span * math.tan(math.radians(given["le_sweep"]))
    panels = [Panel(span, root, given["taper"] * root, sweep)]
    mean = mean_aerodynamic_chord(panels)
    found = {
        "half_area": area_mm2(panels) * 1e-6,
        "mac": mean.length_mm / 1000,
        "y_mac": mean.y_mm / 1000,
        "x_le_mac": mean.le_x_mm / 1000,
    }
    for quantity, value in found.items():
        e = expected[quantity]
        assert value == pytest.approx(e["value"], abs=e["tol"]), quantity


def test_wetted_area_agrees_with_the_girth_of_a_section() -> None:
    """NACA 0012, girth without its open tail's face: 2.0418 - 0.0025 chords (NACA Report 460)."""
    assert wetted_area_mm2([Panel(1.0, 1.0, 1.0)], 0.12) == pytest.approx(2.0393, rel=0.002)
