"""The figures that the demo swags and curtains were worked out to have, each beside the scenario it is of."""

from __future__ import annotations

import math
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.optimize import brentq

from geom.result import Piece, Result
from tests.designs import solved

Floats = NDArray[np.float64]

DEMOS = Path(__file__).resolve().parent.parent / "demo_designs"


def demo(stem: str) -> Result:
    return solved((DEMOS / f"{stem}.toml").read_text())


def named(result: Result, mark: str) -> Piece:
    return next(piece for piece in result.pieces if piece.mark == mark)


# The chandelier's figures were worked out twice, independently, from the tiers' sizes: chord D sin(pi/n), the nearest
# odd count of links to the wished drop, and the drop that these give, all with smooth catenaries of length n p.
TIERS = [("T1", 12, 310.58, 69, 138.2), ("T2", 8, 306.15, 63, 114.4), ("T3", 6, 225.00, 45, 78.0)]


@pytest.mark.parametrize(("mark", "swags", "chord", "links", "drop"), TIERS)
def test_each_tier_of_the_chandelier_hangs_as_its_scenario_says(
    mark: str, swags: int, chord: float, links: int, drop: float
) -> None:
    tier = named(demo("ashgrove-chandelier"), mark)
    assert len(tier.parts) == swags
    for strand in tier.parts:
        assert 1000 * strand.figures.span == pytest.approx(chord, abs=0.005)
        assert strand.figures.links.count == links
        assert strand.figures.links.ends == "same way"
        assert 1000 * strand.figures.sag_mid == pytest.approx(drop, abs=0.05)


def test_the_chandelier_takes_as_many_links_as_its_scenario_says() -> None:
    result = demo("ashgrove-chandelier")
    swags = [named(result, mark) for mark, *_ in TIERS]
    assert sum(tier.figures.links_count for tier in swags) == 1602
    assert sum(tier.figures.pin_to_pin for tier in swags) == pytest.approx(10.173, abs=0.0005)
    assert sum(cut.links or 0 for cut in result.cuts) == 1872
    assert sum(cut.cut_length for cut in result.cuts) == pytest.approx(11.887, abs=0.0005)
    assert sum(piece.mass for piece in result.pieces) == pytest.approx(11.887 * 0.028, abs=2e-5)


def test_the_chandeliers_drapes_dip_under_the_lower_ring() -> None:
    drapes = named(demo("ashgrove-chandelier"), "D")
    assert [strand.figures.links.count for strand in drapes.parts] == [45] * 6
    for strand in drapes.parts:
        assert 1000 * strand.figures.below_to == pytest.approx(8.4, abs=0.05)
        assert strand.figures.lowest == pytest.approx(2.820 - 0.0084, abs=5e-5)


def test_the_chandeliers_rings_carry_the_weight_straight_down() -> None:
    result = demo("ashgrove-chandelier")
    assert len(result.supports) == 12 + 8 + 6 + 2 * 6
    for mark, count, *_ in TIERS:
        pulls = np.array([support.pull for support in result.supports if support.pieces == (mark,)])
        assert len(pulls) == count
        weight = named(result, mark).mass * 9.80665
        np.testing.assert_allclose(pulls[:, 2], -weight / count, rtol=1e-12)
        np.testing.assert_allclose(pulls.sum(axis=0), [0, 0, -weight], atol=1e-12 * weight)
        inward = -pulls[:, :2] * [support.at[:2] for support in result.supports if support.pieces == (mark,)]
        assert (inward.sum(axis=1) > 0).all(), "two swags at a point of a ring pull it towards the middle"


def test_the_bead_cloud_hangs_as_its_scenario_says() -> None:
    """Counts, lengths and mass as worked out twice from the formula of its sags; sags no more off than half a bead."""
    result = demo("marlow-bead-cloud")
    (cloud,) = result.pieces
    counts = [strand.figures.links.count for strand in cloud.parts]
    assert (counts[0], counts[29], counts[10]) == (460, 416, 523)
    assert (min(counts), max(counts)) == (416, 523)
    assert sum(counts) == cloud.figures.links_count == 28_570
    assert cloud.figures.pin_to_pin == pytest.approx(171.42, abs=1e-9)
    assert cloud.mass == pytest.approx(7.71, abs=0.005)
    assert 1000 * cloud.figures.lowest == pytest.approx(2702, abs=0.5)
    assert cloud.figures.lowest > 2.300, "the wished head clearance"


def test_the_bead_clouds_sags_follow_its_formula() -> None:
    (cloud,) = demo("marlow-bead-cloud").pieces
    wished = 600 + 300 * np.sin(2 * np.pi * 1.5 * np.arange(60) / 59)
    asked = [1000 * strand.intended.value for strand in cloud.parts if strand.intended and strand.intended.value]
    np.testing.assert_allclose(asked, wished, atol=5.1e-5)  # written to four decimals
    off = np.array([1000 * strand.figures.sag for strand in cloud.parts]) - wished
    assert np.abs(off).max() == pytest.approx(2.93, abs=0.005)
    assert cloud.difference is not None
    assert 1000 * abs(cloud.difference.value or math.nan) == pytest.approx(2.93, abs=0.005)


def test_the_bead_clouds_zones_are_twenties_of_nickel_brass_and_nickel() -> None:
    result = demo("marlow-bead-cloud")
    stocks = [cut.stock for cut in result.cuts]
    assert stocks == ["nickel"] * 20 + ["brass"] * 20 + ["nickel"] * 20
    links = {plan.stock: plan.links for plan in result.stock_plan}
    assert sum(value or 0 for value in links.values()) == 28_570
    places = np.array([strand.pulls[0].at for strand in result.pieces[0].parts])
    np.testing.assert_allclose(np.diff(places[:, 1]), 0.05, rtol=1e-12)


def _scallop(x: float, span: float, rise: float, sag: float) -> float:
    """Elevation at x of a catenary from (0, 0) to (span, rise) of a given greatest depth under its chord.

    From z = a (cosh((x - v)/a) - cosh(v/a)) itself, with a found by bracketing: through (span, rise) goes the curve of
    v = span/2 - a asinh(rise / (2 a sinh(span/2a))), and it is deepest where it is parallel to its chord.
    """

    def elevation(x: float, a: float) -> float:
        v = span / 2 - a * math.asinh(rise / (2 * a * math.sinh(span / (2 * a))))
        return a * (math.cosh((x - v) / a) - math.cosh(v / a))

    def depth(a: float) -> float:
        v = span / 2 - a * math.asinh(rise / (2 * a * math.sinh(span / (2 * a))))
        at = v + a * math.asinh(rise / span)
        return rise / span * at - elevation(at, a) - sag

    return elevation(x, float(brentq(depth, 0.02 * span, 1e3 * span, xtol=1e-13)))


def test_the_scalloped_curtains_strands_are_counted_down_to_its_hem() -> None:
    """Every count is the whole beads that hang from an 8 mm cup over a hem worked out apart from the code's own."""
    (curtain,) = demo("tanners-row-curtain").pieces
    hem = [(0.0, 0.9), (1.0, 0.9), (2.0, 0.9), (2.8, 2.05), (3.6, 0.9), (4.8, 0.9)]
    for number, strand in enumerate(curtain.parts):
        s = 0.04 * number
        (left, low), (right, high) = next(pair for pair in pairwise(hem) if pair[0][0] <= s <= pair[1][0] + 1e-9)
        z = low + _scallop(s - left, right - left, high - low, 0.18)
        beads = (2.7 - z - 0.008) / 0.006
        assert strand.figures.hem == pytest.approx(z, abs=1e-8)
        if abs(beads - round(beads)) > 1e-5:
            assert strand.figures.links.count == math.floor(beads)
        assert -1e-7 < strand.figures.over_hem < 0.006 + 1e-7
    assert curtain.figures.count == 121
    assert curtain.figures.links_count == sum(strand.figures.links.count for strand in curtain.parts)


def test_the_scalloped_curtains_rail_carries_beads_and_cups() -> None:
    """A strand weighs its stock's weight from pin to pin, its cup besides: 3 g each."""
    result = demo("tanners-row-curtain")
    (curtain,) = result.pieces
    metres = [strand.figures.pin_to_pin for strand in curtain.parts]
    mass = sum(metres[:91]) * 0.045 + sum(metres[91:]) * 0.049 + 121 * 0.003
    assert curtain.figures.mass_on_rail == pytest.approx(mass, rel=1e-12)
    assert curtain.figures.rail_load == pytest.approx(mass / 4.8, rel=1e-12)
    assert sum(support.pull[2] for support in result.supports) == pytest.approx(-9.80665 * mass, rel=1e-12)
    corner = curtain.parts[90].pulls[0].at
    np.testing.assert_allclose(corner, [3.6, 0.0, 2.7], atol=1e-12)
