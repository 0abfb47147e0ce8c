"""The catenary between two points: a hanging curve, or the same curve stood up.

With a = H/w, S the distance between the ends on plan, h the second end's height over the first, u = S/(2a):

    z = a cosh(x/a), x measured from the vertex
    h = 2a sinh(u) sinh(mu)              mu = x_mid/a, x_mid the middle of the span
    L = 2a sinh(u) cosh(mu)              so L^2 = h^2 + (2a sinh u)^2
    z - z_p = 2a sinh(mu + (t - S)/2a) sinh(t/2a)      t the distance on plan from the first end

Every form is a product: none loses digits when the curve is taut, and none overflows before the length does.
"""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, Index, fixed, positive
from geom.curves.joined import Joined
from geom.curves.straight import Segment

# Relative: a stated length further from the parameter's own is a mistake, not a solver's rounding.
_GIVEN_LENGTH = 1e-6


@dataclass(frozen=True, eq=False)
class Catenary(Curve):
    """The catenary of one parameter through two points, in the vertical plane through both.

    Notes
    -----
    A taut curve and a deep one are no special cases. Two ends on one plumb line have no catenary: see
    `hanging_strands`.

    Raises
    ------
    ValueError
        If the ends are on one plumb line, the parameter is not positive, the length is too great for a
        floating-point number, or the stated length is not that of the curve.
    """

    p: Array  # (3,) m
    q: Array  # (3,) m
    parameter: float  # m, horizontal pull over weight per length
    inverted: bool = False  # standing like an arch, the crown up
    length: float = np.nan  # m, the true length; worked out where not stated

    def __post_init__(self) -> None:
        self._set(
            p=fixed(self.p, 3, name="p"),
            q=fixed(self.q, 3, name="q"),
            parameter=positive(self.parameter, name="parameter"),
        )
        if self._span == 0:
            raise ValueError("ends on one plumb line have no catenary; use hanging_strands")
        own = self._own_length()
        if np.isnan(self.length):
            self._set(length=own)
        elif abs(self.length - own) > _GIVEN_LENGTH * own:
            raise ValueError(f"the parameter makes the length {own:.9g} m, not {self.length:.9g} m")

    @property
    def start(self) -> Array:
        """First point, (3,) m."""
        return self.p

    @property
    def end(self) -> Array:
        """Last point, (3,) m."""
        return self.q

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners, which stand at equal steps on plan.

        Equal horizontal steps dx give all chords nearly the same error dx^2/(8a); see `plan_steps`.
        """
        t = np.linspace(0.0, self._span, int(plan_steps(self._span, self.parameter, within)) + 1)
        s = 2 * self.parameter * np.cosh(self._middle + self._half(t - self._span)) * np.sinh(self._half(t))
        s[-1] = self.length
        return np.minimum(s, self.length)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m.

        With the slopes m0 at the first end and m = m0 + s/a there, t = a (asinh m - asinh m0), and
        z - z_p = a (c - c0) = s (m + m0)/(c + c0), c = sqrt(1 + m^2).
        """
        s = self._stationed(s)
        first = np.sinh(self._middle - self._span / (2 * self.parameter))
        slope = first + s / self.parameter
        secant = np.hypot(1.0, slope)
        t = self.parameter * asinh_difference(slope, first, s / self.parameter)
        z = s * ((slope + first) / (secant + np.hypot(1.0, first)))
        tangents = np.outer(1 / secant, self._plan) + np.outer(self._way * slope / secant, _UP)
        return Along(self.p + np.outer(t, self._plan) + np.outer(self._way * z, _UP), tangents)

    def points(self, within: float) -> Array:
        """Polyline at equal steps on plan, no chord off by more than `within`; its ends are exact."""
        ends = self.p[None], self.q[None]
        points, _ = catenary_points(*ends, np.array([self.parameter]), within, inverted=self.inverted)
        return points

    def moved(self, offset: Array) -> Self:
        """Return the curve moved by a vector, (3,) m."""
        return replace(self, p=self.p + offset, q=self.q + offset)

    def scaled(self, factor: float) -> Self:
        """Return the curve scaled about the origin."""
        return replace(
            self,
            p=self.p * factor,
            q=self.q * factor,
            parameter=self.parameter * factor,
            length=self.length * factor,
        )

    @property
    def _way(self) -> float:
        return -1.0 if self.inverted else 1.0

    @cached_property
    def _span(self) -> float:
        return float(np.hypot(*(self.q - self.p)[:2]))

    @cached_property
    def _plan(self) -> Array:
        return (self.q - self.p) * [1, 1, 0] / self._span

    @cached_property
    def _middle(self) -> float:
        """The middle of the span in parameters from the vertex: sinh(mu) = h / (2a sinh u)."""
        rise = self._way * (self.q[2] - self.p[2])
        return float(_middle(np.array(self._span), np.array(rise), np.array(self.parameter)))

    def _half(self, t: Array) -> Array:
        return t / (2 * self.parameter)

    def _own_length(self) -> float:
        with np.errstate(over="ignore"):
            length = np.hypot(2 * self.parameter * np.sinh(self._span / (2 * self.parameter)), self.q[2] - self.p[2])
        if not np.isfinite(length):
            raise ValueError(f"parameter {self.parameter} m is too small for a span of {self._span} m")
        return float(length)


_UP = np.array([0.0, 0.0, 1.0])


def _middle(span: Array, rise: Array, parameter: Array) -> Array:
    return np.asarray(np.arcsinh(rise / (2 * parameter * np.sinh(span / (2 * parameter)))))


def asinh_difference(upper: Array, lower: float, step: Array) -> Array:
    """asinh(upper) - asinh(lower) for upper = lower + step, step >= 0, without cancellation.

    asinh x = ln(x + c), c = sqrt(1 + x^2). With both of one sign (reflected to be positive, x >= y >= 0)

        asinh x - asinh y = ln(1 + (x - y + c_x - c_y)/(y + c_y)),   c_x - c_y = (x - y)(x + y)/(c_x + c_y)

    has positive terms only; with unlike signs the plain difference is a sum of two positive terms.
    """
    mirrored = upper <= 0
    high = np.where(mirrored, -lower, upper)
    low = np.where(mirrored, -upper, lower)
    secant_high, secant_low = np.hypot(1.0, high), np.hypot(1.0, low)
    alike = low >= 0
    grown = step * (1 + (high + low) / (secant_high + secant_low)) / np.where(alike, low + secant_low, 1.0)
    return np.where(alike, np.log1p(np.where(alike, grown, 0.0)), np.arcsinh(high) - np.arcsinh(low))


def plan_steps(span: ArrayLike, parameter: ArrayLike, within: float) -> Index:
    """How many equal steps on plan keep every chord of a catenary within a distance of it.

    A chord over the step dx is furthest from the curve where it lies across the vertex, by

        a (cosh(dx/2a) - 1) = 2a sinh^2(dx/4a)

    away from it by a little less (dx^2/8a to second order, everywhere alike), so

        dx = 4a asinh(sqrt(within/2a))

    holds for all chords. The step is sqrt(8 a within) while that is small against a.

    Parameters
    ----------
    span, parameter : array_like
        Distance between the ends on plan and parameter, m; an infinite parameter is a straight line.
    within : float
        Greatest distance, m; positive.

    Returns
    -------
    ndarray of whole numbers, of the arguments' shape
    """
    span, parameter = np.broadcast_arrays(np.asarray(span, float), np.asarray(parameter, float))
    curved = np.isfinite(parameter)
    a = np.where(curved, parameter, 1.0)
    step = 4 * a * np.arcsinh(np.sqrt(positive(within, name="within") / (2 * a)))
    steps = np.where(curved, np.ceil(span / step - 1e-9), 1)
    return np.maximum(steps, 1).astype(np.int64)


def catenary_points(
    p: Array, q: Array, parameter: Array, within: float, *, inverted: bool = False
) -> tuple[Array, Index]:
    """Polylines of many catenaries at once, one after another in one array.

    Parameters
    ----------
    p, q : ndarray, shape (m, 3)
        Ends, m; no pair on one plumb line unless its parameter is infinite.
    parameter : ndarray, shape (m,)
        Horizontal pull over weight per length, m; infinite for a straight line.
    within : float
        Greatest distance of a chord from its curve, m; positive.
    inverted : bool
        Whether the curves stand.

    Returns
    -------
    points : ndarray, shape (k, 3)
        Points, m; the ends are exact.
    first : ndarray, shape (m + 1,)
        Polyline i is ``points[first[i]:first[i + 1]]``.
    """
    span = np.hypot(q[:, 0] - p[:, 0], q[:, 1] - p[:, 1])
    steps = plan_steps(span, parameter, within)
    first = np.concatenate([[0], np.cumsum(steps + 1)])
    of = np.repeat(np.arange(len(p)), steps + 1)
    share = (np.arange(first[-1]) - first[of]) / steps[of]
    points = p[of] + share[:, None] * (q - p)[of]
    way = -1.0 if inverted else 1.0
    inner = (share > 0) & (share < 1)
    of, t = of[inner], share[inner] * span[of[inner]]
    a = parameter[of]
    mu = _middle(span[of], way * (q - p)[of, 2], a)
    points[inner, 2] = p[of, 2] + way * 2 * a * np.sinh(mu + (t - span[of]) / (2 * a)) * np.sinh(t / (2 * a))
    points[first[1:] - 1] = q
    return points, first


def hanging_strands(p: ArrayLike, q: ArrayLike, length: float) -> Joined:
    """Hang a doubled strand, straight down and up, between two points of one plumb line.

    Parameters
    ----------
    p, q : array_like, shape (3,)
        Ends, m, one over the other or in one place.
    length : float
        Whole length, m; more than the distance between the ends.

    Returns
    -------
    Joined
        The line down to the lowest point and the line up again; a single line when the length just reaches.

    Raises
    ------
    ValueError
        If the ends are not on one plumb line or the length does not reach.
    """
    p, q = fixed(p, 3, name="p"), fixed(q, 3, name="q")
    if np.any(p[:2] != q[:2]):
        raise ValueError("strands hang straight down only between points of one plumb line")
    between = abs(p[2] - q[2])
    if length < between or length == 0:
        raise ValueError(f"a length of {length} m does not reach over {between} m")
    low = np.array([p[0], p[1], (p[2] + q[2] - length) / 2])
    if low[2] >= min(p[2], q[2]):
        return Joined((Segment(p, q),))
    return Joined((Segment(p, low), Segment(low, q)))
