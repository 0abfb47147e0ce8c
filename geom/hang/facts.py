r"""The half angle u = S/2a of a catenary from a sag, or from the depth of its lowest point.

Neither has a closed form. Both are one increasing function of one unknown; the letters are those of
`geom.hang.formulas`.
"""

from collections.abc import Callable

import numpy as np

from geom.hang.chunked import Floats, piecewise
from geom.hang.closing import coth_excess, sinhc_minus_one
from geom.hang.formulas import chord, length_and_excess, sag, sag_at_mid

# Swept over chords from level to 1e14 in 1 and sags from 1e-9 to 1e6 chords the root is reached in 14
# steps at most, 4 on the mean. At worst the bracket is halved in its logarithm: 100 are out of reach.
_STEPS = 100
# Newton's step is of second order: what is left after a step of 1e-9 of u is of the order of 1e-18.
_LAST_STEP = 1e-9
# Swept over depths from 1e-15 to 1e15 and level differences up to 1e12 spans: off by 3e-12 after four
# steps, by rounding after five.
_LOWEST_STEPS = 5


def from_sag(span: Floats, rise: Floats, depth: Floats) -> Floats:
    """Give u for a greatest vertical distance under the chord.

    Parameters
    ----------
    span, rise, depth : ndarray, shape (n,)
        Plan distance, level difference and sag, metres.

    Returns
    -------
    ndarray, shape (n,)
        NaN for no span or a negative sag.
    """
    return _from_sag(_sag_and_growth, span, rise, depth)


def from_mid_sag(span: Floats, rise: Floats, depth: Floats) -> Floats:
    """Give u for a vertical distance under the chord at mid-span; as `from_sag`."""
    return _from_sag(_mid_sag_and_growth, span, rise, depth)


def from_lowest(span: Floats, rise: Floats, depth: Floats) -> Floats:
    """Give u for a lowest point inside the span, a depth d under the lower support.

    Parameters
    ----------
    span, rise, depth : ndarray, shape (n,)
        Plan distance, level difference and depth, metres.

    Returns
    -------
    ndarray, shape (n,)
        NaN for no span or a negative depth.

    Notes
    -----
    The two parts of the span, a acosh(1 + d/a) and a acosh(1 + (d + |v|)/a), add up to S. With
    acosh(1 + t) = 2 asinh sqrt(t/2) and z = sqrt(u) this is

        z^2 = asinh(p z) + asinh(q z),   p = sqrt(d/S),   q = sqrt((d + |v|)/S),

    whose difference is convex in z and 0 at z = 0, with one root above. From the right Newton's method
    falls upon the root; from a little to the left its first step lands on the right.
    """
    p, q = np.sqrt(depth / span), np.sqrt((depth + np.abs(rise)) / span)
    mean = 0.5 * (p + q)
    z = np.sqrt(_level_start(mean * mean))
    for _ in range(_LOWEST_STEPS):
        pz, qz = p * z, q * z
        value = z * z - np.arcsinh(pz) - np.arcsinh(qz)
        z -= value / (2.0 * z - p / np.sqrt(1.0 + pz * pz) - q / np.sqrt(1.0 + qz * qz))
    return z * z


def _level_start(ratio: Floats) -> Floats:
    """Approximate, within 4 %, the u of (cosh u - 1)/2u = f/S, the sag of a level span."""
    return piecewise(ratio < 0.5, _shallow_start, _deep_start, ratio)


def _shallow_start(ratio: Floats) -> Floats:
    # (cosh u - 1)/2u = u/4 (1 + u^2/12 + ...)
    return 4.0 * ratio / np.sqrt(1.0 + (8.0 / 3.0) * ratio * ratio)


def _deep_start(ratio: Floats) -> Floats:
    # two passes of u = ln(2 + 4u f/S), the equation without exp(-u)
    first = np.log(2.0 + 4.0 * ratio * (1.0 + np.log(4.0 * ratio)))
    return np.log(2.0 + 4.0 * ratio * first)


def _from_sag(function: Callable[..., tuple[Floats, Floats]], span: Floats, rise: Floats, depth: Floats) -> Floats:
    """Solve sag(u) = f on a chord of unit length.

    For a given u the sag lies under that of a level span of length D, and over both (D/2) tanh(u/2) and
    the sag of a level span of length S. The three inverses bracket u; a tenth covers the approximation.
    """
    distance = chord(span, rise)
    level, steep, ratio = span / distance, rise / distance, depth / distance
    low = 0.9 * _level_start(ratio)
    # the second bound is NaN or infinite for sags over half the chord, and fmin then takes the first
    high = np.fmin(1.1 * _level_start(ratio / level), 2.0001 * np.arctanh(2.0 * ratio))
    u = _bracketed_root(function, ratio, (low, high), level, steep)
    u[ratio == 0.0] = 0.0
    return u


def _sag_and_growth(u: Floats, span: Floats, rise: Floats) -> tuple[Floats, Floats]:
    """Give f and df/du = L/2 - v^2 A^2/(2 L u^2) - f/u, A = u coth u - 1."""
    length, excess = length_and_excess(span, rise, u)
    depth = sag(span, rise, length, excess, u)
    bend = rise * coth_excess(u) / u
    return depth, 0.5 * (length - bend * bend / length) - depth / u


def _mid_sag_and_growth(u: Floats, span: Floats, rise: Floats) -> tuple[Floats, Floats]:
    """Give f = (L/2) tanh(u/2) and df/du, with dL/du = S^2 k^2 A/(L u), k = sinh u/u."""
    length, _ = length_and_excess(span, rise, u)
    half = np.tanh(0.5 * u)
    stretched = span * (1.0 + sinhc_minus_one(u))
    growth = stretched * (stretched / length) * (coth_excess(u) / u)
    return sag_at_mid(length, u), 0.5 * growth * half + 0.25 * length * (1.0 - half) * (1.0 + half)


def _bracketed_root(
    function: Callable[..., tuple[Floats, Floats]],
    target: Floats,
    bracket: tuple[Floats, Floats],
    *shape: Floats,
) -> Floats:
    """Find the u of function(u) = target by Newton's method on the logarithm of the function.

    A step that leaves the bracket is replaced by the bracket's geometric mean. Elements that have arrived
    are taken out of the arrays; NaN ones are never let in, and stay NaN.
    """
    low, high = bracket
    result = np.full(target.size, np.nan)
    left = np.flatnonzero((low > 0.0) & (high < np.inf) & (target > 0.0))
    low, high, target, *shape_left = (values.take(left) for values in (low, high, target, *shape))
    u = np.sqrt(low * high)
    for _ in range(_STEPS):
        if not left.size:
            break
        value, growth = function(u, *shape_left)
        above = value > target
        high = np.where(above, u, high)
        low = np.where(above, low, u)
        step = u - np.log(value / target) * value / growth
        step = np.where((step >= low) & (step <= high), step, np.sqrt(low * high))
        arrived = np.abs(step - u) <= _LAST_STEP * u
        result[left[arrived]] = step[arrived]
        going = np.flatnonzero(~arrived)
        left = left.take(going)
        u, low, high, target, *shape_left = (x.take(going) for x in (step, low, high, target, *shape_left))
    return result
