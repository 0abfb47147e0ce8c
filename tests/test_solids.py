"""Solids: volumes and surfaces against closed forms, topology, and laws.

Closed forms for tubes on a curve (V = pi r^2 L, S = 2 pi r L) and stadium links are Pappus's theorems; a mitred
tube of m sides on a polyline has exactly the volume (m/2) r^2 sin(2 pi/m) L. The numbers beside them were
worked out from these formulas apart from this code.
"""

import pickle

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from manifold3d import Manifold
from manifold3d import Mesh as ManifoldMesh

from geom.curves import Arc, Catenary, Curve, Joined, Offset, Polyline, Segment, catenary_points, hanging_strands
from geom.curves.base import Array, Index
from geom.solids import (
    Balls,
    Bars,
    Body,
    Faceted,
    Link,
    Links,
    Mesh,
    Prism,
    Shell,
    Solid,
    Sweep,
    Union,
    link_frames,
    no_twist,
)
from geom.solids.triangles import triangulated

X, Y, Z = np.eye(3)
WITHIN = 5e-4
law = settings(deadline=None, max_examples=40)


def at(*numbers: float) -> Array:
    return np.array(numbers, dtype=float)


def catenary(u: float, a: float = 1.0) -> Catenary:
    """Level catenary of half span u a."""
    return Catenary(at(0, 0, 0), at(2 * u * a, 0, 0), a)


def polygon(sides: int, radius: float) -> Array:
    angle = 2 * np.pi * np.arange(sides) / sides
    return np.asarray(radius * np.stack([np.cos(angle), np.sin(angle)], axis=1))


def one_link(link: Link) -> Links:
    return Links(np.zeros((1, 3)), np.eye(3)[None], link)


SLOPING = Catenary(at(0, 0, 3), at(4, 2, 3.5), 1.2)
CHAIN = Link(0.010, 0.028, 0.034)
CORBEL = np.array([[0, 0], [4, 0], [4, 3], [3, 3], [3, 1], [1, 1], [1, 3], [0, 3.0]])
BALL = Balls(np.zeros((1, 3)), 5.0).template(1e-3)
DOME = BALL.faces[BALL.vertices[BALL.faces].mean(axis=1)[:, 2] > 0]


def many_bars() -> Bars:
    p = np.stack([at(0, 0, 0), at(1, 0, 2), at(0, 0, 5), at(2, 2, 2)])
    q = np.stack([at(2, 1, 0), at(0, 3, 1), at(0, 0, 4), at(3, 1, 1)])
    points, first = catenary_points(p, q, at(0.8, 2.0, np.inf, np.inf), WITHIN)
    return Bars(points, first, 0.01, 0.007)


BODIES: dict[str, Body] = {
    "rope": Sweep(SLOPING, 0.01),
    "tube": Sweep(SLOPING, 0.1, 0.09),
    "triangular rib": Sweep(SLOPING, np.array([[-0.1, -0.05], [0.1, -0.05], [0, 0.1]])),
    "tapered tube": Sweep(SLOPING, 0.1, 0.08, taper=np.array([[0, 1.5], [0.5, 1], [1, 1.5]])),
    "ring": Sweep(Arc(at(1, 2, 3), 1.0, X, Y, 0.0, 2 * np.pi), 0.1, 0.05),
    "links": Links(*link_frames(SLOPING, 150, 0.028), CHAIN),
    "balls": Balls(np.stack([X, Y, Z]), 0.05),
    "bars": many_bars(),
    "corbel": Prism(CORBEL, at(0, 0, -2)),
    "dome": Shell(BALL.vertices, DOME, 0.3),
    "union": Union((Sweep(SLOPING, 0.01), Balls(SLOPING.p[None], 0.02))),
}
BODIES["facets"] = Faceted(BODIES["corbel"].mesh(WITHIN))
every_body = pytest.mark.parametrize("body", BODIES.values(), ids=BODIES.keys())


# ------------------------------------------------------------------ every body


@every_body
def test_a_body_is_watertight_and_the_right_way_out(body: Body) -> None:
    mesh = body.mesh(WITHIN)
    assert mesh.is_watertight
    assert mesh.volume > 0


@every_body
def test_the_facets_keep_the_volume_within_one_in_a_thousand(body: Body) -> None:
    # One per cent is promised; facets of the section's true area are only off by the chords of the line.
    assert body.mesh(WITHIN).volume == pytest.approx(body.volume, rel=1e-3)


@every_body
def test_a_body_in_chunks_is_the_mesh(body: Body) -> None:
    mesh = body.mesh(WITHIN)
    chunks = np.concatenate(list(body.chunks(WITHIN)))
    assert len(chunks) == body.facets(WITHIN) == len(mesh.faces)
    low, high = body.extents(WITHIN)
    assert chunks[:, 1:].min(axis=(0, 1)) == pytest.approx(low, abs=1e-6)
    assert chunks[:, 1:].max(axis=(0, 1)) == pytest.approx(high, abs=1e-6)
    assert mesh.extents[0] == pytest.approx(low, abs=1e-12)
    normal, a, b, c = np.moveaxis(chunks.astype(float), 1, 0)
    assert np.einsum("ij,ij->", a, np.cross(b, c)) / 6 == pytest.approx(mesh.volume, rel=2e-4)
    cross = np.cross(b - a, c - a)
    assert np.einsum("ij,ij->i", normal, cross) == pytest.approx(np.linalg.norm(cross, axis=1), rel=1e-3)


@every_body
def test_scaling_a_body_scales_its_volume_and_box(body: Body) -> None:
    scaled = body.scaled(0.05)
    assert scaled.volume == pytest.approx(body.volume * 0.05**3, rel=1e-12)
    assert scaled.mesh(WITHIN * 0.05).volume == pytest.approx(body.mesh(WITHIN).volume * 0.05**3, rel=1e-6)
    assert scaled.extents(WITHIN * 0.05)[1] == pytest.approx(body.extents(WITHIN)[1] * 0.05, abs=1e-6)


@every_body
def test_moving_a_body_moves_its_box(body: Body) -> None:
    moved = body.moved(at(10, -5, 2))
    assert moved.volume == pytest.approx(body.volume, rel=1e-12)
    assert moved.extents(WITHIN)[0] == pytest.approx(body.extents(WITHIN)[0] + [10, -5, 2], abs=1e-9)


@every_body
def test_a_body_survives_pickling(body: Body) -> None:
    assert pickle.loads(pickle.dumps(body)) == body


# ------------------------------------------------------------------ sweeps


def test_a_tube_has_pappus_volume_and_surface() -> None:
    # u = 1.5, a = 1, r = 0.08: V = pi r^2 L = 0.0856234073, S = 2 pi r L = 2.1405851819.
    tube = Sweep(catenary(1.5), 0.08)
    assert tube.volume == pytest.approx(0.0856234073, abs=1e-10)
    mesh = tube.mesh(1e-5)
    ends = 2 * np.pi * 0.08**2
    assert mesh.volume == pytest.approx(0.0856234073, rel=1e-5)
    assert mesh.area - ends == pytest.approx(2.1405851819, rel=2e-3)


@pytest.mark.parametrize("within", [1e-4, 1e-2, 10.0])
def test_a_tube_far_smaller_than_the_tolerance_keeps_its_volume(within: float) -> None:
    # A tenth of the hundredth that solids are held to, on curves that turn by two and a half and by six radians.
    for curve in (catenary(1.5, 1e-3), Arc(at(1, 2, 3), 1e-3, X, Y, 0.0, 2 * np.pi)):
        mesh = Sweep(curve, 1e-4).mesh(within)
        assert mesh.is_watertight
        assert mesh.volume == pytest.approx(np.pi * 1e-8 * curve.length, rel=4e-3)


@pytest.mark.parametrize(("sides", "chords", "volume"), [(24, 40, 0.0846381183), (12, 20, 0.0817235707)])
def test_a_mitred_tube_has_the_polygons_volume(sides: int, chords: int, volume: float) -> None:
    # (m/2) r^2 sin(2 pi/m) times the polyline's length, equal steps on plan; u = 1.5, a = 1, r = 0.08.
    x = np.linspace(-1.5, 1.5, chords + 1)
    line = Polyline(np.stack([x, 0 * x, np.cosh(x)], axis=1))
    mesh = Sweep(line, polygon(sides, 0.08)).mesh(WITHIN)
    assert mesh.volume == pytest.approx(volume, abs=1e-10)
    assert mesh.volume == pytest.approx(sides / 2 * 0.08**2 * np.sin(2 * np.pi / sides) * line.length, rel=1e-13)


def test_facets_of_a_round_section_keep_its_area() -> None:
    line = Segment(at(0, 0, 0), 2 * X)
    for within in (0.05, 0.01, 1e-4):
        assert Sweep(line, 0.1).mesh(within).volume == pytest.approx(np.pi * 0.01 * 2, rel=1e-13)


@pytest.mark.parametrize("within", [1e-2, 1e-3, 1e-4])
def test_a_round_section_is_drawn_within_the_tolerance(within: float) -> None:
    vertices = Sweep(Segment(at(0, 0, 0), X), 0.5).mesh(within).vertices
    ring = vertices[vertices[:, 0] == 0][:, 1:]
    corner = np.linalg.norm(ring, axis=1)
    middle = np.linalg.norm((ring + np.roll(ring, -1, axis=0)) / 2, axis=1)
    assert corner.max() - 0.5 <= within
    assert 0.5 - middle.min() <= within


def test_a_tube_has_the_topology_of_a_ball_and_a_pipe_that_of_a_ring() -> None:
    assert Sweep(SLOPING, 0.05).mesh(WITHIN).euler == 2
    assert Sweep(SLOPING, 0.05, 0.04).mesh(WITHIN).euler == 0
    assert BODIES["ring"].mesh(WITHIN).bodies == 2  # outer and inner torus
    assert BODIES["ring"].mesh(WITHIN).euler == 0


def test_a_closed_sweep_is_a_torus() -> None:
    ring = Sweep(Arc(at(0, 0, 0), 1.0, X, Z, 0.0, 2 * np.pi), 0.25)
    # 2 pi^2 R r^2 and 4 pi^2 R r (Pappus).
    mesh = ring.mesh(2e-5)
    assert mesh.euler == 0
    assert mesh.volume == pytest.approx(2 * np.pi**2 * 0.25**2, rel=1e-4)
    assert mesh.area == pytest.approx(4 * np.pi**2 * 0.25, rel=1e-3)


def test_a_section_with_corners_stands_upright() -> None:
    # Apex up, base level: the highest points of a level rib are its apex, 0.3 over the line.
    rib = Sweep(Segment(at(0, 0, 0), at(3, 4, 0)), np.array([[-0.1, -0.1], [0.1, -0.1], [0, 0.3]]))
    vertices = rib.mesh(WITHIN).vertices
    top = vertices[np.isclose(vertices[:, 2], 0.3)]
    assert len(top) == 2
    # On the left of the line, as x in the section is: (-4, 3)/5.
    left = vertices @ at(-0.8, 0.6, 0)
    assert sorted(np.unique(left.round(12))) == pytest.approx([-0.1, 0, 0.1], abs=1e-12)


def test_up_turns_the_section() -> None:
    rib = Sweep(Segment(at(0, 0, 0), 3 * X), np.array([[-0.1, -0.1], [0.1, -0.1], [0, 0.3]]), up=Y)
    assert rib.mesh(WITHIN).extents[1][1] == pytest.approx(0.3, abs=1e-12)


def test_a_taper_makes_a_frustum() -> None:
    # pi h/3 (R^2 + R r + r^2).
    cone = Sweep(Segment(at(0, 0, 0), 2 * X), 1.0, taper=np.array([[0, 0.5], [1, 0.2]]))
    true = np.pi * 2 / 3 * (0.25 + 0.1 + 0.04)
    assert cone.volume == pytest.approx(true, rel=1e-14)
    assert cone.mesh(WITHIN).volume == pytest.approx(true, rel=1e-12)


def test_a_strand_that_doubles_back_is_two_bars() -> None:
    mesh = Sweep(hanging_strands([0, 0, 3], [0, 0, 2], 4.0), 0.01).mesh(WITHIN)
    assert mesh.is_watertight
    assert mesh.bodies == 2
    # Each of the two is longer by three thousandths of its thickness, so that they share no corner.
    assert mesh.volume == pytest.approx(np.pi * 1e-4 * (4 + 2 * 3e-3 * 0.02), rel=1e-4)
    assert len(np.unique(mesh.vertices.astype(np.float32), axis=0)) == len(mesh.vertices)


def test_a_knot_closes_without_a_seam() -> None:
    # A trefoil does not lie in a plane: the untwisted frame comes round turned, and the turn is spread.
    v = np.linspace(0, 2 * np.pi, 400, endpoint=False)
    knot = np.stack([np.sin(v) + 2 * np.sin(2 * v), np.cos(v) - 2 * np.cos(2 * v), -np.sin(3 * v)], axis=1)
    line = Polyline(knot, closed=True)
    mesh = Sweep(line, polygon(12, 0.2)).mesh(WITHIN)
    assert mesh.is_watertight
    rings = mesh.vertices.reshape(400, 12, 3) - knot[:, None]
    first = rings[:, 0] / np.linalg.norm(rings[:, 0], axis=1, keepdims=True)
    # From one corner to the next the first corner of the section turns by no more than the line does (0.06 rad).
    turn = np.arccos((first * np.roll(first, -1, axis=0)).sum(axis=1))
    assert turn.max() < 0.08


def test_sections_that_are_none_are_refused() -> None:
    line = Segment(at(0, 0, 0), X)
    with pytest.raises(ValueError, match="section must be more than 0"):
        Sweep(line, 0.0)
    with pytest.raises(ValueError, match="a polygon with an area"):
        Sweep(line, np.array([[0, 0], [1, 1], [2, 2.0]]))
    with pytest.raises(ValueError, match="hole must be smaller"):
        Sweep(line, 0.1, 0.1)
    with pytest.raises(ValueError, match="round in a round section"):
        Sweep(line, 0.1, polygon(4, 0.05))
    with pytest.raises(ValueError, match="must rise from 0 to 1"):
        Sweep(line, 0.1, taper=np.array([[0, 1], [0.9, 1]]))


def test_bars_are_the_sweeps_of_their_curves() -> None:
    curves = [Catenary(at(0, 0, 0), at(2, 1, 0), 0.8), Catenary(at(1, 0, 2), at(0, 3, 1), 2.0)]
    p, q = np.stack([c.p for c in curves]), np.stack([c.q for c in curves])
    points, first = catenary_points(p, q, at(0.8, 2.0), WITHIN)
    bars = Bars(points, first, 0.01, length=sum(c.length for c in curves))
    single = [Sweep(curve, 0.01) for curve in curves]
    assert bars.volume == pytest.approx(sum(body.volume for body in single), rel=1e-14)
    mesh = bars.mesh(WITHIN)
    true = sum(body.mesh(WITHIN).volume for body in single)
    # Each is longer by three thousandths of the section's size.
    assert mesh.volume == pytest.approx(true + 2 * 3e-3 * 0.02 * np.pi * 1e-4, rel=1e-6)
    starts = np.concatenate([np.zeros(1, int), np.cumsum([len(body.mesh(WITHIN).vertices) for body in single])])
    for number, body in enumerate(single):
        ours = mesh.vertices[starts[number] : starts[number + 1]]
        assert ours == pytest.approx(body.mesh(WITHIN).vertices, abs=2.1e-3 * 0.0211)


def test_bars_in_line_share_no_corner() -> None:
    # Two bars along x and one from the other side: end to start, start to start and end to end.
    ends = np.array([[0, 1], [1, 2], [1, 0], [3, 2], [2, 3.0]])
    points = np.zeros((10, 3))
    points[:, 0] = ends.ravel()
    mesh = Bars(points, np.arange(0, 11, 2), 0.02).mesh(WITHIN)
    assert len(np.unique(mesh.vertices.astype(np.float32), axis=0)) == len(mesh.vertices)


def test_bars_need_whole_polylines() -> None:
    with pytest.raises(ValueError, match="first must run from 0"):
        Bars(np.zeros((3, 3)), np.array([0, 1, 3]), 0.1)


# ------------------------------------------------------------------ frames and links


def test_the_untwisted_frame_of_a_helix_turns_against_its_torsion() -> None:
    # The frame without twist turns by -tau against the curve's own normal for each metre (Bishop, "There is more
    # than one way to frame a curve", 1975); helix of radius 1, rise c a radian: tau = c/(1 + c^2), and
    # ds = sqrt(1 + c^2) dv.
    c, errors = 0.5, []
    for steps in (60, 120, 240):
        v = np.linspace(0, 6, steps + 1)
        points = np.stack([np.cos(v), np.sin(v), c * v], axis=1)
        tangents = np.stack([-np.sin(v), np.cos(v), np.full_like(v, c)], axis=1) / np.sqrt(1 + c * c)
        normal = np.stack([-np.cos(v), -np.sin(v), 0 * v], axis=1)
        side = no_twist(points, tangents, normal[0])
        angle = np.arctan2((np.cross(normal, side) * tangents).sum(axis=1), (normal * side).sum(axis=1))
        true = -c / np.sqrt(1 + c * c) * v
        errors.append(np.abs(np.unwrap(angle) - true).max())
    assert errors[2] < 1e-6
    assert np.log2(errors[0] / errors[1]) == pytest.approx(4, abs=0.3)


@law
@given(st.floats(0.2, 3), st.floats(-1, 1), st.floats(0, 6.28))
def test_a_planar_curves_frame_keeps_its_level_side(u: float, rise: float, bearing: float) -> None:
    curve = Catenary(at(0, 0, 0), at(np.cos(bearing), np.sin(bearing), rise), 0.5 / u)
    frames = link_frames(curve, 30, curve.length / 30)
    # Even links stand in the vertical plane: their own z is level and square to it.
    level = at(np.sin(bearing), -np.cos(bearing), 0)
    assert abs(frames.turns[0::2, :, 2] @ level) == pytest.approx(1, abs=1e-9)
    assert frames.turns[0, :, 2] @ level == pytest.approx(1, abs=1e-9)
    assert abs(frames.turns[1::2, :, 1] @ level) == pytest.approx(1, abs=1e-9)


@law
@given(st.floats(0.2, 3), st.integers(2, 60), st.integers(0, 3))
def test_links_follow_one_another_at_quarter_turns(u: float, count: int, quarter: int) -> None:
    curve = catenary(u)
    pitch = 0.9 * curve.length / count
    places, turns = link_frames(curve, count, pitch, 0.05 * curve.length, quarter=quarter)
    assert turns @ np.swapaxes(turns, 1, 2) == pytest.approx(np.broadcast_to(np.eye(3), turns.shape), abs=1e-12)
    assert np.linalg.det(turns) == pytest.approx(1, abs=1e-12)
    joints = curve.at(0.05 * curve.length + pitch * np.arange(count + 1)).points
    assert places == pytest.approx((joints[1:] + joints[:-1]) / 2, abs=1e-12)
    chords = np.diff(joints, axis=0)
    assert turns[:, :, 0] == pytest.approx(chords / np.linalg.norm(chords, axis=1, keepdims=True), abs=1e-12)
    # The z axis of a link is the y axis of the one before, but for the bend between them: the curvature is 1 a
    # metre at most, so from chord to chord the line turns by the pitch at most.
    assert abs((turns[1:, :, 2] * turns[:-1, :, 1]).sum(axis=1)).min() > np.cos(min(1.001 * pitch, 1.57)) - 1e-9


def test_an_odd_chain_ends_as_it_starts_and_an_even_one_crossed() -> None:
    for count, across in ((7, 0.0), (8, 1.0)):
        turns = link_frames(Segment(at(0, 0, 0), X), count, 1 / count).turns
        assert abs(np.cross(turns[0, :, 2], turns[-1, :, 2])[0]) == pytest.approx(across, abs=1e-12)


def test_a_plumb_strand_hangs_in_the_plane_along_x() -> None:
    turns = link_frames(Segment(at(0, 0, 1), at(0, 0, 0)), 10, 0.1).turns
    assert turns[0, :, 0] == pytest.approx(-Z, abs=1e-15)
    assert abs(turns[0, :, 2]) == pytest.approx(Y, abs=1e-15)
    quarter = link_frames(Segment(at(0, 0, 1), at(0, 0, 0)), 10, 0.1, quarter=1).turns
    assert abs(quarter[0, :, 2]) == pytest.approx(X, abs=1e-15)


def test_links_go_round_the_fold_of_a_doubled_strand() -> None:
    strands = hanging_strands([0, 0, 1], [0, 0, 1], 2.0)
    for count in (20, 21):
        turns = link_frames(strands, count, 2 / count).turns
        assert np.isfinite(turns).all()
        assert np.linalg.det(turns) == pytest.approx(1, abs=1e-12)


def test_links_past_the_end_of_the_curve_are_refused() -> None:
    with pytest.raises(ValueError, match="arc lengths must be"):
        link_frames(Segment(at(0, 0, 0), X), 11, 0.1)


def test_a_link_has_pappus_volume() -> None:
    # d 10, p 28, inside width 14 (so b 34): (pi d^2/4)(2 (p - b1) + pi (b1 + d)) = 8120.877498 mm3, surface
    # 3248.350999 mm2.
    link = Link(0.010, 0.028, 0.034)
    assert link.volume == pytest.approx(8120.877498e-9, rel=1e-10)
    for within in (2e-3, 5e-4, 5e-5):
        mesh = one_link(link).mesh(within)
        assert mesh.volume == pytest.approx(8120.877498e-9, rel=1e-9)
    assert mesh.area == pytest.approx(3248.350999e-6, rel=4e-3)


def test_the_mass_of_a_metre_of_chain_is_that_of_its_links() -> None:
    # The same link in steel of 7850 kg/m3: 2.276746 kg/m; the standard's table for 10 x 28 says 2.2 (DIN 766).
    assert Link(0.010, 0.028, 0.034).volume * 7850 / 0.028 == pytest.approx(2.276746, rel=1e-6)


@law
@given(st.floats(1, 39), st.floats(2.2, 12), st.floats(2.1, 5), st.floats(0.01, 0.3))
def test_any_link_is_a_watertight_ring_of_its_true_volume(d: float, p: float, b: float, within: float) -> None:
    link = Link(d, max(p, b - 2) * d, b * d)
    mesh = link.mesh(within * d)
    assert mesh.is_watertight
    assert mesh.euler == 0
    assert len(mesh.faces) == link.facets(within * d)
    assert mesh.volume == pytest.approx(link.volume, rel=1e-9)
    size = mesh.extents[1] - mesh.extents[0]
    assert size == pytest.approx([link.pitch + 2 * d, link.width, d], abs=2 * max(within, 0.1) * d)


def test_a_link_as_wide_as_long_is_a_torus() -> None:
    ring = Link(0.01, 0.028, 0.048)
    assert ring.volume == pytest.approx(2 * np.pi**2 * 0.019 * 0.005**2, rel=1e-12)
    assert one_link(ring).mesh(WITHIN).euler == 0


def test_a_thicker_link_keeps_its_centreline() -> None:
    thick = CHAIN.thickened(0.012)
    assert thick.centreline == pytest.approx(CHAIN.centreline, rel=1e-14)
    assert (thick.pitch, thick.width) == pytest.approx((0.026, 0.036), rel=1e-14)


def test_links_that_are_none_are_refused() -> None:
    with pytest.raises(ValueError, match="has no opening"):
        Link(0.01, 0.03, 0.02)
    with pytest.raises(ValueError, match="as long inside as it is wide inside"):
        Link(0.01, 0.01, 0.034)
    with pytest.raises(ValueError, match="pitch must be more than 0"):
        Link(0.01, -0.01, 0.034)


def as_manifold(mesh: Mesh) -> Manifold:
    return Manifold(ManifoldMesh(mesh.vertices.astype(np.float32), mesh.faces.astype(np.uint32)))


@pytest.mark.parametrize("within", [5e-5, 5e-4, 2e-3])
def test_neighbouring_links_touch_without_cutting_into_one_another(within: float) -> None:
    places, turns = link_frames(Segment(at(0, 0, 0), 0.056 * X), 2, 0.028)
    # In millimetres, since the other side's float32 needs numbers about 1.
    one, other = (
        as_manifold(Links(places[i : i + 1], turns[i : i + 1], CHAIN).mesh(within).scaled(1000)) for i in (0, 1)
    )
    assert (one ^ other).volume() == 0
    # Two thousandths of the wire, 0.02 mm.
    assert one.min_gap(other, 10) == pytest.approx(0.02, rel=1e-2)


# ------------------------------------------------------------------ prisms, shells, balls


def test_a_barrel_vault_has_thickness_times_length_times_depth() -> None:
    # t 0.1, width 3, u 1.5, a 1: t L width = 1.2775676731 for a ring of constant thickness about its axis.
    axis = Catenary(at(0, 0, 0), at(3, 0, 0), 1.0, inverted=True)
    outer, inner = (Offset(axis, side, -Y).points(1e-6) for side in (0.05, -0.05))
    vault = Prism(np.vstack([outer, inner[::-1]]), 3 * Y)
    assert vault.volume == pytest.approx(1.2775676731, rel=2e-5)
    mesh = vault.mesh(WITHIN)
    assert mesh.is_watertight
    assert mesh.euler == 2
    assert mesh.volume == pytest.approx(vault.volume, rel=1e-12)


@st.composite
def stars(draw: st.DrawFn) -> Array:
    """Star-shaped outlines: corners at rising angles and any distances never cross."""
    radii = draw(st.lists(st.floats(0.1, 3), min_size=5, max_size=40))
    angle = 2 * np.pi * np.arange(len(radii)) / len(radii)
    return np.asarray(np.array(radii)[:, None] * np.stack([np.cos(angle), np.sin(angle)], axis=1))


@law
@given(stars(), st.booleans(), st.floats(-3, 3).filter(lambda h: abs(h) > 0.01), st.floats(-1, 1))
def test_any_outline_makes_a_prism_of_its_area_times_height(
    outline: Array, back: bool, height: float, lean: float
) -> None:
    x, y = outline.T
    area = abs(x @ np.roll(y, -1) - y @ np.roll(x, -1)) / 2
    prism = Prism(outline[::-1] if back else outline, at(lean, 0, height))
    assert prism.volume == pytest.approx(area * abs(height), rel=1e-10)
    mesh = prism.mesh(WITHIN)
    assert mesh.is_watertight
    assert mesh.euler == 2
    assert mesh.volume == pytest.approx(prism.volume, rel=1e-9)


@law
@given(stars())
def test_triangles_of_an_outline_are_all_the_right_way_round(outline: Array) -> None:
    a, b, c = outline[triangulated(outline)].transpose(1, 0, 2)
    doubled = (b - a)[:, 0] * (c - a)[:, 1] - (b - a)[:, 1] * (c - a)[:, 0]
    x, y = outline.T
    assert doubled.min() >= 0
    assert doubled.sum() == pytest.approx(x @ np.roll(y, -1) - y @ np.roll(x, -1), rel=1e-9)


def test_corners_on_a_straight_edge_are_kept() -> None:
    square = np.array([[0, 0], [0.5, 0], [1, 0], [1, 1], [0.5, 1], [0, 1], [0, 0.3]])
    mesh = Prism(square, Z).mesh(WITHIN)
    assert mesh.is_watertight
    assert mesh.volume == pytest.approx(1.0, rel=1e-14)
    assert len(mesh.vertices) == 14


def test_outlines_that_are_none_are_refused() -> None:
    star = polygon(7, 1.0)[[0, 3, 6, 2, 5, 1, 4]]  # each edge crosses four others
    with pytest.raises(ValueError, match="crosses or touches itself"):
        Prism(star, Z).mesh(WITHIN)
    with pytest.raises(ValueError, match="three different corners"):
        Prism(np.array([[0, 0], [0, 0], [1, 1.0]]), Z)
    with pytest.raises(ValueError, match="has no area"):
        Prism(np.array([[0, 0], [1, 1], [2, 2.0]]), Z)
    with pytest.raises(ValueError, match="lie in one plane"):
        Prism(np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0.1], [0, 1, 0]]), Z)
    with pytest.raises(ValueError, match="lead out of the outline's plane"):
        Prism(CORBEL, X)


def hemisphere(rings: int, sectors: int) -> tuple[Array, Index]:
    """Unit hemisphere: crown, then rings of corners down to the springing."""
    polar = np.pi / 2 * np.arange(1, rings + 1) / rings
    round_ = 2 * np.pi * np.arange(sectors) / sectors
    ring = np.stack([np.cos(round_), np.sin(round_), 0 * round_], axis=1)
    vertices = np.sin(polar)[:, None, None] * ring + np.cos(polar)[:, None, None] * Z
    here, beside = np.arange(sectors), (np.arange(sectors) + 1) % sectors
    crown = np.stack([0 * here, 1 + here, 1 + beside], axis=1)
    upper = 1 + sectors * np.arange(rings - 1)[:, None]
    a, b, c, d = upper + here, upper + sectors + here, upper + sectors + beside, upper + beside
    quads = np.stack([a, b, c, a, c, d], axis=-1).reshape(-1, 3)
    return np.vstack([Z, vertices.reshape(-1, 3)]), np.vstack([crown, quads])


def test_a_hemispherical_shell_has_its_volume() -> None:
    # 2 pi R^2 t (1 + t^2/12R^2), R 5, t 0.3: 47.1380269708.
    vertices, faces = hemisphere(40, 160)
    shell = Shell(5 * vertices, faces, 0.3, vertices)
    assert shell.volume == pytest.approx(47.1380269708, rel=1e-3)
    assert shell.mesh(WITHIN).euler == 2
    # Normals worked out from the facets lean at the rim, where they know one side only.
    assert Shell(5 * vertices, faces, 0.3).volume == pytest.approx(47.1380269708, rel=2e-3)


def test_a_closed_shell_is_hollow() -> None:
    hollow = Shell(BALL.vertices, BALL.faces, 0.3).mesh(WITHIN)
    assert hollow.bodies == 2
    assert hollow.volume == pytest.approx(4 / 3 * np.pi * (5.15**3 - 4.85**3), rel=2e-3)


def test_a_shell_of_ill_fitting_faces_is_refused() -> None:
    square = np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0.0]])
    with pytest.raises(ValueError, match="do not fit together"):
        Shell(square, np.array([[0, 1, 2], [0, 3, 2]]), 0.1, np.tile(Z, (4, 1))).mesh(WITHIN)
    with pytest.raises(ValueError, match="thickness must be more than 0"):
        Shell(square, np.array([[0, 1, 2], [0, 2, 3]]), 0.0)


def test_balls_have_the_volume_of_balls() -> None:
    balls = Balls(np.stack([X, 2 * Y]), 0.5)
    for within in (0.2, 0.01, 0.001):
        mesh = balls.mesh(within)
        assert mesh.volume == pytest.approx(2 * np.pi / 6, rel=1e-12)
        assert mesh.euler == 4
        assert mesh.bodies == 2


# ------------------------------------------------------------------ meshes


def test_a_mesh_with_a_facet_taken_out_or_turned_is_not_watertight() -> None:
    mesh = one_link(CHAIN).mesh(WITHIN)
    assert mesh.is_watertight
    assert not Mesh(mesh.vertices, mesh.faces[1:]).is_watertight
    turned = mesh.faces.copy()
    turned[5] = turned[5, ::-1]
    assert not Mesh(mesh.vertices, turned).is_watertight
    assert not Mesh(mesh.vertices, np.vstack([mesh.faces, mesh.faces[:1]])).is_watertight


def test_a_mesh_inside_out_has_a_negative_volume() -> None:
    mesh = one_link(CHAIN).mesh(WITHIN)
    assert Mesh(mesh.vertices, mesh.faces[:, ::-1]).volume == pytest.approx(-mesh.volume, rel=1e-12)


def test_a_mesh_far_away_keeps_its_volume() -> None:
    mesh = one_link(CHAIN).mesh(WITHIN)
    assert mesh.moved(at(1e5, 1e5, 0)).volume == pytest.approx(mesh.volume, rel=1e-6)


def test_a_body_of_open_facets_is_refused() -> None:
    mesh = one_link(CHAIN).mesh(WITHIN)
    with pytest.raises(ValueError, match="needs a watertight surface"):
        Faceted(Mesh(mesh.vertices, mesh.faces[1:]))


def test_a_mesh_of_faces_without_vertices_is_refused() -> None:
    with pytest.raises(ValueError, match="from 0 to 2"):
        Mesh(np.eye(3), np.array([[0, 1, 3]]))


def test_a_solid_states_a_volume() -> None:
    body = Sweep(Joined((SLOPING,)), 0.01)
    assert Solid("S1", body.volume, body, at(0, 0, 0)).mesh(WITHIN).is_watertight
    with pytest.raises(ValueError, match="volume must be more than 0"):
        Solid("S1", 0.0, body)


def test_curves_of_any_kind_carry_a_section() -> None:
    curves: list[Curve] = [SLOPING, Offset(catenary(1.0), 0.1, -Y), Arc(at(0, 0, 0), 1.0, X, Z, 0.0, 2.0)]
    for curve in curves:
        assert Sweep(curve, 0.02).mesh(WITHIN).volume == pytest.approx(np.pi * 4e-4 * curve.length, rel=2e-3)
