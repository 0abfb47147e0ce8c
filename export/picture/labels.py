"""Marks beside what they name: never across a heavy line, never over one another.

Each mark tries the eight places around its point, then a leader; a crowded view is tried again with smaller marks
before leaders are drawn, and a mark there is no room for is left to the tables. The grid makes each try constant in
time.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

import numpy as np

from export.picture import text as measure
from export.picture.ground import ANY, HEAVY, LIGHT, TEXT, Ground, grown
from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.values import Box, Circle, Floats, Path, Text, box_of
from geom.result import LabelRole

_ORDER = ("support", "held point", "load", "node", "part", "joint", "member")  # who is placed first
_MANY = 20  # marks in a view from which on they may be smaller
_SHORT_MARK = 3  # characters that a triangle of a support mark holds
_LEADER_RINGS = (2.5, 4.0, 6.0, 9.0)  # distances tried, in heights of the text
_LEADER_WAYS = 12
_TIRED = 60  # leaders that found no room one after another: the view is full, the rest is not tried
_SLIDES = (0.0, 1.5, -1.5, 3.0, -3.0)  # along a sloping member, in heights of the text

# the eight places: above right first, where it is read first (common practice of map lettering)
_AROUND = ((1, 1), (-1, 1), (1, -1), (-1, -1), (0, 1), (0, -1), (1, 0), (-1, 0))


@dataclass(frozen=True, slots=True, eq=False)
class Wanted:
    """A mark to be placed: its printed point (2,), how far its symbol reaches, the direction of its member."""

    text: str
    at: Floats
    role: LabelRole
    clear: float = 0.0
    along: Floats | None = None
    first: tuple[int, int] | None = None  # which of the places around is tried first


@dataclass
class Marks:
    """Marks in place, and how many there was no room for."""

    texts: list[Text] = field(default_factory=list)
    paths: list[Path] = field(default_factory=list)
    circles: list[Circle] = field(default_factory=list)
    dropped: int = 0


@dataclass(frozen=True, slots=True)
class _Tag:
    """A mark with the outline it stands in: half its width and height round its middle."""

    wanted: Wanted
    height: float
    half: tuple[float, float]
    middle: float = 0.0  # of the text over the middle of the outline


def place(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes) -> Marks:
    """Return marks in their places, and enter them into the ground."""
    wanted = sorted(wanted, key=lambda mark: _ORDER.index(mark.role))
    before = ground.cells.copy()
    marks, left = _around_all(wanted, ground, sizes, sizes.note)
    height = sizes.note
    if left and len(wanted) > _MANY:
        ground.cells[:] = before
        height = sizes.small
        marks, left = _around_all(wanted, ground, sizes, height)
    tired = 0
    for mark in left:
        if tired > _TIRED or not _with_leader(_tag(mark, height), ground, sizes, marks):
            tired += 1
            marks.dropped += 1
        else:
            tired = 0
    return marks


def reserved(wanted: Sequence[Wanted], sizes: Sizes) -> list[Box]:
    """Return the boxes of the places that marks with a place of their own are tried at first."""
    boxes = []
    for mark in wanted:
        if mark.first is not None:
            tag = _tag(mark, sizes.note)
            middle, _ = next(_places(tag, sizes))
            boxes.append(box_of(grown(_corners(tag, middle, 0.0), 0.5 * sizes.gap)))
    return boxes


def _around_all(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, height: float) -> tuple[Marks, list[Wanted]]:
    marks = Marks()
    return marks, [mark for mark in wanted if not _beside(_tag(mark, height), ground, sizes, marks)]


def _tag(wanted: Wanted, height: float) -> _Tag:
    wide = measure.width(wanted.text) * height
    if wanted.role == "node":
        radius = float(np.hypot(wide, height)) / 2 + 0.2 * height
        return _Tag(wanted, height, (radius, radius))
    if wanted.role == "support" and len(wanted.text) <= _SHORT_MARK:
        base, high = _triangle(wide, height)
        return _Tag(wanted, height, (base / 2, high / 2), 0.75 * height - high / 2)
    return _Tag(wanted, height, (wide / 2, height / 2))


def _triangle(wide: float, height: float) -> tuple[float, float]:
    """Base and height of a triangle 0.9 as high as wide that holds a text a quarter of its height over the base."""
    base = wide + 0.4 * height + 1.25 * height / 0.9
    return base, 0.9 * base


def _beside(tag: _Tag, ground: Ground, sizes: Sizes, marks: Marks) -> bool:
    """Place a mark at the first free of the places beside its point."""
    return any(
        _free(tag, middle, angle, ground, 0.4 * sizes.gap) and _enter(tag, middle, angle, ground, marks)
        for middle, angle in _places(tag, sizes)
    )


def _places(tag: _Tag, sizes: Sizes) -> Iterator[tuple[Floats, float]]:
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


def _along(tag: _Tag, sizes: Sizes) -> Iterator[tuple[Floats, float]]:
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


def _with_leader(tag: _Tag, ground: Ground, sizes: Sizes, marks: Marks) -> bool:
    """Place a mark further off with a leader; the leader crosses no text, and no heavy line if that can be had."""
    for bits in (HEAVY | TEXT, TEXT):
        for middle, start, end in _leaders(tag, sizes):
            if _free(tag, middle, 0.0, ground, 0.4 * sizes.gap) and not ground.crosses(start, end, bits):
                marks.paths.append(Path(LOOKS["leader"], np.stack([tag.wanted.at, end])))
                ground.lines(np.stack([tag.wanted.at, end]), LIGHT)
                return _enter(tag, middle, 0.0, ground, marks)
    return False


def _leaders(tag: _Tag, sizes: Sizes) -> Iterator[tuple[Floats, Floats, Floats]]:
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


def _free(tag: _Tag, middle: Floats, angle: float, ground: Ground, margin: float) -> bool:
    (x, y), (wide, high) = middle.tolist(), tag.half
    if angle == np.pi / 2:
        wide, high = high, wide
    elif angle:
        return ground.free_turned(_corners(tag, middle, angle), ANY, margin)
    return ground.free((x - wide, y - high, x + wide, y + high), ANY, margin)


def _corners(tag: _Tag, middle: Floats, angle: float) -> Floats:
    wide, high = tag.half
    box = np.array([[-wide, -high], [wide, -high], [wide, high], [-wide, high]])
    if angle == 0:
        return np.asarray(middle + box)
    cos, sin = np.cos(angle), np.sin(angle)
    return np.asarray(middle + box @ np.array([[cos, sin], [-sin, cos]]))


def _enter(tag: _Tag, middle: Floats, angle: float, ground: Ground, marks: Marks) -> bool:
    """Draw a mark round its middle, and take the ground under it."""
    ground.area(_corners(tag, middle, angle), TEXT)
    foot = middle + (tag.middle - tag.height / 2) * np.array([-np.sin(angle), np.cos(angle)])
    at = (float(foot[0]), float(foot[1]))
    marks.texts.append(Text(LOOKS["mark"], tag.wanted.text, at, tag.height, "centre", angle))
    if tag.wanted.role == "node":
        marks.circles.append(Circle(LOOKS["mark"], (float(middle[0]), float(middle[1])), tag.half[0]))
    elif tag.middle:
        wide, high = tag.half
        outline = middle + np.array([[-wide, -high], [wide, -high], [0, high]])
        marks.paths.append(Path(LOOKS["mark"], outline, closed=True))
    return True
