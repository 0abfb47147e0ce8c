"""Designs that the tests of drawings share, and the way from their text to a result."""

from functools import cache

from geom.design.reader import read
from geom.result import Result
from geom.solve import solve

SWAGS = """
title = "Courtyard swags & <lamps>"
unit  = "mm"
[support.P1]
at = [0, 0, 3000]
[support.P2]
at = [4000, 0, 3200]
[[hanging]]
mark = "S1"
from = "P1"
to = "P2"
stock = "DIN 763-6"
sag = 600
copies = 4
[[hanging]]
mark = "S2"
from = "P2"
to = [6000, 1500, 2800]
stock = "DIN 763-6"
slack = 1.3
[[hanging]]
mark = "S3"
from = [1000, 2000, 3000]
to = [1800, 2000, 3000]
stock = "DIN 763-4"
slack = 1.6
"""

RUN = """
title = "Bollards"
unit = "mm"
[fitting.shackle]
takes = 32
turns = 1
[[run]]
mark = "Q"
supports = [[0, 0, 900], [1800, 0, 900], [3600, 0, 900], [5400, 0, 840], [7200, 0, 780]]
stock = "DIN 763-8"
sag = 250
parity = "odd"
fittings = { from = "shackle", to = "shackle" }
clear = { above = [[0, 0], [3600, 0], [7200, -120]], at_least = 600 }
"""

NET = """
title = "Net"
unit = "mm"
[[net]]
mark = "K"
pattern = "square"
outline = [[0, 0, 3000], [4800, 0, 3400], [4800, 4800, 3000], [0, 4800, 3400]]
divisions = 6
anchors = "corners"
stock = "DIN 763-4"
force_density = { field = "25 N/m", edge = "100 N/m" }
"""


def many(count: int, head: str = 'unit = "mm"') -> str:
    """Return a design of so many hangings, no two alike."""
    pieces = (
        f'[[hanging]]\nmark = "B{n}"\nfrom = [0, {50 * n}, 3600]\nto = [2400, {50 * n}, 3600]\n'
        f'stock = "DIN 763-6"\nsag = {300 + 20 * n}\n'
        for n in range(1, count + 1)
    )
    return f"{head}\n{''.join(pieces)}"


@cache
def solved(text: str) -> Result:
    """Return the result of a design that can be made."""
    reading = read(text, "design")
    assert reading.design is not None, [problem.render("design") for problem in reading.problems]
    result = solve(reading.design).result
    assert result is not None
    return result


def in_unit(text: str, unit: str, **drawing: str) -> str:
    """Return a design whose drawings are in a unit, and with other keys of [drawing]."""
    keys = "".join(f"{key} = {value}\n" for key, value in drawing.items())
    title, rest = text.split("unit", 1)
    line, rest = rest.split("\n", 1)
    return f'{title}unit{line}\n[drawing]\nunit = "{unit}"\n{keys}{rest}'


ARCH = """
title = "Garden arch"
unit = "mm"
[[arch]]
mark = "A1"
from = [0, 0, 1150]
to = [1820, 0, 1150]
rise = 1240
face = "intrados"
thickness = 215
depth = 440
material = "brick"
blocks = 15
joint = 10
"""
