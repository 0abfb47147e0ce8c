"""What members do between the nodes they end at: straight ones, and ones that hang in a catenary.

Pulls come from nodes and densities alone, so that the residual summed from them checks the solve.
"""

from __future__ import annotations

import numpy as np

from geom.net.network import Flags, Floats
from geom.net.shape import MemberEnds, NetShape, hung
from geom.net.system import System


def shape_of(system: System, u: Floats, nodes: Floats, lumped: Flags) -> NetShape:
    """Return the net with these nodes (n, 3), m.

    Parameters
    ----------
    u : ndarray, shape (m,)
        w/(2 q) of members that hang, 0 of straight ones.
    lumped : ndarray of bool, shape (m,)
        Members that weigh on their nodes and not on their own ends.
    """
    across = np.asarray(system.branch @ nodes)
    length = np.hypot(sinh_over(u) * np.hypot(across[:, 0], across[:, 1]), across[:, 2])
    half = 0.5 * system.weight * length
    at_nodes = system.loads.copy()
    at_nodes[:, 2] -= abs(system.branch).T @ np.where(lumped, half, 0.0)
    ends = _pulls(system, u, across, np.where(lumped, 0.0, half))
    low = _lowest(nodes[:, 2][system.network.members], ends, system.weight)
    return hung(system.network, nodes, MemberEnds(across, ends, length, low), at_nodes)


def _pulls(system: System, u: Floats, across: Floats, half_weight: Floats) -> Floats:
    """Return the pulls on both ends (m, 2, 3): q along, q u coth u up, less half the weight at each."""
    steep = system.density[:, None] * across
    steep[:, 2] *= u_coth(u)
    ends = np.stack([steep, -steep], axis=1)
    ends[:, :, 2] -= half_weight[:, None]
    return ends


def _lowest(z: Floats, ends: Floats, weight: Floats) -> Floats:
    """Return the lowest elevation (m,): inside a member where it pulls both its ends, at z (m, 2), down.

    A catenary's tension is H at its lowest point and falls by w for each metre down, so that point is
    (T - H)/w = V^2/(w (T + H)) under an end, without the subtraction.
    """
    inside = (ends[:, :, 2] < 0.0).all(axis=1)
    horizontal, vertical = np.hypot(ends[inside, 0, 0], ends[inside, 0, 1]), ends[inside, 0, 2]
    low = np.minimum(z[:, 0], z[:, 1])
    low[inside] = z[inside, 0] - vertical**2 / (weight[inside] * (np.hypot(horizontal, vertical) + horizontal))
    return low


def sinh_over(u: Floats) -> Floats:
    """Return sinh(u)/u, 1 at 0; exact to rounding for any u."""
    return np.divide(np.sinh(u), u, out=np.ones_like(u), where=u > 0.0)


def u_coth(u: Floats) -> Floats:
    """Return u coth u, 1 at 0; exact to rounding for any u."""
    return np.divide(u, np.tanh(u), out=np.ones_like(u), where=u > 0.0)
