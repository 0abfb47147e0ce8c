"""Ground under a member, and the clearance wanted over it."""

from __future__ import annotations

from itertools import pairwise
from typing import Annotated, Any

import numpy as np
from numpy.typing import NDArray
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.errors import say
from geom.fields import Elevation, Length, Reach, Section

_DISTANCE: TypeAdapter[float] = TypeAdapter(Length)
_ELEVATION: TypeAdapter[float] = TypeAdapter(Elevation)


def _profile(raw: Any, info: ValidationInfo) -> tuple[tuple[float, float], ...]:  # noqa: ANN401 - as the file has it
    if not isinstance(raw, list) or len(raw) < 2:
        raise ValueError(f"{say(raw)} is no ground; give at least two [distance on plan, z]")
    points = []
    for point in raw:
        if not isinstance(point, list) or len(point) != 2:
            raise ValueError(f"{say(point)} is no point of the ground; give [distance on plan, z]")
        points.append(
            (
                _DISTANCE.validate_python(point[0], context=info.context),
                _ELEVATION.validate_python(point[1], context=info.context),
            )
        )
    if any(b[0] <= a[0] for a, b in pairwise(points)):
        raise ValueError("its distances do not increase; give the ground's points in order along the member")
    return tuple(points)


class Clear(Section):
    """The key `clear`: the ground's points from the `from` end, and the least clearance wanted."""

    above: Annotated[tuple[tuple[float, float], ...], BeforeValidator(_profile)] = Field(
        description="the ground under it, [[distance on plan, z], ...]"
    )
    at_least: Reach = Field(0.0, description="the least clearance wanted")

    @property
    def profile(self) -> NDArray[np.float64]:
        """The ground, (m, 2): plan distance and elevation, m."""
        return np.array(self.above)
