"""Materials: what parts are made of, covered with and glued with."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

# Values that grow with density where ``strength_density_kg_m3`` is given.
GROWS_WITH_DENSITY = (
    "modulus_mpa",
    "shear_modulus_mpa",
    "bending_mpa",
    "tension_mpa",
    "compression_mpa",
    "shear_mpa",
)

KINDS = ("sheet", "stick", "tube", "wire", "print", "cover", "glue", "foam", "other")
LASER = ("yes", "care", "no")
SEEN = ("read", "second-hand", "from memory", "common practice, no source", "measured")

Size = tuple[float, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class Material:
    """Something parts are made of, covered with or glued with.

    Attributes:
        name: what a builder calls it and the definition uses: ``balsa-light``.
        title: the same in words, for lists and labels.
        kind: how it is mainly bought; balsa comes in sheets and in sticks all the same.
        density_kg_m3: of the solid stuff; 0 for a covering, which has an area density instead.
            A glue's is that of the wet glue.
        density_sigma_kg_m3: standard deviation from one piece to the next.
        area_density_g_m2: mass of a square metre laid on, for coverings.
        grain: true where the direction of the grain decides how a part may be turned on a sheet.
        lean_deg: how far a part may lean off the grain when laid on a sheet; 0 without grain.
        sheets: stock sheets (width, height) in mm, the grain along the longer side.
        thicknesses_mm: stock thicknesses of sheets.
        sections_mm: stock sticks (width, height), tubes (outside, inside diameter).
        diameters_mm: stock rods, dowels and wires.
        lengths_mm: stock lengths of sticks, tubes, rods and wires.
        laser: whether a CO2 or diode laser may cut it; ``laser_note`` says why.
        kerf_mm: usual width of the cut, to be replaced by a measured one.
        min_web_mm: narrowest bridge of material that survives cutting and handling.
        modulus_mpa: along the grain, the fibre or in the plane; None where not known, as below.
        bending_mpa: modulus of rupture (woods) or flexural strength.
        yield_mpa: metals.
        strength_density_kg_m3: density at which the strength values of the source hold; the
            values here are already scaled in proportion to the density of this entry.
        soft_from_c: temperature at which it begins to soften.
        dry_fraction: part of a glue's wet mass that stays.
        source: publication behind the density; ``seen`` tells how it was seen.
        strength_source: the same for modulus and strengths, with how it was seen.
        stock_source: the same for sizes.
        laser_source: the same for laser and kerf.
    """

    name: str
    title: str = ""
    kind: str = field(default="other", metadata={"one_of": KINDS})
    density_kg_m3: float = 0.0
    density_sigma_kg_m3: float = 0.0
    area_density_g_m2: float = 0.0
    area_density_sigma_g_m2: float = 0.0
    grain: bool = False
    lean_deg: float = field(default=0.0, metadata={"most": 90.0})
    sheets: tuple[Size, ...] = ()
    thicknesses_mm: tuple[float, ...] = ()
    sections_mm: tuple[Size, ...] = ()
    diameters_mm: tuple[float, ...] = ()
    lengths_mm: tuple[float, ...] = ()
    laser: str = field(default="no", metadata={"one_of": LASER})
    laser_note: str = ""
    kerf_mm: float = 0.0
    min_web_mm: float = 0.0
    modulus_mpa: float | None = None
    shear_modulus_mpa: float | None = None
    bending_mpa: float | None = None
    tension_mpa: float | None = None
    compression_mpa: float | None = None
    shear_mpa: float | None = None
    yield_mpa: float | None = None
    strength_density_kg_m3: float | None = None
    soft_from_c: float | None = None
    dry_fraction: float = field(default=1.0, metadata={"most": 1.0})
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})
    strength_source: str = ""
    stock_source: str = ""
    laser_source: str = ""

    @property
    def comes_as(self) -> tuple[str, ...]:
        """Forms in which it can be had, of: sheet, stick, tube, rod, print, cover, glue, foam."""
        forms = [
            ("sheet", bool(self.sheets)),
            ("stick", self.kind != "tube" and bool(self.sections_mm)),
            ("tube", self.kind == "tube"),
            ("rod", bool(self.diameters_mm)),
        ]
        found = [form for form, here in forms if here]
        if self.kind in ("print", "cover", "glue", "foam"):
            found.append(self.kind)
        return tuple(found)

    def at_density(self, density_kg_m3: float, sigma_kg_m3: float = 0.0) -> Material:
        """The same material as weighed: woods gain or lose strength in proportion to density.

        Args:
            density_kg_m3: above 0, of the very piece.
            sigma_kg_m3: what is left unknown after weighing.
        """
        values: dict[str, float] = {}
        if self.strength_density_kg_m3 and self.density_kg_m3:
            ratio = density_kg_m3 / self.density_kg_m3
            for key in GROWS_WITH_DENSITY:
                value = getattr(self, key)
                if value is not None:
                    values[key] = value * ratio
        return replace(
            self,
            density_kg_m3=density_kg_m3,
            density_sigma_kg_m3=sigma_kg_m3,
            **values,  # type: ignore[arg-type]
        )

    def nearest_thickness_mm(self, wanted_mm: float) -> float | None:
        """The stock thickness nearest to the one wanted; None where there is no sheet stock."""
        return min(self.thicknesses_mm, key=lambda t: (abs(t - wanted_mm), t), default=None)
