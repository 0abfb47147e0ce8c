"""Every key and value of a TOML text is found, on the line where it was put."""

from __future__ import annotations

import time
import tomllib
from collections.abc import Iterator

import pytest
from hypothesis import given
from hypothesis import strategies as st

from geom.design.positions import KeyPath, Scanner, index
from tests.toml_texts import Text

COURTYARD = """\
title = "Courtyard # swags [1]"
unit = 'mm'

[support.P3]
at = [4000,
  0,  # level, see [shop]
  3000]
[[hanging]]
mark = "S1"
loads = [{ mark = "L1", at = 1500 },
         { mark = "L2", at = 2000 }]
fittings.from = "shackle"
[[hanging]]
mark = "S2"
[[hanging.loads]]
at = 1
[[hanging.loads]]
at = 2
[shop]
step = "1 mm"
[support]
P4 = { at = [0, 0, 3000] }
"""


def walk(value: object, path: KeyPath = ()) -> Iterator[KeyPath]:
    """Yield the path of everything that the standard library's reader has read."""
    if path:
        yield path
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from walk(inner, (*path, key))
    if isinstance(value, list):
        for n, inner in enumerate(value):
            yield from walk(inner, (*path, n))


@given(st.integers(0, 2**63))
def test_whatever_is_written_is_found_on_the_line_where_it_was_put(seed: int) -> None:
    written = Text(seed)
    lines = index(written.text).lines
    assert set(lines) == set(walk(tomllib.loads(written.text)))
    assert dict(lines) == written.lines


@given(st.integers(0, 2**63))
def test_tables_are_told_from_values_and_arrays(seed: int) -> None:
    text = Text(seed).text
    values = tomllib.loads(text)
    tables = index(text).tables
    for path in walk(values):
        inner: object = values
        for step in path:
            inner = inner[step]  # type: ignore[index]
        assert (path in tables) == isinstance(inner, dict)


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("title",), 1),
        (("support", "P3", "at", 2), 7),
        (("support", "P3"), 4),
        (("support",), 21),  # its own heading, though [support.P3] came before
        (("hanging",), 8),
        (("hanging", 0, "loads", 1, "at"), 11),
        (("hanging", 0, "fittings"), 12),
        (("hanging", 1), 13),
        (("hanging", 1, "loads", 1, "at"), 18),
        (("support", "P4", "at", 1), 22),
    ],
)
def test_a_path_has_the_line_it_begins_on(path: KeyPath, line: int) -> None:
    assert index(COURTYARD).line(path) == line


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("hanging", 1, "stock"), 13),
        (("hanging", 0, "loads", 0, "hanger"), 10),
        (("support", "P5", "at"), 21),
        (("hanging", 7), 8),
        (("unit_", "x"), 1),
        ((), 1),
    ],
)
def test_what_is_not_in_the_text_has_the_line_of_what_would_hold_it(path: KeyPath, line: int) -> None:
    assert index(COURTYARD).line(path) == line


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("hanging", 0, "loads", 1, "at"), 8),
        (("hanging", 1, "loads", 0, "mass"), 13),
        (("hanging", 1, "stock"), 13),
        (("support", "P3", "at"), 4),
        (("support", "P4", "height"), 22),
        (("shop", "kerf"), 19),
        (("unit",), 2),
        (("units",), 1),
    ],
)
def test_a_piece_has_the_line_of_its_header(path: KeyPath, line: int) -> None:
    assert index(COURTYARD).header(path) == line


def test_brackets_in_comments_and_texts_open_nothing() -> None:
    text = 'a = """\n[[b]]\n\\""" # {"""  # [[c]]\n# [d]\ne = \'[\' # "\nf = 1\n'
    assert dict(index(text).lines) == {("a",): 1, ("e",): 5, ("f",): 6}


def test_lists_may_lie_in_lists_as_deep_as_can_be_read() -> None:
    depth = 200
    lines = index(f"a = {'[' * depth}1{']' * depth}\nb = 2\n").lines
    assert lines["a", *([0] * depth)] == 1
    assert lines[("b",)] == 2


@pytest.mark.parametrize(
    "line",
    [
        'sag = "450 mm"  # [c]\n',
        "points = [[0, 0, 1], [1, 2, 3]]\n",
        'note = """' + '" \\" ' * 10 + '"""\n',
        'fittings = { from = "shackle", "to" = ["shackle", 48] }\n',
        "# a comment\n",
    ],
)
def test_time_grows_in_proportion_to_the_text(line: str) -> None:
    def seconds(pieces: int) -> float:
        text = f"[[hanging]]\n{line}" * pieces
        started = time.process_time()
        for _ in Scanner(text):
            pass
        return time.process_time() - started

    short = min(seconds(1_000) for _ in range(3))
    # Ten times the text; quadratic work would take a hundred times as long.
    assert min(seconds(10_000) for _ in range(2)) < 40 * short


@given(st.text() | st.text(alphabet="ab=.[]{},\"'#\\\n 1"))
def test_a_text_that_is_no_toml_is_scanned_to_an_end(text: str) -> None:
    scanner = Scanner(text)
    found = list(scanner)
    assert scanner.offset <= len(text)
    assert all(0 <= place.offset < len(text) for place in found)
