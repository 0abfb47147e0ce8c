"""Designs that the tests of drawings share, and the way from their text to a result."""

from functools import cache

import numpy as np

from geom.curves import Arc, Catenary, Polyline, Segment
from geom.design.reader import read
from geom.result import (
    Z_UP,
    Caution,
    Dimension,
    Frame,
    Label,
    Line,
    Piece,
    Pull,
    Quantity,
    Result,
    Unit,
    Used,
    View,
    fixed,
)
from geom.setting.options import Setting
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


def at_angle(radius: float, angle: float) -> np.ndarray:
    """A point of the arch of `by_hand` (3,) m: about (2, 0, 0), in the plane y = 0."""
    return fixed([2 + radius * np.cos(angle), 0, radius * np.sin(angle)])


def by_hand() -> Result:
    """A result with every kind of dimension, symbol and line: a round arch, and a wire with loads over ground."""
    x = np.array([1.0, 0, 0])

    def half(radius: float) -> Arc:
        return Arc(np.array([2.0, 0, 0]), radius, x, Z_UP, 0, np.pi)

    dimensions = (
        Dimension("horizontal", fixed([0, 0, 0]), fixed([4, 0, 0]), 4.0, "clear span"),
        Dimension("vertical", fixed([2, 0, 0]), fixed([2, 0, 2]), 2.0, "rise", "inside"),
        Dimension("radius", fixed([2, 0, 0]), at_angle(2.0, 0.9), 2.0, "intrados", "inside"),
        Dimension("aligned", at_angle(2.0, 2.2), at_angle(2.3, 2.2), 0.3, "", "inside"),
        Dimension("aligned", at_angle(2.3, np.pi), at_angle(2.3, np.pi / 2), 2.3 * np.sqrt(2), "to crown", "left"),
        Dimension("horizontal", fixed([0.5, 0, 1]), fixed([3.5, 0, 1]), 3.0, "clear at 1000", "inside"),
        Dimension("level", fixed([2, 0, 2]), fixed([2, 0, 2]), 2.0, "underside of crown", "right"),
        Dimension("level", fixed([2, 0, 2.3]), fixed([2, 0, 2.3]), 2.3, "top", "right"),
    )
    lines = (
        Line("intrados", half(2.0)), Line("extrados", half(2.3)), Line("axis", half(2.15)), Line("thrust", half(2.1)),
        Line("springing", Segment(at_angle(2.3, np.pi), at_angle(2.3, 0))),
    )  # fmt: skip
    labels = (Label(fixed([0, 0, 0]), "L", "support"), Label(fixed([4, 0, 0]), "R", "support"))
    arch = Piece(
        "A", "arch", "arch", (View("elevation", Frame(fixed([0, 0, 0]), fixed(x), Z_UP), dimensions),), 1.0, None,
        Used("by hand"), copies=2, lines=lines, labels=labels, facts=(Quantity("thrust", 1234.0, Unit("N")),),
    )  # fmt: skip
    return Result("By hand", "mm", Setting(), (arch, _wire()), cautions=(Caution("clear", "W", "Too low"),))


def _wire() -> Piece:
    start, end = np.array([0.0, 3, 3]), np.array([6.0, 3, 3.5])
    hung = Catenary(start, end, 4.0)
    places = hung.at(np.linspace(0, hung.length, 5)[1:-1]).points
    under = places[1] - [0, 0, 0.6]
    labels = (
        Label(fixed(start), "P1", "support"), Label(fixed(end), "P2", "support"),
        *(Label(fixed(at), f"L{n}", "load", 0.0 if n == 1 else 0.6) for n, at in enumerate(places, 1)),
    )  # fmt: skip
    dimensions = (
        Dimension("horizontal", fixed(start), fixed(end), 6.0, "span"),
        Dimension("vertical", fixed([under[0], 3, 0]), fixed(under), float(under[2]), "clearance under L2", "inside"),
    )
    ground = Polyline(np.array([[0, 3, 0], [3, 3, 0], [4, 3, -0.1], [6, 3, -0.1]]))
    lines = (
        Line("axis", hung), Line("chord", Segment(start, end)), Line("ground", ground),
        Line("other case", Catenary(start, end, 3.0)),
    )  # fmt: skip
    pulls = tuple(
        Pull(mark, True, fixed(at), {"as hung": fixed([way, 0, -1])})
        for mark, at, way in (("P1", start, 1), ("P2", end, -1))
    )
    frame = Frame(fixed(start), fixed([1, 0, 0]), Z_UP)
    return Piece(
        "W", "hanging", "wire 4 mm", (View("elevation", frame, dimensions),), 2.0, None, Used("by hand"), lines=lines,
        labels=labels, facts=(Quantity("end_pull", 1234.0, Unit("N")),), pulls=pulls,
    )  # fmt: skip
