"""Where the strands of a row of swags hang: between two rails, round a ring, or between two rings."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Curve
from geom.hang.rail import Rail
from geom.result import Dimension, Line

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Row:
    """Where the strands of a row hang.

    Parameters
    ----------
    between : "rails", "ring" or "rings"
    starts, ends : ndarray, shape (n, 3), m
        Of each strand; round a ring each begins where the one before it ends.
    outlines : tuple of Curve
        The rails or rings.
    rail : Rail or None
        Of a row between rails the one its strands begin at.
    """

    between: Literal["rails", "ring", "rings"]
    starts: Floats
    ends: Floats
    outlines: tuple[Curve, ...]
    rail: Rail | None = None


def outlines(mark: str, row: Row) -> tuple[Line, ...]:
    """Return the rails or rings in place."""
    return tuple(Line("edge", curve, mark) for curve in row.outlines)


def every(count: int, most: int) -> int:
    """Return the round step (1, 2, 5, 10, 20, ...) that picks at most `most` of so many strands."""
    size = 1
    while True:
        for step in (size, 2 * size, 5 * size):
            if count <= step * most:
                return step
        size *= 10


def named(count: int, most: int) -> list[int]:
    """Return the numbers, from 0, of the strands that are marked: every so many from the first on, and the last."""
    step = every(count, most)
    return [*range(0, count - step // 2 - 1, step), count - 1]


def zones(stocks: Sequence[str], tops: Floats) -> list[Dimension]:
    """Return dimensions of where strands of one stock hang, from the first to the last of them, if there are several.

    Parameters
    ----------
    stocks : sequence of str
        The name of each strand's stock.
    tops : ndarray, shape (n, 3)
        Where the strands hang from in the elevation along the rail, m.
    """
    starts = [0, *(n for n in range(1, len(stocks)) if stocks[n] != stocks[n - 1]), len(stocks)]
    if len(starts) == 2:
        return []
    ends = [(tops[first], tops[after - 1], stocks[first]) for first, after in pairwise(starts)]
    return [Dimension("horizontal", p, q, float(q[0] - p[0]), stock, "above", 1) for p, q, stock in ends]
