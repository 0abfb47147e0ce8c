"""Solids larger than a printer's bed, cut by level and upright planes, with loose pegs to put them together.

Both faces of a cut are flat and get the same sockets, so that either may lie on the bed; the pegs are parts of
their own. A peg sits in the middle of the largest circle in each region of the cut (its pole of inaccessibility).
"""

from collections.abc import Iterator
from itertools import permutations
from typing import NamedTuple

import numpy as np
import shapely
from manifold3d import Manifold, OpType
from numpy.typing import NDArray

from export.printing.manifolds import checked

Array = NDArray[np.float64]

# Millimetres. Practice of desk-top printing, machine-dependent: pins under 1.5 mm break, fits want 0.2 mm all round.
_LEAST_PEG = 1.5
_MOST_PEG = 8.0
_PLAY = 0.2
_SHARE = 0.5  # of the largest circle's diameter: half of the material stays round a socket
_LONG = 1.5  # depth of a socket in diameters of its peg
_SEGMENTS = 32
_BROKEN = 0.01  # share of a socket's surroundings that may be missing: the facets of a round body
_FIT = 1e-6  # of the bed: larger by less is rounding
MOST_PARTS = 2000  # that a solid is cut into: more were glued together by nobody, and would take hours to be cut


class Peg(NamedTuple):
    """A cylinder across a cut, mm."""

    at: Array  # (3,)
    axis: int
    diameter: float
    depth: float  # into each side


class CutUp(NamedTuple):
    """The parts of a cut solid, its pegs, and how many regions of cuts were too small for one."""

    parts: list[Manifold]
    pegs: list[Peg]
    plain: int


def fits(size: Array, bed: Array) -> bool:
    """Whether a box goes on a bed, turned by right angles if need be."""
    return bool((np.sort(size) <= np.sort(bed) * (1 + _FIT)).all())


def cut_to_bed(solid: Manifold, bed: Array) -> CutUp:
    """Cut a solid into parts that fit a bed.

    Parameters
    ----------
    solid : Manifold
        The solid, mm.
    bed : ndarray, shape (3,)
        Sizes of the bed, mm.

    Returns
    -------
    CutUp
        Parts of equal sizes along each axis, the fewest that fit when all are laid the same way; the solid alone
        where it fits.
    """
    low, high = np.reshape(solid.bounding_box(), (2, 3))
    size = high - low
    if fits(size, bed):
        return CutUp([solid], [], 0)
    counts = counts_of(size, bed)
    planes = [low[axis] + size[axis] * np.arange(1, counts[axis]) / counts[axis] for axis in range(3)]
    pegs, plain = _all_pegs(solid, planes, size / counts)
    if pegs:
        sockets = Manifold.batch_boolean([cylinder(peg, _PLAY) for peg in pegs], OpType.Add)
        solid = checked(solid - sockets, "cutting sockets")
    return CutUp(_parts(solid, planes), pegs, plain)


def counts_of(size: Array, bed: Array) -> Array:
    """Return into how many parts along each axis (3,) a box is cut for a bed: the fewest, all laid the same way."""
    ways = [np.ceil(size / (np.array(turned) * (1 + _FIT))) for turned in permutations(bed.tolist())]
    fewest = min(ways, key=lambda way: (float(np.prod(way)), tuple(way)))
    return np.maximum(fewest, 1.0).astype(np.int64)


def cylinder(peg: Peg, play: float = 0.0) -> Manifold:
    """Return a peg in its place, or with play all round its socket, mm."""
    radius, half = peg.diameter / 2 + play, peg.depth + play
    upright = Manifold.cylinder(2 * half, radius, circular_segments=_SEGMENTS, center=True)
    return upright.transform(np.column_stack([_onto(peg.axis).T, peg.at]))


def _parts(solid: Manifold, planes: list[Array]) -> list[Manifold]:
    parts = [solid]
    for axis, places in enumerate(planes):
        for place in places.tolist():
            normal = np.eye(3)[axis]
            halves = (half for part in parts for half in part.split_by_plane(normal, place))
            parts = [half for half in halves if not half.is_empty()]
    return sorted(parts, key=lambda part: tuple(np.round(part.bounding_box()[:3], 3)))


def _all_pegs(solid: Manifold, planes: list[Array], cell: Array) -> tuple[list[Peg], int]:
    """Pegs across all planes, and how many regions of cuts have none."""
    pegs: list[Peg] = []
    plain = 0
    for axis, places in enumerate(planes):
        for place in places.tolist():
            for region in _regions(solid, axis, place, planes):
                peg = _peg(solid, region, axis, place, float(cell[axis]))
                if peg is None or any(_near(peg, other) for other in pegs):
                    plain += 1
                else:
                    pegs.append(peg)
    return pegs, plain


def _onto(axis: int) -> Array:
    """Rows that turn an axis upright, the two others following in turn."""
    return np.roll(np.eye(3), -(axis + 1), axis=0)


def _regions(solid: Manifold, axis: int, place: float, planes: list[Array]) -> Iterator[shapely.Polygon]:
    """Yield the regions of a cut, apart where another plane crosses it, in the axes of `_onto`."""
    upright = solid.transform(np.column_stack([_onto(axis), np.zeros(3)]))
    for part in upright.slice(place).decompose():
        rings = [shapely.Polygon(ring) for ring in part.to_polygons()]
        outer = max(rings, key=lambda ring: ring.area)
        region = outer.difference(shapely.union_all([ring for ring in rings if ring is not outer]))
        for side in (0, 1):
            for other in planes[(axis + 1 + side) % 3].tolist():
                region = region.difference(_line(side, other, region.bounds).buffer(_PLAY))
        yield from (piece for piece in shapely.get_parts(region) if piece.area > 0)


def _line(side: int, place: float, bounds: tuple[float, float, float, float]) -> shapely.LineString:
    left, low, right, high = bounds
    if side == 0:
        return shapely.LineString([(place, low - 1), (place, high + 1)])
    return shapely.LineString([(left - 1, place), (right + 1, place)])


def _peg(solid: Manifold, region: shapely.Polygon, axis: int, place: float, cell: float) -> Peg | None:
    """Peg in the middle of a region's largest circle; None where it would be too thin or break out at a side."""
    circle = shapely.maximum_inscribed_circle(region, tolerance=0.02 * _LEAST_PEG)
    diameter = min(2 * _SHARE * circle.length, _MOST_PEG)
    if diameter < _LEAST_PEG:
        return None
    middle = np.append(circle.coords[0], place) @ _onto(axis)
    depth = min(_LONG * diameter, cell / 3)
    for _ in range(3):
        peg = Peg(middle, axis, diameter, depth)
        # With half the peg's thickness round it: there must be material all round the socket.
        wall = cylinder(peg, diameter / 4)
        if (wall ^ solid).volume() > (1 - _BROKEN) * wall.volume():
            return peg
        depth /= 2
    return None


def _near(peg: Peg, other: Peg) -> bool:
    """Whether the boxes of two pegs with their play meet."""
    reach = [np.where(np.arange(3) == one.axis, one.depth, one.diameter / 2) + 2 * _PLAY for one in (peg, other)]
    return bool((np.abs(peg.at - other.at) <= reach[0] + reach[1]).all())


def laid_out(pegs: list[Peg]) -> Manifold:
    """Return the pegs standing in a row, apart, to be printed."""
    placed, x = [], 0.0
    for peg in pegs:
        x += peg.diameter
        placed.append(
            Manifold.cylinder(2 * peg.depth, peg.diameter / 2, circular_segments=_SEGMENTS).translate((x, 0, 0))
        )
        x += peg.diameter
    return Manifold.batch_boolean(placed, OpType.Add)
