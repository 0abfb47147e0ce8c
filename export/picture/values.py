"""What a picture is made of. Geometry is in metres, all that is printed beside it in the print's own unit.

A panel shows one view: `per` metres of geometry are one unit of print there, so that a geometry point g and a printed
point p lie at g / per + at and p + at on the print. The one place where either becomes another unit is the file that
draws it.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from export.picture import text as measure
from export.picture.looks import Look

Floats = NDArray[np.float64]
Box = tuple[float, float, float, float]  # left, bottom, right, top
SITE_PLAN = "$plan"  # the name of the plan of all pieces: no piece can have it, as a mark holds no $
NOTHING: Box = (np.inf, np.inf, -np.inf, -np.inf)


@dataclass(frozen=True, slots=True, eq=False)
class Stroke:
    """A line of the geometry: (n, 2) m; with `bulges` (n,), tan of a quarter of each arc's angle, arcs."""

    look: Look
    points: Floats
    closed: bool = False
    bulges: Floats | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Links:
    """Equal links seen in one view: centres (n, 2) m, angles of their long axis (n,) rad, which face is seen.

    Beads are links without wire, as long as wide.
    """

    wire: float  # m
    pitch: float  # m
    width: float  # m
    places: Floats
    angles: Floats
    face_on: NDArray[np.bool_]

    def spread(self, apart: float) -> Floats:
        """Points over all of the links, (k, 2) m, so many along and across each that none are further apart."""
        along = np.linspace(-0.5, 0.5, 2 + int((self.pitch + 2 * self.wire) / apart)) * (self.pitch + 2 * self.wire)
        across = np.linspace(-0.5, 0.5, 2 + int(self.width / apart))
        ways = np.stack([np.cos(self.angles), np.sin(self.angles)], axis=1)
        sides = np.stack([-ways[:, 1], ways[:, 0]], axis=1) * np.where(self.face_on, self.width, self.wire)[:, None]
        points = (
            self.places[:, None, None]
            + along[None, :, None, None] * ways[:, None, None]
            + across[None, None, :, None] * sides[:, None, None]
        )
        return np.asarray(points.reshape(-1, 2))


@dataclass(frozen=True, slots=True, eq=False)
class Path:
    """A printed line of fixed size, (n, 2): a symbol, a leader, a part of a dimension."""

    look: Look
    points: Floats
    closed: bool = False


@dataclass(frozen=True, slots=True)
class Circle:
    """A printed circle of fixed size."""

    look: Look
    at: tuple[float, float]
    radius: float

    @property
    def box(self) -> Box:
        """Box round it."""
        (x, y), r = self.at, self.radius
        return (x - r, y - r, x + r, y + r)


@dataclass(frozen=True, slots=True)
class Text:
    """A line of text; `at` is the left end, middle or right end of its foot, `angle` in radians."""

    look: Look
    text: str
    at: tuple[float, float]
    height: float
    anchor: Literal["left", "centre", "right"] = "left"
    angle: float = 0.0

    @property
    def width(self) -> float:
        """Measured width, print units."""
        return measure.width(self.text) * self.height

    @property
    def corners(self) -> Floats:
        """Corners of its box (4, 2), from the foot's left end, counter-clockwise."""
        before = {"left": 0.0, "centre": 0.5, "right": 1.0}[self.anchor] * self.width
        x = np.array([-before, self.width - before, self.width - before, -before])
        y = np.array([0.0, 0.0, self.height, self.height])
        cos, sin = np.cos(self.angle), np.sin(self.angle)
        return np.stack([self.at[0] + cos * x - sin * y, self.at[1] + sin * x + cos * y], axis=1)

    @property
    def box(self) -> Box:
        """Upright box round it."""
        if self.angle:
            return box_of(self.corners)
        (x, y), wide = self.at, self.width
        x -= {"left": 0.0, "centre": 0.5, "right": 1.0}[self.anchor] * wide
        return (x, y, x + wide, y + self.height)


@dataclass(frozen=True, slots=True, eq=False)
class Placed:
    """A dimension in its place: what it measures (p, q (2,) m), and how it is printed.

    A "linear" one measures along `angle` (rad), its line through `line_at` (printed); an "ordinate" the height of q
    over the level p lies on; a "radius" from p to q.
    """

    kind: Literal["linear", "ordinate", "radius"]
    p: Floats
    q: Floats
    value: float  # m
    text: Text
    says: str
    angle: float
    line_at: tuple[float, float]
    paths: tuple[Path, ...]

    @property
    def box(self) -> Box:
        """Box round its lines and its text."""
        return around(self.text.box, *(box_of(path.points) for path in self.paths))

    @property
    def measured(self) -> float:
        """What its two points measure, m."""
        step = self.q - self.p
        if self.kind == "radius":
            return float(np.hypot(*step))
        along = (np.cos(self.angle), np.sin(self.angle)) if self.kind == "linear" else (0.0, 1.0)
        measured = float(step @ np.asarray(along))
        return measured if self.kind == "ordinate" else abs(measured)


@dataclass(frozen=True, slots=True)
class Group:
    """All of one piece in one view: what can be picked as one."""

    mark: str
    strokes: tuple[Stroke, ...] = ()
    links: tuple[Links, ...] = ()
    paths: tuple[Path, ...] = ()
    circles: tuple[Circle, ...] = ()
    texts: tuple[Text, ...] = ()


@dataclass(frozen=True, slots=True)
class Panel:
    """One view as it is printed: a piece's elevation or the plan; the heading is one of text alone.

    Printed points are relative to its origin.
    """

    name: str
    kind: Literal["elevation", "plan", "heading", "notes"]
    per: float  # metres of geometry in one unit of print
    groups: tuple[Group, ...]
    dimensions: tuple[Placed, ...] = ()
    titles: tuple[Text, ...] = ()
    core: Box = NOTHING  # of the geometry, print units
    box: Box = NOTHING  # of everything, print units
    at: tuple[float, float] = (0.0, 0.0)  # where its origin is on the print
    dropped: int = 0  # marks there was no room for
    line: float | None = None  # the geometry's left end, print units, where elevation and plan stand in one line


@dataclass(frozen=True, slots=True)
class Notes:
    """The notes at the foot: lines of text, and the check line with its ends; `at` is their upper left corner."""

    texts: tuple[Text, ...]
    paths: tuple[Path, ...]
    check: tuple[tuple[float, float], tuple[float, float]]  # ends of the check line, print units
    check_length: float  # m
    box: Box
    at: tuple[float, float] = (0.0, 0.0)


@dataclass(frozen=True, slots=True)
class Picture:
    """Everything on the print, in place."""

    panels: tuple[Panel, ...]
    notes: Notes
    scale: str
    ratio: float
    box: Box
    sheets: int = 1
    room: tuple[float, float] = (0.0, 0.0)  # drawing space of a sheet

    @property
    def dropped(self) -> int:
        """How many marks and dimensions there was no room for."""
        return sum(panel.dropped for panel in self.panels)


def xy(x: float, y: float) -> Floats:
    """Return a point or a step as an array (2,)."""
    return np.array([x, y])


def box_of(points: Floats) -> Box:
    """Return the upright box round points (n, 2); an empty one round none."""
    if not len(points):
        return NOTHING
    low, high = points.min(axis=0), points.max(axis=0)
    return (float(low[0]), float(low[1]), float(high[0]), float(high[1]))


def around(*boxes: Box) -> Box:
    """Return the box round boxes; an empty one round none."""
    if not boxes:
        return NOTHING
    left, bottom, right, top = zip(*boxes, strict=True)
    return (min(left), min(bottom), max(right), max(top))


def shifted(box: Box, by: tuple[float, float]) -> Box:
    """Return a box moved."""
    return (box[0] + by[0], box[1] + by[1], box[2] + by[0], box[3] + by[1])


def corners_of(box: Box) -> Floats:
    """Return the corners (4, 2) of an upright box."""
    left, bottom, right, top = box
    return np.array([[left, bottom], [right, bottom], [right, top], [left, top]])
