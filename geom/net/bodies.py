"""The solid of a net: links of chain in place along each member, tubes of rope and rod."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from geom.curves import catenary_points
from geom.net.asked import AskedNet
from geom.net.making import Made
from geom.net.network import Flags, Floats
from geom.net.shape import NetShape
from geom.setting.stock import Stock
from geom.solids import Balls, Bars, Body, Link, Links, Places, Solid, Union


def solids(asked: AskedNet, shape: NetShape, made: Made, within: float) -> tuple[Solid, ...]:
    """Return the net as one solid, of what has a size.

    Links stand in their made number evenly along the length found: whole links step in length, and the net is not
    solved again with them.
    """
    bodies: list[Body] = []
    for number, stock in enumerate(asked.stocks):
        of = asked.stock_of == number
        if stock.kind == "chain" and stock.wire and stock.width and stock.pitch:
            link = Link(stock.wire, stock.pitch, stock.width)
            bodies += (Links(*frames, link) for frames in _frames(asked, shape, made.count, of))
        elif stock.kind == "beads" and stock.diameter:
            bodies += (Balls(places, stock.diameter / 2) for places, _ in _frames(asked, shape, made.count, of))
        elif stock.diameter:
            bodies.append(_tubes(stock, asked, shape, of, within))
    if not bodies:
        return ()
    return (Solid(asked.mark, math.fsum(body.volume for body in bodies), Union(tuple(bodies))),)


def _tubes(stock: Stock, asked: AskedNet, shape: NetShape, of: Flags, within: float) -> Bars:
    ends = shape.nodes[shape.network.members[of]]
    points, first = catenary_points(ends[:, 0], ends[:, 1], parameters(asked, shape)[of], within)
    return Bars(points, first, 0.5 * float(stock.diameter or 0.0), length=float(shape.length[of].sum()))


def parameters(asked: AskedNet, shape: NetShape) -> Floats:
    """Return the parameter H/w of each member's catenary, (m,) m; infinite where it is straight."""
    curved = ~asked.straight & (asked.weight > 0.0) & (shape.plan > 0.0)
    result = np.full(len(curved), np.inf)
    np.divide(shape.horizontal, asked.weight, out=result, where=curved)
    return result


def _frames(asked: AskedNet, shape: NetShape, count: NDArray[np.int64], of: Flags) -> Iterator[Places]:
    """Yield centres and turns of the links of each member of one stock, all placed in one pass."""
    chosen = np.flatnonzero(of)
    joints = count[chosen] + 1
    member = np.repeat(chosen, joints)
    last = np.cumsum(joints)
    number = np.arange(last[-1]) - np.repeat(last - joints, joints)
    points = _at(asked, shape, member, number / count[member])
    inner = number[1:] > 0  # between the last joint of a member and the first of the next there is no link
    x = np.diff(points, axis=0)[inner]
    x /= np.linalg.norm(x, axis=1, keepdims=True)
    places = ((points[1:] + points[:-1]) / 2)[inner]
    turns = _turns(x, _sides(shape, member[1:][inner]), number[:-1][inner])
    bounds = np.concatenate([[0], np.cumsum(count[chosen])])
    for start, stop in pairwise(bounds.tolist()):
        yield Places(places[start:stop], turns[start:stop])


def _at(asked: AskedNet, shape: NetShape, member: NDArray[np.intp], share: Floats) -> Floats:
    """Return the points (n, 3) at shares of members' lengths.

    With the slopes m0 at the first end and m = m0 + s/a at s, the plan distance is a (asinh m - asinh m0) and the rise
    a (c - c0) = s (m + m0)/(c + c0), c = sqrt(1 + m^2).
    """
    ends = shape.nodes[shape.network.members]
    points = ends[member, 0] + share[:, None] * (ends[member, 1] - ends[member, 0])
    a = parameters(asked, shape)[member]
    bent = np.isfinite(a)
    member, a, s = member[bent], a[bent], share[bent] * shape.length[member[bent]]
    first = shape.vertical[member, 0] / shape.horizontal[member]
    slope = first + s / a
    reach = a * (np.arcsinh(slope) - np.arcsinh(first)) / shape.plan[member]
    points[bent, :2] = (ends[member, 0] + reach[:, None] * (ends[member, 1] - ends[member, 0]))[:, :2]
    points[bent, 2] = ends[member, 0, 2] + s * (slope + first) / (np.hypot(1.0, slope) + np.hypot(1.0, first))
    return np.asarray(points)


def _sides(shape: NetShape, member: NDArray[np.intp]) -> Floats:
    """Return the level direction on the left of each member, (n, 3); y for one that is plumb."""
    ends = shape.nodes[shape.network.members[member]]
    step = ends[:, 1] - ends[:, 0]
    plumb = shape.plan[member] <= 1e-9 * shape.chord[member]  # as for curves: less is rounding
    across = np.where(plumb, 1.0, shape.plan[member])
    side = np.stack([-step[:, 1] / across, step[:, 0] / across, np.zeros(len(member))], axis=1)
    return np.where(plumb[:, None], np.array([0.0, 1.0, 0.0]), side)


def _turns(x: Floats, side: Floats, number: NDArray[np.intp]) -> Floats:
    """Return links' axes (n, 3, 3) as columns: even links of a member in its vertical plane, odd ones square to it."""
    up = np.cross(x, side)
    y = np.where((number % 2 == 0)[:, None], up, -side)
    return np.stack([x, y, np.cross(x, y)], axis=2)
