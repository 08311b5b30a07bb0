"""Inches and ounces in a definition, turned into millimetres and grams before it is checked.

Beside any key that ends in ``_mm`` the same key with ``_in`` is as good, beside ``_g`` the one
with ``_oz``; a fraction is written as text: ``thickness_in = "3/32"``.
"""

from __future__ import annotations

import math
import re
from collections.abc import Mapping
from fractions import Fraction
from typing import Any

from buildgen.design.locate import Path, path_text
from buildgen.problems import Problem

# Ending as written -> (ending inside, how much of the inside unit one of it is).
# Both are exact: the international inch and the avoirdupois ounce of 1959.
ENDINGS: Mapping[str, tuple[str, Fraction]] = {
    "_in": ("_mm", Fraction("25.4")),
    "_oz": ("_g", Fraction("28.349523125")),
}

# No more digits than any measure has: text is not a way to write endless numbers.
_FRACTION = re.compile(
    r"([+-]?)\s*(?:(\d{1,9})(?:\s+|\s*-\s*))?(\d{1,9})\s*/\s*(\d{1,9})", re.ASCII
)
_DECIMAL = re.compile(r"[+-]?(\d{1,9}(\.\d{0,15})?|\.\d{1,15})", re.ASCII)


def to_metric(data: Mapping[str, Any]) -> tuple[dict[str, Any], list[Problem], dict[Path, str]]:
    """The definition with every ``_in`` and ``_oz`` key turned into ``_mm`` and ``_g``.

    A value that is no number and no fraction is passed on as it is: some keys take a word, and
    the check of the definition says what belongs there.

    Args:
        data: tables as read from TOML; left as they are.

    Returns:
        The new tables; what is wrong with inches and ounces (no file or line yet); and for each
        path that was renamed, the key as it is written.
    """
    walk = _Walk()
    return walk.table(data, (), ()), walk.problems, walk.written


class _Walk:
    def __init__(self) -> None:
        self.problems: list[Problem] = []
        self.written: dict[Path, str] = {}

    def table(self, data: Mapping[str, Any], path: Path, written: Path) -> dict[str, Any]:
        """One table; ``path`` leads to it with metric keys, ``written`` with those in the file."""
        made: dict[str, Any] = {}
        for key, value in data.items():
            ending = next((e for e in ENDINGS if key.endswith(e) and key != e), "")
            if not ending:
                made.setdefault(key, self.value(value, (*path, key), (*written, key)))
                continue
            metric = key.removesuffix(ending) + ENDINGS[ending][0]
            at = (*written, key)
            if metric in data:
                says = f"Both {metric} and {key} are given."
                self.problems.append(Problem(path_text(at), says, "Keep one of them."))
                continue
            self.written[(*path, metric)] = key
            made[metric] = self.converted(value, ending, (*path, metric), at)
        return made

    def value(self, value: Any, path: Path, written: Path) -> Any:
        if isinstance(value, Mapping):
            return self.table(value, path, written)
        if isinstance(value, list):
            return [self.value(v, (*path, n), (*written, n)) for n, v in enumerate(value)]
        return value

    def converted(self, value: Any, ending: str, path: Path, written: Path) -> Any:
        if isinstance(value, list):
            return [
                self.converted(v, ending, (*path, n), (*written, n)) for n, v in enumerate(value)
            ]
        if isinstance(value, Mapping):
            return self.table(value, path, written)
        if isinstance(value, bool) or not isinstance(value, (int, float, str)):
            return value
        if isinstance(value, float) and not math.isfinite(value):
            return value
        if isinstance(value, float):
            # The decimal as written, so that 0.1 in are 2.54 mm and no hair more.
            exact: Fraction | None = Fraction(repr(value))
        else:
            exact = parse_fraction(value) if isinstance(value, str) else Fraction(value)
        if exact is None:
            return value
        try:
            return float(exact * ENDINGS[ending][1])
        except OverflowError:
            return math.copysign(math.inf, exact)


def parse_fraction(text: str) -> Fraction | None:
    """ "3/32", "1 1/2", "1-1/2", "-1/4" or "2.5", with an inch mark or not; None if none of it."""
    text = text.strip().removesuffix('"').strip()
    if _DECIMAL.fullmatch(text):
        return Fraction(text)
    match = _FRACTION.fullmatch(text)
    if match is None or int(match[4]) == 0:
        return None
    size = int(match[2] or 0) + Fraction(int(match[3]), int(match[4]))
    return -size if match[1] == "-" else size


def written_value(metric: float, ending: str) -> float:
    """A metric value in the unit of a written ending: 25.4 and "_in" give 1."""
    return metric / float(ENDINGS[ending][1])
