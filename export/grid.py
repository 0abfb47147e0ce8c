"""Tables as they leave: heads in the drawing's unit, numbers rounded to what the unit can mean, text made safe.

A length column `cut_length` leaves as `cut_length_mm`, in a drawing in feet as text, `cut_length_ft_in`, written
13'-9 1/2". Areas and volumes leave in the square and cube of metres, inches or feet, and stay m2 and m3 where the
drawing is in millimetres or centimetres, whose squares no one can read. Everything else leaves as in the figures.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom import units
from geom.result import Column, Table

# Decimals that keep a tenth of a micrometre to a micrometre of every length, and more than any force or mass is known
# to.
_LENGTH_DECIMALS = {"mm": 3, "cm": 4, "m": 6, "in": 5, "ft": 6}
_DECIMALS = {"m2": 6, "m3": 9, "N": 3, "Nm": 3, "kg": 6, "deg": 6}
_OTHER_DECIMALS = 9
_POWERS = {"m": 1, "m2": 2, "m3": 3}

Number = int | float
Cell = str | Number | None


@dataclass(frozen=True)
class Field:
    """A column as it leaves.

    Attributes
    ----------
    head : str
        Its key with the unit, `cut_length_mm`.
    heading : str
        The same for people, `cut length, mm`.
    values : sequence
        Text, numbers or None, one for each row.
    decimals : int or None
        Of its numbers; None for a column of text.
    metres : tuple of float, optional
        The lengths of a column that leaves as text in feet and inches.
    """

    head: str
    heading: str
    values: Sequence[Cell]
    decimals: int | None
    metres: tuple[float, ...] | None = None


def fields(table: Table, unit: str, *, feet_as_text: bool = True) -> list[Field]:
    """Return a table's columns as they leave in a drawing's unit.

    Parameters
    ----------
    table : Table
        Values in SI.
    unit : str
        Unit of the drawing: mm, cm, m, in or ft.
    feet_as_text : bool
        Whether lengths in feet are written in feet and inches, or as decimal feet.
    """
    return [_field(column, unit, feet_as_text) for column in table.columns]


def _field(column: Column, unit: str, feet_as_text: bool) -> Field:
    if isinstance(column.values, tuple):
        return Field(column.key, column.heading, column.values, None)
    suffix = column.unit.suffix
    values = np.asarray(column.values, dtype=np.float64)
    if suffix == "m" and unit == "ft" and feet_as_text:
        return _feet(column, values * column.unit.factor)
    power = _POWERS.get(suffix, 0)
    decimals = _DECIMALS.get(suffix, _OTHER_DECIMALS)
    if power == 1 or (power and unit in ("m", "in", "ft")):
        suffix = unit + suffix[1:]
        decimals = _LENGTH_DECIMALS[unit]
        values = values / units.UNITS[unit].metres ** power
    numbers = _plain(values * column.unit.factor, decimals)
    return Field(_joined(column.key, suffix, "_"), _joined(column.heading, suffix, ", "), numbers, decimals)


def _feet(column: Column, metres: NDArray[np.float64]) -> Field:
    values = tuple(metres.tolist())
    texts = [units.feet_inches(value) if math.isfinite(value) else None for value in values]
    return Field(f"{column.key}_ft_in", f"{column.heading}, ft in", texts, None, values)


def _joined(name: str, unit: str, between: str) -> str:
    return f"{name}{between}{unit}" if unit else name


def _plain(values: NDArray[np.float64], decimals: int) -> list[Number | None]:
    """Return numbers rounded to some decimals, whole ones as integers, what is not finite as None."""
    rounded = np.round(values, decimals) + 0.0
    whole = rounded == np.rint(rounded)
    return [
        (int(value) if is_whole else value) if math.isfinite(value) else None
        for value, is_whole in zip(rounded.tolist(), whole.tolist(), strict=True)
    ]


_FORMULA = ("=", "+", "-", "@", "\t", "\r", "\n", "＝", "＋", "－", "＠")
_NUMBER = re.compile(r"[+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")


def harmless(text: str) -> str:
    """Return text that no spreadsheet takes for a formula: an apostrophe goes before what begins like one.

    A number with its sign is left as it is. (Formula injection is described in CWE-1236, "Improper Neutralization of
    Formula Elements in a CSV File".)
    """
    if text.startswith(_FORMULA) and not _NUMBER.fullmatch(text):
        return f"'{text}"
    return text


def written(field: Field) -> list[str]:
    """Return a column's cells as text of a CSV file, empty where there is no value."""
    if field.metres is not None:  # made here, of figures and marks of feet and inches alone
        return [str(value or "") for value in field.values]
    return [_cell(value, field.decimals) for value in field.values]


def _cell(value: Cell, decimals: int | None) -> str:
    match value:
        case None:
            return ""
        case str():
            return harmless(value)
        case int():
            return str(value)
    return f"{value:.{decimals}f}".rstrip("0")


def total(values: Iterable[Cell]) -> float:
    """Return the sum of a column's numbers, correctly rounded."""
    return math.fsum(value for value in values if isinstance(value, int | float))
