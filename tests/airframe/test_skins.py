"""Sheeting, capstrips, capped spars and their webs: they fit, and lie flat with the right size."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from buildgen import Build, DesignError, build, load
from buildgen.airframe.skin import unrolled
from buildgen.checks.fit import fit_of
from buildgen.part import Plate
from buildgen.solid import mesh
from tests.airframe.test_variants import LEAST, PLAIN

STRIP = '[wing.leading_edge]\nkind = "strip"\nsize_mm = 6\n'
SHEETED = STRIP + "[wing.sheeting]\ncapstrip_mm = 8\n"
CLOSED_TAIL = '[wing.trailing_edge]\nkind = "sheet"\nwidth_mm = 28\n'
CAPPED = 'kind = "capped"\nmaterial = "spruce"\nwidth_mm = 6\nheight_mm = 3\nweb_mm = [2, 1.5]\n'
BLOCKS = '[wing.trailing_edge]\nkind = "blocks"\nwidth_mm = 22\n'
CASES = {
    "gussets, raised and swept": {
        "wing": "[wing.gusset]\n[wing.trailing_edge]\nwidth_mm = 25\n",
        "panel": "tip_chord_mm = 150\ndihedral_deg = 4\ntwist_deg = -2\nsweep_mm = 50\n"
                 "[[wing.panel]]\nspan_mm = 150\ntip_chord_mm = 130\nsweep_mm = 30\n"
                 "dihedral_deg = 9"},
    "gussets, level": {
        "wing": "[wing.gusset]\n[wing.trailing_edge]\nwidth_mm = 25\n"},
    "blocks at the tail, capstrips": {
        "wing": SHEETED + BLOCKS,
        "panel": "tip_chord_mm = 130\ndihedral_deg = 4\ntwist_deg = -2\nsweep_mm = 50\n"
                 "[[wing.panel]]\nspan_mm = 150\ntip_chord_mm = 110\nsweep_mm = 30"},
    "tube spar": {"wing": SHEETED},
    "box spar, swept, washed out": {
        "wing": SHEETED + CLOSED_TAIL, "spar": CAPPED + 'web = "both"\nat_tip_chord = 0.33',
        "panel": "tip_chord_mm = 130\ndihedral_deg = 6\ntwist_deg = -3\nsweep_mm = 60"},
    "box spar, swept, level": {
        "spar": CAPPED + 'web = "both"', "panel": "tip_chord_mm = 155\nsweep_mm = 90"},
    "tube straightened in the middle": {
        "spar": "outer_mm = 10\ninner_mm = 8\nat_chord = 0.28\n[[wing.spar]]\nouter_mm = 5\n"
                "inner_mm = 3\nat_chord = 0.6",
        "panel": "tip_chord_mm = 145\nsweep_mm = 27\n[[wing.panel]]\nspan_mm = 180\n"
                 "tip_chord_mm = 130\nsweep_mm = 18\ndihedral_deg = 5"},
    "polyhedral, webs aft": {
        "wing": SHEETED, "spar": CAPPED,
        "panel": "[[wing.panel]]\nspan_mm = 200\ntip_chord_mm = 120\ndihedral_deg = 7\n"
                 "sweep_mm = 30"},
    "webs alone": {"spar": CAPPED},
    "half ribs, sheet tips": {
        "wing": '[wing.ribs]\nhalf = true\n[wing.tip]\nkind = "sheet"\n', "spar": CAPPED},
    "half ribs under sheeting, block tips": {
        "wing": SHEETED + '[wing.ribs]\nhalf = true\n[wing.tip]\nkind = "block"\n',
        "spar": CAPPED, "panel": "tip_chord_mm = 150\nsweep_mm = 12\ndihedral_deg = 3"},
    "braced at the root": {
        "spar": CAPPED + "brace_mm = 45", "panel": "tip_chord_mm = 190\ndihedral_deg = 6"},
    "braced at a break": {
        "wing": SHEETED, "spar": CAPPED + "brace_mm = 45",
        "panel": "[[wing.panel]]\nspan_mm = 200\ntip_chord_mm = 120\ndihedral_deg = 7\n"
                 "sweep_mm = 21"},
}


def kit_of(folder: Path, **over: str) -> Build:
    path = folder / "tern.toml"
    path.write_text(LEAST.format(**{**PLAIN, **over}))
    return build(load(path))


@pytest.mark.parametrize("case", CASES)
def test_it_fits(case: str, tmp_path: Path) -> None:
    kit = kit_of(tmp_path, **CASES[case])
    assert [f.says for f in fit_of(kit).findings] == []


@pytest.fixture(scope="module")
def closed(tmp_path_factory: pytest.TempPathFactory) -> Build:
    return kit_of(tmp_path_factory.mktemp("closed"), wing=SHEETED + CLOSED_TAIL, spar=CAPPED,
                  panel="tip_chord_mm = 130\ntwist_deg = -2\nsweep_mm = 40")


def test_a_nose_sheet_laid_flat_has_the_size_of_the_one_in_place(closed: Build) -> None:
    sheets = [p for p in closed.parts if p.id.startswith(("NT", "NB"))]
    assert len(sheets) == 12
    for part in sheets:
        assert isinstance(part.form, Plate)
        flat = part.form.outline.area * part.form.thickness_mm
        # The edges stand upright, not square to the sheet: under one per cent of it.
        assert mesh(part.form.shape).volume() == pytest.approx(flat, rel=0.01)


def test_sheets_are_cut_with_the_grain_along_the_span(closed: Build) -> None:
    for part in closed.parts:
        if part.id.startswith(("NT", "ET")):
            assert isinstance(part.form, Plate)
            assert part.form.grain_deg == 0.0
            x0, y0, x1, y1 = part.form.outline.bounds
            assert x1 - x0 > y1 - y0 or part.id[3] == "b"


def test_ribs_are_inset_by_the_sheet(closed: Build) -> None:
    rib = closed.by_id["R2R"]
    assert isinstance(rib.form, Plate)
    bare = kit_rib_depth(rib.form)
    panel = closed.frame.wing.panels[0]
    whole = panel.outline(rib.pose)
    depth = whole.bounds[3] - whole.bounds[1]
    assert depth - bare == pytest.approx(2 * 1.5, abs=0.06)


def kit_rib_depth(form: Plate) -> float:
    _, low, _, high = form.outline.bounds
    return float(high - low)


def test_webs_step_down_and_their_grain_stands_upright(closed: Build) -> None:
    webs = [p for p in closed.parts if p.id.startswith("W1") and p.id.endswith("R")]
    thick = [p.form.thickness_mm for p in webs if isinstance(p.form, Plate)]
    assert thick == sorted(thick, reverse=True)
    assert set(thick) == {2.0, 1.5}
    assert all(isinstance(p.form, Plate) and p.form.grain_deg == 90.0 for p in webs)
    assert all(abs(p.pose.rotation[2, 1]) > 0.99 for p in webs)


def test_a_cone_unrolls_to_a_sector() -> None:
    # A frustum's quarter: slant length and both arc lengths are known in closed form.
    angles = np.linspace(0, np.pi / 2, 400)
    near, far = (np.column_stack([r * np.cos(angles), r * np.sin(angles), np.full(400, z)])
                 for r, z in ((40.0, 0.0), (25.0, 30.0)))
    a, b = unrolled(near, far)
    for row, radius in ((a, 40.0), (b, 25.0)):
        length = np.linalg.norm(np.diff(row, axis=0), axis=1).sum()
        assert length == pytest.approx(radius * np.pi / 2, rel=1e-5)
    slant = np.hypot(15, 30)
    assert np.linalg.norm(b - a, axis=1) == pytest.approx(slant, rel=1e-9)
    turned = np.arccos(np.dot(b[0] - a[0], b[-1] - a[-1]) / slant**2)
    assert turned == pytest.approx(np.pi / 2 * 15 / slant, rel=1e-4)


def test_half_ribs_need_a_strip_to_end_at(tmp_path: Path) -> None:
    with pytest.raises(DesignError, match=r"wing\.ribs\.half"):
        kit_of(tmp_path, wing="[wing.ribs]\nhalf = true")


def test_a_closed_nose_needs_a_strip(tmp_path: Path) -> None:
    with pytest.raises(DesignError, match="strip"):
        kit_of(tmp_path, wing="[wing.sheeting]\nthickness_mm = 1.5")


def test_a_flat_brace_does_not_follow_a_kink_in_plan(tmp_path: Path) -> None:
    with pytest.raises(DesignError, match="brace"):
        kit_of(tmp_path, spar=CAPPED + "brace_mm = 45",
               panel="tip_chord_mm = 190\ndihedral_deg = 6\nsweep_mm = 60")


def test_a_brace_is_bent_by_the_dihedral(tmp_path: Path) -> None:
    kit = kit_of(tmp_path, spar=CAPPED + "brace_mm = 45",
                 panel="tip_chord_mm = 190\ndihedral_deg = 6")
    brace = kit.by_id["DB1a"]
    assert isinstance(brace.form, Plate)
    ring = np.asarray(brace.form.outline.exterior.coords)[:-1]
    low, high = ring[ring[:, 1].argsort()[:1]], ring[np.abs(ring[:, 0]).argmax()]
    assert abs(low[0, 0]) < 0.1
    assert abs(high[0]) == pytest.approx(45, abs=0.5)
    # Six degrees on either side: both arms rise from the middle.
    rise = ring[(ring[:, 1] < 0) & (np.abs(ring[:, 0]) > 40)][:, 1] - low[0, 1]
    assert rise == pytest.approx(45 * np.tan(np.radians(6)), abs=0.2)


def test_sheeting_wider_than_the_stock_is_spliced(tmp_path: Path) -> None:
    wide = STRIP + "[wing.sheeting]\nto_chord = 0.6\n"
    kit = kit_of(tmp_path, wing=wide, panel="tip_chord_mm = 150\ntwist_deg = -2\nsweep_mm = 30")
    strips = [p for p in kit.parts if p.id.startswith("NT1a-") and p.id.endswith("R")]
    assert len(strips) == 2
    for part in strips:
        assert isinstance(part.form, Plate)
        x0, y0, x1, y1 = part.form.outline.bounds
        assert min(x1 - x0, y1 - y0) < 100
    assert ("NT1a-2R", "NT1a-1R") in {(j.inner, j.outer) for j in kit.joints}
    assert [f.says for f in fit_of(kit).findings] == []
