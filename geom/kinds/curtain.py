"""A curtain: plumb strands from a rail down to a shaped hem, each of whole links or cut to the shop's step."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Annotated, Any, ClassVar, cast

import numpy as np
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.errors import say
from geom.fields import Copies, Elevation, PointField, Size, choice
from geom.fields import Length as Distance
from geom.hang.curtain import AskedCurtain, MadeCurtain, each_made
from geom.hang.curtain_filling import fill
from geom.hang.hem import Hem, HemShape
from geom.hang.rail import Rail, even, rail, spaced
from geom.hang.refusals import MOST_LINKS
from geom.kinds.hanging import Member
from geom.registry import Fault, Kind, Outcome, Refusal, refuse
from geom.setting.options import Setting
from geom.setting.stock.zones import Zones, by_strand

MOST_STRANDS = 100_000

HEM_SHORT = 1e-3
"""How far a hem may end before the last strand or begin after the first, m: a rail with a corner is seldom of whole
millimetres, and a hem is given in them. It goes on level there."""


def _hem(raw: Any, info: ValidationInfo) -> tuple[tuple[float, float], ...]:  # noqa: ANN401 - as the file has it
    if not isinstance(raw, list) or len(raw) < 2:
        raise ValueError(f"{say(raw)} is no hem; give at least two [distance along the rail, z]")
    for point in raw:
        if not isinstance(point, list) or len(point) != 2:
            raise ValueError(f"{say(point)} is no point of a hem; give [distance along the rail, z]")
    points = _POINTS.validate_python([tuple(point) for point in raw], context=info.context)
    if any(np.diff([distance for distance, _ in points]) <= 0.0):
        raise ValueError("its distances do not increase; give its points in order along the rail")
    return points


_POINTS: TypeAdapter[tuple[tuple[float, float], ...]] = TypeAdapter(tuple[tuple[Distance, Elevation], ...])


class Curtain(Member):
    """The table [[curtain]]."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (("strands", "spacing"),)

    stock: Zones = Field(  # type: ignore[assignment]
        description="one stock, or zones [{ of = ..., count = ... }, ...] in the order of the strands"
    )
    rail: tuple[PointField, ...] = Field(description="points of the rail, [[x, y, z], ...]")
    strands: Copies | None = Field(None, description="how many, evenly along the rail, both its ends included")
    spacing: Size | None = Field(None, description="from strand to strand along the rail, from its start")
    hem: Annotated[tuple[tuple[float, float], ...], BeforeValidator(_hem)] = Field(
        description="points of the hem, [[distance along the rail, z], ...]"
    )
    hem_shape: Annotated[str, choice("straight", "smooth", "catenary")] = Field(
        "straight", description="how the hem runs from point to point"
    )
    scallop: Size | None = Field(None, description='how deep each stretch of a "catenary" hem hangs under its two ends')
    round: Annotated[str, choice("down", "nearest", "up")] = Field("down", description='"down": never below the hem')


def solve(curtains: Sequence[Curtain], setting: Setting) -> list[Outcome]:
    """Solve the strands of all curtains of a design in one array call."""
    laid = [_laid(curtain, setting) for curtain in curtains]
    asked = [curtain for curtain in laid if isinstance(curtain, AskedCurtain)]
    made = iter(each_made(asked, setting.shop.step))
    return [
        one if isinstance(one, Refusal) else _outcome(curtain, one, next(made), setting)
        for curtain, one in zip(curtains, laid, strict=True)
    ]


def _laid(curtain: Curtain, setting: Setting) -> AskedCurtain | Refusal:
    """Return the strands of a curtain along its rail, or why there can be none."""
    faults = []
    try:
        line = rail(curtain.rail)
    except ValueError as error:
        line = rail(((0, 0, 0), (1, 0, 0)))
        faults.append(Fault(("rail",), str(error)))
    else:
        if line.plan[-1] == 0.0:
            faults.append(Fault(("rail",), "stands upright: all strands would be one; give a rail that runs on plan"))
    faults += _scallop_faults(curtain)
    faults += [] if faults else _count_faults(curtain, line, setting)
    if faults:
        return Refusal(tuple(faults))
    distance = even(line.length, curtain.strands) if curtain.strands else spaced(line.length, curtain.spacing or 1.0)
    hem = Hem(np.array(curtain.hem), cast(HemShape, curtain.hem_shape), curtain.scallop or 0.0)
    try:
        stocks = by_strand(curtain.stock, len(distance))
    except ValueError as error:
        return refuse("stock", str(error))
    return AskedCurtain(
        mark=curtain.mark,
        rail=line,
        hem=hem,
        distance=distance,
        stocks=tuple(stocks),
        fit_from=curtain.fittings.from_,
        fit_to=curtain.fittings.to,
        parity=curtain.parity,
        rounding=curtain.round,
        copies=curtain.copies,
    )


def _scallop_faults(curtain: Curtain) -> list[Fault]:
    if curtain.hem_shape == "catenary" and curtain.scallop is None:
        return [Fault(("scallop",), "is missing; give how deep each stretch of hem hangs under its two ends")]
    if curtain.hem_shape != "catenary" and curtain.scallop is not None:
        text = f'goes with a hem_shape of "catenary" and this is "{curtain.hem_shape}"; leave it out'
        return [Fault(("scallop",), text)]
    return []


def _count_faults(curtain: Curtain, line: Rail, setting: Setting) -> list[Fault]:
    if curtain.strands == 1:
        return [Fault(("strands",), "1 cannot stand at both ends of the rail; give 2 or more")]
    if curtain.spacing is not None and not curtain.spacing <= line.length * (1.0 + 1e-9):
        return [Fault(("spacing",), f"leaves one strand on a rail of {setting.stated(line.length)}; give less")]
    if curtain.spacing is not None and line.length / curtain.spacing > MOST_STRANDS:
        return [Fault(("spacing",), f"comes to over {MOST_STRANDS} strands; give more")]
    return []


def _outcome(curtain: Curtain, asked: AskedCurtain, made: MadeCurtain, setting: Setting) -> Outcome:
    faults = tuple(_faults(curtain, asked, made, setting))
    return Refusal(faults) if faults else fill(asked, made, setting)


def _faults(curtain: Curtain, asked: AskedCurtain, curtained: MadeCurtain, setting: Setting) -> Iterator[Fault]:
    """Why strands cannot be made, each reason once with how many it is of, in the order a person would mend them."""
    wanted, made, say_length = curtained.wanted, curtained.made, setting.stated
    first, last = (float(end) for end in asked.hem.points[[0, -1], 0])
    if first > asked.distance[0] + HEM_SHORT or last < asked.distance[-1] - HEM_SHORT:
        ends = f"runs from {say_length(first)} to {say_length(last)}"
        strands = (
            f"from {say_length(float(asked.distance[0]))} to {say_length(float(asked.distance[-1]))} along the rail"
        )
        yield Fault(("hem",), f"{ends}, but strands hang {strands}; give points that far")
        return
    over = wanted.drop <= 0.0
    if over.any():
        worst = int(np.argmin(wanted.drop))
        by = float(-wanted.drop[worst])
        text = f"{f'is {say_length(by)} over' if by else 'meets'} the rail at {_and_others(asked, worst, over)}"
        yield Fault(("hem",), f"{text}; give less than the rail's {say_length(float(wanted.rail[worst]))} there")
        return
    lacking = made.lacking | made.too_long
    if lacking.any():
        worst = int(np.argmin(np.where(lacking, wanted.drop, np.inf)))
        yield Fault(("hem",), _too_short(curtain, asked, curtained, worst, _and_others(asked, worst, lacking), setting))
    if int(made.count.sum()) * curtain.copies > MOST_LINKS:
        key = "strands" if curtain.strands else "spacing"
        text = f"comes to {int(made.count.sum()) * curtain.copies} links, copies included"
        yield Fault((key,), f"{text}; a design has at most {MOST_LINKS}: give fewer strands")


def _too_short(
    curtain: Curtain, asked: AskedCurtain, curtained: MadeCurtain, worst: int, where: str, setting: Setting
) -> str:
    leaves = f"leaves {setting.stated(float(curtained.wanted.drop[worst]))} at {where}"
    if not asked.stocks[worst].counted:
        step = setting.stated(setting.shop.step)
        return f"{leaves}, too little for fittings and a cut of {step}; give a lower hem there"
    least = f"a count of links that is {curtain.parity}" if curtain.parity != "any" else "one link"
    need = setting.stated(asked.takes + float(curtained.wanted.pitch[worst]) * (2 if curtain.parity == "even" else 1))
    return f"{leaves}, too little for {least}; give at least {need} under the rail"


def _and_others(asked: AskedCurtain, number: int, flags: np.ndarray) -> str:
    """Return `strand 3`, and how many others it stands for."""
    more = int(flags.sum()) - 1
    return f"strand {number + 1}" + (f" (and {more} other{'s' if more > 1 else ''})" if more else "")


KIND = Kind("curtain", Curtain, solve)
