"""Parts too thin to print, thickened.

Each body thickens in its own way: wire and tubes about their centrelines, prisms along their depth and outwards in
their outline, shells to both sides. What was done comes back as text for a caution: a print model is then no
longer a true model of the piece.
"""

from collections.abc import Callable
from dataclasses import replace
from functools import singledispatch
from typing import NamedTuple

import numpy as np
import shapely
from numpy.typing import NDArray

from geom.curves import Polyline
from geom.solids import Balls, Bars, Body, Faceted, Links, Prism, Shell, Sweep, Union
from geom.solids.section import Section

Array = NDArray[np.float64]

_ENOUGH = 1 - 1e-9  # of the least wall: thinner by less is rounding
_STEPS = 20  # halvings of the widening of an outline: to a millionth of the wall


class Thickened(NamedTuple):
    """A body and what was done to it, one line of text for each kind of change."""

    body: Body
    notes: tuple[str, ...]


class _Walls(NamedTuple):
    least: float  # m, least thickness of anything
    overlap: float  # m, how far the wires of touching links are to run into one another; 0 leaves them


def thickened(body: Body, least: float, *, overlap: float = 0.0) -> Thickened:
    """Thicken what is thinner than the least wall, and wire of links that are to overlap.

    Parameters
    ----------
    body : Body
        The body at its printed size, m.
    least : float
        Least thickness, m.
    overlap : float
        How far touching links are to run into one another, m; 0 for links that stay apart. Wire thickened by this
        about its centreline overlaps its neighbour's by as much.

    Returns
    -------
    Thickened
        The body, the same where nothing is too thin, and notes.
    """
    done, notes = _thicken(body, _Walls(least, overlap))
    return Thickened(done, tuple(dict.fromkeys(notes)))


def _mm(length: float) -> str:
    return f"{length * 1000:.3g} mm"


@singledispatch
def _thicken(body: Body, walls: _Walls) -> Thickened:
    raise TypeError(f"no way is known to thicken a {type(body).__name__}")


@_thicken.register
def _faceted(body: Faceted, walls: _Walls) -> Thickened:
    del walls  # facets alone do not tell what is a wall
    return Thickened(body, ())


@_thicken.register
def _union(body: Union, walls: _Walls) -> Thickened:
    parts = [_thicken(part, walls) for part in body.bodies]
    return Thickened(Union(tuple(part.body for part in parts)), sum((part.notes for part in parts), ()))


@_thicken.register
def _links(body: Links, walls: _Walls) -> Thickened:
    link = body.link
    wire = max(walls.least, link.wire + walls.overlap)
    if wire * _ENOUGH <= link.wire:
        return Thickened(body, ())
    if link.width - link.wire <= wire or link.pitch - (wire - link.wire) <= 0:
        return _as_rod(body, walls.least)
    notes = []
    if walls.least * _ENOUGH > link.wire:
        notes.append(f"wire {_mm(link.wire)} thick is printed {_mm(wire)} thick")
        if walls.overlap == 0:
            notes.append(f"its links run into one another by {_mm(wire - link.wire)} and do not move")
    return Thickened(replace(body, link=link.thickened(wire)), tuple(notes))


def _as_rod(body: Links, least: float) -> Thickened:
    """Replace links that thickening would close by a rod of the chain's width through their joints."""
    link = body.link
    half = body.turns[:, :, 0] * (link.pitch / 2)
    line = Polyline(np.concatenate([body.places - half, body.places[-1:] + half[-1:]]))
    width = max(link.width, least)
    note = f"links of {_mm(link.wire)} wire are too small to print with {_mm(least)} walls: a rod {_mm(width)} thick"
    return Thickened(Sweep(line, width / 2), (f"{note} stands for the chain",))


@_thicken.register
def _balls(body: Balls, walls: _Walls) -> Thickened:
    if 2 * body.radius >= walls.least * _ENOUGH:
        return Thickened(body, ())
    note = f"balls {_mm(2 * body.radius)} thick are printed {_mm(walls.least)} thick"
    return Thickened(replace(body, radius=walls.least / 2), (note,))


@_thicken.register
def _sweep(body: Sweep, walls: _Walls) -> Thickened:
    section, hole, notes = _wide_section(body.section, body.hole, walls.least)
    return Thickened(replace(body, section=section, hole=hole), notes)


@_thicken.register
def _bars(body: Bars, walls: _Walls) -> Thickened:
    section, hole, notes = _wide_section(body.section, body.hole, walls.least)
    return Thickened(replace(body, section=section, hole=hole), notes)


def _wide_section(
    section: Section, hole: Section | None, least: float
) -> tuple[Section, Section | None, tuple[str, ...]]:
    """Section, hole and notes: the outside grows about its centre, the hole shrinks, or is filled."""
    notes = []
    wide = _width(section)
    if wide < least * _ENOUGH:
        notes.append(f"a section {_mm(wide)} thick is printed {_mm(least)} thick")
        section = section * (least / wide)
    wall = 0.0 if hole is None else _wall(section, hole)
    if hole is not None and wall < least * _ENOUGH:
        # A round or similar hole leaves the wall as its own share of the width is reduced.
        share = (_width(section) - 2 * least) / _width(hole)
        hole = hole * share if share > 0 else None
        done = "is printed solid" if hole is None else f"is printed {_mm(least)} thick"
        notes.append(f"a wall {_mm(wall)} thick {done}")
    return section, hole, tuple(notes)


def _width(section: Section) -> float:
    """Least distance between parallels that hold the section: square to one of its hull's edges."""
    if not isinstance(section, np.ndarray):
        return 2 * section
    hull = shapely.get_coordinates(shapely.MultiPoint(section).convex_hull)
    edges = np.diff(hull, axis=0)
    normals = np.stack([-edges[:, 1], edges[:, 0]], axis=1) / np.linalg.norm(edges, axis=1)[:, None]
    return float(np.ptp(hull @ normals.T, axis=0).min())


def _wall(section: Section, hole: Section) -> float:
    if isinstance(section, np.ndarray) and isinstance(hole, np.ndarray):
        return float(shapely.LinearRing(section).distance(shapely.LinearRing(hole)))
    return float(section) - float(hole)


@_thicken.register
def _shell(body: Shell, walls: _Walls) -> Thickened:
    thickness = np.asarray(body.thickness)
    if thickness.min() >= walls.least * _ENOUGH:
        return Thickened(body, ())
    note = f"a shell {_mm(float(thickness.min()))} thick is printed {_mm(walls.least)} thick"
    return Thickened(replace(body, thickness=np.maximum(thickness, walls.least)), (note,))


@_thicken.register
def _prism(body: Prism, walls: _Walls) -> Thickened:
    x, y, normal = _axes(body)
    notes = []
    deep = abs(float(normal @ body.depth))
    depth, outline = body.depth, body.outline
    if deep < walls.least * _ENOUGH:
        notes.append(f"a plate {_mm(deep)} thick is printed {_mm(walls.least)} thick")
        depth = depth * (walls.least / deep)
        outline = outline - (depth - body.depth) / 2  # to both sides
    flat = (body.outline - body.outline[0]) @ np.stack([x, y], axis=1)
    wider = _widened(flat, walls.least)
    if wider is not None:
        notes.append(f"an outline with parts under {_mm(walls.least)} wide is widened to it")
        outline = outline[0] + wider @ np.stack([x, y])
    return Thickened(replace(body, outline=outline, depth=depth), tuple(notes))


def _axes(body: Prism) -> tuple[Array, Array, Array]:
    corners = body.outline - body.outline[0]
    normal = np.cross(corners, np.roll(corners, -1, axis=0)).sum(axis=0)
    normal /= np.linalg.norm(normal)
    x = np.cross(normal, np.eye(3)[np.argmin(np.abs(normal))])
    x /= np.linalg.norm(x)
    return x, np.cross(normal, x), normal


def _widened(outline: Array, least: float) -> Array | None:
    """Outline grown evenly until no part of it is narrower than `least`; None where none is."""
    polygon = shapely.Polygon(outline)
    if _wide_enough(polygon, least):
        return None

    def grown(more: float) -> shapely.Polygon:
        return polygon.buffer(more, join_style="mitre", mitre_limit=2.0)

    more = _least(lambda value: _wide_enough(grown(value), least), least / 2)
    return np.asarray(grown(more).exterior.coords)[:-1]


def _wide_enough(polygon: shapely.Polygon, least: float) -> bool:
    """Whether a disc of the least width reaches every part of a polygon but its corners.

    Shrunk and grown again by r, a polygon loses r^2 (tan(t/2) - t/2) at a corner that turns by t; more is lost only
    where a part is narrower than 2 r.
    """
    r = least / 2 * (1 - 1e-6)
    corners = np.asarray(shapely.geometry.polygon.orient(polygon).exterior.coords)[:-1]
    edges = np.roll(corners, -1, axis=0) - corners
    before = np.roll(edges, 1, axis=0)
    turn = np.arctan2(before[:, 0] * edges[:, 1] - before[:, 1] * edges[:, 0], (before * edges).sum(axis=1))
    turn = np.clip(turn, 0, np.pi - 0.1)
    corner_loss = float((r**2 * (np.tan(turn / 2) - turn / 2)).sum())
    opened = polygon.buffer(-r).buffer(r, quad_segs=32)
    return bool(polygon.area - opened.area <= 1.05 * corner_loss + 1e-3 * polygon.area)


def _least(holds: Callable[[float], bool], most: float) -> float:
    """Least value from 0 to `most` for which something holds, by halving; `most` is taken to hold."""
    low, high = 0.0, most
    for _ in range(_STEPS):
        middle = (low + high) / 2
        low, high = (low, middle) if holds(middle) else (middle, high)
    return high
