"""The shape a net takes, with the pulls in it: what every way of solving a net returns."""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np

from geom.net.network import Floats, Network, gathered
from geom.result import fixed


@dataclass(frozen=True, eq=False)
class MemberEnds:
    """What members do to the nodes they end at, before anything is summed.

    Parameters
    ----------
    across : ndarray, shape (m, 3), m
        From the node at `from` to that at `to`.
    pull : ndarray, shape (m, 2, 3), N
        Tension as a vector on the node at `from` and at `to`; it points into the member.
    length : ndarray, shape (m,), m
        Of each member as it hangs.
    low : ndarray, shape (m,), m
        Elevation of the lowest point of each member.
    """

    across: Floats
    pull: Floats
    length: Floats
    low: Floats


@dataclass(frozen=True, eq=False)
class NetShape:
    """A net in equilibrium.

    Parameters
    ----------
    network : Network
        Members and anchors; its nodes are where the solver started.
    nodes : ndarray, shape (n, 3), m
        As hung.
    plan, chord, length : ndarray, shape (m,), m
        Distance of a member's ends on plan and in space, and its length as it hangs.
    horizontal : ndarray, shape (m,), N
        Horizontal part of the pull, the same all along a member.
    vertical : ndarray, shape (m, 2), N
        Vertical part of the pull on the node at `from` and at `to`, upward positive.
    force : ndarray, shape (m, 2), N
        Tension at both ends.
    reactions : ndarray, shape (k, 3), N
        What the net pulls each anchor with (rows as `network.anchors`), weights and loads at the anchor
        itself included.
    residual : float, N
        Greatest unbalanced force at any free node, summed from the members' ends.
    low : ndarray, shape (m,), m
        Elevation of the lowest point of each member.
    lowest : float, m
        Of the whole net, members' own sag included.
    """

    network: Network
    nodes: Floats
    plan: Floats
    chord: Floats
    length: Floats
    horizontal: Floats
    vertical: Floats
    force: Floats
    reactions: Floats
    residual: float
    low: Floats
    lowest: float

    def __post_init__(self) -> None:
        for field in fields(self):
            value = getattr(self, field.name)
            if isinstance(value, np.ndarray):
                object.__setattr__(self, field.name, fixed(value))


def hung(network: Network, nodes: Floats, ends: MemberEnds, at_nodes: Floats) -> NetShape:
    """Return the shape made of solved nodes and what the members pull with there.

    Parameters
    ----------
    nodes : ndarray, shape (n, 3), m
    at_nodes : ndarray, shape (n, 3), N
        Loads at the nodes, and weights where members do not carry their own.
    """
    plan = np.hypot(ends.across[:, 0], ends.across[:, 1])
    unbalanced = gathered(network, ends.pull) + at_nodes
    level = np.hypot(ends.pull[:, 0, 0], ends.pull[:, 0, 1])
    return NetShape(
        network=network,
        nodes=nodes,
        plan=plan,
        chord=np.hypot(plan, ends.across[:, 2]),
        length=ends.length,
        horizontal=level,
        vertical=ends.pull[:, :, 2],
        force=np.hypot(level[:, None], ends.pull[:, :, 2]),
        reactions=unbalanced[network.held],
        residual=float(np.linalg.norm(unbalanced[~network.held], axis=1).max(initial=0.0)),
        low=ends.low,
        lowest=float(min(nodes[:, 2].min(), ends.low.min(initial=np.inf))),
    )
