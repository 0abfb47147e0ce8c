"""A run: one member over many supports, tied at every one so that each bay hangs by itself, or sliding over saddles."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise
from typing import Annotated, Any, ClassVar

import numpy as np
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom import units
from geom.fields import (
    Copies,
    Count,
    Elevation,
    ForcePerLength,
    Mass,
    PositiveForce,
    Ratio,
    Section,
    Share,
    Size,
    choice,
)
from geom.hang.asked import Ground
from geom.hang.clearance import stretch
from geom.hang.gathering import gathered
from geom.hang.shopwork import wanted_of
from geom.hang.sliding import Sliding
from geom.hang.sliding_piece import gathered_sliding
from geom.hang.sliding_refusals import slide
from geom.kinds.hanging import Hanging, Member, asked
from geom.registry import Fault, Layout, Outcome, Path, Refusal, refuse
from geom.result import Piece
from geom.setting.fittings import End, EndField
from geom.setting.ground import Clear
from geom.setting.loads import LoadEntry
from geom.setting.options import Setting
from geom.setting.supports import Support, SupportRef


def _each(kind: Any) -> BeforeValidator:  # noqa: ANN401 - any annotated type
    """Return the validator of a fact that is one value for every bay or a list of one each."""
    one: TypeAdapter[float] = TypeAdapter(kind)

    def read(raw: Any, info: ValidationInfo) -> tuple[float, ...]:  # noqa: ANN401 - as the file has it
        values = raw if isinstance(raw, list) else [raw]
        if not values:
            raise ValueError("is an empty list; give one value, or one for each bay")
        return tuple(one.validate_python(value, context=info.context) for value in values)

    return BeforeValidator(read)


Each = tuple[float, ...]


FACTS = ("length", "links", "slack", "sag", "lowest", "pull")
"""Facts of a hanging that may be given of all bays of a run; the others are of one member's own place."""


OF_SADDLES = ("counterweight", "friction")
"""Keys that only a member over saddles has."""


class BayFittings(Section):
    """Fittings of one bay: an end left out keeps the run's."""

    from_: EndField | None = Field(None, alias="from", description="fittings at its `from` end")
    to: EndField | None = Field(None, description="fittings at its `to` end")


class Bay(Section):
    """What differs in one bay of a run."""

    at_most_one_of: ClassVar[tuple[tuple[str, ...], ...]] = (FACTS,)

    bay: Copies = Field(description="which bay, from 1")
    length: Size | None = Field(None, description="pin to pin in this bay")
    links: Count | None = Field(None, description="count of links in this bay")
    slack: Ratio | None = Field(None, description="length over the distance between its supports")
    sag: Size | None = Field(None, description="sag of this bay")
    lowest: Elevation | None = Field(None, description="elevation of its lowest point")
    pull: PositiveForce | None = Field(None, description="horizontal pull of this bay")
    parity: Annotated[str | None, choice("any", "odd", "even")] = Field(None, description="count of links wanted")
    round: Annotated[str | None, choice("nearest", "up", "down")] = Field(None, description="how links are rounded")
    fittings: BayFittings | None = Field(None, description="fittings of this bay")
    loads: tuple[LoadEntry, ...] = Field((), description="what hangs on this bay, measured from its `from` end")
    spread: ForcePerLength | None = Field(None, description="load spread over this bay, per metre on plan")
    check_load: Mass | None = Field(None, description="a person's mass, tried on this bay: misuse")


class Run(Member):
    """The table [[run]]."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = ((*FACTS, "counterweight"),)

    supports: tuple[SupportRef, ...] = Field(description="its supports in order, names or points")
    over: Annotated[str, choice("fixed", "saddle")] = Field(
        "fixed", description='"fixed": tied at every support; "saddle": slides over all but the first and the last'
    )
    friction: Share | None = Field(None, description="mu over saddles: adds the range of the end pulls")
    counterweight: Mass | None = Field(
        None, description="over saddles: a mass that hangs from the member behind its last support"
    )
    length: Annotated[Each | None, _each(Size)] = Field(
        None, description="pin to pin of each bay; over saddles of the whole member, as `links` and `slack`"
    )
    links: Annotated[Each | None, _each(Count)] = Field(None, description="count of links of each bay")
    slack: Annotated[Each | None, _each(Ratio)] = Field(None, description="length over distance, like 1.12")
    sag: Annotated[Each | None, _each(Size)] = Field(None, description="sag of each bay; over saddles of the deepest")
    lowest: Annotated[Each | None, _each(Elevation)] = Field(None, description="elevation of the lowest points")
    pull: Annotated[Each | None, _each(PositiveForce)] = Field(
        None, description="horizontal pull; over saddles of the first bay"
    )
    clear: Clear | None = Field(None, description="ground under it, measured along the run")
    loads: tuple[LoadEntry, ...] = Field((), description="what hangs on it, `at_plan` measured along the run")
    spread: ForcePerLength | None = Field(None, description="load spread over every bay, per metre on plan")
    check_load: Mass | None = Field(None, description="a person's mass, tried on one bay at a time: misuse")
    bays: tuple[Bay, ...] = Field((), description="what differs in a bay, [{ bay = 2, ... }]")

    @property
    def fact(self) -> str:
        """Which fact was given."""
        return next(name for name in (*FACTS, "counterweight") if getattr(self, name) is not None)

    @property
    def slides(self) -> bool:
        """Whether it slides over any saddle: between two supports without a counterweight there is none."""
        return self.over == "saddle" and (len(self.supports) > 2 or self.counterweight is not None)


def expand(run: Run, setting: Setting) -> list[Hanging] | Refusal:
    """Return the bays of a run as hangings."""
    count = len(run.supports) - 1
    if count < 1:
        return refuse("supports", f"has {len(run.supports)} of them; give at least two, in order")
    if run.slides:
        return _sliding_bays(run, setting)
    astray = [Fault((key,), _TIED) for key in OF_SADDLES if getattr(run, key) is not None]
    if astray:
        return Refusal(tuple(astray))
    values = getattr(run, run.fact)
    if len(values) not in (1, count):
        return refuse(run.fact, f"has {len(values)} values for {count} bays; give one, or {count}")
    wrong = _wrong_bays(run, count)
    if wrong:
        return wrong
    others = {bay.bay: bay for bay in run.bays}
    reach = plan_distances(run.supports)
    misplaced = _astray(run, reach)
    if misplaced:
        return Refusal(misplaced)
    return [_bay(run, number, values[number % len(values)], others.get(number + 1), reach) for number in range(count)]


_TIED = 'is of a member that slides over saddles; give it with `over = "saddle"`, or leave it out'
_UNSOLVED = "is not solved over saddles by this version; leave it out, or tie the run"


def _sliding_bays(run: Run, setting: Setting) -> list[Hanging] | Refusal:
    """Return the bays of a member over saddles as hangings of the lengths that they are found to have."""
    faults = [Fault((key,), _UNSOLVED) for key in ("loads", "spread") if getattr(run, key)]
    if run.bays:
        faults.append(Fault(("bays",), "is of a run tied at its supports; one member slides over all: leave it out"))
    if run.fact != "counterweight" and len(getattr(run, run.fact)) != 1:
        text = f"has {len(getattr(run, run.fact))} values for one member that slides; give one"
        faults.append(Fault((run.fact,), text))
    if faults:
        return Refusal(tuple(faults))
    slid = slide(_sliding(run), setting)
    return slid if isinstance(slid, Refusal) else _hangings(run, slid.bay_pins.tolist())


def _sliding(run: Run) -> Sliding:
    reach = plan_distances(run.supports)
    value = getattr(run, run.fact)
    clears = [_ground(run, float(start), float(end)) for start, end in pairwise(reach)]
    return Sliding(
        mark=run.mark,
        supports=run.supports,
        stock=run.stock,
        fact=run.fact,
        value=float(value if run.fact == "counterweight" else value[0]),
        fit_from=run.fittings.from_,
        fit_to=run.fittings.to,
        parity=run.parity,
        rounding=run.round,
        copies=run.copies,
        friction=run.friction,
        grounds=tuple(None if clear is None else Ground(clear.profile, clear.at_least) for clear in clears),
        person=(run.check_load or 0.0) * units.STANDARD_GRAVITY,
    )


def _hangings(run: Run, pins: Sequence[float]) -> list[Hanging]:
    """Bays of exact lengths: of a chain too, whose joints do not fall on the saddles, so that nothing is counted."""
    reach, last = plan_distances(run.supports), len(pins) - 1
    stock = replace(run.stock, kind="rope") if run.stock.counted else run.stock
    return [
        Hanging.model_construct(
            mark=f"{run.mark}.{number + 1}",
            copies=run.copies,
            from_=run.supports[number],
            to=run.supports[number + 1],
            stock=stock,
            fittings=run.fittings.model_copy(
                update=({"from_": End()} if number else {}) | ({"to": End()} if number < last else {})
            ),
            clear=_ground(run, float(reach[number]), float(reach[number + 1])),
            length=pin,
        )
        for number, pin in enumerate(pins)
    ]


def _wrong_bays(run: Run, count: int) -> Refusal | None:
    numbers = [bay.bay for bay in run.bays]
    for place, number in enumerate(numbers):
        if number > count:
            return refuse("bays", f"there is no bay {number}; the run has {count}")
        if number in numbers[:place]:
            return refuse("bays", f"bay {number} is given twice; say all that differs in it once")
    return None


def plan_distances(supports: Sequence[Support]) -> np.ndarray:
    """Return the plan distance of each support along the run, (n,) m."""
    points = np.array([support.at for support in supports])
    steps = np.hypot(*np.diff(points[:, :2], axis=0).T)
    return np.concatenate([[0.0], np.cumsum(steps)])


def _bay(run: Run, number: int, value: float, other: Bay | None, reach: np.ndarray) -> Hanging:
    fact: str = run.fact
    fits = run.fittings
    parity, rounding = run.parity, run.round
    if other is not None:
        changed = next((name for name in FACTS if getattr(other, name) is not None), None)
        if changed is not None:
            fact, value = changed, getattr(other, changed)
        parity, rounding = other.parity or parity, other.round or rounding
        if other.fittings is not None:
            fits = fits.model_copy(
                update={
                    "from_": other.fittings.from_ if other.fittings.from_ is not None else fits.from_,
                    "to": other.fittings.to if other.fittings.to is not None else fits.to,
                }
            )
    keys: dict[str, Any] = {fact: value}
    own = other if other is not None else Bay.model_construct(bay=number + 1)
    loads = (*_loads(run, float(reach[number]), float(reach[number + 1])), *own.loads)
    return Hanging.model_construct(
        mark=f"{run.mark}.{number + 1}",
        copies=run.copies,
        from_=run.supports[number],
        to=run.supports[number + 1],
        stock=run.stock,
        parity=parity,
        round=rounding,
        fittings=fits,
        loads=loads,
        spread=own.spread or run.spread,
        check_load=own.check_load or run.check_load,
        clear=_ground(run, float(reach[number]), float(reach[number + 1])),
        **keys,
    )


def _astray(run: Run, reach: np.ndarray) -> tuple[Fault, ...]:
    """What is wrong with the places of a run's own loads."""
    faults = []
    for number, load in enumerate(run.loads):
        if load.at_plan is None:
            text = "is measured along one bay; give `at_plan` along the run, or the load in its bay of `bays`"
            faults.append(Fault(("loads", number, "at"), text))
        elif load.at_plan >= reach[-1] or np.any(np.equal(load.at_plan, reach)):
            text = "is at no place between two supports of the run; give a distance along it on plan that is"
            faults.append(Fault(("loads", number, "at_plan"), text))
    return tuple(faults)


def _loads(run: Run, start: float, end: float) -> list[LoadEntry]:
    """Return the run's own loads in one bay, measured from its start, with the marks that they have in the run."""
    return [
        load.model_copy(update={"at_plan": load.at_plan - start, "mark": load.mark or f"L{number + 1}"})
        for number, load in enumerate(run.loads)
        if load.at_plan is not None and start < load.at_plan < end
    ]


def _ground(run: Run, start: float, end: float) -> Clear | None:
    if run.clear is None:
        return None
    part = stretch(run.clear.profile, start, end)
    if not len(part):
        return None
    return Clear.model_construct(above=tuple(map(tuple, part.tolist())), at_least=run.clear.at_least)


def gather(run: Run, parts: Sequence[Piece], setting: Setting) -> Outcome:
    """Make one piece of a run's solved bays."""
    if run.slides:
        slid = slide(_sliding(run), setting)
        if isinstance(slid, Refusal):
            return slid
        return gathered_sliding(slid, parts, [asked(bay) for bay in _hangings(run, slid.bay_pins.tolist())])
    values = getattr(run, run.fact)
    wanted = wanted_of(run.fact, values[0]) if len(values) == 1 else None
    return gathered(run.mark, parts, wanted, copies=run.copies)


def place(run: Run, number: int, key: Path) -> Path:
    """Return where a bay's fault is reported: at the bay's own key, at its value in a list, or at the run's key."""
    if run.slides:
        return (run.fact,) if key and key[0] in FACTS else key
    if key and key[0] in ("from", "to"):
        return ("supports", number + (1 if key[0] == "to" else 0))
    for entry, bay in enumerate(run.bays):
        if bay.bay == number + 1 and key and getattr(bay, str(key[0]), None) is not None:
            return ("bays", entry, *key)
    values = getattr(run, str(key[0]), None) if key else None
    if key and key[0] in FACTS and isinstance(values, tuple) and len(values) > 1:
        return (*key, number)
    return key


LAYOUT = Layout("run", Run, "hanging", expand, gather, part="bay", place=place)
