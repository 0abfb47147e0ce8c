"""Links in a drawing: one block for each face of each link, referred to as often as there are links."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

import numpy as np

from export.dxf.document import Format
from export.dxf.pen import Pen
from export.picture.looks import LOOKS, Look
from export.picture.values import Floats, Links, Stroke

if TYPE_CHECKING:
    from ezdxf.document import Drawing

_LINK = LOOKS["link"]


class LinkBlocks:
    """The blocks of links of one document, made as they are met. `$` in a name cannot be in a mark."""

    def __init__(self, doc: Drawing, fmt: Format, layers: Mapping[str, Look]) -> None:
        self._doc, self._fmt, self._layers = doc, fmt, layers
        self._names: dict[tuple[float, float, float, bool], str] = {}

    def draw(self, pen: Pen, row: Links) -> None:
        """Refer to a link's blocks at each of its places."""
        names = [self._name(row, face_on=face) for face in (False, True)]
        places = pen.geometry(row.places)
        angles = np.round(np.degrees(row.angles), 6).tolist()
        for place, angle, face in zip(places, angles, row.face_on.tolist(), strict=True):
            pen.block(names[face], place, _LINK.layer, angle)

    def _name(self, row: Links, *, face_on: bool) -> str:
        face_on = face_on and bool(row.wire)  # balls are the same from all sides
        key = (row.wire, row.pitch, row.width, face_on)
        if key not in self._names:
            number = len({known[:3] for known in self._names} | {key[:3]})
            kind = "BEAD" if not row.wire else "LINK$FACE" if face_on else "LINK$EDGE"
            name = self._names[key] = f"{kind}${number}"
            pen = Pen(self._doc.blocks.new(name), self._fmt, self._layers)
            for outline in outlines(row, face_on=face_on):
                pen.stroke(outline)
        return self._names[key]


def outlines(row: Links, *, face_on: bool) -> list[Stroke]:
    """Return the outlines of one link about its centre, long axis along x: round wire and opening, or from the side."""
    if not row.wire:
        return [_rounded(row.pitch, row.width)]
    if face_on:
        return [_rounded(row.pitch + 2 * row.wire, row.width), _rounded(row.pitch, row.width - 2 * row.wire)]
    return [_rounded(row.pitch + 2 * row.wire, row.wire)]


def _rounded(long: float, wide: float) -> Stroke:
    """Two half circles joined by straights; where it is as long as wide, a circle."""
    half, straight = wide / 2, max(0.0, long - wide) / 2
    if straight <= 1e-9 * wide:
        return Stroke(_LINK, np.array([[-half, 0.0], [half, 0.0]]), True, np.ones(2))
    points: Floats = np.array([[-straight, -half], [straight, -half], [straight, half], [-straight, half]])
    return Stroke(_LINK, points, True, np.array([0.0, 1.0, 0.0, 1.0]))
