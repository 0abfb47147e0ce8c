"""The figures of an arch, as the figures file has them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.result import (
    NAN,
    CubicMetres,
    CubicMetresArray,
    DegreesArray,
    KilogramsArray,
    Metres,
    MetresArray,
    Newtons,
    NewtonsArray,
    Rows,
    SquareMetres,
    SquareMetresArray,
)


@dataclass(frozen=True, eq=False)
class BlockRows(Rows):
    """Every block, in order from the first springing.

    `joint_from`, `joint_to` are slopes of the axis at its joints, falling from plus to minus (a level foot's is a right
    angle); `outline` is in place at mid-depth; `face` and `back` are lengths along intrados and extrados; blocks of one
    `form` are congruent or mirror images.
    """

    mark: tuple[str, ...]
    area: SquareMetresArray
    volume: CubicMetresArray
    mass: KilogramsArray
    joint_from: DegreesArray
    joint_to: DegreesArray
    face: MetresArray
    back: MetresArray
    form: NDArray[np.int64]
    outline: tuple[MetresArray, ...]


@dataclass(frozen=True, eq=False)
class OrdinateRows(Rows):
    """Ordinates over the level of the lower springing at distances from the first one; NaN where a line is absent.

    `along_...` are lengths along the lines from their own feet.
    """

    x: MetresArray
    intrados: MetresArray
    axis: MetresArray
    extrados: MetresArray
    along_intrados: MetresArray
    along_axis: MetresArray
    along_extrados: MetresArray


@dataclass(frozen=True, eq=False)
class WidthRows(Rows):
    """Clear widths at heights over the lower springing; NaN where the intrados is not on both sides there."""

    height: MetresArray
    width: MetresArray


@dataclass(frozen=True)
class ArchFigures:
    """Figures of one arch, in the design's axes.

    `span`, `rise` and `axis_length` are of the axis from foot to foot; the clear ones and `under_area` are of the
    intrados, the area being that over the straight line between its feet. `springing_from`, `springing_to` are forces
    on the abutments. What this version does not work out is None, as what has no meaning.
    """

    span: Metres
    rise: Metres
    axis_length: Metres
    thrust: Newtons
    tie_pull: Newtons
    crown_radius: Metres
    springing_from: NewtonsArray
    springing_to: NewtonsArray
    intrados: MetresArray
    axis: MetresArray
    extrados: MetresArray
    area: SquareMetres
    volume: CubicMetres
    under_area: SquareMetres
    thrust_line: None = None
    blocks: BlockRows | None = None
    bends: None = None
    setting_out: OrdinateRows | None = None
    bricks: None = None
    segments: None = None
    ribs: None = None
    parameter: Metres = NAN  # of the catenary, H/w where it is the axis
    clear_span: Metres = NAN
    clear_rise: Metres = NAN
    intrados_length: Metres = NAN
    extrados_length: Metres = NAN
    greatest_thickness: Metres = NAN  # at which the intrados would fold
    eccentricity: float = NAN  # greatest over thickness, of the line that the thrust is of
    different_blocks: int | None = None
    keystone: str | None = None
    clear_widths: WidthRows | None = None
