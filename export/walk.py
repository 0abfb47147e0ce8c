"""From frozen values to plain data: a generic walk over dataclasses, so that no key of a result file is typed twice.

A field's key is its name and the unit in its annotation (`sag: Metres` leaves as `sag_m`); a value is multiplied by
that unit's factor (radians leave as degrees). NaN, infinity and None leave as null, arrays as lists, `Rows` as a list
of objects, a `Quantity` as one key.

Numbers are rounded to 12 significant digits: a thousand times finer than any length that can be measured, and coarse
enough that the last bits, which differ between processors and builds of the linear algebra, seldom reach a file.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields, is_dataclass
from functools import cache
from typing import Any, TypeAlias, get_args, get_type_hints

import numpy as np
from numpy.typing import NDArray

from geom.result import Quantity, Rows, Unit

Plain: TypeAlias = bool | int | float | str | list["Plain"] | dict[str, "Plain"] | None

_DIGITS = 12
_EXACT_POWERS = 22  # 10**22 is the last power of ten that a double holds exactly


@dataclass(frozen=True)
class Entry:
    """How one field of a dataclass leaves: the attribute's name, and the unit its key ends in."""

    name: str
    unit: Unit

    @property
    def key(self) -> str:
        """The key, `sag_m`; a name that Python keeps for itself has an underscore after it that does not leave."""
        name = self.name.removesuffix("_")
        return f"{name}_{self.unit.suffix}" if self.unit.suffix else name


def plain(value: object, factor: float = 1.0) -> Plain:
    """Return a value as plain data: None, booleans, numbers, text, lists and dicts with text keys.

    Parameters
    ----------
    value : object
        A dataclass, array, mapping, sequence, number or text, nested as it may be.
    factor : float
        What every number of it is multiplied by (1 leaves whole numbers whole).

    Raises
    ------
    TypeError
        If something in it is none of these.
    """
    match value:
        case None | bool() | str():
            return value
        case int():
            return value if factor == 1.0 else _number(value * factor)
        case float():
            return _number(value * factor)
        case np.ndarray() | np.generic():
            return _array(np.asarray(value), factor)
        case Quantity():
            return {value.key: plain(value.value, value.unit.factor)}
        case Rows():
            return _rows(value)
        case Mapping():
            return {str(key): plain(entry, factor) for key, entry in value.items()}
        case Sequence():
            return [plain(entry, factor) for entry in value]
    return record(value)


def record(value: object, leave_out: frozenset[str] = frozenset()) -> dict[str, Plain]:
    """Return a dataclass as a dict, fields named in `leave_out` left out.

    Raises
    ------
    TypeError
        If it is no dataclass.
    """
    if isinstance(value, type) or not is_dataclass(value):
        raise TypeError(f"no plain form is known of {type(value).__name__}")
    return {
        entry.key: plain(getattr(value, entry.name), entry.unit.factor)
        for entry in entries(type(value))
        if entry.name not in leave_out
    }


def rounded(values: NDArray[np.float64]) -> NDArray[np.float64]:
    """Return an array rounded to 12 significant digits, each element the double nearest to its decimal.

    A number x of exponent k is made the whole number nearest to x 10^(11-k), below 2^53 and so exact, and divided by
    the same power of ten: one correctly rounded operation on exact operands, hence the double nearest to the decimal.
    (The product is itself rounded, so that a number within 1e-16 of half a digit may go either way.)
    """
    values = np.asarray(values, dtype=np.float64)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        exponent = np.floor(np.log10(np.abs(values)))
        shift = np.where(np.isfinite(exponent), _DIGITS - 1 - exponent, 0.0)
        power = 10.0 ** np.abs(shift)
        result = np.where(shift >= 0, np.rint(values * power) / power, np.rint(values / power) * power)
    odd = np.abs(shift) > _EXACT_POWERS
    result = np.where(odd, values, result) + 0.0  # -0.0 becomes 0.0
    if odd.any():  # below 1e-11 or over 1e33: never many, and text rounds them right
        result[odd] = [float(f"{number:.{_DIGITS}g}") for number in values[odd].tolist()]
    return result


def _number(value: float) -> float | None:
    return float(f"{value:.{_DIGITS}g}") + 0.0 if math.isfinite(value) else None


def _array(values: NDArray[Any], factor: float) -> Plain:
    if values.dtype.kind in "biu" and factor == 1.0:
        return values.tolist()  # type: ignore[no-any-return]
    if values.dtype.kind not in "biuf":
        return [plain(entry, factor) for entry in values.tolist()]
    result = rounded(np.atleast_1d(values * factor))
    finite = np.isfinite(result)
    if not finite.all():
        result = np.where(finite, result, np.array(None, dtype=object))
    return result.reshape(values.shape).tolist()


def _rows(value: Rows) -> Plain:
    found = entries(type(value))
    columns = [plain(getattr(value, entry.name), entry.unit.factor) for entry in found]
    keys = [entry.key for entry in found]
    return [dict(zip(keys, row, strict=True)) for row in zip(*columns, strict=True)]


def entries(cls: type) -> tuple[Entry, ...]:
    """Return how each field of a dataclass leaves, in order."""
    return _entries(cls)


@cache
def _entries(cls: type) -> tuple[Entry, ...]:
    hints = get_type_hints(cls, include_extras=True)
    return tuple(Entry(field.name, _unit(hints[field.name]) or Unit("")) for field in fields(cls))


def _unit(annotation: Any) -> Unit | None:  # noqa: ANN401 - any type expression
    """Return the unit in an annotation: `Metres`, `Metres | None`, `tuple[MetresArray, ...]`."""
    for part in (*getattr(annotation, "__metadata__", ()), *get_args(annotation)):
        found = part if isinstance(part, Unit) else _unit(part)
        if found is not None:
            return found
    return None
