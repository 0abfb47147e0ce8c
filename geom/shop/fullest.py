"""Reels filled one after another as full as they can be."""

from geom.shop.filling import Job, Reel

__all__ = ["fullest_reels"]

# Cells that a reel is divided into at most, for the sums that its pieces can make.
_CELLS = 1 << 17


class _Sums:
    """The sums that pieces can make, as bits of one long number: bit s is set where some of them make s."""

    def __init__(self, sizes: list[int], left: list[int], room: int) -> None:
        self.mask = (1 << (room + 1)) - 1
        self.steps: list[tuple[int, int, int]] = []  # kind, how many, the sums without them
        self.sums = 1
        for kind in range(len(sizes) - 1, -1, -1):
            most, share = min(left[kind], room // sizes[kind]), 1
            while most > 0:
                number = min(share, most)
                self.steps.append((kind, number, self.sums))
                self.sums |= (self.sums << (number * sizes[kind])) & self.mask
                most -= number
                share *= 2

    def fullest(self, room: int) -> int:
        """Return the greatest sum that is no more than `room`."""
        return (self.sums & ((1 << (room + 1)) - 1)).bit_length() - 1

    def pieces(self, total: int, sizes: list[int]) -> dict[int, int]:
        """Return {kind: how many} of pieces that make a sum, with as few of the last kinds as can be."""
        cuts: dict[int, int] = {}
        for kind, number, without in reversed(self.steps):
            if not (without >> total) & 1:
                cuts[kind] = cuts.get(kind, 0) + number
                total -= number * sizes[kind]
        return cuts


def fullest_reels(job: Job, work: int) -> list[Reel] | None:
    """Return reels that each hold the longest piece left and are otherwise filled as full as can be.

    Where many pieces go on a reel this wastes next to nothing until the last, and so meets the bound of the lengths at
    once. Of several sold lengths that is taken which is then used best.

    Parameters
    ----------
    work : int
        Limit of the work, in shifts of a long number; None is returned when it does not suffice.

    Notes
    -----
    Gupta, J. N. D. and Ho, J. C., "A new heuristic algorithm for the one-dimensional bin-packing problem", Production
    Planning & Control 10 (1999), with the sums kept in the bits of an integer.
    """
    measure = max(1, -(-job.capacities[-1] // _CELLS))
    sizes = [-(-size // measure) for size in job.sizes]  # up: what fits so, fits
    rooms = [room // measure for room in job.capacities]
    left, reels = list(job.demand), []
    longest = len(sizes) - 1
    while longest >= 0:
        if not left[longest]:
            longest -= 1
            continue
        stock, cuts = _fill(job, sizes, rooms, left, longest)
        times = min(left[kind] // number for kind, number in cuts.items())
        work -= sum(1 for number in left if number)
        if work < 0:
            return None
        for kind, number in cuts.items():
            left[kind] -= number * times
        reels.append(Reel(stock, tuple(sorted(cuts.items())), times))
    return reels


def _fill(job: Job, sizes: list[int], rooms: list[int], left: list[int], longest: int) -> tuple[int, dict[int, int]]:
    """Return the sold length that is used best with the longest piece on it, and what is cut of it."""
    left[longest] -= 1
    sums = _Sums(sizes, left, rooms[-1] - sizes[longest])
    left[longest] += 1
    fills = [(sums.fullest(room - sizes[longest]), stock) for stock, room in enumerate(rooms) if room >= sizes[longest]]
    total, stock = max(fills, key=lambda fill: ((fill[0] + sizes[longest]) / job.costs[fill[1]], fill[0]))
    cuts = sums.pieces(total, sizes)
    cuts[longest] = cuts.get(longest, 0) + 1
    return stock, cuts
