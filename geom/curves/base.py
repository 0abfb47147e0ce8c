"""What every curve can do, and how a frozen value holds its arrays."""

import abc
from dataclasses import fields
from typing import Any, NamedTuple, Self

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]
Index = NDArray[np.int64]

# An arc length may miss the curve's ends by rounding: a sum of n terms of like size is good to n eps (Higham,
# "Accuracy and Stability of Numerical Algorithms", 2002, section 4.2), so 1e-9 covers millions of links.
STATION_SLACK = 1e-9

_UNIT = 8 * np.finfo(float).eps  # a vector divided by its length has the length 1 to three roundings


def fixed(value: ArrayLike, *shape: int | None, name: str) -> Array:
    """Copy of an array as float64, checked for shape and finiteness, read-only.

    Parameters
    ----------
    value : array_like
        What was given.
    *shape : int or None
        The shape it must have; None stands for any number.
    name : str
        What it is called, for the error.

    Raises
    ------
    ValueError
        If the shape is another or a number is not finite.
    """
    array = np.array(value, dtype=np.float64)
    fits = array.ndim == len(shape) and all(want in (None, have) for want, have in zip(shape, array.shape, strict=True))
    if not fits:
        wanted = ", ".join("n" if size is None else str(size) for size in shape)
        raise ValueError(f"{name} must have the shape ({wanted}), not {array.shape}")
    if not np.isfinite(array).all():
        raise ValueError(f"{name} must be finite, not {value!r}")
    array.flags.writeable = False
    return array


class Value:
    """A frozen value with arrays in it: compared by content, pickled through its constructor.

    Pickle forgets that an array is read-only; going through the constructor freezes it again.
    """

    def __eq__(self, other: object) -> bool:
        if type(other) is not type(self):
            return NotImplemented
        return all(_same(mine, theirs) for mine, theirs in zip(self._state(), other._state(), strict=True))

    def __hash__(self) -> int:
        content = (part.tobytes() if isinstance(part, np.ndarray) else part for part in self._state())
        return hash((type(self), *content))

    def __reduce__(self) -> tuple[Any, ...]:
        return type(self), self._state()

    def _state(self) -> tuple[Any, ...]:
        return tuple(getattr(self, field.name) for field in fields(self))  # type: ignore[arg-type]

    def _set(self, **values: object) -> None:
        for name, value in values.items():
            object.__setattr__(self, name, value)


def _same(one: object, other: object) -> bool:
    if isinstance(one, np.ndarray) or isinstance(other, np.ndarray):
        return np.array_equal(np.asarray(one), np.asarray(other))
    return one == other


class Along(NamedTuple):
    """Points of a curve and the directions it runs in there."""

    points: Array  # (k, 3) m
    tangents: Array  # (k, 3) unit vectors


class Curve(Value, abc.ABC):
    """A curve in space, in metres, that knows its own points, length and tangents.

    A closed curve ends where it starts: the last of its points repeats the first.
    """

    @property
    @abc.abstractmethod
    def length(self) -> float:
        """True length of the curve, m."""

    @property
    @abc.abstractmethod
    def start(self) -> Array:
        """First point, (3,) m."""

    @property
    @abc.abstractmethod
    def end(self) -> Array:
        """Last point, (3,) m."""

    @property
    def closed(self) -> bool:
        """Whether the curve ends where it starts."""
        return False

    @abc.abstractmethod
    def stations(self, within: float) -> Array:
        """Arc lengths of the corners of a polyline that is nowhere off the curve by more than `within`.

        Parameters
        ----------
        within : float
            Greatest distance of a chord from the true curve, m; positive.

        Returns
        -------
        ndarray, shape (n,)
            Arc lengths from the start, m, rising from 0 to the length.
        """

    @abc.abstractmethod
    def at(self, s: ArrayLike) -> Along:
        """Points and unit tangents at arc lengths.

        Parameters
        ----------
        s : array_like, shape (k,)
            Arc lengths from the start, m.

        Raises
        ------
        ValueError
            If an arc length is outside the curve by more than rounding.
        """

    @abc.abstractmethod
    def moved(self, offset: Array) -> Self:
        """Return the curve moved by a vector, (3,) m."""

    @abc.abstractmethod
    def scaled(self, factor: float) -> Self:
        """Return the curve scaled about the origin by a positive factor."""

    def points(self, within: float) -> Array:
        """Polyline no chord of which is off the curve by more than `within`; its ends are exact.

        Parameters
        ----------
        within : float
            Greatest distance of a chord from the true curve, m; positive.

        Returns
        -------
        ndarray, shape (n, 3)
            Points on the curve, m; of a closed curve the last repeats the first.
        """
        points = self.at(self.stations(within)).points
        points[0], points[-1] = self.start, self.end
        return points

    def _stationed(self, s: ArrayLike) -> Array:
        """Arc lengths as an array, held to the curve."""
        stations = np.atleast_1d(np.asarray(s, dtype=np.float64))
        slack = STATION_SLACK * self.length
        if stations.size and not (stations.min() >= -slack and stations.max() <= self.length + slack):
            raise ValueError(
                f"arc lengths must be from 0 to {self.length:.9g} m, not {stations.min():.9g} to {stations.max():.9g} m"
            )
        return np.clip(stations, 0.0, self.length)


def positive(value: float, *, name: str) -> float:
    """Return a positive, finite number.

    Raises
    ------
    ValueError
        If it is not.
    """
    if not (np.isfinite(value) and value > 0):
        raise ValueError(f"{name} must be more than 0 and finite, not {value!r}")
    return float(value)


def unit(vector: Array, *, name: str) -> Array:
    """Return a vector scaled to length 1, read-only.

    Raises
    ------
    ValueError
        If it has no direction.
    """
    return fixed(units(fixed(vector, 3, name=name)[None], name=name)[0], 3, name=name)


def units(vectors: Array, *, name: str) -> Array:
    """Return vectors (n, 3) scaled to length 1.

    Those of length 1 but for rounding stay as they are, so that a value made again from its own fields is equal.

    Raises
    ------
    ValueError
        If one has no direction.
    """
    sizes = np.linalg.norm(vectors, axis=1, keepdims=True)
    if not sizes.all():
        raise ValueError(f"{name} must have a direction")
    return np.asarray(vectors / np.where(np.abs(sizes - 1) < _UNIT, 1.0, sizes))
