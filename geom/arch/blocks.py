"""Voussoirs: a ring divided by joints normal to its axis, at equal lengths of it.

`n` blocks have `n` - 1 mortar joints; the springers bear on the abutments without one. A joint is of constant width:
half of it is taken off each block, parallel to the joint's plane, over the whole depth (common practice).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from geom.arch.cuts import Bodies, Cuts, bodies, cut, feet, joined
from geom.arch.refusal import NoArch
from geom.arch.ring import Ring

Floats = NDArray[np.float64]
Indices = NDArray[np.intp]

_ALIKE = 1e-8  # of the thickness: ten thousand times rounding, far under what any saw or chisel tells apart


@dataclass(frozen=True)
class Voussoirs:
    """The blocks of a ring, in order from the ``from`` springing.

    Attributes
    ----------
    blocks : Bodies
        The stones, without their mortar.
    start, end : Cuts
        Their faces toward ``from`` and ``to``; `slope` is that of the axis at the joint (a level foot's a right angle).
    joints : Cuts
        The middle planes of the joints, one fewer than blocks.
    mortar : Bodies or None
        What fills the joints; None where they are closed.
    """

    blocks: Bodies
    start: Cuts
    end: Cuts
    joints: Cuts
    mortar: Bodies | None

    def __len__(self) -> int:
        return len(self.blocks)

    @property
    def keystone(self) -> int | None:
        """Index of the middle block, None where the count is even."""
        return len(self) // 2 if len(self) % 2 else None

    @property
    def run_out(self) -> int:
        """How many joints end on a level foot instead of the intrados."""
        return int(np.count_nonzero(self.joints.runs_out))

    @cached_property
    def different(self) -> int:
        """How many different stones there are, a stone and its mirror image counted as one."""
        return len(np.unique(self.forms))

    @cached_property
    def forms(self) -> Indices:
        """The form of each block (n,): equal numbers for blocks that are congruent or mirror images."""
        size = float(np.max(self.blocks.ring.profile.thickness))
        both = np.concatenate([self._signature(mirrored=False), self._signature(mirrored=True)])
        _, seen = np.unique(np.round(both / (_ALIKE * size)), axis=0, return_inverse=True)
        # Blocks alike or mirrored share one of their two numbers, and so the lesser of them.
        key = np.min(seen.reshape(2, -1), axis=0)
        _, first, form = np.unique(key, return_index=True, return_inverse=True)
        order: Indices = np.argsort(np.argsort(first))  # numbered in order of appearance
        return order[form]

    def _signature(self, *, mirrored: bool) -> Floats:
        """Return lengths (n, 15), m, that fix a block: those between its six corners, in order of its edge."""
        tops = self.blocks.ring.extrados.point(self.blocks.outer)
        corners = np.concatenate([self.blocks.chain, tops[:, ::-1]], axis=1)
        if mirrored:
            corners = corners[:, [3, 2, 1, 0, 5, 4]]
        first, second = np.triu_indices(6, 1)
        return np.asarray(np.hypot(*np.moveaxis(corners[:, first] - corners[:, second], -1, 0)))


def voussoirs(ring: Ring, count: int, *, joint: float = 0.0) -> Voussoirs:
    """Return a ring divided into blocks.

    Parameters
    ----------
    ring : Ring
        The ring.
    count : int
        Number of blocks, 2 at least; an odd one has a keystone.
    joint : float
        Width of a mortar joint, m.

    Raises
    ------
    SolveError
        If the joints leave nothing of a block.
    """
    start, _ = ring.ends["axis"]
    q = ring.axis.along(start, ring.length("axis") * np.arange(1, count) / count)
    first, last = feet(ring)
    middle = cut(ring, q)
    if joint == 0.0:
        before, after, mortar = middle, middle, None
    else:
        before, after = cut(ring, q, shift=-0.5 * joint), cut(ring, q, shift=0.5 * joint)
        mortar = bodies(ring, before, after)
    starts, ends = joined(first, after), joined(before, last)
    _check(starts, ends, ring, count, joint)
    return Voussoirs(bodies(ring, starts, ends), starts, ends, middle, mortar)


def _check(starts: Cuts, ends: Cuts, ring: Ring, count: int, joint: float) -> None:
    reaching = (starts.runs_out == 0) & (ends.runs_out == 0)
    narrow = (starts.outer >= ends.outer) | (reaching & (starts.inner >= ends.inner))
    if np.any(narrow):
        number = int(np.argmax(narrow)) + 1
        face = ring.length("axis") / count
        raise NoArch(
            f"{{}} leaves nothing of block {number} of {count}, each {{}} along the axis; "
            "give thinner joints or fewer blocks",
            joint, face, key="joint",
        )  # fmt: skip
