"""Compiled inner loops: one decorator, kept on disk where the place can be written to."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, TypeVar, cast

import numba

Fn = TypeVar("Fn", bound=Callable[..., Any])


def compiled(function: Fn) -> Fn:
    """The function compiled on first call; the machine code is kept for later runs if it can be.

    No fast-math, so that the same input gives the same bits in every run.
    """
    try:
        return cast(Fn, numba.njit(cache=True)(function))
    except RuntimeError:  # no place to keep the machine code: compile in every run
        return cast(Fn, numba.njit(function))
