"""Why a member cannot be made over saddles: one reason, with the key to change and what would be right."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from geom.fields import MOST_LENGTH
from geom.hang.asked import STRONGEST_WIRE
from geom.hang.refusals import AT_ONE_POINT, LEAST_SLACK, MOST_LINKS
from geom.hang.sliding import BY_LENGTH, Slid, Sliding, fewest, made, slackest, wished
from geom.hang.stretched import Stretched
from geom.registry import Fault, Refusal, refuse
from geom.setting.options import Setting
from geom.units import STANDARD_GRAVITY


def slide(asked: Sliding, setting: Setting) -> Slid | Refusal:
    """Return a member over saddles as made, or the first reason why it cannot be."""
    wrong = next(_before(asked, setting), None)
    if wrong is not None:
        return wrong
    pin = wished(asked, setting)
    wrong = next(_of_wish(asked, pin, setting), None)
    if wrong is not None:
        return wrong
    slid = made(asked, pin, setting)
    return next(_of_made(slid, setting), slid)


def _before(asked: Sliding, setting: Setting) -> Iterator[Refusal]:
    """Reasons that need nothing solved."""
    say, fact, value = setting.stated, asked.fact, asked.value
    close = np.flatnonzero(asked.spans < AT_ONE_POINT)
    if close.size:
        text = "stands on one plumb line with the support before it; a member slides over supports apart on plan"
        yield Refusal((Fault(("supports", int(close[0]) + 1), text),))
    if fact == "counterweight" and (asked.fit_to.takes or asked.fit_to.mass or asked.fit_to.grip):
        text = "holds nothing at a last support that the member passes over; count it in the counterweight"
        yield refuse("fittings", f"`to` {text}, and leave it out")
    if fact == "links" and not asked.stock.counted:
        yield refuse("links", f"stock {asked.stock.name} is a {asked.stock.kind} and has no links; give length")
    if fact == "links" and asked.parity != "any" and value % 2 != (1 if asked.parity == "odd" else 0):
        text = f"{value:g} is not {asked.parity}, as `parity` asks"
        yield refuse("links", f"{text}; give {value - 1:g} or {value + 1:g}, or leave parity out")
    if fact == "length" and (asked.stock.counted or asked.stock.EA is None) and not value > asked.chords:
        text = f"{say(value)} is not longer than the {say(asked.chords)} from support to support"
        yield refuse("length", f"{text}; give more than {say(asked.chords)}")
    if fact == "slack" and not value > 1.0:
        text = f"{value:g} times the {say(asked.chords)} from support to support does not reach"
        yield refuse("slack", f"{text}; give more than 1")
    if fact == "lowest" and not value < asked.points[:, 2].min():
        text = f"{say(value)} is not under the lowest support at {say(float(asked.points[:, 2].min()))}"
        yield refuse("lowest", f"{text}; give less than that")


def _of_wish(asked: Sliding, pin: float, setting: Setting) -> Iterator[Refusal]:
    """Reasons that the wished length shows: none at all, or more than rests."""
    if math.isnan(pin) or asked.fact in BY_LENGTH:
        slack = slackest(asked, setting)
        most = float(slack.length.sum()) / asked.growth(setting.temperatures[1], setting)
        if not pin < most:
            text = "leaves no rest on the saddles: the member would run into one bay, such as bay"
            limit = _limit(asked, slack, most, setting)
            yield refuse(asked.fact, f"{text} {int(np.argmax(slack.sag)) + 1}; give {limit}")
    if not pin <= MOST_LENGTH:
        yield refuse(asked.fact, f"makes the member longer than {setting.stated(MOST_LENGTH)}, over any measure")
    if asked.fact != "links" and asked.stock.counted:
        links = (pin - asked.takes) / (asked.stock.pitch or math.nan)
        if links * asked.copies > MOST_LINKS:
            key = "copies" if links <= MOST_LINKS else asked.fact
            yield refuse(key, f"comes to {links * asked.copies:.0f} links, and {MOST_LINKS} are the most; give fewer")
    if pin - asked.takes + asked.grips < setting.shop.step:
        text = f"take {setting.stated(asked.takes)}, which leaves no {asked.stock.kind} to cut"
        yield refuse("fittings", f"{text}; give shorter fittings")


def _limit(asked: Sliding, slack: Stretched, most: float, setting: Setting) -> str:
    """Say what of a fact would rest."""
    say = setting.stated
    match asked.fact:
        case "length":
            return f"less than {say(most)}"
        case "slack":
            return f"less than {math.floor(1e4 * most / asked.chords) / 1e4:g}"
        case "links":
            return f"at most {math.floor((most - asked.takes) / (asked.stock.pitch or math.nan))}"
        case "sag":
            return f"at most {say(float(slack.sag.max()))}"
        case "lowest":
            return f"at least {say(float((slack.lowest + asked.points[:-1, 2]).min()))}"
        case "pull":
            return f"at least {math.ceil(1e3 * float(slack.horizontal[0])) / 1e3:g} N"
    least = float(slack.pulls.at_to[-1]) / STANDARD_GRAVITY
    return f"at least {math.ceil(1e3 * least) / 1e3:g} kg"


def _of_made(slid: Slid, setting: Setting) -> Iterator[Refusal]:
    """Reasons of what can be made: whole links that do not reach, or a member too taut."""
    asked, hung, say = slid.asked, slid.hung, setting.stated
    hangs = bool(np.isfinite(hung.sag).all())
    slack = bool((hung.excess > LEAST_SLACK * hung.chord).all())
    if hangs and (slack or float(np.maximum(hung.pulls.at_from, hung.pulls.at_to).max()) <= _strength(asked)):
        return
    if asked.stock.counted:
        shown = f"{slid.count} links come to {say(slid.pin)}, which does not rest over the {say(asked.chords)}"
        least = fewest(asked, setting)
        key = "links" if asked.fact == "links" else "round" if asked.rounding != "nearest" else asked.fact
        yield refuse(key, f"{shown} from support to support; give a member of {least} links or a few more")
    text = f"leaves the member too taut over {say(asked.chords)} to be made"
    yield refuse(asked.fact, f"{text}; give a slacker one")


def _strength(asked: Sliding) -> float:
    """Pull that rope or rod may be stretched by to reach, N."""
    stock = asked.stock
    if stock.counted or stock.EA is None:
        return 0.0
    return stock.breaking_load or STRONGEST_WIRE * (stock.area or math.inf)
