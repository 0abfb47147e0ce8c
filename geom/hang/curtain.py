"""A curtain as asked for, and what comes of its strands once they are made."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields, replace
from functools import cached_property
from itertools import pairwise
from typing import Annotated, TypeVar

import numpy as np
from numpy.typing import NDArray

from geom.hang import strands
from geom.hang.figures import HangingFigures
from geom.hang.hem import Hem
from geom.hang.rail import Rail
from geom.hang.strands import Made, Wanted
from geom.result import NAN, Metres, Newtons, Unit
from geom.setting.fittings import End
from geom.setting.stock import Stock
from geom.units import STANDARD_GRAVITY

Floats = NDArray[np.float64]

Columns = TypeVar("Columns", Wanted, Made)
KilogramsPerMetre = Annotated[float, Unit("kg_per_m")]
Kilograms = Annotated[float, Unit("kg")]


@dataclass(frozen=True, eq=False)
class AskedCurtain:
    """A curtain as asked for: strands at distances (n,) along a rail, m, down to a hem. SI."""

    mark: str
    rail: Rail
    hem: Hem
    distance: Floats
    stocks: tuple[Stock, ...]  # of each strand
    fit_from: End
    fit_to: End
    parity: str = "any"
    rounding: str = "down"
    copies: int = 1

    @property
    def tops(self) -> Floats:
        """Where the strands hang from, (n, 3) m."""
        return self.rail.at(self.distance)

    @property
    def x(self) -> Floats:
        """Where the strands are in the elevation that follows the rail, (n,) m."""
        return self.rail.developed(self.distance)

    @cached_property
    def kinds(self) -> tuple[Stock, ...]:
        """Its different stocks, in the order of the strands."""
        return tuple({stock.name: stock for stock in self.stocks}.values())

    @property
    def pitch(self) -> Floats:
        """Pitch of each strand's links or balls, (n,) m; NaN of rope and rod."""
        return np.array([stock.pitch if stock.counted else NAN for stock in self.stocks], dtype=np.float64)

    @property
    def takes(self) -> float:
        """Length of the fittings at both ends together, m."""
        return self.fit_from.takes + self.fit_to.takes

    def strand(self, number: int) -> str:
        """Return the mark of a strand, its number from 0."""
        return f"{self.mark}.{number + 1}"


@dataclass(frozen=True)
class StrandFigures(HangingFigures):
    """The figures of a hanging where they mean something, and where the strand and its hem are.

    `to` is the lower end, which hangs free: its pull is that of what is fitted there.
    """

    along_rail: Metres = NAN  # from the rail's start
    hem: Metres = NAN  # elevation of the hem here
    over_hem: Metres = NAN  # lower end over the hem; negative below it


@dataclass(frozen=True)
class CurtainFigures:
    """Figures of a curtain as a whole; its strands stand beside them.

    What hangs on the rail are the strands and the fittings of both their ends; `rail_load` is the mean along the rail,
    `greatest_rail_load` where the heaviest strand hangs, null with strands that are not evenly spaced.
    """

    count: int
    links_count: int | None
    rail_length: Metres
    spacing: Metres
    pin_to_pin: Metres
    lowest: Metres
    highest_lowest: Metres
    over_hem_least: Metres
    over_hem_greatest: Metres
    mass_on_rail: Kilograms
    rail_load: KilogramsPerMetre
    greatest_rail_load: KilogramsPerMetre
    pull_on_rail: Newtons


def wanted(curtains: Sequence[AskedCurtain], step: float) -> Wanted:
    """Return the strands of several curtains as arrays, one curtain after another."""
    sizes = [len(curtain.distance) for curtain in curtains]

    def numbers(values: Sequence[float]) -> Floats:
        return np.repeat(np.array(values, dtype=np.float64), sizes)

    def words(values: Sequence[str]) -> NDArray[np.str_]:
        return np.repeat(np.array(values, dtype=np.str_), sizes)

    return Wanted(
        rail=np.concatenate([curtain.tops[:, 2] for curtain in curtains]),
        hem=np.concatenate([curtain.hem.at(curtain.distance) for curtain in curtains]),
        weight=np.array([stock.weight for curtain in curtains for stock in curtain.stocks]),
        pitch=np.concatenate([curtain.pitch for curtain in curtains]),
        takes=numbers([curtain.takes for curtain in curtains]),
        grips=numbers([curtain.fit_from.grip + curtain.fit_to.grip for curtain in curtains]),
        hung=numbers([curtain.fit_to.mass * STANDARD_GRAVITY for curtain in curtains]),
        step=numbers([step] * len(curtains)),
        parity=words([curtain.parity for curtain in curtains]),
        rounding=words([curtain.rounding for curtain in curtains]),
    )


@dataclass(frozen=True, eq=False)
class MadeCurtain:
    """One curtain's strands, asked for and made."""

    wanted: Wanted
    made: Made


def each_made(curtains: Sequence[AskedCurtain], step: float) -> list[MadeCurtain]:
    """Return the strands of each curtain as they are made, all in one array call."""
    if not curtains:
        return []
    asked = wanted(curtains, step)
    made = strands.made(asked)
    bounds = np.cumsum([0, *(len(curtain.distance) for curtain in curtains)]).tolist()
    return [
        MadeCurtain(_part(asked, slice(start, stop)), _part(made, slice(start, stop)))
        for start, stop in pairwise(bounds)
    ]


def _part(arrays: Columns, part: slice) -> Columns:
    """Return a part of columns of one length."""
    return replace(arrays, **{field.name: getattr(arrays, field.name)[part] for field in fields(arrays)})
