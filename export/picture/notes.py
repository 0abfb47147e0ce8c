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
_ALIKE = 3  # cautions of one code said in full; of the rest only the pieces


@dataclass(frozen=True)
class Words:
    """What the notes say, without sizes: lines of text with their look, and which cautions are which number."""

    heading: str
    lines: tuple[tuple[Look, str], ...]
    cautions: tuple[tuple[Look, str], ...]
    numbers: dict[str, tuple[int, ...]]  # a piece's mark -> the numbers of its cautions

    def with_line(self, line: str) -> "Words":
        """Return the same words with one more line before the cautions."""
        return replace(self, lines=(*self.lines, (LOOKS["note"], line)))


def words(result: Result, *, extra: Sequence[str] = ()) -> Words:
    """Return what the notes say about a result; `extra` lines come from the file they stand in."""
    note = LOOKS["note"]
    lines = [*extra, *_stock(result), *_temperatures(result), *_pulls(result), *_origin(result)]
    cautions, numbers = _cautions(result)
    return Words(
        result.title or "Untitled",
        tuple((note, line) for line in lines),
        tuple((LOOKS["caution"], line) for line in cautions),
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
        f"{name} {temperature:g} °C" for name, temperature in temperatures if temperature != at or len(temperatures) > 1
    ]
    if said:
        yield ", ".join(said).capitalize()


_BY_HEAT = ("coldest", "as hung", "hottest")


def _pulls(result: Result) -> Iterator[str]:
    if any(piece.pulls for piece in result.pieces):
        yield "Pulls: dead load only"


def _origin(result: Result) -> Iterator[str]:
    origin = result.setting.site.origin
    if any(origin):
        said = ", ".join(Wording(result.unit).length_with_unit(float(value)) for value in origin)
        yield f"Site origin {said} is taken off every point"


def _cautions(result: Result) -> tuple[list[str], dict[str, tuple[int, ...]]]:
    """Cautions of one text are one line with all their pieces; of many of one code the first few are said in full."""
    alike: dict[tuple[str, str], list[Caution]] = defaultdict(list)
    for caution in result.cautions:
        alike[caution.code, caution.text].append(caution)
    lines: list[str] = []
    numbers: dict[str, list[int]] = defaultdict(list)
    said: dict[str, int] = defaultdict(int)
    rest: dict[str, list[Caution]] = defaultdict(list)
    for (code, text), group in alike.items():
        if said[code] == _ALIKE:
            rest[code] += group
            continue
        said[code] += 1
        _say(lines, numbers, text, group)
    for code, group in rest.items():
        _say(lines, numbers, f"as the others of this kind ({code}); each is in the figures", group)
    return lines, {mark: tuple(dict.fromkeys(found)) for mark, found in numbers.items()}


def _say(lines: list[str], numbers: dict[str, list[int]], text: str, group: Sequence[Caution]) -> None:
    pieces = list(dict.fromkeys(caution.piece for caution in group if caution.piece))
    lines.append(f"CAUTION {len(lines) + 1}{f' ({listed(pieces, 8)})' if pieces else ''}: {text}")
    for piece in pieces:
        numbers[piece].append(len(lines))


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
) -> Notes:
    """Return the notes laid out in a column of a width (print units), their upper left corner at the origin."""
    note = LOOKS["note"]
    per = scale.ratio / 1000
    check = round_length(_CHECK_ROOM * sizes.note / 2.5 * per / units.UNITS[wording.unit].metres)
    check_length = check * units.UNITS[wording.unit].metres
    column = _Column(sizes, width)
    column.write(note, unit_line(wording.unit))
    ends = column.check_line(check_length / per, f"check line {check:g} {wording.unit}")
    on = f"{sheet.name}" if sheets == 1 else f"{sheets} sheets {sheet.name}"
    column.write(note, f"Scale {scale.says} printed on {on}")
    for look, line in (*said.lines, *said.cautions):
        column.write(look, line)
    if dropped:
        column.write(note, f"There was no room for {dropped} of the marks; the tables carry them")
    box = around(*(text.box for text in column.texts), *(box_of(path.points) for path in column.paths))
    return Notes(tuple(column.texts), tuple(column.paths), ends, check_length, box)


def heading(said: Words, sizes: Sizes, *, width: float) -> Panel:
    """Return the sheet's title, as wide as the sheet has room."""
    column = _Column(sizes, width)
    column.write(LOOKS["mark"], said.heading, sizes.heading)
    box = around(*(text.box for text in column.texts))
    return Panel("heading", "heading", 1.0, (), titles=tuple(column.texts), core=box, box=box)


class _Column:
    """Lines of text one under another."""

    def __init__(self, sizes: Sizes, width: float) -> None:
        self.sizes, self.width = sizes, width
        self.texts: list[Text] = []
        self.paths: list[Path] = []
        self.foot = 0.0

    def write(self, look: Look, line: str, height: float | None = None) -> None:
        height = height or self.sizes.note
        for part in wrapped(line, self.width / height):
            self.foot -= self.sizes.leading * height if self.texts else height
            self.texts.append(Text(look, part, (0.0, self.foot), height))

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
