"""Curves: their lengths, points and tangents against closed forms, 30-digit arithmetic and laws.

Reference values: where a comment says "closed form" the formula is worked out beside it; mpmath solves the plain
cosh form of the catenary with 40 digits, by other formulas than the product forms under test.
"""

import pickle

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.curves import (
    Arc,
    Catenary,
    Curve,
    Joined,
    Offset,
    Polyline,
    Sampled,
    Segment,
    catenary_points,
    hanging_strands,
    worst_chord,
)
from geom.curves.base import Array
from geom.curves.measure import refined

X, Y, Z = np.eye(3)
ELEVATION = -Y  # normal of the plane along x, up z: x cross z

law = settings(deadline=None, max_examples=60)


def at(*numbers: float) -> Array:
    return np.array(numbers, dtype=float)


def level(span: float, parameter: float, *, inverted: bool = False) -> Catenary:
    return Catenary(at(0, 0, 0), at(span, 0, 0), parameter, inverted=inverted)


spans = st.floats(0.05, 50)
deepness = st.floats(0.01, 4)  # u = S/2a
rises = st.floats(-2, 2)  # of the span
bearings = st.floats(0, 6.28)
tolerances = st.floats(1e-4, 0.02)  # of the span


@st.composite
def catenaries(draw: st.DrawFn) -> Catenary:
    span, bearing = draw(spans), draw(bearings)
    q = at(span * np.cos(bearing), span * np.sin(bearing), draw(rises) * span) + at(1, 2, 3)
    return Catenary(at(1, 2, 3), q, span / (2 * draw(deepness)), inverted=draw(st.booleans()))


@st.composite
def arcs(draw: st.DrawFn) -> Arc:
    sweep = draw(st.floats(0.05, 6.28)) * draw(st.sampled_from([-1, 1]))
    tilt = draw(bearings)
    along, up = at(np.cos(tilt), np.sin(tilt), 0), Z
    return Arc(at(1, 2, 3), draw(spans), along, up, draw(bearings), sweep)


@st.composite
def offsets(draw: st.DrawFn) -> Offset:
    span = draw(spans)
    curve = level(span, span / (2 * draw(st.floats(0.05, 2.5))), inverted=draw(st.booleans()))
    # Up to 0.9 of the least radius of curvature (the parameter, at the vertex), to either side.
    return Offset(curve, draw(st.floats(-0.9, 0.9)) * curve.parameter, ELEVATION)


@st.composite
def sampled(draw: st.DrawFn) -> Sampled:
    curve = draw(catenaries())
    # Chords within 0.05 a of a catenary turn by 0.63 rad at most.
    points, tangents = curve.at(curve.stations(draw(st.floats(0.002, 0.05)) * curve.parameter))
    return Sampled(points, tangents)


@st.composite
def joined(draw: st.DrawFn) -> Joined:
    first = draw(catenaries())
    return Joined(
        (
            first,
            Segment(first.q, first.q + at(0.3, 0.1, -1)),
            Polyline(np.stack([first.q + at(0.3, 0.1, -1), first.q, first.q + X])),
        )
    )


curves = st.one_of(catenaries(), arcs(), offsets(), sampled(), joined())


def reference_catenary(span: float, rise: float, a: float) -> tuple[mp.mpf, mp.mpf]:
    """Abscissas of the ends from the vertex, solved with 40 digits from cosh differences."""
    with mp.workdps(40):
        S, h, A = mp.mpf(span), mp.mpf(rise), mp.mpf(a)
        guess = A * mp.asinh(h / (2 * A * mp.sinh(S / (2 * A)))) - S / 2
        x0 = mp.findroot(lambda x: A * mp.cosh((x + S) / A) - A * mp.cosh(x / A) - h, (guess, guess + S / 100))
        return x0, x0 + S


# ------------------------------------------------------------------ every curve


@law
@given(curves, tolerances)
def test_no_chord_is_off_the_curve_by_more_than_asked(curve: Curve, share: float) -> None:
    within = share * curve.length
    assert worst_chord(curve, curve.points(within)) <= within * (1 + 1e-9)


@law
@given(curves, tolerances)
def test_points_are_the_curve_at_its_stations_and_end_exactly(curve: Curve, share: float) -> None:
    within = share * curve.length
    points, stations = curve.points(within), curve.stations(within)
    assert points == pytest.approx(curve.at(stations).points, abs=1e-10 * curve.length, rel=0)
    assert np.array_equal(points[0], curve.start)
    assert np.array_equal(points[-1], curve.end)
    assert stations[0] == 0
    assert stations[-1] == curve.length
    assert (np.diff(stations) > 0).all()


@law
@given(curves)
def test_a_fine_polyline_is_as_long_as_the_curve_says(curve: Curve) -> None:
    # A chord c of curvature k misses c^3 k^2/24 of the arc, so the shortfall goes with 1/n^2: Richardson's
    # extrapolation of 4,000 and 8,000 equal steps leaves 1/n^4.
    sums = []
    for steps in (4000, 8000):
        points = curve.at(np.linspace(0, curve.length, steps + 1)).points
        sums.append(np.linalg.norm(np.diff(points, axis=0), axis=1).sum())
    # Joined curves have corners between the steps, each short by a step at most.
    corners = 3 if isinstance(curve, Joined) else 0
    assert (4 * sums[1] - sums[0]) / 3 == pytest.approx(curve.length, rel=1e-8, abs=corners * 2 * curve.length / 4000)


@law
@given(curves)
def test_equal_steps_of_arc_length_are_equal_distances(curve: Curve) -> None:
    if isinstance(curve, Joined):
        curve = curve.curves[0]
    steps = np.linalg.norm(np.diff(curve.at(np.linspace(0, curve.length, 2001)).points, axis=0), axis=1)
    assert steps == pytest.approx(curve.length / 2000, rel=3e-4)


@law
@given(curves)
def test_tangents_are_unit_vectors_along_the_curve(curve: Curve) -> None:
    if isinstance(curve, Joined):
        curve = curve.curves[0]
    s = np.linspace(0.1, 0.9, 33) * curve.length
    step = 1e-5 * curve.length
    slope = (curve.at(s + step).points - curve.at(s - step).points) / (2 * step)
    tangents = curve.at(s).tangents
    assert np.linalg.norm(tangents, axis=1) == pytest.approx(1, abs=1e-12)
    assert slope == pytest.approx(tangents, abs=1e-5)


@law
@given(curves, st.floats(0.01, 100))
def test_scaling_scales_points_and_length(curve: Curve, factor: float) -> None:
    scaled, within = curve.scaled(factor), 1e-3 * curve.length
    assert scaled.length == pytest.approx(curve.length * factor, rel=1e-12)
    at_same = scaled.at(np.linspace(0, 1, 9) * scaled.length).points
    true = curve.at(np.linspace(0, 1, 9) * curve.length).points * factor
    assert at_same == pytest.approx(true, abs=1e-9 * scaled.length, rel=0)
    assert abs(len(scaled.points(within * factor)) - len(curve.points(within))) <= 1


@law
@given(curves)
def test_moving_moves_points_and_keeps_length(curve: Curve) -> None:
    offset = at(10, -20, 5)
    moved = curve.moved(offset)
    assert moved.length == pytest.approx(curve.length, rel=1e-12)
    assert moved.points(0.01 * curve.length) == pytest.approx(
        curve.points(0.01 * curve.length) + offset, abs=1e-9 * (curve.length + 25), rel=0
    )


@law
@given(curves)
def test_a_curve_survives_pickling_and_stays_read_only(curve: Curve) -> None:
    again = pickle.loads(pickle.dumps(curve))
    assert again == curve
    assert hash(again) == hash(curve)
    assert again != curve.moved(X)
    with pytest.raises(ValueError, match="read-only"):
        again.start[0] = 7.0


@law
@given(curves)
def test_arc_lengths_outside_the_curve_are_refused(curve: Curve) -> None:
    with pytest.raises(ValueError, match="arc lengths must be from 0 to"):
        curve.at([0.0, 1.01 * curve.length])
    with pytest.raises(ValueError, match="arc lengths must be from 0 to"):
        curve.at([-0.01 * curve.length])
    with pytest.raises(ValueError, match="arc lengths must be from 0 to"):
        curve.at([np.nan])


def test_arrays_given_to_a_curve_are_copied() -> None:
    p = at(0, 0, 0)
    segment = Segment(p, X)
    p[0] = 9
    assert np.array_equal(segment.p, [0, 0, 0])


# ------------------------------------------------------------------ catenaries


@pytest.mark.parametrize(
    ("span", "rise", "a"),
    [
        (4.0, 0.0, 1.179304),
        (4.0, 3.0, 1.2),
        (4.0, -9.0, 0.7),
        (4.0, 0.5, 4e6),  # taut
        (1.0, 0.1, 0.04),  # deep, u = 12.5
        (0.01, 3.0, 0.0005),  # near a plumb line, u = 10
    ],
)
def test_points_and_lengths_agree_with_forty_digit_arithmetic(span: float, rise: float, a: float) -> None:
    curve = Catenary(at(0, 0, 0), at(span, 0, rise), a)
    x0, x1 = reference_catenary(span, rise, a)
    with mp.workdps(40):
        A = mp.mpf(a)
        length = mp.quad(lambda x: mp.cosh(x / A), mp.linspace(x0, x1, 40))
        assert curve.length == pytest.approx(float(length), rel=1e-14)
        for share in (0.05, 0.3, 0.5, 0.8):
            s = mp.mpf(share * curve.length)
            x = A * mp.asinh(mp.sinh(x0 / A) + s / A)
            z = A * mp.cosh(x / A) - A * mp.cosh(x0 / A)
            point = curve.at([float(s)]).points[0]
            assert point == pytest.approx([float(x - x0), 0, float(z)], abs=4e-15 * curve.length, rel=0)


def test_a_taut_catenary_keeps_its_sag() -> None:
    # Sag of a parabola S^2/(8a); the catenary differs by u^2/12 of it, 3e-19 here.
    curve = level(4.0, 1e9)
    assert -curve.at([curve.length / 2]).points[0, 2] == pytest.approx(16 / 8e9, rel=1e-12)
    x, _, z = curve.points(1e-10).T
    assert len(x) > 4
    assert -z == pytest.approx(x * (4 - x) / 2e9, rel=1e-12, abs=1e-24)


@pytest.mark.parametrize("deep", [100.0, 300.0, 700.0])
def test_a_very_deep_catenary_does_not_overflow(deep: float) -> None:
    curve = level(1.0, 0.5 / deep)
    # L = 2a sinh u = a e^u (1 - e^-2u), in logarithms.
    assert np.log(curve.length) == pytest.approx(deep + np.log(0.5 / deep), rel=1e-12)
    points = curve.at(np.linspace(0, 1, 5) * curve.length).points
    assert np.isfinite(points).all()
    assert points[2, 2] == pytest.approx(-curve.length / 2, rel=1e-9)


def test_equal_steps_on_plan_share_the_chord_error() -> None:
    # dx = 0.1 a gives 0.00125026 a, 0.00125001 a, 0.00124986 a for chords about u = 0.05, 1, 2 (dx^2/8a = 0.00125 a).
    for middle, error in ((0.05, 0.00125026), (1.0, 0.00125001), (2.0, 0.00124986)):
        p, q = (at(x, 0, np.cosh(x)) for x in (middle - 0.05, middle + 0.05))
        curve = Catenary(p, q, 1.0)
        true = curve.at(np.linspace(0, 1, 2001) * curve.length).points
        off = np.linalg.norm(np.cross(true - p, (q - p) / np.linalg.norm(q - p)), axis=1)
        assert off.max() == pytest.approx(error, abs=2e-8)


def test_the_number_of_chords_is_the_least_equal_one() -> None:
    # span/sqrt(8 a within) = 3.4/sqrt(0.008) = 38.013 (closed form).
    assert len(level(3.4, 1.0).points(0.001)) - 1 == 39


@law
@given(catenaries(), tolerances)
def test_hardly_more_chords_are_drawn_than_needed(curve: Catenary, share: float) -> None:
    within = share * curve.length
    points = curve.points(within)
    steps = np.hypot(*np.diff(points, axis=0)[:, :2].T)
    assert steps == pytest.approx(steps[0], rel=1e-6)
    # One step fewer than n would have an error (n/(n-1))^2 times as great, or more, about the vertex.
    if len(points) > 12 and 0 < np.argmin(points[:, 2] * (-1 if curve.inverted else 1)) < len(points) - 1:
        assert worst_chord(curve, points) > 0.8 * within


@law
@given(catenaries())
def test_a_catenary_turned_about_the_vertical_is_turned(curve: Catenary) -> None:
    cos, sin = np.cos(0.7), np.sin(0.7)
    turn = np.array([[cos, -sin, 0], [sin, cos, 0], [0, 0, 1]])
    turned = Catenary(turn @ curve.p, turn @ curve.q, curve.parameter, inverted=curve.inverted)
    s = np.linspace(0, 1, 7)
    assert turned.at(s * turned.length).points == pytest.approx(
        curve.at(s * curve.length).points @ turn.T, abs=1e-9 * curve.length, rel=0
    )


@law
@given(catenaries())
def test_standing_mirrors_hanging(curve: Catenary) -> None:
    mirror = at(1, 1, -1)
    other = Catenary(curve.p * mirror, curve.q * mirror, curve.parameter, inverted=not curve.inverted)
    s = np.linspace(0, 1, 7) * curve.length
    assert other.at(s).points == pytest.approx(curve.at(s).points * mirror, abs=1e-12 * curve.length, rel=0)


@law
@given(catenaries())
def test_the_curvature_is_that_of_a_catenary(curve: Catenary) -> None:
    # rho = y^2/a, y = a cosh(x/a) = a / cos(slope): the turn of the tangent is ds cos^2(slope)/a.
    s = np.linspace(0.01, 0.99, 50) * curve.length
    step = 1e-5 * curve.length
    before, after = curve.at(s - step).tangents, curve.at(s + step).tangents
    turn = np.linalg.norm(np.cross(before, after), axis=1)
    level_share = np.hypot(*curve.at(s).tangents[:, :2].T)
    assert turn == pytest.approx(2 * step * level_share**2 / curve.parameter, rel=1e-3, abs=1e-9)


def test_the_stated_length_is_kept_to_the_last_digit() -> None:
    free = level(4.0, 1.2)
    stated = float(np.nextafter(free.length, 10))
    curve = Catenary(free.p, free.q, 1.2, length=stated)
    assert curve.length == stated
    assert curve.stations(0.01)[-1] == stated
    with pytest.raises(ValueError, match="the parameter makes the length 6"):
        Catenary(free.p, free.q, 1.2, length=6.2)


def test_a_catenary_without_span_or_pull_is_refused() -> None:
    with pytest.raises(ValueError, match="use hanging_strands"):
        Catenary(at(0, 0, 1), at(0, 0, 3), 1.0)
    with pytest.raises(ValueError, match="parameter must be more than 0"):
        level(1.0, 0.0)
    with pytest.raises(ValueError, match="too small for a span"):
        level(1.0, 1e-4)
    with pytest.raises(ValueError, match="within must be more than 0"):
        level(1.0, 1.0).points(0.0)


@law
@given(st.lists(catenaries(), min_size=1, max_size=6), st.booleans(), st.floats(1e-3, 0.1))
def test_many_catenaries_at_once_are_those_one_by_one(curves: list[Catenary], inverted: bool, within: float) -> None:
    single = [Catenary(curve.p, curve.q, curve.parameter, inverted=inverted) for curve in curves]
    p, q = np.stack([curve.p for curve in single]), np.stack([curve.q for curve in single])
    a = np.array([curve.parameter for curve in single])
    points, first = catenary_points(p, q, a, within, inverted=inverted)
    for number, curve in enumerate(single):
        assert np.array_equal(points[first[number] : first[number + 1]], curve.points(within))


def test_an_infinite_parameter_is_a_straight_line_among_many() -> None:
    p, q = np.zeros((2, 3)), np.stack([at(1, 0, 0), at(0, 0, 2)])
    points, first = catenary_points(p, q, at(1.0, np.inf), 1e-3)
    assert np.array_equal(points[first[1] :], [[0, 0, 0], [0, 0, 2]])


# ------------------------------------------------------------------ plumb lines


def test_strands_on_a_plumb_line_hang_as_deep_as_their_length() -> None:
    strands = hanging_strands([1, 2, 5], [1, 2, 4], 4.0)
    # 2.5 m down from the upper point and 1.5 m up to the lower: 4 m in all.
    assert strands.points(0.01) == pytest.approx(np.array([[1, 2, 5], [1, 2, 2.5], [1, 2, 4]]), abs=1e-15)
    assert strands.length == pytest.approx(4.0, rel=1e-15)
    assert not strands.closed


def test_a_strand_that_just_reaches_is_one_line() -> None:
    assert len(hanging_strands([0, 0, 5], [0, 0, 2], 3.0).curves) == 1


def test_strands_that_do_not_reach_or_are_not_plumb_are_refused() -> None:
    with pytest.raises(ValueError, match="does not reach over"):
        hanging_strands([0, 0, 5], [0, 0, 2], 2.9)
    with pytest.raises(ValueError, match="one plumb line"):
        hanging_strands([0, 0, 5], [0, 1e-6, 2], 4.0)


@pytest.mark.parametrize("span", [1e-3, 1e-6, 1e-9])
def test_a_narrowing_catenary_becomes_the_doubled_strand(span: float) -> None:
    # Half the length hangs on each side; u = S/2a from sinh(u)/u = L/S.
    with mp.workdps(30):
        ratio = mp.log(3 / mp.mpf(span))
        u = mp.findroot(lambda u: mp.log(mp.sinh(u) / u) - ratio, (1, 60), solver="anderson")
    narrow = level(span, float(span / (2 * u)))
    assert narrow.length == pytest.approx(3, rel=1e-12)
    strands = hanging_strands([0, 0, 0], [0, 0, 0], narrow.length)
    s = np.linspace(0, 1, 7) * narrow.length
    assert narrow.at(s).points == pytest.approx(strands.at(s).points, abs=2 * span, rel=0)


# ------------------------------------------------------------------ arcs, lines


def test_an_arcs_chords_keep_the_sagitta() -> None:
    # R = 10, chord 1: R - sqrt(R^2 - 1/4) = 0.0125078223; chord for 0.01: 2 sqrt(2 R e - e^2) = 0.8942035562.
    half = np.arcsin(0.05)
    arc = Arc(at(0, 0, 0), 10.0, X, Z, -half, 2 * half)
    assert worst_chord(arc, np.stack([arc.start, arc.end])) == pytest.approx(0.0125078223, abs=1e-10)
    exact = 2 * np.arcsin(0.8942035562 / 20)
    assert len(Arc(at(0, 0, 0), 10.0, X, Z, 0.0, exact * 5.0001).points(0.01)) == 7
    assert len(Arc(at(0, 0, 0), 10.0, X, Z, 0.0, exact * 4.9999).points(0.01)) == 6


def test_a_full_circle_is_closed() -> None:
    circle = Arc(at(1, 2, 3), 2.0, X, Y, 0.3, 2 * np.pi)
    points = circle.points(0.01)
    assert circle.closed
    assert np.array_equal(points[0], points[-1])
    assert np.linalg.norm(points - circle.centre, axis=1) == pytest.approx(2.0, rel=1e-15)
    assert len(circle.points(100.0)) == 5


def test_an_arc_of_bad_axes_or_sweep_is_refused() -> None:
    with pytest.raises(ValueError, match="unit vectors at right angles"):
        Arc(at(0, 0, 0), 1.0, X, at(0.1, 0, 1), 0.0, 1.0)
    with pytest.raises(ValueError, match="at most a full turn"):
        Arc(at(0, 0, 0), 1.0, X, Z, 0.0, 6.3)
    with pytest.raises(ValueError, match="radius must be more than 0"):
        Arc(at(0, 0, 0), -1.0, X, Z, 0.0, 1.0)


def test_a_closed_polyline_goes_back_to_its_start() -> None:
    square = Polyline(np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0], [1, 1, 0], [0, 1, 0], [0, 0, 0]]), closed=True)
    assert square.length == 4
    assert len(square.points(1.0)) == 5
    assert square.at([3.25]).points[0] == pytest.approx([0, 0.75, 0], abs=1e-15)
    assert square.at([1.0]).tangents[0] == pytest.approx(Y, abs=1e-15)


def test_lines_without_length_are_refused() -> None:
    with pytest.raises(ValueError, match="two different points"):
        Segment(X, X)
    with pytest.raises(ValueError, match="needs 2 different points, not 1"):
        Polyline(np.stack([X, X]))
    with pytest.raises(ValueError, match=r"vertices must have the shape \(n, 3\)"):
        Polyline(np.zeros((2, 2)))
    with pytest.raises(ValueError, match="p must be finite"):
        Segment(at(np.nan, 0, 0), X)


def test_joined_curves_need_to_meet() -> None:
    with pytest.raises(ValueError, match="curve 1 ends 1 m from where the next one starts"):
        Joined((Segment(at(0, 0, 0), X), Segment(2 * X, 3 * X)))
    ring = Joined((Segment(at(0, 0, 0), X), Segment(X, Y), Segment(Y, at(0, 0, 0))))
    assert ring.closed
    assert ring.length == pytest.approx(2 + np.sqrt(2), rel=1e-15)
    assert ring.at([1 + np.sqrt(2)]).tangents[0] == pytest.approx(-Y, abs=1e-15)


# ------------------------------------------------------------------ parallels


@pytest.mark.parametrize("distance", [0.15, -0.15, -1.1, 3.0])
def test_a_parallel_is_longer_by_the_distance_times_the_turn(distance: float) -> None:
    # L + d dtheta, exact; a standing catenary turns clockwise by 2 atan sinh u, u = S/2a.
    curve = level(4.0, 1.2, inverted=True)
    turn = 2 * np.arctan(np.sinh(4 / 2.4))
    assert Offset(curve, distance, ELEVATION).length == pytest.approx(curve.length + distance * turn, rel=1e-14)


def test_the_band_about_an_axis_has_the_area_thickness_times_length() -> None:
    # Exactly t L for a band of +-t/2; one-sided t L + t^2 dtheta/2. Polylines within e are off by e L at most.
    curve = level(4.0, 1.2, inverted=True)
    turn, t = 2 * np.arctan(np.sinh(4 / 2.4)), 0.3

    def band(outer: float, inner: float) -> float:
        x, z = np.vstack(
            [Offset(curve, outer, ELEVATION).points(1e-7), Offset(curve, inner, ELEVATION).points(1e-7)[::-1]]
        )[:, [0, 2]].T
        return float(abs(x @ np.roll(z, -1) - z @ np.roll(x, -1)) / 2)

    assert band(t / 2, -t / 2) == pytest.approx(t * curve.length, abs=2e-6)
    assert band(t, 0) == pytest.approx(t * curve.length + t**2 * turn / 2, abs=2e-6)


def test_the_left_of_a_line_to_the_right_is_up() -> None:
    beside = Offset(Segment(at(0, 0, 0), X), 0.1, ELEVATION)
    assert beside.start == pytest.approx([0, 0, 0.1], abs=1e-15)
    assert Offset(level(4.0, 1.2, inverted=True), 0.2, ELEVATION).at([0.0]).points[0, 2] > 0


@law
@given(st.floats(0.1, 6.28), st.floats(-0.95, 3), st.sampled_from([-1, 1]))
def test_the_parallel_of_an_arc_is_an_arc(sweep: float, distance: float, way: int) -> None:
    arc = Arc(at(1, 2, 3), 1.0, X, Z, 0.4, way * sweep)
    beside = Offset(arc, -way * distance, ELEVATION)  # outwards: to the right of an anticlockwise arc
    true = Arc(at(1, 2, 3), 1.0 + distance, X, Z, 0.4, way * sweep)
    s = np.linspace(0, 1, 23)
    assert beside.length == pytest.approx(true.length, rel=1e-12)
    assert beside.at(s * beside.length).points == pytest.approx(true.at(s * true.length).points, abs=1e-9)


@law
@given(offsets())
def test_a_parallel_keeps_its_distance(parallel: Offset) -> None:
    points = parallel.at(np.linspace(0, 1, 12) * parallel.length).points
    dense = parallel.curve.at(np.linspace(0, 1, 4001) * parallel.curve.length).points
    nearest = np.linalg.norm(points[:, None] - dense, axis=2).min(axis=1)
    spacing = parallel.curve.length / 4000
    assert nearest == pytest.approx(abs(parallel.distance), abs=spacing)


@law
@given(offsets())
def test_the_parallel_of_a_parallel_back_is_the_curve(parallel: Offset) -> None:
    back = Offset(parallel, -parallel.distance, parallel.normal)
    s = np.linspace(0, 1, 9) * parallel.curve.length
    assert back.length == pytest.approx(parallel.curve.length, rel=1e-9)
    assert back.at(np.minimum(s, back.length)).points == pytest.approx(
        parallel.curve.at(s).points, abs=1e-7 * parallel.curve.length, rel=0
    )


def test_a_parallel_past_the_centres_of_curvature_is_refused() -> None:
    # The least radius of curvature is the parameter, 1.2 m, at the crown.
    curve = level(4.0, 1.2, inverted=True)
    with pytest.raises(ValueError, match="over the least radius of curvature"):
        Offset(curve, -1.25, ELEVATION)
    with pytest.raises(ValueError, match="leaves the plane"):
        Offset(curve, 0.1, Z)


# ------------------------------------------------------------------ sampled curves


def test_sampled_curves_improve_with_the_fourth_power_of_the_step() -> None:
    curve = level(4.0, 1.2)
    errors = []
    for count in (21, 41, 81):
        points, tangents = curve.at(np.linspace(0, curve.length, count))
        errors.append(abs(Sampled(points, tangents).length - curve.length))
    orders = np.log2(np.array(errors[:-1]) / errors[1:])
    assert orders == pytest.approx(4, abs=0.3)


def test_a_sampled_arc_passes_through_the_arcs_middle() -> None:
    # The speeds 4 r tan(v/4) are chosen so (closed form).
    arc = Arc(at(0, 0, 0), 2.0, X, Z, 0.0, 1.5)
    points, tangents = arc.at([0.0, arc.length])
    curve = Sampled(points, tangents)
    middle = arc.at([arc.length / 2]).points[0]
    assert curve.at([curve.length / 2]).points[0] == pytest.approx(middle, abs=1e-11)


def test_a_sampled_helix_has_the_helix_length() -> None:
    # Radius 1, rise 0.5 a radian: sqrt(1.25) a radian (closed form). A space curve, not a planar one.
    v = np.linspace(0, 6, 121)
    points = np.stack([np.cos(v), np.sin(v), v / 2], axis=1)
    tangents = np.stack([-np.sin(v), np.cos(v), np.full_like(v, 0.5)], axis=1)
    assert Sampled(points, tangents).length == pytest.approx(6 * np.sqrt(1.25), rel=1e-7)


def test_samples_that_make_no_curve_are_refused() -> None:
    with pytest.raises(ValueError, match="two points or more"):
        Sampled(X[None], X[None])
    with pytest.raises(ValueError, match="run from one to the next"):
        Sampled(np.stack([0 * X, X]), np.stack([X, -X]))
    with pytest.raises(ValueError, match="must have a direction"):
        Sampled(np.stack([0 * X, X]), np.stack([X, 0 * X]))


# ------------------------------------------------------------------ measuring


@law
@given(st.one_of(catenaries(), arcs(), sampled()), tolerances)
def test_refining_from_the_ends_alone_reaches_the_tolerance(curve: Curve, share: float) -> None:
    within = share * curve.length
    stations = refined(curve.at, at(0.0, 0.5, 1.0) * curve.length, within)
    assert worst_chord(curve, curve.at(stations).points) <= within


def test_the_worst_chord_of_a_line_moved_aside_is_the_move() -> None:
    line = Segment(at(0, 0, 0), 3 * X)
    assert worst_chord(line, line.points(1.0) + 0.02 * Z) == pytest.approx(0.02, rel=1e-12)
