"""One hanging member as asked for, free of how it was written, and n of them as arrays."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.intent import FactName, Wish
from geom.setting.fittings import End
from geom.setting.stock import Stock
from geom.setting.supports import Support


@dataclass(frozen=True, eq=False)
class Ground:
    """Ground under a member, (m, 2): plan distance from its `from` end and elevation, m; the clearance wanted, m."""

    profile: NDArray[np.float64]
    at_least: float


@dataclass(frozen=True)
class Asked:
    """One member as asked for. `value` is in SI: m, m/m, N, a count; of `lowest` an elevation, m."""

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


def wishes(members: Sequence[Asked]) -> Wish:
    """Return n members as arrays; a lowest point becomes its depth under the lower support."""
    ends = np.array([[member.start.at, member.end.at] for member in members], dtype=np.float64).reshape(-1, 2, 3)
    step = ends[:, 1] - ends[:, 0]
    value = [member.lower - member.value if member.fact == "lowest" else member.value for member in members]
    pitch = [member.stock.pitch if member.stock.counted else np.nan for member in members]
    return Wish(
        span=np.hypot(step[:, 0], step[:, 1]),
        level_difference=step[:, 2],
        fact=np.array([member.fact for member in members], dtype=np.str_),
        value=np.array(value, dtype=np.float64),
        weight=np.array([member.stock.weight for member in members]),
        takes=np.array([member.takes for member in members]),
        pitch=np.array(pitch, dtype=np.float64),
        parity=np.array([member.parity for member in members], dtype=np.str_),
        rounding=np.array([member.rounding for member in members], dtype=np.str_),
    )
