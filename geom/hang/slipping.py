"""Runs over rough saddles, about to slip the same way over all of them: bay after bay from the first one's pull."""

import numpy as np

from geom.hang import elastic_forms, given_pull
from geom.hang.chunked import Floats
from geom.hang.formulas import chord
from geom.hang.roots import secant
from geom.hang.sections import Index


def guess_pull(bays: tuple[Floats, Floats, Floats, Floats], length: Floats) -> Floats:
    """Give roughly the pull of runs of given lengths: of level parabolas as long together, or of straight members."""
    span, rise, weight, stiffness = bays
    straight = chord(span, rise).sum(axis=1)
    excess = length - straight
    sagging = np.sqrt((weight * weight * span**3).sum(axis=1) / (24.0 * np.maximum(excess, 1e-9 * straight)))
    taut = stiffness[:, 0] * np.maximum(-excess, 0.0) / length
    return np.asarray(np.where(np.isfinite(taut), np.maximum(sagging * (excess > 0.0), taut), sagging))


class Slipping:
    """Bays solved one after the other, each by ln lam = ln(w S/2H), from the first one's."""

    def __init__(self, bays: tuple[Floats, Floats, Floats, Floats], mu: Floats) -> None:
        self.span, self.rise, self.weight, stiffness = bays
        self.soft, self.mu, self.bays = self.weight / stiffness, mu, bays
        with np.errstate(all="ignore"):
            flat = (values.reshape(-1) for values in (self.span, self.rise, self.soft))
            self.least = given_pull.log_at_least(*flat).reshape(self.span.shape)

    def solve(self, target: Floats, *, weighed: bool) -> Floats:
        """Give ln lam of all bays, (r, n)."""
        rows = np.arange(len(self.span), dtype=np.float64)

        def off(first: Floats, own: Floats) -> Floats:
            which = own.astype(np.intp)
            lams = self._follow(first, which)
            if not weighed:
                return np.asarray(np.log(self._lengths(lams, which).sum(axis=1) / target[which]))
            pull, slope = self._end(lams[:, -1], which, -1, last=True)
            return np.asarray(np.log(target[which]) - self.mu[which] * (slope + 0.5 * np.pi) - pull)

        pull = target if weighed else guess_pull(self.bays, target)
        with np.errstate(all="ignore"):
            guess = np.log(0.5 * self.weight[:, 0] * self.span[:, 0] / pull)
            first = secant(off, np.minimum(guess, self.least[:, 0] - 0.1), rows, bracket=(-np.inf, self.least[:, 0]))
            return self._follow(first, np.arange(len(rows)))

    def _follow(self, first: Floats, which: Index) -> Floats:
        lams = np.empty((len(first), self.span.shape[1]))
        lams[:, 0] = first
        for bay in range(1, lams.shape[1]):
            lams[:, bay] = self._next(lams[:, bay - 1], which, bay)
        return lams

    def _next(self, before: Floats, which: Index, bay: int) -> Floats:
        """Give ln lam of the bay whose pull is exp(mu theta) times that of the one before."""
        pull, slope = self._end(before, which, bay - 1, last=True)

        def off(x: Floats, pull: Floats, slope: Floats, own: Floats) -> Floats:
            there = own.astype(np.intp)
            own_pull, own_slope = self._end(x, there, bay, last=False)
            return pull + self.mu[there] * np.maximum(slope + own_slope, 0.0) - own_pull

        least = self.least[which, bay]
        guess = np.log(0.5 * self.weight[which, bay] * self.span[which, bay]) - pull
        start = np.minimum(guess, least - 1e-3)
        return secant(off, start, pull, slope, which.astype(np.float64), bracket=(-np.inf, least))

    def _end(self, lams: Floats, which: Index, bay: int, *, last: bool) -> tuple[Floats, Floats]:
        """Give ln T and the angle under the horizontal at one end of a bay."""
        span, rise, soft = (values[which, bay] for values in (self.span, self.rise, self.soft))
        shape = given_pull.shape_at(lams, span, rise, soft)
        a, downs = elastic_forms.parameter(span, shape[2], soft, shape[5]), elastic_forms.downs(*shape)
        down = downs[1] if last else downs[0]
        return np.log(self.weight[which, bay] * chord(a, down)), np.arctan2(down, a)

    def _lengths(self, lams: Floats, which: Index) -> Floats:
        flat = (values[which].reshape(-1) for values in (self.span, self.rise, self.soft))
        return given_pull.shape_at(lams.reshape(-1), *flat)[2].reshape(lams.shape)
