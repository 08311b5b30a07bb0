"""Tailplane and fin."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, Strict, field_validator, model_validator

from buildgen.design.schema.types import Angle, Length, Number, Table


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
    hinges: Annotated[int, Strict(), Field(ge=2, le=12)] = Field(
        3, description="Hinges spread over the line; of a V-tail over each half."
    )
    hinge_at_mm: tuple[Length, ...] = Field(
        (), strict=False,
        description="Middles of the hinges from the root out, on both halves; instead of hinges.",
    )

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

    arrangement: Literal["conventional", "t-tail", "v-tail"] = Field(
        "conventional",
        description="Fin on the tailplane, tailplane on the fin, or a V of two halves on a block.",
    )
    dihedral_deg: Annotated[float, Strict(), Field(ge=20, le=60)] = Field(
        38.0, description="Of each half of a V-tail, over the level."
    )
    arm_mm: Number = Field(
        description="Wing's quarter chord to the tailplane's; negative ahead of it, a canard."
    )
    material: str = "balsa-light"
    thickness_mm: Length = 4.0
    block_material: str = Field(
        "balsa", description="Of a V-tail's block, and of the fillets at a T-tail's fin."
    )
    tailplane: Surface
    fin: Surface | None = Field(None, description="None where the wing's tip fins do its work.")
    covering: str | None = "film"

    @field_validator("arm_mm")
    @classmethod
    def _clear_of_the_wing(cls, arm_mm: float) -> float:
        if abs(arm_mm) < 1:
            raise ValueError("must not be 0: the tailplane would stand in the wing")
        return arm_mm

    @model_validator(mode="after")
    def _fin_behind(self) -> Tail:
        if self.arrangement == "v-tail" and self.fin is not None:
            raise ValueError("a V-tail has no fin: leave out tail.fin")
        if self.arrangement != "conventional" and self.arm_mm < 0:
            raise ValueError(
                f'a {self.arrangement} stands behind the wing: give a positive arm_mm, or take'
                ' arrangement = "conventional"'
            )
        if self.arm_mm < 0 and self.fin is not None:
            raise ValueError(
                "a fin on a tailplane ahead of the wing turns the aircraft round: leave out"
                " tail.fin and give the wing [wing.tip_fin]"
            )
        if self.arm_mm > 0 and self.fin is None and self.arrangement != "v-tail":
            raise ValueError("fin is missing")
        return self
