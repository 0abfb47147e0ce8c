"""The solid of a member: its links in place, or a tube of a rope or rod."""

from __future__ import annotations

import math

from geom.hang.asked import Asked
from geom.hang.figures import HangingFigures
from geom.hang.shape import Shape
from geom.solids import Link, Links, Solid, Sweep, link_frames


def solids(member: Asked, shape: Shape, figures: HangingFigures) -> tuple[Solid, ...]:
    """Return a member's solid; none where its stock has no sizes.

    Joints stand at even steps of the hung arc, so that stretch is shared by all links alike: what that moves any of
    them by is a share of the stretch itself, micrometres.
    """
    stock = member.stock
    if figures.links is not None and stock.wire and stock.width and stock.pitch:
        link = Link(stock.wire, stock.pitch, stock.width)
        grown = shape.curve.length / figures.pin_to_pin
        frames = link_frames(
            shape.curve,
            figures.links.count,
            stock.pitch * grown,
            member.fit_from.takes * grown,
            quarter=member.fit_from.turns,
        )
        body = Links(frames.places, frames.turns, link)
        return (Solid(member.mark, figures.links.count * link.volume, body),)
    if stock.diameter:
        radius = stock.diameter / 2
        return (Solid(member.mark, math.pi * radius**2 * shape.curve.length, Sweep(shape.curve, radius)),)
    return ()
