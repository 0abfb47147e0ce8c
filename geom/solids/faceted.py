"""Bodies given by their facets."""

from dataclasses import dataclass, replace
from typing import Self

from geom.curves.base import Array
from geom.solids.body import Body
from geom.solids.mesh import Mesh


@dataclass(frozen=True, eq=False)
class Faceted(Body):
    """A body whose surface is a mesh as it stands: what joining and cutting leave.

    Raises
    ------
    ValueError
        If the mesh is not watertight.
    """

    surface: Mesh  # m

    def __post_init__(self) -> None:
        if not self.surface.is_watertight:
            raise ValueError("a body needs a watertight surface")

    @property
    def volume(self) -> float:
        """Volume inside the facets, m3."""
        return self.surface.volume

    def mesh(self, within: float) -> Mesh:
        """Return the surface as it stands."""
        return self.surface

    def moved(self, offset: Array) -> Self:
        """Return the body moved by a vector, (3,) m."""
        return replace(self, surface=self.surface.moved(offset))

    def scaled(self, factor: float) -> Self:
        """Return the body scaled about the origin."""
        return replace(self, surface=self.surface.scaled(factor))
