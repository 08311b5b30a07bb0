"""A definition from disk into tables, or in plain words why not."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from typing import Any

from buildgen.problems import DesignError, Problem

_PLACE = re.compile(r"\s*\(at (?:line (\d+), column (\d+)|end of document)\)\s*$")

# What tomllib says -> our words; the first that begins its message is taken.
_SAYS = (
    ("Cannot overwrite a value", "This key or table is given twice."),
    ("Cannot declare", "This table is given twice."),
    ("Cannot mutate immutable", "This table was closed where it was written in braces."),
    ("Cannot redefine namespace", "This table is given twice."),
    ("Duplicate inline table key", "This key is given twice."),
    ("Expected '=' after a key", "A key without = and a value."),
    ("Expected newline or end of document", "Something follows the value."),
    ("Invalid value", "This is no value."),
    ("Invalid statement", "This is neither a key nor a table."),
    ("Invalid initial character for a key part", "This is no key."),
    ("Invalid date or datetime", "This is no date."),
    ("Illegal character", "A quotation mark is missing, or a character stands here that may not."),
    ("Unterminated string", "A quotation mark is missing."),
    ("Expected \"'\"", "A quotation mark is missing."),
    ('Expected "\'\'\'"', "Three closing quotation marks are missing."),
    ("Expected ']' at the end of a table", "The ] of a table is missing."),
    ("Expected ']]' at the end of an array", "The ]] of a table in a list is missing."),
    ("Unclosed array", "A ] is missing at the end of a list, or a comma between its items."),
    ("Unclosed inline table", "A } is missing, or a comma between keys in braces."),
    ("Unescaped '\\'", "A single \\ in quotes begins a code."),
    ("Invalid hex value", "A code after \\u or \\U is not right."),
    ("Escaped character", "A code after \\u or \\U is not right."),
)


def read_toml(path: Path) -> tuple[str, dict[str, Any]]:
    """Text and tables of a TOML file.

    Returns:
        The text with line ends as in the file but for a byte-order mark at its beginning, which
        is taken off; and its tables.

    Raises:
        DesignError: not there, a directory, not readable, not UTF-8, not TOML.
    """
    text = _text(path)
    try:
        return text, tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise DesignError(_broken(str(error), text, str(path))) from error
    except (ValueError, RecursionError) as error:
        # Thousands of digits or of brackets; tomllib lets these through as they are.
        says = "A number or a nest of brackets in it is far too long."
        raise DesignError(Problem("", says, "Look for a key held down.", str(path))) from error


def _text(path: Path) -> str:
    name = str(path)
    try:
        raw = path.read_bytes()
    except FileNotFoundError as error:
        raise DesignError(Problem("", "There is no such file.", _likely(path), name)) from error
    except IsADirectoryError as error:
        says = "This is a folder, not a definition."
        raise DesignError(Problem("", says, _inside(path), name)) from error
    except (OSError, ValueError) as error:
        why = getattr(error, "strerror", None) or str(error)
        says = f"The file cannot be read: {why}."
        raise DesignError(Problem("", says, "Check its path and permissions.", name)) from error
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        says = "The file is not UTF-8 text."
        if raw[:2] in (b"\xff\xfe", b"\xfe\xff"):
            says = "The file is UTF-16 text."
        hint = "Save it as plain text in UTF-8."
        raise DesignError(Problem("", says, hint, name, line)) from error


def _likely(path: Path) -> str:
    """What to try when the file is not there."""
    with_ending = path.with_name(path.name + ".toml")
    if with_ending.is_file():
        return f"Did you mean {with_ending.name}?"
    if not path.parent.is_dir():
        return f"There is no folder {path.parent} either."
    return _inside(path.parent)


def _inside(folder: Path) -> str:
    try:
        names = sorted(p.name for p in folder.glob("*.toml"))
    except OSError:
        names = []
    if not names:
        return "Give the path of a TOML file."
    shown = ", ".join(names[:6]) + (", ..." if len(names) > 6 else "")
    return f"There is: {shown}."


def _broken(message: str, text: str, name: str) -> Problem:
    """The message of tomllib in our words, with place and a hint for the usual slips."""
    place = _PLACE.search(message)
    lines = text.rstrip().split("\n")
    line, column = len(lines), len(lines[-1]) + 1
    if place and place[1] and int(place[1]) <= line:
        line, column = int(place[1]), int(place[2])
    bare = _PLACE.sub("", message)
    says = next((ours for theirs, ours in _SAYS if bare.startswith(theirs)), f"{bare}.")
    here = lines[line - 1].rstrip("\r") if line <= len(lines) else ""
    where = f"Not TOML at column {column}: " if here.strip() else "Not TOML: "
    return Problem("", where + says, _slip(here, bare), name, line)


def _slip(here: str, message: str) -> str:
    """A hint from the line at fault; "" where none of the usual slips fits."""
    code = here.strip()
    key, equals, value = (part.strip() for part in code.partition("="))
    if message.startswith(("Unclosed array", "Unclosed inline")):
        return "Items are parted by commas, and every bracket that opens must close."
    if code.startswith("[") and not equals:
        return "A table is written [wing], one of several [[wing.panel]]."
    if message.startswith(("Cannot", "Duplicate")):
        return "Delete one; write [[double brackets]] where there are several of a kind."
    if not equals:
        colon = re.match(r"([A-Za-z0-9_-]+)\s*:\s*(.+)", code)
        if colon:
            return f"Write {colon[1]} = {colon[2]}."
        return "Write key = value; remarks begin with #."
    return _value_slip(key, value)


def _value_slip(key: str, value: str) -> str:  # noqa: C901 - one branch for each slip
    """A hint for what stands after the equals sign."""
    value = value.split("#")[0].strip()
    if not value:
        return f"Write a value after {key} =."
    if re.fullmatch(r"[+-]?\d+,\d+", value):
        return f"Write decimals with a point: {key} = {value.replace(',', '.')}."
    if re.fullmatch(r"[+-]?(\d+[\s-]+)?\d+\s*/\s*\d+", value):
        return f'Write a fraction in quotes, in inches: {key} = "{value}".'
    unit = re.fullmatch(r"([+-]?[\d.]+)\s*(mm|cm|m|in|inch|\"|g|kg|oz|deg|%|°)", value)
    if unit:
        return f"Leave the unit off, the key carries it: {key} = {unit[1]}."
    if value.lower() in ("true", "false", "yes", "no", "on", "off"):
        word = "true" if value.lower() in ("true", "yes", "on") else "false"
        return f"Write {key} = {word}."
    if re.fullmatch(r"\.\d+|[+-]?\d+\.|0\d+(\.\d+)?", value):
        return "Write a number with a digit on both sides of its point and none too many before it."
    if value[0] in "\u201c\u201d\u201e\u2018\u2019\u00ab":
        return 'Use straight quotation marks: "...".'
    if "\\" in value:
        return f"Write {key} = '...' with single quotation marks round text that holds a \\."
    if value.count('"') % 2 or value.count("'") % 2:
        return "Close the quotation mark."
    if value[0] in "[{" and value[-1] not in "]}":
        return "Close the bracket."
    if re.match(r"[^\W\d]", value):
        return f'Write text in quotes: {key} = "{value}".'
    return "Numbers stand bare, text in quotes, lists in brackets."
