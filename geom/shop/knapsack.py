"""The best filling of one reel: bounded knapsack by dynamic programming over its length."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["Knapsack", "best_fillings"]

Whole = NDArray[np.int64]


@dataclass(frozen=True, eq=False)
class Knapsack:
    """The best value of a filling of every room up to a reel's, and how it is reached.

    Parameters
    ----------
    best : ndarray, shape (room + 1,)
        Greatest value of pieces that take at most so much room.
    """

    best: Whole
    _parts: tuple[tuple[int, int, int, NDArray[np.bool_]], ...]  # kind, how many, room, whether it is in

    def filling(self, room: int) -> dict[int, int]:
        """Return {kind: how many} of a best filling of `room`."""
        cuts: dict[int, int] = {}
        for kind, number, size, chosen in reversed(self._parts):
            if room >= size and chosen[room - size]:
                cuts[kind] = cuts.get(kind, 0) + number
                room -= size
        return cuts


def _shares(most: int) -> list[int]:
    """Return counts of which every number up to `most` is a sum, and no greater one: 1, 2, 4, ..., the rest."""
    shares, share = [], 1
    while share <= most:
        shares.append(share)
        most -= share
        share *= 2
    return [*shares, most] if most else shares


def best_fillings(sizes: Whole, values: Whole, most: Whole, room: int) -> Knapsack:
    """Return the greatest value that fits in every room up to `room`.

    Whole numbers throughout, so that the answer is exact.

    Parameters
    ----------
    sizes, values, most : ndarray of int, shape (m,)
        Room, value and greatest number of each kind.
    room : int
        Largest room.

    Notes
    -----
    Martello, S. and Toth, P., *Knapsack Problems* (1990), section 3.2: a bounded kind becomes a few pieces of 1, 2,
    4, ... of it, each in or out; one pass over the rooms for each.
    """
    best = np.zeros(room + 1, dtype=np.int64)
    parts = []
    for kind in np.flatnonzero((values > 0) & (sizes <= room)):
        for number in _shares(int(min(most[kind], room // max(1, sizes[kind])))):
            size = int(number * sizes[kind])
            with_it = best[: room + 1 - size] + number * values[kind]
            chosen = with_it > best[size:]
            np.maximum(best[size:], with_it, out=best[size:])
            parts.append((int(kind), number, size, chosen))
    return Knapsack(best, tuple(parts))
