"""From a piece and the plane it is looked at in to strokes: the geometry of one view, nothing said about it."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from export.picture.looks import STRENGTH, Look, look
from export.picture.values import NOTHING, Box, Floats, Links, Stroke, around, box_of
from geom.arcfit import fit_arcs
from geom.curves import Curve
from geom.errors import SolveError
from geom.result import Frame, Line, Piece, Result, View
from geom.solids import Balls, Bars, Body, Prism, Solid, Union
from geom.solids import Links as LinkBody

# Points nearer than this are one (m): a tenth of what any shop sees at any scale, far over rounding of coordinates.
SAME = 1e-7
# A link whose long axis leaves the picture's plane by more than this (cosine) would be drawn too short.
_IN_PLANE = 0.999
_FACE_ON = np.cos(np.pi / 4)  # nearer face-on than edge-on
MOST_LINKS = 100_000  # of a design, drawn one by one: a file of some 60 MB; of more none is drawn
_THICK = frozenset({"intrados", "extrados"})


@dataclass(frozen=True)
class Drawing:
    """How curves become strokes: within what distance (m), as tangent arcs or not, with links or without."""

    within: float
    arcs: bool = False
    links: bool = True


@dataclass(frozen=True)
class Seen:
    """The geometry of one view of a piece, and the box round it (m)."""

    strokes: tuple[Stroke, ...]
    links: tuple[Links, ...]
    box: Box


def lines_of(piece: Piece) -> tuple[Line, ...]:
    """Return a piece's own lines, or those of its parts."""
    return piece.lines or tuple(line for part in piece.parts for line in lines_of(part))


def solids_of(piece: Piece) -> tuple[Solid, ...]:
    """Return a piece's own solids, or those of its parts."""
    return piece.solids or tuple(solid for part in piece.parts for solid in solids_of(part))


def seen(piece: Piece, view: View, drawing: Drawing) -> Seen:
    """Return what one of its views shows of a piece."""
    lines = lines_of(piece) if view.lines is None else view.lines
    solids = solids_of(piece) if view.solids is None else view.solids
    strokes = tuple(_strokes(lines, view.frame, drawing))
    links = tuple(_links(solids, view.frame)) if drawing.links else ()
    return Seen(strokes, links, _box(strokes, links))


def seen_on_plan(piece: Piece, frame: Frame, drawing: Drawing) -> Seen:
    """Return a piece from above: of lines that lie on one another there the one that tells most."""
    ranked = sorted(
        (line for line in lines_of(piece) if line.role in STRENGTH), key=lambda line: STRENGTH.index(line.role)
    )
    strokes = (*_strokes(ranked, frame, Drawing(drawing.within), across_layers=True), *_thickness(piece, frame))
    return Seen(strokes, (), _box(strokes, ()))


def _thickness(piece: Piece, frame: Frame) -> Iterable[Stroke]:
    """The outline from above of what is carried straight into the depth: lines in one plane do not show it."""
    import shapely

    prisms = [body for body in bodies(solids_of(piece)) if isinstance(body, Prism)]
    if prisms:
        faces = [points for body in prisms for points in (body.outline, body.outline + body.depth)]
        outline = shapely.convex_hull(shapely.MultiPoint(frame.flat(np.concatenate(faces))))
        if isinstance(outline, shapely.Polygon):
            yield Stroke(look("outline"), np.asarray(outline.exterior.coords)[:-1], closed=True)


def is_plan(frame: Frame) -> bool:
    """Return whether a frame looks down rather than sideways."""
    return bool(abs(frame.up[2]) < 0.5 and abs(frame.along[2]) < 0.5)


def _strokes(lines: Sequence[Line], frame: Frame, drawing: Drawing, *, across_layers: bool = False) -> Iterable[Stroke]:
    """One stroke for each line that shows; a line drawn already (either way round) is not drawn again."""
    thick = any(line.role in _THICK for line in lines)
    known: set[tuple[str, bytes]] = set()
    for line in lines:
        stroke = _stroke(line.curve, look(line.role, thick=thick), frame, drawing)
        if stroke is None:
            continue
        layer = "" if across_layers else stroke.look.layer
        grid = np.round(stroke.points / SAME).astype(np.int64)
        keys = {(layer, grid.tobytes()), (layer, grid[::-1].tobytes())}
        if known.isdisjoint(keys):
            known |= keys
            yield stroke


def _stroke(curve: Curve, stroke_look: Look, frame: Frame, drawing: Drawing) -> Stroke | None:
    if drawing.arcs and _lies_in(curve, frame):
        try:
            arcs = fit_arcs(curve, frame, drawing.within)
        except SolveError:  # no smooth curve: a polyline holds the same tolerance
            pass
        else:
            return Stroke(stroke_look, arcs.points, arcs.closed, arcs.bulges)
    points = tidy(frame.flat(curve.points(drawing.within)))
    if len(points) < 2:
        return None
    if curve.closed and len(points) > 3:
        return Stroke(stroke_look, points[:-1], closed=True)
    return Stroke(stroke_look, points)


def tidy(points: Floats) -> Floats:
    """Return points (n, 2) without repeats, and only the ends of what is straight; one point if all are one."""
    steps = np.diff(points, axis=0)
    moved = np.maximum(np.abs(steps[:, 0]), np.abs(steps[:, 1])) > SAME
    points = points[np.concatenate([[True], moved])]
    if len(points) < 3:
        return points
    ahead = points - points[0]
    far = ahead[np.argmax((ahead * ahead).sum(axis=1))]
    length = float(np.hypot(*far))
    aside = (ahead[:, 0] * far[1] - ahead[:, 1] * far[0]) / length
    if np.abs(aside).max() > SAME:
        return points
    along = ahead @ far
    return points[[int(along.argmin()), int(along.argmax())]]


def _lies_in(curve: Curve, frame: Frame) -> bool:
    normal = np.cross(frame.along, frame.up)
    points = curve.points(max(curve.length, SAME) / 10)
    return bool(np.ptp(points @ normal) <= SAME)


def bodies(solids: Iterable[Solid]) -> Iterable[Body]:
    """Yield the single bodies solids are made of."""
    for solid in solids:
        yield from _singles(solid.body)


def _singles(body: Body) -> Iterable[Body]:
    if isinstance(body, Union):
        for part in body.bodies:
            yield from _singles(part)
    else:
        yield body


def linked(solids: Iterable[Solid]) -> list[LinkBody | Balls]:
    """Return the bodies that are drawn as links: chain, and beads where they are not the nodes of a frame."""
    found = list(bodies(solids))
    framed = any(isinstance(body, Bars) for body in found)
    return [body for body in found if isinstance(body, LinkBody) or (isinstance(body, Balls) and not framed)]


def links_drawn(result: Result) -> bool:
    """Return whether a design's links are few enough to be drawn one by one."""
    return sum(len(body.places) for piece in result.pieces for body in linked(solids_of(piece))) <= MOST_LINKS


def _links(solids: Iterable[Solid], frame: Frame) -> list[Links]:
    """Links of chains that lie in the plane, and beads, as they are seen; none where some chain leaves the plane."""
    rows: list[Links] = []
    for body in linked(solids):
        if isinstance(body, Balls):
            count, size = len(body.places), 2 * body.radius
            level, face = np.zeros(count), np.ones(count, dtype=np.bool_)
            rows.append(Links(0.0, size, size, frame.flat(body.places), level, face))
            continue
        along, square = body.turns[:, :, 0], body.turns[:, :, 2]
        shown = np.stack([along @ frame.along, along @ frame.up], axis=1)
        if (np.hypot(shown[:, 0], shown[:, 1]) < _IN_PLANE).any():
            return []
        angles = np.arctan2(shown[:, 1], shown[:, 0])
        face = np.abs(square @ np.cross(frame.along, frame.up)) > _FACE_ON
        link = body.link
        rows.append(Links(link.wire, link.pitch, link.width, frame.flat(body.places), angles, face))
    return [row for row in rows if len(row.places)]


def _box(strokes: Sequence[Stroke], links: Sequence[Links]) -> Box:
    boxes = [box_of(stroke.points) for stroke in strokes]
    for row in links:
        left, bottom, right, top = box_of(row.places)
        half = row.width / 2
        boxes.append((left - half, bottom - half, right + half, top + half))
    return around(*boxes) if boxes else NOTHING
