"""Every fault that the validation library found, with file, line, key and words of our own."""

from __future__ import annotations

import difflib
from collections.abc import Mapping
from typing import Any

from pydantic import BaseModel, ValidationError

from buildgen.design.follow import Trail, follow, is_model, keys_of, limits_of, tables
from buildgen.design.locate import Lines, Path, path_text
from buildgen.design.units import ENDINGS
from buildgen.design.wording import Fault, say
from buildgen.problems import Problem, nearest

UNIT_ENDINGS = ("_mm", "_in", "_g", "_oz", "_deg")
NOT_OURS = ("_cm", "_m", "_kg", "_lb", "_ft", "_inch", "_rad")


def problems_from(
    error: ValidationError,
    model: type[BaseModel],
    file: str,
    lines: Lines,
    written: Mapping[Path, str],
) -> tuple[Problem, ...]:
    """All faults in the order of their lines.

    Args:
        error: of the validation.
        model: what was validated.
        file: its name, for the reader.
        lines: where each key stands.
        written: keys that were renamed on conversion, as written.
    """
    found: dict[tuple[str, str], Problem] = {}
    for entry in error.errors(include_url=False):
        if _only_follows(dict(entry)):
            continue
        problem = _problem(dict(entry), model, lines, written)
        found.setdefault((problem.path, problem.says), problem)
    ordered = sorted(found.values(), key=lambda p: (p.line, p.path))
    return tuple(p.at(file, p.line) for p in ordered)


def _only_follows(entry: dict[str, Any]) -> bool:
    """A list called too short only because its items are at fault themselves."""
    given, least = entry.get("input"), entry.get("ctx", {}).get("min_length", 0)
    return entry["type"] == "too_short" and isinstance(given, list | tuple) and len(given) >= least


def _problem(
    entry: dict[str, Any], model: type[BaseModel], lines: Lines, written: Mapping[Path, str]
) -> Problem:
    trail = follow(model, entry["loc"])
    path = as_written(trail.path, written)
    if entry["type"] == "extra_forbidden":
        says, hint = _unknown(path, entry["loc"], model)
    else:
        says, hint = say(_fault(entry, trail, path))
    return Problem(path_text(path), says, hint, "", lines.of(path))


def as_written(path: Path, written: Mapping[Path, str]) -> Path:
    """The path with every key as it stands in the file."""
    return tuple(written.get(path[: n + 1], step) if isinstance(step, str) else step
                 for n, step in enumerate(path))


def _fault(entry: dict[str, Any], trail: Trail, path: Path) -> Fault:
    keys = [step for step in path if isinstance(step, str)]
    info = trail.field
    limits = [*trail.limits]
    if info is not None:
        limits += limits_of(info.annotation, info.metadata)
    return Fault(
        entry["type"], keys[-1] if keys else "", ".".join(keys),
        bool(path) and isinstance(path[-1], int), entry.get("input"), trail.kinds, limits,
        (info.description or "") if info is not None else "", entry.get("ctx", {}),
    )


def _unknown(path: Path, loc: tuple[str | int, ...], model: type[BaseModel]) -> tuple[str, str]:
    """A key that the table does not have: its nearest one, its unit, or where it belongs."""
    key = str(path[-1])
    owner = _table_of(follow(model, loc[:-1])) or model
    valid = list(keys_of(owner))
    both = [*valid, *(k[: -len(metric)] + ending for k in valid
                      for ending, (metric, _) in ENDINGS.items() if k.endswith(metric))]
    says = "is no key here."
    stem = next((key.removesuffix(e) for e in (*NOT_OURS, *UNIT_ENDINGS) if key.endswith(e)), key)
    united = [k for k in valid if any(k == stem + e for e in UNIT_ENDINGS)]
    if united and united[0] != key:
        return says, f'Write "{united[0]}": the key carries its unit.'
    if difflib.get_close_matches(key.lower(), both, n=1, cutoff=0.6):
        return says, nearest(key, both)
    elsewhere = [header for header, table in tables(model) if header and key in keys_of(table)]
    if elsewhere:
        return says, f"It belongs under {' or '.join(dict.fromkeys(elsewhere))}."
    return says, f"Allowed: {', '.join(sorted(valid))}."


def _table_of(trail: Trail) -> type[BaseModel] | None:
    return next((kind for kind in trail.kinds if is_model(kind)), None)
