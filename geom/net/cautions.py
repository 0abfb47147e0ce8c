"""What a user must know of a net."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from geom.net.asked import AskedNet
from geom.net.making import Made
from geom.net.shape import NetShape
from geom.result import Caution
from geom.setting.options import Setting

_PRACTICE = "common practice"


def cautions(asked: AskedNet, shape: NetShape, made: Made, setting: Setting) -> tuple[Caution, ...]:
    """Return the cautions that apply to one net."""
    return tuple(_cautions(asked, shape, made, setting))


def _cautions(asked: AskedNet, shape: NetShape, made: Made, setting: Setting) -> Iterator[Caution]:
    yield Caution(
        "dead load only", asked.mark,
        "Pulls are of the dead load only: swinging, wind, ice, snow, vibration, fatigue, climbing and impact are "
        "outside a static hang. A licensed engineer checks supports, fixings and anything over people; local codes "
        "govern.",
        _PRACTICE,
    )  # fmt: skip
    yield Caution(
        "no stretch", asked.mark,
        "Solved without stretch or change of temperature: near taut, both change sag and pull.",
        "Irvine, Cable Structures, 1981, ch. 1",
    )  # fmt: skip
    for stock in dict.fromkeys(asked.stocks):
        if stock.scope:
            yield Caution("not for lifting", asked.mark, stock.scope, stock.source)
    weight = float(asked.weight @ shape.length)
    level = float(np.hypot(shape.reactions[:, 0], shape.reactions[:, 1]).max(initial=0.0))
    if weight and level > weight:
        yield Caution(
            "shallow sag", asked.mark,
            f"The greatest horizontal pull on a support is {level / weight:.1f} times the weight of the whole net, "
            "because it hangs shallow; a little less length makes it much greater.",
            "H = q S, Schek, The force density method, 1974",
        )  # fmt: skip
    yield from _of_links(asked, shape, made, setting)


def _of_links(asked: AskedNet, shape: NetShape, made: Made, setting: Setting) -> Iterator[Caution]:
    counted = made.count > 0
    if not counted.any():
        return
    off = float(np.abs(made.pin_to_pin - shape.length)[counted].max())
    short = int((counted & (made.pin_to_pin <= shape.chord)).sum())
    shorter = f" {short} of {len(shape.length)} come out shorter than the distance of their nodes." if short else ""
    yield Caution(
        "whole links", asked.mark,
        f"Members are made of whole links, up to {setting.stated(round(off, 4))} longer or shorter than the lengths "
        f"found.{shorter} The net is not solved again with them: nodes and pulls are those of the lengths found.",
        "whole links, n p from node to node",
    )  # fmt: skip
