"""Marks beside what they name: never across a heavy line, never over one another.

Each mark tries the eight places around its point, then a leader; a crowded view is tried again with smaller marks
before leaders are drawn, and a mark there is no room for is left to the tables. Nodes, blocks and stations are placed
each all alike first (`alike.py`). The grid makes each try constant in time.
"""

from collections.abc import Callable, Iterator, Sequence

import numpy as np

from export.picture import alike
from export.picture.ground import HEAVY, LIGHT, TEXT, Ground, grown
from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.tags import Marks, Tag, Wanted, corners, enter, free, tag_of
from export.picture.values import Box, Floats, Path, box_of

__all__ = ["Marks", "Wanted", "place", "reserved"]

_HEAD = ("support", "held point", "load", "fitting")  # who is placed first, in this order
_TAIL = ("part", "joint", "member")
_ALIKE: dict[str, Callable[[Sequence[Wanted], Ground, Sizes, Marks], list[Wanted]]] = {
    "station": alike.stations, "node": alike.nodes, "block": alike.blocks,
}  # fmt: skip
_MANY = 20  # marks in a view from which on they may be smaller
_LEADER_RINGS = (2.5, 4.0, 6.0, 9.0)  # distances tried, in heights of the text
_LEADER_WAYS = 12
_TIRED = 60  # leaders that found no room one after another: the view is full, the rest is not tried
_FULL = 0.5  # of a view's room: marks of one kind that would cover more are not tried, as next to none would find room
_SLIDES = (0.0, 1.5, -1.5, 3.0, -3.0)  # along a sloping member, in heights of the text

# the eight places: above right first, where it is read first (common practice of map lettering)
_AROUND = ((1, 1), (-1, 1), (1, -1), (-1, -1), (0, 1), (0, -1), (1, 0), (-1, 0))


def place(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes) -> Marks:
    """Return marks in their places, and enter them into the ground."""
    marks = Marks()
    many = len(wanted) > _MANY
    _each(_of(wanted, _HEAD), ground, sizes, marks, many=many)
    for role, placed in _ALIKE.items():
        left = placed(_told(_of(wanted, (role,)), ground, sizes, marks), ground, sizes, marks)
        _led(left, sizes.small if many else sizes.note, ground, sizes, marks)
    _each(_told(_of(wanted, _TAIL), ground, sizes, marks), ground, sizes, marks, many=many)
    return marks


def _told(wanted: list[Wanted], ground: Ground, sizes: Sizes, marks: Marks) -> list[Wanted]:
    """Return the marks, or none of them, all dropped, where they are a crowd: thousands of nodes on one sheet."""
    halves = [tag_of(mark, sizes.small, sizes.small).half for mark in wanted]
    left, bottom, right, top = ground.box
    if 4.0 * sum(wide * high for wide, high in halves) <= _FULL * (right - left) * (top - bottom):
        return wanted
    marks.dropped += len(wanted)
    return []


def _of(wanted: Sequence[Wanted], roles: Sequence[str]) -> list[Wanted]:
    return sorted((mark for mark in wanted if mark.role in roles), key=lambda mark: roles.index(mark.role))


def _each(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, marks: Marks, *, many: bool) -> None:
    """Place marks one by one beside their points, all of them smaller where there is no room, then with leaders."""
    before = ground.cells.copy()
    placed, left = _around_all(wanted, ground, sizes, sizes.note)
    height = sizes.note
    if left and many:
        ground.cells[:] = before
        height = sizes.small
        placed, left = _around_all(wanted, ground, sizes, height)
    marks.texts += placed.texts
    marks.paths += placed.paths
    marks.circles += placed.circles
    _led(left, height, ground, sizes, marks)


def _led(left: Sequence[Wanted], height: float, ground: Ground, sizes: Sizes, marks: Marks) -> None:
    tired = 0
    for mark in left:
        if tired > _TIRED or not _with_leader(tag_of(mark, height, sizes.small), ground, sizes, marks):
            tired += 1
            marks.dropped += 1
        else:
            tired = 0


def reserved(wanted: Sequence[Wanted], sizes: Sizes) -> list[Box]:
    """Return the boxes of the places that marks with a place of their own are tried at first."""
    boxes = []
    for mark in wanted:
        if mark.first is not None:
            tag = tag_of(mark, sizes.note, sizes.small)
            middle, _ = next(_places(tag, sizes))
            boxes.append(box_of(grown(corners(tag, middle, 0.0), 0.5 * sizes.gap)))
    return boxes


def _around_all(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, height: float) -> tuple[Marks, list[Wanted]]:
    marks = Marks()
    return marks, [mark for mark in wanted if not _beside(tag_of(mark, height, sizes.small), ground, sizes, marks)]


def _beside(tag: Tag, ground: Ground, sizes: Sizes, marks: Marks) -> bool:
    """Place a mark at the first free of the places beside its point."""
    return any(
        free(tag, middle, angle, ground, 0.4 * sizes.gap) and enter(tag, middle, angle, ground, marks)
        for middle, angle in _places(tag, sizes)
    )


def _places(tag: Tag, sizes: Sizes) -> Iterator[tuple[Floats, float]]:
    at, (wide, high) = tag.wanted.at, tag.half
    if tag.wanted.role == "part":
        yield at, 0.0
    if tag.wanted.along is not None:
        yield from _along(tag, sizes)
    away = tag.wanted.clear + 1.2 * sizes.gap
    first = () if tag.wanted.first is None else (tag.wanted.first,)
    for dx, dy in (*first, *_AROUND):
        # on a diagonal the box's corner is what comes near: let in towards the point
        near = away * (0.7 if dx and dy else 1.0)
        yield at + np.array([dx * (near + wide), dy * (near + high)]), 0.0


def _along(tag: Tag, sizes: Sizes) -> Iterator[tuple[Floats, float]]:
    """Places beside a sloping member, upright to a reader at the foot or right of the sheet."""
    along = tag.wanted.along
    assert along is not None  # asked before
    size = float(np.hypot(*along))
    if size == 0:
        return
    angle = float(np.arctan2(along[1], along[0]))
    angle -= np.pi * round(angle / np.pi)
    if np.isclose(abs(angle), np.pi / 2):
        angle = np.pi / 2
    way = np.array([np.cos(angle), np.sin(angle)])
    side = np.array([-way[1], way[0]])
    for slide in _SLIDES:
        for sign in (1.0, -1.0):
            yield (
                tag.wanted.at
                + way * slide * tag.height
                + side * sign * (tag.wanted.clear + 1.2 * sizes.gap + tag.half[1]),
                angle,
            )


def _with_leader(tag: Tag, ground: Ground, sizes: Sizes, marks: Marks) -> bool:
    """Place a mark further off with a leader; the leader crosses no text, and no heavy line if that can be had."""
    for bits in (HEAVY | TEXT, TEXT):
        for middle, start, end in _leaders(tag, sizes):
            if free(tag, middle, 0.0, ground, 0.4 * sizes.gap) and not ground.crosses(start, end, bits):
                way = middle - tag.wanted.at
                rim = middle - way * tag.half[0] / float(np.hypot(*way))
                line = np.stack([tag.wanted.at, rim if tag.round else end])
                marks.paths.append(Path(LOOKS["leader"], line))
                ground.lines(line, LIGHT)
                return enter(tag, middle, 0.0, ground, marks)
    return False


def _leaders(tag: Tag, sizes: Sizes) -> Iterator[tuple[Floats, Floats, Floats]]:
    """Middles of the mark, and where the part of the leader begins and ends that may cross nothing."""
    at, (wide, high) = tag.wanted.at, tag.half
    for ring in _LEADER_RINGS:
        for number in range(_LEADER_WAYS):
            angle = (number + 0.5) * 2 * np.pi / _LEADER_WAYS
            way = np.array([np.cos(angle), np.sin(angle)])
            reach = ring * tag.height + tag.wanted.clear
            middle = at + way * reach + np.array([np.sign(way[0]) * wide, np.sign(way[1]) * high])
            end = middle - np.array([np.sign(way[0]) * (wide + 0.5 * sizes.gap), 0.0])
            yield middle, at + way * (tag.wanted.clear + 1.5 * sizes.gap), end
