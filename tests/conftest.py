"""Kits of the shipped designs, each built once for all tests."""

from __future__ import annotations

from functools import cache

import pytest
from hypothesis import settings

from buildgen import Build, build, load
from buildgen.design import shipped_designs

# The same examples every time: a suite that passed passes again. `--hypothesis-profile=wander`
# looks further.
settings.register_profile("steady", derandomize=True, database=None, deadline=None)
settings.register_profile("wander", deadline=None, database=None)
settings.load_profile("steady")


@cache
def shipped_kit(name: str) -> Build:
    """The kit of a shipped design."""
    return build(load(name))


@pytest.fixture(params=shipped_designs())
def kit(request: pytest.FixtureRequest) -> Build:
    """Every shipped kit in turn."""
    return shipped_kit(request.param)


@pytest.fixture(scope="session")
def marram() -> Build:
    return shipped_kit("marram")


@pytest.fixture(scope="session")
def sedge() -> Build:
    return shipped_kit("sedge")
