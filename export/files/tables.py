"""Every table of a design as sheets of one workbook, `<stem>-tables.xlsx`: numbers as numbers, unit in the head."""

from __future__ import annotations

import datetime
import io
import re
import zipfile
from collections.abc import Iterator, Sequence
from itertools import chain
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

from export.grid import Cell, Field, fields
from export.listing import every
from export.outputs import Checked, CheckFailed, Choices, File, Output
from geom.result import Result, Table

_LAST_ROW = 1_048_576  # rows of a sheet, ECMA-376 part 1, in the limits the format's own applications keep
_LONGEST_NAME = 31  # characters of a sheet's name, likewise
_LONGEST_TEXT = 32_767  # characters of a cell, likewise
_CHUNK = 1 << 20
# A workbook states when it was made; the clock would make every run differ. The first day of the ZIP format's calendar.
_MADE = datetime.datetime(1980, 1, 1)
_AS_TEXT = {"strings_to_formulas": False, "strings_to_urls": False, "strings_to_numbers": False}
_SHEET = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the workbook, if there is any table."""
    tables = every(result)
    if tables:
        counted: dict[str, object] = {}
        yield File("tables.xlsx", _chunks(result, tables, counted), lambda: counted)


def _chunks(result: Result, tables: Sequence[Table], counted: dict[str, object]) -> Iterator[bytes]:
    import xlsxwriter

    made = io.BytesIO()
    with xlsxwriter.Workbook(made, {**_AS_TEXT, "in_memory": True}) as book:
        book.set_properties({"title": result.title, "created": _MADE})
        bold = book.add_format({"bold": True, "text_wrap": True, "valign": "top"})
        counted["sheets"] = {
            name: _write_sheet(book.add_worksheet(name), columns, bold)
            for name, columns in _sheets(tables, result.setting.drawing_unit)
        }
    view = made.getbuffer()
    for start in range(0, len(view), _CHUNK):
        yield bytes(view[start : start + _CHUNK])


def _sheets(tables: Sequence[Table], unit: str) -> Iterator[tuple[str, list[Field]]]:
    """Yield name and columns of each sheet; a table longer than a sheet goes on on the next."""
    taken: set[str] = set()
    for table in tables:
        columns = _columns(table, unit)
        rows = len(columns[0].values)
        for start in range(0, rows, _LAST_ROW - 1):
            part = slice(start, start + _LAST_ROW - 1)
            yield _name(table.name, taken), [_part(column, part) for column in columns]


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


def _write_sheet(sheet: Any, columns: Sequence[Field], bold: object) -> int:  # noqa: ANN401 - no types in the library
    """Write a sheet, each cell by its own type (never guessed from its text), and return its count of rows."""
    sheet.freeze_panes(1, 0)
    for number, column in enumerate(columns):
        sheet.write_string(0, number, column.heading, bold)
        sheet.set_column(number, number, _width(column))
        for row, value in enumerate(column.values, start=1):
            if isinstance(value, int | float):
                sheet.write_number(row, number, value)
            elif value:
                sheet.write_string(row, number, _clipped(value))
    return len(columns[0].values)


def _clipped(text: str) -> str:
    """Return what a cell can hold of a text."""
    return text if len(text) <= _LONGEST_TEXT else text[: _LONGEST_TEXT - 3] + "..."


def _width(column: Field) -> int:
    """Return a width in characters that the head wraps into and the first values fit."""
    longest = max((len(str(value)) for value in column.values[:100] if value is not None), default=0)
    return min(max(longest, len(column.heading) // 2, 8) + 2, 60)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read every sheet back from the file's own XML and compare every cell.

    Raises
    ------
    CheckFailed
        At the first sheet or cell that is not as written, and at any cell that holds a formula.
    """
    compared = 0
    with zipfile.ZipFile(path) as archive:
        if archive.testzip() is not None:
            raise CheckFailed(f"{path.name}: {archive.testzip()} in it is damaged")
        shared = _shared_texts(archive)
        for number, (name, columns) in enumerate(_sheets(every(result), result.setting.drawing_unit), start=1):
            found = _cells(archive.read(f"xl/worksheets/sheet{number}.xml"), shared)
            compared += _compare(f"{path.name}, sheet {name}", columns, found)
    return {"cells_compared": compared}


def _shared_texts(archive: zipfile.ZipFile) -> list[str]:
    if "xl/sharedStrings.xml" not in archive.namelist():
        return []
    root = ElementTree.fromstring(archive.read("xl/sharedStrings.xml"))
    return ["".join(part.text or "" for part in entry.iter(f"{_SHEET}t")) for entry in root]


def _cells(xml: bytes, shared: Sequence[str]) -> dict[str, Cell]:
    """Return the value of each cell of a sheet by its name, A1."""
    found: dict[str, Cell] = {}
    for cell in ElementTree.fromstring(xml).iter(f"{_SHEET}c"):
        value = cell.find(f"{_SHEET}v")
        if cell.find(f"{_SHEET}f") is not None:
            raise CheckFailed(f"cell {cell.get('r')} holds a formula")
        if value is not None and value.text is not None:
            found[cell.get("r", "")] = shared[int(value.text)] if cell.get("t") == "s" else float(value.text)
    return found


def _compare(where: str, columns: Sequence[Field], found: dict[str, Cell]) -> int:
    from xlsxwriter.utility import xl_rowcol_to_cell

    expected: dict[str, Cell] = {
        xl_rowcol_to_cell(row, number): _clipped(value) if isinstance(value, str) else value
        for number, column in enumerate(columns)
        for row, value in enumerate((column.heading, *column.values))
        if value not in (None, "")
    }
    if found != expected:
        wrong = next(cell for cell in {**expected, **found} if found.get(cell) != expected.get(cell))
        raise CheckFailed(f"{where}: {wrong} was read back as {found.get(wrong)!r}, not {expected.get(wrong)!r}")
    return len(expected)


OUTPUT = Output("tables", write, verify)
