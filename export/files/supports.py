"""Pulls on supports, `<stem>-supports.csv`: a row for each support and case, with what the case includes."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.csvfile import csv_file, verify_csv
from export.listing import supports, with_origin
from export.outputs import Checked, Choices, File, Output
from geom.result import Result


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the pulls, if anything pulls at all."""
    if result.supports:
        yield csv_file("supports.csv", with_origin(supports(result), result), result)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read the pulls back and compare every cell."""
    return verify_csv(path, with_origin(supports(result), result), result)


OUTPUT = Output("supports", write, verify)
