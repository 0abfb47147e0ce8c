"""From what a member measures pin to pin to what is cut: fittings off, grips on, rounded to the shop's step."""

import math
from typing import Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["Way", "cut_length", "spares", "to_step"]

Way = Literal["nearest", "up", "down"]
Floats = NDArray[np.float64]

# What a length may miss a half or whole step by and still be taken for it, in steps: lengths are sums of a few
# decimals, each off by 1e-16 of itself, so that 2.4155 m is 2415.4999999999995 mm.
_SAME = 1e-6


def to_step(length: Floats | float, step: float, *, way: Way = "nearest") -> Floats:
    """Return lengths rounded to whole steps: to the nearest, halves away from zero, or all up or down.

    Parameters
    ----------
    length : ndarray or float
        Lengths, m.
    step : float
        The shop's step, m, above zero.
    way : "nearest", "up" or "down"
        Up and down are away from zero and towards it.

    Raises
    ------
    ValueError
        If the step is not above zero.
    """
    if not 0 < step < math.inf:
        raise ValueError(f"a step of {step} m rounds nothing; give one above zero")
    values = np.asarray(length, dtype=np.float64)
    steps = np.abs(values) / step
    whole = {
        "nearest": lambda: np.floor(steps + 0.5 + _SAME),
        "up": lambda: np.ceil(steps - _SAME),
        "down": lambda: np.floor(steps + _SAME),
    }[way]()
    # to the picometre, so that 2415 steps of 1 mm are written 2.415 and not 2.4150000000000005
    return np.asarray(np.round(np.copysign(whole, values) * step, 12))


def cut_length(pin_to_pin: Floats | float, *, takes: float = 0.0, grip: float = 0.0, step: float) -> Floats:
    """Return the length of rope or rod that is cut for members of a given length pin to pin.

    Parameters
    ----------
    pin_to_pin : ndarray or float
        Unstretched, at the shop's temperature, m.
    takes : float
        Length that the fittings of both ends stand for, m.
    grip : float
        Rope used up in making both ends, m.
    step : float
        The shop's step, m.

    Raises
    ------
    ValueError
        If the fittings leave nothing to cut, or the step is not above zero.
    """
    length = np.asarray(pin_to_pin, dtype=np.float64) - takes + grip
    if np.any(length <= 0):
        raise ValueError(
            f"fittings that take {takes:g} m leave {np.min(length):g} m of {np.min(pin_to_pin):g} m to be cut"
        )
    return to_step(length, step)


def spares(count: int, share: float) -> int:
    """Return how many spare pieces a share of the order comes to, in whole pieces upwards.

    Raises
    ------
    ValueError
        If the share is under zero.
    """
    if not 0 <= share < math.inf:
        raise ValueError(f"a share of {share} is no share to add; give 0 or more")
    return math.ceil(count * share - _SAME)
