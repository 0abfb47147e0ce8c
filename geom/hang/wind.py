"""Members in a steady side wind, level and square to the span: how far they reach aside, and what they pull.

On a rope it presses with pressure times drag times diameter for every metre, on a chain its outside width in place of
the diameter, on a load with pressure times drag times area at the end of its hanger, which swings by itself. Gusts,
vortices and ice are outside a steady wind: what follows is indicative.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from geom.hang.carried import Carried, hung_loaded
from geom.hang.held import Place
from geom.hang.intent import Wish
from geom.hang.loaded import Loaded
from geom.result import Degrees, Metres, MetresArray, fixed

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]


@dataclass(frozen=True)
class Sway:
    """One load in the wind: the point of the member that carries it, and how it hangs there at its hanger's end."""

    mark: str
    at: MetresArray
    sway: Degrees
    aside: Metres
    underside: Metres


@dataclass(frozen=True)
class InWind:
    """What only the wind case has: the member's greatest reach aside, and its loads."""

    aside: Metres
    loads: tuple[Sway, ...]


@dataclass(frozen=True, eq=False)
class Blown:
    """m members in wind, their numbers in `rows`; angles of the hangers (m, l), rad."""

    rows: Ints
    hang: Loaded
    hanger: Floats
    sway: Floats

    def of(self, number: int, place: Place) -> InWind:
        """Return what the case adds to one member, by its number among all."""
        row = int(np.searchsorted(self.rows, number))
        local = self.hang.load_places[row]
        loads = []
        for column, name in enumerate(place.names):
            angle, reach = float(self.sway[row, column]), float(self.hanger[row, column])
            at = place.points(local[column])
            across, under = float(local[column, 1]) + reach * math.sin(angle), float(at[2]) - reach * math.cos(angle)
            loads.append(Sway(mark=name, at=fixed(at), sway=angle, aside=across, underside=under))
        return InWind(float(self._reaches[row]), tuple(loads))

    @cached_property
    def _reaches(self) -> Floats:
        return aside(self.hang)


def blown(wish: Wish, marked: Carried, pin: Floats, width: Floats, pressure: float) -> Blown:
    """Return the members that a wind presses on, or on loads of which it does.

    Parameters
    ----------
    wish, marked : Wish, Carried
        n members, as hung, and their loads at their marks.
    pin : ndarray, shape (n,)
        Their lengths as made, m.
    width : ndarray, shape (n,)
        What a metre of member as made shows the wind, times its drag coefficient, m.
    pressure : float
        Pa.
    """
    rows = np.flatnonzero((width > 0.0) | (np.nan_to_num(marked.wind_area) > 0.0).any(axis=1))
    carried = marked.of(rows)
    hang = hung_loaded(wish.bare.of(rows), carried, pin[rows], pressure=pressure, wind_width=width[rows])
    with np.errstate(all="ignore"):
        sway = np.arctan2(pressure * carried.wind_area, carried.force)
    return Blown(rows, hang, carried.hanger, sway)


def aside(hang: Loaded) -> Floats:
    """Return the greatest reach of members aside, (m,) m: at a load, or where the member runs along its span."""
    own, course = hang.sections, hang.course
    with np.errstate(all="ignore"):
        arc = np.clip(np.nan_to_num(course.before[:, :, 1] / own.load[:, :, 1]), 0.0, own.length)
    ends = np.cumsum(own.length, axis=1)
    inside = hang.at_arc(ends - own.length + arc)
    points = np.concatenate([inside[:, :, 1], course.nodes[:, :, 1]], axis=1)
    return np.asarray(np.abs(points).max(axis=1))
