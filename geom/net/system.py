"""The linear equations of a net of force densities, and how they are factored."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike
from scipy import sparse
from scipy.sparse.linalg import SuperLU, splu

from geom.errors import SolveError
from geom.net.network import Floats, Network, incidence, unheld


@dataclass(frozen=True, eq=False)
class System:
    """What both models share: C (m, n) as `branch`, its free columns as `loose`, |C_f|' as `carried`."""

    network: Network
    branch: sparse.csr_array
    loose: sparse.csr_array
    carried: sparse.csc_array
    density: Floats
    weight: Floats
    loads: Floats

    def matrix(self, density: Floats) -> sparse.csc_array:
        """Return C_f' Q C_f."""
        return sparse.csc_array(self.loose.T @ (self.loose * density[:, None]))


def system_of(network: Network, density: ArrayLike, weight: ArrayLike, loads: ArrayLike | None) -> System:
    """Return the equations of a net: densities and weights of each member or of all, loads (n, 3).

    Raises
    ------
    ValueError
        If a density is not positive, a weight is negative, or no anchor holds a part of the net.
    """
    m, n = len(network.members), len(network.nodes)
    q = np.broadcast_to(np.asarray(density, dtype=np.float64), (m,))
    w = np.broadcast_to(np.asarray(weight, dtype=np.float64), (m,))
    p = np.zeros((n, 3)) if loads is None else np.asarray(loads, dtype=np.float64)
    if not np.all((q > 0.0) & np.isfinite(q)):
        raise ValueError("force densities must be positive")
    if not np.all((w >= 0.0) & np.isfinite(w)):
        raise ValueError("weights per metre must not be negative")
    if p.shape != (n, 3) or not np.isfinite(p).all():
        raise ValueError(f"loads must be ({n}, 3) finite numbers, one vector for each node, not {p.shape}")
    adrift = unheld(network)
    if len(adrift):
        raise ValueError(f"no anchor holds the part of the net with node {adrift[0]}")
    branch = incidence(network)
    loose = branch[:, network.free]
    return System(network, branch, loose, sparse.csc_array(abs(loose).T), q, w, p)


def factored(matrix: sparse.csc_array) -> SuperLU | None:
    """Return the factors of a matrix of symmetric pattern that needs no pivoting; None if no node is free.

    Minimum degree on the pattern of A + A' with diagonal pivots takes half the time of the default column
    ordering at 100,000 nodes; narrow panels take a quarter off that, since a net's supernodes are narrow.

    Raises
    ------
    SolveError
        If the matrix is singular.
    """
    if not matrix.shape[0]:
        return None
    try:
        return splu(
            matrix,
            permc_spec="MMD_AT_PLUS_A",
            diag_pivot_thresh=0.0,
            relax=4,
            panel_size=4,
            options={"SymmetricMode": True},
        )
    except RuntimeError as err:  # "Factor is exactly singular": no Newton step, the members are too heavy
        raise SolveError("members are too heavy for their force densities to hold") from err
