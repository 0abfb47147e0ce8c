"""A loaded member as a boundary value problem for scipy.integrate.solve_bvp, for tests and benchmarks."""

from __future__ import annotations

from typing import Any, TypeAlias

import numpy as np
from numpy.typing import NDArray

Floats: TypeAlias = NDArray[np.float64]


def loaded_member(bounds: Floats, forces: Floats, across: Floats, load: Floats, stiffness: float) -> tuple[Any, ...]:
    """Give right side, boundary conditions and start: place and tension along each section, in two axes or three.

    Sections lie between the unstretched arcs `bounds`, with a force down, along the last axis, at the end of each but
    the last; `across` leads from support to support, `load` is that of an unstretched metre.
    """
    pieces, axes = np.diff(bounds), len(across)
    count, down = len(pieces), np.eye(2 * axes)[-1]

    def right(unit: Floats, y: Floats) -> Floats:
        out = np.empty_like(y).reshape(count, 2, axes, -1)
        for k, length in enumerate(pieces):
            force = y.reshape(count, 2, axes, -1)[k, 1]
            out[k, 0] = length * force * (1.0 / stiffness + 1.0 / np.sqrt((force**2).sum(axis=0)))
            out[k, 1] = -length * load[:, np.newaxis]
        return out.reshape(y.shape)

    def ends(first: Floats, last: Floats) -> Floats:
        begin, end = first.reshape(count, -1), last.reshape(count, -1)
        gaps = [begin[k + 1] - end[k] - forces[k] * down for k in range(count - 1)]
        return np.concatenate([begin[0, :axes], *gaps, end[-1, :axes] - across])

    unit = np.linspace(0.0, 1.0, 15)
    start = np.zeros((count, 2, axes, unit.size))
    for k, length in enumerate(pieces):
        s = (bounds[k] + unit * length) / bounds[-1]
        start[k, 0] = across[:, np.newaxis] * s
        start[k, 0, -1] -= 0.4 * across[0] * s * (1.0 - s)
        start[k, 1, 0], start[k, 1, -1] = 2500.0, -800.0 + 1600.0 * s
    return right, ends, unit, start.reshape(-1, unit.size)
