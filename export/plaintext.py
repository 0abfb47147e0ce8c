"""Values and tables in plain text, for a terminal and for a pipe alike."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence

import numpy as np

from geom import units
from geom.result import Unit

# What a shop can measure, and a little more; the figures file has every digit.
_LENGTH_DECIMALS = {"mm": 1, "cm": 2, "m": 4, "in": 3}
_DECIMALS = {"N": 1, "Nm": 1, "kg": 3, "deg": 2, "C": 1, "m2": 4, "m3": 5}
_WORDS = {"deg": "°", "C": "°C", "m2": "m2", "m3": "m3", "N_per_m": "N/m", "kg_per_m3": "kg/m3", "per_K": "/K"}


def shown(value: object, unit: Unit, length_unit: str) -> str:
    """Return one value as people read it: lengths in the design's unit, `-` where it has no meaning."""
    match value:
        case None:
            return "-"
        case bool():
            return "yes" if value else "no"
        case str():
            return value
        case np.generic():
            return shown(value.item(), unit, length_unit)
        case int() | float():
            return _number(float(value), unit, length_unit)
    return ", ".join(shown(entry, unit, length_unit) for entry in value) if isinstance(value, Iterable) else str(value)


def _number(value: float, unit: Unit, length_unit: str) -> str:
    if not math.isfinite(value):
        return "-"
    if unit.suffix == "m":
        if length_unit == "ft":
            return units.feet_inches(value)
        length = value / units.UNITS[length_unit].metres
        return f"{rounded(length, _LENGTH_DECIMALS[length_unit])} {length_unit}"
    text = rounded(value * unit.factor, _DECIMALS.get(unit.suffix, 4))
    return f"{text} {_WORDS.get(unit.suffix, unit.suffix)}".rstrip()


def rounded(value: float, decimals: int) -> str:
    """Return a number with so many decimals, a small one with three figures, without noughts after the point."""
    if not math.isfinite(value):
        return "-"
    if 1e-6 < abs(value) < 10.0**-decimals * 100.0:  # below 1e-6 nothing here has a meaning but nought
        decimals = 2 - math.floor(math.log10(abs(value)))
    text = f"{value:.{decimals}f}"
    short = text.rstrip("0").rstrip(".") if "." in text else text
    return "0" if short == "-0" else short


def pairs(names_and_values: Iterable[tuple[str, str]]) -> list[str]:
    """Return a line for each name and its value, the values under one another."""
    found = list(names_and_values)
    width = max((len(name) for name, _ in found), default=0)
    return [f"{name:{width}}  {value}" for name, value in found]


def aligned(heads: Sequence[str], rows: Sequence[Sequence[str]]) -> list[str]:
    """Return a table in plain text, two spaces between its columns."""
    widths = [max(map(len, column)) for column in zip(heads, *rows, strict=True)]
    return [
        "  ".join(f"{cell:{width}}" for cell, width in zip(row, widths, strict=True)).rstrip() for row in (heads, *rows)
    ]


def indented(lines: Iterable[str]) -> Iterator[str]:
    """Return lines set in by two spaces."""
    return (f"  {line}" for line in lines)
