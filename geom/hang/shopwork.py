"""What the shop makes of a solved member: material, cut, mass, the facts under its drawing, its sources."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from geom.hang.asked import Asked
from geom.hang.figures import HangingFigures
from geom.result import NAN, Cut, Quantity, Unit, Used
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.shop.rounding import cut_length, to_step

Floats = NDArray[np.float64]

DEGREES = Unit("deg", 180.0 / np.pi)
UNITS = {
    "length": Unit("m"), "links": Unit(""), "slack": Unit(""), "sag": Unit("m"), "sag_mid": Unit("m"),
    "lowest": Unit("m"), "pull": Unit("N"), "end_pull": Unit("N"), "through": Unit("m"), "slope_from": DEGREES,
    "slope_to": DEGREES,
}  # fmt: skip
"""What each fact leaves in."""
INTENDED = {"length": "pin_to_pin"}


def wanted_of(fact: str, value: float | tuple[float, ...]) -> Quantity:
    """Return what a fact asks for, as it stands in the figures: a length is pin to pin, of a point the elevation."""
    number = value[-1] if isinstance(value, tuple) else value
    return Quantity(INTENDED.get(fact, fact), float(number), UNITS[fact])


def rounded_pins(pin: Floats, takes: Floats, grips: Floats, step: float) -> Floats:
    """Return what members of rope and rod come to pin to pin when their cuts are rounded to the shop's step, m."""
    less = takes - grips
    return to_step(pin - less, step) + less


def material(member: Asked, figures: HangingFigures, setting: Setting) -> float:
    """Return the length of material in one member, m: whole links, or a rope's cut."""
    if figures.links is not None:
        return figures.links.count * figures.links.pitch
    return float(cut_length(figures.pin_to_pin, takes=member.takes, grip=member.grips, step=setting.shop.step))


def mass(member: Asked, figures: HangingFigures, setting: Setting) -> float:
    """Return the mass of one member's material, kg, hardware and loads left out."""
    return member.stock.mass_per_metre * material(member, figures, setting)


def cut(member: Asked, figures: HangingFigures, one: float, setting: Setting) -> Cut:
    """Return a member's row of the cut list; `one` is the mass of one copy, kg."""
    return Cut(
        mark=member.mark,
        piece=member.mark,
        stock=member.stock.name,
        cut_length=material(member, figures, setting),
        pin_to_pin=figures.pin_to_pin,
        links=figures.links.count if figures.links else None,
        copies=member.copies,
        mass=one,
    )


def facts(member: Asked, figures: HangingFigures, one: float, setting: Setting) -> tuple[Quantity, ...]:
    """Return what a shop needs under the elevation."""
    first = (
        Quantity("links", float(figures.links.count))
        if figures.links
        else Quantity("cut length", material(member, figures, setting), Unit("m"))
    )
    return (
        first,
        Quantity("pin to pin", figures.pin_to_pin, Unit("m")),
        Quantity("mass", one, Unit("kg")),
        Quantity("horizontal pull", figures.pull_horizontal, Unit("N")),
        Quantity("greatest end pull", max(figures.pull_from, figures.pull_to), Unit("N")),
    )


def used(stock: Stock, *, stretches: bool = True) -> Used:
    """Return what a member of a stock was computed from."""
    if not stretches:
        return Used(source=stock.cited, weight=stock.weight)
    return Used(
        source=stock.cited,
        weight=stock.weight,
        EA=NAN if stock.EA is None else stock.EA,
        expansion=NAN if stock.expansion is None else stock.expansion,
    )
