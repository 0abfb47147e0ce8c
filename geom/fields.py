"""The types that a design's keys are annotated with: unit, limits and a line of explanation, once for every reader.

A quantity is read in one place (geom.units) and kept in SI. What a value means may depend on the design it stands in
(its unit, its named supports): that is the `Known` a reader hands to validation as its context.
"""

from __future__ import annotations

import math
import re
import unicodedata
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from typing import Annotated, Any, ClassVar

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, ValidationInfo

from geom import units
from geom.errors import near, say

Point = tuple[float, float, float]


@dataclass(frozen=True)
class Known:
    """What a value may refer to: the design's unit, its origin (m), and by table the named entries already read.

    `named["support"]["P3"]` is the support; an entry that was itself wrong is None, so that whatever refers to it is
    passed over without a second complaint.
    """

    unit: str
    origin: Point = (0.0, 0.0, 0.0)
    named: Mapping[str, Mapping[str, Any]] = field(default_factory=dict)
    used: set[tuple[str, str]] = field(default_factory=set)
    """Table and name of every entry referred to so far, by which one that nothing uses is found."""


class Unusable(ValueError):
    """Refers to an entry that is wrong itself: reported where that stands, so not again here."""


def known(info: ValidationInfo) -> Known:
    """Return the context of a validation; a model made without one is in metres with nothing named."""
    return info.context if isinstance(info.context, Known) else Known("m")


def look_up(table: str, name: str, info: ValidationInfo) -> Any:  # noqa: ANN401 - the table's own type
    """Return the entry `name` of a named table.

    Raises
    ------
    ValueError
        If there is none, naming the nearest; Unusable if it is there but wrong itself.
    """
    entries = known(info).named.get(table, {})
    if name not in entries:
        hint = near(name, entries)
        raise ValueError(f"there is no {table} {say(name)}{hint or f'; add it as [{table}.{bare_key(name)}]'}")
    known(info).used.add((table, name))
    if entries[name] is None:
        raise Unusable(name)
    return entries[name]


def bare_key(name: str) -> str:
    """Return a name as a TOML key, quoted where it must be."""
    return name if re.fullmatch(r"[A-Za-z0-9_-]+", name) else f'"{name}"'


MOST_LENGTH = 1e8
"""Metres: over any coordinate of any survey grid, and where doubles still tell a tenth of a micrometre apart."""
LEAST_LENGTH = 1e-9
"""Metres: of a size, under any that is made."""
_BEYOND = 1e15
"""In SI. No quantity of anything built is over this, nor one that must be over nought under its inverse: a unit slipped
there, and figures worked out from it would leave what a double holds."""


@dataclass(frozen=True)
class Limits:
    """Bounds of a quantity in SI, with the words that an error line says them in."""

    above: float = -math.inf
    least: float = -math.inf
    below: float = math.inf
    most: float = math.inf
    words: str = ""
    tiny: float = 1.0 / _BEYOND  # of what must be over nought: under this a unit slipped

    def check(self, value: float, raw: object) -> float:
        """Return the value.

        Raises
        ------
        ValueError
            If it is out of bounds; the text gives the value as read and the bounds.
        """
        if abs(value) > _BEYOND or (self.above == 0.0 and 0.0 < value < self.tiny):
            raise ValueError(f"{say(raw)} is beyond all that is built; look to its unit, or give a likely value")
        if self.above < value < self.below and self.least <= value <= self.most:
            return value
        raise ValueError(f"{say(raw)} is out of range; give {self.words}")


NO_LIMITS = Limits()
POSITIVE = Limits(above=0.0, words="more than 0")
NOT_NEGATIVE = Limits(least=0.0, words="0 or more")


def _bare(parse: Callable[[Any], float], limits: Limits) -> BeforeValidator:
    return BeforeValidator(lambda raw: limits.check(parse(raw), raw))


def _metres(raw: Any, unit: str) -> float:  # noqa: ANN401 - as the file has it
    metres = units.length(raw, unit)
    if abs(metres) > MOST_LENGTH:
        raise ValueError(f"{say(raw)} is over {MOST_LENGTH / 1e3:g} km; look to its unit, or give a likely length")
    return metres


def _length(limits: Limits) -> BeforeValidator:
    def read(raw: Any, info: ValidationInfo) -> float:  # noqa: ANN401
        return limits.check(_metres(raw, known(info).unit), raw)

    return BeforeValidator(read)


def _elevation(raw: Any, info: ValidationInfo) -> float:  # noqa: ANN401
    context = known(info)
    return _metres(raw, context.unit) - context.origin[2]


def _point(raw: Any, info: ValidationInfo) -> Point:  # noqa: ANN401
    context = known(info)
    if not isinstance(raw, list | tuple) or len(raw) != 3:
        raise ValueError(f"{say(raw)} is no point; give [x, y, z]")
    x, y, z = (_metres(value, context.unit) - o for value, o in zip(raw, context.origin, strict=True))
    return (x, y, z)


Length = Annotated[float, _length(NO_LIMITS)]
Size = Annotated[float, _length(replace(POSITIVE, tiny=LEAST_LENGTH))]
Reach = Annotated[float, _length(NOT_NEGATIVE)]
FINEST = Limits(least=1e-6, words="0.001 mm or more")
"""Of drawn curves: a tenth of that is no file's business, and points and facets grow without bound towards nought."""
Within = Annotated[float, _length(FINEST)]
Elevation = Annotated[float, BeforeValidator(_elevation)]
PointField = Annotated[Point, BeforeValidator(_point)]
Force = Annotated[float, _bare(units.force, NO_LIMITS)]
PositiveForce = Annotated[float, _bare(units.force, POSITIVE)]
Mass = Annotated[float, _bare(units.mass, NOT_NEGATIVE)]
MassPerLength = Annotated[float, _bare(units.mass_per_length, POSITIVE)]
Area = Annotated[float, _bare(units.area, POSITIVE)]
Modulus = Annotated[float, _bare(units.modulus, POSITIVE)]
Pressure = Annotated[float, _bare(units.modulus, NOT_NEGATIVE)]
ForcePerLength = Annotated[float, _bare(units.force_density, POSITIVE)]
ForcePerArea = Annotated[float, _bare(units.force_per_area, NOT_NEGATIVE)]
Density = Annotated[float, _bare(units.density, POSITIVE)]
Expansion = Annotated[
    float, _bare(units.expansion, Limits(least=-1e-3, most=1e-3, words="a share per kelvin, like 12e-6 of steel"))
]
Temperature = Annotated[
    float, _bare(units.temperature, Limits(above=-273.15, most=2000.0, words="degrees Celsius over -273.15"))
]
Angle = Annotated[float, _bare(units.angle, NO_LIMITS)]
Ratio = Annotated[float, _bare(units.ratio, NOT_NEGATIVE)]
Share = Annotated[float, _bare(units.ratio, Limits(least=0.0, most=10.0, words="0 or more and at most 10, like 0.05"))]


def _whole(limits: Limits) -> BeforeValidator:
    def read(raw: Any) -> int:  # noqa: ANN401
        if isinstance(raw, bool) or not isinstance(raw, int):
            raise ValueError(f"{say(raw)} is no whole number; give {limits.words}")
        return int(limits.check(raw, raw))

    return BeforeValidator(read)


Copies = Annotated[int, _whole(Limits(least=1, most=100_000, words="a whole number from 1 to 100000"))]
TurnCount = Annotated[int, _whole(Limits(least=0, most=100, words="a whole number of quarter turns, 0 or more"))]
Count = Annotated[int, _whole(Limits(least=1, most=1_000_000, words="a whole number from 1 to 1000000"))]

_MARK = re.compile(r"[\w .+-]{1,40}", re.ASCII)


def mark(raw: Any) -> str:  # noqa: ANN401
    """Return a mark that is safe in a file name, a layer, a block and a cell.

    Raises
    ------
    ValueError
        If it is no text, too long, or has other characters than a mark may have.
    """
    if not isinstance(raw, str):
        raise ValueError(f'{say(raw)} is no text; give a mark in quotes, like "S1"')
    if not _MARK.fullmatch(raw) or not re.search(r"[A-Za-z0-9]", raw) or raw != raw.strip():
        raise ValueError(
            f"{say(raw)} is no mark; use letters, digits, space and . _ + - (at most 40, no space at an end)"
        )
    return raw


Mark = Annotated[str, BeforeValidator(mark)]


def one_line(raw: Any) -> str:  # noqa: ANN401
    """Return a text on one line, of characters that every file can hold.

    Raises
    ------
    ValueError
        If it is no text, or holds a control character or one that is none at all: XML has no way of writing those.
    """
    if not isinstance(raw, str):
        raise ValueError(f"{say(raw)} is no text; put it in quotes")
    line = " ".join(raw.split())
    odd = next((c for c in line if unicodedata.category(c) == "Cc" or c in "\ufffe\uffff"), None)
    if odd is not None:
        raise ValueError(f"{say(raw)} holds the character U+{ord(odd):04X}, which cannot be printed; remove it")
    return line


Text = Annotated[str, BeforeValidator(one_line)]


def _flag(raw: Any) -> bool:  # noqa: ANN401
    if not isinstance(raw, bool):
        raise ValueError(f"{say(raw)} is neither true nor false; give one of them, without quotes")
    return raw


Flag = Annotated[bool, BeforeValidator(_flag)]


def choice(*words: str) -> BeforeValidator:
    """Return the validator of a key that takes one of a few words."""

    def read(raw: Any) -> str:  # noqa: ANN401
        if isinstance(raw, str) and raw in words:
            return raw
        listed = ", ".join(f'"{word}"' for word in words)
        hint = near(raw, words) if isinstance(raw, str) else ""
        raise ValueError(f"{say(raw)} is not known here{hint}; give one of {listed}")

    return BeforeValidator(read)


class Section(BaseModel):
    """A table of a design file. Unknown keys are refused; what is read is frozen."""

    model_config = ConfigDict(frozen=True, extra="forbid", arbitrary_types_allowed=True, strict=False)

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = ()
    """Groups of keys of which exactly one is given."""
    at_most_one_of: ClassVar[tuple[tuple[str, ...], ...]] = ()
    """Groups of keys of which one or none is given."""
    later: ClassVar[frozenset[str]] = frozenset()
    """Keys of the design file's full vocabulary that this version does not solve yet: refused by name."""

    @classmethod
    def keys(cls) -> tuple[str, ...]:
        """Return the keys as a user writes them."""
        return tuple(entry.alias or name for name, entry in cls.model_fields.items())


class Feature(Section):
    """What every piece has: its mark, and how many of it are made."""

    mark: Mark = Field(description='its mark, each once, like "S1"')
    copies: Copies = Field(1, description="how many of it are made")
