r"""Hanging members that stretch, solved from their unstretched length.

The elastic catenary (Irvine, "Cable Structures", 1981, ch. 1) by one unknown (`geom.hang.stretching`): slack, taut,
shorter than the chord, level or not, down to two strands on one plumb line. What is known of a member as it hangs
instead of its length is solved in `geom.hang.elastic_facts`.

Every function takes numbers or arrays that broadcast, solves all of them at once and returns a `Stretched` of
their common shape. Elements for which there is no such member are NaN in every field, without a warning. The
weight is that of an unstretched metre and above 0; the stiffness, modulus times area, may be infinite.

Examples
--------
>>> from geom.hang.elastic import from_unstretched
>>> cable = from_unstretched(100.0, 0.0, 105.0, 20.0, 1e6)
>>> round(float(cable.horizontal), 6)
1800.859163
"""

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import formulas, stretching
from geom.hang.chunked import Floats, Mask, broadcast, evaluate, repair
from geom.hang.stretched import Stretched

__all__ = ["Stretched", "from_unstretched", "unstretched_at"]

# Distances of no more than this, metres, are none, as in `geom.hang.catenary`.
_PLUMB = 1e-280


def from_unstretched(
    span: ArrayLike,
    level_difference: ArrayLike,
    length: ArrayLike,
    weight: ArrayLike,
    stiffness: ArrayLike,
    *,
    excess: ArrayLike | None = None,
) -> Stretched:
    """Hang members of given unstretched lengths.

    Parameters
    ----------
    span : array_like
        Plan distance between the supports, metres; 0 for supports on one plumb line.
    level_difference : array_like
        Elevation of `to` over `from`, metres.
    length : array_like
        Unstretched length between the supports, metres; may be less than the chord.
    weight : array_like
        Weight per unstretched length, newton per metre, above 0.
    stiffness : array_like
        Modulus times area, newton; infinite for no stretch.
    excess : array_like, optional
        Unstretched length less chord, metres, where it is known better than as a difference.

    Returns
    -------
    Stretched
        NaN where a member that does not stretch is shorter than the chord.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    if excess is None:
        s, v, lengths, weights, stiff = broadcast(span, level_difference, length, weight, stiffness)
        excesses, u = evaluate(_with_excess, s, v, lengths, weights, stiff)
    else:
        s, v, lengths, weights, stiff, excesses = broadcast(span, level_difference, length, weight, stiffness, excess)
        (u,) = evaluate(_solve, s, v, lengths, weights, stiff, excesses)
    return gather(s, v, lengths, excesses, (weights, stiff), u)


def unstretched_at(length: ArrayLike, expansion: ArrayLike, difference: ArrayLike) -> Floats:
    """Give unstretched lengths at another temperature, L (1 + alpha dT).

    Parameters
    ----------
    length : array_like
        Unstretched length at the temperature it was measured at, metres.
    expansion : array_like
        Coefficient of linear expansion, 1/K.
    difference : array_like
        Temperature less that at which the length was measured, kelvin.

    Returns
    -------
    ndarray
        Metres.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    lengths, alpha, warmer = broadcast(length, expansion, difference)
    return lengths * (1.0 + alpha * warmer)


def gather(
    span: Floats, rise: Floats, length: Floats, excess: Floats, stock: tuple[Floats, Floats], u: Floats
) -> Stretched:
    """Give the solved members; where u is NaN, everything is. `stock` is weight and stiffness."""
    fields: tuple[Floats, ...] = (span, rise, length, excess, *stock, u)
    impossible = np.isnan(u)
    if impossible.any():
        fields = tuple(np.where(impossible, np.nan, field) for field in fields)
    return Stretched(*fields)


def _with_excess(
    span: Floats, rise: Floats, length: Floats, weight: Floats, stiffness: Floats
) -> tuple[Floats, Floats]:
    excess, _ = formulas.excess_and_chord(span, rise, length)
    return excess, *_solve(span, rise, length, weight, stiffness, excess)


def _solve(
    span: Floats, rise: Floats, length: Floats, weight: Floats, stiffness: Floats, excess: Floats
) -> tuple[Floats]:
    stretch = weight / stiffness
    stretch *= length
    u = stretching.half_angle_of(span, rise, length, excess, stretch)
    # four reductions, instead of fifteen passes, where all is in order; with a NaN among them none is true
    sizes = span.min(initial=np.inf), weight.min(initial=np.inf), stiffness.min(initial=np.inf)
    if not (min(sizes) > _PLUMB and 0.0 < length.max(initial=1.0) < np.inf and stretch.max(initial=0.0) < np.inf):
        impossible = ~_possible(span, rise, length, weight, stiffness)
        repair(impossible, u, lambda u: np.full_like(u, np.nan), u)
    return (u,)


def _possible(span: Floats, rise: Floats, length: Floats, weight: Floats, stiffness: Floats) -> Mask:
    finite = (span < np.inf) & (np.abs(rise) < np.inf) & (length < np.inf) & (weight < np.inf)
    apart = (span > _PLUMB) | ((span >= 0.0) & (np.abs(rise) > _PLUMB))
    return finite & apart & (length > 0.0) & (weight > 0.0) & (stiffness > 0.0)
