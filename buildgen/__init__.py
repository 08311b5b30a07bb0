"""buildgen: from one definition of a small electric aeroplane to its whole build package.

    from buildgen import build, load

    kit = build(load("marram"))
    kit.write("out")
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from buildgen.problems import DesignError, Problem

if TYPE_CHECKING:
    from buildgen.build import Build, build
    from buildgen.design import Design, load

__version__ = "0.1.0"


def __getattr__(name: str) -> Any:
    """`build` and `load` are fetched when asked for: start-up stays quick."""
    if name in ("build", "Build"):
        from buildgen import build as room

        return getattr(room, name)
    if name in ("load", "Design"):
        from buildgen import design

        return getattr(design, name)
    raise AttributeError(name)


__all__ = ["Build", "Design", "DesignError", "Problem", "build", "load"]
