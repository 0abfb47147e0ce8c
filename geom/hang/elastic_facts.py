r"""Hanging members that stretch, solved from what is known of them as they hang.

Each function takes one fact instead of a length and returns the members with the unstretched length that has it.
A horizontal pull H settles the shape (`geom.hang.given_pull`). Everything else is found by the secant on it, or
rather on the logarithm of lam = w S/2H: the less the pull, the farther is the whole curve under the chord, as from

    dp/dx = (1/a) sqrt(1 + p^2)/(1 + beta sqrt(1 + p^2)),     p the slope,

with a = H/w and beta = H/EA, it curves more everywhere, so that sag, slopes and the depth of any point rise with
lam. The pull on the upper support alone has a least value; a greater one is reached on two branches, shallow and
deep.
"""

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import elastic_forms as forms
from geom.hang import facts
from geom.hang.chunked import Floats, broadcast, evaluate, evaluate_one, repair
from geom.hang.elastic import Stretched, gather
from geom.hang.formulas import chord
from geom.hang.given_pull import log_at_least, log_end_pull, shape_at
from geom.hang.roots import secant


def from_pull(
    span: ArrayLike, level_difference: ArrayLike, pull: ArrayLike, weight: ArrayLike, stiffness: ArrayLike
) -> Stretched:
    """Hang members with given horizontal pulls.

    Parameters
    ----------
    span, level_difference : array_like
        Plan distance between the supports, above 0, and elevation of `to` over `from`, metres.
    pull : array_like
        Newton, above 0.
    weight : array_like
        Weight per unstretched length, newton per metre, above 0.
    stiffness : array_like
        Modulus times area, newton; may be infinite.

    Returns
    -------
    Stretched
        NaN where there is no such member, here and in all functions of this module.

    Raises
    ------
    ValueError
        The shapes do not broadcast, here and in all functions of this module.
    """
    return _solved(_log_of_pull, span, level_difference, pull, weight, stiffness)


def from_sag(
    span: ArrayLike, level_difference: ArrayLike, sag: ArrayLike, weight: ArrayLike, stiffness: ArrayLike
) -> Stretched:
    """Hang members with given greatest vertical distances under the chord, metres; others as in `from_pull`."""
    return _solved(_log_of_sag, span, level_difference, sag, weight, stiffness)


def from_sag_mid(
    span: ArrayLike, level_difference: ArrayLike, sag: ArrayLike, weight: ArrayLike, stiffness: ArrayLike
) -> Stretched:
    """Hang members with given vertical distances under the chord at mid-span, metres; others as in `from_pull`."""
    return _solved(_log_of_sag_mid, span, level_difference, sag, weight, stiffness)


def from_lowest(
    span: ArrayLike, level_difference: ArrayLike, depth: ArrayLike, weight: ArrayLike, stiffness: ArrayLike
) -> Stretched:
    """Hang members whose lowest point lies inside the span.

    Parameters
    ----------
    depth : array_like
        Depth of the lowest point under the lower support, metres, above 0.
    span, level_difference, weight, stiffness : array_like
        As in `from_pull`; the span may be 0.

    Returns
    -------
    Stretched
    """
    hang = _solved(_log_of_lowest, span, level_difference, depth, weight, stiffness)
    s, v, depths, w, ea = broadcast(span, level_difference, depth, weight, stiffness)
    plumb = (s == 0.0) & (v != 0.0) & (depths > 0.0)
    if not plumb.any():
        return hang
    low = _strand(depths, w / ea)
    length = np.where(plumb, low + _strand(depths + np.abs(v), w / ea), hang.length)
    excess = np.where(plumb, length - np.abs(v), hang.excess)
    return gather(s, v, length, excess, (w, ea), np.where(plumb, np.inf, hang.u))


def _strand(depth: Floats, soft: Floats) -> Floats:
    """Give the length that hangs to a depth, l + soft l^2/2."""
    return 2.0 * depth / (1.0 + np.sqrt(1.0 + 2.0 * soft * depth))


def from_point(
    span: ArrayLike, level_difference: ArrayLike, point: tuple[ArrayLike, ArrayLike], weight: ArrayLike,
    stiffness: ArrayLike,
) -> Stretched:  # fmt: skip
    """Hang members through given points.

    Parameters
    ----------
    point : pair of array_like
        Plan distance from `from`, between the supports, and elevation over `from`, under the chord, metres.
    span, level_difference, weight, stiffness : array_like
        As in `from_pull`.

    Returns
    -------
    Stretched
    """
    return _solved(_log_of_point, span, level_difference, point[1], weight, stiffness, point[0])


def from_slope(
    span: ArrayLike, level_difference: ArrayLike, slope: ArrayLike, weight: ArrayLike, stiffness: ArrayLike,
    *, at_to: ArrayLike = False,
) -> Stretched:  # fmt: skip
    """Hang members that leave a support at given angles.

    Parameters
    ----------
    slope : array_like
        Angle under the horizontal at which the member leaves the support, radians; steeper than the chord.
    at_to : array_like of bool
        The support is `to`; else `from`.
    span, level_difference, weight, stiffness : array_like
        As in `from_pull`.

    Returns
    -------
    Stretched
    """
    return _solved(_log_of_slope, span, level_difference, slope, weight, stiffness, at_to)


def from_end_pull(
    span: ArrayLike, level_difference: ArrayLike, pull: ArrayLike, weight: ArrayLike, stiffness: ArrayLike,
    *, deep: ArrayLike = False,
) -> Stretched:  # fmt: skip
    """Hang members with given whole pulls on their upper support.

    Parameters
    ----------
    pull : array_like
        Newton; at least `least_end_pull`.
    deep : array_like of bool
        Of the two members with this pull the longer; else the shorter.
    span, level_difference, weight, stiffness : array_like
        As in `from_pull`.

    Returns
    -------
    Stretched
    """
    return _solved(_log_of_end_pull, span, level_difference, pull, weight, stiffness, deep)


def least_end_pull(span: ArrayLike, level_difference: ArrayLike, weight: ArrayLike, stiffness: ArrayLike) -> Floats:
    """Give the least pull a member can have on its upper support, newton; level and without stretch 0.75443978 w S."""
    arrays = broadcast(span, level_difference, weight, stiffness)
    return evaluate_one(_least_end_pull, *arrays)


def _least_end_pull(span: Floats, rise: Floats, weight: Floats, stiffness: Floats) -> Floats:
    soft = weight / stiffness
    return weight * np.exp(log_end_pull(log_at_least(span, rise, soft), span, rise, soft))


def _solved(
    solve: Callable[..., Floats], span: ArrayLike, rise: ArrayLike, fact: ArrayLike, *others: ArrayLike
) -> Stretched:
    """Solve for ln lam; `others` are weight, stiffness and what the fact needs."""
    s, v, value, weight, stiffness, *more = broadcast(span, rise, fact, *others)

    def formula(
        s: Floats, v: Floats, value: Floats, weight: Floats, stiffness: Floats, *more: Floats
    ) -> tuple[Floats, ...]:
        soft = weight / stiffness
        shape = shape_at(solve(s, v, value, weight, soft, *more), s, v, soft)
        repair(~((weight > 0.0) & (stiffness > 0.0)), shape[5], lambda u: np.full_like(u, np.nan), shape[5])
        return shape[2], shape[3], shape[5]

    length, excess, u = evaluate(formula, s, v, value, weight, stiffness, *more)
    return gather(s, v, length, excess, (weight, stiffness), u)


def _log_of_pull(span: Floats, _: Floats, pull: Floats, weight: Floats, __: Floats) -> Floats:
    return np.log(np.where(span > 0.0, 0.5 * weight * span / pull, np.nan))


def _log_of_sag(span: Floats, rise: Floats, depth: Floats, _: Floats, soft: Floats) -> Floats:
    return _matched(forms.sag, facts.from_sag(span, rise, depth), span, rise, depth, soft)


def _log_of_sag_mid(span: Floats, rise: Floats, depth: Floats, _: Floats, soft: Floats) -> Floats:
    return _matched(forms.sag_mid, facts.from_mid_sag(span, rise, depth), span, rise, depth, soft)


def _log_of_lowest(span: Floats, rise: Floats, depth: Floats, _: Floats, soft: Floats) -> Floats:
    return _matched(_lowest, facts.from_lowest(span, rise, depth), span, rise, depth, soft)


def _lowest(span: Floats, rise: Floats, length: Floats, excess: Floats, soft: Floats, u: Floats) -> Floats:
    return forms.lowest_below_from(span, np.abs(rise), length, excess, soft, u)


def _matched(
    formula: Callable[..., Floats], u: Floats, span: Floats, rise: Floats, depth: Floats, soft: Floats
) -> Floats:
    """Find ln lam from that of the member without stretch, whose u is lam."""
    result = np.log(u)

    def off(x: Floats, span: Floats, rise: Floats, depth: Floats, soft: Floats) -> Floats:
        return np.log(formula(*shape_at(x, span, rise, soft)) / depth)

    repair(
        (soft > 0.0) & (u > 0.0) & (depth > 0.0), result, lambda x, *args: secant(off, x, *args),
        result, span, rise, depth, soft,
    )  # fmt: skip
    result[(soft > 0.0) & (depth == 0.0)] = np.nan
    return result


def _log_of_point(span: Floats, rise: Floats, z: Floats, _: Floats, soft: Floats, x: Floats) -> Floats:
    depth = rise * x / span - z
    share = x / span

    def off(log_lam: Floats, x: Floats, depth: Floats, *member: Floats) -> Floats:
        return np.log(forms.under_chord(x, *shape_at(log_lam, *member)) / depth)

    middle = facts.from_mid_sag(span, rise, np.where(depth > 0.0, depth / (4.0 * share * (1.0 - share)), np.nan))
    start = np.log(np.where((share > 0.0) & (share < 1.0), middle, np.nan))
    return secant(off, start, x, depth, span, rise, soft)


def _log_of_slope(span: Floats, rise: Floats, slope: Floats, _: Floats, soft: Floats, at_to: Floats) -> Floats:
    """Match the slope over that of the chord, asinh of which is u for a level member without stretch."""
    seen = np.where(at_to != 0.0, -rise, rise)
    steeper = np.tan(slope) + seen / span
    possible = (steeper > 0.0) & (np.abs(slope) < 0.5 * np.pi) & (span > 0.0)

    def off(log_lam: Floats, steeper: Floats, span: Floats, rise: Floats, soft: Floats) -> Floats:
        shape = shape_at(log_lam, span, rise, soft)
        down = forms.downs(*shape)[0] / forms.parameter(span, shape[2], soft, shape[5])
        return np.log((down + rise / span) / steeper)

    start = np.log(np.where(possible, np.arcsinh(steeper * span / chord(span, rise)), np.nan))
    return secant(off, start, steeper, span, seen, soft)


def _log_of_end_pull(span: Floats, rise: Floats, pull: Floats, weight: Floats, soft: Floats, deep: Floats) -> Floats:
    target, least = np.log(pull / weight), log_at_least(span, rise, soft)
    sign = np.where(deep != 0.0, 1.0, -1.0)
    # shallow: T is nearly H D/S; deep: something beyond the least is as good as anything
    shallow = np.minimum(np.log(0.5 * chord(span, rise)) - target, least - 1e-3)
    start = np.where(deep != 0.0, least + 0.5, shallow)
    surplus = target - log_end_pull(least, span, rise, soft)
    start[~(surplus > 0.0)] = np.nan
    bracket = np.where(sign > 0.0, least, -np.inf), np.where(sign > 0.0, np.inf, least)

    def off(log_lam: Floats, target: Floats, sign: Floats, *member: Floats) -> Floats:
        return sign * (log_end_pull(log_lam, *member) - target)

    found = secant(off, start, target, sign, span, rise, soft, bracket=bracket)
    return np.where(surplus == 0.0, least, found)
