"""From the place of a fault, as the validation library gives it, back to the model's fields.

Between the keys of the definition such a place also holds labels of union branches
(``("power", "nose", "motor")`` for ``power.motor``): they are told apart by walking the model.
"""

from __future__ import annotations

import re
import types
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from typing import Annotated, Any, Literal, Union, get_args, get_origin

from pydantic import BaseModel, Discriminator
from pydantic.fields import FieldInfo

from buildgen.design.locate import Path

Model = type[BaseModel]


@dataclass(frozen=True)
class Trail:
    """What lies at a place.

    Attributes:
        path: keys and list places only.
        unions: (length of the path, label) where a branch of a union was taken.
        owner: the model that holds the last key; None inside a plain list or table.
        field: the field of the last key, where it is one.
        kinds: annotations that may stand there; more than one in an unlabelled union.
        limits: constraint objects found on the way into ``kinds``.
    """

    path: Path = ()
    unions: tuple[tuple[int, str], ...] = ()
    owner: Model | None = None
    field: FieldInfo | None = None
    kinds: tuple[Any, ...] = ()
    limits: tuple[Any, ...] = ()


@dataclass
class _Open:
    """An annotation with its wrappings off."""

    members: list[Any] = field(default_factory=list)
    limits: list[Any] = field(default_factory=list)
    tag_key: str = ""

    @property
    def labelled(self) -> bool:
        return len(self.members) > 1


def _opened(annotation: Any, metadata: Sequence[Any] = (), tag_key: str = "") -> _Open:
    """Take off Annotated, aliases and None; split a union."""
    found = _Open(limits=list(metadata), tag_key=tag_key)
    for extra in metadata:
        key = getattr(extra, "discriminator", None)
        if isinstance(key, Discriminator):
            key = key.discriminator
        found.tag_key = found.tag_key or (key if isinstance(key, str) else "")
        if isinstance(extra, FieldInfo):
            found.limits.extend(extra.metadata)
    origin = get_origin(annotation)
    if hasattr(annotation, "__value__"):
        return _merged(found, _opened(annotation.__value__))
    if origin is Annotated:
        inner, *extras = get_args(annotation)
        return _merged(found, _opened(inner, extras))
    if origin in (Union, types.UnionType):
        parts = [part for part in get_args(annotation) if part is not type(None)]
        if len(parts) == 1:
            return _merged(found, _opened(parts[0]))
        found.members = parts
        return found
    found.members = [annotation]
    return found


def _merged(outer: _Open, inner: _Open) -> _Open:
    limits = outer.limits + inner.limits
    return _Open(inner.members, limits, inner.tag_key or outer.tag_key)


def opened_kinds(annotation: Any) -> list[Any]:
    """The plain annotations that may stand where this one does, None left out."""
    found: list[Any] = []
    for member in _opened(annotation).members:
        inner = _opened(member).members
        found.extend(inner if inner == [member] else opened_kinds(member))
    return found


def limits_of(annotation: Any, metadata: Sequence[Any] = ()) -> list[Any]:
    """Constraint objects (Gt, Le, MinLen ...) on an annotation."""
    return _opened(annotation, metadata).limits


def is_model(kind: Any) -> bool:
    return isinstance(kind, type) and issubclass(kind, BaseModel)


def key_of(name: str, info: FieldInfo) -> str:
    """The key of a field as it is written in a definition."""
    return info.alias or name


def field_of(model: Model, key: str) -> FieldInfo | None:
    """The field that is written with that key."""
    for name, info in model.model_fields.items():
        if key in (key_of(name, info), name):
            return info
    return None


def keys_of(model: Model) -> dict[str, FieldInfo]:
    """Every key of a table, as written."""
    return {key_of(name, info): info for name, info in model.model_fields.items()}


def item_kind(kind: Any, place: int = 0) -> Any:
    """What stands inside a list, tuple, set or table of values; None if it is none of these."""
    origin, args = get_origin(kind), get_args(kind)
    if origin is dict and len(args) == 2:
        return args[1]
    if origin is tuple and args:
        if args[-1] is Ellipsis:
            return args[0]
        return args[min(place, len(args) - 1)]
    return args[0] if origin in (list, set, frozenset, Sequence) and args else None


def follow(model: Model, loc: Sequence[str | int]) -> Trail:
    """Walk the model along the place of a fault."""
    path: list[str | int] = []
    unions: list[tuple[int, str]] = []
    owner: Model | None = None
    info: FieldInfo | None = None
    at = _opened(model)
    for n, step in enumerate(loc):
        if at.labelled and isinstance(step, str):
            unions.append((len(path), step))
            at = _branch(at, step)
            continue
        path.append(step)
        owner, info, at = _into(at, step, last=n == len(loc) - 1)
    kinds = tuple(at.members)
    return Trail(tuple(path), tuple(unions), owner, info, kinds, tuple(at.limits))


def _branch(at: _Open, label: str) -> _Open:
    """The members of a union that a label means."""
    fits = [m for m in at.members if _is_called(m, label, at.tag_key)]
    if len(fits) == 1:
        return _merged(_Open(limits=at.limits), _opened(fits[0]))
    return _Open(fits or at.members, at.limits)


def _is_called(member: Any, label: str, tag_key: str) -> bool:
    opened = _opened(member)
    kind = opened.members[0]
    if is_model(kind):
        info = field_of(kind, tag_key) if tag_key else None
        if info is not None:
            return label in literals(info.annotation)
        return re.search(rf"\b{re.escape(kind.__name__)}\b", label) is not None
    if get_origin(kind) is Literal:
        return label.startswith("literal")
    name = getattr(get_origin(kind) or kind, "__name__", "")
    # Labels read float, constrained-float, list[float], function-after[...].
    return bool(name) and re.match(rf"(constrained-)?{name}\b", label) is not None


def _into(at: _Open, step: str | int, last: bool) -> tuple[Model | None, FieldInfo | None, _Open]:
    """One key or list place down from an opened annotation."""
    for kind in at.members:
        if isinstance(step, str) and is_model(kind):
            info = field_of(kind, step)
            if info is not None:
                tag = info.discriminator if isinstance(info.discriminator, str) else ""
                return kind, info, _opened(info.annotation, info.metadata, tag)
            if last:
                return kind, None, _Open()
        place = step if isinstance(step, int) else 0
        inner = item_kind(kind, place)
        if inner is not None:
            return None, None, _opened(inner)
    return None, None, _Open()


def literals(annotation: Any) -> tuple[Any, ...]:
    """The values a Literal allows, through wrappings and unions; () where there are none."""
    found: list[Any] = []
    for kind in opened_kinds(annotation):
        if get_origin(kind) is Literal:
            found.extend(get_args(kind))
    return tuple(found)


def tables(model: Model, head: str = "") -> Iterator[tuple[str, Model]]:
    """Every table a definition can have, with its header: ``[wing]``, ``[[wing.panel]]``."""
    yield from _tables(model, "", False, ())


def _tables(
    model: Model, path: str, many: bool, above: tuple[Model, ...]
) -> Iterator[tuple[str, Model]]:
    yield (f"[[{path}]]" if many else f"[{path}]") if path else "", model
    if model in above:
        return
    for key, info in keys_of(model).items():
        for kind in opened_kinds(info.annotation):
            inner, several = kind, False
            if not is_model(kind) and item_kind(kind) is not None:
                several = True
                inners = [k for k in opened_kinds(item_kind(kind)) if is_model(k)]
            else:
                inners = [inner] if is_model(inner) else []
            for found in inners:
                below = f"{path}.{key}" if path else key
                yield from _tables(found, below, several, (*above, model))
