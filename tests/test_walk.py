"""The walk from frozen values to plain data, and the figures file made by it."""

from __future__ import annotations

import dataclasses
import json
import math
import time
from dataclasses import dataclass

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray

from export import __version__
from export.figures import chunks, document, piece
from export.walk import plain, rounded
from geom.result import (
    Case,
    Degrees,
    DegreesArray,
    Metres,
    MetresArray,
    Newtons,
    NewtonsArray,
    PerKelvin,
    Quantity,
    Rows,
    Unit,
    fixed,
)
from tests import hand_made


@dataclass(frozen=True)
class Inner:
    reach: Metres
    side: str


@dataclass(frozen=True, eq=False)
class Everything:
    sag: Metres
    pull: Newtons | None
    slope: Degrees
    expansion: PerKelvin
    count: int
    closed: bool
    name: str | None
    at: MetresArray
    slopes: DegreesArray
    spans: tuple[Metres, ...]
    inner: Inner
    inners: tuple[Inner, ...]
    outlines: tuple[MetresArray, ...]


EVERYTHING = Everything(
    sag=0.25,
    pull=None,
    slope=math.pi / 4,
    expansion=1.2e-5,
    count=35,
    closed=True,
    name=None,
    at=fixed([1, 2, 3]),
    slopes=fixed([math.pi / 2, -math.pi / 6]),
    spans=(1.5, 2.5),
    inner=Inner(0.5, "left"),
    inners=(Inner(math.nan, "right"),),
    outlines=(fixed([[0, 0], [1, 0]]), fixed([[2, 2]])),
)


def test_a_key_is_the_fields_name_and_the_unit_of_its_annotation() -> None:
    assert plain(EVERYTHING) == {
        "sag_m": 0.25,
        "pull_N": None,
        "slope_deg": 45.0,
        "expansion_per_K": 1.2e-5,
        "count": 35,
        "closed": True,
        "name": None,
        "at_m": [1.0, 2.0, 3.0],
        "slopes_deg": [90.0, -30.0],
        "spans_m": [1.5, 2.5],
        "inner": {"reach_m": 0.5, "side": "left"},
        "inners": [{"reach_m": None, "side": "right"}],
        "outlines_m": [[[0.0, 0.0], [1.0, 0.0]], [[2.0, 2.0]]],
    }


def test_plain_data_is_of_pythons_own_types_only() -> None:
    """A numpy number among them would be written differently, or not at all, by json."""

    def types(value: object) -> set[type]:
        inside = value.values() if isinstance(value, dict) else value if isinstance(value, list) else ()
        return {type(value)}.union(*map(types, inside))

    made = plain([EVERYTHING, np.float64(1.5), np.int64(3), np.bool_(True), np.array(2.5), np.array(["a"])])
    assert types(made) == {list, dict, float, int, bool, str, type(None)}


@pytest.mark.parametrize("bad", [math.nan, math.inf, -math.inf])
def test_a_number_without_meaning_is_null_wherever_it_stands(bad: float) -> None:
    assert plain(bad) is None
    assert plain(np.array([[1.0, bad], [bad, 2.0]])) == [[1.0, None], [None, 2.0]]
    assert plain(Quantity("sag", bad, Unit("m"))) == {"sag_m": None}
    assert plain((1.0, bad)) == [1.0, None]


def test_a_quantity_is_one_key_with_its_unit_and_factor() -> None:
    assert plain(Quantity("slope_from", math.pi / 2, Unit("deg", 180 / math.pi))) == {"slope_from_deg": 90.0}
    assert plain(Quantity("links", 35)) == {"links": 35}


@dataclass(frozen=True, eq=False)
class Members(Rows):
    mark: tuple[str, ...]
    ends: NDArray[np.int64]
    force: NewtonsArray
    slope: DegreesArray
    links: tuple[int | None, ...]


def test_rows_of_arrays_leave_as_a_list_of_objects() -> None:
    members = Members(
        ("N1.1", "N1.2"), np.array([[0, 1], [1, 2]]), fixed([5.0, math.nan]), fixed([math.pi, 0.0]), (25, None)
    )
    assert plain(members) == [
        {"mark": "N1.1", "ends": [0, 1], "force_N": 5.0, "slope_deg": 180.0, "links": 25},
        {"mark": "N1.2", "ends": [1, 2], "force_N": None, "slope_deg": 0.0, "links": None},
    ]


@dataclass(frozen=True)
class Between:
    from_: str
    from_reach: Metres


def test_a_name_that_python_keeps_for_itself_leaves_without_its_underscore() -> None:
    assert plain(Between("N1", 0.5)) == {"from": "N1", "from_reach_m": 0.5}


def test_rows_of_unequal_lengths_are_refused() -> None:
    with pytest.raises(ValueError, match="shorter"):
        plain(Members(("a", "b"), np.zeros((1, 2), np.int64), fixed([1.0, 2.0]), fixed([1.0, 2.0]), (1, 2)))


@pytest.mark.parametrize("odd", [object(), {1, 2}, 1j, Everything])
def test_what_has_no_plain_form_is_refused(odd: object) -> None:
    with pytest.raises(TypeError, match="no plain form"):
        plain(odd)


@given(st.lists(st.floats(min_value=-1e30, max_value=1e30), min_size=1, max_size=20))
def test_numbers_keep_twelve_digits_and_have_no_more(values: list[float]) -> None:
    """Independent of the arithmetic used: decimal text of the number with 12 digits is within half a unit of them."""
    for value, short in zip(values, rounded(np.array(values)).tolist(), strict=True):
        assert float(f"{short:.11e}") == short
        assert short == pytest.approx(value, rel=0.51e-11, abs=0.0)


@pytest.mark.parametrize("value", [0.1, 1e-300, 5e-324, 1.7e308, 123456789.125, 1e22, 3e23, -0.0, 2.0 / 3.0])
def test_a_number_alone_and_in_an_array_is_rounded_alike(value: float) -> None:
    assert plain(np.array([value])) == [plain(value)]
    assert plain(value) == float(f"{value:.12g}")


def test_nought_has_no_sign() -> None:
    assert math.copysign(1.0, plain(-0.0)) == 1.0  # type: ignore[arg-type]
    assert [math.copysign(1.0, x) for x in rounded(np.array([-0.0, -5e-324 * 0]))] == [1.0, 1.0]


def test_what_only_a_case_has_stands_beside_what_all_cases_have() -> None:
    case = Case("wind", "indicative", 20.0, added=Inner(0.5, "aside"))
    cases = piece(hand_made.piece("S1", cases=(case,)))["cases"]
    assert isinstance(cases, list)
    (found,) = cases
    assert isinstance(found, dict)
    assert found["reach_m"] == 0.5
    assert found["standing"] == "indicative"
    assert "added" not in found


def test_a_piece_without_cases_has_null_there() -> None:
    assert piece(hand_made.piece("A1", cases=None))["cases"] is None


def test_parts_stand_under_their_name_with_figures_of_their_own() -> None:
    run = hand_made.piece("R1", parts=(hand_made.piece("R1.1"), hand_made.piece("R1.2")), parts_name="bays")
    bays = piece(run)["bays"]
    assert isinstance(bays, list)
    assert [bay["mark"] for bay in bays if isinstance(bay, dict)] == ["R1.1", "R1.2"]
    assert all(bay["sag_m"] == 0.25 for bay in bays if isinstance(bay, dict))


def test_the_document_has_the_keys_of_a_figures_file() -> None:
    found = document(hand_made.result(), "made from", [{"name": "x"}])
    wanted = {"title", "version", "unit", "origin_m", "pieces", "cuts", "stock_plan", "supports", "cautions", "files"}
    assert wanted <= set(found)
    assert found["version"] == __version__
    cuts = found["cuts"]
    assert isinstance(cuts, list)
    assert set(cuts[0]) == {"mark", "piece", "stock", "cut_length_m", "pin_to_pin_m", "links", "copies", "mass_kg"}  # type: ignore[arg-type]


def test_the_text_reads_back_as_the_document() -> None:
    found = document(hand_made.result(title='Höfe "A"\n=1+1'), "made from", [])
    assert json.loads(b"".join(chunks(found))) == found


def test_no_number_that_is_no_json_can_be_written() -> None:
    with pytest.raises(ValueError, match="JSON compliant"):
        list(chunks({"sag_m": math.nan}))


def test_a_hundred_thousand_members_are_walked_and_written_within_seconds() -> None:
    """The walk is over columns: a loop over members in Python would take some ten times as long."""
    n = 100_000
    random = np.random.default_rng(1)
    marks = tuple(f"N1.{i}" for i in range(n))
    members = Members(marks, random.integers(0, n, (n, 2)), random.random(n), random.random(n), tuple(range(n)))
    figures = dataclasses.make_dataclass("F", [("members", Members)], frozen=True)(members)
    start = time.perf_counter()
    size = sum(len(chunk) for chunk in chunks(piece(hand_made.piece("N1", figures=figures))))
    assert size > 100 * n / 2
    assert time.perf_counter() - start < 10.0
