"""Elliptical wings: as many straight panels as the tolerance asks."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from buildgen import build, load
from buildgen.aero.planform import area_mm2
from buildgen.design.schema.elliptic import Elliptic
from buildgen.problems import DesignError

TERN = """
name = "tern"
[wing]
section = "naca2412"
[wing.elliptic]
half_span_mm = 500
root_chord_mm = 220
{more}
[[wing.spar]]
outer_mm = 8
inner_mm = 6
to_mm = 440
"""
SHAPE = {"half_span_mm": 500.0, "root_chord_mm": 220.0, "tip_chord_mm": 90.0}


def test_finer_tolerances_ask_for_more_panels():
    counts = [len(Elliptic(**SHAPE, tolerance_mm=t).panels()) for t in (4.0, 1.0, 0.3)]
    assert counts == sorted(set(counts))


@pytest.mark.parametrize("tolerance", [3.0, 1.0, 0.3])
def test_edges_stay_within_the_tolerance(tolerance):
    """The trailing edge against the ellipse itself, 0.75 of the chord behind the straight line."""
    shape = Elliptic(**SHAPE, tolerance_mm=tolerance)
    axis = 500.0 / math.sqrt(1 - (90 / 220) ** 2)
    y, c = 0.0, 220.0
    for panel in shape.panels():
        for t in (0.25, 0.5, 0.75):
            at = y + t * panel["span_mm"]
            chord = c + t * (panel["tip_chord_mm"] - c)
            off = 0.75 * (220 * math.sqrt(1 - (at / axis) ** 2) - chord)
            lean = math.cos(math.atan2(0.75 * (c - panel["tip_chord_mm"]), panel["span_mm"]))
            assert -1e-9 <= off * lean <= tolerance
        y, c = y + panel["span_mm"], panel["tip_chord_mm"]
    assert (y, c) == pytest.approx((500.0, 90.0))


def test_area_agrees_with_the_closed_formula(tmp_path: Path):
    """Of a quarter ellipse cut off at the tip: a c0/2 (t + sin t cos t), sin t = span / a."""
    path = tmp_path / "tern.toml"
    path.write_text(TERN.format(more="tip_chord_mm = 90\ntolerance_mm = 1.5\ntwist_deg = -1"))
    kit = build(load(path))
    t = math.acos(90 / 220)
    axis = 500 / math.sin(t)
    true = axis * 220 / 2 * (t + math.sin(t) * math.cos(t))
    assert area_mm2(kit.frame.wing.plan) == pytest.approx(true, rel=0.006)
    assert area_mm2(kit.frame.wing.plan) < true
    assert [f.says for f in kit.desk.fit.findings] == []


@pytest.mark.parametrize(("more", "key"), [
    ("tip_chord_mm = 300", "wing.elliptic"),
    ("tip_chord_mm = 80\ntip_cord = 3", "wing.elliptic.tip_cord"),
    ("tip_chord_mm = 80\n[[wing.panel]]\nspan_mm = 300", "wing"),
])
def test_faults_name_their_key(tmp_path: Path, more, key):
    path = tmp_path / "tern.toml"
    path.write_text(TERN.format(more=more))
    with pytest.raises(DesignError) as caught:
        build(load(path))
    assert key in [p.path for p in caught.value.problems]
