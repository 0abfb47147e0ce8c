"""A solved member in place: its ends and its curve, what is drawn of it, and what is dimensioned."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Catenary, Curve, ElasticCatenary, Joined, Polyline, Segment, hanging_strands
from geom.hang.figures import HangingFigures
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
    if 0.0 < figures.lowest_at < figures.span:
        found.append(Dimension("horizontal", shape.start, lowest, figures.lowest_at, "to lowest point", "below", 0))
    return tuple(found)


def _chord_rise(figures: HangingFigures) -> float:
    return figures.level_difference * figures.sag_at / figures.span if figures.span else 0.0
