"""Circular arcs."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, fixed, positive

# `along` and `up` come out of normalised cross products, good to a few eps; a plane out of square by more
# than this would move points by more than 1e-9 of the radius, so it is a mistake and not rounding.
_SQUARE = 1e-9


@dataclass(frozen=True, eq=False)
class Arc(Curve):
    """The arc from angle `start_angle`, turning by `sweep` from `along` towards `up`.

    Raises
    ------
    ValueError
        If the axes are no unit vectors at right angles, the radius is not positive or the sweep is nothing or
        more than a full turn.
    """

    centre: Array  # (3,) m
    radius: float  # m
    along: Array  # (3,) unit vector, angle 0
    up: Array  # (3,) unit vector, a quarter turn
    start_angle: float  # rad
    sweep: float  # rad, negative from `up` towards `along`; a full turn closes the arc

    def __post_init__(self) -> None:
        self._set(
            centre=fixed(self.centre, 3, name="centre"),
            along=fixed(self.along, 3, name="along"),
            up=fixed(self.up, 3, name="up"),
            radius=positive(self.radius, name="radius"),
        )
        axes = np.stack([self.along, self.up])
        if not np.allclose(axes @ axes.T, np.eye(2), rtol=0, atol=_SQUARE):
            raise ValueError("along and up must be unit vectors at right angles")
        if not 0 < abs(self.sweep) <= 2 * np.pi:
            raise ValueError(f"sweep must be more than 0 and at most a full turn, not {self.sweep} rad")

    @cached_property
    def start(self) -> Array:
        """First point, (3,) m."""
        return self._point(self.start_angle)

    @cached_property
    def end(self) -> Array:
        """Last point, (3,) m."""
        return self.start if self.closed else self._point(self.start_angle + self.sweep)

    @property
    def closed(self) -> bool:
        """Whether the arc is a full circle."""
        return abs(self.sweep) == 2 * np.pi

    @property
    def length(self) -> float:
        """Radius times sweep, m."""
        return self.radius * abs(self.sweep)

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners of a polyline within `within`, in equal steps.

        The sagitta of a chord over the angle v is r (1 - cos(v/2)) = 2 r sin^2(v/4), hence the greatest v.
        Steps are held to a quarter turn, so that a circle smaller than `within` is still drawn as a square.
        """
        ratio = min(1.0, positive(within, name="within") / (2 * self.radius))
        step = min(4 * np.arcsin(np.sqrt(ratio)), np.pi / 2)
        return np.linspace(0.0, self.length, _steps(abs(self.sweep) / step) + 1)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m."""
        way = np.sign(self.sweep)
        angle = self.start_angle + way * self._stationed(s) / self.radius
        cos, sin = np.cos(angle)[:, None], np.sin(angle)[:, None]
        points = self.centre + self.radius * (cos * self.along + sin * self.up)
        return Along(points, way * (cos * self.up - sin * self.along))

    def moved(self, offset: Array) -> Self:
        """Return the arc moved by a vector, (3,) m."""
        return replace(self, centre=self.centre + offset)

    def scaled(self, factor: float) -> Self:
        """Return the arc scaled about the origin."""
        return replace(self, centre=self.centre * factor, radius=self.radius * factor)

    def _point(self, angle: float) -> Array:
        point = self.centre + self.radius * (np.cos(angle) * self.along + np.sin(angle) * self.up)
        return fixed(point, 3, name="point")


def _steps(ratio: float) -> int:
    # A ratio whole but for rounding (a quarter turn in quarter turns) must not gain a step.
    return max(1, int(np.ceil(ratio - 1e-9)))
