"""A hanging: one member of chain, rope or rod between two supports, asked for by one fact."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Annotated, ClassVar

from pydantic import BeforeValidator, Field

from geom import units
from geom.fields import (
    Count,
    Elevation,
    Feature,
    ForcePerLength,
    Limits,
    Mass,
    PointField,
    PositiveForce,
    Ratio,
    Size,
    choice,
)
from geom.hang import intent
from geom.hang.asked import Asked, Ground, wishes
from geom.hang.carried import Load
from geom.hang.filling import fill
from geom.hang.intent import FACTS
from geom.hang.refusals import refusals
from geom.registry import Fault, Kind, Outcome, Refusal
from geom.setting.fittings import Fittings
from geom.setting.ground import Clear
from geom.setting.loads import LoadEntry
from geom.setting.options import Setting
from geom.setting.stock import StockRef
from geom.setting.supports import SupportRef

LATER: frozenset[str] = frozenset()

Slope = Annotated[float, BeforeValidator(lambda raw: _SLOPE.check(units.angle(raw), raw))]
_SLOPE = Limits(above=-math.pi / 2, below=math.pi / 2, words="degrees under the horizontal, between -90 and 90")


class Member(Feature):
    """What a hanging and the layouts of hangings share: stock, how links are counted, fittings."""

    stock: StockRef = Field(description='its stock, like "DIN 763-8" or one of your own [stock.NAME]')
    parity: Annotated[str, choice("any", "odd", "even")] = Field(
        "any", description="which counts of links will do: odd has both end links the same way round"
    )
    round: Annotated[str, choice("nearest", "up", "down")] = Field(
        "nearest", description="to which whole count of links what is asked for is rounded"
    )
    fittings: Fittings = Field(
        default_factory=lambda: Fittings.model_validate({}),
        description="what stands between support and stock, { from = ..., to = ... }",
    )


class Hanging(Member):
    """The table [[hanging]]."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (FACTS,)
    later: ClassVar[frozenset[str]] = LATER

    from_: SupportRef = Field(alias="from", description="a support's name or a point [x, y, z]")
    to: SupportRef = Field(description="a support's name or a point [x, y, z]")
    length: Size | None = Field(None, description="pin to pin, fittings included, before stretch")
    links: Count | None = Field(None, description="count of links")
    slack: Ratio | None = Field(None, description="length over the distance between the supports, like 1.12")
    sag: Size | None = Field(None, description="greatest vertical distance under the chord")
    sag_mid: Size | None = Field(None, description="vertical distance under the chord at mid-span")
    lowest: Elevation | None = Field(None, description="elevation (z, upwards) of the lowest point; not a drop")
    pull: PositiveForce | None = Field(None, description="horizontal pull")
    end_pull: PositiveForce | None = Field(None, description="the greater of the two end pulls")
    branch: Annotated[str | None, choice("shallow", "deep")] = Field(
        None, description="which of the two members with this end_pull"
    )
    through: PointField | None = Field(None, description="a point [x, y, z] that it passes")
    slope_from: Slope | None = Field(None, description="degrees under the horizontal at its `from` end")
    slope_to: Slope | None = Field(None, description="degrees under the horizontal at its `to` end")
    clear: Clear | None = Field(None, description="ground under it and the clearance wanted")
    loads: tuple[LoadEntry, ...] = Field((), description="what hangs on it, [{ mark, at or at_plan, mass or force }]")
    spread: ForcePerLength | None = Field(None, description="load spread over it, per metre on plan")
    floor: Elevation | None = Field(None, description="elevation of a floor that it may lie on")
    check_load: Mass | None = Field(None, description="a person's mass, tried at its worst places: misuse")


def asked(member: Hanging) -> Asked:
    """Return a hanging as the solver takes it."""
    fact = next(name for name in FACTS if getattr(member, name) is not None)
    return Asked(
        mark=member.mark,
        start=member.from_,
        end=member.to,
        stock=member.stock,
        fact=fact,
        value=float(member.through[2] if member.through is not None else getattr(member, fact)),
        fit_from=member.fittings.from_,
        fit_to=member.fittings.to,
        parity=member.parity,
        rounding=member.round,
        copies=member.copies,
        ground=Ground(member.clear.profile, member.clear.at_least) if member.clear else None,
        through=member.through,
        branch=member.branch or "",
        loads=tuple(_load(number, load) for number, load in enumerate(member.loads)),
        spread=member.spread or 0.0,
        floor=math.nan if member.floor is None else member.floor,
        person=(member.check_load or 0.0) * units.STANDARD_GRAVITY,
    )


def _load(number: int, entry: LoadEntry) -> Load:
    return Load(
        mark=entry.mark or f"L{number + 1}",
        at=float(entry.at if entry.at is not None else entry.at_plan or 0.0),
        on_plan=entry.at is None,
        force=entry.weight,
        hanger=entry.hanger,
        wind_area=(entry.area or 0.0) * (entry.drag or 0.0),
    )


def misfits(member: Hanging) -> tuple[Fault, ...]:
    """Return what is wrong with keys that go together: a branch without its fact, an area without its drag."""
    faults = [] if member.branch is None or member.end_pull is not None else [Fault(("branch",), _ASTRAY)]
    marks: list[str] = []
    for number, load in enumerate(member.loads):
        name = (load.mark or f"L{number + 1}").casefold()
        if name in marks:
            faults.append(Fault(("loads", number, "mark"), f'"{load.mark or name}" is the mark of two loads'))
        if load.area is not None and load.drag is None:
            faults.append(Fault(("loads", number, "drag"), "is missing; give the drag coefficient of its `area`"))
        marks.append(name)
    return tuple(faults)


_ASTRAY = "goes with `end_pull` alone; leave it out"


def solve(hangings: Sequence[Hanging], setting: Setting) -> list[Outcome]:
    """Solve all hangings of a design in one array call."""
    if not hangings:
        return []
    members = [asked(hanging) for hanging in hangings]
    wish = wishes(members, setting)
    made = intent.made(wish)
    wrong = {number: misfits(hanging) for number, hanging in enumerate(hangings)}
    refused = {number: Refusal(faults) for number, faults in wrong.items() if faults}
    refused |= refusals(members, wish, made, setting)
    pieces = fill(members, wish, made, skip=refused.keys(), setting=setting)
    return [refused.get(number) or pieces[number] for number in range(len(members))]


KIND = Kind("hanging", Hanging, solve)
