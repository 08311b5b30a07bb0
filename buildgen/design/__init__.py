"""The definition: schema, loading, errors with file, line and key; shipped designs."""

from buildgen.design.load import Design, find_design, load, shipped_designs
from buildgen.design.schema import Definition

__all__ = ["Definition", "Design", "find_design", "load", "shipped_designs"]
