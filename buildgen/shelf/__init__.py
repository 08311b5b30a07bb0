"""The shelf: materials, stock sizes and bought things, each with its source.

``load_shelf()`` gives the shipped shelf, ``load_shelf([Path("mine.toml")])`` with the builder's
own entries on top. Shipped entries are read the first time something of their sort is asked for.
"""

from buildgen.shelf.bought import (
    BoltPattern,
    Connector,
    Insert,
    Screw,
    ServoClass,
    Wheel,
    Wire,
)
from buildgen.shelf.fits import clearance_hole_mm, nut_mass_g, screw_length_mm, screw_mass_g
from buildgen.shelf.lookup import Shelf, load_shelf
from buildgen.shelf.material import Material

__all__ = [
    "BoltPattern",
    "Connector",
    "Insert",
    "Material",
    "Screw",
    "ServoClass",
    "Shelf",
    "Wheel",
    "Wire",
    "clearance_hole_mm",
    "load_shelf",
    "nut_mass_g",
    "screw_length_mm",
    "screw_mass_g",
]
