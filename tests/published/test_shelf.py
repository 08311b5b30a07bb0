"""The shelf against published tables; each value's source stands in the data file or beside it."""

from __future__ import annotations

import csv
import math
from pathlib import Path

import pytest

from buildgen.shelf import clearance_hole_mm, load_shelf, screw_length_mm

ROWS = [
    row
    for row in csv.DictReader(
        line
        for line in (Path(__file__).parent / "data" / "fasteners.csv").read_text().splitlines()
        if not line.startswith("#")
    )
]


def rows(prefix: str, quantity: str) -> list[tuple[str, float]]:
    """(size, value) of one quantity of one standard."""
    found = [(r["id"].split("-")[1].upper(), float(r["value_mm"])) for r in ROWS
             if r["id"].startswith(prefix) and r["quantity"] == quantity]
    assert found
    return found


@pytest.mark.parametrize(("fit", "quantity"), [("fine", "fine_H12"), ("medium", "medium_H13"),
                                               ("coarse", "coarse_H14")])
def test_clearance_holes_are_iso_273(fit: str, quantity: str) -> None:
    for size, value in rows("iso273", quantity):
        assert clearance_hole_mm(size, fit) == value, size


@pytest.mark.parametrize(
    ("prefix", "quantity", "field"),
    [("tap", "pitch", "pitch_mm"), ("tap", "tap_drill", "tap_drill_mm"),
     ("iso4762", "head_diameter_max", "cap_head_mm.0"),
     ("iso4762", "head_height_max", "cap_head_mm.1"),
     ("iso4032", "width_across_flats", "nut_mm.0"), ("iso4032", "height_max", "nut_mm.1")],
)
def test_screws_and_nuts_are_the_standards(prefix: str, quantity: str, field: str) -> None:
    shelf = load_shelf()
    name, _, place = field.partition(".")
    for size, value in rows(prefix, quantity):
        found = getattr(shelf.screw(size), name)
        assert (found[int(place)] if place else found) == value, size


def test_screw_lengths_step_up_to_the_next_standard_one() -> None:
    """ISO 888 lengths 4, 5, 6, 8, 10, 12, 16, 20 mm: from memory."""
    assert [screw_length_mm(x, "M3") for x in (5.5, 6.0, 6.1, 9, 13)] == [6, 6, 8, 10, 16]


@pytest.mark.parametrize(
    ("name", "gravity"),
    [("basswood", 0.37), ("spruce", 0.40), ("hard-maple", 0.63)],
)
def test_wood_density_is_the_handbook_gravity_with_its_water(name: str, gravity: float) -> None:
    """Specific gravity: USDA Forest Products Laboratory, Wood Handbook (FPL-GTR-190, 2010), Table
    5-3b, second-hand. Density at 12 % moisture is 1.12 times that, same handbook, chapter 4."""
    assert load_shelf().material(name).density_kg_m3 == pytest.approx(1120 * gravity, abs=3)


@pytest.mark.parametrize(
    ("name", "rupture", "modulus"), [("spruce", 70.3, 10820), ("basswood", 60.0, 10070),
                                     ("hard-maple", 108.9, 12620)],
)
def test_wood_strength_is_the_handbooks(name: str, rupture: float, modulus: float) -> None:
    """Wood Handbook (FPL-GTR-190, 2010), Tables 5-3a and 5-3b, 12 % moisture, second-hand."""
    found = load_shelf().material(name)
    assert found.bending_mpa == pytest.approx(rupture, abs=0.5)
    assert found.modulus_mpa == pytest.approx(modulus, rel=0.01)


@pytest.mark.parametrize(
    ("inches", "pcf", "mass_g"),
    [(1 / 16, 6, 11), (1 / 16, 8, 14), (1 / 16, 10, 18), (1 / 16, 12, 21), (1 / 8, 6, 21),
     (1 / 8, 8, 28)],
)
def test_a_balsa_sheet_weighs_what_the_table_says(inches: float, pcf: float, mass_g: float) -> None:
    """A 3 x 36 inch sheet: density and weight table of the Argentine control-line pilots'
    association (page read), to half a gram."""
    from shapely.geometry import box

    from buildgen.part import Part, Plate
    from buildgen.solid import Pose

    plate = Plate(box(0, 0, 36 * 25.4, 3 * 25.4), inches * 25.4)
    part = Part("X", "sheet", "balsa", plate, Pose(), "s", "k", pcf * 16.01846)
    assert part.mass_g == pytest.approx(mass_g, abs=0.6)


@pytest.mark.parametrize("gauge", [10, 12, 14, 16, 18, 20, 22, 24, 26])
def test_wire_gauges_follow_their_law(gauge: int) -> None:
    """ASTM B258: d = 0.127 x 92^((36 - n)/39) mm; copper 17.241 nohm m (IACS)."""
    wire = load_shelf().wire(f"awg-{gauge}")
    diameter = 0.127 * 92 ** ((36 - gauge) / 39)
    assert wire.conductor_mm == pytest.approx(diameter, rel=2e-3)
    area = math.pi / 4 * diameter**2
    assert wire.resistance_mohm_m == pytest.approx(17.241 / area, rel=5e-3)


@pytest.mark.parametrize(("name", "density", "tolerance"), [
    ("pla", 1240, 30), ("petg", 1270, 40), ("aluminium-tube", 2700, 10), ("music-wire", 7850, 20),
    ("carbon-tube", 1500, 50)])
def test_other_densities(name: str, density: float, tolerance: float) -> None:
    """Filament data sheets (second-hand); Aluminum Association typical values (second-hand);
    spring-design handbooks (from memory); a composite tube maker's specification (read)."""
    assert load_shelf().material(name).density_kg_m3 == pytest.approx(density, abs=tolerance)


def test_every_entry_names_its_source() -> None:
    shelf = load_shelf()
    for table in ("material", "screw", "bolts", "servo", "wheel", "connector", "wire", "insert"):
        for name in shelf.names(table):
            entry = getattr(shelf, table)(name)
            assert entry.source or entry.seen == "common practice, no source", (table, name)
            assert entry.seen, (table, name)
