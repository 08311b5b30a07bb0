"""What is wrong with a definition, said to the person at the keyboard."""

from __future__ import annotations

import difflib
from collections.abc import Iterable
from dataclasses import dataclass, replace


@dataclass(frozen=True, slots=True)
class Problem:
    """One fault.

    Attributes:
        path: the key it concerns, as written in the definition: ``wing.panel[2].chord_mm``.
        says: what is wrong, one sentence.
        hint: what is allowed or what to do next, one sentence; may be empty.
        file: name of the file at fault, where there is one.
        line: line in that file, counted from 1; 0 where it is not known.
    """

    path: str
    says: str
    hint: str = ""
    file: str = ""
    line: int = 0

    def at(self, file: str, line: int = 0) -> Problem:
        """The same fault with its place in a file."""
        return replace(self, file=file, line=line)

    def __str__(self) -> str:
        line = f":{self.line}" if self.line else ""
        place = f"{self.file}{line}: " if self.file else ""
        key = f"{self.path}: " if self.path else ""
        return f"{place}{key}{self.says} {self.hint}".rstrip()


class DesignError(Exception):
    """The design cannot be built. ``problems`` holds every reason; one is printed per line."""

    def __init__(self, *problems: Problem) -> None:
        super().__init__("\n".join(map(str, problems)))
        self.problems = problems


def nearest(name: str, valid: Iterable[str]) -> str:
    """A phrase that offers the nearest valid name, or lists the valid ones if none is near."""
    names = sorted(set(valid))
    close = difflib.get_close_matches(name.lower(), [n.lower() for n in names], n=1, cutoff=0.6)
    if close:
        match = next(n for n in names if n.lower() == close[0])
        return f'Did you mean "{match}"?'
    shown = ", ".join(names[:12]) + (", ..." if len(names) > 12 else "")
    return f"Known: {shown}." if names else ""
