"""Triangle meshes and what is asked of them."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import NDArray

from geom.curves.base import Array, Index, Value, fixed

Facets = NDArray[np.float32]  # (k, 4, 3): outward unit normal, then the three corners, m

FACETS_A_CHUNK = 8192  # 48 bytes each: a chunk and what it is made from stay in the processor's cache


@dataclass(frozen=True, eq=False)
class Mesh(Value):
    """Triangles over shared vertices, anticlockwise seen from outside.

    Raises
    ------
    ValueError
        If a face names a vertex that is not there.
    """

    vertices: Array  # (v, 3) m
    faces: Index  # (f, 3) rows of `vertices`

    def __post_init__(self) -> None:
        faces = np.array(self.faces, dtype=np.int64).reshape(-1, 3)
        faces.flags.writeable = False
        self._set(vertices=fixed(self.vertices, None, 3, name="vertices"), faces=faces)
        if faces.size and not (faces.min() >= 0 and faces.max() < len(self.vertices)):
            raise ValueError(f"faces must name vertices from 0 to {len(self.vertices) - 1}")

    @property
    def corners(self) -> Array:
        """Corners of the triangles, (f, 3, 3) m."""
        return np.asarray(self.vertices[self.faces])

    @cached_property
    def normals(self) -> Array:
        """Outward unit normals of the triangles, (f, 3); zero for a triangle without area."""
        a, b, c = np.moveaxis(self.corners, 1, 0)
        cross = np.cross(b - a, c - a)
        size = np.linalg.norm(cross, axis=1, keepdims=True)
        return np.asarray(cross / np.where(size > 0, size, 1.0))

    @cached_property
    def volume(self) -> float:
        """Volume inside, m3: negative when inside out, without meaning unless the mesh is watertight.

        The sum of the tetrahedra over all triangles from one point (the divergence theorem); from the middle of
        the mesh, so that a mesh far from the origin loses no digits.
        """
        a, b, c = np.moveaxis(self.corners - self.vertices.mean(axis=0), 1, 0)
        return float(np.einsum("ij,ij->", a, np.cross(b, c)) / 6)

    @cached_property
    def area(self) -> float:
        """Area of the surface, m2."""
        a, b, c = np.moveaxis(self.corners, 1, 0)
        return float(np.linalg.norm(np.cross(b - a, c - a), axis=1).sum() / 2)

    @property
    def is_watertight(self) -> bool:
        """Whether each edge is in exactly two triangles, which run along it in opposite directions."""
        edges = self._directed_edges
        once = len(edges) > 0 and bool((np.diff(edges) > 0).all())
        size = len(self.vertices)
        back = np.sort(edges % size * size + edges // size)
        return once and np.array_equal(edges, back)

    @property
    def euler(self) -> int:
        """Vertices less edges plus faces: 2 for each ball-like body, 0 for each with one hole through it."""
        size = len(self.vertices)
        start, end = np.divmod(self._directed_edges, size)
        edges = np.unique(np.minimum(start, end) * size + np.maximum(start, end))
        return len(np.unique(self.faces)) - len(edges) + len(self.faces)

    @cached_property
    def bodies(self) -> int:
        """How many pieces there are that share no vertex."""
        used, faces = np.unique(self.faces, return_inverse=True)
        faces = faces.reshape(-1, 3)
        label = np.arange(len(used))
        # Each vertex takes the least label of its triangles; following labels of labels halves the rounds
        # (Shiloach and Vishkin, "An O(log n) parallel connectivity algorithm", 1982).
        while True:
            least = label[faces].min(axis=1)
            low = label.copy()
            np.minimum.at(low, label[faces].ravel(), np.repeat(least, 3))
            low = low[low]
            if np.array_equal(low, label):
                return len(np.unique(label))
            label = low

    @property
    def extents(self) -> tuple[Array, Array]:
        """Least and greatest coordinates, two (3,) m."""
        used = self.vertices[np.unique(self.faces)]
        return used.min(axis=0), used.max(axis=0)

    def chunks(self) -> Iterator[Facets]:
        """Normals and corners of the triangles, (k, 4, 3) at a time, in single precision."""
        for start in range(0, len(self.faces), FACETS_A_CHUNK):
            part = slice(start, start + FACETS_A_CHUNK)
            yield np.concatenate([self.normals[part, None], self.vertices[self.faces[part]]], axis=1, dtype=np.float32)

    def moved(self, offset: Array) -> Self:
        """Return the mesh moved by a vector, (3,) m."""
        return type(self)(self.vertices + offset, self.faces)

    def scaled(self, factor: float) -> Self:
        """Return the mesh scaled about the origin by a positive factor."""
        return type(self)(self.vertices * factor, self.faces)

    @cached_property
    def _directed_edges(self) -> Index:
        """Edges as start * v + end, sorted, (3 f,)."""
        ends = np.roll(self.faces, -1, axis=1)
        return np.sort((self.faces * len(self.vertices) + ends).ravel())


def merged(meshes: Sequence[Mesh]) -> Mesh:
    """Put meshes together as they are, none joined to another."""
    starts = np.cumsum([0, *(len(mesh.vertices) for mesh in meshes)])
    faces = [mesh.faces + start for mesh, start in zip(meshes, starts, strict=False)]
    vertices = [mesh.vertices for mesh in meshes]
    return Mesh(np.concatenate([np.zeros((0, 3)), *vertices]), np.concatenate([np.zeros((0, 3), int), *faces]))
