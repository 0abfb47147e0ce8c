"""Chains as the polygon that their rigid links hang in: how far it is from the catenary, and the polygon as drawn.

A chain with fittings is taken for links of one length from support to support, the fittings shared out among them.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang import rigid
from geom.hang.intent import Made, Wish
from geom.result import NAN

Floats = NDArray[np.float64]

MOST_PADDED = 2_000_000
"""Chains times links of the longest: past it, 50 MB an array, polygons are not worked out."""


@dataclass(frozen=True, eq=False)
class RigidLinks:
    """Polygons of some members, their numbers in `rows`; hinges (m, k, 2) plan distance and rise from `from`, m."""

    rows: NDArray[np.intp]
    joints: Floats
    off: Floats

    def off_of(self, number: int) -> float:
        """Return the greatest distance from the catenary of one member, m; NaN where it has no polygon."""
        row = self._row(number)
        return NAN if row is None else float(self.off[row])

    def _row(self, number: int) -> int | None:
        row = int(np.searchsorted(self.rows, number))
        return row if row < len(self.rows) and self.rows[row] == number else None

    def hinges(self, number: int) -> Floats | None:
        """Return a member's hinges along its span, aside and up from `from`, (k, 3) m; None where it has none."""
        row = self._row(number)
        if row is None or np.isnan(self.off[row]):
            return None
        flat = self.joints[row]
        flat = flat[np.isfinite(flat[:, 0])]
        return np.stack([flat[:, 0], np.zeros(len(flat)), flat[:, 1]], axis=1)


def rigid_links(wish: Wish, made: Made) -> RigidLinks:
    """Return the polygons of all chains of two links or more that carry nothing and have a span."""
    chain = np.isfinite(wish.pitch) & (made.count >= 2) & (made.lengths.excess > 0.0)
    chain[made.lies.rows] = False
    rows = np.flatnonzero(chain & (wish.span > 0.0) & ~wish.carried.any)
    if rows.size * int(made.count[rows].max(initial=0)) > MOST_PADDED:
        rows = rows[:0]
    if not rows.size:
        return RigidLinks(rows, np.empty((0, 0, 2)), np.empty(0))
    count = made.count[rows].astype(np.float64)
    pin = made.lengths.pin[rows]
    polygon = rigid.link(
        wish.span[rows], wish.level_difference[rows], pin / count, count, wish.weight[rows] * pin / count
    )
    return RigidLinks(rows, polygon.joints, polygon.off_catenary)
