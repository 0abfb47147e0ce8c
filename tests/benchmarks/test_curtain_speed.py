"""A curtain of 2,000 strands: solving it against writing its drawing, both in one run."""

from __future__ import annotations

from time import process_time

import pytest

from export.files import drawing
from export.outputs import Choices
from geom.design.reader import read
from geom.solve import solve

STRANDS = 2000
ROUNDS = 3  # the least of each counts: what else the machine does can only add to it
CURTAIN = f"""
unit = "mm"
[stock.beads]
kind = "beads"
pitch = 6
mass_per_metre = 0.045
[[curtain]]
mark = "C"
rail = [[0, 0, 4000], [20000, 0, 4000], [20000, 12000, 4000]]
strands = {STRANDS}
hem = [[0, 1000], [8000, 1200], [16000, 900], [24000, 2500], [32000, 1000]]
hem_shape = "catenary"
scallop = 600
stock = "beads"
"""


@pytest.mark.long
def test_solving_two_thousand_strands_takes_less_than_writing_their_drawing() -> None:
    solving, writing = [], []
    for _ in range(ROUNDS):
        design = read(CURTAIN, "curtain").design
        assert design is not None
        start = process_time()
        result = solve(design).result
        solved = process_time()
        assert result is not None
        size = sum(len(chunk) for file in drawing.write(result, Choices()) for chunk in file.chunks)
        solving.append(solved - start)
        writing.append(process_time() - solved)
        assert len(result.pieces[0].parts) == STRANDS
        assert size > 100 * STRANDS
    print(f"solving {min(solving):.2f} s, writing {min(writing):.2f} s: {min(solving) / min(writing):.2f}")  # noqa: T201
    assert min(solving) < min(writing)
