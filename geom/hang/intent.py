"""From what a user wants of a hanging member to what can be made: the wished curve, whole links, the curve again.

Arrays of members in, arrays out: all hangings of a design are one call. A member is asked for by one fact. Facts by
length mean what is made, pin to pin, before stretch and at the shop's temperature; all others mean the member as it
hangs, stretched and at the site's temperature. With a chain the count of links is rounded, and the member solved again
with the length that those links make.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.hang import elastic, elastic_facts, links
from geom.hang.carried import Bare, Carried, hung_loaded
from geom.hang.carried_facts import least_end_pull as loaded_least_end_pull
from geom.hang.carried_facts import length_of
from geom.hang.formulas import chord
from geom.hang.held import Held, of_loaded, of_stretched
from geom.hang.loaded import Loaded
from geom.hang.lying import Lying, lying, of_lying
from geom.hang.stretched import Stretched

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Flags = NDArray[np.bool_]
FactName = Literal[
    "length", "links", "slack", "sag", "sag_mid", "lowest", "pull", "end_pull", "through", "slope_from", "slope_to"
]
FACTS: tuple[FactName, ...] = (
    "length", "links", "slack", "sag", "sag_mid", "lowest", "pull", "end_pull", "through", "slope_from", "slope_to",
)  # fmt: skip
BY_LENGTH: tuple[FactName, ...] = ("length", "links", "slack")
"""Facts of what is made, before stretch; the others are of the member as it hangs."""


@dataclass(frozen=True, eq=False)
class Wish:
    """What is asked of n members; every array is of shape (n,).

    span, level_difference : m, the latter `to` minus `from`
    fact : which of FACTS `value` is
    value : m, m/m, N, rad or a count; of `lowest` the depth under the lower support, of `through` the elevation over
        `from`, m
    place : plan distance of the point of `through` from `from`, m
    deep : whether of the two members with one `end_pull` the deep one is meant
    weight : of a metre as cut, N/m
    stiffness : modulus times area, N; infinite for no stretch
    strength : pull that a member shorter than its chord may be stretched by to reach, N; 0 of chain
    expansion : 1/K
    growth : length at the site as hung over that at the shop's temperature
    takes : length of the fittings at both ends together, m
    pitch : m; NaN of rope and rod
    parity, rounding : as links.count reads them
    floor : height of a floor over `from`, m; NaN for none
    carried : what they carry
    """

    span: Floats
    level_difference: Floats
    fact: NDArray[np.str_]
    value: Floats
    place: Floats
    deep: Flags
    weight: Floats
    stiffness: Floats
    strength: Floats
    expansion: Floats
    growth: Floats
    takes: Floats
    pitch: Floats
    parity: NDArray[np.str_]
    rounding: NDArray[np.str_]
    floor: Floats
    carried: Carried

    @property
    def bare(self) -> Bare:
        """The members as the solver of loads takes them, as hung."""
        return Bare(self.span, self.level_difference, self.weight, self.stiffness, self.growth)

    @property
    def rows(self) -> NDArray[np.intp]:
        """Numbers of the members that carry something."""
        return np.flatnonzero(self.carried.any)

    @property
    def chord(self) -> Floats:
        """Straight distance between the supports, m."""
        return chord(self.span, self.level_difference)


@dataclass(frozen=True, eq=False)
class Lengths:
    """Lengths pin to pin as made, unstretched and at the shop's temperature, m, and what they are beyond the chord."""

    pin: Floats
    excess: Floats


@dataclass(frozen=True, eq=False)
class Made:
    """What can be made of n wishes. NaN in a curve's fields where there is none.

    wished, made : as hung without loads, of the fact as given, and of whole links (of rope and rod the wished one)
    wished_lengths, lengths : what those are as made
    rows, loaded : numbers of the members that carry something, and those as hung under it
    count : (n,) links, 0 where the stock has none
    least : (n,) the fewest links (of the parity asked for) that reach from support to support
    """

    wished: Stretched
    made: Stretched
    wished_lengths: Lengths
    lengths: Lengths
    count: Ints
    least: Ints
    loaded: Loaded

    rows: NDArray[np.intp]
    floor: Floats

    @cached_property
    def lies(self) -> Lying:
        """Those that lie on a floor as hung."""
        return lying(self.made, self.floor)

    @cached_property
    def held(self) -> Held:
        """All members as hung, under what they carry."""
        plain = of_stretched(self.made)
        plain = plain.with_rows(self.rows, of_loaded(self.loaded)) if self.rows.size else plain
        return plain.with_rows(self.lies.rows, of_lying(self.lies)) if self.lies.rows.size else plain


def hung(wish: Wish, lengths: Lengths, *, growth: Floats | None = None, closer: Floats | float = 0.0) -> Stretched:
    """Return members of given lengths as they hang.

    Parameters
    ----------
    wish : Wish
        The members.
    lengths : Lengths
        As made; of shape (n,) or (n, k).
    growth : ndarray, optional
        Length over that at the shop's temperature; that of the site as hung where it is left out.
    closer : ndarray or float
        How much nearer their supports have come on plan, m.
    """
    grown = wish.growth if growth is None else growth
    span, level = wish.span - closer, wish.level_difference
    reach = chord(np.maximum(span, 0.0), level)
    with np.errstate(all="ignore"):
        come = np.where(reach > 0.0, (wish.span + span) * closer / (wish.chord + reach), wish.chord)
    fields = [span, level, wish.weight / grown, wish.stiffness, grown, come]
    if lengths.pin.ndim > span.ndim:
        fields = [field[:, np.newaxis] for field in fields]
    s, v, weight, stiffness, grow, nearer = fields
    excess = lengths.excess + (grow - 1.0) * lengths.pin + nearer
    return elastic.from_unstretched(s, v, lengths.pin * grow, weight, stiffness, excess=excess)


def of_pins(wish: Wish, pin: Floats) -> Lengths:
    """Return lengths pin to pin with what they are beyond the chord; `pin` of shape (n,) or (n, k)."""
    reach = wish.chord if pin.ndim == 1 else wish.chord[:, np.newaxis]
    return Lengths(pin, pin - reach)


def made(wish: Wish) -> Made:
    """Return what can be made of each wish."""
    wished = _wished_lengths(wish)
    as_wished = hung(wish, wished)
    chain = np.isfinite(wish.pitch)
    count = np.zeros(wish.span.shape, dtype=np.int64)
    least = np.zeros(wish.span.shape, dtype=np.int64)
    can = chain & np.isfinite(wished.pin)
    rows = wish.rows
    if not can.any():
        return Made(as_wished, as_wished, wished, wished, count, least, under(wish, rows, wished), rows, wish.floor)
    pitch, takes, parity = wish.pitch[can], wish.takes[can], wish.parity[can]
    least[can] = _least(wish.chord[can] / wish.growth[can] - takes, pitch, parity)
    wanted = links.count(wished.pin[can] - takes, pitch, rounding=wish.rounding[can], parity=parity)
    given = wish.fact[can] == "links"
    wanted = np.where(given, np.rint(wish.value[can]).astype(np.int64), wanted)
    nearest = (wish.rounding[can] == "nearest") & ~given
    count[can] = np.where(nearest, np.maximum(wanted, least[can]), wanted)
    pin, excess = np.array(wished.pin), np.array(wished.excess)
    pin[can] = count[can] * pitch + takes
    excess[can] = pin[can] - wish.chord[can]
    lengths = Lengths(pin, excess)
    return Made(
        as_wished, hung(wish, lengths), wished, lengths, count, least, under(wish, rows, lengths), rows, wish.floor
    )


def under(wish: Wish, rows: NDArray[np.intp], lengths: Lengths) -> Loaded:
    """Return some members of given lengths as hung, under what they carry."""
    return hung_loaded(wish.bare.of(rows), wish.carried.of(rows), lengths.pin[rows])


def _wished_lengths(wish: Wish) -> Lengths:
    """Return the lengths that the facts ask for, each fact solved in one call over its members."""
    pin, excess = np.full(wish.span.shape, np.nan), np.full(wish.span.shape, np.nan)
    for fact in FACTS:
        chosen = wish.fact == fact
        if chosen.any():
            found = _by_length(fact, wish, chosen) if fact in BY_LENGTH else _by_hang(fact, wish, chosen)
            pin[chosen], excess[chosen] = found.pin, found.excess
    return Lengths(pin, excess)


def _by_length(fact: FactName, wish: Wish, chosen: Flags) -> Lengths:
    value, reach = wish.value[chosen], wish.chord[chosen]
    if fact == "slack":
        return Lengths(value * reach, (value - 1.0) * reach)
    pin = value * wish.pitch[chosen] + wish.takes[chosen] if fact == "links" else value
    return Lengths(pin, pin - reach)


def _by_hang(fact: FactName, wish: Wish, chosen: Flags) -> Lengths:
    """Cool the hung member down to the shop's temperature and unload it."""
    growth, carries = wish.growth[chosen], wish.carried.any[chosen]
    hang = _of_fact(fact, wish, chosen)
    pin = hang.length / growth
    excess = hang.excess - (growth - 1.0) * pin
    if carries.any():
        rows = np.flatnonzero(chosen)[carries]
        length = length_of(
            fact, wish.bare.of(rows), wish.carried.of(rows), wish.value[rows], place=wish.place[rows],
            deep=wish.deep[rows],
        )  # fmt: skip
        pin[carries] = length / growth[carries]
        excess[carries] = pin[carries] - wish.chord[rows]
    return Lengths(pin, excess)


def _of_fact(fact: FactName, wish: Wish, chosen: Flags) -> Stretched:
    span, level, value = wish.span[chosen], wish.level_difference[chosen], wish.value[chosen]
    member = span, level, value, wish.weight[chosen] / wish.growth[chosen], wish.stiffness[chosen]
    match fact:
        case "sag":
            return elastic_facts.from_sag(*member)
        case "sag_mid":
            return elastic_facts.from_sag_mid(*member)
        case "lowest":
            return elastic_facts.from_lowest(*member)
        case "end_pull":
            return elastic_facts.from_end_pull(*member, deep=wish.deep[chosen])
        case "through":
            return elastic_facts.from_point(span, level, (wish.place[chosen], value), *member[3:])
        case "slope_from" | "slope_to":
            return elastic_facts.from_slope(*member, at_to=fact == "slope_to")
    return elastic_facts.from_pull(*member)


def least_end_pull(wish: Wish, number: int) -> float:
    """Return the least pull that a member can have on the support that bears more, N."""
    row = np.array([number])
    bare, carried = wish.bare.of(row), wish.carried.of(row)
    if carried.any[0]:
        return float(loaded_least_end_pull(bare, carried)[0])
    return float(elastic_facts.least_end_pull(bare.span, bare.rise, bare.weight / bare.growth, bare.stiffness)[0])


def _least(reach: Floats, pitch: Floats, parity: NDArray[np.str_]) -> Ints:
    """Fewest links, of the parity asked for, longer than `reach` together: just as long would pull without end."""
    least = np.maximum(np.floor(reach / pitch).astype(np.int64) + 1, 1)
    odd = least % 2 == 1
    more: Ints = (((parity == "odd") & ~odd) + ((parity == "even") & odd)).astype(np.int64)
    return least + more


def neighbours(wish: Wish, count: Ints) -> tuple[Ints, Floats, Floats, Floats]:
    """Return the two counts on each side of each count, (n, 4), with sag, lowest point over `from` and pull of each.

    NaN where they cannot reach.
    """
    beside = links.neighbours(count)
    length = beside * wish.pitch[:, None] + wish.takes[:, None]
    reaches = (beside > 0) & (length * wish.growth[:, None] > wish.chord[:, None])
    pins = np.where(reaches, length, np.nan)
    hang = hung(wish, of_pins(wish, pins))
    sag, lowest, pull = (np.array(values) for values in (hang.sag, hang.lowest, hang.horizontal))
    rows = wish.rows
    for place in range(pins.shape[1] if rows.size else 0):
        part = under(wish, rows, of_pins(wish, pins[:, place]))
        sag[rows, place], lowest[rows, place], pull[rows, place] = part.sag, part.lowest, part.horizontal
    for place in range(pins.shape[1] if np.isfinite(wish.floor).any() else 0):
        lies = lying(hung(wish, of_pins(wish, pins[:, place])), wish.floor)
        held = of_lying(lies)
        sag[lies.rows, place], lowest[lies.rows, place], pull[lies.rows, place] = held.sag, held.lowest, held.horizontal
    return beside, sag, lowest, pull


def value_of(made: Made, lengths: Lengths, wish: Wish) -> Floats:
    """Return, of solved curves, the value of the fact that each was asked for, in the terms of `Wish.value`."""
    held = made.held
    values: dict[str, Floats] = {
        "length": lengths.pin, "links": lengths.pin, "sag": held.sag, "sag_mid": held.sag_mid,
        "lowest": np.minimum(0.0, wish.level_difference) - held.lowest, "pull": held.horizontal,
        "end_pull": held.end_pull, "slope_from": held.slope_from, "slope_to": held.slope_to,
    }  # fmt: skip
    found = np.full(wish.span.shape, np.nan)
    for fact in np.unique(wish.fact):
        chosen = wish.fact == fact
        if fact == "slack":
            found[chosen] = 1.0 + (lengths.excess / np.where(wish.chord > 0.0, wish.chord, np.nan))[chosen]
        elif fact == "through":
            found[chosen] = _at_place(made, wish)[chosen]
        else:
            found[chosen] = values[str(fact)][chosen]
    return found


def of_lengths(wish: Wish, made: Made, lengths: Lengths) -> Made:
    """Return the same members made of other lengths."""
    return replace(made, made=hung(wish, lengths), lengths=lengths, loaded=under(wish, made.rows, lengths))


def _at_place(made: Made, wish: Wish) -> Floats:
    """Elevations over `from` at the places of points to be passed."""
    place = np.where(np.isnan(wish.place), 0.5 * wish.span, wish.place)[:, None]
    rise = np.array(made.made.at_arc(made.made.arc_at(place)).elevation[:, 0])
    if made.rows.size:
        rise[made.rows] = made.loaded.at_plan(place[made.rows])[:, 0, 2]
    return rise
