"""Arches: laws, exact limits, and independent computations in higher precision or on drawn polygons."""

import math
from itertools import pairwise, product

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import unary_union
from shapely.geometry import LineString, Point, Polygon

from geom.arch.blocks import voussoirs
from geom.arch.cuts import cut
from geom.arch.fit import Fact, Length, Rise, Scale, Through
from geom.arch.ring import Foot, LineName, Profile, Ring, greatest_thickness, stand
from geom.arch.roots import rising_root
from geom.arch.setting_out import clear_widths, ordinates, stations
from geom.arch.shapes import Catenary
from geom.arch.thrust import divided, stand_with_thrust, thrust
from geom.errors import SolveError

LINES: tuple[LineName, ...] = ("intrados", "axis", "extrados")
FEET: tuple[Foot, ...] = ("level", "radial")
ALL = list(product(LINES, LINES, FEET))

rises = st.floats(0.3, 3.0)
levels = st.floats(-0.2, 0.2)
thicknesses = st.floats(0.005, 0.12)
profiles = st.builds(
    Profile, thicknesses, curve=st.sampled_from(LINES), face=st.sampled_from(LINES), foot=st.sampled_from(FEET)
)


def outline(ring: Ring, within: float) -> Polygon:
    """Return the drawn elevation of a ring."""
    return Polygon([*ring.sample("intrados", within), *ring.sample("extrados", within)[::-1]])


# What a ring is asked for


@settings(max_examples=40, deadline=None)
@given(profiles, rises, levels)
def test_the_face_line_meets_both_springings_and_its_rise(profile: Profile, rise: float, level: float) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    feet = ring.feet(profile.face)
    assert feet == pytest.approx(np.array([[0.0, 0.0], [1.0, level]]), abs=1e-12)
    assert ring.rise(profile.face) == pytest.approx(rise + abs(level), rel=1e-12)


@settings(max_examples=25, deadline=None)
@given(profiles, st.floats(1.2, 6.0), levels)
def test_the_face_line_has_the_length_asked_for(profile: Profile, length: float, level: float) -> None:
    radial = Profile(profile.thickness, profile.curve, profile.face, "radial")
    ring = stand(1.0, level, Length(length), radial)
    assert ring.length(profile.face) == pytest.approx(length, rel=1e-12)
    assert ring.feet(profile.face)[1] == pytest.approx([1.0, level], abs=1e-12)
    # the length again, from the drawn line alone, refined to Richardson's limit
    q = np.linspace(*ring.ends[profile.face], 40_001)
    fine, coarse = (np.sum(np.hypot(*np.diff(ring.line(profile.face).point(part), axis=0).T)) for part in (q, q[::2]))
    assert fine + (fine - coarse) / 3.0 == pytest.approx(length, rel=1e-10)


@settings(max_examples=40, deadline=None)
@given(profiles, st.floats(0.1, 0.9), st.floats(0.15, 1.5), levels)
def test_the_face_line_passes_the_point_asked_for(profile: Profile, x: float, over: float, level: float) -> None:
    z = level * x + over * 4.0 * x * (1.0 - x)
    radial = Profile(profile.thickness, profile.curve, profile.face, "radial")
    ring = stand(1.0, level, Through(x, z), radial)
    line = ring.line(profile.face)
    assert line.point(line.at_x(x)) == pytest.approx([x, z], abs=1e-12)


@settings(max_examples=20, deadline=None)
@given(profiles, rises, levels)
def test_each_line_of_a_ring_gives_back_the_same_ring(profile: Profile, rise: float, level: float) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    for face in LINES:
        feet = ring.feet(face)
        span, height = feet[1] - feet[0]
        again = stand(
            span, height, Rise(ring.rise(face)), Profile(profile.thickness, profile.curve, face, profile.foot)
        )
        assert again.shape.scale == pytest.approx(ring.shape.scale, rel=1e-11)
        assert again.area == pytest.approx(ring.area, rel=1e-11)
        by_length = stand(span, height, Length(ring.length(face)), again.profile)
        assert by_length.shape.scale == pytest.approx(ring.shape.scale, rel=1e-11)


def test_a_steep_parallel_agrees_with_thirty_digit_arithmetic() -> None:
    # The outer face of an arch whose inner face is the catenary, over unlevel springings: the three equations of span,
    # level difference and length of the parallel at d, solved by mpmath from a start of its own.
    span, level, length, d = 2.0, 0.3, 5.0, 0.25
    with mp.workdps(30):

        def equations(a: mp.mpf, u0: mp.mpf, u1: mp.mpf) -> list[mp.mpf]:
            def gd(u: mp.mpf) -> mp.mpf:
                return 2 * mp.atan(mp.tanh(u / 2))

            return [
                a * (u1 - u0) + d * (mp.tanh(u1) - mp.tanh(u0)) - span,
                -a * (mp.cosh(u1) - mp.cosh(u0)) + d * (mp.sech(u1) - mp.sech(u0)) - mp.mpf(level),
                a * (mp.sinh(u1) - mp.sinh(u0)) + d * (gd(u1) - gd(u0)) - length,
            ]

        a, u0, u1 = mp.findroot(equations, (0.35, -2.5, 2.3))
    ring = stand(span, level, Length(length), Profile(d, "intrados", "extrados", "radial"))
    assert ring.shape.scale == pytest.approx(float(a), rel=1e-13)
    assert ring.ends["extrados"] == pytest.approx((float(u0), float(u1)), rel=1e-13)


@pytest.mark.parametrize("rise", [1e-6, 1e-4, 1e-2, 1.0, 10.0, 1e3])
def test_flat_and_steep_arches_agree_with_thirty_digit_arithmetic(rise: float) -> None:
    with mp.workdps(30):
        start = math.asinh(4 * rise)
        u = mp.findroot(lambda v: 2 * mp.sinh(v / 2) ** 2 / (2 * v) - mp.mpf(rise), start * (1.0 if rise < 1 else 1.2))
        parameter = 1 / (2 * u)
    ring = stand(1.0, 0.0, Rise(rise), Profile(1e-5, foot="radial"))
    assert ring.shape.scale == pytest.approx(float(parameter), rel=1e-12)


def test_a_flat_arch_tends_to_the_parabola() -> None:
    # rise -> span^2 / 8 a
    ring = stand(1.0, 0.0, Rise(1e-5), Profile(1e-5, foot="radial"))
    assert ring.shape.scale == pytest.approx(1.0 / 8e-5, rel=1e-9)


# Laws


@settings(max_examples=20, deadline=None)
@given(profiles, rises, levels)
def test_changing_the_springings_over_mirrors_the_arch(profile: Profile, rise: float, level: float) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    mirrored = stand(1.0, -level, Rise(rise + abs(level)), profile)
    assert mirrored.shape.scale == pytest.approx(ring.shape.scale, rel=1e-12)
    for name in LINES:
        assert mirrored.feet(name)[::-1] * [-1, 1] + [1.0, level] == pytest.approx(ring.feet(name), abs=1e-11)
    assert mirrored.area == pytest.approx(ring.area, rel=1e-12)
    assert mirrored.under_area == pytest.approx(ring.under_area, rel=1e-12)
    assert mirrored.centroid * [-1, 1] + [1.0, level] == pytest.approx(ring.centroid, abs=1e-11)


@settings(max_examples=20, deadline=None)
@given(profiles, rises, levels, st.floats(1e-3, 1e3))
def test_a_larger_arch_is_the_same_arch(profile: Profile, rise: float, level: float, factor: float) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    larger = Profile(profile.thickness * factor, profile.curve, profile.face, profile.foot)
    big = stand(factor, level * factor, Rise(factor * (rise + abs(level))), larger)
    assert big.shape.scale == pytest.approx(factor * ring.shape.scale, rel=1e-11)
    assert big.area == pytest.approx(factor**2 * ring.area, rel=1e-11)
    assert big.length("extrados") == pytest.approx(factor * ring.length("extrados"), rel=1e-11)


@pytest.mark.parametrize(("curve", "face", "foot"), ALL)
def test_every_normal_distance_between_the_faces_is_the_thickness(curve: LineName, face: LineName, foot: Foot) -> None:
    ring = stand(3.0, 0.4, Rise(2.0), Profile(0.25, curve, face, foot))
    outer = LineString(ring.extrados.sample(-4.0, 4.0, 1e-8))
    axis = LineString(ring.axis.sample(-4.0, 4.0, 1e-8))
    for point in ring.intrados.point(np.linspace(*ring.ends["intrados"], 23)):
        assert outer.distance(Point(point)) == pytest.approx(0.25, abs=3e-8)
        assert axis.distance(Point(point)) == pytest.approx(0.125, abs=3e-8)


@pytest.mark.parametrize(("curve", "face", "foot"), ALL)
def test_areas_and_centroids_are_the_limits_of_drawn_polygons(curve: LineName, face: LineName, foot: Foot) -> None:
    ring = stand(3.0, -0.5, Rise(1.6), Profile(0.4, curve, face, foot))
    for within in (1e-3, 1e-5):
        drawn = outline(ring, within)
        opening = Polygon(ring.sample("intrados", within))
        room = within * (ring.length("intrados") + ring.length("extrados"))
        assert drawn.is_valid
        assert drawn.area == pytest.approx(ring.area, abs=room)
        assert opening.area == pytest.approx(ring.under_area, abs=room)
        assert [drawn.centroid.x, drawn.centroid.y] == pytest.approx(ring.centroid, abs=4 * room)


@settings(max_examples=20, deadline=None)
@given(profiles, rises, levels)
def test_a_ring_with_radial_feet_has_the_area_of_its_axis_times_its_thickness(
    profile: Profile, rise: float, level: float
) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), Profile(profile.thickness, profile.curve, profile.face, "radial"))
    assert ring.area == pytest.approx(profile.thickness * ring.length("axis"), rel=1e-13)
    turn = float(ring.shape.slope(ring.ends["axis"][0]) - ring.shape.slope(ring.ends["axis"][1]))
    assert ring.length("extrados") == pytest.approx(ring.length("intrados") + profile.thickness * turn, rel=1e-13)


@pytest.mark.parametrize(("curve", "face"), list(product(LINES, LINES)))
def test_a_level_foot_cuts_every_line_at_the_springing_level(curve: LineName, face: LineName) -> None:
    ring = stand(3.0, 0.4, Rise(2.0), Profile(0.25, curve, face, "level"))
    for name in LINES:
        assert ring.feet(name)[:, 1] == pytest.approx([0.0, 0.4], abs=1e-14)
    # the wedge between a level and a radial foot, from the closed boundary of thirty-digit arithmetic
    assert ring.ends["extrados"][1] > ring.ends["axis"][1] > ring.ends["intrados"][1] > 0


def test_the_area_of_a_ring_with_level_feet_agrees_with_thirty_digit_quadrature() -> None:
    # Under the extrados less under the intrados, each the integral of z dx down to the springing level.
    a, t, u = 0.8, 0.3, 1.7
    with mp.workdps(30):
        depth = mp.mpf(a) * (mp.cosh(u) - 1)

        def under(d: float) -> mp.mpf:
            def height(v: mp.mpf) -> mp.mpf:
                return depth - a * (mp.cosh(v) - 1) + d * mp.sech(v)

            end = mp.findroot(height, u)
            return 2 * mp.quad(lambda v: height(v) * (a + d * mp.sech(v) ** 2), [0, end / 2, end])

        expected = mp.mpf(under(t / 2)) - mp.mpf(under(-t / 2))
    ring = stand(2 * a * u, 0.0, Scale(a), Profile(t))
    assert ring.area == pytest.approx(float(expected), rel=1e-13)


def test_the_crown_radius_is_that_of_a_circle_through_the_crown() -> None:
    ring = stand(3.0, 0.0, Rise(2.0), Profile(0.3, "extrados", "intrados"))
    p, q = ring.intrados.point(np.array([-1e-3, 0.0]))
    x, z = q - p
    assert ring.crown_radius == pytest.approx((x * x + z * z) / (2 * z), rel=1e-5)
    leaning = stand(1.0, 2.0, Length(2.25), Profile(0.05, foot="radial"))
    assert not leaning.crown_inside
    assert math.isnan(leaning.crown_radius)


def test_drawn_lines_are_within_what_is_asked_of_the_true_ones() -> None:
    ring = stand(3.0, 0.4, Rise(2.0), Profile(0.5, "intrados", "axis"))
    for name, within in product(LINES, (0.1, 1e-2, 1e-4)):
        drawn = ring.sample(name, within)
        true = LineString(ring.line(name).point(np.linspace(*ring.ends[name], 20_001)))
        chords = [LineString(pair) for pair in pairwise(drawn)]
        worst = max(chord.interpolate(f, normalized=True).distance(true) for chord in chords for f in (0.3, 0.5, 0.7))
        assert worst <= within
        assert worst > 0.4 * within or len(drawn) < 15


# What cannot be made


def refusal(span: float, level: float, fact: Fact, profile: Profile) -> SolveError:
    with pytest.raises(SolveError) as caught:
        stand(span, level, fact, profile)
    return caught.value


@pytest.mark.parametrize("curve", ["axis", "extrados"])
@pytest.mark.parametrize("face", LINES)
def test_the_greatest_thickness_is_where_the_intrados_begins_to_fold(curve: LineName, face: LineName) -> None:
    most = greatest_thickness(2.0, 0.0, Rise(2.5), Profile(0.1, curve, face))
    ring = stand(2.0, 0.0, Rise(2.5), Profile(most * (1 - 1e-6), curve, face))
    assert ring.crown_radius == pytest.approx(0.0, abs=1e-5 * most)
    error = refusal(2.0, 0.0, Rise(2.5), Profile(most * (1 + 1e-6), curve, face))
    assert error.key == "thickness"
    said = float(str(error).split("less than ")[1].split(" m")[0])
    assert most * (1 - 1e-3) < said <= most


def test_an_intrados_that_is_the_catenary_itself_never_folds() -> None:
    assert math.isinf(greatest_thickness(2.0, 0.0, Rise(2.5), Profile(0.1, "intrados", "intrados")))
    assert stand(2.0, 0.0, Rise(2.5), Profile(9.0, "intrados", "intrados")).crown_radius > 0
    assert stand(2.0, 0.0, Rise(2.5), Profile(0.1)).greatest_thickness == pytest.approx(
        greatest_thickness(2.0, 0.0, Rise(2.5), Profile(0.1)), rel=1e-12
    )


def test_an_extrados_narrower_than_its_ring_is_refused_for_its_rise() -> None:
    assert refusal(2.0, 0.0, Rise(3.0), Profile(1.9, "intrados", "extrados")).key == "rise"


@pytest.mark.parametrize(
    ("fact", "key"),
    [
        (Rise(0.5), "rise"),
        (Rise(0.4), "rise"),
        (Length(math.hypot(2.0, 0.5)), "length"),
        (Length(1.0), "length"),
        (Through(1.0, 0.25), "through"),
        (Through(2.0, 1.0), "through"),
        (Through(-0.1, 1.0), "through"),
        (Rise(1e5), "rise"),
        (Length(1e5), "length"),
        (Through(1.0, 1e5), "through"),
        (Length(math.hypot(2.0, 0.5) * (1 + 1e-15)), "length"),
        (Through(1.0, 0.25 + 1e-9), "through"),
        (Scale(1e-3), "thrust"),
        (Scale(1e9), "thrust"),
    ],
)
def test_a_fact_that_no_arch_between_the_springings_has_is_refused_by_its_key(fact: Fact, key: str) -> None:
    error = refusal(2.0, 0.5, fact, Profile(0.1, foot="radial"))
    assert error.key == key
    assert "; give" in str(error)


def test_a_level_foot_is_refused_where_it_would_cut_the_ring_away() -> None:
    low = refusal(2.0, 0.0, Rise(0.1), Profile(0.3))
    assert low.key == "foot"
    assert "0.05 m under" in str(low)
    assert refusal(1.0, 2.0, Length(2.25), Profile(0.05)).key == "foot"
    assert stand(2.0, 0.0, Rise(0.1), Profile(0.3, face="intrados")).area > 0


# Blocks

counts = st.integers(2, 60)


@settings(max_examples=40, deadline=None)
@given(profiles, rises, levels, counts, st.just(0.0) | st.floats(1e-6, 0.004))
def test_blocks_and_joints_together_are_the_ring(
    profile: Profile, rise: float, level: float, count: int, joint: float
) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    stones = voussoirs(ring, count, joint=joint)
    mortar = float(np.sum(stones.mortar.area)) if stones.mortar else 0.0
    assert float(np.sum(stones.blocks.area)) + mortar == pytest.approx(ring.area, rel=1e-12)
    assert np.all(stones.blocks.area > 0)
    moment = stones.blocks.area @ stones.blocks.centroid
    if stones.mortar:
        assert len(stones.mortar) == count - 1
        moment = moment + stones.mortar.area @ stones.mortar.centroid
    assert moment / ring.area == pytest.approx(ring.centroid, abs=1e-11)


@pytest.mark.parametrize(("curve", "face", "foot"), ALL)
@pytest.mark.parametrize(("rise", "thickness"), [(0.9, 0.05), (0.9, 0.4), (0.45, 0.3)])
def test_drawn_blocks_are_simple_anticlockwise_and_apart(
    curve: LineName, face: LineName, foot: Foot, rise: float, thickness: float
) -> None:
    ring = stand(2.0, 0.1, Rise(rise), Profile(thickness, curve, face, foot))
    for count, joint in ((2, 0.01), (31, 0.0), (31, 0.008)):
        stones = voussoirs(ring, count, joint=joint)
        drawn = [Polygon(points) for points in stones.blocks.outlines(1e-5)]
        assert all(block.is_valid and block.exterior.is_ccw for block in drawn)
        assert [block.area for block in drawn] == pytest.approx(stones.blocks.area, abs=2e-5)
        assert unary_union(drawn).area == pytest.approx(sum(block.area for block in drawn), abs=1e-12)
        if joint:
            gaps = [one.distance(other) for one, other in pairwise(drawn)]
            assert gaps == pytest.approx([joint] * (count - 1), abs=1e-12)


def test_joints_stand_square_to_the_axis_at_equal_lengths_of_it() -> None:
    ring = stand(2.0, 0.3, Rise(1.5), Profile(0.2, "intrados", "extrados", "radial"))
    stones = voussoirs(ring, 12, joint=0.006)
    along = stones.joints.along
    slope = np.arctan2(along[:, 1], along[:, 0])
    assert slope == pytest.approx(stones.joints.slope, abs=1e-12)
    assert np.all(np.diff(stones.joints.slope) < 0)
    for face in (stones.start, stones.end):
        sides = face.along
        assert np.arctan2(sides[:, 1], sides[:, 0]) == pytest.approx(face.slope, abs=1e-10)
    middles = 0.5 * (stones.joints.bottom + stones.joints.top)
    axis = LineString(ring.sample("axis", 1e-9))
    places = [axis.project(Point(point)) for point in middles]
    assert np.diff([0.0, *places, axis.length]) == pytest.approx([ring.length("axis") / 12] * 12, abs=1e-7)


def test_a_joint_takes_its_width_off_the_block_on_both_faces() -> None:
    # Between parallel planes j apart both faces lose the same to second order in j over the radius.
    ring = stand(2.0, 0.0, Rise(1.5), Profile(0.1))
    bare, laid = voussoirs(ring, 15), voussoirs(ring, 15, joint=1e-4)
    for face in ("inner_length", "outer_length"):
        lost = getattr(bare.blocks, face) - getattr(laid.blocks, face)
        assert lost[1:-1] == pytest.approx([1e-4] * 13, rel=1e-5)
        assert lost[[0, -1]] == pytest.approx([0.5e-4] * 2, rel=1e-5)


def test_a_level_foot_is_a_joint_at_a_right_angle_and_a_radial_one_square_to_the_axis() -> None:
    level = voussoirs(stand(2.0, 0.0, Rise(1.5), Profile(0.1)), 15)
    assert np.degrees([level.start.slope[0], level.end.slope[-1]]) == pytest.approx([90.0, -90.0], abs=1e-12)
    ring = stand(2.0, 0.0, Rise(1.5), Profile(0.1, foot="radial"))
    radial = voussoirs(ring, 15)
    assert radial.start.slope[0] == pytest.approx(float(ring.shape.slope(ring.ends["axis"][0])), abs=1e-15)
    assert radial.end.slope[-1] == pytest.approx(-radial.start.slope[0], abs=1e-12)


def test_stones_of_a_level_arch_repeat_as_mirror_pairs_alone() -> None:
    ring = stand(2.0, 0.0, Rise(1.5), Profile(0.1))
    assert voussoirs(ring, 31, joint=0.004).different == 16
    assert voussoirs(ring, 30).different == 15
    assert list(voussoirs(ring, 5).forms) == [0, 1, 2, 1, 0]
    leaning = stand(2.0, 0.4, Rise(1.5), Profile(0.1))
    assert voussoirs(leaning, 31).different == 31
    assert voussoirs(ring, 31).keystone == 15
    assert voussoirs(ring, 30).keystone is None


def test_joints_that_run_out_on_a_level_foot_are_counted_and_end_on_it() -> None:
    ring = stand(2.0, 0.0, Rise(0.4), Profile(0.3))
    stones = voussoirs(ring, 31, joint=0.008)
    assert stones.run_out == 4
    out = stones.joints.runs_out != 0
    assert stones.joints.bottom[out, 1] == pytest.approx([0.0] * 4, abs=1e-14)
    assert np.all(stones.joints.bottom[~out, 1] > 0)


def test_a_joint_that_leaves_nothing_of_a_block_is_refused() -> None:
    ring = stand(2.0, 0.0, Rise(1.5), Profile(0.4))
    with pytest.raises(SolveError, match="thinner joints or fewer blocks") as caught:
        voussoirs(ring, 101, joint=0.05)
    assert caught.value.key == "joint"


# Thrust


@settings(max_examples=15, deadline=None)
@given(profiles, rises, levels)
def test_the_abutments_bear_the_weight_and_the_thrust_between_them(profile: Profile, rise: float, level: float) -> None:
    ring = stand(1.0, level, Rise(rise + abs(level)), profile)
    line = thrust(ring, 20e3)
    assert line.weight == pytest.approx(20e3 * ring.area, rel=1e-12)
    assert line.on_from + line.on_to == pytest.approx([0.0, -line.weight], abs=1e-9 * line.weight)
    assert line.on_from[0] == pytest.approx(-line.horizontal, rel=1e-12)
    assert line.on_from[0] < 0 < line.on_to[0]
    # Moments about the origin: what the abutments give back, where the line meets the feet, against the weight.
    (x0, z0), (x1, z1) = line.points[0], line.points[-1]
    turning = -(x0 * line.on_from[1] - z0 * line.on_from[0]) - (x1 * line.on_to[1] - z1 * line.on_to[0])
    assert turning == pytest.approx(line.weight * ring.centroid[0], rel=1e-9, abs=1e-9 * line.weight)


def test_the_thrust_of_a_catenary_axis_is_weight_per_metre_times_parameter() -> None:
    ring = stand(2.0, 0.2, Rise(1.5), Profile(0.2))
    assert thrust(ring, 18e3).horizontal == pytest.approx(18e3 * 0.2 * ring.shape.scale, rel=1e-14)
    radial = stand(2.0, 0.2, Rise(1.5), Profile(0.2, foot="radial"))
    line = thrust(radial, 18e3)
    slope = -math.tan(float(radial.shape.slope(radial.ends["axis"][0])))
    assert line.on_from[1] == pytest.approx(line.horizontal * slope, rel=1e-12)
    past_its_crown = stand(1.0, 2.0, Length(2.25), Profile(0.05, foot="radial"))
    assert thrust(past_its_crown, 18e3).on_to[1] > 0  # the upper abutment is pulled up: the ring leans over it


@pytest.mark.parametrize(("curve", "foot"), [("intrados", "level"), ("extrados", "radial"), ("intrados", "radial")])
def test_no_line_of_thrust_is_less_eccentric_than_the_one_given(curve: LineName, foot: Foot) -> None:
    ring = stand(2.0, 0.1, Rise(1.4), Profile(0.25, curve, "intrados", foot))
    best = thrust(ring, 1.0)
    joints = divided(ring, 200)
    out = np.stack([-joints.along[:, 1], joints.along[:, 0]], axis=-1)
    outside = np.sum((best.points - joints.centre) * out, axis=-1) / joints.thickness
    assert float(np.max(np.abs(outside))) == pytest.approx(best.eccentricity, rel=1e-12)
    # Chebyshev's mark of the best: with three unknowns, four joints of greatest eccentricity with signs in turn.
    peaks = outside[np.abs(outside) > best.eccentricity * (1 - 1e-6)]
    changes = np.count_nonzero(np.diff(np.sign(peaks)))
    assert changes >= 3


@pytest.mark.parametrize("curve", LINES)
@pytest.mark.parametrize("foot", FEET)
def test_a_thin_ring_has_the_thrust_of_its_line_whatever_its_curve(curve: LineName, foot: Foot) -> None:
    ring = stand(2.0, 0.1, Rise(1.4), Profile(1e-4, curve, "axis", foot))
    assert thrust(ring, 1.0).horizontal == pytest.approx(
        1e-4 * ring.shape.scale, rel=2e-3 if curve != "axis" else 1e-12
    )


@pytest.mark.parametrize("curve", LINES)
@pytest.mark.parametrize("foot", FEET)
def test_an_arch_asked_for_by_its_thrust_has_it(curve: LineName, foot: Foot) -> None:
    ring = stand_with_thrust(2.0, 0.1, 2000.0, 18e3, Profile(0.2, curve, "intrados", foot))
    assert thrust(ring, 18e3).horizontal == pytest.approx(2000.0, rel=1e-9)
    assert ring.feet("intrados")[1] == pytest.approx([2.0, 0.1], abs=1e-12)


def test_a_thrust_that_no_arch_has_is_refused() -> None:
    with pytest.raises(SolveError) as caught:
        stand_with_thrust(2.0, 0.0, 1.0, 18e3, Profile(0.5, "extrados", "intrados"))
    assert caught.value.key == "thrust"
    with pytest.raises(SolveError) as caught:
        stand_with_thrust(2.0, 0.0, 1e7, 18e3, Profile(0.2, "extrados", "axis"))
    assert caught.value.key == "thrust"


def test_weights_between_joints_add_up_to_the_ring() -> None:
    for foot in FEET:
        ring = stand(2.0, 0.0, Rise(0.4), Profile(0.3, foot=foot))
        joints = divided(ring, 200)
        assert float(np.sum(joints.weight)) == pytest.approx(ring.area, rel=1e-13)
        assert float(joints.weight @ joints.weight_at) / ring.area == pytest.approx(1.0, rel=1e-12)
        assert len(joints.thickness) >= 200


# Setting out


@pytest.mark.parametrize(("curve", "face", "foot"), ALL)
def test_ordinates_are_the_heights_of_the_drawn_lines(curve: LineName, face: LineName, foot: Foot) -> None:
    ring = stand(3.0, -0.5, Rise(1.6), Profile(0.4, curve, face, foot))
    x = stations(ring, 0.25)
    table = ordinates(ring, x)
    assert 0.0 in x
    assert 3.0 in x
    assert np.all(np.diff(x) > 0)
    for name in LINES:
        drawn = ring.sample(name, 1e-8)
        heights = np.interp(x, drawn[:, 0], drawn[:, 1], left=np.nan, right=np.nan) + 0.5  # over the lower springing
        given = getattr(table, name)
        feet = ring.feet(name)[:, 0]
        at_foot = np.min(np.abs(x[:, None] - feet), axis=1) < 1e-9  # there a drawn line ends a rounding early or late
        inside = ~np.isnan(heights) & ~np.isnan(given)
        assert given[inside] == pytest.approx(heights[inside], abs=1e-6)
        assert np.array_equal(np.isnan(given)[~at_foot], np.isnan(heights)[~at_foot])
        along = getattr(table, f"along_{name}")
        assert np.array_equal(np.isnan(along), np.isnan(given))
        line = LineString(drawn)
        for place, z, length in zip(x[inside], given[inside], along[inside], strict=True):
            assert line.project(Point(place, z - 0.5)) == pytest.approx(length, abs=1e-6)


def test_the_springings_stand_in_the_setting_out_and_the_crown_at_the_rise() -> None:
    ring = stand(3.0, 0.0, Rise(1.6), Profile(0.4, "axis", "intrados"))
    table = ordinates(ring, [-0.5, 0.0, 1.5, 3.0])
    assert table.intrados == pytest.approx([math.nan, 0.0, 1.6, 0.0], abs=1e-12, nan_ok=True)
    assert table.extrados[2] == pytest.approx(2.0, abs=1e-12)
    assert table.along_intrados[3] == pytest.approx(ring.length("intrados"), rel=1e-12)


def test_clear_widths_are_measured_between_the_sides_of_the_intrados() -> None:
    ring = stand(3.0, 0.4, Rise(1.6), Profile(0.4, "extrados", "intrados"))
    heights = np.array([0.0, 0.2, 0.4, 1.0, 1.5, 1.6, 1.7])
    widths = clear_widths(ring, heights)
    assert np.isnan(widths).tolist() == [True, True, False, False, False, False, True]
    opening = Polygon(ring.sample("intrados", 1e-9))
    for height, width in zip(heights[2:5], widths[2:5], strict=True):
        level = LineString([(-1.0, height), (4.0, height)])
        assert level.intersection(opening).length == pytest.approx(width, abs=2e-8)
    assert widths[5] == pytest.approx(0.0, abs=1e-6)


def test_setting_out_in_absurdly_small_steps_is_refused() -> None:
    with pytest.raises(ValueError, match="give a longer one"):
        stations(stand(3.0, 0.0, Rise(1.6), Profile(0.4)), 1e-6)


# The numbers underneath


@given(st.floats(0.05, 20.0), st.floats(-0.95, 20.0), st.floats(-6.0, 6.0))
def test_what_a_parallel_tells_of_a_parameter_leads_back_to_it(scale: float, share: float, u: float) -> None:
    shape, d = Catenary(scale), share * scale
    x = float(shape.point(u)[0] + d * shape.normal(u)[0])
    assert float(shape.at_x(x, d)) == pytest.approx(u, abs=1e-12 / (1 + min(share, 0)))
    assert float(shape.at_length(shape.length(u, d), d)) == pytest.approx(u, abs=1e-12 / (1 + min(share, 0)))
    assert float(shape.at_drop(shape.drop(u, d), d)) == pytest.approx(abs(u), abs=1e-12 / (1 + min(share, 0)))
    assert float(shape.at_slope(shape.slope(u))) == pytest.approx(u, abs=1e-12)


@given(st.floats(-5.0, 5.0), st.floats(-0.9, 5.0))
def test_speed_and_drop_are_the_derivative_and_depth_of_the_points(u: float, d: float) -> None:
    shape, step = Catenary(1.0), 1e-6
    ahead, behind = (shape.point(v) + d * shape.normal(v) for v in (u + step, u - step))
    assert math.hypot(*(ahead - behind)) / (2 * step) == pytest.approx(float(shape.speed(u, d)), rel=1e-7, abs=1e-7)
    depth = d - float((shape.point(u) + d * shape.normal(u))[1])
    assert float(shape.drop(u, d)) == pytest.approx(depth, rel=1e-12, abs=1e-12)


def test_a_rising_root_is_found_where_newton_alone_runs_away() -> None:
    found = rising_root(lambda x: (np.arctan(x), 1.0 / (1.0 + x * x)), -10.0, [1e3, 1e6], start=[500.0, 1e5])
    assert found == pytest.approx([0.0, 0.0], abs=1e-12)


def test_a_function_without_values_has_no_root() -> None:
    with pytest.raises(SolveError, match="no value"):
        rising_root(lambda x: (np.full_like(x, np.nan), np.ones_like(x)), 0.0, 1.0, start=0.5)


def test_a_cut_moved_far_along_a_thick_ring_still_stands_in_its_plane() -> None:
    ring = stand(2.0, 0.0, Rise(1.5), Profile(0.5, "intrados", "intrados", "radial"))
    q = np.linspace(-1.0, 1.0, 9)
    moved = cut(ring, q, shift=0.05)
    base, along = ring.axis.point(q), ring.axis.tangent(q)
    for ends in (moved.bottom, moved.top):
        assert np.sum((ends - base) * along, axis=-1) == pytest.approx([0.05] * 9, abs=1e-14)
