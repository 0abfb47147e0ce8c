"""Straight cuts through a ring, and the bodies between two cuts: what blocks, mortar joints and weights are made of.

A cut stands normal to the axis and runs from the intrados (or, near a level foot, from the foot's plane) to the
extrados. A foot is a cut too. A body lies between two cuts; its edge, anticlockwise, is: the chain of its four inner
corners (from the start cut's lower end, along the intrados, to the end cut's lower end), the end cut, the extrados
back, the start cut.
"""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from geom.arch.parallel import Parallel, arc_moments, straight_moments
from geom.arch.refusal import NoArch
from geom.arch.ring import Ring

Floats = NDArray[np.float64]
Ints = NDArray[np.int8]
Bools = NDArray[np.bool_]

FROM, TO = -1, 1  # the foot that a cut runs out on; 0 where it reaches the intrados
_STEPS = 50  # of Newton, which needs 3 to 5 where a joint is thin against the radius


@dataclass(frozen=True)
class Cuts:
    """Cuts in order from the ``from`` foot.

    Attributes
    ----------
    bottom, top : ndarray, shape (n, 2)
        Lower end (on intrados or foot) and end on the extrados, m.
    inner, outer : ndarray, shape (n,)
        Parameters where the cut meets intrados and extrados; `inner` is the end of the intrados where it misses it.
    slope : ndarray, shape (n,)
        Slope of the axis there, radians, falling from plus to minus; a level foot is plus or minus a right angle.
    runs_out : ndarray of int8, shape (n,)
        -1 or 1 where the cut ends on the foot at ``from`` or ``to``.
    is_foot : ndarray of bool, shape (n,)
        Whether the cut is a foot.
    """

    bottom: Floats
    top: Floats
    inner: Floats
    outer: Floats
    slope: Floats
    runs_out: Ints
    is_foot: Bools

    def __len__(self) -> int:
        return len(self.slope)

    @property
    def length(self) -> Floats:
        """Lengths of the cuts, m."""
        return np.asarray(np.hypot(*(self.top - self.bottom).T))

    @property
    def along(self) -> Floats:
        """Unit vectors (n, 2) square to the cuts, toward the ``to`` side, as the thrust goes through them."""
        dx, dz = ((self.top - self.bottom) / self.length[:, None]).T
        return np.stack([dz, -dx], axis=-1)

    def __getitem__(self, rows: slice | NDArray[np.bool_]) -> Cuts:
        return Cuts(*(getattr(self, column.name)[rows] for column in fields(self)))


def feet(ring: Ring) -> tuple[Cuts, Cuts]:
    """Return the two feet of a ring, each as one cut, their lower ends on the intrados."""
    bottom, top = ring.feet("intrados"), ring.feet("extrados")
    inner, outer = np.array(ring.ends["intrados"]), np.array(ring.ends["extrados"])
    if ring.profile.foot == "level":
        slope = np.array([0.5, -0.5]) * np.pi
    else:
        slope = ring.shape.slope(np.array(ring.ends["axis"]))
    both = Cuts(bottom, top, inner, outer, slope, np.zeros(2, dtype=np.int8), np.ones(2, dtype=np.bool_))
    return both[:1], both[1:]


def cut(ring: Ring, q: Floats, *, shift: float = 0.0) -> Cuts:
    """Return the cuts normal to the axis at parameters `q` (n,), each moved bodily `shift` m along the axis' tangent.

    Raises
    ------
    SolveError
        If a moved cut misses a line of the ring.
    """
    base, along, normal = ring.axis.point(q), ring.axis.tangent(q), ring.shape.normal(q)
    inner, outer = (_meet(line, q, base, along, shift) for line in (ring.intrados, ring.extrados))
    bottom, top = ring.intrados.point(inner), ring.extrados.point(outer)
    runs_out = np.zeros(len(q), dtype=np.int8)
    if ring.profile.foot == "level":
        # Heights are compared through parameters: the intrados ends exactly on the foot's plane.
        runs_out[inner < ring.ends["intrados"][0]] = FROM
        runs_out[inner > ring.ends["intrados"][1]] = TO
        plane = np.where(runs_out < 0, *ring.feet("intrados")[:, 1])
        reach = (plane - base[:, 1] - shift * along[:, 1]) / normal[:, 1]
        on_plane = base + shift * along + reach[:, None] * normal
        bottom = np.where(runs_out[:, None] != 0, on_plane, bottom)
        inner = np.clip(inner, *ring.ends["intrados"])
    return Cuts(bottom, top, inner, outer, ring.shape.slope(q), runs_out, np.zeros(len(q), dtype=np.bool_))


def joined(*parts: Cuts) -> Cuts:
    """Return cuts one after another."""
    return Cuts(*(np.concatenate([getattr(part, column.name) for part in parts]) for column in fields(Cuts)))


def _meet(line: Parallel, q: Floats, base: Floats, along: Floats, shift: float) -> Floats:
    """Return where a line of the ring crosses the cuts: the root of (P(r) - base) . along = shift, by Newton."""
    found = np.array(q, dtype=np.float64)
    if shift == 0.0:
        return found  # normals of one parallel are normals of all
    for _ in range(_STEPS):
        short = shift - np.sum((line.point(found) - base) * along, axis=-1)
        step = short / np.sum(line.derivative(found) * along, axis=-1)
        found += step
        if np.all(np.abs(step) <= 1e-14 * (1.0 + np.abs(found))):  # some ten roundings: short is a small difference
            return found
    raise NoArch("{} is wider than the ring lets a joint be; give less", 2.0 * abs(shift), key="joint")


@dataclass(frozen=True)
class Bodies:
    """Bodies of a ring between cuts, row by row: see the module's text for the order of the edge.

    Attributes
    ----------
    chain : ndarray, shape (n, 4, 2)
        Inner corners, m: some coincide where a body has no piece of intrados or of foot.
    inner, outer : ndarray, shape (n, 2)
        Parameters of the pieces of intrados and extrados.
    moments : ndarray, shape (n, 3)
        Area (m2) and first moments of x and z (m3) about the first inner corner.
    """

    ring: Ring
    chain: Floats
    inner: Floats
    outer: Floats
    moments: Floats

    def __len__(self) -> int:
        return len(self.chain)

    @property
    def area(self) -> Floats:
        """Areas, m2."""
        return self.moments[:, 0]

    @property
    def centroid(self) -> Floats:
        """Centres of gravity (n, 2), m."""
        return self.chain[:, 0] + self.moments[:, 1:] / self.moments[:, :1]

    @property
    def inner_length(self) -> Floats:
        """Lengths of the pieces of intrados, m."""
        return self.ring.intrados.length(*self.inner.T)

    @property
    def outer_length(self) -> Floats:
        """Lengths of the pieces of extrados, m."""
        return self.ring.extrados.length(*self.outer.T)

    def outlines(self, within: float) -> list[Floats]:
        """Return the edges as open polygons (k, 2), m, anticlockwise, nowhere more than `within` off."""
        below = _arcs(self.ring.intrados, self.inner, within)
        above = _arcs(self.ring.extrados, self.outer[:, ::-1], within)
        parts = [self.chain[:, :1], below, self.chain[:, 3:], above]
        # Where a body has no intrados its arc is a point of the ring's; the chain's own corners stand in for it.
        bare = self.inner[:, 0] >= self.inner[:, 1]
        parts[1] = np.where(bare[:, None, None], self.chain[:, 1:2], below)
        return [_distinct(rows) for rows in np.concatenate(parts, axis=1)]


def bodies(ring: Ring, start: Cuts, end: Cuts) -> Bodies:
    """Return the bodies between the cuts `start` and `end`, row by row."""
    inner = np.stack([start.inner, end.inner], axis=-1)
    chain = np.stack(
        [start.bottom, ring.intrados.point(start.inner), ring.intrados.point(end.inner), end.bottom], axis=1
    )
    # A body whose far cut runs out on the near foot stands on the foot alone and has no piece of intrados; if its near
    # cut is the foot itself, it does not even reach the foot's own corner.
    from_gone, to_gone = end.runs_out == FROM, start.runs_out == TO
    chain[from_gone, 1:3] = end.bottom[from_gone, None]
    chain[from_gone & start.is_foot, 0] = end.bottom[from_gone & start.is_foot]
    chain[to_gone, 1:3] = start.bottom[to_gone, None]
    chain[to_gone & end.is_foot, 3] = start.bottom[to_gone & end.is_foot]
    outer = np.stack([start.outer, end.outer], axis=-1)
    return Bodies(ring, chain, inner, outer, _moments(ring, chain, inner, outer))


def _moments(ring: Ring, chain: Floats, inner: Floats, outer: Floats) -> Floats:
    about = chain[:, 0]
    first, second, third, last = np.moveaxis(chain, 1, 0)
    top_start, top_end = np.moveaxis(ring.extrados.point(outer), 1, 0)
    return (
        straight_moments(first, second, about)
        + arc_moments(ring.intrados, inner[:, 0], inner[:, 1], about)
        + straight_moments(third, last, about)
        + straight_moments(last, top_end, about)
        + arc_moments(ring.extrados, outer[:, 1], outer[:, 0], about)
        + straight_moments(top_start, first, about)
    )


def _arcs(line: Parallel, ends: Floats, within: float) -> Floats:
    """Return points (n, m, 2) along arcs of a line between parameters `ends` (n, 2), as many as the longest needs."""
    longest = float(np.max(np.abs(ends[:, 1] - ends[:, 0]), initial=0.0))
    count = max(1, int(np.ceil(longest / line.shape.step_within(within, line.offset))))
    return line.point(ends[:, :1] + (ends[:, 1:] - ends[:, :1]) * np.linspace(0.0, 1.0, count + 1))


def _distinct(outline: Floats) -> Floats:
    """Return a closed outline without the points that repeat their neighbour to rounding."""
    apart = np.hypot(*(outline - np.roll(outline, 1, axis=0)).T)
    size = np.max(np.ptp(outline, axis=0))
    return np.asarray(outline[apart > 1e-12 * size])  # ten thousand roundings
