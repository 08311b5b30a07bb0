"""The shelf itself: shipped entries, the builder's own on top, found by name."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path
from types import MappingProxyType
from typing import TypeVar

from buildgen.problems import DesignError, Problem, nearest
from buildgen.shelf.bought import (
    BoltPattern,
    Connector,
    Insert,
    Screw,
    ServoClass,
    Wheel,
    Wire,
)
from buildgen.shelf.material import Material
from buildgen.shelf.read import TABLES, Entry, Raw, flattened, read_file, records

_DATA = Path(__file__).parent / "data"

# Files read for a table the first time something of it is asked for.
_FILES: Mapping[str, tuple[str, ...]] = {
    "material": ("wood", "composite", "metal", "plastic", "cover", "glue"),
    "screw": ("screws",),
    "insert": ("screws",),
    "bolts": ("motors",),
    "servo": ("servos",),
    "wheel": ("wheels",),
    "connector": ("electrical",),
    "wire": ("electrical",),
}
_WORDS: Mapping[str, str] = {
    "material": "material",
    "screw": "screw size",
    "insert": "insert",
    "bolts": "motor hole pattern",
    "servo": "servo class",
    "wheel": "wheel",
    "connector": "connector",
    "wire": "wire",
}

E = TypeVar("E", bound=Entry)


@cache
def _shipped_keys(table: str) -> Raw:
    raw: Raw = {}
    for stem in _FILES[table]:
        raw.update(read_file(_DATA / f"{stem}.toml").get(table, {}))
    return flattened(table, raw, f"{table} shelf", {})


@cache
def _shipped(table: str) -> Mapping[str, Entry]:
    return MappingProxyType(records(table, _shipped_keys(table), f"{table} shelf"))


@dataclass(frozen=True, slots=True)
class Shelf:
    """Everything that can be named in a definition; ``load_shelf`` makes one.

    Attributes:
        own: entries of the builder's own files, by table and name; they win over shipped ones.
    """

    own: Mapping[str, Mapping[str, Entry]] = field(default_factory=dict)

    def material(self, name: str, path: str = "", form: str = "") -> Material:
        """The material of that name.

        Args:
            name: as in the definition.
            path: key of the definition that asks, for the message.
            form: what it is wanted as (one of ``Material.comes_as``); "" for anything.

        Raises:
            DesignError: no such material, or it is not to be had in that form.
        """
        found = self._find("material", Material, name, path)
        if form and form not in found.comes_as:
            says = f'"{name}" does not come as {form}.'
            others = ", ".join(n for n in self.names("material") if self._comes_as(n, form))
            raise DesignError(Problem(path, says, f"These do: {others}."))
        return found

    def _comes_as(self, name: str, form: str) -> bool:
        return form in self._find("material", Material, name, "").comes_as

    def screw(self, name: str, path: str = "") -> Screw:
        """The screw size of that name (``M3``); raises DesignError where there is none."""
        return self._find("screw", Screw, name.upper(), path)

    def insert(self, name: str, path: str = "") -> Insert:
        """The heat-set insert for that screw size; raises DesignError where there is none."""
        return self._find("insert", Insert, name.upper(), path)

    def bolts(self, name: str, path: str = "") -> BoltPattern:
        """The motor hole pattern of that name; raises DesignError where there is none."""
        return self._find("bolts", BoltPattern, name, path)

    def servo(self, name: str, path: str = "") -> ServoClass:
        """The servo class of that name; raises DesignError where there is none."""
        return self._find("servo", ServoClass, name, path)

    def wheel(self, name: str, path: str = "") -> Wheel:
        """The wheel of that name; raises DesignError where there is none."""
        return self._find("wheel", Wheel, name, path)

    def connector(self, name: str, path: str = "") -> Connector:
        """The connector of that name; raises DesignError where there is none."""
        return self._find("connector", Connector, name, path)

    def wire(self, name: str, path: str = "") -> Wire:
        """The wire of that name (``awg-14``); raises DesignError where there is none."""
        return self._find("wire", Wire, name, path)

    def names(self, table: str) -> tuple[str, ...]:
        """Every name of one table of the shelf, sorted."""
        return tuple(sorted({*_shipped(table), *self.own.get(table, {})}))

    def _find(self, table: str, record: type[E], name: str, path: str) -> E:
        entry = self.own.get(table, {}).get(name) or _shipped(table).get(name)
        if not isinstance(entry, record):
            says = f'There is no {_WORDS[table]} "{name}" on the shelf.'
            raise DesignError(Problem(path, says, nearest(name, self.names(table))))
        return entry


def load_shelf(user_files: Sequence[Path] = ()) -> Shelf:
    """The shipped shelf with the builder's own files on top, later files over earlier ones.

    A user's entry of a shipped name overrides only the keys it writes; ``like = "balsa"``
    begins a new entry as a copy of another.

    Raises:
        DesignError: every fault found in the user's files, with file, entry and key.
    """
    own: dict[str, dict[str, Entry]] = {}
    beneath: dict[str, Raw] = {}
    problems: list[Problem] = []
    for path in user_files:
        try:
            data = read_file(Path(path))
        except DesignError as error:
            problems.extend(error.problems)
            continue
        for table in TABLES:
            raw = data.get(table)
            if not raw:
                continue
            base = beneath.setdefault(table, dict(_shipped_keys(table)))
            try:
                flat = flattened(table, raw, str(path), base)
                own.setdefault(table, {}).update(records(table, flat, str(path)))
                base.update(flat)
            except DesignError as error:
                problems.extend(error.problems)
    if problems:
        raise DesignError(*problems)
    return Shelf(MappingProxyType({t: MappingProxyType(e) for t, e in own.items()}))

