"""The notes at the left foot: unit, check line, scale, stock, temperatures, what pulls include, cautions."""

from collections import defaultdict
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from export.picture.looks import LOOKS, Look
from export.picture.scale import Scale, Sheet, round_length
from export.picture.sizes import Sizes
from export.picture.text import wrapped
from export.picture.values import Notes, Panel, Path, Text, around, box_of
from export.picture.wording import Wording, listed, significant
from geom import units
from geom.result import Caution, Result

_CHECK_ROOM = 60.0  # the check line is the roundest length at most so long, print units of the standard size
_BETWEEN = 4.0  # columns, in heights of the text
_AFTER = 0.5  # room after a caution's head, in heights of the text
_CLOSE = 1.45  # line to line within a caution, in the same
_ALIKE = 3  # cautions of one code said in full; of the rest only the pieces


@dataclass(frozen=True)
class Words:
    """What the notes say, without sizes: lines of text with their look, and which cautions are which number."""

    heading: str
    lines: tuple[tuple[Look, str], ...]
    cautions: tuple[tuple[str, str], ...]  # of each what stands before it in the warm colour, and its text
    numbers: dict[str, tuple[int, ...]]  # a piece's mark -> the numbers of its cautions

    def of(self, mark: str) -> tuple[int, ...]:
        """Return the numbers of the cautions of a piece and of its parts."""
        of_it = (
            numbers
            for pieces, numbers in self.numbers.items()
            if any(one == mark or one.startswith(f"{mark}.") for one in pieces.split(", "))
        )
        return tuple(sorted({number for numbers in of_it for number in numbers}))

    def with_line(self, line: str) -> "Words":
        """Return the same words with one more line before the cautions."""
        return replace(self, lines=(*self.lines, (LOOKS["note"], line)))


def words(result: Result, *, extra: Sequence[str] = ()) -> Words:
    """Return what the notes say about a result; `extra` lines come from the file they stand in."""
    note = LOOKS["note"]
    wording = Wording(result.setting.drawing_unit)
    lines = [*extra, *_stock(result), *_temperatures(result), *_pulls(result), *_origin(result)]
    cautions, numbers = _cautions(result)
    return Words(
        result.title or "Untitled",
        tuple((note, line) for line in lines),
        tuple((head, wording.retold(line)) for head, line in cautions),
        numbers,
    )


def unit_line(unit: str) -> str:
    """Return the note of the unit."""
    return f"UNITS {unit}"


def _stock(result: Result) -> Iterator[str]:
    names = dict.fromkeys(stock.name for piece in result.pieces for stock in piece.stocks)
    if names:
        yield f"Stock: {listed(list(names))}"
    sources = dict.fromkeys(piece.used.source for piece in result.pieces if piece.used.source)
    if sources:
        yield f"Sizes and weights: {listed(list(sources), 4)}"


def _temperatures(result: Result) -> Iterator[str]:
    at = result.setting.shop.temperature
    yield f"Lengths are measured at {significant(at)} °C"
    temperatures = dict.fromkeys(
        (case.case, case.temperature) for piece in result.pieces for case in piece.cases or () if case.case in _BY_HEAT
    )
    said = [
        f"{name} {temperature:g} °C" for name, temperature in temperatures if any(one != at for _, one in temperatures)
    ]
    if said:
        line = ", ".join(said)
        yield f"{line[0].upper()}{line[1:]}"


_BY_HEAT = ("coldest", "as hung", "hottest")


def _pulls(result: Result) -> Iterator[str]:
    if any(piece.pulls for piece in result.pieces):
        yield "Pulls: dead load only"


def _origin(result: Result) -> Iterator[str]:
    origin = result.setting.site.origin
    if any(origin):
        wording = Wording(result.setting.drawing_unit)
        said = ", ".join(wording.length_with_unit(float(value)) for value in origin)
        yield f"Site origin {said} is taken off every point"


def _cautions(result: Result) -> tuple[list[tuple[str, str]], dict[str, tuple[int, ...]]]:
    """Cautions of one text are one line with all their pieces; of many of one code the first few are said in full."""
    alike: dict[tuple[str, str], list[Caution]] = defaultdict(list)
    for caution in result.cautions:
        alike[caution.code, caution.text].append(caution)
    lines: list[tuple[str, str]] = []
    marks = [piece.mark for piece in result.pieces]
    numbers: dict[str, list[int]] = defaultdict(list)
    said: dict[str, int] = defaultdict(int)
    rest: dict[str, list[Caution]] = defaultdict(list)
    for (code, text), group in alike.items():
        if said[code] == _ALIKE:
            rest[code] += group
            continue
        said[code] += 1
        _say(lines, numbers, (code, text), group, marks)
    for code, group in rest.items():
        _say(lines, numbers, (code, "as the others of this kind; each is in the figures"), group, marks)
    return lines, {mark: tuple(dict.fromkeys(found)) for mark, found in numbers.items()}


def _say(
    lines: list[tuple[str, str]],
    numbers: dict[str, list[int]],
    said: tuple[str, str],
    group: Sequence[Caution],
    marks: Sequence[str],
) -> None:
    code, text = said
    pieces = list(dict.fromkeys(caution.piece for caution in group if caution.piece))
    whose = f"{_whose(pieces, marks)}: " if _whose(pieces, marks) else ""
    lines.append((f"CAUTION {len(lines) + 1} {code}", f"{whose}{text}"))
    for piece in pieces:
        numbers[piece].append(len(lines))


def _whose(pieces: Sequence[str], marks: Sequence[str]) -> str:
    """Which pieces a caution is about, where that is not plain: of a design of one piece nothing is said."""
    if not set(marks) <= set(pieces):
        return listed(pieces, 8)
    return "all pieces" if len(marks) > 1 else ""


def notes(  # noqa: PLR0913 - all that notes depend on
    said: Words,
    scale: Scale,
    sheet: Sheet,
    wording: Wording,
    sizes: Sizes,
    *,
    width: float,
    dropped: int = 0,
    sheets: int = 1,
    columns: int = 1,
) -> Notes:
    """Return the notes laid out in a column of a width (print units), their upper left corner at the origin.

    Of two `columns` the second holds the cautions.
    """
    note = LOOKS["note"]
    per = scale.ratio / 1000
    check = round_length(_CHECK_ROOM * sizes.note / 2.5 * per / units.UNITS[wording.unit].metres)
    check_length = check * units.UNITS[wording.unit].metres
    column = _Column(sizes, width)
    column.write(note, unit_line(wording.unit))
    ends = column.check_line(check_length / per, f"check line {_round(check, check_length, wording)}")
    on = f"{sheet.name}" if sheets == 1 else f"{sheets} sheets {sheet.name}"
    column.write(note, f"Scale {scale.says} printed on {on}")
    for look, line in said.lines:
        column.write(look, line)
    if dropped:
        column.write(note, f"There was no room for {dropped} of the marks; the tables carry them")
    beside = _Column(sizes, width, left=width + _BETWEEN * sizes.note) if columns > 1 else column
    for head, line in said.cautions:
        beside.write_headed(head, line)
    texts = (*column.texts, *(beside.texts if beside is not column else ()))
    box = around(*(text.box for text in texts), *(box_of(path.points) for path in column.paths))
    return Notes(texts, tuple(column.paths), ends, check_length, box)


def _round(check: float, metres: float, wording: Wording) -> str:
    """A round length with its unit; of feet feet and inches, as everywhere on a drawing in feet."""
    return wording.length(metres) if wording.unit == "ft" else f"{check:g} {wording.unit}"


def heading(said: Words, sizes: Sizes, *, width: float) -> Panel:
    """Return the sheet's title, as wide as the sheet has room."""
    column = _Column(sizes, width)
    column.write(LOOKS["mark"], said.heading, sizes.heading)
    box = around(*(text.box for text in column.texts))
    return Panel("heading", "heading", 1.0, (), titles=tuple(column.texts), core=box, box=box)


class _Column:
    """Lines of text one under another."""

    def __init__(self, sizes: Sizes, width: float, left: float = 0.0) -> None:
        self.sizes, self.width, self.left = sizes, width, left
        self.texts: list[Text] = []
        self.paths: list[Path] = []
        self.foot = 0.0

    def write(self, look: Look, line: str, height: float | None = None) -> None:
        height = height or self.sizes.note
        for part in wrapped(line, self.width / height):
            self.foot -= self.sizes.leading * height if self.texts else height
            self.texts.append(Text(look, part, (self.left, self.foot), height))

    def write_headed(self, head: str, line: str) -> None:
        """A paragraph after a head of its own look, its lines closer than those of notes."""
        height = self.sizes.note
        first = Text(LOOKS["caution"], head, (self.left, 0.0), height)
        indent = first.width + _AFTER * height
        for number, part in enumerate(wrapped(line, self.width / height, indent / height)):
            self.foot -= (self.sizes.leading if not number else _CLOSE) * height if self.texts else height
            if not number:
                self.texts.append(replace(first, at=(self.left, self.foot)))
            if part:
                at = (self.left + (0.0 if number else indent), self.foot)
                self.texts.append(Text(LOOKS["note"], part, at, height))

    def check_line(self, long: float, says: str) -> tuple[tuple[float, float], tuple[float, float]]:
        """A line of stated length with its ends marked, its words over it."""
        gap, note = self.sizes.gap, LOOKS["note"]
        self.write(note, says)
        self.foot -= 2 * gap
        y = self.foot
        self.paths.append(Path(note, np.array([[0.0, y], [long, y]])))
        self.paths += [Path(note, np.array([[x, y - gap], [x, y + gap]])) for x in (0.0, long)]
        self.foot -= gap
        return (0.0, y), (long, y)
