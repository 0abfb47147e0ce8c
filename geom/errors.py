"""The two ways a design can fail, and how a problem is said.

A `DesignError` is about what was written: it cannot be meant. A `SolveError` is about what was asked:
there is no such shape, or it was not reached. Everything a user wrote passes through `say` or
`Problem.render` on its way into a message, so that a message is one short line whatever a file holds.
"""

import datetime
import json
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from itertools import islice

_LONGEST_PART = 80  # characters of a feature or a key in a message: longer ones are no names
_LONGEST_TEXT = 400  # characters of what is wrong and what would be right: five lines of a terminal
_LONGEST_VALUE = 60  # characters of a user's value in a message
_LONGEST_INTEGER = 200  # bits, 60 figures: str() itself refuses integers of over 4300 figures
_ELEMENTS_SAID = 6  # of a list or table: enough to recognise a point or a load
_DEPTH_SAID = 3  # lists in lists: enough for a list of points
_LIKE_ENOUGH = 0.6  # share of letters in common, in order: difflib's own default
_LONGEST_NAME = 60  # a longer name is no slip of a key, and matching costs the square of its length


@dataclass(frozen=True, slots=True)
class Problem:
    """One thing wrong with a design, with its place.

    Attributes
    ----------
    line : int
        Line of the design file, from 1; a fault of the whole file is on line 1.
    feature : str
        The piece or section, as ``hanging "S1"``; empty for the file itself.
    key : str
        The key at fault; empty where no one key is.
    text : str
        What was found and what would be right.
    """

    line: int
    feature: str
    key: str
    text: str

    def render(self, file_name: str) -> str:
        """Return the problem as one line, ``file:line: feature: key: text``, empty parts left out.

        Control characters and line ends are escaped, and overlong parts are cut in their middle.
        """
        place = f"{_one_line(file_name, _LONGEST_TEXT)}:{self.line}"
        parts = [_one_line(part, _LONGEST_PART) for part in (self.feature, self.key) if part]
        return ": ".join([place, *parts, _one_line(self.text, _LONGEST_TEXT)])


class DesignError(ValueError):
    """A design that cannot be meant; `problems` holds all that is wrong with it."""

    def __init__(self, *problems: Problem) -> None:
        super().__init__(*problems)
        self.problems: tuple[Problem, ...] = problems

    def __str__(self) -> str:
        return "\n".join(problem.render("design") for problem in self.problems)


class SolveError(ArithmeticError):
    """No such shape exists, or it was not reached; says which, and what would be right.

    Parameters
    ----------
    text : str
        What was asked and why there is no answer, or how far the solver came (residual, iterations).
    piece : str
        Mark of the piece, where it is known.
    key : str
        The key of the design file to change, where one is to blame.
    """

    def __init__(self, text: str, *, piece: str = "", key: str = "") -> None:
        super().__init__(text)
        self.piece = piece
        self.key = key


def near(name: str, names: Iterable[str]) -> str:
    """Return ``"; did you mean 'sag'?"`` for the known name nearest to `name`, or nothing if none is near.

    Upper and lower case count as the same.
    """
    if len(name) > _LONGEST_NAME:
        return ""
    known = {other.casefold(): other for other in names}
    found = get_close_matches(name.casefold(), known, n=1, cutoff=_LIKE_ENOUGH)
    return f"; did you mean {_one_line(known[found[0]], _LONGEST_NAME)!r}?" if found else ""


def say(value: object) -> str:
    """Return a user's value as the design file would show it, on one line and short."""
    return _cut(_shown(value, _DEPTH_SAID), _LONGEST_VALUE)


def _shown(value: object, depth: int) -> str:
    match value:
        case str():
            return _quoted(value)
        case Mapping():
            return _listed("{ }", (f"{_key(k)} = {_shown(v, depth - 1)}" for k, v in value.items()), depth)
        case Sequence():
            return _listed("[]", (_shown(element, depth - 1) for element in value), depth)
    return _one_line(_plain(value), _LONGEST_VALUE)


def _plain(value: object) -> str:
    match value:
        case bool():
            return "true" if value else "false"
        case int() if value.bit_length() > _LONGEST_INTEGER:
            return "a number of over 60 figures"
        case datetime.date() | datetime.time():
            return value.isoformat()
        case int() | float():
            return str(value)
    return repr(value)


def _quoted(text: str) -> str:
    """Return a basic string of TOML, among whose escapes JSON's are."""
    if len(text) > _LONGEST_VALUE:
        text = text[: _LONGEST_VALUE // 2] + "..."
    return _escaped(json.dumps(text, ensure_ascii=False))


def _key(name: object) -> str:
    bare = isinstance(name, str) and name.isascii() and name.replace("-", "").replace("_", "").isalnum()
    return str(name) if bare else _quoted(str(name))


def _listed(brackets: str, elements: Iterable[str], depth: int) -> str:
    """Return the first elements between brackets; elements are only made as far as they are shown."""
    if depth <= 0:
        return f"{brackets[0]}...{brackets[-1]}"
    shown = list(islice(elements, _ELEMENTS_SAID + 1))
    if len(shown) > _ELEMENTS_SAID:
        shown[-1] = "..."
    space = brackets[1:-1] if shown else ""
    return f"{brackets[0]}{space}{', '.join(shown)}{space}{brackets[-1]}"


def _one_line(text: str, longest: int) -> str:
    # Cut before escaping too: the work must not grow with what the user wrote.
    return _cut(_escaped(_cut(text, longest)), longest)


def _escaped(text: str) -> str:
    """Escape what cannot be printed: control characters, line ends, marks that turn the writing direction."""
    if text.isprintable():
        return text
    return "".join(c if c.isprintable() else c.encode("unicode_escape").decode("ascii") for c in text)


def _cut(text: str, longest: int) -> str:
    """Cut the middle out of an overlong text: its start says what was found, its end what would be right."""
    if len(text) <= longest:
        return text
    tail = (longest - 3) // 3
    return f"{text[: longest - 3 - tail]}...{text[-tail:]}"
