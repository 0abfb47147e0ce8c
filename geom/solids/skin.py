"""Surfaces of sections carried along polylines.

They are mitred: at each corner of the polyline the section's ring lies in the plane that halves the turn. Each
ring point moves along the line it is on only, so the volume is the section's area times the polyline's length
exactly while the section's centroid rides on the line.
"""

import numpy as np

from geom.curves.base import Array, Index
from geom.solids.frames import no_twist
from geom.solids.mesh import Mesh
from geom.solids.triangles import triangulated

_OVERLAP = 1e-3  # of the section: under what can be made, over the rounding of a file's float32


def overlapping(points: Array, first: Index, width: float) -> Array:
    """Lengthen polylines a little at both ends, by unlike amounts.

    Tubes that meet in line at a node, or double back on one another, would otherwise share the corners and edges
    of their ends: a file of facets, where equal corners are one, would then have edges of four facets.

    Parameters
    ----------
    points : ndarray, shape (k, 3)
        Polylines one after another, m.
    first : ndarray, shape (m + 1,)
        Polyline i is ``points[first[i]:first[i + 1]]``.
    width : float
        Size of the section, m; the ends move by one and two thousandths of it.
    """
    points = points.copy()
    start, end = first[:-1], first[1:] - 1
    back, ahead = points[start] - points[start + 1], points[end] - points[end - 1]
    for at, way, share in ((start, back, 1.0), (end, ahead, 2.0)):
        points[at] += share * _OVERLAP * width * way / np.linalg.norm(way, axis=1, keepdims=True)
    return points


def skin(points: Array, first: Index, sides: Array, rings: tuple[Array, ...], *, factors: Array | None = None) -> Mesh:
    """Surface of a section along polylines, mitred at their corners and capped at their ends.

    Parameters
    ----------
    points : ndarray, shape (k, 3)
        Polylines one after another, m; no two points running in one place.
    first : ndarray, shape (m + 1,)
        Polyline i is ``points[first[i]:first[i + 1]]``.
    sides : ndarray, shape (k - m, 3)
        Direction of the section's x axis along each edge, unit vectors square to it.
    rings : tuple of ndarray, shape (s, 2)
        Polygon of the section, m, anticlockwise, and of its hole.
    factors : ndarray, shape (k,), optional
        Factor on the section at each point.
    """
    last = first[1:] - 1
    edge = np.arange(len(points)) - np.repeat(np.arange(len(last)), np.diff(first))
    after, before = edge.copy(), edge - 1
    after[last] -= 1
    before[first[:-1]] += 1
    inside = np.ones(len(points) - 1, dtype=bool)
    inside[last[:-1]] = False
    ways = np.diff(points, axis=0)[inside]
    ways /= np.linalg.norm(ways, axis=1, keepdims=True)
    loops = [_mitred(points, ways[before], ways[after], sides[after], ring, factors) for ring in rings]
    starts = np.flatnonzero(np.concatenate([inside, [False]]))
    faces = [_walls(starts, starts + 1, len(rings[0]))]
    if len(rings) > 1:
        faces.append(_walls(starts, starts + 1, len(rings[0]))[:, ::-1] + loops[0].size // 3)
        faces += [_ring_caps(first[:-1], last, len(rings[0]), loops[0].size // 3)]
    else:
        faces += [_caps(first[:-1], last, rings[0])]
    return Mesh(np.concatenate([loop.reshape(-1, 3) for loop in loops]), np.concatenate(faces))


def _mitred(points: Array, before: Array, after: Array, side: Array, ring: Array, factors: Array | None) -> Array:
    """Ring of the section at each point, (k, s, 3), in the plane that halves the turn.

    A ring point o square to the edge e moves along e by l with (o + l e) b = 0, b halfway between the edges.
    """
    up = np.cross(after, side)
    x, y = ring.T
    offsets = side[:, None] * x[:, None] + up[:, None] * y[:, None]
    if factors is not None:
        offsets = offsets * factors[:, None, None]
    half = before + after
    slide = -np.einsum("ksi,ki->ks", offsets, half) / (after * half).sum(axis=1)[:, None]
    return np.asarray(points[:, None] + offsets + slide[:, :, None] * after[:, None])


def _walls(lower: Index, upper: Index, sides: int) -> Index:
    """Triangles between rings, two for each side; outwards for rings anticlockwise seen from ahead."""
    j = np.arange(sides)
    k = (j + 1) % sides
    a, b = lower[:, None] * sides + j, lower[:, None] * sides + k
    c, d = upper[:, None] * sides + k, upper[:, None] * sides + j
    return np.stack([a, b, c, a, c, d], axis=-1).reshape(-1, 3)


def _caps(first: Index, last: Index, ring: Array) -> Index:
    cap, sides = triangulated(ring), len(ring)
    front = last[:, None, None] * sides + cap
    back = first[:, None, None] * sides + cap[:, ::-1]
    return np.concatenate([back, front]).reshape(-1, 3)


def _ring_caps(first: Index, last: Index, sides: int, inner: int) -> Index:
    j = np.arange(sides)
    k = (j + 1) % sides
    # Anticlockwise from ahead: along the outside, back along the hole.
    ring = np.stack([j, k, k + inner, j, k + inner, j + inner], axis=-1).reshape(-1, 3)
    front = last[:, None, None] * sides + ring
    back = first[:, None, None] * sides + ring[:, ::-1]
    return np.concatenate([back, front]).reshape(-1, 3)


def closed_skin(points: Array, ways: Array, sides: Array, factors: Array | None, rings: tuple[Array, ...]) -> Mesh:
    """Surface along a closed polyline, mitred all round.

    Parameters
    ----------
    points : ndarray, shape (k, 3)
        The polyline, m; its last point repeats the first.
    ways, sides : ndarray, shape (k - 1, 3)
        Direction of each edge and of the section's x axis along it, unit vectors.
    factors : ndarray, shape (k,), or None
        Factor on the section at each point.
    rings : tuple of ndarray, shape (s, 2)
        Polygon of the section, m, anticlockwise, and of its hole.
    """
    sides = _closed_sides(points, ways, sides)
    points, before = points[:-1], np.roll(ways, 1, axis=0)
    sizes = None if factors is None else factors[:-1]
    loops = [_mitred(points, before, ways, sides, ring, sizes) for ring in rings]
    ring = np.arange(len(points))
    walls = _walls(ring, np.roll(ring, -1), len(rings[0]))
    faces = [walls, walls[:, ::-1] + loops[0].size // 3][: len(rings)]
    return Mesh(np.concatenate([loop.reshape(-1, 3) for loop in loops]), np.concatenate(faces))


def _closed_sides(points: Array, ways: Array, sides: Array) -> Array:
    """Spread over a closed line the turn by which the untwisted frame comes round to itself."""
    around = np.array([points[-2] + points[-1], points[0] + points[1]]) / 2
    back = no_twist(around, ways[[-1, 0]], sides[-1])[1]
    miss = np.arctan2(np.cross(back, sides[0]) @ ways[0], back @ sides[0])
    angle = miss * np.arange(len(ways))[:, None] / len(ways)
    return np.asarray(np.cos(angle) * sides + np.sin(angle) * np.cross(ways, sides))
