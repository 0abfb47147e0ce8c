"""How an arch is shown: its lines in place, its marks, and what is worth dimensioning in its elevation."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.arch.asked import AskedArch
from geom.arch.making import Made
from geom.arch.ring import LineName, Ring
from geom.arch.setting_out import datum
from geom.curves import Catenary, Curve, Offset, Polyline, Segment
from geom.result import Z_UP, Dimension, DimensionKind, Frame, Label, Line, Said, View, fixed

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
    for _, foot, top in _ordinates(asked, made):
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
        return (*springings, *_stations(asked, made))
    return (*springings, *_block_labels(asked, made), *_stations(asked, made))


def _block_labels(asked: AskedArch, made: Made) -> Iterator[Label]:
    """Marks in the outer half of the blocks, where the axis does not cross them, with the way to their backs."""
    assert made.stones is not None  # asked before
    blocks = made.stones.blocks
    backs = asked.plane.placed(made.ring.extrados.point(blocks.outer.mean(axis=1)))
    middles = (asked.plane.placed(blocks.centroid) + backs) / 2
    for number, (middle, back) in enumerate(zip(middles, backs, strict=True)):
        yield Label(middle, block_mark(asked, number), "block", along=back - middle)


def _stations(asked: AskedArch, made: Made) -> Iterator[Label]:
    """Distances of the ordinates along the springing line, under their feet."""
    for x, foot, _ in _ordinates(asked, made):
        yield Label(foot, "", "station", below=(Said("{}", (x,)),))


def view(asked: AskedArch, made: Made) -> View:
    """Return the elevation with its dimensions."""
    frame = Frame(asked.plane.start, asked.plane.along, Z_UP)
    return View("elevation", frame, tuple(_dimensions(asked, made)))


def _dimensions(asked: AskedArch, made: Made) -> Iterator[Dimension]:
    ring, face = made.ring, asked.profile.face
    yield from _spans(asked, ring)
    yield from _rise(asked, ring, "intrados")
    yield from _rise(asked, ring, "extrados" if face == "intrados" else face)
    yield from _thicknesses(asked, ring)
    for _, foot, top in _ordinates(asked, made):
        yield Dimension("vertical", foot, top, float(top[2] - foot[2]), "", "inside")
    yield from _step(asked, made)
    for at in (asked.plane.start, *([asked.plane.end] if asked.level else [])):
        yield Dimension("level", at, at, float(at[2]), "springing", "below")


def _step(asked: AskedArch, made: Made) -> Iterator[Dimension]:
    """The step of the ordinates along the springing line, once, and where it begins."""
    step = asked.wanted.step
    if step is not None and _ordinates(asked, made):
        ends = np.array([(0.0, datum(made.ring)), (step, datum(made.ring))])
        says = f"steps from {asked.start.name or 'the first springing'}"
        low, high = asked.plane.placed(ends)
        yield Dimension("horizontal", low, high, step, says, "below", 0)


def _spans(asked: AskedArch, ring: Ring) -> Iterator[Dimension]:
    """Spans of the face line and of the opening, smallest nearest."""
    face = asked.profile.face
    for name in dict.fromkeys((face, "intrados", "axis")):
        low, high = asked.plane.placed(ring.feet(name))
        yield Dimension("horizontal", low, high, ring.span(name), _SAYS[name], "below", 0, tells=name == face)
    if asked.profile.foot == "level":
        bed = np.stack([ring.feet("intrados")[1], ring.feet("extrados")[1]])
        low, high = asked.plane.placed(bed)
        yield Dimension("horizontal", low, high, beds(ring)[1], "bed", "below", 0)
    if ring.feet(face)[1, 1] != 0.0:
        rise = abs(asked.level)
        side: Side = "right" if asked.level > 0 else "left"
        yield Dimension("vertical", asked.plane.start, asked.plane.end, rise, "level difference", side)


def _rise(asked: AskedArch, ring: Ring, name: LineName) -> Iterator[Dimension]:
    if not ring.crown_inside:
        return
    line = ring.line(name)
    feet = ring.feet(name)
    side: Side = "left" if name == "intrados" else "right"
    low = np.array([feet[1 if side == "right" else 0, 0], np.min(feet[:, 1])])
    says = "over all" if name == "extrados" != asked.profile.face else _RISES[name]
    yield replace(_measured(asked, "vertical", low, line.point(0.0), says, side), tells=name == asked.profile.face)


def _thicknesses(asked: AskedArch, ring: Ring) -> Iterator[Dimension]:
    """Along the normal: once, as it is the same all along; at the crown, or where the intrados springs."""
    q = 0.0 if ring.crown_inside else ring.ends["intrados"][1]
    yield _measured(asked, "aligned", ring.intrados.point(q), ring.extrados.point(q), "", "inside")


def beds(ring: Ring) -> tuple[float, float]:
    """Return the widths of level feet, from intrados to extrados, m."""
    inner, outer = ring.feet("intrados")[:, 0], ring.feet("extrados")[:, 0]
    return abs(float(inner[0] - outer[0])), abs(float(outer[1] - inner[1]))


def _measured(asked: AskedArch, kind: DimensionKind, p: Floats, q: Floats, says: str, side: Side) -> Dimension:
    step = q - p
    value = abs(float(step[1])) if kind == "vertical" else float(np.hypot(*step))
    start, end = asked.plane.placed(np.stack([p, q]))
    return Dimension(kind, start, end, value, says, side)


def _ordinates(asked: AskedArch, made: Made) -> list[tuple[float, Floats, Floats]]:
    """Abscissae, feet on the springing level and tops on the face line of the ordinates that are drawn, in place."""
    if made.table is None or len(made.table.x) > MOST_ORDINATES:
        return []
    heights = getattr(made.table, asked.profile.face)
    shown = heights > 1e-6  # m: nothing shorter is drawn; a comparison with NaN is false
    x, base = made.table.x[shown], datum(made.ring)
    feet = asked.plane.placed(np.stack([x, np.full_like(x, base)], axis=-1))
    tops = asked.plane.placed(np.stack([x, base + heights[shown]], axis=-1))
    return list(zip(x.tolist(), feet, tops, strict=True))
