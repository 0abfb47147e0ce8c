r"""Members that lie on a level floor between their supports, or up to one that stands on it.

The floor bears what lies on it and, without friction, takes none of the pull: H is the same in the piece that lies and
in the strands that hang from both supports down to it. A strand ends where the vertical pull has come down to nothing;
for a chain of weight w under H, over a height h, it is sqrt(h^2 + 2 h H/w) long and (H/w) acosh(1 + w h/H) wide, and
pulls its support with H + w h. With loads and stretch it is followed from the support down. H is what makes both
strands and the piece that lies fill the span; more member than that lies loose, without any pull.
"""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import elastic_forms as forms
from geom.hang.chunked import Floats, Mask
from geom.hang.loaded_member import Loaded
from geom.hang.loading import Given, Loads, Stocks, cut, gather, tensions, to_arrays
from geom.hang.roots import newton, secant
from geom.hang.sections import Sections

_ABOVE = 1e-12  # of the length: a member whose lowest point is no farther under the floor just touches it


@dataclass(frozen=True, eq=False)
class Strand:
    """A piece of member from a support down to the floor.

    Attributes
    ----------
    length : ndarray, shape (n,)
        Unstretched length that hangs, metres.
    plan : ndarray, shape (n,)
        Plan distance from the support to where the member comes to lie, metres.
    down : ndarray, shape (n,)
        Downward pull on the support, newton.
    """

    length: Floats
    plan: Floats
    down: Floats


@dataclass(frozen=True, eq=False)
class Floored:
    """Members over a floor.

    Attributes
    ----------
    touches : ndarray of bool, shape (n,)
        Whether the member lies on the floor; where it does not, it hangs as `free`.
    horizontal : ndarray, shape (n,)
        Pull along the span, newton; 0 where member lies loose.
    at_from, at_to : Strand
        What hangs at both supports; all of a member that does not touch, up to its lowest point.
    lying : ndarray, shape (n,)
        Unstretched length that lies, metres.
    free : Loaded
        The members as they would hang without the floor.
    """

    touches: Mask
    horizontal: Floats
    at_from: Strand
    at_to: Strand
    lying: Floats
    free: Loaded

    def at_arc(self, distance: ArrayLike) -> Floats:
        """Give points at unstretched distances along the members, metres, (n, q, 3), from the support `from`.

        Member that lies loose is drawn straight, with the room there is.

        Parameters
        ----------
        distance : array_like, shape (q,) or (n, q)
            Unstretched distances from `from`, metres.
        """
        arcs = np.broadcast_to(np.asarray(distance, dtype=np.float64), (len(self.lying), np.shape(distance)[-1]))
        there, back = self._side(self.at_from, self.free.sections), self._side(self.at_to, reverse(self.free.sections))
        a, b = self.at_from.length[:, np.newaxis], self.lying[:, np.newaxis]
        first = there.at_arc(np.minimum(arcs, a))
        last = back.at_arc(np.clip(self.free.length[:, np.newaxis] - arcs, 0.0, self.at_to.length[:, np.newaxis]))
        last = last * [-1.0, 1.0, 1.0]
        last[:, :, 0] += self.free.span[:, np.newaxis]
        last[:, :, 2] += self.free.level_difference[:, np.newaxis]
        with np.errstate(all="ignore"):
            share = np.clip(np.where(b > 0.0, (arcs - a) / b, np.where(arcs > a, 1.0, 0.0)), 0.0, 1.0)[..., np.newaxis]
        lying = first + share * (last - first)
        points = np.where(share >= 1.0, last, lying)
        return np.where(self.touches[:, np.newaxis, np.newaxis], points, self.free.at_arc(arcs))

    def _side(self, own: Strand, sections: Sections) -> Loaded:
        tension = np.stack([self.horizontal, np.zeros_like(own.down), -own.down], axis=1)
        return replace(self.free, sections=sections, tension=tension)

    @property
    def pull_from(self) -> Floats:
        """Whole pull on `from`, newton, (n,)."""
        return np.hypot(self.horizontal, self.at_from.down)

    @property
    def pull_to(self) -> Floats:
        """Whole pull on `to`, newton, (n,)."""
        return np.hypot(self.horizontal, self.at_to.down)


def lay(
    span: ArrayLike, heights: tuple[ArrayLike, ArrayLike], stocks: Stocks, *, loads: Loads | None = None
) -> Floored:
    """Hang members over a floor.

    Parameters
    ----------
    span : array_like, shape (n,) or ()
        Plan distance between the supports, metres, above 0.
    heights : pair of array_like, shape (n,) or ()
        Heights of the supports `from` and `to` over the floor, metres, 0 or more.
    stocks : Stocks
        What the members are made of, each of some weight; side wind is left out.
    loads : Loads, optional
        Point loads, by their distance along the member; what comes to lie on the floor is borne by it.

    Returns
    -------
    Floored
        NaN where no equilibrium was found.

    Raises
    ------
    ValueError
        The shapes do not broadcast, or a load is placed on plan.
    """
    above_from, above_to = (np.asarray(height, dtype=np.float64) for height in heights)
    given = to_arrays(span, above_to - above_from, stocks, loads, 0.0)
    if bool(given.on_plan.any()):
        raise ValueError("a load over a floor is placed on plan: give its distance along the member")
    given = replace(given, aside=np.zeros_like(given.aside), force_aside=np.zeros_like(given.force_aside))
    first, last = (np.broadcast_to(height, given.span.shape) for height in (above_from, above_to))
    with np.errstate(all="ignore"):
        return _lay(given, first, last)


def strand(height: ArrayLike, horizontal: ArrayLike, weight: ArrayLike, stiffness: ArrayLike) -> Strand:
    """Give plain strands from supports at given heights down to a floor, under given horizontal pulls.

    Parameters
    ----------
    height, horizontal, weight, stiffness : array_like, shape (n,) or ()
        Metres; newton; newton per unstretched metre; modulus times area, newton.

    Returns
    -------
    Strand
    """
    h, pull, w, ea = np.broadcast_arrays(
        *(np.atleast_1d(np.asarray(x, float)) for x in (height, horizontal, weight, stiffness))
    )
    load = np.zeros((len(h), 1, 3))
    load[:, 0, 2] = -w
    with np.errstate(all="ignore"):
        # no strand is longer than its height and what a slope as flat as that of its foot adds
        long_enough = 2.0 * (h + np.sqrt(h * (h + 2.0 * pull / w)))
        return _strands(pull, h, Sections(long_enough[:, np.newaxis], ea[:, np.newaxis], load, np.zeros_like(load)))


def anchored(lying: ArrayLike, horizontal: ArrayLike, weight: ArrayLike, friction: ArrayLike) -> Floats:
    """Give the pull that is left for an anchor at the end of a piece that lies on a rough floor, newton.

    max(0, H - mu w l): none where the piece is longer than H/(mu w).
    """
    size, pull, w, mu = (np.asarray(x, dtype=np.float64) for x in (lying, horizontal, weight, friction))
    return np.maximum(0.0, pull - mu * w * size)


def _lay(given: Given, above_from: Floats, above_to: Floats) -> Floored:
    free = gather(given, given.at, tensions(given, given.at))
    hangs = ~np.isnan(free.lowest)
    touches = hangs & (free.lowest < -above_from - _ABOVE * given.total)
    sections, _ = cut(given, given.at)
    sides = (above_from, sections), (above_to, reverse(sections))
    h = np.where(hangs, 0.0, np.nan)
    drawn = np.flatnonzero(touches & (_width(h, *sides, given.total) < given.span))
    if drawn.size:
        one, other = ((height[drawn], own.of(drawn)) for height, own in sides)
        total, span, guess = given.total[drawn], given.span[drawn], free.horizontal[drawn]
        guess = np.where(guess > 0.0, guess, given.weight[drawn, 0] * span)

        def wide(log_h: Floats, own: Floats) -> Floats:
            which = own.astype(np.intp)
            first, last = ((height[which], sections.of(which)) for height, sections in (one, other))
            return np.log(_width(np.exp(log_h), first, last, total[which]) / span[which])

        h[drawn] = np.exp(secant(wide, np.log(guess), np.arange(drawn.size, dtype=np.float64)))
    first, last = (_strands(h, *side) for side in sides)
    lying = given.total - first.length - last.length
    return _joined(touches, h, (first, last), lying, free)


def _joined(touches: Mask, h: Floats, strands: tuple[Strand, Strand], lying: Floats, free: Loaded) -> Floored:
    """Put the members that do not touch among those that do."""
    low, pulls = free.lowest_point, (free.pull_from, free.pull_to)
    arc = _arc_of_lowest(free)
    hanging = (
        Strand(arc, low[:, 0], -pulls[0][:, 2]),
        Strand(free.length - arc, free.span - low[:, 0], -pulls[1][:, 2]),
    )
    first, last = (
        Strand(*(np.where(touches, getattr(own, name), getattr(other, name)) for name in ("length", "plan", "down")))
        for own, other in zip(strands, hanging, strict=True)
    )
    horizontal, lies = np.where(touches, h, free.horizontal), np.where(touches, lying, 0.0)
    lies[np.isnan(horizontal)] = np.nan
    return Floored(touches, horizontal, first, last, lies, free)


def _arc_of_lowest(free: Loaded) -> Floats:
    """Give the unstretched arc to where the tension is level, or passes it at a load."""
    before = free.course.before[:, :, 2]
    weight = -free.sections.load[:, :, 2]
    rest = np.clip(-before / weight, 0.0, free.sections.length)
    return np.asarray(np.where(before < 0.0, rest, 0.0 * before).sum(axis=1))


def _width(h: Floats, first: tuple[Floats, Sections], last: tuple[Floats, Sections], total: Floats) -> Floats:
    """Give the plan length of both strands and of what lies between them under a pull."""
    a, b = _strands(h, *first), _strands(h, *last)
    whole = (first[1].length * (1.0 + h[:, np.newaxis] / first[1].stiffness)).sum(axis=1)
    hung = _drawn(h, first[1], a.length) + _drawn(h, last[1], b.length)
    return a.plan + b.plan + np.where(a.length + b.length < total, whole - hung, 0.0)


def _drawn(h: Floats, sections: Sections, length: Floats) -> Floats:
    """Give how long the first unstretched length of the sections is under a pull."""
    begin = np.cumsum(sections.length, axis=1) - sections.length
    part = np.clip(length[:, np.newaxis] - begin, 0.0, sections.length)
    return np.asarray((part * (1.0 + h[:, np.newaxis] / sections.stiffness)).sum(axis=1))


def reverse(own: Sections) -> Sections:
    """Give the sections as seen from the other support, loads again at the end of each."""
    point = np.roll(own.point[:, ::-1], -1, axis=1)
    return Sections(own.length[:, ::-1], own.stiffness[:, ::-1], own.load[:, ::-1], point)


def _strands(h: Floats, height: Floats, own: Sections) -> Strand:
    """Find the vertical pulls with which strands come down to the floor."""
    load = (own.length * -own.load[:, :, 2] - own.point[:, :, 2]).sum(axis=1)
    w = load / own.length.sum(axis=1)
    start = np.sqrt(w * height * (w * height + 2.0 * h))
    rows = np.arange(len(h), dtype=np.float64)

    def off(v: Floats, which: Floats) -> tuple[Floats, Floats]:
        chosen = which.astype(np.intp)
        drop, slope, _, _ = _followed(v, h[chosen], own.of(chosen))
        return drop - height[chosen], slope

    start = np.where((height > 0.0) & ~np.isnan(h), start, np.nan)
    down = np.where(height == 0.0, 0.0, newton(off, start, rows, bracket=(0.0, np.inf), reach=np.inf))
    _, _, plan, length = _followed(down, h, own)
    return Strand(length, plan, down)


def _followed(v: Floats, h: Floats, own: Sections) -> tuple[Floats, Floats, Floats, Floats]:
    """Give drop, its derivative by the vertical pull, plan length and unstretched length of strands."""
    drop, slope, plan, length = (np.zeros_like(v) for _ in range(4))
    growth = np.ones_like(v)
    for k in range(own.length.shape[1]):
        w, ea = -own.load[:, k, 2], own.stiffness[:, k]
        s = np.minimum(own.length[:, k], v / w)
        below = np.where(s < own.length[:, k], 0.0, v - w * s)
        t, t_below = np.hypot(h, v), np.hypot(h, below)
        drop += s * (v + below) * (1.0 / np.maximum(t + t_below, _TINY) + 0.5 / ea)
        whole = below > 0.0
        by_v = v * (1.0 / np.maximum(t, _TINY) + 1.0 / ea)
        slope += growth / w * (by_v - np.where(whole, below * (1.0 / np.maximum(t_below, _TINY) + 1.0 / ea), 0.0))
        turned = forms.angle(h, below, v - below)
        plan += np.where(h > 0.0, h * (turned / w + s / ea), 0.0)
        length += s
        v = np.maximum(below + own.point[:, k, 2], 0.0)
        growth = np.where(v > 0.0, growth, 0.0)
    return drop, slope, plan, length


_TINY = 1e-300
