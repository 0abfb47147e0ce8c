"""From what is asked of an arch to what is known of it: ring, thrust, blocks, ordinates."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.arch.asked import AskedArch
from geom.arch.blocks import Voussoirs, voussoirs
from geom.arch.fit import Fact, Length, Rise, Through
from geom.arch.ring import Ring, stand
from geom.arch.setting_out import Ordinates, clear_widths, ordinates, stations
from geom.arch.thrust import Thrust, stand_with_thrust, thrust

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Made:
    """One arch as solved; what was not asked for is None."""

    ring: Ring
    thrust: Thrust
    stones: Voussoirs | None
    table: Ordinates | None
    widths: Floats | None


def make(asked: AskedArch) -> Made:
    """Return an arch.

    Raises
    ------
    SolveError
        If there is none; names the key and what would be right.
    """
    ring = _ring(asked)
    wanted = asked.wanted
    return Made(
        ring=ring,
        thrust=thrust(ring, asked.unit_weight),
        stones=None if wanted.blocks is None else voussoirs(ring, wanted.blocks, joint=wanted.joint),
        table=None if wanted.step is None else ordinates(ring, stations(ring, wanted.step)),
        widths=clear_widths(ring, wanted.widths_at) if wanted.widths_at else None,
    )


def value_of(asked: AskedArch, made: Made) -> float:
    """Return what an arch has of the fact that was asked for: of `through` the elevation there."""
    face = asked.profile.face
    match asked.fact:
        case "rise":
            return made.ring.rise(face)
        case "length":
            return made.ring.length(face)
        case "thrust":
            return made.thrust.horizontal
    line = made.ring.line(face)
    return asked.start.at[2] + float(line.point(line.at_x(asked.value[0]))[1])


def _ring(asked: AskedArch) -> Ring:
    if asked.fact == "thrust":
        return stand_with_thrust(asked.span, asked.level, asked.value[0], asked.unit_weight, asked.profile)
    return stand(asked.span, asked.level, _fact(asked), asked.profile)


def _fact(asked: AskedArch) -> Fact:
    first = asked.value[0]
    if asked.fact == "through":
        return Through(first, asked.value[1] - asked.start.at[2])
    return Rise(first) if asked.fact == "rise" else Length(first)
