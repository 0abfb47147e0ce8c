"""A section carried along a curve: tubes, ropes, ribs."""

from dataclasses import dataclass, replace
from itertools import pairwise
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves import Curve
from geom.curves.base import Array, fixed, unit
from geom.solids.body import Body
from geom.solids.frames import level_side, no_twist
from geom.solids.mesh import Mesh, merged
from geom.solids.section import Section, area, checked, checked_hole, polygons
from geom.solids.skin import closed_skin, overlapping, skin

# Over this turn a mitre reaches out by more than 1.7 radii and grows without bound: a line that doubles back is cut
# there and both parts end square.
_SHARP = np.cos(np.radians(120))

# Of a curve's length L: how coarse it is drawn at most, whatever is allowed. Chords with the sagitta s of a curve that
# turns by t in all are together t s / 3L shorter than it (each by 8 s^2 / 3c, c its length): of a volume a hundredth at
# three whole turns.
_COARSEST = 1.5e-3


@dataclass(frozen=True, eq=False)
class Sweep(Body):
    """A section carried along a curve without twist, square ends.

    The section's y axis starts as near to `up` as is square to the curve; without `up` it lies in the curve's
    vertical plane, so that x is level. The section's centroid should ride on the curve: else the true volume is
    another.

    Raises
    ------
    ValueError
        If the section is none, the hole is of another kind, or the taper does not run from 0 to 1.
    """

    curve: Curve
    section: Section  # radius, m, or polygon (k, 2) m
    hole: Section | None = None  # the same, inside it: a tube; a polygon's corners beside those of the section
    up: Array | None = None  # (3,)
    taper: Array | None = None  # (j, 2): share of the length and factor on the section there, linear between

    def __post_init__(self) -> None:
        self._set(section=checked(self.section, name="section"))
        self._set(hole=checked_hole(self.hole, self.section))
        if self.up is not None:
            self._set(up=unit(self.up, name="up"))
        if self.taper is not None:
            self._set(taper=_checked_taper(self.taper))

    @property
    def volume(self) -> float:
        """Area of the section times the length, m3; with a taper its factor squared over the length."""
        square = 1.0
        if self.taper is not None:
            share, factor = self.taper.T
            both = factor[1:] ** 2 + factor[1:] * factor[:-1] + factor[:-1] ** 2
            square = float(np.diff(share) @ both) / 3
        inside = 0.0 if self.hole is None else area(self.hole)
        return (area(self.section) - inside) * self.curve.length * square

    def mesh(self, within: float) -> Mesh:
        """Make the mitred surface; where the curve doubles back it is in two parts with square ends."""
        stations = self.curve.stations(min(within, _COARSEST * self.curve.length))
        if self.taper is not None:
            stations = np.union1d(stations, self.taper[:, 0] * self.curve.length)
        points = self.curve.at(stations).points
        points[0], points[-1] = self.curve.start, self.curve.end
        keep = np.concatenate([[True], np.any(np.diff(points, axis=0) != 0, axis=1)])
        points, stations = points[keep], stations[keep]
        factors = None if self.taper is None else np.interp(stations / self.curve.length, *self.taper.T)
        side = level_side(self.curve) if self.up is None else np.cross(self.up, points[1] - points[0])
        return self._along(points, side, factors, polygons(self.section, self.hole, within))

    def moved(self, offset: Array) -> Self:
        """Return the sweep moved by a vector, (3,) m."""
        return replace(self, curve=self.curve.moved(offset))

    def scaled(self, factor: float) -> Self:
        """Return the sweep scaled about the origin."""
        hole = None if self.hole is None else self.hole * factor
        return replace(self, curve=self.curve.scaled(factor), section=self.section * factor, hole=hole)

    def _along(self, points: Array, side: Array, factors: Array | None, rings: tuple[Array, ...]) -> Mesh:
        edges = np.diff(points, axis=0)
        ways = edges / np.linalg.norm(edges, axis=1, keepdims=True)
        sides = no_twist((points[1:] + points[:-1]) / 2, ways, side)
        turn = (ways[1:] * ways[:-1]).sum(axis=1)
        sharp = np.flatnonzero(turn < _SHARP) + 1
        closed = self.curve.closed and not len(sharp) and ways[0] @ ways[-1] >= _SHARP
        if closed:
            return closed_skin(points, ways, sides, factors, rings)
        cuts = np.concatenate([[0], sharp, [len(points) - 1]])
        parts = []
        for first, last in pairwise(cuts):
            here = slice(first, last + 1)
            size = None if factors is None else factors[here]
            ends = np.array([0, last + 1 - first])
            line = points[here] if len(cuts) == 2 else overlapping(points[here], ends, float(np.ptp(rings[0])))
            parts.append(skin(line, ends, sides[first:last], rings, factors=size))
        return merged(parts)


def _checked_taper(taper: ArrayLike) -> Array:
    pairs = fixed(taper, None, 2, name="taper")
    share, factor = pairs.T
    if not (len(pairs) > 1 and share[0] == 0 and share[-1] == 1 and (np.diff(share) > 0).all()):
        raise ValueError("the taper's shares must rise from 0 to 1")
    if not (factor > 0).all():
        raise ValueError("the taper's factors must be more than 0")
    return pairs
