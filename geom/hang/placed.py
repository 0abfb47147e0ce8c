r"""Members with a load spread over the plan, or with loads that keep their place on plan, all in one plane.

The horizontal pull H is the same all along. Followed from `from` with a given H and slope (`geom.hang.walk`), what a
member lacks at the other support's plan distance, elevation and unstretched length, are two equations for the two
unknowns ln H and asinh(slope). For a shallow member the first is linear in the slope and the second in 1/H^2, which
is why the last section ends on plan and not at its arc: Newton's method converges from the simple beam's answer.
"""

import numpy as np

from geom.hang.chunked import Floats
from geom.hang.walk import Walked, Way, walk

_STEPS = 30
_SHORTER = 8
_LAST_STEP = 1e-9
_LONGEST = 1.0  # step of either unknown
_CLOSED = 4e-15  # of the length


def solve(way: Way, rise: Floats, length: Floats, start: Floats) -> tuple[Floats, Floats]:
    """Give the tensions at `from` and the unstretched arcs of all section ends.

    Parameters
    ----------
    way : Way
        Sections of n members.
    rise, length : ndarray, shape (n,)
        Elevation of `to` over `from` and whole unstretched length, metres.
    start : ndarray, shape (n, 2)
        First guess of the tension at `from`, along the span and upward, newton.

    Returns
    -------
    tuple of ndarray
        Tensions, shape (n, 2), and arcs, (n, K); NaN where nothing was found.
    """
    found, arcs = np.full_like(start, np.nan), np.full_like(way.end, np.nan)
    left = np.flatnonzero((start[:, 0] > 0.0) & np.isfinite(start).all(axis=1) & ~np.isnan(length))
    x = np.stack([np.log(start[:, 0]), np.arcsinh(start[:, 1] / start[:, 0])], axis=1)[left]
    way, rise, length = way.of(left), rise[left], length[left]
    walked = walk(way, x)
    for _ in range(_STEPS):
        if not left.size:
            break
        gap = _gap(walked, rise, length)
        step = _newton_step(walked, gap)
        done = (np.abs(step).max(axis=1) <= _LAST_STEP) | (np.abs(gap).max(axis=1) <= _CLOSED * length)
        last = np.flatnonzero(done)
        x[last] += step[last]
        found[left[last]] = _tension(x[last])
        arcs[left[last]] = walk(way.of(last), x[last]).arc
        going = np.flatnonzero(~done & np.isfinite(step).all(axis=1))
        left, way, rise, length, x = left[going], way.of(going), rise[going], length[going], x[going]
        x, walked = _advance(way, x, step[going], Walked(*(values[going] for values in walked)), (rise, length))
    return found, arcs


def _tension(x: Floats) -> Floats:
    h = np.exp(x[:, 0])
    return np.stack([h, h * np.sinh(x[:, 1])], axis=1)


def _gap(walked: Walked, rise: Floats, length: Floats) -> Floats:
    return np.stack([walked.rise[:, -1] - rise, walked.arc[:, -1] - length], axis=1)


def _newton_step(walked: Walked, gap: Floats) -> Floats:
    (a, b), (c, d) = walked.slope_of_rise.T, walked.slope_of_arc.T
    determinant = a * d - b * c
    by_rule = np.stack([b * gap[:, 1] - d * gap[:, 0], c * gap[:, 0] - a * gap[:, 1]], axis=1)
    step: Floats = by_rule / determinant[:, np.newaxis]
    return step


def _advance(way: Way, x: Floats, step: Floats, walked: Walked, target: tuple[Floats, Floats]) -> tuple[Floats, Walked]:
    """Take a step, shorter where the next by the same derivatives would be longer.

    That test has no need to weigh metres of rise against metres of length (P. Deuflhard, "Newton Methods for Nonlinear
    Problems", Springer 2004, sect. 2.1: natural monotonicity).
    """
    first = np.abs(step).max(axis=1)
    step = step * np.minimum(1.0, _LONGEST / first)[:, np.newaxis]
    there = x + step
    after = walk(way, there)
    bad = np.flatnonzero(~(_next(walked, after, *target) < first))
    for _ in range(_SHORTER):
        if not bad.size:
            break
        step[bad] *= 0.5
        there[bad] = x[bad] + step[bad]
        again = walk(way.of(bad), there[bad])
        for old, new in zip(after, again, strict=True):
            old[bad] = new
        before = Walked(*(values[bad] for values in walked))
        bad = bad[~(_next(before, again, target[0][bad], target[1][bad]) < first[bad])]
    return there, after


def _next(before: Walked, after: Walked, rise: Floats, length: Floats) -> Floats:
    longest: Floats = np.abs(_newton_step(before, _gap(after, rise, length))).max(axis=1)
    return longest
