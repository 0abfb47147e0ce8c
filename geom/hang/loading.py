"""Members and their loads as arrays: cut into sections, and solved with every load at its arc."""

from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import formulas, tension
from geom.hang.chunked import Floats, Mask
from geom.hang.loaded_member import Loaded
from geom.hang.sections import Index, Sections, law


@dataclass(frozen=True, eq=False)
class Stocks:
    """What members are made of, in order from `from`: m stocks each, joined end to end.

    Attributes
    ----------
    length : array_like, shape (n, m)
        Unstretched lengths, metres; 0 for one that is not there.
    weight : array_like, shape (n, m)
        Newton per unstretched metre; may be 0.
    stiffness : array_like, shape (n, m)
        Modulus times area, newton; may be infinite.
    aside : array_like, shape (n, m)
        Side wind, newton per unstretched metre, to the left of the span.
    """

    length: ArrayLike
    weight: ArrayLike
    stiffness: ArrayLike
    aside: ArrayLike = 0.0


@dataclass(frozen=True, eq=False)
class Loads:
    """Point loads, as many for each member.

    Attributes
    ----------
    at : array_like, shape (n, loads)
        Distances from `from`, metres: unstretched, along the member, or on plan. NaN for a load that is not there.
    force : array_like, shape (n, loads)
        Newton, downward.
    on_plan : array_like of bool, shape (n, loads)
        Which of both distances it is.
    aside : array_like, shape (n, loads)
        Side wind on the load, newton, to the left of the span.
    """

    at: ArrayLike
    force: ArrayLike
    on_plan: ArrayLike = False
    aside: ArrayLike = 0.0


@dataclass(frozen=True, eq=False)
class Given:
    """Everything as arrays: members (n,), stocks (n, m), loads (n, l)."""

    span: Floats
    rise: Floats
    length: Floats
    weight: Floats
    stiffness: Floats
    aside: Floats
    spread: Floats
    at: Floats
    force: Floats
    on_plan: Mask
    force_aside: Floats

    @property
    def total(self) -> Floats:
        """Whole unstretched lengths, metres, (n,)."""
        return np.asarray(self.length.sum(axis=1))

    def of(self, chosen: Index) -> "Given":
        """Give some of the members."""
        return Given(*(getattr(self, field.name)[chosen] for field in fields(self)))

    def evened(self) -> "Given":
        """Give the members with their spread load laid along them instead."""
        share = (self.spread * self.span / self.total)[:, np.newaxis]
        return replace(self, weight=self.weight + share, spread=np.zeros_like(self.spread))


def to_arrays(span: ArrayLike, rise: ArrayLike, stocks: Stocks, loads: Loads | None, spread: ArrayLike) -> Given:
    """Give everything as arrays; a load at NaN has the force NaN, at the start."""
    loads = loads or Loads(np.empty((1, 0)), np.empty((1, 0)), np.empty((1, 0), dtype=np.bool_), np.empty((1, 0)))
    stock = _table(stocks.length, stocks.weight, stocks.stiffness, stocks.aside)
    load = _table(loads.at, loads.force, loads.on_plan, loads.aside)
    member = [np.asarray(values, dtype=np.float64) for values in (span, rise, spread)]
    (n,) = np.broadcast_shapes(stock[0].shape[:1], load[0].shape[:1], *(values.shape for values in member))
    stock, load = ([np.broadcast_to(x, (n, x.shape[1])) for x in table] for table in (stock, load))
    s, v, q = (np.broadcast_to(values, (n,)) for values in member)
    missing = np.isnan(load[0])
    at, aside = (np.where(missing, 0.0, load[k]) for k in (0, 3))
    force = np.where(missing, np.nan, load[1])
    length, weight, stiffness, wind = stock
    return Given(s, v, length, weight, stiffness, wind, q, at, force, (load[2] != 0.0) & ~missing, aside)


def _table(*values: ArrayLike) -> list[Floats]:
    """Give arrays of one shape, of two axes."""
    return [np.atleast_2d(x) for x in np.broadcast_arrays(*(np.asarray(x, dtype=np.float64) for x in values))]


def tensions(given: Given, arcs: Floats) -> Floats:
    """Give the tensions at `from`, (n, 3), with all loads at arcs, and a spread load laid along the member instead."""
    sections, _ = cut(given.evened(), arcs)
    part = law(sections)
    across = np.stack([given.span, np.zeros_like(given.span), given.rise], axis=1)
    excess, _ = formulas.excess_and_chord(given.span, given.rise, given.total)
    first = tension.first_guess(sections, part, across, excess)
    first[~_possible(given, excess)] = np.nan
    return tension.solve(part, across, first)


def _possible(given: Given, excess: Floats) -> Mask:
    """Say where the member can reach and its loads lie on it."""
    rigid = np.isinf(np.where(given.length > 0.0, given.stiffness, np.inf)).all(axis=1)
    end = np.where(given.on_plan, given.span[:, np.newaxis], given.total[:, np.newaxis])
    on_it = ((given.at >= 0.0) & (given.at <= end)).all(axis=1)
    good = (given.length >= 0.0).all(axis=1) & (given.weight >= 0.0).all(axis=1) & (given.stiffness > 0.0).all(axis=1)
    finite = np.isfinite(given.span + given.rise + given.total) & (given.span >= 0.0) & (given.spread >= 0.0)
    apart = (given.span > 0.0) | (given.rise != 0.0)
    return np.asarray(good & finite & on_it & (~rigid | (excess > 0.0)) & apart)


def cut(given: Given, arcs: Floats) -> tuple[Sections, Index]:
    """Give the sections, and the order in which loads and then stock ends follow along the members."""
    n, stocks = given.length.shape
    ends = np.cumsum(given.length, axis=1)
    cuts = np.concatenate([arcs, ends[:, :-1]], axis=1)
    order = np.argsort(cuts, axis=1, kind="stable")
    bounds = np.concatenate([np.zeros((n, 1)), np.take_along_axis(cuts, order, axis=1), ends[:, -1:]], axis=1)
    which = np.concatenate([np.zeros((n, 1), dtype=np.intp), np.cumsum(order >= arcs.shape[1], axis=1)], axis=1)
    load = np.zeros((n, which.shape[1], 3))
    load[..., 1] = np.take_along_axis(given.aside, which, axis=1)
    load[..., 2] = -np.take_along_axis(given.weight, which, axis=1)
    point = np.zeros_like(load)
    forces = np.stack([given.force_aside, -np.nan_to_num(given.force)], axis=2)
    none = np.zeros((n, stocks - 1, 2))
    point[:, :-1, 1:] = np.take_along_axis(np.concatenate([forces, none], axis=1), order[..., np.newaxis], axis=1)
    stiffness = np.take_along_axis(given.stiffness, which, axis=1)
    return Sections(np.diff(bounds, axis=1), stiffness, load, point), order


def gather(given: Given, arcs: Floats, start: Floats) -> Loaded:
    """Give the members as solved, from the arcs of their loads and the tensions at `from`."""
    sections, order = cut(given, arcs)
    count = arcs.shape[1]
    places = np.argsort(order, axis=1)[:, :count]
    missing = np.isnan(start[:, 0])
    sections.length[missing] = np.nan
    span, rise = (np.where(missing, np.nan, values) for values in (given.span, given.rise))
    return Loaded(span, rise, sections, start, given.spread, np.where(np.isnan(given.force), -1, places))
