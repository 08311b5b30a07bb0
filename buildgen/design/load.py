"""A definition from its file: read, converted to millimetres and grams, validated, whole."""

from __future__ import annotations

import hashlib
from dataclasses import dataclass
from pathlib import Path

from pydantic import ValidationError

from buildgen.design.faults import problems_from
from buildgen.design.locate import Lines, path_from_text
from buildgen.design.meeting import meeting_faults
from buildgen.design.schema import Definition
from buildgen.design.toml_text import read_toml
from buildgen.design.units import to_metric
from buildgen.part import Title
from buildgen.problems import DesignError, Problem, nearest
from buildgen.shelf import Shelf, load_shelf

SHIPPED = Path(__file__).parent / "shipped"


@dataclass(frozen=True, eq=False)
class Design:
    """A valid definition with where it came from.

    Attributes:
        folder: the folder that relative names in the definition start from.
    """

    definition: Definition
    text: str
    file: str
    folder: Path
    shelf: Shelf

    @property
    def title(self) -> Title:
        d = self.definition
        digest = hashlib.sha256(self.text.encode()).hexdigest()
        return Title(d.name, d.title or d.name, d.revision, digest)

    @property
    def section_folders(self) -> tuple[Path, ...]:
        """Folders of the user's own coordinate files."""
        named = self.definition.sections_folder
        return (self.folder / named,) if named else (self.folder,)

    def placed(self, error: DesignError) -> DesignError:
        """The same faults with file and line, for those found after loading."""
        lines = Lines(self.text)
        found = []
        for p in error.problems:
            if p.file or not p.path:
                found.append(p)
                continue
            found.append(p.at(self.file, lines.of(path_from_text(p.path))))
        return DesignError(*found)


def shipped_designs() -> tuple[str, ...]:
    """Names of the shipped definitions."""
    return tuple(sorted(p.stem for p in SHIPPED.glob("*.toml")))


def find_design(name: str | Path) -> Path:
    """A path, or the name of a shipped design.

    Raises:
        DesignError: neither.
    """
    path = Path(name)
    if path.exists() or path.suffix or len(path.parts) > 1:
        return path
    shipped = SHIPPED / f"{name}.toml"
    if shipped.is_file():
        return shipped
    hint = nearest(str(name), shipped_designs())
    raise DesignError(
        Problem("", f'There is no file and no shipped design "{name}".', hint, str(name))
    )


def load(name: str | Path) -> Design:
    """Read and validate a definition.

    Args:
        name: a path, or the name of a shipped design.

    Raises:
        DesignError: with every fault of the file, each with file, line and key.
    """
    path = find_design(name)
    text, raw = read_toml(path)
    lines = Lines(text)
    data, faults, written = to_metric(raw)
    problems = [p.at(path.name, p.line or lines.of(path_from_text(p.path))) for p in faults]
    definition = None
    try:
        definition = Definition.model_validate(data)
    except ValidationError as error:
        problems += problems_from(error, Definition, path.name, lines, written)
    if definition is not None:
        for p in meeting_faults(definition):
            problems.append(p.at(path.name, lines.of(path_from_text(p.path))))
    if problems or definition is None:
        raise DesignError(*sorted(problems, key=lambda p: p.line))
    own = definition.stock.shelf
    shelf = load_shelf((path.parent / own,)) if own else load_shelf()
    return Design(definition, text, path.name, path.parent, shelf)
