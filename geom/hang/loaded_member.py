"""A member with loads as it hangs: what follows from its sections and the tension it starts with."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import spread as even
from geom.hang.chunked import Floats
from geom.hang.roots import newton
from geom.hang.sections import Index, Sections, law, reach, starts, stretched_length


@dataclass(frozen=True, eq=False)
class Course:
    """Members section by section: n of them, K sections each.

    Attributes
    ----------
    nodes : ndarray, shape (n, K + 1, 3)
        Section ends from the support `from`: along the span, to its left, upward; metres.
    before, after : ndarray, shape (n, K, 3)
        Tension at the start and at the end of each section, drawn forward, newton.
    turn : ndarray, shape (n, K)
        By how much asinh(slope) grows over each section, where there is a spread load.
    stretched : ndarray, shape (n, K)
        Lengths as they hang, metres.
    """

    nodes: Floats
    before: Floats
    after: Floats
    turn: Floats
    stretched: Floats


@dataclass(frozen=True, eq=False)
class Loaded:
    """Members under loads, as arrays with one axis of members; made by `geom.hang.loaded.hang`.

    Everything is NaN for a member that cannot hang. Vectors have the parts along the span, to its left (seen from
    `from`) and upward.

    Attributes
    ----------
    span, level_difference : ndarray, shape (n,)
        Metres.
    sections : Sections
        The stretches between loads and changes of stock.
    tension : ndarray, shape (n, 3)
        At the start of the member, drawn forward, newton: the pull on the support `from`.
    spread : ndarray, shape (n,)
        Load on the plan, newton per metre.
    node_of_load : ndarray of int, shape (n, loads)
        Which section ends at each load, in the order the loads were given; -1 for one that was left out.
    """

    span: Floats
    level_difference: Floats
    sections: Sections
    tension: Floats
    spread: Floats
    node_of_load: Index

    @cached_property
    def course(self) -> Course:
        """The members followed from load to load."""
        with np.errstate(all="ignore"):
            course = _plain_course(self.sections, self.tension)
            chosen = np.flatnonzero(self.spread > 0.0)
            if chosen.size:
                part = _spread_course(self.sections.of(chosen), self.tension[chosen], self.spread[chosen])
                for name in ("nodes", "before", "after", "turn", "stretched"):
                    getattr(course, name)[chosen] = getattr(part, name)
        return course

    @cached_property
    def length(self) -> Floats:
        """Unstretched length, metres, (n,)."""
        return np.asarray(self.sections.length.sum(axis=1))

    @cached_property
    def hung_length(self) -> Floats:
        """Length as it hangs, stretched, metres, (n,)."""
        return np.asarray(self.course.stretched.sum(axis=1))

    @property
    def horizontal(self) -> Floats:
        """Pull along the span, the same all along, newton, (n,)."""
        return self.tension[:, 0]

    @property
    def pull_from(self) -> Floats:
        """Force on the support `from`, newton, (n, 3)."""
        return self.tension

    @property
    def pull_to(self) -> Floats:
        """Force on the support `to`, newton, (n, 3)."""
        return -self.course.after[:, -1]

    @cached_property
    def load_arcs(self) -> Floats:
        """Unstretched arcs from `from` to the loads, metres, (n, loads)."""
        return self._at_loads(np.cumsum(self.sections.length, axis=1))

    @cached_property
    def load_places(self) -> Floats:
        """Points of the member that carry the loads, metres, (n, loads, 3)."""
        return self._at_loads(self.course.nodes[:, 1:])

    @cached_property
    def load_tensions(self) -> Floats:
        """Tension before and after each load, drawn forward, newton, (n, loads, 2, 3)."""
        before = self._at_loads(self.course.after)
        return np.stack([before, before - self._at_loads(self.sections.point)], axis=2)

    @cached_property
    def lowest_point(self) -> Floats:
        """Lowest point of the member, metres, (n, 3)."""
        return self._extreme(np.zeros_like(self.span), lowest=True)

    @property
    def lowest(self) -> Floats:
        """Elevation of the lowest point over `from`, metres, (n,); 0 or negative but for upward loads."""
        return self.lowest_point[:, 2]

    @cached_property
    def sag_point(self) -> Floats:
        """Point of the member farthest under the chord, metres, (n, 3)."""
        with np.errstate(all="ignore"):
            return self._extreme(self.level_difference / self.span, lowest=False)

    @cached_property
    def sag(self) -> Floats:
        """Greatest vertical distance under the chord, metres, (n,); that under the upper support on a plumb line."""
        with np.errstate(all="ignore"):
            chord = self.level_difference * self.sag_point[:, 0] / self.span
        plumb = np.maximum(self.level_difference, 0.0) - self.lowest
        return np.where(self.span > 0.0, chord - self.sag_point[:, 2], plumb)

    @cached_property
    def sag_mid(self) -> Floats:
        """Vertical distance under the chord at mid-span, metres, (n,)."""
        middle = self.at_plan(0.5 * self.span[:, np.newaxis])
        return 0.5 * self.level_difference - middle[:, 0, 2]

    def at_arc(self, distance: ArrayLike) -> Floats:
        """Give points at unstretched distances along the members, metres, (n, q, 3).

        Parameters
        ----------
        distance : array_like, shape (q,) or (n, q)
            Unstretched distances from `from`, between the supports, metres.
        """
        arcs = np.broadcast_to(np.asarray(distance, dtype=np.float64), (len(self.span), np.shape(distance)[-1]))
        ends = np.cumsum(self.sections.length, axis=1)
        which = (arcs[:, :, np.newaxis] >= ends[:, np.newaxis, :-1]).sum(axis=2)
        begin = np.take_along_axis(ends - self.sections.length, which, axis=1)
        return self._partway(which, arcs - begin)

    def at_plan(self, distance: ArrayLike) -> Floats:
        """Give points at plan distances from `from`, metres, (n, q, 3), each found on the member by its arc.

        Parameters
        ----------
        distance : array_like, shape (q,) or (n, q)
            Between the supports, metres.
        """
        x = np.broadcast_to(np.asarray(distance, dtype=np.float64), (len(self.span), np.shape(distance)[-1]))
        nodes = self.course.nodes[:, :, 0]
        which = (x[:, :, np.newaxis] >= nodes[:, np.newaxis, 1:-1]).sum(axis=2)
        over = x - np.take_along_axis(nodes, which, axis=1)
        flat_which, flat_over = which.reshape(-1), over.reshape(-1)
        member = np.repeat(np.arange(len(x)), x.shape[1])
        with np.errstate(all="ignore"):
            arc = self._arc_over(member, flat_which, flat_over)
        return self._partway(which, arc.reshape(x.shape))

    def _at_loads(self, values: Floats) -> Floats:
        which = self.node_of_load
        picked = values[np.arange(len(values))[:, np.newaxis], np.maximum(which, 0)]
        return np.where((which >= 0).reshape(which.shape + (1,) * (picked.ndim - 2)), picked, np.nan)

    def _partway(self, which: Index, arc: Floats) -> Floats:
        """Give the points an arc (n, q) after the start of the section `which` (n, q)."""
        rows = np.arange(len(which))[:, np.newaxis]
        own, course = self.sections, self.course
        stiffness, load, start = own.stiffness[rows, which], own.load[rows, which], course.before[rows, which]
        with np.errstate(all="ignore"):
            part = _after(arc, stiffness, load, start)
            chosen = np.flatnonzero(self.spread > 0.0)
            if chosen.size:
                shape = arc[chosen].shape
                stock, phi0 = _even_stock(start[chosen], load[chosen], stiffness[chosen], self.spread[chosen])
                turn = even.turn_of_length(stock, phi0, arc[chosen].reshape(-1))
                between = even.extent(stock, phi0, turn)
                part[chosen] = _flat_vectors(between.plan, between.rise, shape)
        return course.nodes[rows, which] + part

    def _arc_over(self, member: Index, which: Index, over: Floats) -> Floats:
        """Give the arcs after the start of a section that lie over given plan lengths, all flat."""
        own = self.sections
        size, stiffness = own.length[member, which], own.stiffness[member, which]
        load, start = own.load[member, which], self.course.before[member, which]
        spread = self.spread[member]
        whole = self.course.nodes[member, which + 1, 0] - self.course.nodes[member, which, 0]
        columns = [*load.T, *start.T]
        arc = newton(_off_plan, size * over / whole, over, stiffness, *columns, bracket=(0.0, size), unit=1e-300)
        arc = np.where(over <= 0.0, 0.0, np.where(over >= whole, size, arc))
        chosen = np.flatnonzero(spread > 0.0)
        if chosen.size:
            stock, phi0 = _even_stock(
                start[chosen, np.newaxis], load[chosen, np.newaxis], stiffness[chosen, np.newaxis], spread[chosen]
            )
            arc[chosen] = even.extent(stock, phi0, even.turn_of_plan(stock, phi0, over[chosen])).length
        return arc

    def _extreme(self, slope: Floats, *, lowest: bool) -> Floats:
        """Give the point farthest under a line of given slope: at a load, or where the member runs parallel to it."""
        own, course, t = self.sections, self.course, slope[:, np.newaxis]
        with np.errstate(all="ignore"):
            force = course.before[:, :, 2] - t * course.before[:, :, 0]
            arc = force / (own.load[:, :, 2] - t * own.load[:, :, 0])
            chosen = np.flatnonzero(self.spread > 0.0)
            if chosen.size:
                arc[chosen] = self._parallel_arc(chosen, t[chosen])
        arc = np.clip(np.where(np.isnan(arc), 0.0, arc), 0.0, own.length)
        count = arc.shape[1]
        inside = self._partway(np.broadcast_to(np.arange(count), arc.shape), arc)
        points = np.concatenate([inside, course.nodes], axis=1)
        under = points[:, :, 2] if lowest else points[:, :, 2] - t * points[:, :, 0]
        missing = np.isnan(under).any(axis=1)
        best = np.argmin(np.where(np.isnan(under), np.inf, under), axis=1)
        return np.where(missing[:, np.newaxis], np.nan, points[np.arange(len(points)), best])

    def _parallel_arc(self, chosen: Index, slope: Floats) -> Floats:
        own, start = self.sections.of(chosen), self.course.before[chosen]
        stock, phi0 = _even_stock(start, own.load, own.stiffness, self.spread[chosen])
        turn = np.clip(np.arcsinh(np.broadcast_to(slope, own.length.shape)).reshape(-1) - phi0, 0.0, None)
        turn = np.minimum(turn, self.course.turn[chosen].reshape(-1))
        return even.extent(stock, phi0, turn).length.reshape(own.length.shape)


def _plain_course(sections: Sections, tension: Floats) -> Course:
    part, before = law(sections), starts(sections, tension)
    middle = tension[:, np.newaxis] - part.lost
    nodes = np.zeros((len(tension), part.length.shape[1] + 1, 3))
    np.cumsum(reach(part, middle), axis=1, out=nodes[:, 1:])
    after = before - sections.load * sections.length[..., np.newaxis]
    return Course(nodes, before, after, np.zeros_like(part.length), stretched_length(part, middle))


def _spread_course(sections: Sections, tension: Floats, spread: Floats) -> Course:
    n, count = sections.length.shape
    nodes, before, after = np.zeros((n, count + 1, 3)), np.zeros((n, count, 3)), np.zeros((n, count, 3))
    turn, stretched = np.zeros((n, count)), np.zeros((n, count))
    here = tension.copy()
    for k in range(count):
        before[:, k] = after[:, k] = here
        load, stiffness = sections.load[:, k, np.newaxis], sections.stiffness[:, k, np.newaxis]
        stock, phi0 = _even_stock(here[:, np.newaxis], load, stiffness, spread)
        turn[:, k] = even.turn_of_length(stock, phi0, sections.length[:, k])
        between = even.extent(stock, phi0, turn[:, k])
        nodes[:, k + 1] = nodes[:, k]
        nodes[:, k + 1, 0] += between.plan
        nodes[:, k + 1, 2] += between.rise
        stretched[:, k] = even.stretched_length(stock, phi0, turn[:, k])
        after[:, k, 2] = here[:, 0] * np.sinh(phi0 + turn[:, k])
        here = after[:, k] - sections.point[:, k]
    return Course(nodes, before, after, turn, stretched)


def _even_stock(start: Floats, load: Floats, stiffness: Floats, spread: Floats) -> tuple[even.Stock, Floats]:
    """Give the flat stock and asinh(slope) of sections that start with the tension `start` (n, q, 3)."""
    h, v = start[..., 0].reshape(-1), start[..., 2].reshape(-1)
    each = np.repeat(spread, stiffness.shape[1])
    return even.Stock(h, -load[..., 2].reshape(-1), each, h / stiffness.reshape(-1)), np.arcsinh(v / h)


def _flat_vectors(plan: Floats, rise: Floats, shape: tuple[int, ...]) -> Floats:
    return np.stack([plan, np.zeros_like(plan), rise], axis=1).reshape(*shape, 3)


def _after(arc: Floats, stiffness: Floats, load: Floats, start: Floats) -> Floats:
    """Give r of the first `arc` of sections, (n, q, 3)."""
    own = law(Sections(arc, stiffness, load, np.zeros_like(load)))
    return reach(own, start - 0.5 * load * arc[..., np.newaxis])


def _off_plan(arc: Floats, over: Floats, stiffness: Floats, *columns: Floats) -> tuple[Floats, Floats]:
    load, start = (np.stack(part, axis=1)[:, np.newaxis] for part in (columns[:3], columns[3:]))
    size = arc[:, np.newaxis]
    plan = _after(size, stiffness[:, np.newaxis], load, start)[:, 0, 0]
    there = start[:, 0] - load[:, 0] * size
    pull = np.sqrt(np.einsum("ni,ni->n", there, there))
    return plan - over, there[:, 0] * (1.0 / stiffness + 1.0 / pull)
