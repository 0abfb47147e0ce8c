"""Why a member cannot be made: one reason each, with the key to change and what would be right."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.fields import MOST_LENGTH
from geom.hang.asked import Asked
from geom.hang.intent import BY_LENGTH, FactName, Made, Wish, least_end_pull
from geom.hang.stretched import Stretched
from geom.registry import Fault, Refusal, refuse
from geom.setting.options import Setting

MOST_LINKS = 1_000_000
AT_ONE_POINT = 1e-6
"""Metres: supports no farther apart are at one point, and on plan on one plumb line; nobody sets them out finer."""
IN_PLANE = 1e-3
"""Metres: how far a point may be out of the plane of its member, whose points are given to the millimetre."""
LEAST_SLACK = 1e-13
"""Length beyond the chord over the chord. Under it doubles cannot tell a taut member from one that is too short, and
its pull, falling with the root of the slack, is over a million times its weight."""


_EASE: Mapping[FactName, tuple[str, str]] = {
    "length": ("a longer one", "a shorter one"), "links": ("more links", "fewer links"), "slack": ("more", "less"),
    "sag": ("more", "less"), "sag_mid": ("more", "less"), "lowest": ("a lower point", "a higher point"),
    "pull": ("less", "more"), "end_pull": ("less, or the deep branch", "less"),
    "through": ("a lower point", "a higher point"), "slope_from": ("more", "less"), "slope_to": ("more", "less"),
}  # fmt: skip
"""What to give of each fact where a member comes out too taut, and where it comes out too long."""


def refusals(members: Sequence[Asked], wish: Wish, made: Made, setting: Setting) -> dict[int, Refusal]:
    """Return the refusal of each member that cannot be made, by its number.

    Only members without a curve, or with one that no shop could make, are looked at one by one.
    """
    chord = np.hypot(wish.span, wish.level_difference)
    hangs = _hangs(made.made, wish) & _hangs(made.wished, wish)
    hangs[made.rows] = _hangs_loaded(made, wish)
    taut = ~hangs
    many = made.count > MOST_LINKS
    bare = np.array([member.stock.counted for member in members]) & (made.count < 1)
    odd = np.array([member.fact == "links" and not _has_parity(int(member.value), member.parity) for member in members])
    no_links = np.array([member.fact == "links" and not member.stock.counted for member in members])
    cut = made.lengths.pin - wish.takes + np.array([member.grips for member in members])
    nothing = ~np.isfinite(wish.pitch) & ~(cut >= setting.shop.step)
    nowhere = (chord < AT_ONE_POINT) | ~(made.wished_lengths.pin <= MOST_LENGTH)
    missed = np.array([_misses(member) or (member.fact == "end_pull" and not member.branch) for member in members])
    ends = np.where(wish.carried.on_plan, wish.span[:, np.newaxis], made.lengths.pin[:, np.newaxis])
    outside = (wish.carried.at <= 0.0) | (wish.carried.at >= ends)
    beyond = outside.any(axis=1) | (wish.carried.any & (wish.span < AT_ONE_POINT))
    person = np.array([member.person > 0.0 for member in members])
    under = np.isfinite(wish.floor) & (_under(wish) | wish.carried.any | person)
    by_hang = ~np.isin(wish.fact, BY_LENGTH)
    under[made.lies.rows] |= by_hang[made.lies.rows]
    doubtful = under | beyond | taut | many | bare | odd | no_links | nothing | nowhere | missed
    found = {}
    for number in np.flatnonzero(doubtful).tolist():
        pin, least = float(made.wished_lengths.pin[number]), int(made.least[number])
        curve = _Curve(float(chord[number]), pin, least, number, wish, number in made.lies.rows)
        found[number] = _reason(members[number], curve, setting)
    return found or _too_many(members, made)


def _under(wish: Wish) -> NDArray[np.bool_]:
    """Whether a floor is over a support."""
    return np.asarray(np.minimum(0.0, wish.level_difference) < wish.floor)


def _hangs(hang: Stretched, wish: Wish) -> NDArray[np.bool_]:
    """Whether members have a curve: longer than the chord, or stretched to reach by no more than they may be."""
    pull = np.maximum(hang.pulls.at_from, hang.pulls.at_to)
    slack = hang.excess > LEAST_SLACK * hang.chord
    curved = np.isfinite(hang.u) & (hang.u > 0.0)
    return np.asarray((curved & (slack | (pull <= wish.strength))) | (slack & (hang.span == 0.0)))


def _hangs_loaded(made: Made, wish: Wish) -> NDArray[np.bool_]:
    """Whether members that carry something have a curve; one of whole links is longer than its chord."""
    rows = made.rows
    slack = made.lengths.excess[rows] + (wish.growth[rows] - 1.0) * made.lengths.pin[rows] > 0.0
    reached = slack | (made.held.end_pull[rows] <= wish.strength[rows])
    return np.asarray(np.isfinite(made.loaded.horizontal) & reached)


def _misses(member: Asked) -> bool:
    """Whether the point it is to pass is not in the plane between its supports."""
    along, aside = member.place
    step = (member.end.at[k] - member.start.at[k] for k in range(2))
    return member.fact == "through" and not (0.0 < along < math.hypot(*step) and abs(aside) <= IN_PLANE)


def _too_many(members: Sequence[Asked], made: Made) -> dict[int, Refusal]:
    """Return the refusal of the member with which a design has too many links, and no reason for the others' absence.

    None of them is made then: that alone would take the machine's memory.
    """
    links = np.cumsum(made.count * np.array([member.copies for member in members], dtype=np.int64))
    first = int(np.searchsorted(links, MOST_LINKS, side="right"))
    if first == len(members):
        return {}
    key = "copies" if members[first].copies > 1 else members[first].fact
    text = f"comes to {links[first]} links up to here, copies included; a design has at most {MOST_LINKS}: give fewer"
    return dict.fromkeys(range(len(members)), Refusal(())) | {first: refuse(key, text)}


@dataclass(frozen=True)
class _Curve:
    """What is known of a doubtful member: its chord, the length of the wished curve (NaN: none), m, fewest links."""

    chord: float
    length: float
    least: int
    number: int
    wish: Wish
    on_floor: bool

    @property
    def least_end_pull(self) -> float:
        """The least pull that it can have on its upper support, N."""
        return least_end_pull(self.wish, self.number)

    @property
    def taut(self) -> bool:
        """Whether the wished curve is one, and not longer than the chord to be told from it."""
        return self.length - self.chord <= LEAST_SLACK * self.chord


def _has_parity(count: int, parity: str) -> bool:
    return parity == "any" or count % 2 == (1 if parity == "odd" else 0)


def _reason(member: Asked, curve: _Curve, setting: Setting) -> Refusal:
    """Return the first reason that applies, in the order in which a person would mend them."""
    return next(_reasons(member, curve, setting))


def _reasons(member: Asked, curve: _Curve, setting: Setting) -> Iterator[Refusal]:
    say, fact, value, chord = setting.stated, member.fact, member.value, curve.chord
    if chord < AT_ONE_POINT:
        yield refuse("to", f"is the same point as `from`, {_point(member, setting)}; give two different supports")
    if member.start.at[:2] == member.end.at[:2] and fact not in (*BY_LENGTH, "lowest"):
        text = "has no meaning between supports on one plumb line, where the pull is 0"
        yield refuse(fact, f"{text}; give length, links, slack or lowest")
    yield from _floor(member, setting)
    yield from _loads(member, curve, setting)
    if fact == "links":
        yield _links(member, chord, curve.least, setting)
    if fact == "length" and not value > chord:
        found = "exactly" if value == chord else "shorter than"
        text = f"{say(value)} is {found} the {say(chord)} between its supports"
        yield refuse("length", f"{text}; give more than {say(chord)}")
    if fact == "slack" and not value > 1.0:
        text = f"{value:g} times the {say(chord)} between its supports does not reach"
        yield refuse("slack", f"{text}; give more than 1")
    if fact == "lowest" and not value < member.lower:
        text = f"{say(value)} is not under the lower support at {say(member.lower)}"
        yield refuse("lowest", f"{text}; give less than that")
    yield from _as_hung(member, curve, setting)
    if curve.on_floor:
        text = f"would lie on the floor at {say(member.floor)}, which bears some of it; give length, links or slack"
        yield refuse(fact, text)
    more, less = _EASE[fact]
    if not curve.length <= MOST_LENGTH and not (fact == "pull" and value > member.stock.weight * chord):
        yield refuse(fact, f"makes the member longer than {say(MOST_LENGTH)}, over any measure; give {less}")
    if member.stock.counted and not curve.taut:
        yield _whole_links(member, curve, setting)
    if member.takes - member.grips >= chord:
        text = f"take {say(member.takes)}, which leaves no {member.stock.kind} to cut"
        yield refuse("fittings", f"{text} over {say(chord)}; give shorter fittings or a longer member")
    if chord < curve.length < setting.shop.step + member.takes - member.grips:
        text = f"leaves less to cut than the step of {say(setting.shop.step)} that lengths are rounded to"
        yield refuse(fact, f"{text}; give {more}, or a finer `step` in [shop]")
    text = f"leaves the member too taut over {say(chord)} to be made"
    yield refuse(fact, f"{text}; give {more}")


def _floor(member: Asked, setting: Setting) -> Iterator[Refusal]:
    if member.floor > member.lower:
        text = f"{setting.stated(member.floor)} is over the lower support at {setting.stated(member.lower)}; give less"
        yield refuse("floor", text)
    for key, given in (("loads", member.loads), ("spread", member.spread), ("check_load", member.person)):
        if given and not math.isnan(member.floor):
            yield refuse(key, "is not solved of a member over a floor; leave one of the two out")


def _loads(member: Asked, curve: _Curve, setting: Setting) -> Iterator[Refusal]:
    """Reasons of what it carries: places beyond its ends, or no span to carry over."""
    span = math.dist(member.start.at[:2], member.end.at[:2])
    if (member.loads or member.spread) and span < AT_ONE_POINT:
        key = "loads" if member.loads else "spread"
        yield refuse(key, "hangs on two strands on one plumb line, which are not solved under loads; leave it out")
    for number, load in enumerate(member.loads):
        end = span if load.on_plan else curve.length if curve.length <= MOST_LENGTH else curve.chord
        if load.at >= end or load.at <= 0.0:
            key = "at_plan" if load.on_plan else "at"
            text = f"{setting.stated(load.at)} is not between its supports; give more than 0 and less than"
            yield Refusal((Fault(("loads", number, key), f"{text} {setting.stated(end)}"),))


def _as_hung(member: Asked, curve: _Curve, setting: Setting) -> Iterator[Refusal]:
    """Reasons of facts that are of the member as it hangs."""
    fact, value = member.fact, member.value
    if fact == "end_pull" and not member.branch:
        text = 'is missing; two members have one end pull: give "shallow" or "deep"'
        yield refuse("branch", text)
    if fact == "end_pull" and value < curve.least_end_pull:
        least = math.ceil(curve.least_end_pull * 1e3) / 1e3
        yield refuse(fact, f"{value:.6g} N is less than any member can pull there; give at least {least:.6g} N")
    if fact in ("slope_from", "slope_to"):
        start, end = (member.start.at, member.end.at) if fact == "slope_from" else (member.end.at, member.start.at)
        straight = math.degrees(math.atan2(start[2] - end[2], math.dist(start[:2], end[:2])))
        if math.degrees(value) <= straight:
            text = f"{math.degrees(value):.6g} degrees is not steeper than the straight line to the other support"
            yield refuse(fact, f"{text}; give more than {straight:.6g} degrees and less than 90")
    if fact == "through":
        yield from _through(member, setting)


def _through(member: Asked, setting: Setting) -> Iterator[Refusal]:
    along, aside = member.place
    start, end, say = member.start.at, member.end.at, setting.stated
    span = math.dist(start[:2], end[:2])
    if abs(aside) > IN_PLANE:
        text = f"is {say(abs(aside))} out of the upright plane through its supports"
        yield refuse("through", f"{text}; give a point in it")
    if not 0.0 < along < span:
        yield refuse("through", "is not between its supports on plan; give a point that is")
    chord = start[2] + (end[2] - start[2]) * along / span
    if member.value >= chord:
        text = f"is at {say(member.value)}, not under the straight line between its supports"
        yield refuse("through", f"{text}; give less than {say(chord)} there")


def _links(member: Asked, chord: float, least: int, setting: Setting) -> Refusal:
    count = int(member.value)
    if not member.stock.counted:
        return refuse("links", f"stock {member.stock.name} is a {member.stock.kind} and has no links; give length")
    if not _has_parity(count, member.parity):
        return refuse(
            "links",
            f"{count} is not {member.parity}, as `parity` asks; give {count - 1} or {count + 1}, or leave parity out",
        )
    pitch = float(member.stock.pitch or math.nan)
    made = count * pitch + member.takes
    return refuse(
        "links",
        f"{count} links come to {setting.stated(made)} pin to pin, which does not reach the {setting.stated(chord)} "
        f"between its supports; give at least {max(least, _reaching(member, chord))}",
    )


def _reaching(member: Asked, chord: float) -> int:
    """Fewest links of the wanted parity that are longer than the chord."""
    pitch = float(member.stock.pitch or math.nan)
    least = max(1, math.floor((chord - member.takes) / pitch) + 1)
    return least if _has_parity(least, member.parity) else least + 1


def _whole_links(member: Asked, curve: _Curve, setting: Setting) -> Refusal:
    chord, pitch = curve.chord, float(member.stock.pitch or math.nan)
    reaching = max(curve.least, _reaching(member, chord))
    wanted = max(reaching, round((curve.length - member.takes) / pitch))
    if wanted > MOST_LINKS:
        text = f"takes {wanted} links, and {MOST_LINKS} are the most of a design"
        return refuse(member.fact, f"{text}; give a shorter member or a longer pitch")
    shorter = (reaching - (1 if member.parity == "any" else 2)) * pitch + member.takes
    if member.rounding == "down":
        return refuse(
            "round",
            f'"down" leaves {setting.stated(shorter)} of whole links pin to pin, which does not reach the '
            f'{setting.stated(chord)} between its supports; give "up", or a deeper hang',
        )
    return refuse(
        member.fact,
        f"cannot be made of whole links over {setting.stated(chord)}: the fittings alone take "
        f"{setting.stated(member.takes)}; give a deeper hang or other fittings",
    )


def _point(member: Asked, setting: Setting) -> str:
    return "[" + ", ".join(setting.stated(value) for value in member.start.at) + "]"
