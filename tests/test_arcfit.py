"""Tangent arcs: their distance from the curve, their common tangents, the law they are spaced by."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.arcfit import Arcs, biarcs, fit_arcs
from geom.curves import Arc, Catenary, Curve, Joined, Polyline, Segment
from geom.result import Z_UP, Frame, fixed

FRAME = Frame(fixed([0, 0, 0]), fixed([1, 0, 0]), Z_UP)
PARABOLA = np.linspace(0.0, 0.5, 2)


def sampled(arcs: Arcs, count: int = 400) -> np.ndarray:
    """Points on every arc, by the definition of a bulge: the tangent of a quarter of the angle."""
    points = np.concatenate([arcs.points, arcs.points[:1]]) if arcs.closed else arcs.points
    found = []
    for start, end, bulge in zip(points[:-1], points[1:], arcs.bulges, strict=False):
        t = np.linspace(0, 1, count)[:, None]
        if bulge == 0:
            found.append(start + t * (end - start))
            continue
        angle = 4 * np.arctan(bulge)
        chord = end - start
        normal = np.array([-chord[1], chord[0]])
        centre = (start + end) / 2 + normal / 2 / np.tan(angle / 2)
        spoke = start - centre
        turn = t[:, 0] * angle
        found.append(
            centre
            + np.stack(
                [np.cos(turn) * spoke[0] - np.sin(turn) * spoke[1], np.sin(turn) * spoke[0] + np.cos(turn) * spoke[1]],
                axis=1,
            )
        )
    return np.concatenate(found)


def distance(points: np.ndarray, line: np.ndarray) -> float:
    """Greatest distance of points from a polyline, by its own formula."""
    steps = np.diff(line, axis=0)
    worst = 0.0
    for point in points:
        share = np.clip(((point - line[:-1]) * steps).sum(axis=1) / (steps * steps).sum(axis=1), 0, 1)
        worst = max(worst, float(np.hypot(*(point - line[:-1] - share[:, None] * steps).T).min()))
    return worst


def turns_at_joints(arcs: Arcs) -> np.ndarray:
    """How far the direction jumps from each arc to the next, rad."""
    chords = np.diff(arcs.points, axis=0)
    ways = np.arctan2(chords[:, 1], chords[:, 0])
    half = 2 * np.arctan(arcs.bulges[:-1])
    jumps = (ways[1:] - half[1:]) - (ways[:-1] + half[:-1])
    return np.asarray((jumps + np.pi) % (2 * np.pi) - np.pi)


@pytest.mark.parametrize("within", [1e-3, 1e-4, 1e-5])
def test_arcs_along_a_catenary_are_within_the_distance_and_meet_with_common_tangents(within: float) -> None:
    curve = Catenary(np.array([0, 0, 0.0]), np.array([3.4, 0, 0.2]), 1.0)
    arcs = fit_arcs(curve, FRAME, within)
    assert distance(sampled(arcs, 40), FRAME.flat(curve.points(within / 200))) <= within
    assert np.abs(turns_at_joints(arcs)).max() < 1e-9
    assert arcs.points[[0, -1]] == pytest.approx(FRAME.flat(np.stack([curve.start, curve.end])), abs=1e-12)


def test_as_many_arcs_are_used_as_the_law_of_the_third_power_says() -> None:
    # Meek and Walton (1995): h = (324 e / |dk/ds|)^(1/3); for a = 1 k = 1 / cosh^2 u, |dk/du| = 2 sinh u / cosh^3 u
    curve = Catenary(np.array([-1.5, 0, np.cosh(1.5)]), np.array([1.5, 0, np.cosh(1.5)]), 1.0)
    within = 1e-6
    u = np.linspace(-1.5, 1.5, 20001)
    change = 2 * np.abs(np.sinh(u)) / np.cosh(u) ** 4  # over arc length: du = ds / cosh u
    biarcs_needed = np.trapezoid(np.cbrt(change / (324 * within)) * np.cosh(u), u)
    assert (len(fit_arcs(curve, FRAME, within).points) - 1) / 2 == pytest.approx(biarcs_needed, rel=0.15)


def test_the_error_of_one_biarc_is_that_of_meek_and_walton() -> None:
    # on the spiral k = s, |dk/ds| = 1: error h^3 / 324 (measured .00308589 against .00308642 for h = 1 there)
    h = 0.2
    s = np.linspace(0.4, 0.4 + h, 20001)
    mids = (s[1:] + s[:-1]) / 2
    steps = np.stack([np.cos(mids**2 / 2), np.sin(mids**2 / 2)], axis=1) * np.diff(s)[:, None]
    line = np.concatenate([[[0, 0]], np.cumsum(steps, axis=0)])
    ends = s[[0, -1]] ** 2 / 2
    arcs = biarcs(line[[0, -1]], np.stack([np.cos(ends), np.sin(ends)], axis=1))
    assert distance(sampled(arcs, 100), line[::10]) == pytest.approx(h**3 / 324, rel=0.02)


def test_a_circle_is_drawn_by_its_own_arcs() -> None:
    circle = Arc(np.zeros(3), 2.0, np.array([1.0, 0, 0]), np.array([0, 0, 1.0]), 0.3, 2 * np.pi)
    arcs = fit_arcs(circle, FRAME, 1e-3)
    assert arcs.closed
    assert np.hypot(*sampled(arcs, 50).T) == pytest.approx(2.0, abs=1e-12)
    assert (np.abs(arcs.bulges) < 1).all(), "no arc of a half turn or more"


def test_straight_lines_stay_straight_and_corners_stay_corners() -> None:
    corner = Joined(
        [Segment(np.zeros(3), np.array([1.0, 0, 0])), Polyline(np.array([[1, 0, 0], [1, 0, 1.0], [2, 0, 1]]))]
    )
    arcs = fit_arcs(corner, FRAME, 1e-3)
    assert arcs.points == pytest.approx(np.array([[0, 0], [1, 0], [1, 1], [2, 1.0]]), abs=1e-15)
    assert not arcs.bulges.any()


def test_a_nearly_taut_catenary_takes_a_few_flat_arcs() -> None:
    taut: Curve = Catenary(np.zeros(3), np.array([10.0, 0, 0]), 1e5)
    arcs = fit_arcs(taut, FRAME, 1e-3)
    assert len(arcs.points) <= 3


@given(
    span=st.floats(0.1, 30),
    rise=st.floats(-0.8, 0.8),
    parameter=st.floats(0.12, 50),
    within=st.sampled_from([1e-3, 1e-4]),
)
@settings(max_examples=40, deadline=None)
def test_any_catenary_is_fitted_within_the_distance(span: float, rise: float, parameter: float, within: float) -> None:
    curve = Catenary(np.zeros(3), np.array([span, 0, rise * span]), parameter * span)
    arcs = fit_arcs(curve, FRAME, within * span)
    line = FRAME.flat(curve.points(within * span / 100))
    assert distance(sampled(arcs, 12), line) <= within * span
    assert np.abs(turns_at_joints(arcs)).max() < 1e-6


@given(turn=st.floats(-3.0, 3.0), out=st.floats(-1.0, 1.0))
@settings(max_examples=60, deadline=None)
def test_a_biarc_leaves_and_arrives_along_the_given_tangents(turn: float, out: float) -> None:
    points = np.array([[0.0, 0.0], [1.0, 0.0]])
    ways = np.array([out, out + turn])
    arcs = biarcs(points, np.stack([np.cos(ways), np.sin(ways)], axis=1))
    chords = np.diff(arcs.points, axis=0)
    angles = np.arctan2(chords[:, 1], chords[:, 0])
    half = 2 * np.arctan(arcs.bulges[:-1])
    assert np.cos(angles[0] - half[0] - out) == pytest.approx(1.0, abs=1e-9)
    assert np.cos(angles[1] + half[1] - out - turn) == pytest.approx(1.0, abs=1e-9)
    assert np.abs(turns_at_joints(arcs)).max() < 1e-7
