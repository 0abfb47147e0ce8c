"""From solved hanging members to neutral pieces: figures, lines, links, dimensions, cuts, pulls, cautions."""

from __future__ import annotations

import math
from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Catenary, Curve, Segment, hanging_strands
from geom.hang import catenary, intent, links
from geom.hang.asked import Asked
from geom.hang.cautions import cautions
from geom.hang.clearance import closest_places
from geom.hang.figures import HangingFigures, LinksFigures, Neighbour
from geom.hang.intent import Made, Wish
from geom.hang.sensitivity import sag_per_length
from geom.result import (
    NAN,
    Z_UP,
    Case,
    Cut,
    Dimension,
    Frame,
    Label,
    Line,
    Piece,
    Pull,
    Quantity,
    Unit,
    Used,
    View,
    fixed,
)
from geom.setting.options import Setting
from geom.setting.stock import Stock, use_of_capacity
from geom.shop.rounding import cut_length
from geom.solids import Link, Links, Solid, Sweep, link_frames
from geom.units import STANDARD_GRAVITY

Floats = NDArray[np.float64]
Columns = Mapping[str, NDArray[Any]]

_UNITS = {
    "length": Unit("m"), "links": Unit(""), "slack": Unit(""), "sag": Unit("m"), "lowest": Unit("m"), "pull": Unit("N"),
}  # fmt: skip
_INTENDED = {"length": "pin_to_pin"}


@dataclass(frozen=True, eq=False)
class Shape:
    """One solved member in place: its ends (3,) m, parameter and length (m); parameter 0 for two hanging strands."""

    start: Floats
    end: Floats
    parameter: float
    length: float

    @property
    def curve(self) -> Curve:
        """The curve it hangs in."""
        if self.parameter == 0.0:
            return hanging_strands(self.start, self.end, self.length)
        return Catenary(self.start, self.end, self.parameter, length=self.length)

    @property
    def along(self) -> Floats:
        """Unit vector on plan from its start to its end; +x where they stand on one plumb line."""
        step = (self.end - self.start) * np.array([1.0, 1.0, 0.0])
        span = float(np.hypot(step[0], step[1]))
        return fixed(step / span) if span else fixed([1.0, 0.0, 0.0])

    def unfolded(self, x: float) -> Shape:
        """Return the same member in the plane y = 0, its start at plan distance `x`, its elevations kept."""
        span = math.hypot(*(self.end - self.start)[:2])
        start, end = np.array([x, 0.0, self.start[2]]), np.array([x + span, 0.0, self.end[2]])
        return Shape(start, end, self.parameter, self.length)


def fill(
    members: Sequence[Asked], wish: Wish, made: Made, *, skip: Collection[int], setting: Setting
) -> dict[int, Piece]:
    """Return the piece of each member that can be made, by its number in `members`."""
    columns = _columns(wish, made)
    counts, beside = intent.neighbours(wish, made.count)
    columns |= {"counts": counts, "beside_sag": beside.sag, "beside_lowest": beside.lowest}
    columns["beside_pull"] = beside.parameter * wish.weight[:, None]
    return {
        number: _piece(member, {name: column[number] for name, column in columns.items()}, setting)
        for number, member in enumerate(members)
        if number not in skip
    }


def _columns(wish: Wish, made: Made) -> dict[str, NDArray[Any]]:
    """Everything that is computed, as arrays over the members: what follows only picks from them."""
    hang = made.made
    pulls = hang.pulls(wish.weight)
    differences = {fact: intent.value_of(fact, hang, wish) for fact in intent.FACTS}
    return {
        "span": hang.span, "level": hang.level_difference, "length": hang.length, "parameter": hang.parameter,
        "sag": hang.sag, "sag_at": hang.sag_at, "sag_mid": hang.sag_mid, "lowest": hang.lowest,
        "lowest_at": hang.lowest_at, "vertex_at": hang.vertex_at,
        "slope_from": hang.slope_from, "slope_to": hang.slope_to,
        "horizontal": pulls.horizontal, "at_from": pulls.at_from, "at_to": pulls.at_to,
        "down_from": pulls.vertical_from, "down_to": pulls.vertical_to, "count": made.count,
        "sag_per_length": sag_per_length(hang), "asked": wish.value,
        "wished": made.wished.length,
    } | {f"made_{fact}": value for fact, value in differences.items()}  # fmt: skip


def _piece(member: Asked, at: Mapping[str, Any], setting: Setting) -> Piece:
    start, end = fixed(member.start.at, 3), fixed(member.end.at, 3)
    shape = Shape(start, end, float(at["parameter"]), float(at["length"]))
    figures = _figures(member, at, shape, setting)
    solids = chain_solids(member, shape, figures)
    lines = (*drawn(member.mark, shape),)
    made_mass = mass(member, figures, setting)
    view = View("elevation", Frame(start, shape.along, Z_UP), dimensions(shape, figures))
    return Piece(
        mark=member.mark,
        kind="hanging",
        what=f"{member.stock.kind} {member.stock.name}",
        views=(view,),
        mass=made_mass,
        figures=figures,
        used=used(member.stock),
        stocks=(member.stock,),
        copies=member.copies,
        intended=wanted_of(member.fact, member.value),
        difference=_difference(member, at, setting),
        cases=(_as_hung(figures, setting),),
        facts=facts(member, figures, made_mass, setting),
        lines=lines,
        labels=_labels(member),
        solids=solids,
        cuts=(_cut(member, figures, made_mass, setting),),
        pulls=_pulls(member, at, shape),
        cautions=cautions(member, figures, float(at["wished"]), setting),
    )


def drawn(mark: str, shape: Shape) -> tuple[Line, Line]:
    """Return the lines of a member in place: its axis and its chord."""
    return Line("axis", shape.curve, mark), Line("chord", Segment(shape.start, shape.end), mark)


def chain_solids(member: Asked, shape: Shape, figures: HangingFigures) -> tuple[Solid, ...]:
    """Return a member's solid: its links in place, or a tube of a rope or rod."""
    stock = member.stock
    if figures.links is not None and stock.wire and stock.width and stock.pitch:
        link = Link(stock.wire, stock.pitch, stock.width)
        frames = link_frames(
            shape.curve,
            figures.links.count,
            stock.pitch,
            member.fit_from.takes,
            quarter=member.fit_from.turns,
        )
        body = Links(frames.places, frames.turns, link)
        return (Solid(member.mark, figures.links.count * link.volume, body),)
    if stock.diameter:
        radius = stock.diameter / 2
        return (Solid(member.mark, math.pi * radius**2 * shape.length, Sweep(shape.curve, radius)),)
    return ()


def _figures(member: Asked, at: Mapping[str, Any], shape: Shape, setting: Setting) -> HangingFigures:
    base = member.start.at[2]
    lowest = base + float(at["lowest"])
    clearance, clearance_at = _clearance(member, at, shape)
    return HangingFigures(
        span=float(at["span"]),
        level_difference=float(at["level"]),
        pin_to_pin=float(at["length"]),
        hung_length=float(at["length"]),
        sag=float(at["sag"]),
        sag_mid=float(at["sag_mid"]),
        lowest=lowest,
        below_from=base - lowest,
        below_to=member.end.at[2] - lowest,
        clearance=clearance,
        clearance_at=clearance_at,
        parameter=float(at["parameter"]),
        pull_horizontal=float(at["horizontal"]),
        pull_from=float(at["at_from"]),
        pull_to=float(at["at_to"]),
        slope_from=float(at["slope_from"]),
        slope_to=float(at["slope_to"]),
        links=_links(member, at) if member.stock.counted else None,
        loads=(),
        sag_per_length=float(at["sag_per_length"]),
        points=fixed(shape.curve.points(setting.drawing.within), -1, 3),
        capacity_used=_capacity(member.stock, max(float(at["at_from"]), float(at["at_to"]))),
        lowest_at=float(at["lowest_at"]),
        sag_at=float(at["sag_at"]),
    )


def _capacity(stock: Stock, pull: float) -> float:
    share = use_of_capacity(stock, pull)
    return NAN if share is None else share


def _links(member: Asked, at: Mapping[str, Any]) -> LinksFigures:
    count, pitch = int(at["count"]), float(member.stock.pitch or NAN)
    base = member.start.at[2]
    rows = zip(at["counts"], at["beside_sag"], at["beside_lowest"], at["beside_pull"], strict=True)
    same = bool(links.ends_same_way(count, member.quarter_turns))
    return LinksFigures(
        count=count,
        pitch=pitch,
        ends="same way" if same else "crossed",
        overall=float(links.overall(count, pitch, member.stock.wire or 0.0)),
        neighbours=tuple(
            Neighbour(int(n), float(sag), base + float(low), float(pull)) for n, sag, low, pull in rows if n > 0
        ),
    )


def _clearance(member: Asked, at: Mapping[str, Any], shape: Shape) -> tuple[float, float]:
    """Least clearance over the ground and its plan distance from the start; NaN without ground."""
    if member.ground is None or shape.parameter == 0.0:
        return NAN, NAN
    profile = member.ground.profile
    places = closest_places(profile, float(at["span"]), float(at["vertex_at"]), shape.parameter)
    if not places.size:
        return NAN, NAN
    gaps = _elevations(shape, places, float(at["vertex_at"])) - np.interp(places, profile[:, 0], profile[:, 1])
    best = int(np.argmin(gaps))
    return float(gaps[best]), float(places[best])


def _elevations(shape: Shape, x: Floats, vertex: float) -> Floats:
    """Z - z_start = 2 a sinh((x - 2 x_v)/2a) sinh(x/2a), x_v the vertex: a product, exact when taut."""
    a2 = 2.0 * shape.parameter
    rise: Floats = shape.start[2] + a2 * np.sinh((x - 2.0 * vertex) / a2) * np.sinh(x / a2)
    return rise


def mass(member: Asked, figures: HangingFigures, setting: Setting) -> float:
    """Return the mass of one member's material, kg, hardware and loads left out."""
    return member.stock.mass_per_metre * _material(member, figures, setting)


def _material(member: Asked, figures: HangingFigures, setting: Setting) -> float:
    """Length of material in one member, m: whole links, or a rope's cut."""
    if figures.links is not None:
        return figures.links.count * figures.links.pitch
    return float(cut_length(figures.pin_to_pin, takes=member.takes, grip=member.grips, step=setting.shop.step))


def _cut(member: Asked, figures: HangingFigures, one: float, setting: Setting) -> Cut:
    return Cut(
        mark=member.mark,
        piece=member.mark,
        stock=member.stock.name,
        cut_length=_material(member, figures, setting),
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
        else Quantity("cut length", _material(member, figures, setting), Unit("m"))
    )
    return (
        first,
        Quantity("pin to pin", figures.pin_to_pin, Unit("m")),
        Quantity("mass", one, Unit("kg")),
        Quantity("horizontal pull", figures.pull_horizontal, Unit("N")),
        Quantity("greatest end pull", max(figures.pull_from, figures.pull_to), Unit("N")),
    )


def used(stock: Stock) -> Used:
    """Return what a member of a stock was computed from. Nothing stretches here, so no modulus enters."""
    return Used(source=stock.cited, weight=stock.weight)


def wanted_of(fact: str, value: float) -> Quantity:
    """Return what a fact asks for, as it stands in the figures: a length is pin to pin."""
    return Quantity(_INTENDED.get(fact, fact), float(value), _UNITS[fact])


def _difference(member: Asked, at: Mapping[str, Any], setting: Setting) -> Quantity:
    """Made minus intended. Of rope and rod: what rounding the cut to a step does."""
    name, unit = _INTENDED.get(member.fact, member.fact), _UNITS[member.fact]
    if member.fact == "links":
        return Quantity(name, float(at["count"]) - member.value, unit)
    if not member.stock.counted:
        return Quantity(name, _rounded_off(member, at, setting), unit)
    change = float(at[f"made_{member.fact}"]) - float(at["asked"])
    return Quantity(name, -change if member.fact == "lowest" else change, unit)


def _rounded_off(member: Asked, at: Mapping[str, Any], setting: Setting) -> float:
    exact = float(at["length"])
    cut = float(cut_length(exact, takes=member.takes, grip=member.grips, step=setting.shop.step))
    hang = catenary.from_length(float(at["span"]), float(at["level"]), cut + member.takes - member.grips)
    values = {
        "length": float(hang.length) - exact,
        "slack": (float(hang.length) - exact) / float(hang.chord),
        "sag": float(hang.sag) - float(at["sag"]),
        "lowest": float(hang.lowest) - float(at["lowest"]),
        "pull": (float(hang.parameter) - float(at["parameter"])) * member.stock.weight,
    }
    return float(values[member.fact])


def _as_hung(figures: HangingFigures, setting: Setting) -> Case:
    return Case(
        case="as hung",
        standing="dead load only",
        temperature=setting.shop.temperature,
        sag=figures.sag,
        lowest=figures.lowest,
        clearance=figures.clearance,
        pull_horizontal=figures.pull_horizontal,
        pull_from=figures.pull_from,
        pull_to=figures.pull_to,
    )


def dimensions(shape: Shape, figures: HangingFigures) -> tuple[Dimension, ...]:
    """Return what is worth dimensioning: span, level difference, sag where it is greatest, lowest level."""
    sag_place = shape.start + shape.along * figures.sag_at
    on_chord = sag_place + np.array([0.0, 0.0, _chord_rise(figures)])
    under = on_chord - np.array([0.0, 0.0, figures.sag])
    lowest = np.array([*(shape.start + shape.along * figures.lowest_at)[:2], figures.lowest])
    found = [
        Dimension("horizontal", shape.start, shape.end, figures.span, "span", "below", 1),
        Dimension("vertical", on_chord, under, figures.sag, "sag under chord", "inside"),
        Dimension("level", lowest, lowest, figures.lowest, "lowest point", "below"),
    ]
    if figures.level_difference:
        rise = abs(figures.level_difference)
        side: Literal["left", "right"] = "right" if figures.level_difference > 0 else "left"
        found.append(Dimension("vertical", shape.start, shape.end, rise, "level difference", side))
    if 0.0 < figures.lowest_at < figures.span:
        found.append(Dimension("horizontal", shape.start, lowest, figures.lowest_at, "to lowest point", "below", 0))
    return tuple(found)


def _chord_rise(figures: HangingFigures) -> float:
    return figures.level_difference * figures.sag_at / figures.span if figures.span else 0.0


def _labels(member: Asked) -> tuple[Label, ...]:
    return (
        Label(fixed(member.start.at), member.start.name or f"{member.mark}.from", "support"),
        Label(fixed(member.end.at), member.end.name or f"{member.mark}.to", "support"),
    )


def _pulls(member: Asked, at: Mapping[str, Any], shape: Shape) -> tuple[Pull, Pull]:
    """Pull on each support: level towards the other end, down its share of the weight and the fittings there."""
    level = float(at["horizontal"]) * shape.along
    down_from = float(at["down_from"]) + member.fit_from.mass * STANDARD_GRAVITY
    down_to = float(at["down_to"]) + member.fit_to.mass * STANDARD_GRAVITY
    return (
        Pull(
            member.start.name or f"{member.mark}.from", bool(member.start.name), fixed(member.start.at),
            {"as hung": fixed(level - down_from * Z_UP)}, member.start.height,
        ),
        Pull(
            member.end.name or f"{member.mark}.to", bool(member.end.name), fixed(member.end.at),
            {"as hung": fixed(-level - down_to * Z_UP)}, member.end.height,
        ),
    )  # fmt: skip
