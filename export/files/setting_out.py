"""Ordinates for marking out full size, `<stem>-setting-out.csv`, of every piece that has any."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.csvfile import csv_file, verify_csv
from export.listing import own_named
from export.outputs import Checked, Choices, File, Output
from geom.result import Result, Table

_TABLE = "setting out"


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the ordinates, if any piece has them."""
    table = own_named(result, _TABLE)
    if table is not None:
        yield csv_file("setting-out.csv", table, result)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read the ordinates back and compare every cell."""
    return verify_csv(path, own_named(result, _TABLE) or Table(_TABLE, ()), result)


OUTPUT = Output("setting-out", write, verify)
