"""What a user writes of a stock of their own: the table [stock.NAME]."""

from __future__ import annotations

from typing import Annotated, Any, ClassVar

from pydantic import BeforeValidator, Field

from geom.fields import (
    Area,
    Count,
    Density,
    Expansion,
    Flag,
    MassPerLength,
    Modulus,
    PositiveForce,
    Ratio,
    Section,
    Size,
    Text,
    choice,
)
from geom.setting.materials import MaterialRef

__all__ = ["Measured", "StockEntry"]


class Measured(Section):
    """The key `measured`: links of the delivered lot gauged taut, inside of the first to inside of the last."""

    links: Count = Field(description="how many links were measured, 11 or more")
    length: Size = Field(description="their length, inside of the first to inside of the last")


def _list(raw: Any) -> Any:  # noqa: ANN401 - as the file has it
    return raw if isinstance(raw, list) else [raw]


class StockEntry(Section):
    """The table [stock.NAME]."""

    at_most_one_of: ClassVar[tuple[tuple[str, ...], ...]] = (
        ("pitch", "measured"),
        ("like", "construction"),
        ("material", "density"),
    )

    kind: Annotated[str | None, choice("chain", "beads", "rope", "rod")] = Field(None, description="what it is")
    like: Text | None = Field(None, description='a standard\'s stock that it is but for the keys given, "DIN 763-8"')
    wire: Size | None = Field(None, description="wire of a link")
    pitch: Size | None = Field(None, description="inside length of a link, or from ball to ball")
    measured: Measured | None = Field(None, description="the pitch as measured, { links = 11, length = ... }")
    width: Size | None = Field(None, description="outside width of a link")
    diameter: Size | None = Field(None, description="diameter of a rope, a rod or the balls of ball chain")
    construction: Text | None = Field(None, description='construction of a rope, like "7x19" or "6x19 IWRC"')
    material: MaterialRef | None = Field(None, description='what it is made of, like "brass"')
    density: Density | None = Field(None, description="of the material, kg/m3")
    mass_per_metre: MassPerLength | None = Field(None, description="weighed or from the supplier, kg/m")
    modulus: Modulus | None = Field(None, description="modulus of elasticity on `area`; without it, no stretch")
    area: Area | None = Field(None, description="metal of a rope, both legs of a link")
    breaking_load: PositiveForce | None = Field(None, description="least breaking load by the supplier's certificate")
    certified: Flag | None = Field(None, description="false where no certificate stands behind `breaking_load`")
    expansion: Expansion | None = Field(None, description="thermal expansion, per kelvin")
    drag: Ratio | None = Field(None, description="drag coefficient for wind")
    sold: Annotated[tuple[Size, ...], BeforeValidator(_list)] = Field((), description="lengths of whole reels or bars")
    source: Text | None = Field(None, description="where its figures come from")
