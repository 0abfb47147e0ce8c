"""STL files: layout by the format's own definition, read back by other means, and a check that can fail."""

import struct
from collections.abc import Iterator
from pathlib import Path

import numpy as np
import pytest
import trimesh
from hypothesis import given, settings
from hypothesis import strategies as st

from export.stl import binary_stl, mesh_stl, solid_origin, solid_stl
from export.stl_check import StlReport, read_stl, verify_stl
from geom.curves import Catenary, Segment
from geom.curves.base import Array
from geom.solids import Balls, Link, Links, Mesh, Prism, Solid, Sweep, Union, link_frames

X, Y, Z = np.eye(3)
WITHIN = 5e-4
CHAIN = Link(0.010, 0.028, 0.034)
CURVE = Catenary(np.array([0.0, 0, 3]), np.array([4.0, 2, 3.5]), 1.2)
COUNT = int(CURVE.length / 0.028)


def chain() -> Solid:
    links = Links(*link_frames(CURVE, COUNT, 0.028), CHAIN)
    return Solid("S1", links.volume, links)


def written(path: Path, pieces: Iterator[bytes]) -> Path:
    with path.open("wb") as file:
        for piece in pieces:
            file.write(piece)
    return path


def ball(tmp_path: Path) -> tuple[Path, bytes]:
    mesh = Balls(np.zeros((1, 3)), 10.0).mesh(1.0)  # 80 facets
    path = written(tmp_path / "ball.stl", mesh_stl(mesh, name="ball"))
    return path, path.read_bytes()


def test_the_layout_is_that_of_binary_stl(tmp_path: Path) -> None:
    # One right-angled corner block, 1000 x 2000 x 3000 mm: read with struct, facet by facet.
    outline = np.array([[0, 0], [1, 0], [1, 2], [0, 2.0]])
    block = Prism(outline, 3 * Z)
    data = written(tmp_path / "a.stl", solid_stl(Solid("B1", 6.0, block), WITHIN)).read_bytes()
    assert not data.startswith(b"solid")
    assert b"B1" in data[:80]
    (count,) = struct.unpack_from("<I", data, 80)
    assert count == 12
    assert len(data) == 84 + 50 * 12
    corners = []
    for number in range(count):
        *numbers, unused = struct.unpack_from("<12fH", data, 84 + 50 * number)
        normal, a, b, c = np.array(numbers).reshape(4, 3)
        assert unused == 0
        assert np.cross(b - a, c - a) == pytest.approx(normal * np.linalg.norm(np.cross(b - a, c - a)), rel=1e-6)
        corners += [a, b, c]
    assert np.min(corners, axis=0) == pytest.approx([0, 0, 0], abs=0)
    assert np.max(corners, axis=0) == pytest.approx([1000, 2000, 3000], rel=1e-7)


def test_a_header_never_begins_with_the_word_of_the_text_form(tmp_path: Path) -> None:
    mesh = Balls(np.zeros((1, 3)), 1.0).mesh(0.1)
    for name in ("solid", "solid" * 40, "Bögen 7", ""):
        data = b"".join(mesh_stl(mesh, name=name))
        assert not data.lower().startswith(b"solid")
        assert len(data) == 84 + 50 * len(mesh.faces)


def test_another_reader_finds_the_chain_whole(tmp_path: Path) -> None:
    solid = chain()
    path = written(tmp_path / "chain.stl", solid_stl(solid, WITHIN))
    mesh = trimesh.load_mesh(path)
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    assert mesh.volume == pytest.approx(COUNT * 8120.877498, rel=1e-4)  # mm3, link of d 10, p 28, inside width 14
    assert mesh.body_count == COUNT
    assert mesh.euler_number == 0
    low, high = solid.body.extents(WITHIN)
    assert mesh.extents == pytest.approx((high - low) * 1000, abs=0.01)
    assert (mesh.bounds[0] >= -1e-3).all()
    assert (mesh.bounds[0] < 1).all()  # from the low corner, rounded down to a millimetre


def test_reading_back_finds_what_another_reader_finds(tmp_path: Path) -> None:
    path = written(tmp_path / "chain.stl", solid_stl(chain(), WITHIN))
    ours, other, report = read_stl(path), trimesh.load_mesh(path), verify_stl(path)
    assert ours.is_watertight
    assert len(ours.vertices) == len(other.vertices)
    assert ours.volume == pytest.approx(other.volume, rel=1e-9)
    assert report.problems == ()
    assert report.volume == pytest.approx(other.volume, rel=1e-9)
    assert report.area == pytest.approx(other.area, rel=1e-9)
    assert report.low == pytest.approx(other.bounds[0], rel=1e-7)
    assert report.high == pytest.approx(other.bounds[1], rel=1e-7)
    assert report.facets == len(other.faces) == CHAIN.facets(WITHIN) * COUNT


def test_the_origin_is_the_solids_own_or_its_low_corner(tmp_path: Path) -> None:
    rope = Sweep(Segment(np.array([437250.0, 112400, 30]), np.array([437251.0, 112400, 30])), 0.01)
    own = Solid("R", rope.volume, rope, np.array([437250.0, 112400, 0]))
    assert np.array_equal(solid_origin(own, WITHIN), [437250, 112400, 0])
    report = verify_stl(written(tmp_path / "own.stl", solid_stl(own, WITHIN)))
    assert report.low[2] == pytest.approx(30000 - 10, abs=0.3)
    # Small numbers keep float32's digits: a micrometre in place of 30 mm.
    free = Solid("R", rope.volume, rope)
    assert solid_origin(free, WITHIN) == pytest.approx([437250, 112399.989, 29.989], abs=1.5e-3)
    report = verify_stl(written(tmp_path / "free.stl", solid_stl(free, WITHIN)))
    assert report.volume == pytest.approx(rope.volume * 1e9, rel=1e-5)
    assert report.problems == ()


def test_bodies_side_by_side_are_written_into_one_file(tmp_path: Path) -> None:
    both = Union((Sweep(CURVE, 0.01), Balls(np.stack([CURVE.p, CURVE.q]), 0.05)))
    path = written(tmp_path / "u.stl", solid_stl(Solid("U", both.volume, both), WITHIN))
    assert verify_stl(path).problems == ()
    assert read_stl(path).bodies == 3


def test_the_same_solid_is_the_same_bytes() -> None:
    assert b"".join(solid_stl(chain(), WITHIN)) == b"".join(solid_stl(chain(), WITHIN))


def test_a_wrong_count_is_an_error() -> None:
    mesh = Balls(np.zeros((1, 3)), 1.0).mesh(0.1)
    with pytest.raises(ValueError, match="80 facets were written and 81 announced"):
        list(binary_stl(mesh.chunks(), 81, name="ball"))


def without_facet(data: bytes, number: int) -> bytes:
    body = data[84 : 84 + 50 * number] + data[84 + 50 * (number + 1) :]
    return data[:80] + struct.pack("<I", len(body) // 50) + body


def test_a_missing_facet_is_found(tmp_path: Path) -> None:
    path, data = ball(tmp_path)
    assert verify_stl(path).closed
    for number in (0, 17, 79):
        path.write_bytes(without_facet(data, number))
        assert verify_stl(path).problems == ("its surface is not closed",)


def test_a_facet_wound_the_wrong_way_is_found(tmp_path: Path) -> None:
    path, data = ball(tmp_path)
    start = 84 + 50 * 7
    numbers = struct.unpack_from("<12f", data, start)
    turned = struct.pack("<12f", *numbers[:3], *numbers[6:9], *numbers[3:6], *numbers[9:])
    path.write_bytes(data[:start] + turned + data[start + 48 :])
    report = verify_stl(path)
    assert not report.closed
    assert report.misdirected == pytest.approx(report.area / 80, rel=0.2)


def test_a_corner_off_by_the_last_bit_is_found(tmp_path: Path) -> None:
    path, data = ball(tmp_path)
    at = 84 + 50 * 30 + 12 + 4
    path.write_bytes(data[:at] + bytes([data[at] ^ 1]) + data[at + 1 :])
    assert not verify_stl(path).closed


def test_a_solid_inside_out_is_found(tmp_path: Path) -> None:
    mesh = Balls(np.zeros((1, 3)), 10.0).mesh(0.1)
    path = written(tmp_path / "in.stl", mesh_stl(Mesh(mesh.vertices, mesh.faces[:, ::-1]), name="in"))
    report = verify_stl(path)
    assert report.closed
    assert [text.split(" is")[0] for text in report.problems] == ["its volume"]


def test_files_cut_short_or_with_bytes_after_are_refused(tmp_path: Path) -> None:
    path, data = ball(tmp_path)
    for wrong in (data[:-1], data + b"x", data[:-50]):
        path.write_bytes(wrong)
        with pytest.raises(ValueError, match="but 80 facets are 4084"):
            verify_stl(path)
    path.write_bytes(data[:70])
    with pytest.raises(ValueError, match="too short for an STL file"):
        verify_stl(path)


def test_a_coordinate_that_is_no_number_is_refused(tmp_path: Path) -> None:
    path, data = ball(tmp_path)
    path.write_bytes(data[:100] + struct.pack("<f", np.nan) + data[104:])
    with pytest.raises(ValueError, match="a coordinate is not a number"):
        verify_stl(path)


def test_an_empty_file_of_facets_is_a_problem(tmp_path: Path) -> None:
    path = written(tmp_path / "none.stl", binary_stl([], 0, name="none"))
    assert "it has no facets" in verify_stl(path).problems


@settings(deadline=None, max_examples=30)
@given(
    st.lists(st.tuples(st.floats(-1e3, 1e3), st.floats(-1e3, 1e3), st.floats(-1e3, 1e3)), min_size=4, max_size=4),
    st.randoms(use_true_random=False),
)
def test_facets_in_any_order_close_a_tetrahedron(
    tmp_path_factory: pytest.TempPathFactory, corners: list[tuple[float, float, float]], random: object
) -> None:
    vertices: Array = np.array(corners)
    faces = np.array([[0, 1, 2], [0, 3, 1], [1, 3, 2], [2, 3, 0]])
    faces = faces[np.argsort([random.random() for _ in range(4)])]  # type: ignore[attr-defined]
    faces = np.array([np.roll(face, random.randrange(3)) for face in faces])  # type: ignore[attr-defined]
    path = tmp_path_factory.mktemp("stl") / "t.stl"
    report: StlReport = verify_stl(written(path, mesh_stl(Mesh(vertices, faces), name="t")))
    assert report.closed
    signed = np.linalg.det(vertices[[1, 2, 3]] - vertices[0]) / -6
    assert report.volume == pytest.approx(signed, rel=1e-3, abs=1e-3 * np.abs(vertices).max() ** 3)
