"""The least reels for a list of pieces, in whole numbers: alike pieces put together, solved, and handed out again."""

import math
from collections import Counter, deque
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from geom.shop.columns import Columns
from geom.shop.diving import best_of, dive
from geom.shop.filling import (
    Job,
    Reel,
    complete,
    cost_of,
    count_bound,
    first_fit_decreasing,
    length_bound,
)
from geom.shop.fullest import fullest_reels

__all__ = ["Cutting", "Sold", "Solved", "least_reels"]

# Jobs of so few pieces are looked through whole, in so many steps (0.2 s at the most).
_FEW = 30
_STEPS = 100_000
_SHIFTS = 300_000
# Work of column generation, in cells of its knapsack tables or their like: about 5 s on one core. A job of more
# different lengths than this would not come far with it, and first-fit decreasing is near its bound there.
_WORK = 10_000_000_000
_KINDS = 600


@dataclass(frozen=True)
class Sold:
    """A length that a stock is sold in: what it holds, and what it counts in the sum to be least."""

    holds: int
    price: int


@dataclass(frozen=True)
class Cutting:
    """`times` reels of one sold length that are cut alike; `left` is what stays of each."""

    sold: Sold
    times: int
    cuts: tuple[tuple[int, int], ...]  # (place in the list of pieces, how many)
    left: int
    flush: bool  # the last piece ends where the reel does, and needs no cut

    @property
    def cut_count(self) -> int:
        """How many cuts each reel takes."""
        return sum(number for _, number in self.cuts) - self.flush


@dataclass(frozen=True)
class Solved:
    """The cuttings, and the bounds proven on the number of reels and on their price."""

    cuttings: tuple[Cutting, ...]
    least_count: int = 0
    least_price: int = 0


def least_reels(pieces: Sequence[int], counts: Sequence[int], sold: Sequence[Sold], lost: int) -> Solved:
    """Return the cheapest reels found for the pieces; each piece fits on the longest.

    Parameters
    ----------
    pieces, counts : sequence of int, shape (n,)
        Length and number of each, both above zero.
    sold : sequence of Sold
        The lengths to be had; of a longer one the price is not lower.
    lost : int
        What a cut takes.
    """
    waiting: dict[int, deque[list[int]]] = {}
    for place, (piece, count) in enumerate(zip(pieces, counts, strict=True)):
        waiting.setdefault(piece + lost, deque()).append([place, count])
    sizes = sorted(waiting)
    offered = _offered(sold, sizes[0] - lost)
    measure = math.gcd(*sizes)
    price = math.gcd(*(each.price for each in offered))
    reels, least_count, least_cost = _solve(
        Job(
            sizes=tuple(size // measure for size in sizes),
            demand=tuple(sum(count for _, count in waiting[size]) for size in sizes),
            capacities=tuple((each.holds + lost) // measure for each in offered),
            costs=tuple(each.price // price for each in offered),
        )
    )
    cuttings = _hand_out(reels, [waiting[size] for size in sizes], offered, sizes, lost)
    return Solved(tuple(cuttings), least_count, least_cost * price)


def _offered(sold: Sequence[Sold], shortest: int) -> list[Sold]:
    """Return the sold lengths that are of use, rising; of those that hold as much the cheapest."""
    cheapest = {each.holds: each for each in sorted(sold, key=lambda each: -each.price)}
    return [cheapest[holds] for holds in sorted(cheapest) if holds >= shortest]


def _solve(job: Job) -> tuple[list[Reel], int, int]:
    """Return the best reels found, and the least number and the least cost of reels that are proven."""
    longest = job.sizes[-1]
    usable = [stock for stock, room in enumerate(job.capacities) if room >= longest]
    best = best_of(job, *(first_fit_decreasing(job, stock=stock) for stock in usable))
    count = count_bound(job)
    cost = max(length_bound(job), count * job.costs[0])
    if cost < cost_of(job, best) and (full := fullest_reels(job, _SHIFTS)):
        best = best_of(job, best, full)
    if cost < cost_of(job, best) and sum(job.demand) <= _FEW:
        found, everything = complete(job, under=cost_of(job, best), work=_STEPS)
        best = best if found is None else found
        cost = cost_of(job, best) if everything else cost
    if cost < cost_of(job, best) and len(job.sizes) <= _KINDS:
        columns = Columns(job, _WORK, least_cost=cost, least_count=count)
        columns.add(best)
        best = dive(columns, best)
        cost, count = columns.least_cost, columns.least_count
    if len(job.costs) == 1:
        count = max(count, -(-cost // job.costs[0]))
    return best, count, cost


def _hand_out(
    reels: list[Reel], waiting: list[deque[list[int]]], offered: list[Sold], sizes: Sequence[int], lost: int
) -> Iterator[Cutting]:
    """Yield the reels in terms of the pieces as listed: `waiting[kind]` holds [place, how many] in turn."""
    same: Counter[tuple[int, tuple[tuple[int, int], ...]]] = Counter()
    for reel in reels:
        same[reel.stock, reel.cuts[::-1]] += reel.times
    for (stock, filling), count in sorted(same.items(), reverse=True):
        sold, times = offered[stock], count
        spare = sold.holds + lost - sum(sizes[kind] * number for kind, number in filling)
        while times:
            cuts = [cut for kind, number in filling for cut in _next(waiting[kind], number)]
            # so many reels in a row can be cut alike before one of the places runs out
            alike = min([times, *(place[1] // number for place, number in cuts)])
            for place, number in cuts:
                place[1] -= number * alike
            times -= alike
            named = tuple((place[0], number) for place, number in cuts)
            yield Cutting(sold, alike, named, left=max(0, spare - lost), flush=spare == 0)
            for kind, _ in filling:
                while waiting[kind] and not waiting[kind][0][1]:
                    waiting[kind].popleft()


def _next(queue: deque[list[int]], number: int) -> Iterator[tuple[list[int], int]]:
    """Yield the places that the next `number` pieces of one length go to, and how many to each."""
    for place in queue:
        taken = min(number, place[1])
        yield place, taken
        number -= taken
        if not number:
            return
