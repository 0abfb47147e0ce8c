"""Following members from load to load, in one plane, under a given horizontal pull and from a given slope.

A section ends at a given unstretched arc or at a given plan distance, the last at the other support. It is an elastic
catenary (`geom.hang.sections`), straight where it weighs nothing, or under a load spread over the plan the curve of
`geom.hang.spread`. Derivatives by both unknowns, ln H and asinh of the slope at `from`, are carried along.
"""

from collections.abc import Callable
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from geom.hang import elastic_forms as forms
from geom.hang import spread as even
from geom.hang.chunked import Floats, Mask
from geom.hang.sections import Index, Law, reach_and_flexibility

_STRAIGHT = 1e-17  # turn between the ends, under which a section is straight to the last digit


@dataclass(frozen=True, eq=False)
class Way:
    """Sections in order, K of each of n members.

    Attributes
    ----------
    weight, stiffness : ndarray, shape (n, K)
        Newton per unstretched metre, newton.
    end : ndarray, shape (n, K)
        Where each ends: an unstretched arc from `from`, or a plan distance; metres. The last: the span.
    on_plan : ndarray of bool, shape (n, K)
        Which; the last is on plan.
    force : ndarray, shape (n, K)
        Load at the end of each section, newton, downward; none at the last.
    spread : ndarray, shape (n,)
        Newton per metre of plan.
    """

    weight: Floats
    stiffness: Floats
    end: Floats
    on_plan: Mask
    force: Floats
    spread: Floats

    def of(self, chosen: Index) -> "Way":
        """Give some of the members."""
        return Way(
            self.weight[chosen], self.stiffness[chosen], self.end[chosen], self.on_plan[chosen], self.force[chosen],
            self.spread[chosen],
        )  # fmt: skip


class Walked(NamedTuple):
    """Where a walk leads: arcs and elevations of all section ends (n, K), and their derivatives at the last."""

    arc: Floats
    rise: Floats
    slope_of_rise: Floats
    slope_of_arc: Floats


class _Ran(NamedTuple):
    """A section run through: plan, rise, arc, vertical tension at its end, and their derivatives by both unknowns."""

    plan: Floats
    rise: Floats
    arc: Floats
    vertical: Floats
    by: Floats  # (4, n, 2), in this order


def walk(way: Way, x: Floats) -> Walked:
    """Follow the members from load to load."""
    n, count = way.end.shape
    h = np.exp(x[:, 0])
    h_by = np.stack([h, np.zeros(n)], axis=1)
    vertical = h * np.sinh(x[:, 1])
    vertical_by = np.stack([vertical, h * np.cosh(x[:, 1])], axis=1)
    here, by = np.zeros((3, n)), np.zeros((3, n, 2))
    arcs, rises = np.empty((n, count)), np.empty((n, count))
    for k in range(count):
        on_plan = way.on_plan[:, k]
        target = way.end[:, k] - np.where(on_plan, here[0], here[2])
        target_by = -np.where(on_plan[:, np.newaxis], by[0], by[2])
        own = _Section(h, vertical, way.weight[:, k], way.stiffness[:, k], way.spread)
        ran = _along(own, target, on_plan, (h_by, vertical_by, target_by))
        here += ran.plan, ran.rise, ran.arc
        by += ran.by[:3]
        vertical, vertical_by = ran.vertical + way.force[:, k], ran.by[3]
        arcs[:, k], rises[:, k] = here[2], here[1]
    return Walked(arcs, rises, by[1], by[2])


class _Section(NamedTuple):
    horizontal: Floats
    vertical: Floats
    weight: Floats
    stiffness: Floats
    spread: Floats


def _along(own: _Section, target: Floats, on_plan: Mask, known: tuple[Floats, Floats, Floats]) -> _Ran:
    """Run through one section of every member, each by the law it needs."""
    spread = own.spread > 0.0
    if spread.all() or not spread.any():
        return (_evenly if spread.all() else _plainly)(own, target, on_plan, known)
    size = len(target)
    result = _Ran(np.empty(size), np.empty(size), np.empty(size), np.empty(size), np.empty((4, size, 2)))
    for law, chosen in ((_evenly, np.flatnonzero(spread)), (_plainly, np.flatnonzero(~spread))):
        part = law(
            _Section(*(values[chosen] for values in own)), target[chosen], on_plan[chosen],
            (known[0][chosen], known[1][chosen], known[2][chosen]),
        )  # fmt: skip
        for whole, values in zip(result[:4], part[:4], strict=True):
            whole[chosen] = values
        result.by[:, chosen] = part.by
    return result


def _plainly(own: _Section, target: Floats, on_plan: Mask, known: tuple[Floats, Floats, Floats]) -> _Ran:
    """Run through sections without a spread load: elastic catenaries, or straight where they weigh nothing."""
    h_by, v_by, target_by = known
    length = _length_for(own, target, on_plan)
    part, middle = _as_law(own, length)
    reached, flexibility = reach_and_flexibility(part, middle)
    end = own.vertical + own.weight * length
    give = 1.0 / own.stiffness + 1.0 / np.hypot(own.horizontal, end)
    steady = [flexibility[:, i, 0, np.newaxis] * h_by + flexibility[:, i, 2, np.newaxis] * v_by for i in (0, 2)]
    ahead = own.horizontal * give, end * give
    length_by = np.where(on_plan[:, np.newaxis], (target_by - steady[0]) / ahead[0][:, np.newaxis], target_by)
    plan_by = steady[0] + ahead[0][:, np.newaxis] * length_by
    rise_by = steady[1] + ahead[1][:, np.newaxis] * length_by
    end_by = v_by + own.weight[:, np.newaxis] * length_by
    return _Ran(reached[:, 0], reached[:, 2], length, end, np.stack([plan_by, rise_by, length_by, end_by]))


def _length_for(own: _Section, target: Floats, on_plan: Mask) -> Floats:
    """Give the unstretched lengths: the targets, or what lies over them."""
    h, _, weight, stiffness, _ = own
    phi0 = np.arcsinh(own.vertical / h)
    turned = target * weight / h
    d = forms.turn(turned / (1.0 + h / stiffness * np.cosh(phi0)), phi0, h / stiffness, turned)
    curved = 2.0 * h / weight * np.cosh(phi0 + 0.5 * d) * np.sinh(0.5 * d)
    straight = target / (h * (1.0 / stiffness + 1.0 / np.hypot(h, own.vertical)))
    # weightless, or so light that the curve has no digits
    return np.where(on_plan, np.where(np.abs(turned) > _STRAIGHT, curved, straight), target)


def _as_law(own: _Section, length: Floats) -> tuple[Law, Floats]:
    """Give one section of each member in the form of `geom.hang.sections`, and the tension at mid-length."""
    n = len(length)
    up = np.zeros((n, 1, 3))
    up[..., 2] = 1.0
    middle = np.zeros((n, 1, 3))
    middle[:, 0, 0] = own.horizontal
    middle[:, 0, 2] = own.vertical + 0.5 * own.weight * length
    columns = (length, length / own.stiffness, own.weight)
    size, give, weight = (values[:, np.newaxis] for values in columns)
    return Law(size, give, up, weight, np.zeros((n, 1, 3))), middle


def _evenly(own: _Section, target: Floats, on_plan: Mask, known: tuple[Floats, Floats, Floats]) -> _Ran:
    """Run through sections with a spread load."""
    h_by, v_by, target_by = known
    h = own.horizontal
    stock = even.Stock(h, own.weight, own.spread, h / own.stiffness)
    phi0 = np.arcsinh(own.vertical / h)
    turn = np.empty_like(phi0)
    ways: tuple[tuple[Mask, Callable[..., Floats]], ...] = (
        (on_plan, even.turn_of_plan), (~on_plan, even.turn_of_length),
    )  # fmt: skip
    for mask, solve_turn in ways:
        chosen = np.flatnonzero(mask)
        if chosen.size:
            turn[chosen] = solve_turn(even.Stock(*(values[chosen] for values in stock)), phi0[chosen], target[chosen])
    between = even.extent(stock, phi0, turn)
    by_h, by_start, by_end = even.growth(stock, phi0, turn, between)
    phi0_by = (v_by - np.sinh(phi0)[:, np.newaxis] * h_by) / (h * np.cosh(phi0))[:, np.newaxis]
    steady = [_column(of_h) * h_by + _column(of_start) * phi0_by for of_h, of_start in zip(by_h, by_start, strict=True)]
    fixed = np.where(on_plan[:, np.newaxis], steady[0], steady[2])
    ahead = np.where(on_plan, by_end.plan, by_end.length)
    phi1, phi1_by = phi0 + turn, (target_by - fixed) / ahead[:, np.newaxis]
    plan_by, rise_by, arc_by = (start + _column(end) * phi1_by for start, end in zip(steady, by_end, strict=True))
    end = h * np.sinh(phi1)
    end_by = np.sinh(phi1)[:, np.newaxis] * h_by + (h * np.cosh(phi1))[:, np.newaxis] * phi1_by
    return _Ran(between.plan, between.rise, between.length, end, np.stack([plan_by, rise_by, arc_by, end_by]))


def _column(values: Floats) -> Floats:
    return values[:, np.newaxis]
