"""Least height of loaded members and their hangers over ground."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from geom.hang.clearance import Grounds
from geom.hang.loaded import Loaded
from geom.hang.sections import Sections

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]


def least_over_loaded(
    hang: Loaded, rows: Ints, hanger: Floats, ground: Grounds, *, moved: float = 0.0
) -> tuple[Floats, Floats]:
    """Return the least height over the ground and its plan distance from `from`, of loaded members, both (m,) m.

    Parameters
    ----------
    hang : Loaded
        m members.
    rows : ndarray of int, shape (m,)
        Their numbers in `ground`.
    hanger : ndarray, shape (m, l)
        How far each load reaches under the member, m; NaN where there is none.
    ground : Grounds
        Ground under all members.
    moved : float
        How far `from` has come towards `to` since the ground was measured from it, m.

    Notes
    -----
    All loads being downward the whole member is convex, and over one straight stretch of ground the gap is least where
    it stands farthest under a line of the ground's slope, or as near to there as the stretch goes.
    """
    number = np.full(len(ground.base), -1)
    number[rows] = np.arange(len(rows))
    chosen = np.flatnonzero(number[ground.of] >= 0)
    of = number[ground.of[chosen]]
    gap, place = np.full(len(rows), np.nan), np.full(len(rows), np.nan)
    if not chosen.size:
        return gap, place
    near, far = ground.near[chosen] - [moved, 0.0], ground.far[chosen] - [moved, 0.0]
    slope = (far[:, 1] - near[:, 1]) / (far[:, 0] - near[:, 0])
    low, high = np.maximum(near[:, 0], 0.0), np.minimum(far[:, 0], hang.span[of])
    member = taken(hang, of)
    x = np.clip(replace(member, level_difference=slope * member.span).sag_point[:, 0], low, np.maximum(low, high))
    bare = member.at_plan(x[:, np.newaxis])[:, :, 2]
    at = np.concatenate([x[:, np.newaxis], member.load_places[:, :, 0]], axis=1)
    under = np.concatenate([bare, member.load_places[:, :, 2] - hanger[of]], axis=1)
    gaps = under - (near[:, 1, np.newaxis] + slope[:, np.newaxis] * (at - near[:, 0, np.newaxis]))
    on_it = (at >= low[:, np.newaxis]) & (at <= high[:, np.newaxis])
    gaps = np.where(on_it, gaps, np.inf)
    for stretch, best in enumerate(np.argmin(np.where(np.isnan(gaps), np.inf, gaps), axis=1).tolist()):
        found, one = float(gaps[stretch, best]), int(of[stretch])
        if np.isfinite(found) and not gap[one] <= found:
            gap[one], place[one] = found, at[stretch, best] + moved
    return gap, place


def taken(hang: Loaded, of: Ints) -> Loaded:
    """Return some of the members, in the order of their numbers."""
    own = hang.sections
    sections = Sections(own.length[of], own.stiffness[of], own.load[of], own.point[of])
    return Loaded(
        hang.span[of], hang.level_difference[of], sections, hang.tension[of], hang.spread[of], hang.node_of_load[of]
    )
