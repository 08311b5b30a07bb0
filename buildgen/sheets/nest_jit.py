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


def compiled_inside(function: Fn) -> Fn:
    """The same for functions that only compiled ones call: no way in from Python is made."""
    return _compiled(function, False, inside=True)


def compiled_inline(function: Fn) -> Fn:
    """The same, but set into every caller: for small functions called very often."""
    return _compiled(function, True, inside=True)


def _compiled(function: Fn, inline: bool, inside: bool = False) -> Fn:
    options = {"_nrt": False, "forceinline": inline, "error_model": "numpy"}
    if inside:
        options |= {"no_cpython_wrapper": True, "no_cfunc_wrapper": True}
    try:
        return cast(Fn, numba.njit(cache=True, **options)(function))
    except RuntimeError:  # no place to keep the machine code: compile in every run
        return cast(Fn, numba.njit(**options)(function))
