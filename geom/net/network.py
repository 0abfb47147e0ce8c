"""A net as its solvers see it: nodes, members between them, and which nodes are held.

Every pattern (a grid, spokes and rings, lines that were drawn) comes down to this, and every way of solving
(force densities, given lengths) starts from it.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy import sparse
from scipy.sparse.csgraph import connected_components

from geom.result import fixed

Floats = NDArray[np.float64]
Indices = NDArray[np.intp]
Flags = NDArray[np.bool_]


def indices(values: ArrayLike) -> Indices:
    """Return a read-only copy of `values` as whole numbers that index arrays."""
    array = np.array(values, dtype=np.intp)
    array.setflags(write=False)
    return array


def flags(values: ArrayLike) -> Flags:
    """Return a read-only copy of `values` as true and false."""
    array = np.array(values, dtype=np.bool_)
    array.setflags(write=False)
    return array


@dataclass(frozen=True, eq=False)
class Network:
    """Nodes, members and held nodes.

    Parameters
    ----------
    nodes : ndarray, shape (n, 3), m
        Held nodes where they are held; free ones where a solver may start.
    members : ndarray of int, shape (m, 2)
        The nodes each member runs from and to.
    held : ndarray of bool, shape (n,)
        Which nodes are anchors.

    Raises
    ------
    ValueError
        If a member names a node that is not there, or starts and ends at one node.
    """

    nodes: Floats
    members: Indices
    held: Flags

    def __post_init__(self) -> None:
        object.__setattr__(self, "nodes", fixed(self.nodes, -1, 3))
        object.__setattr__(self, "members", indices(self.members).reshape(-1, 2))
        object.__setattr__(self, "held", flags(self.held))
        if len(self.held) != len(self.nodes):
            raise ValueError(f"{len(self.nodes)} nodes need as many flags, not {len(self.held)}")
        if self.members.size and not 0 <= self.members.min() <= self.members.max() < len(self.nodes):
            raise ValueError(f"members must run between nodes 0 and {len(self.nodes) - 1}")
        if np.any(self.members[:, 0] == self.members[:, 1]):
            raise ValueError("a member starts and ends at one node")

    @property
    def anchors(self) -> Indices:
        """Indices of the held nodes."""
        return np.flatnonzero(self.held)

    @property
    def free(self) -> Indices:
        """Indices of the free nodes."""
        return np.flatnonzero(~self.held)


def incidence(network: Network) -> sparse.csr_array:
    """Return the branch-node matrix C, shape (m, n): -1 where a member starts, +1 where it ends.

    `C @ nodes` is each member's vector, `C.T @ (q * ...)` gathers members at nodes (Schek 1974, eq. 2).
    """
    m, n = len(network.members), len(network.nodes)
    ends = np.tile(np.array([-1.0, 1.0]), m)
    return sparse.csr_array((ends, network.members.ravel(), np.arange(0, 2 * m + 1, 2)), shape=(m, n))


def gathered(network: Network, at_ends: Floats) -> Floats:
    """Return what members bring to nodes, (n, 3): vectors at their two ends (m, 2, 3), summed."""
    ends = network.members.ravel()
    n = len(network.nodes)
    one_each = sparse.csc_array((np.ones(len(ends)), ends, np.arange(len(ends) + 1)), shape=(n, len(ends)))
    return np.asarray(one_each @ at_ends.reshape(-1, 3))


def parts(network: Network) -> tuple[int, Indices]:
    """Return how many separate parts the net has, and the part (n,) each node belongs to."""
    starts, stops = network.members.T
    n = len(network.nodes)
    joined = sparse.coo_array((np.ones(len(starts), dtype=np.int8), (starts, stops)), shape=(n, n))
    count, part = connected_components(joined, directed=False)
    return int(count), part.astype(np.intp)


def unheld(network: Network) -> Indices:
    """Return the nodes of every part of the net that no anchor holds; empty when all is well."""
    count, part = parts(network)
    has_anchor = np.zeros(count, dtype=np.bool_)
    has_anchor[part[network.held]] = True
    return np.flatnonzero(~has_anchor[part])


@dataclass(frozen=True, eq=False)
class Nearest:
    """The node nearest each of k points: index (k,), distance (k,) and mesh (k,) there, both on plan, m."""

    node: Indices
    distance: Floats
    mesh: Floats

    @property
    def too_far(self) -> Flags:
        """Points (k,) farther from any node than half a mesh: they name no node."""
        # A point of a design is written to the millimetre at best: a billionth of the mesh is no distance.
        return self.distance > self.mesh * (0.5 + 1e-9)


def nearest(nodes: Floats, members: Indices, points: ArrayLike) -> Nearest:
    """Return the node nearest each point on plan, how far it is, and the mean length of the members at it.

    Parameters
    ----------
    nodes : ndarray, shape (n, 3), m
    members : ndarray of int, shape (m, 2)
    points : array_like, shape (k, 3) or (k, 2), m
        Elevations are ignored: a net sags away from the points it is drawn through.
    """
    from scipy.spatial import KDTree  # noqa: PLC0415 - nets without given points do not pay for it

    plan = nodes[:, :2]
    distance, node = KDTree(plan).query(
        np.asarray(points, dtype=np.float64).reshape(len(np.atleast_2d(points)), -1)[:, :2]
    )
    reach = np.linalg.norm(plan[members[:, 1]] - plan[members[:, 0]], axis=1)
    total = np.bincount(members.ravel(), np.repeat(reach, 2), len(nodes))
    meeting = np.bincount(members.ravel(), minlength=len(nodes))
    return Nearest(np.asarray(node, dtype=np.intp), np.asarray(distance), (total / np.maximum(meeting, 1))[node])
