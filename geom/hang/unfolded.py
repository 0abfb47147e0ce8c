"""Members and their solids turned about a plumb line into one plane, so that each is seen true to scale."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from geom.hang.shape import Shape
from geom.result import Z_UP, Frame, Piece
from geom.solids import Balls, Links, Solid, Sweep


def unfolded_shape(part: Piece, x: float) -> Shape:
    """Return a solved hanging's shape in the plane y = 0, its `from` end at `x`, its elevations kept."""
    start, end = (pull.at for pull in part.pulls)
    return Shape(start, end, part.lines[0].curve).unfolded(x)


def unfolded_solid(solid: Solid, frame: Frame, shape: Shape) -> Solid:
    """Return the same links or balls turned about a plumb line from their plane into the shape's, or the same tube."""
    body = solid.body
    turn = np.stack([frame.along, np.cross(Z_UP, frame.along), Z_UP])
    if isinstance(body, Links):
        places = (body.places - frame.origin) @ turn.T + shape.start
        return replace(solid, body=replace(body, places=places, turns=turn @ body.turns))
    if isinstance(body, Balls):
        return replace(solid, body=replace(body, places=(body.places - frame.origin) @ turn.T + shape.start))
    if isinstance(body, Sweep):
        return replace(solid, body=replace(body, curve=shape.curve))
    return solid
