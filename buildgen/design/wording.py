"""What is wrong with one value of a definition, in a builder's words."""

from __future__ import annotations

import datetime
import math
import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any, Literal, get_args, get_origin

from buildgen.design.follow import is_model, item_kind, literals, opened_kinds
from buildgen.design.units import ENDINGS, written_value
from buildgen.problems import nearest

Said = tuple[str, str]

# Ending of a key -> (what its value is, the unit beside a figure).
UNITS: Mapping[str, tuple[str, str]] = {
    "_kg_m3": ("a density in kilograms per cubic metre", "kg/m3"),
    "_mm2": ("an area in square millimetres", "mm2"),
    "_mm": ("a length in millimetres", "mm"),
    "_in": ("a length in inches", "in"),
    "_oz": ("a mass in ounces", "oz"),
    "_g": ("a mass in grams", "g"),
    "_deg": ("an angle in degrees", "deg"),
    "_mah": ("a capacity in milliampere-hours", "mAh"),
    "_ohm": ("a resistance in ohms", "ohm"),
    "_rpm_v": ("revolutions per minute for each volt", "rpm/V"),
    "_a": ("a current in amperes", "A"),
}


@dataclass(frozen=True)
class Fault:
    """One fault of one value.

    Attributes:
        kind: the validation library's name for it.
        key: the last key of its path, as it is written.
        header: header of the table at this path, without brackets: ``wing.panel``.
        item: whether the value is one item of a list.
        value: as it is checked: metric.
        kinds: annotations of what may stand here.
        limits: constraint objects on it.
        about: the field's description.
        context: figures of the fault.
    """

    kind: str
    key: str = ""
    header: str = ""
    item: bool = False
    value: Any = None
    kinds: Sequence[Any] = ()
    limits: Sequence[Any] = ()
    about: str = ""
    context: Mapping[str, Any] = field(default_factory=dict)


def unit_ending(key: str) -> str:
    """The ending of a key that names its unit, "" where it has none."""
    return next((ending for ending in UNITS if key.endswith(ending) and key != ending), "")


def shown(value: Any, key: str = "") -> str:
    """A value as it is written in a definition, shortened; metric ones in the key's own unit."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, (int, float)):
        ending = unit_ending(key)
        if ending in ENDINGS and math.isfinite(value):
            value = written_value(value, ending)
        return f"{value:.10g}" if isinstance(value, float) else f"{str(value)[:24]}"
    if isinstance(value, str):
        short = value if len(value) <= 40 else value[:37] + "..."
        return f'"{short}"'
    if isinstance(value, (list, tuple)):
        return "an empty list" if not value else "a list"
    if isinstance(value, Mapping):
        return "a table"
    if isinstance(value, (datetime.date, datetime.time)):
        return "a date or time"
    return "this"


def one_of(values: Sequence[Any]) -> str:
    """"a", "b" or "c" as text."""
    texts = [shown(v) for v in values]
    return " or ".join([", ".join(texts[:-1]), texts[-1]] if len(texts) > 1 else texts)


def expected(kind: Any, key: str = "") -> str:
    """What an annotation wants, in words: "a length in millimetres", "a whole number"."""
    if get_origin(kind) is Literal:
        return one_of(get_args(kind))
    if is_model(kind):
        return "a table"
    inner = item_kind(kind)
    if inner is not None and get_origin(kind) is dict:
        return "a table of values"
    if inner is not None:
        args = get_args(kind)
        many = len(args) if get_origin(kind) is tuple and args[-1] is not Ellipsis else 0
        words = " or ".join(dict.fromkeys(expected(k) for k in opened_kinds(inner)))
        return f"a list of {many}, each {words}" if many else f"a list, each item {words}"
    if kind is float and unit_ending(key):
        return UNITS[unit_ending(key)][0]
    return {float: "a number", int: "a whole number", str: "text", bool: "true or false"}.get(
        kind, "another value"
    )


def allowed(fault: Fault) -> str:
    """Everything that may stand at a fault's place, joined with "or"."""
    kinds = [inner for kind in fault.kinds for inner in opened_kinds(kind)]
    words = list(dict.fromkeys(expected(kind, fault.key) for kind in kinds))
    return " or ".join(words) if words else "another value"


def bounds(fault: Fault) -> str:
    """The range of a number: "above 0, at most 20000 mm"."""
    words = {"gt": "above", "ge": "at least", "lt": "below", "le": "at most"}
    found: dict[str, float] = {}
    for limit in (*fault.limits, fault.context):
        for name in words:
            value = limit.get(name) if isinstance(limit, Mapping) else getattr(limit, name, None)
            if isinstance(value, (int, float)):
                found[name] = value
    ending = unit_ending(fault.key)
    unit = f" {UNITS[ending][1]}" if ending else ""
    text = ", ".join(f"{words[n]} {shown(found[n], fault.key)}" for n in words if n in found)
    return text + unit if text else ""


def _assigned(fault: Fault, value: str) -> str:
    return value if fault.item else f"{fault.key} = {value}"


def _missing(fault: Fault) -> Said:
    about = fault.about.rstrip(".")
    note = f" ({about[0].lower()}{about[1:]})" if about else ""
    inner = [k for kind in fault.kinds for k in opened_kinds(kind)]
    if fault.item:
        return f"The list is too short: it wants {allowed(fault)} more.", ""
    if any(is_model(kind) for kind in inner):
        return "This table is missing.", f"Begin it with [{fault.header}]{note}."
    items = [k for kind in inner for k in opened_kinds(item_kind(kind)) if is_model(k)]
    if items:
        return "There must be at least one of these.", f"Begin each with [[{fault.header}]]{note}."
    return "This key is missing.", f"Give {allowed(fault)}{note}."


def _range(fault: Fault) -> Said:
    if isinstance(fault.value, float) and not math.isfinite(fault.value):
        return _finite(fault)
    words = {
        "greater_than": ("gt", "above"),
        "greater_than_equal": ("ge", "at least"),
        "less_than": ("lt", "below"),
        "less_than_equal": ("le", "at most"),
    }
    name, word = words[fault.kind]
    limit = shown(fault.context.get(name), fault.key)
    return f"{shown(fault.value, fault.key)} is not {word} {limit}.", f"Allowed: {bounds(fault)}."


def _finite(fault: Fault) -> Said:
    limits = bounds(fault)
    hint = f"Allowed: {limits}." if limits else "Give an ordinary number."
    return f"{shown(fault.value)} is no number to build with.", hint


def _multiple(fault: Fault) -> Said:
    step = shown(fault.context.get("multiple_of"), fault.key)
    return f"{shown(fault.value, fault.key)} is not a multiple of {step}.", ""


def _number(fault: Fault) -> Said:
    value = fault.value
    if isinstance(value, str):
        return _number_as_text(fault, value.strip())
    return f"{shown(value)} stands where a number belongs.", f"Give {allowed(fault)}."


def _number_as_text(fault: Fault, text: str) -> Said:
    """A number in quotes, with a comma, with its unit, or no number at all."""
    says = f"{shown(text)} is text where a number belongs."
    if fault.key.endswith(tuple(ENDINGS)):
        inches = UNITS[unit_ending(fault.key)][0]
        hint = 'Write a number, or a fraction in quotes: 1.5, "3/32", "1 1/2".'
        return f"{shown(text)} is not {inches}.", hint
    plain = re.fullmatch(r"([+-]?\d+(?:[.,]\d+)?)\s*(mm|cm|m|in|inch|\"|g|kg|oz|deg|°|%)?", text)
    if plain:
        figure = plain[1].replace(",", ".")
        scale = {"cm": 10.0, "m": 1000.0, "kg": 1000.0, "%": 0.01}.get(plain[2] or "", 1.0)
        if plain[2] in ("in", "inch", '"', "oz"):
            stem = fault.key.removesuffix(unit_ending(fault.key))
            other = "_oz" if plain[2] == "oz" else "_in"
            return says, f"Write {stem}{other} = {figure}."
        if scale != 1.0:
            figure = f"{float(figure) * scale:.10g}"
        return says, f"Write {_assigned(fault, figure)} without quotes."
    if re.fullmatch(r"(\d+[\s-]+)?\d+\s*/\s*\d+", text) and fault.key.endswith(("_mm", "_g")):
        other = "_in" if fault.key.endswith("_mm") else "_oz"
        stem = fault.key.removesuffix(unit_ending(fault.key))
        return says, f'Write {stem}{other} = "{text}".'
    return says, f"Give {allowed(fault)}."


def _whole(fault: Fault) -> Said:
    if isinstance(fault.value, float):
        return f"{shown(fault.value)} is not a whole number.", "Give a whole number, such as 3."
    return _number(fault)


def _flag(fault: Fault) -> Said:
    value = str(fault.value).lower()
    says = f"{shown(fault.value)} is neither true nor false."
    for word, meant in (("true", "true yes on 1"), ("false", "false no off 0")):
        if value in meant.split():
            return says, f"Write {_assigned(fault, word)}."
    return says, "Write true or false, without quotes."


def _text(fault: Fault) -> Said:
    says = f"{shown(fault.value)} stands where text belongs."
    if isinstance(fault.value, (int, float)):
        quoted = f'"{shown(fault.value)}"'
        return says, f"Put it in quotes: {_assigned(fault, quoted)}."
    return says, "Give text in quotes."


def _text_length(fault: Fault) -> Said:
    least, most = fault.context.get("min_length"), fault.context.get("max_length")
    if least is not None:
        what = "The text is empty." if fault.value == "" else f"{shown(fault.value)} is too short."
        return what, f"Give at least {least} character{'s' if least != 1 else ''}."
    return f"{shown(fault.value)} is too long.", f"Give at most {most} characters."


def _pattern(fault: Fault) -> Said:
    pattern = str(fault.context.get("pattern", ""))
    hint = f"It must fit the pattern {pattern}."
    if pattern == "^[a-z0-9][a-z0-9-]*$":
        tidy = re.sub(r"[^a-z0-9]+", "-", str(fault.value).lower()).strip("-")
        hint = "Use small letters, digits and hyphens, a letter or digit first"
        hint += f': "{tidy}".' if tidy else "."
    return f"{shown(fault.value)} cannot be used here.", hint


def _choice(fault: Fault) -> Said:
    names = [v for kind in fault.kinds for v in literals(kind)]
    says = f"{shown(fault.value)} is not one of the words allowed here."
    if not isinstance(fault.value, str):
        says = f"{shown(fault.value)} stands where a word belongs."
    near = nearest(str(fault.value), [str(n) for n in names]) if names else ""
    hint = f"Allowed: {one_of(names)}." if names else ""
    return says, f"{near} {hint}" if near.startswith("Did") else hint


def _list(fault: Fault) -> Said:
    if isinstance(fault.value, Mapping):
        inner = [k for kind in fault.kinds for k in opened_kinds(item_kind(kind))]
        if any(is_model(k) for k in inner):
            says = f"[{fault.header}] stands where there may be several."
            return says, f"Write [[{fault.header}]] with double brackets."
    hint = f"Give {allowed(fault)}, in brackets."
    if isinstance(fault.value, (int, float)) and not isinstance(fault.value, bool):
        hint = f"Put it in brackets: {_assigned(fault, f'[{shown(fault.value, fault.key)}]')}."
    return f"{shown(fault.value, fault.key)} stands where a list belongs.", hint


def _list_length(fault: Fault) -> Said:
    least, most = fault.context.get("min_length"), fault.context.get("max_length")
    limit, word = (least, "at least") if least is not None else (most, "at most")
    count = fault.context.get("actual_length")
    if count is None:
        count = len(fault.value) if isinstance(fault.value, (list, tuple)) else 0
    inner = [k for kind in fault.kinds for k in opened_kinds(item_kind(kind))]
    if any(is_model(k) for k in inner):
        says = f"There {'is' if count == 1 else 'are'} {count or 'none'} of [[{fault.header}]]."
    else:
        says = f"The list has {count or 'no'} item{'s' if count != 1 else ''}."
    return says, f"Give {word} {limit}."


def _table(fault: Fault) -> Said:
    if isinstance(fault.value, (list, tuple)) and not fault.item:
        says = f"[[{fault.header}]] stands where there is one only."
        return says, f"Write [{fault.header}] with single brackets."
    says = f"{shown(fault.value)} stands where a table belongs."
    if fault.item:
        return says, "Write {key = value, ...}, or each as a table in double brackets."
    return says, f"Write [{fault.header}] with its keys on lines of their own below it."


def _tag(fault: Fault) -> Said:
    given = fault.context.get("tag")
    names = re.findall(r"'([^']*)'", str(fault.context.get("expected_tags", "")))
    if given is None:
        return "This key is missing.", f"Give {one_of(names)}." if names else ""
    near = nearest(str(given), names)
    hint = f"Allowed: {one_of(names)}."
    says = f"{shown(given)} is not one of the words allowed here."
    return says, f"{near} {hint}" if near.startswith("Did") else hint


def _own(fault: Fault) -> Said:
    """A check of the definition's own: ValueError(says) or ValueError(says, hint)."""
    error = fault.context.get("error")
    args = [str(a) for a in error.args[:2]] if isinstance(error, Exception) else []
    says = args[0] if args else "This does not fit the rest."
    return sentence(says), args[1] if len(args) > 1 else ""


def sentence(text: str) -> str:
    """The text with a capital at its beginning and a full stop at its end.

    A key at the beginning is left as it is: it is not a word.
    """
    text = text.strip()
    first = re.match(r"[^\s]+", text)
    if first and "_" not in first[0]:
        text = text[0].upper() + text[1:]
    return text if text.endswith((".", "?", "!")) else text + "."


def _date(fault: Fault) -> Said:
    return f"{shown(fault.value)} is not a date.", "Write it as 2025-06-30, without quotes."


def _other(fault: Fault) -> Said:
    return f"{shown(fault.value, fault.key)} cannot stand here.", f"Give {allowed(fault)}."


_SAY: Mapping[str, Callable[[Fault], Said]] = {
    "missing": _missing,
    "greater_than": _range,
    "greater_than_equal": _range,
    "less_than": _range,
    "less_than_equal": _range,
    "multiple_of": _multiple,
    "finite_number": _finite,
    "float_type": _number,
    "float_parsing": _number,
    "decimal_type": _number,
    "decimal_parsing": _number,
    "int_type": _whole,
    "int_parsing": _whole,
    "int_from_float": _whole,
    "int_parsing_size": _whole,
    "bool_type": _flag,
    "bool_parsing": _flag,
    "string_type": _text,
    "string_too_short": _text_length,
    "string_too_long": _text_length,
    "string_pattern_mismatch": _pattern,
    "literal_error": _choice,
    "enum": _choice,
    "list_type": _list,
    "tuple_type": _list,
    "set_type": _list,
    "frozen_set_type": _list,
    "iterable_type": _list,
    "too_short": _list_length,
    "too_long": _list_length,
    "model_type": _table,
    "model_attributes_type": _table,
    "dict_type": _table,
    "mapping_type": _table,
    "dataclass_type": _table,
    "union_tag_invalid": _tag,
    "union_tag_not_found": _tag,
    "value_error": _own,
    "assertion_error": _own,
    "date_type": _date,
    "date_parsing": _date,
    "date_from_datetime_parsing": _date,
    "date_from_datetime_inexact": _date,
}


def say(fault: Fault) -> Said:
    """What is wrong, and what is allowed or to be done."""
    return _SAY.get(fault.kind, _other)(fault)
