"""Roots of rising functions of arrays: Newton's steps, each kept inside a bracket that halves where they leave it."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike, NDArray

from geom.errors import SolveError

Floats = NDArray[np.float64]

_STEPS = 200  # halving alone closes any bracket of doubles in under 1,100 steps, of one decade in 60
_SHORT = 1e-9  # relative: from here one step of Newton's goes to rounding, where the function is smooth
_CLOSE = 4.0 * np.finfo(np.float64).eps  # relative, of the argument: two roundings of a double


def rising_root(
    function: Callable[[Floats], tuple[Floats, Floats]], low: ArrayLike, high: ArrayLike, *, start: ArrayLike
) -> Floats:
    """Return where a rising function is nought, element by element.

    Parameters
    ----------
    function : callable
        Returns values and derivatives at an array of arguments.
    low, high : array_like
        A bracket: the function is not above nought at `low` and not under it at `high`.
    start : array_like
        First argument tried; moved into the bracket.

    Returns
    -------
    ndarray
        The roots, to two roundings of the argument or a thousandth of one of the bracket.

    Raises
    ------
    SolveError
        If the steps run out, with the widest bracket left.
    """
    bottom, top, x = (np.array(a, dtype=np.float64) for a in np.broadcast_arrays(low, high, start))
    x = np.clip(x, bottom, top)
    floor = 1e-3 * np.finfo(np.float64).eps * (top - bottom)  # so that a root at nought itself is reached too
    before = np.full_like(x, np.inf)
    for _ in range(_STEPS):
        value, slope = function(x)
        if np.any(np.isnan(value)):
            raise SolveError("no root: the function has no value inside its bracket")
        bottom, top = np.where(value <= 0, x, bottom), np.where(value >= 0, x, top)
        newton = x - value / np.where(slope > 0, slope, 1.0)
        inside = (newton >= bottom) & (newton <= top) & (slope > 0)
        following = np.where(inside, newton, 0.5 * (bottom + top))
        step = np.abs(following - x)
        # Where terms cancel the steps end in the noise of the function, a little over the rounding of the argument:
        # once short, they are taken as far as they shrink.
        noise = (step >= before) & (step <= _SHORT * np.abs(x))
        if np.all((step <= _CLOSE * np.abs(x) + floor) | noise):
            return following
        x, before = following, step
    raise SolveError(f"no root after {_STEPS} steps; the bracket is still {float(np.max(top - bottom)):.3g} wide")
