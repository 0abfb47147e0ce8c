r"""One member over many supports that it slides on.

Over a smooth saddle the pull is the same on both sides, and along the member it changes with the elevation alone:
T + T^2/2EA - w z is the same everywhere. So the pull at the start settles those at all supports, and with them every
bay; it is found from the whole unstretched length, or given by a counterweight at the last support. Of the two members
that a bay can hold under a pull the shallow one is meant throughout: a deep bay pulls less the less it holds, and runs
on until it is shallow, or everything else is.

Over a rough saddle the pulls may differ, up to the ratio exp(mu theta), theta the angle the member is bent by (Euler,
"Remarques sur l'effet du frottement dans l'equilibre", 1762; Eytelwein 1808). Between slipping towards `to`
everywhere and slipping towards `from` everywhere lie all states in which it can rest: both are solved.
"""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import elastic_facts
from geom.hang.chunked import Floats, Mask, broadcast
from geom.hang.elastic import Stretched, gather
from geom.hang.roots import secant
from geom.hang.slipping import Slipping, guess_pull

_LEAST_MARGIN = 1e-9  # of the least pull, above which the search begins


@dataclass(frozen=True, eq=False)
class Line:
    """Supports and stock of r runs of n bays each.

    Attributes
    ----------
    spans : array_like, shape (r, n) or (n,)
        Plan distances from support to support, metres, above 0.
    level_differences : array_like, shape (r, n) or (n,)
        Elevations of each support over the one before, metres.
    weight, stiffness : array_like, shape (r, 1) or ()
        Newton per unstretched metre, above 0; modulus times area, newton, may be infinite.
    """

    spans: ArrayLike
    level_differences: ArrayLike
    weight: ArrayLike
    stiffness: ArrayLike


@dataclass(frozen=True, eq=False)
class Run:
    """Members over saddles, as arrays with one axis of runs; NaN where there is no such run.

    Attributes
    ----------
    bays : Stretched
        The bays, each field of shape (r, n).
    counterweight : ndarray, shape (r,)
        Weight that hangs plumb from the member behind the last support, newton; 0 where it ends there.
    """

    bays: Stretched
    counterweight: Floats

    @cached_property
    def length(self) -> Floats:
        """Whole unstretched length between the first and the last support, metres, (r,)."""
        return np.asarray(self.bays.length.sum(axis=-1))

    @cached_property
    def marks(self) -> Floats:
        """Unstretched distances along the member at the supports, metres, (r, n + 1)."""
        marks = np.zeros((*self.length.shape, self.bays.length.shape[-1] + 1))
        np.cumsum(self.bays.length, axis=-1, out=marks[..., 1:])
        return marks

    @cached_property
    def before(self) -> Floats:
        """Whole pull on the near side of every support but the first, newton, (r, n)."""
        return self.bays.pulls.at_to

    @cached_property
    def after(self) -> Floats:
        """Whole pull on the far side of every support but the last, newton, (r, n)."""
        return self.bays.pulls.at_from

    @cached_property
    def bends(self) -> Floats:
        """Angles the member is bent by over the supports between bays, radians, (r, n - 1).

        Negative where it would lift off: it is then no saddle that holds it there.
        """
        return self.bays.slope_to[..., :-1] + self.bays.slope_from[..., 1:]

    @cached_property
    def reactions(self) -> Floats:
        """Forces on the supports, along the run and downward, both legs of each, newton, (r, n + 1, 2)."""
        pulls = self.bays.pulls
        forces = np.zeros((*self.length.shape, self.marks.shape[-1], 2))
        forces[..., :-1, 0] += pulls.horizontal
        forces[..., 1:, 0] -= pulls.horizontal
        forces[..., :-1, 1] += pulls.vertical_from
        forces[..., 1:, 1] += pulls.vertical_to
        forces[..., -1, 1] += self.counterweight
        return forces


def run(line: Line, *, length: ArrayLike | None = None, counterweight: ArrayLike | None = None) -> Run:
    """Lay members over smooth saddles.

    Parameters
    ----------
    line : Line
        Supports and stock.
    length : array_like, shape (r,) or (), optional
        Whole unstretched length between the first and the last support, metres.
    counterweight : array_like, shape (r,) or (), optional
        Instead: weight on the end of the member, hanging plumb behind the last support, newton.

    Returns
    -------
    Run
        NaN where the pull would be less than the least that one of the bays can do with: it all runs into that one.

    Raises
    ------
    ValueError
        The shapes do not broadcast, or not just one of length and counterweight is given.
    """
    bays, target, weighed = _arrays(line, length, counterweight)
    span, rise, weight, stiffness = bays
    over_first = np.cumsum(rise, axis=1)
    higher = over_first - np.minimum(rise, 0.0)  # the upper support of every bay over the first support
    # T + T^2/2EA less w z, all along; no less than every bay needs at its upper end
    least = elastic_facts.least_end_pull(span, rise, weight, stiffness)
    needed = (_stored(least, stiffness) - weight * higher).max(axis=1)
    if weighed:
        start = _stored(target, stiffness[:, 0]) - weight[:, 0] * over_first[:, -1]
        start = np.where(start >= needed, start, np.nan)
    else:
        start = _start_for(bays, higher, needed, target)
    pull = _released(start[:, np.newaxis] + weight * higher, stiffness)
    hung = elastic_facts.from_end_pull(span, rise, np.maximum(pull, least), weight, stiffness)
    return _run(hung, target if weighed else np.zeros_like(target), np.asarray(np.isnan(start)))


def slipping(
    line: Line,
    friction: ArrayLike,
    *,
    toward_to: bool,
    length: ArrayLike | None = None,
    counterweight: ArrayLike | None = None,
) -> Run:
    """Lay members over rough saddles, about to slip the same way over all of them.

    Parameters
    ----------
    line, length, counterweight
        As in `run`.
    friction : array_like, shape (r,) or ()
        Coefficient mu.
    toward_to : bool
        About to slip towards the last support, so that the pulls grow that way; else towards the first.

    Returns
    -------
    Run

    Raises
    ------
    ValueError
        As `run`.
    """
    bays, target, weighed = _arrays(line, length, counterweight)
    (mu,) = broadcast(np.broadcast_to(np.asarray(friction, dtype=np.float64), target.shape))
    lams = Slipping(bays, mu if toward_to else -mu).solve(target, weighed=weighed)
    span, rise, weight, stiffness = bays
    hung = elastic_facts.from_pull(span, rise, 0.5 * weight * span / np.exp(lams), weight, stiffness)
    return _run(hung, target if weighed else np.zeros_like(target), np.asarray(np.isnan(lams).any(axis=1)))


def _arrays(
    line: Line, length: ArrayLike | None, counterweight: ArrayLike | None
) -> tuple[tuple[Floats, Floats, Floats, Floats], Floats, bool]:
    """Give span, level difference, weight and stiffness (r, n), what is given (r,), and whether it is a weight."""
    if (length is None) == (counterweight is None):
        raise ValueError("a run takes either a length or a counterweight")
    given = np.atleast_1d(np.asarray(counterweight if length is None else length, dtype=np.float64))
    bays = broadcast(line.spans, line.level_differences, line.weight, line.stiffness, given[:, np.newaxis])
    span, rise, weight, stiffness, _ = bays
    return (span, rise, weight, stiffness), np.broadcast_to(given, span.shape[:1]), length is None


def _run(hung: Stretched, counterweight: Floats, missing: Mask) -> Run:
    lost = missing | np.asarray(np.isnan(hung.u).any(axis=1))
    u = np.where(lost[:, np.newaxis], np.nan, hung.u)
    stock = hung.weight, hung.stiffness
    return Run(gather(hung.span, hung.level_difference, hung.length, hung.excess, stock, u), counterweight)


def _stored(pull: Floats, stiffness: Floats) -> Floats:
    return pull + pull * (0.5 * pull / stiffness)


def _released(stored: Floats, stiffness: Floats) -> Floats:
    """Give the T of T + T^2/2EA."""
    return 2.0 * stored / (1.0 + np.sqrt(1.0 + 2.0 * stored / stiffness))


def _start_for(bays: tuple[Floats, Floats, Floats, Floats], higher: Floats, needed: Floats, length: Floats) -> Floats:
    """Give T + T^2/2EA at the first support for a whole length, which falls as it grows.

    Searched in the logarithm of what it is over the least: there the length of the bay that is nearest to its least
    pull falls as the root.
    """
    span, _, weight, _ = bays
    scale = (weight * span).max(axis=1)

    def long(x: Floats, own: Floats) -> Floats:
        which = own.astype(np.intp)
        s, v, w, ea = (values[which] for values in bays)
        pull = _released((needed[which] + np.exp(x))[:, np.newaxis] + w * higher[which], ea)
        hung = elastic_facts.from_end_pull(s, v, pull, w, ea)
        return np.asarray(np.log(length[which] / hung.length.sum(axis=1)))

    rows = np.arange(len(span), dtype=np.float64)
    with np.errstate(all="ignore"):
        slackest = long(np.log(_LEAST_MARGIN * scale), rows)
        guess = np.log(guess_pull(bays, length)) + 0.0 * needed
        start = np.where(slackest < 0.0, np.fmax(guess, np.log(1e-3 * scale)), np.nan)
        return np.asarray(needed + np.exp(secant(long, start, rows, reach=3.0, slope=0.1)))
