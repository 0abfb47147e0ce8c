"""Loads that hang on a member: where, how heavy, how far they reach under it, and what the wind finds of them."""

from __future__ import annotations

from typing import ClassVar

from pydantic import Field

from geom.fields import Area, Mark, Mass, PositiveForce, Ratio, Reach, Section, Size
from geom.units import STANDARD_GRAVITY


class LoadEntry(Section):
    """One load of `loads` on a hanging or a bay."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (("at", "at_plan"), ("mass", "force"))

    mark: Mark | None = Field(None, description="its mark; L1, L2, ... where it is left out")
    at: Size | None = Field(None, description="along the member from its `from` end, before stretch")
    at_plan: Size | None = Field(None, description="distance on plan from its `from` end")
    mass: Mass | None = Field(None, description="its mass, hanger included")
    force: PositiveForce | None = Field(None, description="its weight or pull, downward")
    hanger: Reach = Field(0.0, description="how far it reaches under the member")
    area: Area | None = Field(None, description="what the wind finds of it")
    drag: Ratio | None = Field(None, description="its drag coefficient, with `area`")

    @property
    def weight(self) -> float:
        """Its pull downward, N."""
        return self.force if self.force is not None else (self.mass or 0.0) * STANDARD_GRAVITY
