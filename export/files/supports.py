"""Pulls on supports, `<stem>-supports.csv`: a row for each support and case, with what the case includes."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.csvfile import csv_file, verify_csv
from export.listing import supports
from export.outputs import Checked, Choices, File, Output
from geom.result import Result


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the pulls, if anything pulls at all."""
    if result.supports:
        yield csv_file("supports.csv", supports(result), result)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read the pulls back and compare every cell."""
    return verify_csv(path, supports(result), result)


OUTPUT = Output("supports", write, verify)
