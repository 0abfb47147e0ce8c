"""What the pieces of a design share besides supports, fittings and stock: shop, site, drawing, printing."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom import units
from geom.errors import say
from geom.fields import Limits, PointField, Pressure, Reach, Section, Share, Size, Temperature, Within, choice


class Shop(Section):
    """The table [shop]: how pieces are cut."""

    temperature: Temperature = Field(20.0, description="at which lengths are measured, degrees Celsius")
    step: Size = Field(0.001, description="cut lengths are rounded to this; 1 mm unless given")
    kerf: Reach = Field(0.0, description="what a cut takes of a rope or bar")
    cut_tolerance: Reach = Field(0.0, description="+/- on a cut length")
    spares: Share = Field(0.0, description="share added to the order, 0.05 for five in a hundred")


_TEMPERATURE: TypeAdapter[float] = TypeAdapter(Temperature)


def _three(raw: Any, info: ValidationInfo) -> tuple[float, ...]:  # noqa: ANN401 - as the file has it
    if not isinstance(raw, list) or len(raw) != 3:
        raise ValueError(f"{say(raw)} are no site's temperatures; give [coldest, as hung, hottest]")
    values = tuple(_TEMPERATURE.validate_python(value, context=info.context) for value in raw)
    if not values[0] <= values[1] <= values[2]:
        raise ValueError(f"{say(raw)} do not rise; give [coldest, as hung, hottest]")
    return values


class Site(Section):
    """The table [site]. Its origin is taken off every point before anything is solved."""

    temperature: Annotated[tuple[float, ...] | None, BeforeValidator(_three)] = Field(
        None, description="coldest, as hung, hottest"
    )
    support_give: Reach = Field(0.0, description="how far supports may lean in, in all; half at each")

    wind: Pressure = Field(0.0, description="pressure of a level wind, square to each span; indicative")
    origin: PointField = Field((0.0, 0.0, 0.0), description="site coordinates of the design's origin")


Word = str


class Drawing(Section):
    """The table [drawing]."""

    unit: Annotated[Word | None, choice("mm", "cm", "m", "in", "ft")] = Field(None, description="unit of drawings")
    within: Within = Field(
        0.0005, description="greatest distance of a drawn curve from the true one; 0.5 mm unless given"
    )
    curve: Annotated[Word, choice("polyline", "arcs")] = Field("polyline", description="how curves are drawn")
    version: Annotated[Word, choice("R2010", "R12")] = Field("R2010", description="version of the DXF format")
    links: Annotated[Word, choice("curve", "rigid")] = Field(
        "curve", description='"rigid": chains are drawn as the polygon that rigid links hang in'
    )
    sheet: Annotated[Word, choice("A0", "A1", "A2", "A3", "A4")] = Field("A3", description="size of paper")


_SCALES = Limits(least=1e-3, most=1e4, words="20 for 1:20, from 0.001 to 10000")
"""Outside them a print's coordinates in millimetres leave what the file's single precision tells apart."""


def _scale(raw: object) -> float:
    try:
        return _SCALES.check(units.ratio(raw), raw)
    except ValueError as error:
        raise ValueError(f"{say(raw)} is no scale of a print; give {_SCALES.words}") from error


def _bed(raw: object) -> object:
    if not isinstance(raw, list) or len(raw) != 3:
        raise ValueError(f"{say(raw)} is no bed; give its three sizes, like [220, 220, 250]")
    return tuple(raw)


class Print(Section):
    """The table [print]: solids for printing."""

    scale: Annotated[float, BeforeValidator(_scale)] = Field(1.0, description="20 for 1:20")
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

    @property
    def temperatures(self) -> tuple[float, float, float]:
        """Coldest, as hung and hottest at the site, degrees Celsius; the shop's where the site gives none."""
        coldest, hung, hottest = self.site.temperature or (self.shop.temperature,) * 3
        return coldest, hung, hottest

    def stated(self, metres: float) -> str:
        """Return a length in the design's unit, as an error line says it: `1.8 m`."""
        if self.unit == "ft":
            return units.feet_inches(metres)
        return f"{float(f'{metres / units.UNITS[self.unit].metres:.6g}'):.10g} {self.unit}"
