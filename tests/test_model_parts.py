"""The model in three dimensions and the flat parts: in place, at full size, nothing but what may be there."""

from functools import cache
from pathlib import Path
from typing import Any

import ezdxf
import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from export.dxf.checks import check
from export.dxf.space import turned
from export.files import model, parts
from export.files.parts import laid_out, tidy
from export.outputs import CheckFailed, Choices, Output, outputs
from export.picture import text as measure
from export.picture.engrave import engraving
from export.picture.looks import LAYERS
from export.picture.views import bodies, solids_of
from export.picture.wording import Wording
from geom import units
from geom.result import Flat
from geom.solids import Links
from tests.designs import ARCH, NET, RUN, SWAGS, in_unit, solved

Entity = Any  # the library's entities have no common type for what only some of them can do
DESIGNS = {
    "swags": SWAGS, "run": RUN, "net": NET, "arch": ARCH, "feet": in_unit(SWAGS, "ft"), "inches": in_unit(ARCH, "in"),
    "R12": in_unit(SWAGS, "mm", version='"R12"'), "arch in R12": in_unit(ARCH, "cm", version='"R12"'),
}  # fmt: skip
each_design = pytest.mark.parametrize("name", DESIGNS)


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("models")


@cache
def written(output: str, name: str, folder: Path) -> Path:
    (file,) = outputs()[output].write(solved(DESIGNS[name]), Choices())
    path = folder / f"{name}-{file.name}"
    path.write_bytes(b"".join(file.chunks))
    file.checked()
    return path


def opened(output: str, name: str, folder: Path) -> Any:  # noqa: ANN401 - the library's document
    return ezdxf.readfile(written(output, name, folder))  # type: ignore[attr-defined]


def corners(entity: Entity) -> np.ndarray:
    if entity.dxftype() == "LINE":
        return np.array([entity.dxf.start, entity.dxf.end])
    return np.array([tuple(point) for point in entity.points()])


@each_design
def test_the_model_passes_audit_and_its_own_checks_and_keeps_to_the_layers(name: str, folder: Path) -> None:
    checked = model.OUTPUT.verify(written("model", name, folder), solved(DESIGNS[name]), Choices())
    assert checked["audit_errors"] == 0
    doc = opened("model", name, folder)
    assert {layer.dxf.name for layer in doc.layers} - {"0", "Defpoints", "DEFPOINTS"} == set(LAYERS)


def furthest(points: np.ndarray, line: np.ndarray) -> float:
    """Greatest distance of points (n, 3) from a polyline (k, 3)."""
    steps = np.diff(line, axis=0)
    ahead = points[:, None] - line[:-1]
    share = np.clip((ahead * steps).sum(axis=2) / (steps * steps).sum(axis=1), 0, 1)
    return float(np.linalg.norm(ahead - share[:, :, None] * steps, axis=2).min(axis=1).max())


@each_design
def test_the_models_curves_are_in_place_within_the_tolerance(name: str, folder: Path) -> None:
    result = solved(DESIGNS[name])
    unit = units.UNITS[result.setting.drawing_unit].metres
    doc = opened("model", name, folder)
    for piece in result.pieces:
        drawn = [corners(e) * unit for e in doc.blocks.get(piece.mark) if e.dxftype() in ("LINE", "POLYLINE")]
        for line in piece.lines[:3]:
            true = line.curve.points(1e-5)
            ends = true[[0, -1]]
            same = [one for one in drawn if len(one) > 1 and np.abs(one[[0, -1]] - ends).max() < 1e-6]
            closed = [one for one in drawn if line.curve.closed and np.abs(one[0] - ends[0]).max() < 1e-6]
            off = min(max(furthest(true[::5], one), furthest(one, true)) for one in (*same, *closed))
            assert off <= result.setting.drawing.within + 1e-5, (line.role, off)


@pytest.mark.parametrize("name", ["swags", "run", "net", "feet"])
def test_each_link_of_the_model_stands_in_its_place_turned_as_it_hangs(name: str, folder: Path) -> None:
    result = solved(DESIGNS[name])
    unit = units.UNITS[result.setting.drawing_unit].metres
    doc = opened("model", name, folder)
    for piece in result.pieces:
        references = iter(e for e in doc.blocks.get(piece.mark) if e.dxftype() == "INSERT")
        for body in bodies(solids_of(piece)):
            assert isinstance(body, Links)
            for place, turn in zip(body.places, body.turns, strict=True):
                matrix = next(references).matrix44()
                assert np.array(matrix.transform((0, 0, 0))) * unit == pytest.approx(place, abs=1e-6)
                assert np.array(matrix.transform_direction((1, 0, 0))) == pytest.approx(turn[:, 0], abs=1e-6)
                assert abs(np.array(matrix.transform_direction((0, 0, 1))) @ turn[:, 2]) == pytest.approx(1, abs=1e-9)
        assert next(references, None) is None


@given(st.integers(0, 2**32 - 1))
@settings(max_examples=50)
def test_turned_places_come_back_through_the_librarys_own_axes(seed: int) -> None:
    from ezdxf.math import OCS, Vec3

    random = np.random.default_rng(seed)
    turns, _ = np.linalg.qr(random.normal(size=(5, 3, 3)))
    normals = turns[:, :, 2] * np.array([1, 1e-3, 1, 1, 1])[:, None] ** random.integers(0, 2, size=(5, 1))
    normals[0] = [0, 0, -1]
    along = np.cross(normals, random.normal(size=(5, 3)))
    along /= np.linalg.norm(along, axis=1, keepdims=True)
    places = random.normal(size=(5, 3))
    own = turned(places, along, normals / np.linalg.norm(normals, axis=1, keepdims=True))
    for n in range(5):
        ocs = OCS(Vec3(own.normals[n]))
        assert np.array(ocs.to_wcs(Vec3(own.places[n]))) == pytest.approx(places[n], abs=1e-9)
        angle = np.radians(own.angles[n])
        assert np.array(ocs.to_wcs(Vec3(np.cos(angle), np.sin(angle)))) == pytest.approx(along[n], abs=1e-9)


def test_the_model_says_its_unit_in_a_note_with_a_line_of_its_length(folder: Path) -> None:
    space = opened("model", "feet", folder).modelspace()
    said = [e.dxf.text for e in space.query("TEXT")]
    assert "UNITS ft" in said
    check_line = float(next(line for line in said if line.startswith("check line")).split()[2])
    lengths = [e.dxf.start.distance(e.dxf.end) for e in space.query("LINE")]
    assert max(lengths) == pytest.approx(check_line, abs=1e-6)


def test_a_model_that_lost_a_link_is_found_out(folder: Path) -> None:
    doc = opened("model", "run", folder)
    block = doc.blocks.get("Q")
    block.delete_entity(next(e for e in block if e.dxftype() == "INSERT"))
    with pytest.raises(CheckFailed, match="links: expected"):
        check(doc, model._Made(solved(RUN), Choices()).expected)


# ---------------------------------------------------------------------------------------------------------------- parts


@pytest.mark.parametrize("name", ["arch", "inches", "arch in R12"])
def test_parts_are_closed_outlines_on_cut_marks_on_engrave_and_nothing_else_there(name: str, folder: Path) -> None:
    result = solved(DESIGNS[name])
    assert parts.OUTPUT.verify(written("parts", name, folder), result, Choices())["audit_errors"] == 0
    space = list(opened("parts", name, folder).modelspace())
    flats = result.pieces[0].flats
    cut = [e for e in space if e.dxf.layer == "CUT"]
    engraved = [e for e in space if e.dxf.layer == "ENGRAVE"]
    assert len(cut) == sum(len(flat.outlines) for flat in flats)
    assert all(e.dxftype() in ("LWPOLYLINE", "POLYLINE") and e.is_closed for e in cut)
    assert [e.dxf.text for e in engraved] == [flat.mark for flat in flats]
    assert {e.dxf.layer for e in space} == {"CUT", "ENGRAVE", "NOTES"}


@pytest.mark.parametrize("name", ["arch", "inches", "arch in R12"])
def test_parts_are_at_full_size_apart_and_their_marks_inside(name: str, folder: Path) -> None:
    result = solved(DESIGNS[name])
    metre = units.UNITS[result.setting.drawing_unit].metres
    space = list(opened("parts", name, folder).modelspace())
    outlines = [_outline(e) * metre for e in space if e.dxf.layer == "CUT"]
    for flat, outline in zip(result.pieces[0].flats, outlines, strict=True):
        assert shapely.Polygon(outline).area == pytest.approx(shapely.Polygon(flat.outlines[0]).area, rel=1e-6)
    shapes = [shapely.Polygon(outline) for outline in outlines]
    assert all(shapes[a].distance(shapes[b]) > 0.01 for a in range(len(shapes)) for b in range(a))
    marks = [e for e in space if e.dxf.layer == "ENGRAVE"]
    for shape, mark in zip(shapes, marks, strict=True):
        at = np.array(mark.dxf.align_point if mark.dxf.halign else mark.dxf.insert)[:2] * metre
        height, angle = mark.dxf.height * metre, np.radians(mark.dxf.get("rotation", 0.0))
        wide = measure.width(mark.dxf.text) * height
        box = np.array([[-wide / 2, 0], [wide / 2, 0], [wide / 2, height], [-wide / 2, height]])
        turn = np.array([[np.cos(angle), np.sin(angle)], [-np.sin(angle), np.cos(angle)]])
        assert shape.contains(shapely.Polygon(at + box @ turn))
    notes = [e for e in space if e.dxf.layer == "NOTES" and e.dxftype() == "LINE"]
    for line in notes:
        ends = np.array([tuple(line.dxf.start)[:2], tuple(line.dxf.end)[:2]]) * metre
        assert not any(shape.intersects(shapely.LineString(ends)) for shape in shapes)


def _outline(entity: Entity) -> np.ndarray:
    points = entity.vertices() if entity.dxftype() == "LWPOLYLINE" else (p.vec2 for p in entity.points())
    return np.array([tuple(point) for point in points])


def test_there_is_no_file_of_parts_where_no_piece_has_any() -> None:
    output: Output = parts.OUTPUT
    assert list(output.write(solved(SWAGS), Choices())) == []


def rib(inner: float, outer: float, start: float, sweep: float) -> np.ndarray:
    angle = np.linspace(start, start + sweep, 60)
    rays = np.stack([np.cos(angle), np.sin(angle)], axis=1)
    return np.concatenate([outer * rays, inner * rays[::-1]])


@given(
    inner=st.floats(0.3, 3.0), depth=st.floats(0.02, 0.2), start=st.floats(0, 6), sweep=st.floats(0.2, 2.5),
    mark=st.sampled_from(["R1", "A1.27", "north rib.12"]),
)  # fmt: skip
@settings(max_examples=40, deadline=None)
def test_a_mark_stands_inside_its_part_whatever_way_that_lies(
    inner: float, depth: float, start: float, sweep: float, mark: str
) -> None:
    outline = rib(inner, inner + depth, start, sweep)
    found = engraving(Flat(mark, (outline,)))
    assert found is not None
    wide, high = measure.width(mark) * found.height / 2, found.height / 2
    box = np.array([[-wide, -high], [wide, -high], [wide, high], [-wide, high]])
    turn = np.array([[np.cos(found.angle), np.sin(found.angle)], [-np.sin(found.angle), np.cos(found.angle)]])
    assert shapely.Polygon(outline).contains(shapely.Polygon(found.at + box @ turn))
    assert -np.pi / 2 - 1e-9 <= found.angle <= np.pi / 2 + 1e-9, "read from the foot or the right"


def test_a_mark_keeps_off_a_hole() -> None:
    plate = np.array([[0, 0], [0.3, 0], [0.3, 0.3], [0, 0.3]])
    hole = np.array([[0.05, 0.05], [0.05, 0.25], [0.25, 0.25], [0.25, 0.05]])
    found = engraving(Flat("P1", (plate, hole)))
    assert found is not None
    assert not shapely.Polygon(hole).contains(shapely.Point(found.at))


def test_a_part_too_small_for_its_mark_has_none() -> None:
    assert engraving(Flat("north rib.12", (np.array([[0, 0], [0.004, 0], [0.002, 0.0005]]),))) is None


@given(st.lists(st.tuples(st.floats(0.01, 2), st.floats(0.01, 2), st.integers(1, 5)), min_size=1, max_size=25))
@settings(max_examples=30, deadline=None)
def test_parts_laid_out_keep_apart_with_room_for_their_notes(sizes: list[tuple[float, float, int]]) -> None:
    flats = [
        (Flat(f"F{n}", (np.array([[0, 0], [wide, 0], [wide, high], [0, high]]),), copies), 2)
        for n, (wide, high, copies) in enumerate(sizes)
    ]
    placed = laid_out(flats, Wording("mm", finer=1))
    boxes = [shapely.box(*part.box) for part in placed]
    notes = [
        shapely.box(left, bottom - 1.6 * p.note, left + measure.width(p.says) * p.note, bottom - 0.6 * p.note)
        for p in placed
        for left, bottom, _, _ in [p.box]
    ]
    everything = boxes + notes
    assert all(everything[a].intersection(everything[b]).area == 0 for a in range(len(everything)) for b in range(a))
    assert all(part.says.startswith(f"{part.flat.mark}: {2 * part.flat.copies} off") for part in placed)


def test_corners_given_twice_are_cut_once() -> None:
    outline = np.array([[0, 0], [1, 0], [1, 0], [1, 1], [0, 0]])
    assert tidy(outline) == pytest.approx(np.array([[1, 0], [1, 1], [0, 0.0]]))


def test_parts_that_lost_an_outline_are_found_out(folder: Path) -> None:
    doc = opened("parts", "arch", folder)
    space = doc.modelspace()
    space.delete_entity(next(e for e in space if e.dxf.layer == "CUT"))
    with pytest.raises(CheckFailed, match="outlines: expected 15, found 14"):
        parts._Made(solved(ARCH)).check(doc)
    doc = opened("parts", "arch", folder)
    next(e for e in doc.modelspace() if e.dxf.layer == "CUT").close(False)
    with pytest.raises(CheckFailed, match="no closed polyline"):
        parts._Made(solved(ARCH)).check(doc)
