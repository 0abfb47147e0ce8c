"""The cut list, `<stem>-cuts.csv`: what is cut of what, to which length, how many."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.csvfile import csv_file, verify_csv
from export.listing import cuts
from export.outputs import Checked, Choices, File, Output
from geom.result import Result


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the cut list."""
    yield csv_file("cuts.csv", cuts(result), result)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read the cut list back and compare every cell."""
    return verify_csv(path, cuts(result), result)


OUTPUT = Output("cuts", write, verify)
