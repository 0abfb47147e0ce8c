"""The solids of an arch, and its blocks as flat parts to be cut at full size."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from geom.arch.asked import AskedArch
from geom.arch.blocks import Voussoirs, voussoirs
from geom.arch.making import Made
from geom.arch.refusal import NoArch
from geom.arch.views import block_mark
from geom.result import Flat, fixed
from geom.setting.options import Setting
from geom.solids import Prism, Solid, Union

Floats = NDArray[np.float64]

LEAST_GAP = 0.00005  # m as printed: blocks nearer than that are one body to a slicer


def solids(asked: AskedArch, made: Made, setting: Setting) -> tuple[Solid, ...]:
    """Return the ring as one solid, and its blocks as another, apart by their joint or the least gap that prints."""
    within = setting.drawing.within
    ring = made.ring
    edge = np.concatenate([ring.sample("intrados", within), ring.sample("extrados", within)[::-1]])
    whole = Solid(asked.mark, ring.area * asked.depth, _prism(asked, edge))
    if asked.wanted.blocks is None:
        return (whole,)
    stones = apart(asked, made, LEAST_GAP * max(1.0, setting.printing.scale))
    blocks = [_prism(asked, outline) for outline in stones.blocks.outlines(within)]
    volume = float(np.sum(stones.blocks.area)) * asked.depth
    return (whole, Solid(f"{asked.mark}-blocks", volume, Union(blocks)))


def apart(asked: AskedArch, made: Made, gap: float) -> Voussoirs:
    """Return the blocks with at least `gap` (m) between them; as they are where that would leave nothing of one."""
    assert made.stones is not None, "blocks were asked for"
    if asked.wanted.joint >= gap:
        return made.stones
    try:
        return voussoirs(made.ring, len(made.stones), joint=gap)
    except NoArch:  # a print so small that its blocks are no larger than the gap
        return made.stones


def flats(asked: AskedArch, made: Made, setting: Setting) -> tuple[Flat, ...]:
    """Return the outline of each block, (k, 2) m in the elevation."""
    if made.stones is None:
        return ()
    outlines = made.stones.blocks.outlines(setting.drawing.within)
    what = f"block, {asked.material.name}"
    return tuple(
        Flat(block_mark(asked, number), (fixed(outline, -1, 2),), what=what) for number, outline in enumerate(outlines)
    )


def _prism(asked: AskedArch, outline: Floats) -> Prism:
    across = asked.depth * asked.plane.across
    return Prism(asked.plane.placed(outline) - 0.5 * across, across)
