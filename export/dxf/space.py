"""Drawing in three dimensions: curves, points, text standing in a piece's plane, links turned into place."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from export.dxf.document import TEXT_STYLE, Format, attributes
from export.dxf.links import outlines
from export.dxf.pen import Pen
from export.picture.looks import LOOKS, Look
from export.picture.values import Floats
from export.picture.values import Links as Row
from geom.result import Frame
from geom.solids import Balls, Links

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.layouts.base import BaseLayout

# DXF reference, "Arbitrary Axis Algorithm": a normal nearer the world's z than this takes its x axis from the world's y
_NEAR_Z = 1 / 64
_AXIS_DECIMALS = 12
Triple = tuple[float, float, float]


@dataclass(frozen=True, eq=False)
class Turned:
    """Places and turns as an entity with a normal of its own takes them: all (n, ...)."""

    places: Floats  # (n, 3) in each entity's own axes, m
    normals: Floats  # (n, 3)
    angles: Floats  # (n,) degrees, about the normal


def turned(places: Floats, along: Floats, normals: Floats) -> Turned:
    """Return places (n, 3) and directions (n, 3) in the axes that go with normals (n, 3).

    The axes follow from the normal alone (DXF reference, "Arbitrary Axis Algorithm"); they are taken from the normal as
    it is written, rounded, so that a reader comes to the same ones.
    """
    normals = np.round(normals, _AXIS_DECIMALS) + 0.0
    near = (np.abs(normals[:, 0]) < _NEAR_Z) & (np.abs(normals[:, 1]) < _NEAR_Z)
    x = np.cross(np.where(near[:, None], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]), normals)
    x /= np.linalg.norm(x, axis=1, keepdims=True)
    unit = normals / np.linalg.norm(normals, axis=1, keepdims=True)
    y = np.cross(unit, x)
    axes = np.stack([x, y, unit], axis=1)
    angles = np.degrees(np.arctan2((along * y).sum(axis=1), (along * x).sum(axis=1)))
    return Turned(np.einsum("nij,nj->ni", axes, places), normals, angles)


@dataclass
class SpacePen:
    """Draws into one space or block; points are in metres, heights of text too."""

    layout: BaseLayout
    fmt: Format
    layers: Mapping[str, Look]

    def line(self, points: Floats, look: Look, *, closed: bool = False) -> None:
        """Draw a line through points (n, 3)."""
        triples = self.triples(points)
        values = attributes(look, self.layers, self.fmt)
        if len(triples) == 2:
            self.layout.add_line(triples[0], triples[1], values)
        else:
            self.layout.add_polyline3d(triples, close=closed, dxfattribs=values)

    def point(self, at: Floats, look: Look) -> None:
        """Draw a point (3,)."""
        self.layout.add_point(self.triples(at[None])[0], attributes(look, self.layers, self.fmt))

    def cross(self, at: Floats, arm: float, look: Look) -> None:
        """Draw three short lines through a point (3,) along the axes."""
        for step in np.eye(3) * arm:
            self.line(np.stack([at - step, at + step]), look)

    def text(self, says: str, at: Floats, height: float, frame: Frame, look: Look) -> None:
        """Write text at a point (3,) in a frame's plane, along it."""
        normal = np.cross(frame.along, frame.up)
        own = turned(at[None], frame.along[None], normal[None])
        place = self.triples(own.places)[0]
        values = attributes(look, self.layers, self.fmt) | {
            "text": says, "insert": place, "height": round(height * self.fmt.factor, self.fmt.decimals),
            "style": TEXT_STYLE,
        }  # fmt: skip
        if abs(own.angles[0]) > 1e-9:
            values["rotation"] = round(float(own.angles[0]), 9)
        if own.normals[0, 2] != 1:
            values["extrusion"] = tuple(own.normals[0].tolist())
        self.layout.new_entity("TEXT", values)

    def triples(self, points: Floats) -> list[Triple]:
        """Return points (n, 3) m in drawing units, rounded."""
        scaled = np.round(points * self.fmt.factor, self.fmt.decimals) + 0.0
        return [tuple(point) for point in scaled.tolist()]


class SpaceLinks:
    """The blocks of links of one document in three dimensions: the outlines of a link in its own plane."""

    def __init__(self, doc: Drawing, fmt: Format, layers: Mapping[str, Look]) -> None:
        self._doc, self._fmt, self._layers = doc, fmt, layers
        self._names: dict[tuple[float, float, float], str] = {}

    def draw(self, pen: SpacePen, body: Links | Balls) -> None:
        """Refer to a link's block, or a bead's, at each of its places."""
        look = LOOKS["link"]
        name = self._name(body)
        if isinstance(body, Balls):
            for place in pen.triples(body.places):
                pen.layout.add_blockref(name, place, {"layer": look.layer})
            return
        own = turned(body.places, body.turns[:, :, 0], body.turns[:, :, 2])
        places: Sequence[Triple] = pen.triples(own.places)
        normals = [tuple(normal) for normal in own.normals.tolist()]
        angles = np.round(own.angles, 9).tolist()
        for place, normal, angle in zip(places, normals, angles, strict=True):
            values = {"layer": look.layer, "rotation": angle, "extrusion": normal}
            pen.layout.add_blockref(name, place, values)

    def _name(self, body: Links | Balls) -> str:
        size = (0.0, 2 * body.radius, 2 * body.radius) if isinstance(body, Balls) else _sizes(body)
        if size not in self._names:
            name = f"{'BEAD' if isinstance(body, Balls) else 'LINK'}${len(self._names) + 1}"
            self._names[size] = name
            pen = Pen(self._doc.blocks.new(name), self._fmt, self._layers)
            none = np.empty(0)
            for outline in outlines(Row(*size, none, none, none.astype(np.bool_)), face_on=True):
                pen.stroke(outline)
        return self._names[size]


def _sizes(body: Links) -> tuple[float, float, float]:
    return (body.link.wire, body.link.pitch, body.link.width)
