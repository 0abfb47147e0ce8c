"""Hangings that come to lie on a floor, from the text of a design to their figures."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.result import Piece
from tests.test_bad_input import problems_of
from tests.test_hanging_stretch import case, design, figures


def laid(span: float, rise: float, length: float, floor: float, **keys: float) -> Piece:
    body = (
        f'[[hanging]]\nmark = "S"\nfrom = [0, 0, 10]\nto = [{0.6 * span!r}, {0.8 * span!r}, {10 + rise!r}]\n'
        f'stock = "rope"\nlength = {length!r}\nfloor = {floor!r}\n'
    )
    return design(body, head="[site]\ntemperature = [-20, 20, 40]\n", **keys).pieces[0]


def test_a_chain_to_an_anchor_on_the_floor_is_as_the_closed_form_has_it() -> None:
    """20 m from a point 5 m high to an anchor on the floor 17 m away: c = 1.69786754039 m, 13.5209047387836 m lie."""
    hang = figures(laid(17.0, -5.0, 20.0, 5.0, stiffness=9e14))
    assert hang.parameter == pytest.approx(1.69786754039, rel=1e-9)
    assert hang.lying == pytest.approx(13.5209047387836, rel=1e-9)
    assert hang.hanging == pytest.approx(20.0 - 13.5209047387836, rel=1e-9)
    assert hang.lowest == pytest.approx(5.0, abs=1e-12)
    assert hang.pull_from == pytest.approx(2.0 * (1.69786754039 + 5.0), rel=1e-9)


@settings(max_examples=20)
@given(st.floats(2.0, 30.0), st.floats(-0.3, 0.3), st.floats(1.05, 1.6), st.floats(0.3, 0.9), st.floats(3e4, 1e7))
def test_supports_carry_what_hangs_and_the_drawn_curve_lies_on_the_floor(
    span: float, rise: float, slack: float, share: float, stiffness: float
) -> None:
    length = slack * math.hypot(span, rise * span)
    free = figures(laid(span, rise * span, length, -1000.0, stiffness=stiffness))
    assert free.lying == 0.0
    lower = 10 + min(0.0, rise * span)
    if not free.lowest < lower - 1e-3:
        return
    floor = lower - share * (lower - free.lowest)
    piece = laid(span, rise * span, length, floor, stiffness=stiffness)
    hang = figures(piece)
    assert hang.lowest == pytest.approx(floor, abs=1e-9)
    assert hang.hanging + hang.lying == pytest.approx(length, rel=1e-12)
    start, end = (pull.vectors["as hung"] for pull in piece.pulls)
    assert -(start + end)[2] == pytest.approx(2.0 * hang.hanging, rel=1e-8)
    assert np.linalg.norm((start + end)[:2]) <= 1e-9 * hang.pull_from
    curve = piece.lines[0].curve
    if hang.pull_horizontal > 1e-3:
        assert curve.length == pytest.approx(hang.hung_length, rel=1e-6)
    points = curve.points(1e-5 * span)
    assert points[:, 2].min() == pytest.approx(floor, abs=1e-9)
    plan = np.hypot(*points[:, :2].T)
    assert (10 + rise * plan - points[:, 2]).max() == pytest.approx(hang.sag, rel=1e-3, abs=3e-5 * span)
    assert case(piece, "hottest").pull_horizontal <= case(piece, "coldest").pull_horizontal


FLOORED = (
    'title = "Bad"\nunit = "mm"\n[[hanging]]\nmark = "F"\nfrom = [0, 0, 3000]\nto = [4000, 0, 2500]\n'
    'stock = "DIN 763-6"\nlength = 6000\nfloor = 2000\n'
)


@pytest.mark.parametrize(
    ("old", "new", "key", "words"),
    [
        ("floor = 2000", "floor = 2600", "floor", "over the lower support at 2500 mm"),
        ("floor = 2000", 'floor = "2 kg"', "floor", "mass"),
        ("floor = 2000", "floor = [0, 1]", "floor", "no length"),
        ("length = 6000", "sag = 2000", "sag", "would lie on the floor at 2000 mm"),
        ("floor = 2000", 'floor = 2000\nspread = "3 N/m"', "spread", "not solved of a member over a floor"),
        ("floor = 2000", "floor = 2000\ncheck_load = 80", "check_load", "not solved of a member over a floor"),
        ("floor = 2000", "floor = 2000\nloads = [{ at = 900, mass = 3 }]", "loads", "not solved of a member over"),
    ],
)
def test_a_wrong_floor_is_answered_once_with_a_remedy(old: str, new: str, key: str, words: str) -> None:
    assert problems_of(FLOORED) == ()
    (problem,) = problems_of(FLOORED.replace(old, new))
    assert problem.key == key
    assert words in problem.text
