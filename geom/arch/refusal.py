"""Why there is no such arch, in words that lengths are filled into in whatever unit the design is in."""

from __future__ import annotations

import math
from collections.abc import Callable

from geom.errors import SolveError

_FIGURES = 4  # of a bound that was computed: finer than it can be used


class NoArch(SolveError):
    """No arch has what was asked.

    Parameters
    ----------
    text : str
        What was asked, why there is no answer, and what would be right, with {} for each length.
    *lengths : float
        The lengths, m.
    key : str
        The key of the design to change.
    """

    def __init__(self, text: str, *lengths: float, key: str) -> None:
        self._text, self._lengths = text, lengths
        super().__init__(self.said(lambda metres: f"{metres:.12g} m"), key=key)

    def said(self, stated: Callable[[float], str]) -> str:
        """Return the words with each length as `stated` writes it."""
        return self._text.format(*(stated(length) for length in self._lengths))

    def __reduce__(self) -> tuple[Callable[..., NoArch], tuple[object, ...]]:
        return _again, (self._text, self._lengths, self.key)


def _again(text: str, lengths: tuple[float, ...], key: str) -> NoArch:
    return NoArch(text, *lengths, key=key)


def under(bound: float) -> float:
    """Return a computed bound rounded down, so that what is said to be possible is."""
    return _rounded(bound, math.floor)


def over(bound: float) -> float:
    """Return a computed bound rounded up."""
    return _rounded(bound, math.ceil)


def _rounded(bound: float, way: Callable[[float], int]) -> float:
    decimals = _FIGURES - 1 - math.floor(math.log10(bound))
    scale = 10.0**decimals
    return float(f"{way(bound * scale) / scale:.{_FIGURES}g}")
