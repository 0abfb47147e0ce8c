"""One hanging member as asked for, free of how it was written, and n of them as arrays."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.carried import Load, carried
from geom.hang.intent import FactName, Wish
from geom.setting.fittings import End
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.setting.supports import Support

# The strongest wire of rope, N/m2: grade 2160 N/mm2 (EN 12385-4, from memory). A rope or rod shorter than its chord
# may be stretched to reach by so much, or by its breaking load where one is known; a chain is not pulled to reach.
STRONGEST_WIRE = 2.16e9


@dataclass(frozen=True, eq=False)
class Ground:
    """Ground under a member, (m, 2): plan distance from its `from` end and elevation, m; the clearance wanted, m."""

    profile: NDArray[np.float64]
    at_least: float


@dataclass(frozen=True)
class Asked:
    """One member as asked for. `value` is in SI: m, m/m, N, rad, a count; of `lowest` and `through` an elevation, m."""

    mark: str
    start: Support
    end: Support
    stock: Stock
    fact: FactName
    value: float
    fit_from: End
    fit_to: End
    parity: str = "any"
    rounding: str = "nearest"
    copies: int = 1
    ground: Ground | None = None
    through: tuple[float, float, float] | None = None
    branch: str = ""  # of `end_pull`: shallow or deep
    loads: tuple[Load, ...] = ()
    spread: float = 0.0  # N per metre on plan
    floor: float = math.nan  # elevation of a floor it may lie on, m
    person: float = 0.0  # weight of a person to be tried on it, N

    @property
    def takes(self) -> float:
        """Length of the fittings at both ends together, m."""
        return self.fit_from.takes + self.fit_to.takes

    @property
    def grips(self) -> float:
        """Rope used up in making both ends, m."""
        return self.fit_from.grip + self.fit_to.grip

    @property
    def quarter_turns(self) -> int:
        """Quarter turns of the fittings at both ends together."""
        return self.fit_from.turns + self.fit_to.turns

    @property
    def lower(self) -> float:
        """Elevation of the lower support, m."""
        return min(self.start.at[2], self.end.at[2])

    @property
    def strength(self) -> float:
        """Pull that it may be stretched by to reach over its chord, N; 0 of chain."""
        stock = self.stock
        if stock.counted or stock.EA is None:
            return 0.0
        return stock.breaking_load or STRONGEST_WIRE * (stock.area or math.inf)

    @property
    def place(self) -> tuple[float, float]:
        """Plan distance of the point it is to pass from its `from` end, along the span and aside of it, m."""
        if self.through is None:
            return math.nan, math.nan
        x, y = (self.end.at[k] - self.start.at[k] for k in range(2))
        at_x, at_y = (self.through[k] - self.start.at[k] for k in range(2))
        span = math.hypot(x, y)
        return ((x * at_x + y * at_y) / span, (x * at_y - y * at_x) / span) if span else (math.nan, math.nan)


def wishes(members: Sequence[Asked], setting: Setting) -> Wish:
    """Return n members as arrays; a lowest point becomes its depth under the lower support."""
    ends = np.array([[member.start.at, member.end.at] for member in members], dtype=np.float64).reshape(-1, 2, 3)
    step = ends[:, 1] - ends[:, 0]
    pitch = [member.stock.pitch if member.stock.counted else np.nan for member in members]
    expansion = np.array([member.stock.expansion or 0.0 for member in members])
    return Wish(
        span=np.hypot(step[:, 0], step[:, 1]),
        level_difference=step[:, 2],
        fact=np.array([member.fact for member in members], dtype=np.str_),
        value=np.array([_relative(member) for member in members], dtype=np.float64),
        place=np.array([member.place[0] for member in members], dtype=np.float64),
        deep=np.array([member.branch == "deep" for member in members]),
        weight=np.array([member.stock.weight for member in members]),
        stiffness=np.array([np.inf if member.stock.EA is None else member.stock.EA for member in members]),
        strength=np.array([member.strength for member in members]),
        expansion=expansion,
        growth=1.0 + expansion * (setting.temperatures[1] - setting.shop.temperature),
        takes=np.array([member.takes for member in members]),
        pitch=np.array(pitch, dtype=np.float64),
        parity=np.array([member.parity for member in members], dtype=np.str_),
        rounding=np.array([member.rounding for member in members], dtype=np.str_),
        floor=np.array([member.floor - member.start.at[2] for member in members]),
        carried=carried([member.loads for member in members], [member.spread for member in members]),
    )


def _relative(member: Asked) -> float:
    if member.fact == "lowest":
        return member.lower - member.value
    return member.value - member.start.at[2] if member.fact == "through" else member.value
