"""A run over saddles from its design: one member, one cut, pulls alike on both sides of every smooth saddle."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.result import Piece, Result
from geom.solids import Links
from geom.units import STANDARD_GRAVITY
from tests.designs import solved

ROPE = """\
title = "Saddles"
unit  = "mm"
[site]
temperature  = [-10, 20, 45]
support_give = "20 mm"
[stock.wire]
kind = "rope"
diameter = "6 mm"
mass_per_metre = "0.14 kg/m"
modulus = "60 GPa"
area = "15 mm2"
expansion = 16e-6
"""
CHAIN = ROPE.replace('wire]\nkind = "rope"\ndiameter', 'wire]\nkind = "chain"\npitch = 18.5\nwidth = 20.4\nwire')
SUPPORTS = "[[0, 0, 3000], [4000, 0, 3400], [7000, 500, 3200], [12000, 500, 3300]]"


def piece(fact: str, head: str = ROPE, supports: str = SUPPORTS, over: str = "saddle", more: str = "") -> Piece:
    return result(fact, head, supports, over, more).pieces[0]


def result(fact: str, head: str = ROPE, supports: str = SUPPORTS, over: str = "saddle", more: str = "") -> Result:
    text = f'{head}[[run]]\nmark = "R"\nsupports = {supports}\nover = "{over}"\nstock = "wire"\n{fact}\n{more}\n'
    return solved(text)


def legs(made: Piece, case: str) -> Any:  # noqa: ANN401 - arrays of floats
    """Whole pulls on each bay's `from` and `to` support in a case, (n, 2) N."""
    found = [next(one for one in bay.cases or () if one.case == case) for bay in made.parts]
    return np.array([[one.pull_from, one.pull_to] for one in found])


@settings(max_examples=8, deadline=None)
@given(st.integers(2000, 9000), st.integers(-1000, 1000), st.floats(1.5, 20.0))
def test_one_bay_with_a_counterweight_is_a_hanging_that_pulls_with_its_weight(
    span: int, rise: int, pulls: float
) -> None:
    supports = f"[[0, 0, 3000], [{span}, 0, {3000 + rise}]]"
    weight = 0.14 * float(np.hypot(span, rise)) / 1000 * pulls  # in weights of the chord: over 0.76 and any rise
    sliding = piece(f'counterweight = "{weight!r} kg"', supports=supports)
    tied = piece(f"length = {1000 * sliding.figures.pin_to_pin!r}", supports=supports, over="fixed").parts[0]
    assert tied.figures.pull_to == pytest.approx(weight * STANDARD_GRAVITY, rel=1e-6)
    for name in ("sag", "lowest", "pull_horizontal", "pull_from", "hung_length"):
        assert getattr(sliding.parts[0].figures, name) == pytest.approx(getattr(tied.figures, name), rel=1e-6), name


def test_between_two_supports_there_is_no_saddle_and_a_run_is_a_hanging() -> None:
    supports = "[[0, 0, 3000], [4000, 0, 3200]]"
    sliding, tied = (piece("slack = 1.4", supports=supports, over=over) for over in ("saddle", "fixed"))
    assert sliding.parts[0].figures.sag == tied.parts[0].figures.sag


@settings(max_examples=12, deadline=None)
@given(st.floats(1.001, 1.03))
def test_in_every_case_the_pulls_on_both_sides_of_a_saddle_are_alike(slack: float) -> None:
    made = piece(f"slack = {slack!r}")
    for case in ("coldest", "as hung", "hottest", "supports give"):
        pulls = legs(made, case)
        assert pulls[:-1, 1] == pytest.approx(pulls[1:, 0], rel=1e-9)


def test_without_stretch_pulls_differ_by_the_weight_of_the_rise() -> None:
    made = piece("slack = 1.01", head=ROPE.replace('modulus = "60 GPa"\n', ""))
    pulls = legs(made, "as hung")
    heights = np.array([3.0, 3.4, 3.2, 3.3])
    weight = 0.14 * STANDARD_GRAVITY
    assert np.r_[pulls[:, 0], pulls[-1, 1]] - pulls[0, 0] == pytest.approx(weight * (heights - 3.0), abs=1e-8)


def test_whatever_the_case_the_whole_length_is_the_same_member() -> None:
    """Warmed, every bay takes what the pull asks of it: together they grow as the member does."""
    made = piece("slack = 1.01")
    marks = made.figures.tie_marks
    assert marks[-1] == pytest.approx(made.figures.pin_to_pin, rel=1e-12)
    assert made.figures.pin_to_pin == pytest.approx(1.01 * _chords(), rel=1e-12)
    tied = piece(f"length = {[1000 * float(step) for step in np.diff(marks)]}", over="fixed")
    assert legs(tied, "as hung") == pytest.approx(legs(made, "as hung"), rel=1e-8)
    tied_hot = legs(tied, "hottest")
    assert np.abs(tied_hot[:-1, 1] / tied_hot[1:, 0] - 1.0).max() > 1e-4  # tied, each grows by itself


def _chords() -> float:
    points = np.array([[0, 0, 3.0], [4, 0, 3.4], [7, 0.5, 3.2], [12, 0.5, 3.3]])
    return float(np.linalg.norm(np.diff(points, axis=0), axis=1).sum())


@pytest.mark.parametrize("head", [ROPE, CHAIN], ids=["rope", "chain"])
def test_supports_carry_the_weight_of_the_member_and_what_hangs_behind_it(head: str) -> None:
    for fact, behind in (("slack = 1.02", 0.0), ('counterweight = "6 kg"', 6.0)):
        found = result(fact, head)
        down = -sum(float(support.pull[2]) for support in found.supports)
        weight = 0.14 * found.pieces[0].figures.pin_to_pin + behind
        assert down == pytest.approx(STANDARD_GRAVITY * weight, rel=1e-9)
        for axis in (0, 1):
            assert sum(float(support.pull[axis]) for support in found.supports) == pytest.approx(0.0, abs=1e-9 * down)
        assert found.pieces[0].figures.counterweight == (behind or None)


def test_a_counterweight_pulls_with_its_own_weight_in_every_case() -> None:
    made = piece('counterweight = "6 kg"')
    for case in ("coldest", "as hung", "hottest", "supports give"):
        assert legs(made, case)[-1, 1] == pytest.approx(6.0 * STANDARD_GRAVITY, rel=1e-9)
    again = piece(f"length = {1000 * made.figures.pin_to_pin!r}")
    assert again.figures.pull_to == pytest.approx(6.0 * STANDARD_GRAVITY, rel=1e-6)


@pytest.mark.parametrize(
    ("fact", "figure", "value"),
    [
        ("sag = 300", "sag", 0.3), ("lowest = 2900", "lowest", 2.9), ('pull = "12 N"', "pull_horizontal", 12.0),
        ("length = 12300", "pin_to_pin", 12.3), ("slack = 1.01", "slack", 1.01),
    ],
)  # fmt: skip
def test_what_a_fact_asks_for_is_had(fact: str, figure: str, value: float) -> None:
    made = piece(fact)
    assert getattr(made.figures, figure) == pytest.approx(value, rel=1e-9)
    assert made.figures.sag == pytest.approx(max(bay.figures.sag for bay in made.parts), rel=1e-9)
    assert made.figures.lowest == pytest.approx(min(bay.figures.lowest for bay in made.parts), rel=1e-12)


def test_a_chain_over_saddles_has_whole_links_in_all_and_one_cut() -> None:
    made = piece("sag = 300", head=CHAIN, more='fittings = { from = 40, to = 25 }\nparity = "odd"')
    (cut,) = made.cuts
    assert cut.links is not None
    assert cut.links == made.figures.links.count
    assert cut.links % 2 == 1
    assert made.figures.pin_to_pin == pytest.approx(cut.links * 0.0185 + 0.065, rel=1e-12)
    assert cut.cut_length == pytest.approx(cut.links * 0.0185, rel=1e-12)
    assert made.difference is not None
    assert made.difference.value == pytest.approx(made.figures.sag - 0.3, abs=1e-12)
    fewer, more = (next(n for n in made.figures.links.neighbours if n.count == cut.links + step) for step in (-1, 1))
    assert fewer.sag < made.figures.sag < more.sag
    (solid,) = made.solids
    assert isinstance(solid.body, Links)
    assert len(solid.body.places) == cut.links


def test_a_rope_over_saddles_is_cut_as_one_with_its_grips() -> None:
    made = piece(
        "length = 12300",
        more="fittings = { from = 40 }",
    )
    (cut,) = made.cuts
    assert (cut.mark, cut.piece) == ("R", "R")
    assert cut.cut_length == pytest.approx(12.26, abs=1e-12)


@pytest.mark.parametrize("fact", ["slack = 1.01", 'counterweight = "6 kg"'])
def test_friction_widens_the_end_pulls_about_the_smooth_ones(fact: str) -> None:
    smooth, rough = piece(fact, more="friction = 0"), piece(fact, more="friction = 0.1")
    for name in ("pull_from", "pull_to"):
        none, some = (getattr(one.figures, f"{name}_range") for one in (smooth, rough))
        pull = getattr(smooth.figures, name)
        assert none == pytest.approx([pull, pull], rel=1e-8)
        assert some[0] < pull < some[1]
    assert rough.figures.sag == smooth.figures.sag
    assert any(caution.code == "friction" for caution in rough.cautions)


def test_behind_the_last_support_friction_holds_by_eulers_ratio() -> None:
    """One level bay: the wrap over the last support is a right angle and the slope there (capstan, exp(mu theta))."""
    made = piece('counterweight = "6 kg"', supports="[[0, 0, 3000], [4000, 0, 3000]]", more="friction = 0.2")
    low, high = made.figures.pull_to_range
    weight = 6.0 * STANDARD_GRAVITY
    # taut as it is, the slope is near w S/2T at either pull
    for pull, sign in ((low, -1.0), (high, 1.0)):
        slope = math.atan(0.14 * STANDARD_GRAVITY * 4.0 / (2.0 * pull))
        assert pull == pytest.approx(weight * math.exp(sign * 0.2 * (0.5 * math.pi + slope)), rel=1e-4)


def test_what_is_left_out_and_what_lifts_off_is_said() -> None:
    supports = "[[0, 0, 3000], [4000, 0, 3000], [8000, 0, 5000]]"
    made = piece(
        "slack = 1.0005",
        head=ROPE.replace("[site]", '[site]\nwind = "300 Pa"'),
        supports=supports,
        more='check_load = "90 kg"',
    )
    codes = {caution.code for caution in made.cautions}
    assert {"left out", "lifts off", "smooth saddles", "saddles give"} <= codes
    assert {case.case for bay in made.parts for case in bay.cases or ()} == {
        "coldest", "as hung", "hottest", "supports give",
    }  # fmt: skip


def test_a_saddle_carries_both_legs_with_a_moment_at_its_foot() -> None:
    head = ROPE + "[support.M]\nat = [4000, 0, 3400]\nheight = 2000\n"
    found = result("slack = 1.01", head, SUPPORTS.replace("[4000, 0, 3400]", '"M"'))
    (post,) = (support for support in found.supports if support.mark == "M")
    one, two = found.pieces[0].parts[:2]
    both = one.pulls[1].vectors["as hung"] + two.pulls[0].vectors["as hung"]
    assert post.pull == pytest.approx(both, rel=1e-12)
    assert post.moment == pytest.approx(2.0 * float(np.hypot(both[0], both[1])), rel=1e-12)
