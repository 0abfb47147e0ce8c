"""An entry of the user's on its way to a stock."""

from __future__ import annotations

from dataclasses import dataclass, field

from geom.setting.materials import Material, find_material
from geom.setting.stock.entry import StockEntry
from geom.setting.stock.record import Stock

__all__ = ["Draft", "Faulty"]


class Faulty(ValueError):
    """What is wrong with one key of an entry."""

    def __init__(self, key: str, text: str) -> None:
        super().__init__(text)
        self.key = key


@dataclass
class Draft:
    """An entry on its way to a stock: what it is like, what it is made of, and what was worked out."""

    name: str
    entry: StockEntry
    base: Stock
    material: Material | None
    notes: list[str] = field(default_factory=list)

    def assumed(self) -> Material:
        """Return the material, which is steel unless another was named, and note that it was assumed."""
        if self.material is None:
            self.material = find_material("steel")
            self.notes.append("taken as steel, no material being given")
        return self.material
