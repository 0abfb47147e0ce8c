"""Laws that every solved piece keeps, from the text of a design to its figures, lines and pulls (Hypothesis)."""

from __future__ import annotations

import math
from dataclasses import fields

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.design.reader import read
from geom.hang.figures import HangingFigures
from geom.result import Piece, Result
from geom.solve import solve
from geom.units import STANDARD_GRAVITY

ROPE = '[stock.line]\nkind = "rope"\ndiameter = "5 mm"\nmass_per_metre = 0.1\n'
METRES = {"mm": 1e-3, "cm": 1e-2, "m": 1.0, "in": 0.0254, "ft": 0.3048}

spans = st.floats(0.5, 40.0)
levels = st.floats(-5.0, 5.0)
directions = st.floats(0.0, 2 * math.pi)
slacks = st.floats(1.001, 3.0)


def solved(text: str) -> Result:
    reading = read(text, "law")
    assert reading.problems == (), [problem.render("law") for problem in reading.problems]
    assert reading.design is not None
    done = solve(reading.design)
    assert done.problems == (), [problem.render("law") for problem in done.problems]
    assert done.result is not None
    return done.result


def hanging(p: tuple[float, ...], q: tuple[float, ...], fact: str, stock: str = "line", unit: str = "m") -> Piece:
    points = (f"[{', '.join(repr(float(value)) for value in point)}]" for point in (p, q))
    start, end = points
    text = f'unit = "{unit}"\n{ROPE}[[hanging]]\nmark = "S"\nfrom = {start}\nto = {end}\nstock = "{stock}"\n{fact}\n'
    return solved(text).pieces[0]


def ends(span: float, level: float, direction: float) -> tuple[tuple[float, ...], tuple[float, ...]]:
    return (1.0, 2.0, 3.0), (1.0 + span * math.cos(direction), 2.0 + span * math.sin(direction), 3.0 + level)


def figures(piece: Piece) -> HangingFigures:
    assert isinstance(piece.figures, HangingFigures)
    return piece.figures


@given(spans, levels, directions, slacks)
def test_the_pulls_on_both_supports_add_up_to_the_weight_and_nothing_else(
    span: float, level: float, direction: float, slack: float
) -> None:
    piece = hanging(*ends(span, level, direction), f"slack = {slack!r}")
    total = sum(pull.vectors["as hung"] for pull in piece.pulls)
    weight = 0.1 * STANDARD_GRAVITY * figures(piece).pin_to_pin
    largest = max(np.abs(pull.vectors["as hung"]).max() for pull in piece.pulls)
    np.testing.assert_allclose(total, [0.0, 0.0, -weight], rtol=0, atol=1e-12 * largest)


@given(spans, levels, directions, slacks)
def test_each_pull_lies_along_the_members_end_and_moments_about_the_start_balance(
    span: float, level: float, direction: float, slack: float
) -> None:
    """The weight acts at the centroid of the drawn curve; taken about the start it balances the pull at the end."""
    piece = hanging(*ends(span, level, direction), f"slack = {slack!r}")
    start, end = (np.asarray(pull.at) for pull in piece.pulls)
    points = piece.lines[0].curve.points(1e-6)
    steps = np.diff(points, axis=0)
    lengths = np.linalg.norm(steps, axis=1)
    centroid = ((points[1:] + points[:-1]) / 2 * lengths[:, None]).sum(axis=0) / lengths.sum()
    weight = np.array([0.0, 0.0, -0.1 * STANDARD_GRAVITY * figures(piece).pin_to_pin])
    moment = np.cross(centroid - start, weight) + np.cross(end - start, -piece.pulls[1].vectors["as hung"])
    size = np.linalg.norm(np.cross(centroid - start, weight))
    np.testing.assert_allclose(moment, 0.0, atol=float(2e-5 * size))


@given(spans, levels, directions, slacks)
def test_the_drawn_curve_has_the_members_length(span: float, level: float, direction: float, slack: float) -> None:
    piece = hanging(*ends(span, level, direction), f"slack = {slack!r}")
    points = piece.lines[0].curve.points(1e-6)
    drawn = np.linalg.norm(np.diff(points, axis=0), axis=1).sum()
    assert drawn == pytest.approx(figures(piece).pin_to_pin, rel=1e-5)
    assert piece.lines[0].curve.length == pytest.approx(figures(piece).pin_to_pin, rel=1e-12)


@given(spans, levels, slacks, directions)
def test_turning_a_member_on_plan_changes_none_of_its_figures(
    span: float, level: float, slack: float, direction: float
) -> None:
    one = figures(hanging(*ends(span, level, 0.0), f"slack = {slack!r}"))
    other = figures(hanging(*ends(span, level, direction), f"slack = {slack!r}"))
    for field in fields(HangingFigures):
        mine, its = getattr(one, field.name), getattr(other, field.name)
        if isinstance(mine, float) and not math.isnan(mine):
            assert its == pytest.approx(mine, rel=1e-8, abs=1e-9), field.name


@given(spans, levels, slacks)
def test_a_member_seen_from_its_other_end_hangs_alike(span: float, level: float, slack: float) -> None:
    p, q = ends(span, level, 0.7)
    one, other = figures(hanging(p, q, f"slack = {slack!r}")), figures(hanging(q, p, f"slack = {slack!r}"))
    assert other.sag == pytest.approx(one.sag, rel=1e-9)
    assert other.lowest == pytest.approx(one.lowest, rel=1e-9, abs=1e-9)
    assert (other.pull_from, other.pull_to) == pytest.approx((one.pull_to, one.pull_from), rel=1e-9)
    assert (other.slope_from, other.slope_to) == pytest.approx((one.slope_to, one.slope_from), rel=1e-7, abs=1e-9)
    assert other.level_difference == -one.level_difference


@given(spans, levels, slacks, st.floats(0.01, 100.0))
def test_a_member_twice_as_large_has_twice_the_sag_and_twice_the_pull(
    span: float, level: float, slack: float, factor: float
) -> None:
    p, q = ends(span, level, 0.3)
    large = [tuple(factor * value for value in point) for point in (p, q)]
    one, other = (
        figures(hanging(p, q, f"slack = {slack!r}")),
        figures(hanging(large[0], large[1], f"slack = {slack!r}")),
    )
    assert other.sag == pytest.approx(factor * one.sag, rel=1e-8)
    assert other.pull_horizontal == pytest.approx(factor * one.pull_horizontal, rel=1e-8)
    assert other.parameter == pytest.approx(factor * one.parameter, rel=1e-8)


@given(spans, levels, slacks, st.sampled_from(sorted(METRES)))
def test_units_in_make_no_difference_to_the_figures(span: float, level: float, slack: float, unit: str) -> None:
    p, q = ends(span, level, 0.2)
    there = [tuple(value / METRES[unit] for value in point) for point in (p, q)]
    one, other = (
        figures(hanging(p, q, f"slack = {slack!r}")),
        figures(hanging(there[0], there[1], f"slack = {slack!r}", unit=unit)),
    )
    assert other.sag == pytest.approx(one.sag, rel=1e-9)
    assert other.pull_from == pytest.approx(one.pull_from, rel=1e-9)


@given(spans, levels, st.lists(st.floats(1.01, 3.0), min_size=2, max_size=2, unique=True))
def test_longer_means_deeper_and_a_smaller_pull(span: float, level: float, pair: list[float]) -> None:
    low, high = sorted(pair)
    p, q = ends(span, level, 1.0)
    one, other = figures(hanging(p, q, f"slack = {low!r}")), figures(hanging(p, q, f"slack = {high!r}"))
    assert other.sag >= one.sag
    assert other.lowest <= one.lowest
    assert other.pull_horizontal <= one.pull_horizontal


@given(spans, levels, st.floats(0.02, 2.0))
def test_each_fact_gives_back_the_member_it_was_read_from(span: float, level: float, ratio: float) -> None:
    p, q = ends(span, level, 0.4)
    one = figures(hanging(p, q, f"sag = {ratio * span!r}"))
    facts = [f"length = {one.pin_to_pin!r}", f'pull = "{one.pull_horizontal!r} N"']
    if 0.02 < one.lowest_at / one.span < 0.98:
        facts.append(f"lowest = {one.lowest!r}")
    for fact in facts:
        assert figures(hanging(p, q, fact)).sag == pytest.approx(ratio * span, rel=1e-6), fact


@given(
    st.floats(0.6, 6.0), st.floats(-0.4, 0.4), st.floats(0.05, 0.8), st.sampled_from(["any", "odd", "even"]),
    st.sampled_from(["nearest", "up", "down"]),
)  # fmt: skip
def test_whole_links_keep_the_parity_and_the_rounding_asked_for(
    span: float, level: float, ratio: float, parity: str, rounding: str
) -> None:
    p, q = ends(span, level, 0.0)
    wished = figures(hanging(p, q, f"sag = {ratio * span!r}")).pin_to_pin
    fact = f'sag = {ratio * span!r}\nparity = "{parity}"\nround = "{rounding}"'
    piece = hanging(p, q, fact, stock="DIN 763-6") if _reaches(p, q, wished, parity, rounding) else None
    if piece is None:
        return
    made = figures(piece)
    assert made.links is not None
    count, pitch = made.links.count, made.links.pitch
    assert count % 2 == {"odd": 1, "even": 0}.get(parity, count % 2)
    assert made.pin_to_pin == pytest.approx(count * pitch, rel=1e-12)
    assert made.pin_to_pin > math.hypot(made.span, made.level_difference)
    step = pitch if parity == "any" else 2 * pitch
    if rounding == "up":
        assert -1e-9 <= made.pin_to_pin - wished < step + 1e-9
    elif rounding == "down":
        assert -1e-9 <= wished - made.pin_to_pin < step + 1e-9
    assert made.links.ends == ("same way" if count % 2 else "crossed")


def _reaches(p: tuple[float, ...], q: tuple[float, ...], wished: float, parity: str, rounding: str) -> bool:
    """Whether rounding down leaves enough links to reach: else the design is refused, as it should be."""
    pitch = 0.042
    count = math.floor(wished / pitch)
    if parity != "any" and count % 2 != (1 if parity == "odd" else 0):
        count -= 1
    return rounding != "down" or count * pitch > math.dist(p, q) * (1 + 1e-9)


@given(st.lists(st.floats(-0.3, 0.3), min_size=3, max_size=6), st.floats(0.1, 0.6))
def test_a_tied_runs_bays_are_the_hangings_between_its_supports(steps: list[float], sag: float) -> None:
    points = [(2.0 * n, 0.5 * n * n, 3.0 + step) for n, step in enumerate(steps)]
    supports = ", ".join(f"[{x!r}, {y!r}, {z!r}]" for x, y, z in points)
    text = f'unit = "m"\n{ROPE}[[run]]\nmark = "R"\nsupports = [{supports}]\nstock = "line"\nsag = {sag!r}\n'
    result = solved(text)
    (run,) = result.pieces
    for number, bay in enumerate(run.parts):
        alone = figures(hanging(points[number], points[number + 1], f"sag = {sag!r}"))
        assert bay.figures.pull_from == pytest.approx(alone.pull_from, rel=1e-12)
        assert bay.figures.lowest == pytest.approx(alone.lowest, rel=1e-12)
    assert run.figures.pin_to_pin == pytest.approx(sum(bay.figures.pin_to_pin for bay in run.parts), rel=1e-12)
    assert [support.mark for support in result.supports] == [
        *(f"R.{n + 1}.from" for n in range(len(points) - 1)),
        f"R.{len(points) - 1}.to",
    ]
    total = sum(support.pull for support in result.supports)
    weight = 0.1 * STANDARD_GRAVITY * run.figures.pin_to_pin
    np.testing.assert_allclose(total, [0, 0, -weight], atol=1e-9 * weight * 100)
