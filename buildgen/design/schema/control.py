"""Surfaces that move on the wing, and what drives them."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, Strict, model_validator

from buildgen.design.schema.types import Extent, Fraction, Length, Name, Table, Throw


class ControlServo(Table):
    """A servo in the wing, lying on a hatch between two ribs ahead of its surface."""

    kind: str = Field("micro", description="Servo class on the shelf.")
    at_mm: Length | None = Field(
        None, description="Along the span; the middle of the surface."
    )
    at_chord: Fraction = Field(0.52, description="Middle of its body, fraction of the chord.")
    material: str = Field("birch-ply", description="Of the plate that frames it and of the hatch.")
    thickness_mm: Length = 2.0
    rib_material: str = Field("lite-ply", description="Of the two ribs that carry the plate.")
    rib_thickness_mm: Length = 2.0


class Control(Table):
    """An aileron, flap or elevon: it hangs on a false spar at which the ribs ahead of it stop."""

    name: Name = "aileron"
    kind: Literal["built-up", "strip", "block"] = Field(
        "built-up", description="Nose and rib tails, solid edge stock, or a solid block."
    )
    from_mm: Length = Field(description="Inner end, along the span from the centre line.")
    to_mm: Length | None = Field(None, description="Outer end; just inside the tip rib.")
    chord: Annotated[float, Strict(), Field(gt=0.05, le=0.5)] = Field(
        0.25, description="Share of the wing's chord, the hinge line on one generator."
    )
    width_mm: Length | None = Field(None, description="The same width all along, instead.")
    up_deg: Throw = Field(20.0, description="Throw of the trailing edge up.")
    down_deg: Throw = Field(15.0, description="Throw of the trailing edge down.")
    hinge: Literal["centre", "top", "bottom"] = Field(
        "centre", description="Height of the hinge line: half way, or in one skin."
    )
    hinges: Literal["leaf", "tape"] = "leaf"
    pitch_mm: Length = Field(110.0, description="Greatest distance of leaf hinges.")
    gap_mm: Length = Field(0.5, description="Between false spar and nose, at the hinge line.")
    end_gap_mm: Length = Field(1.0, description="At either end of the surface.")
    material: str = Field("balsa", description="Of nose, ribs and edge, or of the solid surface.")
    rib_thickness_mm: Length = 2.0
    nose_mm: Annotated[float, Strict(), Field(ge=9.5, le=60)] = Field(
        10.0, description="Depth of the nose along the chord: half a leaf hinge goes in."
    )
    edge_mm: Length = Field(12.0, description="Width of the trailing-edge stock behind the tails.")
    spar_material: str = Field("balsa-hard", description="Of the false spar.")
    spar_thickness_mm: Length = 3.0
    drive: Literal["servo", "torque-rod", "none"] = "servo"
    servo: ControlServo = ControlServo()
    rod_mm: Length = Field(2.0, description="Wire of a torque rod.")
    horn_side: Literal["down", "up"] = "down"
    horn_material: str = "birch-ply"
    horn_thickness_mm: Length = 2.0
    horn_mm: Extent = Field(0.0, description="Hinge line to pushrod; 0 for skin and 10 mm more.")

    @model_validator(mode="after")
    def _inner_before_outer(self) -> Control:
        if self.to_mm is not None and self.to_mm <= self.from_mm + 40:
            raise ValueError(
                f"to_mm {self.to_mm:g} must lie at least 40 mm beyond from_mm {self.from_mm:g}"
            )
        return self
