"""What is taken on a panel: a grid of small cells, so that a mark finds a free place in constant time."""

import math
from dataclasses import dataclass, field
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from export.picture.values import Box, Floats, Text

HEAVY = 1  # lines of the thing itself
LIGHT = 2  # dimension and extension lines, chords, leaders
TEXT = 4
ANY = HEAVY | LIGHT | TEXT


@dataclass(eq=False)
class Ground:
    """Cells of one panel and what lies on them, as bits.

    A line is entered by points half a cell apart, so what it may clip unseen is a corner of less than half a cell;
    texts are asked for with a margin of more than that round them.
    """

    box: Box  # print units
    cell: float  # print units
    wide: bool = True  # whether it reaches round what is drawn
    cells: NDArray[np.uint8] = field(init=False)

    def __post_init__(self) -> None:
        left, bottom, right, top = self.box
        columns = int(np.ceil((right - left) / self.cell)) + 1
        rows = int(np.ceil((top - bottom) / self.cell)) + 1
        self.cells = np.zeros((rows, columns), dtype=np.uint8)

    def lines(self, points: Floats, bits: int, *, closed: bool = False) -> None:
        """Enter a line through points (n, 2)."""
        if closed:
            points = np.concatenate([points, points[:1]])
        steps = np.diff(points, axis=0)
        lengths = np.hypot(steps[:, 0], steps[:, 1])
        counts = np.maximum(1, np.ceil(lengths / (self.cell / 2)).astype(np.int64))
        which = np.repeat(np.arange(len(steps)), counts)
        number = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
        spread = points[which] + steps[which] * (number / counts[which])[:, None]
        self.points(np.concatenate([spread, points[-1:]]), bits)

    def area(self, corners: Floats, bits: int) -> None:
        """Enter all cells a box with corners (4, 2) lies on."""
        self.points(self._spread(corners), bits)

    def free(self, box: Box, bits: int = ANY, margin: float = 0.0) -> bool:
        """Return whether an upright box, and a margin round it, is inside and touches none of `bits`."""
        left, bottom, right, top = self.box
        x0, y0, x1, y1 = box[0] - margin, box[1] - margin, box[2] + margin, box[3] + margin
        if x0 < left or y0 < bottom or x1 > right or y1 > top:
            return False
        cell = self.cell
        rows = slice(int((y0 - bottom) / cell), int((y1 - bottom) / cell) + 1)
        columns = slice(int((x0 - left) / cell), int((x1 - left) / cell) + 1)
        found = self.cells[rows, columns]
        return not (found.any() if bits == ANY else (found & bits).any())

    def free_turned(self, corners: Floats, bits: int = ANY, margin: float = 0.0) -> bool:
        """Return the same of a box with corners (4, 2) in turn, at any angle."""
        corners = grown(corners, margin)
        (left, bottom), (right, top) = corners.min(axis=0).tolist(), corners.max(axis=0).tolist()
        if left < self.box[0] or bottom < self.box[1] or right > self.box[2] or top > self.box[3]:
            return False
        if self.free((left, bottom, right, top), bits):
            return True
        middle = (corners[0] + corners[3]) / 2, (corners[1] + corners[2]) / 2
        return not (self.crosses(*middle, bits) or self.meets(self._spread(corners), bits))

    def free_disc(self, middle: Floats, radius: float) -> bool:
        """Return whether a disc is inside and touches nothing."""
        (x, y), (left, bottom, right, top) = middle.tolist(), self.box
        if x - radius < left or y - radius < bottom or x + radius > right or y + radius > top:
            return False
        if self.free((x - radius, y - radius, x + radius, y + radius)):
            return True
        count = math.ceil(4 * radius / self.cell) + 1
        return not self.meets(middle + radius * _disc(count), ANY)

    def room_for(self, text: Text, margin: float) -> bool:
        """Return whether a text, and a margin round it, touches nothing."""
        if text.angle == 0:
            return self.free(text.box, ANY, margin)
        return self.free_turned(text.corners, ANY, margin)

    def meets(self, points: Floats, bits: int) -> bool:
        """Return whether any of points (n, 2) lies on a cell with any of `bits`."""
        rows, columns, inside = self._indices(points)
        return bool((self.cells[rows[inside], columns[inside]] & bits).any())

    def crosses(self, start: Floats, end: Floats, bits: int) -> bool:
        """Return whether the straight line between two points meets any of `bits`."""
        step = end - start
        count = max(2, int(math.hypot(*step.tolist()) / (self.cell / 2)) + 1)
        return self.meets(start + step * (np.arange(count) / (count - 1))[:, None], bits)

    def _spread(self, corners: Floats) -> Floats:
        """Points all over a box with corners (4, 2) in turn, none further apart than half a cell."""
        along, up = corners[1] - corners[0], corners[3] - corners[0]
        counts = [max(2, math.ceil(math.hypot(*side) / (self.cell / 2)) + 1) for side in (along.tolist(), up.tolist())]
        return np.asarray(corners[0] + _shares(counts[0], counts[1]) @ np.stack([along, up]))

    def points(self, points: Floats, bits: int) -> None:
        """Enter points (n, 2)."""
        rows, columns, inside = self._indices(points)
        self.cells[rows[inside], columns[inside]] |= np.uint8(bits)

    def _indices(self, points: Floats) -> tuple[NDArray[np.int64], NDArray[np.int64], NDArray[np.bool_]]:
        place = np.floor((points - self.box[:2]) / self.cell)
        rows, columns = place[:, 1].astype(np.int64), place[:, 0].astype(np.int64)
        inside = (rows >= 0) & (columns >= 0) & (rows < self.cells.shape[0]) & (columns < self.cells.shape[1])
        return rows, columns, inside


@lru_cache(maxsize=256)
def _disc(count: int) -> Floats:
    """Points of a grid, `count` along and across, over the disc round 0 of radius 1, (k, 2)."""
    grid = np.linspace(-1.0, 1.0, max(3, count))
    points = np.stack(np.meshgrid(grid, grid), axis=-1).reshape(-1, 2)
    inside = points[(points * points).sum(axis=1) <= 1.0]
    inside.setflags(write=False)
    return np.asarray(inside)


@lru_cache(maxsize=4096)
def _shares(along: int, up: int) -> Floats:
    """Shares of both sides of a box for a grid of points over it, (along * up, 2)."""
    shares = np.indices((along, up)).reshape(2, -1).T / (along - 1, up - 1)
    shares.setflags(write=False)
    return np.asarray(shares)


def grown(corners: Floats, margin: float) -> Floats:
    """Return the corners (4, 2), in turn, of a box larger by a margin on each side."""
    if not margin:
        return corners
    along, up = corners[1] - corners[0], corners[3] - corners[0]
    along = along * (margin / max(math.hypot(*along.tolist()), 1e-30))
    up = up * (margin / max(math.hypot(*up.tolist()), 1e-30))
    return np.asarray(corners + np.stack([-along - up, along - up, along + up, up - along]))
