"""Drawing into a space or block of a DXF document: geometry in metres, printed things in millimetres of paper."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any

import numpy as np

from export.dxf.document import TEXT_STYLE, Format, attributes
from export.picture.looks import Look
from export.picture.values import Circle, Floats, Path, Stroke, Text

if TYPE_CHECKING:
    from ezdxf.layouts.base import BaseLayout

_ANCHORS = {"left": 0, "centre": 1, "right": 2}
_BULGE_DECIMALS = 12  # an arc's sagitta is half its chord times the bulge: exact to 1e-12 of the chord
Pair = tuple[float, float]


@dataclass
class Pen:
    """Draws into one space or block. `printed` and `factor` of the format bring both kinds of points to its unit.

    `moved` is added to all points, in drawing units: where the origin of what is drawn comes to lie.
    """

    layout: BaseLayout
    fmt: Format
    layers: Mapping[str, Look]
    moved: Pair = (0.0, 0.0)

    def stroke(self, stroke: Stroke) -> None:
        """Draw a line of the geometry."""
        points = self.geometry(stroke.points)
        self._line(points, stroke.look, closed=stroke.closed, bulges=stroke.bulges)

    def path(self, path: Path) -> None:
        """Draw a printed line."""
        self._line(self.paper(path.points), path.look, closed=path.closed)

    def circle(self, circle: Circle) -> None:
        """Draw a printed circle."""
        at = self.paper(np.array([circle.at]))[0]
        radius = self._rounded(circle.radius * self.fmt.printed)
        self.layout.add_circle(at, radius, self._attributes(circle.look))

    def text(self, text: Text) -> None:
        """Draw a line of text."""
        at = self.paper(np.array([text.at]))[0]
        self.write(text.text, at, text.height * self.fmt.printed, text.look, anchor=text.anchor, angle=text.angle)

    def write(
        self, says: str, at: Sequence[float], height: float, look: Look, *, anchor: str = "left", angle: float = 0.0
    ) -> None:
        """Draw a line of text at a point and in a height of the drawing's unit."""
        values = self._attributes(look) | {
            "text": says, "insert": at, "height": self._rounded(height), "style": TEXT_STYLE,
        }  # fmt: skip
        if angle:
            values["rotation"] = round(float(np.degrees(angle)), 6)
        if anchor != "left":
            values |= {"halign": _ANCHORS[anchor], "align_point": at}
        self.layout.new_entity("TEXT", values)

    def block(self, name: str, at: Pair, layer: str, rotation: float = 0.0) -> None:
        """Refer to a block."""
        values: dict[str, object] = {"layer": layer}
        if rotation:
            values["rotation"] = rotation
        self.layout.add_blockref(name, at, values)

    def geometry(self, points: Floats) -> list[Pair]:
        """Return points (n, 2) m in drawing units."""
        return self._pairs(points * self.fmt.factor)

    def paper(self, points: Floats) -> list[Pair]:
        """Return printed points (n, 2) in drawing units."""
        return self._pairs(points * self.fmt.printed)

    def _pairs(self, points: Floats) -> list[Pair]:
        # adding 0 makes -0.0 plain 0.0, which would be written "-0.0"
        return [tuple(pair) for pair in (np.round(points + self.moved, self.fmt.decimals) + 0.0).tolist()]

    def _rounded(self, value: float) -> float:
        return round(value, self.fmt.decimals)

    def _line(self, points: Sequence[Pair], look: Look, *, closed: bool, bulges: Floats | None = None) -> None:
        values = self._attributes(look)
        if bulges is None:
            points = _without_repeats(points, closed=closed)
        if len(points) < 2:
            return
        if len(points) == 2 and bulges is None:
            self.layout.add_line(points[0], points[1], values)
        elif self.fmt.old:
            self._old_polyline(points, values, closed=closed, bulges=bulges)
        else:
            line: Any = self.layout.new_entity("LWPOLYLINE", values | {"flags": int(closed)})
            # appending points one by one costs the square of their number: set them as a whole
            line.lwpoints.values = _five(points, bulges)

    def _old_polyline(
        self, points: Sequence[Pair], values: dict[str, object], *, closed: bool, bulges: Floats | None
    ) -> None:
        if bulges is None:
            self.layout.add_polyline2d(points, close=closed, dxfattribs=values)
            return
        rounded = np.round(bulges, _BULGE_DECIMALS).tolist()
        with_bulges = [(x, y, bulge) for (x, y), bulge in zip(points, rounded, strict=True)]
        self.layout.add_polyline2d(with_bulges, format="xyb", close=closed, dxfattribs=values)

    def _attributes(self, look: Look) -> dict[str, object]:
        found = self._known.get(look)
        if found is None:
            found = self._known[look] = attributes(look, self.layers, self.fmt)
        return dict(found)

    @cached_property
    def _known(self) -> dict[Look, dict[str, object]]:
        return {}


def _without_repeats(points: Sequence[Pair], *, closed: bool) -> Sequence[Pair]:
    """Points of which no two running are the same once they are rounded."""
    kept = [point for number, point in enumerate(points) if not number or point != points[number - 1]]
    return kept[:-1] if closed and len(kept) > 1 and kept[0] == kept[-1] else kept


def _five(points: Sequence[Pair], bulges: Floats | None) -> Floats:
    """Points as the library keeps them (n, 5): x, y, width at start and end, bulge."""
    table = np.zeros((len(points), 5))
    table[:, :2] = points
    if bulges is not None:
        table[:, 4] = np.round(bulges, _BULGE_DECIMALS)
    return table
