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
from geom.hang.figures import HangingFigures, LinksFigures, LoadFigures, Neighbour, SagPerSupport
from geom.hang.held import Place
from geom.hang.intent import Made, Wish
from geom.hang.load_views import load_labels, load_tables
from geom.hang.rigid_links import RigidLinks, rigid_links
from geom.hang.sensitivity import answers, sag_per_kelvin, sag_per_length
from geom.hang.sensitivity_loaded import answers_loaded
from geom.hang.shape import Shape, dimensions, drawn, loaded_shape, lying_shape, rigid_shape, shape
from geom.hang.shopwork import INTENDED, UNITS, cut, facts, mass, rounded_pins, used, wanted_of
from geom.hang.shown import fittings, levels
from geom.hang.states import AS_HUNG, Looked, State, looked, states
from geom.result import NAN, Z_UP, Floats, Frame, Label, Piece, Pull, Quantity, View, fixed
from geom.setting.options import Setting
from geom.setting.stock import Stock, use_of_capacity
from geom.units import STANDARD_GRAVITY

# Metres of sag for a metre of support: what a level member shows of its supports' height is rounding.
_NO_CHANGE = 1e-12


@dataclass(frozen=True, eq=False)
class _Solved:
    """Everything that is computed of n members, as arrays: what follows only picks from them."""

    columns: Mapping[str, NDArray[Any]]
    states: Sequence[State]
    bands: Bands
    look: Looked
    rigid: RigidLinks


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
    base = np.array([member.start.at[2] for member in members], dtype=np.float64)
    look = looked(wish, made, grounds(profiles, base), setting)
    person = np.array([member.person for member in members], dtype=np.float64)
    width = np.array([wind_width(member.stock) for member in members], dtype=np.float64)
    held = states(look, person, width)
    return _Solved(_columns(members, look), held, bands(members, look), look, rigid_links(wish, made))


def wind_width(stock: Stock) -> float:
    """Return what a metre of a stock shows the wind, times its drag coefficient, m; 0 where that is not known."""
    return (stock.across or 0.0) * (stock.drag or 0.0)


def _columns(members: Sequence[Asked], look: Looked) -> dict[str, NDArray[Any]]:
    wish, made = look.wish, look.made
    hang, held = made.made, made.held
    counts, beside_sag, beside_lowest, beside_pull = intent.neighbours(wish, made.count)
    answer = answers(hang)
    found = {
        "span": wish.span, "level": wish.level_difference, "pin": made.lengths.pin, "own_length": hang.length,
        "hung_length": held.hung_length, "softness": hang.softness, "parameter": held.parameter,
        "sag": held.sag, "sag_at": held.sag_at, "sag_mid": held.sag_mid, "lowest": held.lowest,
        "lowest_at": held.lowest_at, "slope_from": held.slope_from, "slope_to": held.slope_to, "count": made.count,
        "sag_per_length": sag_per_length(hang), "sag_per_kelvin": sag_per_kelvin(hang, wish.expansion, wish.growth),
        "sag_apart": answer.apart, "sag_raised": answer.raised,
        "wished": made.wished_lengths.pin, "difference": _differences(members, look),
        "counts": counts, "beside_sag": beside_sag, "beside_lowest": beside_lowest, "beside_pull": beside_pull,
    }  # fmt: skip
    if made.rows.size:
        rate = (wish.expansion / wish.growth)[made.rows]
        loaded, kelvin = answers_loaded(made.loaded, rate)
        under = {
            "sag_per_length": loaded.length, "sag_per_kelvin": kelvin, "sag_apart": loaded.apart,
            "sag_raised": loaded.raised,
        }  # fmt: skip
        for name, values in under.items():
            found[name] = np.array(found[name])
            found[name][made.rows] = values
    for name in ("sag_per_length", "sag_per_kelvin", "sag_apart", "sag_raised"):
        found[name] = np.array(found[name])
        found[name][made.lies.rows] = np.nan
    down = np.where(np.isfinite(wish.floor), 0.0, np.nan)
    down[made.lies.rows] = made.lies.laid.lying / wish.growth[made.lies.rows]
    return found | {"lying": down}


def _differences(members: Sequence[Asked], look: Looked) -> Floats:
    """Made minus intended, of the fact given. Of rope and rod: what rounding the cut to a step does."""
    wish, made = look.wish, look.made
    grips = np.array([member.grips for member in members])
    counted = np.isfinite(wish.pitch)
    rounded = rounded_pins(made.lengths.pin, wish.takes, grips, look.setting.shop.step)
    pin = np.where(counted, made.lengths.pin, rounded)
    moved = pin - made.lengths.pin
    lengths = intent.Lengths(pin, made.lengths.excess + moved)
    value = intent.value_of(intent.of_lengths(wish, made, lengths), lengths, wish)
    exact = np.where(counted, wish.value, intent.value_of(made, made.lengths, wish))
    difference = np.where(wish.fact == "lowest", exact - value, value - exact)
    difference = np.where(~counted & (wish.fact == "length"), moved, difference)
    return np.where(wish.fact == "links", made.count - wish.value, difference)


def _piece(member: Asked, number: int, solved: _Solved, setting: Setting) -> Piece:
    at = {name: column[number] for name, column in solved.columns.items()}
    start, end = fixed(member.start.at, 3), fixed(member.end.at, 3)
    form = _shape(start, end, at, number, solved)
    place = Place(start, form.along, tuple(load.mark for load in member.loads))
    figures = _figures(member, at, form, number, solved, setting)
    made_mass = mass(member, figures, setting)
    sizes = (*dimensions(form, figures), *levels(member.start, member.end))
    view = View("elevation", Frame(start, form.along, Z_UP), sizes)
    cases = tuple(state.of(number, place) for state in solved.states if state.has[number])
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
        labels=(*_labels(member), *fittings(member), *load_labels(figures, member.loads)),
        solids=solids(member, form, figures),
        tables=load_tables(member.mark, figures),
        cuts=(cut(member, figures, made_mass, setting),),
        pulls=_pulls(member, number, solved.states, place),
        cautions=cautions(member, figures, float(at["wished"]), setting, cases=cases),
    )


def _shape(start: Floats, end: Floats, at: Mapping[str, Any], number: int, solved: _Solved) -> Shape:
    made = solved.look.made
    if solved.look.wish.carried.any[number]:
        return loaded_shape(start, end, made.loaded, int(np.searchsorted(made.rows, number)))
    part = made.lies.part(number)
    if part is not None:
        return lying_shape(start, end, made.lies, part)
    hung = shape(start, end, at)
    hinges = solved.rigid.hinges(number) if solved.look.setting.drawing.links == "rigid" else None
    return hung if hinges is None else rigid_shape(hung, hinges)


def _figures(
    member: Asked, at: Mapping[str, Any], form: Shape, number: int, solved: _Solved, setting: Setting
) -> HangingFigures:
    base = member.start.at[2]
    lowest = base + float(at["lowest"])
    now = next(state for state in solved.states if state.case == AS_HUNG)
    pull_from, pull_to = float(now.held.at_from[number]), float(now.held.at_to[number])
    apart, raised = (0.0 if abs(slope) < _NO_CHANGE else float(slope) for slope in (at["sag_apart"], at["sag_raised"]))
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
        pull_horizontal=float(now.held.horizontal[number]),
        pull_from=pull_from,
        pull_to=pull_to,
        slope_from=float(at["slope_from"]),
        slope_to=float(at["slope_to"]),
        links=_links(member, at, solved.rigid.off_of(number)) if member.stock.counted else None,
        loads=_loads(member, number, solved, form),
        sag_per_length=float(at["sag_per_length"]),
        points=fixed(form.curve.points(setting.drawing.within), -1, 3),
        capacity_used=_capacity(member.stock, max(pull_from, pull_to)),
        lowest_at=float(at["lowest_at"]),
        sag_at=float(at["sag_at"]),
        sag_per_kelvin=float(at["sag_per_kelvin"]),
        sag_per_support=SagPerSupport(from_out=apart, from_up=-raised, to_out=apart, to_up=raised),
        band=solved.bands.of(number, base),
        hanging=float(at["pin"]) - float(at["lying"]),
        lying=float(at["lying"]),
    )


def _capacity(stock: Stock, pull: float) -> float:
    share = use_of_capacity(stock, pull)
    return NAN if share is None else share


def _links(member: Asked, at: Mapping[str, Any], off: float) -> LinksFigures:
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
        rigid_off=off,
    )


def _labels(member: Asked) -> tuple[Label, ...]:
    return (
        Label(fixed(member.start.at), member.start.name or f"{member.mark}.from", "support"),
        Label(fixed(member.end.at), member.end.name or f"{member.mark}.to", "support"),
    )


def _loads(member: Asked, number: int, solved: _Solved, form: Shape) -> tuple[LoadFigures, ...]:
    if not member.loads:
        return ()
    look = solved.look
    places = look.made.loaded.load_places[int(np.searchsorted(look.made.rows, number))]
    points = Place(form.start, form.along).points(places)
    return tuple(
        LoadFigures(
            mark=load.mark,
            at=fixed(points[column]),
            mark_=float(look.marked.at[number, column]),
            underside=float(points[column, 2]) - load.hanger,
            force=load.force,
        )
        for column, load in enumerate(member.loads)
    )


def _pulls(member: Asked, number: int, held: Sequence[State], place: Place) -> tuple[Pull, Pull]:
    """Pull on each support in every case, with the weight of the fittings there."""
    at_from: dict[str, Floats] = {}
    at_to: dict[str, Floats] = {}
    for state in held:
        on_from, on_to = state.held.on_from[number], state.held.on_to[number]
        if state.has[number] and np.isfinite(on_from).all():
            at_from[state.case] = fixed(place.turned(on_from) - member.fit_from.mass * STANDARD_GRAVITY * Z_UP)
            at_to[state.case] = fixed(place.turned(on_to) - member.fit_to.mass * STANDARD_GRAVITY * Z_UP)
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
