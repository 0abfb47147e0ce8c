"""From what a user wants of a hanging member to what can be made: the wished curve, whole links, the curve again.

Arrays of members in, arrays out: all hangings of a design are one call. A member is asked for by one fact; with a chain
the count of links is rounded, and the member solved again with the length that those links make.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.hang import catenary, links
from geom.hang.catenary import Hang

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
FactName = Literal["length", "links", "slack", "sag", "lowest", "pull"]
FACTS: tuple[FactName, ...] = ("length", "links", "slack", "sag", "lowest", "pull")


@dataclass(frozen=True, eq=False)
class Wish:
    """What is asked of n members; every array is of shape (n,).

    span, level_difference : m, the latter `to` minus `from`
    fact : which of FACTS `value` is
    value : m, m/m, N or a count; of `lowest` the depth under the lower support, m
    weight : N/m
    takes : length of the fittings at both ends together, m
    pitch : m; NaN of rope and rod
    parity, rounding : as links.count reads them
    """

    span: Floats
    level_difference: Floats
    fact: NDArray[np.str_]
    value: Floats
    weight: Floats
    takes: Floats
    pitch: Floats
    parity: NDArray[np.str_]
    rounding: NDArray[np.str_]


@dataclass(frozen=True, eq=False)
class Made:
    """What can be made of n wishes. NaN in a curve's fields where there is none.

    wished : the curve of the fact as given
    made : the curve of whole links (of rope and rod the wished one)
    count : (n,) links, 0 where the stock has none
    least : (n,) the fewest links (of the parity asked for) that reach from support to support
    """

    wished: Hang
    made: Hang
    count: Ints
    least: Ints


def wished(wish: Wish) -> Hang:
    """Return the curves that the facts ask for, each fact solved in one call over its members."""
    excess = np.full(wish.span.shape, np.nan)
    for fact in FACTS:
        chosen = wish.fact == fact
        if chosen.any():
            excess[chosen] = _excess(fact, wish, chosen)
    return catenary.from_excess(wish.span, wish.level_difference, excess)


def _excess(fact: FactName, wish: Wish, chosen: NDArray[np.bool_]) -> Floats:
    """Length beyond the chord: the one input all facts come to, accurate however taut the member."""
    span, level, value = wish.span[chosen], wish.level_difference[chosen], wish.value[chosen]
    match fact:
        case "length":
            return catenary.from_length(span, level, value).excess
        case "links":
            length = value * wish.pitch[chosen] + wish.takes[chosen]
            return catenary.from_length(span, level, length).excess
        case "slack":
            return (value - 1.0) * np.hypot(span, level)
        case "sag":
            return catenary.from_sag(span, level, value).excess
        case "lowest":
            return catenary.from_lowest(span, level, value).excess
        case "pull":
            return catenary.from_parameter(span, level, value / wish.weight[chosen]).excess


def made(wish: Wish) -> Made:
    """Return what can be made of each wish."""
    first = wished(wish)
    chain = np.isfinite(wish.pitch)
    count = np.zeros(wish.span.shape, dtype=np.int64)
    least = np.zeros(wish.span.shape, dtype=np.int64)
    can = chain & np.isfinite(first.length)
    if not can.any():
        return Made(first, first, count, least)
    excess = np.array(first.excess)
    pitch, takes, parity = wish.pitch[can], wish.takes[can], wish.parity[can]
    reach = np.hypot(wish.span[can], wish.level_difference[can])
    least[can] = _least(reach - takes, pitch, parity)
    effective = first.length[can] - takes
    wanted = links.count(effective, pitch, rounding=wish.rounding[can], parity=parity)
    given = wish.fact[can] == "links"
    wanted = np.where(given, np.rint(wish.value[can]).astype(np.int64), wanted)
    nearest = (wish.rounding[can] == "nearest") & ~given
    count[can] = np.where(nearest, np.maximum(wanted, least[can]), wanted)
    length = count[can] * pitch + takes
    excess[can] = catenary.from_length(wish.span[can], wish.level_difference[can], length).excess
    return Made(first, catenary.from_excess(wish.span, wish.level_difference, excess), count, least)


def _least(reach: Floats, pitch: Floats, parity: NDArray[np.str_]) -> Ints:
    """Fewest links, of the parity asked for, longer than `reach` together: just as long would pull without end."""
    least = np.maximum(np.floor(reach / pitch).astype(np.int64) + 1, 1)
    odd = least % 2 == 1
    more: Ints = (((parity == "odd") & ~odd) + ((parity == "even") & odd)).astype(np.int64)
    return least + more


def neighbours(wish: Wish, count: Ints) -> tuple[Ints, Hang]:
    """Return the two counts on each side of each count, (n, 4), and their curves (NaN where they cannot reach)."""
    beside = links.neighbours(count)
    length = beside * wish.pitch[:, None] + wish.takes[:, None]
    length = np.where(beside > 0, length, np.nan)
    return beside, catenary.from_length(wish.span[:, None], wish.level_difference[:, None], length)


def value_of(fact: FactName, hang: Hang, wish: Wish) -> Floats:
    """Return a fact's value of solved curves, in the terms of `Wish.value`, shape (n,)."""
    match fact:
        case "length" | "links":
            return hang.length
        case "slack":
            return 1.0 + hang.excess / np.hypot(wish.span, wish.level_difference)
        case "sag":
            return hang.sag
        case "lowest":
            return np.minimum(0.0, wish.level_difference) - hang.lowest
        case "pull":
            return hang.parameter * wish.weight
