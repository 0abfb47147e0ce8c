r"""Closed forms of a hanging catenary, arranged so that nothing cancels and nothing overflows.

Every function works on one-dimensional arrays of equal length. The letters are, throughout,

    S   span, on plan                    D   chord, sqrt(S^2 + v^2)
    v   level difference, to - from      L   length
    e   excess, L - D                    a   parameter, horizontal pull / weight per length
    u   S / 2a                           beta   mean of the two end positions over a, tanh beta = v / L

so that the ends lie at beta - u and beta + u on y = cosh x, drawn a times larger, and

    L = 2a sinh u cosh beta,   v = 2a sinh u sinh beta,   sqrt(L^2 - v^2) = 2a sinh u.

The steeper the chord and the tauter the member, the more digits L - |v| and L - D lose if they are
subtracted; both are built from e, L - |v| = e + S^2/(D + |v|). Where the digits that L - e loses of D are
lost in the result anyhow, D is L - e, which saves the root.
"""

import numpy as np

from geom.hang.chunked import Floats, repair
from geom.hang.closing import sinhc_minus_one

# Squares under this have lost digits to underflow (the least normal double is 2.2e-308): use hypot there.
_SMALL_SQUARE = 1e-290
# Ratios above this may have overflowed: take logarithms first.
_LARGE_RATIO = 1e290
# Under this slack, L - D is corrected for the rounding of D; above it, 1.2e-16 of D is at most 1.2e-12 of the
# excess and 6e-13 of the parameter.
_NEAR_TAUT = 1e-4
_SPLIT = 134217729.0  # 2^27 + 1, halves a double's 53 bits (Dekker, Numerische Mathematik 18 (1971) 224)


def chord(span: Floats, rise: Floats) -> Floats:
    """Give sqrt(S^2 + v^2); numpy's hypot is six times slower and only needed for tiny values."""
    square = span * span
    square += rise * rise
    result = np.sqrt(square)
    repair(square < _SMALL_SQUARE, result, np.hypot, span, rise)
    return result


def _square_twofold(x: Floats) -> tuple[Floats, Floats]:
    """Give x^2 as an exact sum of two doubles (Dekker 1971)."""
    square = x * x
    big = _SPLIT * x
    high = big - (big - x)
    low = x - high
    return square, low * low - (square - high * high - 2.0 * high * low)


def _near_taut_excess(span: Floats, rise: Floats, length: Floats) -> Floats:
    """Give L - sqrt(S^2 + v^2) of the numbers as given, right to their last digit.

    The rounding of D is r/2D with r = S^2 + v^2 - D^2, summed here in twofold numbers.
    """
    rounded = chord(span, rise)
    (a, a_low), (b, b_low) = _square_twofold(span), _square_twofold(rise)
    large, small = np.maximum(a, b), np.minimum(a, b)
    total = large + small
    carry = small - (total - large)
    d, d_low = _square_twofold(rounded)
    r = (total - d) + (carry + a_low + b_low - d_low)
    difference = length - rounded
    excess = difference - 0.5 * r / rounded
    # a length that is the chord to its last digit is meant to be taut
    return np.where(difference == 0.0, 0.0, excess)


def excess_and_chord(span: Floats, rise: Floats, length: Floats) -> tuple[Floats, Floats]:
    """Give L - D and D; L - D is negative where the length does not reach."""
    distance = chord(span, rise)
    excess = length - distance
    repair(excess < _NEAR_TAUT * distance, excess, _near_taut_excess, span, rise, length)
    return excess, distance


def _half_log1p(first: Floats, second: Floats, span: Floats) -> Floats:
    """Give ln(1 + f g/S^2)/2, by the logarithms of f, g and S where the ratio may not be a normal double."""
    ratio = first * second
    ratio /= span * span
    result = np.log1p(ratio)
    result *= 0.5
    if not ratio.max(initial=0.0) < _LARGE_RATIO:
        repair(~(ratio < _LARGE_RATIO), result, _half_log, first, second, span)
    return result


def _half_log(first: Floats, second: Floats, span: Floats) -> Floats:
    result = 0.5 * (np.log(first) + np.log(second)) - np.log(span)
    return np.where(first == 0.0, 0.0, result)


def log_stretch(span: Floats, distance: Floats, length: Floats, excess: Floats) -> Floats:
    """Give s = ln(sqrt(L^2 - v^2)/S), from L^2 - v^2 = S^2 + (L - D)(L + D)."""
    return _half_log1p(excess, length + distance, span)


def less_rise(span: Floats, v: Floats, length: Floats, excess: Floats) -> Floats:
    """Give L - v for v >= 0, as e + (D - v) with D - v = S^2/(D + v)."""
    distance = length - excess
    np.maximum(distance, span, out=distance)  # where the chord is lost in the length's last digit
    distance += v
    gap = span / distance
    gap *= span
    gap += excess
    return gap


def length_and_excess(span: Floats, rise: Floats, u: Floats) -> tuple[Floats, Floats]:
    """Give L and e for a known u, by L^2 - D^2 = S^2 (k - 1)(k + 1) with k = sinh u / u."""
    p = sinhc_minus_one(u)
    length = chord(span * (1.0 + p), rise)
    return length, (span * p / (length + chord(span, rise))) * (span * (2.0 + p))


def shift(span: Floats, v: Floats, distance: Floats, excess: Floats) -> Floats:
    """Give asinh(v/S) - beta for v >= 0: how far, over a, the greatest sag lies beyond mid-span.

    With tanh asinh(v/S) = v/D and tanh beta = v/L it is ln(1 + 2 v e (D + v) / (S^2 (L + v)))/2.
    """
    ratio = distance + v
    ratio /= ratio + excess
    ratio += ratio
    return _half_log1p(v * excess, ratio, span)


def sag_at_mid(length: Floats, u: Floats) -> Floats:
    """Give 2a cosh beta sinh^2(u/2), the drop under the chord at mid-span, as (L/2) tanh(u/2)."""
    half = 0.5 * u
    np.tanh(half, out=half)
    half *= length
    half *= 0.5
    return half


def sag(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats) -> Floats:
    """Give the greatest vertical distance under the chord.

    Where the curve runs parallel to the chord, a distance `a delta` from mid-span (see `shift`), it is
    deeper than at mid-span by

        (1/2u) (D (exp(-delta) - 1) + |v| delta + |v| e exp(-delta) / (L + |v|)).

    For a small u the bracket is D delta^2/2 with delta of the order of u^2/6, and its rounding error,
    eps D delta, is eps u/12 of D where the sag is D u/4.
    """
    v = np.abs(rise)
    distance = length - excess
    delta = shift(span, v, distance, excess)
    decay = np.expm1(-delta)
    delta *= v
    last = v * excess
    last /= length + v
    result = np.multiply(distance, decay, out=distance)
    result += delta
    decay += 1.0
    last *= decay
    result += last
    result /= u
    result *= 0.5
    result += sag_at_mid(length, u)
    repair(np.isnan(result), result, _limit_of_sag, length, v, u)
    return result


def _limit_of_sag(length: Floats, v: Floats, u: Floats) -> Floats:
    """Give 0 of a taut member, and on a plumb line (L + |v|)/2: there the chord's top is over the lowest point."""
    return np.select([u == 0.0, u == np.inf], [0.0, 0.5 * (length + v)], np.nan)


def ends(
    span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats
) -> tuple[Floats, Floats, Floats, Floats]:
    """Give the end pulls of a member of unit weight per length.

    Returns
    -------
    tuple of ndarray
        Whole pull at `from` and at `to`, then the downward part on each. By T = (L coth u -+ v)/2 and
        V = (L -+ v coth u)/2, with coth u - 1 = 2 / (exp(2u) - 1) so that a steep taut member keeps
        its digits at the lower end.

    Notes
    -----
    Exactly taut: whole pulls infinite, downward parts infinite with the sign of the slope, or half the
    weight each if level.
    """
    v = np.abs(rise)
    half_less = 0.5 * less_rise(span, v, length, excess)
    more = np.expm1(u + u)
    np.divide(1.0, more, out=more)  # (coth u - 1)/2
    lift = rise * more
    repair(np.isnan(lift), lift, _limit_of_lift, u)
    more *= length
    v -= rise
    v *= 0.5
    from_part = half_less + v  # (L - v)/2
    v += rise
    to_part = np.add(half_less, v, out=half_less)  # (L + v)/2
    return more + from_part, more + to_part, from_part - lift, to_part + lift


def _limit_of_lift(u: Floats) -> Floats:
    """Give 0 for what is 0 times infinity: v coth u of a member both taut and level."""
    return np.where(u == 0.0, 0.0, np.nan)
