r"""The unstretched length of a loaded member, from what is known of it as it hangs.

With its horizontal pull H given, a member is followed from load to load (`geom.hang.walk`): its end rises with the
slope it begins with, which one Newton's method finds, and its length is what it took. Every fact then is one equation
for ln H: the less the pull, the farther the whole member hangs under its chord, whatever it carries. The pull on one
support alone has a least value; a greater one is reached on two branches, shallow and deep.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from geom.hang.carried import Bare, Carried
from geom.hang.loaded import Loaded
from geom.hang.roots import newton, secant
from geom.hang.sections import Sections
from geom.hang.walk import Way, walk

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]

_GRID = np.linspace(-12.0, 6.0, 91)  # ln of (whole load over H), where the least end pull is looked for
_ZOOMS = 6
_RANGE = 25.0  # of ln H about the whole load: from a hundred thousand million times as taut to as deep


def length_of(
    fact: str, bare: Bare, carried: Carried, value: Floats, *, place: Floats, deep: NDArray[np.bool_]
) -> Floats:
    """Return the unstretched lengths at the bare members' temperature, m; NaN where there is no such member.

    Parameters
    ----------
    fact : str
        Which fact `value` is, as in `geom.hang.intent.FACTS`; none by length.
    bare, carried : Bare, Carried
        n members and what they carry.
    value : ndarray, shape (n,)
        The fact: m, N or rad; of `lowest` the depth under the lower support, of `through` the elevation over `from`.
    place : ndarray, shape (n,)
        Plan distance of the point of `through`, m.
    deep : ndarray of bool, shape (n,)
        Of two members with one `end_pull` the deep one.
    """
    with np.errstate(all="ignore"):
        way = _way(bare, carried)
        whole = _whole(bare, carried)
        if fact == "pull":
            log_pull = np.log(value)
        elif fact == "end_pull":
            log_pull = _of_end_pull(way, bare, value, whole, deep)
        else:
            log_pull = _matched(_FACTS[fact], way, bare, (value, whole, place))
        return _at_pull(way, bare, np.arange(len(value)), log_pull).length


def least_end_pull(bare: Bare, carried: Carried) -> Floats:
    """Return the least pull that members can have on the more loaded support, N."""
    with np.errstate(all="ignore"):
        way, whole = _way(bare, carried), _whole(bare, carried)
        return np.asarray(np.exp(_least(way, bare, whole)[1]))


def _whole(bare: Bare, carried: Carried) -> Floats:
    reach = np.hypot(bare.span, bare.rise)
    total: Floats = bare.weight * reach + np.nansum(carried.force, axis=1) + carried.spread * bare.span
    return total


def _way(bare: Bare, carried: Carried) -> Way:
    """Put the loads in the order in which they follow, taking the member for straight to compare both measures."""
    n, count = carried.at.shape
    there = np.isfinite(carried.at)
    at = np.where(carried.on_plan, carried.at, carried.at * bare.growth[:, np.newaxis])
    straight = (bare.span / np.hypot(bare.span, bare.rise))[:, np.newaxis]
    order = np.argsort(np.where(there, np.where(carried.on_plan, at, at * straight), -1.0), axis=1, kind="stable")
    take = np.take_along_axis
    last = np.ones((n, 1), dtype=np.bool_)
    return Way(
        weight=np.repeat((bare.weight / bare.growth)[:, np.newaxis], count + 1, axis=1),
        stiffness=np.repeat(bare.stiffness[:, np.newaxis], count + 1, axis=1),
        end=np.concatenate([take(np.where(there, at, 0.0), order, axis=1), bare.span[:, np.newaxis]], axis=1),
        on_plan=np.concatenate([take(carried.on_plan & there, order, axis=1), last], axis=1),
        force=np.concatenate([take(np.nan_to_num(carried.force), order, axis=1), np.zeros((n, 1))], axis=1),
        spread=carried.spread,
    )


def _at_pull(way: Way, bare: Bare, rows: Ints, log_pull: Floats) -> Loaded:
    """Hang members under given pulls; NaN where loads do not follow one another as they were put."""
    part, rise, span = way.of(rows), bare.rise[rows], bare.span[rows]
    pull = np.exp(log_pull)
    lean = np.arcsinh(rise / span - 0.5 * _load(part, span) / pull)

    def gap(slope: Floats, log_h: Floats, high: Floats, row: Floats) -> tuple[Floats, Floats]:
        walked = walk(way.of(row.astype(np.intp)), np.stack([log_h, slope], axis=1))
        return walked.rise[:, -1] - high, walked.slope_of_rise[:, 1]

    slope = newton(gap, lean, log_pull, rise, rows.astype(np.float64), unit=1e-3)
    arcs = walk(part, np.stack([log_pull, slope], axis=1)).arc
    lengths = np.diff(arcs, axis=1, prepend=0.0)
    tension = np.stack([pull, np.zeros_like(pull), pull * np.sinh(slope)], axis=1)
    tension[(lengths < -1e-12 * arcs[:, -1:]).any(axis=1)] = np.nan
    load, point = np.zeros((*lengths.shape, 3)), np.zeros((*lengths.shape, 3))
    load[..., 2], point[..., 2] = -part.weight, -part.force
    missing = np.isnan(tension[:, 0])
    lengths[missing] = np.nan
    none = np.empty((len(rows), 0), dtype=np.intp)
    return Loaded(span, rise, Sections(lengths, part.stiffness, load, point), tension, part.spread, none)


def _load(way: Way, span: Floats) -> Floats:
    total: Floats = way.weight[:, 0] * span + way.force.sum(axis=1) + way.spread * span
    return total


def _matched(
    depth: Callable[[Loaded, Floats, Floats], Floats], way: Way, bare: Bare, given: tuple[Floats, Floats, Floats]
) -> Floats:
    """Find ln H by the secant on -ln H, with which every depth rises."""
    value, whole, place = given
    target = depth_of(depth, bare, value, place)

    def off(x: Floats, aim: Floats, at: Floats, row: Floats) -> Floats:
        hang = _at_pull(way, bare, row.astype(np.intp), -x)
        return np.log(depth(hang, at, hang.span)) - aim

    start = -np.log(np.where((bare.span > 0.0) & (target > 0.0), 1.25 * whole, np.nan))
    rows = np.arange(len(value), dtype=np.float64)
    return -secant(off, start, np.log(target), place, rows, bracket=(start - _RANGE, start + _RANGE))


def depth_of(depth: Callable[..., Floats], bare: Bare, value: Floats, place: Floats) -> Floats:
    """Return the facts as depths, each 0 of a member as straight as its chord."""
    if depth is _through:
        return np.asarray(bare.rise * place / bare.span - value)
    if depth is _slope_from:
        return np.asarray(np.tan(value) + bare.rise / bare.span)
    if depth is _slope_to:
        return np.asarray(np.tan(value) - bare.rise / bare.span)
    return value


def _sag(hang: Loaded, _: Floats, __: Floats) -> Floats:
    return hang.sag


def _sag_mid(hang: Loaded, _: Floats, __: Floats) -> Floats:
    return hang.sag_mid


def _lowest(hang: Loaded, _: Floats, __: Floats) -> Floats:
    return np.asarray(np.minimum(0.0, hang.level_difference) - hang.lowest)


def _through(hang: Loaded, at: Floats, span: Floats) -> Floats:
    point = hang.at_plan(at[:, np.newaxis])[:, 0, 2]
    return np.asarray(hang.level_difference * at / span - point)


def _slope_from(hang: Loaded, _: Floats, span: Floats) -> Floats:
    return np.asarray(hang.level_difference / span - hang.tension[:, 2] / hang.tension[:, 0])


def _slope_to(hang: Loaded, _: Floats, span: Floats) -> Floats:
    return np.asarray(-hang.pull_to[:, 2] / hang.tension[:, 0] - hang.level_difference / span)


_FACTS: dict[str, Callable[[Loaded, Floats, Floats], Floats]] = {
    "sag": _sag, "sag_mid": _sag_mid, "lowest": _lowest, "through": _through, "slope_from": _slope_from,
    "slope_to": _slope_to,
}  # fmt: skip


def _log_end_pull(way: Way, bare: Bare, rows: Ints, log_pull: Floats) -> Floats:
    hang = _at_pull(way, bare, rows, log_pull)
    ends = np.maximum(np.linalg.norm(hang.pull_from, axis=1), np.linalg.norm(hang.pull_to, axis=1))
    return np.asarray(np.log(ends))


def _least(way: Way, bare: Bare, whole: Floats) -> tuple[Floats, Floats]:
    """Return ln H of the least end pull, and the logarithm of that: by ever finer grids, as it has one lowest place."""
    n = len(whole)
    grid = np.log(whole)[:, np.newaxis] - _GRID
    for _ in range(_ZOOMS):
        rows = np.repeat(np.arange(n), grid.shape[1])
        pulls = _log_end_pull(way, bare, rows, grid.reshape(-1)).reshape(grid.shape)
        best = np.argmin(np.where(np.isnan(pulls), np.inf, pulls), axis=1)
        at, step = grid[np.arange(n), best], np.abs(grid[:, 1] - grid[:, 0])
        found = pulls[np.arange(n), best]
        grid = at[:, np.newaxis] + step[:, np.newaxis] * np.linspace(-1.0, 1.0, 21)
    return at, found


def _of_end_pull(way: Way, bare: Bare, value: Floats, whole: Floats, deep: NDArray[np.bool_]) -> Floats:
    at, least = _least(way, bare, whole)
    sign = np.where(deep, -1.0, 1.0)
    target = np.log(value)

    def off(x: Floats, aim: Floats, way_up: Floats, row: Floats) -> Floats:
        # seen so that it rises: the shallow branch with ln H, the deep one with -ln H
        return _log_end_pull(way, bare, row.astype(np.intp), way_up * x) - aim

    start = np.where(target >= least, sign * at + 0.5, np.nan)
    found = secant(off, start, target, sign, np.arange(len(value), dtype=np.float64), bracket=(sign * at, np.inf))
    return sign * found
