"""A text that is no TOML is answered with the line to look at and what to write."""

from __future__ import annotations

import tomllib

import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.design.syntax import syntax_problem
from geom.errors import Problem
from tests.toml_texts import Text

DAMAGES = [*"\"'[]{}=,.#\\\n x1", "", "\x00", "'''"]


def problem_of(text: str) -> Problem:
    with pytest.raises(tomllib.TOMLDecodeError) as raised:
        tomllib.loads(text)
    return syntax_problem(text, raised.value)


@pytest.mark.parametrize(
    ("text", "line", "key", "words"),
    [
        ('[shop]\nkerf = 3\nstep = 1\nkerf = 2\n', 4, "kerf", "shop.kerf is given on line 2 already; keep one"),
        ("sag = [1]\nsag = [2]\n", 2, "sag", "is given on line 1 already"),
        ("a = { b = 1, b = 2 }", 1, "b", "given twice between these braces"),
        ("[hanging]\nsag = 1\n[hanging]\n", 3, "", "write [[hanging]] over each"),
        ("[hanging]\nsag = 1\n[[hanging]]\n", 3, "", "[hanging] is begun on line 1 already"),
        ("[support.P3]\n\n[support.P3]\n", 3, "", "[support.P3] is begun on line 1 already; keep one, or rename"),
    ],
)  # fmt: skip
def test_what_is_given_twice_is_named_with_its_first_line(text: str, line: int, key: str, words: str) -> None:
    problem = problem_of(text)
    assert (problem.line, problem.key) == (line, key)
    assert words in problem.text


@pytest.mark.parametrize(
    ("text", "line", "close"),
    [
        ('a = 1\nmark = "S1\nsag = 600\n', 2, '"'),
        ("a = 1\nmark = 'S1\nsag = 600\n", 2, "'"),
        ("a = 1\nmark = 'S1", 2, "'"),
        ('a = 1\ntitle = """S1\nsag = 600\n\n', 2, '"""'),
        ("a = 1\ntitle = '''S1\nsag = 600\n\n", 2, "'''"),
        ('a = 1\nto = [\n1,\n"P3\n]', 4, '"'),
        ('a = 1\n"my chain = 3\nb = 2', 2, '"'),
        ("a = 1\nfrom = [0, 0,\n3000\nto = [1, 2, 3]\n", 2, "]"),
        ("a = 1\nfrom = [0, 0,\n3000,\nto = [1, 2, 3]\n", 2, "]"),
        ("a = 1\nfrom = [0, 0,\n3000\n\n[[hanging]]\nsag = 1\n", 2, "]"),
        ("a = 1\nfrom = [0, [0], 3000", 2, "]"),
        ("a = 1\nring = { points = 3\nsag = 1\n", 2, "}"),
        ("a = 1\nring = { points = 3,\nsag = 1 }\n", 2, "}"),
    ],
)
def test_what_is_left_open_is_said_on_the_line_where_it_begins(text: str, line: int, close: str) -> None:
    problem = problem_of(text)
    assert problem.line == line
    assert "not closed" in problem.text
    assert problem.text.endswith(f"end it with {close}")


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("4.2 m", '"4.2 m"'),
        ("4,2 m", '"4.2 m"'),
        ("4,2", "4.2"),
        ("13'-9 1/2\"", '"13\'-9 1/2\\""'),
        ('"13\'-9 1/2""', '"13\'-9 1/2\\""'),
        ("brick", '"brick"'),
        ("20mm2", '"20mm2"'),
        ("4.2 m  # as measured", '"4.2 m"'),
        ("True", "true"),
    ],
)
def test_a_value_gone_wrong_is_answered_with_the_right_one(written: str, meant: str) -> None:
    problem = problem_of(f"unit = 'mm'\nsag = {written}\nto = 1\n")
    assert (problem.line, problem.key) == (2, "sag")
    assert meant in problem.text
    tomllib.loads(f"sag = {meant}")


@pytest.mark.parametrize(
    ("statement", "words"),
    [
        ("sag =", "a value is missing"),
        ("sag 600", "has no equals sign"),
        ("sag: 600", "has no equals sign"),
        ("= 600", "a key is missing"),
        ("cut tolerance = 3", "write cut_tolerance = "),
        ("höhe = 3", 'write "höhe" = '),
        ("sag = .5", "figures on both sides"),
        ("sag = 007", "begins with a nought"),
        ("sag = 1 to = 2", "each key on its own line"),
        ("at = [1 2]", 'a comma is missing before "2"'),
        ("at = [1, 4 mm]", '"4 mm"'),
        ("shop.'my kerf = 3", "key that begins here is not closed"),
        ("at = [1, 2]]", 'remove "]"'),
        ("at = { x = 1, }", "no comma stands before the closing }"),
        ("at = { x = 1 y = 2 }", "a comma is missing"),
        ('at = "C:\\nets\\x.dxf"', "backslash"),
        ("at = “x”", "is no quote"),
        ("[shop", "heading is not whole"),
        ("[[shop]", "heading is not whole"),
        ("[shop] kerf = 3", "nothing may follow a heading"),
        ("sag = 1\x07", "U+0007"),
        ("# \x00", "U+0000"),
    ],
)
def test_each_usual_slip_is_answered_on_its_line(statement: str, words: str) -> None:
    problem = problem_of(f'unit = "mm"\n\n{statement}\n')
    assert problem.line == 3
    assert words in problem.text


def test_a_comma_missing_between_lines_is_missed_before_the_second() -> None:
    problem = problem_of("at = [\n  true\n  mm\n]\n")
    assert (problem.line, problem.text) == (3, 'a comma is missing before "mm"')


def test_a_byte_order_mark_is_called_by_its_name() -> None:
    assert "byte order mark" in problem_of('\ufeffunit = "mm"').text


def test_lines_are_counted_alike_with_either_line_end() -> None:
    assert problem_of('a = 1\r\nb = 2\r\nb = "3"\r\n').line == 3


@given(st.integers(0, 2**63), st.integers(0), st.sampled_from(DAMAGES))
def test_any_damaged_text_is_answered_with_one_line_of_it(seed: int, place: int, damage: str) -> None:
    text = Text(seed).text
    at = place % (len(text) + 1)
    damaged = text[:at] + damage + text[at + 1 :]
    try:
        tomllib.loads(damaged)
    except tomllib.TOMLDecodeError as error:
        problem = syntax_problem(damaged, error)
        assert 1 <= problem.line <= damaged.count("\n") + 1
        assert problem.text
        assert problem.render("a.toml").isprintable()
