"""The stretched catenary as a curve: against Irvine's equations integrated by quadrature, and its own laws."""

from __future__ import annotations

import itertools
import math

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.curves import Catenary, ElasticCatenary, worst_chord
from geom.hang.elastic import from_unstretched

spans = st.floats(0.5, 50.0)
rises = st.floats(-1.0, 1.0)
slacks = st.floats(0.995, 3.0)
softs = st.floats(1e-9, 1e-3)
AWAY = np.array([1.0, -2.0, 5.0])


def curve(span: float, rise: float, slack: float, soft: float) -> ElasticCatenary:
    level = rise * span
    length = slack * math.hypot(span, level)
    hang = from_unstretched(span, level, length, soft, 1.0)
    turned = np.array([1.0 + 0.6 * span, 2.0 + 0.8 * span, 3.0 + level])
    return ElasticCatenary(np.array([1.0, 2.0, 3.0]), turned, float(hang.parameter), length, soft)


@given(spans, rises, slacks, softs)
def test_it_runs_from_one_end_to_the_other(span: float, rise: float, slack: float, soft: float) -> None:
    one = curve(span, rise, slack, soft)
    points = one.at([0.0, one.length]).points
    np.testing.assert_allclose(points, [one.p, one.q], rtol=0, atol=1e-9 * one.length)


@given(spans, rises, slacks, softs, st.floats(1e-4, 1e-2))
def test_no_chord_is_off_by_more_than_asked(span: float, rise: float, slack: float, soft: float, share: float) -> None:
    one = curve(span, rise, slack, soft)
    within = share * span
    stations = one.stations(within)
    assert stations[0] == 0.0
    assert stations[-1] == one.length
    points = one.points(within)
    for k, (p, q) in enumerate(itertools.pairwise(points)):
        inner = one.at(np.linspace(stations[k], stations[k + 1], 33)).points - p
        way = (q - p) / np.linalg.norm(q - p)
        assert np.linalg.norm(inner - np.outer(inner @ way, way), axis=1).max() <= within * (1 + 1e-6)


@given(spans, rises, slacks, softs)
def test_arc_lengths_are_those_of_the_points_and_tangents_their_direction(
    span: float, rise: float, slack: float, soft: float
) -> None:
    one = curve(span, rise, slack, soft)
    s = np.linspace(0.0, one.length, 2001)
    points, tangents = one.at(s)
    steps = np.diff(points, axis=0)
    sizes = np.linalg.norm(steps, axis=1)
    # A chord is short of its arc by ds^3/24 R^2, R >= a: only where the curve is smooth against the step.
    short = s[1] ** 2 / (24 * one.parameter**2)
    if short < 1e-6:
        np.testing.assert_allclose(sizes, s[1], rtol=2 * short, atol=1e-11 * one.length)
        np.testing.assert_allclose(steps / sizes[:, None], (tangents[1:] + tangents[:-1]) / 2, rtol=0, atol=1e-4)


@pytest.mark.parametrize(("rise", "slack", "soft"), [(0.3, 1.02, 1e-4), (-0.7, 0.999, 1e-3), (0.0, 2.0, 1e-2)])
def test_its_length_is_the_integral_of_the_strained_arc(rise: float, slack: float, soft: float) -> None:
    """int (1 + T/EA) ds along the unstretched member, by mpmath's quadrature."""
    one = curve(10.0, rise, slack, soft)
    a, first = mpmath.mpf(one.parameter), mpmath.mpf(one.p[2] - one.q[2])  # y0 follows from the rise
    u = (mpmath.mpf(10.0) / a - soft * mpmath.mpf(one.unstretched)) / 2
    y0 = -first / (2 * mpmath.tanh(u) + soft * one.unstretched) - mpmath.mpf(one.unstretched) / 2
    exact = mpmath.quad(
        lambda s: 1 + soft * mpmath.sqrt(a**2 + (y0 + s) ** 2), [0, one.unstretched / 2, one.unstretched]
    )
    assert one.length == pytest.approx(float(exact), rel=1e-12)


@given(spans, rises, st.floats(1.001, 3.0))
def test_of_a_stiff_member_it_is_the_catenary(span: float, rise: float, slack: float) -> None:
    one = curve(span, rise, slack, 1e-13)
    stiff = Catenary(one.p, one.q, one.parameter)
    share = np.linspace(0.0, 1.0, 30)
    off = one.at(share * one.length).points - stiff.at(share * stiff.length).points
    assert np.abs(off).max() <= 1e-8 * one.length


@given(spans, rises, slacks, softs, st.floats(0.01, 100.0))
def test_scaled_and_moved_it_is_the_same_curve(
    span: float, rise: float, slack: float, soft: float, factor: float
) -> None:
    one = curve(span, rise, slack, soft)
    share = np.linspace(0.0, 1.0, 9)
    large, gone = one.scaled(factor), one.moved(AWAY)
    assert large.length == pytest.approx(factor * one.length, rel=1e-10)
    there = one.at(share * one.length).points
    np.testing.assert_allclose(
        large.at(share * large.length).points, factor * there, rtol=0, atol=1e-9 * factor * one.length
    )
    np.testing.assert_allclose(
        gone.at(share * gone.length).points, there + AWAY, rtol=0, atol=1e-9 * one.length + 1e-14
    )


def test_sizes_that_are_no_member_between_the_ends_are_refused() -> None:
    one = curve(10.0, 0.2, 1.05, 1e-4)
    with pytest.raises(ValueError, match="from the second point"):
        ElasticCatenary(one.p, one.q, one.parameter, 1.01 * one.unstretched, one.softness)
    with pytest.raises(ValueError, match="one plumb line"):
        ElasticCatenary(one.p, one.p + np.array([0.0, 0.0, 1.0]), 1.0, 2.0, 1e-4)
    with pytest.raises(ValueError, match="softness"):
        ElasticCatenary(one.p, one.q, one.parameter, one.unstretched, 0.0)


def test_its_worst_chord_is_known() -> None:
    one = curve(10.0, 0.2, 1.05, 1e-4)
    assert 0.2e-3 < worst_chord(one, one.points(1e-3)) <= 1e-3
