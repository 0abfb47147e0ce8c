"""Plane outlines carried straight: arch rings, blocks, plates."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Self

import numpy as np

from geom.curves.base import Array, fixed
from geom.solids.body import Body
from geom.solids.mesh import Mesh
from geom.solids.triangles import triangulated

_FLAT = 1e-6  # of the outline's size: corners further out of its plane are a mistake, not rounding


@dataclass(frozen=True, eq=False)
class Prism(Body):
    """A plane outline carried along a vector; the outline may be hollow-sided but not cross itself.

    Raises
    ------
    ValueError
        If the outline is not plane or has no area, or the vector lies in its plane.
    """

    outline: Array  # (k, 3) m in one plane, or (k, 2) m in the plane z = 0; the first corner not repeated
    depth: Array  # (3,) m

    def __post_init__(self) -> None:
        outline = np.asarray(self.outline, dtype=np.float64)
        if outline.ndim == 2 and outline.shape[1] == 2:
            outline = np.pad(outline, ((0, 0), (0, 1)))
        outline = fixed(outline, None, 3, name="outline")
        new = np.any(outline != np.roll(outline, 1, axis=0), axis=1)
        self._set(outline=fixed(outline[new], None, 3, name="outline"), depth=fixed(self.depth, 3, name="depth"))
        if len(self.outline) < 3:
            raise ValueError("an outline needs three different corners")
        self._check_plane()

    @property
    def volume(self) -> float:
        """Area of the outline times how far the vector leaves its plane, m3: exact."""
        return float(abs(self._normal @ self.depth) / 2)

    def mesh(self, within: float) -> Mesh:
        """Make the surface: both faces cut into triangles, a quadrilateral along each edge."""
        count = len(self.outline)
        cap = triangulated(self._flat)
        near, far = np.arange(count), np.roll(np.arange(count), -1)
        walls = np.stack([near, far, far + count, near, far + count, near + count], axis=1).reshape(-1, 3)
        faces = np.concatenate([cap[:, ::-1], cap + count, walls])
        if self._normal @ self.depth < 0:
            faces = faces[:, ::-1]
        return Mesh(np.concatenate([self.outline, self.outline + self.depth]), faces)

    def facets(self, within: float) -> int:
        """How many triangles there are: k - 2 on each face, two along each edge."""
        return 4 * len(self.outline) - 4

    def moved(self, offset: Array) -> Self:
        """Return the prism moved by a vector, (3,) m."""
        return replace(self, outline=self.outline + offset)

    def scaled(self, factor: float) -> Self:
        """Return the prism scaled about the origin."""
        return replace(self, outline=self.outline * factor, depth=self.depth * factor)

    def _check_plane(self) -> None:
        size = np.ptp(self.outline, axis=0).max()
        normal = np.linalg.norm(self._normal)
        if normal <= (_FLAT * size) ** 2:
            raise ValueError("the outline has no area")
        if np.abs((self.outline - self.outline[0]) @ self._normal).max() > _FLAT * size * normal:
            raise ValueError("the outline must lie in one plane")
        if abs(self._normal @ self.depth) <= _FLAT * normal * np.linalg.norm(self.depth):
            raise ValueError("the depth must lead out of the outline's plane")

    @cached_property
    def _normal(self) -> Array:
        """Twice the area as a vector (Newell): anticlockwise seen from its tip."""
        corners = self.outline - self.outline[0]
        return np.asarray(np.cross(corners, np.roll(corners, -1, axis=0)).sum(axis=0))

    @cached_property
    def _flat(self) -> Array:
        """Outline in its own plane, anticlockwise, (k, 2) m."""
        normal = self._normal / np.linalg.norm(self._normal)
        x = np.cross(normal, np.eye(3)[np.argmin(np.abs(normal))])
        x /= np.linalg.norm(x)
        return np.asarray((self.outline - self.outline[0]) @ np.stack([x, np.cross(normal, x)], axis=1))
