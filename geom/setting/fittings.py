"""Fittings: what stands between a support and the stock, and takes length, turns and mass."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.errors import say
from geom.fields import Mass, Reach, Section, TurnCount, known, look_up


class FittingEntry(Section):
    """The table [fitting.NAME]."""

    takes: Reach = Field(
        description="what it adds to pin to pin: support point to the inside of the end link, or the rope's bearing"
    )
    turns: TurnCount = Field(0, description="quarter turns it gives the next link")
    grip: Reach = Field(0.0, description="length of rope used up in making the end, added to the cut")
    mass: Mass = Field(
        0.0,
        description="its mass, borne by its support; the member weighs its stock's weight over its whole pin to pin",
    )


@dataclass(frozen=True)
class Fitting:
    """One fitting: `takes` and `grip` in metres, `turns` in quarter turns, `mass` in kg."""

    takes: float
    turns: int = 0
    grip: float = 0.0
    mass: float = 0.0
    name: str = ""


@dataclass(frozen=True)
class End:
    """All fittings at one end of a member, added up."""

    takes: float = 0.0
    turns: int = 0
    grip: float = 0.0
    mass: float = 0.0
    names: tuple[str, ...] = ()


def end_of(fittings: Iterable[Fitting]) -> End:
    """Return the sum of the fittings at one end."""
    chosen = tuple(fittings)
    return End(
        takes=sum(f.takes for f in chosen),
        turns=sum(f.turns for f in chosen),
        grip=sum(f.grip for f in chosen),
        mass=sum(f.mass for f in chosen),
        names=tuple(f.name for f in chosen if f.name),
    )


_TAKEN: TypeAdapter[float] = TypeAdapter(Reach)


def _fitting(raw: Any, info: ValidationInfo) -> Fitting:  # noqa: ANN401 - as the file has it
    if isinstance(raw, str) and (raw in known(info).named.get("fitting", {}) or not raw[:1].isdigit()):
        entry: Fitting = look_up("fitting", raw, info)
        return entry
    if isinstance(raw, bool) or not isinstance(raw, str | int | float):
        raise ValueError(f"{say(raw)} is no fitting; give a fitting's name or the length it takes")
    return Fitting(takes=_TAKEN.validate_python(raw, context=info.context))


def _end(raw: Any, info: ValidationInfo) -> End:  # noqa: ANN401
    if isinstance(raw, End):
        return raw
    return end_of(_fitting(item, info) for item in (raw if isinstance(raw, list) else [raw]))


EndField = Annotated[End, BeforeValidator(_end)]


class Fittings(Section):
    """The key `fittings` of a member: what stands at each of its ends."""

    from_: EndField = Field(End(), alias="from", description="fittings at its `from` end")
    to: EndField = Field(End(), description="fittings at its `to` end")
