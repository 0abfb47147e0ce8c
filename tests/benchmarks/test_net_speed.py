"""How long a net of 100,000 nodes takes, as a ratio to what no solver by this method can avoid."""

import time
from collections.abc import Callable
from functools import partial

import numpy as np
import pytest
from scipy import sparse
from scipy.sparse.linalg import splu

from geom.net import force_density
from geom.net.network import Network
from geom.net.pattern import square

straight, hanging = partial(force_density.solve, straight=True), force_density.solve

SIDE = 316  # meshes a side: 100,489 nodes
DENSITY = 8000.0  # N/m, with WEIGHT a sag of a ninth of the side: eight back-solves for the weights
WEIGHT = 6.0  # N/m
MOST_RATIO = 1.5


def corner_net() -> Network:
    pattern = square([[0, 0, 3], [20, 0, 4], [20, 20, 3], [0, 20, 4]], divisions=(SIDE, SIDE))
    held = np.zeros(len(pattern.nodes), dtype=np.bool_)
    held[pattern.corners] = True
    return Network(pattern.nodes, pattern.members, held)


def five_point_matrix() -> sparse.csc_array:
    """Return the matrix of the same net, made another way: the grid's Laplacian as a Kronecker sum, corners off."""
    path = sparse.diags_array(
        [np.full(SIDE, -1.0), np.r_[1.0, np.full(SIDE - 1, 2.0), 1.0], np.full(SIDE, -1.0)], offsets=[-1, 0, 1]
    )
    one = sparse.eye_array(SIDE + 1)
    whole = sparse.csc_array(sparse.kron(path, one) + sparse.kron(one, path))
    n = SIDE + 1
    free = np.setdiff1d(np.arange(n * n), [0, n - 1, n * n - n, n * n - 1])
    return sparse.csc_array(DENSITY * whole[free][:, free])


def seconds(call: Callable[[], object]) -> float:
    start = time.process_time()
    call()
    return time.process_time() - start


@pytest.mark.long
@pytest.mark.parametrize("model", [straight, hanging])
def test_a_hundred_thousand_nodes_take_at_most_half_again_the_factorisation_and_three_solves(
    model: Callable[..., object],
) -> None:
    network, matrix = corner_net(), five_point_matrix()
    loads = np.ones((matrix.shape[0], 3))

    def bare() -> None:
        splu(matrix, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True}).solve(loads)

    # Taken in turns and the least of each, in processor time: both meet the same neighbours on a shared machine, whose
    # caches may be theirs for a while, so that there are three rounds.
    for _ in range(3):
        times = [(seconds(bare), seconds(lambda: model(network, DENSITY, weight=WEIGHT))) for _ in range(5)]
        least_bare, least_ours = np.min(times, axis=0)
        if least_ours <= MOST_RATIO * least_bare:
            break
    assert least_ours <= MOST_RATIO * least_bare, f"{least_ours:.3f} s against {least_bare:.3f} s"
