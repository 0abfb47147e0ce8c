"""Patterns of nets and their equilibrium by force densities."""

import re
from collections.abc import Callable
from functools import partial

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mp, mpf
from numpy.typing import NDArray

from geom.errors import SolveError
from geom.net import force_density
from geom.net.network import Network, nearest, unheld
from geom.net.pattern import Pattern, PatternError, square
from geom.net.shape import NetShape

Array = NDArray[np.float64]
Model = Callable[..., NetShape]
straight, hanging = partial(force_density.solve, straight=True), force_density.solve
MODELS = [straight, hanging]
COURT: list[list[float]] = [[0, 0, 3.5], [6, 0, 3.5], [6, 4, 3.5], [0, 4, 3.5]]
TIPPED: list[list[float]] = [[0, 0, 3], [5, 0.5, 4], [5.5, 4.5, 3.2], [-0.5, 4, 4.4]]


def held_at(pattern: Pattern, anchors: Array | NDArray[np.intp]) -> Network:
    held = np.zeros(len(pattern.nodes), dtype=np.bool_)
    held[anchors] = True
    return Network(pattern.nodes, pattern.members, held)


def line_of(nodes: Array) -> Network:
    """Return members one after another, the first and the last node held."""
    n = len(nodes)
    return Network(nodes, np.column_stack([np.arange(n - 1), np.arange(1, n)]), np.isin(np.arange(n), [0, n - 1]))


def weights_and_loads(shape: NetShape, weight: Array | float, loads: Array) -> Array:
    total = loads.sum(axis=0)
    total[2] -= np.sum(weight * shape.length)
    return np.asarray(total)


# Patterns


def test_a_square_net_has_its_corners_where_the_outline_has_them() -> None:
    pattern = square(TIPPED, divisions=(4, 3))
    assert np.array_equal(pattern.nodes[pattern.corners], np.array(TIPPED, dtype=float))


@given(st.integers(1, 12), st.integers(1, 12))
def test_a_square_net_is_one_piece_of_as_many_meshes_as_asked(nu: int, nv: int) -> None:
    pattern = square(COURT, divisions=(nu, nv))
    # Euler: nodes - members + meshes = 1 for a net in one piece.
    assert len(pattern.nodes) - len(pattern.members) + nu * nv == 1
    assert len(unheld(held_at(pattern, pattern.corners))) == 0
    assert pattern.edge.sum() == len(pattern.boundary) == 2 * (nu + nv)


def test_elevations_spread_inward_as_a_hypar() -> None:
    # z = x y is bilinear, so a net between four points of it lies on it.
    pattern = square(np.array([[0, 0, 0], [2, 0, 0], [2, 3, 6], [0, 3, 0]]), divisions=(5, 7))
    x, y, z = pattern.nodes.T
    assert z == pytest.approx(x * y, abs=1e-14)


def test_the_boundary_runs_round_the_net_from_corner_to_corner() -> None:
    pattern = square(TIPPED, divisions=(4, 3))
    ring = np.column_stack([pattern.boundary, np.roll(pattern.boundary, -1)])
    edges = {frozenset(member) for member in pattern.members[pattern.edge].tolist()}
    assert {frozenset(pair) for pair in ring.tolist()} == edges
    assert [node for node in pattern.boundary if node in pattern.corners] == pattern.corners.tolist()


@pytest.mark.parametrize(("spacing", "meshes"), [(1.0, (6, 4)), (1.3, (5, 3)), (0.25, (24, 16)), (6.0, (1, 1))])
def test_spacing_divides_each_pair_of_sides_into_the_nearest_whole_number(
    spacing: float, meshes: tuple[int, int]
) -> None:
    # 6/1.3 = 4.6 and 4/1.3 = 3.1
    assert np.array_equal(square(COURT, spacing=spacing).nodes, square(COURT, divisions=meshes).nodes)


def test_spacing_goes_by_the_longer_of_two_opposite_sides_on_plan() -> None:
    pattern = square([[0, 0, 0], [6, 0, 9], [4, 2, 0], [0, 2, 0]], spacing=1.0)
    along = np.flatnonzero(np.abs(pattern.nodes[:, 1]) < 1e-12)
    assert len(along) == 7


def test_a_court_of_6_by_4_m_without_edge_members_has_31_nodes_and_38_members() -> None:
    # Counted by hand: 15 inner nodes, 5 + 5 + 3 + 3 on the edges; 3 lines of 6 members and 5 of 4.
    pattern = square(COURT, spacing=1.0, edge_members=False)
    assert (len(pattern.nodes), len(pattern.members), len(pattern.boundary)) == (31, 38, 16)
    assert len(pattern.corners) == 0
    assert not pattern.edge.any()
    assert np.bincount(pattern.members.ravel()).min() >= 1


@given(st.floats(0, 2 * np.pi), st.floats(0.2, 5), st.booleans())
def test_meshes_of_an_outline_whose_corners_point_outward_never_fold_over(
    turn: float, stretch: float, clockwise: bool
) -> None:
    angle = turn + np.array([0.0, 1.1, 2.9, 4.4])  # four points of an ellipse: always convex
    outline = np.column_stack([stretch * np.cos(angle), np.sin(angle), np.zeros(4)])
    pattern = square(outline[::-1] if clockwise else outline, divisions=(5, 4))
    grid = pattern.nodes[:, :2].reshape(5, 6, 2)
    a, b = grid[1:, 1:] - grid[:-1, :-1], grid[1:, :-1] - grid[:-1, 1:]
    areas = a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0]
    assert np.all(areas > 0) or np.all(areas < 0)


@pytest.mark.parametrize(
    ("outline", "keys", "words"),
    [
        (COURT[:3], {"spacing": 1.0}, "has 3 corners; give the four"),
        ([*COURT, [-1, 2, 3]], {"spacing": 1.0}, "has 5 corners; give the four"),
        ([COURT[0], COURT[2], COURT[1], COURT[3]], {"spacing": 1.0}, "has two sides that cross"),
        ([[0, 0, 0], [1, 0, 0], [1, 0, 2], [0, 0, 2]], {"spacing": 1.0}, "corners 2 and 3 at one place"),
        ([[0, 0, 0], [1, 1, 0], [2, 2, 0], [3, 3, 0]], {"spacing": 1.0}, "encloses no area"),
        ([[0, 0, 0], [4, 0, 0], [1, 1, 0], [0, 4, 0]], {"spacing": 1.0}, "corner 3 pointing inward"),
        ([[0, 0, 0], [0, 4, 0], [1, 1, 0], [4, 0, 0]], {"spacing": 1.0}, "corner 3 pointing inward"),
        (COURT, {"spacing": 7.0}, "7 m does not fit an outline whose longest side is 6 m on plan"),
        (COURT, {"spacing": 0.0}, "give more than 0"),
        (COURT, {"spacing": 0.005}, "give a coarser net"),
        (COURT, {"divisions": (0, 3)}, "0 by 3 meshes make no net"),
        (COURT, {"divisions": (1, 1), "edge_members": False}, "one mesh has no member"),
        (COURT, {"divisions": (2, 2), "spacing": 1.0}, "one of the two"),
        (COURT, {}, "one of the two"),
    ],
)
def test_an_outline_that_makes_no_net_is_refused_in_words(
    outline: list[list[float]], keys: dict[str, object], words: str
) -> None:
    with pytest.raises(PatternError, match=re.escape(words)):
        square(outline, **keys)  # type: ignore[arg-type]


def test_the_nearest_node_is_found_on_plan_with_its_distance_and_mesh() -> None:
    pattern = square(COURT, spacing=1.0)
    found = nearest(pattern.nodes, pattern.members, [[2.3, 1.1, 0.0], [5.9, 4.3, 9.0], [2.5, 1.5, 3.5]])
    assert np.array_equal(pattern.nodes[found.node[:2], :2], [[2, 1], [6, 4]])
    assert found.distance[:2] == pytest.approx([np.hypot(0.3, 0.1), np.hypot(0.1, 0.3)], rel=1e-12)
    assert found.mesh == pytest.approx(1.0, rel=1e-12)
    assert found.too_far.tolist() == [False, False, True]  # the middle of a mesh is half a diagonal from any node


def test_a_part_of_the_net_that_no_anchor_holds_is_named() -> None:
    network = Network(np.zeros((5, 3)), np.array([[0, 1], [2, 3], [3, 4]]), np.arange(5) == 0)
    assert unheld(network).tolist() == [2, 3, 4]
    with pytest.raises(ValueError, match="no anchor holds the part of the net with node 2"):
        straight(network, 1.0)


@pytest.mark.parametrize("members", [[[0, 9]], [[-1, 0]], [[1, 1]]])
def test_members_between_nodes_that_are_not_there_are_refused(members: list[list[int]]) -> None:
    with pytest.raises(ValueError, match=r"members must run between|starts and ends at one node"):
        Network(np.zeros((3, 3)), np.array(members), np.arange(3) == 0)


# Equilibrium


@st.composite
def nets(draw: st.DrawFn) -> tuple[Network, Array, Array, Array]:
    """Return a net with its densities, weights per metre and loads: any quadrilateral, some anchors lifted off."""
    rng = np.random.default_rng(draw(st.integers(0, 2**32 - 1)))
    angle = rng.uniform(0, 6) + np.cumsum(rng.uniform(0.5, 1.5, 4))  # points of an ellipse in order: convex
    outline = np.column_stack([5 * np.cos(angle), 3 * np.sin(angle), rng.uniform(2, 4, 4)])
    pattern = square(outline, divisions=(draw(st.integers(1, 5)), draw(st.integers(1, 5))))
    n, m = len(pattern.nodes), len(pattern.members)
    chosen = rng.permutation(n)[: draw(st.integers(1, 4))]
    anchors = draw(st.sampled_from([pattern.corners, pattern.boundary, chosen]))
    density = np.exp(rng.uniform(np.log(5), np.log(500), m))
    return held_at(pattern, anchors), density, rng.uniform(0, 4, m), rng.normal(0, 5, (n, 3))


@pytest.mark.parametrize("model", MODELS)
@given(case=nets())
@settings(max_examples=60, deadline=None)
def test_every_free_node_balances_and_the_anchors_carry_all_weights_and_loads(
    model: Model, case: tuple[Network, Array, Array, Array]
) -> None:
    network, density, weight, loads = case
    shape = model(network, density, weight=weight, loads=loads)
    scale = float(shape.force.max() * np.ptp(shape.nodes) / max(shape.chord.min(), 1e-9)) + 1.0
    assert shape.residual <= 1e-12 * scale
    whole = weights_and_loads(shape, weight, loads)
    assert shape.reactions.sum(axis=0) == pytest.approx(whole, abs=1e-12 * scale * len(network.nodes))


@pytest.mark.parametrize("model", MODELS)
@given(case=nets(), turn=st.floats(0, 2 * np.pi), factor=st.floats(1e-3, 1e3))
@settings(max_examples=30, deadline=None)
def test_a_net_turned_mirrored_moved_and_enlarged_hangs_turned_mirrored_moved_and_enlarged(
    model: Model, case: tuple[Network, Array, Array, Array], turn: float, factor: float
) -> None:
    network, density, weight, loads = case
    mirror = np.diag([1.0, -1.0, 1.0])
    c, s = np.cos(turn), np.sin(turn)
    moved = np.array([[c, -s, 0], [s, c, 0], [0, 0, 1]]) @ mirror
    place = Network(factor * (network.nodes @ moved.T) + [7, -2, 5], network.members, network.held)
    shape = model(network, density, weight=weight, loads=loads)
    other = model(place, density, weight=weight, loads=factor * (loads @ moved.T))
    size = float(np.ptp(shape.nodes))
    assert (other.nodes - [7, -2, 5]) / factor == pytest.approx(shape.nodes @ moved.T, abs=1e-9 * size + 1e-13 / factor)
    assert other.force / factor == pytest.approx(shape.force, abs=1e-8 * shape.force.max())


@pytest.mark.parametrize("model", MODELS)
def test_a_symmetric_net_hangs_symmetrically(model: Model) -> None:
    pattern = square(COURT, divisions=(6, 4))
    shape = model(held_at(pattern, pattern.corners), 60.0, weight=6.0)
    z = shape.nodes[:, 2].reshape(5, 7)
    assert z == pytest.approx(z[::-1], abs=1e-12)
    assert z == pytest.approx(z[:, ::-1], abs=1e-12)
    assert np.abs(shape.reactions) == pytest.approx(np.tile(np.abs(shape.reactions[0]), (4, 1)), rel=1e-11)


def test_a_net_without_weight_is_the_same_hanging_and_straight() -> None:
    network = held_at(square(TIPPED, divisions=(4, 5)), np.array([0, 4, 25, 29]))
    loads = np.random.default_rng(1).normal(0, 3, (30, 3))
    one = straight(network, 20.0, loads=loads)
    other = hanging(network, 20.0, loads=loads)
    assert np.array_equal(one.nodes, other.nodes)
    assert one.force == pytest.approx(other.force, rel=1e-12)
    assert one.length == pytest.approx(other.length, rel=1e-14)


def catenary_pulls(span: float, rise: float, length: float, weight: float) -> tuple[mpf, mpf, mpf]:
    """Return H and the vertical pulls of a catenary on its two ends, found from span, rise and length by bisection.

    Independent of the code under test: parameter a from 2 a sinh(S/2a) = sqrt(L^2 - v^2), vertex from the ends' heights
    z = a cosh((x - x0)/a), slopes by sinh((x - x0)/a).
    """
    with mp.workdps(40):
        reach = mp.sqrt(mpf(length) ** 2 - mpf(rise) ** 2)
        u = mp.findroot(
            lambda u: mp.sinh(u) / u - reach / mpf(span), (mpf("1e-9"), mpf(12)), solver="bisect", maxsteps=400
        )
        a = mpf(span) / (2 * u)
        x0 = mpf(span) / 2 - a * mp.asinh(mpf(rise) / (2 * a * mp.sinh(u)))
        pull = mpf(weight) * a
        return pull, pull * mp.sinh(-x0 / a), -pull * mp.sinh((mpf(span) - x0) / a)


def test_each_hanging_member_is_a_catenary_of_its_own_length_that_pulls_as_claimed() -> None:
    rng = np.random.default_rng(7)
    network = held_at(square(TIPPED, divisions=(3, 3)), np.array([0, 3, 12, 15]))
    m = len(network.members)
    density, weight = rng.uniform(4, 60, m), rng.uniform(2, 8, m)
    shape = hanging(network, density, weight=weight, loads=rng.normal(0, 3, (16, 3)))
    for k in range(m):
        start, stop = network.members[k]
        rise = float(shape.nodes[stop, 2] - shape.nodes[start, 2])
        level, up_from, up_to = catenary_pulls(shape.plan[k], rise, shape.length[k], weight[k])
        assert shape.horizontal[k] == pytest.approx(float(level), rel=1e-9)
        assert shape.vertical[k] == pytest.approx([float(up_from), float(up_to)], rel=1e-8, abs=1e-9)
        assert shape.force[k] == pytest.approx(np.hypot(shape.horizontal[k], shape.vertical[k]), rel=1e-14)


@given(
    steps=st.lists(st.floats(0.05, 3.0), min_size=2, max_size=12),
    rise=st.floats(-3, 3),
    pull=st.floats(3, 100),
)
@settings(deadline=None)
def test_members_of_one_horizontal_pull_hang_in_one_catenary(steps: list[float], rise: float, pull: float) -> None:
    # q = H/S of each member: cut anywhere, a catenary is a line of catenaries of the same H and w.
    weight, x = 6.0, np.concatenate([[0.0], np.cumsum(steps)])
    nodes = np.column_stack([x, np.zeros_like(x), np.linspace(1, 1 + rise, len(x))])
    shape = hanging(line_of(nodes), pull / np.diff(x), weight=weight)
    a, span = pull / weight, x[-1]
    x0 = span / 2 - a * np.arcsinh(rise / (2 * a * np.sinh(span / (2 * a))))
    curve = 1 + a * (np.cosh((x - x0) / a) - np.cosh(-x0 / a))
    assert shape.nodes[:, 2] == pytest.approx(curve, abs=1e-10 * max(1.0, np.ptp(curve)))
    assert shape.horizontal == pytest.approx(pull, rel=1e-10)
    assert shape.length.sum() == pytest.approx(a * (np.sinh((span - x0) / a) - np.sinh(-x0 / a)), rel=1e-10)
    bottom = 1 + a * (1 - np.cosh(-x0 / a)) if 0 < x0 < span else min(1.0, 1 + rise)
    assert shape.lowest == pytest.approx(bottom, abs=1e-9 * max(1.0, np.ptp(curve)))


def test_the_lowest_point_of_a_member_between_level_nodes_is_its_own() -> None:
    shape = hanging(line_of(np.array([[0.0, 0, 2], [4, 0, 2]])), 3.0, weight=6.0)
    # H = 12 N, a = 2 m, sag = a (cosh 1 - 1)
    assert shape.lowest == pytest.approx(2 - 2 * (np.cosh(1) - 1), rel=1e-14)
    assert shape.length == pytest.approx([4 * np.sinh(1)], rel=1e-14)


def test_a_member_between_two_anchors_carries_only_itself() -> None:
    pattern = square(COURT, spacing=1.0)
    bare = square(COURT, spacing=1.0, edge_members=False)
    heavy = hanging(held_at(pattern, pattern.boundary), 50.0, weight=6.0)
    light = hanging(held_at(bare, bare.boundary), 50.0, weight=6.0)
    inner = np.setdiff1d(np.arange(35), pattern.boundary)
    assert heavy.nodes[inner] == pytest.approx(light.nodes[np.setdiff1d(np.arange(31), bare.boundary)], abs=1e-13)
    along = pattern.edge
    assert heavy.vertical[along] == pytest.approx(np.tile(-3.0 * heavy.length[along], (2, 1)).T, rel=1e-12)


@pytest.mark.parametrize("model", MODELS)
def test_a_net_hung_many_times_deeper_than_wide_still_balances(model: Model) -> None:
    # Here the back-solves do not converge and Newton's method takes over.
    pattern = square(COURT, divisions=(12, 8))
    weight = 6.0
    shape = model(held_at(pattern, pattern.corners), 7.0, weight=weight)
    assert shape.nodes[:, 2].min() < -60.0
    assert shape.residual <= 1e-10 * shape.force.max()
    assert shape.reactions[:, 2].sum() == pytest.approx(-weight * shape.length.sum(), rel=1e-12)


def test_a_straight_member_too_heavy_for_its_force_density_is_refused() -> None:
    # One member hanging plumb: q v = w v/2 has no answer with a load on the node.
    network = Network(np.array([[0.0, 0, 0], [0, 0, -1]]), np.array([[0, 1]]), np.array([True, False]))
    loads = np.array([[0, 0, 0], [0, 0, -2.0]])
    with pytest.raises(SolveError, match=r"too heavy|do not settle"):
        straight(network, 2.9, weight=6.0, loads=loads)
    # q = 4: q v = w v/2 + 2 gives v = 2.
    assert straight(network, 4.0, weight=6.0, loads=loads).lowest == pytest.approx(-2.0, rel=1e-11)


def test_a_weight_far_over_the_force_density_is_refused() -> None:
    with pytest.raises(SolveError, match="times the force density hangs too deep"):
        hanging(line_of(np.array([[0.0, 0, 0], [1, 0, 0], [2, 0, 0]])), 0.01, weight=6.0)


@pytest.mark.parametrize(
    ("density", "weight", "loads", "words"),
    [
        (0.0, 1.0, None, "force densities must be positive"),
        ([1.0, -2.0], 1.0, None, "force densities must be positive"),
        (np.nan, 1.0, None, "force densities must be positive"),
        (1.0, -1.0, None, "must not be negative"),
        (1.0, 1.0, np.zeros((2, 3)), "one vector for each node"),
        (1.0, 1.0, np.full((3, 3), np.inf), "finite numbers"),
    ],
)
def test_values_that_mean_nothing_are_refused(density: object, weight: float, loads: Array | None, words: str) -> None:
    network = line_of(np.array([[0.0, 0, 0], [1, 0, 0], [2, 0, 0]]))
    with pytest.raises(ValueError, match=words):
        straight(network, density, weight=weight, loads=loads)  # type: ignore[arg-type]


def test_a_net_of_anchors_only_stays_where_it_is_held() -> None:
    pattern = square(COURT, divisions=(1, 1))
    shape = hanging(held_at(pattern, pattern.corners), 50.0, weight=6.0)
    assert np.array_equal(shape.nodes, pattern.nodes)
    assert shape.residual == 0.0
    assert shape.reactions[:, 2].sum() == pytest.approx(-6.0 * shape.length.sum(), rel=1e-13)


def test_results_cannot_be_written_to() -> None:
    shape = straight(line_of(np.array([[0.0, 0, 0], [1, 0, 0], [2, 0, 0]])), 1.0)
    with pytest.raises(ValueError, match="read-only"):
        shape.nodes[0, 0] = 1.0


def test_straight_and_hanging_members_in_one_net_balance_and_each_keeps_its_own_law() -> None:
    rng = np.random.default_rng(3)
    network = held_at(square(TIPPED, divisions=(4, 4)), np.array([0, 4, 20, 24]))
    m = len(network.members)
    rods, density, weight = rng.random(m) < 0.5, rng.uniform(10, 60, m), rng.uniform(2, 8, m)
    shape = force_density.solve(network, density, weight=weight, straight=rods)
    assert shape.residual <= 1e-11 * shape.force.max()
    assert shape.length[rods] == pytest.approx(shape.chord[rods], rel=1e-14)
    assert shape.force[rods] == pytest.approx(np.tile(density[rods] * shape.length[rods], (2, 1)).T, rel=1e-12)
    assert np.all(shape.length[~rods] > shape.chord[~rods])
    assert shape.vertical[~rods].sum(axis=1) == pytest.approx(-weight[~rods] * shape.length[~rods], rel=1e-9)
    assert shape.reactions[:, 2].sum() == pytest.approx(-np.sum(weight * shape.length), rel=1e-12)
