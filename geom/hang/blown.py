"""Members under a spread load and a side wind at once.

There is no closed form: a piece of member carries the spread load of its own plan length, and that depends on how far
the wind swings the whole. Every stock is cut into pieces over which the load is even, and what each carries is weighed
until it no longer changes. What the pieces leave falls with the square of their number.
"""

from collections.abc import Callable
from dataclasses import replace

import numpy as np

from geom.hang.chunked import Floats
from geom.hang.loaded_member import Loaded
from geom.hang.loading import Given

_PIECES = 32  # of each stock
_WEIGHINGS = 60
_WEIGHED = 1e-12  # greatest change of plan length over length


def blow(given: Given, solve: Callable[[Given], Loaded]) -> Loaded:
    """Solve members with spread loads and wind by `solve`, for members without spread loads."""
    pieces = _in_pieces(given)
    weight, spread = pieces.weight, given.spread[:, np.newaxis]
    share = np.broadcast_to((given.span / given.total)[:, np.newaxis], weight.shape)
    for _ in range(_WEIGHINGS):
        hung = solve(replace(pieces, weight=weight + spread * share))
        before, share = share, _shares(pieces, hung)
        if not np.nanmax(np.abs(share - before), initial=0.0) > _WEIGHED:
            break
    return hung


def _in_pieces(given: Given) -> Given:
    weight, stiffness, aside = (
        np.repeat(values, _PIECES, axis=1) for values in (given.weight, given.stiffness, given.aside)
    )
    length, none = np.repeat(given.length / _PIECES, _PIECES, axis=1), np.zeros_like(given.spread)
    return replace(given, length=length, weight=weight, stiffness=stiffness, aside=aside, spread=none)


def _shares(pieces: Given, hung: Loaded) -> Floats:
    """Give the plan length for each unstretched length of every piece, summed over what loads cut it into."""
    n, count = pieces.length.shape
    size, plan = hung.sections.length, np.diff(hung.course.nodes[:, :, 0], axis=1)
    ends, middle = np.cumsum(pieces.length, axis=1), np.cumsum(size, axis=1) - 0.5 * size
    which = np.minimum((middle[:, :, np.newaxis] > ends[:, np.newaxis, :]).sum(axis=2), count - 1)
    whole = np.zeros((n, count))
    np.add.at(whole, (np.arange(n)[:, np.newaxis], which), plan)
    return np.asarray(whole / np.where(pieces.length > 0.0, pieces.length, 1.0))
