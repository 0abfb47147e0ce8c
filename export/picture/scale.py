"""Sheets of paper and the scales drawings are printed at."""

import math
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from itertools import count

# Trimmed sheets of ISO 216 as ISO 5457 frames them: 20 mm to the left for binding, 10 mm elsewhere. A4 stands upright.
_TRIMMED = {"A0": (1189, 841), "A1": (841, 594), "A2": (594, 420), "A3": (420, 297), "A4": (210, 297)}

# ISO 5455:1979 gives 1, 2 and 5 times powers of ten.
_ISO_STEPS = (1, 2, 5)
# The architects' scales, inches to the foot, as common practice has them; then the engineers' feet to the inch.
_INCHES_TO_THE_FOOT = ("12", "6", "3", "1 1/2", "1", "3/4", "1/2", "3/8", "1/4", "3/16", "1/8", "3/32", "1/16")
_FEET_TO_THE_INCH = (20, 30, 40, 50, 60, 100, 200, 400, 500, 1000)


@dataclass(frozen=True, slots=True)
class Scale:
    """A print scale: one on paper is `ratio` in the design."""

    ratio: float
    says: str


@dataclass(frozen=True, slots=True)
class Sheet:
    """The room for drawing on a sheet of paper, mm."""

    name: str
    width: float
    height: float


def sheet(name: str) -> Sheet:
    """Return the drawing space of a sheet, A0 to A4."""
    width, height = _TRIMMED[name]
    return Sheet(name, width - 30, height - 20)


def sheets(name: str) -> Iterator[Sheet]:
    """Yield a sheet and those it may grow to: the larger ones up to A0, then A0 lengthened twice, four times ..."""
    names = list(_TRIMMED)[::-1]
    yield from map(sheet, names[names.index(name) :])
    width, height = _TRIMMED["A0"]
    for power in count(1):
        yield Sheet(f"A0 x {2**power}", width - 30, height * 2**power - 20)


def scales(unit: str) -> Iterator[Scale]:
    """Yield the scales drawings in a unit are printed at, the largest picture first."""
    if unit in ("in", "ft"):
        yield from _imperial()
        return
    for power in range(1, -1, -1):
        for step in reversed(_ISO_STEPS):
            if power or step > 1:
                yield Scale(1 / (step * 10**power), f"{step * 10**power}:1")
    for power in range(10):
        for step in _ISO_STEPS:
            yield Scale(step * 10**power, f"1:{step * 10**power}")


def _imperial() -> Iterator[Scale]:
    for text in _INCHES_TO_THE_FOOT:
        ratio = 12 / sum(Fraction(part) for part in text.split())
        says = "full size" if ratio == 1 else f'{text}" = 1\'-0" (1:{float(ratio):g})'
        yield Scale(float(ratio), says)
    for feet in _FEET_TO_THE_INCH:
        yield Scale(12 * feet, f'1" = {feet}\'-0" (1:{12 * feet})')
    for power in range(5, 10):
        yield Scale(10.0**power, f"1:{10**power}")


def round_length(room: float) -> float:
    """Return the greatest of 1, 2 and 5 times powers of ten that is at most `room`."""
    power = 10.0 ** math.floor(math.log10(room))
    return max(step * power for step in (0.5, *_ISO_STEPS) if step * power <= room * (1 + 1e-12))
