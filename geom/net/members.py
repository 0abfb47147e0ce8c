"""What members do between the nodes they end at: straight ones, and ones that hang in a catenary.

Pulls come from nodes and densities alone, so that the residual summed from them checks the solve.
"""

from __future__ import annotations

import numpy as np

from geom.net.network import Floats
from geom.net.shape import MemberEnds, NetShape, hung
from geom.net.system import System


def straight_shape(system: System, nodes: Floats) -> NetShape:
    """Return the net of straight members with these nodes (n, 3), pulling q times their length."""
    across = system.branch @ nodes
    length = np.hypot(np.hypot(across[:, 0], across[:, 1]), across[:, 2])
    pull = system.density[:, None] * across
    at_nodes = system.loads.copy()
    at_nodes[:, 2] -= abs(system.branch).T @ (0.5 * system.weight * length)
    low = np.minimum(*nodes[:, 2][system.network.members.T])
    return hung(system.network, nodes, MemberEnds(across, np.stack([pull, -pull], axis=1), length, low), at_nodes)


def hanging_shape(system: System, u: Floats, nodes: Floats) -> NetShape:
    """Return the net of members hanging in catenaries between these nodes (n, 3), u = w/(2 q) of each."""
    across = system.branch @ nodes
    length = np.hypot(sinh_over(u) * np.hypot(across[:, 0], across[:, 1]), across[:, 2])
    steep = np.column_stack([system.density, system.density, system.density * u_coth(u)]) * across
    weight = np.zeros_like(steep)
    weight[:, 2] = 0.5 * system.weight * length
    ends = np.stack([steep - weight, -steep - weight], axis=1)
    low = _lowest(nodes[:, 2][system.network.members], ends, system.weight)
    return hung(system.network, nodes, MemberEnds(across, ends, length, low), system.loads)


def _lowest(z: Floats, ends: Floats, weight: Floats) -> Floats:
    """Return the lowest elevation (m,): inside a member where it pulls both its ends, at z (m, 2), down.

    A catenary's tension is H at its lowest point and falls by w for each metre down, so that point is
    (T - H)/w = V^2/(w (T + H)) under an end, without the subtraction.
    """
    inside = (ends[:, :, 2] < 0.0).all(axis=1)
    horizontal, vertical = np.hypot(ends[inside, 0, 0], ends[inside, 0, 1]), ends[inside, 0, 2]
    low: Floats = z.min(axis=1)
    low[inside] = z[inside, 0] - vertical**2 / (weight[inside] * (np.hypot(horizontal, vertical) + horizontal))
    return low


def sinh_over(u: Floats) -> Floats:
    """Return sinh(u)/u, 1 at 0; exact to rounding for any u."""
    return np.divide(np.sinh(u), u, out=np.ones_like(u), where=u > 0.0)


def u_coth(u: Floats) -> Floats:
    """Return u coth u, 1 at 0; exact to rounding for any u."""
    return np.divide(u, np.tanh(u), out=np.ones_like(u), where=u > 0.0)
