"""How a net is shown: its elevations along two sides, and its plan with every mark and the sizes of its outline."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Literal

import numpy as np

from geom.curves import Catenary, Curve, Segment
from geom.net.asked import AskedNet
from geom.net.bodies import parameters
from geom.net.network import Floats
from geom.net.shape import NetShape
from geom.result import Z_UP, Dimension, Frame, Label, Line, View, fixed

_MOST_LEVELS = 6  # of supports, said in an elevation: more are in the table
_LEVEL = 1e-9  # of a side's length: how far its ends may be apart across x or y for it to run along them


def lines(asked: AskedNet, shape: NetShape) -> tuple[Line, ...]:
    """Return every member as it hangs, and the sides of the outline as laid out."""
    starts, stops = (shape.nodes[shape.network.members[:, end]] for end in (0, 1))
    parameter = parameters(asked, shape)
    hung = tuple(
        Line("edge" if edge else "member", _curve(p, q, float(a), float(length)), asked.member_mark(number))
        for number, (edge, p, q, a, length) in enumerate(
            zip(asked.pattern.edge, starts, stops, parameter, shape.length, strict=True)
        )
    )
    corners = asked.pattern.outline
    sides = zip(corners, np.roll(corners, -1, axis=0), strict=True)
    return (*hung, *(Line("chord", Segment(p, q), asked.mark) for p, q in sides))


def _curve(p: Floats, q: Floats, parameter: float, length: float) -> Curve:
    return Catenary(p, q, parameter, length=length) if np.isfinite(parameter) else Segment(p, q)


def labels(asked: AskedNet, shape: NetShape) -> tuple[Label, ...]:
    """Return the marks of supports, nodes and members; nodes and members without the net's own mark before them."""
    held = set(asked.anchors.tolist())
    nodes = (Label(at, f"N{number + 1}", "node") for number, at in enumerate(shape.nodes) if number not in held)
    ends = shape.nodes[shape.network.members]
    members = (Label((p + q) / 2, str(number + 1), "member", along=q - p) for number, (p, q) in enumerate(ends))
    return (*supports(asked, shape), *nodes, *members)


def supports(asked: AskedNet, shape: NetShape) -> tuple[Label, ...]:
    """Return the marks of supports; one without a name of its own has its node's."""
    return tuple(
        Label(shape.nodes[node], support.name if support and support.name else f"N{node + 1}", "support")
        for node, support in zip(asked.anchors.tolist(), asked.supports, strict=True)
    )


def views(asked: AskedNet, shape: NetShape) -> tuple[View, ...]:
    """Return the elevations along the first and the second side of the outline, then the plan."""
    corners = asked.pattern.outline
    marks = supports(asked, shape)
    return (
        *(
            View(
                f"elevation along side {side + 1}",
                Frame(fixed(corners[side]), _way(corners[side], corners[side + 1]), Z_UP),
                (*_levels(asked, shape, corners[side], corners[side + 1]), *depth, *_held(marks, corners, side)),
                labels=marks,
            )
            for side, depth in ((0, _depth(asked, shape)), (1, ()))
        ),
        View("marked plan", Frame(fixed([0, 0, 0]), fixed([1, 0, 0]), fixed([0, 1, 0])), _on_plan(asked)),
    )


def _way(p: Floats, q: Floats) -> Floats:
    """Return the level direction from one corner to the next."""
    step = (q - p) * [1.0, 1.0, 0.0]
    return fixed(step / np.hypot(step[0], step[1]))


def _lowest(asked: AskedNet, shape: NetShape) -> Floats:
    """Return the lowest point (3,): a node, or where the slope inside a member is 0, a asinh(V/H) from its start."""
    member = int(np.argmin(shape.low))
    p, q = shape.nodes[shape.network.members[member]]
    if shape.low[member] >= min(p[2], q[2]):
        return np.asarray(p if p[2] <= q[2] else q)
    level, down = shape.horizontal[member], -shape.vertical[member, 0]
    at = p + (q - p) * parameters(asked, shape)[member] * np.arcsinh(down / level) / shape.plan[member]
    return np.array([at[0], at[1], shape.low[member]])


def _levels(asked: AskedNet, shape: NetShape, first: Floats, second: Floats) -> tuple[Dimension, ...]:
    lowest = _lowest(asked, shape)
    width = float(np.hypot(*(second - first)[:2]))
    return (
        Dimension("horizontal", first, second, width, "side on plan", "above"),
        Dimension("level", lowest, lowest, shape.lowest, "lowest point", "below"),
    )


def _held(marks: tuple[Label, ...], corners: Floats, side: int) -> Iterator[Dimension]:
    """Return the levels of the supports, each once, where it is seen furthest to the right."""
    along = _way(corners[side], corners[side + 1])
    heights = np.array([mark.at[2] for mark in marks])
    found = np.unique(np.round(heights, 6))
    if len(found) > _MOST_LEVELS:
        return
    for level in found.tolist():
        there = [mark for mark in marks if abs(mark.at[2] - level) < 1e-6]
        at = max(there, key=lambda mark: float(mark.at @ along)).at
        says = "all supports" if len(found) == 1 else "supports" if len(there) > 1 else "support"
        yield Dimension("level", at, at, float(at[2]), says, "right")


def _depth(asked: AskedNet, shape: NetShape) -> tuple[Dimension, ...]:
    anchors = shape.nodes[shape.network.held]
    lowest = _lowest(asked, shape)
    over = np.array([lowest[0], lowest[1], anchors[:, 2].min()])
    value = float(over[2] - lowest[2])
    return (Dimension("vertical", over, lowest, value, "depth under lowest anchor", "inside"),) if value > 0.0 else ()


def _on_plan(asked: AskedNet) -> tuple[Dimension, ...]:
    """Return the sizes of the outline's sides, opposite ones of one length once, and of its meshes."""
    corners = asked.pattern.outline
    sides = [(corners[k], corners[(k + 1) % len(corners)]) for k in range(len(corners))]
    reach = [float(np.hypot(*(q - p)[:2])) for p, q in sides]
    count = len(sides)
    once = [k for k in range(count) if k < count // 2 or not np.isclose(reach[k], reach[k - count // 2], rtol=1e-9)]
    whole = tuple(_side(*sides[k], corners, "side", 1) for k in once)
    meshes = (_side(p, q, corners, "mesh as laid out", 0) for p, q in asked.pattern.spacings)
    return (*whole, *meshes)


def _side(p: Floats, q: Floats, corners: Floats, says: str, rank: int) -> Dimension:
    """Return the plan length from p to q, on the side away from the net."""
    step = (q - p)[:2]
    value = float(np.hypot(step[0], step[1]))
    away = ((p + q) / 2 - corners.mean(axis=0))[:2]
    kind: Literal["horizontal", "vertical", "aligned"] = "aligned"
    if abs(step[1]) <= _LEVEL * value:
        kind = "horizontal"
    elif abs(step[0]) <= _LEVEL * value:
        kind = "vertical"
    level = kind == "horizontal" or (kind == "aligned" and abs(step[0]) > abs(step[1]))
    side: Literal["below", "above", "left", "right"]
    side = ("above" if away[1] > 0 else "below") if level else ("right" if away[0] > 0 else "left")
    return Dimension(kind, p, q, value, says, side, rank)
