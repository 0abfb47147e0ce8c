"""The neutral result: what every output is made from, and nothing of any file format.

All values are SI (metre, newton, kilogram, radian; temperatures in degrees Celsius) and frozen. A number that leaves
as text takes its key from the field's name and the unit in its annotation: `sag: Metres` is written `sag_m`.
A figure that has no meaning for a piece is NaN or None, and leaves as null.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Annotated, Any, Literal

import numpy as np
from numpy.typing import NDArray

from geom.curves import Curve
from geom.solids import Solid

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Unit:
    """The unit a figure leaves in: `suffix` of its key, and what an inside value is multiplied by."""

    suffix: str
    factor: float = 1.0


_DEGREES = Unit("deg", 180.0 / math.pi)

Metres = Annotated[float, Unit("m")]
SquareMetres = Annotated[float, Unit("m2")]
CubicMetres = Annotated[float, Unit("m3")]
Newtons = Annotated[float, Unit("N")]
NewtonMetres = Annotated[float, Unit("Nm")]
NewtonsPerMetre = Annotated[float, Unit("N_per_m")]
Kilograms = Annotated[float, Unit("kg")]
KilogramsPerCubicMetre = Annotated[float, Unit("kg_per_m3")]
PerKelvin = Annotated[float, Unit("per_K")]
Celsius = Annotated[float, Unit("C")]
Degrees = Annotated[float, _DEGREES]  # kept in radians, written in degrees
MetresArray = Annotated[Floats, Unit("m")]
NewtonsArray = Annotated[Floats, Unit("N")]
SquareMetresArray = Annotated[Floats, Unit("m2")]
CubicMetresArray = Annotated[Floats, Unit("m3")]
KilogramsArray = Annotated[Floats, Unit("kg")]
DegreesArray = Annotated[Floats, _DEGREES]

NAN = math.nan


def fixed(values: Any, *shape: int) -> Floats:  # noqa: ANN401 - anything numpy can read
    """Return a read-only float64 copy of `values`; -1 in `shape` stands for any size.

    Raises
    ------
    ValueError
        If the array is not of the shape asked for.
    """
    array = np.array(values, dtype=np.float64)
    if shape and (array.ndim != len(shape) or any(w not in (-1, g) for w, g in zip(shape, array.shape, strict=True))):
        raise ValueError(f"an array of shape {shape} is needed, not {array.shape}")
    array.setflags(write=False)
    return array


@dataclass(frozen=True)
class Quantity:
    """One named number with its unit: `Quantity("sag", 0.25, Unit("m"))`; value None or NaN leaves as null."""

    name: str
    value: float | None
    unit: Unit = Unit("")

    @property
    def key(self) -> str:
        """The name as written in a result file, `sag_m`."""
        return f"{self.name}_{self.unit.suffix}" if self.unit.suffix else self.name


@dataclass(frozen=True, eq=False)
class Frame:
    """The plane a view is drawn in: `along` to the right, `up` upwards, both unit vectors (3,)."""

    origin: Floats
    along: Floats
    up: Floats

    def __post_init__(self) -> None:
        for name in ("origin", "along", "up"):
            object.__setattr__(self, name, fixed(getattr(self, name), 3))

    def flat(self, points: Floats) -> Floats:
        """Return the (n, 2) coordinates in this plane of (n, 3) points, in metres."""
        moved = np.asarray(points, dtype=np.float64) - self.origin
        return np.stack([moved @ self.along, moved @ self.up], axis=-1)


PLAN = Frame(fixed([0, 0, 0]), fixed([1, 0, 0]), fixed([0, 1, 0]))
Z_UP = fixed([0, 0, 1])

Role = Literal[
    "axis", "chord", "intrados", "extrados", "joint", "block", "thrust", "member", "edge", "floor", "ground",
    "springing", "ordinate", "centre", "other case",
]  # fmt: skip


@dataclass(frozen=True)
class Line:
    """A curve in place (metres) with the role that decides its layer and its look, and the mark it belongs to."""

    role: Role
    curve: Curve
    mark: str = ""


DimensionKind = Literal["horizontal", "vertical", "aligned", "radius", "level"]


@dataclass(frozen=True, eq=False)
class Dimension:
    """What is worth dimensioning: between `p` and `q` (3,) m; a "level" is the elevation of `q`.

    `value` is the true figure in metres (or radians for an angle); `says` names it where it could be mistaken,
    such as "sag under chord". `side` says on which side of the figure it wants to stand.
    """

    kind: DimensionKind
    p: Floats
    q: Floats
    value: float
    says: str = ""
    side: Literal["below", "above", "left", "right", "inside"] = "below"
    rank: int = 0  # 0 stands nearest the figure; larger ranks further out
    tells: bool = False  # whether it is one of the few that tell the shape as it was asked for

    def __post_init__(self) -> None:
        object.__setattr__(self, "p", fixed(self.p, 3))
        object.__setattr__(self, "q", fixed(self.q, 3))


LabelRole = Literal[
    "support", "held point", "load", "node", "member", "joint", "part", "fitting", "bay", "block", "station",
]  # fmt: skip


@dataclass(frozen=True)
class Said:
    """A line of text with lengths in it: each `{}` of `text` is one of `lengths` (m), said in the drawing's unit."""

    text: str
    lengths: tuple[Metres, ...] = ()


@dataclass(frozen=True, eq=False)
class Label:
    """A mark at a place (3,) m. The role decides its symbol: supports carry theirs, nodes a circle, loads a bob.

    `below` are lines that stand under it in small text. A "bay" stands in the row under the figure, a "block" within
    its outline or, all of them alike, outside the ring, in the direction of `along`; a "station" is a length under its
    point on a line of ordinates.
    """

    at: Floats
    text: str
    role: LabelRole
    reach: float = 0.0  # of a load's hanger, m
    along: Floats | None = None  # direction (3,) of the member it stands beside; of a block, from `at` to its back
    below: tuple[Said, ...] = ()

    def __post_init__(self) -> None:
        object.__setattr__(self, "at", fixed(self.at, 3))
        if self.along is not None:
            object.__setattr__(self, "along", fixed(self.along, 3))


@dataclass(frozen=True)
class View:
    """One picture of a piece: a plane, what is dimensioned in it, and what it shows.

    `lines`, `labels`, `solids` left None mean the piece's own; a run gives its bays unfolded into one plane, a net its
    sections.
    """

    name: str
    frame: Frame
    dimensions: tuple[Dimension, ...] = ()
    lines: tuple[Line, ...] | None = None
    labels: tuple[Label, ...] | None = None
    solids: tuple[Solid, ...] | None = None


@dataclass(frozen=True)
class Flat:
    """A flat part cut at full size: closed outlines (k, 2) m, counter-clockwise, holes clockwise."""

    mark: str
    outlines: tuple[Floats, ...]
    copies: int = 1
    what: str = ""


@dataclass(frozen=True)
class Column:
    """One column of a table: key without unit, unit, heading for people, and its values (array or list of text)."""

    key: str
    unit: Unit
    heading: str
    values: Floats | NDArray[np.int64] | tuple[str | None, ...]


@dataclass(frozen=True)
class Table:
    """Columns of one length, written alike as CSV, as sheet of a workbook and as table on a page."""

    name: str
    columns: tuple[Column, ...]
    piece: str = ""


@dataclass(frozen=True)
class Caution:
    """Something a user must know, shown wherever the figure it is about is shown."""

    code: str
    piece: str
    text: str
    source: str = ""


@dataclass(frozen=True)
class Cut:
    """A row of the cut list. Lengths in metres, mass of one copy in kg; `links` None where the stock has none."""

    mark: str
    piece: str
    stock: str
    cut_length: Metres
    pin_to_pin: Metres
    links: int | None
    copies: int
    mass: Kilograms


@dataclass(frozen=True)
class StockPattern:
    """One way of cutting a reel or bar: what is cut of it, how many reels so, and what is left of each."""

    length: Metres
    count: int
    cuts: tuple[PatternCut, ...]
    left: Metres


@dataclass(frozen=True)
class PatternCut:
    """How many of a mark are cut from each reel of a pattern."""

    mark: str
    count: int


@dataclass(frozen=True)
class StockPlan:
    """What to buy of one stock; `least_possible` is a proven lower bound on `needed`."""

    stock: str
    needed: int | None
    least_possible: int | None
    patterns: tuple[StockPattern, ...]
    order_length: Metres = NAN  # all reels together, spares included
    links: int | None = None  # links bought, those lost to cuts included
    links_lost: int | None = None
    spares: int | None = None


Standing = Literal["dead load only", "indicative", "misuse"]


@dataclass(frozen=True, eq=False)
class Pull:
    """Pull (or push, of what stands) of a piece on one support: vectors (3,) N by case, hardware at it included."""

    support: str
    named: bool
    at: Floats
    vectors: Mapping[str, Floats]  # case -> (3,) N
    height: float | None = None  # of the support over its foot, m

    def __post_init__(self) -> None:
        object.__setattr__(self, "at", fixed(self.at, 3))


@dataclass(frozen=True)
class Case:
    """One state a member is looked at in. NaN where a figure has no meaning; `added` holds what only this case has."""

    case: str
    standing: Standing
    temperature: Celsius
    sag: Metres = NAN
    lowest: Metres = NAN
    clearance: Metres = NAN
    pull_horizontal: Newtons = NAN
    pull_from: Newtons = NAN
    pull_to: Newtons = NAN
    added: object | None = None


@dataclass(frozen=True)
class SupportCase:
    """A support's pull in one case."""

    case: str
    standing: Standing
    pull: NewtonsArray
    magnitude: Newtons
    moment: NewtonMetres


@dataclass(frozen=True)
class Support:
    """A support with everything that hangs on it summed, as hung and by case; moment at its foot."""

    mark: str
    at: MetresArray
    pull: NewtonsArray
    magnitude: Newtons
    moment: NewtonMetres
    by_case: tuple[SupportCase, ...]
    pieces: tuple[str, ...]


@dataclass(frozen=True)
class Used:
    """What a piece was computed from, with its source; None or NaN where it does not enter."""

    source: str
    weight: NewtonsPerMetre = NAN
    EA: Newtons = NAN
    expansion: PerKelvin = NAN
    density: KilogramsPerCubicMetre = NAN


@dataclass(frozen=True)
class Piece:
    """One solved piece of the design, or one part of it (bay, strand): a value holding all that outputs need.

    `figures` is a frozen dataclass of the kind; the figures file is a walk over its fields. `facts` are the two or
    three quantities a shop needs under the elevation. `pulls` act on supports.
    """

    mark: str
    kind: str
    what: str
    views: tuple[View, ...]
    mass: Kilograms
    figures: Any
    used: Used
    copies: int = 1
    intended: Quantity | None = None
    difference: Quantity | None = None
    cases: tuple[Case, ...] | None = None
    stocks: tuple[Any, ...] = ()  # geom.setting.stock.Stock of which it is made
    parts: tuple[Piece, ...] = ()
    parts_name: str = ""  # "bays", "strands": the key the parts' figures stand under
    facts: tuple[Quantity, ...] = ()
    lines: tuple[Line, ...] = ()
    labels: tuple[Label, ...] = ()
    solids: tuple[Solid, ...] = ()
    flats: tuple[Flat, ...] = ()
    tables: tuple[Table, ...] = ()
    cuts: tuple[Cut, ...] = ()
    pulls: tuple[Pull, ...] = ()
    cautions: tuple[Caution, ...] = ()

    @property
    def frame(self) -> Frame:
        """The plane of its first view."""
        return self.views[0].frame


@dataclass(frozen=True)
class Result:
    """A solved design. `setting` is what its pieces share (geom.setting.options.Setting)."""

    title: str
    unit: str
    setting: Any
    pieces: tuple[Piece, ...]
    supports: tuple[Support, ...] = ()
    cuts: tuple[Cut, ...] = ()
    stock_plan: tuple[StockPlan, ...] = ()
    cautions: tuple[Caution, ...] = field(default=())


@dataclass(frozen=True, eq=False)
class Rows:
    """A table within figures: each field an array (n, ...) or a sequence of n values; leaves as a list of n objects."""
