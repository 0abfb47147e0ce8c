"""Dimensions that stand at what they measure: a sag under its chord, a thickness, a radius, a length along a member."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

import numpy as np

from export.picture.dimensions import Measure, oblique, placed, spread
from export.picture.ground import ANY, HEAVY, LIGHT, TEXT, Ground
from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.values import Box, Floats, Path, Placed, Text, corners_of, xy

_LOOK = LOOKS["dimension"]
_SLIDES = (0.0, 0.15, -0.15, 0.3, -0.3)  # of the text's middle along the line, in its length
_RINGS = (2.0, 3.5, 5.0, 7.0, 10.0, 14.0, 18.0)  # how far off a text with a leader is tried, in its heights
_WAYS = 16
_DROPS = (1.6, -1.6, 2.6, 4.0, -3.0, 5.5, 7.0, 9.0, 12.0)  # of a level's text under its point, in its heights
_LEANS = ((0.0, 1.0, -1.0, 2.5, -2.5), (5.0, -5.0, 8.0, -8.0, 12.0, -12.0))  # of its leader to the side, in the same
_BEFORE = (0.0, 1.0, 0.5, 0.25, 0.75)  # how much of its line is left of the leader
_OFFSETS = (1.0, 1.8, 2.6, 3.4)  # of an aligned dimension outside the figure, in first rows


@dataclass(frozen=True, eq=False)
class Left:
    """A dimension whose text found no room: its line is drawn already."""

    measure: Measure
    line: tuple[Floats, Floats]
    paths: list[Path]


@dataclass
class Inside:
    """Dimensions in place, and those there was no room for."""

    placed: list[Placed] = field(default_factory=list)
    left: list[Left] = field(default_factory=list)


_Lines = Sequence[tuple[Floats, Floats, list[Path]]]


def lines(found: Sequence[Measure], per: float, ground: Ground, sizes: Sizes) -> _Lines:
    """Return the lines of dimensions that stand at what they measure, and enter them into the ground.

    All are drawn before any mark or text is placed, so that none comes to lie on a later line.
    """
    drawn = [_line(measure, per, ground, sizes) for measure in found]
    for start, end, _ in drawn:
        ground.lines(np.stack([start, end]), LIGHT)
    return drawn


def inside(found: Sequence[Measure], drawn: _Lines, ground: Ground, sizes: Sizes) -> Inside:
    """Place the texts of dimensions whose lines are `drawn`, and enter them into the ground.

    Where there is no room for all of them, all are tried again with smaller text.
    """
    before = ground.cells.copy()
    result = _inside(found, drawn, ground, sizes)
    if result.left:
        first, ground.cells = ground.cells, before
        smaller = _inside(found, drawn, ground, replace(sizes, note=sizes.small))
        if _loss(smaller, found) < _loss(result, found):
            return smaller
        ground.cells = first
    return result


def _loss(result: Inside, found: Sequence[Measure]) -> tuple[int, int]:
    """How many found no room, and how early the first of them stands among all: what tells most stands first."""
    first = min(
        (number for number, one in enumerate(found) if any(one is left.measure for left in result.left)), default=0
    )
    return len(result.left), -first


def _inside(found: Sequence[Measure], drawn: _Lines, ground: Ground, sizes: Sizes) -> Inside:
    result = Inside()
    for measure, (start, end, paths) in zip(found, drawn, strict=True):
        done = _with_text(measure, (start, end), paths, ground, sizes)
        if done is None:
            result.left.append(Left(measure, (start, end), paths))
        else:
            result.placed.append(done)
    return result


def column(left: Sequence[Left], box: Box, sizes: Sizes) -> list[Placed]:
    """Return dimensions whose texts stand one over another to the right of a box, each with a leader."""
    ordered = sorted(left, key=lambda one: float(one.line[1][1]))
    heights = spread([float((one.line[0][1] + one.line[1][1]) / 2) for one in ordered], 2.0 * sizes.note)
    return [_in_column(one, xy(box[2] + 3 * sizes.gap, y), sizes) for one, y in zip(ordered, heights, strict=True)]


def _in_column(left: Left, at: Floats, sizes: Sizes) -> Placed:
    start, end = left.line
    text = Text(_LOOK, left.measure.text, (float(at[0] + 0.5 * sizes.gap), float(at[1] - sizes.note / 2)), sizes.note)
    leader = Path(_LOOK, np.stack([(start + end) / 2, at - xy(2 * sizes.gap, 0.0), at]))
    return _done(left.measure, left.line, text, [*left.paths, leader])


def _line(measure: Measure, per: float, ground: Ground, sizes: Sizes) -> tuple[Floats, Floats, list[Path]]:
    """Return where the dimension line runs, and what is drawn of it."""
    p, q = measure.points(per)
    if measure.kind == "radius":
        return _radius_line(p, q, measure, sizes)
    if measure.kind == "level":
        return q, q, []
    if measure.kind == "vertical" and measure.side != "inside":
        return _beside_upright(p, q, measure.side, ground, sizes)
    if measure.kind == "horizontal":
        p = xy(p[0], q[1])
    elif measure.kind == "vertical":
        p = xy(q[0], p[1])
    elif measure.side != "inside":
        return _beside(p, q, measure.side, ground, sizes)
    turn = float(np.arctan2(q[1] - p[1], q[0] - p[0]))
    paths = [Path(_LOOK, np.stack([p, q])), oblique(p, sizes, turn), oblique(q, sizes, turn)]
    start = measure.p / per
    if np.hypot(*(start - p)) > sizes.gap:
        paths.append(Path(_LOOK, np.stack([start + (p - start) * sizes.gap / np.hypot(*(p - start)), p])))
    return p, q, paths


def _beside_upright(p: Floats, q: Floats, side: str, ground: Ground, sizes: Sizes) -> tuple[Floats, Floats, list[Path]]:
    """A vertical dimension just beside its points, at the first distance that crosses nothing heavy."""
    way = -1.0 if side == "left" else 1.0
    edge = min(p[0], q[0]) if side == "left" else max(p[0], q[0])
    offset = next(
        (
            out for out in (way * far * sizes.first_row for far in _OFFSETS)
            if not ground.crosses(xy(edge + out, p[1]), xy(edge + out, q[1]), HEAVY | TEXT)
        ),
        way * sizes.first_row,
    )  # fmt: skip
    start, end = xy(edge + offset, p[1]), xy(edge + offset, q[1])
    turn = np.pi / 2
    paths = [Path(_LOOK, np.stack([start, end])), oblique(start, sizes, turn), oblique(end, sizes, turn)]
    for point, far_end in ((p, start), (q, end)):
        line = np.stack([point + xy(way * sizes.gap, 0.0), far_end + xy(way * sizes.overshoot, 0.0)])
        paths.append(Path(_LOOK, line))
        ground.lines(line, LIGHT)
    return start, end, paths


def _beside(p: Floats, q: Floats, side: str, ground: Ground, sizes: Sizes) -> tuple[Floats, Floats, list[Path]]:
    """An aligned dimension on one side of its points, at the first distance that crosses nothing heavy."""
    along = (q - p) / max(float(np.hypot(*(q - p))), 1e-12)
    normal = np.array([-along[1], along[0]])
    towards = {"above": (0, 1), "below": (0, -1), "left": (-1, 0), "right": (1, 0)}[side]
    if normal @ np.array(towards) < 0:
        normal = -normal
    offset = next(
        (way * sizes.first_row for way in _OFFSETS
         if not ground.crosses(p + normal * way * sizes.first_row, q + normal * way * sizes.first_row, HEAVY | TEXT)),
        sizes.first_row,
    )  # fmt: skip
    start, end = p + normal * offset, q + normal * offset
    turn = float(np.arctan2(along[1], along[0]))
    paths = [Path(_LOOK, np.stack([start, end])), oblique(start, sizes, turn), oblique(end, sizes, turn)]
    for point, far in ((p, start), (q, end)):
        paths.append(Path(_LOOK, np.stack([point + normal * sizes.gap, far + normal * sizes.overshoot])))
    return start, end, paths


def _radius_line(p: Floats, q: Floats, measure: Measure, sizes: Sizes) -> tuple[Floats, Floats, list[Path]]:
    """From the arc towards its centre, as long as its text or as the radius is; an arrow at the arc."""
    size = max(float(np.hypot(*(q - p))), 1e-12)
    inward = (p - q) / size
    wide = Text(_LOOK, measure.text, (0, 0), sizes.note).width
    end = q + inward * min(size, wide + 3 * sizes.arrow)
    side = np.array([-inward[1], inward[0]])
    head = np.stack([q + sizes.arrow * (inward + 0.17 * side), q, q + sizes.arrow * (inward - 0.17 * side)])
    return end, q, [Path(_LOOK, np.stack([end, q])), Path(_LOOK, head)]


def _with_text(
    measure: Measure, line: tuple[Floats, Floats], paths: list[Path], ground: Ground, sizes: Sizes
) -> Placed | None:
    start, end = line
    if measure.kind == "level":
        return _level(measure, end, ground, sizes)
    for text in _texts(measure.text, start, end, sizes):
        if ground.room_for(text, 0.35 * sizes.gap):
            ground.area(text.corners, TEXT)
            return _done(measure, line, text, paths)
    middle = (start + end) / 2
    for bits in (HEAVY | TEXT, TEXT):  # a leader across the thing itself only where there is no other
        for text, tip in _led_texts(measure.text, middle, sizes):
            if ground.room_for(text, 0.35 * sizes.gap) and not ground.crosses(middle, tip, bits):
                leader = np.stack([middle, tip])
                ground.area(text.corners, TEXT)
                ground.lines(leader, LIGHT)
                return _done(measure, line, text, [*paths, Path(_LOOK, leader)])
    return None


def _level(measure: Measure, at: Floats, ground: Ground, sizes: Sizes) -> Placed | None:
    """A level said near its point: a leader to a line with the level's sign, its text over it."""
    wide = Text(_LOOK, measure.text, (0, 0), sizes.note).width + 4 * sizes.gap
    for foot, before, over in _level_places(at, sizes, over=measure.over):
        left = float(foot[0]) - before * wide
        box = (left, float(foot[1]), left + wide, float(foot[1]) + sizes.note + 0.6 * sizes.gap)
        if ground.free(box, ANY, 0.35 * sizes.gap) and not ground.crosses(at + (foot - at) * 0.3, foot, HEAVY | TEXT):
            ground.area(corners_of(box), TEXT)
            # a leader from above ends over the text, not across it
            end = foot if over or not 0 < before < 1 else xy(foot[0], box[3])
            ground.lines(np.stack([at, end]), LIGHT)
            return _level_drawn(measure, (at, end), corners_of(box)[:2], sizes)
    return None


def _level_places(at: Floats, sizes: Sizes, *, over: bool) -> Iterator[tuple[Floats, float, bool]]:
    """Where a level's line may meet its leader, how much of it lies before that, and whether it is over its point."""
    drops = sorted(_DROPS, key=lambda drop: drop > 0) if over else _DROPS
    for leans in _LEANS:  # near its point first, whatever the height
        for drop in drops:
            for lean in leans:
                for before in _BEFORE:
                    yield at + np.array([lean, -drop]) * sizes.note, before, drop < 0


def _level_drawn(measure: Measure, leader: tuple[Floats, Floats], line: Floats, sizes: Sizes) -> Placed:
    flag = line[0] + xy(1.5 * sizes.gap, 0.0) + 0.6 * sizes.gap * np.array([[-1.0, 1.6], [0.0, 0.0], [1.0, 1.6]])
    start = (float(line[0, 0] + 3.2 * sizes.gap), float(line[0, 1] + 0.6 * sizes.gap))
    text = Text(_LOOK, measure.text, start, sizes.note)
    paths = [Path(_LOOK, np.stack(leader)), Path(_LOOK, line), Path(_LOOK, flag, closed=True)]
    return placed(measure, text, 0.0, (float(leader[1][0]), float(leader[1][1])), paths)


def _done(measure: Measure, line: tuple[Floats, Floats], text: Text, paths: Sequence[Path]) -> Placed:
    angle = {"horizontal": 0.0, "vertical": np.pi / 2}.get(measure.kind)
    if angle is None:
        step = line[1] - line[0]
        angle = float(np.arctan2(step[1], step[0]))
    at = (line[0] + line[1]) / 2
    return placed(measure, text, angle, (float(at[0]), float(at[1])), paths)


def _texts(says: str, start: Floats, end: Floats, sizes: Sizes) -> Iterator[Text]:
    """Places for a text along the line, then level beside it."""
    step = end - start
    length = float(np.hypot(*step))
    angle = float(np.arctan2(step[1], step[0]))
    angle -= np.pi * round(angle / np.pi)
    if np.isclose(abs(angle), np.pi / 2):
        angle = np.pi / 2
    up = np.array([-np.sin(angle), np.cos(angle)])
    wide = Text(_LOOK, says, (0, 0), sizes.note).width
    middle = (start + end) / 2
    if wide + sizes.gap < length:
        for slide in _SLIDES:
            if abs(slide) * length + (wide + sizes.gap) / 2 > length / 2:
                continue
            for side in (0.6 * sizes.gap, -0.6 * sizes.gap - sizes.note):
                at = middle + slide * step + side * up
                yield Text(_LOOK, says, (float(at[0]), float(at[1])), sizes.note, "centre", angle)
    if abs(angle) > np.pi / 6:
        for slide in _SLIDES:
            at = middle + slide * step - xy(0.0, sizes.note / 2)
            yield Text(_LOOK, says, (float(at[0] + 1.2 * sizes.gap), float(at[1])), sizes.note)
            yield Text(_LOOK, says, (float(at[0] - 1.2 * sizes.gap), float(at[1])), sizes.note, "right")


def _led_texts(says: str, middle: Floats, sizes: Sizes) -> Iterator[tuple[Text, Floats]]:
    """Places for a text further off, and where its leader ends: beside it, or under or over its middle."""
    wide = Text(_LOOK, says, (0, 0), sizes.note).width
    for ring in _RINGS:
        for number in range(_WAYS):
            angle = (number + 0.5) * 2 * np.pi / _WAYS
            tip = middle + ring * sizes.note * np.array([np.cos(angle), np.sin(angle)])
            right = bool(np.cos(angle) > 0)
            at = (float(tip[0] + (0.5 if right else -0.5) * sizes.gap), float(tip[1] - sizes.note / 2))
            yield Text(_LOOK, says, at, sizes.note, "left" if right else "right"), tip
        for way in (1.0, -1.0):
            tip = middle + xy(0.0, way * ring * sizes.note)
            foot = tip[1] + (0.5 * sizes.gap if way > 0 else -0.5 * sizes.gap - sizes.note)
            for shift in (0.0, 0.25, -0.25):
                yield Text(_LOOK, says, (float(tip[0] + shift * wide), float(foot)), sizes.note, "centre"), tip
