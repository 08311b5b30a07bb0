"""Coordinate files as they are met in the wild: one block or two, titles, counts, percent."""

from __future__ import annotations

import re
from pathlib import Path

import numpy as np

from buildgen.problems import DesignError, Problem
from buildgen.section.curve import Array, Section
from buildgen.section.spline import from_points

SPLIT = re.compile(r"[\s,;]+")
ELEMENT_MARK = 999.0
RESIDUAL = 0.001
"""Leave-one-out residual aft of 3 % chord that good sets stay below."""


def read_file(path: Path | str) -> Section:
    """A section from a coordinate file.

    Raises:
        DesignError: the file is not there or does not hold one section; with its line.
    """
    path = Path(path)
    try:
        raw = path.read_bytes()
    except OSError as error:
        what = "is a folder" if path.is_dir() else "cannot be read"
        hint = error.strerror or ""
        raise DesignError(Problem("", f"{path.name} {what}.", f"{hint}.", str(path))) from None
    return parse(_decoded(raw), path.stem, path.name)


def _decoded(raw: bytes) -> str:
    try:
        text = raw.decode("utf-8-sig")
    except UnicodeDecodeError:
        text = raw.decode("latin-1")
    # CR CR LF is one line end: a blank line after every row would part the blocks.
    return re.sub(r"\r+\n?", "\n", text.replace("\r\r\n", "\n"))


def parse(text: str, name: str, file: str) -> Section:
    """A section from the text of a coordinate file; `file` is named in what is wrong."""
    title, source, rows = _rows(text, file)
    if len(rows) < 7:
        raise _fault(file, 0, f"only {len(rows)} points were found.", "A section needs 7 at least.")
    counts, rows = _counts(rows, file)
    points = np.array([xy for _, xy in rows])
    notes: list[str] = []
    if points[:, 0].max() > 1.5:
        scale = 100.0 if 90 < points[:, 0].max() <= 101 else float(np.ptp(points[:, 0]))
        points = points / scale
        notes.append(f"divided by {scale:g} to unit chord")
    points = _ordered(points, counts)
    points = points[np.r_[True, np.abs(np.diff(points, axis=0)).max(axis=1) > 1e-9]]
    if np.abs(points[0, 0] - points[-1, 0]) > 1e-6 and abs(points[0, 1]) < 1e-6 < abs(
        points[0, 0] - points[-1, 0]
    ) and abs(points[0, 0] - 1) < 1e-6:
        points = np.vstack([points, points[:1]])
        notes.append("closed: the repeated last point was missing")
    _simple(points, file)
    notes += _datum(points)
    return from_points(title or name, source or file, points, tuple(notes))


Row = tuple[int, tuple[float, float]]


def _rows(text: str, file: str) -> tuple[str, str, list[Row]]:
    title, source = "", ""
    rows: list[Row] = []
    for number, line in enumerate(text.split("\n"), start=1):
        stripped = line.strip()
        if stripped.startswith("#"):
            key, _, value = stripped.lstrip("# ").partition(":")
            title = value.strip() if key == "name" else title
            source = value.strip() if key == "designer / publication" else source
            continue
        if not stripped:
            continue
        pair = _pair(stripped)
        if pair is not None:
            if pair[0] >= ELEMENT_MARK:
                raise _fault(file, number, "the file holds several elements.",
                             "Keep one element in a file.")
            rows.append((number, pair))
        elif rows:
            if rows[-1][0] > 3 or len(rows) > 1:
                raise _fault(file, number, f'"{stripped[:40]}" holds no two numbers.',
                             "Each row is x y, in unit or percent chord.")
        elif not title:
            title = " ".join(stripped.split())
    return title, source, rows


def _pair(line: str) -> tuple[float, float] | None:
    """Two numbers, with brackets stripped; further constant columns are ignored."""
    words = [w.strip("()[]") for w in SPLIT.split(line) if w]
    numbers: list[float] = []
    for word in words:
        try:
            numbers.append(float(word))
        except ValueError:
            return None
    if len(numbers) not in (2, 3):
        return None
    return numbers[0], numbers[1]


def _counts(rows: list[Row], file: str) -> tuple[tuple[int, int] | None, list[Row]]:
    """A counts line holds two whole numbers above 1 whose sum is the number of rows after it."""
    number, (a, b) = rows[0]
    if a <= 1.5 or a != int(a) or b != int(b) or b <= 1.5:
        return None, rows
    if int(a + b) == len(rows) - 1:
        return (int(a), int(b)), rows[1:]
    if max(x for _, (x, _) in rows[1:]) <= 1.5:
        says = f"the counts announce {a:g} and {b:g} points, {len(rows) - 1} follow."
        raise _fault(file, number, says, "Mend the counts or the rows.")
    return None, rows


def _ordered(points: Array, counts: tuple[int, int] | None) -> Array:
    """Upper trailing edge, nose, lower trailing edge."""
    if counts is not None:
        first, second = points[: counts[0]], points[counts[0] :]
        points = np.vstack([first[::-1], second])
    elif points[0, 0] < 0.5 and points[-1, 0] < 0.5:
        tail = int(points[:, 0].argmax())
        points = np.vstack([points[tail::-1], points[:tail:-1]])
    elif points[0, 0] < 0.5:
        tail = int(points[:, 0].argmax())
        points = np.vstack([points[tail::-1], points[tail + 1 :]])
    x, y = points.T
    area = float(np.dot(x, np.roll(y, -1)) - np.dot(np.roll(x, -1), y))
    return points if area > 0 else points[::-1]


def _simple(points: Array, file: str) -> None:
    from shapely.geometry import LineString

    # The two surfaces may touch at the very edge.
    if not LineString(points[2:-2]).is_simple:
        raise _fault(file, 0, "the outline crosses itself.", "Look for a digit out of place.")
    nose = int(points[:, 0].argmin())
    if nose < 2 or nose > len(points) - 3:
        raise _fault(file, 0, "one of the two surfaces is missing.",
                     "Give upper and lower surface, from the trailing edge round the nose.")


def _datum(points: Array) -> list[str]:
    """Nothing is moved or turned; where the datum is unusual, say so."""
    nose = points[int(points[:, 0].argmin())]
    notes = []
    if abs(nose[0]) > 0.002 or abs(nose[1]) > 0.01:
        notes.append(f"foremost point at ({nose[0]:.4f}, {nose[1]:.4f})")
    tail = (points[0, 1] + points[-1, 1]) / 2
    if abs(tail) > 0.005:
        notes.append(f"trailing edge at y = {tail:.4f}")
    worst, at = _residual(points)
    if worst > RESIDUAL:
        notes.append(f"rough: a point near x = {at:.3f} lies {worst:.4f} chord off its neighbours")
    return notes


def _residual(points: Array) -> tuple[float, float]:
    """Largest distance of a point from the cubic through its two neighbours on each side."""
    worst, at = 0.0, 0.0
    for k in range(2, len(points) - 2):
        near = points[[k - 2, k - 1, k + 1, k + 2]]
        if near[:, 0].min() < 0.03 or np.any(np.diff(near[:, 0]) * np.diff(near[:, 0])[0] <= 0):
            continue
        guess = np.polyval(np.polyfit(near[:, 0], near[:, 1], 3), points[k, 0])
        if abs(guess - points[k, 1]) > worst:
            worst, at = abs(float(guess - points[k, 1])), float(points[k, 0])
    return worst, at


def _fault(file: str, line: int, says: str, hint: str) -> DesignError:
    return DesignError(Problem("", says[0].upper() + says[1:], hint, file, line))
