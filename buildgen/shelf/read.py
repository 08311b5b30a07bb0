"""Shelf files (TOML) into records, every fault told with file, entry and key."""

from __future__ import annotations

import math
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import Field, fields, replace
from pathlib import Path
from typing import Any

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
from buildgen.shelf.material import GROWS_WITH_DENSITY, Material

Entry = Material | Screw | Insert | BoltPattern | ServoClass | Wheel | Connector | Wire
Raw = dict[str, dict[str, Any]]

# Table of a shelf file -> the record each of its entries becomes.
TABLES: Mapping[str, type[Entry]] = {
    "material": Material,
    "screw": Screw,
    "insert": Insert,
    "bolts": BoltPattern,
    "servo": ServoClass,
    "wheel": Wheel,
    "connector": Connector,
    "wire": Wire,
}

# `like = "balsa"` begins an entry as a copy of balsa.
_LIKE = "like"
_SOURCE_DENSITY = "strength_density_kg_m3"


class _Fault(Exception):
    """One value that will not do; carries what to say and what to try."""

    def __init__(self, says: str, hint: str) -> None:
        super().__init__(says)
        self.says, self.hint = says, hint


def read_file(path: Path) -> dict[str, Raw]:
    """The raw tables of one shelf file.

    Raises:
        DesignError: not there, not readable, not TOML, or with a table that is none of TABLES.
    """
    try:
        data = tomllib.loads(path.read_bytes().decode("utf-8"))
    except OSError as error:
        says = f"The shelf file cannot be read: {error.strerror or error}."
        raise DesignError(Problem("", says, "Check its path.", str(path))) from error
    except UnicodeDecodeError as error:
        says = "The shelf file is not UTF-8 text."
        raise DesignError(Problem("", says, "Save it as plain UTF-8.", str(path))) from error
    except tomllib.TOMLDecodeError as error:
        hint = "Each entry is a table such as [material.my-balsa] with lines key = value."
        raise DesignError(Problem("", f"Not valid TOML: {error}.", hint, str(path))) from error
    problems = list(_stray_tables(data, str(path)))
    if problems:
        raise DesignError(*problems)
    return data


def _stray_tables(data: Mapping[str, Any], file: str) -> list[Problem]:
    problems = []
    for table, entries in data.items():
        if table not in TABLES:
            says = f'There is no table "{table}" on the shelf.'
            problems.append(Problem(table, says, nearest(table, TABLES), file))
        elif not isinstance(entries, dict):
            says = "This is a value where a table of entries belongs."
            problems.append(Problem(table, says, f"Write [{table}.NAME].", file))
        else:
            for name, entry in entries.items():
                if not isinstance(entry, dict):
                    says = "This is a value where an entry belongs."
                    hint = f"Write [{table}.NAME] with lines key = value."
                    problems.append(Problem(f"{table}.{name}", says, hint, file))
    return problems


def flattened(table: str, raw: Raw, file: str, base: Raw) -> Raw:
    """Entries with everything they begin from filled in; no ``like`` is left.

    Args:
        table: one of TABLES.
        raw: entry name -> keys as written in one file.
        file: named in problems.
        base: flattened entries beneath: one of the same name is overridden key by key.

    Raises:
        DesignError: an entry is like one that is not there, or like itself.
    """
    done: Raw = {}

    def flat(name: str, asking: tuple[str, ...]) -> dict[str, Any]:
        if name in done or name not in raw:
            return done.get(name) or base[name]
        keys = dict(raw[name])
        like = keys.pop(_LIKE, name)
        under = base.get(name, {})
        if like != name:
            if not isinstance(like, str) or like in asking or not (like in raw or like in base):
                says = f"{like!r} is no other entry of this table to begin from."
                hint = nearest(str(like), {*raw, *base} - {name})
                raise DesignError(Problem(f"{table}.{name}.{_LIKE}", says, hint, file))
            under = flat(like, (*asking, like))
        done[name] = _inherit(under, keys)
        return done[name]

    for name in raw:
        flat(name, (name,))
    return done


def _inherit(under: Mapping[str, Any], keys: Mapping[str, Any]) -> dict[str, Any]:
    """Keys written over keys beneath; strengths written anew hold at the entry's own density."""
    merged = {**under, **keys}
    at, density = under.get(_SOURCE_DENSITY), merged.get("density_kg_m3")
    anew = [key for key in GROWS_WITH_DENSITY if key in keys]
    if not anew or not at or _SOURCE_DENSITY in keys or not isinstance(density, (int, float)):
        return merged
    for key in GROWS_WITH_DENSITY:
        if key in under and key not in keys:
            merged[key] = under[key] * density / at
    merged[_SOURCE_DENSITY] = density
    return merged


def records(table: str, flat: Raw, file: str) -> dict[str, Entry]:
    """Make the records of one table from flattened entries.

    Raises:
        DesignError: every fault of the table, with entry and key.
    """
    made: dict[str, Entry] = {}
    problems: list[Problem] = []
    for name, keys in flat.items():
        try:
            made[name] = _record(table, name, keys, file)
        except DesignError as error:
            problems.extend(error.problems)
    if problems:
        raise DesignError(*problems)
    return made


def _record(table: str, name: str, keys: Mapping[str, Any], file: str) -> Entry:
    record = TABLES[table]
    known = {f.name: f for f in fields(record) if f.name != "name"}
    values: dict[str, Any] = {}
    problems: list[Problem] = []
    for key, value in keys.items():
        path = f"{table}.{name}.{key}"
        if key not in known:
            hint = nearest(key, [*known, _LIKE])
            problems.append(Problem(path, "There is no such key.", hint, file))
            continue
        try:
            values[key] = _value(known[key], value)
        except _Fault as fault:
            problems.append(Problem(path, fault.says, fault.hint, file))
    if problems:
        raise DesignError(*problems)
    entry = record(name=name, **values)
    problems.extend(_lacks(table, entry, file))
    if problems:
        raise DesignError(*problems)
    return _scaled(entry) if isinstance(entry, Material) else entry


def _scaled(material: Material) -> Material:
    """Bring strength values from the density of their source to that of the entry."""
    at = material.strength_density_kg_m3
    if not at or not material.density_kg_m3:
        return material
    as_published = replace(material, density_kg_m3=at)
    return as_published.at_density(material.density_kg_m3, material.density_sigma_kg_m3)


# What an entry must say to be of any use: table -> keys that may not be left at nothing.
_NEEDED: Mapping[str, tuple[str, ...]] = {
    "screw": ("diameter_mm", "clearance_mm", "lengths_mm"),
    "insert": ("hole_mm", "length_mm"),
    "bolts": ("circles_mm", "holes", "angles_deg"),
    "servo": ("length_mm", "width_mm", "height_mm", "mass_g"),
    "wheel": ("diameter_mm", "width_mm"),
    "wire": ("resistance_mohm_m", "mass_g_m"),
}


def _lacks(table: str, entry: Entry, file: str) -> list[Problem]:
    needed = _NEEDED.get(table, ())
    if isinstance(entry, Material):
        needed = ("area_density_g_m2",) if entry.kind == "cover" else ("density_kg_m3",)
    hint = 'Give it, or begin from another entry with like = "NAME".'
    problems = [
        Problem(f"{table}.{entry.name}", f"{key} is missing.", hint, file)
        for key in needed
        if not getattr(entry, key)
    ]
    if isinstance(entry, BoltPattern):
        counts = {len(entry.circles_mm), len(entry.holes), len(entry.angles_deg)}
        if len(counts) > 1:
            says = "circles_mm, holes and angles_deg differ in length."
            hint = "Give one number of holes and one angle for each hole circle."
            problems.append(Problem(f"{table}.{entry.name}", says, hint, file))
    return problems


def _value(field: Field[Any], value: Any) -> Any:
    return _READERS[str(field.type)](value, field)


def _text(value: Any, field: Field[Any]) -> str:
    if not isinstance(value, str):
        raise _Fault(f"{value!r} is not text.", "Put it in quotes.")
    allowed = field.metadata.get("one_of")
    if allowed and value not in allowed:
        names = ", ".join(f'"{name}"' for name in allowed)
        raise _Fault(f'"{value}" is not allowed here.', f"Allowed: {names}.")
    return value


def _flag(value: Any, _field: Field[Any]) -> bool:
    if not isinstance(value, bool):
        raise _Fault(f"{value!r} is neither true nor false.", "Write true or false.")
    return value


def _number(value: Any, field: Field[Any]) -> float:
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        raise _Fault(f"{value!r} is not a number.", "Write a number without quotes and unit.")
    most = field.metadata.get("most")
    least = field.metadata.get("least", 0.0)
    if not math.isfinite(value) or value < least or (most is not None and value > most):
        limit = f"from {least:g} to {most:g}" if most is not None else f"of {least:g} or more"
        raise _Fault(f"{value:g} is not a number {limit}.", f"Give a number {limit}.")
    return float(value)


def _numbers(value: Any, field: Field[Any]) -> tuple[float, ...]:
    if not isinstance(value, list):
        raise _Fault(f"{value!r} is not a list.", "Write numbers in brackets: [1.5, 2, 3].")
    return tuple(_number(item, field) for item in value)


def _size(value: Any, field: Field[Any]) -> tuple[float, float]:
    if not isinstance(value, list) or len(value) != 2:
        raise _Fault(f"{value!r} is not a pair of numbers.", "Write two: [100, 1000].")
    return _number(value[0], field), _number(value[1], field)


def _sizes(value: Any, field: Field[Any]) -> tuple[tuple[float, float], ...]:
    if not isinstance(value, list):
        raise _Fault(f"{value!r} is not a list.", "Write pairs: [[100, 1000], [76.2, 914.4]].")
    return tuple(_size(item, field) for item in value)


_READERS: Mapping[str, Callable[[Any, Field[Any]], Any]] = {
    "str": _text,
    "bool": _flag,
    "float": _number,
    "float | None": _number,
    "tuple[float, ...]": _numbers,
    "Size": _size,
    "tuple[Size, ...]": _sizes,
}
