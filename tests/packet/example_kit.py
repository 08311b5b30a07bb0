"""A made-up aircraft of some thirty parts: every form of part, long and accented names."""

from __future__ import annotations

import hashlib
from dataclasses import dataclass

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.checks.report import Balance, Ballast, Check, GroupRow, Movable
from buildgen.design.schema import (
    Definition,
    Motor,
    Panel,
    Power,
    Propeller,
    Wing,
)
from buildgen.packet import Package
from buildgen.part import (
    Allowance,
    Bought,
    Cover,
    Kit,
    Mark,
    Part,
    Plate,
    Printed,
    PrintSettings,
    Stick,
    Title,
)
from buildgen.sheets.sticks import StickBar, StickPiece, StickPlan
from buildgen.solid import Box, Difference, Placed, Pose, Rod, Surface

CHORD, HALF, THICK = 180.0, 500.0, 0.11
STATIONS = (0.0, 100.0, 200.0, 300.0, 400.0, 498.0)
LONG = "Rib with a name so long that no column of any table could ever hold it in a single line"
SOURCE = 'name = "reed-bunting"\ntitle = "Rohrammer für Prüfflüge"\n'


def section(chord: float, points: int = 40) -> np.ndarray:
    """A symmetric section (n, 2): x aft, y up; the shape is of no matter here."""
    x = (1 - np.cos(np.linspace(0, np.pi, points))) / 2
    half = 5 * THICK * (0.2969 * np.sqrt(x) - 0.126 * x - 0.3516 * x**2 + 0.2843 * x**3
                        - 0.1036 * x**4)
    upper = np.column_stack([x, half])
    lower = np.column_stack([x[-2:0:-1], -half[-2:0:-1]])
    return np.vstack([upper, lower]) * chord


def rib(number: int, y: float) -> Part:
    at = Pose.at((0, y, 0), (1, 0, 0), (0, 0, 1))
    plate = Plate(
        Polygon(section(CHORD)), 2.0, ((54.0, 0.0, 4.05), (100.0, 0.0, 5.0)), 0.0,
        (Mark(f"R{number}", (25.0, 0.0)),),
    )
    name = LONG if number == 4 else f"Rippe {number} außen" if number > 6 else f"Wing rib {number}"
    return Part(f"R{number}", name, "balsa", plate, at, "Wing frame", f"wing.rib[{number}]",
                160.0, 20.0)


def ribs() -> list[Part]:
    both = [*(-y for y in STATIONS[:0:-1]), *STATIONS]
    return [rib(n, y) for n, y in enumerate(both, start=1)]


def tube(part_id: str, name: str, x: float, start: float, end: float) -> Part:
    pose = Pose.at((x, start, 0), (0, 1, 0), (0, 0, 1))
    stick = Stick(Rod(4.0, end - start, 3.0), end - start, "8 x 6 tube")
    return Part(part_id, name, "carbon-tube", stick, pose, "Wing frame", "wing.spar[0]",
                1550.0, 60.0)


def covering(part_id: str, side: int) -> Part:
    ring = section(CHORD)
    n = len(ring)
    vertices = np.vstack([
        np.column_stack([ring[:, 0], np.full(n, y), ring[:, 1]]) for y in (0.0, side * HALF)
    ])
    i, j = np.arange(n), (np.arange(n) + 1) % n
    faces = np.vstack([np.column_stack([i, j, j + n]), np.column_stack([i, j + n, i + n])])
    return Part(part_id, "Wing covering", "film", Cover(Surface(vertices, faces), 60.0, 6.0),
                Pose(), "Covering", "wing.covering")


def mount(part_id: str, y: float) -> Part:
    block = Box((-35.0, -16.0, -16.0), (5.0, 16.0, 16.0))
    bore = Placed(Rod(9.0, 80.0), Pose(origin=np.array([-50.0, 0, 0])))
    form = Printed(Difference(block, (bore,)), PrintSettings(), (-1.0, 0.0, 0.0), twin="MOUNT")
    return Part(part_id, "Motor mount", "petg", form, Pose(origin=np.array([0, y, 0.0])),
                "Power", "power.mount", 1270.0, 40.0)


def bought(part_id: str, name: str, order: str, mass: float, at: tuple[float, float, float],
           half: tuple[float, float, float], step: str, quantity: int = 1) -> Part:
    shape = Box(tuple(-v for v in half), half)  # type: ignore[arg-type]
    return Part(part_id, name, name.split(",")[0].lower(),
                Bought(mass, 0.03 * mass, shape, order, quantity), Pose(origin=np.array(at)),
                step, "equipment", basis="catalogue")


def flat(part_id: str, name: str, outline: Polygon, pose: Pose, step: str, thick: float = 4.0,
         material: str = "balsa-light") -> Part:
    return Part(part_id, name, material, Plate(outline, thick, grain_deg=0.0), pose, step,
                "tail", 110.0, 20.0)


def parts() -> tuple[Part, ...]:
    upright = Pose.at((0, -1.5, 0), (1, 0, 0), (0, 0, 1))
    side = box(-180, -45, 560, 25).difference(box(0, -20, 182, 25.1))
    return (
        *ribs(),
        tube("SP1", "Main spar, port", 50.0, -HALF, 0.0),
        tube("SP2", "Main spar, starboard", 50.0, 0.0, HALF),
        flat("F1", "Fuselage side, port", side, Pose.at((0, -35, -20), (1, 0, 0), (0, 0, 1)),
             "Fuselage", 3.0, "lite-ply"),
        flat("F2", "Fuselage side, starboard", side,
             Pose.at((0, 38, -20), (1, 0, 0), (0, 0, 1)), "Fuselage", 3.0, "lite-ply"),
        flat("T1", "Tailplane", box(470, -180, 570, 180), Pose(origin=np.array([0, 0, 8.0])),
             "Tail"),
        flat("T2", "Fin with a dorsal fillet", Polygon([(430, 12), (570, 12), (570, 150),
             (500, 150)]), upright, "Tail"),
        mount("M1", -150.0),
        mount("M2", 150.0),
        bought("MOT1", "Outrunner, port", "outrunner 28 x 26", 62.0, (-48, -150, 0),
               (13, 14, 14), "Power"),
        bought("MOT2", "Outrunner, starboard", "outrunner 28 x 26", 62.0, (-48, 150, 0),
               (13, 14, 14), "Power"),
        bought("SCREWS", "Screws", "M3 x 10 ISO 4762", 8.8, (-35, 0, 0), (2, 150, 2), "Power", 8),
        bought("BATTERY", "Battery", "4 cells, 3300 mAh", 320.0, (-95, 0, -35), (70, 22, 15),
               "Equipment"),
        bought("SERVO", "Servo", "servo 9 g", 9.5, (300, 0, -30), (11, 6, 12), "Equipment"),
        covering("C1", -1),
        covering("C2", 1),
        Part("GLUE", "Glue", "epoxy", Allowance(18.0, 6.0), Pose(origin=np.array([60.0, 0, 0])),
             "Covering", "balance.glue_share"),
    )


def kit() -> Kit:
    sha = hashlib.sha256(SOURCE.encode()).hexdigest()
    return Kit(Title("reed-bunting", "Rohrammer für Prüfflüge", "B", sha), parts())


def balance_of(kit_: Kit) -> Balance:
    masses = np.array([p.mass_g for p in kit_.parts])
    total = float(masses.sum())
    cg = masses @ np.array([p.centroid_mm for p in kit_.parts]) / total
    rows: dict[str, list[Part]] = {}
    for part in kit_.parts:
        rows.setdefault(part.step, []).append(part)
    table = tuple(
        GroupRow(step, sum(p.mass_g for p in group),
                 float(np.sqrt(sum(p.mass_sigma_g**2 for p in group))),
                 float(sum(p.mass_g * p.centroid_mm[0] for p in group)
                       / sum(p.mass_g for p in group)))
        for step, group in rows.items()
    )
    sigma = float(np.sqrt(sum(p.mass_sigma_g**2 for p in kit_.parts)))
    return Balance(
        total, sigma, tuple(float(v) for v in cg), 2.4, (1.1e7, 1.2e7, 2.2e7, -1e5),  # type: ignore[arg-type]
        CHORD, 0.0, 81.5, float((81.5 - cg[0]) / CHORD), (40.0, 62.0),
        (Movable("Battery", -95.0, (-120.0, -60.0)),), (Ballast("Nose ballast", 20.0, -160.0),),
        table, 2 * HALF, 2 * HALF * CHORD,
    )


def checks() -> tuple[Check, ...]:
    basis = "Volume coefficients, textbook method; a made-up basis for the example"
    return (
        Check("static-margin", "Static margin", "pass", 0.12, 0.05, "", basis),
        Check("prop-gap", "Gap between propeller discs", "fail", 4.0, 10.0, "mm", basis,
              "Move the outer motors 6 mm outwards."),
        Check("stall", "Stall speed", "warn", 9.31, 9.0, "m/s", basis, "Save 30 g."),
        Check("dry-fit", "Every joint goes together", "pass", None, None, "", basis),
    )


@dataclass(frozen=True)
class Placement:
    """As in the layout of sheets."""

    part: str
    x_mm: float
    y_mm: float
    rotation_deg: float
    flipped: bool = False


@dataclass(frozen=True)
class LaidSheet:
    """Stands for a laid out sheet where its figures matter and its cutting does not."""

    file: str
    material: str
    thickness_mm: float
    width_mm: float
    height_mm: float
    kerf_mm: float
    grain: bool
    placements: tuple[Placement, ...]
    parts_area_mm2: float
    used_fraction: float
    cut_length_mm: float


def lay(kit_: Kit, material: str, thickness: float, size: tuple[float, float],
        columns: int = 1) -> LaidSheet:
    """Parts of one material in columns, one above the other (fits by the choice of sizes)."""
    placements: list[Placement] = []
    area = length = 0.0
    mine = [p for p in kit_.of("cut") if p.material == material]
    y = 5.0
    for number, part in enumerate(mine):
        assert isinstance(part.form, Plate)
        low_x, low_y, _, high_y = part.form.shape2d.bounds
        column = number % columns
        x = 5.0 + column * (size[0] - 5.0) / columns
        placements.append(Placement(part.id, x - low_x, y - low_y, 0.0))
        if column == columns - 1:
            y += high_y - low_y + 3.0
        area += part.form.area_mm2
        length += part.form.shape2d.length
    return LaidSheet(f"{material}-{thickness:g}-01", material, thickness, *size, 0.16, True,
                     tuple(placements), area, area / (size[0] * size[1]), length)


def package() -> Package:
    kit_ = kit()
    definition = Definition(
        name="reed-bunting", title="Rohrammer für Prüfflüge", revision="B",
        kind="Twin-motor trainer for trials, Übungsflugzeug",
        wing=Wing(panel=(Panel(span_mm=HALF, root_chord_mm=CHORD),)),
        power=Power(motors=2, first_mm=150.0, motor=Motor(mass_g=62.0),
                    propeller=Propeller(diameter_mm=250.0, pitch_mm=120.0)),
    )
    sheets = (
        lay(kit_, "balsa", 2.0, (1000.0, 100.0), 5),
        lay(kit_, "lite-ply", 3.0, (760.0, 200.0)),
        lay(kit_, "balsa-light", 4.0, (560.0, 520.0)),
    )
    plan = StickPlan("carbon-tube", "8 x 6 tube", 1200.0, (
        StickBar((StickPiece("SP1", 500.0), StickPiece("SP2", 500.0)), 199.0),
    ))
    return Package(kit_, definition, sheets, (plan,), balance_of(kit_), checks(), (),  # type: ignore[arg-type]
                   SOURCE, "reed-bunting.toml")
