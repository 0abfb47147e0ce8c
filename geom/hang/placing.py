"""Members with loads that keep their place on plan, or with a spread load: which arcs the loads are at."""

from dataclasses import replace

import numpy as np

from geom.hang import placed
from geom.hang.blown import blow
from geom.hang.chunked import Floats, Mask
from geom.hang.loading import Given, cut, gather, tensions
from geom.hang.walk import Way

# Rounds of trying the order of loads and stock ends along the members that the last answer had.
_ROUNDS = 8
# Where the walk does not arrive, the arcs of the loads are found by Newton's method on the member with all loads at
# arcs, the derivatives taken over this part of the length.
_SEARCHES = 40
_STEP = 1e-6
_FARTHEST = 0.1  # of the length, in one step
_SHORTER = 6
_NEAR = 1e-7  # of the length: near enough for the walk


def place(given: Given) -> tuple[Floats, Floats]:
    """Give the tensions at `from`, (n, 3), and the arcs of the loads, those on plan in their places.

    The order in which loads and stock ends follow along the members is that of a first guess of the arcs; where the
    answer has another one, that is tried next.
    """
    arcs = np.where(given.on_plan, given.at / given.span[:, np.newaxis] * given.total[:, np.newaxis], given.at)
    start = tensions(given, arcs)
    todo, searched = np.flatnonzero(~np.isnan(start[:, 0])), False
    for _ in range(_ROUNDS):
        if not todo.size:
            break
        found, arcs_found, ordered = _in_order(given.of(todo), arcs[todo], start[todo])
        start[todo[ordered]], arcs[todo[ordered]] = found[ordered], arcs_found[ordered]
        todo = todo[~ordered]
        if searched:
            known = ~np.isnan(arcs_found[~ordered]).any(axis=1)
            arcs[todo[known]] = arcs_found[~ordered][known]
        elif todo.size:
            arcs[todo], start[todo] = _search(given.of(todo), arcs[todo], start[todo])
            searched = True
    start[todo] = np.nan
    return start, arcs


def _in_order(given: Given, arcs: Floats, start: Floats) -> tuple[Floats, Floats, Mask]:
    """Solve with the loads in the order of the arcs; say where there is an answer that has that order too."""
    sections, order = cut(given, arcs)
    n, count = arcs.shape
    ends = np.cumsum(given.length, axis=1)[:, :-1]
    targets = np.concatenate([given.at, ends], axis=1)
    plan = np.concatenate([given.on_plan, np.zeros(ends.shape, dtype=np.bool_)], axis=1)
    end = np.concatenate([np.take_along_axis(targets, order, axis=1), given.span[:, np.newaxis]], axis=1)
    on_plan = np.concatenate([np.take_along_axis(plan, order, axis=1), np.ones((n, 1), dtype=np.bool_)], axis=1)
    way = Way(-sections.load[..., 2], sections.stiffness, end, on_plan, -sections.point[..., 2], given.spread)
    found, walked = placed.solve(way, given.rise, given.total, start[:, [0, 2]])
    places = np.take_along_axis(walked[:, :-1], np.argsort(order, axis=1), axis=1)[:, :count]
    slack = 1e-12 * given.total[:, np.newaxis]
    ordered = np.asarray((np.diff(walked, axis=1, prepend=0.0) >= -slack).all(axis=1))
    whole = np.stack([found[:, 0], np.zeros(n), found[:, 1]], axis=1)
    # a load placed along the member stays where it is, to the last digit
    return whole, np.where(given.on_plan, places, arcs), ordered


def _search(given: Given, arcs: Floats, start: Floats) -> tuple[Floats, Floats]:
    """Give arcs at which the loads hang nearly at their plan distances, and the tensions then."""
    spread, given = given, given.evened()
    off = _off(given, arcs, start)
    for _ in range(_SEARCHES):
        size = np.abs(off).max(axis=1) / given.total
        if not (size > _NEAR).any():
            break
        step = -np.linalg.solve(_by_arcs(given, arcs, off), off[..., np.newaxis])[..., 0]
        longest = np.abs(step).max(axis=1) / given.total
        step *= np.minimum(1.0, _FARTHEST / np.maximum(longest, _FARTHEST))[:, np.newaxis]
        step[size <= _NEAR] = 0.0
        for _ in range(_SHORTER):
            there = np.clip(arcs + step, 0.0, given.total[:, np.newaxis])
            after = _off(given, there, tensions(given, there))
            worse = ~(np.abs(after).max(axis=1) <= size * given.total)
            if not worse.any():
                break
            step[worse] *= 0.5
        arcs, off = there, after
    return arcs, _tensions_with_spread(spread, arcs)


def _tensions_with_spread(given: Given, arcs: Floats) -> Floats:
    """Give the tensions with all loads at arcs and the spread load where it lies, nearly."""
    if not (given.spread > 0.0).any():
        return tensions(given, arcs)
    at_arcs = replace(given, at=arcs, on_plan=np.zeros_like(given.on_plan))
    return blow(at_arcs, lambda pieces: gather(pieces, arcs, tensions(pieces, arcs))).tension


def _off(given: Given, arcs: Floats, start: Floats) -> Floats:
    """Give the plan distances of the loads less those wanted; 0 for loads that are placed along the member."""
    return np.where(given.on_plan, gather(given, arcs, start).load_places[..., 0] - given.at, 0.0)


def _by_arcs(given: Given, arcs: Floats, off: Floats) -> Floats:
    """Give the derivatives of `_off` by the arcs, (n, loads, loads)."""
    n, count = arcs.shape
    by = np.empty((n, count, count))
    change = _STEP * given.total
    for load in range(count):
        moved = arcs.copy()
        moved[:, load] += np.where(arcs[:, load] > 0.5 * given.total, -change, change)
        difference = (_off(given, moved, tensions(given, moved)) - off) / (moved - arcs)[:, load, np.newaxis]
        by[:, :, load] = np.where(given.on_plan[:, load, np.newaxis], difference, 0.0)
    rows = np.arange(count)
    by[:, rows, rows] = np.where(given.on_plan, by[:, rows, rows], 1.0)
    return by
