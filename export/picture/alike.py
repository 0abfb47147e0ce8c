"""Marks that a reader looks for in one place: of nodes, of blocks of a ring, of stations under ordinates.

Of each kind as many as can stand the same way beside what they name; those that cannot are given back.
"""

from collections.abc import Callable, Iterator, Sequence

import numpy as np

from export.picture.ground import LIGHT, Ground
from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.tags import Marks, Tag, Wanted, enter, free, tag_of
from export.picture.values import Floats, Path, xy

_MOST = 0.8  # of the nodes that must find room in one direction before it is good enough, at the larger text
_FEW = 0.1  # of blocks whose marks may stand outside the ring while the others stand within
_STATIONS = 0.6  # of the stations that must find room, for any to be said
_REACHES = (1.0, 1.4)  # of a node's circle from its node, in the least distance clear of lines square to one another
_OUT = (1.5, 3.0, 4.5)  # of a block's mark from its back, in heights of the text
_QUADRANTS = ((1, 1), (-1, 1), (1, -1), (-1, -1), (1, 0), (0, 1), (-1, 0), (0, -1))

_Place = Callable[[Tag], Iterator[Floats]]


def nodes(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, marks: Marks) -> list[Wanted]:
    """Place nodes' circles, each on a short leader, in the direction in which most find room; the rest in another."""
    if not wanted:
        return []
    ways = [np.array(way) / np.hypot(*way) for way in _QUADRANTS]
    for height in (sizes.note, sizes.small):
        tags = [tag_of(mark, height) for mark in wanted]
        counts = [sum(_fits(tag, _beside(tag, way, 1.0, sizes), ground, sizes) for tag in tags) for way in ways]
        if max(counts) >= _MOST * len(wanted):
            break
    ways.insert(0, ways.pop(int(np.argmax(counts))))
    left = []
    for tag in tags:
        places = (_beside(tag, way, reach, sizes) for way in ways for reach in _REACHES)
        middle = next((one for one in places if _fits(tag, one, ground, sizes)), None)
        if middle is None:
            left.append(tag.wanted)
        else:
            _with_leader(tag, middle, tag.wanted.at, ground, marks)
    return left


def _beside(tag: Tag, way: Floats, reach: float, sizes: Sizes) -> Floats:
    """The middle of a node's circle that clears two lines through the node square to one another."""
    away = tag.half[0] + tag.wanted.clear + 0.8 * sizes.gap
    return np.asarray(tag.wanted.at + way * away * reach * np.sqrt(2))


def _fits(tag: Tag, middle: Floats, ground: Ground, sizes: Sizes) -> bool:
    return free(tag, middle, 0.0, ground, 0.3 * sizes.gap)


def _with_leader(tag: Tag, middle: Floats, start: Floats, ground: Ground, marks: Marks) -> None:
    """Enter a round mark, and a line from its point to its circle."""
    way = (middle - start) / max(float(np.hypot(*(middle - start))), 1e-12)
    line = np.stack([start + way * tag.wanted.clear, middle - way * tag.half[0]])
    marks.paths.append(Path(LOOKS["leader"], line))
    ground.lines(line, LIGHT)
    enter(tag, middle, 0.0, ground, marks)


def blocks(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, marks: Marks) -> list[Wanted]:
    """Place blocks' marks within their outlines, at one height, or else all of them outside on leaders.

    Where all but very few have room within, as a keystone that is measured across, those few stand outside.
    """
    if not wanted:
        return []
    for height in (sizes.note, sizes.small):
        tags = [tag_of(mark, height) for mark in wanted]
        within = [tag for tag in tags if _fits(tag, tag.wanted.at, ground, sizes)]
        if len(within) >= len(tags) - max(1, int(_FEW * len(tags))):
            for tag in within:
                enter(tag, tag.wanted.at, 0.0, ground, marks)
            return [tag.wanted for tag in tags if tag not in within and not _outside(tag, ground, sizes, marks)]
    tags = [tag_of(mark, sizes.note) for mark in wanted]
    return [tag.wanted for tag in tags if not _outside(tag, ground, sizes, marks)]


def _outside(tag: Tag, ground: Ground, sizes: Sizes, marks: Marks) -> bool:
    """Place a block's mark beyond its back, on a line from within the block."""
    at, out = tag.wanted.at, tag.wanted.along
    if out is None:
        return False
    way = out / max(float(np.hypot(*out)), 1e-12)
    for away in _OUT:
        end = at + out + way * away * tag.height
        middle = end + way * np.array(tag.half) + way * 0.5 * sizes.gap
        if free(tag, middle, 0.0, ground, 0.3 * sizes.gap):
            line = np.stack([at, end])
            marks.paths.append(Path(LOOKS["leader"], line))
            ground.lines(line, LIGHT)
            return enter(tag, middle, 0.0, ground, marks)
    return False


def stations(wanted: Sequence[Wanted], ground: Ground, sizes: Sizes, marks: Marks) -> list[Wanted]:
    """Place lengths under the feet of ordinates, level or else upright, if most of them find room; else none."""
    for angle in (0.0, np.pi / 2):
        tags = [tag_of(mark, sizes.small, sizes.small) for mark in wanted]
        before = ground.cells.copy()
        found = Marks()
        for tag in tags:
            wide, high = tag.half
            middle = tag.wanted.at - xy(0.0, (wide if angle else high) + 1.3 * sizes.gap)
            if free(tag, middle, angle, ground, 0.25 * sizes.gap):
                enter(tag, middle, angle, ground, found)
        if len(found.texts) >= _STATIONS * len(tags):
            marks.texts += found.texts
            break
        ground.cells[:] = before
    return []
