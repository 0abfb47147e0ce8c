"""Which curve of a family passes two springings and holds one fact, when the springings lie on a parallel of it.

For shapes whose radius grows with their scale at every slope (geom.arch.shapes) each fact below falls as the scale
grows: of two such arcs over one chord the smaller scale lies above. So each is the root of one falling function of the
scale, found inside a bracket. That holds for a parallel at a fixed offset, and at one in proportion to the scale.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from scipy.optimize import brentq

from geom.arch.refusal import NoArch
from geom.arch.shapes import Catenary, Shape
from geom.errors import SolveError

Family = Callable[[float], Shape]

_FINE = 4.0 * np.finfo(np.float64).eps  # what brentq may be asked for at most
_DOUBLINGS = 100  # of the scale over its floor, either way: flatter or steeper than any double tells apart
_FOLDING = 1e-9  # of the span: a scale that near its floor has no smooth parallel any more
_STEEPEST = 30.0  # scales in a span: there the rise is 5e4 spans
_FLATTEST = (
    1e6  # spans in a scale: there the rise is an eight-millionth of the span, under what is set out over any span
)
_TALLEST = 1e3  # chords in a rise, a length or a passing point's height: past it nothing is built


@dataclass(frozen=True)
class Rise:
    """Height of the line's highest point over its lower springing, m."""

    value: float


@dataclass(frozen=True)
class Length:
    """Length of the line from springing to springing, m."""

    value: float


@dataclass(frozen=True)
class Through:
    """A point of the line: `x` along the span from the ``from`` springing and `z` over that springing, m."""

    x: float
    z: float


@dataclass(frozen=True)
class Scale:
    """The scale of the shape itself, m (of a catenary the parameter a = H/w)."""

    value: float


Fact = Rise | Length | Through | Scale

KEYS: dict[type[Fact], str] = {Rise: "rise", Length: "length", Through: "through", Scale: "thrust"}


class Folds(NoArch):
    """No member of the family is smooth enough: the parallel asked for would fold before the fact is met."""


@dataclass(frozen=True)
class Fit:
    """A shape, the offset of its parallel that meets springings and fact, and that parallel's ends (its parameters)."""

    shape: Shape
    offset: float
    start: float
    end: float

    @property
    def crown_inside(self) -> bool:
        """Whether the line has its highest point between its springings."""
        return self.start <= 0.0 <= self.end


def fit_chord(shape: Shape, offset: float, span: float, level: float) -> Fit:
    """Return the arc of a shape's parallel whose ends lie (`span`, `level`) m apart.

    There is one: moved along the curve, a chord of constant span turns from rising to falling steadily (concavity).
    """
    start, end = shape.chord(span, level)
    if offset == 0.0:
        return Fit(shape, offset, start, end)
    if level == 0.0:
        end = float(shape.at_x(0.5 * span, offset))
        return Fit(shape, offset, -end, end)

    def ends(x: float) -> tuple[float, float]:
        first, last = shape.at_x(np.array([x, x + span]), offset)
        return float(first), float(last)

    def excess(x: float) -> float:
        first, last = ends(x)
        return float(shape.drop(first, offset) - shape.drop(last, offset)) - level

    guess = float(shape.point(start)[0])
    low, high = _bracket(excess, guess, abs(offset) + 1e-3 * span)
    return Fit(shape, offset, *ends(_root(excess, low, high)))


def fit(
    span: float, level: float, fact: Fact, *, family: Family = Catenary, offset: float = 0.0, share: float = 0.0
) -> Fit:
    """Return the shape of a family one of whose parallels meets two springings and a fact.

    Parameters
    ----------
    span : float
        Distance of the springings on plan, m.
    level : float
        Height of the ``to`` springing over the ``from`` one, m.
    fact : Rise, Length, Through or Scale
        Of the parallel.
    family : callable
        Makes the shape of a scale.
    offset, share : float
        The parallel's offset (m, positive outward) is `offset` and `share` of the scale, which is not under -1.

    Raises
    ------
    SolveError
        If no arch has the fact: key and what would be right.
    Folds
        If the fact can only be met by a parallel that folds.
    """
    if isinstance(fact, Scale):
        _check_scale(span, fact)
        return fit_chord(family(fact.value), offset + share * fact.value, span, level)
    _check(span, level, fact)
    floor = max(0.0, -offset / (1.0 + share)) if share > -1.0 else 0.0  # from where on the parallel does not fold

    def at(log: float) -> Fit:
        scale = floor + math.exp(log)
        return fit_chord(family(scale), offset + share * scale, span, level)

    def shortfall(log: float) -> float:
        return _target(fact) - _measure(at(log), fact, level)

    guess = _guess(span, level, fact)
    least = max(_FOLDING * span, span / _STEEPEST - floor)
    low, high = _scale_bracket(shortfall, math.log(max(guess - floor, 0.1 * guess)), math.log(least))
    found = at(_root(shortfall, low, high))
    _check_scale(span, fact, found.shape.scale)
    return found


def _check_scale(span: float, fact: Fact, scale: float = math.nan) -> None:
    if isinstance(fact, Scale):
        scale = fact.value
    key = KEYS[type(fact)]
    if not scale <= _FLATTEST * span:
        raise NoArch("makes an arch too flat to be told from a straight line; give more of a curve", key=key)
    if scale < span / _STEEPEST:
        raise NoArch("makes an arch too steep to be built; give less height for the span", key=key)


def _check(span: float, level: float, fact: Fact) -> None:
    chord = math.hypot(span, level)
    if not isinstance(fact, Scale) and _target(fact) > _TALLEST * chord:
        text = "{} is over a thousand times the distance of the springings; give less"
        raise NoArch(text, _target(fact), key=KEYS[type(fact)])
    if isinstance(fact, Rise) and fact.value <= abs(level):
        raise NoArch(
            "{} over the lower springing is not over the other one, {} up; give more than {}",
            fact.value, abs(level), abs(level), key="rise",
        )  # fmt: skip
    if isinstance(fact, Length) and fact.value <= chord:
        raise NoArch(
            "{} is not longer than the {} between the springings; give more than {}",
            fact.value, chord, chord, key="length",
        )  # fmt: skip
    if isinstance(fact, Through):
        _check_through(span, level, fact)


def _check_through(span: float, level: float, fact: Through) -> None:
    if not 0.0 < fact.x < span:
        raise NoArch(
            "a point {} along is not between the springings; give one at over 0 and under {}",
            fact.x, span, key="through",
        )  # fmt: skip
    chord = level * fact.x / span
    if fact.z <= chord:
        raise NoArch(
            "a point {} over the first springing is not above the straight line between both; give more than {} there",
            fact.z, chord, key="through",
        )  # fmt: skip


def _target(fact: Fact) -> float:
    return fact.z if isinstance(fact, Through) else fact.value


def _measure(fitted: Fit, fact: Fact, level: float) -> float:
    shape, offset = fitted.shape, fitted.offset
    if isinstance(fact, Length):
        return float(shape.length(fitted.end, offset) - shape.length(fitted.start, offset))
    if isinstance(fact, Through):
        q = shape.at_x(_abscissa(fitted, fitted.start) + fact.x, offset)
        return float(shape.drop(fitted.start, offset) - shape.drop(q, offset))
    if not fitted.crown_inside:
        return abs(level)
    return float(shape.drop(fitted.start if level >= 0.0 else fitted.end, offset))


def _abscissa(fitted: Fit, q: float) -> float:
    return float(fitted.shape.point(q)[0] + fitted.offset * fitted.shape.normal(q)[0])


def _guess(span: float, level: float, fact: Fact) -> float:
    """Return a scale of the right size: the parabola's span^2/8f, its parameter u = 4f/span kept from running away.

    cosh u = 1 + 2 u f/span grows as asinh(4 f/span) between the flat arch and the steep one, within a factor of 1.4.
    """
    if isinstance(fact, Length):
        over = fact.value / math.hypot(span, level) - 1.0
        steep = math.sqrt(6.0 * over)  # of a flat arc: length/chord - 1 = u^2/6
    elif isinstance(fact, Through):
        height = fact.z - level * fact.x / span
        steep = height * span / (fact.x * (span - fact.x))
    else:
        steep = 4.0 * (_target(fact) - 0.5 * abs(level)) / span
    return 0.5 * span / math.asinh(steep)


def _scale_bracket(shortfall: Callable[[float], float], guess: float, least: float) -> tuple[float, float]:
    low = high = max(guess, least)
    for _ in range(_DOUBLINGS):
        if shortfall(low) <= 0.0:
            break
        if low <= least:
            raise Folds("the arch would have to bend more sharply than its thickness allows", key="thickness")
        high, low = low, max(low - math.log(2.0), least)
    for _ in range(_DOUBLINGS):
        if shortfall(high) >= 0.0:
            return low, high
        low, high = high, high + math.log(2.0)
    raise SolveError("the arch is flatter than can be told from a straight line; give more rise")


def _bracket(falling: Callable[[float], float], guess: float, step: float) -> tuple[float, float]:
    low, high = guess - step, guess + step
    for _ in range(_DOUBLINGS):
        if falling(low) >= 0.0:
            break
        low, step = low - step, 2.0 * step
    for _ in range(_DOUBLINGS):
        if falling(high) <= 0.0:
            return low, high
        high, step = high + step, 2.0 * step
    raise SolveError("no part of the arch's line has its ends at these springings")


def _root(function: Callable[[float], float], low: float, high: float) -> float:
    root: float = brentq(function, low, high, xtol=1e-15 * (abs(low) + abs(high) + 1e-300), rtol=_FINE)
    return root
