"""Roots of many rising functions at once, each within a bracket of its own.

Both methods take out of their arrays what has arrived, never leave the bracket they know, and halve it where a
step would. NaN is never let in and comes back as NaN; so does what has not arrived after the last step.
"""

from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from geom.hang.chunked import Floats, Mask

# Newton's step is of second order: after one of 1e-9 what is left is of the order of 1e-18.
_NEWTON_LAST = 1e-9
# The secant's is of order 1.6: after one of 1e-11 what is left is of the order of 1e-17.
_SECANT_LAST = 1e-11
# Halving a bracket of the largest doubles in their logarithm to the last digit takes 65.
_STEPS = 120


@dataclass
class _Search:
    """Where the elements that are still looked for stand; `low` and `high` are infinite while unknown."""

    reach: float
    unit: float
    last: float
    left: NDArray[np.intp]
    x: Floats
    low: Floats
    high: Floats
    args: list[Floats]
    result: Floats = field(init=False)

    def __post_init__(self) -> None:
        size = self.x.size
        self.result = np.full(size, np.nan)
        self.keep(~np.isnan(self.x))

    def keep(self, going: Mask) -> None:
        chosen = np.flatnonzero(going)
        self.left, self.x = self.left.take(chosen), self.x.take(chosen)
        self.low, self.high = self.low.take(chosen), self.high.take(chosen)
        self.args = [values.take(chosen) for values in self.args]

    def squeeze(self, value: Floats) -> None:
        """Move one side of each bracket to where the function was taken; NaN counts as too large."""
        below = value < 0.0
        self.low = np.where(below, self.x, self.low)
        self.high = np.where(below, self.high, self.x)

    def step(self, change: Floats) -> Mask:
        """Go by a change, or to the middle of the bracket; give what goes on."""
        change = np.clip(change, -self.reach, self.reach)
        there = self.x + change
        arrived = (np.abs(change) <= self.last * np.maximum(np.abs(there), self.unit)) & np.isfinite(there)
        self.result[self.left[arrived]] = there[arrived]
        low = np.where(self.low > -np.inf, self.low, self.high - 2.0 * self.reach)
        high = np.where(self.high < np.inf, self.high, self.low + 2.0 * self.reach)
        self.x = np.where((there > low) & (there < high), there, 0.5 * (low + high))
        return ~arrived


def newton(
    function: Callable[..., tuple[Floats, Floats]],
    start: Floats,
    *args: Floats,
    bracket: tuple[Floats | float, Floats | float] = (-np.inf, np.inf),
    reach: float = 5.0,
    unit: float = 0.0,
) -> Floats:
    """Solve function(x) = 0 by Newton's method.

    Parameters
    ----------
    function : callable
        Takes x and elements of `args`; returns value and derivative. The value rises with x; NaN is taken for
        too large.
    start : ndarray, shape (n,)
        NaN where nothing is to be solved.
    *args : ndarray, shape (n,)
        What the function needs.
    bracket : pair of ndarray or float
        Below and above the root; infinite where unknown.
    reach : float
        Longest step, in the units of x.
    unit : float
        Steps are judged against x or, where it is smaller, against this.

    Returns
    -------
    ndarray, shape (n,)
    """
    search = _search(start, args, bracket, (reach, unit, _NEWTON_LAST))
    for _ in range(_STEPS):
        if not search.x.size:
            break
        value, slope = function(search.x, *search.args)
        search.squeeze(value)
        search.keep(search.step(-value / slope))
    return search.result


def secant(
    function: Callable[..., Floats],
    start: Floats,
    *args: Floats,
    bracket: tuple[Floats | float, Floats | float] = (-np.inf, np.inf),
    reach: float = 2.0,
    slope: float = 1.0,
) -> Floats:
    """Solve function(x) = 0 by the secant, for functions whose derivative is dear.

    Parameters
    ----------
    function, start, *args, bracket, reach
        As in `newton`; the function returns its value alone. x and value are best logarithms.
    slope : float
        Derivative assumed for the first step.

    Returns
    -------
    ndarray, shape (n,)
    """
    search = _search(start, args, bracket, (reach, 1.0, _SECANT_LAST))
    search.args += [np.full_like(search.x, np.nan), np.full_like(search.x, np.nan)]
    for _ in range(_STEPS):
        if not search.x.size:
            break
        *own, x_before, value_before = search.args
        value = function(search.x, *own)
        search.squeeze(value)
        rise = (value - value_before) / (search.x - x_before)
        search.args[-2:] = [search.x, value]
        search.keep(search.step(np.where(value == 0.0, 0.0, -value / np.where(rise > 0.0, rise, slope))))
    return search.result


def _search(
    start: Floats,
    args: tuple[Floats, ...],
    bracket: tuple[Floats | float, Floats | float],
    limits: tuple[float, float, float],
) -> _Search:
    reach, unit, last = limits
    low, high = (np.broadcast_to(np.asarray(side, dtype=np.float64), start.shape) for side in bracket)
    return _Search(reach, unit, last, np.arange(start.size), start, low, high, list(args))
