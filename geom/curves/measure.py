"""How far a polyline is from its curve, and making it nearer."""

from collections.abc import Callable

import numpy as np

from geom.curves.base import Along, Array, Curve

# A smooth curve leaves its chord like a parabola: with seven samples between a chord's ends the furthest
# point is at most 1/8 of the half chord from one of them, and its distance (1/8)^2 = 1.6 % more.
_SAMPLES = np.arange(1, 8) / 8
_MISSED = 1 - 1 / 64


def refined(at: Callable[[Array], Along], stations: Array, within: float) -> Array:
    """Add stations between stations until no chord is further from the curve than `within`.

    Parameters
    ----------
    at : callable
        Points and tangents at stations (k,).
    stations : ndarray, shape (n,)
        Rising values of the curve's parameter.
    within : float
        Greatest distance, m; positive.

    Returns
    -------
    ndarray, shape (m,)
        The stations and those added.
    """
    while True:
        miss = chord_errors(at, stations)
        # The error of a chord falls with the square of its length.
        pieces = np.ceil(np.sqrt(miss / (within * _MISSED))).astype(np.int64)
        if (pieces <= 1).all():
            return stations
        pieces = np.maximum(pieces, 1)
        chord = np.repeat(np.arange(len(pieces)), pieces)
        share = (np.arange(len(chord)) - np.repeat(np.cumsum(pieces) - pieces, pieces)) / pieces[chord]
        stations = np.append(stations[chord] + share * np.diff(stations)[chord], stations[-1])


def chord_errors(at: Callable[[Array], Along], stations: Array) -> Array:
    """Greatest distance of a curve from each chord between its stations.

    Parameters
    ----------
    at : callable
        Points and tangents at stations (k,).
    stations : ndarray, shape (n,)
        Rising values of the curve's parameter.

    Returns
    -------
    ndarray, shape (n - 1,)
        Distances of seven points of the curve to their chord, the greatest, m.
    """
    points = at(stations).points
    between = stations[:-1, None] + np.diff(stations)[:, None] * _SAMPLES
    true = at(between.ravel()).points.reshape(*between.shape, 3)
    miss = _from_chord(true, points[:-1, None], points[1:, None])
    return np.asarray(miss.max(axis=1, initial=0.0))


def _from_chord(points: Array, p: Array, q: Array) -> Array:
    """Distance of points from the lines' pieces p to q, broadcast, m."""
    way, past = q - p, points - p
    size = (way * way).sum(axis=-1)
    share = np.clip((past * way).sum(axis=-1) / np.where(size > 0, size, 1.0), 0.0, 1.0)
    return np.asarray(np.linalg.norm(past - share[..., None] * way, axis=-1))


_WINDOW = 8  # chords looked at on each side: shares of length on curve and polyline differ by far less than that


def worst_chord(curve: Curve, points: Array) -> float:
    """Greatest distance of a curve from a polyline drawn for it, measured.

    Parameters
    ----------
    curve : Curve
        The true curve.
    points : ndarray, shape (n, 3)
        The polyline, m, in the curve's direction.

    Returns
    -------
    float
        Greatest distance of 32 points of the curve to a chord from the polyline, m. Each is measured from the
        nearest of the 17 chords about the same share of the length.
    """
    steps = np.linalg.norm(np.diff(points, axis=0), axis=1)
    reach = np.concatenate([[0.0], np.cumsum(steps)])
    share = np.linspace(0.0, 1.0, 32 * len(steps) + 1)
    true = curve.at(share * curve.length).points
    chord = np.clip(np.searchsorted(reach, share * reach[-1], side="right") - 1, 0, len(steps) - 1)
    miss = np.full(len(true), np.inf)
    for aside in range(-_WINDOW, _WINDOW + 1):
        near = np.clip(chord + aside, 0, len(steps) - 1)
        miss = np.minimum(miss, _from_chord(true, points[near], points[near + 1]))
    return float(miss.max())
