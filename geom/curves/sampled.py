"""A smooth curve known by points and the directions it runs in there."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Along, Array, Curve, Index, fixed, positive, units

# Gauss-Legendre nodes and weights on [0, 1]. Eight nodes integrate the speed of a cubic that turns by 0.5 rad
# to 1e-12 of its length, which is under what interpolating the points costs anyway.
_NODES, _WEIGHTS = (
    0.5 * (part + shift) for part, shift in zip(np.polynomial.legendre.leggauss(8), (1, 0), strict=True)
)
_NEWTON_STEPS = 6  # the speed of a piece is nearly even, so each step squares an error that starts under 0.1


@dataclass(frozen=True, eq=False)
class Sampled(Curve):
    """Cubic pieces from point to point that run in the given direction at each.

    The speeds at a piece's ends are chord / cos^2(v/4) each, v twice the angle between chord and tangent. On
    a circular arc of the angle v that is 4 r tan(v/4), with which the cubic passes through the arc's middle.
    Between points h apart the curve is good to the fourth power of h.

    A bend in the curve (at a load) needs two curves, joined. Successive points must be apart, and the curve
    may not turn by a right angle or more between a chord and its ends.
    """

    nodes: Array  # (n, 3) m
    tangents: Array  # (n, 3), made unit vectors

    def __post_init__(self) -> None:
        nodes = fixed(self.nodes, None, 3, name="points")
        tangents = fixed(self.tangents, len(nodes), 3, name="tangents")
        if len(nodes) < 2:
            raise ValueError(f"a sampled curve needs two points or more, not {len(nodes)}")
        tangents = fixed(units(tangents, name="each tangent"), None, 3, name="tangents")
        self._set(nodes=nodes, tangents=tangents)
        if not (np.linalg.norm(np.diff(nodes, axis=0), axis=1).all() and (self._leans > 0).all()):
            raise ValueError("successive points must be apart and their tangents run from one to the next")

    @property
    def start(self) -> Array:
        """First point, (3,) m."""
        return np.asarray(self.nodes[0])

    @property
    def end(self) -> Array:
        """Last point, (3,) m."""
        return np.asarray(self.nodes[-1])

    @cached_property
    def length(self) -> float:
        """Length of all pieces, m."""
        return float(self._reach[-1])

    def stations(self, within: float) -> Array:
        """Arc lengths of the points and of as many more between them as `within` asks for.

        A chord over the share v of a piece is off by at most v^2/8 times the greatest second derivative, and
        that of a cubic is at one of its ends.
        """
        bend = np.maximum(*(np.linalg.norm(self._second(t), axis=1) for t in (0.0, 1.0)))
        steps = np.maximum(1, np.ceil(np.sqrt(bend / (8 * positive(within, name="within")))).astype(int))
        piece = np.repeat(np.arange(len(steps)), steps)
        share = (np.arange(len(piece)) - np.repeat(np.cumsum(steps) - steps, steps)) / steps[piece]
        return np.append(self._reach[piece] + self._partial(piece, share), self.length)

    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths (k,), m."""
        s = self._stationed(s)
        piece = np.clip(np.searchsorted(self._reach, s, side="right") - 1, 0, len(self.nodes) - 2)
        share = self._share(piece, s - self._reach[piece])
        velocity = self._velocity(piece, share)
        return Along(self._position(piece, share), velocity / np.linalg.norm(velocity, axis=1, keepdims=True))

    def moved(self, offset: Array) -> Self:
        """Return the curve moved by a vector, (3,) m."""
        return replace(self, nodes=self.nodes + offset)

    def scaled(self, factor: float) -> Self:
        """Return the curve scaled about the origin."""
        return replace(self, nodes=self.nodes * factor)

    @cached_property
    def _leans(self) -> Array:
        """Cosine between chord and tangent at both ends of each piece, (2, n - 1)."""
        steps = np.diff(self.nodes, axis=0)
        ways = steps / np.linalg.norm(steps, axis=1, keepdims=True)
        return np.stack([(ways * self.tangents[:-1]).sum(axis=1), (ways * self.tangents[1:]).sum(axis=1)])

    @cached_property
    def _cubics(self) -> Array:
        """Coefficients of 1, t, t^2, t^3 for each piece, (4, n - 1, 3): Hermite's form."""
        steps = np.diff(self.nodes, axis=0)
        # chord / cos^2(v/4) = 2 chord / (1 + cos(v/2)), and v/2 is the angle between chord and tangent.
        speeds = 2 * np.linalg.norm(steps, axis=1) / (1 + self._leans)
        leave, arrive = speeds[0, :, None] * self.tangents[:-1], speeds[1, :, None] * self.tangents[1:]
        return np.stack([self.nodes[:-1], leave, 3 * steps - 2 * leave - arrive, leave + arrive - 2 * steps])

    @cached_property
    def _reach(self) -> Array:
        """Arc length at each point, (n,) m."""
        piece = np.arange(len(self.nodes) - 1)
        return np.concatenate([[0.0], np.cumsum(self._partial(piece, np.ones(len(piece))))])

    def _position(self, piece: Index, t: Array) -> Array:
        c, t = self._cubics[:, piece], t[:, None]
        return np.asarray(c[0] + t * (c[1] + t * (c[2] + t * c[3])))

    def _velocity(self, piece: Index, t: Array) -> Array:
        c, t = self._cubics[:, piece], t[:, None]
        return np.asarray(c[1] + t * (2 * c[2] + t * 3 * c[3]))

    def _second(self, t: float) -> Array:
        return np.asarray(2 * self._cubics[2] + 6 * t * self._cubics[3])

    def _partial(self, piece: Index, t: Array) -> Array:
        """Length of the first share t of each piece, m."""
        inner = np.outer(t, _NODES)
        velocity = self._velocity(np.repeat(piece, len(_NODES)), inner.ravel())
        speed = np.linalg.norm(velocity, axis=1).reshape(inner.shape)
        return np.asarray(t * (speed @ _WEIGHTS))

    def _share(self, piece: Index, past: Array) -> Array:
        """Find the share t of each piece that has the length `past`: Newton's method from the even speed."""
        t = past / np.diff(self._reach)[piece]
        for _ in range(_NEWTON_STEPS):
            speed = np.linalg.norm(self._velocity(piece, t), axis=1)
            t = np.clip(t - (self._partial(piece, t) - past) / speed, 0.0, 1.0)
        return t
