"""What hanging members carry, as arrays, and members hung under it: point loads and load spread over the plan.

All members of a design stand in one array, those that carry nothing with no loads in their rows; what hangs under
loads is solved for the rows that are asked for, in one call (`geom.hang.loaded`).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang import loaded
from geom.hang.loaded import Loaded, Loads, Stocks

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]
Flags = NDArray[np.bool_]


@dataclass(frozen=True)
class Load:
    """One load on a member.

    mark : what it is called
    at : distance from the `from` end, m: along the member as made, or on plan
    on_plan : which of both
    force : N, downward
    hanger : how far it reaches under the member, m
    wind_area : its area times its drag coefficient, m2
    """

    mark: str
    at: float
    on_plan: bool
    force: float
    hanger: float = 0.0
    wind_area: float = 0.0


@dataclass(frozen=True, eq=False)
class Carried:
    """What n members carry, as many columns as the most loaded has; NaN where there is none.

    at : (n, l) m, along the member as made or on plan
    on_plan : (n, l)
    force, hanger, wind_area : (n, l) N, m, m2
    spread : (n,) N per metre on plan
    """

    at: Floats
    on_plan: Flags
    force: Floats
    hanger: Floats
    wind_area: Floats
    spread: Floats

    @property
    def any(self) -> Flags:
        """Which members carry anything, (n,)."""
        return np.asarray(np.isfinite(self.at).any(axis=1) | (self.spread > 0.0))

    def of(self, rows: Ints) -> Carried:
        """Return some of the members."""
        return Carried(
            self.at[rows], self.on_plan[rows], self.force[rows], self.hanger[rows], self.wind_area[rows],
            self.spread[rows],
        )  # fmt: skip

    def marked(self, arcs: Floats) -> Carried:
        """Return the same loads at places along the member as made, (n, l) m: where they are clamped."""
        return replace(self, at=arcs, on_plan=np.zeros_like(self.on_plan))

    def and_one(self, at: Floats, force: Floats) -> Carried:
        """Return the loads and one more on each member, (n,): its place along the member as made, m, and force, N."""
        none = np.zeros((len(at), 1))
        return Carried(
            np.concatenate([self.at, at[:, np.newaxis]], axis=1),
            np.concatenate([self.on_plan, none > 0.0], axis=1),
            np.concatenate([self.force, force[:, np.newaxis]], axis=1),
            np.concatenate([self.hanger, none], axis=1),
            np.concatenate([self.wind_area, none], axis=1),
            self.spread,
        )


@dataclass(frozen=True, eq=False)
class Bare:
    """Members without what they carry, at one temperature; every array of shape (n,).

    span, rise : plan distance between the supports and elevation of `to` over `from`, m
    weight : of a metre as made, N
    stiffness : N
    growth : length over that as made
    """

    span: Floats
    rise: Floats
    weight: Floats
    stiffness: Floats
    growth: Floats

    def of(self, rows: Ints) -> Bare:
        """Return some of the members."""
        return Bare(self.span[rows], self.rise[rows], self.weight[rows], self.stiffness[rows], self.growth[rows])


def carried(loads: Sequence[Sequence[Load]], spread: Sequence[float]) -> Carried:
    """Return what n members carry as arrays."""
    most = max((len(row) for row in loads), default=0)
    shape = (len(loads), most)
    at, force, hanger, area = (np.full(shape, np.nan) for _ in range(4))
    on_plan = np.zeros(shape, dtype=np.bool_)
    for number, row in enumerate(loads):
        for place, load in enumerate(row):
            at[number, place], force[number, place], on_plan[number, place] = load.at, load.force, load.on_plan
            hanger[number, place], area[number, place] = load.hanger, load.wind_area
    return Carried(at, on_plan, force, hanger, area, np.array(spread, dtype=np.float64))


def hung_loaded(
    bare: Bare, load: Carried, pin: Floats, *, pressure: float = 0.0, wind_width: Floats | float = 0.0
) -> Loaded:
    """Return members of given lengths as they hang under their loads.

    Parameters
    ----------
    bare, load : Bare, Carried
        n members and what they carry.
    pin : ndarray, shape (n,)
        Lengths as made, m; NaN: NaN throughout.
    pressure : float
        Of a side wind, Pa; with one, loads on plan must have been marked.
    wind_width : ndarray or float, shape (n,)
        What a metre of member as made shows the wind, times its drag coefficient, m.
    """
    grown = bare.growth
    stocks = Stocks(
        (pin * grown)[:, np.newaxis],
        (bare.weight / grown)[:, np.newaxis],
        bare.stiffness[:, np.newaxis],
        (pressure * wind_width / grown)[:, np.newaxis],
    )
    at = np.where(load.on_plan, load.at, load.at * grown[:, np.newaxis])
    aside = pressure * np.nan_to_num(load.wind_area)
    loads = Loads(at, np.nan_to_num(load.force), load.on_plan, aside)
    return loaded.hang(bare.span, bare.rise, stocks, loads=loads if at.shape[1] else None, spread=load.spread)


def marks(hang: Loaded, bare: Bare, load: Carried) -> Floats:
    """Return where the loads are along the members as made, (n, l) m; NaN where there is none."""
    if not load.at.shape[1]:
        return np.array(load.at)
    found = hang.load_arcs / bare.growth[:, np.newaxis]
    return np.where(load.on_plan, found, load.at)
