"""Prints: scaled, thickened, joined, cut to the bed. Read back by another reader where files are meant."""

import io

import numpy as np
import pytest
import trimesh

from export.printing import Printed, Wishes, prepared
from export.printing.bed import cut_to_bed, cylinder
from export.printing.manifolds import joined
from export.printing.thicken import thickened
from export.stl import solid_stl
from geom.curves import Catenary, Offset, Segment
from geom.curves.base import Array
from geom.solids import Balls, Bars, Body, Faceted, Link, Links, Prism, Shell, Solid, Sweep, Union, link_frames

X, Y, Z = np.eye(3)
WITHIN = 5e-4


def at(*numbers: float) -> Array:
    return np.array(numbers, dtype=float)


CURVE = Catenary(at(0, 0, 0), at(0.6, 0, 0), 0.2)
CHAIN = Links(*link_frames(CURVE, int(CURVE.length / 0.0185), 0.0185), Link(0.006, 0.0185, 0.0204))
COUNT = len(CHAIN.places)


def ring_arch(thickness: float = 0.3, depth: float = 1.0) -> Prism:
    axis = Catenary(at(0, 0, 0), at(4, 0, 0), 1.2, inverted=True)
    outer, inner = (Offset(axis, side * thickness / 2, -Y).points(WITHIN) for side in (1, -1))
    return Prism(np.vstack([outer, inner[::-1]]), depth * Y)


def frame() -> Union:
    """Nine nodes and the twelve bars of a square grid between them."""
    nodes = np.array([[x, y, 0] for x in range(3) for y in range(3)], dtype=float)
    ends = [(n, n + 1) for n in range(9) if n % 3 < 2] + [(n, n + 3) for n in range(6)]
    points = nodes[np.array(ends)].reshape(-1, 3)
    return Union((Bars(points, np.arange(0, 25, 2), 0.03), Balls(nodes, 0.06)))


def printed(body: Body, wishes: Wishes) -> Printed:
    return prepared(Solid("A1", body.volume, body), wishes, WITHIN)


def read(print_: Printed, number: int = 0) -> trimesh.Trimesh:
    data = b"".join(solid_stl(print_.parts[number].solid, print_.within))
    mesh = trimesh.load_mesh(io.BytesIO(data), file_type="stl")
    assert mesh.is_watertight
    assert mesh.volume > 0
    return mesh


# ------------------------------------------------------------------ scale and least wall


def test_a_print_is_scaled() -> None:
    arch = ring_arch()
    print_ = printed(arch, Wishes(scale=20))
    mesh = read(print_)
    assert mesh.volume == pytest.approx(arch.volume / 8000 * 1e9, rel=1e-4)
    assert mesh.extents[1] == pytest.approx(50, rel=1e-6)
    assert print_.notes == ("the print is at 1:20",)


def test_without_wishes_the_solid_stays_as_it_is() -> None:
    print_ = printed(CHAIN, Wishes())
    assert print_.parts[0].solid.body == CHAIN
    assert print_.notes == ()
    assert print_.within == WITHIN


def test_wire_that_is_too_thin_is_thickened_about_its_centreline() -> None:
    # At 1:5 wire of 6 mm is 1.2 mm: thickened to 1.5 mm, its links run into one another by the difference.
    print_ = printed(CHAIN, Wishes(scale=5, least_wall=1.5e-3))
    link = print_.parts[0].solid.body
    assert isinstance(link, Links)
    assert link.link.wire == pytest.approx(1.5e-3, rel=1e-12)
    assert link.link.centreline == pytest.approx(CHAIN.link.centreline / 5, rel=1e-12)
    assert "wire 1.2 mm thick is printed 1.5 mm thick" in print_.notes
    assert any("run into one another by 0.3 mm" in note for note in print_.notes)


def test_links_that_thickening_would_close_become_a_rod() -> None:
    # At 1:20 the wire is 0.3 mm and the link 1.02 mm wide: with 1 mm of wire nothing is left of its opening.
    print_ = printed(CHAIN, Wishes(scale=20, least_wall=1e-3))
    rod = print_.parts[0].solid.body
    assert isinstance(rod, Sweep)
    assert rod.section == pytest.approx(0.51e-3, rel=1e-12)
    assert rod.curve.length == pytest.approx(COUNT * 0.0185 / 20, rel=2e-3)
    assert any("a rod 1.02 mm thick stands for the chain" in note for note in print_.notes)
    assert read(print_).body_count == 1


def test_a_solid_that_would_be_cut_into_thousands_of_parts_is_left_whole() -> None:
    print_ = printed(Sweep(CURVE, 0.01), Wishes(bed=(1e-3, 1e-3, 1e-3)))
    assert [part.name for part in print_.parts] == [""]
    assert print_.notes == ("it is left whole, as it would take over 2000 parts to fit the bed",)
    together = printed(CHAIN, Wishes(bed=(1e-3, 1e-3, 1e-3), joined=True))
    assert len(together.parts) == 1
    assert read(together).is_watertight


def test_what_is_thick_enough_is_left_alone() -> None:
    for body in (CHAIN, ring_arch(), frame(), Sweep(CURVE, 0.01, 0.006)):
        done = thickened(body, 2e-3)
        assert done.body == body
        assert done.notes == ()


def test_tubes_and_balls_are_thickened() -> None:
    body, notes = thickened(Union((Sweep(CURVE, 0.3e-3), Balls(np.zeros((1, 3)), 0.4e-3))), 1e-3)
    assert isinstance(body, Union)
    tube, ball = body.bodies
    assert isinstance(tube, Sweep)
    assert isinstance(ball, Balls)
    assert tube.section == pytest.approx(0.5e-3, rel=1e-12)
    assert ball.radius == pytest.approx(0.5e-3, rel=1e-12)
    assert notes == (
        "a section 0.6 mm thick is printed 1 mm thick",
        "balls 0.8 mm thick are printed 1 mm thick",
    )


def test_a_thin_wall_grows_inwards_and_fills_a_small_hole() -> None:
    wall, notes = thickened(Sweep(CURVE, 5e-3, 4.8e-3), 1e-3)
    assert isinstance(wall, Sweep)
    assert (wall.section, wall.hole) == pytest.approx((5e-3, 4e-3), rel=1e-12)
    assert notes == ("a wall 0.2 mm thick is printed 1 mm thick",)
    full, notes = thickened(Bars(np.stack([0 * X, X]), np.array([0, 2]), 0.9e-3, 0.8e-3), 1e-3)
    assert isinstance(full, Bars)
    assert full.hole is None
    assert notes == ("a wall 0.1 mm thick is printed solid",)


def test_a_square_tube_keeps_the_least_wall_all_round() -> None:
    square = np.array([[-1, -1], [1, -1], [1, 1], [-1, 1.0]])
    tube, _ = thickened(Sweep(CURVE, 5e-3 * square, 4.8e-3 * square), 1e-3)
    assert isinstance(tube, Sweep)
    assert tube.hole == pytest.approx(4e-3 * square, rel=1e-9)
    thin, _ = thickened(Sweep(CURVE, 1e-4 * square), 1e-3)
    assert isinstance(thin, Sweep)
    assert thin.section == pytest.approx(0.5e-3 * square, rel=1e-9)


def test_a_thin_plate_is_thickened_to_both_sides() -> None:
    plate, notes = thickened(Prism(np.array([[0, 0], [1, 0], [1, 1], [0, 1.0]]), 0.2e-3 * Z), 1e-3)
    assert isinstance(plate, Prism)
    low, high = plate.extents(WITHIN)
    assert (low[2], high[2]) == pytest.approx((-0.4e-3, 0.6e-3), rel=1e-9)
    assert notes == ("a plate 0.2 mm thick is printed 1 mm thick",)


def test_a_thin_ring_is_widened_to_the_least_wall() -> None:
    # 1 mm of ring, 2 mm wanted: the outline grows by half a millimetre all round.
    thin = ring_arch(0.3).scaled(1 / 300)
    ring, notes = thickened(thin, 2e-3)
    assert isinstance(ring, Prism)
    assert notes == ("an outline with parts under 2 mm wide is widened to it",)
    length = thin.volume / (1e-3 * np.linalg.norm(thin.depth))
    area = ring.volume / np.linalg.norm(ring.depth)
    assert area == pytest.approx(2e-3 * (length + 1e-3), rel=0.01)
    assert thickened(ring, 1.99e-3).notes == ()


@pytest.mark.parametrize("part", [20.0, 3.0])
def test_widening_stops_at_the_least_wall(part: float) -> None:
    thin = ring_arch(0.04 / part).scaled(0.05)  # 2/part mm thick, 200 mm wide
    ring, _ = thickened(thin, 2e-3)
    assert isinstance(ring, Prism)
    assert thickened(ring, 1.99e-3).notes == ()
    assert thickened(ring, 2.1e-3).notes != ()


def test_a_shell_is_thickened_where_it_is_thin() -> None:
    square = np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0.0]])
    shell = Shell(square, np.array([[0, 1, 2], [0, 2, 3]]), at(0.5e-3, 2e-3, 2e-3, 0.5e-3))
    done, notes = thickened(shell, 1e-3)
    assert isinstance(done, Shell)
    assert np.asarray(done.thickness) == pytest.approx([1e-3, 2e-3, 2e-3, 1e-3])
    assert notes == ("a shell 0.5 mm thick is printed 1 mm thick",)


def test_an_unknown_body_is_an_error() -> None:
    class Odd(Faceted):
        pass

    mesh = CHAIN.mesh(WITHIN)
    assert thickened(Odd(mesh), 1.0).notes == ()
    with pytest.raises(TypeError, match="no way is known to thicken a str"):
        thickened("a chain", 1e-3)  # type: ignore[arg-type]


# ------------------------------------------------------------------ joined


def test_joined_links_are_one_body_with_as_many_holes_as_links() -> None:
    print_ = printed(CHAIN, Wishes(joined=True, gap=0.6e-3))
    mesh = read(print_)
    assert mesh.body_count == 1
    # A union of n rings in a row, each meeting the next in one patch: one surface with n holes, V - E + F = 2 - 2 n.
    assert mesh.euler_number == 2 - 2 * COUNT
    assert print_.notes == ()


def test_joined_links_overlap_by_the_gap() -> None:
    print_ = printed(CHAIN, Wishes(joined=True, gap=0.6e-3))
    alone = CHAIN.link.thickened(6.6e-3)
    # Less than the links' own volumes by the lenses where wires of 6.6 mm, crossed, sink in by 0.6 mm. Crossed bars of
    # the radii r overlap to the depth g in a lens about pi r g^2/2 for a shallow one: 3 mm3; the wires' curvature
    # makes it several times longer.
    lens = (COUNT * alone.volume - print_.parts[0].solid.volume) / (COUNT - 1) * 1e9
    assert 3 < lens < 20


def test_a_joined_frame_is_one_body() -> None:
    print_ = printed(frame(), Wishes(scale=20, joined=True))
    mesh = read(print_)
    assert mesh.body_count == 1
    assert mesh.euler_number == 2 - 2 * 4  # four meshes


def test_pieces_that_do_not_touch_are_said() -> None:
    two = Union((CHAIN, CHAIN.moved(at(0, 1, 0))))
    assert "the joined print is in 2 pieces that do not touch" in printed(two, Wishes(joined=True)).notes


# ------------------------------------------------------------------ bed


def boxes(print_: Printed) -> list[Array]:
    return [read(print_, n).extents for n, part in enumerate(print_.parts) if part.name != "pegs"]


def test_what_fits_the_bed_is_not_cut() -> None:
    print_ = printed(ring_arch(), Wishes(scale=20, bed=(0.22, 0.22, 0.25)))
    assert [part.name for part in print_.parts] == [""]
    # 214 x 50 x 115 mm fits a long narrow bed when turned.
    turned = printed(ring_arch(), Wishes(scale=20, bed=(0.06, 0.12, 0.22)))
    assert [part.name for part in turned.parts] == [""]


def test_parts_fit_the_bed_and_add_up_to_the_whole() -> None:
    arch = ring_arch()
    bed = (0.22, 0.21, 0.2)
    print_ = printed(arch, Wishes(scale=5, bed=bed))
    sizes = boxes(print_)
    assert len(sizes) > 3
    for size in sizes:
        assert (np.sort(size) <= np.sort(np.array(bed) * 1000) + 1e-3).all()
    whole = arch.volume / 125
    parts = sum(part.solid.volume for part in print_.parts if part.name != "pegs")
    pegs = next(part.solid for part in print_.parts if part.name == "pegs")
    # Two sockets for each peg, larger all round by 0.2 mm, taken out of the whole.
    assert parts + pegs.volume < whole
    assert parts == pytest.approx(whole - pegs.volume, rel=2e-3)
    assert any("loose pegs" in note for note in print_.notes)


def test_a_bar_is_cut_square_with_a_peg_in_its_middle() -> None:
    bar = Prism(np.array([[0, 0], [0.3, 0], [0.3, 0.02], [0, 0.02]]), 0.02 * Z)
    print_ = printed(bar, Wishes(bed=(0.2, 0.2, 0.2)))
    assert [part.name for part in print_.parts] == ["1", "2", "pegs"]
    half, peg = read(print_, 0), read(print_, 2)
    assert half.extents == pytest.approx([150, 20, 20], abs=1e-3)
    # Half the section's width, held to 8 mm, three diameters long; socket 8.4 mm, 12.2 mm deep.
    assert peg.extents == pytest.approx([8, 8, 24], abs=0.05)
    # Of 32 sides: 16 r^2 sin(2 pi/32).
    assert half.volume == pytest.approx(150 * 400 - 16 * 4.2**2 * np.sin(np.pi / 16) * 12.2, rel=1e-5)


def test_a_cut_too_small_for_a_peg_is_said() -> None:
    rod = Sweep(Segment(at(0, 0, 0), 0.3 * X), 0.5e-3)
    print_ = printed(rod, Wishes(bed=(0.2, 0.2, 0.2)))
    assert [part.name for part in print_.parts] == ["1", "2"]
    assert "1 places of the cuts are too small for a peg and are glued plain" in print_.notes


def test_a_cut_chain_joins_and_fits() -> None:
    print_ = printed(CHAIN, Wishes(joined=True, bed=(0.22, 0.22, 0.25)))
    for size in boxes(print_):
        assert (np.sort(size) <= [220.001, 220.001, 250.001]).all()


def test_cuts_through_the_corners_of_facets_leave_no_slivers() -> None:
    # A symmetric tube in six: one plane is the plane of symmetry and runs through a ring of corners, where the
    # modeller leaves edges of a millionth of a millimetre.
    axis = Catenary(at(0, 0, 0), at(4, 0, 0), 1.2, inverted=True)
    print_ = printed(Sweep(axis, 0.05, 0.03), Wishes(scale=5, bed=(0.22, 0.22, 0.25)))
    assert len(print_.parts) == 7
    for number in range(7):
        corners = read(print_, number).triangles
        assert np.linalg.norm(corners - np.roll(corners, 1, axis=1), axis=2).min() > 1e-3


def test_sockets_never_break_out_of_the_part() -> None:
    # Cuts that meet the tube at a slant leave thin crescents: sockets square to them would come out at its side.
    axis = Catenary(at(0, 0, 0), at(4, 0, 0), 1.2, inverted=True)
    solid = joined(Sweep(axis, 0.05, 0.03).scaled(0.2), 1e-4)
    cut = cut_to_bed(solid, np.array([220, 220, 250.0]))
    assert cut.pegs
    assert cut.plain
    for peg in cut.pegs:
        socket = cylinder(peg, 0.2)
        assert (socket ^ solid).volume() == pytest.approx(socket.volume(), rel=1e-6)


def test_the_origin_is_scaled_with_the_solid() -> None:
    solid = Solid("A1", 1.0, ring_arch(), at(0, 2, 4))
    for wishes in (Wishes(scale=20), Wishes(scale=5, bed=(0.22, 0.22, 0.25))):
        part = prepared(solid, wishes, WITHIN).parts[0]
        assert part.solid.origin == pytest.approx(at(0, 2, 4) / wishes.scale)


def test_wishes_that_cannot_be_meant_are_refused() -> None:
    with pytest.raises(ValueError, match="scale must be more than 0"):
        Wishes(scale=0)
    with pytest.raises(ValueError, match="sizes of the bed"):
        Wishes(bed=(0.2, 0.2, 0.0))
