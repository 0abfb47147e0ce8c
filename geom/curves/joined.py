"""Curves one after another."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, fixed

# Ends computed by two formulas agree to rounding; a gap over this share of the whole length is a mistake.
_GAP = 1e-9


@dataclass(frozen=True, eq=False)
class Joined(Curve):
    """Curves, each beginning where the one before it ends; corners between them are allowed.

    Raises
    ------
    ValueError
        If there are none, or one does not begin where the last one ended.
    """

    curves: Sequence[Curve]  # in turn; kept as a tuple

    def __post_init__(self) -> None:
        self._set(curves=tuple(self.curves))
        if not self.curves:
            raise ValueError("there must be at least one curve to join")
        for number, (one, other) in enumerate(zip(self.curves, self.curves[1:], strict=False), start=1):
            gap = float(np.linalg.norm(other.start - one.end))
            if gap > _GAP * self.length:
                raise ValueError(f"curve {number} ends {gap:.3g} m from where the next one starts")

    @property
    def start(self) -> Array:
        """First point, (3,) m."""
        return self.curves[0].start

    @property
    def end(self) -> Array:
        """Last point, (3,) m."""
        return self.start if self.closed else self.curves[-1].end

    @property
    def closed(self) -> bool:
        """Whether the last curve ends where the first starts."""
        gap = np.linalg.norm(self.curves[-1].end - self.curves[0].start)
        return bool(gap <= _GAP * self.length)

    @cached_property
    def length(self) -> float:
        """Sum of the curves' lengths, m."""
        return float(self._reach[-1])

    def stations(self, within: float) -> Array:
        """Arc lengths of the corners of all curves in turn, their joints once each."""
        starts = zip(self._reach, self.curves, strict=False)
        parts = [base + curve.stations(within)[1:] for base, curve in starts]
        stations: Array = np.concatenate([np.zeros(1), *parts])
        return np.minimum(stations, self.length)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m; at a joint those of the curve that follows."""
        s = self._stationed(s)
        which = np.clip(np.searchsorted(self._reach, s, side="right") - 1, 0, len(self.curves) - 1)
        points, tangents = np.empty((len(s), 3)), np.empty((len(s), 3))
        for part in np.unique(which):
            here = which == part
            past = np.clip(s[here] - self._reach[part], 0.0, self.curves[part].length)
            points[here], tangents[here] = self.curves[part].at(past)
        return Along(points, tangents)

    def points(self, within: float) -> Array:
        """Polyline through the points of all curves in turn, their joints once each."""
        parts = [curve.points(within) for curve in self.curves]
        points = np.concatenate([parts[0], *(part[1:] for part in parts[1:])])
        points[-1] = self.end
        return points

    def moved(self, offset: Array) -> Self:
        """Return the curves moved by a vector, (3,) m."""
        return replace(self, curves=tuple(curve.moved(offset) for curve in self.curves))

    def scaled(self, factor: float) -> Self:
        """Return the curves scaled about the origin."""
        return replace(self, curves=tuple(curve.scaled(factor) for curve in self.curves))

    @cached_property
    def _reach(self) -> Array:
        """Arc length at each joint and both ends, (n + 1,) m."""
        lengths = [curve.length for curve in self.curves]
        return fixed(np.concatenate([[0.0], np.cumsum(lengths)]), None, name="reach")
