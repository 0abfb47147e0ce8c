"""How a curtain is shown: its strands in an elevation that follows the rail, from the rail down to the hem."""

from __future__ import annotations

from itertools import pairwise
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Polyline, Segment
from geom.hang.curtain import AskedCurtain, MadeCurtain
from geom.hang.curtain_solids import shown
from geom.hang.row import named, zones
from geom.result import Z_UP, Dimension, Frame, Label, Line, View, fixed

Floats = NDArray[np.float64]

_SAME = 1e-6  # m: lengths nearer than this are one on any drawing
_MOST_MARKS = 12  # of strands: some eight millimetres each on the half of an A3 sheet
_OUTER: tuple[tuple[int, Literal["left", "right"]], ...] = ((0, "left"), (-1, "right"))
_MOST_STRETCHES = 12  # of the hem that are dimensioned; the table has them all


def view(asked: AskedCurtain, curtain: MadeCurtain, within: float) -> View:
    """Return the elevation in the plane that the rail is developed into."""
    tops = flat(asked.x, asked.tops[:, 2])
    feet = flat(asked.x, curtain.made.lowest)
    lines = (
        *(
            Line("axis", Segment(top, foot), asked.strand(number))
            for number, (top, foot) in enumerate(zip(tops, feet, strict=True))
        ),
        Line("edge", Polyline(flat(asked.rail.plan, asked.rail.corners[:, 2])), asked.mark),
        Line("chord", Polyline(hem_line(asked, within, developed=True)), asked.mark),
    )
    frame = Frame(tops[0], fixed([1, 0, 0]), Z_UP)
    dimensions = (*_along(asked, tops), *_stretches(asked), *_depths(asked, tops, feet))
    return View("elevation", frame, dimensions, lines, labels(asked, tops, curtain), shown(asked, curtain))


def labels(asked: AskedCurtain, tops: Floats, curtain: MadeCurtain) -> tuple[Label, ...]:
    """Return marks of so many strands that they stand apart, at their lower ends; `tops` (n, 3) m are the upper."""
    low = curtain.made.lowest
    return tuple(
        Label(np.array([*tops[number, :2], low[number]]), asked.strand(number), "part")
        for number in named(len(tops), _MOST_MARKS)
    )


def hem_line(asked: AskedCurtain, within: float, *, developed: bool) -> Floats:
    """Return the hem as a polyline (k, 3), m, in place or in the plane that the rail is developed into."""
    distance = asked.hem.line(asked.rail.reach, within)
    distance = distance[(distance >= 0.0) & (distance <= asked.rail.length)]
    elevation = asked.hem.at(distance)
    if developed:
        return flat(asked.rail.developed(distance), elevation)
    return np.column_stack([asked.rail.at(distance)[:, :2], elevation])


def flat(x: Floats, z: Floats) -> Floats:
    """Return points (n, 3) of the plane y = 0, m."""
    return np.stack([x, np.zeros_like(x), z], axis=-1)


def _along(asked: AskedCurtain, tops: Floats) -> list[Dimension]:
    """The rail, the spacing of its strands if it is one, and its level."""
    ends = flat(asked.rail.plan[[0, -1]], asked.rail.corners[[0, -1], 2])
    sloping = asked.rail.length - asked.rail.plan[-1] > _SAME
    says = "rail on plan" if sloping else "rail"
    found = [Dimension("horizontal", ends[0], ends[1], float(asked.rail.plan[-1]), says, "above", 2)]
    found += zones([stock.name for stock in asked.stocks], tops)
    corners = flat(asked.rail.plan, asked.rail.corners[:, 2])
    if 2 < len(corners) <= _MOST_STRETCHES:
        found += [
            Dimension("horizontal", p, q, float(q[0] - p[0]), f"side {number}", "above", 1)
            for number, (p, q) in enumerate(pairwise(corners), 1)
        ]
    steps = np.diff(tops[:, 0])
    if len(steps) > 1 and np.ptp(steps) < _SAME:
        says = f"spacing, {len(steps)} equal"
        found.append(Dimension("horizontal", tops[0], tops[1], float(steps[0]), says, "above", 0))
    found.append(Dimension("level", ends[1], ends[1], float(ends[1, 2]), "rail", "right"))
    if np.ptp(asked.rail.corners[:, 2]) > _SAME:
        found.append(Dimension("level", ends[0], ends[0], float(ends[0, 2]), "rail", "left"))
    return found


def _stretches(asked: AskedCurtain) -> list[Dimension]:
    """What the points of the hem are apart, from point to point under it, as far as the rail goes."""
    distance = np.unique(np.clip(asked.hem.points[:, 0], 0.0, asked.rail.length))
    points = flat(asked.rail.developed(distance), asked.hem.at(distance))
    if not 2 <= len(points) - 1 <= _MOST_STRETCHES:
        return []
    return [Dimension("horizontal", p, q, float(q[0] - p[0]), "", "below", 0) for p, q in pairwise(points)]


def _depths(asked: AskedCurtain, tops: Floats, feet: Floats) -> list[Dimension]:
    """Lengths of the first and the last strand, levels of the lowest and the highest lower end."""
    found = [
        Dimension(
            "vertical", tops[number], feet[number], float(tops[number, 2] - feet[number, 2]),
            asked.strand(number % len(tops)), side,
        )
        for number, side in _OUTER
    ]  # fmt: skip
    ends = dict.fromkeys((int(np.argmin(feet[:, 2])), int(np.argmax(feet[:, 2]))))
    levels = [
        Dimension("level", feet[n], feet[n], float(feet[n, 2]), f"lower end of {asked.strand(n)}", "below")
        for n in ends
    ]
    return [*found, *levels]
