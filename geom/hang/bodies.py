"""The solid of a member: its links or balls in place, or a tube of a rope or rod."""

from __future__ import annotations

import math

from geom.hang.asked import Asked
from geom.hang.figures import HangingFigures
from geom.hang.shape import Shape
from geom.solids import Balls, Link, Links, Places, Solid, Sweep, link_frames


def solids(member: Asked, shape: Shape, figures: HangingFigures) -> tuple[Solid, ...]:
    """Return a member's solid; none where its stock has no sizes.

    Joints stand at even steps of the hung arc, so that stretch is shared by all links alike: what that moves any of
    them by is a share of the stretch itself, micrometres.
    """
    stock = member.stock
    if figures.links is not None and stock.wire and stock.width:
        link, frames = Link(stock.wire, figures.links.pitch, stock.width), _frames(member, shape, figures)
        body = Links(frames.places, frames.turns, link)
        return (Solid(member.mark, len(frames.places) * link.volume, body),)
    if figures.links is not None and stock.diameter:
        balls = Balls(_frames(member, shape, figures).places, stock.diameter / 2)
        return (Solid(member.mark, balls.volume, balls),)
    if stock.diameter:
        radius = stock.diameter / 2
        return (Solid(member.mark, math.pi * radius**2 * shape.curve.length, Sweep(shape.curve, radius)),)
    return ()


def _frames(member: Asked, shape: Shape, figures: HangingFigures) -> Places:
    """Return where the links or balls of a member stand and how they are turned."""
    assert figures.links is not None, "of counted stock"
    grown = shape.curve.length / figures.pin_to_pin
    return link_frames(
        shape.curve,
        figures.links.count,
        figures.links.pitch * grown,
        member.fit_from.takes * grown,
        quarter=member.fit_from.turns,
    )
