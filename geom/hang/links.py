"""Whole links: how many of them come nearest to a wished length, and what they then make.

A chain of n links, pulled straight, measures n pitches from the inside of its first link to the inside of
its last: the effective length, which with what the end fittings take is the length from pin to pin. Links
lie a quarter turn from one another, so that an odd count keeps the two end links the same way round
(common practice; chain standards give the pitch as the inside length of a link).
"""

from typing import TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray

Ints: TypeAlias = NDArray[np.int64]

ROUNDINGS = ("nearest", "up", "down")
PARITIES = ("any", "odd", "even")

# Lengths and pitches are rounded to binary: 36 links may come out as 35.999999999999993. Within this they are
# 36: far under any tolerance of pitch, and over the rounding of a million links.
_SAME = 1e-9  # links


def count(
    length: ArrayLike,
    pitch: ArrayLike,
    *,
    rounding: ArrayLike = "nearest",
    parity: ArrayLike = "any",
    least: ArrayLike = 1,
) -> Ints:
    """Give the counts of links for wished effective lengths.

    Parameters
    ----------
    length : array_like
        Wished effective length, metres: pin to pin less what the fittings take.
    pitch : array_like
        Inside length of a link, metres.
    rounding : array_like of str
        "nearest" (half way between two counts: the longer), "up" or "down" (never longer than wished).
    parity : array_like of str
        "any", "odd" or "even": only such counts are chosen from.
    least : array_like of int
        The fewest links; it outranks "down", and a parity it has not raises it by one.

    Returns
    -------
    ndarray of int64
        In the common shape of the arguments. Whether the links reach is the caller's to see.

    Raises
    ------
    ValueError
        A length is not finite, a pitch not above 0, a word unknown, or the shapes do not broadcast.
    """
    lengths, pitches = np.asarray(length, dtype=np.float64), np.asarray(pitch, dtype=np.float64)
    if not (np.isfinite(lengths).all() and np.isfinite(pitches).all() and (pitches > 0.0).all()):
        raise ValueError("whole links need finite lengths, and pitches above 0")
    ways, parities = _known(rounding, ROUNDINGS), _known(parity, PARITIES)
    step = np.where(parities == "any", 1, 2)
    first = np.where(parities == "odd", 1, 0)
    steps = (lengths / pitches - first) / step
    whole = np.select(
        [ways == "up", ways == "down"],
        [np.ceil(steps - _SAME), np.floor(steps + _SAME)],
        np.floor(steps + 0.5 + _SAME),
    )
    counts = first + step * whole.astype(np.int64)
    fewest = np.asarray(least, dtype=np.int64)
    raised: Ints = np.maximum(counts, fewest + np.where(step == 2, (fewest - first) % 2, 0))
    return np.asarray(raised, dtype=np.int64)


def neighbours(counts: ArrayLike) -> Ints:
    """Give the two counts on each side of each count, whatever their parity.

    Parameters
    ----------
    counts : array_like of int, shape (...)

    Returns
    -------
    ndarray of int64, shape (..., 4)
        Two fewer, one fewer, one more, two more; 0 or negative where there are no such chains.
    """
    return np.asarray(counts, dtype=np.int64)[..., np.newaxis] + np.array([-2, -1, 1, 2], dtype=np.int64)


def overall(counts: ArrayLike, pitch: ArrayLike, wire: ArrayLike) -> NDArray[np.float64]:
    """Give the lengths over the outside of the end links, n p + 2 d.

    Parameters
    ----------
    counts : array_like of int
    pitch, wire : array_like
        Inside length of a link and diameter of its wire, metres.

    Returns
    -------
    ndarray
        Metres.
    """
    ends: NDArray[np.float64] = 2.0 * np.asarray(wire, dtype=np.float64)
    return np.asarray(np.asarray(counts) * np.asarray(pitch, dtype=np.float64) + ends)


def ends_same_way(counts: ArrayLike, quarter_turns: ArrayLike) -> NDArray[np.bool_]:
    """Tell whether what hangs at the two ends faces the same way.

    Parameters
    ----------
    counts : array_like of int
        Links; each but the first is a quarter turn from the one before.
    quarter_turns : array_like of int
        Quarter turns of the fittings at both ends together.

    Returns
    -------
    ndarray of bool
        True where the turns from end to end are even.
    """
    turns = np.asarray(counts, dtype=np.int64) - 1 + np.asarray(quarter_turns, dtype=np.int64)
    return np.asarray(turns % 2 == 0)


def _known(words: ArrayLike, known: tuple[str, ...]) -> NDArray[np.str_]:
    given = np.asarray(words, dtype=np.str_)
    strange = ~np.isin(given, known)
    if strange.any():
        raise ValueError(f"{str(given[strange].flat[0])!r} is none of {', '.join(known)}")
    return given
