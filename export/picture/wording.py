"""Figures as a drawing says them: rounded to what a shop can do, in the drawing's unit."""

import math
import re
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from geom import units
from geom.result import Quantity, Said

# A shop works to 1 mm or 1/16 in; parts cut by machine to 0.1 mm (common practice).
_DECIMALS = {"mm": 0, "cm": 1, "m": 3}
_INCH = 0.0254
_SIXTEENTHS = 16
_KILO = 1000.0
_METRIC = re.compile(r"(?<![\w.,/-])(-?\d+(?:\.\d+)?) (mm|cm|m)(?![\w/²³])")


@dataclass(frozen=True, slots=True)
class Wording:
    """How lengths are said in one drawing unit; `finer` adds decimals, for what is cut by machine."""

    unit: str
    finer: int = 0

    def length(self, metres: float) -> str:
        """Return a length without unit, as a dimension says it: `1884`, `6'-2 3/16"`."""
        if self.unit == "ft":
            return units.feet_inches(metres)
        if self.unit == "in":
            return f'{_inches(metres)}"'
        return units.number(metres, self.unit, self.decimals)

    @property
    def decimals(self) -> int:
        """Decimals of a length in a metric unit."""
        return _DECIMALS[self.unit] + self.finer

    def length_with_unit(self, metres: float) -> str:
        """Return a length that says its unit: `1884 mm`; feet and inches do so by themselves."""
        return self.length(metres) if self.unit in ("ft", "in") else f"{self.length(metres)} {self.unit}"

    def said(self, line: Said) -> str:
        """Return a line of text with its lengths, as dimensions say them."""
        return line.text.format(*(self.length(length) for length in line.lengths))

    def fine(self, metres: float) -> str:
        """Return a small length to two figures, with its unit: `0.5 mm`, `0.02"`."""
        if self.unit in ("ft", "in"):
            return f'{float(f"{metres / _INCH:.2g}"):.6g}"'
        return f"{float(f'{metres / units.UNITS[self.unit].metres:.2g}'):.6g} {self.unit}"

    def retold(self, text: str) -> str:
        """Return a text with its metric lengths said in feet and inches, where that is the drawing's unit."""
        if self.unit not in ("ft", "in"):
            return text
        return _METRIC.sub(lambda found: self._retold(float(found[1]) * units.UNITS[found[2]].metres), text)

    def _retold(self, metres: float) -> str:
        return self.length(metres) if abs(metres) >= _INCH else self.fine(metres)

    def quantity(self, quantity: Quantity) -> str:
        """Return a quantity as a line of text says it: `pin to pin 1884 mm`, `35 links`, `pull 1.18 kN`."""
        name = quantity.name.replace("_", " ")
        value = quantity.value
        if value is None or math.isnan(value):
            return f"{name} none"
        match quantity.unit.suffix:
            case "m":
                return f"{name} {self.length_with_unit(value)}"
            case "N":
                return f"{name} {force(value)}"
            case "kg":
                return f"{name} {significant(value)} kg"
            case "":
                return f"{_bare(value)} {name}"
            case suffix:
                return f"{name} {significant(value * quantity.unit.factor)} {_UNITS.get(suffix, suffix)}"


_UNITS = {
    "deg": "°",
    "m2": "m²",
    "m3": "m³",
    "Nm": "N·m",
    "N_per_m": "N/m",
    "kg_per_m": "kg/m",
    "kg_per_m3": "kg/m³",
    "per_K": "/K",
    "C": "°C",
}


def force(newtons: float) -> str:
    """Return a force to three figures, in N or from a thousand on in kN."""
    # 999.5 rounds to 1000, which is already said in kN
    return f"{significant(newtons / _KILO)} kN" if abs(newtons) >= 999.5 else f"{significant(newtons)} N"


def significant(value: float, figures: int = 3) -> str:
    """Return a number to so many figures, without exponent and without a fraction nobody asked for."""
    if value == 0 or not math.isfinite(value):
        return f"{value:g}"
    power = int(f"{value:.{figures - 1}e}".partition("e")[2])  # of the rounded value: 999.6 is 1.00e+03
    return f"{value:.{max(0, figures - 1 - power)}f}"


def said_pulls(name: str) -> bool:
    """Return whether a quantity is a pull or thrust, which is said with the load it is of."""
    return any(word in name for word in ("pull", "thrust", "push", "force", "tension"))


def counted(count: int, one: str, many: str = "") -> str:
    """Return `1 link`, `35 links`."""
    return f"{count} {one if count == 1 else many or one + 's'}"


def listed(items: Sequence[str], at_most: int = 12) -> str:
    """Return items in a row, the first few and how many more."""
    more = len(items) - at_most
    return ", ".join(items) if more <= 0 else f"{', '.join(items[:at_most])} and {more} more"


def _bare(value: float) -> str:
    return f"{value:.0f}" if float(value).is_integer() else significant(value)


def _inches(metres: float) -> str:
    total = math.floor(abs(metres) / _INCH * _SIXTEENTHS + 0.5)
    whole, top = divmod(total, _SIXTEENTHS)
    text = " ".join(
        part for part in (str(whole) if whole or not top else "", str(Fraction(top, 16)) if top else "") if part
    )
    return f"-{text}" if metres < 0 and total else text
