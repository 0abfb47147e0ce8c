"""A person on a hanging member: a foreseeable misuse, static, at mid-length and where an end pull is greatest."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.carried import Bare, Carried, hung_loaded
from geom.hang.held import Place
from geom.hang.intent import Wish
from geom.hang.loaded import Loaded
from geom.result import Metres, MetresArray, fixed

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]

# The end pull is flat where it is greatest: a place known to 1e-4 of the length gives it to 1e-8 of itself. Six grids,
# each of two steps of the one before, are at 1e-6 of the length.
_GRID = 33
_ZOOMS = 6
_ALIKE = 1e-9  # of two places as bad as one another, as on a level member, the one nearer to `from` is taken


@dataclass(frozen=True)
class OnIt:
    """What only a person's case has: the point on the member, and its distance along the member as made."""

    at: MetresArray
    mark: Metres


@dataclass(frozen=True, eq=False)
class Person:
    """m members with a person on each, their numbers in `rows`, at `mark` along them as made, (m,) m."""

    case: str
    rows: Ints
    hang: Loaded
    mark: Floats

    def of(self, number: int, place: Place) -> OnIt:
        """Return what the case adds to one member, by its number among all."""
        row = int(np.searchsorted(self.rows, number))
        return OnIt(fixed(place.points(self.hang.load_places[row, -1])), float(self.mark[row]))


def persons(wish: Wish, marked: Carried, pin: Floats, weight: Floats) -> Iterator[Person]:
    """Yield the case at mid-length and that of the greatest end pull, of the members that a person is tried on.

    Parameters
    ----------
    wish, marked : Wish, Carried
        n members, as hung, and their loads at their marks.
    pin : ndarray, shape (n,)
        Their lengths as made, m.
    weight : ndarray, shape (n,)
        Of the person, N; 0 for none.
    """
    rows = np.flatnonzero(weight > 0.0)
    bare, carried, length, force = wish.bare.of(rows), marked.of(rows), pin[rows], weight[rows]
    middle = 0.5 * length
    yield Person("person at mid", rows, _on(bare, carried, length, (middle, force)), middle)
    worst = _worst(bare, carried, length, force)
    yield Person("person at worst end", rows, _on(bare, carried, length, (worst, force)), worst)


def _on(bare: Bare, carried: Carried, pin: Floats, person: tuple[Floats, Floats]) -> Loaded:
    return hung_loaded(bare, carried.and_one(*person), pin)


def _worst(bare: Bare, carried: Carried, pin: Floats, force: Floats) -> Floats:
    """Find where an end pull is greatest by ever finer grids along the members."""
    n = len(pin)
    grid = pin[:, np.newaxis] * np.linspace(0.0, 1.0, _GRID + 2)[1:-1]
    for _ in range(_ZOOMS):
        rows = np.repeat(np.arange(n), grid.shape[1])
        hang = _on(bare.of(rows), carried.of(rows), pin[rows], (grid.reshape(-1), force[rows]))
        pulls = np.maximum(np.linalg.norm(hang.pull_from, axis=1), np.linalg.norm(hang.pull_to, axis=1))
        pulls = np.nan_to_num(pulls.reshape(grid.shape))
        best = np.argmax(pulls >= pulls.max(axis=1, keepdims=True) * (1.0 - _ALIKE), axis=1)
        at, step = grid[np.arange(n), best], grid[:, 1] - grid[:, 0]
        around = at[:, np.newaxis] + step[:, np.newaxis] * np.linspace(-1.0, 1.0, 17)
        grid = np.clip(around, 1e-9 * pin[:, np.newaxis], (1.0 - 1e-9) * pin[:, np.newaxis])
    return np.asarray(at)
