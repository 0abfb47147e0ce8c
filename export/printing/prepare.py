"""A solid and what the design asks of its print, to the parts that are printed."""

import math
from dataclasses import dataclass, replace

import numpy as np

from export.printing.bed import MOST_PARTS, CutUp, counts_of, cut_to_bed, fits, laid_out
from export.printing.manifolds import MM, faceted, joined
from export.printing.thicken import thickened
from geom.solids import Bars, Body, Links, Solid, Union

# Half the width of a printed line is about 0.2 mm (common practice): chords off by a quarter of that cannot be seen.
_FINEST = 0.05e-3


@dataclass(frozen=True)
class Wishes:
    """What the design's [print] table says; lengths are of the print, m.

    Raises
    ------
    ValueError
        If the scale or the bed is not positive.
    """

    scale: float = 1.0  # 20 for 1:20
    least_wall: float = 0.0  # m
    joined: bool = False  # links as one body
    gap: float = 0.3e-3  # m, how far joined links overlap
    bed: tuple[float, float, float] | None = None  # m

    def __post_init__(self) -> None:
        if not self.scale > 0:
            raise ValueError(f"the scale must be more than 0, not {self.scale}")
        if self.bed is not None and not min(self.bed) > 0:
            raise ValueError(f"the sizes of the bed must be more than 0, not {self.bed}")


@dataclass(frozen=True)
class Part:
    """One thing to print: a solid at its printed size, m, from the same origin as the others."""

    name: str  # "" for the whole, "1", "2" ... for parts of it, "pegs"
    solid: Solid


@dataclass(frozen=True)
class Printed:
    """What is printed for a solid, the chord tolerance its facets are made with, and what a user must know."""

    parts: tuple[Part, ...]
    within: float  # m
    notes: tuple[str, ...]


def prepared(solid: Solid, wishes: Wishes, within: float) -> Printed:
    """Scale, thicken, join and cut a solid for printing.

    Parameters
    ----------
    solid : Solid
        The true solid, m.
    wishes : Wishes
        What is asked.
    within : float
        Greatest distance of a drawn curve from the true one at full size, m; the print is drawn no finer than
        0.05 mm unless `within` is coarser.

    Returns
    -------
    Printed
        The parts. Origins are divided by the scale with everything else.

    Raises
    ------
    ModellerError
        If the solid modeller fails.
    """
    fine = max(within / wishes.scale, min(within, _FINEST))
    many = _flat(solid.body)
    join = wishes.joined and (len(many) > 1 or isinstance(many[0], Links | Bars))
    scaled = solid.body.scaled(1 / wishes.scale)
    body, notes = thickened(scaled, wishes.least_wall, overlap=wishes.gap if join else 0.0)
    origin = None if solid.origin is None else solid.origin / wishes.scale
    if wishes.scale != 1:
        notes = (f"the print is at 1:{wishes.scale:g}", *notes)
    if wishes.bed is None and not join:
        return Printed((Part("", replace(solid, body=body, volume=body.volume, origin=origin)),), fine, notes)
    parts, more = _modelled(body, wishes, fine, join=join)
    named = tuple(Part(name, Solid(solid.mark, part.volume, part, origin)) for name, part in parts)
    return Printed(named, fine, (*notes, *more))


def _flat(body: Body) -> tuple[Body, ...]:
    return sum((_flat(part) for part in body.bodies), ()) if isinstance(body, Union) else (body,)


def _modelled(body: Body, wishes: Wishes, fine: float, *, join: bool) -> tuple[list[tuple[str, Body]], tuple[str, ...]]:
    """Join and cut by the solid modeller: named bodies and notes."""
    bed = None if wishes.bed is None else np.array(wishes.bed) * MM
    low, high = body.extents(fine)
    if not join and bed is not None and fits((high - low) * MM, bed):
        return [("", body)], ()
    notes = []
    if bed is not None and float(np.prod(counts_of((high - low) * MM, bed), dtype=np.float64)) > MOST_PARTS:
        notes.append(f"it is left whole, as it would take over {MOST_PARTS} parts to fit the bed")
        bed = None
        if not join:
            return [("", body)], tuple(notes)
    whole = joined(body, fine)
    if join and (pieces := len(whole.decompose())) > 1:
        notes.append(f"the joined print is in {pieces} pieces that do not touch")
    cut = CutUp([whole], [], 0) if bed is None else cut_to_bed(whole, bed)
    if len(cut.parts) == 1:
        return [("", faceted(whole))], tuple(notes)
    digits = int(math.log10(len(cut.parts))) + 1
    parts: list[tuple[str, Body]] = [(f"{n:0{digits}d}", faceted(part)) for n, part in enumerate(cut.parts, start=1)]
    notes.append(f"cut into {len(parts)} parts to fit the bed, with {len(cut.pegs)} loose pegs")
    if cut.plain:
        notes.append(f"{cut.plain} places of the cuts are too small for a peg and are glued plain")
    if cut.pegs:
        parts.append(("pegs", faceted(laid_out(cut.pegs))))
    return parts, tuple(notes)
