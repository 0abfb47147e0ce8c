"""What the pieces of a design share besides supports, fittings and stock: shop, site, drawing, printing."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Annotated, ClassVar

from pydantic import BeforeValidator, Field

from geom import units
from geom.errors import say
from geom.fields import PointField, Ratio, Reach, Section, Size, Temperature, choice


class Shop(Section):
    """The table [shop]: how pieces are cut."""

    temperature: Temperature = Field(20.0, description="at which lengths are measured, degrees Celsius")
    step: Size = Field(0.001, description="cut lengths are rounded to this; 1 mm unless given")
    kerf: Reach = Field(0.0, description="what a cut takes of a rope or bar")
    cut_tolerance: Reach = Field(0.0, description="+/- on a cut length")
    spares: Ratio = Field(0.0, description="share added to the order, 0.05 for five in a hundred")


class Site(Section):
    """The table [site]. Its origin is taken off every point before anything is solved."""

    later: ClassVar[frozenset[str]] = frozenset({"temperature", "support_give", "wind"})

    origin: PointField = Field((0.0, 0.0, 0.0), description="site coordinates of the design's origin")


Word = str


class Drawing(Section):
    """The table [drawing]."""

    later: ClassVar[frozenset[str]] = frozenset({"links"})

    unit: Annotated[Word | None, choice("mm", "cm", "m", "in", "ft")] = Field(None, description="unit of drawings")
    within: Size = Field(
        0.0005, description="greatest distance of a drawn curve from the true one; 0.5 mm unless given"
    )
    curve: Annotated[Word, choice("polyline", "arcs")] = Field("polyline", description="how curves are drawn")
    version: Annotated[Word, choice("R2010", "R12")] = Field("R2010", description="version of the DXF format")
    sheet: Annotated[Word, choice("A0", "A1", "A2", "A3", "A4")] = Field("A3", description="size of paper")


def _bed(raw: object) -> object:
    if not isinstance(raw, list) or len(raw) != 3:
        raise ValueError(f"{say(raw)} is no bed; give its three sizes, like [220, 220, 250]")
    return tuple(raw)


class Print(Section):
    """The table [print]: solids for printing."""

    scale: Ratio = Field(1.0, description="20 for 1:20")
    least_wall: Reach = Field(0.0, description="thinner parts are thickened to this after scaling")
    links: Annotated[Word, choice("apart", "joined")] = Field("apart", description="links as bodies or as one")
    gap: Reach = Field(0.0003, description="how far joined links overlap; 0.3 mm unless given")
    bed: Annotated[tuple[Size, Size, Size] | None, BeforeValidator(_bed)] = Field(
        None, description="sizes of the printer's bed"
    )


@dataclass(frozen=True)
class Setting:
    """All that a design's pieces share. `unit` is the design's, lengths are in metres."""

    unit: str = "mm"
    shop: Shop = field(default_factory=Shop)
    site: Site = field(default_factory=Site)
    drawing: Drawing = field(default_factory=Drawing)
    printing: Print = field(default_factory=Print)
    prints: bool = False  # whether the design has a [print] table at all

    @property
    def drawing_unit(self) -> str:
        """The unit of drawings and tables: the design's own unless it names another."""
        return self.drawing.unit or self.unit

    def stated(self, metres: float) -> str:
        """Return a length in the design's unit, as an error line says it: `1.8 m`."""
        if self.unit == "ft":
            return units.feet_inches(metres)
        return f"{float(f'{metres / units.UNITS[self.unit].metres:.6g}'):.10g} {self.unit}"
