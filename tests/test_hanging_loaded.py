"""Loaded hangings, from the text of a design to their figures: published numbers, scenarios, laws."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from geom.design.reader import read
from geom.hang.person import OnIt
from geom.hang.wind import InWind
from geom.result import Piece
from geom.solve import solve
from tests.test_hanging_stretch import case, design, figures, hung

spans = st.floats(2.0, 40.0)
levels = st.floats(-0.6, 0.6)
slacks = st.floats(1.005, 1.8)
places = st.lists(st.floats(0.05, 0.95), min_size=1, max_size=4, unique=True)
forces = st.floats(1.0, 200.0)
few = settings(max_examples=12)  # each a whole design, solved in up to eight cases
SITE = '[site]\ntemperature = [-20, 5, 40]\nsupport_give = "5 mm"\nwind = "300 Pa"\n'


def listed(loads: list[str]) -> str:
    return f"loads = [{', '.join('{ ' + load + ' }' for load in loads)}]"


def light(span: float, rise: float, fact: str, loads: list[str]) -> Piece:
    """A weightless, unstretchable cable as nearly as a stock can be: a newton for a kilometre, 9e14 N."""
    return hung(span, rise, f"{fact}\n{listed(loads)}", weight=1e-3, stiffness=9e14)


def force(newtons: float, at: str) -> str:
    return f"{at}, force = {newtons!r}"


def test_loads_at_given_places_on_plan_of_a_cable_by_its_depth_under_one() -> None:
    """Tayal, Engineering Mechanics, Ex. 10.1: 400, 600, 400 N at 2, 4, 6 m of 8 m; D, at 4 m, 2.25 m below the right
    end, which is 2 m above the left one. As printed: H 1600 N, V 1100 N, E 1.375 m deep, Tmax 1941.648784 N."""
    loads = [force(newtons, f"at_plan = {x}") for newtons, x in ((400.0, 2), (600.0, 4), (400.0, 6))]
    piece = light(8.0, 2.0, "through = [2.4, 3.2, 9.75]", loads)
    hang = figures(piece)
    assert hang.pull_horizontal == pytest.approx(1600.0, rel=1e-5)
    assert -piece.pulls[1].vectors["as hung"][2] == pytest.approx(1100.0, rel=1e-5)
    assert hang.pull_to == pytest.approx(1941.648784, rel=1e-5)
    assert hang.pull_from == pytest.approx(1627.88206, rel=1e-5)
    assert 12.0 - hang.loads[2].at[2] == pytest.approx(1.375, abs=1e-5)


@pytest.mark.parametrize(
    ("loads", "depth_at", "depth", "horizontal", "tension"),
    [
        # Hibbeler & Gupta, Engineering Mechanics, Ex. 7.13 as recomputed: TBC 10.2035 kN next to 12 m under 8 m
        (((4000.0, 3.0), (15000.0, 8.0), (3000.0, 16.0)), 8.0, 12.0, None, 13568.754958),
        # a load of 50 kN at 5 m, 1 m deep, over 20 m: H = 187.5 kN, the long side 187.91620473 kN (opened problem)
        (((50000.0, 5.0),), 5.0, 1.0, 187500.0, None),
    ],
)
def test_a_cable_held_at_a_depth_under_one_load_pulls_as_published(
    loads: tuple[tuple[float, float], ...], depth_at: float, depth: float, horizontal: float | None,
    tension: float | None,
) -> None:  # fmt: skip
    span = 18.0 if tension else 20.0
    point = [0.6 * depth_at, 0.8 * depth_at, 10.0 - depth]
    piece = light(span, 0.0, f"through = {point}", [force(f, f"at_plan = {x}") for f, x in loads])
    if horizontal is not None:
        assert figures(piece).pull_horizontal == pytest.approx(horizontal, rel=1e-6)
        assert figures(piece).pull_to == pytest.approx(187916.20473, rel=1e-6)
        assert figures(piece).hung_length == pytest.approx(20.132315892, rel=1e-8)
    if tension is not None:
        assert figures(piece).pull_from == pytest.approx(tension, rel=2e-6)
        assert figures(piece).pull_to == pytest.approx(11836.8539364, rel=2e-6)


LANTERNS = listed(
    [f'mark = "L{k}", at_plan = {16 * k / 6!r}, mass = "6 kg", hanger = 0.6, area = "0.06 m2", drag = 1.2'
     for k in range(1, 6)]
)  # fmt: skip
YARD = (
    '[[hanging]]\nmark = "W"\nfrom = [0, 0, 7.6]\nto = [16, 0, 7.6]\nstock = "bare"\n'
    '[stock.bare]\nkind = "rope"\nmass_per_metre = 0.15\ndiameter = 0.006\n[site]\nwind = "500 Pa"\n'
)


def yard(sag: float) -> Piece:
    return design(YARD.replace('stock = "bare"\n', f'stock = "bare"\nsag_mid = {sag}\n{LANTERNS}\n')).pieces[0]


def test_a_lantern_wire_pulls_and_kinks_as_its_scenario_says() -> None:
    """A scenario worked out twice, independently, from its inputs: 0.15 kg/m without stretch, five lanterns of 6 kg."""
    piece = yard(0.64)
    hang = figures(piece)
    assert hang.pull_horizontal == pytest.approx(1177.0, abs=0.05)
    assert -piece.pulls[0].vectors["as hung"][2] == pytest.approx(158.9, abs=0.05)
    assert hang.pull_from == pytest.approx(1187.6, abs=0.05)
    assert math.degrees(hang.slope_from) == pytest.approx(7.69, abs=0.005)
    assert [7.6 - load.at[2] for load in hang.loads[:3]] == pytest.approx([0.3556, 0.5689, 0.64], abs=5e-5)
    steps = np.diff([0.0, *(load.mark_ for load in hang.loads)])
    assert steps[:3] == pytest.approx([2.6903, 2.6752, 2.6676], abs=5e-5)
    assert hang.pin_to_pin == pytest.approx(16.0661, abs=5e-5)
    assert min(load.underside for load in hang.loads) == pytest.approx(6.36, abs=1e-9)
    assert figures(yard(0.32)).pull_horizontal == pytest.approx(2353.7, abs=0.05)


def test_the_lantern_wire_in_wind_is_the_scenarios() -> None:
    piece = yard(0.64)
    wind = case(piece, "wind")
    assert isinstance(wind.added, InWind)
    assert wind.standing == "indicative"
    assert wind.added.aside == pytest.approx(0.318, abs=5e-4)
    assert math.degrees(wind.added.loads[2].sway) == pytest.approx(31.46, abs=5e-3)
    assert wind.added.loads[2].aside == pytest.approx(0.632, abs=1e-3)
    assert wind.pull_from == pytest.approx(1369.0, abs=0.5)
    assert "no drag" in {caution.code for caution in piece.cautions}


def sitter(weight: str = '"100 kg"') -> Piece:
    body = (
        '[[hanging]]\nmark = "Q"\nfrom = "P"\nto = [1.8, 0, 0.9]\nstock = "c"\nlinks = 35\n'
        f"fittings = {{ from = 0.032, to = 0.032 }}\ncheck_load = {weight}\n"
        "[support.P]\nat = [0, 0, 0.9]\nheight = 0.9\n"
        '[stock.c]\nkind = "chain"\nwire = 0.008\npitch = 0.052\nwidth = 0.0336\nmass_per_metre = 1.1\n'
    )
    return design(body).pieces[0]


def test_a_person_on_a_bollard_chain_pulls_as_the_scenario_says() -> None:
    """A scenario worked out twice, independently: 35 links of 52 mm and two shackles of 32 over 1.8 m, 100 kg."""
    piece = sitter()
    mid, worst = case(piece, "person at mid"), case(piece, "person at worst end")
    assert (mid.standing, worst.standing) == ("misuse", "misuse")
    assert mid.pull_horizontal == pytest.approx(1603.0, abs=0.05)
    assert mid.pull_from == pytest.approx(1679.4, abs=0.05)
    assert max(worst.pull_from, worst.pull_to) == pytest.approx(1686.4, abs=0.05)
    assert isinstance(worst.added, OnIt)
    assert worst.added.mark == pytest.approx(0.859, abs=5e-4)
    vector = piece.pulls[0].vectors["person at mid"]
    assert math.hypot(vector[0], vector[1]) * 0.9 == pytest.approx(1442.7, abs=0.05)


def test_a_misuse_loads_one_member_at_a_time() -> None:
    body = (
        '[[run]]\nmark = "R"\nsupports = [[0, 0, 1], [2, 0, 1], [4, 0, 1]]\nstock = "rope"\nsag = 0.2\n'
        'check_load = "100 kg"\n'
    )
    result = design(body)
    middle = next(support for support in result.supports if support.mark == "R.2.from")
    found = {one.case: one for one in middle.by_case}
    weight = 100 * 9.80665
    assert -found["person at mid"].pull[2] < -found["as hung"].pull[2] + 0.75 * weight
    assert abs(found["person at mid"].pull[0]) > 1000.0


@few
@given(spans, levels, slacks, places, forces)
def test_supports_carry_the_weight_and_the_loads_in_every_case(
    span: float, rise: float, slack: float, shares: list[float], newtons: float
) -> None:
    length = slack * math.hypot(span, rise * span)
    loads = [
        f'at_plan = {share * span!r}, force = {newtons!r}, area = "0.01 m2", drag = 1.0' if number % 2 else
        f"at = {share * length!r}, force = {newtons!r}"
        for number, share in enumerate(shares)
    ]  # fmt: skip
    piece = hung(span, rise * span, f"slack = {slack!r}\n{listed(loads)}\ncheck_load = 80", head=SITE)
    own = 2.0 * figures(piece).pin_to_pin
    total = own + newtons * len(shares)
    expected = {"bare": own, "person at mid": total + 80 * 9.80665, "person at worst end": total + 80 * 9.80665}
    for one in piece.cases or ():
        down = -sum(pull.vectors[one.case][2] for pull in piece.pulls)
        assert down == pytest.approx(expected.get(one.case, total), rel=1e-9), one.case
        level = sum(pull.vectors[one.case][:2] for pull in piece.pulls)
        aside = 300 * 0.01 * sum(number % 2 for number in range(len(shares))) if one.case == "wind" else 0.0
        assert float(np.linalg.norm(level)) == pytest.approx(aside, rel=1e-6, abs=1e-7 * one.pull_from)


@few
@given(spans, levels, slacks, st.floats(0.05, 0.95))
def test_a_load_of_nothing_changes_nothing(span: float, rise: float, slack: float, share: float) -> None:
    plain = figures(hung(span, rise * span, f"slack = {slack!r}"))
    empty = figures(hung(span, rise * span, f"slack = {slack!r}\nloads = [{{ at_plan = {share * span!r}, mass = 0 }}]"))
    for name in ("sag", "sag_mid", "lowest", "pull_horizontal", "pull_from", "slope_to", "hung_length"):
        assert getattr(empty, name) == pytest.approx(getattr(plain, name), rel=1e-8, abs=1e-9), name
    for name in ("sag_per_length", "sag_per_kelvin"):
        assert getattr(empty, name) == pytest.approx(getattr(plain, name), rel=1e-6, abs=1e-12), name


@few
@given(spans, levels, slacks, st.floats(0.05, 0.95), forces)
def test_two_loads_at_one_place_are_one_of_double(
    span: float, rise: float, slack: float, share: float, newtons: float
) -> None:
    at = f"at = {share * slack * math.hypot(span, rise * span)!r}"
    one = figures(hung(span, rise * span, f"slack = {slack!r}\n{listed([force(2 * newtons, at)])}"))
    two = figures(hung(span, rise * span, f"slack = {slack!r}\n{listed([force(newtons, at)] * 2)}"))
    assert two.sag == pytest.approx(one.sag, rel=1e-8)
    assert two.pull_from == pytest.approx(one.pull_from, rel=1e-8)
    assert two.loads[0].at == pytest.approx(two.loads[1].at, abs=1e-9)


@few
@given(spans, levels, st.floats(0.02, 0.6), places, forces, st.booleans())
def test_every_fact_gives_back_the_loaded_member_it_was_read_from(
    span: float, rise: float, ratio: float, shares: list[float], newtons: float, spread: bool
) -> None:
    carried = listed([force(newtons, f"at_plan = {share * span!r}") for share in shares])
    carried += '\nspread = "7 N/m"' if spread else ""
    head = "[site]\ntemperature = [-20, 5, 40]\n"
    piece = hung(span, rise * span, f"sag = {ratio * span!r}\n{carried}", head=head)
    hang = figures(piece)
    assert hang.sag == pytest.approx(ratio * span, rel=1e-8)
    at = piece.lines[0].curve.at([0.37 * piece.lines[0].curve.length]).points[0]
    facts = {
        f"length = {hang.pin_to_pin!r}": 1e-5,
        f"sag_mid = {hang.sag_mid!r}": 1e-6,
        f"pull = {hang.pull_horizontal!r}": 1e-6,
        f"through = [{', '.join(repr(float(value)) for value in at)}]": 1e-5,
        f"slope_from = {math.degrees(hang.slope_from)!r}": 1e-5,
        f"slope_to = {math.degrees(hang.slope_to)!r}": 1e-5,
    }
    end = f"[{0.6 * span!r}, {0.8 * span!r}, {10 + rise * span!r}]"
    body = "".join(
        f'[[hanging]]\nmark = "F{n}"\nfrom = [0, 0, 10]\nto = {end}\nstock = "rope"\n{fact}\n{carried}\n'
        for n, fact in enumerate(facts)
    )
    for again, (fact, rel) in zip(design(body, head=head).pieces, facts.items(), strict=True):
        assert figures(again).sag == pytest.approx(hang.sag, rel=rel), fact


@few
@given(spans, levels, slacks, places, forces, st.booleans())
def test_the_drawn_curve_goes_through_the_loads_and_is_as_long_as_it_hangs(
    span: float, rise: float, slack: float, shares: list[float], newtons: float, spread: bool
) -> None:
    carried = listed([force(newtons, f"at_plan = {share * span!r}") for share in shares])
    carried += '\nspread = "7 N/m"' if spread else ""
    piece = hung(span, rise * span, f"slack = {slack!r}\n{carried}")
    hang, curve = figures(piece), piece.lines[0].curve
    assert curve.length == pytest.approx(hang.hung_length, rel=1e-6 if spread else 1e-9)
    points = curve.points(1e-5 * span)
    for load in hang.loads:
        assert np.linalg.norm(points - load.at, axis=1).min() <= 1e-8 * span
    plan = np.hypot(*points[:, :2].T)
    assert (10 + rise * plan - points[:, 2]).max() == pytest.approx(hang.sag, rel=1e-3, abs=3e-5 * span)


@few
@given(spans, levels, slacks)
def test_a_load_spread_evenly_over_a_light_member_hangs_it_in_a_parabola(
    span: float, rise: float, slack: float
) -> None:
    """H = q S^2/8f (Galileo's problem as Beeckman solved it, 1615), of q = 50 N/m and next to no own weight."""
    piece = hung(span, rise * span, f'slack = {slack!r}\nspread = "50 N/m"', weight=1e-4, stiffness=9e14)
    hang = figures(piece)
    assert hang.pull_horizontal == pytest.approx(50 * span**2 / (8 * hang.sag), rel=1e-4)
    assert hang.sag_mid == pytest.approx(hang.sag, rel=1e-4)
    assert math.isnan(hang.parameter)


def test_loads_marked_on_plan_as_hung_stay_at_their_marks_when_it_is_hot() -> None:
    """In another case the same marks hang elsewhere on plan, so that the sag is that of loads along the member."""
    head = "[site]\ntemperature = [-40, 20, 80]\n"
    plan = hung(20.0, 1.0, f"slack = 1.02\n{listed([force(80.0, 'at_plan = 4')])}", head=head)
    (load,) = figures(plan).loads
    along = hung(20.0, 1.0, f"slack = 1.02\n{listed([force(80.0, f'at = {load.mark_!r}')])}", head=head)
    for name in ("coldest", "as hung", "hottest"):
        assert case(along, name).sag == pytest.approx(case(plan, name).sag, rel=1e-9)


def test_the_clearance_is_that_of_the_lowest_hanger_over_its_ground() -> None:
    ground = "clear = { above = [[0, 0], [9, 3], [20, 0]], at_least = 1 }"
    loads = listed(["at_plan = 9, force = 50.0, hanger = 2", "at_plan = 3, force = 50.0, hanger = 3"])
    hang = figures(hung(20.0, 0.0, f"slack = 1.05\n{loads}\n{ground}"))
    gaps = [hang.loads[0].underside - 3.0, hang.loads[1].underside - 1.0]
    assert hang.clearance == pytest.approx(min(gaps), abs=1e-9)
    assert hang.clearance_at == pytest.approx(9.0 if gaps[0] < gaps[1] else 3.0, abs=1e-6)


def test_the_least_clearance_of_a_loaded_member_is_that_of_a_fine_search() -> None:
    ground = "clear = { above = [[0, 2], [3, 4.5], [8, 1], [30, 6]], at_least = 1 }"
    piece = hung(20.0, 2.0, f'slack = 1.1\nspread = "3 N/m"\n{listed([force(30.0, "at_plan = 6")])}\n{ground}')
    points = piece.lines[0].curve.points(1e-7)
    fine = np.linspace(0.0, 20.0, 200_001)
    gaps = np.interp(fine, np.hypot(*points[:, :2].T), points[:, 2]) - np.interp(fine, [0, 3, 8, 30], [2, 4.5, 1, 6])
    assert figures(piece).clearance == pytest.approx(float(gaps.min()), abs=2e-6)


def test_a_runs_own_loads_hang_in_their_bays_and_a_bays_beside_them() -> None:
    body = (
        '[[run]]\nmark = "R"\nsupports = [[0, 0, 5], [4, 0, 5], [4, 6, 5]]\nstock = "rope"\nsag = 0.5\n'
        'loads = [{ mark = "A", at_plan = 1, force = "30 N" }, { mark = "B", at_plan = 7, force = "20 N" }]\n'
        'spread = "5 N/m"\nbays = [{ bay = 2, loads = [{ at = 1, force = "10 N" }], spread = "9 N/m" }]\n'
    )
    (run,) = design(body).pieces
    first, second = run.parts
    assert [load.mark for load in figures(first).loads] == ["A"]
    assert [load.mark for load in figures(second).loads] == ["B", "L2"]
    assert figures(second).loads[0].at == pytest.approx([4.0, 3.0, figures(second).loads[0].at[2]], abs=1e-9)
    alone = hung(4.0, 0.0, 'sag = 0.5\nloads = [{ at_plan = 1, force = "30 N" }]\nspread = "5 N/m"')
    assert figures(first).pull_horizontal == pytest.approx(figures(alone).pull_horizontal, rel=1e-9)


def test_a_runs_loads_stand_in_its_unfolded_elevation_at_their_plan_distances() -> None:
    body = (
        '[[run]]\nmark = "R"\nsupports = [[0, 0, 5], [4, 0, 5], [4, 6, 5]]\nstock = "rope"\nsag = 0.5\n'
        'loads = [{ mark = "A", at_plan = 1, force = "30 N", hanger = 0.4 }, { mark = "B", at_plan = 7, force = 9 }]\n'
    )
    (run,) = design(body).pieces
    view = run.views[0]
    shown = {label.text: label for label in view.labels or () if label.role == "load"}
    assert {name: float(label.at[0]) for name, label in shown.items()} == pytest.approx({"A": 1.0, "B": 7.0}, abs=1e-9)
    assert shown["A"].reach == 0.4
    steps = {one.says: one.value for one in view.dimensions if one.says.startswith("to ")}
    assert steps["to B"] == pytest.approx(3.0, abs=1e-9)
    places = [label.at for label in run.labels if label.role == "load"]
    assert places[1][:2] == pytest.approx([4.0, 3.0], abs=1e-9)


def _codes(text: str) -> dict[str, str]:
    reading = read(text, "cautions")
    assert reading.design is not None
    result = solve(reading.design).result
    assert result is not None
    return {caution.code: caution.text for caution in result.cautions}


def test_a_person_who_breaks_the_chain_is_cautioned_by_the_case() -> None:
    """DIN 5685-1 form A, 2 mm: 1.25 kN at break; 90 kg on a shallow swag pull more, its own weight far less."""
    swag = (
        'unit = "m"\n[[hanging]]\nmark = "S"\nfrom = [0, 0, 1]\nto = [1.5, 0, 1]\nstock = "DIN 5685 A-2"\nsag = 0.18\n'
    )
    assert "over the breaking load" not in _codes(swag)
    said = _codes(swag + 'check_load = "90 kg"\n')["over the breaking load"]
    assert "person" in said
    assert "1.25 kN" in said


def test_a_wire_that_only_stretching_makes_reach_is_said_to_be_shorter_than_its_chord() -> None:
    wire = 'unit = "m"\n[[hanging]]\nmark = "W"\nfrom = [0, 0, 5]\nto = [22, 0, 5.4]\nstock = "7x19-5"\nlength = {}\n'
    assert "stretched to reach" in _codes(wire.format(21.9))
    assert "stretched to reach" not in _codes(wire.format(22.1))
