r"""The line that has an arch's shape, as an object: where it is, how it turns, and how its parallels lie.

A shape is a concave curve with its crown at the origin, z upward. It is run through by a natural parameter that rises
from the ``from`` side to the ``to`` side and is nought at the crown; everything of it is a smooth function of that
parameter. The parallel at an offset `d` (positive outward, away from the centre) lies at `d` along the normal and
shares the parameter:

.. math:: P_d(q) = P(q) + d\,n(q), \quad ds_d = ds + d\,d\theta

so that its length is the shape's own and `d` times the angle turned, as long as it does not fold: d > -radius.

Sources
-------
Catenary: Huygens, Leibniz and Johann Bernoulli, Acta Eruditorum, 1691. Parallels: Leibniz, 1692; any differential
geometry.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar, Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

from geom.arch.roots import rising_root

Floats = NDArray[np.float64]

_LONGEST_STEP = 0.5  # of u = x/a: see Catenary.step_within


class Shape(Protocol):
    """A family of similar concave curves, one for each `scale` (m); the larger the scale, the flatter everywhere.

    ``radius(q)`` of a larger scale is larger at every slope. From this it follows that of two curves of a family
    through the same two points that of the smaller scale lies above the other throughout: rise, length and height at
    any place fall as the scale grows, so that each fact fixes one scale.
    """

    @property
    def scale(self) -> float:
        """Size of the curve, m."""

    @property
    def smooth_step(self) -> float:
        """Step of the parameter within which 12 points of Gauss integrate products of the curve to rounding."""

    @property
    def least_radius(self) -> float:
        """Least radius of curvature, m: the parallel at minus this offset begins to fold."""

    def point(self, q: ArrayLike) -> Floats:
        """Return points (..., 2), m, crown at the origin."""

    def normal(self, q: ArrayLike) -> Floats:
        """Return unit normals (..., 2), outward and so upward."""

    def slope(self, q: ArrayLike) -> Floats:
        """Return slopes in radians, positive where the line rises toward the ``to`` side, falling with `q`."""

    def at_slope(self, slope: ArrayLike) -> Floats:
        """Return the parameter at slopes in radians."""

    def radius(self, q: ArrayLike) -> Floats:
        """Return radii of curvature, m."""

    def speed(self, q: ArrayLike, offset: float) -> Floats:
        """Return the length of the parallel run through per unit of the parameter, m."""

    def length(self, q: ArrayLike, offset: float) -> Floats:
        """Return lengths of the parallel from its crown, m, negative on the ``from`` side."""

    def drop(self, q: ArrayLike, offset: float) -> Floats:
        """Return depths under the crown of the parallel, m."""

    def at_x(self, x: ArrayLike, offset: float) -> Floats:
        """Return the parameter where the parallel is at `x` (m from the crown)."""

    def at_drop(self, drop: ArrayLike, offset: float) -> Floats:
        """Return the parameter on the ``to`` side where the parallel is `drop` (m, not negative) under its crown."""

    def at_length(self, length: ArrayLike, offset: float) -> Floats:
        """Return the parameter where the parallel has the given length from its crown, m."""

    def chord(self, span: float, level: float) -> tuple[float, float]:
        """Return the parameters of the two points of the shape itself that lie (`span`, `level`) m apart."""

    def step_within(self, within: float, offset: float) -> float:
        """Return the greatest step of the parameter whose chord is nowhere more than `within` (m) off the parallel."""


@dataclass(frozen=True)
class Catenary:
    """The catenary z = -a (cosh(x/a) - 1), stood up; its parameter is u = x/a.

    Differences of hyperbolic functions are written as products, since ``cosh u - 1`` loses all figures of a flat arch:
    cosh u - 1 = 2 sinh(u/2)^2.
    """

    scale: float

    smooth_step: ClassVar[float] = 1.0
    # Parallels have tanh u and sech u in them, with poles at u = i pi/2. On a step of 1 the ellipse of analyticity
    # has the half axes sum rho = pi + sqrt(pi^2 - 1) = 6.1, and 12 points of Gauss err by about rho^-24 = 1e-19.

    @property
    def least_radius(self) -> float:
        """The radius of curvature at the crown, a."""
        return self.scale

    def point(self, q: ArrayLike) -> Floats:
        """Return points (..., 2), m, crown at the origin."""
        u = np.asarray(q, dtype=np.float64)
        return np.stack([self.scale * u, -2.0 * self.scale * np.sinh(0.5 * u) ** 2], axis=-1)

    def normal(self, q: ArrayLike) -> Floats:
        """Return unit normals (..., 2): (tanh u, sech u)."""
        u = np.asarray(q, dtype=np.float64)
        return np.stack([np.tanh(u), 1.0 / np.cosh(u)], axis=-1)

    def slope(self, q: ArrayLike) -> Floats:
        """Return slopes in radians: minus the Gudermannian of u."""
        return -2.0 * np.arctan(np.tanh(0.5 * np.asarray(q, dtype=np.float64)))

    def at_slope(self, slope: ArrayLike) -> Floats:
        """Return u = asinh(tan(-slope))."""
        return -np.arcsinh(np.tan(np.asarray(slope, dtype=np.float64)))

    def radius(self, q: ArrayLike) -> Floats:
        """Return radii of curvature, a cosh(u)^2."""
        return self.scale * np.cosh(np.asarray(q, dtype=np.float64)) ** 2

    def speed(self, q: ArrayLike, offset: float) -> Floats:
        """Return ds/du = a cosh u + d sech u."""
        cosh = np.cosh(np.asarray(q, dtype=np.float64))
        return self.scale * cosh + offset / cosh

    def length(self, q: ArrayLike, offset: float) -> Floats:
        """Return a sinh u + d gd u."""
        return self.scale * np.sinh(np.asarray(q, dtype=np.float64)) - offset * self.slope(q)

    def drop(self, q: ArrayLike, offset: float) -> Floats:
        """Return (cosh u - 1)(a + d sech u)."""
        u = np.asarray(q, dtype=np.float64)
        return 2.0 * np.sinh(0.5 * u) ** 2 * (self.scale + offset / np.cosh(u))

    def at_x(self, x: ArrayLike, offset: float) -> Floats:
        """Return u where a u + d tanh u = x.

        The left side rises and bends one way only on each side of the crown (its second derivative is
        -2 d sech^2 u tanh u), so Newton's steps from the right end of the bracket come in from one side.
        """
        target = np.abs(np.asarray(x, dtype=np.float64))
        a, d = self.scale, offset
        if d == 0.0:
            return np.asarray(x, dtype=np.float64) / a
        # tanh u is between 0 and min(u, 1)
        low = np.maximum(target / (a + d), (target - d) / a) if d > 0 else target / a
        high = target / a if d > 0 else (target - d) / a

        def function(u: Floats) -> tuple[Floats, Floats]:
            tanh = np.tanh(u)
            return a * u + d * tanh - target, a + d * (1.0 - tanh * tanh)

        return np.copysign(rising_root(function, low, high, start=low if d > 0 else high), x)

    def at_drop(self, drop: ArrayLike, offset: float) -> Floats:
        """Return u >= 0 where the parallel is `drop` under its crown, in closed form.

        With p = 1 - sech u the drop is p (a + d (1 - p))/(1 - p), a quadratic in p; its smaller root, written so that
        nothing cancels, gives u = 2 asinh sqrt(p / (2 (1 - p))).
        """
        a, d = self.scale, offset
        depth = np.asarray(drop, dtype=np.float64)
        b = a + d + depth
        p = 2.0 * depth / (b + np.sqrt(b * b - 4.0 * d * depth))
        # 1 - p, the sech itself, by its own quadratic d c^2 + (depth + a - d) c - a = 0: 1 - p would cancel far down
        e = depth + a - d
        root = np.sqrt(e * e + 4.0 * a * d)
        sech = np.where(e > 0, 2.0 * a / np.where(e > 0, e + root, 1.0), (root - e) / (2.0 * d or 1.0))
        return 2.0 * np.arcsinh(np.sqrt(0.5 * p / sech))

    def at_length(self, length: ArrayLike, offset: float) -> Floats:
        """Return u where a sinh u + d gd u is the given length."""
        target = np.abs(np.asarray(length, dtype=np.float64))
        a, d = self.scale, offset
        if d == 0.0:
            return np.arcsinh(np.asarray(length, dtype=np.float64) / a)

        def function(u: Floats) -> tuple[Floats, Floats]:
            return self.length(u, d) - target, self.speed(u, d)

        # gd u is between 0 and pi/2
        turned = 0.5 * np.pi * abs(d)
        low, high = np.arcsinh(np.maximum(target - turned, 0.0) / a), np.arcsinh((target + turned) / a)
        return np.copysign(rising_root(function, low, high, start=np.arcsinh(target / a)), length)

    def chord(self, span: float, level: float) -> tuple[float, float]:
        """Return u of both ends of the arc with the given chord.

        level = -a (cosh u1 - cosh u0) = -2 a sinh(m) sinh(span/2a) with m their mean (cables, any text).
        """
        half = 0.5 * span / self.scale
        mean = -float(np.arcsinh(level / (2.0 * self.scale * np.sinh(half))))
        return mean - half, mean + half

    def step_within(self, within: float, offset: float) -> float:
        r"""Return the greatest step of u whose chord is nowhere more than `within` off the parallel.

        An arc of radius R turning through w departs R w^2/8 from its chord; here w = sech(u) du and R = a cosh^2 u +
        d, so the departure is du^2 (a + d sech^2 u)/8: the same everywhere for the catenary itself. The next term
        adds under du^2/40 of it, which steps of at most 0.5 keep under 1 %: taken off beforehand.
        """
        widest = max(self.scale, self.scale + offset)
        return float(min(np.sqrt(8.0 * 0.99 * within / widest), _LONGEST_STEP))
