"""Plumb strands from a rail to a hem: whole links or a cut to the shop's step, and what they pull.

Arrays of strands in, arrays out: the strands of all curtains of a design are one call. A strand hangs straight down, so
that its length is its drop, and its only pull is its own weight and what hangs at its end.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang import links
from geom.shop.rounding import Way, to_step

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Flags = NDArray[np.bool_]

# How far under a hem a strand rounded down may come: a count is taken for whole within 1e-9 links and a cut within
# 1e-6 steps, which is under a tenth of a micrometre for any link or step of the trade.
_SAME = 1e-7


@dataclass(frozen=True, eq=False)
class Wanted:
    """What is asked of n strands; every array is of shape (n,).

    rail, hem : elevations of the rail and of the hem under it, m
    weight : N/m
    pitch : m; NaN of rope and rod
    takes : length of the fittings at both ends together, m
    grips : rope used up in making both ends, m
    hung : weight of what is fitted at the lower end, N
    step : what cuts of rope and rod are rounded to, m
    parity, rounding : as links.count reads them
    """

    rail: Floats
    hem: Floats
    weight: Floats
    pitch: Floats
    takes: Floats
    grips: Floats
    hung: Floats
    step: Floats
    parity: NDArray[np.str_]
    rounding: NDArray[np.str_]

    @property
    def drop(self) -> Floats:
        """From the rail down to the hem, m."""
        return np.asarray(self.rail - self.hem)


@dataclass(frozen=True, eq=False)
class Made:
    """What n strands are made as; every array is of shape (n,).

    count : links, 0 of rope and rod
    material : length of the links or of the cut, m
    length : from the rail to the lower end, fittings included, m
    lowest : elevation of the lower end, m
    over_hem : of the lower end over the hem, m; negative below it
    pull : at the rail, of the strand and what is fitted at its lower end, N
    lacking : that are of no link, or of nothing to cut
    too_long : that were to end over the hem and do not, for want of a shorter count of the parity asked for
    """

    count: Ints
    material: Floats
    length: Floats
    lowest: Floats
    over_hem: Floats
    pull: Floats
    lacking: Flags
    too_long: Flags


def made(wanted: Wanted) -> Made:
    """Return what can be made of each strand.

    Raises
    ------
    ValueError
        If a rounding or parity is not known, or a pitch or step not above 0.
    """
    room = wanted.drop - wanted.takes
    counted = np.isfinite(wanted.pitch)
    count = np.zeros(room.shape, dtype=np.int64)
    count[counted] = links.count(
        room[counted], wanted.pitch[counted], rounding=wanted.rounding[counted], parity=wanted.parity[counted], least=0
    )
    material = _cuts(wanted, room)
    material[counted] = count[counted] * wanted.pitch[counted]
    length = material - np.where(counted, 0.0, wanted.grips) + wanted.takes
    return Made(
        count=count,
        material=material,
        length=length,
        lowest=wanted.rail - length,
        over_hem=wanted.drop - length,
        pull=wanted.weight * length + wanted.hung,
        lacking=~(material > 0.0),
        too_long=(wanted.rounding == "down") & (length - wanted.drop > _SAME),
    )


def _cuts(wanted: Wanted, room: Floats) -> Floats:
    """Cut lengths in whole steps, rounded so that the strand, not its cut, is rounded down or up; m."""
    cut = np.zeros(room.shape)
    length = np.maximum(room + wanted.grips, 0.0)
    ways: tuple[Way, ...] = ("nearest", "up", "down")
    for way in ways:
        for step in np.unique(wanted.step):
            chosen = (wanted.rounding == way) & (wanted.step == step)
            cut[chosen] = to_step(length[chosen], float(step), way=way)
    return cut


def neighbours(wanted: Wanted, count: Ints) -> tuple[Ints, Floats]:
    """Return the two counts on each side of each count, (n, 4), and the elevations that they end at, (n, 4) m.

    Counts under 1, and of rope and rod all, have no elevation.
    """
    beside = links.neighbours(count)
    lowest = wanted.rail[:, None] - (beside * wanted.pitch[:, None] + wanted.takes[:, None])
    return beside, np.where(beside > 0, lowest, np.nan)
