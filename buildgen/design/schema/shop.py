"""The workshop: stock, cutter, printer."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, Strict, model_validator

from buildgen.design.schema.types import Count, Extent, Fraction, Length, Number, Pair, Size, Table


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


class StickStock(Table):
    """Sticks, tubes or rods at hand by length; overrides the shelf's lengths for them."""

    material: str
    length_mm: Length
    section: str | None = Field(None, description="As the stick list names it; without it all.")
    count: Count | None = Field(None, description="Offcuts at hand; without it as many as needed.")


class Stock(Table):
    """What lies on the rack."""

    sheet: Annotated[tuple[Sheet, ...], Field(strict=False)] = ()
    offcut: Annotated[tuple[Offcut, ...], Field(strict=False)] = ()
    stick: Annotated[tuple[StickStock, ...], Field(strict=False)] = ()
    scarf_ratio: Annotated[float, Strict(), Field(ge=4, le=20)] | None = Field(
        None, description="Slope of scarf joints in sticks longer than their stock, run over rise;"
        " without it such a stick is an error. 8 to 12 is common practice.",
    )
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
    turn_over: bool = Field(
        False, description="Let plates without marks of one face only lie upside down, their ids"
        " on the face that lies up; the ticket names them.",
    )
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
