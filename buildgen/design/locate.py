"""Where a key of a definition stands: paths of keys as text, and their lines in a TOML file.

A path is a tuple of keys and places in lists, as the validation library gives it, counted from
0: ``("wing", "panel", 1, "tip_chord_mm")``. Its text counts from 1, as a person counts:
``wing.panel[2].tip_chord_mm``.
"""

from __future__ import annotations

import re
import tomllib
from collections.abc import Sequence

Path = tuple[str | int, ...]

_BARE = re.compile(r"[A-Za-z0-9_-]+")
_STEP = re.compile(r'\[(\d+)\]|"((?:[^"\\]|\\.)*)"|([^.\["]+)|\.')


def path_text(path: Sequence[str | int]) -> str:
    """The path as a person writes it; a key that is not a plain word stands in quotes."""
    text = ""
    for step in path:
        if isinstance(step, int):
            text += f"[{step + 1}]"
            continue
        if not _BARE.fullmatch(step):
            step = '"' + step.replace("\\", "\\\\").replace('"', '\\"') + '"'
        text += f".{step}" if text else step
    return text


def path_from_text(text: str) -> Path:
    """The path that ``path_text`` wrote."""
    path: list[str | int] = []
    for place, quoted, word in _STEP.findall(text):
        if place:
            path.append(int(place) - 1)
        elif word:
            path.append(word)
        elif quoted:
            path.append(re.sub(r"\\(.)", r"\1", quoted))
    return tuple(path)


class Lines:
    """The line of every key, table and list item of a TOML text.

    The text is scanned, not checked: it has gone through ``tomllib`` before. Text that is not
    TOML gives whatever keys were understood up to there and never an error.
    """

    def __init__(self, text: str) -> None:
        self._found = _Scan(text.replace("\r\n", "\n")).found

    def of(self, path: Sequence[str | int]) -> int:
        """Line of the key, counted from 1; of the nearest table or key around it where the path
        itself is not written; 0 where nothing of it is."""
        path = tuple(path)
        while path:
            if path in self._found:
                return self._found[path]
            path = path[:-1]
        return 0

    def has(self, path: Sequence[str | int]) -> bool:
        """Whether the path itself is written in the text."""
        return tuple(path) in self._found


class _Scan:
    """One walk through the text; ``found`` maps path to line."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.at = 0
        self.line = 1
        self.found: dict[Path, int] = {}
        self._headed: set[Path] = set()
        self._counts: dict[Path, int] = {}
        self._here: Path = ()
        while self.at < len(text):
            self._statement()

    def _step(self, count: int = 1) -> None:
        """Move on, counting the lines passed."""
        passed = self.text[self.at : self.at + count]
        self.line += passed.count("\n")
        self.at += count

    def _blank(self, newlines: bool = True) -> None:
        """Pass spaces and comments, and line ends too where ``newlines`` says so."""
        spaces = " \t\n\r" if newlines else " \t"
        while self.at < len(self.text):
            if self.text[self.at] in spaces:
                self._step()
            elif self.text[self.at] == "#":
                end = self.text.find("\n", self.at)
                self._step((end if end >= 0 else len(self.text)) - self.at)
            else:
                return

    def _sees(self, token: str) -> bool:
        return self.text.startswith(token, self.at)

    def _statement(self) -> None:
        """One header or one ``key = value``; always moves on."""
        self._blank()
        if self.at >= len(self.text):
            return
        line, start = self.line, self.at
        if self._sees("["):
            many = self._sees("[[")
            self._step(2 if many else 1)
            self._header(self._key(), many, line)
            end = self.text.find("\n", self.at)
            self._step((end if end >= 0 else len(self.text)) - self.at)
        else:
            self._pair(self._here)
        if self.at == start:
            self._step()

    def _header(self, key: list[str], many: bool, line: int) -> None:
        path: Path = ()
        for n, step in enumerate(key):
            path = (*path, step)
            last = n == len(key) - 1
            if last and many:
                self.found.setdefault(path, line)
                self._counts[path] = self._counts.get(path, 0) + 1
            if path in self._counts:
                path = (*path, self._counts[path] - 1)
            if last and path not in self._headed:
                # A header wins over a line that only passed through the table.
                self.found[path] = line
                self._headed.add(path)
            self.found.setdefault(path, line)
        self._here = path

    def _pair(self, under: Path) -> None:
        """``a.b = value``, also inside an inline table."""
        line = self.line
        path = under
        for step in self._key():
            path = (*path, step)
            self.found.setdefault(path, line)
        self._blank(newlines=False)
        if path != under and self._sees("="):
            self._step()
            self._blank(newlines=False)
            self._value(path)

    def _key(self) -> list[str]:
        """A key, dotted or not, bare or quoted."""
        steps: list[str] = []
        while True:
            self._blank(newlines=False)
            bare = _BARE.match(self.text, self.at)
            if self._sees('"') or self._sees("'"):
                steps.append(self._quoted())
            elif bare:
                self._step(len(bare[0]))
                steps.append(bare[0])
            else:
                return steps
            self._blank(newlines=False)
            if not self._sees("."):
                return steps
            self._step()

    def _quoted(self) -> str:
        """A one-line string, as its meaning."""
        start, quote = self.at, self.text[self.at]
        self._string(quote)
        raw = self.text[start : self.at]
        try:
            return str(tomllib.loads(f"k = {raw}")["k"])
        except tomllib.TOMLDecodeError:
            return raw.strip(quote)

    def _string(self, quote: str) -> None:
        """Pass a string that begins and ends with ``quote``."""
        self._step(len(quote))
        while self.at < len(self.text):
            if self._sees("\\") and quote[0] == '"':
                self._step(2)
            elif self._sees(quote):
                self._step(len(quote))
                # Up to two quotation marks may stand directly before the closing three.
                while len(quote) == 3 and self._sees(quote[0]):
                    self._step()
                return
            elif len(quote) == 1 and self._sees("\n"):
                return
            else:
                self._step()

    def _value(self, path: Path) -> None:
        """Pass a value; note the places of what it holds."""
        for quote in ('"""', "'''", '"', "'"):
            if self._sees(quote):
                self._string(quote)
                return
        if self._sees("["):
            self._list(path)
        elif self._sees("{"):
            self._inline(path)
        else:
            while self.at < len(self.text) and self.text[self.at] not in ",]}#\n":
                self._step()

    def _list(self, path: Path) -> None:
        self._step()
        count = 0
        while self.at < len(self.text):
            self._blank()
            if self._sees("]"):
                self._step()
                return
            start = self.at
            self.found.setdefault((*path, count), self.line)
            self._value((*path, count))
            count += 1
            self._blank()
            if self._sees(","):
                self._step()
            if self.at == start:
                return

    def _inline(self, path: Path) -> None:
        self._step()
        while self.at < len(self.text):
            self._blank()
            if self._sees("}"):
                self._step()
                return
            start = self.at
            self._pair(path)
            self._blank()
            if self._sees(","):
                self._step()
            if self.at == start:
                return
