"""Laws of rows of swags: they are the hangings they lay out, between rails and round rings."""

from __future__ import annotations

import math
from dataclasses import fields
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.typing import NDArray

from geom.hang.rail import even, rail, ring, spaced
from geom.hang.row import every, named
from geom.hang.row_views import kinds, ranges
from geom.result import Piece, Result
from geom.units import STANDARD_GRAVITY
from tests.designs import solved

Floats = NDArray[np.float64]

STOCK = """
[stock.line]
kind = "rope"
diameter = "5 mm"
mass_per_metre = 0.1
[stock.beads]
kind = "beads"
pitch = 0.006
diameter = 0.0045
mass_per_metre = 0.045
[stock.chain]
kind = "chain"
wire = 0.003
pitch = 0.016
width = 0.011
"""

coordinates = st.floats(-3.0, 3.0).map(lambda value: round(value, 3))
points = st.tuples(coordinates, coordinates, st.floats(2.0, 3.0).map(lambda value: round(value, 3)))
rails = st.lists(points, min_size=2, max_size=4, unique_by=lambda point: point[:2])


def written(line: object) -> str:
    """A list of points as TOML."""
    assert isinstance(line, list | tuple)
    return "[" + ", ".join(f"[{', '.join(repr(float(value)) for value in point)}]" for point in line) + "]"


def row(keys: str, mark: str = "B") -> Result:
    return solved(f'unit = "m"\n{STOCK}[[swags]]\nmark = "{mark}"\n{keys}\n')


def apart(start: list[tuple[float, float, float]], far: float = 9.0) -> list[tuple[float, float, float]]:
    """The same rail moved aside by more than the rails are long, so that no two ends meet."""
    return [(x + far, y, z) for x, y, z in start]


def hangings(strands: tuple[Piece, ...], fact: list[str], stock: str) -> tuple[Piece, ...]:
    """The same strands, each written as a hanging of its own between the row's points."""
    text = "".join(
        f'[[hanging]]\nmark = "H{n}"\nfrom = {written([strand.pulls[0].at])[1:-1]}\n'
        f'to = {written([strand.pulls[1].at])[1:-1]}\nstock = "{stock}"\n{fact[n]}\n'
        for n, strand in enumerate(strands)
    )
    return solved(f'unit = "m"\n{STOCK}{text}').pieces


@settings(max_examples=25)
@given(rails, rails, st.integers(2, 7), st.floats(1.01, 2.0), st.sampled_from(["line", "beads", "chain"]))
def test_swags_are_the_hangings_they_lay_out(
    one: list[tuple[float, float, float]], other: list[tuple[float, float, float]], count: int, slack: float, stock: str
) -> None:
    keys = f'rail_from = {written(one)}\nrail_to = {written(apart(other))}\ncount = {count}\nstock = "{stock}"\n'
    (piece,) = row(keys + f"slack = {slack!r}").pieces
    alone = hangings(piece.parts, [f"slack = {slack!r}"] * count, stock)
    for strand, hanging in zip(piece.parts, alone, strict=True):
        for field in fields(strand.figures):
            mine, its = getattr(strand.figures, field.name), getattr(hanging.figures, field.name)
            if isinstance(mine, float):
                assert mine == pytest.approx(its, rel=1e-9, abs=1e-12, nan_ok=True), field.name
        assert strand.figures.links == hanging.figures.links
        assert strand.mass == pytest.approx(hanging.mass, rel=1e-12)
    assert piece.mass == pytest.approx(sum(hanging.mass for hanging in alone), rel=1e-12)


@given(rails, st.integers(2, 9), st.floats(1.05, 2.0))
def test_mirrored_rails_carry_mirrored_swags(one: list[tuple[float, float, float]], count: int, slack: float) -> None:
    ends = written(one), written(apart(one))
    there, back = (
        row(f'rail_from = {a}\nrail_to = {b}\ncount = {count}\nstock = "line"\nslack = {slack!r}').pieces[0].figures
        for a, b in (ends, ends[::-1])
    )
    assert back.lowest == pytest.approx(there.lowest, rel=1e-12)
    assert (back.sag_least, back.sag_greatest) == pytest.approx((there.sag_least, there.sag_greatest), rel=1e-9)
    np.testing.assert_allclose(back.pull_on_from, there.pull_on_to, rtol=1e-9, atol=1e-12)
    np.testing.assert_allclose(back.pull_on_to, there.pull_on_from, rtol=1e-9, atol=1e-12)


@given(rails, rails, st.integers(2, 9), st.floats(1.01, 3.0))
def test_both_rails_together_carry_the_weight_and_are_pulled_nowhere_else(
    one: list[tuple[float, float, float]], other: list[tuple[float, float, float]], count: int, slack: float
) -> None:
    keys = f'rail_from = {written(one)}\nrail_to = {written(apart(other))}\ncount = {count}\nstock = "line"\n'
    result = row(f"{keys}slack = {slack!r}")
    figures = result.pieces[0].figures
    weight = 0.1 * STANDARD_GRAVITY * figures.pin_to_pin
    largest = np.abs(figures.pull_on_from).max()
    np.testing.assert_allclose(figures.pull_on_from + figures.pull_on_to, [0, 0, -weight], atol=1e-11 * largest)
    np.testing.assert_allclose(sum(support.pull for support in result.supports), [0, 0, -weight], atol=1e-11 * largest)
    assert len(result.supports) == 2 * count


@given(st.integers(3, 40), st.floats(0.2, 5.0), st.floats(1.05, 2.5))
def test_a_rings_points_are_evenly_pulled_inwards_and_down(count: int, diameter: float, slack: float) -> None:
    keys = f"ring = {{ centre = [1, 2, 3], diameter = {diameter!r}, points = {count} }}"
    result = row(f'{keys}\nstock = "line"\nslack = {slack!r}')
    (piece,) = result.pieces
    chord = diameter * math.sin(math.pi / count)
    assert [strand.figures.span for strand in piece.parts] == pytest.approx([chord] * count, rel=1e-9)
    assert [support.mark for support in result.supports] == [f"B.{n + 1}.from" for n in range(count)]
    weight = 0.1 * STANDARD_GRAVITY * piece.figures.pin_to_pin
    level = 2 * piece.parts[0].figures.pull_horizontal * math.sin(math.pi / count)
    for number, support in enumerate(result.supports):
        angle = 2 * math.pi * number / count
        way = np.array([math.cos(angle), math.sin(angle), 0.0])
        np.testing.assert_allclose(support.at, [1, 2, 3] + diameter / 2 * way, atol=1e-12)
        np.testing.assert_allclose(support.pull, -level * way - [0, 0, weight / count], rtol=1e-7, atol=1e-9 * weight)
    np.testing.assert_allclose(piece.figures.pull_on_from, [0, 0, -weight], rtol=1e-9)
    assert piece.figures.pull_on_to is None


@given(rails, st.integers(2, 60))
def test_points_stand_evenly_along_a_rail_with_both_its_ends(one: list[tuple[float, float, float]], count: int) -> None:
    line = rail(one)
    places = line.at(even(line.length, count))
    np.testing.assert_array_equal(places[[0, -1]], line.corners[[0, -1]])
    # walked along the corners, the same length lies between each two
    walked = [np.linalg.norm(np.diff(_between(line.corners, a, b), axis=0), axis=1).sum() for a, b in _pairs(places)]
    assert walked == pytest.approx([line.length / (count - 1)] * (count - 1), rel=1e-7)


def _pairs(places: Floats) -> list[tuple[Floats, Floats]]:
    return list(pairwise(places))


def _between(corners: Floats, start: Floats, end: Floats) -> Floats:
    """The points from start to end along the corners: each is found by the side that it is on."""
    sides = [_side(corners, start, last=False), _side(corners, end, last=True)]
    return np.vstack([start, corners[sides[0] + 1 : sides[1] + 1], end])


def _side(corners: Floats, place: Floats, *, last: bool) -> int:
    off = [
        abs(np.linalg.norm(place - a) + np.linalg.norm(place - b) - np.linalg.norm(b - a)) for a, b in _pairs(corners)
    ]
    on = np.flatnonzero(np.array(off) < 1e-9)
    return int(on[0] if last else on[-1])


def test_a_rail_with_a_corner_is_measured_round_it() -> None:
    """3 m along x and 4 m along y: the fourth of eight points, a metre apart, is the corner."""
    line = rail([(0, 0, 2), (3, 0, 2), (3, 0, 2), (3, 4, 2)])
    assert line.length == 7.0
    np.testing.assert_allclose(line.at(even(7.0, 8))[[2, 3, 4]], [[2, 0, 2], [3, 0, 2], [3, 1, 2]], rtol=0, atol=1e-15)


def test_a_sloping_rail_is_shorter_on_plan() -> None:
    """A 3-4-5 triangle: 5 m of rail over 4 m of plan."""
    line = rail([(0, 0, 0), (0, 4, 3)])
    assert line.length == 5.0
    np.testing.assert_allclose(line.developed(np.array([0, 2.5, 5.0])), [0, 2, 4])


@given(st.floats(0.001, 1.0), st.integers(2, 2000))
def test_a_spacing_that_fills_a_rail_has_its_last_strand_at_the_end(spacing: float, count: int) -> None:
    length = spacing * (count - 1)
    distances = spaced(length, spacing)
    assert len(distances) == count
    assert distances[-1] <= length
    assert distances[-1] == pytest.approx(length, rel=1e-12)


def test_the_quarter_points_of_a_ring_are_on_its_axes() -> None:
    places = ring((1.0, 2.0, 3.0), 2.0, 4)
    np.testing.assert_array_equal(places, [[2, 2, 3], [1, 3, 3], [0, 2, 3], [1, 1, 3]])


def test_even_steps_run_from_the_first_value_to_the_last() -> None:
    head = "rail_from = [[0, 0, 3], [0, 1, 3]]\nrail_to = [[2, 0, 3], [2, 1, 3]]\ncount = 5\n"
    (piece,) = row(f'{head}stock = "line"\nsag = {{ first = 0.3, last = 0.7 }}').pieces
    assert [strand.figures.sag for strand in piece.parts] == pytest.approx([0.3, 0.4, 0.5, 0.6, 0.7], rel=1e-9)
    (piece,) = row(f'{head}stock = "beads"\nparity = "odd"\nlinks = {{ first = 401, last = 411 }}').pieces
    # steps of 2.5: 403.5, 406 and 408.5 come to the nearest odd counts, half way to the longer
    assert [strand.figures.links.count for strand in piece.parts] == [401, 403, 407, 409, 411]


def test_one_value_is_the_rows_own_intention_and_the_worst_strand_its_difference() -> None:
    head = "rail_from = [[0, 0, 3], [0, 1, 3]]\nrail_to = [[2, 0, 3], [2, 1, 2.8]]\ncount = 5\n"
    (piece,) = row(f'{head}stock = "chain"\nsag = 0.4').pieces
    assert piece.intended is not None
    assert (piece.intended.key, piece.intended.value) == ("sag_m", 0.4)
    off = [abs(strand.figures.sag - 0.4) for strand in piece.parts]
    assert piece.difference is not None
    assert abs(piece.difference.value or 0.0) == pytest.approx(max(off), rel=1e-9)


def test_zones_give_each_strand_its_stock() -> None:
    head = "rail_from = [[0, 0, 3], [0, 1, 3]]\nrail_to = [[2, 0, 3], [2, 1, 3]]\ncount = 5\nsag = 0.4\n"
    result = row(f'{head}stock = [{{ of = "line", count = 2 }}, {{ of = "beads", count = 3 }}]')
    assert [cut.stock for cut in result.cuts] == ["line", "line", "beads", "beads", "beads"]
    assert [cut.links is None for cut in result.cuts] == [True, True, False, False, False]
    (piece,) = result.pieces
    table = next(table for table in piece.tables if table.name == "strands by stock")
    columns = {column.key: column.values for column in table.columns}
    assert list(columns["stock"]) == ["line", "beads"]
    assert list(columns["strands"]) == [2, 3]
    assert sum(np.asarray(columns["mass"], dtype=np.float64)) == pytest.approx(piece.mass, rel=1e-12)


def test_the_table_of_strands_has_their_ends_links_and_lowest_points() -> None:
    (piece,) = row(
        "rail_from = [[0, 0, 3], [0, 1, 3]]\nrail_to = [[2, 0, 3], [2, 1, 2.8]]\n"
        'count = 5\nstock = "chain"\nsag = [0.3, 0.35, 0.4, 0.45, 0.5]'
    ).pieces
    columns = {column.key: column.values for column in piece.tables[0].columns}
    assert list(columns["mark"]) == [f"B.{n}" for n in range(1, 6)]
    for number, strand in enumerate(piece.parts):
        ends = [[columns[f"{end}_{axis}"][number] for axis in "xyz"] for end in ("from", "to")]
        np.testing.assert_array_equal(ends, [pull.at for pull in strand.pulls])
        assert columns["links"][number] == strand.figures.links.count
        assert columns["lowest"][number] == strand.figures.lowest


def test_alike_strands_are_drawn_once_and_said_to_be() -> None:
    keys = 'ring = { centre = [0, 0, 3], diameter = 1.2, points = 12 }\nstock = "chain"\nsag = 0.14'
    (piece,) = row(keys).pieces
    assert len(kinds(piece.parts)) == 1
    (view,) = piece.views
    assert view.lines is not None
    assert sum(line.role == "axis" for line in view.lines) == 1
    assert "ring of 12 swags alike, one drawn," in piece.what
    assert any(fact.name.startswith("x ") and fact.value == 12 for fact in piece.facts)


def test_a_row_seen_along_its_rail_shows_every_strand_to_its_lowest_point() -> None:
    sags = [0.3, 0.5, 0.4, 0.7, 0.2]
    head = "rail_from = [[0, 0, 3], [3, 0, 3], [3, 2, 3]]\nrail_to = [[0, 5, 3], [9, 5, 3]]\ncount = 5\n"
    (piece,) = row(f'{head}stock = "line"\nsag = {sags}').pieces
    lines = [line for line in piece.views[1].lines or () if line.role == "axis"]
    np.testing.assert_allclose([line.curve.start[0] for line in lines], [0, 1.25, 2.5, 3.75, 5.0])
    np.testing.assert_allclose([line.curve.end[2] for line in lines], [strand.figures.lowest for strand in piece.parts])
    np.testing.assert_allclose([line.curve.length for line in lines], sags, rtol=1e-9)


@given(st.integers(2, 100_000), st.integers(2, 40))
def test_so_many_strands_are_marked_at_most_with_the_first_and_the_last(count: int, most: int) -> None:
    marked = named(count, most)
    assert (marked[0], marked[-1]) == (0, count - 1)
    assert len(marked) <= most + 1
    assert sorted(set(marked)) == marked
    step = every(count, most)
    assert step in {digit * 10**power for digit in (1, 2, 5) for power in range(6)}


def test_marks_that_follow_one_another_are_said_together() -> None:
    assert ranges("B", [0, 1, 2, 6, 8, 9]) == "B.1 to 3, B.7, B.9 to 10"


def test_a_design_of_over_a_million_links_is_told_apart_from_one_just_under(monkeypatch: pytest.MonkeyPatch) -> None:
    import geom.kinds.swags as kind
    from geom.design.reader import read
    from geom.solve import solve

    keys = 'ring = { centre = [0, 0, 3], diameter = 1.2, points = 4 }\nstock = "chain"\nlinks = 60'
    text = f'unit = "m"\n{STOCK}[[swags]]\nmark = "B"\n{keys}\ncopies = 3\n'
    for most, problems in ((720, 0), (719, 1)):
        monkeypatch.setattr(kind, "MOST_LINKS", most)
        design = read(text, "design").design
        assert design is not None
        assert len(solve(design).problems) == problems
