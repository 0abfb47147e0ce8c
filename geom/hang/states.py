"""The states a member is looked at in: coldest, as hung, hottest, and with its supports given way."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.clearance import Grounds, least_over
from geom.hang.intent import Lengths, Wish, hung
from geom.hang.stretched import Stretched
from geom.result import Case, Standing
from geom.setting.options import Setting

Floats = NDArray[np.float64]

AS_HUNG = "as hung"


@dataclass(frozen=True, eq=False)
class State:
    """n members in one case; every array is of shape (n,), `lowest` over the support `from`."""

    case: str
    standing: Standing
    temperature: float
    sag: Floats
    lowest: Floats
    clearance: Floats
    clearance_at: Floats
    horizontal: Floats
    at_from: Floats
    at_to: Floats
    down_from: Floats
    down_to: Floats

    def of(self, number: int, base: float) -> Case:
        """Return one member's case; `base` is the elevation of its support `from`, m."""
        return Case(
            case=self.case,
            standing=self.standing,
            temperature=self.temperature,
            sag=float(self.sag[number]),
            lowest=base + float(self.lowest[number]),
            clearance=float(self.clearance[number]),
            pull_horizontal=float(self.horizontal[number]),
            pull_from=float(self.at_from[number]),
            pull_to=float(self.at_to[number]),
        )


def states(wish: Wish, lengths: Lengths, made: Stretched, ground: Grounds, setting: Setting) -> tuple[State, ...]:
    """Return all members in every case, each one array call.

    Parameters
    ----------
    wish, lengths : Wish, Lengths
        The members and what is made of them.
    made : Stretched
        Those as hung, solved already.
    ground : Grounds
        Ground under them.
    setting : Setting
        Temperatures of shop and site, and how far supports give.
    """
    coldest, as_hung, hottest = setting.temperatures
    found = [
        _state("coldest", coldest, _at(wish, lengths, made, coldest, setting), ground),
        _state(AS_HUNG, as_hung, made, ground),
        _state("hottest", hottest, _at(wish, lengths, made, hottest, setting), ground),
    ]
    give = setting.site.support_give
    if give:
        nearer = hung(wish, lengths, closer=np.full(wish.span.shape, give))
        found.append(_state("supports give", as_hung, nearer, ground, moved=0.5 * give))
    return tuple(found)


def _at(wish: Wish, lengths: Lengths, made: Stretched, temperature: float, setting: Setting) -> Stretched:
    if temperature == setting.temperatures[1]:
        return made
    return hung(wish, lengths, growth=growth(wish, temperature, setting))


def growth(wish: Wish, temperature: float, setting: Setting) -> Floats:
    """Return lengths at a temperature over those at the shop's."""
    return np.asarray(1.0 + wish.expansion * (temperature - setting.shop.temperature))


def _state(case: str, temperature: float, hang: Stretched, ground: Grounds, *, moved: float = 0.0) -> State:
    gap, place = least_over(hang, ground, moved=moved)
    pulls = hang.pulls
    return State(
        case, "dead load only", temperature, hang.sag, hang.lowest, gap, place, hang.horizontal, pulls.at_from,
        pulls.at_to, pulls.vertical_from, pulls.vertical_to,
    )  # fmt: skip


def by_case(states: tuple[State, ...]) -> Mapping[str, State]:
    """Return the states by the names of their cases."""
    return {state.case: state for state in states}
