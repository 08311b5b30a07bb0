"""The wing: panels, ribs and what runs through them."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, ValidationError, model_validator

from buildgen.design.schema.control import Control
from buildgen.design.schema.elliptic import Elliptic
from buildgen.design.schema.jig import Jig
from buildgen.design.schema.types import Angle, Count, Extent, Fraction, Length, Number, Table


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

    kind: Literal["tube", "rod", "strip", "capped"] = Field(
        "tube", description="Round; a square stick; or sticks top and bottom with webs between."
    )
    material: str = Field("carbon-tube", description="Of a capped spar its sticks.")
    outer_mm: Length | None = Field(None, description="Outside diameter of a tube or rod.")
    inner_mm: Extent = Field(0.0, description="Bore of a tube.")
    width_mm: Length | None = Field(None, description="Of a strip or cap, along the chord.")
    height_mm: Length | None = Field(None, description="Of a strip or cap, across the chord.")
    web: Literal["aft", "fore", "both"] = Field(
        "aft", description="Faces of a capped spar that carry webs; both make a box."
    )
    web_material: str = "balsa"
    web_mm: Annotated[tuple[Length, ...], Field(strict=False, min_length=1)] = Field(
        (1.5,), description="Thickness of the webs from the root out, in equal shares of the spar."
    )
    at_chord: Fraction = Field(0.30, description="Place at the root, fraction of the chord.")
    at_tip_chord: Fraction | None = Field(None, description="Place at the tip; as at the root.")
    place: Literal["middle", "top", "bottom"] = Field("middle", description="Height in the rib.")
    from_mm: Extent = Field(0.0, description="Inner end, along the span from the centre line.")
    to_mm: Length | None = Field(None, description="Outer end; the tip.")
    brace_mm: Extent = Field(
        0.0, description="Length each way of a ply brace at a dihedral break of a capped spar."
    )
    brace_material: str = "birch-ply"
    brace_thickness_mm: Length = 2.0
    joiner_mm: Extent = Field(
        80.0, description="Length each way of the bent joiner in a tube's bore at a break."
    )
    joiner_material: str = "music-wire"


class LeadingEdge(Table):
    """The stick along the nose."""

    kind: Literal["square", "round", "strip", "none"] = Field(
        "square", description="A square stick stands on its edge, a strip stands upright; both"
        " are sanded to the section."
    )
    size_mm: Length = Field(6.0, description="Of the stick; of a strip its depth aft.")
    material: str = "balsa"


class TrailingEdge(Table):
    """Tapered stock behind the ribs."""

    kind: Literal["stock", "sheet", "blocks", "none"] = Field(
        "stock", description="Tapered stock behind the ribs, sheet above and below them, or"
        " lengths of triangular stock between ribs that reach the edge."
    )
    width_mm: Length = 20.0
    sheet_mm: Length = Field(1.5, description="Thickness of the sheets.")
    material: str = "balsa"


class Sheeting(Table):
    """Sheet over the nose back to the spar, and capstrips; the ribs are inset by it."""

    material: str = "balsa"
    thickness_mm: Length = 1.5
    nose: bool = Field(True, description="Closed nose, above and below; needs a strip in front.")
    to_chord: Fraction | None = Field(None, description="Its aft edge; over the first spar.")
    capstrip_mm: Extent = Field(0.0, description="Width of a strip over each rib; 0 for none.")


class Tip(Table):
    """What stands beyond the last rib; it counts in the weight, not in the wing's area."""

    kind: Literal["rib", "sheet", "block"] = Field("rib", description="The last rib is the tip.")
    length_mm: Length = Field(25.0, description="Beyond the last rib.")
    thickness_mm: Length = Field(4.0, description="Of a sheet tip.")
    material: str = "balsa"


class Gusset(Table):
    """Triangles of sheet in the corners of strong ribs and the trailing-edge stock."""

    size_mm: Length = Field(15.0, description="Of both sides along rib and stock.")
    material: str = "balsa"
    thickness_mm: Length = 2.0


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
    half: bool = Field(
        False, description="Nose ribs half way between, from the edge to a strip or capped spar."
    )
    edges: Literal["smaller", "larger"] = Field(
        "smaller", description="A tapered rib is cut to its smaller or its larger face."
    )
    lightening: Lightening = Lightening()


class TipFin(Table):
    """A fin of sheet on the outer face of either tip rib."""

    height_mm: Length = 120.0
    below_mm: Extent = Field(0.0, description="How far a smaller part reaches below the wing.")
    root_chord_mm: Length | None = Field(None, description="At the wing; the tip's chord.")
    tip_chord_mm: Length | None = Field(None, description="At its top; 0.6 of that at the wing.")
    sweep_mm: Number = Field(40.0, description="How far the top of its leading edge lies aft.")
    aft_mm: Number = Field(0.0, description="Its trailing edge behind that of the wing.")
    material: str = "balsa"
    thickness_mm: Length = 3.0


class Wing(Table):
    """The wing: its root's leading edge is the origin of the aircraft."""

    section: str = "clarky"
    incidence_deg: Angle = 0.0
    min_trailing_edge_mm: Extent = 1.0
    rib_spacing_mm: Length = 60.0
    ribs: Ribs = Ribs()
    panel: Annotated[tuple[Panel, ...], Field(strict=False, min_length=1)]
    elliptic: Elliptic | None = Field(None, description="Instead of panels.")
    spar: Annotated[tuple[Spar, ...], Field(strict=False)] = ()
    leading_edge: LeadingEdge = LeadingEdge()
    trailing_edge: TrailingEdge = TrailingEdge()
    sheeting: Sheeting | None = None
    control: Annotated[tuple[Control, ...], Field(strict=False)] = Field(
        (), description="Ailerons, flaps, elevons."
    )
    tip_fin: TipFin | None = None
    jig: Jig | None = Field(None, description="A cradle that holds each panel on the board.")
    tip: Tip = Tip()
    gusset: Gusset | None = Field(
        None, description="At the root, at breaks, at tips and beside motors."
    )
    wiring_hole: WiringHole | None = None
    covering: str | None = Field("film", description="Name on the shelf; none for a bare wing.")

    @model_validator(mode="before")
    @classmethod
    def _panels_of_the_ellipse(cls, given: Any) -> Any:
        """An elliptical wing is as many straight panels; all that follows reads only those."""
        if not isinstance(given, dict) or "elliptic" not in given:
            return given
        if "panel" in given:
            raise ValueError("give either panel or elliptic, not both")
        shape = given["elliptic"]
        try:
            whole = shape if isinstance(shape, Elliptic) else Elliptic.model_validate(shape)
        except ValidationError:
            return {**given, "panel": [{"span_mm": 1.0}]}  # its faults are told by its own field
        return {**given, "panel": whole.panels()}
