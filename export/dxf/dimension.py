"""Dimensions as real DIMENSION entities, drawn the way they are placed in the picture.

The entity holds what is measured and in which style, so that a reader can measure again; its block holds our own
lines, so that it looks the same everywhere until somebody edits it.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from export.dxf.document import DIMENSION_STYLE
from export.dxf.pen import Pen
from export.picture.values import Placed

if TYPE_CHECKING:
    from ezdxf.document import Drawing

# types of DIMENSION (group code 70): its block is its own, its text stands where we put it
_OWN_BLOCK, _TEXT_PLACED = 32, 128
_TYPES = {"linear": 0, "radius": 4, "ordinate": 6}
_EQUAL = 1e-6  # of the figure, or m: a measure and its figure that differ by more are not the same


def add(doc: Drawing, pen: Pen, placed: Placed, per: float) -> None:
    """Add a dimension to a space; `per` metres of geometry are a millimetre of print."""
    block = doc.blocks.new_anonymous_block(type_char="D")
    inside = Pen(block, pen.fmt, pen.layers, pen.moved)
    for path in placed.paths:
        inside.path(path)
    inside.text(placed.text)
    values = {
        "layer": placed.text.look.layer,
        "dimstyle": DIMENSION_STYLE,
        "geometry": block.name,
        "dimtype": _TYPES[placed.kind] | _OWN_BLOCK | _TEXT_PLACED,
        "text_midpoint": pen.paper(placed.text.corners.mean(axis=0)[None])[0],
        "actual_measurement": round(placed.measured * pen.fmt.factor, pen.fmt.decimals),
        "attachment_point": 5,
    } | _points(pen, placed, per)
    if not agrees(placed):
        values["text"] = placed.text.text
    elif placed.says:
        values["text"] = f"<> {placed.says}"
    pen.layout.new_entity("DIMENSION", values)


def agrees(placed: Placed) -> bool:
    """Return whether what the points measure is the figure: else the text is said in full."""
    return math.isclose(placed.measured, placed.value, rel_tol=_EQUAL, abs_tol=_EQUAL)


def _points(pen: Pen, placed: Placed, per: float) -> dict[str, object]:
    p, q = pen.geometry(np.stack([placed.p, placed.q]))
    if placed.kind == "radius":
        return {"defpoint": p, "defpoint4": q, "leader_length": 0.0}
    if placed.kind == "ordinate":
        return {"defpoint": p, "defpoint2": q, "defpoint3": pen.paper(np.array([placed.line_at]))[0]}
    return {
        "defpoint": pen.paper(np.array([placed.line_at]))[0], "defpoint2": p, "defpoint3": q,
        "angle": round(math.degrees(placed.angle), 9),
    }  # fmt: skip
