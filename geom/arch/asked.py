"""What is asked of an arch, as the room takes it: lengths in metres, forces in newtons."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from geom.arch.ring import Profile
from geom.result import fixed
from geom.setting.materials import Material
from geom.setting.supports import Support
from geom.units import STANDARD_GRAVITY

Floats = NDArray[np.float64]

FACTS = ("rise", "length", "thrust", "through")


@dataclass(frozen=True)
class Wanted:
    """How the ring is divided and set out."""

    blocks: int | None = None
    joint: float = 0.0
    step: float | None = None
    widths_at: tuple[float, ...] = ()


@dataclass(frozen=True)
class AskedArch:
    """One arch.

    Attributes
    ----------
    start, end : Support
        Springings of the face line.
    fact : str
        One of `FACTS`.
    value : tuple of float
        Its value: one number, or of `through` the distance on plan from `start` and the elevation, m.
    depth : float
        Into the page, m, half to each side of the elevation's plane.
    """

    mark: str
    start: Support
    end: Support
    fact: str
    value: tuple[float, ...]
    profile: Profile
    depth: float
    material: Material
    wanted: Wanted
    copies: int = 1

    @property
    def level(self) -> float:
        """Height of the second springing over the first, m."""
        return self.end.at[2] - self.start.at[2]

    @property
    def unit_weight(self) -> float:
        """Weight per area of the elevation, N/m2."""
        return self.material.density * STANDARD_GRAVITY * self.depth

    @cached_property
    def plane(self) -> Plane:
        """The plane of the elevation."""
        return Plane(fixed(self.start.at, 3), fixed(self.end.at, 3))

    @property
    def span(self) -> float:
        """Distance of the springings on plan, m."""
        return self.plane.span


@dataclass(frozen=True, eq=False)
class Plane:
    """The upright plane through two springings: origin at the first, x toward the second on plan, z up."""

    start: Floats
    end: Floats

    @cached_property
    def span(self) -> float:
        """Distance on plan, m."""
        return float(np.hypot(*(self.end - self.start)[:2]))

    @cached_property
    def along(self) -> Floats:
        """Unit vector (3,) of x; zeros where the springings stand on one plumb line."""
        step = (self.end - self.start) * np.array([1.0, 1.0, 0.0])
        return fixed(step / self.span if self.span else step, 3)

    @cached_property
    def across(self) -> Floats:
        """Unit vector (3,) level and square to the plane, to the left of x on plan."""
        x, y, _ = self.along
        return fixed([-y, x, 0.0], 3)

    def placed(self, points: Floats) -> Floats:
        """Return points (..., 2) of the elevation in space (..., 3), m."""
        return np.asarray(self.start + self.turned(points))

    def turned(self, vectors: Floats) -> Floats:
        """Return vectors (..., 2) of the elevation in space (..., 3)."""
        flat = np.asarray(vectors, dtype=np.float64)
        return np.asarray(flat[..., :1] * self.along + flat[..., 1:] * np.array([0.0, 0.0, 1.0]))

    def found(self, point: Floats) -> tuple[float, float]:
        """Return how far along x and how far off the plane a point (3,) is, m."""
        step = point - self.start
        return float(step @ self.along), float(step @ self.across)
