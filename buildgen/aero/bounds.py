"""Arguments that make no sense, refused in the program's own words."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import ArrayLike, NDArray

from buildgen.problems import DesignError, Problem

Floats = NDArray[np.float64]
Whole = NDArray[np.intp]


def above_zero(**values: float) -> None:
    """Refuse whatever is not a finite number above 0; the keyword is the path of the fault.

    Raises:
        DesignError: one problem for each value at fault.
    """
    _refuse("is not above 0.", {n: v for n, v in values.items() if not 0.0 < v < math.inf})


def not_negative(**values: float) -> None:
    """Refuse whatever is not a finite number of 0 or more.

    Raises:
        DesignError: one problem for each value at fault.
    """
    _refuse("is below 0.", {n: v for n, v in values.items() if not 0.0 <= v < math.inf})


def within(low: float, high: float, **values: float) -> None:
    """Refuse whatever lies outside ``low`` to ``high``, ends included.

    Raises:
        DesignError: one problem for each value at fault.
    """
    _refuse(
        f"is not within {low:g} to {high:g}.",
        {n: v for n, v in values.items() if not low <= v <= high},
    )


def row(values: ArrayLike, name: str, length: int | None = None) -> Floats:
    """``values`` as a row of finite numbers, (n,), not empty.

    Raises:
        DesignError: they are none, not one row, not finite, or not ``length`` many.
    """
    numbers = np.atleast_1d(np.asarray(values, dtype=np.float64))
    if numbers.ndim != 1 or not numbers.size or not np.isfinite(numbers).all():
        raise DesignError(Problem(name, "is not a row of finite numbers."))
    if length is not None and numbers.size != length:
        raise DesignError(Problem(name, f"has {numbers.size} numbers, {length} are needed."))
    return numbers


def _refuse(says: str, faults: dict[str, float]) -> None:
    if faults:
        raise DesignError(*(Problem(name, f"{value:g} {says}") for name, value in faults.items()))
