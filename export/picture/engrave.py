"""Where a part's mark is engraved: inside its outline, clear of its edges, as large as is easily read."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from export.picture import text as measure
from export.picture.values import Floats
from geom.result import Flat

if TYPE_CHECKING:
    from shapely import Polygon

_LARGEST = 0.02  # m: a mark is read at arm's length; larger only takes time on the machine
_SMALLEST = 0.0008  # m: finer strokes than a tenth of this no engraver holds (common practice)
_STEP = 0.85  # from one height tried to the next
_CLEAR = 0.35  # of the text's height: between a mark and the edge of the part
_UPRIGHT = 0.6  # of the greatest height that fits any way: from here on level text is preferred
_SPOTS = 9  # places along the part tried beside the roundest one


@dataclass(frozen=True)
class Engraving:
    """A mark inside a part: the middle of its box (2,) m, its height and angle."""

    at: Floats
    height: float
    angle: float


def engraving(flat: Flat) -> Engraving | None:
    """Return where a part's mark goes, or None where it does not fit at a height that can be engraved."""
    import shapely

    part = shapely.Polygon(flat.outlines[0], flat.outlines[1:])
    shapely.prepare(part)
    found = [one for spot, angle in _spots(part) if (one := _largest(part, flat.mark, spot, angle)) is not None]
    if not found:
        return None
    best = max(found, key=lambda one: one.height)
    level = [one for one in found if one.angle == 0.0 and one.height >= _UPRIGHT * best.height]
    return max(level, key=lambda one: one.height) if level else best


def _spots(part: Polygon) -> Iterator[tuple[Floats, float]]:
    """Places and angles to try: the middle of the greatest circle inside, and middles across the part at even steps."""
    import shapely

    left, bottom, right, top = part.bounds
    radius = shapely.maximum_inscribed_circle(part, (right - left + top - bottom) / 2000)
    centre, touch = np.array(radius.coords)
    across = np.arctan2(*(touch - centre)[::-1])
    middles = [centre, *_across(part)]
    for spot in middles:
        yield spot, 0.0
    yield centre, _readable(across + np.pi / 2)
    yield centre, np.pi / 2


def _across(part: Polygon) -> Sequence[Floats]:
    """Middles of the longest stretches of level lines inside the part."""
    import shapely

    left, bottom, right, top = part.bounds
    heights = np.linspace(bottom, top, _SPOTS + 2)[1:-1]
    lines = shapely.linestrings([[(left - 1, y), (right + 1, y)] for y in heights])
    middles = []
    for inside in shapely.intersection(lines, part):
        stretches = [piece for piece in shapely.get_parts(inside) if piece.length > 0]
        if stretches:
            longest = max(stretches, key=lambda piece: piece.length)
            middles.append(np.asarray(longest.interpolate(0.5, normalized=True).coords[0]))
    return middles


def _largest(part: Polygon, mark: str, spot: Floats, angle: float) -> Engraving | None:
    import shapely

    height = _LARGEST
    while height >= _SMALLEST:
        box = shapely.Polygon(box_at(mark, spot, height, angle, margin=_CLEAR * height))
        if part.contains_properly(box):
            return Engraving(spot, height, angle)
        height *= _STEP
    return None


def box_at(mark: str, middle: Floats, height: float, angle: float, *, margin: float = 0.0) -> Floats:
    """Return the corners (4, 2) of a text's box, with a margin round it."""
    wide, high = measure.width(mark) * height / 2 + margin, height / 2 + margin
    box = np.array([[-wide, -high], [wide, -high], [wide, high], [-wide, high]])
    cos, sin = np.cos(angle), np.sin(angle)
    return np.asarray(middle + box @ np.array([[cos, sin], [-sin, cos]]))


def _readable(angle: float) -> float:
    """The same direction, read from the foot or the right."""
    angle -= np.pi * np.round(angle / np.pi)
    return float(angle)
