"""A table as a CSV file (RFC 4180, UTF-8): written in chunks, and read back in full."""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Iterator, Sequence
from pathlib import Path

from export.grid import Field, fields, total, written
from export.outputs import Checked, CheckFailed, File
from geom import units
from geom.result import Result, Table

_ROWS_A_CHUNK = 5000
_HALF_SIXTEENTH = 0.0254 / 32 * (1 + 1e-9)  # m: feet and inches are rounded to a sixteenth of an inch


def csv_file(name: str, table: Table, result: Result) -> File:
    """Return a table as a file to be written."""
    columns = fields(table, result.setting.drawing_unit)
    counted: dict[str, object] = {}
    return File(name, _chunks(columns, counted), lambda: counted)


def _chunks(columns: Sequence[Field], counted: dict[str, object]) -> Iterator[bytes]:
    """Yield the file, and note how many rows went out and what each column of numbers adds up to."""
    yield _lines([[column.head for column in columns]])
    rows = list(zip(*(written(column) for column in columns), strict=True))
    for start in range(0, len(rows), _ROWS_A_CHUNK):
        yield _lines(rows[start : start + _ROWS_A_CHUNK])
    counted["rows"] = len(rows)
    counted["sums"] = {column.head: total(column.values) for column in columns if column.decimals is not None}


def _lines(rows: Sequence[Sequence[str]]) -> bytes:
    text = io.StringIO()
    csv.writer(text, lineterminator="\r\n").writerows(rows)
    return text.getvalue().encode()


def verify_csv(path: Path, table: Table, result: Result) -> Checked:
    """Read a CSV file back and compare every cell with the table.

    Raises
    ------
    CheckFailed
        At the first head, row count, text or number that is not the table's.
    """
    columns = fields(table, result.setting.drawing_unit)
    with path.open(encoding="utf-8", newline="") as file:
        heads, *rows = csv.reader(file)
    if heads != [column.head for column in columns]:
        raise CheckFailed(f"{path.name}: the heads are {heads}")
    expected = len(columns[0].values) if columns else 0
    if len(rows) != expected or any(len(row) != len(columns) for row in rows):
        raise CheckFailed(f"{path.name}: {len(rows)} rows were read back, not {expected} of {len(columns)} cells")
    for number, column in enumerate(columns):
        _verify_column(path.name, column, [row[number] for row in rows])
    return {"rows_read_back": len(rows), "cells_compared": len(rows) * len(columns)}


def _verify_column(name: str, column: Field, cells: Sequence[str]) -> None:
    for row, (cell, wanted) in enumerate(zip(cells, _wanted(column), strict=True), start=2):
        if not _same(cell, wanted, column):
            raise CheckFailed(f"{name}, row {row}: {column.head} was read back as {cell!r}, not {wanted!r}")


def _wanted(column: Field) -> Sequence[object]:
    return column.values if column.metres is None else column.metres


def _same(cell: str, wanted: object, column: Field) -> bool:
    if wanted is None or cell == "":
        return cell == "" and (wanted in (None, "") or (isinstance(wanted, float) and math.isnan(wanted)))
    if isinstance(wanted, str):
        return cell.removeprefix("'") == wanted.removeprefix("'")
    if column.metres is not None:
        return abs(units.length(cell) - float(wanted)) <= _HALF_SIXTEENTH  # type: ignore[arg-type]
    return math.isclose(float(cell), float(wanted), rel_tol=0.0, abs_tol=0.5 * 10.0 ** -(column.decimals or 0))  # type: ignore[arg-type]
