"""Rigid links: their polygon against the least of their energy, exact cases, and the catenary."""

from __future__ import annotations

from typing import Any, TypeAlias

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy import optimize

from geom.hang import catenary
from geom.hang.rigid import link

Floats: TypeAlias = NDArray[np.float64]
minimize: Any = optimize.minimize


def _of_least_energy(span: float, rise: float, pitch: float, count: int) -> Floats:
    """Give the angles of links that lie as low as they can, found without any equilibrium, from a circle's."""
    share = (count - np.arange(count) - 0.5) / count  # of all links, those a link lifts, itself by half
    start = np.arctan2(rise, span) + np.linspace(-1.0, 1.0, count)
    closing = {
        "type": "eq",
        "fun": lambda t: pitch * np.array([np.cos(t).sum(), np.sin(t).sum()]) - [span, rise],
        "jac": lambda t: pitch * np.stack([-np.sin(t), np.cos(t)]),
    }
    found = minimize(
        lambda t: pitch * share @ np.sin(t),
        start,
        jac=lambda t: pitch * share * np.cos(t),
        constraints=closing,
        method="SLSQP",
        options={"maxiter": 500, "ftol": 1e-16},
    )
    assert found.success
    return np.asarray(found.x)


@pytest.mark.parametrize("count", [5, 40, pytest.param(400, marks=pytest.mark.long)])
def test_links_lie_as_low_as_they_can(count: int) -> None:
    span, rise, length = 1.0, 0.2, 1.3
    angles = _of_least_energy(span, rise, length / count, count)
    chain = link(span, rise, length / count, count, 1.0)
    # the energy is flat at its least: angles are found to the root of its rounding
    assert np.arctan2(chain.directions[0, :, 1], chain.directions[0, :, 0]) == pytest.approx(angles, abs=1e-6)
    heights = np.cumsum(length / count * np.sin(angles))
    assert chain.joints[0, 1:, 1] == pytest.approx(heights, abs=1e-7)
    # and lie along the catenary, within a quarter of its pitch's bend: 1.3 k^-2 at most
    hang = catenary.from_length(span, rise, length)
    under = hang.at_plan(np.cumsum(length / count * np.cos(angles))).elevation
    assert np.abs(under - heights).max() < 0.7 / count**2


CHAINS = st.tuples(st.floats(0.1, 10.0), st.floats(-3.0, 3.0), st.floats(-4.0, 1.0), st.integers(2, 60))


@given(CHAINS)
def test_every_link_balances_and_the_chain_reaches(chain: tuple[float, float, float, int]) -> None:
    span, slope, slack, count = chain
    pitch = span * float(np.hypot(1.0, slope)) * (1.0 + 10.0**slack) / count
    hung = link(span, slope * span, pitch, count, 3.0)
    end = hung.joints[0, -1]
    assert end == pytest.approx([span, slope * span], abs=1e-12 * pitch * count)
    tangents = hung.directions[0, :, 1] / hung.directions[0, :, 0]
    steps = np.arange(count) + 0.5
    expected = (-float(hung.down_from[0]) + 3.0 * steps) / float(hung.horizontal[0])
    assert tangents == pytest.approx(expected, rel=1e-9, abs=1e-9 * float(np.abs(expected).max()))


@pytest.mark.parametrize("count", [4, 9])
def test_mirrored_chains_mirror(count: int) -> None:
    one, other = link(2.0, 0.7, 3.0 / count, count, 5.0), link(2.0, -0.7, 3.0 / count, count, 5.0)
    assert float(one.horizontal[0]) == pytest.approx(float(other.horizontal[0]), rel=1e-13)
    assert float(one.down_from[0] + other.down_from[0]) == pytest.approx(5.0 * count, rel=1e-13)
    assert one.joints[0, :, 0] == pytest.approx(2.0 - other.joints[0, ::-1, 0], abs=1e-13)
    assert float(one.sag[0]) == pytest.approx(float(other.sag[0]), rel=1e-12)


def test_a_chain_comes_to_the_catenary_with_the_square_of_its_count() -> None:
    counts = np.array([50, 100, 200, 400])
    hung = link(1.0, 0.3, 1.5 / counts, counts, 2.0)
    ratio = hung.off_catenary[:-1] / hung.off_catenary[1:]
    assert ratio == pytest.approx(np.full(3, 4.0), rel=2e-3)
    pulls = catenary.from_length(1.0, 0.3, 1.5).pulls(2.0 * counts / 1.5)
    assert hung.horizontal[-1] == pytest.approx(pulls.horizontal[-1], rel=1e-4)


def test_distance_from_the_catenary_is_that_of_the_nearest_point() -> None:
    hung = link(1.0, 0.3, 0.25, 6, 2.0)
    hang = catenary.from_length(1.0, 0.3, 1.5)
    curve = hang.at_plan(np.linspace(-0.1, 1.1, 200_001))
    middles = 0.5 * (hung.joints[0, 1:] + hung.joints[0, :-1])
    places = np.concatenate([hung.joints[0], middles])
    nearest = [np.hypot(curve.plan - x, curve.elevation - z).min() for x, z in places]
    assert float(hung.off_catenary[0]) == pytest.approx(max(nearest), rel=1e-6)


def test_chains_of_different_counts_share_an_array() -> None:
    hung = link(1.0, [0.0, 0.2], 0.3, [4, 6], 2.0)
    assert hung.joints.shape == (2, 7, 2)
    assert np.isnan(hung.joints[0, 5:]).all()
    assert hung.joints[0, 4] == pytest.approx([1.0, 0.0], abs=1e-13)
    assert hung.joints[1, 6] == pytest.approx([1.0, 0.2], abs=1e-13)


@pytest.mark.parametrize(
    "chain",
    [
        (1.0, 0.0, 0.2, 4, 1.0),
        (1.0, 0.0, 0.25, 4, 1.0),
        (1.0, 0.0, 2.0, 1, 1.0),
        (1.0, 0.0, 0.3, 4, 0.0),
        (1.0, np.nan, 0.3, 4, 1.0),
    ],
)
def test_links_that_do_not_reach_or_are_none_are_nan(chain: tuple[float, ...]) -> None:
    hung = link(*chain)
    assert np.isnan(hung.horizontal).all()
    assert np.isnan(hung.sag).all()
    assert np.isnan(hung.off_catenary).all()
