r"""The polygon that rigid links hang in.

n equal straight links of pitch p, each weighing W at its middle, joined by hinges, lie at

    tan(theta_k) = V_k/H,   V_k = V0 + (k - 1/2) W,   k = 1 .. n,

H and V0 being the tension at the start: the moments of a link about its middle balance where the tension there, half
its weight added, points along it. A level chain has V0 = -n W/2, and light links with the weights at the joints hang
in the same shape. The two closing equations, sums of p cos and p sin, are the gradient of a convex function of H and
V0, which Newton's method minimises from the tension of the catenary of the same length and weight; from that the
polygon differs by the order of 1/n^2.
"""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import catenary
from geom.hang.chunked import Floats

_STEPS = 60
_SHORTER = 30
_LAST_STEP = 1e-9
_ROUNDING = 1e-15  # of the length
_FOOT_STEPS = 6


@dataclass(frozen=True, eq=False)
class Polygon:
    """Chains of rigid links, n of them, padded with NaN to the greatest count m of links.

    Attributes
    ----------
    span, level_difference : ndarray, shape (n,)
        Metres.
    pitch : ndarray, shape (n,)
        Length of a link between its hinges, metres.
    count : ndarray of int, shape (n,)
        Links.
    horizontal, down_from : ndarray, shape (n,)
        Horizontal pull and downward pull on the support `from`, newton.
    directions : ndarray, shape (n, m, 2)
        Cosine and sine of the links' angles over the horizontal.
    """

    span: Floats
    level_difference: Floats
    pitch: Floats
    count: Floats
    horizontal: Floats
    down_from: Floats
    directions: Floats

    @cached_property
    def joints(self) -> Floats:
        """Hinges from the support `from`, plan distance and elevation, metres, (n, m + 1, 2)."""
        joints = np.zeros((len(self.span), self.directions.shape[1] + 1, 2))
        np.cumsum(self.pitch[:, np.newaxis, np.newaxis] * self.directions, axis=1, out=joints[:, 1:])
        joints[np.isnan(self.horizontal)] = np.nan
        return joints

    @cached_property
    def sag(self) -> Floats:
        """Greatest vertical distance of a hinge under the chord, metres, (n,)."""
        chord = self.joints[:, :, 0] * (self.level_difference / self.span)[:, np.newaxis]
        return _greatest(chord - self.joints[:, :, 1])

    @cached_property
    def off_catenary(self) -> Floats:
        """Greatest distance of a hinge or the middle of a link from the catenary as long, metres, (n,)."""
        hang = catenary.from_length(self.span, self.level_difference, self.count * self.pitch)
        middles = 0.5 * (self.joints[:, 1:] + self.joints[:, :-1])
        places = np.concatenate([self.joints, middles], axis=1)
        with np.errstate(all="ignore"):
            x, y = places[..., 0], places[..., 1]
            vertex, a = hang.vertex_at[:, np.newaxis], hang.parameter[:, np.newaxis]
            foot = x
            for _ in range(_FOOT_STEPS):
                # the normal from the foot passes the point: Newton's step with the slope's own slope
                slope, off = np.sinh((foot - vertex) / a), hang.at_plan(foot).elevation - y
                foot = foot - (foot - x + off * slope) / (1.0 + slope**2 + off * np.cosh((foot - vertex) / a) / a)
            distance = np.hypot(foot - x, hang.at_plan(foot).elevation - y)
        return _greatest(distance)


def link(
    span: ArrayLike, level_difference: ArrayLike, pitch: ArrayLike, count: ArrayLike, weight: ArrayLike
) -> Polygon:
    """Hang chains of rigid links.

    Parameters
    ----------
    span, level_difference : array_like, shape (n,) or ()
        Plan distance between the supports, above 0, and elevation of `to` over `from`, metres.
    pitch : array_like, shape (n,) or ()
        Metres.
    count : array_like of int, shape (n,) or ()
        Links, at least 2.
    weight : array_like, shape (n,) or ()
        Of a link, newton, above 0.

    Returns
    -------
    Polygon
        NaN where the links do not reach, or reach just straight.

    Raises
    ------
    ValueError
        The shapes do not broadcast.
    """
    arrays = np.broadcast_arrays(
        *(np.atleast_1d(np.asarray(x, float)) for x in (span, level_difference, pitch, count, weight))
    )
    s, v, p, n, w = arrays
    hang = catenary.from_length(s, v, n * p)
    pulls = hang.pulls(w / p)
    start = np.stack([pulls.horizontal, -pulls.vertical_from], axis=1)
    start[(n < 2.0) | ~(w > 0.0) | ~np.isfinite(start).all(axis=1)] = np.nan
    lost = w[:, np.newaxis] * (np.arange(int(np.nanmax(n, initial=0.0))) + 0.5)
    lost[np.arange(lost.shape[1]) >= n[:, np.newaxis]] = np.nan
    with np.errstate(all="ignore"):
        tension = _solve(start, lost, np.stack([s, v], axis=1), p)
        directions = _directions(tension, lost)[0]
    return Polygon(s, v, p, n, tension[:, 0], -tension[:, 1], directions)


def _directions(tension: Floats, lost: Floats) -> tuple[Floats, Floats]:
    vertical = tension[:, 1, np.newaxis] + lost
    pull = np.hypot(tension[:, 0, np.newaxis], vertical)
    cosine = np.where(np.isnan(lost), np.nan, tension[:, 0, np.newaxis]) / pull
    return np.stack([cosine, vertical / pull], axis=2), pull


def _gap(tension: Floats, lost: Floats, across: Floats, pitch: Floats) -> Floats:
    reached = np.nansum(_directions(tension, lost)[0], axis=1) * pitch[:, np.newaxis]
    return np.asarray(reached - across)


def _solve(tension: Floats, lost: Floats, across: Floats, pitch: Floats) -> Floats:
    """Give H and V0, upward, (n, 2)."""
    result = np.full_like(tension, np.nan)
    left = np.flatnonzero(~np.isnan(tension).any(axis=1))
    tension, lost, across, pitch = tension[left], lost[left], across[left], pitch[left]
    total = pitch * np.count_nonzero(~np.isnan(lost), axis=1)
    for _ in range(_STEPS):
        if not left.size:
            break
        gap = _gap(tension, lost, across, pitch)
        step = _newton(tension, lost, gap, pitch)
        small = np.hypot(*step.T) <= _LAST_STEP * tension[:, 0]
        done = small | (np.hypot(*gap.T) <= _ROUNDING * total)
        result[left[done]] = (tension + step * small[:, np.newaxis])[done]
        going = ~done & np.isfinite(step).all(axis=1)
        left, lost, across, pitch, total = left[going], lost[going], across[going], pitch[going], total[going]
        tension = _along(tension[going], step[going], gap[going], (lost, across, pitch))
    return result


def _newton(tension: Floats, lost: Floats, gap: Floats, pitch: Floats) -> Floats:
    """Solve with the flexibility, the sum over the links of p/T (1 - t t'), t the link's direction."""
    directions, pull = _directions(tension, lost)
    give = pitch[:, np.newaxis] / pull
    cosine, sine = directions[..., 0], directions[..., 1]
    xx, xz, zz = (np.nansum(give * part, axis=1) for part in (sine * sine, -cosine * sine, cosine * cosine))
    determinant = xx * zz - xz * xz
    by_rule = np.stack([xz * gap[:, 1] - zz * gap[:, 0], xz * gap[:, 0] - xx * gap[:, 1]], axis=1)
    step: Floats = by_rule / determinant[:, np.newaxis]
    return step


def _along(tension: Floats, step: Floats, gap: Floats, chain: tuple[Floats, Floats, Floats]) -> Floats:
    """Take a step, halved while the convex function rises steeply at its end or H would not be a pull."""
    slope = np.einsum("ni,ni->n", step, gap)
    share = np.ones(len(step))
    for _ in range(_SHORTER):
        there = tension + share[:, np.newaxis] * step
        rising = np.einsum("ni,ni->n", step, _gap(there, *chain)) > -0.5 * slope
        far = rising | ~(there[:, 0] > 0.0)
        if not far.any():
            break
        share = np.where(far, 0.5 * share, share)
    return np.asarray(tension + share[:, np.newaxis] * step)


def _greatest(values: Floats) -> Floats:
    missing = np.isnan(values).all(axis=1)
    return np.where(missing, np.nan, np.max(np.where(np.isnan(values), -np.inf, values), axis=1))
