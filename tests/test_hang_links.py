"""Whole links: rounding and parity by the definition, and the figures of the demo designs.

The demo figures were worked out from inputs and model independently of this program, by two routes.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.hang import catenary, links

PITCHES = st.floats(0.002, 0.2)
WISHES = st.floats(0.0, 2000.0)
PARITIES = st.sampled_from(links.PARITIES)


def _has(parity: str, count: int) -> bool:
    return parity == "any" or count % 2 == (parity == "odd")


def _near(links_wished: float, parity: str) -> list[int]:
    """Give the counts of a parity within three of a wish, and at least one."""
    middle = int(links_wished)
    return [n for n in range(middle - 3, middle + 5) if n >= 1 and _has(parity, n)]


@given(WISHES, PITCHES, PARITIES)
def test_nearest_leaves_no_count_of_the_parity_nearer(wish: float, pitch: float, parity: str) -> None:
    chosen = int(links.count(wish * pitch, pitch, parity=parity))
    assert _has(parity, chosen)
    assert abs(chosen - wish) <= min(abs(n - wish) for n in _near(wish, parity)) + 1e-8


@given(WISHES, PITCHES, PARITIES)
def test_up_is_the_first_count_that_is_no_shorter_and_down_the_last_that_is_no_longer(
    wish: float, pitch: float, parity: str
) -> None:
    counts = _near(wish, parity)
    up, down = (int(links.count(wish * pitch, pitch, rounding=way, parity=parity)) for way in ("up", "down"))
    assert _has(parity, up)
    assert _has(parity, down)
    assert up >= wish - 1e-8
    assert not any(up > n >= wish + 1e-8 for n in counts)
    assert down <= wish + 1e-8 or down == counts[0]
    assert not any(down < n <= wish - 1e-8 for n in counts)


@given(st.integers(1, 1_000_000), PITCHES, st.sampled_from(links.ROUNDINGS))
def test_a_length_of_whole_links_is_that_many_whichever_way_it_is_rounded(n: int, pitch: float, way: str) -> None:
    assert int(links.count(n * pitch, pitch, rounding=way)) == n


@pytest.mark.parametrize(
    ("wish", "parity", "chosen"), [(35.5, "any", 36), (36.0, "odd", 37), (35.0, "even", 36), (34.999, "even", 34)]
)
def test_half_way_between_two_counts_the_longer_is_chosen(wish: float, parity: str, chosen: int) -> None:
    assert int(links.count(wish * 0.052, 0.052, parity=parity)) == chosen


def test_the_least_count_outranks_the_wish_and_keeps_the_parity() -> None:
    counts = links.count(10.0, 1.0, rounding="down", parity=["any", "odd", "even"], least=[20, 20, 21])
    assert counts.tolist() == [20, 21, 22]
    assert links.count(-3.0, 1.0, parity=["any", "odd", "even"]).tolist() == [1, 1, 2]


def test_arguments_broadcast_and_counts_are_whole_numbers() -> None:
    counts = links.count(
        np.full((3, 1), 1.82), 0.052, rounding=["nearest", "up", "down"], parity=np.array([["any"], ["odd"], ["even"]])
    )
    assert counts.tolist() == [[35, 35, 35], [35, 35, 35], [36, 36, 34]]
    assert counts.dtype == np.int64
    assert links.count(1.82, 0.052).shape == ()


@pytest.mark.parametrize("length", [np.nan, np.inf])
def test_a_length_that_is_no_number_is_refused(length: float) -> None:
    with pytest.raises(ValueError, match="finite lengths"):
        links.count([1.0, length], 0.05)


@pytest.mark.parametrize("pitch", [0.0, -0.05, np.nan])
def test_a_pitch_that_makes_no_chain_is_refused(pitch: float) -> None:
    with pytest.raises(ValueError, match="pitches above 0"):
        links.count(1.0, pitch)


def test_an_unknown_word_is_refused_by_name() -> None:
    with pytest.raises(ValueError, match="'nearby' is none of nearest, up, down"):
        links.count(1.0, 0.05, rounding=["up", "nearby"])
    with pytest.raises(ValueError, match="'uneven' is none of any, odd, even"):
        links.count(1.0, 0.05, parity="uneven")


def test_neighbours_are_two_fewer_one_fewer_one_more_and_two_more() -> None:
    assert links.neighbours(35).tolist() == [33, 34, 36, 37]
    assert links.neighbours([[35], [1]]).tolist() == [[[33, 34, 36, 37]], [[-1, 0, 2, 3]]]


@pytest.mark.parametrize(
    ("count", "turns", "same"),
    [(35, 0, True), (34, 0, False), (1, 0, True), (2, 1, True), (35, 1, False), (35, 2, True)],
)
def test_end_links_lie_the_same_way_when_the_turns_between_them_are_even(count: int, turns: int, same: bool) -> None:
    assert bool(links.ends_same_way(count, turns)) is same


def test_bollard_swag_of_1800_mm_steps_through_the_demo_figures() -> None:
    pitch, takes = 0.052, 2 * 0.032
    wished = catenary.from_sag(1.8, 0.0, 0.250).length - takes
    assert links.count(wished, pitch, parity=["any", "odd"]).tolist() == [35, 35]
    beside = np.sort(np.append(links.neighbours(35), 35))
    hang = catenary.from_length(1.8, 0.0, beside * pitch + takes)
    assert beside.tolist() == [33, 34, 35, 36, 37]
    assert np.isnan(hang.sag[0])  # 1780 mm do not reach over 1800
    assert 1000.0 * hang.sag[1:] == pytest.approx([148.0, 242.0, 311.0, 369.0], abs=0.5)
    assert float(links.overall(35, pitch, 0.008)) == pytest.approx(1.836, rel=1e-15)
    assert float(hang.length[2]) == pytest.approx(1.884, rel=1e-15)


def test_sloping_bollard_swag_hangs_as_in_the_demo_figures() -> None:
    hang = catenary.from_length(1.8, -0.060, 35 * 0.052 + 0.064)
    assert 1000.0 * float(hang.sag) == pytest.approx(240.7, abs=0.05)
    assert 1000.0 * float(hang.below_from) == pytest.approx(271.5, abs=0.05)
    assert 1000.0 * float(hang.below_to) == pytest.approx(211.5, abs=0.05)


def test_gate_bay_of_1500_mm_cannot_meet_its_sag_with_an_odd_count() -> None:
    pitch, takes = 0.052, 0.032 + 0.080
    sags = 1000.0 * catenary.from_length(1.5, 0.0, np.array([27, 28, 29]) * pitch + takes).sag
    assert sags == pytest.approx([95.2, 198.7, 267.0], abs=0.05)
    wished = catenary.from_sag(1.5, 0.0, 0.210).length - takes
    assert links.count(wished, pitch, parity=["any", "odd"]).tolist() == [28, 29]


def test_chandelier_tiers_come_to_the_demo_figures() -> None:
    diameter, points = np.array([1.200, 0.800, 0.450]), np.array([12, 8, 6])
    chord = diameter * np.sin(np.pi / points)
    wished = catenary.from_sag_mid(chord, 0.0, [0.140, 0.110, 0.080]).length
    counts = links.count(wished, 0.00635, parity="odd")
    assert 1000.0 * chord == pytest.approx([310.58, 306.15, 225.00], abs=0.005)
    assert counts.tolist() == [69, 63, 45]
    drops = 1000.0 * catenary.from_length(chord, 0.0, counts * 0.00635).sag_mid
    assert drops == pytest.approx([138.2, 114.4, 78.0], abs=0.05)
    assert int((counts * points).sum()) == 1602


def test_chandelier_drapes_between_rings_come_to_the_demo_figures() -> None:
    span, fall = 0.400 - 0.225, 0.180
    count = links.count(1.12 * np.hypot(span, fall), 0.00635, parity="odd")
    assert int(count) == 45
    hang = catenary.from_length(span, -fall, count * 0.00635)
    assert 1000.0 * float(hang.below_to) == pytest.approx(8.4, abs=0.05)
