"""Zones of stock: so many strands of a row in turn of one stock, then so many of another."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.fields import Copies, Section
from geom.setting.stock import StockRef
from geom.setting.stock.record import Stock

__all__ = ["Zone", "Zones", "by_strand"]


class Zone(Section):
    """So many strands running of one stock."""

    of: StockRef = Field(description='the stock, like "DIN 763-8" or one of your own [stock.NAME]')
    count: Copies = Field(description="how many strands of it")


def _zones(raw: Any, info: ValidationInfo) -> Any:  # noqa: ANN401 - as the file has it
    """One stock stands for a zone of as many strands as there are, which a count of 0 means."""
    if isinstance(raw, list):
        if not raw:
            raise ValueError("is an empty list; give one stock, or zones [{ of = ..., count = ... }, ...]")
        return raw
    stock: Stock = _STOCK.validate_python(raw, context=info.context)
    return (Zone.model_construct(of=stock, count=0),)


_STOCK: TypeAdapter[Stock] = TypeAdapter(StockRef)

Zones = Annotated[tuple[Zone, ...], BeforeValidator(_zones)]
"""One stock, or zones of several: what a row's key `stock` takes."""


def by_strand(zones: Sequence[Zone], count: int) -> list[Stock]:
    """Return the stock of each strand.

    Raises
    ------
    ValueError
        If the zones are of more or fewer strands than there are.
    """
    stocks = [zone.of for zone in zones for _ in range(zone.count or count)]
    if len(stocks) != count:
        raise ValueError(f"has zones for {len(stocks)} strands, but there are {count}")
    return stocks
