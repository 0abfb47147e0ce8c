"""What every solid body can do."""

import abc
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Self

import numpy as np

from geom.curves.base import Array, Value, fixed, positive
from geom.solids.mesh import Facets, Mesh, merged


class Body(Value, abc.ABC):
    """A body in space, in metres, that knows its true volume and makes its own facets."""

    @property
    @abc.abstractmethod
    def volume(self) -> float:
        """True volume, m3."""

    @abc.abstractmethod
    def mesh(self, within: float) -> Mesh:
        """Make the surface of triangles.

        Parameters
        ----------
        within : float
            Greatest distance of a drawn line from the true one, m; positive. Round sections keep their true
            area, so that their corners stand a little outside and their sides a little inside.
        """

    @abc.abstractmethod
    def moved(self, offset: Array) -> Self:
        """Return the body moved by a vector, (3,) m."""

    @abc.abstractmethod
    def scaled(self, factor: float) -> Self:
        """Return the body scaled about the origin by a positive factor."""

    def facets(self, within: float) -> int:
        """How many triangles `mesh` and `chunks` make."""
        return len(self.mesh(within).faces)

    def chunks(self, within: float) -> Iterator[Facets]:
        """Normals and corners of the triangles, some at a time, for writing without holding all of them.

        Yields
        ------
        ndarray of float32, shape (k, 4, 3)
            Outward unit normal, then the three corners, m. Single precision is what files of facets hold: far
            from the origin move the body there first.
        """
        yield from self.mesh(within).chunks()

    def extents(self, within: float) -> tuple[Array, Array]:
        """Least and greatest coordinates, two (3,) m."""
        return self.mesh(within).extents


@dataclass(frozen=True, eq=False)
class Union(Body):
    """Bodies as they are, side by side: where they overlap the volume counts twice, as nothing is cut."""

    bodies: Sequence[Body]  # kept as a tuple

    def __post_init__(self) -> None:
        self._set(bodies=tuple(self.bodies))
        if not self.bodies:
            raise ValueError("there must be at least one body")

    @property
    def volume(self) -> float:
        """Sum of the bodies' volumes, m3."""
        return sum(body.volume for body in self.bodies)

    def mesh(self, within: float) -> Mesh:
        """Put the bodies' meshes together."""
        return merged([body.mesh(within) for body in self.bodies])

    def facets(self, within: float) -> int:
        """Sum of the bodies' triangles."""
        return sum(body.facets(within) for body in self.bodies)

    def chunks(self, within: float) -> Iterator[Facets]:
        """Normals and corners of the triangles of one body after another, (k, 4, 3) at a time."""
        for body in self.bodies:
            yield from body.chunks(within)

    def extents(self, within: float) -> tuple[Array, Array]:
        """Least and greatest coordinates, two (3,) m."""
        lows, highs = zip(*(body.extents(within) for body in self.bodies), strict=True)
        return np.min(lows, axis=0), np.max(highs, axis=0)

    def moved(self, offset: Array) -> Self:
        """Return the bodies moved by a vector, (3,) m."""
        return replace(self, bodies=tuple(body.moved(offset) for body in self.bodies))

    def scaled(self, factor: float) -> Self:
        """Return the bodies scaled about the origin."""
        return replace(self, bodies=tuple(body.scaled(factor) for body in self.bodies))


@dataclass(frozen=True, eq=False)
class Solid(Value):
    """A body with the mark of its piece, its stated volume and the origin its coordinates are given from."""

    mark: str
    volume: float  # m3, the true one
    body: Body
    origin: Array | None = None  # (3,) m; None leaves it to who writes the solid

    def __post_init__(self) -> None:
        self._set(volume=positive(self.volume, name="volume"))
        if self.origin is not None:
            self._set(origin=fixed(self.origin, 3, name="origin"))

    def mesh(self, within: float) -> Mesh:
        """Make the body's surface of triangles, m."""
        return self.body.mesh(within)

    def facets(self, within: float) -> int:
        """How many triangles it has."""
        return self.body.facets(within)

    def chunks(self, within: float) -> Iterator[Facets]:
        """Normals and corners of the triangles, (k, 4, 3) at a time; see `Body.chunks`."""
        return self.body.chunks(within)
