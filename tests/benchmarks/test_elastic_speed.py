"""A million unlevel spans that stretch against the same million that do not, in one run.

Solved from their lengths, and solved with greatest sag and all end pulls. Times are of the processor, so that what
else the machine does is left out; the least of interleaved repeats counts. Run with
`pytest -m long -s tests/benchmarks/test_elastic_speed.py`.
"""

from __future__ import annotations

from collections.abc import Callable
from time import process_time
from typing import TypeAlias

import numpy as np
import pytest
from numpy.typing import NDArray

from geom.hang import catenary, elastic

Floats: TypeAlias = NDArray[np.float64]

SPANS = 1_000_000
WEIGHT = 10.0  # N/m
REPEATS = 12  # interleaved
AT_MOST = 5.0


def _spans() -> tuple[Floats, Floats, Floats, Floats]:
    """Give spans of 1 to 100 m, up to 45 degrees up or down, slack by 0.01 % to 216 %, and stretches by weight.

    w L/EA goes from 1e-7, a steel cable some metres long, to 1e-2, rubber.
    """
    rng = np.random.default_rng(1691)
    span = rng.uniform(1.0, 100.0, SPANS)
    rise = span * rng.uniform(-1.0, 1.0, SPANS)
    length = np.hypot(span, rise) * (1.0 + 10.0 ** rng.uniform(-4.0, 0.5, SPANS))
    return span, rise, length, WEIGHT * length * 10.0 ** rng.uniform(2.0, 7.0, SPANS)


def _time(work: Callable[[], object]) -> float:
    start = process_time()
    work()
    return process_time() - start


@pytest.mark.long
def test_a_million_spans_that_stretch_take_at_most_five_times_those_that_do_not() -> None:
    span, rise, length, stiffness = _spans()
    # three tenths of them shorter than the chord by up to 0.3 %
    short = np.random.default_rng(5).random(SPANS) < 0.3
    taut = np.where(short, np.hypot(span, rise) * (1.0 - 3e-3 * (length % 1.0)), length)

    def rigid() -> catenary.Hang:
        return catenary.from_length(span, rise, length)

    def elastically(cut: Floats) -> elastic.Stretched:
        return elastic.from_unstretched(span, rise, cut, WEIGHT, stiffness)

    def rigid_in_full() -> tuple[Floats, Floats]:
        hang = rigid()
        return hang.sag, hang.pulls(WEIGHT).at_to

    def elastically_in_full() -> tuple[Floats, Floats]:
        hang = elastically(length)
        return hang.sag, hang.pulls.at_to

    work: list[Callable[[], object]] = [
        rigid, rigid_in_full, lambda: elastically(length), lambda: elastically(taut), elastically_in_full,
    ]  # fmt: skip
    times = np.array([[_time(each) for each in work] for _ in range(REPEATS)])
    rigid_bare, rigid_full, slack, some_taut, full = times.min(axis=0)
    print(  # noqa: T201 - the figures are what this test is run for
        f"\na span: {1e9 * rigid_bare / SPANS:.0f} ns without stretch, {1e9 * slack / SPANS:.0f} ns with; "
        f"ratios {slack / rigid_bare:.2f}, with taut ones {some_taut / rigid_bare:.2f}, in full {full / rigid_full:.2f}"
    )
    assert slack <= AT_MOST * rigid_bare
    assert some_taut <= AT_MOST * rigid_bare
    assert full <= AT_MOST * rigid_full
