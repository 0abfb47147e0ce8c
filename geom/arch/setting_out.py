"""Setting out full size: ordinates from the springing line, lengths along the lines, clear widths.

Abscissae are measured from the ``from`` springing of the face line, ordinates upward from the level of the lower
springing, in metres. Where a line is absent (beyond its own feet) its figures are NaN.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from geom.arch.ring import LineName, Ring

Floats = NDArray[np.float64]

MOST_STATIONS = 100_000  # ordinates: past what anybody marks out by hand, before memory is filled
_ROUNDING = 1e-9  # of a step: a station at a foot to rounding is at the foot


@dataclass(frozen=True)
class Ordinates:
    """Stations along the springing line: `x` (n,), heights of the three lines there, and lengths along them, m.

    Lengths are measured along each line from its own ``from`` foot.
    """

    x: Floats
    intrados: Floats
    axis: Floats
    extrados: Floats
    along_intrados: Floats
    along_axis: Floats
    along_extrados: Floats


def datum(ring: Ring) -> float:
    """Return the elevation of the lower springing over the ``from`` springing, m: nought or less."""
    return min(0.0, float(ring.feet(ring.profile.face)[1, 1]))


def stations(ring: Ring, step: float) -> Floats:
    """Return abscissae `step` m apart from the ``from`` springing over the whole ring, and the ``to`` springing."""
    feet = np.concatenate([ring.feet(name)[:, 0] for name in ring.ends])
    first, last = np.ceil(np.min(feet) / step - _ROUNDING), np.floor(np.max(feet) / step + _ROUNDING)
    if last - first > MOST_STATIONS:
        raise ValueError(f"a step of {step:g} m makes over {MOST_STATIONS} ordinates; give a longer one")
    x = step * np.arange(first, last + 1) + 0.0  # no minus nought
    springing = ring.span(ring.profile.face)
    if np.any(np.abs(x - springing) <= _ROUNDING * step):
        return np.asarray(x)
    return np.sort(np.append(x, springing))


def ordinates(ring: Ring, x: ArrayLike) -> Ordinates:
    """Return heights and lengths of the three lines at abscissae `x` (n,), m."""
    at = np.asarray(x, dtype=np.float64)
    columns = [_line(ring, name, at) for name in ("intrados", "axis", "extrados")]
    return Ordinates(at, *(heights for heights, _ in columns), *(lengths for _, lengths in columns))


def _line(ring: Ring, name: LineName, x: Floats) -> tuple[Floats, Floats]:
    line, (start, end) = ring.line(name), ring.ends[name]
    feet = ring.feet(name)[:, 0]
    slack = _ROUNDING * (feet[1] - feet[0])
    there = (x >= feet[0] - slack) & (x <= feet[1] + slack)
    q = np.clip(line.at_x(np.clip(x, *feet)), start, end)
    height = line.point(q)[..., 1] - datum(ring)
    return np.where(there, height, np.nan), np.where(there, line.length(start, q), np.nan)


def clear_widths(ring: Ring, heights: ArrayLike) -> Floats:
    """Return the widths of the opening at heights (n,) over the lower springing, m.

    NaN where the intrados is not on both sides there: over its crown, or under the higher of its feet.
    """
    level = np.asarray(heights, dtype=np.float64) + datum(ring)
    line = ring.intrados
    feet = ring.feet("intrados")[:, 1]
    slack = _ROUNDING * ring.rise("intrados")
    there = (level >= np.max(feet) - slack) & (level <= line.top) & ring.crown_inside
    q = ring.shape.at_drop(np.where(there, line.top - level, 0.0), line.offset)
    width = line.point(q)[..., 0] - line.point(-q)[..., 0]
    return np.where(there, width, np.nan)
