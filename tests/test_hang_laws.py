"""Laws that every hanging member obeys, over the whole range (Hypothesis)."""

from __future__ import annotations

from typing import TypeAlias

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from geom.hang import catenary
from geom.hang.catenary import Hang

Shape: TypeAlias = tuple[float, float, float]


def _number(low: float, high: float) -> st.SearchStrategy[float]:
    return st.floats(low, high, allow_nan=False)


# span, level difference, excess: chords from level to 72 degrees, lengths from 1 + 1e-9 to 1000 chords
SHAPES = st.tuples(_number(0.05, 50.0), _number(-3.0, 3.0), _number(-9.0, 3.0)).map(
    lambda t: (t[0], t[0] * t[1], t[0] * float(np.hypot(1.0, t[1])) * 10.0 ** t[2])
)


def _near(value: object, *, scale: float) -> object:
    return pytest.approx(value, rel=1e-12, abs=1e-13 * scale)


@given(SHAPES)
def test_mirrored_supports_mirror_the_member(shape: Shape) -> None:
    span, rise, excess = shape
    here, there = catenary.from_excess(span, rise, excess), catenary.from_excess(span, -rise, excess)
    assert float(here.sag) == float(there.sag)
    assert float(here.parameter) == float(there.parameter)
    assert float(here.sag_at) == _near(span - float(there.sag_at), scale=span)
    assert float(here.lowest_at) == _near(span - float(there.lowest_at), scale=span * max(1.0, 1.0 / float(here.u)))
    assert float(here.below_from) == float(there.below_to)
    assert float(here.slope_from) == float(there.slope_to)
    pull, mirrored = here.pulls(7.0), there.pulls(7.0)
    assert float(pull.at_from) == pytest.approx(float(mirrored.at_to), rel=1e-15)
    assert float(pull.vertical_to) == pytest.approx(float(mirrored.vertical_from), rel=1e-15)


@given(SHAPES, _number(1e-3, 1e3))
def test_a_member_twice_as_large_hangs_alike_and_pulls_twice_as_much(shape: Shape, factor: float) -> None:
    small, large = catenary.from_excess(*shape), catenary.from_excess(*(factor * x for x in shape))
    assert float(large.u) == pytest.approx(float(small.u), rel=1e-14)
    for name in ("parameter", "sag", "sag_mid", "length"):
        assert float(getattr(large, name)) == pytest.approx(factor * float(getattr(small, name)), rel=1e-13)
    assert float(large.pulls(3.0).at_to) == pytest.approx(factor * float(small.pulls(3.0).at_to), rel=1e-13)


@given(SHAPES, _number(1e-6, 3.0))
def test_a_longer_member_hangs_deeper_and_pulls_less_sideways(shape: Shape, more: float) -> None:
    span, rise, excess = shape
    short, long = catenary.from_excess(span, rise, excess), catenary.from_excess(span, rise, excess * (1.0 + more))
    assert long.sag > short.sag
    assert long.sag_mid > short.sag_mid
    assert long.lowest <= short.lowest
    assert long.parameter < short.parameter


@given(SHAPES)
def test_the_supports_carry_the_weight_and_no_more(shape: Shape) -> None:
    hang = catenary.from_excess(*shape)
    pulls = hang.pulls(12.0)
    largest = float(max(pulls.at_from, pulls.at_to))
    assert float(pulls.vertical_from + pulls.vertical_to) == _near(12.0 * float(hang.length), scale=largest)
    # T = w y over the directrix: the pulls differ by the weight of a piece hanging from one level to the other
    assert float(pulls.at_to - pulls.at_from) == _near(12.0 * shape[1], scale=largest)
    for whole, down in ((pulls.at_from, pulls.vertical_from), (pulls.at_to, pulls.vertical_to)):
        assert float(np.hypot(pulls.horizontal, down)) == pytest.approx(float(whole), rel=1e-12)
    assert float(pulls.horizontal) == pytest.approx(12.0 * float(hang.parameter), rel=1e-15)


@given(SHAPES)
def test_slopes_are_those_of_the_pulls(shape: Shape) -> None:
    hang = catenary.from_excess(*shape)
    pulls = hang.pulls(1.0)
    assert float(hang.slope_from) == _near(float(np.arctan2(pulls.vertical_from, pulls.horizontal)), scale=1.0)
    assert float(hang.slope_to) == _near(float(np.arctan2(pulls.vertical_to, pulls.horizontal)), scale=1.0)


@given(SHAPES)
def test_the_greatest_sag_is_greatest_where_it_is_said_to_be(shape: Shape) -> None:
    hang = catenary.from_excess(*shape)
    places = np.append(np.linspace(0.0, shape[0], 41), float(hang.sag_at))
    under = places * (shape[1] / shape[0]) - hang.at_plan(places).elevation
    depth, scale = float(hang.sag), float(hang.chord + hang.length)
    assert under[-1] == _near(depth, scale=scale)
    assert under.max() <= depth + 1e-13 * scale
    assert under[20] == _near(float(hang.sag_mid), scale=scale)
    assert hang.sag_mid <= depth * (1.0 + 1e-15)


@given(_number(0.05, 50.0), _number(1e-9, 1e3))
def test_a_level_member_sags_most_at_mid_span(span: float, excess: float) -> None:
    hang = catenary.from_excess(span, 0.0, excess)
    assert float(hang.sag) == float(hang.sag_mid)
    assert float(hang.sag) == pytest.approx(float(hang.below_from), rel=1e-13)
    assert float(hang.lowest_at) == float(hang.sag_at) == 0.5 * span


@given(_number(0.05, 50.0), _number(-3.0, 3.0), _number(-4.0, 0.7))
def test_a_sag_gives_a_length_that_gives_the_sag(span: float, slope: float, exponent: float) -> None:
    sag = span * 10.0**exponent
    length = catenary.from_sag(span, slope * span, sag).length
    # the length carries 1e-16 of itself, the excess is of the order of sag^2 / span
    tolerance = 1e-12 + 1e-15 * (1.0 + slope * slope) ** 2 * (span / sag) ** 2
    assert float(catenary.from_length(span, slope * span, length).sag) == pytest.approx(sag, rel=tolerance)


@given(_number(0.05, 50.0), _number(-3.0, 3.0), _number(-4.0, 0.7))
def test_a_sag_gives_an_excess_that_gives_the_sag_to_the_last_digits(
    span: float, slope: float, exponent: float
) -> None:
    sag = span * 10.0**exponent
    excess = catenary.from_sag(span, slope * span, sag).excess
    assert float(catenary.from_excess(span, slope * span, excess).sag) == pytest.approx(sag, rel=1e-13)
    mid = catenary.from_sag_mid(span, slope * span, sag)
    assert float(catenary.from_excess(span, slope * span, mid.excess).sag_mid) == pytest.approx(sag, rel=1e-13)


@given(_number(0.0, 50.0), _number(-30.0, 30.0), _number(-4.0, 2.0))
def test_a_lowest_point_gives_an_excess_that_gives_the_lowest_point(span: float, rise: float, exponent: float) -> None:
    assume(span + abs(rise) > 1e-200)  # supports at one point
    depth = 10.0**exponent
    hang = catenary.from_lowest(span, rise, depth)
    again = catenary.from_excess(span, rise, hang.excess)
    below_lower = again.below_from if rise > 0.0 else again.below_to
    assert float(below_lower) == pytest.approx(depth, rel=1e-10)
    assert 0.0 <= again.vertex_at <= span


@given(SHAPES)
def test_a_parameter_gives_the_member_it_was_taken_from(shape: Shape) -> None:
    hang = catenary.from_excess(*shape)
    again = catenary.from_parameter(shape[0], shape[1], hang.parameter)
    assert float(again.excess) == pytest.approx(shape[2], rel=1e-12)


@given(SHAPES, _number(0.0, 1.0))
def test_distances_along_the_member_and_on_plan_name_the_same_points(shape: Shape, part: float) -> None:
    hang = catenary.from_excess(*shape)
    arc = part * float(hang.length)
    point, scale = hang.at_length(arc), float(hang.length)
    assert float(hang.at_plan(point.plan).elevation) == _near(float(point.elevation), scale=100.0 * scale)
    assert float(hang.arc_at(point.plan)) == _near(arc, scale=100.0 * scale)


@given(SHAPES)
def test_the_member_ends_at_its_supports(shape: Shape) -> None:
    hang = catenary.from_excess(*shape)
    ends, scale = hang.at_length(np.array([0.0, float(hang.length)])), float(hang.length)
    assert ends.plan == _near([0.0, shape[0]], scale=scale)
    assert ends.elevation == _near([0.0, shape[1]], scale=scale)
    assert hang.at_plan([0.0, shape[0]]).elevation == _near([0.0, shape[1]], scale=scale)


@given(SHAPES, st.integers(2, 60))
def test_chords_between_points_are_no_longer_than_the_member(shape: Shape, count: int) -> None:
    hang = catenary.from_excess(*shape)
    points = hang.at_length(np.linspace(0.0, float(hang.length), count))
    chords = float(np.hypot(np.diff(points.plan), np.diff(points.elevation)).sum())
    rounding = 1e-14 * float(hang.length)
    assert float(hang.chord) - rounding <= chords <= float(hang.length) + rounding


def _is_lower(deep: Hang, shallow: Hang) -> bool:
    return bool(deep.lowest < shallow.lowest)


@given(_number(0.1, 20.0), _number(-3.0, 3.0))
def test_the_lowest_point_is_a_support_until_the_vertex_enters_the_span(span: float, slope: float) -> None:
    rise = slope * span
    barely = catenary.from_lowest(span, rise, 1e-6 * span)
    taut = catenary.from_excess(span, rise, 1e-9 * span)
    assert _is_lower(catenary.from_lowest(span, rise, 0.1 * span), barely)
    assert float(taut.lowest) == pytest.approx(min(0.0, rise), rel=1e-12, abs=1e-4 * span)
