r"""The closing function of the catenary, h(u) = ln(sinh u / u), and its inverse.

A catenary of parameter a (horizontal pull over weight per length) between supports a plan distance S and a
level difference v apart has the length L that satisfies, with u = S / 2a,

    sinh u / u = sqrt(L^2 - v^2) / S          (Huygens, Leibniz and Johann Bernoulli, 1691).

Its logarithm is what is solved: h is increasing and convex, it is u^2/6 for a taut member and u - ln 2u for
a deep one, and neither end overflows.
"""

import numpy as np

from geom.hang.chunked import Floats, piecewise

# Below this u the direct forms lose digits: ln(sinh u / u) carries the rounding of sinh u / u, which is 6 eps/u^2
# of its value, one digit at 0.5 and two at 0.2. Ten terms of the series hold up to 1.5 (the first one left out
# is 8e-19 of the sum).
SERIES_END = 1.5

# sinh u / u - 1 = u^2/6 (1 + u^2/20 (1 + u^2/42 (...))): the divisors are 2n (2n + 1)
_DIVISORS = tuple(2.0 * n * (2.0 * n + 1.0) for n in range(1, 11))
_COEFFICIENTS = tuple(1.0 / float(divisor) for divisor in np.cumprod(_DIVISORS))

# u^2/s of h(u) = s, for s from 0 to 1, as a polynomial: through its values, to 60 digits, at the 13 zeros of
# the Chebyshev polynomial on that interval. Between them it is off by 1.3e-17 of the value at most. (It
# is close to the series about 0, 6 + 6/5 s + 4/175 s^2 - 2/175 s^3 + ..., which converges more slowly.)
INVERSE_END = 1.0
INVERSE = (
    6.0,
    1.1999999999999735,
    0.022857142858629668,
    -0.011428571461460754,
    0.0020066794142387778,
    2.819015278428385e-05,
    -0.0001034935417311722,
    2.122846647801107e-05,
    1.2130806150759043e-06,
    -1.604186660412562e-06,
    3.632075289718991e-07,
    -2.793373765739403e-08,
    -1.2659033406756768e-09,
)
_LOGARITHMS = 3.0  # from here two passes of the deep form are the better start; both are off by 1 % near it
_LN2 = 0.6931471805599453


def _series(x: Floats) -> Floats:
    """Sum u^2/3! + u^4/5! + ... = sinh u / u - 1, with x = u^2 up to 1.5^2."""
    total = x * _COEFFICIENTS[-1]
    for coefficient in _COEFFICIENTS[-2::-1]:
        total += coefficient
        total *= x
    return total


def _sinhc_minus_one_series(u: Floats) -> Floats:
    return _series(u * u)


def _sinhc_minus_one_direct(u: Floats) -> Floats:
    return np.sinh(u) / u - 1.0


def sinhc_minus_one(u: Floats) -> Floats:
    """Give sinh(u)/u - 1 without cancellation.

    Parameters
    ----------
    u : ndarray, shape (n,)
        Half span over parameter, 0 or more; infinite results from 711 on.

    Returns
    -------
    ndarray, shape (n,)
    """
    return piecewise(u < SERIES_END, _sinhc_minus_one_series, _sinhc_minus_one_direct, u)


def _log_sinhc_series(u: Floats) -> Floats:
    return np.log1p(_series(u * u))


def _log_sinhc_direct(u: Floats) -> Floats:
    return u - np.log(-2.0 * u / np.expm1(-2.0 * u))


def log_sinhc(u: Floats) -> Floats:
    """Give the closing function ln(sinh(u)/u), without cancellation or overflow.

    Parameters
    ----------
    u : ndarray, shape (n,)
        Half span over parameter, 0 or more.

    Returns
    -------
    ndarray, shape (n,)
    """
    return piecewise(u < SERIES_END, _log_sinhc_series, _log_sinhc_direct, u)


def coth_excess(u: Floats) -> Floats:
    """Give u coth(u) - 1, which is u h'(u), without cancellation.

    Parameters
    ----------
    u : ndarray, shape (n,)
        Half span over parameter, above 0.

    Returns
    -------
    ndarray, shape (n,)
    """
    return piecewise(u < SERIES_END, _coth_excess_series, _coth_excess_direct, u)


def _coth_excess_series(u: Floats) -> Floats:
    x = u * u
    p = _series(x)
    d = x - p * (2.0 + p) / ((1.0 + p) * (1.0 + p))  # see `half_angle`
    return d / (1.0 + np.sqrt(1.0 + d))


def _coth_excess_direct(u: Floats) -> Floats:
    return u / np.tanh(u) - 1.0


def half_angle(s: Floats) -> Floats:
    """Give the u for which ln(sinh(u)/u) = s.

    Parameters
    ----------
    s : ndarray, shape (n,)
        Logarithm of the stretch sqrt(L^2 - v^2)/S; 0 or more.

    Returns
    -------
    ndarray, shape (n,)
        0 for s = 0, infinity for s infinite, NaN for s negative or NaN.

    Notes
    -----
    Up to s = 1, a level member 2.7 times as long as its span, u^2/s is a polynomial of s: no iteration
    and no function but a root. Above, Halley's method, in a fixed number of steps: the start is off by
    1.3 % at most (near s = 3), which one step makes 2e-7 and two 1e-21. Measured in double precision
    against 40-digit arithmetic over s from 1e-15 to 630, u is right to 4e-16.

    With A = u h'(u) = u coth u - 1 and B = u^2 h''(u) = 1 - (u / sinh u)^2 Halley's step is
    u <- u (1 - 2 f / (2 A - f B/A)), f = h - s. As coth^2 u = 1 + 1/sinh^2 u, A = sqrt(1 + d) - 1 with
    d = u^2 - B, and nothing overflows.
    """
    return piecewise(s <= INVERSE_END, _by_polynomial, _by_halley, s)


def _by_polynomial(s: Floats) -> Floats:
    total = s * INVERSE[-1]
    for coefficient in INVERSE[-2::-1]:
        total += coefficient
        total *= s
    return np.sqrt(total, out=total)


def _by_halley(s: Floats) -> Floats:
    u = piecewise(s < _LOGARITHMS, _series_start, _logarithms_start, s)
    for _ in range(2):
        u *= _halley_factor(u, s)
    u[s == np.inf] = np.inf
    return u


def _series_start(s: Floats) -> Floats:
    return np.sqrt(s * (6.0 + s * (1.2 + s * 0.0228571)))


def _logarithms_start(s: Floats) -> Floats:
    """Take two passes of u = ln 2 + s + ln u, which is h(u) = s without exp(-2u)."""
    first = s + _LN2
    second = first + np.log(first)
    return first + np.log(second)


def _halley_factor(u: Floats, s: Floats) -> Floats:
    decay = np.expm1(-2.0 * u)
    ratio = -2.0 * u / decay  # u exp(u) / sinh u
    f = u - np.log(ratio) - s
    b = 1.0 - ratio * ratio * (1.0 + decay)
    d = u * u - b
    a = d / (1.0 + np.sqrt(1.0 + d))
    return 1.0 - f / (a - 0.5 * f * b / a)
