"""Least height of hanging curves over ground given as profiles, in closed form, all members of a design at once."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.stretched import Stretched

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Grounds:
    """Straight stretches of ground under n members, K in all, those of one member together.

    of : (K,) the member's number, rising
    near, far : (K, 2) plan distance from the member's `from` end and elevation over it, m
    base : (n,) elevation of `from`, m
    """

    of: NDArray[np.intp]
    near: Floats
    far: Floats
    base: Floats


def grounds(profiles: Sequence[Floats | None], base: Floats) -> Grounds:
    """Return the stretches of all members' ground profiles, (m, 2) of plan distance and elevation; None: no ground."""
    given = [(number, profile) for number, profile in enumerate(profiles) if profile is not None]
    of = np.repeat([number for number, _ in given], [len(profile) - 1 for _, profile in given]).astype(np.intp)
    near = np.concatenate([np.empty((0, 2)), *(profile[:-1] for _, profile in given)])
    far = np.concatenate([np.empty((0, 2)), *(profile[1:] for _, profile in given)])
    lift = np.stack([np.zeros(len(of)), base[of]], axis=1)
    return Grounds(of, near - lift, far - lift, base)


def least_over(hang: Stretched, ground: Grounds, *, moved: float = 0.0) -> tuple[Floats, Floats]:
    """Return the least height over the ground and its plan distance from `from`, both (n,) m; NaN without ground.

    Parameters
    ----------
    hang : Stretched
        Solved members, of shape (n,).
    ground : Grounds
        Ground under them.
    moved : float
        How far `from` has come towards `to` since the ground was measured from it, m.

    Notes
    -----
    Over one straight stretch of ground the gap between it and the curve is convex, so it is least where the curve runs
    parallel to the ground, V/H its slope, or at an end of the stretch.
    """
    gap, place = np.full(hang.span.shape, np.nan), np.full(hang.span.shape, np.nan)
    if not ground.of.size:
        return gap, place
    of, member = ground.of, taken(hang, ground.of)
    first, last = ground.near[:, 0] - moved, ground.far[:, 0] - moved
    slope = (ground.far[:, 1] - ground.near[:, 1]) / (last - first)
    low, high = np.maximum(first, 0.0), np.minimum(last, member.span)
    at = np.stack([_parallel(member, slope), low, high], axis=1)
    at = np.clip(at, low[:, np.newaxis], np.maximum(low, high)[:, np.newaxis])
    gaps = elevation(member, at) - (ground.near[:, 1, np.newaxis] + slope[:, np.newaxis] * (at - first[:, np.newaxis]))
    gaps[high < low] = np.nan
    order = np.lexsort((gaps.ravel(), np.repeat(of, 3)))
    numbers, firsts = np.unique(np.repeat(of, 3)[order], return_index=True)
    chosen = order[firsts]
    gap[numbers] = gaps.ravel()[chosen]
    place[numbers] = np.where(np.isnan(gap[numbers]), np.nan, at.ravel()[chosen] + moved)
    return gap, place


def _parallel(member: Stretched, slope: Floats) -> Floats:
    """Plan distance to where members run at a slope: V = H slope."""
    arc = np.clip(member.parameter * slope + member.pulls.vertical_from / member.weight, 0.0, member.length)
    return member.at_arc(arc[:, np.newaxis]).plan[:, 0]


def elevation(member: Stretched, at: Floats) -> Floats:
    """Return the elevations over `from` at plan distances (n, k), m; of strands on a plumb line the lowest point's."""
    rise = member.at_arc(member.arc_at(at)).elevation
    return np.where((member.span > 0.0)[:, np.newaxis], rise, member.lowest[:, np.newaxis])


def taken(hang: Stretched, of: NDArray[np.intp]) -> Stretched:
    """Return some of the members, in the order of their numbers."""
    return Stretched(
        hang.span[of], hang.level_difference[of], hang.length[of], hang.excess[of], hang.weight[of],
        hang.stiffness[of], hang.u[of],
    )  # fmt: skip


def stretch(profile: Floats, start: float, end: float) -> Floats:
    """Return the part of a ground profile between two plan distances, counted from `start`; (k, 2), k may be 0."""
    low, high = max(start, float(profile[0, 0])), min(end, float(profile[-1, 0]))
    if high <= low:
        return np.empty((0, 2))
    inner = profile[(profile[:, 0] > low) & (profile[:, 0] < high)]
    ends = np.interp([low, high], profile[:, 0], profile[:, 1])
    whole = np.vstack([[low, ends[0]], inner, [high, ends[1]]])
    return np.asarray(whole - np.array([start, 0.0]), dtype=np.float64)
