r"""A section of a member under its own weight and a load spread evenly over the plan, in closed form.

With H the horizontal pull, w the weight per unstretched metre, q the load per metre of plan, p = sinh(phi) the slope
and T = H cosh(phi), a piece dx of plan holds dx cosh(phi)/(1 + T/EA) of unstretched member, so that

    H dp/dx = q + w cosh(phi)/(1 + beta cosh(phi)),      beta = H/EA.

(q = 0 is the elastic catenary; beta = 0 gives dp/dx = (w sqrt(1 + p^2) + q)/H, w = 0 the parabola.) With
W = w + beta q the plan length, the unstretched length and the rise between two slopes are

    X = H int cosh (1 + beta cosh)/(q + W cosh) dphi  = H (A + beta B)
    L = H int cosh^2/(q + W cosh) dphi                = H B
    Z = H int sinh cosh (1 + beta cosh)/(q + W cosh) dphi,

    A = (phi1 - phi0 - q J)/W,   B = (p1 - p0 - q A)/W,   J = int dphi/(q + W cosh),

    J = 2/(W + q) y atan(r y)/(r y),   r^2 = (W - q)/(W + q),   y = (t1 - t0)/(1 + r^2 t0 t1),   t = tanh(phi/2),

and Z in y = cosh(phi) is a sum of int (y0 + d)^k/(q + W y) dy. A and B lose digits where W is less than q, which is
where 24 points of Gauss and Legendre have them all: the integrands' poles lie pi off the real axis.
"""

from typing import NamedTuple

import numpy as np

from geom.hang.chunked import Floats, repair
from geom.hang.roots import newton

# Exact to 1e-15 while the angle turns by no more than 8, from a slope of 55 down to one of 55 up.
_NODES, _WEIGHTS = np.polynomial.legendre.leggauss(24)
# Under this zeta the moments are summed from the highest, above it by recursion upward: 1e-15 either way.
_SERIES_END = 0.3
_TERMS = 30
_SMALL = 1e-6  # turn under which the guess is made without a difference


class Stock(NamedTuple):
    """Horizontal pull H, newton, weight w per unstretched metre, load q per metre of plan, and beta = H/EA."""

    horizontal: Floats
    weight: Floats
    spread: Floats
    beta: Floats

    @property
    def steady(self) -> Floats:
        """W = w + beta q."""
        return self.weight + self.beta * self.spread


class Extent(NamedTuple):
    """What lies between two slopes: plan length X, rise Z and unstretched length L, metres."""

    plan: Floats
    rise: Floats
    length: Floats


class Growth(NamedTuple):
    """Derivatives of an extent: by H at steady slopes, and by the angle at either end."""

    by_horizontal: Extent
    by_start: Extent
    by_end: Extent


def extent(stock: Stock, phi0: Floats, turn: Floats) -> Extent:
    """Give what lies between the angles phi0 = asinh(slope) and phi0 + turn, arrays of shape (n,)."""
    a, b = _integrals(stock, phi0, turn)
    h = stock.horizontal
    return Extent(h * (a + stock.beta * b), h * _rise(stock, phi0, turn), h * b)


def growth(stock: Stock, phi0: Floats, turn: Floats, between: Extent) -> Growth:
    """Give the derivatives of an extent.

    By beta the integrands of X, L, Z change by w, -q and w sinh, times cosh^3/(q + W cosh)^2.
    """
    phi, weights = _nodes(phi0, turn)
    cosh = np.cosh(phi)
    cube = weights * cosh**3 / (stock.spread[:, np.newaxis] + stock.steady[:, np.newaxis] * cosh) ** 2
    plain, steep = cube.sum(axis=1), (cube * np.sinh(phi)).sum(axis=1)
    h, w, q, beta = stock
    by_h = Extent(
        between.plan / h + beta * w * plain,
        between.rise / h + beta * w * steep,
        between.length / h - beta * q * plain,
    )
    start, end = _density(stock, phi0), _density(stock, phi0 + turn)
    return Growth(by_h, Extent(-start.plan, -start.rise, -start.length), end)


def turn_of_plan(stock: Stock, phi0: Floats, plan: Floats) -> Floats:
    """Give by how much the angle turns over a section of given plan length."""
    return newton(_off_plan, _guess(stock, phi0, plan), phi0, plan, *stock)


def turn_of_length(stock: Stock, phi0: Floats, length: Floats) -> Floats:
    """Give by how much the angle turns over a section of given unstretched length."""
    plan = length * (1.0 + stock.beta * np.cosh(phi0)) / np.cosh(phi0)
    return newton(_off_length, _guess(stock, phi0, plan), phi0, length, *stock)


def stretched_length(stock: Stock, phi0: Floats, turn: Floats) -> Floats:
    """Give the length as stretched, the integral of (1 + beta cosh) along the unstretched member."""
    phi, weights = _nodes(phi0, turn)
    cosh = np.cosh(phi)
    over = weights * cosh**3 / (stock.spread[:, np.newaxis] + stock.steady[:, np.newaxis] * cosh)
    length: Floats = extent(stock, phi0, turn).length + stock.horizontal * stock.beta * over.sum(axis=1)
    return length


def _off_plan(turn: Floats, phi0: Floats, plan: Floats, *stock: Floats) -> tuple[Floats, Floats]:
    own = Stock(*stock)
    return extent(own, phi0, turn).plan - plan, _density(own, phi0 + turn).plan


def _off_length(turn: Floats, phi0: Floats, length: Floats, *stock: Floats) -> tuple[Floats, Floats]:
    own = Stock(*stock)
    return extent(own, phi0, turn).length - length, _density(own, phi0 + turn).length


def _guess(stock: Stock, phi0: Floats, plan: Floats) -> Floats:
    """Give the turn of a section loaded evenly, as it is at its start: a difference of asinh, by a sum."""
    cosh = np.cosh(phi0)
    load = stock.spread + stock.weight * cosh / (1.0 + stock.beta * cosh)
    slope, more = np.sinh(phi0), load * plan / stock.horizontal
    turn = np.arcsinh(slope + more) - phi0
    return np.where(np.abs(turn) < _SMALL, more / cosh, turn)


def _density(stock: Stock, phi: Floats) -> Extent:
    """Give the derivatives of X, Z and L by the angle at the end."""
    cosh = np.cosh(phi)
    length = stock.horizontal * cosh * cosh / (stock.spread + stock.steady * cosh)
    plan = length * (1.0 / cosh + stock.beta)
    return Extent(plan, plan * np.sinh(phi), length)


def _integrals(stock: Stock, phi0: Floats, turn: Floats) -> tuple[Floats, Floats]:
    """Give A and B."""
    values = stock.spread, stock.steady, phi0, turn
    light = stock.steady < stock.spread
    if not light.any():
        return _closed(*values)
    a, b = np.empty_like(phi0), np.empty_like(phi0)
    for formula, where in ((_by_points, light), (_closed, ~light)):
        chosen = np.flatnonzero(where)
        a[chosen], b[chosen] = formula(*(value.take(chosen) for value in values))
    return a, b


def _closed(q: Floats, steady: Floats, phi0: Floats, turn: Floats) -> tuple[Floats, Floats]:
    half, phi1 = 0.5 * turn, phi0 + turn
    r2 = (steady - q) / (steady + q)
    tangents = np.tanh(0.5 * phi0) * np.tanh(0.5 * phi1)
    y = np.sinh(half) / (np.cosh(0.5 * phi0) * np.cosh(0.5 * phi1) * (1.0 + r2 * tangents))
    ry = np.sqrt(np.maximum(r2, 0.0)) * y
    ratio = np.where(ry == 0.0, 1.0, np.arctan(ry) / np.where(ry == 0.0, 1.0, ry))
    j = 2.0 / (steady + q) * y * ratio
    a = (2.0 * half - q * j) / steady
    b = (2.0 * np.cosh(phi0 + half) * np.sinh(half) - q * a) / steady
    return a, b


def _by_points(q: Floats, steady: Floats, phi0: Floats, turn: Floats) -> tuple[Floats, Floats]:
    phi, weights = _nodes(phi0, turn)
    cosh = np.cosh(phi)
    over = weights * cosh / (q[:, np.newaxis] + steady[:, np.newaxis] * cosh)
    return over.sum(axis=1), (over * cosh).sum(axis=1)


def _nodes(phi0: Floats, turn: Floats) -> tuple[Floats, Floats]:
    half = 0.5 * turn[:, np.newaxis]
    return phi0[:, np.newaxis] + half * (1.0 + _NODES), half * _WEIGHTS


def _rise(stock: Stock, phi0: Floats, turn: Floats) -> Floats:
    """Give Z/H from the smaller y = cosh.

    With d = y1 - y0, D = q + W y0 and zeta = W d/D it is

    (d/D) (y0 m0 + d m1 + beta (y0^2 m0 + 2 y0 d m1 + d^2 m2)),  m_n = int_0^1 x^n/(1 + zeta x) dx.
    """
    d = 2.0 * np.sinh(phi0 + 0.5 * turn) * np.sinh(0.5 * turn)
    up = d >= 0.0
    y, d = np.cosh(np.where(up, phi0, phi0 + turn)), np.abs(d)
    below = stock.spread + stock.steady * y
    m0, m1, m2 = _moments(stock.steady * d / below)
    once = y * m0 + d * m1
    twice = y * once + d * (y * m1 + d * m2)
    return np.where(up, d, -d) / below * (once + stock.beta * twice)


def _moments(zeta: Floats) -> tuple[Floats, Floats, Floats]:
    m2 = np.full_like(zeta, 1.0 / (3.0 + _TERMS))
    for term in range(_TERMS - 1, -1, -1):
        m2 = 1.0 / (3.0 + term) - zeta * m2
    m1 = 0.5 - zeta * m2
    m0 = 1.0 - zeta * m1
    wide = zeta > _SERIES_END
    repair(wide, m0, lambda x: np.log1p(x) / x, zeta)
    repair(wide, m1, lambda m, x: (1.0 - m) / x, m0, zeta)
    repair(wide, m2, lambda m, x: (0.5 - m) / x, m1, zeta)
    return m0, m1, m2
