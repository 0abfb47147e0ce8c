r"""Where things are on a hanging catenary: its vertex, its lowest point, its points and its slopes.

One-dimensional arrays of equal length; the letters are those of `geom.hang.formulas`. `from` lies at
beta - u, so that with t = x/S a point is 2 t u further along.
"""

import numpy as np

from geom.hang.chunked import Floats, repair
from geom.hang.closing import sinhc_minus_one
from geom.hang.formulas import chord, ends, less_rise, shift


def tilt(span: Floats, rise: Floats, length: Floats, excess: Floats) -> Floats:
    """Give beta = atanh(v/L) as a logarithm, ln((L + |v|)/(L - |v|))/2 with the sign of v."""
    v = np.abs(rise)
    return np.copysign(0.5 * np.log1p(2.0 * v / less_rise(span, v, length, excess)), rise)


def vertex_at(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the plan distance to the curve's vertex, a (u - beta); infinite if taut and not level."""
    result = 0.5 * span * (1.0 - tilt(span, rise, length, excess) / u)
    repair((u == 0.0) & (rise == 0.0), result, lambda s: 0.5 * s, span)
    repair(u == np.inf, result, np.zeros_like, span)
    return result


def sag_at(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the plan distance to where the curve runs parallel to the chord, S/2 + a delta."""
    v = np.abs(rise)
    beyond = np.copysign(shift(span, v, chord(span, v), excess), rise)
    result = 0.5 * span * (1.0 + beyond / u)
    repair(u == 0.0, result, lambda s: 0.5 * s, span)
    repair(u == np.inf, result, np.zeros_like, span)
    return result


def lowest_below_from(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the depth of the member's lowest point under `from`.

    It is a (cosh - 1) = V^2/(T + a) where both ends leave downwards (V > 0), else the lower support's.
    """
    pull, _, down, down_to = ends(span, rise, length, excess, u)
    result = down * (down / (pull + 0.5 * span / u))
    repair(down_to <= 0.0, result, np.negative, rise)
    repair(down <= 0.0, result, np.zeros_like, rise)
    # exactly taut and level: both ends bear half the weight, and the member is straight
    repair((u == 0.0) & (rise == 0.0), result, np.zeros_like, rise)
    return result


def slope_from(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the angle under the horizontal at `from`, tan = V/H; that of the chord if taut."""
    _, _, down, _ = ends(span, rise, length, excess, u)
    result = np.arctan2(down, 0.5 * span / u)
    repair(excess == 0.0, result, lambda v, s: 0.0 - np.arctan2(v, s), rise, span)
    return result


def _sinhc(z: Floats) -> Floats:
    return 1.0 + sinhc_minus_one(np.abs(z))


def elevation_at(x: Floats, span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give y(x) - y(0) = 2a sinh(t u) sinh(beta + (t - 1) u), without a for a taut member's sake."""
    t = x / span
    return x * _sinhc(t * u) * np.sinh(tilt(span, rise, length, excess) + (t - 1.0) * u)


def arc_at(x: Floats, span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the arc from `from` to x, 2a sinh(t u) cosh(beta + (t - 1) u)."""
    t = x / span
    return x * _sinhc(t * u) * np.cosh(tilt(span, rise, length, excess) + (t - 1.0) * u)


def point_at_length(
    arc: Floats, span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats
) -> tuple[Floats, Floats]:
    """Give plan distance and elevation of the point an arc s from `from`.

    For unit weight the pull there is T' = sqrt(a^2 + (s - V)^2), T and V being those at `from`, and

        x = 2a artanh(s/(T + T')),   y = T' - T = s (s - 2V)/(T + T').
    """
    parameter = 0.5 * span / u
    pull, _, down, _ = ends(span, rise, length, excess, u)
    there = arc - down
    total = pull + chord(parameter, there)
    ratio = arc / total
    y = ratio * (there - down)
    x = 2.0 * parameter * np.arctanh(ratio)
    # close to 1 the ratio has no digits left to tell artanh by; the difference of asinh is good there
    repair(np.abs(ratio) > 0.5, x, _plan_by_asinh, there, down, parameter)
    repair(u == np.inf, x, np.zeros_like, x)
    taut = excess == 0.0
    repair(taut, x, lambda s, plan, v: s * plan / chord(plan, v), arc, span, rise)
    repair(taut, y, lambda s, plan, v: s * v / chord(plan, v), arc, span, rise)
    return x, y


def _plan_by_asinh(there: Floats, down: Floats, parameter: Floats) -> Floats:
    angle: Floats = np.arcsinh(there / parameter) + np.arcsinh(down / parameter)
    return parameter * angle
