"""What is drawn beside the geometry of a view as it grows, and the ground it takes."""

from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np

from export.picture.ground import HEAVY, LIGHT, TEXT, Ground
from export.picture.sizes import Sizes
from export.picture.values import Box, Circle, Path, Placed, Text, around, box_of, corners_of
from export.picture.views import Seen

_CELL = 0.2  # of the grid, in heights of the notes' text: half a millimetre on paper
_MARGIN = 14.0  # round a view where marks may still stand, in the same
_MOST_CELLS = 4e6  # of one grid: a sheet of A0 at half a millimetre


@dataclass
class Drawn:
    """What is drawn beside the geometry, as it grows."""

    paths: list[Path] = field(default_factory=list)
    circles: list[Circle] = field(default_factory=list)
    texts: list[Text] = field(default_factory=list)
    dimensions: list[Placed] = field(default_factory=list)
    dropped: int = 0

    @property
    def box(self) -> Box:
        """Box round all of it."""
        placed = self.dimensions
        return around(
            *(box_of(path.points) for path in self.paths),
            *(circle.box for circle in self.circles),
            *(text.box for text in self.texts),
            *(one.box for one in placed),
        )


def printed(box: Box, per: float) -> Box:
    """Return a box of geometry (m) on the print; a point where there is no geometry."""
    if not np.isfinite(box[0]):
        return (0.0, 0.0, 0.0, 0.0)
    return (box[0] / per, box[1] / per, box[2] / per, box[3] / per)


def ground_of(box: Box, sizes: Sizes, *, free: bool) -> Ground:
    """Return an empty ground over a box, and where marks are free a margin round it."""
    margin = _MARGIN * sizes.note if free else 0.0
    box = (box[0] - margin, box[1] - margin, box[2] + margin, box[3] + margin)
    cell = max(_CELL * sizes.note, float(np.sqrt((box[2] - box[0]) * (box[3] - box[1]) / _MOST_CELLS)))
    return Ground(box, cell, wide=free)


def enter(ground: Ground, shown: Seen, drawn: Drawn, per: float) -> None:
    """Enter what is drawn already into the ground."""
    for stroke in shown.strokes:
        ground.lines(stroke.points / per, HEAVY if stroke.look.heavy else LIGHT, closed=stroke.closed)
    for row in shown.links:
        ground.points(row.spread(ground.cell * per) / per, HEAVY)
    _enter_paths(ground, drawn.paths)
    for circle in drawn.circles:
        ground.area(corners_of(circle.box), HEAVY)
    for text in drawn.texts:
        ground.area(text.corners, TEXT)
    for one in drawn.dimensions:
        _enter_paths(ground, one.paths)
        ground.area(one.text.corners, TEXT)


def _enter_paths(ground: Ground, paths: Iterable[Path]) -> None:
    for path in paths:
        ground.lines(path.points, HEAVY if path.look.heavy else LIGHT, closed=path.closed)
