r"""The tension a member starts with: one unknown vector, whatever hangs on the member.

The ends are D apart where the sum of r over the sections (`geom.hang.sections`) is D. That sum is the gradient of a
convex function of the tension, the complementary energy less F.D: Newton's method with a search along each step goes
down to its one minimum from anywhere. Near taut the minimum lies in a narrow curved valley; the start, the exact
answer for a shallow member, is in it.

Over 20,000 random members, from taut to four times as long as the chord, with up to five loads of a hundredth to ten
times their weight, stretching or not, blown or not, the function is evaluated 4.3 times on the mean without loads
and 5.0 to 5.6 times with them, at most 7 and 38 times; light pieces that are slack beside heavy loads take more.
"""

from dataclasses import dataclass

import numpy as np

from geom.hang.chunked import Floats, Mask
from geom.hang.sections import Index, Law, Sections, reach, reach_and_flexibility
from geom.hang.stretching import half_angle_of

# A section that is slack beside heavy loads, and light, pulls next to nothing; each step halves what is too much of it.
_STEPS = 120
_SHORTER = 12  # times a step is shortened
# What Newton leaves after a step of this part of the least pull of any section is the square of it.
_LAST_STEP = 1e-9
_ROUNDING = 4e-15  # of the tension, which all sections share
# A closure as good as the coordinates: the sum of a few roundings of the length.
_CLOSED = 4e-16
_FIT = 1e-6  # of the length: a weightless piece that is slack has no tension to find, and the steps end anywhere
_ENOUGH = 0.5  # of the slope along the step, at its end
_FAINT = 1e-9  # of the load, across the chord: under it nothing sags, and the start is as good with it


@dataclass
class _State:
    """Members still to be solved: their law, ends, tension, gap and flexibility."""

    left: Index
    part: Law
    across: Floats
    tension: Floats
    gap: Floats
    flexibility: Floats

    def keep(self, going: Mask) -> None:
        self.left, self.part = self.left[going], Law(*(values[going] for values in self.part))
        self.across, self.tension = self.across[going], self.tension[going]
        self.gap, self.flexibility = self.gap[going], self.flexibility[going]


def solve(part: Law, across: Floats, start: Floats) -> Floats:
    """Give the tensions at the start of the members.

    Parameters
    ----------
    part : Law
        Sections of n members.
    across : ndarray, shape (n, 3)
        From the support `from` to the support `to`, metres.
    start : ndarray, shape (n, 3)
        First guess, newton; NaN where there is nothing to solve.

    Returns
    -------
    ndarray, shape (n, 3)
        Newton; NaN where no equilibrium was found.
    """
    result = np.full_like(across, np.nan)
    left = np.flatnonzero(~np.isnan(start).any(axis=1))
    state = _State(left, Law(*(values[left] for values in part)), across[left], start[left], *_EMPTY)
    state.gap, state.flexibility = _evaluate(state, state.tension)
    total = state.part.length.sum(axis=1)
    for _ in range(_STEPS):
        if not state.left.size:
            break
        step = -_solve_symmetric(state.flexibility, state.gap)
        small = _size(step) <= np.maximum(_LAST_STEP * _least_pull(state), _ROUNDING * _size(state.tension))
        closed = _size(state.gap) <= _CLOSED * total
        state.tension = np.where(small[:, np.newaxis], state.tension + step, state.tension)
        done = small | closed
        good = done & (_size(state.gap) <= _FIT * total)
        result[state.left[good]] = state.tension[good]
        going = ~done & np.isfinite(step).all(axis=1)
        state.keep(going)
        total, step = total[going], step[going]
        _advance(state, step)
    return result


_EMPTY = np.zeros((0, 3)), np.zeros((0, 3, 3))


def first_guess(sections: Sections, part: Law, across: Floats, excess: Floats) -> Floats:
    """Give the tension of a shallow member: a string along its chord, deflected as a simple beam is loaded.

    Beside the chord the tension is Q(s), the loads' beam shear; along it T, which sees int Q^2 ds alone. So it is
    that of a level catenary of the chord's span and of the load, steady across it, with the same int Q^2.
    """
    length, give = part.length.sum(axis=1), part.give.sum(axis=1)
    chord = _size(across)
    along = across / chord[:, np.newaxis]
    mean = np.einsum("nk,nki->ni", part.length, part.lost) / length[:, np.newaxis]
    shear = mean[:, np.newaxis] - part.lost
    half = 0.5 * sections.load * part.length[..., np.newaxis]
    shear, half = (values - np.einsum("nki,ni,nj->nkj", values, along, along) for values in (shear, half))
    # over a section Q goes from shear + half to shear - half
    square = np.einsum("nk,nki->n", part.length, shear * shear + half * half / 3.0)
    whole = _size((sections.load * part.length[..., np.newaxis] + sections.point).sum(axis=1))
    steady = np.sqrt(12.0 * square / chord**3) + _FAINT * whole / length + _TINY
    stretch = steady * give
    u = half_angle_of(chord, np.zeros_like(chord), length, excess, stretch)
    pull = steady * chord / (2.0 * u + stretch)
    guess: Floats = mean + pull[:, np.newaxis] * along
    return guess


_TINY = 1e-300


def _least_pull(state: _State) -> Floats:
    """Give the least, over the sections, of the pull at mid-length and half the weight."""
    part = state.part
    pull = _size(state.tension[:, np.newaxis] - part.lost) + 0.5 * part.weight * part.length
    least: Floats = np.where(part.length > 0.0, pull, np.inf).min(axis=1)
    return least


def _evaluate(state: _State, tension: Floats) -> tuple[Floats, Floats]:
    ends, flexibility = reach_and_flexibility(state.part, tension[:, np.newaxis] - state.part.lost)
    return ends - state.across, flexibility


def _advance(state: _State, step: Floats) -> None:
    """Go along a step as far as the function falls, or nearly."""
    before = np.einsum("ni,ni->n", step, state.gap)  # the slope along the step: negative, and rising
    tension = state.tension + step
    gap, flexibility = _evaluate(state, tension)
    slope = np.einsum("ni,ni->n", step, gap)
    far, part = np.flatnonzero(~(slope <= -_ENOUGH * before)), np.ones(len(step))
    for _ in range(_SHORTER):
        if not far.size:
            break
        share = np.clip(-before[far] / (slope[far] - before[far]), 0.1, 0.7)
        part[far] *= np.where(np.isnan(share), 0.1, share)
        tension[far] = state.tension[far] + part[far, np.newaxis] * step[far]
        part_law = Law(*(values[far] for values in state.part))
        gap[far] = reach(part_law, tension[far][:, np.newaxis] - part_law.lost).sum(axis=1) - state.across[far]
        slope[far] = np.einsum("ni,ni->n", step[far], gap[far])
        far = far[~(slope[far] <= -_ENOUGH * before[far])]
    shortened = np.flatnonzero(part < 1.0)
    if shortened.size:
        part_law = Law(*(values[shortened] for values in state.part))
        flexibility[shortened] = reach_and_flexibility(part_law, tension[shortened][:, np.newaxis] - part_law.lost)[1]
    state.tension, state.gap, state.flexibility = tension, gap, flexibility


def _solve_symmetric(matrix: Floats, right: Floats) -> Floats:
    """Solve positive definite systems of three by L D L', which keeps what stiff stock leaves of them."""
    a, b, c = matrix[:, 0, 0], matrix[:, 0, 1], matrix[:, 0, 2]
    d, e, f = matrix[:, 1, 1], matrix[:, 1, 2], matrix[:, 2, 2]
    l1, l2 = b / a, c / a
    d2 = d - l1 * b
    m = (e - l1 * c) / d2
    d3 = f - l2 * c - m * (e - l1 * c)
    y1 = right[:, 0]
    y2 = right[:, 1] - l1 * y1
    y3 = right[:, 2] - l2 * y1 - m * y2
    x3 = y3 / d3
    x2 = y2 / d2 - m * x3
    x1 = y1 / a - l1 * x2 - l2 * x3
    return np.stack([x1, x2, x3], axis=1)


def _size(vectors: Floats) -> Floats:
    size: Floats = np.sqrt(np.einsum("...i,...i->...", vectors, vectors))
    return size
