"""Column generation for the cutting-stock problem, with a bound that is proven in whole numbers.

Gilmore, P. C. and Gomory, R. E., "A linear programming approach to the cutting-stock problem", Operations Research 9
(1961): a linear programme over the ways of cutting one reel, to which the way that is worth most at the present
prices is added until none is worth more than its reel. The bound is Farley's (A. A. Farley, "A note on bounding a
class of linear programming problems, including cutting stock problems", Operations Research 38, 1990): with prices
pi >= 0 of the pieces, whatever they are, no plan costs less than sum(pi d) divided by the greatest worth of a reel for
its cost. Prices are rounded to whole numbers before the knapsack is solved, so that rounding of the linear programme
cannot spoil the proof.
"""

import numpy as np
from numpy.typing import NDArray

from geom.shop.filling import Job, Reel
from geom.shop.knapsack import Knapsack, best_fillings

__all__ = ["Columns", "Way"]

# Cells of the knapsack's table. Where the lengths have a common measure that makes a table no larger than this, the
# knapsack is exact; 200,000 cells are a reel of 200 m in millimetres.
_CELLS = 200_000
# Prices are kept to this part of a reel's cost: 2**-40 is finer than the linear programme's own 1e-7.
_PRICE = 1 << 40
# A way of cutting must be worth this much more than its reel to be worth adding: HiGHS' own dual tolerance.
_GAIN = 1e-7
# Ways added in one round: more need fewer rounds, but make the programme larger.
_ADDED = 30
# Share of the best bound's prices in those that ways are looked for at.
_SHARE = 0.5
# What solving the linear programme counts for each kind and way, in cells of a knapsack table: measured on jobs of 40
# to 600 kinds, within a factor of two.
_PROGRAMME = 200

Way = tuple[int, tuple[tuple[int, int], ...]]  # sold length, ((kind, how many), ...)
Floats = NDArray[np.float64]
Whole = NDArray[np.int64]


class Columns:
    """The ways of cutting found so far, and the greatest bounds proven.

    Parameters
    ----------
    job : Job
        The whole job.
    work : int
        Limit of the work in cells of knapsack tables; when it is used up, what there is must do.
    least_cost, least_count : int
        Bounds known before.
    """

    def __init__(self, job: Job, work: int, *, least_cost: int = 0, least_count: int = 0) -> None:
        self.job = job
        self.least_cost = least_cost
        self.least_count = least_count
        self.ways: list[Way] = []
        self._work = work
        self._known: set[Way] = set()
        self._entries: tuple[list[int], list[int], list[float]] = ([], [], [])  # kind, way, minus how many
        # Costs in longest reels: the programme's numbers stay near 1.
        self._costs = np.array(job.costs) / job.costs[-1]
        measure = -(-job.capacities[-1] // _CELLS)
        sizes = np.array(job.sizes, dtype=np.int64)
        # Rounded down, the sizes bound everything that fits; rounded up, all that is found fits.
        self._low, self._high = sizes // measure, -(-sizes // measure)
        self._exact = measure == 1
        self._rooms = [capacity // measure for capacity in job.capacities]

    def add(self, reels: list[Reel]) -> None:
        """Take over the ways of cutting of a plan."""
        for reel in reels:
            self._add((reel.stock, reel.cuts))

    def _add(self, way: Way) -> bool:
        if way in self._known:
            return False
        self._known.add(way)
        kinds, ways, numbers = self._entries
        for kind, number in way[1]:
            kinds.append(kind)
            ways.append(len(self.ways))
            numbers.append(-float(number))
        self.ways.append(way)
        return True

    def solve(self, demand: tuple[int, ...], *, prove: bool) -> Floats:
        """Return how often each way is used in the best mixture of reels for `demand`, adding ways as needed.

        Ways are looked for between the programme's prices and those of the best bound so far, because the programme's
        own leap about while many mixtures cost the same (Wentges, P., "Weighted Dantzig-Wolfe decomposition for
        linear mixed-integer programming", Int. Trans. Oper. Res. 4, 1997); where that finds nothing, at its own.

        Parameters
        ----------
        demand : tuple of int
            Counts of each kind.
        prove : bool
            Whether these are the counts of the whole job, so that the bounds may be raised.
        """
        most = np.array(demand, dtype=np.int64)
        centre, highest = np.zeros(len(demand)), 0.0
        share = 0.0
        while True:
            used, prices, cost = self._mixture(most)
            if prove and self.least_cost >= np.ceil(cost * self.job.costs[-1] - _GAIN):
                return used  # no mixture can raise the bound any more
            found = False
            while not found and self._afford(most):
                between = share * centre + (1.0 - share) * prices
                table, bound = self._price(most, between, prove=prove)
                if bound > highest:
                    highest, centre = bound, between * (bound / float(between @ most))
                found = self._add_ways(table, most, between, prices)
                if not found and share == 0.0:
                    return used
                share = _SHARE if found else 0.0
            if not found:
                return used

    def _afford(self, most: Whole) -> bool:
        """Return whether another round is within the work allowed, and take its work off."""
        kinds = np.flatnonzero(most)
        parts = sum(int(n).bit_length() for n in np.minimum(most[kinds], self._rooms[-1] // self._high[kinds]))
        cells = self._rooms[-1] * parts * (1 if self._exact else 2) + _PROGRAMME * len(kinds) * len(self.ways)
        if cells > self._work:
            return False
        self._work -= cells
        return True

    def _mixture(self, most: Whole) -> tuple[Floats, Floats, float]:
        """Return the best mixture of the known ways, prices of the pieces, and its cost in longest reels."""
        from scipy.optimize import linprog  # half a second, and few designs come this far
        from scipy.sparse import csr_array

        kinds, ways, numbers = self._entries
        matrix = csr_array((numbers, (kinds, ways)), shape=(len(most), len(self.ways)))
        keep = np.flatnonzero(most)
        costs = self._costs[[stock for stock, _ in self.ways]]
        answer = linprog(  # type: ignore[call-overload]  # the stubs know of no sparse matrix
            costs, A_ub=matrix[keep], b_ub=-most[keep], method="highs-ds"
        )
        prices = np.zeros(len(most))
        prices[keep] = np.maximum(-answer.ineqlin.marginals, 0.0)
        return answer.x, prices, float(answer.fun)

    def _price(self, most: Whole, prices: Floats, *, prove: bool) -> tuple[Knapsack, float]:
        """Return the best fillings at these prices, and Farley's bound in longest reels; raise the proven bounds."""
        whole = np.floor(prices * _PRICE).astype(np.int64)
        table = best_fillings(self._low, whole, most, self._rooms[-1])
        worth = sum(int(price) * int(number) for price, number in zip(whole, most, strict=True))
        best = [int(table.best[room]) for room in self._rooms]
        if prove:
            least = [
                -(-worth * cost // value)
                for cost, value in zip(self.job.costs, best, strict=True)
                if value  # a sold length that holds nothing of any worth is in no plan that matters
            ]
            self.least_cost = max(self.least_cost, min(least))
            self.least_count = max(self.least_count, -(-worth // best[-1]))
        bound = worth / max(value / cost for value, cost in zip(best, self._costs, strict=True))
        if not self._exact:
            table = best_fillings(self._high, whole, most, self._rooms[-1])
        return table, bound

    def _add_ways(self, table: Knapsack, most: Whole, between: Floats, prices: Floats) -> bool:
        """Add the best way of cutting each sold length and the best with each piece, if worth more than the reel.

        They were looked for at the prices `between`, but only `prices` say whether they better the mixture.
        """
        added = False
        for stock, room in enumerate(self._rooms):
            kinds = np.flatnonzero((self._high <= room) & (between > 0.0) & (most > 0))
            worth = between[kinds] * _PRICE + table.best[room - self._high[kinds]]
            order = np.argsort(-worth, kind="stable")[:_ADDED]
            fillings = [table.filling(room)]
            for kind in kinds[order]:
                cuts = table.filling(room - int(self._high[kind]))
                cuts[int(kind)] = min(cuts.get(int(kind), 0) + 1, int(most[kind]))
                fillings.append(cuts)
            for cuts in fillings:
                gain = sum(prices[kind] * number for kind, number in cuts.items()) - self._costs[stock]
                if gain > _GAIN:
                    added |= self._add((stock, tuple(sorted(cuts.items()))))
        return added
