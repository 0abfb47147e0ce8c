"""Bodies of one shape in many places."""

import abc
from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Self, TypeVar

import numpy as np
from numpy.typing import NDArray

from geom.curves.base import Array, Index, fixed, positive
from geom.solids.body import Body
from geom.solids.mesh import FACETS_A_CHUNK, Facets, Mesh

_Real = TypeVar("_Real", np.float32, np.float64)


class Copies(Body):
    """Copies of one mesh, each moved and turned."""

    places: Array  # (n, 3) m

    @abc.abstractmethod
    def template(self, within: float) -> Mesh:
        """Surface of one copy about its own centre, m."""

    @abc.abstractmethod
    def axes(self) -> Array | None:
        """Turns of the copies, (n, 3, 3), columns their own axes; None where none is turned."""

    def mesh(self, within: float) -> Mesh:
        """Make all copies' surfaces."""
        one = self.template(within)
        shift = len(one.vertices) * np.arange(len(self.places))
        faces = one.faces + shift[:, None, None]
        vertices = self._turned(one.vertices, slice(0, len(self.places))) + self.places[:, None]
        return Mesh(vertices.reshape(-1, 3), faces.reshape(-1, 3))

    def chunks(self, within: float) -> Iterator[Facets]:
        """Normals and corners of the triangles, some copies' at a time, (k, 4, 3).

        A copy's normals are the template's turned, and stand behind its vertices in one table, from which a
        single look-up fills whole facets.
        """
        one = self.template(within)
        table = np.concatenate([one.vertices, one.normals], dtype=np.float32)
        rows = np.concatenate([np.arange(len(one.vertices), len(table))[:, None], one.faces], axis=1)
        for part in self._parts(one):
            copies = self._turned(table, part)
            copies[:, : len(one.vertices)] += self.places[part, None].astype(np.float32)
            yield np.take(copies, rows, axis=1).reshape(-1, 4, 3)

    def extents(self, within: float) -> tuple[Array, Array]:
        """Least and greatest coordinates, two (3,) m."""
        one = self.template(within)
        ends = [_ends(self._turned(one.vertices, part) + self.places[part, None]) for part in self._parts(one)]
        lows, highs = zip(*ends, strict=True)
        return np.min(lows, axis=0), np.max(highs, axis=0)

    def moved(self, offset: Array) -> Self:
        """Return the copies moved by a vector, (3,) m."""
        return replace(self, places=self.places + offset)  # type: ignore[type-var]

    def _parts(self, one: Mesh) -> Iterator[slice]:
        size = max(1, FACETS_A_CHUNK // len(one.faces))
        for start in range(0, len(self.places), size):
            yield slice(start, min(start + size, len(self.places)))

    def _turned(self, vectors: NDArray[_Real], which: slice) -> NDArray[_Real]:
        """Vectors of the template as each copy turns them, (copies, n, 3), in their own precision."""
        axes = self.axes()
        if axes is None:
            return np.tile(vectors, (which.stop - which.start, 1, 1))
        return np.asarray(vectors @ np.swapaxes(axes[which], 1, 2).astype(vectors.dtype))


def _ends(vertices: Array) -> tuple[Array, Array]:
    return vertices.min(axis=(0, 1)), vertices.max(axis=(0, 1))


@dataclass(frozen=True, eq=False)
class Balls(Copies):
    """Balls of one radius: beads of a ball chain, nodes of a net."""

    places: Array  # (n, 3) m, centres
    radius: float  # m

    def __post_init__(self) -> None:
        places = fixed(self.places, None, 3, name="places")
        self._set(places=places, radius=positive(self.radius, name="radius"))

    @property
    def volume(self) -> float:
        """Volume of all balls, m3."""
        return float(len(self.places) * 4 / 3 * np.pi * self.radius**3)

    def facets(self, within: float) -> int:
        """How many triangles all balls have."""
        return int(len(self.places) * 20 * 4 ** self._halvings(within))

    def scaled(self, factor: float) -> Self:
        """Return the balls scaled about the origin."""
        return replace(self, places=self.places * factor, radius=self.radius * factor)

    def template(self, within: float) -> Mesh:
        """Surface of one ball about its centre, of the ball's true volume."""
        mesh = _icosahedron()
        for _ in range(self._halvings(within)):
            mesh = _halved(mesh)
        return mesh.scaled(self.radius * float(np.cbrt(4 / 3 * np.pi / mesh.volume)))

    def axes(self) -> None:
        """No ball is turned."""

    def _halvings(self, within: float) -> int:
        """How often the icosahedron's edges are halved, 1 to 4 times.

        A facet of the icosahedron subtends an edge of 1.107 rad (acos(1/sqrt 5)) and lies r (1 - cos(0.652))
        inside the ball, 0.652 rad being the angle from a facet's middle to its corner; halving divides by four.
        """
        inside = self.radius * (1 - np.cos(0.652)) / positive(within, name="within")
        return int(np.clip(np.ceil(np.log(max(inside, 1.0)) / np.log(4)), 1, 4))


def _icosahedron() -> Mesh:
    golden = (1 + np.sqrt(5)) / 2
    flat = np.array([[0, y, z] for y in (-1, 1) for z in (-golden, golden)])
    vertices = np.concatenate([np.roll(flat, shift, axis=1) for shift in range(3)])
    # Facets are the triples of corners 2 apart, turned outwards.
    near = np.isclose(np.linalg.norm(vertices[:, None] - vertices, axis=2), 2.0)
    i, j, k = np.indices((12, 12, 12))
    faces = np.argwhere((i < j) & (j < k) & near[i, j] & near[j, k] & near[i, k])
    inward = np.linalg.det(vertices[faces]) < 0
    faces[inward] = faces[inward][:, ::-1]
    return Mesh(vertices / np.linalg.norm(vertices[0]), faces)


def _halved(mesh: Mesh) -> Mesh:
    """Cut each facet in four at the middles of its edges, pushed out to the ball."""
    edges = np.sort(np.stack([mesh.faces, np.roll(mesh.faces, -1, axis=1)], axis=-1).reshape(-1, 2), axis=1)
    edges, which = np.unique(edges, axis=0, return_inverse=True)
    middles = mesh.vertices[edges].sum(axis=1)
    middles /= np.linalg.norm(middles, axis=1, keepdims=True)
    a, b, c = mesh.faces.T
    ab, bc, ca = which.reshape(-1, 3).T + len(mesh.vertices)
    faces: Index = np.stack([a, ab, ca, b, bc, ab, c, ca, bc, ab, bc, ca], axis=1).reshape(-1, 3)
    return Mesh(np.concatenate([mesh.vertices, middles]), faces)
