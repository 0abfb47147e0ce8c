r"""Closed forms of a hanging member that stretches, of unit weight per unstretched length.

Every function takes one-dimensional arrays of equal length. The letters are those of `geom.hang.stretching`,
and

    a    H/w, metres                       soft    w/EA, 1/m, so that b = soft L
    t    T/w, pull, metres                 y       V/w of the part beyond, metres; upward is positive
    s    unstretched arc from `from`       phi     asinh(y/a), so that t = a cosh(phi)

y = y0 + s all along, and (Irvine 1981, ch. 1) from `from`

    x = a (soft s + phi - phi0),      z = soft s (y0 + y)/2 + t - t0.

Differences of angles and of pulls are never subtracted where they are small:

    phi - phi0 = 2 artanh(s/(t + t0)),      t - t0 = s (y + y0)/(t + t0).
"""

import numpy as np

from geom.hang.chunked import Floats, repair
from geom.hang.closing import coth_excess, sinhc_minus_one
from geom.hang.formulas import chord, less_rise
from geom.hang.roots import newton

# 1 - tanh u is taken as 2/(exp(2u) + 1) above this u and tanh u itself below: both have all their digits.
_TANH = 0.5
# Up to this difference of angles the forms with products, above it those with sums lose less than a digit.
_WIDE = 1.0
_DEEP = 300.0  # from this u on both strands are plumb to the last digit, and cosh overflows soon after


def parameter(span: Floats, length: Floats, soft: Floats, u: Floats) -> Floats:
    """Give a = S/(2u + b); infinite if exactly taut, 0 for slack on a plumb line."""
    return span / (2.0 * u + soft * length)


def middle(rise: Floats, length: Floats, soft: Floats, u: Floats) -> Floats:
    """Give y at mid-length, v/(2 tanh u + b)."""
    result = rise / (2.0 * np.tanh(u) + soft * length)
    repair(rise == 0.0, result, np.zeros_like, rise)
    return result


def downs(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> tuple[Floats, Floats]:
    """Give the downward pulls on the supports `from` and `to`, L/2 -+ v/(2 tanh u + b).

    At the lower end that is L (tanh u + b/2 - |v|/L)/(2 tanh u + b).
    """
    v = np.abs(rise)
    th, half = np.tanh(u), 0.5 * soft * length
    gap = less_rise(span, v, length, excess) / length
    numerator = np.where(u < _TANH, (th - v / length) + half, gap - 2.0 / (np.expm1(2.0 * u) + 2.0) + half)
    low = 0.5 * length * numerator / (th + half)
    repair(rise == 0.0, low, lambda length: 0.5 * length, length)
    high = 0.5 * length + np.abs(middle(rise, length, soft, u))
    return np.where(rise > 0.0, low, high), np.where(rise > 0.0, high, low)


def angle(a: Floats, y0: Floats, s: Floats) -> Floats:
    """Give phi - phi0 between y0 and y0 + s."""
    y = y0 + s
    t0, t = chord(a, y0), chord(a, y)
    ratio = s / (t0 + t)
    result = 2.0 * np.arctanh(ratio)
    # close to 1 the ratio has no digits left to tell artanh by; logarithms and their sums are good there
    repair(np.abs(ratio) > 0.5, result, _wide_angle, a, y0, y, t0, t)
    return result


def _wide_angle(a: Floats, y0: Floats, y: Floats, t0: Floats, t: Floats) -> Floats:
    same = np.sign(y) * np.log((np.abs(y) + t) / (np.abs(y0) + t0))
    return np.where(y0 * y > 0.0, same, np.arcsinh(y / a) - np.arcsinh(y0 / a))


def point(s: Floats, a: Floats, y0: Floats, soft: Floats) -> tuple[Floats, Floats]:
    """Give plan distance and elevation of the point an unstretched arc s from `from`."""
    y = y0 + s
    x = a * (soft * s + angle(a, y0, s))
    repair(a == 0.0, x, np.zeros_like, x)
    z = s * (y + y0) * (0.5 * soft + 1.0 / (chord(a, y0) + chord(a, y)))
    return x, z


def arc_at(x: Floats, span: Floats, length: Floats, soft: Floats, u: Floats, y0: Floats) -> Floats:
    """Give the unstretched arc from `from` to a plan distance between the supports."""
    a = parameter(span, length, soft, u)
    result = _arc(a, np.arcsinh(y0 / a), _turn_at(x, span, length, soft, u, y0))
    repair(a == np.inf, result, lambda x, s, length: length * x / s, x, span, length)
    return result


def _arc(a: Floats, phi0: Floats, d: Floats) -> Floats:
    """Give a (sinh phi - sinh phi0)."""
    arc: Floats = 2.0 * a * np.cosh(phi0 + 0.5 * d) * np.sinh(0.5 * d)
    return arc


def _turn_at(x: Floats, span: Floats, length: Floats, soft: Floats, u: Floats, y0: Floats) -> Floats:
    """Give phi - phi0 at a plan distance."""
    a = parameter(span, length, soft, u)
    start = 2.0 * u * x / span
    d = start.copy()
    repair((soft > 0.0) & (u < _DEEP) & (x > 0.0), d, turn, start, np.arcsinh(y0 / a), a * soft, x / a)
    return d


def turn(start: Floats, phi0: Floats, beta: Floats, target: Floats) -> Floats:
    """Give the d = phi - phi0 of d + beta (sinh phi - sinh phi0) = x/a = target, beta = H/EA.

    That is Kepler's equation on the hyperbola, in short. The first guess has the target's sign.
    """
    sign = np.sign(target)
    return sign * newton(_kepler, np.abs(start), sign * phi0, beta, np.abs(target), bracket=(0.0, np.inf))


def _kepler(d: Floats, phi0: Floats, beta: Floats, target: Floats) -> tuple[Floats, Floats]:
    step = 2.0 * np.cosh(phi0 + 0.5 * d) * np.sinh(0.5 * d)
    return d + beta * step - target, 1.0 + beta * np.cosh(phi0 + d)


def arc_of_sag(span: Floats, rise: Floats, length: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the unstretched arc from `from` to where the curve runs parallel to the chord.

    There y = a v/S, so that s = L/2 + v/(2u + b) - v/(2 tanh u + b).
    """
    b, th = soft * length, np.tanh(u)
    lag = th * coth_excess(u) / (2.0 * u + b)  # (u - tanh u)/(2u + b)
    repair(u == np.inf, lag, lambda u: np.full_like(u, 0.5), u)
    result = 0.5 * length - 2.0 * rise * lag / (2.0 * th + b)
    repair((u == 0.0) | (rise == 0.0), result, lambda length: 0.5 * length, length)
    return result


def sag(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the greatest vertical distance under the chord.

    Under the chord hangs the part between `from` and y = y1 = a v/S, a s from it, by

        soft s^2/2 + y1 d - (t1 - t0) = soft s^2/2 + 2 t1 sinh(d/2)^2 - y1 (sinh d - d),     d = phi1 - phi0.
    """
    b = soft * length
    s, y1, t1 = arc_of_sag(span, rise, length, soft, u), rise / (2.0 * u + b), chord(span, rise) / (2.0 * u + b)
    a, y0 = parameter(span, length, soft, u), -downs(span, rise, length, excess, soft, u)[0]
    d = angle(a, y0, s)
    p = sinhc_minus_one(np.abs(d))
    bow = 2.0 * t1 * np.sinh(0.5 * d) ** 2 - y1 * d * p
    repair(d > _WIDE, bow, lambda y1, d, t1, t0: y1 * d - (t1 - t0), y1, d, t1, chord(a, y0))
    result: Floats = 0.5 * soft * s * s + bow
    repair(u == 0.0, result, np.zeros_like, u)
    repair(u == np.inf, result, _plumb_sag, rise, length, soft, u)
    return result


def _plumb_sag(rise: Floats, length: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the limit on a plumb line: the chord's top stands over the lowest point."""
    return _hanging(0.5 * length + np.abs(middle(rise, length, soft, u)), soft, np.zeros_like(u))


def sag_mid(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the vertical distance under the chord at mid-span, by `under_chord`."""
    return under_chord(0.5 * span, span, rise, length, excess, soft, u)


def under_chord(x: Floats, *shape: Floats) -> Floats:
    """Give the vertical distance under the chord at a plan distance from `from`; `shape` is as in `sag_mid`.

    At s it is soft s (s1 - s/2) + y1 d - (t - t0), s1 and y1 being those of the greatest sag, d = phi - phi0.
    With m = phi0 + d/2 the last two are d (y1 - a sinh m) - a sinh(m) (2 sinh(d/2) - d), and
    y1 - a sinh m = 2a cosh((phi1 + m)/2) sinh((phi1 - m)/2).
    """
    span, rise, length, _, soft, u = shape
    a, y0 = parameter(span, length, soft, u), -downs(*shape)[0]
    s1, phi0 = arc_of_sag(span, rise, length, soft, u), np.arcsinh(y0 / a)
    d, d1 = _turn_at(x, span, length, soft, u, y0), angle(a, y0, s1)
    s, m = _arc(a, phi0, d), phi0 + 0.5 * d
    off = 0.5 * (d1 - 0.5 * d)
    bow = d * a * (2.0 * np.cosh(m + off) * np.sinh(off) - np.sinh(m) * sinhc_minus_one(0.5 * d))
    y1 = rise / (2.0 * u + soft * length)
    repair(d > _WIDE, bow, lambda y1, d, a, m: y1 * d - 2.0 * a * np.sinh(m) * np.sinh(0.5 * d), y1, d, a, m)
    result = soft * s * (s1 - 0.5 * s) + bow
    repair(a == np.inf, result, np.zeros_like, u)
    repair(u >= _DEEP, result, _deep_under_chord, x, *shape)
    return result


def _deep_under_chord(x: Floats, *shape: Floats) -> Floats:
    """Give it for a member whose bottom is, but for the ends, as wide as the span."""
    span, rise = shape[:2]
    plan = np.where(span > 0.0, x / span, 0.5)
    return lowest_below_from(*shape) + plan * rise


def _hanging(down: Floats, soft: Floats, a: Floats) -> Floats:
    """Give the depth of the lowest point under an end that is pulled down: soft V^2/2 + t - a."""
    return down * (down * (0.5 * soft + 1.0 / (chord(a, down) + a)))


def lowest_below_from(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the depth of the member's lowest point under `from`."""
    down, down_to = downs(span, rise, length, excess, soft, u)
    result = _hanging(down, soft, parameter(span, length, soft, u))
    repair(down_to <= 0.0, result, np.negative, rise)
    repair(down <= 0.0, result, np.zeros_like, rise)
    repair((u == 0.0) & (rise == 0.0), result, np.zeros_like, rise)
    return result


def hung_length(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> Floats:
    """Give the length as stretched, L + soft I with the integral of t along the unstretched member.

    I = (L/4) (t0 + t1 + (2y)^2/(t0 + t1)) + a^2 u, y at mid-length.
    """
    a = parameter(span, length, soft, u)
    down, down_to = downs(span, rise, length, excess, soft, u)
    total = chord(a, down) + chord(a, down_to)
    turn = a * a * u
    repair(a == 0.0, turn, np.zeros_like, a)
    across = 2.0 * middle(rise, length, soft, u)
    result = length + soft * (0.25 * length * (total + across * (across / total)) + turn)
    repair(soft == 0.0, result, np.copy, length)
    return result
