"""Loaded, stretching spans against scipy.integrate.solve_bvp on the same spans at the same accuracy.

Ours are solved together, a thousand at a time, as a design's are; the boundary value solver takes one at a time. Its
tolerance is the loosest power of ten with which its pulls are within 1e-11 of ours. Times are of the processor, per
span, the least of interleaved repeats. Run with `pytest -m long -s tests/benchmarks/test_loaded_speed.py`.
"""

from __future__ import annotations

from collections.abc import Callable
from time import process_time
from typing import Any, TypeAlias

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import integrate

from geom.hang.loaded import Loaded, Loads, Stocks, hang
from tests.boundary import loaded_member

Floats: TypeAlias = NDArray[np.float64]
solve_bvp: Any = integrate.solve_bvp

SPANS = 1000
REPEATS = 8
SAME = 1e-11  # of the pull; ours are right to 1e-13
AT_LEAST = 1000.0
SPAN, RISE, WEIGHT, STIFFNESS = 60.0, 4.0, 12.0, 3e5
AT, FORCE = np.array([13.0, 31.0, 47.0]), np.array([300.0, 500.0, 250.0])
LENGTHS = np.linspace(61.0, 66.0, SPANS)


def _ours(lengths: Floats) -> Loaded:
    stocks = Stocks(lengths[:, np.newaxis], WEIGHT, STIFFNESS)
    return hang(SPAN, RISE, stocks, loads=Loads([AT], [FORCE]))


def _theirs(length: float, tolerance: float) -> Floats:
    """Give the tension at the start, in the plane."""
    bounds = np.r_[0.0, AT, length]
    problem = loaded_member(bounds, FORCE, np.array([SPAN, RISE]), np.array([0.0, -WEIGHT]), STIFFNESS)
    return np.asarray(solve_bvp(*problem, tol=tolerance, max_nodes=100_000).y[2:4, 0])


def _time(work: Callable[[], object]) -> float:
    start = process_time()
    work()
    return process_time() - start


@pytest.mark.long
def test_a_loaded_stretching_span_is_a_thousand_times_faster_than_a_boundary_value_solver() -> None:
    picked = np.array([0, 300, 600, 999])
    pulls = _ours(LENGTHS).tension[picked][:, [0, 2]]

    def off(tolerance: float) -> float:
        solved = np.array([_theirs(length, tolerance) for length in LENGTHS[picked]])
        return float((np.abs(solved - pulls).max(axis=1) / np.abs(pulls).max(axis=1)).max())

    tolerance = next(tol for tol in 10.0 ** -np.arange(3.0, 13.0) if off(tol) < SAME)
    work: list[Callable[[], object]] = [
        lambda: _ours(LENGTHS),
        lambda: _ours(LENGTHS[:1]),
        lambda: [_theirs(length, tolerance) for length in LENGTHS[picked]],
    ]
    times = np.array([[_time(each) for each in work] for _ in range(REPEATS)]).min(axis=0)
    ours, alone, theirs = times / (SPANS, 1, len(picked))
    print(  # noqa: T201 - the figures are what this test is run for
        f"\na span: {1e6 * ours:.1f} us of a thousand, {1e6 * alone:.0f} us alone; solve_bvp at {tolerance:.0e} "
        f"{1e3 * theirs:.1f} ms: {theirs / ours:.0f} times, {theirs / alone:.0f} alone"
    )
    assert theirs >= AT_LEAST * ours
