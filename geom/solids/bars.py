"""One section along many lines: the members of a net or a frame."""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Self

import numpy as np

from geom.curves.base import Array, Index, fixed
from geom.solids.body import Body
from geom.solids.mesh import Facets, Mesh
from geom.solids.section import Section, area, checked, checked_hole, polygons
from geom.solids.skin import overlapping, skin

_ON_PLAN = 1e-9  # as for curves: less aside than this share of the height is rounding
_POINTS_A_CHUNK = 2048


@dataclass(frozen=True, eq=False)
class Bars(Body):
    """One section along many polylines at once, each in a vertical plane: the members of a net or a frame.

    The section's x axis is level and square to each member's plane. Members are lengthened by a few thousandths of
    the section, so that those which meet overlap.
    """

    points: Array  # (k, 3) m, one polyline after another
    first: Index  # (m + 1,) polyline i is points[first[i]:first[i + 1]]
    section: Section  # radius, m, or polygon (k, 2) m
    hole: Section | None = None  # as for a sweep
    length: float = np.nan  # m, true length of all curves; that of the polylines where not stated

    def __post_init__(self) -> None:
        first = np.array(self.first, dtype=np.int64)
        first.flags.writeable = False
        self._set(points=fixed(self.points, None, 3, name="points"), first=first)
        if len(first) < 2 or first[0] != 0 or first[-1] != len(self.points) or np.diff(first).min() < 2:
            raise ValueError("first must run from 0 to the number of points, two points or more at a time")
        self._set(section=checked(self.section, name="section"))
        self._set(hole=checked_hole(self.hole, self.section))
        if np.isnan(self.length):
            self._set(length=float(np.linalg.norm(self._edges, axis=1).sum()))

    @property
    def volume(self) -> float:
        """Area of the section times the length of all, m3."""
        inside = 0.0 if self.hole is None else area(self.hole)
        return (area(self.section) - inside) * self.length

    def mesh(self, within: float) -> Mesh:
        """Make the mitred surfaces of all members."""
        return self._part(0, len(self.first) - 1, polygons(self.section, self.hole, within))

    def facets(self, within: float) -> int:
        """How many triangles there are: two for each side of each edge, and two caps for each member."""
        rings = polygons(self.section, self.hole, within)
        sides, members = len(rings[0]), len(self.first) - 1
        caps = 2 * (2 * sides if len(rings) > 1 else sides - 2)
        return 2 * sides * len(rings) * (len(self.points) - members) + caps * members

    def chunks(self, within: float) -> Iterator[Facets]:
        """Normals and corners of the triangles, some members' at a time, (k, 4, 3)."""
        rings = polygons(self.section, self.hole, within)
        size = max(1, _POINTS_A_CHUNK * (len(self.first) - 1) // len(self.points))
        for start in range(0, len(self.first) - 1, size):
            yield from self._part(start, min(start + size, len(self.first) - 1), rings).chunks()

    def moved(self, offset: Array) -> Self:
        """Return the members moved by a vector, (3,) m."""
        return replace(self, points=self.points + offset)

    def scaled(self, factor: float) -> Self:
        """Return the members scaled about the origin."""
        hole = None if self.hole is None else self.hole * factor
        section, length = self.section * factor, self.length * factor
        return replace(self, points=self.points * factor, section=section, hole=hole, length=length)

    @property
    def _edges(self) -> Array:
        inside = np.ones(len(self.points) - 1, dtype=bool)
        inside[self.first[1:-1] - 1] = False
        return np.asarray(np.diff(self.points, axis=0)[inside])

    def _part(self, start: int, stop: int, rings: tuple[Array, ...]) -> Mesh:
        first = self.first[start : stop + 1]
        points = self.points[first[0] : first[-1]]
        first = first - first[0]
        points = overlapping(points, first, float(np.ptp(rings[0])))
        way = points[first[1:] - 1] - points[first[:-1]]
        level = np.hypot(way[:, 0], way[:, 1])
        plumb = level <= _ON_PLAN * np.abs(way[:, 2])
        level = np.where(plumb, 1.0, level)
        side = np.stack([np.where(plumb, 0.0, -way[:, 1] / level), np.where(plumb, 1.0, way[:, 0] / level)])
        sides = np.concatenate([side, np.zeros((1, len(way)))]).T
        return skin(points, first, np.repeat(sides, np.diff(first) - 1, axis=0), rings)
