"""The one table that says how each role is drawn: layer, line type, width and colour.

Widths are ISO 128-2 printed widths, 1 : 2 : 4 for construction drawings (0.18 : 0.35 : 0.7 mm); line types are its
types 01 (continuous), 02 (dashed), 04 (long dash, dot) and 05 (long dash, double dot). A drawing must read in black on
white, white on black and on a poor printer: all is black or white by layer, but what warns (warm) and construction
lines (grey).
"""

from dataclasses import dataclass
from typing import Literal

LineType = Literal["CONTINUOUS", "DASHED", "CENTER", "PHANTOM"]
Colour = Literal["plain", "warm", "grey"]


@dataclass(frozen=True, slots=True)
class Look:
    """How a line is drawn. `width` is printed, in 1/100 mm; `heavy` lines are never crossed by text."""

    layer: str
    linetype: LineType = "CONTINUOUS"
    width: int = 18
    colour: Colour = "plain"

    @property
    def heavy(self) -> bool:
        """Whether it draws the thing itself, and not something said about it."""
        return self.linetype == "CONTINUOUS" and self.width >= 25


LAYERS = {  # the layers of every drawing and model, and how each looks where an entity does not say otherwise
    "AXIS": Look("AXIS", "CONTINUOUS", 35),
    "LINKS": Look("LINKS", "CONTINUOUS", 35),
    "CHORD": Look("CHORD", "DASHED", 18),
    "SUPPORTS": Look("SUPPORTS", "CONTINUOUS", 70),
    "LOADS": Look("LOADS", "CONTINUOUS", 25),
    "INTRADOS": Look("INTRADOS", "CONTINUOUS", 35),
    "EXTRADOS": Look("EXTRADOS", "CONTINUOUS", 35),
    "JOINTS": Look("JOINTS", "CONTINUOUS", 25),
    "BLOCKS": Look("BLOCKS", "CONTINUOUS", 35),
    "THRUST": Look("THRUST", "PHANTOM", 25, "warm"),
    "MEMBERS": Look("MEMBERS", "CONTINUOUS", 35),
    "EDGES": Look("EDGES", "CONTINUOUS", 35),
    "NODES": Look("NODES", "CONTINUOUS", 18),
    "FLOOR": Look("FLOOR", "CONTINUOUS", 70),
    "DIMENSIONS": Look("DIMENSIONS", "CONTINUOUS", 18),
    "MARKS": Look("MARKS", "CONTINUOUS", 18),
    "NOTES": Look("NOTES", "CONTINUOUS", 18),
}

CUT_LAYERS = {  # of flat parts to be cut; the cutter takes the first two and leaves the notes
    "CUT": Look("CUT", "CONTINUOUS", 25),
    "ENGRAVE": Look("ENGRAVE", "CONTINUOUS", 18),
    "NOTES": LAYERS["NOTES"],
}

_THIN_AXIS = Look("AXIS", "CENTER", 18)

LOOKS = {  # a role of a line of the result, or of what this picture adds, to its look
    "axis": LAYERS["AXIS"],
    "centre": _THIN_AXIS,
    "chord": LAYERS["CHORD"],
    "springing": LAYERS["CHORD"],
    "other case": Look("CHORD", "PHANTOM", 25),
    "intrados": LAYERS["INTRADOS"],
    "extrados": LAYERS["EXTRADOS"],
    "joint": LAYERS["JOINTS"],
    "block": LAYERS["BLOCKS"],
    "thrust": LAYERS["THRUST"],
    "member": LAYERS["MEMBERS"],
    "edge": LAYERS["EDGES"],
    "outline": Look("EDGES", "CONTINUOUS", 25),
    "floor": LAYERS["FLOOR"],
    "ground": LAYERS["FLOOR"],
    "ordinate": Look("DIMENSIONS", "CONTINUOUS", 18, "grey"),
    "link": LAYERS["LINKS"],
    "support": LAYERS["SUPPORTS"],
    "hatching": Look("SUPPORTS", "CONTINUOUS", 18),
    "ground hatching": Look("FLOOR", "CONTINUOUS", 18),
    "held point": Look("SUPPORTS", "CONTINUOUS", 35),
    "load": LAYERS["LOADS"],
    "node": LAYERS["NODES"],
    "mark": LAYERS["MARKS"],
    "leader": LAYERS["MARKS"],
    "dimension": LAYERS["DIMENSIONS"],
    "note": LAYERS["NOTES"],
    "caution": Look("NOTES", "CONTINUOUS", 18, "warm"),
}

# Drawn first where two lines lie on one another on plan; the rest add nothing there.
STRENGTH = ("axis", "member", "edge", "block", "intrados", "extrados", "floor", "ground", "centre")


def look(role: str, *, thick: bool = False) -> Look:
    """Return the look of a role; the axis of what has a thickness is a centre line."""
    return _THIN_AXIS if thick and role == "axis" else LOOKS[role]


def dashes(linetype: LineType) -> tuple[float, ...]:
    """Return dash and gap lengths in printed mm, gaps negative, dots 0; () for a continuous line.

    ISO 128-2 gives them in line widths: dash 12, long dash 24, gap 3, dot at most half a width. They are laid out for
    0.25 mm, between the two narrow widths in use, so that a line keeps its type when its width is changed.
    """
    width = 0.25
    dash, long, gap = 12 * width, 24 * width, 3 * width
    return {
        "CONTINUOUS": (),
        "DASHED": (dash, -gap),
        "CENTER": (long, -gap, 0.0, -gap),
        "PHANTOM": (long, -gap, 0.0, -gap, 0.0, -gap),
    }[linetype]
