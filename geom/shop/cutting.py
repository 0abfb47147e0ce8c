"""What to buy and how to cut it: the one-dimensional cutting stock problem, for bars, rope and chain.

Pieces l fit on a length S when sum(l + k) <= S + k, k being what a cut takes: no cut follows a last piece that ends
flush. Welded chain is counted in links, and a cut destroys one: pieces of n_i links fit on a reel of N when
sum(n_i + 1) <= N + 1.

First-fit decreasing is tried first, and most jobs are proven least at once by the sum of lengths or by the bound of
Martello and Toth. Small jobs are looked through whole; others go to column generation (geom.shop.columns). All is
computed in whole nanometres or links, so that a bound is a proof, and the work is limited by counting steps, never by
the clock: the same design gives the same plan on every machine.
"""

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

from geom.shop.reels import Cutting, Sold, least_reels

__all__ = ["CuttingPlan", "Pattern", "links_on", "plan", "plan_links"]

# Lengths are counted in nanometres: a sixty-fourth of an inch, 0.396875 mm, is a whole number of them.
_PER_METRE = 1_000_000_000
# A reel said to hold a whole number of links does, though a measured pitch is a rounded quotient.
_SAME_LINK = 1e-6


@dataclass(frozen=True)
class Pattern:
    """One way of cutting: `count` reels or bars of one length, all cut alike.

    Parameters
    ----------
    length : float
        Length of the reel or bar, m.
    count : int
        How many are cut so.
    cuts : tuple of (int, int)
        Place in the list of pieces, and how many of that piece are cut from each.
    left : float
        What is left of each, m.
    links : int or None
        Links on each, of chain.
    """

    length: float
    count: int
    cuts: tuple[tuple[int, int], ...]
    left: float
    links: int | None = None

    @property
    def pieces(self) -> int:
        """How many pieces are cut from each."""
        return sum(number for _, number in self.cuts)


@dataclass(frozen=True)
class CuttingPlan:
    """What to buy of one stock, and how it is cut.

    Parameters
    ----------
    needed : int or None
        Reels or bars to buy; None where a piece is longer than any of them.
    least_possible : int or None
        A proven lower bound on `needed`: no plan does with fewer.
    bought, least_bought : float
        Length of all of them, and the length that no plan can be under, m. With several lengths sold the plan is the
        one that buys the least length, not the fewest reels: one reel of 100 m for two pieces of 6 m is no gain.
    patterns : tuple of Pattern
        Fullest use of the longest pieces first.
    cut_count : int
        Cuts made, those that free the last piece of a reel from what is left included.
    links, links_lost : int or None
        Links bought, and those of them destroyed by cutting, of chain.
    too_long : tuple of int
        Places of the pieces that no length sold can hold.
    reason : str
        Why there is no plan.
    """

    needed: int | None
    least_possible: int | None
    bought: float
    least_bought: float
    patterns: tuple[Pattern, ...]
    cut_count: int = 0
    links: int | None = None
    links_lost: int | None = None
    too_long: tuple[int, ...] = ()
    reason: str = ""

    @property
    def proven(self) -> bool:
        """Whether no plan buys less."""
        return self.needed is not None and (self.needed == self.least_possible or self.bought <= self.least_bought)


def plan(
    lengths: Sequence[float], counts: Sequence[int], *, sold: Sequence[float] = (), kerf: float = 0.0
) -> CuttingPlan:
    """Return how to cut pieces from the lengths that a stock is sold in, buying the least.

    Parameters
    ----------
    lengths : sequence of float, shape (n,)
        Cut lengths, m, above zero.
    counts : sequence of int, shape (n,)
        How many of each.
    sold : sequence of float
        Lengths of whole reels or bars, m. None: one length that ends exactly where the last piece does.
    kerf : float
        What a cut takes, m.

    Raises
    ------
    ValueError
        If a length is not above zero, a count or the kerf under zero, or their numbers differ.
    """
    _check(lengths, counts, sold, kerf)
    pieces, lost = [_whole(length) for length in lengths], _whole(kerf)
    reels = [Sold(_whole(length), _whole(length)) for length in sold]
    if too_long := _too_long(pieces, counts, reels):
        worst = max(lengths[place] for place in too_long)
        return _impossible(too_long, f"{worst:g} m", f"{max(sold):g} m")
    if not sold:
        exact = _taken(pieces, counts, lost)
        reels = [Sold(exact, exact)]
    cuttings, bounds = _least(pieces, counts, reels, lost)
    patterns = tuple(
        Pattern(cutting.sold.holds / _PER_METRE, cutting.times, cutting.cuts, cutting.left / _PER_METRE)
        for cutting in cuttings
    )
    return _plan(cuttings, bounds, patterns)


def plan_links(
    links: Sequence[int],
    counts: Sequence[int],
    *,
    pitch: float,
    sold: Sequence[float] = (),
    wire: float = 0.0,
    lost: int = 1,
) -> CuttingPlan:
    """Return how to cut pieces of whole links from reels of chain, buying the least.

    Parameters
    ----------
    links : sequence of int, shape (n,)
        Links of each piece, above zero.
    counts : sequence of int, shape (n,)
        How many of each.
    pitch : float
        Inside length of a link, m.
    sold : sequence of float
        Lengths of whole reels, m, each of floor(length / pitch) links. None: one length that ends exactly where the
        last piece does; of N links it measures N p + 2 d overall.
    wire : float
        Wire d of the chain, m.
    lost : int
        Links destroyed by a cut: 1 of welded chain, 0 of ball chain or where connecting links join the pieces.

    Raises
    ------
    ValueError
        If a number of links or the pitch is not above zero, or a count under zero.
    """
    _check(links, counts, [*sold, pitch], lost)
    reels = [Sold(links_on(length, pitch), _whole(length)) for length in sold]
    if too_long := _too_long(links, counts, reels):
        worst, most = max(links[place] for place in too_long), max(reel.holds for reel in reels)
        return _impossible(too_long, f"{worst} links", f"{most} links")
    if not sold:
        exact = _taken(links, counts, lost)
        reels = [Sold(exact, _whole(exact * pitch + 2 * wire))]
    cuttings, bounds = _least(links, counts, reels, lost)
    patterns = tuple(
        Pattern(
            length=cutting.sold.price / _PER_METRE,
            count=cutting.times,
            cuts=cutting.cuts,
            left=cutting.left * pitch,
            links=cutting.sold.holds,
        )
        for cutting in cuttings
    )
    return replace(
        _plan(cuttings, bounds, patterns),
        links=sum(cutting.sold.holds * cutting.times for cutting in cuttings),
        links_lost=lost * sum(cutting.cut_count * cutting.times for cutting in cuttings),
    )


def links_on(length: float, pitch: float) -> int:
    """Return how many whole links a length of chain has, measured inside its end links."""
    return math.floor(length / pitch + _SAME_LINK)


def _whole(metres: float) -> int:
    return round(metres * _PER_METRE)


def _check(lengths: Sequence[float], counts: Sequence[int], sold: Sequence[float], kerf: float) -> None:
    if len(lengths) != len(counts):
        raise ValueError(f"{len(lengths)} lengths and {len(counts)} counts: give one count for each length")
    for length in (*lengths, *sold):
        if not 1.0 / _PER_METRE <= length < math.inf:
            raise ValueError(f"a length of {length} cannot be cut; lengths are above zero")
    if any(count < 0 for count in counts) or not 0 <= kerf < math.inf:
        raise ValueError(f"counts {counts} and what a cut takes, {kerf}, are 0 or more")


def _too_long(pieces: Sequence[int], counts: Sequence[int], reels: Sequence[Sold]) -> tuple[int, ...]:
    """Return the places of wanted pieces that are longer than the longest reel."""
    longest = max((reel.holds for reel in reels), default=math.inf)
    wanted = enumerate(zip(pieces, counts, strict=True))
    return tuple(place for place, (piece, count) in wanted if piece > longest and count)


def _taken(pieces: Sequence[int], counts: Sequence[int], lost: int) -> int:
    """Return the length that all pieces are cut from without anything left."""
    return sum((piece + lost) * count for piece, count in zip(pieces, counts, strict=True)) - lost


def _least(
    pieces: Sequence[int], counts: Sequence[int], reels: Sequence[Sold], lost: int
) -> tuple[tuple[Cutting, ...], tuple[int, int]]:
    """Return the cuttings, and the least number and price, leaving out pieces of which there are none."""
    wanted = [place for place, count in enumerate(counts) if count]
    if not wanted:
        return (), (0, 0)
    solved = least_reels([pieces[place] for place in wanted], [counts[place] for place in wanted], reels, lost)
    cuttings = tuple(
        replace(cutting, cuts=tuple((wanted[place], number) for place, number in cutting.cuts))
        for cutting in solved.cuttings
    )
    return cuttings, (solved.least_count, solved.least_price)


def _plan(cuttings: tuple[Cutting, ...], bounds: tuple[int, int], patterns: tuple[Pattern, ...]) -> CuttingPlan:
    least_count, least_price = bounds
    return CuttingPlan(
        needed=sum(cutting.times for cutting in cuttings),
        least_possible=least_count,
        bought=sum(cutting.sold.price * cutting.times for cutting in cuttings) / _PER_METRE,
        least_bought=least_price / _PER_METRE,
        patterns=patterns,
        cut_count=sum(cutting.cut_count * cutting.times for cutting in cuttings),
    )


def _impossible(too_long: tuple[int, ...], piece: str, longest: str) -> CuttingPlan:
    return CuttingPlan(
        needed=None,
        least_possible=None,
        bought=math.nan,
        least_bought=math.nan,
        patterns=(),
        too_long=too_long,
        reason=f"a piece of {piece} is longer than the longest length sold, {longest}",
    )
