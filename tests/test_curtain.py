"""Laws of curtains: no strand below its hem, whole links, the rail carries the mass (Hypothesis and plain geometry)."""

from __future__ import annotations

import itertools
import json
import math
from fractions import Fraction
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from click.testing import CliRunner
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray

from export.cli import cli
from export.picture.views import bodies
from geom.hang.hem import Hem
from geom.result import Piece, Result
from geom.solids import Balls, Bars, Links
from geom.units import STANDARD_GRAVITY
from tests.designs import solved

Floats = NDArray[np.float64]

STOCK = """
[fitting.cup]
takes = 0.008
mass = "3 g"
[fitting.bob]
takes = 0.05
mass = "0.2 kg"
[fitting.eye]
takes = 0.03
grip = 0.09
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
RAIL = "rail = [[0, 0, 2.7], [2, 0, 2.7]]\n"

elevations = st.floats(0.1, 2.4).map(lambda value: round(value, 4))
hems = st.lists(elevations, min_size=2, max_size=6)
shapes = st.sampled_from(["straight", "smooth", "catenary"])
stocks = st.sampled_from(["beads", "chain", "line"])


def curtain(keys: str, *, rail: str = RAIL, mark: str = "C") -> Result:
    return solved(f'unit = "m"\n{STOCK}[[curtain]]\nmark = "{mark}"\n{rail}{keys}\n')


def hem_keys(elevation: list[float], shape: str, length: float = 2.0) -> str:
    distance = np.linspace(0.0, length, len(elevation)).tolist()
    scallop = "scallop = 0.05\n" if shape == "catenary" else ""
    points = ", ".join(f"[{s!r}, {z!r}]" for s, z in zip(distance, elevation, strict=True))
    return f'hem = [{points}]\nhem_shape = "{shape}"\n{scallop}'


def strands(result: Result) -> tuple[Piece, ...]:
    return result.pieces[0].parts


@given(hems, shapes, stocks, st.integers(2, 40), st.sampled_from(["any", "odd", "even"]))
def test_no_strand_rounded_down_hangs_below_its_hem_and_none_is_a_step_short(
    elevation: list[float], shape: str, stock: str, count: int, parity: str
) -> None:
    keys = f'{hem_keys(elevation, shape)}strands = {count}\nstock = "{stock}"\nparity = "{parity}"\n'
    step = {"beads": 0.006, "chain": 0.016, "line": 0.001}[stock] * (1 if parity == "any" or stock == "line" else 2)
    for strand in strands(curtain(keys)):
        assert -1e-8 <= strand.figures.over_hem < step + 1e-8
        assert strand.figures.lowest == pytest.approx(strand.figures.hem + strand.figures.over_hem, abs=1e-12)
        if strand.figures.links is not None and parity != "any":
            assert strand.figures.links.count % 2 == (1 if parity == "odd" else 0)


@given(hems, stocks, st.integers(2, 40))
def test_strands_rounded_up_reach_their_hem_and_nearest_ones_are_half_a_step_off_at_most(
    elevation: list[float], stock: str, count: int
) -> None:
    keys = f'{hem_keys(elevation, "straight")}strands = {count}\nstock = "{stock}"\n'
    step = {"beads": 0.006, "chain": 0.016, "line": 0.001}[stock]
    for strand in strands(curtain(f'{keys}round = "up"\n')):
        assert -step - 1e-8 < strand.figures.over_hem <= 1e-8
    for strand in strands(curtain(f'{keys}round = "nearest"\n')):
        assert abs(strand.figures.over_hem) <= step / 2 + 1e-8


@given(hems, shapes, stocks, st.integers(2, 40), st.sampled_from(["", "cup"]), st.sampled_from(["", "bob"]))
def test_the_rail_carries_the_mass_of_all_strands_and_their_fittings(
    elevation: list[float], shape: str, stock: str, count: int, above: str, below: str
) -> None:
    ends = [f'{end} = "{name}"' for end, name in (("from", above), ("to", below)) if name]
    keys = f'{hem_keys(elevation, shape)}strands = {count}\nstock = "{stock}"\nfittings = {{ {", ".join(ends)} }}\n'
    result = curtain(keys)
    (piece,) = result.pieces
    hardware = count * ((0.003 if above else 0.0) + (0.2 if below else 0.0))
    # a strand weighs as its stock over its whole length, fittings included
    weighed = sum(strand.figures.pin_to_pin for strand in piece.parts) * _per_metre(stock)
    assert piece.figures.mass_on_rail == pytest.approx(weighed + hardware, rel=1e-12)
    if not ends:
        assert piece.figures.mass_on_rail == pytest.approx(piece.mass, rel=1e-12)
    total = sum(support.pull for support in result.supports)
    np.testing.assert_allclose(total, [0, 0, -STANDARD_GRAVITY * piece.figures.mass_on_rail], rtol=1e-12)
    assert piece.figures.rail_load == pytest.approx(piece.figures.mass_on_rail / 2.0, rel=1e-12)
    for strand in piece.parts:
        assert strand.figures.pull_from - strand.figures.pull_to == pytest.approx(
            STANDARD_GRAVITY * _per_metre(stock) * strand.figures.pin_to_pin, rel=1e-12
        )


def _per_metre(stock: str) -> float:
    if stock != "chain":
        return {"beads": 0.045, "line": 0.1}[stock]
    # wire of 3 mm in links of pitch 16 and width 11: two half circles and two straights, steel at 7850 kg/m3
    wire = math.pi * (0.011 - 0.003) + 2 * (0.016 + 2 * 0.003 - 0.011)
    return 7850 * math.pi / 4 * 0.003**2 * wire / 0.016


def test_the_figures_of_one_strand_are_what_plain_arithmetic_gives() -> None:
    """Rail 2.7, hem 0.9: 1.8 less a cup of 8 mm is 298.67 beads of 6 mm; 298 end 4 mm over the hem."""
    keys = 'hem = [[0, 0.9], [2, 0.9]]\nstrands = 3\nstock = "beads"\nfittings = { from = "cup", to = 0 }\n'
    strand = strands(curtain(keys))[1]
    figures = strand.figures
    assert strand.mark == "C.2"
    assert figures.links.count == 298
    assert figures.pin_to_pin == pytest.approx(298 * 0.006 + 0.008, rel=1e-12)
    assert figures.over_hem == pytest.approx(0.004, abs=1e-12)
    assert figures.lowest == pytest.approx(0.904, abs=1e-12)
    assert figures.along_rail == 1.0
    assert (figures.span, figures.pull_horizontal, figures.pull_to) == (0.0, 0.0, 0.0)
    assert math.isnan(figures.sag)
    assert figures.links.overall == pytest.approx(298 * 0.006, rel=1e-12)
    assert [row.count for row in figures.links.neighbours] == [296, 297, 299, 300]
    assert figures.links.neighbours[2].lowest_z == pytest.approx(0.898, abs=1e-12)
    assert strand.difference is not None
    assert strand.difference.key == "lowest_m"
    assert strand.difference.value == pytest.approx(0.004, abs=1e-12)
    (case,) = strand.cases or ()
    assert (case.case, case.standing, case.lowest) == ("as hung", "dead load only", figures.lowest)


def test_rope_is_cut_to_the_shops_step_with_fittings_off_and_grips_on() -> None:
    """1.2345 m from rail to hem, an eye that takes 30 mm and uses up 90: 1.2945 m, cut in steps of 5 mm to 1.290."""
    shop = "[shop]\nstep = 0.005\n"
    text = (
        f'unit = "m"\n{shop}{STOCK}[[curtain]]\nmark = "C"\n{RAIL}hem = [[0, 1.4655], [2, 1.4655]]\nstrands = 2\n'
        'stock = "line"\nfittings = { from = "eye" }\n'
    )
    (cut, _) = solved(text).cuts
    assert cut.cut_length == 1.290
    assert cut.pin_to_pin == pytest.approx(1.290 - 0.09 + 0.03, rel=1e-12)
    assert strands(solved(text))[0].figures.over_hem == pytest.approx(0.0045, abs=1e-12)


def test_spacing_counts_from_the_rails_start() -> None:
    piece = curtain('hem = [[0, 1], [2, 1]]\nspacing = 0.3\nstock = "beads"\n').pieces[0]
    assert [strand.figures.along_rail for strand in piece.parts] == pytest.approx([0.3 * n for n in range(7)])
    assert piece.figures.spacing == pytest.approx(0.3, rel=1e-12)
    strand = max(piece.parts, key=lambda part: part.figures.pull_from)
    assert piece.figures.greatest_rail_load == pytest.approx(strand.mass / 0.3, rel=1e-12)


@given(hems, st.integers(3, 30))
def test_a_smooth_hem_goes_through_its_points_and_never_past_its_neighbours(elevation: list[float], count: int) -> None:
    s = np.linspace(0.0, 2.0, len(elevation))
    hem = Hem(np.stack([s, elevation], axis=1), "smooth")
    np.testing.assert_allclose(hem.at(s), elevation, rtol=0, atol=1e-12)
    for (a, low), (b, high) in itertools.pairwise(zip(s, elevation, strict=True)):
        between = hem.at(np.linspace(a, b, count))
        assert between.min() >= min(low, high) - 1e-12
        assert between.max() <= max(low, high) + 1e-12


@given(hems, st.floats(0.001, 1.0))
def test_a_scalloped_hem_is_as_deep_under_each_chord_as_asked(elevation: list[float], scallop: float) -> None:
    s = np.linspace(0.0, 2.0, len(elevation))
    hem = Hem(np.stack([s, elevation], axis=1), "catenary", scallop)
    np.testing.assert_allclose(hem.at(s), elevation, rtol=0, atol=1e-9)
    for (a, low), (b, high) in itertools.pairwise(zip(s, elevation, strict=True)):
        x = np.linspace(a, b, 4001)
        under = low + (high - low) * (x - a) / (b - a) - hem.at(x)
        # the greatest of 4001 places is off by at most 1/8 of the steepest bend over one of them
        assert under.max() == pytest.approx(scallop, rel=1e-4, abs=1e-6)


def test_a_straight_hem_is_straight_between_its_points_and_level_past_its_ends() -> None:
    hem = Hem(np.array([[0.0, 1.0], [1.0, 2.0], [3.0, 0.0]]))
    np.testing.assert_allclose(hem.at(np.array([-1.0, 0.5, 2.0, 2.5, 9.0])), [1.0, 1.5, 1.0, 0.5, 0.0])


@given(hems, shapes, st.floats(1e-4, 1e-2))
def test_the_drawn_hem_is_within_what_is_asked_of_the_true_one(
    elevation: list[float], shape: str, within: float
) -> None:
    s = np.linspace(0.0, 2.0, len(elevation))
    hem = Hem(np.stack([s, elevation], axis=1), shape, 0.3 if shape == "catenary" else 0.0)  # type: ignore[arg-type]
    line = hem.line(np.array([0.0, 0.7, 2.0]), within)
    assert {0.0, 0.7, 2.0} <= set(line.tolist())
    fine = np.linspace(0.0, 2.0, 20_001)
    off = np.abs(np.interp(fine, line, hem.at(line)) - hem.at(fine))
    assert off.max() <= 1.6 * within  # the middle of a step is not quite where it is furthest off


def test_a_rail_round_a_corner_is_developed_in_the_elevation() -> None:
    """3 m and 4 m, three strands: the second hangs round the corner, half a metre along y, drawn at 3.5 m."""
    rail = "rail = [[0, 0, 2.7], [3, 0, 2.7], [3, 4, 2.7]]\n"
    piece = curtain(
        'hem = [[0, 1], [3, 1.5], [7, 1]]\nstrands = 3\nstock = "line"\nround = "nearest"\n', rail=rail
    ).pieces[0]
    assert [pull.at.tolist() for pull in piece.pulls] == [[0, 0, 2.7], [3, 0.5, 2.7], [3, 4, 2.7]]
    lines = [line.curve for line in piece.views[0].lines or () if line.role == "axis"]
    np.testing.assert_allclose([curve.start for curve in lines], [[0, 0, 2.7], [3.5, 0, 2.7], [7, 0, 2.7]], atol=1e-12)
    np.testing.assert_allclose([curve.end[2] for curve in lines], [1, 1.4375, 1], atol=6e-4)
    assert piece.figures.rail_length == 7.0


def test_a_sloping_rail_is_drawn_with_its_true_slope() -> None:
    rail = "rail = [[0, 0, 2], [4, 0, 5]]\n"
    piece = curtain('hem = [[0, 1], [5, 2]]\nstrands = 2\nstock = "line"\n', rail=rail).pieces[0]
    edge = next(line.curve for line in piece.views[0].lines or () if line.role == "edge")
    np.testing.assert_allclose([edge.start, edge.end], [[0, 0, 2], [4, 0, 5]])
    assert piece.figures.rail_length == 5.0
    assert [strand.figures.pin_to_pin for strand in piece.parts] == pytest.approx([1.0, 3.0], abs=1e-9)


def test_all_curtains_of_a_design_are_solved_as_each_is_alone() -> None:
    one = hem_keys([0.5, 1.1, 0.7], "smooth") + 'strands = 7\nstock = "chain"\nparity = "odd"\nround = "nearest"\n'
    two = hem_keys([1.2, 1.3], "straight") + 'spacing = 0.17\nstock = "line"\nfittings = { to = "bob" }\n'
    both = solved(f'unit = "m"\n{STOCK}[[curtain]]\nmark = "C"\n{RAIL}{one}[[curtain]]\nmark = "D"\n{RAIL}{two}')
    for piece, keys in zip(both.pieces, (one, two), strict=True):
        alone = curtain(keys, mark=piece.mark).pieces[0]
        assert [strand.figures.lowest for strand in piece.parts] == [strand.figures.lowest for strand in alone.parts]
        assert piece.figures == alone.figures


def test_links_hang_in_a_row_under_their_places_a_quarter_turn_from_one_another() -> None:
    rail = "rail = [[0, 0, 2.7], [0, 1, 2.7]]\n"
    piece = curtain('hem = [[0, 2.6], [1, 2.5]]\nstrands = 2\nstock = "chain"\n', rail=rail).pieces[0]
    chains = [body for body in bodies(piece.solids) if isinstance(body, Links)]
    assert [len(chain.places) for chain in chains] == [6, 12]
    for chain, y in zip(chains, (0.0, 1.0), strict=True):
        np.testing.assert_allclose(chain.places[:, :2], [[0.0, y]] * len(chain.places), atol=1e-15)
        np.testing.assert_allclose(chain.places[:, 2], 2.7 - 0.016 * (np.arange(len(chain.places)) + 0.5), atol=1e-12)
        np.testing.assert_allclose(np.linalg.det(chain.turns), 1.0, atol=1e-12)
        np.testing.assert_allclose(chain.turns[:, :, 0], [[0, 0, -1]] * len(chain.places), atol=1e-15)
        square = np.abs(np.einsum("ni,ni->n", chain.turns[1:, :, 1], chain.turns[:-1, :, 1]))
        np.testing.assert_allclose(square, 0.0, atol=1e-15)
        np.testing.assert_allclose(np.abs(chain.turns[0, :, 1]), [0, 1, 0], atol=1e-15)  # along the rail
    assert piece.solids[0].volume == pytest.approx(18 * chains[0].link.volume, rel=1e-12)


def test_few_beads_are_balls_and_many_are_tubes_of_their_size() -> None:
    few = curtain('hem = [[0, 2.4], [2, 2.4]]\nstrands = 5\nstock = "beads"\n').pieces[0]
    (balls,) = bodies(few.solids)
    assert isinstance(balls, Balls)
    assert len(balls.places) == few.figures.links_count == 250
    assert balls.places[:, 2].min() - balls.radius >= 2.4 - 1e-9
    many = curtain('hem = [[0, 1], [2, 1]]\nstrands = 50\nstock = "beads"\n').pieces[0]
    (tubes,) = bodies(many.solids)
    assert isinstance(tubes, Bars)
    assert tubes.length == pytest.approx(many.figures.pin_to_pin, rel=1e-12)


def test_chain_may_pass_its_hem_by_its_wire_and_says_so() -> None:
    keys = 'hem = [[0, 1], [2, 1]]\nstrands = 4\nstock = "chain"\n'
    said = [caution for caution in curtain(keys).cautions if caution.code == "end link"]
    assert len(said) == 1
    assert "0.003 m lower" in said[0].text
    assert not [c for c in curtain(f'{keys}fittings = {{ to = "bob" }}\n').cautions if c.code == "end link"]


def test_zones_give_each_strand_its_stock() -> None:
    keys = 'hem = [[0, 1], [2, 1]]\nstrands = 5\nstock = [{ of = "line", count = 2 }, { of = "beads", count = 3 }]\n'
    result = curtain(keys)
    assert [cut.stock for cut in result.cuts] == ["line"] * 2 + ["beads"] * 3
    (piece,) = result.pieces
    assert piece.figures.links_count == 3 * 283  # 1.7 m of 6 mm
    assert piece.mass == pytest.approx(2 * 1.7 * 0.1 + 3 * 283 * 0.006 * 0.045, rel=1e-9)
    assert {type(body) for body in bodies(piece.solids)} == {Bars, Balls}


def test_a_hem_a_millimetre_short_of_a_rail_of_odd_length_goes_on_level() -> None:
    rail = f"rail = [[0, 0, 2.7], [{math.sqrt(2)!r}, 0, 2.7]]\n"
    piece = curtain('hem = [[0, 1], [1.414, 1]]\nstrands = 2\nstock = "line"\n', rail=rail).pieces[0]
    assert [strand.figures.hem for strand in piece.parts] == [1.0, 1.0]


def test_strands_are_written_with_the_same_figures_as_hangings(tmp_path: Path) -> None:
    """The figures file has the same keys for a strand of a curtain, a strand of swags and a hanging."""
    text = f"""
unit = "m"
{STOCK}
[[hanging]]
mark = "H"
from = [0, 0, 3]
to = [1, 0, 3]
stock = "chain"
sag = 0.3
[[swags]]
mark = "B"
rail_from = [[0, 0, 3], [0, 1, 3]]
rail_to = [[2, 0, 3], [2, 1, 3]]
count = 3
stock = "chain"
sag = 0.4
[[curtain]]
mark = "C"
{RAIL}hem = [[0, 1], [2, 1]]
strands = 4
stock = "chain"
"""
    path = tmp_path / "all.toml"
    path.write_text(text)
    done = CliRunner().invoke(cli, ["export", str(path), "--into", str(tmp_path / "out"), "--only", "cuts", "--quiet"])
    assert done.exit_code == 0, done.output
    document = json.loads((tmp_path / "out" / "all" / "all-figures.json").read_text())
    hanging, swags, hung = document["pieces"]
    keys = set(hanging) - {"mark", "kind"}
    assert keys <= set(swags["strands"][0])
    assert keys <= set(hung["strands"][0])
    strand = hung["strands"][3]
    assert strand["sag_m"] is None
    assert (strand["span_m"], strand["pull_horizontal_N"]) == (0, 0)
    assert strand["cases"][0]["sag_m"] is None
    assert hung["rail_load_kg_per_m"] > 0
    assert {cut["mark"] for cut in document["cuts"]} >= {"B.3", "C.4"}
    assert {support["mark"] for support in document["supports"]} >= {"B.3.from", "B.3.to", "C.4.from"}


@pytest.mark.parametrize("count", [2, 7, 81])
def test_strands_stand_at_exact_shares_of_the_rail(count: int) -> None:
    piece = curtain(f'hem = [[0, 1], [2, 1]]\nstrands = {count}\nstock = "line"\n').pieces[0]
    shares: list[Any] = [Fraction(2 * n, count - 1) for n in range(count)]
    assert [strand.figures.along_rail for strand in piece.parts] == pytest.approx([float(s) for s in shares], abs=1e-15)
