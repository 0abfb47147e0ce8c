"""Every table of a design as sheets of one workbook, `<stem>-tables.xlsx`: numbers as numbers, unit in the head."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.listing import every
from export.outputs import Checked, Choices, File, Output
from export.workbook import chunks, sheets, verify_sheets
from geom.result import Result


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the workbook, if there is any table."""
    made = list(sheets(every(result), result.setting.drawing_unit))
    if made:
        rows = {sheet.name: sheet.rows for sheet in made}
        yield File("tables.xlsx", chunks(made, result.title), lambda: {"rows": rows})


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read every sheet back and compare every cell."""
    return verify_sheets(path, list(sheets(every(result), result.setting.drawing_unit)))


OUTPUT = Output("tables", write, verify)
