"""Hangings that stretch and warm, from the text of a design to their figures: published numbers, laws, cases."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.hang.figures import HangingFigures
from geom.result import Case, Piece, Result
from geom.units import STANDARD_GRAVITY
from tests.test_pipeline_laws import solved

spans = st.floats(1.0, 60.0)
levels = st.floats(-0.8, 0.8)
slacks = st.floats(0.999, 2.5)
stiffnesses = st.floats(2e4, 1e7)  # N, of a rope of 2 N/m: down to a strain of a tenth under its own weight


def design(body: str, *, weight: float = 2.0, stiffness: float = 1e6, head: str = "") -> Result:
    """Return the result of a design in metres with the stock `rope`, of N/m and N, 12e-6 per kelvin."""
    stock = (
        f'[stock.rope]\nkind = "rope"\ndiameter = 0.005\nmass_per_metre = {weight / STANDARD_GRAVITY!r}\n'
        f'area = "1000000 mm2"\nmodulus = "{stiffness!r} Pa"\nexpansion = 12e-6\n'
    )
    return solved(f'unit = "m"\n{head}{stock}{body}')


def hung(span: float, rise: float, fact: str, **keys: float | str) -> Piece:
    head = str(keys.pop("head", ""))
    body = (
        f'[[hanging]]\nmark = "S"\nfrom = [0, 0, 10]\nto = [{0.6 * span!r}, {0.8 * span!r}, {10 + rise!r}]\n'
        f'stock = "rope"\n{fact}\n'
    )
    return design(body, head=head, **keys).pieces[0]  # type: ignore[arg-type]


def figures(piece: Piece) -> HangingFigures:
    assert isinstance(piece.figures, HangingFigures)
    return piece.figures


def case(piece: Piece, name: str) -> Case:
    return next(one for one in piece.cases or () if one.case == name)


@pytest.mark.parametrize(
    ("span", "drop", "stiffness", "length", "horizontal", "upper"),
    [
        # Irvine, Cable Structures, 1981, ch. 1, his two equations closed in 40-digit arithmetic to 1e-29.
        (100.0, 0.0, 1e6, 105.0, 1800.85916256, 1050.0),
        (100.0, 20.0, 1e6, 101.5, 7434.42311935, 2510.63965846),
        (80.0, 60.0, 2e6, 110.0, 851.700750004, 1916.10883975),
        (1.0, 50.0, 2e6, 50.2, 2.884401679, 1002.84972734),
        (0.01, 30.0, 2e6, 40.0, 0.00911624684471, 699.940012176),
    ],
)
def test_elastic_catenaries_are_met_from_a_design_file(
    span: float, drop: float, stiffness: float, length: float, horizontal: float, upper: float
) -> None:
    piece = hung(span, -drop, f"length = {length}", weight=20.0, stiffness=stiffness)
    assert figures(piece).pull_horizontal == pytest.approx(horizontal, rel=1e-9)
    assert -piece.pulls[0].vectors["as hung"][2] == pytest.approx(upper, rel=1e-9)
    assert figures(piece).pin_to_pin == length


def test_the_least_end_pull_of_a_span_is_the_published_one() -> None:
    """Lamb, Mechanics, in Encyclopaedia Britannica, 11th ed.: u tanh u = 1; OEIS A085984. Of 2 N/m over 10 m."""
    least = 0.754439780769 * 20.0
    deep = figures(hung(10.0, 0.0, f'end_pull = {1.0000001 * least!r}\nbranch = "deep"', stiffness=1e14))
    shallow = figures(hung(10.0, 0.0, f'end_pull = {1.0000001 * least!r}\nbranch = "shallow"', stiffness=1e14))
    for hang in (deep, shallow):
        assert hang.sag == pytest.approx(3.37661500969, rel=2e-3)
        assert math.degrees(hang.slope_from) == pytest.approx(56.4658351275, rel=1e-3)
    assert shallow.sag < 3.37661500969 < deep.sag


def test_the_taut_unlevel_span_of_a_known_slip_comes_out_right() -> None:
    """Math Help Forum 96398: ends (0, 10) and (20, 15), length 20.7; its printed 61.9388 is of a rounded input."""
    assert figures(hung(20.0, 5.0, "length = 20.7", stiffness=9e14)).parameter == pytest.approx(61.9172929915, rel=1e-7)


def test_a_length_worked_out_as_span_plus_sag_is_answered_with_what_it_gives() -> None:
    """10 ft and half a foot of sag: the rule's 10.5 ft hang 1.393 ft deep (worked out from the exact catenary)."""
    text = (
        'unit = "ft"\n[[hanging]]\nmark = "S"\nfrom = [0, 0, 10]\nto = [10, 0, 10]\nstock = "line"\nlength = 10.5\n'
        '[stock.line]\nkind = "rope"\nmass_per_metre = 0.1\ndiameter = "5 mm"\n'
    )
    (piece,) = solved(text).pieces
    assert figures(piece).sag / 0.3048 == pytest.approx(1.393, abs=5e-4)
    (said,) = [caution.text for caution in piece.cautions if caution.code == "what the length gives"]
    assert "gives a sag of 1'-4 11/16\", and not the 0'-6\"" in said  # 1.393 ft is 16.71 in


@given(spans, levels, slacks, stiffnesses)
def test_supports_carry_the_weight_in_every_case(span: float, rise: float, slack: float, stiffness: float) -> None:
    head = '[site]\ntemperature = [-20, 5, 40]\nsupport_give = "5 mm"\n'
    piece = hung(span, rise * span, f"slack = {slack!r}", stiffness=stiffness, head=head)
    weight = 2.0 * figures(piece).pin_to_pin
    assert {one.case for one in piece.cases or ()} == {"coldest", "as hung", "hottest", "supports give"}
    for name in ("coldest", "as hung", "hottest", "supports give"):
        start, end = (pull.vectors[name] for pull in piece.pulls)
        size = float(np.abs(start).max())
        np.testing.assert_allclose(start + end, [0.0, 0.0, -weight], rtol=0, atol=1e-11 * size + 1e-9 * weight)
        assert case(piece, name).pull_from == pytest.approx(float(np.linalg.norm(start)), rel=1e-9)


@given(spans, levels, slacks, stiffnesses)
def test_the_drawn_curve_is_the_stretched_one(span: float, rise: float, slack: float, stiffness: float) -> None:
    piece = hung(span, rise * span, f"slack = {slack!r}", stiffness=stiffness)
    hang, curve = figures(piece), piece.lines[0].curve
    assert curve.length == pytest.approx(hang.hung_length, rel=1e-10)
    assert hang.hung_length > hang.pin_to_pin
    points = curve.points(1e-5 * span)
    plan = np.hypot(*points[:, :2].T)
    assert (10 + rise * plan - points[:, 2]).max() == pytest.approx(hang.sag, rel=1e-3, abs=3e-5 * span)
    assert points[:, 2].min() == pytest.approx(hang.lowest, abs=3e-5 * span)


@given(spans, levels, st.floats(0.02, 1.5), stiffnesses)
def test_every_fact_as_hung_gives_back_the_member_it_was_read_from(
    span: float, rise: float, ratio: float, stiffness: float
) -> None:
    head = "[site]\ntemperature = [-20, 5, 40]\n"
    one = hung(span, rise * span, f"sag = {ratio * span!r}", stiffness=stiffness, head=head)
    hang = figures(one)
    at = one.lines[0].curve.at([0.3 * one.lines[0].curve.length]).points[0]
    facts = {
        f"length = {hang.pin_to_pin!r}": 1e-6,
        f"sag_mid = {hang.sag_mid!r}": 1e-7,
        f"pull = {hang.pull_horizontal!r}": 1e-7,
        f"through = [{', '.join(repr(float(value)) for value in at)}]": 1e-6,
        f"slope_from = {math.degrees(hang.slope_from)!r}": 1e-6,
        f"slope_to = {math.degrees(hang.slope_to)!r}": 1e-6,
    }
    for fact, rel in facts.items():
        again = figures(hung(span, rise * span, fact, stiffness=stiffness, head=head))
        assert again.sag == pytest.approx(hang.sag, rel=rel), fact
        assert again.pin_to_pin == pytest.approx(hang.pin_to_pin, rel=1e-7), fact


@given(spans, levels, st.floats(0.02, 0.3), st.booleans())
def test_an_end_pull_is_met_on_its_branch(span: float, rise: float, ratio: float, deep: bool) -> None:
    one = figures(hung(span, rise * span, f"sag = {(2.0 if deep else ratio) * span!r}"))
    pull = max(one.pull_from, one.pull_to)
    branch = "deep" if deep else "shallow"
    again = figures(hung(span, rise * span, f'end_pull = {pull!r}\nbranch = "{branch}"'))
    assert max(again.pull_from, again.pull_to) == pytest.approx(pull, rel=1e-9)
    assert again.sag == pytest.approx(one.sag, rel=1e-5)


@given(spans, levels, slacks)
def test_warmer_hangs_deeper_and_pulls_less_and_so_do_supports_that_lean_in(
    span: float, rise: float, slack: float
) -> None:
    head = '[site]\ntemperature = [-20, 5, 40]\nsupport_give = "5 mm"\n'
    piece = hung(span, rise * span, f"slack = {slack!r}", head=head)
    cold, now, hot, given_way = (case(piece, name) for name in ("coldest", "as hung", "hottest", "supports give"))
    assert cold.sag < now.sag < hot.sag
    assert now.sag < given_way.sag
    assert cold.pull_horizontal > now.pull_horizontal > hot.pull_horizontal
    assert (cold.temperature, now.temperature, hot.temperature) == (-20.0, 5.0, 40.0)


@given(spans, levels, slacks, stiffnesses)
def test_without_a_site_all_temperatures_are_the_shops(
    span: float, rise: float, slack: float, stiffness: float
) -> None:
    piece = hung(span, rise * span, f"slack = {slack!r}", stiffness=stiffness)
    assert [one.case for one in piece.cases or ()] == ["coldest", "as hung", "hottest"]
    assert len({(one.sag, one.pull_from, one.temperature) for one in piece.cases or ()}) == 1


@given(spans, levels, st.floats(1.002, 2.0))
def test_sensitivities_foretell_what_small_changes_do(span: float, rise: float, slack: float) -> None:
    """One step's difference against the derivative: they part by the second derivative, under a share of the step."""
    head = "[site]\ntemperature = [4.99, 5, 5.01]\n"
    length = slack * math.hypot(span, rise * span)
    one = hung(span, rise * span, f"length = {length!r}", head=head)
    step = 1e-5 * (slack - 1.0) * span
    longer = figures(hung(span, rise * span, f"length = {length + step!r}", head=head))
    raised = figures(hung(span, rise * span + step, f"length = {length!r}", head=head))
    wider = figures(hung(span + step, rise * span, f"length = {length!r}", head=head))
    hang = figures(one)
    assert hang.sag_per_support is not None
    expected = {
        "length": (longer.sag, hang.sag_per_length),
        "raised": (raised.sag, hang.sag_per_support.to_up),
        "wider": (wider.sag, hang.sag_per_support.to_out),
    }
    for name, (sag, slope) in expected.items():
        assert (sag - hang.sag) / step == pytest.approx(slope, rel=1e-3, abs=1e-3), name
    by_heat = (case(one, "hottest").sag - case(one, "coldest").sag) / 0.02
    assert by_heat == pytest.approx(hang.sag_per_kelvin, rel=1e-4, abs=1e-9 * span)


@given(spans, levels, st.floats(1.002, 2.0), st.floats(0.0, 0.02))
def test_the_band_holds_what_a_shop_within_its_tolerance_makes(
    span: float, rise: float, slack: float, off: float
) -> None:
    head = '[shop]\ncut_tolerance = "20 mm"\n[site]\nsupport_give = "10 mm"\n'
    length = slack * math.hypot(span, rise * span) + 0.03
    band = figures(hung(span, rise * span, f"length = {length!r}", head=head)).band
    assert band is not None
    for made in (length - off, length + off):
        piece = hung(span, rise * span, f"length = {made!r}", head=head)
        assert band.sag_least - 1e-9 <= figures(piece).sag <= band.sag_greatest + 1e-9
        assert case(piece, "supports give").sag <= band.sag_greatest + 1e-9
        assert band.lowest_least - 1e-9 <= figures(piece).lowest <= band.lowest_greatest + 1e-9
    assert (band.shorter, band.longer, band.supports_nearer) == pytest.approx((0.02, 0.02, 0.01), rel=1e-12)


def test_a_chains_band_is_of_its_pitch_and_a_member_without_tolerances_has_none() -> None:
    chain = '[[hanging]]\nmark = "C"\nfrom = [0, 0, 3]\nto = [2, 0, 3]\nstock = "DIN 763-6"\nsag = 0.3\n'
    (piece,) = design(chain).pieces
    links, band = figures(piece).links, figures(piece).band
    assert links is not None
    assert band is not None
    assert band.longer == pytest.approx(links.count * 1.3e-3, rel=1e-12)
    assert figures(hung(2.0, 0.0, "sag = 0.3")).band is None


def test_the_least_clearance_is_that_of_a_fine_search_and_moves_with_its_case() -> None:
    ground = "clear = { above = [[0, 2], [3, 4.5], [8, 1], [30, 6]], at_least = 1 }"
    head = '[site]\ntemperature = [-20, 20, 60]\nsupport_give = "0.5 m"\n'
    piece = hung(20.0, 2.0, f"slack = 1.1\n{ground}", head=head)
    points = piece.lines[0].curve.points(1e-7)
    x = np.hypot(*points[:, :2].T)
    fine = np.linspace(0.0, 20.0, 200_001)  # its steps of 0.1 mm, one of them on the ridge
    gaps = np.interp(fine, x, points[:, 2]) - np.interp(fine, [0, 3, 8, 30], [2, 4.5, 1, 6])
    assert figures(piece).clearance == pytest.approx(float(gaps.min()), abs=1e-6)
    assert figures(piece).clearance_at == pytest.approx(float(fine[gaps.argmin()]), abs=1e-4)
    assert case(piece, "hottest").clearance < case(piece, "coldest").clearance
    assert case(piece, "supports give").clearance < figures(piece).clearance


def test_a_stock_without_a_modulus_does_not_stretch_and_is_cautioned() -> None:
    text = 'unit = "m"\n[[hanging]]\nmark = "S"\nfrom = [0, 0, 3]\nto = [4, 0, 3]\nstock = "line"\nsag = 0.4\n'
    stock = '[stock.line]\nkind = "rope"\nmass_per_metre = 0.1\ndiameter = "5 mm"\n'
    heat = "[site]\ntemperature = [-10, 20, 40]\n"
    (piece,) = solved(text + stock + heat).pieces
    assert {"no stretch", "no expansion"} <= {caution.code for caution in piece.cautions}
    assert figures(piece).hung_length == figures(piece).pin_to_pin
    assert math.isnan(piece.used.EA)
    assert "no stretch" not in {caution.code for caution in hung(4.0, 0.0, "sag = 0.4").cautions}


def test_a_member_without_stretch_that_the_cold_makes_too_short_is_said_to_be() -> None:
    text = 'unit = "m"\n[[hanging]]\nmark = "S"\nfrom = [0, 0, 3]\nto = [4, 0, 3]\nstock = "line"\nlength = 4.0001\n'
    stock = '[stock.line]\nkind = "rope"\nmass_per_metre = 0.1\ndiameter = "5 mm"\nexpansion = 12e-6\n'
    (piece,) = solved(text + stock + "[site]\ntemperature = [-10, 20, 40]\n").pieces
    assert math.isnan(case(piece, "coldest").sag)
    assert "coldest" in next(caution.text for caution in piece.cautions if caution.code == "does not reach")
    assert "coldest" not in piece.pulls[0].vectors
