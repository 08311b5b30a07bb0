"""Compiled inner loops: decorators that keep the machine code on disk where that can be done."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, TypeVar, cast

import numba

Fn = TypeVar("Fn", bound=Callable[..., Any])


def compiled(function: Fn) -> Fn:
    """The function compiled on first call; the machine code is kept for later runs if it can be.

    No fast-math, so that the same input gives the same bits in every run. The function must not
    make arrays: without counting of references to them it runs several times faster.
    """
    return _compiled(function, False)


def compiled_inline(function: Fn) -> Fn:
    """The same, but set into every caller: for small functions called very often."""
    return _compiled(function, True)


def _compiled(function: Fn, inline: bool) -> Fn:
    options = {"_nrt": False, "forceinline": inline}
    try:
        return cast(Fn, numba.njit(cache=True, **options)(function))
    except RuntimeError:  # no place to keep the machine code: compile in every run
        return cast(Fn, numba.njit(**options)(function))
