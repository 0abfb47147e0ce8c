"""Problems are one short line each, and near misses are named."""

import pickle
import tomllib
from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.errors import DesignError, Problem, SolveError, near, say

PROBLEM = Problem(
    14, 'hanging "S1"', "length", "3.9 m is shorter than the 4 m between its supports; give more than 4 m"
)
VALUES = st.recursive(
    st.booleans() | st.integers() | st.floats() | st.text() | st.dates(),
    lambda inner: st.lists(inner) | st.dictionaries(st.text(), inner),
    max_leaves=20,
)


def test_a_problem_is_rendered_as_file_line_feature_key_and_text() -> None:
    assert PROBLEM.render("courtyard.toml") == (
        'courtyard.toml:14: hanging "S1": length: 3.9 m is shorter than the 4 m between its supports; '
        "give more than 4 m"
    )


@pytest.mark.parametrize(
    ("feature", "key", "rendered"),
    [("", "", "a.toml:1: T"), ("shop", "", "a.toml:1: shop: T"), ("", "unit", "a.toml:1: unit: T")],
)
def test_an_empty_feature_or_key_leaves_no_gap(feature: str, key: str, rendered: str) -> None:
    assert Problem(1, feature, key, "T").render("a.toml") == rendered


@given(feature=st.text(), key=st.text(), text=st.text(), name=st.text())
def test_whatever_a_user_wrote_a_problem_is_one_printable_line(feature: str, key: str, text: str, name: str) -> None:
    line = Problem(1, feature, key, text).render(name)
    assert line.isprintable()
    assert len(line.splitlines()) == 1


def test_an_overlong_text_keeps_its_start_and_its_advice() -> None:
    line = Problem(1, "", "sag", "too long " + "x" * 1_000_000 + "; give less").render("a.toml")
    assert line.startswith("a.toml:1: sag: too long xxx")
    assert line.endswith("xxx; give less")
    assert len(line) < 450


def test_a_terminal_escape_in_a_mark_does_not_reach_the_terminal() -> None:
    line = Problem(1, 'hanging "\x1b[31m\u202e"', "", "T").render("a.toml")
    assert line == 'a.toml:1: hanging "\\x1b[31m\\u202e": T'


def test_a_design_error_holds_and_tells_every_problem() -> None:
    error = DesignError(PROBLEM, Problem(20, "", "unit", "is missing"))
    assert isinstance(error, ValueError)
    assert [problem.line for problem in error.problems] == [14, 20]
    assert str(error).splitlines()[1] == "design:20: unit: is missing"


def test_both_errors_survive_the_way_between_processes() -> None:
    design = pickle.loads(pickle.dumps(DesignError(PROBLEM)))
    solve = pickle.loads(pickle.dumps(SolveError("no such curve", piece="S1", key="sag")))
    assert design.problems == (PROBLEM,)
    assert (str(solve), solve.piece, solve.key) == ("no such curve", "S1", "sag")
    assert isinstance(solve, ArithmeticError)


@pytest.mark.parametrize(
    ("written", "meant"),
    [("sga", "sag"), ("SAG", "sag"), ("lenght", "length"), ("P33", "P3"), ("DIN766-6", "DIN 766-6")],
)
def test_a_near_miss_is_suggested(written: str, meant: str) -> None:
    names = ["from", "to", "sag", "length", "links", "P3", "DIN 766-6", "DIN 763-8"]
    assert near(written, names) == f"; did you mean '{meant}'?"


@pytest.mark.parametrize("written", ["colour", "", "x", "sag" * 100_000])
def test_nothing_is_suggested_where_nothing_is_near(written: str) -> None:
    assert near(written, ["sag", "length", "P3"]) == ""


def test_a_suggestion_keeps_the_case_of_the_known_name() -> None:
    assert near("my_Chain", ["My_chain"]) == "; did you mean 'My_chain'?"


@pytest.mark.parametrize(
    ("value", "said"),
    [
        ("4,2 m", '"4,2 m"'),
        ("13'-9 1/2\"", '"13\'-9 1/2\\""'),
        ("two\nlines", '"two\\nlines"'),
        (True, "true"),
        (4.2, "4.2"),
        ([4000, 0, 3000], "[4000, 0, 3000]"),
        ({"mark": "L1", "at": 1500}, '{ mark = "L1", at = 1500 }'),
        ({"a b": {}}, '{ "a b" = {} }'),
        ([], "[]"),
        (date(2024, 2, 29), "2024-02-29"),
        (list(range(1000)), "[0, 1, 2, 3, 4, 5, ...]"),
        ([[[[1]]]], "[[[[...]]]]"),
    ],
)
def test_a_value_is_said_as_the_design_file_shows_it(value: object, said: str) -> None:
    assert say(value) == said


def test_an_integer_too_long_to_print_is_described() -> None:
    assert say(10**5000) == "a number of over 60 figures"


@given(st.booleans() | st.integers() | st.floats(allow_nan=False) | st.text() | st.dates() | st.datetimes())
def test_a_short_value_said_is_toml_for_that_value(value: object) -> None:
    said = say(value)
    # What is cut is no value any more, and \x escapes came after TOML 1.0.
    if "..." not in said and "figures" not in said and "\\x" not in said:
        assert tomllib.loads(f"v = {said}")["v"] == value


@given(VALUES)
def test_any_value_is_said_on_one_short_line(value: object) -> None:
    said = say(value)
    assert said.isprintable()
    assert len(said) <= 60


def test_saying_a_large_value_does_not_walk_it_all() -> None:
    class Counted(list[int]):
        read = 0

        def __iter__(self):  # type: ignore[no-untyped-def]  # noqa: ANN204
            for element in super().__iter__():
                Counted.read += 1
                yield element

    say(Counted(range(100_000)))
    assert Counted.read < 10
