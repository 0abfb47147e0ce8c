r"""Inextensible hanging members, solved from a length, a sag, a lowest point or a parameter.

Every function takes numbers or arrays that broadcast, solves all of them at once and returns a `Hang` of
their common shape. Elements for which no such curve exists (a length that does not reach, a sag below
zero, no span where one is needed, supports at one point, NaN or an infinity given) are NaN in every
field, without a warning: whether that is an error is the caller's to say. Shapes that do not broadcast are
a ValueError.

Solved in u = S / 2a, half the span over the parameter, from ln(sinh u / u) = ln(sqrt(L^2 - v^2) / S)
(see `geom.hang.closing`); the excess of the length over the chord is the quantity that settles the shape of
a near-taut member, and the one to give where it is known: half its relative error is the relative error of
sag and pull.

Examples
--------
>>> from geom.hang.catenary import from_sag
>>> hang = from_sag(2.0, 0.0, 0.45)
>>> round(float(hang.parameter), 6)
1.179304
"""

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import facts, formulas
from geom.hang.chunked import Floats, Mask, broadcast, evaluate, repair
from geom.hang.closing import half_angle
from geom.hang.member import Hang, Points, Pulls

__all__ = [
    "Hang",
    "Points",
    "Pulls",
    "from_excess",
    "from_length",
    "from_lowest",
    "from_parameter",
    "from_sag",
    "from_sag_mid",
]


# Distances of no more than this, metres, are none: the parameter of such a span would hardly be a normal number.
_PLUMB = 1e-280


def from_length(span: ArrayLike, level_difference: ArrayLike, length: ArrayLike) -> Hang:
    """Hang members of given lengths.

    Parameters
    ----------
    span : array_like
        Plan distance between the supports, metres; 0 for two strands on one plumb line.
    level_difference : array_like
        Elevation of `to` over `from`, metres.
    length : array_like
        Length between the supports, metres.

    Returns
    -------
    Hang
        NaN where the length is less than the chord. A length that is the chord to its last digit is taut.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    s, v, lengths = broadcast(span, level_difference, length)
    excess, u, parameter = evaluate(_from_length, s, v, lengths)
    return _hang(s, v, (lengths, excess, u, parameter))


def from_excess(span: ArrayLike, level_difference: ArrayLike, excess: ArrayLike) -> Hang:
    """Hang members of which is known by how much they are longer than the chord.

    Parameters
    ----------
    span, level_difference : array_like
        As in `from_length`, metres.
    excess : array_like
        Length less chord, metres.

    Returns
    -------
    Hang
        NaN where the excess is negative.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    s, v, excesses = broadcast(span, level_difference, excess)
    length, u, parameter = evaluate(_from_excess, s, v, excesses)
    return _hang(s, v, (length, excesses, u, parameter))


def from_sag(span: ArrayLike, level_difference: ArrayLike, sag: ArrayLike) -> Hang:
    """Hang members with given greatest vertical distances under the chord.

    Parameters
    ----------
    span, level_difference : array_like
        As in `from_length`, metres; the span above 0.
    sag : array_like
        Metres; 0 is taut.

    Returns
    -------
    Hang

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    s, v, depth = broadcast(span, level_difference, sag)
    return _hang(s, v, evaluate(_from_sag, s, v, depth))


def from_sag_mid(span: ArrayLike, level_difference: ArrayLike, sag: ArrayLike) -> Hang:
    """Hang members with given vertical distances under the chord at mid-span; as `from_sag`."""
    s, v, depth = broadcast(span, level_difference, sag)
    return _hang(s, v, evaluate(_from_sag_mid, s, v, depth))


def from_lowest(span: ArrayLike, level_difference: ArrayLike, depth: ArrayLike) -> Hang:
    """Hang members whose lowest point lies inside the span at given depths.

    Parameters
    ----------
    span, level_difference : array_like
        As in `from_length`, metres; the span may be 0.
    depth : array_like
        Depth of the lowest point under the lower support, metres, above 0.

    Returns
    -------
    Hang

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    s, v, depths = broadcast(span, level_difference, depth)
    return _hang(s, v, evaluate(_from_lowest, s, v, depths))


def from_parameter(span: ArrayLike, level_difference: ArrayLike, parameter: ArrayLike) -> Hang:
    """Hang members with given parameters, horizontal pull over weight per length.

    Parameters
    ----------
    span, level_difference : array_like
        As in `from_length`, metres; the span above 0.
    parameter : array_like
        Metres, above 0; infinite is taut.

    Returns
    -------
    Hang
        NaN also where the length is beyond any number, a parameter under S/1400.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    s, v, a = broadcast(span, level_difference, parameter)
    return _hang(s, v, evaluate(_from_parameter, s, v, a))


def _from_excess(span: Floats, rise: Floats, excess: Floats) -> tuple[Floats, Floats, Floats]:
    distance = formulas.chord(span, rise)
    length = distance + excess
    return length, *_close(span, distance, length, excess)


def _from_length(span: Floats, rise: Floats, length: Floats) -> tuple[Floats, Floats, Floats]:
    excess, distance = formulas.excess_and_chord(span, rise, length)
    return excess, *_close(span, distance, length, excess)


def _close(span: Floats, distance: Floats, length: Floats, excess: Floats) -> tuple[Floats, Floats]:
    """Give u and the parameter; u is NaN where no member can hang."""
    s = formulas.log_stretch(span, distance, length, excess)
    # three reductions, instead of seven passes, where all is in order; with a NaN among them none is true
    if span.min(initial=np.inf) > _PLUMB and excess.min(initial=np.inf) >= 0.0 and length.max(initial=0.0) < np.inf:
        u = half_angle(s)
    else:
        possible = (span >= 0.0) & (excess >= 0.0) & (distance > _PLUMB) & (length < np.inf)
        repair(span <= _PLUMB, s, _infinity, span)
        u = half_angle(s)
        repair(~possible, u, _nothing, span)
    parameter = span / u
    parameter *= 0.5
    return u, parameter


def _infinity(values: Floats) -> Floats:
    return np.full_like(values, np.inf)


def _nothing(values: Floats) -> Floats:
    return np.full_like(values, np.nan)


def _from_sag(span: Floats, rise: Floats, depth: Floats) -> tuple[Floats, ...]:
    return _at_half_angle(span, rise, facts.from_sag(span, rise, depth), span > _PLUMB)


def _from_sag_mid(span: Floats, rise: Floats, depth: Floats) -> tuple[Floats, ...]:
    return _at_half_angle(span, rise, facts.from_mid_sag(span, rise, depth), span > _PLUMB)


def _from_parameter(span: Floats, rise: Floats, parameter: Floats) -> tuple[Floats, ...]:
    length, excess, u, _ = _at_half_angle(span, rise, 0.5 * span / parameter, (span > _PLUMB) & (parameter > 0.0))
    return length, excess, u, parameter


def _from_lowest(span: Floats, rise: Floats, depth: Floats) -> tuple[Floats, ...]:
    length, excess, u, parameter = _at_half_angle(
        span, rise, facts.from_lowest(span, rise, depth), (span > _PLUMB) & (depth > 0.0)
    )
    plumb = (span >= 0.0) & (span <= _PLUMB) & (np.abs(rise) > _PLUMB) & (depth > 0.0) & (depth < np.inf)
    repair(plumb, length, lambda v, d: np.abs(v) + 2.0 * d, rise, depth)
    repair(plumb, excess, lambda d: 2.0 * d, depth)
    repair(plumb, u, _infinity, depth)
    repair(plumb, parameter, np.zeros_like, depth)
    return length, excess, u, parameter


def _at_half_angle(span: Floats, rise: Floats, u: Floats, possible: Mask) -> tuple[Floats, ...]:
    length, excess = formulas.length_and_excess(span, rise, u)
    u = np.where(possible & (length < np.inf), u, np.nan)
    return length, excess, u, 0.5 * span / u


def _hang(span: Floats, rise: Floats, solved: tuple[Floats, ...]) -> Hang:
    """Gather the fields; where u is NaN, all are."""
    length, excess, u, parameter = solved
    fields: tuple[Floats, ...] = (span, rise, length, excess, u, parameter)
    impossible = np.isnan(u)
    if impossible.any():
        fields = tuple(np.where(impossible, np.nan, field) for field in fields)
    return Hang(*fields)
