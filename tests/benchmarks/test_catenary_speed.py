"""A million unlevel spans, fully solved from their lengths, against two yardsticks measured in the same run.

The closing formulas at a known parameter: for a u that is given, the closing function ln(sinh u / u) against the
stretch of the length, the greatest sag, and for both ends the pull and its downward part; written out below in plain
array operations, as one would check a solved span.

A loop of scipy.optimize.brentq with the same closing function and the same figures to work out for each span, its
bracket found by doubling, as one does who has no bounds. Printed beside it, the same loop with the bracket
sqrt(6 s) <= u <= sqrt(6 s) + s, which is known to hold the root.

Times are of the processor, so that what else the machine does is left out. Run with
`pytest -m long -s tests/benchmarks/test_catenary_speed.py`.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from time import process_time
from typing import TypeAlias

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.optimize import brentq

from geom.hang import catenary

Floats: TypeAlias = NDArray[np.float64]
Bracket: TypeAlias = Callable[[Callable[[float], float], float], tuple[float, float]]

SPANS = 1_000_000
LOOPED = 3_000  # spans of the loops; their time is per span
WEIGHT = 10.0  # N/m
REPEATS = 20  # interleaved; the least time of each counts
AT_MOST_OF_CLOSING = 4.0
AT_LEAST_OVER_LOOP = 150.0


def _spans() -> tuple[Floats, Floats, Floats]:
    """Give spans of 1 to 100 m, up to 45 degrees up or down, with slacks from 0.01 % to 216 %."""
    rng = np.random.default_rng(1691)
    span = rng.uniform(1.0, 100.0, SPANS)
    rise = span * rng.uniform(-1.0, 1.0, SPANS)
    return span, rise, np.hypot(span, rise) * (1.0 + 10.0 ** rng.uniform(-4.0, 0.5, SPANS))


def _solved(span: Floats, rise: Floats, length: Floats) -> tuple[Floats, ...]:
    hang = catenary.from_length(span, rise, length)
    pulls = hang.pulls(WEIGHT)
    return hang.parameter, hang.sag, pulls.at_from, pulls.at_to, pulls.vertical_from, pulls.vertical_to


def _closing_formulas(span: Floats, rise: Floats, length: Floats, u: Floats) -> tuple[Floats, ...]:
    a = 0.5 * span / u
    residual = np.log(np.sinh(u) / u) - 0.5 * np.log((length - rise) * (length + rise) / (span * span))
    slope = rise / span
    middle = np.arctanh(rise / length)
    beyond = np.arcsinh(slope) - middle
    sag = a * (np.cosh(middle) * np.cosh(u) + slope * beyond - np.sqrt(1.0 + slope * slope))
    down_from = 0.5 * WEIGHT * (length - rise / np.tanh(u))
    down_to = WEIGHT * length - down_from
    side = WEIGHT * a
    at_from, at_to = (np.sqrt(side * side + down * down) for down in (down_from, down_to))
    return residual, sag, at_from, at_to, down_from, down_to


def _doubled(function: Callable[[float], float], _: float) -> tuple[float, float]:
    high = 1.0
    while function(high) < 0.0:
        high *= 2.0
    return 1e-9, high


def _known(_: Callable[[float], float], stretch: float) -> tuple[float, float]:
    low = math.sqrt(6.0 * stretch) * (1.0 - 1e-9)
    return low, low + stretch + 1e-9


def _loop(spans: list[tuple[float, float, float]], bracket: Bracket) -> list[tuple[float, ...]]:
    return [_one(span, rise, length, bracket) for span, rise, length in spans]


def _one(span: float, rise: float, length: float, bracket: Bracket) -> tuple[float, ...]:
    stretch = 0.5 * math.log((length - rise) * (length + rise) / (span * span))

    def closing(u: float) -> float:
        return math.log(math.sinh(u) / u) - stretch

    u = brentq(closing, *bracket(closing, stretch))
    a, slope, middle = 0.5 * span / u, rise / span, math.atanh(rise / length)
    sag = a * (math.cosh(middle) * math.cosh(u) + slope * (math.asinh(slope) - middle) - math.sqrt(1.0 + slope * slope))
    down_from = 0.5 * WEIGHT * (length - rise / math.tanh(u))
    down_to = WEIGHT * length - down_from
    side = WEIGHT * a
    return a, sag, math.hypot(side, down_from), math.hypot(side, down_to), down_from, down_to


def _time(work: Callable[[], object]) -> float:
    start = process_time()
    work()
    return process_time() - start


@pytest.mark.long
def test_a_million_spans_cost_little_more_than_checking_them_and_far_less_than_a_loop() -> None:
    span, rise, length = _spans()
    u = np.array(catenary.from_length(span, rise, length).u)
    few = _singly(LOOPED)
    work: list[Callable[[], object]] = [
        lambda: _solved(span, rise, length),
        lambda: _closing_formulas(span, rise, length, u),
        lambda: _loop(few, _doubled),
        lambda: _loop(few, _known),
    ]
    times = np.array([[_time(each) for each in work] for _ in range(REPEATS)]).min(axis=0)
    solved, closing, doubled, known = times / (SPANS, SPANS, LOOPED, LOOPED)
    print(  # noqa: T201 - the figures are what this test is run for
        f"\na span: solved {1e9 * solved:.0f} ns, closing formulas {1e9 * closing:.0f} ns, "
        f"brentq {1e6 * doubled:.1f} us, with a known bracket {1e6 * known:.1f} us\n"
        f"solved/closing {solved / closing:.2f}, brentq/solved {doubled / solved:.0f}, "
        f"with a known bracket {known / solved:.0f}"
    )
    assert solved <= AT_MOST_OF_CLOSING * closing
    assert doubled >= AT_LEAST_OVER_LOOP * solved


def _singly(count: int) -> list[tuple[float, float, float]]:
    span, rise, length = (values[:count].tolist() for values in _spans())
    return list(zip(span, rise, length, strict=True))


@pytest.mark.parametrize("bracket", [_doubled, _known])
def test_all_ways_agree(bracket: Bracket) -> None:
    span, rise, length = (values[:500] for values in _spans())
    solved = _solved(span, rise, length)
    residual, *checked = _closing_formulas(span, rise, length, 0.5 * span / solved[0])
    looped = np.array(_loop(_singly(500), bracket)).T
    # at a slack of 1e-4 the plain formulas keep twelve digits, and brentq its own tolerance, 2e-12 of u at least
    assert np.abs(residual).max() < 1e-14
    for ours, formula, loop in zip(solved[1:], checked, looped[1:], strict=True):
        scale = np.abs(ours) + solved[2]
        assert np.abs(ours - formula).max() < 1e-9 * scale.max()
        assert np.abs(ours - loop).max() < 1e-8 * scale.max()
