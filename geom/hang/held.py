"""What is looked at of a hung member, whatever hung it: depths, pulls, slopes as arrays of one name for all members."""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from geom.hang.loaded import Loaded
from geom.hang.stretched import Stretched

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Held:
    """n members as they hang; arrays of shape (n,), vectors (n, 3) along the span, to its left and upward.

    sag, sag_mid : under the chord, m; sag_at : plan distance of the greatest, m
    lowest : elevation of the lowest point over `from`, m; lowest_at : its plan distance, m
    horizontal : pull along the span, N
    on_from, on_to : forces on the supports, N, (n, 3)
    slope_from, slope_to : under the horizontal, rad
    hung_length, parameter : m; the parameter NaN under loads
    """

    sag: Floats
    sag_mid: Floats
    sag_at: Floats
    lowest: Floats
    lowest_at: Floats
    horizontal: Floats
    on_from: Floats
    on_to: Floats
    slope_from: Floats
    slope_to: Floats
    hung_length: Floats
    parameter: Floats

    @property
    def at_from(self) -> Floats:
        """Whole pull on `from`, N."""
        return np.asarray(np.linalg.norm(self.on_from, axis=1))

    @property
    def at_to(self) -> Floats:
        """Whole pull on `to`, N."""
        return np.asarray(np.linalg.norm(self.on_to, axis=1))

    @property
    def end_pull(self) -> Floats:
        """The greater of both end pulls, N."""
        return np.maximum(self.at_from, self.at_to)

    def with_rows(self, rows: Ints, other: Held) -> Held:
        """Return these members, some of them replaced."""
        values = {}
        for field in fields(self):
            whole = np.array(getattr(self, field.name))
            whole[rows] = getattr(other, field.name)
            values[field.name] = whole
        return Held(**values)


def of_stretched(hang: Stretched) -> Held:
    """Return what is looked at of members under their own weight."""
    pulls, nothing = hang.pulls, np.zeros_like(hang.span)
    return Held(
        sag=hang.sag, sag_mid=hang.sag_mid, sag_at=hang.sag_at, lowest=hang.lowest, lowest_at=hang.lowest_at,
        horizontal=hang.horizontal,
        on_from=np.stack([hang.horizontal, nothing, -pulls.vertical_from], axis=1),
        on_to=np.stack([-hang.horizontal, nothing, -pulls.vertical_to], axis=1),
        slope_from=hang.slope_from, slope_to=hang.slope_to, hung_length=hang.hung_length, parameter=hang.parameter,
    )  # fmt: skip


def of_loaded(hang: Loaded) -> Held:
    """Return what is looked at of members under loads."""
    on_from, on_to = hang.pull_from, hang.pull_to
    return Held(
        sag=hang.sag, sag_mid=hang.sag_mid, sag_at=hang.sag_point[:, 0], lowest=hang.lowest,
        lowest_at=hang.lowest_point[:, 0], horizontal=hang.horizontal, on_from=on_from, on_to=on_to,
        slope_from=np.arctan2(-on_from[:, 2], on_from[:, 0]), slope_to=np.arctan2(-on_to[:, 2], -on_to[:, 0]),
        hung_length=hang.hung_length, parameter=np.full_like(hang.span, np.nan),
    )  # fmt: skip


@dataclass(frozen=True, eq=False)
class Place:
    """Where a member stands: its `from` end (3,) m, the unit vector (3,) along its span, the marks of its loads."""

    start: Floats
    along: Floats
    names: tuple[str, ...] = ()

    def points(self, local: Floats) -> Floats:
        """Return points (..., 3) from `from` along the span, to its left and upward in the design's axes, m."""
        return np.asarray(self.start + self.turned(local))

    def turned(self, local: Floats) -> Floats:
        """Return vectors (..., 3) along the span, to its left and upward in the design's axes."""
        left = np.array([-self.along[1], self.along[0], 0.0])
        return np.asarray(local @ np.stack([self.along, left, np.array([0.0, 0.0, 1.0])]))
