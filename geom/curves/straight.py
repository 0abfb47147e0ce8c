"""Straight lines: one, or several one after another."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, fixed, positive


@dataclass(frozen=True, eq=False)
class Segment(Curve):
    """The straight line from `p` to `q`."""

    p: Array  # (3,) m
    q: Array  # (3,) m

    def __post_init__(self) -> None:
        self._set(p=fixed(self.p, 3, name="p"), q=fixed(self.q, 3, name="q"))
        if np.array_equal(self.p, self.q):
            raise ValueError(f"a segment needs two different points, not {self.p} twice")

    @property
    def start(self) -> Array:
        """First point, (3,) m."""
        return self.p

    @property
    def end(self) -> Array:
        """Last point, (3,) m."""
        return self.q

    @cached_property
    def length(self) -> float:
        """Distance between the ends, m."""
        return float(np.linalg.norm(self.q - self.p))

    def stations(self, within: float) -> Array:
        """Arc lengths of the two ends: a chord is the line itself."""
        positive(within, name="within")
        return np.array([0.0, self.length])

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m."""
        s = self._stationed(s)
        direction = (self.q - self.p) / self.length
        return Along(self.p + s[:, None] * direction, np.tile(direction, (len(s), 1)))

    def moved(self, offset: Array) -> Self:
        """Return the line moved by a vector, (3,) m."""
        return replace(self, p=self.p + offset, q=self.q + offset)

    def scaled(self, factor: float) -> Self:
        """Return the line scaled about the origin."""
        return replace(self, p=self.p * factor, q=self.q * factor)


@dataclass(frozen=True, eq=False)
class Polyline(Curve):
    """Straight lines from corner to corner; points given twice running are taken once.

    A closed polyline runs from its last corner back to its first, which need not be repeated.
    """

    vertices: Array  # (n, 3) m
    closed: bool = False

    def __post_init__(self) -> None:
        vertices = fixed(self.vertices, None, 3, name="vertices")
        new = np.any(np.diff(vertices, axis=0) != 0, axis=1)
        vertices = vertices[np.concatenate([[True], new])]
        if self.closed and len(vertices) > 1 and np.array_equal(vertices[0], vertices[-1]):
            vertices = vertices[:-1]
        least = 3 if self.closed else 2
        if len(vertices) < least:
            raise ValueError(f"the polyline needs {least} different points, not {len(vertices)}")
        self._set(vertices=fixed(vertices, None, 3, name="vertices"))

    @property
    def start(self) -> Array:
        """First point, (3,) m."""
        return np.asarray(self.vertices[0])

    @property
    def end(self) -> Array:
        """Last point, (3,) m; of a closed polyline the first again."""
        return np.asarray(self.vertices[0 if self.closed else -1])

    @cached_property
    def length(self) -> float:
        """Sum of the lines' lengths, m."""
        return float(self._reach[-1])

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners."""
        positive(within, name="within")
        return self._reach.copy()

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m; at a corner those of the line that follows."""
        s = self._stationed(s)
        line = np.clip(np.searchsorted(self._reach, s, side="right") - 1, 0, len(self._reach) - 2)
        directions = np.diff(self._corners, axis=0) / np.diff(self._reach)[:, None]
        past = s - self._reach[line]
        return Along(self._corners[line] + past[:, None] * directions[line], directions[line])

    def moved(self, offset: Array) -> Self:
        """Return the polyline moved by a vector, (3,) m."""
        return replace(self, vertices=self.vertices + offset)

    def scaled(self, factor: float) -> Self:
        """Return the polyline scaled about the origin."""
        return replace(self, vertices=self.vertices * factor)

    @cached_property
    def _corners(self) -> Array:
        """Corners in turn, (n, 3) m, the first again at the end where closed."""
        return np.vstack([self.vertices, self.vertices[:1]]) if self.closed else self.vertices

    @cached_property
    def _reach(self) -> Array:
        """Arc length at each corner, (n,) m."""
        steps = np.linalg.norm(np.diff(self._corners, axis=0), axis=1)
        return np.concatenate([[0.0], np.cumsum(steps)])
