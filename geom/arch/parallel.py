"""A line of an arch in its elevation: a parallel of the shape, in place, and the areas that such lines enclose.

Coordinates are (x, z) in metres. Areas and first moments of a region come from integrals round its edge (Green), the
curved parts by Gauss's rule in the shape's natural parameter, exact to rounding, the straight ones in closed form.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from geom.arch.shapes import Shape

Floats = NDArray[np.float64]

_NODES, _WEIGHTS = np.polynomial.legendre.leggauss(12)


@dataclass(frozen=True)
class Parallel:
    """The parallel of a shape at `offset` (m, positive outward), the shape's crown standing at `crown` (x, z)."""

    shape: Shape
    offset: float
    crown: tuple[float, float]

    @property
    def top(self) -> float:
        """Elevation of the line's own crown, m."""
        return self.crown[1] + self.offset

    @property
    def crown_radius(self) -> float:
        """Radius of curvature at the crown, m."""
        return float(self.shape.radius(0.0)) + self.offset

    def point(self, q: ArrayLike) -> Floats:
        """Return points (..., 2), m."""
        return np.asarray(self.crown) + self.shape.point(q) + self.offset * self.shape.normal(q)

    def tangent(self, q: ArrayLike) -> Floats:
        """Return unit tangents (..., 2), toward the ``to`` side."""
        return np.asarray(self.shape.normal(q)[..., ::-1] * np.array([1.0, -1.0]))

    def derivative(self, q: ArrayLike) -> Floats:
        """Return dP/dq (..., 2), m."""
        return self.shape.speed(q, self.offset)[..., None] * self.tangent(q)

    def length(self, start: ArrayLike, end: ArrayLike) -> Floats:
        """Return the lengths between two parameters, m."""
        return self.shape.length(end, self.offset) - self.shape.length(start, self.offset)

    def along(self, start: float, lengths: ArrayLike) -> Floats:
        """Return the parameters at lengths (m) measured along the line from the parameter `start`."""
        begun = self.shape.length(start, self.offset)
        return self.shape.at_length(begun + np.asarray(lengths, dtype=np.float64), self.offset)

    def at_x(self, x: ArrayLike) -> Floats:
        """Return the parameters at abscissae, m."""
        return self.shape.at_x(np.asarray(x, dtype=np.float64) - self.crown[0], self.offset)

    def at_level(self, z: float) -> tuple[float, float]:
        """Return the parameters on the ``from`` and the ``to`` side at elevation `z` (m), which is not over its top."""
        q = float(self.shape.at_drop(self.top - z, self.offset))
        return -q, q

    def sample(self, start: float, end: float, within: float) -> Floats:
        """Return a polyline (n, 2) between two parameters, nowhere more than `within` (m) off the line."""
        count = max(1, int(np.ceil(abs(end - start) / self.shape.step_within(within, self.offset))))
        return self.point(np.linspace(start, end, count + 1))


def arc_moments(line: Parallel, start: Floats, end: Floats, about: Floats) -> Floats:
    r"""Return what arcs of a line add to area and first moments of the regions they bound.

    Parameters
    ----------
    line : Parallel
        The line.
    start, end : ndarray, shape (n,)
        Parameters, in the order the edge is run through.
    about : ndarray, shape (n, 2)
        Points that moments are about, m; near the region, so that little cancels.

    Returns
    -------
    ndarray, shape (n, 3)
        Area (m2) and moments of x and z (m3):
        :math:`\oint \tfrac12 (x\,dz - z\,dx),\ \oint \tfrac12 x^2 dz,\ -\oint \tfrac12 z^2 dx`.
    """
    panels = max(1, int(np.ceil(np.max(np.abs(end - start), initial=0.0) / line.shape.smooth_step)))
    fractions = ((np.arange(panels)[:, None] + 0.5 * (1.0 + _NODES)) / panels).ravel()
    weights = np.tile(_WEIGHTS, panels) / (2.0 * panels)
    q = start[:, None] + (end - start)[:, None] * fractions
    x, z = np.moveaxis(line.point(q) - about[:, None, :], -1, 0)
    dx, dz = np.moveaxis(line.derivative(q) * (end - start)[:, None, None], -1, 0)
    integrand = np.stack([0.5 * (x * dz - z * dx), 0.5 * x * x * dz, -0.5 * z * z * dx])
    return (integrand @ weights).T


def straight_moments(start: Floats, end: Floats, about: Floats) -> Floats:
    """Return what straight edges add to area and first moments: arguments (n, 2), m, result as of `arc_moments`."""
    x0, z0 = np.moveaxis(start - about, -1, 0)
    x1, z1 = np.moveaxis(end - about, -1, 0)
    area = 0.5 * (x0 * z1 - x1 * z0)
    of_x = (z1 - z0) * (x0 * x0 + x0 * x1 + x1 * x1) / 6.0
    of_z = -(x1 - x0) * (z0 * z0 + z0 * z1 + z1 * z1) / 6.0
    return np.stack([area, of_x, of_z], axis=-1)
