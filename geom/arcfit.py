"""Tangent arcs along a curve: pairs of circular arcs (biarcs) from point to point, for what is bent or cut by arcs.

Bolton, "Biarc curves", Computer-Aided Design 7 (1975), joins two points with given tangents by two arcs that meet with
a common tangent. Of the family, the one with both tangent lengths equal is taken. Its distance from a smooth curve over
a step of length h is |dk/ds| h^3 / 324 to leading order, k the curvature (Meek and Walton, "Approximating smooth planar
curves by arc splines", Journal of Computational and Applied Mathematics 59 (1995)), which says where the steps must be
short.
"""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.curves import Arc, Curve, Joined, Polyline, Segment
from geom.errors import SolveError
from geom.result import Frame

Floats = NDArray[np.float64]

_ERROR = 324.0  # Meek and Walton (1995): error = |dk/ds| h^3 / 324
_FINE = 64  # samples are within a 64th of the tolerance, so that what is measured between them adds under 2 %
_ROOM = 1 - 1 / _FINE  # and what is measured at them may be so much of the tolerance
_LEAST_SAMPLES = 65  # so that dk/ds is told from differences to some per cent even on a short stretch
_MOST_TURN = np.pi / 2  # of one biarc: an arc of a drawing is split under a half turn, and the law is for short steps
_FLAT = 1e-12  # a bulge under this has its sagitta lost in the rounding of its chord: a straight line
_SPUR = 1.02  # over what the law asks for where a step is too long, so that rounds end
_ROUNDS = 60  # steps that are too long grow shorter by 2 % a round at least: to a third in all


@dataclass(frozen=True, eq=False)
class Arcs:
    """Vertices (n, 2) m and the bulge of the arc that follows each, tan of a quarter of its angle, (n,).

    Of closed arcs the last bulge leads back to the first vertex; else it is 0.
    """

    points: Floats
    bulges: Floats
    closed: bool = False


def fit_arcs(curve: Curve, frame: Frame, within: float) -> Arcs:
    """Return tangent arcs within a distance of a curve that lies in a frame's plane.

    Corners between joined curves stay corners; straight lines stay straight (bulge 0).

    Parameters
    ----------
    curve : Curve
        The curve, in the plane of `frame`.
    within : float
        Greatest distance of the arcs from the curve, m; positive.

    Raises
    ------
    SolveError
        If the curve is not smooth enough for arcs within the distance.
    """
    fitted = [_fit(leaf, frame, within) for leaf in _leaves(curve)]
    points = np.concatenate([*(arcs.points[:-1] for arcs in fitted), fitted[-1].points[-1:]])
    bulges = np.concatenate([*(arcs.bulges[:-1] for arcs in fitted), [0.0]])
    return Arcs(points[:-1], bulges[:-1], closed=True) if curve.closed else Arcs(points, bulges)


def biarcs(points: Floats, tangents: Floats) -> Arcs:
    """Return the biarc of equal tangent lengths from each point to the next: 2 n - 1 vertices.

    With v the step and t0, t1 the unit tangents at its ends, both tangent lengths are d with
    2 (1 - t0 t1) d^2 + 2 v (t0 + t1) d - v v = 0; the positive root is written so that nothing cancels for t0 = t1.

    Parameters
    ----------
    points, tangents : ndarray, shape (n, 2)
        Points, m, and the unit tangents there.
    """
    step, t0, t1 = np.diff(points, axis=0), tangents[:-1], tangents[1:]
    square, ahead = _dot(step, step), _dot(step, t0 + t1)
    # |t0 - t1|^2 = 2 (1 - t0 t1), without the subtraction from 1
    reach = square / (ahead + np.sqrt(ahead**2 + square * _dot(t0 - t1, t0 - t1)))
    middles = (points[:-1] + points[1:] + reach[:, None] * (t0 - t1)) / 2
    first = _bulges(t0, middles - points[:-1])
    second = -_bulges(-t1, middles - points[1:])
    vertices = np.concatenate([np.stack([points[:-1], middles], axis=1).reshape(-1, 2), points[-1:]])
    return Arcs(vertices, np.append(np.stack([first, second], axis=1).ravel(), 0.0))


def _leaves(curve: Curve) -> Iterator[Curve]:
    if isinstance(curve, Joined):
        for part in curve.curves:
            yield from _leaves(part)
    else:
        yield curve


def _fit(curve: Curve, frame: Frame, within: float) -> Arcs:
    """Arcs along one curve without corners, or exactly along straight lines and arcs."""
    if isinstance(curve, Segment | Polyline):
        points = frame.flat(curve.points(within))
        return Arcs(points, np.zeros(len(points)))
    if isinstance(curve, Arc):
        return _at(curve, frame, np.linspace(0.0, curve.length, 2 + int(abs(curve.sweep) / _MOST_TURN)))
    samples = _samples(curve, within / _FINE)
    points, angles = _followed(curve, frame, samples)
    density = _density(samples, angles, within)
    for _ in range(_ROUNDS):
        nodes = _nodes(samples, density)
        arcs = _at(curve, frame, nodes)
        biarc = np.clip(np.searchsorted(nodes, samples, side="right") - 1, 0, len(nodes) - 2)
        off = np.zeros(len(nodes) - 1)
        np.maximum.at(off, biarc, _off(arcs, points, biarc))
        if off.max() <= _ROOM * within:
            return arcs
        # where dk/ds changes within a step, as at a vertex, the law falls short: steps there are made shorter by it
        more = np.cbrt(np.maximum(1.0, off / (_ROOM * within))) * np.where(off > _ROOM * within, _SPUR, 1.0)
        density = density * more[biarc[:-1]]
    raise SolveError(f"tangent arcs come no nearer than {off.max():.3g} m to the curve; {within:.3g} m was asked for")


def _nodes(samples: Floats, density: Floats) -> Floats:
    """Arc lengths of the biarcs' ends, so that each takes the same share of the density's integral."""
    effort = np.concatenate([[0.0], np.cumsum(density * np.diff(samples))])
    count = max(1, int(np.ceil(effort[-1])))
    nodes = np.interp(np.linspace(0.0, effort[-1], count + 1), effort, samples)
    nodes[-1] = samples[-1]
    return np.asarray(nodes)


def _samples(curve: Curve, within: float) -> Floats:
    stations = curve.stations(within)
    split = -(-_LEAST_SAMPLES // (len(stations) - 1))
    return np.interp(
        np.linspace(0, len(stations) - 1, split * (len(stations) - 1) + 1), np.arange(len(stations)), stations
    )


def _followed(curve: Curve, frame: Frame, samples: Floats) -> tuple[Floats, Floats]:
    """Points (n, 2) in the plane and the angle (n,) the curve runs at there, without jumps of a turn."""
    points, tangents = curve.at(samples)
    ways = np.stack([tangents @ frame.along, tangents @ frame.up], axis=1)
    return frame.flat(points), np.unwrap(np.arctan2(ways[:, 1], ways[:, 0]))


def _density(samples: Floats, angles: Floats, within: float) -> Floats:
    """How many biarcs a metre takes between each two samples, (n - 1,): 1/h of the law."""
    curvature = np.diff(angles) / np.diff(samples)
    middles = (samples[1:] + samples[:-1]) / 2
    change = np.abs(np.gradient(curvature, middles))
    density = np.maximum(np.cbrt(change / (_ERROR * within)), np.abs(curvature) / _MOST_TURN)
    # a floor for straight stretches, where the sum would stand still and could not be inverted
    return np.asarray(np.maximum(density, 1e-3 / (samples[-1] - samples[0])))


def _at(curve: Curve, frame: Frame, nodes: Floats) -> Arcs:
    points, tangents = curve.at(nodes)
    ways = np.stack([tangents @ frame.along, tangents @ frame.up], axis=1)
    return biarcs(frame.flat(points), ways)


def _off(arcs: Arcs, points: Floats, biarc: NDArray[np.int64]) -> Floats:
    """Distances (n,) of points (n, 2) from the biarc each belongs to, m.

    With u from the middle of the biarc, where both its arcs run along t with normal n, and k the curvature of one of
    them, f = n u - k u u / 2 is 0 on its circle and the distance is 2 f / (1 + sqrt(1 - 2 k f)), also for k = 0.
    """
    chords = np.diff(arcs.points, axis=0)
    bulges = arcs.bulges[:-1]
    curvature = 4 * bulges / (np.hypot(chords[:, 0], chords[:, 1]) * (1 + bulges**2))
    # half the first arc's angle, 2 atan(bulge), turns its chord into the tangent at its end
    turn = 2 * np.arctan(bulges[::2])
    way = np.arctan2(chords[::2, 1], chords[::2, 0]) + turn
    along = np.stack([np.cos(way), np.sin(way)], axis=1)[biarc]
    from_middle = points - arcs.points[1::2][biarc]
    second = _dot(from_middle, along) > 0
    bend = curvature[2 * biarc + second]
    side = along[:, 0] * from_middle[:, 1] - along[:, 1] * from_middle[:, 0]
    f = side - bend * _dot(from_middle, from_middle) / 2
    return np.asarray(np.abs(2 * f / (1 + np.sqrt(np.maximum(0.0, 1 - 2 * bend * f)))))


def _bulges(tangents: Floats, chords: Floats) -> Floats:
    """Bulges of the arcs that leave along tangents (n, 2) and end a chord (n, 2) further.

    The angle between tangent and chord is half the arc's; tan of its half is sin / (1 + cos).
    """
    cross = tangents[:, 0] * chords[:, 1] - tangents[:, 1] * chords[:, 0]
    bulges = cross / (np.hypot(chords[:, 0], chords[:, 1]) + _dot(tangents, chords))
    return np.where(np.abs(bulges) < _FLAT, 0.0, bulges)


def _dot(one: Floats, other: Floats) -> Floats:
    return np.asarray((one * other).sum(axis=1))
