"""Frames that go along a curve without twisting, and the links that ride on them.

The rotation-minimising frame by double reflection (Wang, Juettler, Zheng and Liu, "Computation of rotation
minimizing frames", 2008): the frame at one point is reflected in the plane halfway to the next point, and again
so that its tangent becomes the next tangent. Exact on a planar curve, else good to the fourth power of the steps.
"""

from typing import NamedTuple

import numpy as np

from geom.curves import Curve
from geom.curves.base import Array, unit

# A curve has a direction on plan when its ends, or its tangent, move aside by more than rounding.
_ON_PLAN = 1e-9


class Places(NamedTuple):
    """Where things stand and which way they are turned."""

    places: Array  # (n, 3) m
    turns: Array  # (n, 3, 3); columns: the thing's own x, y and z axes in space


def no_twist(points: Array, tangents: Array, side: Array) -> Array:
    """Carry a direction at right angles to a curve along it without twist.

    Parameters
    ----------
    points, tangents : ndarray, shape (n, 3)
        Points of the curve, m, and unit tangents there.
    side : ndarray, shape (3,)
        The direction at the first point; what it has along the tangent is taken off.

    Returns
    -------
    ndarray, shape (n, 3)
        Unit vectors at right angles to the tangents.
    """
    first = unit(side - (side @ tangents[0]) * tangents[0], name="side")
    steps = np.diff(points, axis=0)
    halfway = _reflections(steps)
    reflected = np.einsum("nij,nj->ni", halfway, tangents[:-1])
    turns = _running_products(_reflections(tangents[1:] - reflected) @ halfway)
    sides = np.concatenate([first[None], turns @ first])
    # Products of n rotations drift by about n eps; the drift along the tangent would slant a section.
    sides -= (sides * tangents).sum(axis=1, keepdims=True) * tangents
    return np.asarray(sides / np.linalg.norm(sides, axis=1, keepdims=True))


def _reflections(normals: Array) -> Array:
    """Reflections in the planes with these normals, (n, 3, 3); the identity where there is no normal."""
    size = (normals * normals).sum(axis=1)
    weight = np.where(size > 0, 2 / np.where(size > 0, size, 1.0), 0.0)
    return np.asarray(np.eye(3) - weight[:, None, None] * normals[:, :, None] * normals[:, None, :])


def _running_products(turns: Array) -> Array:
    """Products turns[i] ... turns[1] turns[0] for every i, in log2(n) rounds over all at once.

    After the round of stride k, each entry is the product of the 2k last turns up to it (Hillis and Steele, "Data
    parallel algorithms", 1986).
    """
    turns = turns.copy()
    stride = 1
    while stride < len(turns):
        turns[stride:] = turns[stride:] @ turns[:-stride]
        stride *= 2
    return turns


def level_side(curve: Curve) -> Array:
    """Return the level direction square to a curve, on its left: the normal of its vertical plane.

    Its plane is taken from its ends on plan, else from its tangent at the start; a curve that stands still on
    plan (a plumb line) is taken to run along x.

    Returns
    -------
    ndarray, shape (3,)
        Unit vector; y for a curve along x.
    """
    tangent = curve.at([0.0]).tangents[0]
    for way in ((curve.end - curve.start) / curve.length, tangent):
        if np.hypot(way[0], way[1]) > _ON_PLAN:
            return unit(np.array([-way[1], way[0], 0.0]), name="way")
    return np.array([0.0, 1.0, 0.0])


def link_frames(curve: Curve, count: int, pitch: float, start: float = 0.0, *, quarter: int = 0) -> Places:
    """Place the links of a chain on its curve.

    Link k hangs between the joints at the arc lengths ``start + k pitch`` and ``start + (k + 1) pitch``: its centre
    is midway between the two, its x axis runs from one to the other, and it is rolled about that axis by
    ``k + quarter`` quarter turns against the frame that does not twist along the curve. A link lies in the plane of
    its own x and y axes.

    Parameters
    ----------
    curve : Curve
        The chain's line.
    count : int
        How many links.
    pitch : float
        Length of curve from joint to joint, m.
    start : float
        Arc length of the first joint, m.
    quarter : int
        Quarter turns of link 0: 0 lays it in the vertical plane of the curve (in that along x for a plumb line), 1
        square to it.

    Returns
    -------
    Places
        Centres (count, 3), m, and turns (count, 3, 3) whose columns are the links' x, y and z axes.

    Raises
    ------
    ValueError
        If the links reach over the curve's ends.
    """
    joints, tangents = curve.at(start + pitch * np.arange(count + 1))
    places = (joints[1:] + joints[:-1]) / 2
    chords = np.diff(joints, axis=0)
    sizes = np.linalg.norm(chords, axis=1, keepdims=True)
    # Where a chain doubles back within one link its joints meet: there the link points along the curve.
    folded = sizes < _ON_PLAN * pitch
    x = np.where(folded, tangents[:-1], chords / np.where(folded, 1.0, sizes))
    side = no_twist(places, x, level_side(curve))
    angle = (np.arange(count) + quarter) % 4
    cos, sin = np.array([1.0, 0, -1, 0])[angle, None], np.array([0, 1.0, 0, -1])[angle, None]
    up = np.cross(x, side)
    # With side = z x (way), up = x x side points up; y = up and z = x x y = -side lay link 0 in the vertical plane.
    y = cos * up - sin * side
    return Places(places, np.stack([x, y, np.cross(x, y)], axis=2))
