"""The states a member is looked at in: by temperature, with its supports given way, bare, in wind, with a person."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang.carried import Carried, hung_loaded, marks
from geom.hang.clearance import Grounds, least_over
from geom.hang.clearance_loaded import least_over_loaded
from geom.hang.held import Held, Place, of_loaded, of_stretched
from geom.hang.intent import Made, Wish, hung
from geom.hang.loaded import Loaded
from geom.hang.lying import lying, lying_rows, of_lying
from geom.hang.person import Person, persons
from geom.hang.stretched import Stretched
from geom.hang.wind import Blown, blown
from geom.result import Case, Standing
from geom.setting.options import Setting

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]

AS_HUNG = "as hung"


@dataclass(frozen=True, eq=False)
class State:
    """n members in one case; of those that do not have it everything is NaN.

    has : (n,) whether a member is looked at in this case
    clearance, clearance_at : (n,) m
    adds : what only this case has
    """

    case: str
    standing: Standing
    temperature: float
    has: NDArray[np.bool_]
    held: Held
    clearance: Floats
    clearance_at: Floats
    adds: Blown | Person | None = None

    def of(self, number: int, place: Place) -> Case:
        """Return one member's case."""
        held, base = self.held, float(place.start[2])
        return Case(
            case=self.case,
            standing=self.standing,
            temperature=self.temperature,
            sag=float(held.sag[number]),
            lowest=base + float(held.lowest[number]),
            clearance=float(self.clearance[number]),
            pull_horizontal=float(held.horizontal[number]),
            pull_from=float(held.at_from[number]),
            pull_to=float(held.at_to[number]),
            added=None if self.adds is None else self.adds.of(number, place),
        )


@dataclass(frozen=True, eq=False)
class Looked:
    """What cases are made of: the wishes, what is made of them, what they carry at its marks, and the ground."""

    wish: Wish
    made: Made
    marked: Carried
    ground: Grounds
    setting: Setting


def looked(wish: Wish, made: Made, ground: Grounds, setting: Setting) -> Looked:
    """Return what cases are made of; loads placed on plan as hung are clamped where they are then."""
    at = np.array(wish.carried.at)
    if made.rows.size:
        rows = made.rows
        at[rows] = marks(made.loaded, wish.bare.of(rows), wish.carried.of(rows))
    return Looked(wish, made, wish.carried.marked(at), ground, setting)


def states(look: Looked, person: Floats, wind_width: Floats) -> tuple[State, ...]:
    """Return all members in every case, each one array call.

    Parameters
    ----------
    look : Looked
        The members.
    person : ndarray, shape (n,)
        Weight of a person to be tried on each, N; 0 for none.
    wind_width : ndarray, shape (n,)
        What a metre of each shows the wind, times its drag coefficient, m.
    """
    setting, everyone = look.setting, np.ones(look.wish.span.shape, dtype=np.bool_)
    coldest, as_hung, hottest = setting.temperatures
    now = State(
        AS_HUNG, "dead load only", as_hung, everyone, look.made.held, *_gaps(look, look.made.made, look.made.loaded)
    )
    found = [_by_heat(look, now, "coldest", coldest), now, _by_heat(look, now, "hottest", hottest)]
    if setting.site.support_give:
        found.append(_given_way(look, setting.site.support_give))
    if look.made.rows.size:
        found.append(_bare(look))
    if setting.site.wind:
        width = np.array(wind_width)
        width[look.made.lies.rows] = 0.0  # what lies is not blown about, and its strands are left out
        blow = blown(look.wish, look.marked, look.made.lengths.pin, width, setting.site.wind)
        found += [_in_wind(look, blow)] if blow.rows.size else []
    if (person > 0.0).any():
        found += [_with_person(look, one) for one in persons(look.wish, look.marked, look.made.lengths.pin, person)]
    return tuple(found)


def _gaps(look: Looked, hang: Stretched, loaded: Loaded | None, *, moved: float = 0.0) -> tuple[Floats, Floats]:
    """Least clearances and their places: of what carries, under what it carries."""
    gap, place = least_over(hang, look.ground, moved=moved)
    rows = look.made.rows
    gap[lying_rows(hang, look.wish.floor)] = np.nan  # it lies on its floor: there is none
    if loaded is not None and rows.size:
        hanger = look.marked.hanger[rows]
        gap[rows], place[rows] = least_over_loaded(loaded, rows, hanger, look.ground, moved=moved)
    return gap, place


def growth(wish: Wish, temperature: float, setting: Setting) -> Floats:
    """Return lengths at a temperature over those at the shop's."""
    return np.asarray(1.0 + wish.expansion * (temperature - setting.shop.temperature))


def state(look: Looked, case: str, temperature: float, *, grown: Floats, closer: float = 0.0) -> State:
    """Return all members at another temperature, or with supports nearer by `closer`, m, the loads at their marks."""
    wish, rows = look.wish, look.made.rows
    hang = hung(wish, look.made.lengths, growth=grown, closer=np.full(wish.span.shape, closer))
    held, loaded = of_stretched(hang), None
    if rows.size:
        bare = replace(wish.bare, span=wish.span - closer, growth=grown).of(rows)
        loaded = hung_loaded(bare, look.marked.of(rows), look.made.lengths.pin[rows])
        held = held.with_rows(rows, of_loaded(loaded))
    lies = lying(hang, wish.floor)
    held = held.with_rows(lies.rows, of_lying(lies)) if lies.rows.size else held
    gaps = _gaps(look, hang, loaded, moved=0.5 * closer)
    return State(case, "dead load only", temperature, np.ones(wish.span.shape, dtype=np.bool_), held, *gaps)


def _by_heat(look: Looked, now: State, case: str, temperature: float) -> State:
    if temperature == now.temperature:
        return replace(now, case=case)
    return state(look, case, temperature, grown=growth(look.wish, temperature, look.setting))


def _given_way(look: Looked, give: float) -> State:
    return state(look, "supports give", look.setting.temperatures[1], grown=look.wish.growth, closer=give)


def _bare(look: Looked) -> State:
    """Without loads: what is sighted when it is hung."""
    hang, has = look.made.made, np.zeros(look.wish.span.shape, dtype=np.bool_)
    has[look.made.rows] = True
    gaps = _gaps(look, hang, None)
    return State("bare", "dead load only", look.setting.temperatures[1], has, of_stretched(hang), *gaps)


def _only(look: Looked, rows: Ints, part: Held) -> tuple[NDArray[np.bool_], Held]:
    """Put some members' values among all."""
    has = np.zeros(look.wish.span.shape, dtype=np.bool_)
    has[rows] = True
    return has, look.made.held.with_rows(rows, part)


def _in_wind(look: Looked, blow: Blown) -> State:
    has, held = _only(look, blow.rows, of_loaded(blow.hang))
    nothing = np.full(look.wish.span.shape, np.nan)
    return State("wind", "indicative", look.setting.temperatures[1], has, held, nothing, nothing, blow)


def _with_person(look: Looked, person: Person) -> State:
    has, held = _only(look, person.rows, of_loaded(person.hang))
    gap, place = np.full(look.wish.span.shape, np.nan), np.full(look.wish.span.shape, np.nan)
    rows = person.rows
    hanger = np.concatenate([look.marked.hanger[rows], np.zeros((len(rows), 1))], axis=1)
    gap[rows], place[rows] = least_over_loaded(person.hang, rows, hanger, look.ground)
    return State(person.case, "misuse", look.setting.temperatures[1], has, held, gap, place, person)
