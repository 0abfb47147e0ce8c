"""The solid of a curtain: links or balls of every strand in place, all placed in one pass, or tubes."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from geom.hang.curtain import AskedCurtain, MadeCurtain
from geom.solids import Balls, Bars, Body, Link, Links, Places, Solid, Union

Floats = NDArray[np.float64]
Flags = NDArray[np.bool_]

MOST_SHOWN = 2000
"""Links and balls that a drawing shows one by one, and balls that a solid has: as many links as solids have by default.
Past it a drawing of strands is a drawing of lines, and strings of balls are tubes of their diameter."""


def solids(asked: AskedCurtain, curtain: MadeCurtain) -> tuple[Solid, ...]:
    """Return the strands in place as one solid, of what has a size."""
    along = ways(asked)
    body = _body(asked, curtain, asked.tops, along)
    return () if body is None else (Solid(asked.mark, body.volume, body),)


def shown(asked: AskedCurtain, curtain: MadeCurtain) -> tuple[Solid, ...]:
    """Return the links or balls in the elevation that follows the rail; none where there are too many to be told."""
    if not 0 < int(curtain.made.count.sum()) <= MOST_SHOWN:
        return ()
    tops = np.column_stack([asked.x, np.zeros_like(asked.x), asked.tops[:, 2]])
    body = _body(asked, curtain, tops, np.tile([1.0, 0.0, 0.0], (len(tops), 1)))
    return () if body is None else (Solid(asked.mark, body.volume, body),)


def ways(asked: AskedCurtain) -> Floats:
    """Return the level direction that the rail runs in at each strand, (n, 3); +x where it stands upright."""
    steps = np.diff(asked.rail.corners, axis=0) * [1.0, 1.0, 0.0]
    size = np.linalg.norm(steps, axis=1)
    of = np.clip(np.searchsorted(asked.rail.reach, asked.distance, side="right") - 1, 0, len(steps) - 1)
    level = np.where(size[:, None] > 0.0, steps / np.where(size > 0.0, size, 1.0)[:, None], [1.0, 0.0, 0.0])
    return np.asarray(level[of])


def _body(asked: AskedCurtain, curtain: MadeCurtain, tops: Floats, along: Floats) -> Body | None:
    """The strands of all stocks that have a size, those of one stock after those of another."""
    bodies: list[Body] = []
    few = int(curtain.made.count.sum()) <= MOST_SHOWN
    for stock in asked.kinds:
        of = np.array([other.name == stock.name for other in asked.stocks])
        if stock.kind == "chain" and stock.wire and stock.width and stock.pitch:
            link = Link(stock.wire, stock.pitch, stock.width)
            bodies += (Links(*frames, link) for frames in _frames(asked, curtain, tops, along, of))
        elif stock.kind == "beads" and stock.diameter and few:
            places = [frames.places for frames in _frames(asked, curtain, tops, along, of)]
            bodies.append(Balls(np.concatenate(places), stock.diameter / 2))
        elif stock.diameter:
            bodies.append(_tubes(tops[of], curtain.made.length[of], stock.diameter / 2))
    return Union(tuple(bodies)) if bodies else None


def _tubes(tops: Floats, length: Floats, radius: float) -> Bars:
    feet = tops - np.multiply.outer(length, [0.0, 0.0, 1.0])
    points = np.stack([tops, feet], axis=1).reshape(-1, 3)
    return Bars(points, np.arange(len(tops) + 1) * 2, radius, length=float(length.sum()))


def _frames(asked: AskedCurtain, curtain: MadeCurtain, tops: Floats, along: Floats, of: Flags) -> Iterator[Places]:
    """Yield centres and turns of the links of each strand of one stock, all placed in one pass.

    The first link of a strand lies along the rail, each next a quarter turn from it; x points down the strand.
    """
    count, pitch = curtain.made.count[of], curtain.wanted.pitch[of]
    first = np.concatenate([[0], np.cumsum(count)])
    strand = np.repeat(np.arange(len(count)), count)
    number = np.arange(first[-1]) - first[strand]
    down = asked.fit_from.takes + pitch[strand] * (number + 0.5)
    places = tops[of][strand] - np.multiply.outer(down, [0.0, 0.0, 1.0])
    x, way = np.tile([0.0, 0.0, -1.0], (len(strand), 1)), along[of][strand]
    turned = (number + asked.fit_from.turns) % 2 == 1
    y = np.where(turned[:, None], np.cross(x, way), way)
    turns = np.stack([x, y, np.cross(x, y)], axis=2)
    for start, stop in pairwise(first.tolist()):
        yield Places(places[start:stop], turns[start:stop])
