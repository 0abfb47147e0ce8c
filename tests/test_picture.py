"""The picture drawing and preview share: nothing over anything else, all on its sheet, figures as they are."""

import math
from collections.abc import Iterator
from functools import cache
from typing import Any

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from export.dxf.links import outlines
from export.picture import labels, looks, scale, text
from export.picture.dimensions import measures, outside
from export.picture.ground import ANY, HEAVY, Ground
from export.picture.labels import Wanted
from export.picture.make import picture
from export.picture.screen import WIDTH, screen
from export.picture.sizes import PAPER
from export.picture.values import SITE_PLAN, Panel, Picture, Text, around, shifted
from export.picture.views import Drawing, tidy
from export.picture.wording import Wording, force, significant
from geom.result import Dimension, Frame, Quantity, Result, Unit, fixed
from tests.designs import ARCH, NET, RUN, SWAGS, by_hand, in_unit, many, solved

WITHIN = 0.0005
DESIGNS = {
    "swags": SWAGS, "run": RUN, "net": NET, "swags in feet": in_unit(SWAGS, "ft"), "run in inches": in_unit(RUN, "in"),
    "swags on A4": in_unit(SWAGS, "m", sheet='"A4"'), "net on A1": in_unit(NET, "mm", sheet='"A1"'), "many": many(20),
}  # fmt: skip


NAMES = [*DESIGNS, "by hand"]


@cache
def result_of(name: str) -> Result:
    return by_hand() if name == "by hand" else solved(DESIGNS[name])


@cache
def drawn(name: str) -> Picture:
    return picture(result_of(name), Drawing(WITHIN))


def texts(panel: Panel) -> Iterator[tuple[Text, shapely.Polygon]]:
    """Every text of a panel with its box on the print."""
    found = [*(one for group in panel.groups for one in group.texts), *panel.titles]
    found += [placed.text for placed in panel.dimensions]
    for one in found:
        yield one, shapely.Polygon(one.corners + panel.at)


def all_texts(shown: Picture) -> list[tuple[str, shapely.Polygon]]:
    found = [(one.text, box) for panel in shown.panels for one, box in texts(panel)]
    return found + [(one.text, shapely.Polygon(one.corners + shown.notes.at)) for one in shown.notes.texts]


def heavy_lines(panel: Panel) -> list[shapely.LineString]:
    """Lines of the thing itself on the print: strokes, symbols, outlines of links."""
    lines = []
    for group in panel.groups:
        lines += [s.points / panel.per for s in group.strokes if s.look.heavy]
        lines += [path.points for path in group.paths if path.look.heavy]
        for row in group.links:
            half = np.array([(row.pitch + 2 * row.wire) / 2, 0.0]) / panel.per
            for place, angle in zip(row.places / panel.per, row.angles, strict=True):
                turn = np.array([[np.cos(angle), np.sin(angle)], [-np.sin(angle), np.cos(angle)]])
                lines.append(place + np.stack([-half, half]) @ turn)
    return [shapely.LineString(line + panel.at) for line in lines]


@pytest.mark.parametrize("name", NAMES)
def test_no_two_texts_overlap(name: str) -> None:
    boxes = all_texts(drawn(name))
    tree = shapely.STRtree([box for _, box in boxes])
    for number, (said, box) in enumerate(boxes):
        for other in tree.query(box):
            if other > number:
                overlap = box.intersection(boxes[other][1]).area
                assert overlap < 1e-6, f"{said!r} lies on {boxes[other][0]!r}"


@pytest.mark.parametrize("name", NAMES)
def test_no_text_lies_across_a_heavy_line(name: str) -> None:
    for panel in drawn(name).panels:
        tree = shapely.STRtree(heavy_lines(panel))
        for one, box in texts(panel):
            assert not len(tree.query(box, predicate="intersects")), one.text


@pytest.mark.parametrize("name", NAMES)
def test_everything_is_within_the_sheet_at_the_chosen_scale(name: str) -> None:
    shown = drawn(name)
    if shown.sheets == 1:
        wide, high = shown.room
        assert shown.box[2] - shown.box[0] <= wide + 1e-9
        assert shown.box[3] - shown.box[1] <= high + 1e-9
    whole = shapely.box(*shown.box).buffer(1e-6)
    assert all(whole.contains(box) for _, box in all_texts(shown))
    for panel in shown.panels:
        for group in panel.groups:
            for stroke in group.strokes:
                assert whole.contains(shapely.MultiPoint(stroke.points / panel.per + panel.at))


@pytest.mark.parametrize("name", NAMES)
def test_no_panel_lies_on_another_and_pieces_stand_fifteen_heights_or_a_tenth_apart(name: str) -> None:
    shown = drawn(name)
    panels = [panel for panel in shown.panels if panel.kind != "heading"]
    boxes = [shapely.box(*shifted(panel.box, panel.at)) for panel in panels]
    cores = [shapely.box(*shifted(panel.core, panel.at)) for panel in panels]
    for one in range(len(panels)):
        for other in range(one):
            assert boxes[one].intersection(boxes[other]).area == 0
            sides = [s for p in (panels[one], panels[other]) for s in (p.core[2] - p.core[0], p.core[3] - p.core[1])]
            least = max(15 * PAPER.note, max(sides) / 10)
            assert cores[one].distance(cores[other]) >= least - 1e-6


@pytest.mark.parametrize("name", NAMES)
def test_a_dimension_says_and_measures_its_figure(name: str) -> None:
    wording = Wording(result_of(name).setting.drawing_unit)
    found = [placed for panel in drawn(name).panels for placed in panel.dimensions]
    assert found
    for placed in found:
        said = wording.length(placed.value)
        said = f"R {said}" if placed.kind == "radius" else said
        assert placed.text.text == (f"{said} {placed.says}" if placed.says else said)
        assert placed.measured == pytest.approx(placed.value, rel=1e-9, abs=1e-9)


def test_the_scale_is_the_largest_of_the_series_that_fits() -> None:
    # 7.2 m of bollards: 720 mm at 1:10, wider than the 390 mm of an A3, 360 mm at 1:20
    assert drawn("run").scale == "1:20"
    larger = picture(solved(in_unit(RUN, "mm", sheet='"A1"')), Drawing(WITHIN))
    smaller = picture(solved(in_unit(RUN, "mm", sheet='"A4"')), Drawing(WITHIN))
    assert larger.scale == "1:10"  # 720 of 811 mm
    assert smaller.scale in ("1:50", "1:100")  # 144 or 72 of 180 mm, as its texts find room


def test_what_fits_no_sheet_is_laid_out_on_several_with_no_row_across_two() -> None:
    shown = picture(solved(many(30)), Drawing(WITHIN))
    assert shown.sheets > 1
    high = shown.room[1]
    feed = high + 40 * PAPER.note
    top = shown.box[3]
    for panel in shown.panels:
        upper, lower = (top - (panel.box[side] + panel.at[1]) for side in (3, 1))
        assert (upper + 1e-6) // feed == lower // feed, panel.name
        assert lower % feed <= high + 1e-6


def test_a_plan_of_pieces_far_apart_stands_under_the_sheet_at_the_scale_of_the_views() -> None:
    # Swags of at most 4 m, 80 m apart: their plan takes 400 mm at 1:200, where they are 20 mm wide.
    far = SWAGS.replace("00, 2000, 3000]", "00, 80000, 3000]")
    shown = picture(solved(far), Drawing(WITHIN))
    plan = next(panel for panel in shown.panels if panel.name == SITE_PLAN)
    views = [panel for panel in shown.panels if panel.kind == "elevation"]
    foot = min(panel.at[1] + panel.box[1] for panel in views)
    assert plan.at[1] + plan.box[3] < foot
    assert plan.box[3] - plan.box[1] > shown.room[1]
    assert plan.per == views[0].per
    assert "print it at 1:500" in " ".join(one.text for one in shown.notes.texts)
    assert shown.box[1] == pytest.approx(plan.at[1] + plan.box[1])


def test_notes_longer_than_the_sheet_take_a_larger_one_and_no_word_is_wider_than_its_column() -> None:
    long = SWAGS.replace('title = "', f'title = "{"x" * 180} ') + (
        f'[stock.own]\nkind = "rope"\ndiameter = 5\nmass_per_metre = 0.1\nsource = "{"sheet " * 1200} {"y" * 900}"\n'
    )
    shown = picture(solved(in_unit(long.replace('"DIN 763-4"', '"own"'), "mm", sheet='"A4"')), Drawing(WITHIN))
    assert all(one.width <= 170 for one in shown.notes.texts)
    high = shown.notes.box[3] - shown.notes.box[1]
    rooms = [scale.sheet(name).height for name in ("A4", "A3", "A2", "A1", "A0")]
    assert shown.room[1] == next(room for room in rooms if room > high) > rooms[0]


def test_a_title_says_mark_stock_and_how_many_and_pulls_say_what_they_are_of() -> None:
    panel = next(one for one in drawn("swags").panels if one.name == "S1")
    said = [line.text for line in panel.titles]
    assert said[:2] == ["S1", "chain DIN 763-6, 4 off"]
    assert any("links" in line and "pin to pin" in line for line in said)
    assert any("pull" in line and line.endswith("(dead load only)") for line in said)
    assert all("(dead load only)" in line for line in said if "end pull" in line)


def test_titles_stand_in_one_line_along_a_row() -> None:
    feet = [panel.at[1] + panel.titles[0].at[1] for panel in drawn("swags").panels if panel.name in ("S1", "S2")]
    assert feet[0] == pytest.approx(feet[1], abs=1e-9)


def test_the_plan_names_each_support_once_and_every_piece() -> None:
    plan = next(panel for panel in drawn("swags").panels if panel.name == SITE_PLAN)
    said = sorted(one.text for group in plan.groups for one in group.texts)
    assert said == ["P1", "P2", "S1", "S2", "S3"]


def test_the_plan_is_left_out_where_the_only_piece_is_drawn_in_plan() -> None:
    assert not any(panel.name == SITE_PLAN for panel in drawn("net").panels)


def test_the_notes_say_unit_scale_what_pulls_include_and_a_check_line_of_its_length() -> None:
    shown = drawn("swags")
    said = [one.text for one in shown.notes.texts]
    assert "UNITS mm" in said
    assert f"Scale {shown.scale} printed on A3" in said
    assert "Pulls: dead load only" in said
    (x0, y0), (x1, y1) = shown.notes.check
    assert math.hypot(x1 - x0, y1 - y0) * shown.ratio / 1000 == pytest.approx(shown.notes.check_length, rel=1e-12)
    assert f"check line {shown.notes.check_length * 1000:g} mm" in said


def test_the_site_origin_is_stated() -> None:
    shifted_away = f"{SWAGS}[site]\norigin = [437250, 112400, 0]\n"
    said = " ".join(one.text for one in picture(solved(shifted_away), Drawing(WITHIN)).notes.texts)
    assert "Site origin 437250 mm, 112400 mm, 0 mm is taken off every point" in said


def test_a_caution_stands_in_the_notes_and_its_number_under_its_piece() -> None:
    shown = drawn("run")
    notes = " ".join(one.text for one in shown.notes.texts)
    for number, caution in enumerate(solved(RUN).cautions, 1):
        assert f"CAUTION {number}" in notes
        assert " ".join(caution.text.split()) in notes
    pointer = next(one for panel in shown.panels for one in panel.titles if one.text.startswith("see caution"))
    assert pointer.look.colour == "warm"


def test_links_that_leave_the_plane_are_not_drawn_and_those_in_it_all_are() -> None:
    shown = drawn("swags")
    counts = {p.name: sum(len(row.places) for group in p.groups for row in group.links) for p in shown.panels}
    made = {piece.mark: piece.figures.links.count for piece in solved(SWAGS).pieces}
    assert counts == {"heading": 0, SITE_PLAN: 0} | made
    assert not any(group.links for panel in drawn("net").panels for group in panel.groups)


def test_supports_of_what_hangs_stand_over_it() -> None:
    panel = next(one for one in drawn("swags").panels if one.name == "S2")
    triangles = [p.points for p in panel.groups[0].paths if p.look == looks.LOOKS["held point"]]
    assert len(triangles) == 2
    assert all(points[0][1] < points[1:, 1].min() for points in triangles)


@pytest.mark.parametrize("name", NAMES)
def test_on_a_screen_nothing_overlaps_and_all_is_within_its_width(name: str) -> None:
    shown = screen(result_of(name))
    boxes = [found for panel in shown.panels for found in texts(panel)]
    tree = shapely.STRtree([box for _, box in boxes])
    for number, (one, box) in enumerate(boxes):
        left, _, right, _ = box.bounds
        assert left >= 0, one.text
        assert right <= WIDTH, one.text
        for other in tree.query(box):
            assert other <= number or box.intersection(boxes[other][1]).area < 1e-6, (one.text, boxes[other][0].text)
        for panel in shown.panels:
            lines = shapely.STRtree(heavy_lines(panel))
            assert not len(lines.query(box, predicate="intersects")), one.text


def test_every_kind_of_dimension_is_placed() -> None:
    kinds = [placed.kind for panel in drawn("by hand").panels for placed in panel.dimensions]
    assert len(kinds) == 10
    assert set(kinds) == {"linear", "radius", "ordinate"}
    assert drawn("by hand").dropped == 0


def test_loads_hang_to_their_hangers_length_and_the_ground_is_hatched() -> None:
    panel = next(one for one in drawn("by hand").panels if one.name == "W")
    paths = panel.groups[0].paths
    plumb = [np.ptp(p.points, axis=0) for p in paths if p.look.layer == "LOADS" and len(p.points) == 2]
    assert sorted(line[1] * panel.per for line in plumb if line[0] == 0)[-2:] == pytest.approx([0.6, 0.6], rel=1e-9)
    hatching = [p for p in paths if p.look.layer == "FLOOR"]
    ground = next(s for s in panel.groups[0].strokes if s.look.layer == "FLOOR")
    assert len(hatching) > 20
    tops = np.array([p.points[0] for p in hatching])
    assert np.interp(tops[:, 0], *(ground.points / panel.per).T) == pytest.approx(tops[:, 1], abs=1e-9)


def test_the_axis_of_what_has_a_thickness_is_a_centre_line_and_the_thrust_is_warm() -> None:
    strokes = next(one for one in drawn("by hand").panels if one.name == "A").groups[0].strokes
    axis, thrust = (next(s.look for s in strokes if s.look.layer == layer) for layer in ("AXIS", "THRUST"))
    assert (axis.linetype, axis.width) == ("CENTER", 18)
    assert (thrust.linetype, thrust.colour) == ("PHANTOM", "warm")
    wire = next(one for one in drawn("by hand").panels if one.name == "W").groups[0].strokes
    assert next(s.look for s in wire if s.look.layer == "AXIS") == looks.LAYERS["AXIS"]


FRAME = Frame(fixed([0, 0, 0]), fixed([1, 0, 0]), fixed([0, 0, 1]))


@given(st.lists(st.tuples(st.floats(0, 9), st.floats(0.05, 5)), min_size=1, max_size=12))
@settings(max_examples=60, deadline=None)
def test_in_rows_the_smaller_stands_nearer_and_no_two_overlap(spans: list[tuple[float, float]]) -> None:
    given_ = [Dimension("horizontal", fixed([x, 0, 0]), fixed([x + long, 0, 0]), long) for x, long in spans]
    rows = outside(measures(given_, FRAME, Wording("mm")), 0.02, (0.0, 0.0, 700.0, 50.0), PAPER)
    lines = [(placed.paths[-3].points[0], placed.paths[-3].points[1], placed.measured / 0.02) for placed in rows.placed]
    for one, (start, end, long) in enumerate(lines):
        for other_start, other_end, other_long in lines[:one]:
            over = min(end[0], other_end[0]) - max(start[0], other_start[0])
            if over > 0.2:
                assert start[1] != other_start[1]
                # rows go downwards: what covers another wholly stands further out
                covers = min(start[0], other_start[0]) in (start[0],) and long > other_long + 1e-6
                if covers and start[0] <= other_start[0] and start[0] + long >= other_start[0] + other_long:
                    assert start[1] < other_start[1]


def test_no_measure_is_given_twice() -> None:
    p, q = fixed([0, 0, 0]), fixed([2, 0, 0])
    twice = [Dimension("horizontal", p, q, 2.0, "span"), Dimension("horizontal", q, p, 2.0, "span", rank=1)]
    assert len(measures(twice, FRAME, Wording("mm"))) == 1


def test_a_dimension_of_no_length_or_without_meaning_is_left_out() -> None:
    p, q = fixed([0, 0, 0]), fixed([0, 0, 1])
    none = [Dimension("horizontal", p, q, 0.0), Dimension("vertical", p, q, math.nan)]
    assert measures(none, FRAME, Wording("mm")) == []


@given(
    st.lists(st.tuples(st.floats(10, 190), st.floats(10, 190)), min_size=1, max_size=60),
    st.sampled_from(["node", "member"]),
)
@settings(max_examples=30, deadline=None)
def test_marks_stay_off_one_another_and_off_lines(points: list[tuple[float, float]], role: str) -> None:
    ground = Ground((0.0, 0.0, 200.0, 200.0), 0.5)
    line = np.array([[0.0, 40.0], [200.0, 150.0]])
    ground.lines(line, HEAVY)
    wanted = [Wanted(f"N{n}", np.array(at), role) for n, at in enumerate(points)]  # type: ignore[arg-type]
    marks = labels.place(wanted, ground, PAPER)
    boxes = [shapely.Polygon(one.corners) for one in marks.texts]
    assert len(boxes) + marks.dropped == len(points)
    assert all(not box.intersects(shapely.LineString(line)) for box in boxes)
    assert all(boxes[a].intersection(boxes[b]).area == 0 for a in range(len(boxes)) for b in range(a))


def test_a_thousand_marks_with_room_are_all_placed() -> None:
    ground = Ground((0.0, 0.0, 800.0, 600.0), 0.5)
    x, y = np.meshgrid(np.linspace(10, 790, 40), np.linspace(10, 590, 25))
    wanted = [Wanted(str(n), np.array(at), "node", 0.3) for n, at in enumerate(zip(x.ravel(), y.ravel(), strict=True))]
    assert labels.place(wanted, ground, PAPER).dropped == 0


def test_a_crowded_view_gets_smaller_marks_before_any_is_dropped() -> None:
    ground = Ground((0.0, 0.0, 200.0, 200.0), 0.5)
    x, y = np.meshgrid(np.linspace(10, 190, 20), np.linspace(10, 190, 28))
    wanted = [Wanted(f"M{n}", np.array(at), "member") for n, at in enumerate(zip(x.ravel(), y.ravel(), strict=True))]
    marks = labels.place(wanted, ground, PAPER)
    assert {one.height for one in marks.texts} == {PAPER.small}


@given(st.lists(st.tuples(st.floats(-50, 250), st.floats(-50, 250)), min_size=2, max_size=8), st.floats(0, 3.1))
@settings(max_examples=80, deadline=None)
def test_a_line_through_a_box_is_always_met(points: list[tuple[float, float]], angle: float) -> None:
    ground = Ground((0.0, 0.0, 200.0, 200.0), 0.5)
    line = np.array(points)
    ground.lines(line, HEAVY)
    one = Text(looks.LOOKS["note"], "Sixteen letters.", (100.0, 100.0), 2.5, "centre", angle)
    if shapely.LineString(line).intersects(shapely.Polygon(one.corners)):
        assert not ground.free_turned(one.corners, ANY, 0.4)
        assert angle or not ground.free(one.box, ANY, 0.4)


def test_measured_text_is_at_least_as_wide_as_in_the_fonts_it_was_measured_in() -> None:
    found = _fonts()
    if not found:
        pytest.skip("none of the fonts is on this machine")
    for font, capital in found:
        names, advances = font.getBestCmap(), font["hmtx"]
        for character, wide in text.WIDTHS.items():
            if ord(character) in names:
                assert advances[names[ord(character)]][0] / capital <= wide + 1e-9, character


def _fonts() -> list[tuple[Any, int]]:
    from pathlib import Path

    from fontTools.ttLib import TTFont  # type: ignore[import-untyped]

    root = Path("/usr/share/fonts/truetype")
    capitals = {"liberation/LiberationSans-Regular.ttf": 1409, "dejavu/DejaVuSans.ttf": 1493}  # units of the em
    return [(TTFont(root / name), capital) for name, capital in capitals.items() if (root / name).exists()]


@given(st.text("abc DEF mm 123,.", min_size=1, max_size=200), st.floats(5, 60))
def test_wrapped_lines_hold_every_word_and_are_no_wider_than_allowed(said: str, widest: float) -> None:
    lines = text.wrapped(said, widest)
    assert "".join(lines).replace(" ", "") == "".join(said.split())
    assert all(text.width(line) <= widest for line in lines)
    if all(text.width(word) <= widest for word in said.split()):
        assert " ".join(lines).split() == said.split()


def test_scales_are_those_of_iso_5455_and_the_architects() -> None:
    metric = [one.says for one in scale.scales("mm")][:14]
    assert metric == [
        *(f"{n}:1" for n in (50, 20, 10, 5, 2)),
        *(f"1:{n}" for n in (1, 2, 5, 10, 20, 50, 100, 200, 500)),
    ]
    # standards: 3/4 in = 1 ft is 1:16, 1/2 in 1:24, 1/4 in 1:48, 1/8 in 1:96
    feet = {one.says: one.ratio for one in scale.scales("ft")}
    for said, ratio in {"3/4": 16, "1/2": 24, "1/4": 48, "1/8": 96}.items():
        assert feet[f'{said}" = 1\'-0" (1:{ratio})'] == ratio


def test_the_drawing_space_is_that_of_iso_5457() -> None:
    # ISO 5457: 821 x 1159, 574 x 811, 400 x 564, 277 x 390, 180 x 277 mm
    spaces = {
        name: sorted((one.width, one.height)) for name in ("A0", "A1", "A2", "A3", "A4") for one in [scale.sheet(name)]
    }
    assert spaces == {"A0": [821, 1159], "A1": [574, 811], "A2": [400, 564], "A3": [277, 390], "A4": [180, 277]}


@given(st.floats(1e-3, 1e6))
def test_a_check_line_is_round_and_fills_at_least_two_fifths_of_its_room(room: float) -> None:
    long = scale.round_length(room)
    assert room / 2.5 * (1 - 1e-9) <= long <= room * (1 + 1e-9)
    assert f"{long:.6e}"[0] in "125"
    assert float(f"{long:.0e}") == pytest.approx(long, rel=1e-12)


def test_lengths_are_said_to_what_a_shop_can_do() -> None:
    assert Wording("mm").length(1.8844) == "1884"
    assert Wording("mm", finer=1).length(0.12345) == "123.5"
    assert Wording("m").length(1.8844) == "1.884"
    assert Wording("ft").length(0.3048 * 13 + 0.0254 * 9.5) == "13'-9 1/2\""
    # 1800 mm = 70.866 in: 5 ft 10 7/8 in
    assert Wording("in").length(1.8) == '70 7/8"'
    assert Wording("in").length(0.0254 * 0.25) == '1/4"'


def test_quantities_are_said_in_the_trades_words() -> None:
    wording = Wording("mm")
    assert wording.quantity(Quantity("links", 35.0)) == "35 links"
    assert wording.quantity(Quantity("pin_to_pin", 1.884, Unit("m"))) == "pin to pin 1884 mm"
    assert wording.quantity(Quantity("mass", 2.0689, Unit("kg"))) == "mass 2.07 kg"
    assert force(999.4) == "999 N"
    assert force(999.6) == "1.00 kN"
    assert force(1177.0) == "1.18 kN"
    assert significant(0.00123456) == "0.00123"


def test_a_straight_curve_seen_from_above_is_two_points() -> None:
    along = np.stack([np.linspace(0, 3, 50), np.linspace(0, 4, 50)], axis=1)
    assert tidy(along) == pytest.approx(np.array([[0, 0], [3, 4.0]]))
    there_and_back = np.concatenate([along, along[::-1]])
    assert tidy(there_and_back) == pytest.approx(np.array([[0, 0], [3, 4.0]]))
    assert len(tidy(np.tile([1.0, 2.0], (5, 1)))) == 1


def test_a_links_outline_has_its_sizes() -> None:
    row = drawn("swags").panels[1].groups[0].links[0]
    outer, inner = (outline.points for outline in outlines(row, face_on=True))
    # half circles reach half the width beyond the straights
    assert np.ptp(outer[:, 0]) + row.width == pytest.approx(row.pitch + 2 * row.wire, rel=1e-12)
    assert np.ptp(outer[:, 1]) == pytest.approx(row.width, rel=1e-12)
    assert np.ptp(inner[:, 0]) + row.width - 2 * row.wire == pytest.approx(row.pitch, rel=1e-12)


def test_the_box_round_nothing_is_empty() -> None:
    assert around() == (math.inf, math.inf, -math.inf, -math.inf)


# What a fitter and a builder look for


def panel_of(name: str, mark: str) -> Panel:
    return next(panel for panel in drawn(name).panels if panel.name == mark)


def said_in(panel: Panel) -> list[str]:
    return [one.text for group in panel.groups for one in group.texts]


def test_each_bay_of_a_run_says_its_links_and_what_its_fittings_take() -> None:
    panel = panel_of("run", "Q")
    texts_ = panel.groups[0].texts
    (run,) = result_of("run").pieces
    for bay in run.parts:
        mark = next(one for one in texts_ if one.text == bay.mark)
        column = [one for one in texts_ if abs(one.at[0] - mark.at[0]) < 1e-9 and one.at[1] <= mark.at[1]]
        below = [one.text for one in sorted(column, key=lambda one: -one.at[1])]
        links = bay.figures.links.count
        assert below[:3] == [bay.mark, f"{links} links", "takes 32 / 32"]
        assert below[3:5] == [f"sag {bay.figures.sag * 1000:.0f}", f"lowest {bay.figures.lowest * 1000:.0f}"]
        ends = [pull.at[0] / panel.per for pull in bay.pulls]
        assert ends[0] < min(one.box[0] for one in column) < max(one.box[2] for one in column) < ends[1]


def test_a_run_over_supports_of_several_levels_says_each_level_once_and_which_supports_have_it() -> None:
    said = [placed.text.text for placed in panel_of("run", "Q").dimensions if placed.kind == "ordinate"]
    assert sorted(said)[1:] == ["780 support 5", "840 support 4", "900 supports 1 to 3"]
    assert sorted(said)[0].endswith("lowest point")
    named = RUN.replace("[0, 0, 900], [1800, 0, 900]", '[0, 0, 900], "post"') + "[support.post]\nat = [1800, 0, 900]\n"
    level = named.replace("840", "900").replace("780", "900")
    panel = next(one for one in picture(solved(level), Drawing(WITHIN)).panels if one.name == "Q")
    assert "900 all supports" in [placed.text.text for placed in panel.dimensions]


def test_the_chain_of_many_equal_bays_is_the_first_and_the_total() -> None:
    supports = ", ".join(f"[{1800 * number}, 0, 900]" for number in range(31))
    many_bays = f'unit = "mm"\n[[run]]\nmark = "Q"\nsupports = [{supports}]\nstock = "DIN 763-8"\nsag = 250\n'
    shown = picture(solved(many_bays), Drawing(WITHIN))
    panel = next(one for one in shown.panels if one.name == "Q")
    spans = [placed.text.text for placed in panel.dimensions if placed.kind == "linear" and placed.angle == 0]
    assert sorted(spans) == ["1800", "54000 30 equal bays"]
    assert all(f"Q.{number}" in said_in(panel) for number in range(1, 31))


def test_a_hanging_says_the_levels_of_its_supports_and_its_fittings() -> None:
    fitted = (
        'unit = "mm"\n[fitting.eye]\ntakes = 90\ngrip = 60\n[[hanging]]\nmark = "S"\nfrom = [0, 0, 2600]\n'
        'to = [4000, 0, 2600]\nstock = "7x7-4"\nsag = 400\nfittings = { from = "eye", to = 45 }\n'
    )
    for high, levels in ((2600, ["2600 supports"]), (2900, ["2600", "2900"])):
        text_ = fitted.replace("4000, 0, 2600", f"4000, 0, {high}")
        panel = next(one for one in picture(solved(text_), Drawing(WITHIN)).panels if one.name == "S")
        assert {"eye", "takes 90, grip 60", "fitting", "takes 45"} <= set(said_in(panel))
        said = [placed.text.text for placed in panel.dimensions if placed.kind == "ordinate"]
        assert sorted(one for one in said if not one.endswith("lowest point")) == levels


@pytest.mark.parametrize("text_", [ARCH, RUN], ids=["arch", "run"])
def test_the_plan_of_the_only_piece_stands_in_line_under_its_elevation_at_the_same_scale(text_: str) -> None:
    result = solved(text_)
    for panels in (picture(result, Drawing(WITHIN)).panels, screen(result).panels):
        over, plan = (next(one for one in panels if one.name == name) for name in (result.pieces[0].mark, SITE_PLAN))
        assert over.per == plan.per
        ends = []
        for panel in (over, plan):
            points = np.concatenate([stroke.points for group in panel.groups for stroke in group.strokes])
            ends.append(points[:, 0].min() / panel.per + panel.at[0])
        assert ends[0] == pytest.approx(ends[1], abs=1e-6)
        assert plan.at[1] + plan.box[3] < over.at[1] + over.box[1]


def test_a_preview_shows_the_dimensions_that_were_asked_for() -> None:
    said = {placed.text.text for panel in screen(solved(ARCH)).panels for placed in panel.dimensions}
    asked = {placed.says for panel in screen(solved(ARCH)).panels for placed in panel.dimensions}
    assert {"clear span", "clear rise"} <= asked
    assert not {"span of axis", "over all"} & asked, said
    run = {placed.text.text for panel in screen(solved(RUN)).panels for placed in panel.dimensions}
    assert {"1800", "7200"} <= run


def test_blocks_are_marked_in_themselves_or_outside_the_ring_alike_on_both_sides() -> None:
    shown = picture(solved(ARCH), Drawing(WITHIN))
    panel = next(one for one in shown.panels if one.name == "A1")
    result = solved(ARCH)
    marks = {one.text: one for group in panel.groups for one in group.texts}
    labels_ = [label for label in result.pieces[0].labels if label.role == "block"]
    frame = result.pieces[0].frame
    within = []
    for label in labels_:
        at = frame.flat(label.at[None])[0] / panel.per
        box = shapely.box(*marks[label.text].box)
        within.append(bool(box.contains(shapely.Point(at))))
    off = sum(one != other for one, other in zip(within, reversed(within), strict=True))
    assert off <= 2, within
    assert len(set(within)) == 1 or within.count(not within[0]) <= max(1, len(within) // 10)


def test_circles_of_nodes_stand_on_a_leader_from_their_node_and_nearly_all_in_one_direction() -> None:
    panel = next(one for one in drawn("net").panels if one.kind == "plan")
    (group,) = panel.groups
    leaders = [path.points for path in group.paths if path.look == looks.LOOKS["leader"]]
    piece = result_of("net").pieces[0]
    nodes = {label.text: label.at[:2] / panel.per for label in piece.labels if label.role == "node"}
    rings = [circle for circle in group.circles if circle.radius > 1]
    assert len(rings) == len(nodes)
    ways = []
    for circle in rings:
        mark = next(
            one
            for one in group.texts
            if one.text in nodes and np.hypot(*(np.mean(one.corners, axis=0) - circle.at)) < 0.1
        )
        node = nodes[mark.text]
        ends = [points for points in leaders if np.hypot(*(points[0] - node)) < 1.0]
        assert any(abs(np.hypot(*(points[1] - circle.at)) - circle.radius) < 0.1 for points in ends), mark.text
        ways.append(tuple(np.sign(np.round(np.array(circle.at) - node, 6))))
    assert max(ways.count(way) for way in ways) >= 0.7 * len(ways)


def test_edges_of_a_net_are_drawn_no_thinner_than_its_field() -> None:
    assert looks.LOOKS["edge"].width >= looks.LOOKS["member"].width


def test_only_the_head_of_a_caution_is_warm_and_equal_cautions_of_all_pieces_are_one() -> None:
    shown = drawn("swags")
    warm = [one.text for one in shown.notes.texts if one.look.colour == "warm"]
    assert all(one.startswith("CAUTION ") for one in warm)
    assert len({" ".join(one.split()[2:]) for one in warm}) <= len(warm)
    assert "all pieces: Pulls are of the dead load" in " ".join(one.text for one in shown.notes.texts)
    alone = " ".join(one.text for one in drawn("run").notes.texts)
    assert "all pieces" not in alone


def test_on_a_drawing_in_feet_the_notes_have_no_metric_lengths() -> None:
    assert Wording("ft").retold("up to 6.6 mm longer; 4.2 m between; 1900 kg/m3, 11 or more links") == (
        f'up to 0.26" longer; {Wording("ft").length(4.2)} between; 1900 kg/m3, 11 or more links'
    )
    assert Wording("mm").retold("up to 6.6 mm longer") == "up to 6.6 mm longer"
    assert Wording("ft").fine(0.0005) == '0.02"'  # 0.5 / 25.4 = 0.0197
    assert Wording("mm").fine(0.0005) == "0.5 mm"
    said = [one.text for one in drawn("swags in feet").notes.texts]
    assert next(one for one in said if one.startswith("check line")).endswith("'-0\"")
