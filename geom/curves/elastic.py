"""The catenary that has stretched by its own weight, between two points: Irvine's curve.

With a = H/w and soft = w/EA of an unstretched metre, s the unstretched arc from the first end, y = V/w the vertical
pull there (y = y0 + s), t = sqrt(a^2 + y^2) the pull and phi = asinh(y/a) (H. M. Irvine, "Cable Structures", 1981,
ch. 1):

    x = a (soft s + phi - phi0)
    z = s (y + y0) (soft/2 + 1/(t + t0))
    stretched arc = s + soft/2 (y t - y0 t0 + a^2 (phi - phi0))

Differences of phi and of t are never subtracted where they are small.
"""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, fixed, positive
from geom.curves.catenary import asinh_difference

# Relative: ends that lie further from the curve than this are a mistake, not a solver's rounding.
_CLOSED = 1e-6
_STEPS = 30  # of Newton's method: three are the rule, the arc being nearly straight in the unstretched one
_SAME = 4 * np.finfo(float).eps


@dataclass(frozen=True, eq=False)
class ElasticCatenary(Curve):
    """The curve of a member that stretches, in the vertical plane through two points.

    Notes
    -----
    Two ends on one plumb line have no such curve: see `hanging_strands`.

    Raises
    ------
    ValueError
        If the ends are on one plumb line, a size is not positive, or the sizes are not those of a member between
        the ends.
    """

    p: Array  # (3,) m
    q: Array  # (3,) m
    parameter: float  # m, horizontal pull over weight per unstretched length
    unstretched: float  # m
    softness: float  # 1/m, weight per unstretched length over stiffness

    def __post_init__(self) -> None:
        self._set(
            p=fixed(self.p, 3, name="p"),
            q=fixed(self.q, 3, name="q"),
            parameter=positive(self.parameter, name="parameter"),
            unstretched=positive(self.unstretched, name="unstretched"),
            softness=positive(self.softness, name="softness"),
        )
        if self._span == 0:
            raise ValueError("ends on one plumb line have no catenary; use hanging_strands")
        if not self._half_angle > 0:
            raise ValueError(f"a parameter of {self.parameter} m leaves no curve over a span of {self._span} m")
        x, z = self._flat(np.array([self.unstretched]))
        off = np.hypot(x[0] - self._span, z[0] - (self.q[2] - self.p[2]))
        if off > _CLOSED * self.unstretched:
            raise ValueError(f"the sizes make a curve that ends {off:.3g} m from the second point")

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
        """Length as stretched, m."""
        return float(self._stretched(np.array([self.unstretched]))[0])

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners, at equal steps of phi.

        The curve is bent by dphi/ds = 1/a sec, s stretched being (1 + strain) longer, so that on plan one step dphi is
        a (1 + strain) dphi and a chord over it is off by no more than on a catenary of the parameter a (1 + strain):
        see `plan_steps`.
        """
        ends = np.array([self._first, self._first + self.unstretched])
        strain = self.softness * float(np.hypot(self.parameter, ends).max())
        a = self.parameter * (1 + strain)
        step = 4 * np.arcsinh(np.sqrt(positive(within, name="within") / (2 * a)))
        turn = 2 * self._half_angle
        d = np.linspace(0.0, turn, int(max(1, np.ceil(turn / step - 1e-9))) + 1)
        s = 2 * self.parameter * np.cosh(np.arcsinh(self._first / self.parameter) + d / 2) * np.sinh(d / 2)
        arcs = self._stretched(np.clip(s, 0.0, self.unstretched))
        arcs[-1] = self.length
        return np.minimum(arcs, self.length)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at stretched arc lengths (k,), m."""
        own = self._unstretched_at(self._stationed(s))
        x, z = self._flat(own)
        slope = (self._first + own) / self.parameter
        secant = np.hypot(1.0, slope)
        tangents = np.outer(1 / secant, self._plan) + np.outer(slope / secant, _UP)
        return Along(self.p + np.outer(x, self._plan) + np.outer(z, _UP), tangents)

    def moved(self, offset: Array) -> Self:
        """Return the curve moved by a vector, (3,) m."""
        return replace(self, p=self.p + offset, q=self.q + offset)

    def scaled(self, factor: float) -> Self:
        """Return the curve scaled about the origin: of the same strain everywhere."""
        return replace(
            self,
            p=self.p * factor,
            q=self.q * factor,
            parameter=self.parameter * factor,
            unstretched=self.unstretched * factor,
            softness=self.softness / factor,
        )

    @cached_property
    def _span(self) -> float:
        return float(np.hypot(*(self.q - self.p)[:2]))

    @cached_property
    def _plan(self) -> Array:
        return (self.q - self.p) * [1, 1, 0] / self._span

    @cached_property
    def _half_angle(self) -> float:
        """Half of phi1 - phi0: x at the second end, solved for it."""
        return 0.5 * (self._span / self.parameter - self.softness * self.unstretched)

    @cached_property
    def _first(self) -> float:
        """Vertical part y at the first end: z there is (y0 + y1)/2 (soft L + 2 tanh u)."""
        rise = float(self.q[2] - self.p[2])
        middle = rise / (2 * np.tanh(self._half_angle) + self.softness * self.unstretched)
        return float(middle) - 0.5 * self.unstretched

    def _turned(self, s: Array) -> Array:
        a = self.parameter
        return asinh_difference((self._first + s) / a, self._first / a, s / a)

    def _flat(self, s: Array) -> tuple[Array, Array]:
        """Plan distance and rise at unstretched arcs."""
        a, y0 = self.parameter, self._first
        y = y0 + s
        x = a * (self.softness * s + self._turned(s))
        z = s * (y + y0) * (0.5 * self.softness + 1 / (np.hypot(a, y) + np.hypot(a, y0)))
        return x, z

    def _stretched(self, s: Array) -> Array:
        a, y0 = self.parameter, self._first
        y = y0 + s
        pull = y * np.hypot(a, y) - y0 * np.hypot(a, y0) + a * a * self._turned(s)
        return np.asarray(s + 0.5 * self.softness * pull)

    def _unstretched_at(self, arc: Array) -> Array:
        """Newton's method from the mean stretch; the slope 1 + strain is smooth and over 1."""
        s = arc * (self.unstretched / self.length)
        for _ in range(_STEPS):
            strain = self.softness * np.hypot(self.parameter, self._first + s)
            step = (self._stretched(s) - arc) / (1 + strain)
            s = np.clip(s - step, 0.0, self.unstretched)
            if np.abs(step).max(initial=0.0) <= _SAME * self.unstretched:
                break
        return s


_UP = np.array([0.0, 0.0, 1.0])
