"""The drawing in DXF: read back, it is the result, on the declared layers, in the stated unit, the same every time."""

import subprocess
import sys
from collections.abc import Iterator
from dataclasses import replace
from functools import cache
from pathlib import Path
from typing import Any

import ezdxf
import numpy as np
import pytest
from ezdxf.document import Drawing as Document
from hypothesis import given, settings
from hypothesis import strategies as st

from export.dxf.checks import check
from export.dxf.document import TEXT_STYLE, Format
from export.dxf.names import Names
from export.files import drawing
from export.files.drawing import OUTPUT
from export.outputs import CheckFailed, Choices, File
from export.picture.looks import LAYERS
from geom import units
from geom.result import Result
from tests.designs import NET, RUN, SWAGS, by_hand, in_unit, many, solved
from tests.test_arcfit import distance

UNITS = ["mm", "cm", "m", "in", "ft"]
R12 = in_unit(SWAGS, "mm", version='"R12"')
ARCS = in_unit(SWAGS, "mm", curve='"arcs"')
DESIGNS = [SWAGS, RUN, NET, R12, ARCS, *(in_unit(SWAGS, unit) for unit in UNITS)]
NAMES = ["swags", "run", "net", "R12", "arcs", *UNITS]
each_design = pytest.mark.parametrize("text", DESIGNS, ids=NAMES)


def only_file(result: Result) -> tuple[File, bytes]:
    (file,) = OUTPUT.write(result, Choices())
    return file, b"".join(file.chunks)


@cache
def written(text: str, folder: Path) -> Path:
    file, data = only_file(solved(text))
    path = folder / f"{abs(hash(text))}-{file.name}"
    path.write_bytes(data)
    file.checked()
    return path


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("drawings")


def opened(text: str, folder: Path) -> Document:
    return ezdxf.readfile(written(text, folder))  # type: ignore[attr-defined]


Entity = Any  # the library's entities have no common type for what only some of them can do


def entities(doc: Document) -> Iterator[Entity]:
    """All entities of the model space and of every block."""
    for block in doc.blocks:
        if not block.is_any_paperspace:
            yield from block


def dimensions(text: str, folder: Path) -> list[Entity]:
    return list(opened(text, folder).modelspace().query("DIMENSION"))


def axis_of(text: str, mark: str, folder: Path) -> Entity:
    """The line of a piece in its block."""
    return next(entity for entity in opened(text, folder).blocks.get(mark) if entity.dxf.layer == "AXIS")


def corners(entity: Entity, per_unit: float) -> np.ndarray:
    """Corners of a polyline or line, m."""
    match entity.dxftype():
        case "LWPOLYLINE":
            points = [tuple(point) for point in entity.vertices()]
        case "POLYLINE":
            points = [(point.x, point.y) for point in entity.points()]
        case _:
            points = [tuple(entity.dxf.start)[:2], tuple(entity.dxf.end)[:2]]
    return np.array(points) * per_unit


@each_design
def test_the_audit_is_clean_and_the_file_passes_its_own_checks(text: str, folder: Path) -> None:
    assert not opened(text, folder).audit().errors
    checked = OUTPUT.verify(written(text, folder), solved(text), Choices())
    assert checked["pieces"] == len(solved(text).pieces)


@each_design
def test_every_entity_is_on_a_declared_layer(text: str, folder: Path) -> None:
    doc = opened(text, folder)
    declared = {layer.dxf.name for layer in doc.layers}
    assert declared - {"0", "Defpoints", "DEFPOINTS"} == set(LAYERS)
    assert {entity.dxf.layer for entity in entities(doc)} <= set(LAYERS)


@pytest.mark.parametrize("unit", UNITS)
def test_the_header_states_the_unit_and_lengths_are_in_it(unit: str, folder: Path) -> None:
    doc = opened(in_unit(SWAGS, unit), folder)
    # DXF reference: 1 inches, 2 feet, 4 millimetres, 5 centimetres, 6 metres
    assert doc.header["$INSUNITS"] == {"in": 1, "ft": 2, "mm": 4, "cm": 5, "m": 6}[unit]
    assert doc.header["$MEASUREMENT"] == (0 if unit in ("in", "ft") else 1)
    metre = {"mm": 1e-3, "cm": 1e-2, "m": 1.0, "in": 0.0254, "ft": 0.3048}[unit]
    axis = next(entity for entity in doc.blocks.get("S1") if entity.dxf.layer == "AXIS")
    assert np.ptp(corners(axis, metre)[:, 0]) == pytest.approx(4.0, abs=1e-6)


def test_r12_carries_its_unit_in_its_name_and_a_note_and_only_what_r12_knows(folder: Path) -> None:
    path = written(R12, folder)
    doc = opened(R12, folder)
    assert path.name.endswith("drawing-mm.dxf")
    assert doc.dxfversion == "AC1009"
    assert not {entity.dxftype() for entity in entities(doc)} & {"LWPOLYLINE", "SPLINE", "ELLIPSE", "MTEXT", "HATCH"}
    assert any(entity.dxf.text == "UNITS mm" for entity in doc.modelspace().query("TEXT"))
    names = [block.name for block in doc.blocks if not block.name.startswith("*")]
    assert all(len(name) <= 31 and set(name) <= set("ABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789$_-") for name in names)


@each_design
def test_each_piece_is_one_reference_to_a_block_of_its_mark(text: str, folder: Path) -> None:
    references = [entity.dxf.name for entity in opened(text, folder).modelspace().query("INSERT")]
    for piece in solved(text).pieces:
        assert references.count(piece.mark) == 1


@each_design
def test_nothing_is_drawn_twice_and_nothing_is_without_length(text: str, folder: Path) -> None:
    doc = opened(text, folder)
    assert not doc.modelspace().query("SPLINE")
    for block in doc.blocks:
        known: set[tuple[str, bytes]] = set()
        for entity in block:
            if entity.dxftype() not in ("LINE", "LWPOLYLINE", "POLYLINE"):
                continue
            points = corners(entity, 1.0)
            assert np.abs(np.diff(points, axis=0)).max(axis=1).min() > 0
            keys = {points.tobytes(), points[::-1].tobytes()}
            assert known.isdisjoint((entity.dxf.layer, key) for key in keys)
            known |= {(entity.dxf.layer, key) for key in keys}


@pytest.mark.parametrize("text", [SWAGS, R12, ARCS, in_unit(SWAGS, "ft")], ids=["plain", "R12", "arcs", "ft"])
def test_the_drawn_curve_is_within_the_tolerance_of_the_true_one(text: str, folder: Path) -> None:
    result = solved(text)
    unit = units.UNITS[result.setting.drawing_unit].metres
    for piece in result.pieces:
        axis = axis_of(text, piece.mark, folder)
        drawn = np.array([tuple(p)[:2] for p in ezdxf.path.make_path(axis).flattening(1e-6 / unit)]) * unit
        true = piece.frame.flat(piece.lines[0].curve.points(1e-6))
        assert distance(drawn[::3], true) <= result.setting.drawing.within + 2e-6
        assert distance(true[:: max(1, len(true) // 300)], drawn) <= result.setting.drawing.within + 2e-6


def test_arcs_are_bulges_and_fewer_than_the_corners_of_a_polyline(folder: Path) -> None:
    arcs, plain = (axis_of(text, "S1", folder) for text in (ARCS, SWAGS))
    assert arcs.has_arc
    assert not plain.has_arc
    assert len(arcs) < len(plain)


def test_the_tolerance_on_the_command_line_goes_before_the_designs() -> None:
    (fine,) = OUTPUT.write(solved(SWAGS), Choices(within=1e-6))
    (coarse,) = OUTPUT.write(solved(SWAGS), Choices(within=1e-2))
    assert len(b"".join(fine.chunks)) > 1.2 * len(b"".join(coarse.chunks))


@pytest.mark.parametrize("unit", UNITS)
def test_dimensions_measure_the_figures(unit: str, folder: Path) -> None:
    metre = units.UNITS[unit].metres
    text = in_unit(SWAGS, unit)
    found = []
    for entity in dimensions(text, folder):
        assert entity.dxf.layer == "DIMENSIONS"
        measured = entity.get_measurement()
        ordinate = entity.dimtype == 6
        found.append((measured.y if ordinate else measured) * metre)
    for piece in solved(text).pieces:
        for figure in (piece.figures.span, piece.figures.sag, piece.figures.lowest):
            assert min(abs(figure - one) for one in found) < 1e-6, (piece.mark, figure)


def test_a_dimensions_text_is_overridden_only_where_words_are_added(folder: Path) -> None:
    for entity in dimensions(SWAGS, folder):
        said = entity.dxf.get("text", "")
        assert said == "" or said.startswith("<> ")
        shown = [e.dxf.text for e in entity.get_geometry_block() if e.dxftype() == "TEXT"]
        assert shown == [said.replace("<>", f"{_measured(entity):.0f}") or f"{_measured(entity):.0f}"]


def _measured(entity: Entity) -> float:
    measured = entity.get_measurement()
    return float(measured.y if entity.dimtype == 6 else measured)


def test_feet_are_said_in_feet_and_inches_and_the_style_says_them_so_too(folder: Path) -> None:
    doc = opened(in_unit(SWAGS, "ft"), folder)
    style = doc.dimstyles.get("BUILDING")
    # architectural form takes the measure in inches; parts of 1/16; 0 feet are written
    assert (style.dxf.dimlunit, style.dxf.dimlfac, style.dxf.dimdec, style.dxf.dimzin) == (4, 12.0, 4, 1)
    blocks = [e.get_geometry_block() for e in dimensions(in_unit(SWAGS, "ft"), folder)]
    said = {text.dxf.text for block in blocks for text in block.query("TEXT")}
    assert "13'-1 1/2\" span" in said  # 4000 mm = 157.480 in


def test_the_dimension_style_is_our_own_with_oblique_strokes_and_text_over_the_line(folder: Path) -> None:
    doc = opened(SWAGS, folder)
    assert {entity.dxf.dimstyle for entity in dimensions(SWAGS, folder)} == {"BUILDING"}
    style = doc.dimstyles.get("BUILDING")
    assert style.dxf.dimtsz > 0
    assert style.dxf.dimtad == 1
    assert style.dxf.dimlfac == 1.0
    assert style.dxf.dimtxsty == TEXT_STYLE


def test_links_are_references_in_the_places_of_the_links(folder: Path) -> None:
    doc = opened(SWAGS, folder)
    for piece in solved(SWAGS).pieces:
        body: Any = piece.solids[0].body
        links = [e for e in doc.blocks.get(piece.mark) if e.dxftype() == "INSERT"]
        assert {link.dxf.layer for link in links} == {"LINKS"}
        places = np.array([tuple(link.dxf.insert)[:2] for link in links]) / 1000
        assert places == pytest.approx(piece.frame.flat(body.places), abs=1e-7)
        # in a vertical plane every other link is seen from its side
        assert len({link.dxf.name for link in links[::2]}) == len({link.dxf.name for link in links[1::2]}) == 1
        angles = np.radians([link.dxf.get("rotation", 0.0) for link in links])
        along = piece.frame.flat(body.turns[:, :, 0] + piece.frame.origin)
        assert np.stack([np.cos(angles), np.sin(angles)], axis=1) == pytest.approx(along, abs=1e-6)


def test_the_plan_is_in_the_designs_own_coordinates(folder: Path) -> None:
    doc = opened(SWAGS, folder)
    (reference,) = [e for e in doc.modelspace().query("INSERT") if e.dxf.name == "S2$plan"]
    line = next(e for e in doc.blocks.get("S2$plan") if e.dxf.layer == "AXIS")
    placed = corners(line, 1.0) + tuple(reference.dxf.insert)[:2]
    assert placed[placed[:, 0].argsort()] == pytest.approx(np.array([[4000, 0], [6000, 1500]]), abs=1e-3)


def test_the_extents_in_the_header_hold_everything(folder: Path) -> None:
    from ezdxf import bbox

    doc = opened(SWAGS, folder)
    low, high = doc.header["$EXTMIN"], doc.header["$EXTMAX"]
    for entity in doc.modelspace():
        if entity.dxftype() in ("INSERT", "DIMENSION"):
            box = bbox.extents([entity], fast=True)
            assert low[0] <= box.extmin.x + 1
            assert low[1] <= box.extmin.y + 1
            assert high[0] >= box.extmax.x - 1
            assert high[1] >= box.extmax.y - 1


def test_line_types_are_defined_and_scaled_to_the_print(folder: Path) -> None:
    doc = opened(SWAGS, folder)
    note = next(text.dxf.text for text in doc.modelspace().query("TEXT") if text.dxf.text.startswith("Scale 1:"))
    scale = float(note.removeprefix("Scale 1:").split()[0])
    # ISO 128-2: dash 12 and gap 3 widths; 0.25 mm: 3 and 0.75 mm on paper
    tags = [tag.value for tag in doc.linetypes.get("DASHED").pattern_tags.tags if tag.code == 49]
    assert tags == pytest.approx([3 * scale, -0.75 * scale])


def test_marks_that_differ_only_in_what_r12_cannot_say_get_names_of_their_own() -> None:
    names = Names(old=True)
    found = [names.of(mark) for mark in ("a b", "a.b", "A_B", "x" * 40, "x" * 39 + "y")]
    assert len(set(found)) == 5
    assert max(map(len, found)) <= 31
    assert names.of("a b") == found[0]
    assert Names(old=False).of("north gate, 2") == "north gate, 2"


def test_the_check_catches_a_wrong_unit_a_missing_piece_and_a_moved_line(folder: Path) -> None:
    result = solved(SWAGS)
    expected = drawing._Made(result, Choices()).expected
    doc = opened(SWAGS, folder)
    doc.header["$INSUNITS"] = 6
    with pytest.raises(CheckFailed, match=r"\$INSUNITS: expected 4, found 6"):
        check(doc, expected)
    doc = opened(SWAGS, folder)
    third: Entity = next(e for e in doc.modelspace().query("INSERT") if e.dxf.name == "S3")
    doc.modelspace().delete_entity(third)
    with pytest.raises(CheckFailed, match="references to block 'S3': expected 1, found 0"):
        check(doc, expected)
    doc = opened(SWAGS, folder)
    next(e for e in doc.modelspace().query("INSERT") if e.dxf.name == "S3").dxf.insert += (1e6, 0, 0)
    with pytest.raises(CheckFailed, match="extents"):
        check(doc, expected)
    doc = opened(SWAGS, folder)
    doc.modelspace().add_line((0, 0), (1, 1), {"layer": "MINE"})
    with pytest.raises(CheckFailed, match="layers"):
        check(doc, expected)


def test_a_file_cut_short_is_found_out(folder: Path, tmp_path: Path) -> None:
    broken = tmp_path / "drawing.dxf"
    broken.write_bytes(written(SWAGS, folder).read_bytes()[:40_000])
    with pytest.raises(CheckFailed):
        OUTPUT.verify(broken, solved(SWAGS), Choices())


def test_the_same_design_gives_the_same_bytes_whatever_the_hash_seed() -> None:
    code = (
        "import hashlib\n"
        "from export.outputs import Choices, outputs\n"
        "from tests.designs import RUN, solved\n"
        "for name in ('drawing', 'model', 'preview'):\n"
        "    for file in outputs()[name].write(solved(RUN), Choices()):\n"
        "        print(file.name, hashlib.sha256(b''.join(file.chunks)).hexdigest())\n"
    )
    root = Path(__file__).parent.parent
    found = {
        subprocess.run(
            [sys.executable, "-c", code], env={"PYTHONHASHSEED": seed, "PYTHONPATH": str(root), "PATH": ""}, check=True,
            capture_output=True, text=True, cwd=root,
        ).stdout
        for seed in ("0", "77")
    }  # fmt: skip
    assert len(found) == 1
    assert found.pop().count("\n") == 3


def test_writing_leaves_the_librarys_options_as_they_were() -> None:
    from ezdxf._options import options

    before = options.write_fixed_meta_data_for_testing
    only_file(solved(SWAGS))
    assert options.write_fixed_meta_data_for_testing is before


@given(st.sampled_from(UNITS), st.floats(-1e4, 1e4))
@settings(max_examples=60)
def test_rounding_keeps_a_tenth_of_a_micrometre(unit: str, metres: float) -> None:
    fmt = Format("R2010", unit)
    assert round(metres * fmt.factor, fmt.decimals) / fmt.factor == pytest.approx(metres, abs=1e-7)


def test_many_pieces_are_all_drawn(folder: Path) -> None:
    doc = opened(many(30), folder)
    references = {entity.dxf.name for entity in doc.modelspace().query("INSERT")}
    assert {piece.mark for piece in solved(many(30)).pieces} <= references


def test_every_kind_of_dimension_is_a_dimension_of_the_file(folder: Path) -> None:
    _, data = only_file(by_hand())
    path = folder / "by-hand.dxf"
    path.write_bytes(data)
    doc = ezdxf.readfile(path)  # type: ignore[attr-defined]
    assert not doc.audit().errors
    found: list[Entity] = list(doc.modelspace().query("DIMENSION"))
    radius = next(entity for entity in found if entity.dimtype == 4)
    assert radius.get_measurement() == pytest.approx(2000, abs=1e-4)
    levels = sorted(entity.get_measurement().y for entity in found if entity.dimtype == 6)
    assert levels == pytest.approx([2000, 2300], abs=1e-4)
    linear = sorted(entity.get_measurement() for entity in found if entity.dimtype == 0)
    assert linear[0] == pytest.approx(300, abs=1e-4)
    assert linear[-1] == pytest.approx(6000, abs=1e-4)
    assert any(abs(one - 2300 * 2**0.5) < 1e-3 for one in linear)


def test_two_views_of_one_name_are_two_blocks(folder: Path) -> None:
    result = by_hand()
    arch = replace(result.pieces[0], views=tuple(replace(result.pieces[0].views[0]) for _ in range(3)))
    _, data = only_file(replace(result, pieces=(arch,)))
    path = folder / "views.dxf"
    path.write_bytes(data)
    names = [e.dxf.name for e in ezdxf.readfile(path).modelspace().query("INSERT")]  # type: ignore[attr-defined]
    assert names[0] == "A"
    assert len(set(names)) == len(names) == 4  # three views and the plan


def test_balls_are_drawn_as_one_block_placed_as_often_as_there_are_balls(folder: Path) -> None:
    balls = '[stock.balls]\nkind = "beads"\npitch = 6\ndiameter = 4.5\nmass_per_metre = 0.05\n'
    hung = 'mark = "B"\nfrom = [0, 0, 900]\nto = [500, 0, 900]\nstock = "balls"\nlinks = 100\n'
    net = NET.replace("DIN 763-4", "balls").replace("divisions = 6", "divisions = 1") + balls.replace("= 6", "= 30")
    for text, least in ((f'unit = "mm"\n{balls}[[hanging]]\n{hung}', 100), (net, 4 * 160)):
        doc = opened(text, folder)
        assert [block.name for block in doc.blocks if block.name.startswith("BEAD")] == ["BEAD$1"]
        assert sum(len(block.query('INSERT[name=="BEAD$1"]')) for block in doc.blocks) >= least
