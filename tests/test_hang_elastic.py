"""Members that stretch against 40-digit arithmetic on Irvine's two equations, their limits and their laws."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import cache
from typing import Any, TypeAlias

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray

from geom.hang import catenary, elastic, elastic_facts
from geom.hang.elastic import Stretched

Floats: TypeAlias = NDArray[np.float64]
Solve: TypeAlias = Callable[..., Stretched]
WEIGHT = 3.0  # N/m


@pytest.fixture(scope="module", autouse=True)
def forty_digits() -> Iterator[None]:
    with mpmath.workdps(40):
        yield


class Exact:
    """One member from Irvine's equations as printed ("Cable Structures", 1981, ch. 1), for a unit weight.

    Solved in both end forces by Newton's method with numbers that bear the cancellation, from a nearby start.
    """

    def __init__(self, row: Floats, start: tuple[float, float]) -> None:
        self.span, self.rise, excess, self.soft = (mpmath.mpf(float(x)) for x in row)
        self.length = mpmath.sqrt(self.span**2 + self.rise**2) + excess
        self.a, self.y0 = mpmath.mpf(start[0]), mpmath.mpf(start[1])
        for _ in range(40):
            if self._step() < mpmath.mpf(10) ** -30:
                return
        raise AssertionError("the reference did not converge")

    def pull(self, s: mpmath.mpf) -> mpmath.mpf:
        return mpmath.sqrt(self.a**2 + (self.y0 + s) ** 2)

    def x(self, s: mpmath.mpf) -> mpmath.mpf:
        turned = mpmath.asinh((self.y0 + s) / self.a) - mpmath.asinh(self.y0 / self.a)
        return self.a * (self.soft * s + turned)

    def z(self, s: mpmath.mpf) -> mpmath.mpf:
        return self.soft * s * (self.y0 + s / 2) + self.pull(s) - self.pull(mpmath.mpf(0))

    def _step(self) -> mpmath.mpf:
        s, zero = self.length, mpmath.mpf(0)
        off_x, off_z = self.x(s) - self.span, self.z(s) - self.rise
        by_tension = (self.y0 + s) / self.pull(s), self.y0 / self.pull(zero)
        xa = off_x / self.a + self.span / self.a - by_tension[0] + by_tension[1]
        cross = self.a / self.pull(s) - self.a / self.pull(zero)
        zy = self.soft * s + by_tension[0] - by_tension[1]
        determinant = xa * zy - cross * cross
        da, dy = (off_x * zy - cross * off_z) / determinant, (xa * off_z - cross * off_x) / determinant
        self.a, self.y0 = self.a - min(da, self.a / 2), self.y0 - dy
        return abs(da / self.a) + abs(dy) / (abs(self.y0) + self.a)

    def arc_at_mid(self) -> mpmath.mpf:
        low, high = mpmath.mpf(0), self.length
        s = high / 2
        for _ in range(150):
            low, high = (low, s) if self.x(s) > self.span / 2 else (s, high)
            step = s - (self.x(s) - self.span / 2) / (self.a * (self.soft + 1 / self.pull(s)))
            s, before = (step if low < step < high else (low + high) / 2), s
            if abs(s - before) < mpmath.mpf(10) ** -30 * self.length:
                return s
        raise AssertionError("mid-span was not found")

    def values(self) -> dict[str, mpmath.mpf]:
        zero, end = mpmath.mpf(0), self.length
        sag_arc = self.a * self.rise / self.span - self.y0
        low = min(max(-self.y0, zero), end)
        y = self.y0, self.y0 + end
        turned = mpmath.asinh(y[1] / self.a) - mpmath.asinh(y[0] / self.a)
        weighed = (y[1] * self.pull(end) - y[0] * self.pull(zero) + self.a**2 * turned) / 2
        return {
            "horizontal": WEIGHT * self.a,
            "vertical_from": -WEIGHT * y[0],
            "vertical_to": WEIGHT * y[1],
            "at_from": WEIGHT * self.pull(zero),
            "at_to": WEIGHT * self.pull(end),
            "sag": self.rise / self.span * self.x(sag_arc) - self.z(sag_arc),
            "sag_at": self.x(sag_arc),
            "sag_mid": self.rise / 2 - self.z(self.arc_at_mid()),
            "below_from": -min(self.z(low), self.z(zero), self.z(end)),
            "lowest_at": self.x(low),
            "hung_length": end + self.soft * weighed,
            "slope_from": -mpmath.atan(y[0] / self.a),
            "slope_to": mpmath.atan(y[1] / self.a),
            "plan_third": self.x(end / 3),
            "elevation_third": self.z(end / 3),
        }


def _sweep() -> Floats:
    """Give (n, 4) spans, level differences, excesses and w/EA: slack, taut and under the chord, level to steep."""
    slacks = [-0.3, -0.02, -1e-3, -1e-6, 0.0, 1e-6, 1e-3, 0.05, 0.6, 3.0, 40.0]
    slopes = [0.0, 1e-3, -0.4, 3.0, -40.0]
    strains = [1e-9, 1e-6, 1e-4, 1e-2, 0.3]  # w times the chord over EA
    chords = [(2.7, 2.7 * m, 2.7 * float(np.hypot(1.0, m))) for m in slopes]
    rows = [(s, v, e * d, b / d) for s, v, d in chords for e in slacks for b in strains]
    nearly_plumb = [(1e-4, 2.0, e, b) for e in (-0.1, 0.0, 0.001, 1.0) for b in (1e-4, 1e-2)]
    return np.array(rows + nearly_plumb)


SWEEP = _sweep()


def _hang_sweep() -> Stretched:
    span, rise, excess, soft = SWEEP.T
    length = np.hypot(span, rise) + excess
    return elastic.from_unstretched(span, rise, length, WEIGHT, WEIGHT / soft, excess=excess)


@pytest.fixture(scope="module")
def swept() -> Stretched:
    return _hang_sweep()


@cache
def _exact_sweep() -> list[dict[str, mpmath.mpf]]:
    near = _hang_sweep()
    starts = zip(near.parameter, -near.pulls.vertical_from / WEIGHT, strict=True)
    return [Exact(row, start).values() for row, start in zip(SWEEP, starts, strict=True)]


def _errors(name: str, computed: Floats, scale: Floats | None = None) -> Floats:
    exact = [values[name] for values in _exact_sweep()]
    sizes = np.array([abs(float(e)) for e in exact]) if scale is None else scale
    off = np.array([float(abs(mpmath.mpf(float(c)) - e)) for c, e in zip(computed, exact, strict=True)])
    return np.asarray(off / sizes)


def test_no_member_of_the_sweep_is_missing(swept: Stretched) -> None:
    assert np.isfinite(swept.u).all()


@pytest.mark.parametrize("name", ["horizontal", "at_from", "at_to", "sag", "sag_mid", "hung_length"])
def test_pulls_and_sags_are_right_to_1e_14(swept: Stretched, name: str) -> None:
    values = getattr(swept, name, None)
    assert _errors(name, getattr(swept.pulls, name) if values is None else values).max() < 1e-14


@pytest.mark.parametrize("name", ["vertical_from", "vertical_to"])
def test_vertical_pulls_are_right_to_1e_14_of_the_greatest_pull(swept: Stretched, name: str) -> None:
    greatest = np.maximum(swept.pulls.at_from, swept.pulls.at_to)
    assert _errors(name, getattr(swept.pulls, name), greatest).max() < 1e-14


@pytest.mark.parametrize(("name", "within"), [("sag_at", 1e-13), ("lowest_at", 1e-10), ("below_from", 1e-13)])
def test_places_are_right_to_a_part_of_the_member(swept: Stretched, name: str, within: float) -> None:
    scale = swept.length if name == "below_from" else swept.span
    assert _errors(name, getattr(swept, name), scale).max() < within


@pytest.mark.parametrize("name", ["slope_from", "slope_to"])
def test_slopes_are_right_to_1e_11_radians(swept: Stretched, name: str) -> None:
    assert _errors(name, getattr(swept, name), np.ones(len(SWEEP))).max() < 1e-11


def test_points_along_are_right(swept: Stretched) -> None:
    third = swept.at_arc(swept.length[:, np.newaxis] / 3.0)
    assert _errors("plan_third", third.plan[:, 0], swept.span).max() < 2e-10  # the span of a plumb one is 1e-4
    assert _errors("elevation_third", third.elevation[:, 0], swept.length).max() < 1e-14


def test_two_hundred_thousand_wild_members_reach_their_supports() -> None:
    """Rubber and cable, ends a millionth of the rise apart, a hundred lengths of chord: none is missed."""
    rng = np.random.default_rng(1981)
    count = 200_000
    span, stretch = 10.0 ** rng.uniform(-6, 2, count), 10.0 ** rng.uniform(-12, 0.3, count)
    rise = span * 10.0 ** rng.uniform(-3, 6, count) * rng.choice([-1.0, 1.0], count)
    chord = np.hypot(span, rise)
    slack = np.where(
        rng.random(count) < 0.5, 10.0 ** rng.uniform(-12, 2, count), -(10.0 ** rng.uniform(-12, -0.1, count))
    )
    length = chord * (1.0 + slack)
    hang = elastic.from_unstretched(span, rise, length, WEIGHT, WEIGHT * length / stretch)
    end = hang.at_arc(length[:, np.newaxis])
    assert np.abs(end.elevation[:, 0] - rise).max() < 1e-12 * (chord + length).max()
    assert (np.abs(end.elevation[:, 0] - rise) / (chord + length)).max() < 1e-12
    assert (np.abs(end.plan[:, 0] - span) / span).max() < 1e-9


LENGTHS = st.tuples(
    st.floats(0.1, 50.0),
    st.floats(-3.0, 3.0),
    st.floats(-9.0, 1.5),
    st.sampled_from([-1.0, 1.0]),
    st.floats(-9.0, -1.0),
).map(lambda t: _member(*t))


def _member(span: float, slope: float, slack: float, sign: float, stretch: float) -> tuple[float, ...]:
    """Give span, level difference, length, weight and stiffness; no more than a fifth short of the chord."""
    length = span * float(np.hypot(1.0, slope)) * (1.0 + max(sign * 10.0**slack, -0.2))
    return span, span * slope, length, WEIGHT, WEIGHT * length / 10.0**stretch


@given(LENGTHS)
def test_supports_carry_the_weight_that_was_cut(member: tuple[float, ...]) -> None:
    hang = elastic.from_unstretched(*member)
    pulls = hang.pulls
    greatest = float(max(pulls.at_from, pulls.at_to))
    assert float(pulls.vertical_from + pulls.vertical_to) == pytest.approx(
        WEIGHT * member[2], rel=1e-12, abs=1e-13 * greatest
    )
    for whole, down in ((pulls.at_from, pulls.vertical_from), (pulls.at_to, pulls.vertical_to)):
        assert float(np.hypot(pulls.horizontal, down)) == pytest.approx(float(whole), rel=1e-14)


@given(LENGTHS)
def test_pull_falls_down_the_member_by_the_energy_stored_in_it(member: tuple[float, ...]) -> None:
    """T + T^2/2EA less w z is the same all along (from dT/dz = w/(1 + T/EA))."""
    _, rise, _, weight, stiffness = member
    pulls = elastic.from_unstretched(*member).pulls
    low, high = (float(t + t * t / (2.0 * stiffness)) for t in (pulls.at_from, pulls.at_to))
    assert high - low == pytest.approx(weight * rise, rel=1e-9, abs=1e-12 * max(low, high))


@given(LENGTHS)
def test_mirrored_supports_mirror_the_stretched_member(member: tuple[float, ...]) -> None:
    here = elastic.from_unstretched(*member)
    there = elastic.from_unstretched(member[0], -member[1], *member[2:])
    for name in ("u", "horizontal", "hung_length"):
        assert float(getattr(here, name)) == pytest.approx(float(getattr(there, name)), rel=1e-14)
    assert float(here.sag) == pytest.approx(float(there.sag), rel=1e-11)
    assert float(here.sag_at) == pytest.approx(member[0] - float(there.sag_at), rel=1e-12)
    assert float(here.sag_mid) == pytest.approx(float(there.sag_mid), rel=1e-9)
    assert float(here.below_from) == float(there.below_to)
    assert float(here.slope_from) == float(there.slope_to)


@given(LENGTHS, st.floats(1e-3, 1e3))
def test_scaling_lengths_and_stiffness_scales_the_member(member: tuple[float, ...], factor: float) -> None:
    span, rise, length, weight, stiffness = member
    small = elastic.from_unstretched(*member)
    large = elastic.from_unstretched(factor * span, factor * rise, factor * length, weight, factor * stiffness)
    # scaling rounds the lengths, which a near-taut member feels by its excess
    rounding = 1e-13 + 4e-16 * member[2] / max(abs(float(small.excess)), 1e-9 * member[2])
    assert float(large.horizontal) == pytest.approx(factor * float(small.horizontal), rel=rounding)
    assert float(large.sag) == pytest.approx(factor * float(small.sag), rel=rounding)


@pytest.mark.parametrize("slack", [1e-8, 1e-3, 0.2, 5.0, 300.0])
@pytest.mark.parametrize("slope", [0.0, -0.3, 8.0])
def test_without_stretch_it_is_the_catenary(slack: float, slope: float) -> None:
    span = 7.0
    excess = slack * span * float(np.hypot(1.0, slope))
    rigid = catenary.from_excess(span, slope * span, excess)
    hang = elastic.from_unstretched(span, slope * span, rigid.length, WEIGHT, np.inf, excess=excess)
    pulls = rigid.pulls(WEIGHT)
    for name in ("u", "parameter", "sag", "sag_mid", "sag_at", "slope_from", "slope_to"):
        assert float(getattr(hang, name)) == pytest.approx(float(getattr(rigid, name)), rel=1e-13), name
    for name in ("horizontal", "at_from", "at_to", "vertical_from", "vertical_to"):
        assert float(getattr(hang.pulls, name)) == pytest.approx(float(getattr(pulls, name)), rel=1e-12), name
    assert float(hang.lowest_at) == pytest.approx(float(rigid.lowest_at), rel=1e-12, abs=1e-13 * span)
    assert float(hang.hung_length) == float(hang.length)


def test_a_stiffer_member_comes_nearer_to_the_catenary_in_proportion() -> None:
    rigid = elastic.from_unstretched(30.0, 5.0, 32.0, WEIGHT, np.inf)
    off = [
        float(elastic.from_unstretched(30.0, 5.0, 32.0, WEIGHT, ea).sag / rigid.sag) - 1.0 for ea in (1e6, 1e8, 1e10)
    ]
    assert off[0] / off[1] == pytest.approx(100.0, rel=1e-2)
    assert off[1] / off[2] == pytest.approx(100.0, rel=1e-4)


def test_a_very_taut_member_pulls_like_a_spring() -> None:
    """For a weight that is next to nothing T = EA (D/L - 1)."""
    hang = elastic.from_unstretched(3.0, 4.0, 4.9, 1e-9, 1000.0)
    assert float(hang.pulls.at_to) == pytest.approx(1000.0 * (5.0 / 4.9 - 1.0), rel=1e-9)
    assert float(hang.hung_length) == pytest.approx(5.0, rel=1e-12)


def test_slack_strands_on_one_plumb_line_stretch_by_what_hangs_under_them() -> None:
    """A strand l long hangs l + w l^2/2EA deep; both reach the same depth."""
    hang = elastic.from_unstretched(0.0, 6.0, 10.0, 20.0, 4000.0)
    long, short = (float(down) / 20.0 for down in (hang.pulls.vertical_to, hang.pulls.vertical_from))
    assert long + short == pytest.approx(10.0, rel=1e-14)
    depths = [part + 20.0 * part**2 / 8000.0 for part in (long, short)]
    assert depths[0] - depths[1] == pytest.approx(6.0, rel=1e-14)
    assert float(hang.below_from) == pytest.approx(depths[1], rel=1e-14)
    assert float(hang.sag) == pytest.approx(depths[0], rel=1e-14)
    assert float(hang.horizontal) == 0.0
    assert float(hang.slope_from) == float(hang.slope_to) == pytest.approx(np.pi / 2.0, rel=1e-15)


def test_a_taut_plumb_member_carries_its_weight_from_the_upper_support() -> None:
    hang = elastic.from_unstretched(0.0, -6.0, 5.9, 20.0, 9000.0)
    pulls = hang.pulls
    assert float(pulls.at_from - pulls.at_to) == pytest.approx(118.0, rel=1e-13)
    # stretch = mean pull times length over EA
    assert 5.9 * (1.0 + float(pulls.at_from + pulls.at_to) / 18000.0) == pytest.approx(6.0, rel=1e-14)
    assert float(pulls.vertical_to) == pytest.approx(-float(pulls.at_to), rel=1e-15)
    assert float(hang.lowest) == pytest.approx(-6.0, rel=1e-15)


def test_an_exactly_taut_member_that_does_not_stretch_is_straight() -> None:
    hang = elastic.from_unstretched(3.0, 4.0, 5.0, WEIGHT, np.inf)
    assert float(hang.horizontal) == np.inf
    assert float(hang.sag) == float(hang.sag_mid) == 0.0
    assert float(hang.slope_to) == pytest.approx(np.arctan2(4.0, 3.0), rel=1e-15)
    middle = hang.at_arc(2.5)
    assert (float(middle.plan), float(middle.elevation)) == pytest.approx((1.5, 2.0), rel=1e-15)
    assert float(hang.arc_at(1.5)) == pytest.approx(2.5, rel=1e-15)


@pytest.mark.parametrize(
    "member",
    [
        (1.0, 0.0, 0.9, 1.0, np.inf),
        (0.0, 0.0, 1.0, 1.0, 9.0),
        (-1.0, 0.0, 2.0, 1.0, 9.0),
        (1.0, 0.0, 0.0, 1.0, 9.0),
        (1.0, 0.0, 2.0, 0.0, 9.0),
        (1.0, 0.0, 2.0, -1.0, 9.0),
        (1.0, 0.0, 2.0, 1.0, 0.0),
        (1.0, np.nan, 2.0, 1.0, 9.0),
        (np.inf, 0.0, 2.0, 1.0, 9.0),
        (1.0, 0.0, np.inf, 1.0, 9.0),
    ],
)
def test_what_cannot_hang_is_nan_and_leaves_its_neighbours_alone(member: tuple[float, ...]) -> None:
    good = (2.0, 0.5, 2.5, 3.0, 5000.0)
    both = elastic.from_unstretched(*np.array([member, good]).T)
    alone = elastic.from_unstretched(*good)
    for name in ("span", "length", "u", "horizontal", "sag", "sag_mid", "lowest", "hung_length", "slope_from"):
        values = getattr(both, name)
        assert np.isnan(values[0]), name
        assert values[1] == getattr(alone, name), name


def test_shapes_broadcast_and_large_batches_agree_with_single_members() -> None:
    spans, lengths = np.linspace(1.0, 2.0, 70_000), np.array([[2.0], [2.5]])
    batch = elastic.from_unstretched(spans, 0.3, lengths, 4.0, 6000.0)
    assert batch.sag.shape == (2, 70_000)
    one = elastic.from_unstretched(spans[69_123], 0.3, 2.5, 4.0, 6000.0)
    assert batch.sag[1, 69_123] == pytest.approx(float(one.sag), rel=1e-15)
    assert batch.at_arc(np.linspace(0.0, 2.0, 3)).plan.shape == (2, 70_000, 3)
    with pytest.raises(ValueError, match="broadcast"):
        elastic.from_unstretched(np.ones(2), 0.0, np.ones(3), 1.0, 1.0)
    assert elastic.from_unstretched(np.zeros((0, 2)), 0.0, 1.0, 1.0, 1.0).sag.shape == (0, 2)


def test_arc_at_a_plan_distance_leads_back_to_it() -> None:
    hang, span = _hang_sweep(), SWEEP[:, 0]
    plan = span[:, np.newaxis] * np.array([0.0, 0.1, 0.5, 0.8])
    found = hang.at_arc(hang.arc_at(plan)).plan
    assert (np.abs(found - plan) / span[:, np.newaxis]).max() < 1e-9


def test_warming_lengthens_what_is_not_stretched() -> None:
    assert float(elastic.unstretched_at(30.0, 11e-6, 12.0)) == pytest.approx(30.00396, rel=1e-15)
    assert elastic.unstretched_at(30.0, [0.0, 11e-6], -5.0).tolist() == [30.0, 30.0 * (1.0 - 55e-6)]


# ---------------------------------------------------------------- what is known as it hangs


def _slack_and_taut(count: int = 3000) -> Stretched:
    rng = np.random.default_rng(5)
    span = 10.0 ** rng.uniform(-1, 2, count)
    rise, stretch = span * rng.uniform(-3.0, 3.0, count), 10.0 ** rng.uniform(-8, -1.5, count)
    slack = np.where(
        rng.random(count) < 0.6, 10.0 ** rng.uniform(-6, 0.7, count), -(10.0 ** rng.uniform(-6, -1.5, count))
    )
    length = np.hypot(span, rise) * (1.0 + slack)
    return elastic.from_unstretched(span, rise, length, WEIGHT, WEIGHT * length / stretch)


HUNG = _slack_and_taut()
FACTS: dict[str, tuple[Solve, Any, float]] = {
    "pull": (elastic_facts.from_pull, HUNG.horizontal, 1e-14),
    "sag": (elastic_facts.from_sag, HUNG.sag, 1e-14),
    "sag_mid": (elastic_facts.from_sag_mid, HUNG.sag_mid, 1e-14),
    # these are seen against the chord, from which a taut member differs by a millionth
    "slope_from": (elastic_facts.from_slope, HUNG.slope_from, 1e-8),
}


@pytest.mark.parametrize("fact", FACTS)
def test_a_fact_leads_back_to_the_length_it_came_from(fact: str) -> None:
    solve, value, within = FACTS[fact]
    found = solve(HUNG.span, HUNG.level_difference, value, WEIGHT, HUNG.stiffness)
    assert (np.abs(found.length / HUNG.length - 1.0)).max() < within
    assert (np.abs(found.horizontal / HUNG.horizontal - 1.0)).max() < within
    assert (np.abs(found.excess - HUNG.excess) / HUNG.length).max() < within


def test_slope_at_the_other_end_leads_back_to_the_length() -> None:
    found = elastic_facts.from_slope(
        HUNG.span, HUNG.level_difference, HUNG.slope_to, WEIGHT, HUNG.stiffness, at_to=True
    )
    assert (np.abs(found.horizontal / HUNG.horizontal - 1.0)).max() < 1e-8


def test_lowest_point_leads_back_to_the_length_where_it_is_inside_the_span() -> None:
    depth = np.minimum(HUNG.below_from, HUNG.below_to)
    inside = depth > 1e-3 * HUNG.span
    found = elastic_facts.from_lowest(HUNG.span, HUNG.level_difference, depth, WEIGHT, HUNG.stiffness)
    assert np.count_nonzero(inside) > 500
    assert (np.abs(found.length / HUNG.length - 1.0))[inside].max() < 1e-13


def test_lowest_point_of_two_strands_settles_their_lengths() -> None:
    found = elastic_facts.from_lowest(0.0, 2.0, 1.5, 20.0, 900.0)
    assert float(found.below_from) == pytest.approx(1.5, rel=1e-14)
    assert float(found.below_to) == pytest.approx(3.5, rel=1e-14)


def test_a_point_passed_leads_back_to_the_length() -> None:
    plan = HUNG.span * np.linspace(0.03, 0.97, HUNG.span.size)
    place = HUNG.at_arc(HUNG.arc_at(plan[:, np.newaxis]))
    found = elastic_facts.from_point(
        HUNG.span, HUNG.level_difference, (plan, place.elevation[:, 0]), WEIGHT, HUNG.stiffness
    )
    assert (np.abs(found.length / HUNG.length - 1.0)).max() < 1e-9
    assert (np.abs(found.horizontal / HUNG.horizontal - 1.0)).max() < 1e-7


def test_end_pull_has_a_shallow_and_a_deep_member_one_of_which_is_ours() -> None:
    pull = np.maximum(HUNG.pulls.at_from, HUNG.pulls.at_to)
    member = HUNG.span, HUNG.level_difference, pull, WEIGHT, HUNG.stiffness
    shallow, deep = (elastic_facts.from_end_pull(*member, deep=branch) for branch in (False, True))
    for found in (shallow, deep):
        assert (np.abs(np.maximum(found.pulls.at_from, found.pulls.at_to) / pull - 1.0)).max() < 1e-12
    assert (shallow.length <= deep.length).all()
    # the two meet where the pull is least, and are then told apart to the root of the rounding
    nearest = np.minimum(np.abs(shallow.length / HUNG.length - 1.0), np.abs(deep.length / HUNG.length - 1.0))
    assert nearest.max() < 1e-7
    assert np.quantile(nearest, 0.99) < 1e-12


def test_least_end_pull_is_least_and_is_the_published_one_without_stretch() -> None:
    assert float(elastic_facts.least_end_pull(8.0, 0.0, 5.0, np.inf)) == pytest.approx(
        0.754439780769 * 40.0,
        rel=1e-12,  # sinh(u0)/2, u0 tanh u0 = 1, derived
    )
    least = elastic_facts.least_end_pull(HUNG.span, HUNG.level_difference, WEIGHT, HUNG.stiffness)
    assert (np.maximum(HUNG.pulls.at_from, HUNG.pulls.at_to) >= least * (1.0 - 1e-14)).all()
    below = elastic_facts.from_end_pull(HUNG.span, HUNG.level_difference, 0.999999 * least, WEIGHT, HUNG.stiffness)
    assert np.isnan(below.length).all()


def test_an_end_pull_far_above_the_least_needs_stretch_only_on_the_shallow_branch() -> None:
    shallow = elastic_facts.from_end_pull(10.0, 0.0, 5000.0, 2.0, 1e5)
    assert float(shallow.length) < 10.0
    deep = elastic_facts.from_end_pull(10.0, 0.0, 5000.0, 2.0, 1e7, deep=True)
    assert float(deep.length) == pytest.approx(2.0 * 5000.0 / 2.0, rel=1e-3)  # two strands of weight T each


@pytest.mark.parametrize("sag", [0.0, -1.0, np.nan])
@pytest.mark.parametrize("solve", [elastic_facts.from_sag, elastic_facts.from_sag_mid, elastic_facts.from_pull])
def test_a_fact_that_cannot_be_is_nan(solve: Solve, sag: float) -> None:
    assert np.isnan(float(solve(3.0, 1.0, sag, WEIGHT, 100.0).length))


@pytest.mark.parametrize("elevation", [0.1, 0.5, np.nan])
def test_no_member_passes_on_or_over_its_chord(elevation: float) -> None:
    assert np.isnan(float(elastic_facts.from_point(3.0, 0.3, (1.0, elevation), WEIGHT, 100.0).length))


def test_no_sag_is_taut_where_nothing_stretches() -> None:
    hang = elastic_facts.from_sag(3.0, 4.0, 0.0, WEIGHT, np.inf)
    assert (float(hang.length), float(hang.excess), float(hang.u)) == (5.0, 0.0, 0.0)
