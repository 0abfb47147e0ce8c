"""Members under loads: laws, exact limits, and independent integrations of their differential equations."""

from __future__ import annotations

from typing import Any, TypeAlias

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy import integrate

from geom.hang import elastic, sections, spread
from geom.hang.loaded import Loaded, Loads, Stocks, hang
from geom.hang.sections import Sections
from tests.boundary import loaded_member

Floats: TypeAlias = NDArray[np.float64]
solve_bvp: Any = integrate.solve_bvp


def _wire(length: float, weight: float = 12.0, stiffness: float = 3e5) -> Stocks:
    return Stocks([[length]], [[weight]], [[stiffness]])


# a span of 60 m that rises 4 m, with three loads along it
SPAN, RISE, WIRE = 60.0, 4.0, _wire(62.0)
ALONG = Loads(at=[[13.0, 31.0, 47.0]], force=[[300.0, 500.0, 250.0]])
ON_PLAN = Loads(at=[[12.0, 30.0, 45.0]], force=[[300.0, 500.0, 250.0]], on_plan=True)


def _same(one: Loaded, other: Loaded, rel: float = 1e-12) -> None:
    scale = float(np.abs(one.tension).max())
    assert one.tension == pytest.approx(other.tension, rel=rel, abs=rel * scale)
    for name in ("sag", "sag_mid", "lowest", "hung_length"):
        assert float(getattr(one, name)[0]) == pytest.approx(float(getattr(other, name)[0]), rel=rel), name


# ---------------------------------------------------------------- laws


@pytest.mark.parametrize("per_plan", [0.0, 40.0])
@pytest.mark.parametrize("on_plan", [False, True])
def test_a_load_of_nothing_changes_nothing(per_plan: float, on_plan: bool) -> None:
    bare = hang(SPAN, RISE, WIRE, spread=per_plan)
    _same(hang(SPAN, RISE, WIRE, loads=Loads([[20.0]], [[0.0]], on_plan), spread=per_plan), bare)


@pytest.mark.parametrize("per_plan", [0.0, 40.0])
@pytest.mark.parametrize("on_plan", [False, True])
def test_two_equal_loads_at_one_place_are_one_of_double(per_plan: float, on_plan: bool) -> None:
    two = hang(SPAN, RISE, WIRE, loads=Loads([[20.0, 20.0]], [[150.0, 150.0]], on_plan), spread=per_plan)
    one = hang(SPAN, RISE, WIRE, loads=Loads([[20.0]], [[300.0]], on_plan), spread=per_plan)
    _same(two, one)
    assert two.load_places[0, 1] == pytest.approx(one.load_places[0, 0], rel=1e-12)


@pytest.mark.parametrize("per_plan", [0.0, 40.0])
def test_one_stock_twice_in_series_is_that_stock_once(per_plan: float) -> None:
    twice = Stocks([[20.0, 0.0, 42.0]], [[12.0, 99.0, 12.0]], [[3e5, 1.0, 3e5]])
    _same(hang(SPAN, RISE, twice, loads=ALONG, spread=per_plan), hang(SPAN, RISE, WIRE, loads=ALONG, spread=per_plan))


def test_loads_that_are_not_there_are_left_out() -> None:
    padded = Loads([[np.nan, 13.0, 31.0, np.nan, 47.0]], [[9e9, 300.0, 500.0, np.nan, 250.0]])
    with_gaps = hang(SPAN, RISE, WIRE, loads=padded)
    _same(with_gaps, hang(SPAN, RISE, WIRE, loads=ALONG))
    assert np.isnan(with_gaps.load_arcs[0]).tolist() == [True, False, False, True, False]
    assert with_gaps.load_arcs[0, [1, 2, 4]].tolist() == [13.0, 31.0, 47.0]


@given(st.floats(0.5, 3.0), st.floats(-2.0, 2.0), st.floats(-5.0, 0.5), st.floats(2.0, 8.0))
def test_without_loads_it_is_the_elastic_catenary(span: float, slope: float, slack: float, stiff: float) -> None:
    length = span * float(np.hypot(1.0, slope)) * (1.0 + 10.0**slack)
    plain = elastic.from_unstretched(span, slope * span, length, 7.0, 10.0**stiff)
    found = hang(span, slope * span, _wire(length, 7.0, 10.0**stiff))
    # a length that exceeds the chord by a part in 1e5 leaves that many digits less of its excess
    rel = 1e-13 / min(1.0, 10.0**slack)
    assert float(found.horizontal[0]) == pytest.approx(float(plain.horizontal), rel=rel)
    assert float(found.sag[0]) == pytest.approx(float(plain.sag), rel=rel)
    assert float(found.sag_mid[0]) == pytest.approx(float(plain.sag_mid), rel=rel)
    assert float(found.hung_length[0]) == pytest.approx(float(plain.hung_length), rel=1e-13)
    assert float(found.lowest[0]) == pytest.approx(float(plain.lowest), rel=rel, abs=1e-13)


def _random(count: int, loads: int, *, plan: float, inextensible: bool, per_plan: bool) -> tuple[Any, ...]:
    """Give members from a part in 1e5 to three times longer than the chord, or shorter where they stretch."""
    rng = np.random.default_rng(count + loads)
    span = 10.0 ** rng.uniform(-0.5, 1.5, count)
    rise = span * rng.uniform(-2.0, 2.0, count)
    slack = 10.0 ** rng.uniform(-5, 0.3, count)
    short = np.where((rng.random(count) < 0.25) & (not inextensible), -1e-2 * rng.random(count), slack)
    length = np.hypot(span, rise) * (1.0 + short)
    on_plan = rng.random((count, loads)) < plan
    at = rng.random((count, loads)) * np.where(on_plan, span[:, np.newaxis], length[:, np.newaxis])
    weight, cut = 10.0 ** rng.uniform(-1, 1, (count, 2)), rng.random(count)
    stiffness = np.full((count, 2), np.inf) if inextensible else 10.0 ** rng.uniform(3, 8, (count, 2))
    lengths = length[:, np.newaxis] * np.stack([cut, 1.0 - cut], axis=1)
    force = 10.0 ** rng.uniform(-1, 2, (count, loads))
    even = 10.0 ** rng.uniform(-1, 2, count) * per_plan
    return span, rise, lengths, weight, stiffness, at, force, on_plan, even


@pytest.mark.parametrize("per_plan", [False, True])
@pytest.mark.parametrize("inextensible", [False, True])
@pytest.mark.parametrize("plan", [0.0, 0.5, 1.0])
def test_wild_members_in_two_stocks_all_hang_in_equilibrium(plan: float, inextensible: bool, per_plan: bool) -> None:
    span, rise, length, weight, stiffness, at, force, on_plan, even = _random(
        400, 3, plan=plan, inextensible=inextensible, per_plan=per_plan
    )
    hung = hang(span, rise, Stocks(length, weight, stiffness), loads=Loads(at, force, on_plan), spread=even)
    total, end = length.sum(axis=1), hung.course.nodes[:, -1]
    assert (np.hypot(end[:, 0] - span, end[:, 2] - rise) / total).max() < 1e-12
    places = np.where(on_plan, hung.load_places[..., 0], hung.load_arcs)
    assert (np.abs(places - at) / total[:, np.newaxis]).max() < 1e-13
    weighs = (length * weight).sum(axis=1) + force.sum(axis=1) + even * span
    greatest = np.abs(hung.tension).max(axis=1) + weighs
    assert (np.abs(hung.pull_from[:, 2] + hung.pull_to[:, 2] + weighs) / greatest).max() < 1e-13
    assert (np.abs(hung.pull_from[:, 0] + hung.pull_to[:, 0]) / greatest).max() < 1e-14
    jump = hung.load_tensions[:, :, 0] - hung.load_tensions[:, :, 1]
    assert (np.abs(jump[..., 2] + force) / greatest[:, np.newaxis]).max() < 1e-14


def test_loads_on_plan_hang_as_the_same_loads_at_the_arcs_that_were_found() -> None:
    kept = hang(SPAN, RISE, WIRE, loads=ON_PLAN)
    assert kept.load_places[0, :, 0] == pytest.approx([12.0, 30.0, 45.0], rel=1e-14)
    again = hang(SPAN, RISE, WIRE, loads=Loads(kept.load_arcs, ON_PLAN.force))
    _same(again, kept)
    assert again.load_places == pytest.approx(kept.load_places, rel=1e-13, abs=1e-12)


def test_mirrored_supports_and_loads_mirror_the_member() -> None:
    there = hang(SPAN, -RISE, WIRE, loads=Loads([[15.0, 31.0, 49.0]], [[250.0, 500.0, 300.0]]), spread=9.0)
    here = hang(SPAN, RISE, WIRE, loads=ALONG, spread=9.0)
    assert there.pull_to * [-1.0, 1.0, 1.0] == pytest.approx(here.pull_from, rel=1e-12)
    assert float(there.sag[0]) == pytest.approx(float(here.sag[0]), rel=1e-12)
    assert float(there.sag_point[0, 0]) == pytest.approx(SPAN - float(here.sag_point[0, 0]), rel=1e-11)


@pytest.mark.parametrize("per_plan", [0.0, 25.0])
def test_sag_lowest_point_and_length_are_those_of_many_points(per_plan: float) -> None:
    hung = hang(SPAN, RISE, WIRE, loads=ALONG, spread=per_plan)
    points = hung.at_arc(np.linspace(0.0, 62.0, 40_001))[0]
    under = points[:, 0] * RISE / SPAN - points[:, 2]
    # between points of a smooth piece the sag changes by the square of their distance; at a load by the slope
    assert float(hung.sag[0]) == pytest.approx(under.max(), abs=1e-3)
    assert float(hung.sag[0]) >= under.max() - 1e-12
    assert float(hung.lowest[0]) == pytest.approx(points[:, 2].min(), abs=1e-3)
    assert float(hung.lowest[0]) <= points[:, 2].min() + 1e-12
    steps = np.linalg.norm(np.diff(points, axis=0), axis=1)
    assert float(hung.hung_length[0]) == pytest.approx(steps.sum(), rel=1e-6)
    half = hung.at_plan([[30.0]])[0, 0]
    assert half[0] == pytest.approx(30.0, rel=1e-13)
    assert float(hung.sag_mid[0]) == pytest.approx(0.5 * RISE - half[2], rel=1e-14)
    assert half[2] == pytest.approx(np.interp(30.0, points[:, 0], points[:, 2]), abs=1e-5)


def test_within_a_section_the_pull_falls_by_the_energy_stored() -> None:
    hung = hang(SPAN, RISE, WIRE, loads=ALONG)
    start, end = (np.linalg.norm(part[0], axis=1) for part in (hung.course.before, hung.course.after))
    stored = (end - start) * (1.0 + (end + start) / 6e5)
    assert stored == pytest.approx(12.0 * np.diff(hung.course.nodes[0, :, 2]), rel=1e-11, abs=1e-10)


# ---------------------------------------------------------------- limits


def test_a_weightless_member_under_a_spread_load_is_a_parabola() -> None:
    """H = q S^2/8f and sag 4 f x (S - x)/S^2, for a length that is the parabola's."""
    span, sag, load = 20.0, 3.0, 75.0
    k = 4.0 * sag / span
    length = 0.5 * span * (np.sqrt(1.0 + k * k) + np.arcsinh(k) / k)
    hung = hang(span, 0.0, _wire(length, 0.0, np.inf), spread=load)
    assert float(hung.horizontal[0]) == pytest.approx(load * span**2 / (8.0 * sag), rel=1e-12)
    assert float(hung.sag[0]) == pytest.approx(sag, rel=1e-12)
    assert hung.at_plan([[5.0]])[0, 0, 2] == pytest.approx(-0.75 * sag, rel=1e-12)


def test_a_steady_side_wind_tilts_a_level_member_as_a_whole() -> None:
    still = elastic.from_unstretched(40.0, 0.0, 43.0, np.hypot(8.0, 6.0), 1e5)
    blown = hang(40.0, 0.0, Stocks([[43.0]], [[8.0]], [[1e5]], aside=6.0))
    assert float(blown.horizontal[0]) == pytest.approx(float(still.horizontal), rel=1e-12)
    assert blown.sag_point[0] == pytest.approx([20.0, 0.6 * float(still.sag), -0.8 * float(still.sag)], rel=1e-12)
    assert blown.pull_from[0, 1:] == pytest.approx([43.0 * 3.0, -43.0 * 4.0], rel=1e-12)


def test_wind_on_the_member_and_on_its_loads_is_carried_by_both_supports() -> None:
    loads = Loads([[13.0, 31.0]], [[300.0, 500.0]], aside=[[40.0, -90.0]])
    blown = hang(SPAN, RISE, Stocks([[62.0]], [[12.0]], [[3e5]], aside=5.0), loads=loads)
    assert blown.course.nodes[0, -1] == pytest.approx([SPAN, 0.0, RISE], abs=1e-11)
    assert (blown.pull_from + blown.pull_to)[0] == pytest.approx(
        [0.0, 62.0 * 5.0 - 50.0, -62.0 * 12.0 - 800.0], rel=1e-12, abs=1e-9
    )


def test_a_plumb_member_carries_loads_on_its_slack_strands() -> None:
    """Two strands: 5 m and 3 m of them down to one level, with a load on each."""
    hung = hang(0.0, 2.0, _wire(8.0, 10.0, np.inf), loads=Loads([[1.0, 7.0]], [[20.0, 30.0]]))
    assert hung.pull_from[0] == pytest.approx([0.0, 0.0, -50.0], rel=1e-12, abs=1e-12)
    assert hung.pull_to[0] == pytest.approx([0.0, 0.0, -80.0], rel=1e-12, abs=1e-12)
    assert hung.load_places[0, :, 2] == pytest.approx([-1.0, 1.0], rel=1e-12)
    assert float(hung.lowest[0]) == pytest.approx(-3.0, rel=1e-12)
    assert float(hung.sag[0]) == pytest.approx(5.0, rel=1e-12)


def test_a_heavy_load_draws_a_light_member_into_two_straight_pieces() -> None:
    hung = hang(3.0, 0.0, _wire(5.0, 1e-6, np.inf), loads=Loads([[2.5]], [[100.0]]))
    assert hung.load_places[0, 0] == pytest.approx([1.5, 0.0, -2.0], rel=1e-6, abs=1e-12)
    assert float(hung.horizontal[0]) == pytest.approx(37.5, rel=1e-6)


# ---------------------------------------------------------------- independent solutions


@pytest.mark.parametrize("aside", [0.0, 5.0])
def test_loads_with_stretch_and_wind_agree_with_a_boundary_value_solver(aside: float) -> None:
    bounds, forces = np.array([0.0, 13.0, 31.0, 47.0, 62.0]), np.array([300.0, 500.0, 250.0])
    problem = loaded_member(bounds, forces, np.array([SPAN, 0.0, RISE]), np.array([0.0, aside, -12.0]), 3e5)
    solved = solve_bvp(*problem, tol=1e-9, max_nodes=20_000)
    assert solved.success
    hung = hang(SPAN, RISE, Stocks([[62.0]], [[12.0]], [[3e5]], aside=aside), loads=ALONG)
    assert hung.tension[0] == pytest.approx(solved.y[3:6, 0], rel=1e-9, abs=1e-7)
    places = np.array([solved.y[6 * k : 6 * k + 3, 0] for k in (1, 2, 3)])
    assert hung.load_places[0] == pytest.approx(places, abs=1e-8)


def test_spread_load_with_stretch_agrees_with_a_boundary_value_solver() -> None:
    """d(arc)/dx = sqrt(1 + p^2)/(1 + T/EA), H dp/dx = q + w d(arc)/dx, in three stretches between two loads on plan."""
    weight, stiffness, load = 12.0, 3e5, 35.0
    bounds, forces = np.array([0.0, 20.0, 44.0, SPAN]), np.array([300.0, 500.0])
    pieces = np.diff(bounds)

    def right(unit: Floats, y: Floats, unknown: Floats) -> Floats:
        out = np.zeros_like(y)
        for k, length in enumerate(pieces):
            secant = np.sqrt(1.0 + y[3 * k + 1] ** 2)
            arc = secant / (1.0 + unknown[0] * secant / stiffness)
            slopes = y[3 * k + 1], (load + weight * arc) / unknown[0], arc
            for row, slope in enumerate(slopes):
                out[3 * k + row] = length * slope
        return out

    def ends(first: Floats, last: Floats, unknown: Floats) -> Floats:
        gaps = [first[[0, 2]]]
        for k, force in enumerate(forces):
            gap = first[3 * k + 3 : 3 * k + 6] - last[3 * k : 3 * k + 3]
            gaps.append(gap - np.r_[0.0, force / unknown[0], 0.0])
        return np.concatenate([*gaps, last[[6, 8]] - [RISE, 62.0]])

    unit = np.linspace(0.0, 1.0, 11)
    start = np.zeros((9, unit.size))
    for k in range(3):
        x = (bounds[k] + unit * pieces[k]) / SPAN
        start[3 * k : 3 * k + 3] = RISE * x - 28.0 * x * (1.0 - x), -0.4 + 0.9 * x, 62.0 * x
    solved = solve_bvp(right, ends, unit, start, p=[4000.0], tol=1e-9, max_nodes=20_000)
    assert solved.success
    hung = hang(SPAN, RISE, _wire(62.0), loads=Loads([[20.0, 44.0]], [forces], True), spread=load)
    assert float(hung.horizontal[0]) == pytest.approx(solved.p[0], rel=1e-9)
    assert float(hung.tension[0, 2]) == pytest.approx(solved.p[0] * solved.y[1, 0], rel=1e-8)
    assert hung.load_arcs[0] == pytest.approx(solved.y[[5, 8], 0], rel=1e-9)
    assert hung.load_places[0, :, 2] == pytest.approx(solved.y[[3, 6], 0], rel=1e-8)


def test_spread_load_and_wind_agree_with_a_boundary_value_solver() -> None:
    """Cut into 32 pieces a stock is off by a part of some 1e-5."""
    weight, stiffness, load, aside = 12.0, 3e5, 35.0, 8.0

    def right(unit: Floats, y: Floats) -> Floats:
        give = 1.0 / stiffness + 1.0 / np.sqrt((y[3:] ** 2).sum(axis=0))
        moved = y[3:] * give
        vertical = weight + load * moved[0]
        return 62.0 * np.stack([*moved, 0.0 * unit, -aside + 0.0 * unit, vertical])

    def ends(first: Floats, last: Floats) -> Floats:
        return np.concatenate([first[:3], last[:3] - [SPAN, 0.0, RISE]])

    unit = np.linspace(0.0, 1.0, 15)
    start = np.stack(
        [
            SPAN * unit,
            0.0 * unit,
            RISE * unit - 20.0 * unit * (1.0 - unit),
            3000.0 + 0.0 * unit,
            0.0 * unit,
            2500.0 * unit - 1200.0,
        ]
    )
    solved = solve_bvp(right, ends, unit, start, tol=1e-9, max_nodes=20_000)
    assert solved.success
    hung = hang(SPAN, RISE, Stocks([[62.0]], [[weight]], [[stiffness]], aside=aside), spread=load)
    assert hung.tension[0] == pytest.approx(solved.y[3:, 0], rel=5e-5)
    assert float(hung.sag[0]) == pytest.approx(float(np.max(RISE * unit_at(solved) - solved.sol(UNIT)[2])), rel=5e-5)


UNIT = np.linspace(0.0, 1.0, 2001)


def unit_at(solved: object) -> Floats:
    """Give the plan fractions of the fine points of a solution."""
    x: Floats = solved.sol(UNIT)[0] / SPAN  # type: ignore[attr-defined]
    return x


def test_a_section_and_its_flexibility_agree_with_integrals_of_forty_digits() -> None:
    rng = np.random.default_rng(8)
    own = Sections(
        rng.uniform(0.1, 3.0, (3, 2)),
        10.0 ** rng.uniform(1, 4, (3, 2)),
        rng.normal(size=(3, 2, 3)),
        np.zeros((3, 2, 3)),
    )
    part, tension = sections.law(own), 3.0 * rng.normal(size=(3, 3))
    reached, flexibility = sections.reach_and_flexibility(part, tension[:, np.newaxis] - part.lost)
    exact_reach, exact_flexibility = (np.zeros_like(values) for values in (reached, flexibility))
    with mpmath.workdps(30):
        for member in range(3):
            for piece in range(2):
                r, c = _integrals(own, sections.starts(own, tension), member, piece)
                exact_reach[member] += r
                exact_flexibility[member] += c
    assert reached == pytest.approx(exact_reach, rel=1e-13, abs=1e-14)
    assert flexibility == pytest.approx(exact_flexibility, rel=1e-12, abs=1e-13)


def _integrals(own: Sections, starts: Floats, member: int, piece: int) -> tuple[Floats, Floats]:
    """Give int (1/EA + 1/T) F ds and its derivative by F, int (1/EA + 1/T) I - F F'/T^3 ds."""
    start, load = ([mpmath.mpf(float(x)) for x in part[member, piece]] for part in (starts, own.load))
    length, ea = (mpmath.mpf(float(part[member, piece])) for part in (own.length, own.stiffness))

    def at(s: mpmath.mpf) -> tuple[list[mpmath.mpf], mpmath.mpf]:
        force = [f - w * s for f, w in zip(start, load, strict=True)]
        return force, mpmath.sqrt(sum(f * f for f in force))

    def reach(i: int) -> float:
        return float(mpmath.quad(lambda s: at(s)[0][i] * (1 / ea + 1 / at(s)[1]), [0, length / 2, length]))

    def give(i: int, j: int) -> float:
        def inner(s: mpmath.mpf) -> mpmath.mpf:
            force, pull = at(s)
            return (1 / ea + 1 / pull) * (i == j) - force[i] * force[j] / pull**3

        return float(mpmath.quad(inner, [0, length / 2, length]))

    return np.array([reach(i) for i in range(3)]), np.array([[give(i, j) for j in range(3)] for i in range(3)])


@pytest.mark.parametrize("ratio", [0.0, 1e-6, 0.3, 0.999, 1.0, 1.001, 40.0, 1e8])
@pytest.mark.parametrize("angles", [(-1.1, 0.3), (-2.5, 2.0), (0.4, 0.4001), (3.0, 5.5), (1.0, -2.0)])
@pytest.mark.parametrize("beta", [0.0, 1e-3, 0.4])
def test_spread_sections_agree_with_integrals_of_thirty_digits(
    ratio: float, angles: tuple[float, float], beta: float
) -> None:
    """For every ratio of own weight to spread load, from the parabola to the catenary."""
    h, q = 700.0, 5.0 if ratio < 1e8 else 0.0
    w = ratio * 5.0 if ratio < 1e8 else 5.0
    stock = spread.Stock(*(np.array([value]) for value in (h, w, q, beta)))
    first, turn = np.array([angles[0]]), np.array([angles[1] - angles[0]])
    between, stretched = spread.extent(stock, first, turn), spread.stretched_length(stock, first, turn)
    with mpmath.workdps(30):
        end = mpmath.mpf(float(first[0])) + mpmath.mpf(float(turn[0]))

        def integral(over: object) -> float:
            def inner(phi: mpmath.mpf) -> mpmath.mpf:
                cosh = mpmath.cosh(phi)
                return h * over(phi, cosh) / (q + (w + mpmath.mpf(beta) * q) * cosh)  # type: ignore[operator]

            return float(mpmath.quad(inner, [mpmath.mpf(float(first[0])), end]))

        exact = [
            integral(lambda _, c: c * (1 + beta * c)),
            integral(lambda f, c: mpmath.sinh(f) * c * (1 + beta * c)),
            integral(lambda _, c: c * c),
            integral(lambda _, c: c * c * (1 + beta * c)),
        ]
    computed = [float(value[0]) for value in (*between, stretched)]
    assert computed == pytest.approx(exact, rel=2e-14, abs=2e-14 * abs(exact[2]))
    assert float(spread.turn_of_plan(stock, first, between.plan)[0]) == pytest.approx(float(turn[0]), rel=1e-13)
    assert float(spread.turn_of_length(stock, first, between.length)[0]) == pytest.approx(float(turn[0]), rel=1e-13)


# ---------------------------------------------------------------- what cannot be


@pytest.mark.parametrize(
    "changed",
    [
        {"length": 60.0, "stiffness": np.inf},
        {"length": np.nan},
        {"weight": -1.0},
        {"at": 70.0},
        {"at": -1.0},
        {"on_plan": True, "at": 61.0},
        {"rise": np.inf},
        {"span": -3.0},
        {"spread": -1.0},
    ],
)
def test_what_cannot_hang_is_nan_and_leaves_its_neighbours_alone(changed: dict[str, float]) -> None:
    good = {
        "span": SPAN,
        "rise": RISE,
        "length": 62.0,
        "weight": 12.0,
        "stiffness": 3e5,
        "at": 20.0,
        "force": 90.0,
        "spread": 0.0,
        "on_plan": False,
    }
    rows = {name: np.array([value, changed.get(name, value)]) for name, value in good.items()}
    column = {name: values[:, np.newaxis] for name, values in rows.items()}
    stocks = Stocks(column["length"], column["weight"], column["stiffness"])
    loads = Loads(column["at"], column["force"], column["on_plan"] != 0.0)
    both = hang(rows["span"], rows["rise"], stocks, loads=loads, spread=rows["spread"])
    alone = hang(SPAN, RISE, WIRE, loads=Loads([[20.0]], [[90.0]]))
    for name in ("horizontal", "sag", "sag_mid", "lowest", "hung_length", "length"):
        values = getattr(both, name)
        assert np.isnan(values[1]), name
        assert values[0] == pytest.approx(float(getattr(alone, name)[0]), rel=1e-13), name


def test_a_load_kept_on_plan_is_refused_in_wind() -> None:
    with pytest.raises(ValueError, match="on plan in a side wind"):
        hang(SPAN, RISE, Stocks([[62.0]], [[12.0]], [[3e5]], aside=1.0), loads=ON_PLAN)
    with pytest.raises(ValueError, match="broadcast"):
        hang(np.ones(2), 0.0, Stocks(np.ones((3, 1)), 1.0, 1.0))


def test_no_loads_and_many_members_broadcast() -> None:
    hung = hang(np.linspace(5.0, 9.0, 4), 0.0, Stocks([[10.0]], [[3.0]], [[1e4]]))
    assert hung.sag.shape == (4,)
    assert hung.load_arcs.shape == (4, 0)
    assert (np.diff(hung.sag) < 0.0).all()
