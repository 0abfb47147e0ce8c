"""Filling reels and bars one after another: first-fit decreasing, and exact completion of small jobs.

All in whole numbers. A piece of length l cut with a kerf k takes l + k of a reel of length S taken as S + k,
because the last piece needs no cut behind it when it ends flush: sum(l + k) <= S + k.
"""

from bisect import bisect_right
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

import numpy as np

__all__ = ["Job", "Reel", "complete", "cost_of", "count_bound", "count_of", "first_fit_decreasing", "length_bound"]


@dataclass(frozen=True)
class Job:
    """One cutting job in whole numbers.

    Parameters
    ----------
    sizes : tuple of int
        What each kind of piece takes, kerf included; rising, all different, all above zero.
    demand : tuple of int
        How many of each kind.
    capacities : tuple of int
        What each sold length holds, one kerf included; rising.
    costs : tuple of int
        What each sold length counts in the sum to be least; rising.
    """

    sizes: tuple[int, ...]
    demand: tuple[int, ...]
    capacities: tuple[int, ...]
    costs: tuple[int, ...]

    @cached_property
    def taken(self) -> int:
        """All that the pieces take together."""
        return sum(size * count for size, count in zip(self.sizes, self.demand, strict=True))

    def least(self, demand: tuple[int, ...]) -> "Job":
        """Return the same job with other counts, kinds that are not wanted kept."""
        return Job(self.sizes, demand, self.capacities, self.costs)

    def shortest_for(self, taken: int) -> int:
        """Return the place of the cheapest sold length that holds `taken`."""
        return next(place for place, capacity in enumerate(self.capacities) if capacity >= taken)


@dataclass(frozen=True)
class Reel:
    """`times` reels or bars of one sold length, all filled alike."""

    stock: int
    cuts: tuple[tuple[int, int], ...]  # (kind, how many), rising kinds
    times: int


def cost_of(job: Job, reels: list[Reel]) -> int:
    """Return what the reels cost."""
    return sum(job.costs[reel.stock] * reel.times for reel in reels)


def count_of(reels: list[Reel]) -> int:
    """Return how many reels there are."""
    return sum(reel.times for reel in reels)


def length_bound(job: Job) -> int:
    """Return the cost that no plan can be under, from the sum of the lengths alone.

    A reel of capacity C and cost c holds at most C, so that every unit of length costs at least the least c / C.
    """
    return min(-(-job.taken * cost // capacity) for capacity, cost in zip(job.capacities, job.costs, strict=True))


def count_bound(job: Job) -> int:
    """Return the number of reels that no plan can be under.

    Pieces of over half a reel lie one to a reel, and of the others only what they leave free is to be had. For each
    size a up to half a reel: pieces over C - a stand alone, those over C / 2 have one reel each, and pieces from a to
    C / 2 go into what is left of the latter or into more reels.

    Notes
    -----
    Bound L2 of Martello, S. and Toth, P., "Lower bounds and reduction procedures for the bin packing problem",
    Discrete Applied Mathematics 28 (1990).
    """
    room = job.capacities[-1]
    size, number = np.array(job.sizes, dtype=np.int64), np.array(job.demand, dtype=np.int64)
    many = np.concatenate([[0], np.cumsum(number)])
    long = np.concatenate([[0], np.cumsum(size * number)])
    half = int(np.searchsorted(size, room // 2, side="right"))
    start = np.arange(half + 1)  # the first kind that is looked at; `half`: none of the small ones
    alone = np.searchsorted(size, room - np.append(size[:half], 0), side="right")
    paired = many[alone] - many[half]
    free = paired * room - (long[alone] - long[half])
    more = -((free - (long[half] - long[start])) // room)
    return int(np.max(many[-1] - many[half] + np.maximum(more, 0)))


class _Shelf:
    """The pieces still to be cut, from which the longest that fits is found quickly."""

    def __init__(self, sizes: tuple[int, ...], demand: tuple[int, ...]) -> None:
        self.sizes = sizes
        self.left = list(demand)
        # below[i + 1]: a kind at or below i that may still be there (a disjoint-set forest; 0: none)
        self.below = list(range(len(sizes) + 1))

    def longest(self, room: int, under: int) -> int:
        """Return the longest kind below `under` that fits in `room`, or -1."""
        root, trail = min(under, bisect_right(self.sizes, room)), []
        while root and (self.below[root] != root or not self.left[root - 1]):
            trail.append(root)
            root = min(self.below[root], root - 1)
        for place in trail:
            self.below[place] = root
        return root - 1

    def fill(self, room: int) -> list[tuple[int, int]]:
        """Return what first-fit decreasing puts into one reel, longest first."""
        cuts = []
        kind = self.longest(room, len(self.sizes))
        while kind >= 0:
            number = min(self.left[kind], room // self.sizes[kind])
            room -= number * self.sizes[kind]
            cuts.append((kind, number))
            kind = self.longest(room, kind)
        return cuts


def first_fit_decreasing(job: Job, *, stock: int = -1) -> list[Reel]:
    """Return the reels that first-fit decreasing makes of one sold length, each then shortened if it can be.

    Longest pieces first, each into the first reel that has room. Filled reel by reel, and reels that come out
    alike are counted together, so that the work follows the number of kinds and not that of pieces.

    Parameters
    ----------
    stock : int
        Place of the sold length; the longest by default. It must hold the longest piece.

    Notes
    -----
    Johnson, D. S., Demers, A., Ullman, J. D., Garey, M. R. and Graham, R. L., "Worst-case performance bounds for
    simple one-dimensional packing algorithms", SIAM J. Comput. 3 (1974): at most 11/9 of the least, and a few.
    """
    shelf = _Shelf(job.sizes, job.demand)
    reels = []
    while cuts := shelf.fill(job.capacities[stock]):
        times = min(shelf.left[kind] // number for kind, number in cuts)
        for kind, number in cuts:
            shelf.left[kind] -= number * times
        taken = sum(job.sizes[kind] * number for kind, number in cuts)
        reels.append(Reel(job.shortest_for(taken), tuple(reversed(cuts)), times))
    return reels


class _Search:
    """Depth-first completion of a small job, a reel at a time, with a bound on the work."""

    def __init__(self, job: Job, under: int, work: int) -> None:
        self.job = job
        self.best_cost = under
        self.best: list[Reel] | None = None
        self.work = work
        self.left = list(job.demand)
        self.reels: list[Reel] = []

    def run(self, taken: int, cost: int) -> None:
        """Fill reels with what is left, `taken` in all, after reels of `cost`."""
        if taken == 0:
            self.best_cost, self.best = cost, list(self.reels)
            return
        for reel, used in self._fillings(taken, cost):
            ahead = cost + self.job.costs[reel.stock]
            if self.work < 0 or taken - used > self._holds(ahead):
                continue  # the best may have come down since the fillings were listed
            self.reels.append(reel)
            for kind, number in reel.cuts:
                self.left[kind] -= number
            self.run(taken - used, ahead)
            for kind, number in reel.cuts:
                self.left[kind] += number
            self.reels.pop()

    def _holds(self, cost: int) -> int:
        """Return the greatest length that reels can hold which, with `cost`, stay under the best cost; or -1."""
        spare = self.best_cost - 1 - cost
        job = self.job
        return max(spare * room // each for room, each in zip(job.capacities, job.costs, strict=True))

    def _fillings(self, taken: int, cost: int) -> list[tuple[Reel, int]]:
        """Return the full reels that hold the longest piece left, and what they take, best used first.

        Every reel of a best plan can be taken to be full (nothing left would still fit), and one of them holds
        the longest piece: branching on that one alone meets each plan once. A reel that wastes so much that what
        is left could no longer beat the best is passed over.
        """
        job, left = self.job, self.left
        kinds = [kind for kind, number in enumerate(left) if number]
        longest = kinds[-1]
        found = []
        left[longest] -= 1
        for stock, capacity in enumerate(job.capacities):
            room = capacity - job.sizes[longest]
            least = taken - self._holds(cost + job.costs[stock])
            if room < 0 or least > capacity:
                continue
            for cuts, spare in self._full(kinds, room, capacity - least):
                mine = dict(cuts)
                mine[longest] = mine.get(longest, 0) + 1
                if job.shortest_for(capacity - spare) == stock:
                    found.append((Reel(stock, tuple(sorted(mine.items())), 1), capacity - spare))
        left[longest] += 1
        found.sort(key=lambda option: (-option[1] / job.costs[option[0].stock], option[0].stock))
        return found

    def _full(self, kinds: list[int], room: int, waste: int) -> Iterator[tuple[list[tuple[int, int]], int]]:
        """Yield every full choice of `kinds` that leaves `waste` at most, and the room it leaves."""
        self.work -= 1
        if self.work < 0:
            return
        if not kinds:
            if room <= waste:
                yield [], room
            return
        *shorter, kind = kinds
        size, number = self.job.sizes[kind], self.left[kind]
        if room - sum(self.job.sizes[k] * self.left[k] for k in kinds) > waste:
            return  # all that is left would not fill it
        for chosen in range(min(number, room // size), -1, -1):
            for cuts, spare in self._full(shorter, room - chosen * size, waste):
                if chosen == number or spare < size:
                    yield ([*cuts, (kind, chosen)] if chosen else cuts), spare


def complete(job: Job, *, under: int, work: int) -> tuple[list[Reel] | None, bool]:
    """Look through all plans of a small job for one that costs less than `under`.

    Parameters
    ----------
    under : int
        A cost already reached.
    work : int
        How many steps may be taken. Counted in steps and not in seconds, so that a design comes out the same
        on every machine.

    Returns
    -------
    reels : list of Reel or None
        The cheapest plan found, or None where none is under `under`.
    exhausted : bool
        Whether everything was looked through, which proves the answer least.

    Notes
    -----
    Korf, R. E., "A new algorithm for optimal bin packing", Proc. AAAI (2002), calls this bin completion.
    """
    search = _Search(job, under, work)
    search.run(job.taken, 0)
    return search.best, search.work >= 0
