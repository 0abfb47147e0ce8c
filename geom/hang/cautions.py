"""What a user must know of a hanging member."""

from __future__ import annotations

from geom.hang.asked import Asked
from geom.hang.figures import HangingFigures
from geom.result import Caution

_PRACTICE = "common practice"


def cautions(member: Asked, figures: HangingFigures) -> tuple[Caution, ...]:
    """Return the cautions that apply to one member."""
    weight = member.stock.weight * figures.pin_to_pin
    found = [
        Caution(
            "dead load only", member.mark,
            "Pulls are of the dead load only: swinging, wind, ice, vibration, fatigue, climbing and impact are outside "
            "a static hang. A licensed engineer checks supports and fixings; local codes govern.",
            _PRACTICE,
        ),
        Caution(
            "no stretch", member.mark,
            "Solved without stretch or change of temperature: near taut, both change sag and pull.",
            "Irvine, Cable Structures, 1981, ch. 1",
        ),
    ]  # fmt: skip
    if member.stock.scope:
        found.append(Caution("not for lifting", member.mark, member.stock.scope, member.stock.source))
    if weight and figures.pull_horizontal > weight:
        found.append(
            Caution(
                "shallow sag", member.mark,
                f"The horizontal pull is {figures.pull_horizontal / weight:.1f} times the weight of the member, "
                "because the sag is shallow; a little less length makes it much greater.",
                "H = w a, the catenary's own relation",
            )
        )  # fmt: skip
    if member.ground is not None and figures.clearance < member.ground.at_least:
        found.append(
            Caution(
                "clearance",
                member.mark,
                f"The least clearance, {figures.clearance:.3f} m, is under the {member.ground.at_least:.3f} m wanted.",
            )
        )
    return tuple(found)
