"""Tables as sheets of a workbook (Office Open XML, ECMA-376), written in chunks and read back in full.

The library makes the workbook with the heads of its sheets; the rows are written here and spliced in. It keeps every
cell as an object until the end: a net of 100,000 members would take 12 s and 400 MB by it, and takes 3 s and nothing
so.

A cell's type is that of its value and never guessed from its text: text is an inline string, so that none can be a
formula or a link.
"""

from __future__ import annotations

import datetime
import io
import re
import zipfile
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import chain
from pathlib import Path
from typing import IO
from xml.etree import ElementTree
from xml.sax.saxutils import escape

from export.grid import Cell, Field, fields
from export.outputs import Checked, CheckFailed
from geom.result import Table

# Limits that the format's own applications keep: rows of a sheet, characters of its name and of a cell.
_LAST_ROW = 1_048_576
_LONGEST_NAME = 31
_LONGEST_TEXT = 32_767
_ROWS_A_CHUNK = 2000
# A workbook states when it was made; the clock would make every run differ. The first day of the ZIP format's calendar.
_MADE = datetime.datetime(1980, 1, 1)
_NAMESPACE = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"
_END_OF_ROWS = b"</sheetData>"
_NO_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")  # XML 1.0, production 2


@dataclass(frozen=True)
class Sheet:
    """A sheet: its name, and its columns, all of one length."""

    name: str
    columns: Sequence[Field]

    @property
    def rows(self) -> int:
        """How many rows it has under its head."""
        return len(self.columns[0].values)


def sheets(tables: Sequence[Table], unit: str) -> Iterator[Sheet]:
    """Yield a sheet for each table, lengths in a drawing's unit; a table longer than a sheet goes on on the next."""
    taken: set[str] = set()
    for table in tables:
        columns = _columns(table, unit)
        for start in range(0, len(columns[0].values), _LAST_ROW - 1):
            part = slice(start, start + _LAST_ROW - 1)
            yield Sheet(_name(table.name, taken), [_part(column, part) for column in columns])


def _columns(table: Table, unit: str) -> list[Field]:
    """Return a table's columns, numbers as numbers; beside feet stand feet and inches."""
    numbers = fields(table, unit, feet_as_text=False)
    if unit != "ft":
        return numbers
    texts = [[text] if text.metres is not None else [] for text in fields(table, unit)]
    return list(chain.from_iterable((number, *text) for number, text in zip(numbers, texts, strict=True)))


def _part(column: Field, rows: slice) -> Field:
    return Field(column.head, column.heading, column.values[rows], column.decimals)


def _name(wanted: str, taken: set[str]) -> str:
    """Return a name that a sheet may have and none has yet (capitals count as small letters)."""
    base = re.sub(r"[\[\]:*?/\\']", " ", wanted).strip()[:_LONGEST_NAME] or "table"
    name, number = base, 2
    while name.casefold() in taken:
        end = f" {number}"
        name, number = base[: _LONGEST_NAME - len(end)] + end, number + 1
    taken.add(name.casefold())
    return name


class _Drain(io.RawIOBase):
    """Where the archive is written to: what came since the last look is taken away in one piece."""

    def __init__(self) -> None:
        self._waiting: list[bytes] = []

    def writable(self) -> bool:
        return True

    def write(self, data: bytes) -> int:  # type: ignore[override]
        self._waiting.append(bytes(data))
        return len(data)

    def take(self) -> bytes:
        taken = b"".join(self._waiting)
        self._waiting.clear()
        return taken


def chunks(made: Sequence[Sheet], title: str) -> Iterator[bytes]:
    """Yield the bytes of a workbook."""
    drain = _Drain()
    with zipfile.ZipFile(_heads(made, title)) as heads, zipfile.ZipFile(drain, "w") as book:
        by_part = {f"xl/worksheets/sheet{number}.xml": sheet for number, sheet in enumerate(made, start=1)}
        for part in heads.namelist():
            info = zipfile.ZipInfo(part, _MADE.timetuple()[:6])
            info.compress_type = zipfile.ZIP_DEFLATED
            with book.open(info, "w") as file:
                for data in _spliced(heads.read(part), by_part.get(part)):
                    file.write(data)
                    yield drain.take()
    yield drain.take()


def _heads(made: Sequence[Sheet], title: str) -> io.BytesIO:
    """Return a workbook with the sheets' heads and no rows."""
    import xlsxwriter

    target = io.BytesIO()
    with xlsxwriter.Workbook(target, {"in_memory": True}) as book:
        book.set_properties({"title": _NO_XML.sub("", title), "created": _MADE})
        bold = book.add_format({"bold": True, "text_wrap": True, "valign": "top"})
        for sheet in made:
            page = book.add_worksheet(sheet.name)
            page.freeze_panes(1, 0)
            for number, column in enumerate(sheet.columns):
                page.write_string(0, number, column.heading, bold)
                page.set_column(number, number, _width(column))
    return target


def _width(column: Field) -> int:
    """Return a width in characters that the head wraps into and the first values fit."""
    longest = max((len(str(value)) for value in column.values[:100] if value is not None), default=0)
    return min(max(longest, len(column.heading) // 2, 8) + 2, 60)


def _spliced(xml: bytes, sheet: Sheet | None) -> Iterator[bytes]:
    """Yield a part of the archive, that of a sheet with its rows."""
    if sheet is None:
        yield xml
        return
    before, end, after = xml.partition(_END_OF_ROWS)
    last = f"{_letters(len(sheet.columns) - 1)}{sheet.rows + 1}"
    yield re.sub(rb'<dimension ref="[^"]*"/>', f'<dimension ref="A1:{last}"/>'.encode(), before, count=1)
    for start in range(0, sheet.rows, _ROWS_A_CHUNK):
        yield _rows(sheet, start, min(start + _ROWS_A_CHUNK, sheet.rows))
    yield end + after


def _rows(sheet: Sheet, start: int, stop: int) -> bytes:
    cells = [
        [_cell(letters, row, value) for row, value in enumerate(column.values[start:stop], start=start + 2)]
        for letters, column in zip(_all_letters(sheet), sheet.columns, strict=True)
    ]
    rows = (f'<row r="{row}">{"".join(line)}</row>' for row, line in enumerate(zip(*cells, strict=True), start + 2))
    return "".join(rows).encode()


def _cell(letters: str, row: int, value: Cell) -> str:
    if isinstance(value, int | float):
        return f'<c r="{letters}{row}"><v>{value!r}</v></c>'
    if not value:
        return ""
    return f'<c r="{letters}{row}" t="inlineStr"><is><t xml:space="preserve">{escape(_clipped(value))}</t></is></c>'


def _clipped(text: str) -> str:
    """Return what a cell can hold of a text."""
    text = _NO_XML.sub("\ufffd", text).replace("\r", "\ufffd")  # XML reads a carriage return as a line end
    return text if len(text) <= _LONGEST_TEXT else text[: _LONGEST_TEXT - 3] + "..."


def _all_letters(sheet: Sheet) -> list[str]:
    return [_letters(number) for number in range(len(sheet.columns))]


def _letters(number: int) -> str:
    """Return the name of a column, A to Z, then AA and so on."""
    head, last = divmod(number, 26)
    return (_letters(head - 1) if head else "") + chr(ord("A") + last)


def verify_sheets(path: Path, made: Sequence[Sheet]) -> Checked:
    """Read every sheet back from the file's own XML and compare every cell.

    Raises
    ------
    CheckFailed
        At the first row that is not as written, and at any cell that holds a formula.
    """
    with zipfile.ZipFile(path) as archive:
        if (damaged := archive.testzip()) is not None:
            raise CheckFailed(f"{path.name}: {damaged} in it is damaged")
        shared = _shared_texts(archive)
        compared = 0
        for number, sheet in enumerate(made, start=1):
            with archive.open(f"xl/worksheets/sheet{number}.xml") as file:
                compared += _compared(f"{path.name}, sheet {sheet.name}", sheet, file, shared)
    return {"cells_compared": compared}


def _shared_texts(archive: zipfile.ZipFile) -> list[str]:
    root = ElementTree.fromstring(archive.read("xl/sharedStrings.xml"))
    return ["".join(part.text or "" for part in entry.iter(f"{_NAMESPACE}t")) for entry in root]


def _compared(where: str, sheet: Sheet, file: IO[bytes], shared: Sequence[str]) -> int:
    """Compare a sheet row by row, and return how many cells it has."""
    letters = _all_letters(sheet)
    wanted = _expected(sheet)
    cells = row = 0
    for _, element in ElementTree.iterparse(file):
        if element.tag != f"{_NAMESPACE}row":
            continue
        row += 1
        found = _found(where, element, shared)
        expected = {f"{c}{row}": v for c, v in zip(letters, next(wanted, ()), strict=False) if v not in (None, "")}
        if found != expected:
            cell = next(c for c in {**expected, **found} if found.get(c) != expected.get(c))
            raise CheckFailed(f"{where}: {cell} was read back as {found.get(cell)!r}, not {expected.get(cell)!r}")
        cells += len(found)
        element.clear()
    if row != sheet.rows + 1:
        raise CheckFailed(f"{where}: {row} rows were read back, not {sheet.rows + 1}")
    return cells


def _expected(sheet: Sheet) -> Iterator[tuple[Cell, ...]]:
    yield tuple(column.heading for column in sheet.columns)
    for row in zip(*(column.values for column in sheet.columns), strict=True):
        yield tuple(_clipped(value) if isinstance(value, str) else value for value in row)


def _found(where: str, row: ElementTree.Element, shared: Sequence[str]) -> dict[str, Cell]:
    """Return the value of each cell of a row by its name, A1."""
    found: dict[str, Cell] = {}
    for cell in row:
        name, kind, inner = cell.get("r", ""), cell.get("t"), cell[0]
        if inner.tag == f"{_NAMESPACE}f":
            raise CheckFailed(f"{where}: {name} holds a formula")
        text = "".join(inner.itertext())
        found[name] = text if kind == "inlineStr" else shared[int(text)] if kind == "s" else float(text)
    return found
