"""The definition of an aircraft as a builder would describe it over the telephone.

Frozen pydantic models; unknown keys are refused. Lengths in mm, masses in g, angles in degrees;
the same keys ending in `_in` and `_oz` are converted before they come here (``design.units``).
"""

from __future__ import annotations

from typing import Annotated, Literal, TypeAlias

from pydantic import BaseModel, ConfigDict, Field, Strict, model_validator

Number: TypeAlias = Annotated[float, Strict(), Field(allow_inf_nan=False)]
Length: TypeAlias = Annotated[float, Strict(), Field(gt=0, le=20000, allow_inf_nan=False)]
Extent: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=20000, allow_inf_nan=False)]
Mass: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=100000, allow_inf_nan=False)]
Angle: TypeAlias = Annotated[float, Strict(), Field(ge=-60, le=60, allow_inf_nan=False)]
Fraction: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=1, allow_inf_nan=False)]
Count: TypeAlias = Annotated[int, Strict(), Field(ge=1, le=200)]
Lengths: TypeAlias = Annotated[tuple[Number, ...], Field(strict=False)]
Pair: TypeAlias = Annotated[tuple[Number, Number], Field(strict=False)]
Triple: TypeAlias = Annotated[tuple[Number, Number, Number], Field(strict=False)]
Size: TypeAlias = Annotated[tuple[Length, Length, Length], Field(strict=False)]
Name: TypeAlias = Annotated[
    str, Field(min_length=1, max_length=60, pattern=r"^[a-z0-9][a-z0-9-]*$")
]


class Table(BaseModel):
    """A table of the definition."""

    model_config = ConfigDict(frozen=True, extra="forbid", strict=True)


class Panel(Table):
    """One panel of the wing, from the root out; the other side is its mirror image."""

    span_mm: Length = Field(description="Along the panel, from its inner to its outer end.")
    root_chord_mm: Length | None = Field(None, description="Inner chord; the last tip chord.")
    tip_chord_mm: Length | None = Field(None, description="Outer chord; the root chord.")
    sweep_mm: Number = Field(0.0, description="How far the tip's leading edge lies aft.")
    dihedral_deg: Angle = Field(0.0, description="Rise of this panel above the level.")
    twist_deg: Angle | None = Field(None, description="At the tip, nose up positive; as inboard.")
    section: str | None = Field(None, description="At the panel's tip; the wing's section.")
    rib_spacing_mm: Length | None = Field(None, description="Greatest distance of ribs.")
    rib_count: Count | None = Field(None, description="Bays of equal width instead of a spacing.")


class Spar(Table):
    """A spar, straight in space between the wing's dihedral breaks."""

    kind: Literal["tube", "rod", "strip"] = Field("tube", description="Round, or square stick.")
    material: str = "carbon-tube"
    outer_mm: Length | None = Field(None, description="Outside diameter of a tube or rod.")
    inner_mm: Extent = Field(0.0, description="Bore of a tube.")
    width_mm: Length | None = Field(None, description="Of a strip, along the chord.")
    height_mm: Length | None = Field(None, description="Of a strip, across the chord.")
    at_chord: Fraction = Field(0.30, description="Place at the root, fraction of the chord.")
    at_tip_chord: Fraction | None = Field(None, description="Place at the tip; as at the root.")
    place: Literal["middle", "top", "bottom"] = Field("middle", description="Height in the rib.")
    from_mm: Extent = Field(0.0, description="Inner end, along the span from the centre line.")
    to_mm: Length | None = Field(None, description="Outer end; the tip.")
    joiner_mm: Extent = Field(
        80.0, description="Length each way of the bent joiner in a tube's bore at a break."
    )
    joiner_material: str = "music-wire"


class LeadingEdge(Table):
    """The stick along the nose."""

    kind: Literal["square", "round", "none"] = Field(
        "square", description="A square stick stands on its edge and is sanded to the section."
    )
    size_mm: Length = 6.0
    material: str = "balsa"


class TrailingEdge(Table):
    """Tapered stock behind the ribs."""

    kind: Literal["stock", "none"] = "stock"
    width_mm: Length = 20.0
    material: str = "balsa"


class WiringHole(Table):
    """A hole in every rib for the harness; large enough for the plug."""

    diameter_mm: Length = 12.0
    at_chord: Fraction = 0.15


class Lightening(Table):
    """Round holes that take weight out of the ribs."""

    use: bool = True
    min_web_mm: Length | None = Field(None, description="Least wood left; from the material.")
    min_diameter_mm: Length = 8.0


class Ribs(Table):
    """The ribs' wood and how they are trimmed."""

    material: str = "balsa"
    thickness_mm: Length = 2.0
    root_material: str | None = Field(None, description="Ribs at the root and at breaks.")
    root_thickness_mm: Length | None = None
    edges: Literal["smaller", "larger"] = Field(
        "smaller", description="A tapered rib is cut to its smaller or its larger face."
    )
    lightening: Lightening = Lightening()


class Wing(Table):
    """The wing: its root's leading edge is the origin of the aircraft."""

    section: str = "clarky"
    incidence_deg: Angle = 0.0
    min_trailing_edge_mm: Extent = 1.0
    rib_spacing_mm: Length = 60.0
    ribs: Ribs = Ribs()
    panel: Annotated[tuple[Panel, ...], Field(strict=False, min_length=1)]
    spar: Annotated[tuple[Spar, ...], Field(strict=False)] = ()
    leading_edge: LeadingEdge = LeadingEdge()
    trailing_edge: TrailingEdge = TrailingEdge()
    wiring_hole: WiringHole | None = None
    covering: str | None = Field("film", description="Name on the shelf; none for a bare wing.")


class Motor(Table):
    """The motor, by its figures: a name is only printed."""

    name: str = "outrunner"
    mass_g: Mass
    diameter_mm: Length = 28.0
    length_mm: Length = 26.0
    pattern_mm: Pair | None = Field(
        None, description="Diameters of the two bolt circles, two screws on each."
    )
    pattern: str | None = Field(None, description="Bolt pattern by its class on the shelf.")
    screws: Annotated[int, Strict(), Field(ge=2, le=8)] = 4
    screw: str = "M3"
    shaft_clearance_mm: Length = 9.0
    kv_rpm_v: Length | None = None
    resistance_ohm: Extent | None = None
    no_load_a: Extent | None = None
    max_current_a: Length | None = None


class Propeller(Table):
    """The propeller."""

    diameter_mm: Length
    pitch_mm: Length
    mass_g: Mass = 0.0
    blades: Annotated[int, Strict(), Field(ge=2, le=8)] = 2


class Mount(Table):
    """The printed mounts."""

    material: str = "petg"
    plate_mm: Length = 4.0
    wall_mm: Length | None = Field(None, description="Walls; three line widths of the printer.")
    ahead_mm: Length = Field(30.0, description="Motor face ahead of the wing's leading edge.")
    wrap_mm: Length = Field(14.0, description="How far the saddle reaches back over the nose.")
    bay_mm: Length = Field(36.0, description="Between the two ribs that carry a mount.")
    tongue_mm: Length = Field(18.0, description="How far the ribs' tongues reach into it.")
    rib_material: str = "birch-ply"
    rib_thickness_mm: Length = 3.0
    lock_screw: str = "M3"


class Power(Table):
    """Motors along the wing, or one in the nose."""

    place: Literal["wing", "nose"] = "wing"
    motors: Count = 1
    spacing_mm: Length | None = Field(None, description="Between neighbours on one side.")
    first_mm: Length | None = Field(None, description="Innermost motor from the centre line.")
    stations_mm: Lengths = Field((), description="Distance of each from the centre, one side.")
    motor: Motor
    propeller: Propeller
    mount: Mount = Mount()
    down_deg: Angle = Field(0.0, description="Thrust line nose down against the body's axis.")
    side_deg: Angle = Field(0.0, description="Thrust line to the right, on the right-hand side.")
    rotation: Literal["mirrored", "alike"] = "mirrored"
    min_tip_gap_mm: Extent = Field(10.0, description="Between discs, and to the fuselage.")
    controller_mass_g: Mass = 0.0
    controller_size_mm: Size = (45.0, 25.0, 10.0)
    wire: str = Field("awg-16", description="Of each motor's supply, by its gauge.")

    @model_validator(mode="after")
    def _one_way_to_place(self) -> Power:
        if self.place == "wing" and self.motors % 2:
            raise ValueError(
                "on the wing motors come in pairs: give an even number, or place one in the nose"
            )
        if self.stations_mm and len(self.stations_mm) != self.motors // 2:
            raise ValueError(
                f"stations_mm lists {len(self.stations_mm)} places for one side,"
                f" {self.motors} motors need {self.motors // 2}"
            )
        return self


class Station(Table):
    """One station of the fuselage: outside measures, z from the wing's root leading edge."""

    x_mm: Number
    width_mm: Length
    top_mm: Number
    bottom_mm: Number
    former: bool = True

    @model_validator(mode="after")
    def _top_over_bottom(self) -> Station:
        if self.top_mm <= self.bottom_mm:
            raise ValueError(
                f"top_mm {self.top_mm:g} must be above bottom_mm {self.bottom_mm:g}"
            )
        return self


class Fuselage(Table):
    """A box body of sheet sides, top and bottom over formers."""

    station: Annotated[tuple[Station, ...], Field(strict=False, min_length=2)]
    side_material: str = "balsa"
    side_thickness_mm: Length = 3.0
    deck_material: str = "balsa"
    deck_thickness_mm: Length = 2.0
    former_material: str = "lite-ply"
    former_thickness_mm: Length = 3.0
    firewall_material: str = "birch-ply"
    firewall_thickness_mm: Length = 4.0
    dowel_mm: Length = Field(6.0, description="Dowels for the bands that hold the wing.")
    covering: str | None = "film"


class Surface(Table):
    """A tail surface cut from sheet: given by its measures, or sized by its volume."""

    span_mm: Length | None = Field(None, description="Whole span; of a fin its height.")
    root_chord_mm: Length | None = None
    tip_chord_mm: Length | None = None
    sweep_mm: Number = 0.0
    volume: Annotated[float, Strict(), Field(gt=0, le=2)] | None = Field(
        None, description="Tail volume coefficient, instead of the measures."
    )
    aspect: Annotated[float, Strict(), Field(gt=0, le=12)] | None = Field(
        None, description="Aspect ratio where the volume is given."
    )
    taper: Annotated[float, Strict(), Field(gt=0.1, le=1)] = 0.8
    control: Annotated[float, Strict(), Field(ge=0, le=0.6)] = Field(
        0.3, description="Elevator's or rudder's share of the chord."
    )
    incidence_deg: Angle = 0.0
    lightening: bool = False
    hinges: Annotated[int, Strict(), Field(ge=2, le=12)] = 3

    @model_validator(mode="after")
    def _measures_or_volume(self) -> Surface:
        measures = (self.span_mm, self.root_chord_mm)
        if self.volume is None and None in measures:
            raise ValueError("give span_mm and root_chord_mm, or volume")
        if self.volume is not None and measures != (None, None):
            raise ValueError("give either volume or span_mm and root_chord_mm, not both")
        return self


class Tail(Table):
    """Tailplane on top of the fuselage and fin on the tailplane, from sheet."""

    arm_mm: Length = Field(description="Wing's quarter chord to the tailplane's.")
    material: str = "balsa-light"
    thickness_mm: Length = 4.0
    tailplane: Surface
    fin: Surface
    covering: str | None = "film"


class Equipment(Table):
    """A thing on board: one that may slide along x balances the aircraft."""

    name: str = Field(min_length=1, max_length=40)
    kind: Literal[
        "battery", "controller", "receiver", "servo", "payload", "gear", "other"
    ] = "other"
    mass_g: Mass
    sigma_g: Mass | None = Field(None, description="One standard deviation; 3 % of the mass.")
    size_mm: Size = (20.0, 20.0, 10.0)
    x_mm: Number
    y_mm: Number = 0.0
    z_mm: Number | None = Field(None, description="Its middle; half way up the fuselage.")
    range_mm: Pair | None = Field(None, description="Foremost and aftmost x of its middle.")
    mirrored: bool = Field(False, description="One on each side.")
    cells: Annotated[int, Strict(), Field(ge=1, le=14)] | None = None
    capacity_mah: Length | None = None


class Sheet(Table):
    """A stock of sheet, as measured: overrides the shelf for this material and thickness."""

    material: str
    thickness_mm: Length = Field(description="Nominal, as the parts name it.")
    measured_mm: Length | None = Field(None, description="With calipers; rules the slots.")
    width_mm: Length | None = None
    height_mm: Length | None = None
    density_kg_m3: Length | None = Field(None, description="Weighed; replaces the shelf's.")
    kerf_mm: Extent | None = None
    count: Count | None = None


class Offcut(Table):
    """A piece left of an earlier job, by its outline, the grain along x."""

    material: str
    thickness_mm: Length = Field(description="With calipers.")
    outline_mm: Annotated[tuple[Pair, ...], Field(strict=False, min_length=3)]
    count: Count = 1

    @model_validator(mode="after")
    def _simple(self) -> Offcut:
        from shapely.geometry import Polygon

        if not Polygon(self.outline_mm).is_valid or Polygon(self.outline_mm).area < 1:
            raise ValueError("outline_mm must run once round the piece without crossing itself")
        return self


class Stock(Table):
    """What lies on the rack."""

    sheet: Annotated[tuple[Sheet, ...], Field(strict=False)] = ()
    offcut: Annotated[tuple[Offcut, ...], Field(strict=False)] = ()
    shelf: str | None = Field(None, description="A shelf file of one's own, beside this one.")


class Speed(Table):
    """How fast the user's machine works in a material: measured, never assumed."""

    material: str
    thickness_mm: Length
    cut_mm_s: Length
    mark_mm_s: Length | None = Field(None, description="Engraving; without it only cuts count.")


class Laser(Table):
    """The cutter and its fits."""

    kerf_mm: Extent | None = Field(
        None, description="Width of the beam, where the sheet says none; else the shelf's."
    )
    spacing_mm: Extent = 1.5
    margin_mm: Extent = 5.0
    slip_mm: Extent = Field(0.10, description="Play on each side of what slides in.")
    press_mm: Number = Field(0.0, description="Play on each side of what is glued in.")
    letter_mm: Length = 5.0
    seat_lines: bool = Field(
        True, description="Engrave where neighbours sit and where spars pass."
    )
    grain_arrows: bool = Field(False, description="An arrow along the grain beside each id.")
    effort: Literal["quick", "normal", "high"] = Field(
        "normal", description="Nesting: normal searches longer only where it may save a sheet."
    )
    relief: Literal["none", "dog-bone", "t-bone"] = Field(
        "none", description="Bites at inner corners of slots, notches and openings."
    )
    relief_mm: Length = Field(1.0, description="Diameter of such a bite.")
    bridges: Annotated[int, Strict(), Field(ge=0, le=12)] = Field(
        0, description="Uncut bridges that hold each part in its sheet."
    )
    bridge_mm: Length = Field(0.6, description="Width of such a bridge.")
    arc_mm: Annotated[float, Strict(), Field(ge=0, le=0.2)] = Field(
        0.0, description="Curves as arcs within this error; 0 for straight lines only."
    )
    dxf: Literal["R2010", "R2000", "R12"] = "R2010"
    colours: dict[str, Annotated[int, Strict(), Field(ge=1, le=255)]] = Field(
        default_factory=dict, description="Colour number of a layer, where the machine wants one."
    )
    speed: Annotated[tuple[Speed, ...], Field(strict=False)] = Field(
        (), description="The machine's speeds, for the time on the cutting ticket."
    )


class Print(Table):
    """The printer."""

    line_width_mm: Length = 0.45
    perimeters: Count = 3
    layer_mm: Length = 0.2
    skin_layers: Count = 5
    infill: Fraction = 0.25
    hole_oversize_mm: Extent = 0.2
    slip_mm: Extent = Field(0.2, description="Play on each side of what slides in.")
    bed_mm: Size = (220.0, 220.0, 220.0)


class Balance(Table):
    """What the balance shall be, and where ballast could go."""

    static_margin: Annotated[float, Strict(), Field(ge=-0.2, le=0.6)] = 0.12
    band: Annotated[float, Strict(), Field(gt=0, le=0.2)] = Field(
        0.05, description="Allowed either way of the static margin."
    )
    nose_ballast_x_mm: Number | None = None
    tail_ballast_x_mm: Number | None = None
    glue_share: Annotated[float, Strict(), Field(ge=0, le=0.5)] = Field(
        0.06, description="Glue as a share of the wooden and printed parts it joins."
    )


class Definition(Table):
    """One aircraft."""

    schema_: str | None = Field(None, alias="$schema", description="JSON Schema for editors.")
    name: Name
    title: str = Field("", max_length=80)
    revision: str = Field("A", min_length=1, max_length=12)
    kind: str = Field("", description="A word on its use.", max_length=200)
    sections_folder: str | None = Field(None, description="Coordinate files of one's own.")
    wing: Wing
    power: Power | None = None
    fuselage: Fuselage | None = None
    tail: Tail | None = None
    equipment: Annotated[tuple[Equipment, ...], Field(strict=False)] = ()
    stock: Stock = Stock()
    laser: Laser = Laser()
    print: Print = Print()
    balance: Balance = Balance()
