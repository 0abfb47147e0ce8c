"""Curved surfaces with a thickness: vaults and domes."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np
from numpy.typing import ArrayLike

from geom.curves.base import Array, Index, fixed, units
from geom.solids.body import Body
from geom.solids.mesh import Mesh


@dataclass(frozen=True, eq=False)
class Shell(Body):
    """A surface of triangles with half its thickness on each side, square edges.

    Raises
    ------
    ValueError
        If a thickness is not positive, the faces disagree which side is out, or the surface is closed on itself
        in a way that leaves an edge to more than two triangles.
    """

    vertices: Array  # (v, 3) m, on the middle surface
    faces: Index  # (f, 3), anticlockwise seen from outside
    thickness: ArrayLike  # m, one or one for each vertex
    normals: Array | None = None  # (v, 3) true normals at the vertices; worked out from the faces where not given

    def __post_init__(self) -> None:
        middle = Mesh(self.vertices, self.faces)
        count = len(middle.vertices)
        thickness = fixed(np.broadcast_to(np.asarray(self.thickness, float), (count,)), count, name="thickness")
        if not (thickness > 0).all():
            raise ValueError("a shell's thickness must be more than 0")
        self._set(vertices=middle.vertices, faces=middle.faces, thickness=thickness)
        if self.normals is not None:
            normals = fixed(self.normals, count, 3, name="normals")
            self._set(normals=fixed(units(normals, name="each normal"), count, 3, name="normals"))

    @cached_property
    def volume(self) -> float:
        """Volume of the facets, m3: the true one up to the surface's own chords."""
        return self._mesh.volume

    def mesh(self, within: float) -> Mesh:
        """Make the closed surface from the facets given."""
        return self._mesh

    def facets(self, within: float) -> int:
        """How many triangles there are: two for each face, two along each open edge."""
        return len(self._mesh.faces)

    def moved(self, offset: Array) -> Self:
        """Return the shell moved by a vector, (3,) m."""
        return replace(self, vertices=self.vertices + offset)

    def scaled(self, factor: float) -> Self:
        """Return the shell scaled about the origin."""
        return replace(self, vertices=self.vertices * factor, thickness=np.asarray(self.thickness) * factor)

    @cached_property
    def _mesh(self) -> Mesh:
        half = np.asarray(self.thickness)[:, None] / 2 * self._out
        inner = self.faces[:, ::-1] + len(self.vertices)
        start, end = self._open_edges.T
        count = len(self.vertices)
        # Seen from outside the rim runs against its face's own direction.
        rim = np.stack([end, start, start + count, end, start + count, end + count], axis=1).reshape(-1, 3)
        vertices = np.concatenate([self.vertices + half, self.vertices - half])
        mesh = Mesh(vertices, np.concatenate([self.faces, inner, rim]))
        if not mesh.is_watertight:
            raise ValueError("the shell's faces do not fit together")
        return mesh

    @property
    def _open_edges(self) -> Index:
        """Edges of one face only, in its direction, (n, 2)."""
        edges = np.stack([self.faces, np.roll(self.faces, -1, axis=1)], axis=-1).reshape(-1, 2)
        count = len(self.vertices)
        key, back = edges[:, 0] * count + edges[:, 1], edges[:, 1] * count + edges[:, 0]
        return np.asarray(edges[~np.isin(key, back)])

    @cached_property
    def _out(self) -> Array:
        """Outward normals, weighted by the angle of each face at the vertex.

        So they do not depend on how flat parts are cut into triangles (Thuermer and Wuethrich, "Computing vertex
        normals from polygonal facets", 1998).
        """
        if self.normals is not None:
            return self.normals
        corners = self.vertices[self.faces]
        ahead, behind = np.roll(corners, -1, axis=1) - corners, np.roll(corners, 1, axis=1) - corners
        cross = np.cross(ahead, behind)
        size = np.linalg.norm(cross, axis=2)
        angle = np.arctan2(size, (ahead * behind).sum(axis=2))
        out = np.zeros_like(self.vertices)
        np.add.at(out, self.faces.ravel(), (cross * (angle / size)[..., None]).reshape(-1, 3))
        length = np.linalg.norm(out, axis=1, keepdims=True)
        return np.asarray(out / np.where(length > 0, length, 1.0))  # a vertex of no face has no normal
