"""The hem of a curtain: its elevation at any distance along the rail, from points that it goes through."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.hang import catenary

Floats = NDArray[np.float64]
HemShape = Literal["straight", "smooth", "catenary"]

_FIRST_STEPS = 8  # of each stretch; halved until the line lies within what is asked
_MOST_STEPS = 4096


@dataclass(frozen=True, eq=False)
class Hem:
    """A line over distances along a rail, which the rail's corners do not bend.

    Parameters
    ----------
    points : ndarray, shape (m, 2)
        Distance along the rail from its start and elevation, m; at least two, distances rising.
    shape : "straight", "smooth" or "catenary"
        From point to point straight; smooth, nowhere over or under the two points it is between; or each stretch
        hanging as a catenary between its two points.
    scallop : float
        Sag of each stretch under the straight line between its points, m; of a catenary alone.

    Notes
    -----
    "smooth" is the monotone piecewise cubic of Fritsch and Butland ("A method for constructing local monotone piecewise
    cubic interpolants", 1984): level at points that are the highest or lowest of their neighbours, and never
    overshooting, as a natural spline does.
    """

    points: Floats
    shape: HemShape = "straight"
    scallop: float = 0.0

    def at(self, distance: Floats) -> Floats:
        """Return elevations (n,), m, at distances (n,) along the rail, m; past its ends that of the ends."""
        s, z = self.points.T
        x = np.clip(distance, s[0], s[-1])
        match self.shape:
            case "straight":
                return np.asarray(np.interp(x, s, z))
            case "smooth":
                from scipy.interpolate import PchipInterpolator  # noqa: PLC0415 - no other hem pays for it

                return np.asarray(PchipInterpolator(s, z)(x), dtype=np.float64)
            case "catenary":
                return self._hung(x)

    def _hung(self, x: Floats) -> Floats:
        s, z = self.points.T
        span, rise = np.diff(s), np.diff(z)
        excess = catenary.from_sag(span, rise, np.full(span.shape, self.scallop)).excess
        of = np.clip(np.searchsorted(s, x, side="right") - 1, 0, len(span) - 1)
        stretch = catenary.from_excess(span[of], rise[of], excess[of])
        return np.asarray(z[of] + stretch.at_plan((x - s[of])[:, None]).elevation[:, 0])

    def line(self, corners: Floats, within: float) -> Floats:
        """Return distances along the rail (k,), m, between which the straight line is within a distance of the hem.

        Parameters
        ----------
        corners : ndarray, shape (c,)
            Distances along the rail that are to be among them where the hem is, m, such as those of its corners.
        within : float
            Greatest vertical distance of a straight line from the hem, m; positive.
        """
        s = self.points[:, 0]
        ends = np.unique(np.concatenate([s, corners[(corners > s[0]) & (corners < s[-1])]]))
        steps = 1 if self.shape == "straight" else _FIRST_STEPS
        while True:
            share = np.arange(steps) / steps
            line = np.append((ends[:-1, None] + share * np.diff(ends)[:, None]).ravel(), ends[-1])
            between = 0.5 * (line[1:] + line[:-1])
            off = np.abs(self.at(between) - np.interp(between, line, self.at(line))).max()
            if off <= within or steps >= _MOST_STEPS:
                return line
            steps *= 2
