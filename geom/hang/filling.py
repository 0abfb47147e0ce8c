"""From solved hanging members to neutral pieces: figures, lines, links, dimensions, cuts, pulls, cautions."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from geom.hang import intent, links
from geom.hang.asked import Asked
from geom.hang.band import Bands, bands
from geom.hang.bodies import solids
from geom.hang.cautions import cautions
from geom.hang.clearance import grounds
from geom.hang.figures import HangingFigures, LinksFigures, Neighbour, SagPerSupport
from geom.hang.intent import Made, Wish
from geom.hang.sensitivity import answers, sag_per_kelvin, sag_per_length
from geom.hang.shape import Shape, dimensions, drawn, shape
from geom.hang.shopwork import INTENDED, UNITS, cut, facts, mass, rounded_pins, used, wanted_of
from geom.hang.shown import fittings, levels
from geom.hang.states import AS_HUNG, State, states
from geom.result import NAN, Z_UP, Floats, Frame, Label, Piece, Pull, Quantity, View, fixed
from geom.setting.options import Setting
from geom.setting.stock import Stock, use_of_capacity
from geom.units import STANDARD_GRAVITY


@dataclass(frozen=True, eq=False)
class _Solved:
    """Everything that is computed of n members, as arrays: what follows only picks from them."""

    columns: Mapping[str, NDArray[Any]]
    states: Sequence[State]
    bands: Bands


def fill(
    members: Sequence[Asked], wish: Wish, made: Made, *, skip: Collection[int], setting: Setting
) -> dict[int, Piece]:
    """Return the piece of each member that can be made, by its number in `members`."""
    solved = _solved(members, wish, made, setting)
    return {
        number: _piece(member, number, solved, setting) for number, member in enumerate(members) if number not in skip
    }


def _solved(members: Sequence[Asked], wish: Wish, made: Made, setting: Setting) -> _Solved:
    profiles = [None if member.ground is None else member.ground.profile for member in members]
    ground = grounds(profiles, np.array([member.start.at[2] for member in members], dtype=np.float64))
    held = states(wish, made.lengths, made.made, ground, setting)
    return _Solved(
        _columns(members, wish, made, setting),
        held,
        bands(members, wish, made.lengths, made.count, ground, setting=setting),
    )


def _columns(members: Sequence[Asked], wish: Wish, made: Made, setting: Setting) -> dict[str, NDArray[Any]]:
    hang = made.made
    counts, beside = intent.neighbours(wish, made.count)
    answer = answers(hang)
    return {
        "span": hang.span, "level": hang.level_difference, "pin": made.lengths.pin, "own_length": hang.length,
        "hung_length": hang.hung_length, "softness": hang.softness, "parameter": hang.parameter,
        "sag": hang.sag, "sag_at": hang.sag_at, "sag_mid": hang.sag_mid, "lowest": hang.lowest,
        "lowest_at": hang.lowest_at, "slope_from": hang.slope_from, "slope_to": hang.slope_to, "count": made.count,
        "sag_per_length": sag_per_length(hang), "sag_per_kelvin": sag_per_kelvin(hang, wish.expansion, wish.growth),
        "sag_apart": answer.apart, "sag_raised": answer.raised,
        "wished": made.wished_lengths.pin, "difference": _differences(members, wish, made, setting),
        "counts": counts, "beside_sag": beside.sag, "beside_lowest": beside.lowest, "beside_pull": beside.horizontal,
    }  # fmt: skip


def _differences(members: Sequence[Asked], wish: Wish, made: Made, setting: Setting) -> Floats:
    """Made minus intended, of the fact given. Of rope and rod: what rounding the cut to a step does."""
    grips = np.array([member.grips for member in members])
    counted = np.isfinite(wish.pitch)
    pin = np.where(counted, made.lengths.pin, rounded_pins(made.lengths.pin, wish.takes, grips, setting.shop.step))
    moved = pin - made.lengths.pin
    lengths = intent.Lengths(pin, made.lengths.excess + moved)
    value = intent.value_of(intent.hung(wish, lengths), lengths, wish)
    exact = np.where(counted, wish.value, intent.value_of(made.made, made.lengths, wish))
    difference = np.where(wish.fact == "lowest", exact - value, value - exact)
    difference = np.where(~counted & (wish.fact == "length"), moved, difference)
    return np.where(wish.fact == "links", made.count - wish.value, difference)


def _piece(member: Asked, number: int, solved: _Solved, setting: Setting) -> Piece:
    at = {name: column[number] for name, column in solved.columns.items()}
    start, end = fixed(member.start.at, 3), fixed(member.end.at, 3)
    form = shape(start, end, at)
    figures = _figures(member, at, form, number, solved, setting)
    made_mass = mass(member, figures, setting)
    sizes = (*dimensions(form, figures), *levels(member.start, member.end))
    view = View("elevation", Frame(start, form.along, Z_UP), sizes)
    cases = tuple(state.of(number, float(start[2])) for state in solved.states)
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
        difference=Quantity(INTENDED.get(member.fact, member.fact), float(at["difference"]), UNITS[member.fact]),
        cases=cases,
        facts=facts(member, figures, made_mass, setting),
        lines=(*drawn(member.mark, form),),
        labels=(*_labels(member), *fittings(member)),
        solids=solids(member, form, figures),
        cuts=(cut(member, figures, made_mass, setting),),
        pulls=_pulls(member, number, solved.states, form),
        cautions=cautions(member, figures, float(at["wished"]), setting, cases=cases),
    )


def _figures(
    member: Asked, at: Mapping[str, Any], form: Shape, number: int, solved: _Solved, setting: Setting
) -> HangingFigures:
    base = member.start.at[2]
    lowest = base + float(at["lowest"])
    now = next(state for state in solved.states if state.case == AS_HUNG)
    pull_from, pull_to = float(now.at_from[number]), float(now.at_to[number])
    apart, raised = float(at["sag_apart"]), float(at["sag_raised"])
    return HangingFigures(
        span=float(at["span"]),
        level_difference=float(at["level"]),
        pin_to_pin=float(at["pin"]),
        hung_length=float(at["hung_length"]),
        sag=float(at["sag"]),
        sag_mid=float(at["sag_mid"]),
        lowest=lowest,
        below_from=base - lowest,
        below_to=member.end.at[2] - lowest,
        clearance=float(now.clearance[number]),
        clearance_at=float(now.clearance_at[number]),
        parameter=float(at["parameter"]),
        pull_horizontal=float(now.horizontal[number]),
        pull_from=pull_from,
        pull_to=pull_to,
        slope_from=float(at["slope_from"]),
        slope_to=float(at["slope_to"]),
        links=_links(member, at) if member.stock.counted else None,
        loads=(),
        sag_per_length=float(at["sag_per_length"]),
        points=fixed(form.curve.points(setting.drawing.within), -1, 3),
        capacity_used=_capacity(member.stock, max(pull_from, pull_to)),
        lowest_at=float(at["lowest_at"]),
        sag_at=float(at["sag_at"]),
        sag_per_kelvin=float(at["sag_per_kelvin"]),
        sag_per_support=SagPerSupport(from_out=apart, from_up=-raised, to_out=apart, to_up=raised),
        band=solved.bands.of(number, base),
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


def _labels(member: Asked) -> tuple[Label, ...]:
    return (
        Label(fixed(member.start.at), member.start.name or f"{member.mark}.from", "support"),
        Label(fixed(member.end.at), member.end.name or f"{member.mark}.to", "support"),
    )


def _pulls(member: Asked, number: int, held: Sequence[State], form: Shape) -> tuple[Pull, Pull]:
    """Pull on each support: level towards the other end, down its share of the weight and the fittings there."""
    at_from: dict[str, Floats] = {}
    at_to: dict[str, Floats] = {}
    for state in held:
        level = float(state.horizontal[number]) * form.along
        down_from = float(state.down_from[number]) + member.fit_from.mass * STANDARD_GRAVITY
        down_to = float(state.down_to[number]) + member.fit_to.mass * STANDARD_GRAVITY
        if np.isfinite(down_from):
            at_from[state.case] = fixed(level - down_from * Z_UP)
            at_to[state.case] = fixed(-level - down_to * Z_UP)
    return (
        Pull(
            member.start.name or f"{member.mark}.from", bool(member.start.name), fixed(member.start.at),
            at_from, member.start.height,
        ),
        Pull(
            member.end.name or f"{member.mark}.to", bool(member.end.name), fixed(member.end.at),
            at_to, member.end.height,
        ),
    )  # fmt: skip
