"""Which stock, which kerf, how many kits, and the same bytes every time."""

from __future__ import annotations

import os
import subprocess
import sys
from collections import Counter
from dataclasses import replace

import numpy as np
import pytest
import shapely
from shapely.geometry import Polygon, box

from buildgen.design.schema import Definition, Laser, Offcut, Stock
from buildgen.design.schema import Sheet as Rack
from buildgen.part import Kit, Mark
from buildgen.problems import DesignError
from buildgen.sheets.drawing import draw
from buildgen.sheets.dxf import sheet_dxf
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.sheets.letters import write
from buildgen.sheets.seats import may_turn_over
from buildgen.sheets.stock import usual_kerf
from buildgen.sheets.ticket import ticket
from buildgen.shelf import load_shelf
from tests.sheets.conftest import plate, small_definition, small_kit, small_sheets


def with_(laser: Laser | None = None, *racks: Rack, offcut: tuple[Offcut, ...] = ()) -> Definition:
    return small_definition().model_copy(
        update={"laser": laser or Laser(), "stock": Stock(sheet=racks, offcut=offcut)})


def laid(definition: Definition, kit: Kit | None = None, kits: int = 1) -> tuple[Sheet, ...]:
    return lay_out(kit or small_kit(), definition, load_shelf(), kits=kits)


def test_the_kerf_of_the_sheet_rules_then_the_machine_then_the_shelf() -> None:
    measured = Rack(material="balsa", thickness_mm=3.0, kerf_mm=0.11)
    balsa, ply = laid(with_(Laser(kerf_mm=0.2), measured))
    assert (balsa.kerf_mm, ply.kerf_mm) == (0.11, 0.2)
    balsa, ply = laid(with_())
    shelf = load_shelf()
    assert balsa.kerf_mm == shelf.material("balsa").kerf_mm
    assert ply.kerf_mm == shelf.material("birch-ply").kerf_mm


def test_usual_kerf_grows_with_thickness_as_laser_services_tell() -> None:
    """Plywood 0.20 mm at 3 mm, 0.25 at 6 (laserengravingservice.co.uk, artwork guide, read)."""
    ply = replace(load_shelf().material("birch-ply"), kerf_mm=0.20)
    assert usual_kerf(ply, 3.0) == pytest.approx(0.20, abs=0.06)
    assert usual_kerf(ply, 6.0) == pytest.approx(0.25, abs=0.08)
    acrylic = replace(ply, kerf_mm=0.15)
    assert usual_kerf(acrylic, 6.0) == pytest.approx(0.18, abs=0.08)
    assert usual_kerf(ply, 1.5) == 0.20


def test_an_offcut_is_used_before_a_whole_sheet() -> None:
    corner = ((0.0, 0.0), (220.0, 0.0), (220.0, 60.0), (120.0, 110.0), (0.0, 110.0))
    offcut = Offcut(material="birch-ply", thickness_mm=3.0, outline_mm=corner)
    definition = with_(offcut=(offcut,))
    ply = [s for s in laid(definition) if s.material == "birch-ply"]
    assert len(ply) == 1
    assert ply[0].offcut is not None
    assert ply[0].faults(1.5, 5.0) == []
    assert sheet_dxf(ply[0], small_kit(), Laser()).count("SHEET") > 1


def test_an_offcut_that_crosses_itself_is_refused() -> None:
    with pytest.raises(ValueError, match="without crossing itself"):
        Offcut(material="balsa", thickness_mm=3.0,
               outline_mm=((0.0, 0.0), (10.0, 10.0), (10.0, 0.0), (0.0, 10.0)))


def test_several_kits_lie_together_each_part_with_its_number() -> None:
    sheets = laid(with_(), kits=3)
    found = Counter(p.label for s in sheets for p in s.placements)
    assert found == Counter(f"{p.id}/{n}" for p in small_kit().parts for n in (1, 2, 3))
    assert all(s.faults(1.5, 5.0) == [] for s in sheets)
    assert len(sheets) < 3 * len(small_sheets())


def test_parts_lie_in_openings_only_where_that_saves_a_sheet() -> None:
    frame = box(0, 0, 280, 280).difference(box(15, 15, 265, 265))
    ply = {"grain": None, "material": "birch-ply"}
    two = tuple(plate(f"F{n}", frame, **ply) for n in (1, 2))  # type: ignore[arg-type]
    core = plate("C", box(0, 0, 200, 200), **ply)  # type: ignore[arg-type]
    kit = replace(small_kit(), parts=(*two, core))
    sheets = laid(with_(Laser(effort="quick")), kit)
    assert len(sheets) == 1
    sheet = sheets[0]
    assert sheet.faults(1.5, 5.0) == []
    order = [p.part for p in sheet.placements]
    host = next(i for i, s in enumerate(sheet.placed_shapes())
                if Polygon(s.exterior).contains(sheet.placed_shapes()[order.index("C")])
                and order[i] != "C")
    assert order.index("C") < host, "the opening would drop before its guest is cut"
    text = sheet_dxf(sheet, kit, Laser())
    assert text.count("\nCUT_OUTSIDE\n") == 2 + 1  # two frames and the layer itself
    apart = replace(small_kit(), parts=(two[0], core))
    first, second = laid(with_(Laser(effort="quick")), apart)[0].placed_shapes()
    assert not Polygon(first.exterior).intersects(Polygon(second.exterior))


def test_faults_name_every_part_that_is_too_large() -> None:
    kit = small_kit()
    big = (plate("BIG1", box(0, 0, 1500, 50)), plate("BIG2", box(0, 0, 500, 200)))
    with pytest.raises(DesignError) as error:
        laid(with_(), replace(kit, parts=(*kit.parts, *big)))
    told = "\n".join(p.says for p in error.value.problems)
    assert "BIG1" in told
    assert "BIG2" in told
    assert all(p.path == "wing.ribs" for p in error.value.problems)


def test_relief_changes_the_part_that_is_cut() -> None:
    plain = {p.id: p for s in small_sheets() for p in s.parts}
    relief = {p.id: p for s in laid(with_(Laser(relief="dog-bone"))) for p in s.parts}
    assert relief["F1"].mass_g < plain["F1"].mass_g
    assert relief["R2"].mass_g < plain["R2"].mass_g
    assert relief["F3"].mass_g == plain["F3"].mass_g


SCRIPT = """
import hashlib
from buildgen.sheets.drawing import draw
from buildgen.sheets.dxf import sheet_dxf
from buildgen.sheets.svg import sheet_svg
from buildgen.design.schema import Laser
from tests.sheets.conftest import small_kit, small_sheets
kit, laser = small_kit(), Laser(bridges=1)
text = "".join(sheet_dxf(s, kit, laser) + sheet_svg(s, kit, laser) for s in small_sheets())
print(hashlib.sha256(text.encode()).hexdigest())
"""


def test_bytes_are_the_same_in_other_processes_and_under_other_hash_seeds() -> None:
    found = {
        subprocess.run([sys.executable, "-c", SCRIPT], check=True, capture_output=True, text=True,
                       env={**os.environ, "PYTHONHASHSEED": seed}).stdout
        for seed in ("1", "77")
    }
    assert len(found) == 1
    assert len(found.pop().strip()) == 64


@pytest.mark.parametrize("version", ["R12", "R2000", "R2010"])
def test_arcs_and_bridges_pass_the_audit_in_every_version(version: str) -> None:
    import io

    import ezdxf

    for laser in (Laser(dxf=version, arc_mm=0.01), Laser(dxf=version, bridges=3)):  # type: ignore[arg-type]
        for sheet in small_sheets():
            document = ezdxf.read(io.StringIO(sheet_dxf(sheet, small_kit(), laser)))
            assert not document.audit().errors
            outside = document.modelspace().query('*[layer=="CUT_OUTSIDE"]')
            each = laser.bridges or 1
            assert len(outside) == each * len(sheet.parts)


def test_lines_of_cuts_nowhere_run_along_each_other() -> None:
    """Also not in part: the shared length of any two cuts is nothing."""
    for sheet in small_sheets():
        rings = []
        for path, at in zip(sheet.paths, sheet.placements, strict=True):
            for ring in (path.outside, *path.inside):
                rings.append(at.of(Polygon(ring)).exterior)
        for i, one in enumerate(rings):
            assert one.is_simple
            for two in rings[i + 1:]:
                assert shapely.intersection(one, two).length == 0


@pytest.mark.parametrize(
    ("effort", "wide", "expected"),
    [
        ("quick", 100.0, ["quick"]),
        ("normal", 100.0, ["quick"]),  # all on one sheet: nothing to save
        ("high", 100.0, ["high"]),
        ("normal", 700.0, ["quick"]),  # two sheets, the second well used
        ("normal", 492.0, ["quick", "normal"]),  # a second sheet hardly used
    ],
)
def test_a_longer_search_only_where_it_may_save_a_sheet(
    effort: str, wide: float, expected: list[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    import buildgen.sheets.layout as layout

    seen: list[str] = []
    true_nest = layout.nest

    def watched(*args, **given):  # type: ignore[no-untyped-def]
        seen.append(given["effort"])
        return true_nest(*args, **{**given, "effort": "quick"})

    monkeypatch.setattr(layout, "nest", watched)
    strips = tuple(plate(f"S{n}", box(0, 0, wide, 44.0)) for n in range(4))
    if wide == 492.0:
        strips = (*strips, plate("T", box(0, 0, 30, 3)))
    laid(with_(Laser(effort=effort)), replace(small_kit(), parts=strips))  # type: ignore[arg-type]
    assert seen == expected


def wedges() -> Kit:
    """Right-angled wedges, grain along the long leg: two make a rectangle, if one lies over."""
    wedge = Polygon([(0, 0), (140, 0), (0, 70)])
    kit = small_kit()
    return replace(kit, parts=tuple(plate(f"W{n}", wedge) for n in range(1, 9)))


def test_plates_turn_over_only_where_asked_and_their_ids_read_right() -> None:
    flat, = laid(with_(), wedges())
    assert not any(p.flipped for p in flat.placements)
    sheet, = laid(with_(Laser(turn_over=True, effort="normal")), wedges())
    assert any(p.flipped for p in sheet.placements)
    assert sheet.faults(1.5, 5.0) == []
    kit = wedges()
    for at, piece in zip(sheet.placements, draw(sheet, kit, Laser()).pieces, strict=True):
        upright = np.vstack([np.array(s) for s in write(at.part, 5.0)])
        here = np.vstack(piece.strokes)
        turn, *_ = np.linalg.lstsq(np.column_stack([upright, np.ones(len(upright))]), here)
        assert np.linalg.det(turn[:2]) == pytest.approx(1.0, abs=0.01), at
    told = ticket(sheet, kit, Laser())
    assert set(told.turned) == {p.part for p in sheet.placements if p.flipped}


def test_a_plate_with_a_mark_of_one_face_stays_on_it() -> None:
    part = plate("W1", box(0, 0, 30, 20))
    assert may_turn_over(part)
    marked = replace(part.form, marks=(Mark(line=((5.0, 5.0), (20.0, 5.0))),))
    assert not may_turn_over(replace(part, form=marked))
    assert not may_turn_over(plate("W1", box(0, 0, 30, 20), grain=30.0))
