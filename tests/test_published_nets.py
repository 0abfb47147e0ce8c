"""Nets against published and exact values.

Method: H.-J. Schek, "The force density method for form finding and computation of general networks", 1974. Where no
number was printed the exact one is derived here from that paper's linear equations, as said beside each.
"""

from fractions import Fraction
from functools import partial

import numpy as np
import pytest
from numpy.typing import NDArray

from geom.net import force_density
from geom.net.network import Network
from geom.net.pattern import square
from geom.net.shape import NetShape

Array = NDArray[np.float64]
straight, hanging = partial(force_density.solve, straight=True), force_density.solve


def grid_over(side: float, meshes: int) -> tuple[Network, NDArray[np.bool_]]:
    """Return a flat square net held all round, and which nodes are free."""
    corners = side * np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0]])
    pattern = square(corners, divisions=(meshes, meshes), edge_members=False)
    held = np.zeros(len(pattern.nodes), dtype=np.bool_)
    held[pattern.boundary] = True
    return Network(pattern.nodes, pattern.members, held), ~held


def line_of(x: Array, z: Array) -> Network:
    n = len(x)
    nodes = np.column_stack([x, np.zeros(n), z])
    return Network(nodes, np.column_stack([np.arange(n - 1), np.arange(1, n)]), np.isin(np.arange(n), [0, n - 1]))


def under_load(network: Network, density: float, load: float) -> NetShape:
    loads = np.zeros((len(network.nodes), 3))
    loads[:, 2] = -load
    return straight(network, density, loads=loads)


def test_a_line_of_ten_members_hangs_in_the_parabola_of_its_nodal_loads() -> None:
    # Exact solution of Schek's equations for equal q and loads p: z_k = -p k (N - k)/(2 q); at the middle -12.5 p/q.
    shape = under_load(line_of(np.arange(11.0), np.zeros(11)), 3.0, 1.7)
    k = np.arange(11)
    assert shape.nodes[:, 2] == pytest.approx(-1.7 * k * (10 - k) / (2 * 3.0), abs=1e-12)
    assert shape.nodes[5, 2] * 3.0 / 1.7 == pytest.approx(-12.5, abs=1e-12)


def test_nine_free_nodes_in_a_square_frame_stand_at_exact_fractions() -> None:
    # Exact rationals of the five-point equations with q = p = 1: centre 9/8, middle of a side 7/8, corner 11/16.
    network, free = grid_over(4.0, 4)
    depth = -under_load(network, 1.0, 1.0).nodes[free, 2].reshape(3, 3)
    centre, side, corner = Fraction(9, 8), Fraction(7, 8), Fraction(11, 16)
    assert 4 * centre - 4 * side == 4 * side - 2 * corner - centre == 4 * corner - 2 * side == 1
    exact = [[corner, side, corner], [side, centre, side], [corner, side, corner]]
    assert depth == pytest.approx(np.array(exact, dtype=np.float64), abs=1e-12)


@pytest.mark.parametrize(
    "harmonic",
    [lambda x, y: x * y, lambda x, y: x**2 - y**2, lambda x, y: x**3 - 3 * x * y**2],
    ids=["xy", "x2-y2", "x3-3xy2"],
)
def test_a_net_without_load_spans_a_discrete_harmonic_edge_exactly(harmonic: object) -> None:
    # These polynomials satisfy the five-point equations exactly (their fourth differences vanish).
    assert callable(harmonic)
    flat, free = grid_over(2.0, 8)
    nodes = flat.nodes.copy()
    truth = harmonic(nodes[:, 0], nodes[:, 1])
    nodes[:, 2] = np.where(free, 0.0, truth)
    shape = straight(Network(nodes, flat.members, flat.held), 25.0)
    assert shape.nodes[:, 2] == pytest.approx(truth, abs=1e-12)
    assert shape.nodes[:, :2] == pytest.approx(nodes[:, :2], abs=1e-12)


def test_x4_minus_6x2y2_plus_y4_is_not_discrete_harmonic_and_a_net_departs_from_it() -> None:
    # Its five-point Laplacian is 4 h^4 and not 0, so a net hung from that edge stands off it: the check above can fail.
    flat, free = grid_over(2.0, 8)
    nodes = flat.nodes.copy()
    x, y = nodes[:, 0], nodes[:, 1]
    truth = x**4 - 6 * x**2 * y**2 + y**4
    nodes[:, 2] = np.where(free, 0.0, truth)
    shape = straight(Network(nodes, flat.members, flat.held), 25.0)
    assert np.abs(shape.nodes[:, 2] - truth).max() > 1e-3
    # The departure solves the net's equations under the load q 4 h^4 at each node, by the same linear algebra.
    assert shape.nodes[:, 2] - truth == pytest.approx(
        under_load(flat, 25.0, -25.0 * 4 * 0.25**4).nodes[:, 2], abs=1e-12
    )


# Depth of a square net of n meshes under equal nodal loads, over q a^2/H, and its sum times the mesh's area; the
# limits are those of the membrane (S. Timoshenko and J. N. Goodier, "Theory of Elasticity", torsion of a square bar:
# k1 = 0.1406, edge slope 0.675/2, from memory; digits recomputed from the series).
MEMBRANE_DEPTH, MEMBRANE_VOLUME, MEMBRANE_SLOPE = 0.0736713532815138, 0.0351442537387884, 0.337657241656784
NET_DEPTHS = {2: 0.0625, 4: 0.0703125, 8: 0.0727826287, 16: 0.0734457666, 32: 0.0736147374, 64: 0.0736571855}
NET_VOLUMES = {2: 0.015625, 4: 0.0288085938, 8: 0.0334230, 16: 0.0347028, 32: 0.0350330, 64: 0.0351164}


def membrane_net(meshes: int, side: float = 3.0, pull: float = 7.0, load: float = 2.0) -> NetShape:
    """Return a net with a horizontal pull per width and a load per area: q = pull (force density is pull h/h)."""
    network, _ = grid_over(side, meshes)
    return under_load(network, pull, load * (side / meshes) ** 2)


@pytest.mark.parametrize("meshes", NET_DEPTHS)
def test_a_square_net_under_equal_loads_has_the_published_depth_and_volume(meshes: int) -> None:
    depth = -membrane_net(meshes).nodes[:, 2] * 7.0 / (2.0 * 3.0**2)
    assert depth.max() == pytest.approx(NET_DEPTHS[meshes], abs=6e-11)
    assert depth.sum() / meshes**2 == pytest.approx(NET_VOLUMES[meshes], abs=6e-8)


def test_the_depth_of_a_square_net_converges_to_the_membrane_with_second_order() -> None:
    errors = np.array([MEMBRANE_DEPTH + membrane_net(n).nodes[:, 2].min() * 7.0 / (2.0 * 3.0**2) for n in (16, 32, 64)])
    assert np.log2(errors[:-1] / errors[1:]) == pytest.approx(2.0, abs=0.01)
    assert errors[2] - (errors[1] - errors[2]) / 3 == pytest.approx(0.0, abs=2e-8)  # Richardson


def test_the_pull_of_a_square_net_on_the_middle_of_an_edge_is_that_of_the_membrane() -> None:
    shape = membrane_net(64)
    h, anchors = 3.0 / 64, shape.network.nodes[shape.network.held]
    middle = np.flatnonzero((anchors[:, 0] == 1.5) & (anchors[:, 1] == 0.0))
    # What hangs on the anchor is half a mesh short of the edge: of the load on that half the slope knows nothing yet.
    lumped = 2.0 * h**2
    slope = (-shape.reactions[middle, 2] - lumped + lumped / 2) / (7.0 * h)
    assert slope * 7.0 / (2.0 * 3.0) == pytest.approx([MEMBRANE_SLOPE], abs=2e-4)


def test_volume_of_the_membrane_is_approached_from_below_with_second_order() -> None:
    errors = np.array(
        [MEMBRANE_VOLUME + membrane_net(n).nodes[:, 2].sum() * 7.0 / (2.0 * 3.0**2) / n**2 for n in (16, 32, 64)]
    )
    assert np.all(errors > 0)
    assert np.log2(errors[:-1] / errors[1:]) == pytest.approx(2.0, abs=0.02)


@pytest.mark.parametrize("seed", range(6))
def test_force_times_length_equals_loads_times_positions(seed: int) -> None:
    # J. C. Maxwell, "On reciprocal figures, frames, and diagrams of forces", 1870: over straight members of a net in
    # equilibrium the sum of T l equals the sum of F.x over loads and reactions, wherever the origin is.
    rng = np.random.default_rng(seed)
    pattern = square([[0, 0, 3], [6, 1, 4], [7, 5, 2], [-1, 4, 5]], divisions=(5, 4))
    held = np.zeros(len(pattern.nodes), dtype=np.bool_)
    held[rng.permutation(len(held))[:5]] = True
    m, n = len(pattern.members), len(pattern.nodes)
    loads, weight = rng.normal(0, 10, (n, 3)), rng.uniform(0, 6, m)
    network = Network(pattern.nodes, pattern.members, held)
    shape = straight(network, rng.uniform(5, 200, m), weight=weight, loads=loads)
    forces = loads.copy()
    halves = np.repeat(0.5 * weight * shape.length, 2)
    forces[:, 2] -= np.bincount(pattern.members.ravel(), halves, n)
    forces[held] -= shape.reactions  # what supports do to the net
    assert np.sum(forces * (shape.nodes - [3, 1, -8])) == pytest.approx(
        np.sum(shape.force[:, 0] * shape.length), rel=1e-11
    )


@pytest.mark.parametrize("members", [1, 2, 7, 40])
def test_a_cable_of_span_20_and_sag_6_cut_into_hanging_members_is_still_that_cable(members: int) -> None:
    # R. C. Hibbeler, "Engineering Mechanics: Statics", sect. 7.4 (from memory): 45.9 N, 24.2 m, 75.9 N, 52.8 degrees;
    # digits recomputed to 40 places from 5 sag = H (cosh(50/H) - 1).
    pull = 45.9447070111
    x = np.linspace(0.0, 20.0, members + 1)
    shape = hanging(line_of(x, np.zeros(members + 1)), pull / np.diff(x), weight=5.0)
    assert shape.lowest == pytest.approx(-6.0, rel=1e-10)
    assert shape.length.sum() == pytest.approx(24.1882034741, rel=1e-11)
    assert shape.force.max() == pytest.approx(75.9447070111, rel=1e-11)
    slope = np.degrees(np.arctan(-shape.vertical[0, 0] / shape.horizontal[0]))
    assert slope == pytest.approx(52.7729022365, rel=1e-10)
    assert -shape.reactions[:, 2].sum() == pytest.approx(5.0 * 24.1882034741, rel=1e-11)
