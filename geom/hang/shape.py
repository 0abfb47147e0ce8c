"""A solved member in place: its ends and its curve, what is drawn of it, and what is dimensioned."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from itertools import pairwise
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Catenary, Curve, ElasticCatenary, Joined, Polyline, Sampled, Segment, hanging_strands
from geom.hang.figures import HangingFigures
from geom.hang.held import Place
from geom.hang.loaded import Loaded
from geom.hang.lying import Lying
from geom.result import Dimension, Line, fixed

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Shape:
    """One solved member in place: its ends (3,) m and the curve it hangs in."""

    start: Floats
    end: Floats
    curve: Curve

    @property
    def along(self) -> Floats:
        """Unit vector on plan from its start to its end; +x where they stand on one plumb line."""
        step = (self.end - self.start) * np.array([1.0, 1.0, 0.0])
        span = float(np.hypot(step[0], step[1]))
        return fixed(step / span) if span else fixed([1.0, 0.0, 0.0])

    def unfolded(self, x: float) -> Shape:
        """Return the same member in the plane y = 0, its start at plan distance `x`, its elevations kept."""
        turn = np.stack([self.along, np.zeros(3), np.array([0.0, 0.0, 1.0])])
        here = np.array([x, 0.0, self.start[2]])

        def flat(points: Floats) -> Floats:
            moved: Floats = (points - self.start) @ turn.T + here
            return moved

        return Shape(here, flat(self.end), _mapped(self.curve, flat))


def _mapped(curve: Curve, flat: Callable[[Floats], Floats]) -> Curve:
    """Return a curve in a vertical plane with that plane turned about a plumb line."""
    match curve:
        case Catenary() | ElasticCatenary() | Segment():
            return replace(curve, p=flat(curve.p), q=flat(curve.q))
        case Joined():
            return Joined(tuple(_mapped(part, flat) for part in curve.curves))
        case Polyline():
            return replace(curve, vertices=flat(curve.vertices))
        case Sampled():
            nodes = flat(curve.nodes)
            return Sampled(nodes, flat(curve.nodes + curve.tangents) - nodes)
    raise TypeError(f"a {type(curve).__name__} is no curve that a member hangs in")


def shape(start: Floats, end: Floats, at: Mapping[str, Any]) -> Shape:
    """Return one solved member in place.

    Parameters
    ----------
    start, end : ndarray, shape (3,)
        Its ends, m.
    at : mapping
        Its `parameter` (0 for two strands on a plumb line), `hung_length`, and `own_length`, what that was before
        stretch, m; its `softness`, 1/m.
    """
    parameter, soft, length = float(at["parameter"]), float(at["softness"]), float(at["hung_length"])
    if parameter == 0.0:
        return Shape(start, end, hanging_strands(start, end, max(length, abs(float(start[2] - end[2])))))
    if soft == 0.0:
        return Shape(start, end, Catenary(start, end, parameter, length=length))
    return Shape(start, end, ElasticCatenary(start, end, parameter, float(at["own_length"]), soft))


def lying_shape(start: Floats, end: Floats, lies: Lying, row: int) -> Shape:
    """Return a member that lies on a floor between its strands; `row` is its place among those that do."""
    plain = Shape(start, end, Segment(start, end))
    place, laid = Place(start, plain.along), lies.laid
    soft = float(lies.weight[row] / laid.free.sections.stiffness[row, 0])
    span, floor, h = float(laid.free.span[row]), float(lies.floor[row]), float(laid.horizontal[row])
    first, last = float(laid.at_from.plan[row]), span - float(laid.at_to.plan[row])
    down, up = place.points(np.array([[first, 0.0, floor], [last, 0.0, floor]]))
    parts: list[Curve] = []
    ends = (start, down), (down, up), (up, end)
    lengths = float(laid.at_from.length[row]), math.nan, float(laid.at_to.length[row])
    for (p, q), length in zip(ends, lengths, strict=True):
        if float(np.linalg.norm(q - p)) <= _LEAST * span:
            continue
        if math.isnan(length) or h <= 0.0:
            parts.append(Segment(p, q))
        elif soft > 0.0:
            parts.append(ElasticCatenary(p, q, h / float(lies.weight[row]), length, soft))
        else:
            parts.append(Catenary(p, q, h / float(lies.weight[row])))
    return Shape(start, end, Joined(parts))


def rigid_shape(hung: Shape, hinges: Floats) -> Shape:
    """Return a chain as its rigid links hang; hinges along the span, aside and up from its start, (k, 3) m."""
    points = Place(hung.start, hung.along).points(hinges)
    points[0], points[-1] = hung.start, hung.end
    return Shape(hung.start, hung.end, Polyline(points))


def loaded_shape(start: Floats, end: Floats, hang: Loaded, row: int) -> Shape:
    """Return one member under loads in place: an elastic catenary from load to load, all joined.

    Parameters
    ----------
    start, end : ndarray, shape (3,)
        Its ends, m.
    hang : Loaded
        Solved members, in no wind.
    row : int
        Which of them.
    """
    plain = Shape(start, end, Segment(start, end))
    place = Place(start, plain.along)
    nodes = place.points(hang.course.nodes[row])
    nodes[-1] = end
    own = hang.sections
    real = np.flatnonzero(own.length[row] > _LEAST * hang.length[row]).tolist()
    corners = [nodes[0], *(nodes[k + 1] for k in real[:-1]), nodes[-1]]
    parts = [_section(hang, row, k, ends, place) for k, ends in zip(real, pairwise(corners), strict=True)]
    return Shape(start, end, Joined(parts))


# Of the length: sections shorter than that, between two loads at one place, have no curve of their own.
_LEAST = 1e-9
_SAMPLES = 64  # of a section under a spread load: between them its curve is good to 1e-8 of its sag


def _section(hang: Loaded, row: int, section: int, ends: tuple[Floats, Floats], place: Place) -> Curve:
    p, q = ends
    own, pull = hang.sections, float(hang.tension[row, 0])
    length, weight = float(own.length[row, section]), -float(own.load[row, section, 2])
    if hang.spread[row] > 0.0:
        return _sampled(hang, row, section, ends, place)
    soft = weight / float(own.stiffness[row, section])
    if weight * length < _LEAST * pull:
        return Segment(p, q)
    if soft == 0.0:
        return Catenary(p, q, pull / weight)
    return ElasticCatenary(p, q, pull / weight, length, soft)


def _sampled(hang: Loaded, row: int, section: int, ends: tuple[Floats, Floats], place: Place) -> Curve:
    """Sample a section under a spread load; its slope follows from H all along, and V from the load passed."""
    own = hang.sections
    first = float(own.length[row, :section].sum())
    arcs = first + np.linspace(0.0, float(own.length[row, section]), _SAMPLES + 1)
    local = hang.at_arc(np.broadcast_to(arcs, (len(hang.span), arcs.size)))[row]
    local[0], local[-1] = hang.course.nodes[row, section], hang.course.nodes[row, section + 1]
    weight = -float(own.load[row, section, 2])
    passed = weight * (arcs - first) + float(hang.spread[row]) * (local[:, 0] - local[0, 0])
    up = float(hang.course.before[row, section, 2]) + passed
    tangents = np.stack([np.full_like(up, hang.tension[row, 0]), np.zeros_like(up), up], axis=1)
    points = place.points(local)
    points[0], points[-1] = ends
    return Sampled(points, place.turned(tangents))


def drawn(mark: str, shape: Shape) -> tuple[Line, Line]:
    """Return the lines of a member in place: its axis and its chord."""
    return Line("axis", shape.curve, mark), Line("chord", Segment(shape.start, shape.end), mark)


def dimensions(shape: Shape, figures: HangingFigures) -> tuple[Dimension, ...]:
    """Return what is worth dimensioning: span, level difference, sag where it is greatest, lowest level."""
    sag_place = shape.start + shape.along * figures.sag_at
    on_chord = sag_place + np.array([0.0, 0.0, _chord_rise(figures)])
    under = on_chord - np.array([0.0, 0.0, figures.sag])
    lowest = np.array([*(shape.start + shape.along * figures.lowest_at)[:2], figures.lowest])
    found = [
        Dimension("horizontal", shape.start, shape.end, figures.span, "span", "below", 1),
        Dimension("vertical", on_chord, under, figures.sag, "sag under chord", "inside"),
        Dimension("level", lowest, lowest, figures.lowest, "lowest point", "below"),
    ]
    if figures.level_difference:
        rise = abs(figures.level_difference)
        side: Literal["left", "right"] = "right" if figures.level_difference > 0 else "left"
        found.append(Dimension("vertical", shape.start, shape.end, rise, "level difference", side))
    if 0.0 < figures.lowest_at < figures.span and not figures.loads:
        found.append(Dimension("horizontal", shape.start, lowest, figures.lowest_at, "to lowest point", "below", 0))
    return (*found, *_to_loads(shape, figures))


def _to_loads(shape: Shape, figures: HangingFigures) -> list[Dimension]:
    """Plan distances from load to load, with the marks along the member that its clamps are set at."""
    if not figures.loads:
        return []
    # plan distances, not places: the shape may be an unfolded one
    reach = [(float(np.hypot(*(load.at - figures.points[0])[:2])), load) for load in figures.loads]
    reach.sort(key=lambda one: one[0])
    places = [(shape.start + shape.along * x) * [1, 1, 0] + [0, 0, load.at[2]] for x, load in reach]
    stops = [0.0, *(x for x, _ in reach), figures.span]
    names = [*(f"to {load.mark}" for _, load in reach), "to the end"]
    return [
        Dimension("horizontal", p, q, there - here, says, "below", 0)
        for (p, q), (here, there), says in zip(
            pairwise([shape.start, *places, shape.end]), pairwise(stops), names, strict=True
        )
        if there > here
    ]


def _chord_rise(figures: HangingFigures) -> float:
    return figures.level_difference * figures.sag_at / figures.span if figures.span else 0.0
