"""Sections against printed and recomputed ordinates; sources stand in the head of each data file.

Tolerances in percent chord: 0.035 for the cambered two-decimal tables, whose ordinates were faired
by hand before printing; 0.002 for the three-decimal symmetrical tables; 0.008 for the modified
family's table; 0.0001 for the recomputation at natural stations (rounding); elsewhere the largest
deviation that the head of the data file states.
"""

from __future__ import annotations

import csv
import math
import re
from pathlib import Path

import numpy as np
import pytest
from shapely import distance, points
from shapely.geometry import LineString

from buildgen.section import Section, figures, find, from_points, naca, shipped, shipped_folder
from buildgen.section.naca import PLAIN, REFLEXED, mean_line

DATA = Path(__file__).parent / "data" / "sections"
Table = dict[str, "np.ndarray"]  # type: ignore[type-arg]


def data_rows(name: str) -> list[dict[str, str]]:
    lines = (DATA / f"{name}.csv").read_text().splitlines()
    return list(csv.DictReader(r for r in lines if not r.startswith("#")))


def table(name: str) -> Table:
    """(n, 2) ordinates in percent chord by surface."""
    found: dict[str, list[tuple[float, float]]] = {}
    for row in data_rows(name):
        found.setdefault(row["surface"], []).append(
            (float(row["x_percent"]), float(row["y_percent"]))
        )
    return {k: np.array(v) for k, v in found.items()}


def ring(printed: Table) -> np.ndarray:  # type: ignore[type-arg]
    """(n, 2) in unit chord, upper edge round the nose to the lower edge."""
    return np.vstack([printed["upper"][::-1], printed["lower"][1:]]) / 100


def outline(section: Section) -> np.ndarray:  # type: ignore[type-arg]
    return np.vstack([section.upper[::-1], section.lower[1:]])


def off(curve: np.ndarray, at: np.ndarray) -> float:  # type: ignore[type-arg]
    """Largest distance of points from a curve, percent of the chord."""
    return float(100 * distance(LineString(curve), points(at)).max())


def worst(section: Section, printed: Table) -> float:
    """Largest deviation of the surfaces at the printed stations, percent of the chord."""
    found = 0.0
    for name, rows in printed.items():
        side = 100 * (section.upper if name == "upper" else section.lower)
        # the tables put the nose at (0, 0) by convention: no ordinate of a surface
        inside = rows[rows[:, 0] > max(0.0, side[0, 0])]
        assert len(inside) > 14
        found = max(found, float(np.abs(
            np.interp(inside[:, 0], side[:, 0], side[:, 1]) - inside[:, 1]).max()))
    return found


PRINTED = [
    ("naca0006", 0.002), ("naca0009", 0.002), ("naca0012", 0.002), ("naca0012-64", 0.008),
    ("naca2412", 0.035), ("naca4412", 0.035), ("naca4415", 0.035), ("naca23012", 0.035),
    ("naca23015", 0.035),
]


@pytest.mark.parametrize(("name", "tolerance"), PRINTED)
def test_naca_families_lie_on_the_printed_ordinates(name: str, tolerance: float) -> None:
    assert worst(naca(name), table(name)) < tolerance


@pytest.mark.parametrize(
    ("name", "tolerance"), [(n, max(t, 0.004)) for n, t in PRINTED]
)
def test_a_curve_through_a_printed_table_is_the_section(name: str, tolerance: float) -> None:
    """Round the nose, between stations 1.25 % apart, a curve through the printed ordinates keeps
    to the equation as near as the ordinates do (0.004 % of the chord where the print is exact)."""
    drawn = from_points(name, "", ring(table(name)))
    assert off(outline(naca(name)), outline(drawn)) < tolerance


def test_2412_at_its_natural_stations() -> None:
    assert worst(naca("2412"), table("naca2412_program_natural")) < 1e-4


def test_2412_at_standard_stations() -> None:
    """Head of the data file: 0.0008 above, 0.0026 below (at 0.5 %, where the program interpolates).
    """
    printed = table("naca2412_program")
    section = naca("2412")
    lower = {"lower": printed["lower"]}
    assert round(worst(section, lower), 4) <= 0.0026
    assert round(worst(section, {"upper": printed["upper"][1:]}), 4) <= 0.0008


def test_23012_against_a_public_domain_program() -> None:
    """The program rounds the mean line's constants otherwise: 0.0012 percent chord, as stated in
    the head of the data file."""
    rows = data_rows("naca23012_program")
    at = np.array([[float(r[f"{c}_{side}"]) for c in "xy"] for r in rows
                   for side in ("upper", "lower")])
    assert len(at) == 60
    assert off(outline(naca("23012")), at) < 0.0012 + 0.00005  # its rounding
    x = np.array([float(r["x"]) for r in rows])
    mean, _ = mean_line("23012", x)
    assert np.abs(mean - [float(r["mean_y"]) for r in rows]).max() < 1.2e-5 + 5e-7


def test_63_412_splined_from_a_program_lies_on_the_print() -> None:
    """NACA TR 824; head of the data file: within 0.0043, without the suspect row at 94.977."""
    drawn = from_points("63-412", "", ring(table("naca63-412_program")))
    printed = ring(table("naca63-412"))
    printed = printed[np.abs(printed[:, 0] - 0.94977) > 1e-6]
    assert len(printed) >= 49
    assert off(outline(drawn), printed) < 0.0043


@pytest.mark.parametrize("designation", ["0006", "0009", "0012", "0012-64", "0024"])
def test_nose_radius_is_the_law(designation: str) -> None:
    """1.1019 t^2 of the chord, NACA TR 460."""
    thick = int(designation[2:4]) / 100
    radius = figures(naca(designation)).nose_radius
    assert radius == pytest.approx(1.1019 * thick**2, rel=1e-3)


@pytest.mark.parametrize(
    ("designation", "radius"),
    [("2412", 1.58), ("4412", 1.58), ("4415", 2.48), ("23012", 1.58), ("23015", 2.48)],
)
def test_nose_radius_of_cambered_sections(designation: str, radius: float) -> None:
    """Printed radii of the tables, from memory. They belong to the end of the mean line; the
    foremost point lies above it, where the curve is a little tighter: 5.5 % at most."""
    measured = 100 * figures(naca(designation)).nose_radius
    assert 0.945 * radius < measured < 1.005 * radius


@pytest.mark.parametrize(("index", "times"), [(3, 0.25), (6, 1.0), (8, 16 / 9), (9, 3.0)])
def test_nose_index_of_the_modified_family(index: int, times: float) -> None:
    """NACA TR 492, from memory: the radius goes with the square of index / 6; 9 is three times."""
    radius = figures(naca(f"0012-{index}4")).nose_radius
    assert radius == pytest.approx(times * 1.1019 * 0.12**2, rel=1e-3)


@pytest.mark.parametrize(
    ("place", "front", "aft"),
    [
        (2, (0.213337, -2.931954, 5.229170), (0.200, -0.040625, -0.070312)),
        (3, (-0.096082, -0.543310, 0.559395), (0.234, -0.068571, -0.093878)),
        (4, (-0.246867, 0.175384, -0.266917), (0.315, -0.233333, -0.032407)),
        (5, (-0.310275, 0.341700, -0.321820), (0.465, -0.684000, 0.292000)),
        (6, (-0.271180, 0.140200, -0.082137), (0.700, -1.662500, 1.312500)),
    ],
)
def test_modified_thickness_by_the_tabulated_coefficients(
    place: int, front: tuple[float, ...], aft: tuple[float, ...]
) -> None:
    """Coefficients for 20 % thickness and nose index 6 in NASA TM 4741, from memory: the code
    solves for them, so that a wrong slope at the edge would show in all of them."""
    section = naca(f"0020-6{place}")
    x, half = section.upper.T
    ahead = 0.296904 * np.sqrt(x) + sum(a * x**n for n, a in enumerate(front, start=1))
    behind = 0.002 + sum(d * (1 - x) ** n for n, d in enumerate(aft, start=1))
    expected = np.where(x < place / 10, ahead, behind)
    assert np.abs(half - expected).max() < 2e-5


@pytest.mark.parametrize("code", sorted({*PLAIN, *REFLEXED}))
def test_five_digit_lines_have_their_camber_where_the_number_says(code: int) -> None:
    """NACA TR 537: half the second and third digits is the place of the camber in percent."""
    x = np.linspace(0.0, 1.0, 100_001)
    mean, _ = mean_line(f"{code}12", x)
    assert x[mean.argmax()] == pytest.approx(code // 10 % 10 * 0.05, abs=2e-4)


@pytest.mark.parametrize(
    ("code", "within"),
    [(230, 5e-4), (240, 5e-4), (250, 5e-4), (241, 2e-3), (220, 2e-3), (231, 2e-3), (251, 2e-3),
     (221, 5.1e-3), (210, 8.5e-3)],
)
def test_five_digit_lines_have_their_design_lift(code: int, within: float) -> None:
    """NACA TR 537: the constants were chosen for a design lift of 0.3, which thin section theory
    gives as pi A1. The published constants of 210 and 221 miss it by 2.8 and 1.7 %."""
    a1, _ = _fourier(f"{code}12")
    assert math.pi * a1 == pytest.approx(0.3, abs=within)


def test_clark_y_is_the_printed_table_turned() -> None:
    """The shipped set stands about the chord line; one turn of 2.103 degrees, one scale of 1.0006
    and one shift bring it onto the table of NACA TR 628 within 0.004 percent chord. Station 0 is no
    ordinate of a surface: the table's 3.50 lies below the foremost point, at 3.73."""
    printed = table("clark_y")
    assert off(_about_the_flat_bottom(find("clarky")), _surfaces(printed)) < 0.004


def test_a_curve_through_the_printed_clark_y_is_the_fine_set() -> None:
    """18 stations a side, splined, against the 121-point set: as near as two decimals are (0.035)
    aft of 1.25 percent; 0.06 ahead of it, where the table says nothing of a nose that is no
    parabola."""
    drawn = outline(from_points("", "", ring(table("clark_y"))))
    fine = _about_the_flat_bottom(find("clarky"))
    assert off(fine, drawn) < 0.06
    assert off(fine, drawn[drawn[:, 0] > 0.0125]) < 0.035


def _surfaces(printed: Table) -> np.ndarray:  # type: ignore[type-arg]
    found = ring(printed)
    return found[found[:, 0] > 0]


def _about_the_flat_bottom(section: Section) -> np.ndarray:  # type: ignore[type-arg]
    a = math.radians(-2.103)
    turn = np.array([[math.cos(a), -math.sin(a)], [math.sin(a), math.cos(a)]])
    return outline(section) @ turn.T * 1.0006 + [0.0000828, 0.0373383]


def test_naca_m6_is_the_printed_table() -> None:
    assert worst(find("naca_m6"), table("naca_m6")) < 1e-4


@pytest.mark.parametrize(
    ("name", "turn_deg", "chord"), [("n22", 1.8157, 1.000502), ("usa35b", 1.5094, 1.000347)]
)
def test_turned_sections_are_the_printed_tables(name: str, turn_deg: float, chord: float) -> None:
    """The shipped sets were turned onto their chord line by what their heads state."""
    at = ring(table(name))
    a = math.radians(turn_deg)
    turn = np.array([[math.cos(a), -math.sin(a)], [math.sin(a), math.cos(a)]])
    nose = at[at[:, 0].argmin()]
    assert off(outline(find(name)), (at - nose) @ turn.T / chord) < 2e-4


STATED = re.compile(
    r"# computed from the points: thickness ([\d.]+) percent at x=([\d.]+).*camber "
    r"(?:([\d.]+) percent at x=([\d.]+)|0 \(symmetric\))"
)


@pytest.mark.parametrize("name", shipped())
def test_figures_are_those_in_the_head_of_the_file(name: str) -> None:
    """Computed by other means when the numbers were collected; two and three decimals printed.
    The place of a flat greatest thickness or camber is less sharp than its size."""
    head = (shipped_folder() / f"{name}.csv").read_text()
    match = STATED.search(head)
    assert match is not None
    thick, thick_at, camber, camber_at = (float(v or 0) for v in match.groups())
    found = figures(find(name))
    assert 100 * found.thickness == pytest.approx(thick, abs=0.006)
    assert found.thickness_at == pytest.approx(thick_at, abs=0.0015)
    assert 100 * found.camber == pytest.approx(camber, abs=0.006)
    if camber:
        assert found.camber_at == pytest.approx(camber_at, abs=0.0015)


@pytest.mark.parametrize(
    ("name", "thickness"),
    [("e193", 10.22), ("e205", 10.48), ("e168", 12.45), ("sd7062", 14.0), ("s7055", 10.5),
     ("fx63137", 13.7)],
)
def test_thickness_is_that_of_the_files_title(name: str, thickness: float) -> None:
    """Title lines of the open university airfoil coordinate dataset."""
    assert 100 * figures(find(name)).thickness == pytest.approx(thickness, abs=0.02)


def test_area_centroid_and_girth_of_the_0012() -> None:
    """Integrals of the thickness law of NACA TR 460 in closed form, recomputed as a polygon."""
    section = naca("0012")
    found = figures(section)
    assert found.area == pytest.approx(0.08221, abs=2e-6)
    assert found.area / 0.12 == pytest.approx(0.6850833, abs=1e-7)
    assert found.thickness / 2 == pytest.approx(0.06, abs=2e-4)
    assert section.upper[-1, 1] == pytest.approx(0.00126, abs=1e-6)
    x, y = outline(section).T
    nx, ny = np.roll(x, -1), np.roll(y, -1)
    cross = x * ny - nx * y
    assert ((x + nx) * cross).sum() / (3 * cross.sum()) == pytest.approx(0.4204393, abs=2e-5)
    second = ((y**2 + y * ny + ny**2) * cross).sum() / 12
    assert second == pytest.approx(6.8096e-5, abs=2e-10)
    assert np.hypot(nx - x, ny - y).sum() == pytest.approx(2.0418, abs=2e-4)


def test_mean_line_of_the_2412() -> None:
    """NACA TR 460, by hand: 0.02 at 0.4; 0.015 half way to either side; slope 0.1 at the nose."""
    mean, slope = mean_line("2412", np.array([0.0, 0.2, 0.4, 0.7]))
    assert mean == pytest.approx([0.0, 0.015, 0.02, 0.015], abs=1e-9)
    assert slope[0] == pytest.approx(0.1, abs=1e-9)


@pytest.mark.parametrize(("designation", "camber", "at"), [("2412", 2, 0.4), ("4415", 4, 0.4),
                                                           ("6309", 6, 0.3), ("4612", 4, 0.6)])
def test_camber_is_what_the_number_says(designation: str, camber: float, at: float) -> None:
    """NACA TR 460: first digit the camber in percent, second its place in tenths."""
    found = figures(naca(designation))
    assert 100 * found.camber == pytest.approx(camber, abs=0.01)
    assert found.camber_at == pytest.approx(at, abs=0.01)


def test_a_reflexed_line_has_no_moment_and_a_plain_one_has() -> None:
    """NACA TR 537: the reflexed lines were made for zero moment about the quarter chord. Thin
    section theory: cm = pi/4 (A2 - A1), any aerodynamics text; -0.106 for the 4412 is its value
    there."""
    for code in REFLEXED:
        assert abs(_moment(f"{code}12")) < 0.0015, code
    assert _moment("4412") == pytest.approx(-0.106, abs=0.001)


def _moment(designation: str) -> float:
    a1, a2 = _fourier(designation)
    return math.pi / 4 * (a2 - a1)


def _fourier(designation: str) -> tuple[float, float]:
    """A1 and A2 of thin section theory."""
    theta = np.linspace(0.0, np.pi, 20_001)
    _, slope = mean_line(designation, (1 - np.cos(theta)) / 2)
    step = theta[1] - theta[0]
    whole = [slope * np.cos(n * theta) for n in (1, 2)]
    a1, a2 = (2 / math.pi * step * float(v.sum() - (v[0] + v[-1]) / 2) for v in whole)
    return a1, a2
