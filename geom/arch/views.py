"""How an arch is shown: its lines in place, its marks, and what is worth dimensioning in its elevation."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.arch.asked import AskedArch
from geom.arch.making import Made
from geom.arch.ring import LineName, Ring
from geom.arch.setting_out import datum
from geom.curves import Catenary, Curve, Offset, Polyline, Segment
from geom.result import Z_UP, Dimension, DimensionKind, Frame, Label, Line, View, fixed

Floats = NDArray[np.float64]
Side = Literal["below", "above", "left", "right", "inside"]

_SAYS: dict[LineName, str] = {"intrados": "clear span", "axis": "span of axis", "extrados": "span of extrados"}
_RISES: dict[LineName, str] = {"intrados": "clear rise", "axis": "rise of axis", "extrados": "rise of extrados"}
MOST_ORDINATES = 40  # dimensioned in an elevation: more could not be read on the largest sheet; tables have all


def lines(asked: AskedArch, made: Made, within: float) -> tuple[Line, ...]:
    """Return intrados, axis, extrados, springing line, ordinates, and blocks with their joints or the bare feet."""
    return tuple(_lines(asked, made, within))


def _lines(asked: AskedArch, made: Made, within: float) -> Iterator[Line]:
    mark, plane = asked.mark, asked.plane
    for name in ("intrados", "axis", "extrados"):
        yield Line(name, curve(asked, made.ring, name), mark)
    yield Line("springing", Segment(plane.start, plane.end), mark)
    if made.stones is None:
        for foot in np.stack([made.ring.feet("intrados"), made.ring.feet("extrados")], axis=1):
            yield Line("joint", Segment(*plane.placed(foot)), mark)
    else:
        for number, outline in enumerate(made.stones.blocks.outlines(within)):
            closed = np.concatenate([outline, outline[:1]])
            yield Line("block", Polyline(plane.placed(closed)), block_mark(asked, number))
        joints = made.stones.joints
        for ends in np.stack([joints.bottom, joints.top], axis=1):
            yield Line("joint", Segment(*plane.placed(ends)), mark)
    for foot, top in _ordinates(asked, made):
        yield Line("ordinate", Segment(foot, top), mark)


def curve(asked: AskedArch, ring: Ring, name: LineName) -> Curve:
    """Return one of the three lines in place: the catenary, or its parallel."""
    hung = ring.line(asked.profile.curve)
    ends = asked.plane.placed(hung.point(np.array(ring.ends[name])))
    base = Catenary(ends[0], ends[1], ring.shape.scale, inverted=True)
    offset = asked.profile.offset(name)
    # seen from the right of x the page's own normal comes forward: up is to the left of a line run along x
    return base if offset == 0.0 else Offset(base, offset, -asked.plane.across)


def block_mark(asked: AskedArch, number: int) -> str:
    """Return the mark of a block by its index."""
    return f"{asked.mark}.{number + 1}"


def support_mark(asked: AskedArch, end: str) -> str:
    """Return the mark of a springing: its support's name, or its piece and end."""
    name = (asked.start if end == "from" else asked.end).name
    return name or f"{asked.mark}.{end}"


def labels(asked: AskedArch, made: Made) -> tuple[Label, ...]:
    """Return the marks of the springings and of the blocks."""
    plane = asked.plane
    ends = ((plane.start, "from"), (plane.end, "to"))
    springings = tuple(Label(fixed(at), support_mark(asked, end), "support") for at, end in ends)
    if made.stones is None:
        return springings
    centres = plane.placed(made.stones.blocks.centroid)
    return (*springings, *(Label(at, block_mark(asked, number), "part") for number, at in enumerate(centres)))


def view(asked: AskedArch, made: Made) -> View:
    """Return the elevation with its dimensions."""
    frame = Frame(asked.plane.start, asked.plane.along, Z_UP)
    return View("elevation", frame, tuple(_dimensions(asked, made)))


def _dimensions(asked: AskedArch, made: Made) -> Iterator[Dimension]:
    ring, face = made.ring, asked.profile.face
    yield from _spans(asked, ring)
    names: tuple[LineName, ...] = ("axis",) if face == "intrados" else (face,)
    for name in (*names, "intrados"):
        yield from _rise(asked, ring, name)
    yield from _thicknesses(asked, ring)
    for foot, top in _ordinates(asked, made):
        yield Dimension("vertical", foot, top, float(top[2] - foot[2]), "", "inside")


def _spans(asked: AskedArch, ring: Ring) -> Iterator[Dimension]:
    """Spans of the face line and of the opening, smallest nearest."""
    face = asked.profile.face
    for name in dict.fromkeys((face, "intrados", "axis")):
        low, high = asked.plane.placed(ring.feet(name))
        yield Dimension("horizontal", low, high, ring.span(name), _SAYS[name], "below", 0)
    if ring.feet(face)[1, 1] != 0.0:
        rise = abs(asked.level)
        side: Side = "right" if asked.level > 0 else "left"
        yield Dimension("vertical", asked.plane.start, asked.plane.end, rise, "level difference", side)


def _rise(asked: AskedArch, ring: Ring, name: LineName) -> Iterator[Dimension]:
    if not ring.crown_inside:
        return
    line = ring.line(name)
    feet = ring.feet(name)
    side: Side = "right" if name == "axis" else "left"
    low = np.array([feet[1 if side == "right" else 0, 0], np.min(feet[:, 1])])
    yield _measured(asked, "vertical", low, line.point(0.0), _RISES[name], side)


def _thicknesses(asked: AskedArch, ring: Ring) -> Iterator[Dimension]:
    """Along the normals, at the crown and where the intrados springs."""
    places = (*([0.0] if ring.crown_inside else []), ring.ends["intrados"][1])
    for q in places:
        yield _measured(asked, "aligned", ring.intrados.point(q), ring.extrados.point(q), "", "inside")


def _measured(asked: AskedArch, kind: DimensionKind, p: Floats, q: Floats, says: str, side: Side) -> Dimension:
    step = q - p
    value = abs(float(step[1])) if kind == "vertical" else float(np.hypot(*step))
    start, end = asked.plane.placed(np.stack([p, q]))
    return Dimension(kind, start, end, value, says, side)


def _ordinates(asked: AskedArch, made: Made) -> list[tuple[Floats, Floats]]:
    """Feet on the springing level and tops on the face line of the ordinates that are drawn, in place."""
    if made.table is None or len(made.table.x) > MOST_ORDINATES:
        return []
    heights = getattr(made.table, asked.profile.face)
    shown = heights > 1e-6  # m: nothing shorter is drawn; a comparison with NaN is false
    x, base = made.table.x[shown], datum(made.ring)
    feet = asked.plane.placed(np.stack([x, np.full_like(x, base)], axis=-1))
    tops = asked.plane.placed(np.stack([x, base + heights[shown]], axis=-1))
    return list(zip(feet, tops, strict=True))
