"""Members over saddles: smooth ones, rough ones about to slip, counterweights."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.hang import elastic, elastic_facts
from geom.hang.saddles import Line, Run, run, slipping

SPANS, RISES = [10.0, 14.0, 8.0, 12.0], [1.0, -2.0, 0.5, 0.0]
WEIGHT, STIFFNESS = 5.0, 2e5
LINE = Line(SPANS, RISES, WEIGHT, STIFFNESS)
LENGTH = 46.5


@given(st.floats(1.0, 20.0), st.floats(-1.0, 1.0), st.floats(-3.0, -0.9), st.floats(3.0, 8.0))
def test_a_run_of_one_bay_is_a_hanging(span: float, slope: float, slack: float, stiff: float) -> None:
    length = span * float(np.hypot(1.0, slope)) * (1.0 + 10.0**slack)
    found = run(Line([[span]], [[slope * span]], WEIGHT, 10.0**stiff), length=length)
    plain = elastic.from_unstretched(span, slope * span, length, WEIGHT, 10.0**stiff)
    assert float(found.length[0]) == pytest.approx(length, rel=1e-13)
    rel = 1e-12 / 10.0**slack
    assert float(found.bays.horizontal[0, 0]) == pytest.approx(float(plain.horizontal), rel=rel)
    assert float(found.bays.sag[0, 0]) == pytest.approx(float(plain.sag), rel=rel)


def test_over_a_smooth_saddle_the_pull_is_the_same_on_both_sides() -> None:
    found = run(LINE, length=LENGTH)
    assert float(found.length[0]) == pytest.approx(LENGTH, rel=1e-13)
    assert found.before[0, :-1] == pytest.approx(found.after[0, 1:], rel=1e-12)
    assert found.marks[0, [0, -1]] == pytest.approx([0.0, LENGTH], rel=1e-13)
    assert np.diff(found.marks[0]) == pytest.approx(found.bays.length[0], rel=1e-13)


def test_without_stretch_the_pull_changes_by_the_weight_of_the_rise() -> None:
    found = run(Line(SPANS, RISES, WEIGHT, np.inf), length=LENGTH)
    pulls = np.r_[found.after[0, 0], found.before[0]]
    assert pulls - pulls[0] == pytest.approx(WEIGHT * np.r_[0.0, np.cumsum(RISES)], abs=1e-9)


def test_supports_of_a_run_carry_its_weight_and_no_pull_in_all() -> None:
    found = run(LINE, length=LENGTH)
    assert found.reactions[0].sum(axis=0) == pytest.approx([0.0, WEIGHT * LENGTH], rel=1e-12, abs=1e-9)


def test_equal_bays_hang_alike() -> None:
    found = run(Line([9.0] * 5, [0.0] * 5, WEIGHT, STIFFNESS), length=47.0)
    one = elastic.from_unstretched(9.0, 0.0, 47.0 / 5.0, WEIGHT, STIFFNESS)
    assert found.bays.sag[0] == pytest.approx(np.full(5, float(one.sag)), rel=1e-11)
    # inner supports carry a bay each, and no pull along
    assert found.reactions[0, 1:-1] == pytest.approx(np.tile([0.0, 47.0], (4, 1)), rel=1e-11, abs=1e-9)


def test_a_longer_run_sags_more_in_every_bay() -> None:
    found = run(LINE, length=[45.6, 46.0, 46.5, 47.0])
    assert (np.diff(found.bays.sag, axis=0) > 0.0).all()
    assert (np.diff(found.before, axis=0) < 0.0).all()


def test_a_run_shorter_than_its_supports_stretches() -> None:
    straight = float(np.hypot(SPANS, RISES).sum())
    found = run(Line(SPANS, RISES, 0.05, STIFFNESS), length=straight * (1.0 - 2e-3))
    assert (found.bays.excess < 0.0).all()
    assert found.before[0, :-1] == pytest.approx(found.after[0, 1:], rel=1e-12)
    assert found.before[0] == pytest.approx(np.full(4, 2e-3 / (1.0 - 2e-3) * STIFFNESS), rel=1e-3)


def test_too_long_a_run_has_no_rest_on_smooth_saddles() -> None:
    found = run(LINE, length=[46.5, 80.0])
    assert np.isfinite(found.length[0])
    assert np.isnan(found.length[1])
    assert np.isnan(found.bays.sag[1]).all()


def test_a_counterweight_pulls_with_its_weight_and_both_its_legs_press_the_last_support() -> None:
    found = run(LINE, counterweight=300.0)
    assert float(found.before[0, -1]) == pytest.approx(300.0, rel=1e-13)
    last = found.bays.pulls.vertical_to[0, -1]
    assert found.reactions[0, -1] == pytest.approx([-found.bays.horizontal[0, -1], 300.0 + last], rel=1e-13)
    again = run(LINE, length=found.length)
    assert float(again.before[0, -1]) == pytest.approx(300.0, rel=1e-9)


def test_a_counterweight_under_the_least_pull_holds_nothing() -> None:
    line, least = Line([10.0, 14.0], 0.0, WEIGHT, STIFFNESS), elastic_facts.least_end_pull(14.0, 0.0, WEIGHT, STIFFNESS)
    found = run(line, counterweight=[0.999 * float(least), 1.001 * float(least)])
    assert np.isnan(found.length).tolist() == [True, False]


@pytest.mark.parametrize("toward_to", [True, False])
@pytest.mark.parametrize("given_as", ["length", "counterweight"])
def test_about_to_slip_the_pulls_differ_by_eulers_ratio(toward_to: bool, given_as: str) -> None:
    mu, sign = 0.2, 1.0 if toward_to else -1.0
    value = LENGTH if given_as == "length" else 300.0
    found = slipping(LINE, mu, toward_to=toward_to, **{given_as: value})
    bent = np.exp(sign * mu * np.maximum(found.bends[0], 0.0))  # no more where it would lift off
    assert found.after[0, 1:] / found.before[0, :-1] == pytest.approx(bent, rel=1e-10)
    if given_as == "length":
        assert float(found.length[0]) == pytest.approx(LENGTH, rel=1e-12)
    else:
        wrapped = float(found.bays.slope_to[0, -1]) + 0.5 * np.pi
        assert 300.0 / float(found.before[0, -1]) == pytest.approx(np.exp(sign * mu * wrapped), rel=1e-10)


def test_smooth_pulls_lie_between_both_ways_of_slipping() -> None:
    smooth = run(LINE, length=LENGTH)
    there, back = (slipping(LINE, 0.1, toward_to=way, length=LENGTH) for way in (True, False))
    assert there.after[0, 0] < smooth.after[0, 0] < back.after[0, 0]
    assert there.before[0, -1] > smooth.before[0, -1] > back.before[0, -1]


@pytest.mark.parametrize("toward_to", [True, False])
def test_without_friction_slipping_is_sliding(toward_to: bool) -> None:
    found, smooth = slipping(LINE, 0.0, toward_to=toward_to, length=LENGTH), run(LINE, length=LENGTH)
    assert found.before == pytest.approx(smooth.before, rel=1e-10)
    assert found.marks == pytest.approx(smooth.marks, rel=1e-11)


def test_turned_round_a_run_slips_the_other_way() -> None:
    back = Line(SPANS[::-1], [-rise for rise in RISES[::-1]], WEIGHT, STIFFNESS)
    here = slipping(LINE, 0.15, toward_to=True, length=LENGTH)
    there = slipping(back, 0.15, toward_to=False, length=LENGTH)
    assert here.bays.sag[0] == pytest.approx(there.bays.sag[0, ::-1], rel=1e-9)


def test_many_runs_are_solved_together_as_alone() -> None:
    rng = np.random.default_rng(3)
    spans, rises = rng.uniform(5.0, 20.0, (40, 12)), rng.uniform(-2.0, 2.0, (40, 12))
    length = np.hypot(spans, rises).sum(axis=1) * (1.0 + 10.0 ** rng.uniform(-4, -1.6, 40))
    together = run(Line(spans, rises, WEIGHT, STIFFNESS), length=length)
    assert np.isfinite(together.length).all()
    assert together.length == pytest.approx(length, rel=1e-12)
    assert np.abs(together.before[:, :-1] / together.after[:, 1:] - 1.0).max() < 1e-9
    alone: Run = run(Line(spans[7], rises[7], WEIGHT, STIFFNESS), length=length[7])
    assert together.bays.sag[7] == pytest.approx(alone.bays.sag[0], rel=1e-9)


def test_a_run_takes_a_length_or_a_counterweight() -> None:
    with pytest.raises(ValueError, match="either a length or a counterweight"):
        run(LINE)
    with pytest.raises(ValueError, match="either a length or a counterweight"):
        slipping(LINE, 0.1, toward_to=True, length=1.0, counterweight=1.0)
    with pytest.raises(ValueError, match="broadcast"):
        run(Line(SPANS, [0.0, 1.0], WEIGHT, STIFFNESS), length=LENGTH)
