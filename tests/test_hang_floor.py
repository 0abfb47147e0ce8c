"""Members over a level floor: what hangs, what lies, and who carries it."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.hang.floor import anchored, lay, strand
from geom.hang.loaded import Loads, Stocks, hang


def _chain(length: float, weight: float = 8.0, stiffness: float = 1e6) -> Stocks:
    return Stocks([[length]], [[weight]], [[stiffness]])


@given(st.floats(0.5, 5.0), st.floats(0.0, 5.0), st.floats(0.02, 0.98), st.floats(3.0, 8.0))
def test_strands_and_what_lies_between_fill_the_span(first: float, last: float, share: float, stiff: float) -> None:
    """Between plumb strands with the rest lying straight and the member just touching."""
    span, stiffness = 12.0, 10.0 ** (stiff + 3.0)
    loose = span + first + last
    touching = float(_just_touching(span, first, last))
    laid = lay(span, (first, last), _chain(touching + share * (loose - touching), stiffness=stiffness))
    assert bool(laid.touches[0])
    h = float(laid.horizontal[0])
    assert h > 0.0
    width = float(laid.at_from.plan[0] + laid.at_to.plan[0] + laid.lying[0] * (1.0 + h / stiffness))
    assert width == pytest.approx(span, rel=1e-9)
    for own, height in ((laid.at_from, first), (laid.at_to, last)):
        plain = strand(height, h, 8.0, stiffness)
        assert float(own.length[0]) == pytest.approx(float(plain.length[0]), rel=1e-9, abs=1e-12)
        assert float(own.down[0]) == pytest.approx(8.0 * float(own.length[0]), rel=1e-12)


def _just_touching(span: float, first: float, last: float) -> float:
    """Give the length of the inextensible member whose lowest point is on the floor."""
    low, high = 1e-6, 1e6  # H/w
    for _ in range(200):
        a = np.sqrt(low * high)
        wide = a * (np.arccosh(1.0 + first / a) + np.arccosh(1.0 + last / a))
        low, high = (a, high) if wide < span else (low, a)
    return float(sum(np.sqrt(h * (h + 2.0 * low)) for h in (first, last)))


@pytest.mark.parametrize("stiffness", [np.inf, 4000.0])
def test_at_the_length_that_just_touches_both_states_are_one(stiffness: float) -> None:
    low, high = 12.5, 16.0
    for _ in range(40):
        middle = 0.5 * (low + high)
        low, high = (
            (low, middle) if lay(12.0, (3.0, 2.0), _chain(middle, stiffness=stiffness)).touches[0] else (middle, high)
        )
    before, after = (lay(12.0, (3.0, 2.0), _chain(length, stiffness=stiffness)) for length in (low, high + 1e-9))
    assert (bool(before.touches[0]), bool(after.touches[0])) == (False, True)
    # what lies grows with the root of what the member is longer
    assert 0.0 < float(after.lying[0]) < 1e-3
    for name in ("horizontal", "pull_from", "pull_to"):
        assert float(getattr(after, name)[0]) == pytest.approx(float(getattr(before, name)[0]), rel=1e-3)


def test_a_strand_stretches_by_what_hangs_under_it() -> None:
    hung = strand(3.0, 0.0, 20.0, 900.0)
    length = float(hung.length[0])
    assert length + 20.0 * length**2 / 1800.0 == pytest.approx(3.0, rel=1e-12)
    assert float(hung.plan[0]) == 0.0


def test_a_strand_follows_the_catenary_from_its_foot() -> None:
    h, w = np.array([3.0, 0.4, 25.0]), 20.0
    hung = strand(h, 40.0, w, np.inf)
    assert hung.length == pytest.approx(np.sqrt(h * (h + 2.0 * 40.0 / w)), rel=1e-11)
    assert hung.plan == pytest.approx(40.0 / w * np.arccosh(1.0 + w * h / 40.0), rel=1e-11)
    assert np.hypot(40.0, hung.down) == pytest.approx(40.0 + w * h, rel=1e-11)


def test_more_than_enough_member_lies_loose_and_pulls_nothing_along() -> None:
    laid = lay(6.0, (2.0, 1.0), _chain(30.0, stiffness=np.inf))
    assert float(laid.horizontal[0]) == 0.0
    assert float(laid.at_from.length[0]) == pytest.approx(2.0, rel=1e-12)
    assert float(laid.pull_to[0]) == pytest.approx(8.0, rel=1e-12)
    assert float(laid.lying[0]) == pytest.approx(27.0, rel=1e-12)


def test_a_member_over_the_floor_hangs_as_if_there_were_none() -> None:
    loads = Loads([[4.0]], [[30.0]])
    laid = lay(9.0, (6.0, 5.0), _chain(10.0), loads=loads)
    free = hang(9.0, -1.0, _chain(10.0), loads=loads)
    assert not laid.touches[0]
    assert float(laid.horizontal[0]) == pytest.approx(float(free.horizontal[0]), rel=1e-13)
    assert float(laid.pull_from[0]) == pytest.approx(float(np.hypot(*free.pull_from[0, [0, 2]])), rel=1e-13)
    assert float(laid.at_from.length[0] + laid.at_to.length[0]) == pytest.approx(10.0, rel=1e-13)
    assert float(laid.lying[0]) == 0.0


def test_a_load_that_lies_on_the_floor_changes_nothing() -> None:
    bare = lay(12.0, (3.0, 2.0), _chain(15.0))
    loaded = lay(12.0, (3.0, 2.0), _chain(15.0), loads=Loads([[7.5]], [[400.0]]))
    assert float(loaded.horizontal[0]) == pytest.approx(float(bare.horizontal[0]), rel=1e-12)
    assert float(loaded.lying[0]) == pytest.approx(float(bare.lying[0]), rel=1e-12)


def test_loads_that_hang_are_carried_by_the_support_they_hang_from() -> None:
    laid = lay(12.0, (3.0, 2.0), _chain(15.0), loads=Loads([[1.0, 14.2]], [[50.0, 20.0]]))
    assert float(laid.at_from.down[0]) == pytest.approx(8.0 * float(laid.at_from.length[0]) + 50.0, rel=1e-12)
    assert float(laid.at_to.down[0]) == pytest.approx(8.0 * float(laid.at_to.length[0]) + 20.0, rel=1e-12)


def test_a_heavy_load_rests_on_the_floor_with_part_of_its_weight() -> None:
    """Between lifting all of the load and leaving it down lie states in which both strands end at it."""
    length = np.linspace(10.6, 11.2, 81)[:, np.newaxis]
    laid = lay(10.0, (2.0, 2.0), Stocks(length, 8.0, np.inf), loads=Loads(0.5 * length, np.full((81, 1), 300.0)))
    resting = laid.touches & (np.abs(laid.lying) < 1e-9)
    assert 5 < np.count_nonzero(resting) < 81
    lifted = laid.at_from.down + laid.at_to.down - 8.0 * length[:, 0]
    assert (lifted[resting] < 300.0).all()
    assert (lifted[resting] >= 0.0).all()
    assert lifted[~laid.touches] == pytest.approx(300.0, rel=1e-12)
    assert (np.diff(laid.horizontal) < 0.0).all()


def test_series_over_a_floor_is_one_stock_twice() -> None:
    twice = Stocks([[6.0, 9.0]], [[8.0, 8.0]], [[1e6, 1e6]])
    one, two = lay(12.0, (3.0, 2.0), _chain(15.0)), lay(12.0, (3.0, 2.0), twice)
    assert float(two.horizontal[0]) == pytest.approx(float(one.horizontal[0]), rel=1e-11)


def test_turned_round_strands_change_sides() -> None:
    loads, back = Loads([[1.0, 13.0]], [[50.0, 20.0]]), Loads([[2.0, 14.0]], [[20.0, 50.0]])
    here = lay(12.0, (3.0, 2.0), Stocks([[6.0, 9.0]], [[8.0, 5.0]], 1e5), loads=loads)
    there = lay(12.0, (2.0, 3.0), Stocks([[9.0, 6.0]], [[5.0, 8.0]], 1e5), loads=back)
    assert float(here.horizontal[0]) == pytest.approx(float(there.horizontal[0]), rel=1e-10)
    assert float(here.at_from.length[0]) == pytest.approx(float(there.at_to.length[0]), rel=1e-10)


def test_points_go_down_along_and_up_again() -> None:
    laid = lay(12.0, (3.0, 2.0), _chain(15.0), loads=Loads([[1.0]], [[50.0]]))
    points = laid.at_arc(np.linspace(0.0, 15.0, 3001))[0]
    assert points[0] == pytest.approx([0.0, 0.0, 0.0], abs=1e-12)
    assert points[-1] == pytest.approx([12.0, 0.0, -1.0], abs=1e-12)
    assert points[:, 2].min() == pytest.approx(-3.0, abs=1e-9)
    steps = np.linalg.norm(np.diff(points, axis=0), axis=1)
    assert steps == pytest.approx(np.full(3000, 0.005), rel=2e-4)
    lying = np.count_nonzero(points[:, 2] < -3.0 + 1e-9) * 0.005
    assert lying == pytest.approx(float(laid.lying[0]), abs=0.011)


def test_friction_holds_what_lies_far_enough() -> None:
    assert anchored([1.0, 4.0, 9.0], 10.0, 5.0, 0.5) == pytest.approx([7.5, 0.0, 0.0], rel=1e-15)


def test_what_cannot_hang_over_a_floor_is_nan_and_loads_on_plan_are_refused() -> None:
    laid = lay(12.0, (3.0, 2.0), Stocks([[11.0], [15.0]], 8.0, np.inf))
    assert np.isnan(laid.horizontal).tolist() == [True, False]
    assert np.isnan(laid.lying).tolist() == [True, False]
    with pytest.raises(ValueError, match="on plan"):
        lay(12.0, (3.0, 2.0), _chain(15.0), loads=Loads([[1.0]], [[5.0]], on_plan=True))
