"""Coordinate files as they are met in the wild: one block or two, titles, counts, percent."""

from __future__ import annotations

import codecs
import math
import os
import re
from dataclasses import dataclass, field
from pathlib import Path

import numpy as np

from buildgen.problems import DesignError, Problem
from buildgen.section.curve import Array, Section
from buildgen.section.outline import checked, closed, ordered
from buildgen.section.spline import from_points

NUMBER = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?")
DECIMAL_COMMA = re.compile(r"[+-]?\d*,\d+")
BLANK = re.compile(r"\.{2,}|-+|\*+|\u2026")
"""What printers put where a table has no ordinate."""
AXIS = re.compile(r"[xyz](/c|\(mm\)|\(%\)|_?(upper|lower|mm|percent))?", re.IGNORECASE)
ELEMENT_MARK = 999.0
FEWEST = 7
HEAD_KEYS = {"name": "title", "designer / publication": "source"}

Row = tuple[int, tuple[float, ...]]


@dataclass
class _Text:
    """What stands in a file: its head, its first row, every row of numbers with its line."""

    file: str
    title: str = ""
    first: str = ""
    source: str = ""
    rows: list[Row] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)

    def fault(self, line: int, says: str, hint: str) -> DesignError:
        return DesignError(Problem("", says[0].upper() + says[1:], hint, self.file, line))


def read_file(path: Path | str) -> Section:
    """A section from a coordinate file (any ending), in unit chord.

    Read: one block round the nose from either edge or from the nose, two blocks with or without a
    line of counts, titles, `#` remarks, UTF-8 or Latin-1, every kind of line end, blanks, tabs,
    commas or semicolons, decimal commas, unit chord, percent or millimetres. Whatever was changed
    on the way stands in the section's notes; nothing is moved or turned.

    Raises:
        DesignError: the file is not there or does not hold one section; with its line.
    """
    path = Path(path)
    try:
        raw = path.read_bytes()
    except (OSError, ValueError) as error:
        what = "is a folder" if os.path.isdir(path) else "cannot be read"
        hint = getattr(error, "strerror", None) or str(error)
        raise DesignError(Problem("", f"The file {what}.", f"{hint}.", str(path))) from None
    return parse(_decoded(raw), path.stem, path.name)


def parse(text: str, name: str, file: str) -> Section:
    """A section from the text of a coordinate file.

    Args:
        text: the whole file; any kind of line end.
        name: the section's name where the text has no title.
        file: name of the file in what is wrong; the section's source where the text names none.

    Raises:
        DesignError: the text does not hold one section; with its line.
    """
    found = _read_lines(text, file)
    if len(found.rows) < FEWEST:
        raise found.fault(0, f"only {len(found.rows)} points were found.",
                          f"A section needs {FEWEST} at least: rows of x y.")
    counts = _take_counts(found)
    points = _scaled(found, _plain(found))
    points, more = closed(ordered(points, counts))
    notes = (*found.notes, *more, *checked(points, found.fault))
    return from_points(found.title or name, found.source or file, points[:, :2], notes)


def _decoded(raw: bytes) -> str:
    if raw.startswith((codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)):
        return raw.decode("utf-16", errors="replace")
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError:
        return raw.decode("latin-1")


def _read_lines(text: str, file: str) -> _Text:
    found = _Text(file)
    # CR CR LF is one line end
    for number, line in enumerate(re.split(r"\r*\n|\r", text), start=1):
        stripped = line.strip()
        if stripped.startswith("#"):
            key, _, value = stripped.lstrip("# ").partition(":")
            if key in HEAD_KEYS:
                setattr(found, HEAD_KEYS[key], value.strip())
        elif stripped:
            _take_line(found, number, stripped)
    return found


def _take_line(found: _Text, number: int, line: str) -> None:
    words = _words(line)
    values = [float(w) for w in words if NUMBER.fullmatch(w)]
    empty = sum(1 for w in words if BLANK.fullmatch(w))
    if not all(map(math.isfinite, values)):
        raise found.fault(number, "a number is out of all bounds.", "Each row is x y.")
    if len(values) == len(words) and len(values) in (2, 3):
        if values[0] >= ELEMENT_MARK:
            raise found.fault(number, "the file holds several elements.",
                              "Keep one element in a file.")
        found.first = found.first or line
        found.rows.append((number, tuple(values)))
    elif len(values) == 1 and empty and len(values) + empty == len(words):
        found.rows.append((number, (values[0], math.nan)))
        found.notes.append(f"line {number} has no ordinate, left out")
    elif len(values) == len(words) and len(values) >= 6:
        raise found.fault(
            number, f"{len(values)} numbers stand in one row: points in rows of several are not "
            "read.", "Write one point, x y, in each row.")
    elif found.rows:
        raise found.fault(number, f'"{line[:40]}" holds no two numbers.',
                          "Each row is x y, in unit or percent chord.")
    elif not found.title and not all(AXIS.fullmatch(w) for w in words):
        found.title = " ".join(line.split())


def _words(line: str) -> list[str]:
    """What stands between blanks, commas or semicolons, brackets taken off."""
    line = line.replace("\u2212", "-")
    loose = [w for w in re.split(r"[\s;]+", line) if w]
    if len(loose) > 1 and all(DECIMAL_COMMA.fullmatch(w) for w in loose):
        return [w.replace(",", ".") for w in loose]
    return [w.strip("()[]") for w in re.split(r"[\s,;]+", line) if w.strip("()[]")]


def _take_counts(found: _Text) -> tuple[int, int] | None:
    """A counts line holds two whole numbers above 1 whose sum is the number of rows after it."""
    (number, (a, b, *_)), *rest = found.rows
    if not (a > 1.5 or abs(b) > 1.5):
        return None
    if _is_count(a, b) and a + b == len(rest):
        found.rows = rest
        return int(a), int(b)
    if max(xy[0] for _, xy in rest) > 1.5:
        return None
    if not _is_count(a, b) and not found.title:
        # a title of two numbers: "00 12"
        found.rows, found.title = rest, " ".join(found.first.split())
        found.notes.append(f"line {number} was taken for a title")
        return None
    raise found.fault(
        number, f"the counts announce {a:g} and {b:g} points, {len(rest)} follow.",
        "Mend the counts or the rows.")


def _is_count(a: float, b: float) -> bool:
    return a > 1 and b > 1 and a == int(a) and b == int(b)


def _plain(found: _Text) -> Array:
    """(n, 3): x, y and the line of each row; y is nan where the row has none."""
    third = [(number, row[2]) for number, row in found.rows if len(row) == 3]
    for number, value in third:
        if value != third[0][1]:
            raise found.fault(number, "the third column varies.",
                              "Give x y, the two surfaces one after the other.")
    return np.array([(row[0], row[1], number) for number, row in found.rows])


def _scaled(found: _Text, points: Array) -> Array:
    """In unit chord; what it was divided by is noted."""
    x = points[:, 0]
    big = x > 1.5
    if big.any() and np.count_nonzero(big) < len(x) / 2:
        at = points[int(big.argmax())]
        raise found.fault(int(at[2]), f"a row with x = {at[0]:g} stands among rows in unit chord.",
                          "Mend or remove the row.")
    chord = float(np.ptp(x))
    if 0.9 < x.max() <= 1.5 and chord > 0.9 or chord == 0:
        return points
    scale = 100.0 if 99 <= x.max() <= 101 else chord
    found.notes.append(f"divided by {scale:g} to unit chord")
    return np.asarray(points / [scale, scale, 1.0])
