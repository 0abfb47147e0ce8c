"""Members that come to lie on a floor: what hangs at both ends, what lies between, and what is looked at of both."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.floor import Floored, lay
from geom.hang.held import Held
from geom.hang.loaded import Stocks
from geom.hang.stretched import Stretched

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]

# A member touches where it would hang lower than the floor by more than this, m: nobody sets either out finer.
_TOUCHES = 1e-6
# The depth under the chord is looked for on grids along the member, each within two steps of the one before: it is
# flat there, so that the last step, 1e-7 of the length, leaves 1e-13 of it.
_GRID = np.linspace(0.0, 1.0, 801)
_ZOOM = np.linspace(-1.0, 1.0, 81)
_ZOOMS = 3


@dataclass(frozen=True, eq=False)
class Lying:
    """Members that lie on a floor, their numbers in `rows`; `floor` its height over their `from` ends, m."""

    rows: Ints
    laid: Floored
    floor: Floats
    weight: Floats

    def part(self, number: int) -> int | None:
        """Return which of these a member is, by its number among all; None where it hangs free."""
        row = int(np.searchsorted(self.rows, number))
        return row if row < len(self.rows) and self.rows[row] == number else None


def lying(hang: Stretched, floor: Floats) -> Lying:
    """Return those of n members that a floor bears; `floor` (n,) its height over each `from`, m, NaN for none."""
    rows = lying_rows(hang, floor)
    stocks = Stocks(hang.length[rows, None], hang.weight[rows, None], hang.stiffness[rows, None])
    heights = -floor[rows], hang.level_difference[rows] - floor[rows]
    laid = lay(hang.span[rows], heights, stocks) if rows.size else _none(stocks)
    return Lying(rows, laid, floor[rows], hang.weight[rows])


def lying_rows(hang: Stretched, floor: Floats) -> Ints:
    """Return the numbers of the members that would hang lower than their floor, on supports that stand over it."""
    over = np.minimum(0.0, hang.level_difference) >= floor
    return np.flatnonzero((hang.lowest < floor - _TOUCHES) & (hang.span > 0.0) & over)


def _none(stocks: Stocks) -> Floored:
    return lay(np.empty(0), (np.empty(0), np.empty(0)), stocks)


def of_lying(lies: Lying) -> Held:
    """Return what is looked at of members that lie on a floor."""
    laid, free = lies.laid, lies.laid.free
    nothing, h = np.zeros_like(laid.horizontal), laid.horizontal
    sag, sag_at = _sag(lies)
    points = laid.at_arc(free.length[:, None] * _GRID)
    rows = zip(free.span, points[:, :, 0], points[:, :, 2], strict=True)
    middle = np.array([np.interp(0.5 * s, x, z) for s, x, z in rows])
    stretch = (1.0 + h / free.sections.stiffness[:, 0]) * laid.lying
    return Held(
        sag=sag,
        sag_mid=0.5 * free.level_difference - middle,
        sag_at=sag_at,
        lowest=np.array(lies.floor),
        lowest_at=laid.at_from.plan,
        horizontal=h,
        on_from=np.stack([h, nothing, -laid.at_from.down], axis=1),
        on_to=np.stack([-h, nothing, -laid.at_to.down], axis=1),
        slope_from=np.arctan2(laid.at_from.down, h),
        slope_to=np.arctan2(laid.at_to.down, h),
        hung_length=stretch + _stretched(lies, laid.at_from.down) + _stretched(lies, laid.at_to.down),
        parameter=h / lies.weight,
    )


def _stretched(lies: Lying, down: Floats) -> Floats:
    """Lengths of strands as stretched: V/w and its pull integrated, (V T/w + H^2 asinh(V/H)/w)/2EA."""
    h, stiffness = lies.laid.horizontal, lies.laid.free.sections.stiffness[:, 0]
    with np.errstate(all="ignore"):
        turned = np.where(h > 0.0, h * h * np.arcsinh(down / h), 0.0)
    pulled = 0.5 * (down * np.hypot(h, down) + turned) / lies.weight
    return np.asarray(down / lies.weight + pulled / stiffness)


def _sag(lies: Lying) -> tuple[Floats, Floats]:
    laid, free = lies.laid, lies.laid.free
    length, slope = free.length[:, None], (free.level_difference / free.span)[:, None]
    arcs, step, rows = length * _GRID, length / (len(_GRID) - 1), np.arange(len(free.span))
    best, at = np.full(len(free.span), np.nan), np.full(len(free.span), np.nan)
    for _ in range(_ZOOMS + 1):
        points = laid.at_arc(arcs)
        under = np.nan_to_num(slope * points[:, :, 0] - points[:, :, 2], nan=-np.inf)
        place = np.argmax(under, axis=1) if len(rows) else rows
        best, at = under[rows, place], points[rows, place, 0]
        arcs = np.clip(arcs[rows, place][:, None] + step * _ZOOM, 0.0, length)
        step = step * (_ZOOM[1] - _ZOOM[0])
    return best, at
