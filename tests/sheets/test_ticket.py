"""The cutting ticket's figures."""

from __future__ import annotations

import csv
import io
import math

import pytest

from buildgen.design.schema import Laser, Speed
from buildgen.sheets.ticket import ticket, tickets_csv, tickets_text
from tests.sheets.conftest import small_kit, small_sheets


def test_lengths_are_those_of_the_paths() -> None:
    """A rectangle a x b with kerf k: 2 (a + b) + 4 k; a hole of radius r: 2 pi (r - k/2)."""
    ply = next(s for s in small_sheets() if s.material == "birch-ply")
    found = ticket(ply, small_kit(), Laser())
    k = ply.kerf_mm
    outside = 2 * (90 + 80) + 2 * (30 + 30) + 2 * (24 + 50) + 3 * 4 * k
    inside = 2 * (74 + 64) - 4 * k + 2 * math.pi * (5 - k / 2)
    assert found.outside_mm == pytest.approx(outside, abs=0.01)
    assert found.inside_mm == pytest.approx(inside, abs=0.01)
    assert found.mark_mm > 20
    assert found.outside == ()
    assert found.guests == ()


def test_bridges_are_not_cut() -> None:
    ply = next(s for s in small_sheets() if s.material == "birch-ply")
    whole = ticket(ply, small_kit(), Laser()).outside_mm
    held = ticket(ply, small_kit(), Laser(bridges=2, bridge_mm=0.6)).outside_mm
    assert whole - held == pytest.approx(3 * 2 * (0.6 + ply.kerf_mm), abs=1e-6)


def test_masses_add_up_to_the_sheet() -> None:
    """160 kg/m3 x 3 mm: 0.48 g for each 1000 mm2."""
    for sheet in small_sheets():
        t = ticket(sheet, small_kit(), Laser())
        whole = sheet.width_mm * sheet.height_mm * 0.48e-3
        assert t.parts_g + t.left_g + t.waste_g == pytest.approx(whole, rel=1e-9)
        assert t.parts_g == pytest.approx(sheet.parts_area_mm2 * 0.48e-3)
        assert t.waste_g > 0


def test_time_only_from_stated_speeds() -> None:
    balsa, ply = small_sheets()
    speeds = (Speed(material="balsa", thickness_mm=3.0, cut_mm_s=20.0, mark_mm_s=100.0),)
    laser = Laser(speed=speeds)
    t = ticket(balsa, small_kit(), laser)
    assert t.minutes == pytest.approx(
        ((t.inside_mm + t.outside_mm) / 20 + t.mark_mm / 100) / 60)
    other = ticket(ply, small_kit(), laser)
    assert other.minutes is None
    rows = list(csv.DictReader(io.StringIO(tickets_csv([t, other]))))
    assert rows[0]["minutes_without_moves"] == f"{t.minutes:.1f}"
    assert rows[1]["minutes_without_moves"] == ""
    text = tickets_text([t, other])
    assert "state your machine's speeds" in text
    assert len({len(r) for r in text.splitlines()[:3]}) == 1
