"""Parallels of planar curves: the faces of an arch beside its axis.

At the distance d to the left of a curve that turns by the angle theta(s), anticlockwise positive, the
parallel has the same normals, the length s - d theta(s), and the curvature kappa/(1 - d kappa). It is exact
from the curve's own points and tangents while d kappa < 1; beyond, it would have cusps.
"""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, fixed, positive, unit
from geom.curves.measure import chord_errors, refined

_IN_PLANE = 1e-6  # sine of the angle a tangent may stand out of the plane: rounding of points near one another
_TABLE = 1e-4  # of the length: chords of the table of angles, each far under the half turn that is ambiguous
_STEPS = 60  # a bracket of one chord shrinks under the rounding of arc lengths in about ten


@dataclass(frozen=True, eq=False)
class Offset(Curve):
    """The parallel of a smooth planar curve.

    Raises
    ------
    ValueError
        If the curve leaves the plane, or the distance is over its least radius of curvature on that side.
    """

    curve: Curve  # planar, without corners
    distance: float  # m, to the left of the curve seen from the normal's tip, negative to the right
    normal: Array  # (3,) of the plane; along x up, so that the left of a line run along is up

    def __post_init__(self) -> None:
        self._set(normal=unit(self.normal, name="normal"), distance=float(self.distance))
        tangents = self.curve.at(self._table[0]).tangents
        if np.abs(tangents @ self.normal).max() > _IN_PLANE:
            raise ValueError("the curve leaves the plane of its parallel")
        if not (np.diff(self._table[2]) > 0).all():
            raise ValueError(f"no parallel at {self.distance} m: that is over the least radius of curvature")

    @cached_property
    def start(self) -> Array:
        """First point, (3,) m."""
        return fixed(self._beside(np.zeros(1)).points[0], 3, name="start")

    @cached_property
    def end(self) -> Array:
        """Last point, (3,) m."""
        last = np.array([0.0 if self.closed else self.curve.length])
        return fixed(self._beside(last).points[0], 3, name="end")

    @property
    def closed(self) -> bool:
        """Whether the curve is closed."""
        return self.curve.closed

    @cached_property
    def length(self) -> float:
        """True length, m: the curve's less the distance times its whole turn."""
        return float(self._table[2][-1])

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners: the curve's own, and more where chords of the parallel need them."""
        return np.clip(self._reach(self._base_stations(within)), 0.0, self.length)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m."""
        return self._beside(self._base(self._stationed(s)))

    def points(self, within: float) -> Array:
        """Polyline no chord of which is off the parallel by more than `within`; its ends are exact."""
        points = self._beside(self._base_stations(within)).points
        points[0], points[-1] = self.start, self.end
        return points

    def moved(self, offset: Array) -> Self:
        """Return the parallel moved by a vector, (3,) m."""
        return replace(self, curve=self.curve.moved(offset))

    def scaled(self, factor: float) -> Self:
        """Return the parallel scaled about the origin."""
        return replace(self, curve=self.curve.scaled(factor), distance=self.distance * factor)

    def _base_stations(self, within: float) -> Array:
        """Arc lengths of the curve beside the parallel's corners."""
        base = self.curve.stations(positive(within, name="within"))
        # Outside a bend the chords are off by more than the curve's, all by about the same share.
        more = chord_errors(self._beside, base).max() / within
        if more > 1:
            base = self.curve.stations(within / (1.02 * more))
        return refined(self._beside, base, within)

    def _beside(self, base: Array) -> Along:
        """Points beside the curve's own at its arc lengths `base`."""
        points, tangents = self.curve.at(base)
        return Along(points + self.distance * np.cross(self.normal, tangents), tangents)

    @cached_property
    def _table(self) -> tuple[Array, Array, Array]:
        """Arc lengths of the curve, the angles turned up to there, the arc lengths of the parallel."""
        base = self.curve.stations(_TABLE * self.curve.length)
        # Twice as fine: a polyline may be closed by few corners, and a turn must be under half a turn a step.
        base = np.sort(np.concatenate([base, 0.5 * (base[1:] + base[:-1])]))
        tangents = self.curve.at(base).tangents
        angle = np.concatenate([[0.0], np.cumsum(self._turn(tangents[:-1], tangents[1:]))])
        return base, angle, base - self.distance * angle

    def _turn(self, one: Array, other: Array) -> Array:
        """Angle from one tangent to the other, anticlockwise about the normal, rad."""
        return np.asarray(np.arctan2(np.cross(one, other) @ self.normal, (one * other).sum(axis=-1)))

    def _reach(self, base: Array) -> Array:
        """Arc length of the parallel beside the curve's arc lengths `base`, m."""
        stations, angles, _ = self._table
        near = np.clip(np.searchsorted(stations, base) - 1, 0, len(stations) - 2)
        turned = self._turn(self.curve.at(stations[near]).tangents, self.curve.at(base).tangents)
        return np.asarray(base - self.distance * (angles[near] + turned))

    def _base(self, s: Array) -> Array:
        """Arc lengths of the curve beside the parallel's arc lengths `s`: regula falsi in brackets.

        The parallel's length rises with the curve's (checked), so each bracket of the table holds one root.
        An end that stays put twice has its value halved: the Illinois method, of order 1.44 (Dowell and
        Jarratt, "A modified regula falsi method for computing the root of an equation", 1971).
        """
        stations, _, reach = self._table
        left = np.clip(np.searchsorted(reach, s, side="right") - 1, 0, len(reach) - 2)
        low, high = stations[left], stations[left + 1]
        under, over = reach[left] - s, reach[left + 1] - s
        rounding = 4 * np.finfo(float).eps * (self.curve.length + self.length)
        middle, was_below = low, np.zeros(len(s), dtype=bool)
        for step in range(_STEPS):
            wide = over > under
            middle = np.where(wide, low - under * (high - low) / np.where(wide, over - under, 1.0), low)
            miss = self._reach(middle) - s
            if np.abs(miss).max(initial=0.0) <= rounding:
                break
            below = miss < 0
            again = (below == was_below) & (step > 0)
            over = np.where(below, np.where(again, 0.5, 1.0) * over, miss)
            under = np.where(below, miss, np.where(again, 0.5, 1.0) * under)
            low, high = np.where(below, middle, low), np.where(below, high, middle)
            was_below = below
        return np.clip(middle, 0.0, self.curve.length)
