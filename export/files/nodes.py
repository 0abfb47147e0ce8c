"""A net's nodes, `<stem>-nodes.csv`, of every piece that has any."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from export.csvfile import csv_file, verify_csv
from export.listing import own_named, with_origin
from export.outputs import Checked, Choices, File, Output
from geom.result import Result, Table

_TABLE = "nodes"


def write(result: Result, _choices: Choices) -> Iterator[File]:
    """Yield the nodes, if any piece has them."""
    table = own_named(result, _TABLE)
    if table is not None:
        yield csv_file("nodes.csv", with_origin(table, result), result)


def verify(path: Path, result: Result, _choices: Choices) -> Checked:
    """Read the nodes back and compare every cell."""
    return verify_csv(path, with_origin(own_named(result, _TABLE) or Table(_TABLE, ()), result), result)


OUTPUT = Output("nodes", write, verify)
