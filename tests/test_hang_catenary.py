"""Solved members against 60-digit arithmetic (mpmath), their exact limits, and what cannot hang."""

from __future__ import annotations

import doctest
from collections.abc import Callable, Iterator
from functools import cache
from typing import Any

import mpmath
import numpy as np
import pytest
from numpy.typing import NDArray

from geom.hang import catenary
from geom.hang.catenary import Hang

Floats = NDArray[np.float64]
SOLVES: dict[str, Callable[..., Hang]] = {
    "length": catenary.from_length,
    "excess": catenary.from_excess,
    "sag": catenary.from_sag,
    "sag_mid": catenary.from_sag_mid,
    "lowest": catenary.from_lowest,
    "parameter": catenary.from_parameter,
}


def _exact(span: float, rise: float, excess: float) -> dict[str, mpmath.mpf]:
    """Solve one member from the textbook equations y = a cosh(x/a), with numbers that can bear cancellation."""
    s, v = mpmath.mpf(span), mpmath.mpf(rise)
    length = mpmath.sqrt(s * s + v * v) + mpmath.mpf(excess)
    stretch = mpmath.sqrt(length * length - v * v) / s
    u = _half_angle(stretch)
    a, middle = s / (2 * u), mpmath.atanh(v / length)
    left, right = middle - u, middle + u
    slope = mpmath.asinh(v / s)

    def height(x: mpmath.mpf) -> mpmath.mpf:
        return a * (mpmath.cosh(left + x / a) - mpmath.cosh(left))

    sag_at = a * (slope - left)
    vertex = -a * left
    lowest_at = min(max(vertex, mpmath.mpf(0)), s)
    return {
        "length": length,
        "u": u,
        "parameter": a,
        "sag": v * sag_at / s - height(sag_at),
        "sag_at": sag_at,
        "sag_mid": v / 2 - height(s / 2),
        "vertex_at": vertex,
        "lowest_at": lowest_at,
        "below_from": -height(lowest_at),
        "below_to": v - height(lowest_at),
        "slope_from": -mpmath.atan(mpmath.sinh(left)),
        "slope_to": mpmath.atan(mpmath.sinh(right)),
        "at_from": a * mpmath.cosh(left),
        "at_to": a * mpmath.cosh(right),
        "vertical_from": -a * mpmath.sinh(left),
        "vertical_to": a * mpmath.sinh(right),
        "y_third": height(mpmath.mpf(span / 3)),
        "arc_third": a * (mpmath.sinh(left + mpmath.mpf(span / 3) / a) - mpmath.sinh(left)),
    }


def _half_angle(stretch: mpmath.mpf) -> mpmath.mpf:
    s = mpmath.log(stretch)
    u = mpmath.sqrt(6 * s) if s < 1 else s + mpmath.log(2 * s + 2)
    for _ in range(80):
        step = (mpmath.log(mpmath.sinh(u) / u) - s) / (mpmath.coth(u) - 1 / u)
        u -= step
        if abs(step) < mpmath.mpf(10) ** -30 * u:
            return u
    raise AssertionError("the reference did not converge")


def _sweep() -> Floats:
    """Give (n, 3) spans, level differences and excesses: 1e-12 of the chord to a thousand spans, steep and level."""
    slopes = [0.0, 1e-6, 0.02, -0.3, 1.0, -4.0, 60.0, 1e4]
    slacks = [1e-12, 1e-9, 1e-6, 1e-4, 3e-3, 0.05, 0.3, 1.0, 2.7, 30.0, 1000.0]
    rows = [(2.7, 2.7 * m, 2.7 * np.hypot(1.0, m) * e) for m in slopes for e in slacks]
    nearly_plumb = [(s, v, e) for s in (1e-3, 1e-6, 1e-12, 1e-100, 1e-250) for v, e in ((1.0, 1.0), (-0.4, 1e-3))]
    return np.array(rows + nearly_plumb)


SWEEP = _sweep()


@pytest.fixture(scope="module", autouse=True)
def sixty_digits() -> Iterator[None]:
    with mpmath.workdps(60):
        yield


@cache
def _exact_sweep() -> list[dict[str, mpmath.mpf]]:
    return [_exact(*(float(x) for x in row)) for row in SWEEP]


def _errors(name: str, computed: Floats, scale: str | None = None) -> Floats:
    """Give the errors of a quantity, over its own size or over that of another quantity."""
    return np.array(
        [
            float(abs(mpmath.mpf(float(c)) - exact[name]) / max(abs(exact[scale or name]), mpmath.mpf(10) ** -300))
            for c, exact in zip(computed, _exact_sweep(), strict=True)
        ]
    )


@pytest.fixture(scope="module")
def swept() -> Hang:
    return catenary.from_excess(SWEEP[:, 0], SWEEP[:, 1], SWEEP[:, 2])


@pytest.mark.parametrize("name", ["u", "parameter", "length", "sag", "sag_mid"])
def test_shape_is_right_to_1e_14_where_the_excess_is_given(swept: Hang, name: str) -> None:
    assert _errors(name, getattr(swept, name)).max() < 1e-14


@pytest.mark.parametrize("name", ["sag_at", "lowest_at"])
def test_places_are_right_to_1e_13_of_the_span(swept: Hang, name: str) -> None:
    error = np.array(
        [
            float(abs(mpmath.mpf(float(c)) - exact[name]) / mpmath.mpf(float(span)))
            for c, exact, span in zip(getattr(swept, name), _exact_sweep(), SWEEP[:, 0], strict=True)
        ]
    )
    assert error.max() < 1e-13


def test_vertex_is_right_also_where_it_is_far_outside_the_span(swept: Hang) -> None:
    assert _errors("vertex_at", swept.vertex_at).max() < 1e-12


@pytest.mark.parametrize("name", ["below_from", "below_to"])
def test_depth_of_the_lowest_point_is_right(swept: Hang, name: str) -> None:
    assert _errors(name, getattr(swept, name), "length").max() < 1e-14


@pytest.mark.parametrize("name", ["slope_from", "slope_to"])
def test_end_slopes_are_right(swept: Hang, name: str) -> None:
    exact = np.array([float(row[name]) for row in _exact_sweep()])
    assert getattr(swept, name) == pytest.approx(exact, rel=1e-12, abs=1e-13)


@pytest.mark.parametrize("end", ["from", "to"])
def test_end_pulls_are_right_also_at_the_lower_end_of_a_steep_taut_member(swept: Hang, end: str) -> None:
    pulls = swept.pulls(1.0)
    assert _errors(f"at_{end}", getattr(pulls, f"at_{end}")).max() < 1e-12
    assert _errors(f"vertical_{end}", getattr(pulls, f"vertical_{end}"), f"at_{end}").max() < 1e-12


def test_points_are_right_against_the_textbook_equation(swept: Hang) -> None:
    third = (swept.span / 3.0)[:, np.newaxis]
    assert _errors("y_third", swept.at_plan(third).elevation[:, 0], "length").max() < 1e-12
    assert _errors("arc_third", swept.arc_at(third)[:, 0]).max() < 1e-12


def test_length_gives_what_the_exact_excess_of_its_digits_gives() -> None:
    rng = np.random.default_rng(20)
    span, rise = rng.uniform(0.5, 50.0, 400), rng.uniform(-30.0, 30.0, 400)
    length = np.hypot(span, rise) * (1.0 + 10.0 ** rng.uniform(-12.0, 1.0, 400))
    excess = catenary.from_length(span, rise, length).excess
    for row in zip(span, rise, length, excess, strict=True):
        s, v, given, found = (mpmath.mpf(float(x)) for x in row)
        exact = given - mpmath.sqrt(s * s + v * v)
        # 1.2e-16 of the chord is 1.2e-12 of the excess where the correction ends, at a slack of 1e-4
        assert float(abs(found / exact - 1)) < 1.3e-12


@pytest.mark.parametrize("name", ["sag", "sag_mid", "parameter"])
def test_every_fact_finds_the_member_it_was_taken_from(swept: Hang, name: str) -> None:
    # a steep member of moderate sag is not to be told by its sag alone: its u is, its excess is not
    common = (SWEEP[:, 0] > 1e-4) & (np.abs(SWEEP[:, 1]) < 100.0 * SWEEP[:, 0])
    found = SOLVES[name](SWEEP[common, 0], SWEEP[common, 1], getattr(swept, name)[common])
    assert found.u == pytest.approx(swept.u[common], rel=1e-12)
    assert found.excess == pytest.approx(swept.excess[common], rel=1e-11)


def test_a_given_sag_is_met_on_any_slope_from_1e_9_to_1e6_chords() -> None:
    rise, depth = np.meshgrid([0.0, 0.1, -1.0, 30.0, 1e6], np.logspace(-9, 6, 61))
    chord = np.hypot(1.0, rise)
    assert catenary.from_sag(1.0, rise, depth * chord).sag == pytest.approx(depth * chord, rel=2e-14)
    assert catenary.from_sag_mid(1.0, rise, depth * chord).sag_mid == pytest.approx(depth * chord, rel=2e-14)


def test_a_given_lowest_point_is_met_from_nearly_level_to_nearly_plumb() -> None:
    rise, depth = np.meshgrid([0.0, 1e-6, -0.1, 3.0, -1e6], np.logspace(-9, 6, 61))
    hang = catenary.from_lowest(1.0, rise, depth)
    below_lower = np.where(rise > 0.0, hang.below_from, hang.below_to)
    assert below_lower == pytest.approx(depth, rel=1e-11)
    assert np.all((hang.vertex_at > 0.0) & (hang.vertex_at < 1.0))


def test_two_strands_hang_from_supports_on_one_plumb_line() -> None:
    for hang in (catenary.from_length(0.0, [2.0, -2.0], 5.0), catenary.from_lowest(0.0, [2.0, -2.0], 1.5)):
        pulls = hang.pulls(10.0)
        assert hang.length.tolist() == [5.0, 5.0]
        assert hang.excess.tolist() == [3.0, 3.0]
        assert hang.parameter.tolist() == [0.0, 0.0]
        assert hang.lowest.tolist() == [-1.5, -3.5]
        assert hang.lowest_at.tolist() == [0.0, 0.0]
        assert pulls.horizontal.tolist() == [0.0, 0.0]
        assert pulls.at_from.tolist() == [15.0, 35.0]
        assert pulls.vertical_to.tolist() == [35.0, 15.0]
        assert np.degrees(hang.slope_from) == pytest.approx([90.0, 90.0], rel=1e-15)
        points = hang.at_length([0.0, 1.0, 5.0])
        assert points.plan.tolist() == [[0.0, 0.0, 0.0]] * 2
        assert points.elevation.tolist() == [[0.0, -1.0, 2.0], [0.0, -1.0, -2.0]]


def test_a_narrow_span_tends_to_two_strands() -> None:
    narrow, plumb = catenary.from_length(1e-9, 2.0, 5.0), catenary.from_length(0.0, 2.0, 5.0)
    assert narrow.lowest == pytest.approx(float(plumb.lowest), rel=1e-9)
    assert narrow.pulls(1.0).at_to == pytest.approx(float(plumb.pulls(1.0).at_to), rel=1e-9)


def test_an_exactly_taut_member_is_straight_and_pulls_without_bound() -> None:
    hang = catenary.from_length([4.0, 3.0, 3.0], [0.0, 4.0, -4.0], [4.0, 5.0, 5.0])
    pulls = hang.pulls(2.0)
    assert hang.excess.tolist() == [0.0, 0.0, 0.0]
    assert hang.sag.tolist() == [0.0, 0.0, 0.0]
    assert np.isposinf(hang.parameter).all()
    assert np.isposinf([pulls.horizontal, pulls.at_from, pulls.at_to]).all()
    assert pulls.vertical_from.tolist() == [4.0, -np.inf, np.inf]
    assert hang.lowest.tolist() == [0.0, 0.0, -4.0]
    assert hang.slope_to == pytest.approx([0.0, np.arctan2(4.0, 3.0), -np.arctan2(4.0, 3.0)], abs=1e-16)
    assert hang.sag_at.tolist() == [2.0, 1.5, 1.5]
    assert hang.at_plan([1.5]).elevation[:, 0] == pytest.approx([0.0, 2.0, -2.0], rel=1e-15, abs=1e-16)
    assert hang.at_length([2.5]).plan[:, 0] == pytest.approx([2.5, 1.5, 1.5], rel=1e-15)


def test_a_chord_rounded_to_the_last_digit_counts_as_taut() -> None:
    span, rise = np.linspace(0.1, 7.0, 200), np.linspace(-3.0, 5.0, 200)
    assert np.all(catenary.from_length(span, rise, np.sqrt(span**2 + rise**2)).excess == 0.0)


IMPOSSIBLE: list[tuple[str, float, float, float]] = [
    ("length", 3.0, 4.0, 4.999999),
    ("length", 1.0, 0.0, -5.0),
    ("length", -1.0, 0.0, 2.0),
    ("length", 0.0, 2.0, 1.0),
    ("length", 0.0, 0.0, 1.0),
    ("length", 1.0, np.nan, 2.0),
    ("length", 1.0, 0.0, np.inf),
    ("excess", 1.0, 0.5, -1e-15),
    ("sag", 1.0, 0.0, -0.1),
    ("sag", 0.0, 1.0, 2.0),
    ("sag", -1.0, 0.0, 0.1),
    ("sag_mid", 1.0, 0.0, -0.1),
    ("sag_mid", 0.0, 1.0, 2.0),
    ("lowest", 1.0, 0.0, 0.0),
    ("lowest", 1.0, 0.0, -1.0),
    ("lowest", 0.0, 0.0, 1.0),
    ("lowest", -1.0, 0.0, 1.0),
    ("parameter", 0.0, 1.0, 1.0),
    ("parameter", 1.0, 0.0, 0.0),
    ("parameter", 1.0, 0.0, -1.0),
    ("parameter", 1.0, 0.0, 1e-5),
]


@pytest.mark.parametrize(("fact", "span", "rise", "value"), IMPOSSIBLE)
def test_what_cannot_hang_is_nan_throughout_and_leaves_its_neighbours_alone(
    fact: str, span: float, rise: float, value: float
) -> None:
    good = {"length": 3.0, "excess": 1.0, "sag": 0.5, "sag_mid": 0.5, "lowest": 0.5, "parameter": 1.0}[fact]
    hang = SOLVES[fact]([2.0, span, 2.0], [0.3, rise, 0.3], [good, value, good])
    pulls, points = hang.pulls(9.0), hang.at_length([0.0, 0.1])
    everything: list[Any] = [getattr(hang, name) for name in (*Hang.__dataclass_fields__, "sag", "sag_mid", "sag_at")]
    everything += [hang.lowest, hang.lowest_at, hang.vertex_at, hang.slope_from, hang.slope_to, hang.chord]
    everything += [getattr(pulls, name) for name in pulls.__dataclass_fields__]
    everything += [points.plan[:, 1], points.elevation[:, 1], hang.arc_at([0.1])[:, 0], hang.below_to]
    for values in everything:
        assert np.isnan(values[1])
        assert np.isfinite(values[[0, 2]]).all()
        assert values[0] == values[2]


def test_the_examples_of_the_module_run() -> None:
    results = doctest.testmod(catenary)
    assert results.attempted > 0
    assert results.failed == 0


def test_numbers_give_arrays_without_axes_and_shapes_broadcast() -> None:
    single = catenary.from_length(2, 0, 3)
    assert isinstance(single.lowest_at, np.ndarray)
    assert single.sag.shape == single.pulls(1).at_to.shape == ()
    table = catenary.from_length(np.full((3, 1), 2.0), 0.5, np.linspace(2.5, 4.0, 4))
    assert table.span.shape == table.sag.shape == table.pulls(np.ones(4)).horizontal.shape == (3, 4)
    assert table.at_plan(1.0).elevation.shape == (3, 4)
    assert table.at_plan([0.5, 1.0]).elevation.shape == (3, 4, 2)
    assert table.at_length(np.zeros((3, 4, 5))).plan.shape == (3, 4, 5)
    assert catenary.from_length([], [], []).sag.shape == (0,)


def test_shapes_that_do_not_broadcast_are_refused() -> None:
    with pytest.raises(ValueError, match="shape mismatch"):
        catenary.from_length([1.0, 2.0], 0.0, [1.0, 2.0, 3.0])
    with pytest.raises(ValueError, match="shape mismatch"):
        catenary.from_length([1.0, 2.0], 0.0, 3.0).pulls([1.0, 2.0, 3.0])


def test_many_members_are_solved_in_pieces_as_one_by_one() -> None:
    rng = np.random.default_rng(4)
    span, rise = rng.uniform(0.0, 3.0, 70_001), rng.uniform(-3.0, 3.0, 70_001)
    length = np.hypot(span, rise) * (1.0 + 10.0 ** rng.uniform(-13.0, 3.0, 70_001))
    length[::1000] = 0.0
    together = catenary.from_length(span, rise, length)
    for i in (0, 1, 32_767, 32_768, 65_535, 65_536, 70_000):
        alone = catenary.from_length(span[i], rise[i], length[i])
        # the vector and the remainder loops of the array library may differ in the last digit
        assert together.u[i] == pytest.approx(float(alone.u), rel=4e-16, nan_ok=True)
        assert together.sag[i] == pytest.approx(float(alone.sag), rel=1e-15, nan_ok=True)
    assert np.isnan(together.u[::1000]).all()
