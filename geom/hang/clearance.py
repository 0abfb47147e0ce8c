"""Least height of a hanging curve over a ground given as a profile, in closed form."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


def closest_places(profile: Floats, span: float, vertex_at: float, parameter: float) -> Floats:
    """Return the plan distances at one of which a catenary comes nearest to the ground.

    Parameters
    ----------
    profile : ndarray, shape (m, 2)
        Ground under the member: plan distance from its `from` end (increasing) and elevation, m.
    span : float
        Plan distance between the supports, m.
    vertex_at, parameter : float
        Plan distance of the vertex from the `from` end, and a = H/w, m.

    Returns
    -------
    ndarray, shape (k,)
        Plan distances, m; empty where no ground is under the member.

    Notes
    -----
    Over one straight stretch of ground the gap between it and the curve is convex, so it is least where the curve runs
    parallel to the ground, x = vertex + a asinh(slope), or at an end of the stretch.
    """
    slopes = np.diff(profile[:, 1]) / np.diff(profile[:, 0])
    parallel = np.clip(vertex_at + parameter * np.arcsinh(slopes), profile[:-1, 0], profile[1:, 0])
    places = np.concatenate([parallel, profile[:, 0], [0.0, span]])
    inside = (places >= max(0.0, profile[0, 0])) & (places <= min(span, profile[-1, 0]))
    return np.unique(places[inside])


def stretch(profile: Floats, start: float, end: float) -> Floats:
    """Return the part of a ground profile between two plan distances, counted from `start`; (k, 2), k may be 0."""
    low, high = max(start, float(profile[0, 0])), min(end, float(profile[-1, 0]))
    if high <= low:
        return np.empty((0, 2))
    inner = profile[(profile[:, 0] > low) & (profile[:, 0] < high)]
    ends = np.interp([low, high], profile[:, 0], profile[:, 1])
    whole = np.vstack([[low, ends[0]], inner, [high, ends[1]]])
    return np.asarray(whole - np.array([start, 0.0]), dtype=np.float64)
