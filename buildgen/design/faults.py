"""Faults found by the validation library, told to the builder with file, line and key."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from pydantic import BaseModel, ValidationError

from buildgen.design.follow import Trail, follow, is_model, item_kind, limits_of, opened_kinds
from buildgen.design.locate import Lines, Path, path_from_text, path_text
from buildgen.design.toml_text import read_toml
from buildgen.design.unknown import unknown_key
from buildgen.design.wording import Fault, allowed, say, shown
from buildgen.problems import Problem

__all__ = ["fault", "place", "problems_from", "read_toml"]

Written = Mapping[Path, str]


@dataclass(frozen=True)
class _Found:
    """One fault of the library with what lies at its place."""

    raw: Mapping[str, Any]
    trail: Trail

    @property
    def kind(self) -> str:
        return str(self.raw["type"])


def fault(says: str, hint: str = "", *at: str | int) -> ValueError:
    """An error for a model's own validator to raise.

    Args:
        says: what is wrong, one sentence.
        hint: what to do about it.
        at: keys and list places from the model to the value at fault, as ``"tip_chord_mm"``.
    """
    return ValueError(says, hint, at)


def problems_from(
    error: ValidationError,
    model: type[BaseModel],
    file: str,
    lines: Lines,
    written_keys: Written,
) -> tuple[Problem, ...]:
    """Every fault, in the order of the file.

    Args:
        error: raised when the definition was checked.
        model: that it was checked against.
        file: name of the file, for the message.
        lines: of the file's text.
        written_keys: path with metric keys -> last key as it is written, from ``to_metric``.
    """
    raws = error.errors(include_url=False)
    found = [_Found(raw, follow(model, raw["loc"])) for raw in raws]
    told: dict[tuple[int, str, str], Problem] = {}
    for one in _collapsed(found, 0):
        path, says, hint = _told(one, model, written_keys)
        written = written_path(path, written_keys)
        problem = Problem(path_text(written), says, hint).at(file, lines.of(written))
        told.setdefault((problem.line, problem.path, says), problem)
    return tuple(told[key] for key in sorted(told))


def place(problem: Problem, file: str, lines: Lines, written_keys: Written) -> Problem:
    """A problem found later, by its path, with the key as written and its file and line."""
    written = written_path(path_from_text(problem.path), written_keys)
    return replace(problem, path=path_text(written)).at(file, lines.of(written))


def written_path(path: Sequence[str | int], written_keys: Written) -> Path:
    """The path with its keys as they are written in the file."""
    steps: list[str | int] = []
    for n, step in enumerate(path):
        steps.append(written_keys.get(tuple(path[: n + 1]), step))
    return tuple(steps)


def _collapsed(found: Sequence[_Found], depth: int) -> list[_Found]:
    """One account of each union: of its branches the one that was most likely meant.

    Args:
        found: faults that agree about the unions above ``depth``.
        depth: number of unions on the way already settled.
    """
    kept: list[_Found] = []
    groups: dict[Path, list[_Found]] = {}
    for one in found:
        if len(one.trail.unions) <= depth:
            kept.append(one)
        else:
            groups.setdefault(_union_path(one, depth), []).append(one)
    for group in groups.values():
        branches: dict[str, list[_Found]] = {}
        for one in group:
            branches.setdefault(one.trail.unions[depth][1], []).append(one)
        chosen = _likeliest(branches, depth)
        if chosen is None:
            kept.append(_of_the_union(group[0], depth))
        else:
            kept.extend(_collapsed(branches[chosen], depth + 1))
    return kept


def _union_path(one: _Found, depth: int) -> Path:
    return one.trail.path[: one.trail.unions[depth][0]]


def _likeliest(branches: Mapping[str, Sequence[_Found]], depth: int) -> str | None:
    """The branch whose kind of value was given; None where it fits none of them."""
    if len(branches) == 1:
        return next(iter(branches))
    fitting = [
        label
        for label, found in branches.items()
        if not any(_wrong_kind(one, depth) for one in found)
    ]
    return min(fitting, key=lambda label: len(branches[label]), default=None)


def _wrong_kind(one: _Found, depth: int) -> bool:
    """Whether a branch was not meant at all: another sort of value stands there."""
    if len(one.trail.path) > one.trail.unions[depth][0]:
        return False
    if one.kind == "literal_error":
        return not isinstance(one.raw["input"], str)
    return one.kind.endswith("_type")


def _of_the_union(one: _Found, depth: int) -> _Found:
    """The fault of a value that fits no branch, told of the union as a whole."""
    unions = one.trail.unions[:depth]
    trail = replace(one.trail, unions=unions)
    return _Found({**one.raw, "type": "union"}, trail)


def _told(one: _Found, model: type[BaseModel], written_keys: Written) -> tuple[Path, str, str]:
    """Metric path of a fault, what is wrong, and what to do."""
    raw, trail = one.raw, one.trail
    path = trail.path
    written = written_path(path, written_keys)
    if one.kind == "extra_forbidden":
        says, hint = unknown_key(
            str(path[-1]), raw["input"], trail.owner, model, str(written[-1])
        )
        return path, says, hint
    if one.kind in ("union_tag_invalid", "union_tag_not_found"):
        path = (*path, str(raw["ctx"]["discriminator"]).strip("'"))
    elif one.kind == "missing" and isinstance(path[-1], int):
        return path[:-1], *say(_fault(one, written))
    elif one.kind == "value_error":
        path = (*path, *_below(raw))
    return path, *_with_alternatives(one, _fault(one, written), model)


def _below(raw: Mapping[str, Any]) -> Path:
    """Where under its table a validator of the definition's own points."""
    error = raw.get("ctx", {}).get("error")
    args = error.args if isinstance(error, ValueError) else ()
    return tuple(args[2]) if len(args) > 2 else ()


def _fault(one: _Found, written: Path) -> Fault:
    trail, raw = one.trail, one.raw
    keys = [step for step in written if isinstance(step, str)]
    info = trail.field
    limits: list[Any] = list(trail.limits)
    for kind in trail.kinds:
        limits.extend(limits_of(kind))
    return Fault(
        kind=one.kind,
        key=keys[-1] if keys else "",
        header=".".join(keys),
        item=bool(written) and isinstance(written[-1], int),
        value=raw["input"],
        kinds=trail.kinds,
        limits=limits,
        about=(info.description or "") if info is not None else "",
        context=raw.get("ctx", {}),
    )


def _with_alternatives(one: _Found, told: Fault, model: type[BaseModel]) -> tuple[str, str]:
    """The wording; where a union stands at the very place, with all that it allows."""
    if one.kind == "union":
        whole = follow(model, _plain(one))
        told = replace(told, kinds=whole.kinds)
        return f"{shown(told.value, told.key)} cannot stand here.", f"Allowed: {allowed(told)}."
    says, hint = say(told)
    unions = one.trail.unions
    if unions and unions[-1][0] == len(one.trail.path) and one.kind != "value_error":
        whole = follow(model, _plain(one))
        if len([k for kind in whole.kinds for k in opened_kinds(kind)]) > 1:
            near = hint.split("?")[0] + "? " if hint.startswith("Did you") else ""
            limits = hint.removeprefix("Allowed: ") if "greater" in one.kind else ""
            every = allowed(replace(told, kinds=whole.kinds))
            hint = f"{near}{'A number ' + limits + ' ' if limits else ''}Allowed: {every}."
    return says, hint


def _plain(one: _Found) -> Path:
    """The place of a fault up to, and without, its last union branch."""
    loc = tuple(one.raw["loc"])
    keys = len(one.trail.path)
    taken, at = [], 0
    labels = dict.fromkeys(range(len(loc)), False)
    del labels
    for step in loc:
        if len(taken) - len([u for u in one.trail.unions if u[0] < at]) >= keys:
            break
        taken.append(step)
        at += 1
    return tuple(taken)
