"""The one equation that force densities leave, in the elevations of the free nodes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import SuperLU

from geom.errors import SolveError
from geom.net.network import Floats
from geom.net.system import System, factored

CLOSE = 1e-12  # change of the elevations, over the size of the net, at which they are found
_MOST_BACK_SOLVES = 100  # at 100,000 nodes these cost about what three factorisations do
_SLOW = 0.8  # share of the change a back-solve leaves, from which on Newton steps cost less than the rest
_MOST_NEWTON = 60


@dataclass(frozen=True, eq=False)
class Upright:
    """K z + |C_f|' half_weight sqrt(s^2 + (C z)^2) = load, with z about the middle of the anchors."""

    system: System
    density: Floats  # of K, (m,)
    s: Floats  # (m,)
    half_weight: Floats  # (m,)
    load: Floats  # (n,)

    def wanting(self, rise: Floats, length: Floats) -> Floats:
        """Return what the free nodes lack to balance, for members of this rise and length, (m,) each."""
        pulled: Floats = self.system.loose.T @ (self.density * rise)
        weighed: Floats = self.system.carried @ (self.half_weight * length)
        return self.load[self.system.network.free] - weighed - pulled

    def jacobian(self, rise: Floats, length: Floats) -> sparse.csc_array:
        """Return the derivative of the left side by z."""
        loose = self.system.loose
        slope = np.divide(rise, length, out=np.zeros_like(rise), where=length > 0.0)
        turned = self.system.carried @ (loose * (self.half_weight * slope)[:, None])
        return sparse.csc_array(self.system.matrix(self.density) + turned)


def elevations(upright: Upright, factor: SuperLU | None, level: Floats) -> Floats:
    """Return z (n,) of all nodes."""
    network = upright.system.network
    z = network.nodes[:, 2].copy()
    if factor is None:
        return z
    middle = z[network.held].mean()
    z = np.where(network.held, z - middle, 0.0)
    extent = float(max(np.ptp(level, axis=0).max(), np.ptp(z)))
    z[network.free] = _back_solved(upright, upright.system.branch @ z, factor, extent)
    return np.asarray(z + middle)


def _back_solved(upright: Upright, base: Floats, factor: SuperLU, extent: float) -> Floats:
    """Return z of the free nodes by back-solves with one factor; `base` (m,) is the anchors' part of C z."""
    z, change = factor.solve(upright.wanting(base, upright.s)), np.inf
    for _ in range(_MOST_BACK_SOLVES):
        rise, before = upright.system.loose @ z + base, change
        step = factor.solve(upright.wanting(rise, np.hypot(upright.s, rise)))
        z, change = z + step, float(np.abs(step).max())
        if change <= CLOSE * max(extent, float(np.abs(z).max())):
            return z
        if not change <= _SLOW * before:
            break
    return _newton(upright, base, z, extent)


def _newton(upright: Upright, base: Floats, z: Floats, extent: float) -> Floats:
    """Return z of the free nodes by Newton's method, a factorisation a step."""
    loose = upright.system.loose
    for _ in range(_MOST_NEWTON):
        rise = loose @ z + base
        length = np.hypot(upright.s, rise)
        factor = factored(upright.jacobian(rise, length))
        assert factor is not None  # there are free nodes, or nothing is solved for
        step = factor.solve(upright.wanting(rise, length))
        z = z + step
        change, size = float(np.abs(step).max()), max(extent, float(np.abs(z).max()))
        if change <= CLOSE * size:
            return z
        if not np.isfinite(change):
            break
    raise SolveError(f"elevations do not settle: they still change by {change / size:.1e} of the net's size")
