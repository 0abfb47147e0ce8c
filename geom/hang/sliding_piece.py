"""From the bays of a member over saddles to one piece: one cut, marks of the saddles, cases of the whole member.

Each bay comes solved as a hanging of the length that it was found to have. What such a hanging does by itself when it
is warmed, or when its supports give, is not what this one does, which takes from one bay what another needs: its cases
are solved anew, as one member.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from geom.curves import Joined
from geom.hang import links
from geom.hang.asked import Asked
from geom.hang.cautions import cautions
from geom.hang.clearance import grounds, least_over
from geom.hang.figures import HangingFigures, LinksFigures, Neighbour
from geom.hang.gathering import RunFigures, gathered
from geom.hang.held import Place, of_stretched
from geom.hang.shopwork import used, wanted_of
from geom.hang.sliding import Slid
from geom.hang.states import AS_HUNG, State
from geom.hang.stretched import Stretched
from geom.result import (
    NAN,
    Z_UP,
    Caution,
    Cut,
    Floats,
    Kilograms,
    Line,
    Metres,
    Newtons,
    NewtonsArray,
    Piece,
    Quantity,
    Unit,
    fixed,
)
from geom.shop.rounding import cut_length
from geom.solids import Balls, Link, Links, Solid, link_frames
from geom.units import STANDARD_GRAVITY

_SAME_WAY = 1e-6  # of unit vectors: under it two bays stand in one plane
_CAPSTAN = "exp(mu theta): Euler 1762, Eytelwein 1808"


@dataclass(frozen=True)
class SaddleFigures(RunFigures):
    """Figures of a run over saddles as a whole, as hung. Ranges are between both ways of slipping, null without mu."""

    sag: Metres = NAN
    slack: float = NAN
    pull_horizontal: Newtons = NAN  # of the first bay
    pull_from: Newtons = NAN
    pull_to: Newtons = NAN
    counterweight: Kilograms | None = None
    friction: float | None = None
    pull_from_range: NewtonsArray | None = None
    pull_to_range: NewtonsArray | None = None
    links: LinksFigures | None = None


def gathered_sliding(slid: Slid, parts: Sequence[Piece], members: Sequence[Asked]) -> Piece:
    """Return one piece of a member over saddles.

    Parameters
    ----------
    slid : Slid
        The member as made and hung.
    parts : sequence of Piece
        Its bays, each solved as a hanging by itself.
    members : sequence of Asked
        Those hangings as asked for.
    """
    asked = slid.asked
    held = _states(slid)
    bays = [
        _bay(slid, number, part, member, held) for number, (part, member) in enumerate(zip(parts, members, strict=True))
    ]
    wanted = _wanted(slid)
    piece = gathered(asked.mark, bays, wanted, copies=asked.copies)
    material, mass = _material(slid), _material(slid) * asked.stock.mass_per_metre
    figures = _figures(slid, piece.figures)
    view = piece.views[0]
    lost = [state.case for state in held if not np.isfinite(state.held.sag).all()]
    cut = Cut(
        asked.mark, asked.mark, asked.stock.name, material, slid.pin, slid.count or None, asked.copies, mass
    )  # fmt: skip
    return replace(
        piece,
        what=f"{piece.what.split(',')[0]} over saddles, {asked.stock.kind} {asked.stock.name}",
        mass=mass,
        figures=figures,
        difference=replace(wanted, value=slid.difference),
        facts=_facts(slid, figures, material, mass),
        views=(replace(view, solids=(*(view.solids or ()), *_counted(slid, view.lines or ()))),),
        solids=(*piece.solids, *_counted(slid, piece.lines)),
        cuts=(cut,),
        cautions=(*piece.cautions, *_own_cautions(slid, figures, lost)),
    )


def _wanted(slid: Slid) -> Quantity:
    asked = slid.asked
    if asked.fact == "counterweight":
        return Quantity("counterweight", asked.value, Unit("kg"))
    return wanted_of(asked.fact, asked.value)


def _states(slid: Slid) -> list[State]:
    """Return the bays in every case, all solved together; wind and persons are left out."""
    asked, setting = slid.asked, slid.setting
    coldest, as_hung, hottest = setting.temperatures
    wanted: list[tuple[str, float, float]] = [
        ("coldest", coldest, 0.0),
        (AS_HUNG, as_hung, 0.0),
        ("hottest", hottest, 0.0),
    ]
    if setting.site.support_give:
        wanted.append(("supports give", as_hung, setting.site.support_give))
    hung = slid.at([asked.growth(heat, setting) for _, heat, _ in wanted], [give for *_, give in wanted])
    return [_state(slid, case, heat, hang, give) for (case, heat, give), hang in zip(wanted, hung, strict=True)]


def _state(slid: Slid, case: str, temperature: float, hang: Stretched, give: float) -> State:
    asked = slid.asked
    base = asked.points[:-1, 2]
    profiles = [None if ground is None else ground.profile for ground in asked.grounds]
    gap, place = least_over(hang, grounds(profiles, base))
    if give:  # only the first bay's `from` end has come nearer
        moved = least_over(hang, grounds(profiles, base), moved=0.5 * give)
        gap[0], place[0] = moved[0][0], moved[1][0]
    everyone = np.ones(len(base), dtype=np.bool_)
    return State(case, "dead load only", temperature, everyone, of_stretched(hang), gap, place)


def _bay(slid: Slid, number: int, part: Piece, member: Asked, held: Sequence[State]) -> Piece:
    """Put what the whole member does in place of what a tied bay would do."""
    asked = slid.asked
    place = Place(fixed(member.start.at, 3), part.frame.along)
    cases = tuple(state.of(number, place) for state in held)
    figures: HangingFigures = replace(
        part.figures, sag_per_length=NAN, sag_per_kelvin=NAN, sag_per_support=None, band=None
    )
    # said of the whole member; under a counterweight no length makes the pull any greater
    left_out = ("does not reach", "no drag", *(("shallow sag",) if asked.fact == "counterweight" else ()))
    # its length was found, not given: nothing is to be said of what a given one makes of the sag
    found = replace(member, fact="sag", value=figures.sag)
    said = cautions(found, figures, figures.pin_to_pin, slid.setting, cases=cases)
    return replace(
        part,
        mass=asked.stock.mass_per_metre * figures.pin_to_pin,
        what=f"{asked.stock.kind} {asked.stock.name}",
        figures=figures,
        stocks=(asked.stock,),
        used=used(asked.stock),
        intended=None,
        difference=None,
        cases=cases,
        solids=() if asked.stock.counted else part.solids,
        cuts=(),
        facts=(
            Quantity("pin to pin", figures.pin_to_pin, Unit("m")),
            Quantity("mass", asked.stock.mass_per_metre * figures.pin_to_pin, Unit("kg")),
            *part.facts[-2:],
        ),
        pulls=tuple(
            replace(pull, vectors=_vectors(slid, number, held, place, to=to))
            for to, pull in zip((False, True), part.pulls, strict=True)
        ),
        cautions=tuple(one for one in said if one.code not in left_out),
    )  # fmt: skip


def _vectors(slid: Slid, number: int, held: Sequence[State], place: Place, *, to: bool) -> dict[str, Floats]:
    """Pull of one bay on one of its supports by case; at the member's ends with what is fitted or hangs there."""
    asked, down = slid.asked, 0.0
    if number == 0 and not to:
        down = asked.fit_from.mass * STANDARD_GRAVITY
    if number == len(asked.supports) - 2 and to:
        down = asked.fit_to.mass * STANDARD_GRAVITY + asked.hung_weight
    found = {}
    for state in held:
        pull = (state.held.on_to if to else state.held.on_from)[number]
        if np.isfinite(pull).all():
            found[state.case] = fixed(place.turned(pull) - down * Z_UP)
    return found


def _material(slid: Slid) -> float:
    """Length of material in the whole member, m: whole links, or a rope's cut."""
    asked = slid.asked
    if slid.count:
        return slid.count * float(asked.stock.pitch or NAN)
    return float(cut_length(slid.pin, takes=asked.takes, grip=asked.grips, step=slid.setting.shop.step))


def _figures(slid: Slid, run: RunFigures) -> SaddleFigures:
    asked, hung = slid.asked, slid.hung
    ranges: tuple[Floats | None, Floats | None] = (None, None)
    if asked.friction is not None:
        both = slid.slipping()
        ranges = (
            fixed(sorted(float(one.pulls.at_from[0]) for one in both), 2),
            fixed(sorted(float(one.pulls.at_to[-1]) for one in both), 2),
        )
    return SaddleFigures(
        pin_to_pin=slid.pin,
        tie_marks=run.tie_marks,
        span=run.span,
        lowest=run.lowest,
        sag=float(hung.sag.max()),
        slack=slid.pin / asked.chords,
        pull_horizontal=float(hung.horizontal[0]),
        pull_from=float(hung.pulls.at_from[0]),
        pull_to=float(hung.pulls.at_to[-1]),
        counterweight=asked.value if asked.fact == "counterweight" else None,
        friction=asked.friction,
        pull_from_range=ranges[0],
        pull_to_range=ranges[1],
        links=_links(slid) if slid.count else None,
    )


def _links(slid: Slid) -> LinksFigures:
    asked, pitch = slid.asked, float(slid.asked.stock.pitch or NAN)
    turns = asked.fit_from.turns + asked.fit_to.turns
    return LinksFigures(
        count=slid.count,
        pitch=pitch,
        ends="same way" if bool(links.ends_same_way(slid.count, turns)) else "crossed",
        overall=float(links.overall(slid.count, pitch, asked.stock.wire or 0.0)),
        neighbours=() if asked.fact == "counterweight" else _neighbours(slid, pitch),
    )


def _neighbours(slid: Slid, pitch: float) -> tuple[Neighbour, ...]:
    asked = slid.asked
    counts = links.neighbours(slid.count)
    pins = np.asarray(counts * pitch + asked.takes, dtype=np.float64)
    pins = np.where((counts > 0) & (pins * slid.growth > asked.chords), pins, np.nan)
    bays = slid.of_pins(pins)
    lowest = (bays.lowest + asked.points[:-1, 2]).min(axis=1)
    rows = zip(counts.tolist(), bays.sag.max(axis=1), lowest, bays.horizontal[:, 0], strict=True)
    return tuple(Neighbour(n, float(sag), float(low), float(pull)) for n, sag, low, pull in rows if n > 0)


def _facts(slid: Slid, figures: SaddleFigures, material: float, mass: float) -> tuple[Quantity, ...]:
    first = Quantity("links", float(slid.count)) if slid.count else Quantity("cut length", material, Unit("m"))
    weight = figures.counterweight
    hung = slid.hung.pulls
    return (
        first,
        Quantity("pin to pin", slid.pin, Unit("m")),
        Quantity("mass", mass, Unit("kg")),
        *(() if weight is None else (Quantity("counterweight", weight, Unit("kg")),)),
        Quantity("greatest end pull", float(np.maximum(hung.at_from, hung.at_to).max()), Unit("N")),
    )


def _counted(slid: Slid, lines: Sequence[Line]) -> tuple[Solid, ...]:
    """Return the links or balls between the first and the last support, on the curves of all bays in turn."""
    stock = slid.asked.stock
    if not slid.count or not (stock.diameter if stock.kind == "beads" else stock.wire and stock.width):
        return ()
    curve = Joined([line.curve for line in lines if line.role == "axis"])
    grown, pitch = curve.length / slid.pin, float(stock.pitch or NAN)
    count = min(slid.count, math.floor((slid.pin - slid.asked.takes) / pitch + 1e-9))
    places = link_frames(
        curve, count, pitch * grown, slid.asked.fit_from.takes * grown, quarter=slid.asked.fit_from.turns
    )
    if stock.kind == "beads":
        balls = Balls(places.places, float(stock.diameter or NAN) / 2)
        return (Solid(slid.asked.mark, balls.volume, balls),)
    link = Link(float(stock.wire or NAN), pitch, float(stock.width or NAN))
    return (Solid(slid.asked.mark, count * link.volume, Links(places.places, places.turns, link)),)


def _own_cautions(slid: Slid, figures: SaddleFigures, lost: Sequence[str]) -> list[Caution]:
    """What is to be known of a member over saddles as a whole; `lost` are the cases that it does not rest in."""
    asked, setting = slid.asked, slid.setting
    found = [_of_friction(figures)]
    lifted = (np.flatnonzero(slid.hung.slope_to[:-1] + slid.hung.slope_from[1:] < 0.0) + 1).tolist()
    if lifted:
        which = ", ".join(asked.supports[n].name or f"number {n + 1}" for n in lifted)
        found.append(("lifts off", f"The member would lift off support {which}: it must be held down there.", ""))
    if _turns(slid):
        text = "The run turns on plan: its saddles must hold it sideways too, and friction is more than counted."
        found.append(("turns on plan", text, ""))
    if lost:
        text = f"It does not rest on the saddles in the case {', '.join(lost)}: too short, or run out into one bay."
        found.append(("does not rest", text, ""))
    if asked.fact == "counterweight":
        text = "Lengths and marks end at the last support: add what hangs behind it, counted with the counterweight."
        found.append(("behind the last support", text, ""))
    left = ["wind"] * bool(setting.site.wind) + ["a person's weight"] * bool(asked.person)
    if left:
        found.append(("left out", f"Over saddles {' and '.join(left)} is not solved: no case of it is given.", ""))
    if setting.site.support_give:
        text = "In the case supports give, the first and the last support lean in by half each; saddles between stay."
        found.append(("saddles give", text, ""))
    return [Caution(code, asked.mark, text, source) for code, text, source in found]


def _turns(slid: Slid) -> bool:
    """Whether two bays stand in different upright planes."""
    along = np.diff(slid.asked.points, axis=0)[:, :2] / slid.asked.spans[:, np.newaxis]
    return bool((np.abs(np.diff(along, axis=0)) > _SAME_WAY).any())


def _of_friction(figures: SaddleFigures) -> tuple[str, str, str]:
    if figures.pull_from_range is None or figures.pull_to_range is None:
        text = "Solved over smooth saddles: real ones hold back, pulls and sags depend on how it was drawn over."
        return "smooth saddles", f"{text} Give `friction` for the range of the end pulls.", _CAPSTAN
    spread = [
        f"{low:.3g} to {high:.3g} N at {end}"
        for (low, high), end in ((figures.pull_from_range, "the first"), (figures.pull_to_range, "the last"))
        if not math.isnan(low + high)
    ]
    text = f"Shown over smooth saddles; with friction {figures.friction:g} it may rest anywhere between slipping"
    between = f": pulls as hung are {', '.join(spread)} support" if spread else ""
    return "friction", f"{text} one way over all of them and the other{between}.", _CAPSTAN
