"""A rail: a polyline that things hang from at distances along it, and the plane that it is developed into."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

# A spacing that fills the rail to the last strand misses its end by rounding: a sum of m corners' distances is good to
# m eps, and 1e-9 of the length is far under what any rule shows.
_SAME = 1e-9


@dataclass(frozen=True, eq=False)
class Rail:
    """A polyline of corners (m, 3), m, no two successive ones alike; made by `rail`."""

    corners: Floats

    @cached_property
    def reach(self) -> Floats:
        """Distance of each corner along the rail from its start, (m,) m."""
        return _summed(np.linalg.norm(np.diff(self.corners, axis=0), axis=1))

    @cached_property
    def plan(self) -> Floats:
        """Distance of each corner from the start on plan, along the rail as seen from above, (m,) m."""
        step = np.diff(self.corners, axis=0)
        return _summed(np.hypot(step[:, 0], step[:, 1]))

    @property
    def length(self) -> float:
        """Length of the rail, m."""
        return float(self.reach[-1])

    def at(self, distance: Floats) -> Floats:
        """Return points (n, 3), m, at distances (n,) along the rail, m; past its ends the ends."""
        return np.stack([np.interp(distance, self.reach, self.corners[:, axis]) for axis in range(3)], axis=-1)

    def developed(self, distance: Floats) -> Floats:
        """Return how far along on plan points at distances (n,) along the rail are, (n,) m.

        That is their place in an elevation whose plane follows the rail, unfolded: heights and slopes are true there.
        """
        return np.asarray(np.interp(distance, self.reach, self.plan))


def rail(points: Sequence[Sequence[float]]) -> Rail:
    """Return the rail through points, m; one given twice running counts once.

    Raises
    ------
    ValueError
        If fewer than two different points are left.
    """
    corners = np.array(points, dtype=np.float64).reshape(-1, 3)
    moved = np.any(np.diff(corners, axis=0) != 0.0, axis=1)
    corners = np.concatenate([corners[:1], corners[1:][moved]])
    if len(corners) < 2:
        raise ValueError("has no length; give at least two different points [x, y, z]")
    corners.setflags(write=False)
    return Rail(corners)


def even(length: float, count: int) -> Floats:
    """Return `count` distances, evenly over a length, both ends included, (count,) m."""
    return np.linspace(0.0, length, count)


def spaced(length: float, spacing: float) -> Floats:
    """Return distances from 0 on, `spacing` apart, as far as the length goes, (n,) m."""
    count = int(np.floor(length / spacing * (1.0 + _SAME))) + 1
    return np.asarray(np.minimum(spacing * np.arange(count), length))


def ring(centre: Sequence[float], diameter: float, count: int) -> Floats:
    """Return points evenly round a level ring from +x on, anticlockwise seen from above, (count, 3) m."""
    angle = 2.0 * np.pi * np.arange(count) / count
    way = np.stack([np.cos(angle), np.sin(angle), np.zeros(count)], axis=1)
    way[np.abs(way) < 4.0 * np.finfo(float).eps] = 0.0  # the quarter points lie on the axes, but for rounding
    points: Floats = np.array(centre, dtype=np.float64) + 0.5 * diameter * way
    return points


def _summed(steps: Floats) -> Floats:
    return np.concatenate([[0.0], np.cumsum(steps)])
