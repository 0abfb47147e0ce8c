"""What a user must know of a hanging member."""

from __future__ import annotations

import math
from collections.abc import Sequence

from geom.hang.asked import Asked
from geom.hang.figures import HangingFigures
from geom.result import Case, Caution
from geom.setting.options import Setting

_PRACTICE = "common practice"


def cautions(
    member: Asked, figures: HangingFigures, wished: float, setting: Setting, *, cases: Sequence[Case] | None = None
) -> tuple[Caution, ...]:
    """Return the cautions that apply to one member.

    `wished` is the length that its fact asked for, m; `cases` what it does when it stretches, None where no stretch was
    looked at.
    """
    weight = member.stock.weight * figures.pin_to_pin + sum(load.force for load in member.loads)
    weight += member.spread * figures.span
    found = [
        Caution(
            "dead load only", member.mark,
            "Pulls are of the dead load only: swinging, wind, ice, vibration, fatigue, climbing and impact are outside "
            "a static hang. A licensed engineer checks supports and fixings; local codes govern.",
            _PRACTICE,
        ),
    ]  # fmt: skip
    found += _stock(member, figures)
    found += _breaking(member, figures, cases or ())
    found += _stiff(member, setting, stretches=cases is not None)
    links = figures.links
    if setting.drawing.links == "rigid" and links is not None and not math.isnan(links.rigid_off):
        text = (
            f"Drawn as its links hang, rigid and hinged: up to {_length(links.rigid_off, setting)} from the catenary "
            "that its figures are of. Fittings are shared out among the links."
        )
        found.append(
            Caution("rigid links", member.mark, text, "moments of a link: tan(theta_k) = (V0 + (k - 1/2) W)/H")
        )
    if member.fact == "length" and figures.span and math.isnan(figures.lying):
        found.append(_given_length(member, figures, setting))
    if weight and figures.pull_horizontal > weight:
        found.append(
            Caution(
                "shallow sag", member.mark,
                f"The horizontal pull is {figures.pull_horizontal / weight:.1f} times {_what(member)}, "
                "because the sag is shallow; a little less length makes it much greater.",
                "H = w a, the catenary's own relation",
            )
        )  # fmt: skip
    found += _indicative(member, cases or (), setting)
    if member.ground is not None and figures.clearance < member.ground.at_least:
        found.append(
            Caution(
                "clearance",
                member.mark,
                f"The least clearance, {_length(figures.clearance, setting)}, is under the "
                f"{_length(member.ground.at_least, setting)} wanted.",
            )
        )
    cases = cases or ()
    lost = [case.case for case in cases if math.isnan(case.sag)]
    if lost:
        text = f"Too short to reach from support to support in the case {', '.join(lost)}: no stretch of it is known."
        found.append(Caution("does not reach", member.mark, text))
    low = [case for case in cases if case.clearance < (member.ground.at_least if member.ground else -math.inf)]
    if low and not (figures.clearance < member.ground.at_least if member.ground else True):
        worst = min(low, key=lambda case: case.clearance)
        text = (
            f"The least clearance in the case {worst.case}, {_length(worst.clearance, setting)}, is under the "
            f"{_length(member.ground.at_least if member.ground else math.nan, setting)} wanted."
        )
        found.append(Caution("clearance by case", member.mark, text))
    if out_of_reach := _out_of_reach(member, figures, wished, setting):
        found.append(out_of_reach)
    return tuple(found)


def _what(member: Asked) -> str:
    return (
        "the weight of the member and all it carries" if member.loads or member.spread else "the weight of the member"
    )


def _indicative(member: Asked, cases: Sequence[Case], setting: Setting) -> list[Caution]:
    """What is to be known of wind and of a person."""
    found = []
    if setting.site.wind:
        text = "Wind is steady, level and square to the span: gusts, vortices, ice, shelter are left out. Indicative."
        found += [Caution("wind", member.mark, text, _PRACTICE)] if any(one.case == "wind" for one in cases) else []
        if member.stock.drag is None:
            text = f"No wind acts on {member.stock.name}: it has no drag."
            found.append(Caution("no drag", member.mark, text))
    if any(one.standing == "misuse" for one in cases):
        text = "A person's weight is static, of one person, on one member at a time: a fall or a swing pulls far more."
        found.append(Caution("misuse", member.mark, text, _PRACTICE))
    return found


def _stiff(member: Asked, setting: Setting, *, stretches: bool) -> list[Caution]:
    """What is not known of how the stock gives."""
    found, stock, source = [], member.stock, "Irvine, Cable Structures, 1981, ch. 1"
    if not stretches:
        return [Caution("no stretch", member.mark, "Solved without stretch or change of temperature.", source)]
    if stock.EA is None:
        text = f"Solved without stretch: {stock.name} has no modulus. Near taut, stretch changes sag and pull."
        found.append(Caution("no stretch", member.mark, text, source))
    if stock.expansion is None and set(setting.temperatures) != {setting.shop.temperature}:
        text = (
            f"Solved without change of temperature: {stock.name} has no expansion. Near taut, it changes sag and pull."
        )
        found.append(Caution("no expansion", member.mark, text, source))
    return found


def _given_length(member: Asked, figures: HangingFigures, setting: Setting) -> Caution:
    """A length is often worked out as span plus sag, which gives a far greater sag: said wherever a length is given."""
    rule = member.value - figures.span
    chord = math.hypot(figures.span, figures.level_difference)
    if member.value <= chord:
        text = (
            f"A length of {setting.stated(member.value)} is shorter than the {setting.stated(chord)} between its "
            f"supports: it reaches by stretching alone, and pulls {figures.pull_horizontal:.4g} N level."
        )
        return Caution("stretched to reach", member.mark, text, "Irvine, Cable Structures, 1981, ch. 1")
    text = (
        f"A length of {setting.stated(member.value)} over a span of {setting.stated(figures.span)} gives a sag of "
        f"{_length(figures.sag, setting)}"
    )
    if rule > 0.0 and abs(rule - figures.sag) > 0.02 * figures.sag:
        text += f", and not the {_length(rule, setting)} by which it is longer: length is not span plus sag"
    return Caution("what the length gives", member.mark, f"{text}.", "the catenary's own relation")


def _stock(member: Asked, figures: HangingFigures) -> list[Caution]:
    """What the stock's own rows and certificates say."""
    stock = member.stock
    said = {"not for lifting": stock.scope, "stock to confirm": stock.confirm}
    found = [Caution(code, member.mark, text, stock.source) for code, text in said.items() if text]
    if not math.isnan(figures.capacity_used):
        text = (
            f"The greatest end pull is {100 * figures.capacity_used:.3g} % of the breaking load of {stock.name} that "
            "the user certifies. No factor is applied: the design factor is the engineer's. " + stock.scope
        )
        found.append(Caution("use of capacity", member.mark, text.strip(), stock.source))
    return found


def _breaking(member: Asked, figures: HangingFigures, cases: Sequence[Case]) -> list[Caution]:
    """A pull over the load at which the stock breaks, in any case looked at, certified or not."""
    stock = member.stock
    if stock.breaking_load is None:
        return []
    pulls = {"as hung": max(figures.pull_from, figures.pull_to)}
    pulls |= {case.case: max(case.pull_from, case.pull_to) for case in cases if not math.isnan(case.pull_from)}
    worst = max(pulls, key=lambda case: pulls[case])
    if not pulls[worst] > stock.breaking_load:
        return []
    text = (
        f"The greatest end pull, {pulls[worst] / 1000:.3g} kN in the case {worst}, is over the "
        f"{stock.breaking_load / 1000:.3g} kN at which {stock.name} breaks when new."
    )
    return [Caution("over the breaking load", member.mark, text, stock.source)]


def _out_of_reach(member: Asked, figures: HangingFigures, wished: float, setting: Setting) -> Caution | None:
    """What was asked is more than half a link from what could be made: parity, or the reach, stood in the way."""
    links = figures.links
    if links is None or member.fact == "links" or abs(figures.pin_to_pin - wished) <= 0.5001 * links.pitch:
        return None
    if member.rounding != "nearest" and abs(figures.pin_to_pin - wished) < links.pitch:
        return None
    beside = [f"{n.count} give {_length(n.sag, setting)}" for n in links.neighbours if abs(n.count - links.count) <= 2]
    count = f"an {member.parity} count" if member.parity in ("odd", "even") else "whole links that reach"
    return Caution(
        "out of reach", member.mark,
        f"What was asked for is out of reach with {count}: {links.count} links are made and give a sag of "
        f"{_length(figures.sag, setting)}; {', '.join(beside)}.",
        "whole links, n p between the fittings",
    )  # fmt: skip


def _length(metres: float, setting: Setting) -> str:
    return "none" if math.isnan(metres) else setting.stated(round(metres, 4))
