"""Why a member cannot be made: one reason each, with the key to change and what would be right."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

import numpy as np

from geom.hang.asked import Asked
from geom.hang.intent import Made, Wish
from geom.registry import Refusal, refuse
from geom.setting.options import Setting

MOST_LINKS = 1_000_000
LEAST_SLACK = 1e-13
"""Length beyond the chord over the chord. Under it doubles cannot tell a taut member from one that is too short, and
its pull, falling with the root of the slack, is over a million times its weight."""


def refusals(members: Sequence[Asked], wish: Wish, made: Made, setting: Setting) -> dict[int, Refusal]:
    """Return the refusal of each member that cannot be made, by its number.

    Only members without a curve, or with one that no shop could make, are looked at one by one.
    """
    chord = np.hypot(wish.span, wish.level_difference)
    taut = ~((made.made.excess > LEAST_SLACK * chord) & (made.wished.excess > LEAST_SLACK * chord))
    many = made.count > MOST_LINKS
    bare = np.array([member.stock.counted for member in members]) & (made.count < 1)
    odd = np.array([member.fact == "links" and not _has_parity(int(member.value), member.parity) for member in members])
    no_links = np.array([member.fact == "links" and not member.stock.counted for member in members])
    cut = made.made.length - wish.takes + np.array([member.grips for member in members])
    nothing = ~np.isfinite(wish.pitch) & ~(cut >= setting.shop.step)
    doubtful = taut | many | bare | odd | no_links | nothing | ~np.isfinite(made.made.length)
    found = {}
    for number in np.flatnonzero(doubtful).tolist():
        found[number] = _reason(members[number], float(chord[number]), int(made.least[number]), setting)
    return found


def _has_parity(count: int, parity: str) -> bool:
    return parity == "any" or count % 2 == (1 if parity == "odd" else 0)


def _reason(member: Asked, chord: float, least: int, setting: Setting) -> Refusal:
    """Return the first reason that applies, in the order in which a person would mend them."""
    return next(_reasons(member, chord, least, setting))


def _reasons(member: Asked, chord: float, least: int, setting: Setting) -> Iterator[Refusal]:
    say, fact, value = setting.stated, member.fact, member.value
    if chord == 0.0:
        yield refuse("to", f"is the same point as `from`, {_point(member, setting)}; give two different supports")
    if member.start.at[:2] == member.end.at[:2] and fact in ("sag", "pull"):
        text = "has no meaning between supports on one plumb line, where the pull is 0"
        yield refuse(fact, f"{text}; give length, links, slack or lowest")
    if fact == "links":
        yield _links(member, chord, least, setting)
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
    if member.stock.counted:
        yield _whole_links(member, chord, least, setting)
    if member.takes - member.grips >= chord:
        text = f"take {say(member.takes)}, which leaves no {member.stock.kind} to cut"
        yield refuse("fittings", f"{text} over {say(chord)}; give shorter fittings or a longer member")
    text = f"leaves the member so taut over {say(chord)} that its pull has no figure"
    yield refuse(fact, f"{text}; give it more slack")


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


def _whole_links(member: Asked, chord: float, least: int, setting: Setting) -> Refusal:
    reaching = max(least, _reaching(member, chord))
    if reaching > MOST_LINKS:
        return refuse(member.fact, f"needs over {MOST_LINKS} links; give a longer pitch or a shorter member")
    pitch = float(member.stock.pitch or math.nan)
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
