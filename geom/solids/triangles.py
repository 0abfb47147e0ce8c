"""Cutting a polygon into triangles."""

import numpy as np
from numpy.typing import NDArray

from geom.curves.base import Array, Index


def triangulated(outline: Array) -> Index:
    """Cut a simple polygon into triangles by ears.

    An ear is a convex corner whose triangle holds no other corner; a simple polygon of four corners or more has
    two (Meisters, "Polygons have ears", 1975). Of the ears the one nearest to equal sides is cut, which keeps
    slivers away. All corners are used, also those on a straight line, so that the triangles fit whatever
    shares the polygon's edges.

    Parameters
    ----------
    outline : ndarray, shape (n, 2)
        Corners, anticlockwise, the first not repeated, no edge crossing another.

    Returns
    -------
    ndarray, shape (n - 2, 3)
        Rows of `outline`, anticlockwise.

    Raises
    ------
    ValueError
        If no ear is left, as happens to most polygons that cross themselves (not to all: crossings are not
        looked for).
    """
    count = len(outline)
    left = np.ones(count, dtype=bool)
    before, after = np.roll(np.arange(count), 1), np.roll(np.arange(count), -1)
    fitness = np.array([_fitness(outline, left, before[i], i, after[i]) for i in range(count)])
    triangles = np.empty((count - 2, 3), dtype=np.int64)
    for cut in range(count - 3):
        ear = np.argmax(fitness)
        if fitness[ear] <= 0:
            raise ValueError("the outline crosses or touches itself")
        sides = before[ear], after[ear]
        triangles[cut] = sides[0], ear, sides[1]
        left[ear], fitness[ear] = False, 0.0
        after[sides[0]], before[sides[1]] = sides[1], sides[0]
        # Only the neighbours' triangles change; a convex corner is never alone in another's.
        for i in sides:
            fitness[i] = _fitness(outline, left, before[i], i, after[i])
    triangles[-1] = np.flatnonzero(left)
    return triangles


def _fitness(outline: Array, left: NDArray[np.bool_], *around: int) -> float:
    """How near the triangle of three corners is to equal sides: twice its area over its sides squared.

    0 if it is no ear: not convex, or with another of the corners left inside it or on its edge.
    """
    a, b, c = outline[list(around)]
    double = _cross(b - a, c - a)
    if double <= 0:
        return 0.0
    inside = left.copy()
    inside[list(around)] = False
    for p, q in ((a, b), (b, c), (c, a)):
        inside &= _cross(q - p, outline - p) >= 0
    sides = np.sum((b - a) ** 2 + (c - b) ** 2 + (a - c) ** 2)
    return 0.0 if inside.any() else float(double / sides)


def _cross(one: Array, other: Array) -> Array:
    return np.asarray(one[..., 0] * other[..., 1] - one[..., 1] * other[..., 0])
