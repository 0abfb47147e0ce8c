"""Where in the text of a design each key and value stands.

The standard library's TOML reader gives values without places, and tomlkit, which keeps comments and order,
has none either. A problem is said with its line, so the text is scanned once more. The scanner need not
understand values: it follows headings, keys and brackets, passes over strings, numbers and comments as wholes,
and relies on `tomllib` having found the text valid. Of an invalid one it finds what stands before the fault.
"""

import re
import tomllib
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import NamedTuple, TypeAlias

KeyPath: TypeAlias = tuple[str | int, ...]  # ("hanging", 0, "loads", 1, "at"): keys, and indices in arrays

# Possessive where it matters (++, *+): no pattern goes back into what it has passed, so scanning is linear.
_QUOTED = r""" "(?:[^"\\\n]++|\\.)*+" | '[^'\n]*+' """
# One or two quotes may stand in a multi-line string anywhere, also right before the three that close it.
_MULTILINE = r''' """(?:[^"\\]++|\\[\s\S]|"{1,2}(?!"))*+"{3,5} | \'{3}(?:[^']++|'{1,2}(?!'))*+'{3,5} '''
_PART = rf"(?: {_QUOTED} | [A-Za-z0-9_-]++ )"
_DOTTED = rf"{_PART} (?:[ \t]*\.[ \t]* {_PART})*+"

_GAP = re.compile(r"(?: [ \t\r\n]++ | \#[^\n]*+ )*+", re.VERBOSE)
_PARTS = re.compile(_PART, re.VERBOSE)
_HEADING = re.compile(rf"(\[\[?) [ \t]* ({_DOTTED}) [ \t]* \]{{0,2}}", re.VERBOSE)
_KEY = re.compile(rf"({_DOTTED}) [ \t]*=[ \t]*", re.VERBOSE)
_SCALAR = re.compile(
    rf"""{_MULTILINE} | (?!\"{{3}}|'{{3}}) (?:{_QUOTED}) | [^\s\"',\]}}\#][^,\]}}\#\n]*+""", re.VERBOSE
)


@dataclass(frozen=True, slots=True)
class Positions:
    """The line of everything in a TOML text.

    Attributes
    ----------
    lines : Mapping[KeyPath, int]
        The line, from 1, of every table, key and array element.
    tables : frozenset[KeyPath]
        Which of these are tables.
    """

    lines: Mapping[KeyPath, int]
    tables: frozenset[KeyPath]

    def line(self, path: KeyPath) -> int:
        """Return the line of the longest beginning of `path` that is in the text; 1 if none is."""
        known = (self.lines[path[:n]] for n in range(len(path), 0, -1) if path[:n] in self.lines)
        return next(known, 1)

    def header(self, path: KeyPath) -> int:
        """Return the line on which the piece or section that holds `path` begins; 1 for keys of the file.

        A piece is a table in an array (``[[hanging]]``) or a named one (``[support.P3]``), a section any other
        table of the file (``[shop]``), in whichever of TOML's ways it is written.
        """
        return self.line(path[:2] if path[:2] in self.tables else path[:1])


def index(text: str) -> Positions:
    """Return the positions in a TOML text that `tomllib` has found valid.

    The line of a table is that of its heading, or of the first key that implies it; the line of an array of
    tables is its first heading's. Takes time in proportion to the text.
    """
    lines: dict[KeyPath, int] = {}
    tables: set[KeyPath] = set()
    line, counted = 1, 0
    for found in Scanner(text):
        line += text.count("\n", counted, found.offset)
        counted = found.offset
        if found.stated or found.path not in lines:
            lines[found.path] = line
        if found.table:
            tables.add(found.path)
    return Positions(MappingProxyType(lines), frozenset(tables))


class Found(NamedTuple):
    """What begins at a place in the text.

    Attributes
    ----------
    path : KeyPath
        Its keys and indices.
    offset : int
        Where it begins, in characters from the start.
    table : bool
        Whether it is a table.
    stated : bool
        Whether it is what stands there: ``[support.P3]`` states P3 and implies support.
    """

    path: KeyPath
    offset: int
    table: bool
    stated: bool


@dataclass(slots=True)
class Bracket:
    """A table or array that is open; the first is the file itself, with the path of its last heading.

    Attributes
    ----------
    path : KeyPath
        Its keys and indices.
    offset : int
        Where it opens.
    elements : int
        How many elements an array has had; None for a table.
    """

    path: KeyPath
    offset: int
    elements: int | None = None


@dataclass(slots=True)
class Scanner:
    """Iterates over every table, key and array element of a TOML text, in order; once.

    Attributes
    ----------
    text : str
        The text.
    offset : int
        How far it has been scanned: in the end all of it, or up to where it makes no sense.
    statement : int
        Where the last heading or key of the file itself begins.
    value : int
        Where the last value begins.
    brackets : list[Bracket]
        What is open, outermost first.
    """

    text: str
    offset: int = 0
    statement: int = 0
    value: int = 0
    brackets: list[Bracket] = field(default_factory=lambda: [Bracket((), 0)])
    _counts: dict[KeyPath, int] = field(default_factory=dict)  # tables in each array of tables so far

    def __iter__(self) -> Iterator[Found]:
        while self._take(_GAP) and self.offset < len(self.text):
            inside = len(self.brackets) > 1
            if not inside:
                self.statement = self.offset
            if inside and self.text[self.offset] in ",]}":
                self._separate()
                continue
            found = self._entry() if inside or self.text[self.offset] != "[" else self._heading()
            yield from found
            if not found or self.offset == self.value:
                return  # no key, or no value after it: from here on the text makes no sense

    def _take(self, pattern: re.Pattern[str]) -> re.Match[str] | None:
        match = pattern.match(self.text, self.offset)
        if match:
            self.offset = match.end()
        return match

    def _separate(self) -> None:
        if self.text[self.offset] != ",":
            self.brackets.pop()
        self.offset += 1

    def _heading(self) -> list[Found]:
        match = self._take(_HEADING)
        if match is None:
            return []
        *parents, last = _keys(match[2])
        path: KeyPath = ()
        found: list[Found] = []
        for key in parents:
            path = self._latest((*path, key))
            found.append(Found(path, match.start(), table=True, stated=False))
        path = (*path, last)
        if match[1] == "[[":
            found.append(Found(path, match.start(), table=False, stated=False))
            self._counts[path] = self._counts.get(path, 0) + 1
            path = self._latest(path)
        self.brackets[0] = Bracket(path, match.start())
        return [*found, Found(path, match.start(), table=True, stated=True)]

    def _latest(self, path: KeyPath) -> KeyPath:
        """Return the path of the last table, where `path` is an array of tables: TOML 1.0, array of tables."""
        return (*path, self._counts[path] - 1) if path in self._counts else path

    def _entry(self) -> list[Found]:
        """Pass a key and its value, or an element of an array; go into a value that opens a bracket."""
        start, bracket = self.offset, self.brackets[-1]
        names: Sequence[str | int]
        if bracket.elements is None:
            match = self._take(_KEY)
            if match is None:
                return []
            names = _keys(match[1])
        else:
            names = [bracket.elements]
            bracket.elements += 1
        paths = [(*bracket.path, *names[:n]) for n in range(1, len(names) + 1)]
        table = self._pass_value(paths[-1])
        implied = [Found(path, start, table=True, stated=False) for path in paths[:-1]]
        return [*implied, Found(paths[-1], start, table, stated=True)]

    def _pass_value(self, path: KeyPath) -> bool:
        """Pass a scalar, or go into what a bracket opens; return whether it is a table."""
        self.value = self.offset
        opener = self.text[self.offset : self.offset + 1]
        if opener in ("[", "{"):
            self.brackets.append(Bracket(path, self.offset, 0 if opener == "[" else None))
            self.offset += 1
        else:
            self._take(_SCALAR)
        return opener == "{"


def _keys(dotted: str) -> list[str]:
    return [_bare(part) for part in _PARTS.findall(dotted)]


def _bare(part: str) -> str:
    if part[0] not in "\"'":
        return part
    if "\\" not in part:
        return part[1:-1]
    return str(tomllib.loads(f"key = {part}")["key"])  # a quoted key has a string's escapes
