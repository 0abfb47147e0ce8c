r"""The one unknown of a hanging member that stretches.

Irvine's elastic catenary (H. M. Irvine, "Cable Structures", MIT Press 1981, ch. 1) is closed by two
equations in two end forces. Both reduce to one in u, half the angle between the end tangents in the sense
of tan = sinh: an end of horizontal pull H and vertical pull V has the angle asinh(V/H). With

    S    span                            w    weight per unstretched length
    v    level difference, positive      EA   stiffness
    L    unstretched length              b    w L / EA
    D    chord, sqrt(S^2 + v^2)          e    excess L - D, negative where the member must stretch

the angles of the two ends being mu - u and mu + u, what the closing equations say is

    S = (H/w)(2u + b),     v = L m (tanh u + b/2),     m = H sinh(mu) cosh(u) / (w L/2),
    w L/2 = H cosh(mu) sinh(u),

and eliminating H and mu (r = b/2u, A = (b/2) coth u)

    (S/L)^2 (sinh u/u)^2 = (1 + r)^2 (1 - (v/L)^2/(1 + A)^2).

The left side grows with u, the right one falls, so there is one root whatever the lengths: slack, taut, L
under the chord, unlevel. b = 0 is the inextensible member. Solved as F(u) = 0,

    F = E + r(2 + r)(1 - t) + t A(2 + A) - (S/L)^2 P,   t = (v/L)^2/(1 + A)^2,
    E = 1 - (D/L)^2 = e(2L - e)/L^2,                     P = (sinh u/u)^2 - 1,

in which nothing cancels but what the data make cancel, and a step needs no transcendental function below
u = 1.5.
"""

import numpy as np

from geom.hang import formulas
from geom.hang.chunked import Floats, Mask, repair
from geom.hang.closing import coth_excess, half_angle, log_sinhc, sinhc_minus_one
from geom.hang.roots import newton

# Over 200,000 members with b from 1e-9 to 1e-2 the start is off by 3 % at most, and the second of the quick steps is
# over 1e-6 for one in a hundred. What is left after a third-order step of 1e-6 is of the order of its cube, 1e-18,
# and, as the second derivative is taken for small r, of r^2 times its square.
_QUICK_ENOUGH = 1e-6
_SOFT = 0.02  # r, half the strain of a taut member, from which on all is solved the safe way
_POLISH = 1e-4  # above it the quick step is not what it is meant for
_LARGEST_ANGLE = 150.0  # a quick step multiplies (sinh u)^2 by itself, which overflows at 177


def half_angle_of(span: Floats, rise: Floats, length: Floats, excess: Floats, stretch: Floats) -> Floats:
    """Give u.

    Parameters
    ----------
    span, rise, length, excess : ndarray, shape (n,)
        S, v (either sign), L and e, metres.
    stretch : ndarray, shape (n,)
        b = w L / EA; 0 for no stretch.

    Returns
    -------
    ndarray, shape (n,)
        0 where exactly taut and b = 0; on a plumb line infinite if slack, else artanh of b/(2(v/L - 1)). NaN where no
        such member hangs.
    """
    inverse = 1.0 / length
    surplus, square, level = excess * inverse, span * inverse, rise * inverse
    surplus *= 2.0 - surplus
    square *= square
    level *= level
    terms = square, level, surplus, 0.5 * stretch
    u = _start(*terms)
    rough = _quick(u, *terms)
    repair(rough, u, _again, u, *terms)
    repair(stretch == 0.0, u, _inextensible, span, length, excess)
    repair(span == 0.0, u, _plumb, rise, length, stretch)
    return u


def _quick(u: Floats, *terms: Floats) -> Mask:
    """Take the quick steps in place; give where they were too few."""
    u *= 1.0 + _halley_step(u, *terms)
    last = _halley_step(u, *terms)
    u *= 1.0 + last
    return ~(np.abs(last) <= _QUICK_ENOUGH) | ~(u < _LARGEST_ANGLE) | (terms[-1] > _SOFT * u)


def _again(u: Floats, *terms: Floats) -> Floats:
    rough = _quick(u, *terms)
    repair(rough, u, _surely, u, *terms)
    return u


def _surely(u: Floats, *terms: Floats) -> Floats:
    """Solve the safe way, then take a quick step: the logarithms have lost digits where taut and steep."""
    u = _safeguarded(u, *terms)
    last = _halley_step(u, *terms)
    return np.where(np.abs(last) < _POLISH, u + u * last, u)


def _inextensible(span: Floats, length: Floats, excess: Floats) -> Floats:
    return half_angle(np.where(excess >= 0.0, formulas.log_stretch(span, length - excess, length, excess), np.nan))


def _plumb(rise: Floats, length: Floats, stretch: Floats) -> Floats:
    """Give the root for S = 0, where 1 = (v/L)/(1 + A) unless the member is slack."""
    longer = np.abs(rise) / length - 1.0
    return np.where(2.0 * longer <= stretch, np.inf, np.arctanh(0.5 * stretch / longer))


def _start(square: Floats, level: Floats, surplus: Floats, half: Floats) -> Floats:
    """Approximate u from E + b/q - (S/L)^2 q^2/3 = 0, q = sqrt(3 P), which is F for small b and any u, or small u.

    With q = c z, c^3 = 3 b (L/S)^2, it is z^3 - y z - 1 = 0, y = E c/b. The first guess of z is off by 8 % at
    most, near y = -1, and one step of Halley's method makes that 5e-4.
    """
    third, b = square / 3.0, half + half
    c = np.cbrt(b / third)
    y = surplus * c
    y /= b
    size = np.abs(y)
    size += 1.0 / (1.0 + 0.7 * size)
    z = np.where(y > 0.0, np.sqrt(size), 1.0 / size)
    z2 = z * z
    slope = 3.0 * z2 - y
    z2 -= y
    z2 *= z
    z2 -= 1.0  # the cubic
    z -= z2 * slope / (slope * slope - 3.0 * z * z2)
    z *= c
    z *= z
    z /= 3.0
    s = np.log1p(z)
    s *= 0.5
    # the series of `closing.half_angle` to its third term: off by 6e-4 up to s = 1
    u = 0.0228571 * s
    u += 1.2
    u *= s
    u += 6.0
    u *= s
    np.sqrt(u, out=u)
    repair(s > 1.0, u, half_angle, s)
    return u


def _bend(u: Floats) -> tuple[Floats, Floats, Floats, Floats]:
    """Give P, k^2 = 1 + P, 1/k^2 and u coth u - 1, for which see `closing.half_angle`."""
    p = sinhc_minus_one(u)
    bent = 2.0 + p
    bent *= p
    k2 = 1.0 + bent
    inverse = 1.0 / k2
    g1 = u * u
    g1 -= bent * inverse
    g1 /= 1.0 + np.sqrt(1.0 + g1)
    return bent, k2, inverse, g1


def _halley_step(u: Floats, square: Floats, level: Floats, surplus: Floats, half: Floats) -> Floats:
    """Give the relative change of u.

    With k = sinh u/u, g = u coth u: u P' = 2k^2 (g - 1), u^2 P'' = 4k^2 (g - 1)^2 + 2P. Of the terms with b,
    nearly b/u, the second derivative is taken for small r: u^2 times it is minus twice u times the first, and
    4 r t (g - 1)/k^2.
    """
    bent, k2, inverse, g1 = _bend(u)
    r = half / u
    more = 1.0 + r
    bend = r * g1
    twist = bend * inverse
    whole = 1.0 / (more + bend)  # 1/(1 + A)
    t = level * whole * whole
    twist *= t
    value = more + 1.0
    value += bend
    value += r
    value *= bend
    value *= t  # t (A (2 + A) - r (2 + r))
    value += surplus
    value += (more + 1.0) * r
    bent *= square
    value -= bent
    # twice r (1 + r) (1 - t + t (1 + r) (u/sinh u)^2/(1 + A))
    inverse *= more
    inverse *= whole
    inverse -= 1.0
    inverse *= t
    inverse += 1.0
    inverse *= more
    inverse *= r
    k2 *= square
    k2 *= g1  # half of (S/L)^2 u P'
    first = inverse + k2
    k2 *= g1
    k2 += k2
    k2 += bent
    inverse += twist
    inverse += inverse
    inverse -= k2  # half of u^2 F''
    first += first
    inverse *= value
    inverse /= first
    first -= inverse
    value /= first
    return value


def _safeguarded(u: Floats, square: Floats, level: Floats, surplus: Floats, half: Floats) -> Floats:
    """Solve the logarithm of the equation by Newton's method in ln u, within a bracket that closes.

    It falls from infinity at 0 to minus infinity at the end of its range; beyond, where its last logarithm is
    of nothing or less, u is too large.
    """
    possible = (half > 0.0) & (square > 0.0) & (half < np.inf) & (square < np.inf) & ~np.isnan(surplus)
    start = np.log(np.where((u > 0.0) & (u < np.inf), u, np.fmax(half, 1e-3)))
    start[~possible] = np.nan
    return np.exp(newton(_log_form, start, square, level, surplus, half, unit=1.0))


def _log_form(log_u: Floats, square: Floats, level: Floats, surplus: Floats, half: Floats) -> tuple[Floats, Floats]:
    """Give ln(sinh u/u) - ln(1 + r) - ln(1 + (E + t A(2 + A))/(S/L)^2)/2 and its derivative by ln u."""
    u = np.exp(log_u)
    r = half / u
    g1 = coth_excess(u)
    a = r * (1.0 + g1)
    whole = 1.0 + a
    t = level / (whole * whole)
    value = log_sinhc(u) - np.log1p(r) - 0.5 * np.log1p((surplus + t * a * (2.0 + a)) / square)
    inverse = (u / np.sinh(np.minimum(u, _LARGEST_ANGLE))) ** 2
    return value, r / (1.0 + r) + g1 + t * r * inverse / (whole * (1.0 - t))
