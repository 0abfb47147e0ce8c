"""From a mixture of reels to whole reels: dive down the linear programme, then complete what is left exactly."""

from geom.shop.columns import Columns
from geom.shop.filling import Job, Reel, complete, cost_of, count_of, first_fit_decreasing

__all__ = ["best_of", "dive"]

# Left pieces are completed exactly when they are this few; more are dived further (steps grow exponentially).
_FEW = 30
# Steps of that completion: about 25 ms.
_STEPS = 15_000
# Parts of a reel from which a mixture is rounded up at once, in the order of the dives. One at a time is no better and
# takes as many programmes as there are kinds of pieces.
_PARTS = (0.75, 0.6, 0.9, 0.5)


def best_of(job: Job, *plans: list[Reel]) -> list[Reel]:
    """Return the plan of least cost, and of those the one of fewest reels; the first where they are alike."""
    return min(plans, key=lambda reels: (cost_of(job, reels), count_of(reels)))


def dive(columns: Columns, best: list[Reel]) -> list[Reel]:
    """Return the best plan found, starting from `best`, and stop as soon as one meets the bound proven.

    The whole parts of the best mixture are taken as they are, and what is nearly whole is rounded up; the mixture for
    the pieces left is found again, and so on to the end. On the way what is left is also filled by first-fit
    decreasing and, once few, completed exactly. A dive that misses the bound is followed by others that round
    otherwise.

    Notes
    -----
    Sequential rounding after Gilmore and Gomory (1961); for the plain problem it misses the rounded-up bound by one
    reel at the most on nearly all jobs (Wäscher, G. and Gau, T., "Heuristics for the integer one-dimensional cutting
    stock problem: a computational study", OR Spektrum 18, 1996).
    """
    for part in _PARTS:
        if cost_of(columns.job, best) <= columns.least_cost:
            break
        best = _one_dive(columns, best, part)
    return best


def _one_dive(columns: Columns, best: list[Reel], part: float) -> list[Reel]:
    job, taken = columns.job, list[Reel]()
    left = list(job.demand)
    while any(left):
        used = columns.solve(tuple(left), prove=not taken)
        whole = [(int(number + 1 - part), place) for place, number in enumerate(used) if number >= part]
        if not whole:
            whole = [(1, max(range(len(used)), key=lambda place: (used[place], -place)))]
        for times, place in sorted(whole, reverse=True):
            taken += _take(job, columns.ways[place], times, left)
        rest = job.least(tuple(left))
        best = best_of(job, best, taken + first_fit_decreasing(rest))
        if sum(left) <= _FEW:
            under = cost_of(job, best) - cost_of(job, taken)
            ending, everything = complete(rest, under=under, work=_STEPS)
            best = best_of(job, best, taken + ending) if ending is not None else best
            if everything:
                break
        if cost_of(job, best) <= columns.least_cost:
            break
    return best


def _take(job: Job, way: tuple[int, tuple[tuple[int, int], ...]], times: int, left: list[int]) -> list[Reel]:
    """Cut `times` reels in one way as far as pieces are left for it, the last of them topped up with others."""
    stock, cuts = way
    full = min([times, *(left[kind] // number for kind, number in cuts)])
    reels = []
    if full:
        reels.append(Reel(stock, cuts, full))
        for kind, number in cuts:
            left[kind] -= number * full
    if full < times:
        few = {kind: min(number, left[kind]) for kind, number in cuts if left[kind]}
        if few:
            reels.append(_topped_up(job, stock, few, left))
    return reels


def _topped_up(job: Job, stock: int, cuts: dict[int, int], left: list[int]) -> Reel:
    """Fill what is left of one reel with the longest pieces that fit, and shorten it if it can be."""
    room = job.capacities[stock]
    for kind, number in cuts.items():
        left[kind] -= number
        room -= number * job.sizes[kind]
    for kind in range(len(left) - 1, -1, -1):
        number = min(left[kind], room // job.sizes[kind])
        if number:
            cuts[kind] = cuts.get(kind, 0) + number
            left[kind] -= number
            room -= number * job.sizes[kind]
    taken = sum(job.sizes[kind] * number for kind, number in cuts.items())
    return Reel(job.shortest_for(taken), tuple(sorted(cuts.items())), 1)
