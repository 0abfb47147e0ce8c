"""Arches as written in a design: what is solved, drawn, cut and said."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import Any

import numpy as np
import pytest
from shapely import unary_union
from shapely.geometry import LineString, Point, Polygon

from export import figures as written
from geom.arch.bodies import LEAST_GAP
from geom.curves import Catenary, Offset
from geom.design.reader import read
from geom.result import Piece, Result
from geom.solids import Prism, Union
from geom.solve import solve

GRAVITY = 9.80665  # m/s2, 3rd CGPM, 1901
ARCH = """
[[arch]]
mark = "A1"
from = [0, 0, 0]
to = [4000, 0, 0]
rise = 3000
thickness = 300
depth = 1000
material = "brick"
"""


def design(before: str = "", **changes: str) -> str:
    """Return a design file of one arch, some of its lines replaced or added."""
    lines = [line for line in ARCH.strip().splitlines() if line.split(" ")[0] not in changes]
    return "\n".join(['unit = "mm"', before, *lines, *(f"{k} = {v}" for k, v in changes.items() if v)])


def solved(text: str) -> Result:
    reading = read(text, "arch")
    assert [problem.text for problem in reading.problems] == []
    assert reading.design is not None
    result = solve(reading.design)
    assert [problem.text for problem in result.problems] == []
    assert result.result is not None
    return result.result


def made(before: str = "", **changes: str) -> Piece:
    return solved(design(before, **changes)).pieces[0]


def figures_of(piece: Piece) -> dict[str, Any]:
    """Return a piece's figures as they leave."""
    return written.piece(piece)


def figures(**changes: str) -> dict[str, Any]:
    return figures_of(made(**changes))


def problems(text: str) -> list[tuple[str, str]]:
    reading = read(text, "arch")
    found = list(reading.problems)
    if reading.design is not None:
        found += solve(reading.design).problems
    return [(problem.key, problem.text) for problem in found]


# Figures


def test_every_figure_of_the_contract_is_there_under_its_name() -> None:
    found = figures(blocks="31", joint="8", setting_out="{ step = 100, widths_at = [2000] }")
    for key in (
        "span_m", "rise_m", "axis_length_m", "thrust_N", "tie_pull_N", "crown_radius_m", "springing_from_N",
        "springing_to_N", "intrados_m", "axis_m", "extrados_m", "area_m2", "volume_m3", "under_area_m2", "thrust_line",
        "blocks", "bends", "setting_out", "bricks", "segments", "ribs", "mass_kg", "intended", "difference", "used",
    ):  # fmt: skip
        assert key in found
    assert {"mark", "area_m2", "volume_m3", "mass_kg", "joint_from_deg", "joint_to_deg", "outline_m"} <= set(
        found["blocks"][0]
    )
    assert {"x_m", "intrados_m", "axis_m", "extrados_m"} <= set(found["setting_out"][0])
    assert found["intended"] == {"rise_m": 3.0}
    assert found["difference"] == {"rise_m": 0.0}
    assert [found[key] for key in ("tie_pull_N", "thrust_line", "bends", "bricks", "segments", "ribs")] == [None] * 6


def test_what_was_not_asked_for_is_null() -> None:
    found = figures()
    assert found["blocks"] is None
    assert found["setting_out"] is None


def test_mass_volume_and_thrust_follow_from_area_depth_and_density() -> None:
    found = figures(foot='"radial"')
    # rise/span = 0.75: the catenary's own equation, solved here by bisection
    low, high = 0.1, 10.0
    for _ in range(200):
        u = (low + high) / 2
        low, high = (u, high) if (math.cosh(u) - 1) / (2 * u) < 0.75 else (low, u)
    a, length = 2.0 / u, 4.0 * math.sinh(u) / u
    assert found["axis_length_m"] == pytest.approx(length, rel=1e-11)
    assert found["area_m2"] == pytest.approx(0.3 * length, rel=1e-11)
    assert found["volume_m3"] == pytest.approx(0.3 * length, rel=1e-11)
    assert found["mass_kg"] == pytest.approx(0.3 * length * 1900, rel=1e-11)
    weight = 0.3 * 1900 * GRAVITY
    assert found["thrust_N"] == pytest.approx(weight * a, rel=1e-11)
    assert found["springing_from_N"] == pytest.approx([-weight * a, 0, -weight * length / 2], rel=1e-10)
    assert found["springing_to_N"] == pytest.approx([weight * a, 0, -weight * length / 2], rel=1e-10)
    assert found["crown_radius_m"] == pytest.approx(a - 0.15, rel=1e-11)
    assert found["used"]["density_kg_per_m3"] == 1900
    assert found["used"]["weight_N_per_m"] == pytest.approx(weight, rel=1e-11)


@pytest.mark.parametrize("curve", ["axis", "intrados", "extrados"])
@pytest.mark.parametrize("face", ["axis", "intrados", "extrados"])
def test_the_line_of_the_face_has_the_rise_and_springs_at_the_springings(curve: str, face: str) -> None:
    found = figures(curve=f'"{curve}"', face=f'"{face}"', to="[4000, 0, 200]")
    line = np.array(found[f"{face}_m"])
    assert line[[0, -1]] == pytest.approx(np.array([[0, 0, 0], [4, 0, 0.2]]), abs=1e-12)
    assert np.max(line[:, 2]) == pytest.approx(3.0, abs=5e-4)
    inner, outer = (np.array(found[f"{name}_m"])[:, [0, 2]] for name in ("intrados", "extrados"))
    ring, opening = Polygon([*inner, *outer[::-1]]), Polygon(inner)
    assert ring.is_valid
    assert ring.area == pytest.approx(found["area_m2"], abs=6e-3)
    assert opening.area == pytest.approx(found["under_area_m2"], abs=3e-3)
    assert not ring.intersects(opening.buffer(-1e-9))


def test_an_arch_across_the_plan_stands_in_its_own_plane() -> None:
    straight, turned = made(), made(**{"from": "[1000, 2000, 500]", "to": "[3400, 5200, 500]"})
    one, two = figures_of(straight), figures_of(turned)
    for key in ("span_m", "rise_m", "axis_length_m", "thrust_N", "area_m2", "under_area_m2"):
        assert two[key] == pytest.approx(one[key], rel=1e-10)
    along = np.array([0.6, 0.8, 0.0])
    assert turned.frame.along == pytest.approx(along, abs=1e-12)
    points = np.array(two["extrados_m"]) - [1.0, 2.0, 0.5]
    assert np.abs(points @ [-0.8, 0.6, 0.0]).max() < 1e-10
    push = np.array(two["springing_from_N"])
    assert push[:2] == pytest.approx(-one["thrust_N"] * along[:2], rel=1e-10)


def test_the_site_origin_shifts_every_elevation_alike() -> None:
    shifted = made(
        before="[site]\norigin = [100000, 200000, 50000]",
        **{"from": "[100000, 200000, 50000]", "to": "[104000, 200000, 50000]", "rise": "", "through": "[1500, 52500]"},
    )
    plain = made(rise="", through="[1500, 2500]")
    assert np.array(figures_of(shifted)["axis_m"]) == pytest.approx(np.array(figures_of(plain)["axis_m"]), abs=1e-10)
    assert figures_of(shifted)["intended"] == {"through_m": 2.5}


@pytest.mark.parametrize("fact", ["length", "thrust", "through"])
@pytest.mark.parametrize("curve", ["axis", "intrados"])
def test_each_fact_of_a_solved_arch_gives_the_same_arch_again(fact: str, curve: str) -> None:
    first = figures(curve=f'"{curve}"', face='"intrados"')
    line = np.array(first["intrados_m"])
    value = {
        "length": repr(1000 * first["intrados_length_m"]),
        "thrust": repr(first["thrust_N"]),
        "through": f"[{float(1000 * line[20, 0])!r}, {float(1000 * line[20, 2])!r}]",
    }[fact]
    again = figures(curve=f'"{curve}"', face='"intrados"', rise="", **{fact: value})
    for key in ("rise_m", "span_m", "thrust_N", "area_m2", "parameter_m"):
        assert again[key] == pytest.approx(first[key], rel=1e-8)
    assert again["difference"] == {f"{fact}_{'N' if fact == 'thrust' else 'm'}": 0.0}


def test_a_passing_point_may_be_given_in_space() -> None:
    flat = figures(rise="", through="[1000, 2000]")
    assert figures(rise="", through="[1000, 0, 2000]")["parameter_m"] == pytest.approx(flat["parameter_m"], rel=1e-12)


# Blocks


def test_blocks_are_marked_weighed_and_cut_one_by_one() -> None:
    piece = made(blocks="31", joint="8", copies="3")
    found = figures_of(piece)
    blocks = found["blocks"]
    assert [block["mark"] for block in blocks] == [f"A1.{n}" for n in range(1, 32)]
    assert [cut.mark for cut in piece.cuts] == [f"A1.{n}" for n in range(1, 32)]
    assert {cut.copies for cut in piece.cuts} == {3}
    assert [cut.mass for cut in piece.cuts] == pytest.approx([block["mass_kg"] for block in blocks], rel=1e-11)
    assert {cut.stock for cut in piece.cuts} == {"brick"}
    for block in blocks:
        assert block["volume_m3"] == pytest.approx(block["area_m2"], rel=1e-11)  # a metre deep
        assert block["mass_kg"] == pytest.approx(1900 * block["volume_m3"], rel=1e-11)
    slopes = [block["joint_from_deg"] for block in blocks] + [blocks[-1]["joint_to_deg"]]
    assert slopes[0] == pytest.approx(90.0, abs=1e-9)
    assert slopes[-1] == pytest.approx(-90.0, abs=1e-9)
    assert np.all(np.diff(slopes) < 0)
    assert found["different_blocks"] == 16
    assert found["keystone"] == "A1.16"


def test_outlines_of_blocks_and_flat_parts_are_those_of_the_blocks() -> None:
    piece = made(blocks="31", joint="8")
    blocks = figures_of(piece)["blocks"]
    drawn = [Polygon(np.array(block["outline_m"])[:, [0, 2]]) for block in blocks]
    assert all(polygon.is_valid and polygon.exterior.is_ccw for polygon in drawn)
    assert [p.area for p in drawn] == pytest.approx([b["area_m2"] for b in blocks], abs=2e-4)
    assert unary_union(drawn).area == pytest.approx(sum(p.area for p in drawn), abs=1e-12)
    assert [flat.mark for flat in piece.flats] == [block["mark"] for block in blocks]
    for flat, polygon in zip(piece.flats, drawn, strict=True):
        assert Polygon(flat.outlines[0]).area == pytest.approx(polygon.area, rel=1e-10)


def test_an_even_count_and_joints_on_the_foot_are_cautioned() -> None:
    codes = {caution.code for caution in made(blocks="30").cautions}
    assert "no keystone" in codes
    shallow = {caution.code for caution in made(blocks="41", rise="700").cautions}
    assert "joints run out on the foot" in shallow
    assert not {"no keystone", "joints run out on the foot"} & {caution.code for caution in made(blocks="31").cautions}


def test_every_arch_says_that_it_is_masonry_under_its_own_weight_alone() -> None:
    codes = [caution.code for caution in made().cautions]
    assert codes[:2] == ["masonry", "own weight only"]
    assert "material to confirm" in codes
    text = made().cautions[0].text
    assert "abutments" in text
    assert "Centring stays" in text


# What is drawn and written


def test_lines_have_their_roles_and_the_shape_line_is_the_true_catenary() -> None:
    piece = made(blocks="5", joint="8", setting_out="{ step = 500 }")
    count = {role: sum(line.role == role for line in piece.lines) for role in {line.role for line in piece.lines}}
    assert count == {"intrados": 1, "axis": 1, "extrados": 1, "springing": 1, "block": 5, "joint": 4, "ordinate": 7}
    curves = {line.role: line.curve for line in piece.lines}
    assert isinstance(curves["axis"], Catenary)
    assert isinstance(curves["intrados"], Offset)
    found = figures_of(piece)
    assert curves["axis"].length == pytest.approx(found["axis_length_m"], rel=1e-9)
    for role in ("intrados", "extrados"):
        assert curves[role].length == pytest.approx(found[f"{role}_length_m"], rel=1e-8)
        assert curves[role].start == pytest.approx(found[f"{role}_m"][0], abs=1e-9)
        assert curves[role].end == pytest.approx(found[f"{role}_m"][-1], abs=1e-9)


def test_an_arch_without_blocks_is_closed_by_its_feet() -> None:
    feet = [line.curve for line in made().lines if line.role == "joint"]
    assert len(feet) == 2
    assert all(foot.start[2] == foot.end[2] == 0.0 for foot in feet)


def test_dimensions_are_the_figures() -> None:
    piece = made(face='"intrados"', to="[4000, 0, 300]", setting_out="{ step = 1000 }")
    found = figures_of(piece)
    said = {dimension.says: dimension for dimension in piece.views[0].dimensions if dimension.says}
    assert said["clear span"].value == pytest.approx(4.0, rel=1e-12)
    assert said["span of axis"].value == pytest.approx(found["span_m"], rel=1e-11)
    assert said["clear rise"].value == pytest.approx(3.0, rel=1e-12)
    assert said["over all"].value == pytest.approx(3.0 + 0.3, rel=1e-12)  # at the crown the normal is upright
    bed = found["extrados_m"][-1][0] - found["intrados_m"][-1][0]
    assert said["bed"].value == pytest.approx(bed, rel=1e-9)
    assert said["steps from the first springing"].value == 1.0
    asked = [dimension.says for dimension in piece.views[0].dimensions if dimension.tells]
    assert asked == ["clear span", "clear rise"]
    assert said["level difference"].value == pytest.approx(0.3, rel=1e-12)
    thick = [d for d in piece.views[0].dimensions if d.kind == "aligned"]
    assert [d.value for d in thick] == pytest.approx([0.3], rel=1e-12)  # one: it is the same all along
    table = {row["x_m"]: row["intrados_m"] for row in found["setting_out"]}
    ordinates = [d for d in piece.views[0].dimensions if d.kind == "vertical" and not d.says]
    assert [d.value for d in ordinates] == pytest.approx([table[x] for x in (1.0, 2.0, 3.0, 4.0)], rel=1e-11)
    for dimension in piece.views[0].dimensions:
        if dimension.kind == "level":
            assert dimension.q[2] == dimension.value in (0.0, 0.3)
            continue
        step = dimension.q - dimension.p
        measured = {"horizontal": step[0], "vertical": step[2], "aligned": np.linalg.norm(step)}[dimension.kind]
        assert abs(float(measured)) == pytest.approx(dimension.value, rel=1e-9)


def test_more_ordinates_than_can_be_read_are_left_to_the_tables() -> None:
    piece = made(setting_out="{ step = 10 }")
    assert not any(line.role == "ordinate" for line in piece.lines)
    table = next(table for table in piece.tables if table.name == "setting out")
    assert len(table.columns[0].values) > 400


def test_tables_hold_ordinates_clear_widths_and_blocks() -> None:
    piece = made(face='"intrados"', blocks="9", setting_out="{ step = 250, widths_at = [0, 1000, 3500] }")
    tables: dict[str, dict[str, Any]] = {
        table.name: {column.key: column.values for column in table.columns} for table in piece.tables
    }
    assert set(tables) == {"setting out", "clear widths", "blocks"}
    assert tables["setting out"]["x"][0] < 0.0  # the extrados reaches out over the springing
    assert math.isnan(tables["setting out"]["intrados"][0])
    assert tables["clear widths"]["width"][0] == pytest.approx(4.0, rel=1e-12)
    assert math.isnan(tables["clear widths"]["width"][2])
    assert list(tables["blocks"]["form"]) == [1, 2, 3, 4, 5, 4, 3, 2, 1]


def test_solids_are_watertight_of_the_true_volume_and_depth() -> None:
    piece = made(blocks="15", joint="8", **{"from": "[1000, 2000, 500]", "to": "[3400, 5200, 500]"})
    found = figures_of(piece)
    whole, apart = piece.solids
    assert [whole.mark, apart.mark] == ["A1", "A1-blocks"]
    assert isinstance(whole.body, Prism)
    assert isinstance(apart.body, Union)
    assert whole.volume == pytest.approx(found["volume_m3"], rel=1e-12)
    assert apart.volume == pytest.approx(sum(block["volume_m3"] for block in found["blocks"]), rel=1e-10)
    for solid in piece.solids:
        mesh = solid.mesh(5e-4)
        assert mesh.volume == pytest.approx(solid.volume, rel=1e-3)
        edges = np.sort(np.concatenate([mesh.faces[:, [0, 1]], mesh.faces[:, [1, 2]], mesh.faces[:, [2, 0]]]), axis=1)
        _, uses = np.unique(edges, axis=0, return_counts=True)
        assert set(uses) == {2}
    across = whole.mesh(5e-4).vertices @ [-0.8, 0.6, 0.0]
    middle = np.array([1.0, 2.0, 0.0]) @ [-0.8, 0.6, 0.0]
    assert [across.min() - middle, across.max() - middle] == pytest.approx([-0.5, 0.5], abs=1e-9)


@pytest.mark.parametrize(("before", "gap"), [("", LEAST_GAP), ("[print]\nscale = 20", 20 * LEAST_GAP)])
def test_blocks_with_closed_joints_are_printed_apart(before: str, gap: float) -> None:
    piece = made(before, blocks="7")
    body = piece.solids[1].body
    assert isinstance(body, Union)
    drawn = [Polygon(prism.outline[:, [0, 2]]) for prism in body.bodies if isinstance(prism, Prism)]
    assert len(drawn) == 7
    near = [one.distance(other) for one, other in pairwise(drawn)]
    assert near == pytest.approx([gap] * 6, rel=1e-6)
    assert float(LEAST_GAP) == 5e-5


def test_a_print_whose_blocks_are_no_larger_than_the_gap_is_made_all_the_same() -> None:
    # At 1:5000 the gap is 250 mm of the arch and a block 85 mm of its axis.
    piece = made("[print]\nscale = 5000", blocks="101")
    (_, blocks) = piece.solids
    assert isinstance(blocks.body, Union)
    assert len(blocks.body.bodies) == 101
    assert blocks.volume == pytest.approx(piece.solids[0].volume, rel=1e-9)


def test_supports_bear_what_the_arch_pushes() -> None:
    before = "[support.west]\nat = [0, 0, 0]\nheight = 800\n[support.east]\nat = [4000, 0, 0]"
    result = solved(design(before, **{"from": '"west"', "to": '"east"', "copies": "4"}))
    west, east = result.supports
    assert (west.mark, east.mark) == ("west", "east")
    found = figures_of(result.pieces[0])
    assert west.pull == pytest.approx(found["springing_from_N"], rel=1e-10)
    assert (west.pull + east.pull)[2] == pytest.approx(-found["mass_kg"] * GRAVITY, rel=1e-10)
    assert west.moment == pytest.approx(0.8 * found["thrust_N"], rel=1e-10)
    assert math.isnan(east.moment)
    unnamed = solved(design()).supports
    assert [support.mark for support in unnamed] == ["A1.from", "A1.to"]


def test_the_marks_of_springings_and_blocks_are_labelled() -> None:
    labels = made(blocks="3").labels
    assert [(label.text, label.role) for label in labels] == [
        ("A1.from", "support"), ("A1.to", "support"), ("A1.1", "block"), ("A1.2", "block"), ("A1.3", "block"),
    ]  # fmt: skip


def test_a_block_is_marked_in_its_outer_half_with_the_way_to_its_back() -> None:
    piece = made(blocks="15")
    outer = LineString(np.array(figures_of(piece)["extrados_m"])[:, [0, 2]])
    for label in piece.labels[2:]:
        assert label.along is not None
        assert outer.distance(Point((label.at + label.along)[[0, 2]])) < 1e-3  # the polyline's own tolerance
        assert 0 < np.linalg.norm(label.along) < 0.3 / 2


def test_ordinates_have_their_distance_from_the_springing_under_them() -> None:
    piece = made(setting_out="{ step = 1000 }")
    stations = [label for label in piece.labels if label.role == "station"]
    assert [label.below[0].lengths[0] for label in stations] == pytest.approx([1.0, 2.0, 3.0], abs=1e-12)
    assert all(label.at[0] == pytest.approx(label.below[0].lengths[0], abs=1e-12) for label in stations)


def test_sizes_over_all_beds_and_depth_are_facts() -> None:
    piece = made(face='"intrados"')
    found = {fact.name: fact.value for fact in piece.facts}
    extrados = np.array(figures_of(piece)["extrados_m"])
    assert found["width over all"] == pytest.approx(np.ptp(extrados[:, 0]), rel=1e-6)
    assert found["height over all"] == pytest.approx(np.ptp(extrados[:, 2]), rel=1e-3)  # a polyline of another fineness
    assert found["thickness"] == 0.3
    assert found["foot bed"] == pytest.approx((extrados[-1, 0] - extrados[0, 0] - 4.0) / 2, rel=1e-9)


# What is refused


@pytest.mark.parametrize(
    ("changes", "key", "words"),
    [
        ({"to": "[0, 0, 900]"}, "to", "one plumb line"),
        ({"to": "[4000, 0, 3500]"}, "rise", "give more than 3500 mm"),
        ({"thickness": "3000"}, "thickness", "folds the intrados"),
        ({"thickness": "[400, 300]"}, "thickness", "give one thickness"),
        ({"rise": "100"}, "foot", 'give foot = "radial"'),
        ({"rise": "", "length": "3900"}, "length", "give more than 4000 mm"),
        ({"rise": "", "through": "[1000, -5]"}, "through", "give more than 0 mm there"),
        ({"rise": "", "through": "[1000, 40, 900]"}, "through", "40 mm off the plane"),
        ({"rise": "", "through": "7"}, "through", "is no point"),
        ({"rise": "", "thrust": "1"}, "thrust", "give more"),
        ({"shape": '"circle"'}, "shape", "not solved by this version yet"),
        ({"shape": '"catenry"'}, "shape", "did you mean 'catenary'"),
        ({"section": '"tube"'}, "section", "not solved by this version yet"),
        ({"section": "[[0, 0], [1, 0], [0, 1]]"}, "section", "not solved by this version yet"),
        ({"joint": "8"}, "joint", "give blocks"),
        ({"blocks": "1"}, "blocks", "give 2 to 10000"),
        ({"blocks": "301", "joint": "40"}, "joint", "give thinner joints or fewer blocks"),
        ({"setting_out": "{ step = 0.0001 }"}, "setting_out.step", "give a longer step"),
        ({"material": '"brik"'}, "material", "did you mean 'brick'"),
        ({"material": ""}, "material", "is missing"),
        ({"depth": "0"}, "depth", "more than 0"),
        ({"face": '"inside"'}, "face", "give one of"),
        ({"rise": ""}, "rise", "is missing"),
    ],
)
def test_what_cannot_be_made_is_refused_at_its_key_with_what_would_be_right(
    changes: dict[str, str], key: str, words: str
) -> None:
    found = problems(design(**changes))
    assert len(found) == 1
    assert found[0][0] == key
    assert words in found[0][1]


@pytest.mark.parametrize("key", ["wall", "bricks", "joint_range", "ribs", "ties", "fill", "loads", "bend", "segments"])
def test_a_key_of_the_vocabulary_that_is_not_built_yet_is_refused_in_one_line(key: str) -> None:
    assert problems(design(**{key: "12"})) == [(key, "is not solved by this version yet; leave it out")]


def test_a_design_in_inches_is_answered_in_inches() -> None:
    text = design(thickness="400").replace('unit = "mm"', 'unit = "in"')
    (found,) = problems(text.replace("[4000, 0, 0]", "[36, 0, 0]").replace("rise = 3000", "rise = 36"))
    assert found[0] == "thickness"
    assert "400 in folds" in found[1]


def test_each_arch_of_a_design_stands_alone() -> None:
    two = design() + "\n" + ARCH.replace('"A1"', '"A2"').replace("thickness = 300", "thickness = 9000")
    reading = read(two, "arch")
    assert reading.design is not None
    found = solve(reading.design)
    assert found.result is None
    assert [problem.feature for problem in found.problems] == ['arch "A2"']
