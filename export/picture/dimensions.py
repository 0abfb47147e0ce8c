"""Dimensions in their places: in rows outside the figure, smallest nearest, no measure twice."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from typing import Literal

import numpy as np

from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.values import Box, Floats, Path, Placed, Text, around
from export.picture.wording import Wording
from geom.result import Dimension, Frame

_LOOK = LOOKS["dimension"]
_SAME = 1e-6  # m: measures nearer than this are one
_SIDES = {
    "horizontal": {"left": "below", "right": "below"},
    "vertical": {"below": "left", "above": "left"},
    "level": {"below": "inside", "above": "inside"},
}
_UNDER = 10.0  # how much worse a text is that reaches under the figure, where other rows stand, than one over it
_FAR = (
    30.0  # of a vertical dimension from its side, in heights of the text: there its lines would cross the whole figure
)


@dataclass(frozen=True, slots=True, eq=False)
class Measure:
    """A dimension in the plane of its view: points (2,) m, its side settled, its words."""

    kind: str
    p: Floats
    q: Floats
    value: float
    says: str
    side: str
    rank: int
    text: str
    tells: bool = False
    over: bool = False  # of a level inside the figure: whether it is said over its point rather than under it

    @property
    def extent(self) -> float:
        """How long its dimension line is, m; of a level, which has none, without end."""
        step = np.abs(self.q - self.p)
        if self.kind == "level":
            return np.inf
        if self.kind in ("horizontal", "vertical"):
            return float(step[0 if self.kind == "horizontal" else 1])
        return float(np.hypot(*step))

    def in_rows(self, per: float, core: Box, sizes: Sizes) -> bool:
        """Whether it stands in rows outside the figure, not at what it measures."""
        if self.kind == "vertical" and self.side in ("left", "right"):
            nearest = min(self.p[0], self.q[0]) if self.side == "left" else max(self.p[0], self.q[0])
            edge = core[0] if self.side == "left" else core[2]
            return bool(abs(nearest / per - edge) <= _FAR * sizes.note)
        return self.side != "inside" and self.kind not in ("aligned", "radius")

    def points(self, per: float) -> tuple[Floats, Floats]:
        """Both points on the print."""
        return self.p / per, self.q / per


def measures(dimensions: Iterable[Dimension], frame: Frame, wording: Wording) -> list[Measure]:
    """Return the dimensions of a view in its plane; one that measures what another does is left out."""
    found: dict[tuple[object, ...], Measure] = {}
    for dimension in dimensions:
        if not np.isfinite(dimension.value):
            continue
        measure = _measure(dimension, frame, wording)
        if measure.extent < _SAME:
            continue
        first = found.setdefault(_key(measure), measure)
        if measure.tells and not first.tells:
            found[_key(measure)] = replace(first, tells=True)
    return list(found.values())


def _measure(dimension: Dimension, frame: Frame, wording: Wording) -> Measure:
    p, q = frame.flat(np.stack([dimension.p, dimension.q]))
    if dimension.kind == "level":
        # measured from the level 0, under (or over) the point itself
        p = np.array([q[0], -float(frame.origin @ frame.up)])
    text = wording.length(dimension.value)
    if dimension.kind == "radius":
        text = f"R {text}"
    side = _SIDES.get(dimension.kind, {}).get(dimension.side, dimension.side)
    return Measure(
        dimension.kind, p, q, dimension.value, dimension.says, side, dimension.rank,
        f"{text} {dimension.says}" if dimension.says else text, dimension.tells,
        dimension.side == "above",
    )  # fmt: skip


def _key(measure: Measure) -> tuple[object, ...]:
    axis = {"horizontal": 0, "vertical": 1, "level": 1}.get(measure.kind)
    ends = [measure.p, measure.q] if axis is None else [measure.p[axis : axis + 1], measure.q[axis : axis + 1]]
    low, high = sorted(tuple(np.round(end / _SAME).astype(np.int64)) for end in ends)
    # an inside dimension stands at its own place; outside, all of a side are projected to it
    place = tuple(np.round(measure.p / _SAME).astype(np.int64)) if measure.side == "inside" else ()
    return (measure.kind, low, high, measure.says, place)


@dataclass
class Rows:
    """Dimensions placed outside a figure, and the box they and the figure take."""

    placed: list[Placed] = field(default_factory=list)
    box: Box = (0.0, 0.0, 0.0, 0.0)


@dataclass(slots=True)
class _Entry:
    measure: Measure
    low: float  # ends along the row, print units
    high: float
    from_low: float  # where the points are across the row
    from_high: float
    row: int = 0
    shift: float = 0.0  # of the text's middle from the middle of the dimension line
    outside: int = 0  # 1 beyond its upper end, -1 beyond its lower end, 0 over its line
    height: float = 0.0  # of the text

    @property
    def wide(self) -> float:
        """Width of its text."""
        return Text(_LOOK, self.measure.text, (0, 0), self.height).width

    @property
    def size(self) -> tuple[int, float, float]:
        """What orders the rows: those of greater size never stand nearer the figure where they overlap."""
        return self.measure.rank, round(self.high - self.low, 6), self.low


def outside(found: Sequence[Measure], per: float, core: Box, sizes: Sizes) -> Rows:
    """Place all dimensions that stand outside the figure: rows below and above, left and right, then levels."""
    rows = Rows(box=core)
    found = [measure for measure in found if measure.in_rows(per, core, sizes)]
    for side in ("below", "above", "left", "right"):
        kind = "horizontal" if side in ("below", "above") else "vertical"
        entries = [_entry(measure, per) for measure in found if measure.side == side and measure.kind == kind]
        if entries:
            _into_rows(entries, _reach(rows.box, core, side, sizes), sizes)
            rows.placed += [_row_dimension(entry, side, core, per, sizes) for entry in entries]
            rows.box = around(rows.box, *(one.box for one in rows.placed))
    for side in ("left", "right"):
        levels = [measure for measure in found if measure.kind == "level" and measure.side == side]
        rows.placed += _levels(levels, side, per, rows.box, sizes)
        rows.box = around(rows.box, *(one.box for one in rows.placed))
    return rows


def _reach(box: Box, core: Box, side: str, sizes: Sizes) -> tuple[float, float, float]:
    """From where to where texts may stand along a side: beside the rows under the figure, if these leave it free."""
    if side in ("below", "above"):
        return core[0], core[2], 1.0
    clear = 0.5 * sizes.first_row  # strokes and extension lines reach past the figure, texts much further
    free = box[0] >= core[0] - clear if side == "left" else box[2] <= core[2] + clear
    return (box[1], core[3], 1.0) if free else (core[1], core[3], _UNDER)


def _entry(measure: Measure, per: float) -> _Entry:
    axis = 0 if measure.kind == "horizontal" else 1
    low, high = sorted(measure.points(per), key=lambda point: float(point[axis]))
    return _Entry(measure, float(low[axis]), float(high[axis]), float(low[1 - axis]), float(high[1 - axis]))


def _settle_text(entry: _Entry, lines: Floats, reach: tuple[float, float, float], sizes: Sizes) -> None:
    """Put a text over its line, smaller if need be, off the extension `lines` of what may stand further out.

    Where there is no room for it, it stands beyond the end where it is crossed by fewer, and reaches less far beyond
    the figure, which is from `reach[0]` to `reach[1]`; beyond the lower end so much worse as `reach[2]` says.
    """
    for height in (sizes.note, sizes.small):
        entry.height = height
        shift = _shift(entry, lines, sizes)
        if shift is not None:
            entry.shift = shift
            return
    entry.height = sizes.note
    under = reach[2]
    beyond = entry.wide + 3 * sizes.gap
    ends = ((1, entry.high, entry.high + beyond), (-1, entry.low - beyond, entry.low))
    entry.outside = min(
        ends,
        key=lambda end: (
            int(((lines > end[1] + _SAME) & (lines < end[2] - _SAME)).sum()),
            max(0.0, end[2] - reach[1], (reach[0] - end[1]) * under),
        ),
    )[0]


def _shift(entry: _Entry, lines: Floats, sizes: Sizes) -> float | None:
    """How far from the middle of its line a text stands clear of extension lines; None where it finds no room."""
    middle = (entry.low + entry.high) / 2
    room = (entry.high - entry.low - entry.wide) / 2 - sizes.gap
    if room < 0:
        return None
    clear = entry.wide / 2 + 0.5 * sizes.gap
    shifts = sorted(np.linspace(-room, room, 41).tolist(), key=abs)
    return next((shift for shift in shifts if (np.abs(lines - middle - shift) > clear).all()), None)


def _room(entry: _Entry, sizes: Sizes) -> tuple[float, float]:
    """What an entry takes of its row: its own length, and that of a text beyond one of its ends."""
    beyond = entry.wide + 3 * sizes.gap if entry.outside else 0.0
    return entry.low - (beyond if entry.outside < 0 else 0.0), entry.high + (beyond if entry.outside > 0 else 0.0)


def _into_rows(entries: list[_Entry], reach: tuple[float, float, float], sizes: Sizes) -> None:
    """Settle the rows: by rank, then smallest nearest; what would overlap another stands further out than that."""
    entries.sort(key=lambda entry: entry.size)
    taken: list[tuple[float, float, _Entry]] = []
    touch = 0.1 * sizes.gap  # dimensions of one chain meet at their ends
    for number, entry in enumerate(entries):
        lines = np.array([end for other in entries[number + 1 :] for end in (other.low, other.high)])
        _settle_text(entry, lines, reach, sizes)
        low, high = _room(entry, sizes)
        met = [other for other_low, other_high, other in taken if low < other_high - touch and high > other_low + touch]
        # what only its text meets may stand nearer the figure than that
        under = [other.row for other in met if entry.low < other.high - touch and entry.high > other.low + touch]
        rows = {other.row for other in met}
        entry.row = next(row for row in range(max(under, default=-1) + 1, len(entries) + 1) if row not in rows)
        taken.append((low, high, entry))


def _row_dimension(entry: _Entry, side: str, core: Box, per: float, sizes: Sizes) -> Placed:
    """Draw a dimension in its row: extension lines, dimension line, oblique strokes, text over it."""
    out = sizes.first_row + entry.row * sizes.row
    level = {"below": core[1] - out, "above": core[3] + out, "left": core[0] - out, "right": core[2] + out}[side]
    upright = side in ("left", "right")
    away = 1.0 if side in ("above", "right") else -1.0

    def point(along: float, across: float) -> tuple[float, float]:
        return (across, along) if upright else (along, across)

    beyond = 2 * sizes.gap + entry.wide / 2
    middle = (entry.low + entry.high) / 2 + entry.shift
    start, end = entry.low, entry.high
    if entry.outside > 0:
        middle, end = entry.high + beyond, entry.high + beyond + entry.wide / 2
    elif entry.outside < 0:
        middle, start = entry.low - beyond, entry.low - beyond - entry.wide / 2
    paths = [
        *_extension(point(entry.low, entry.from_low), point(entry.low, level), away, upright, sizes),
        *_extension(point(entry.high, entry.from_high), point(entry.high, level), away, upright, sizes),
        Path(_LOOK, np.array([point(start, level), point(end, level)])),
        oblique(np.array(point(entry.low, level)), sizes, np.pi / 2 if upright else 0.0),
        oblique(np.array(point(entry.high, level)), sizes, np.pi / 2 if upright else 0.0),
    ]
    foot = level - sizes.gap * 0.6 if upright else level + sizes.gap * 0.6
    angle = np.pi / 2 if upright else 0.0
    text = Text(_LOOK, entry.measure.text, point(middle, foot), entry.height, "centre", angle)
    return placed(entry.measure, text, angle, point((entry.low + entry.high) / 2, level), paths)


def _extension(
    start: tuple[float, float], end: tuple[float, float], away: float, upright: bool, sizes: Sizes
) -> list[Path]:
    """Return the extension line from beside a point of the figure to just past the dimension line."""
    step = np.array([away, 0.0]) if upright else np.array([0.0, away])
    first, last = np.array(start) + sizes.gap * step, np.array(end) + sizes.overshoot * step
    return [Path(_LOOK, np.stack([first, last]))] if (last - first) @ step > 0 else []


def oblique(at: Floats, sizes: Sizes, angle: float) -> Path:
    """Return the oblique stroke across a dimension line that runs at `angle` (rad)."""
    half = sizes.arrow / 2 * np.array([np.cos(angle + np.pi / 4), np.sin(angle + np.pi / 4)])
    return Path(_LOOK, at + np.stack([-half, half]))


def placed(measure: Measure, text: Text, angle: float, line_at: tuple[float, float], paths: Sequence[Path]) -> Placed:
    """Return a dimension in its place."""
    kinds: dict[str, Literal["ordinate", "radius"]] = {"level": "ordinate", "radius": "radius"}
    kind: Literal["linear", "ordinate", "radius"] = kinds.get(measure.kind, "linear")
    return Placed(kind, measure.p, measure.q, measure.value, text, measure.says, angle, line_at, tuple(paths))


def _levels(levels: Sequence[Measure], side: str, per: float, box: Box, sizes: Sizes) -> list[Placed]:
    """Level marks in one column beside a box, in order of height, no two texts nearer than their leading."""
    if not levels:
        return []
    way = 1.0 if side == "right" else -1.0
    column = (box[2] if side == "right" else box[0]) + way * 2.5 * sizes.gap
    ordered = sorted(levels, key=lambda level: level.value)
    heights = spread([float(level.q[1]) / per for level in ordered], 2.2 * sizes.note)
    return [_level(level, height, column, way, per, sizes) for level, height in zip(ordered, heights, strict=True)]


def spread(heights: Sequence[float], apart: float) -> list[float]:
    """Return heights in rising order moved up as little as it takes to stand apart."""
    moved: list[float] = []
    for height in heights:
        moved.append(max(height, moved[-1] + apart) if moved else height)
    return moved


def _level(measure: Measure, height: float, column: float, way: float, per: float, sizes: Sizes) -> Placed:
    _, q = measure.points(per)
    knee, end = column + way * 2 * sizes.gap, column + way * 4 * sizes.gap
    wide = Text(_LOOK, measure.text, (0, 0), sizes.note).width
    line = np.array([[q[0] + way * sizes.gap, q[1]], [column, q[1]], [knee, height], [end + way * wide, height]])
    if height == q[1]:
        line = line[[0, 3]]
    tick, half = (knee + end) / 2, 0.6 * sizes.gap
    flag = np.array([[tick - half, height + 1.6 * half], [tick, height], [tick + half, height + 1.6 * half]])
    text = Text(
        _LOOK, measure.text, (end + (0.3 * sizes.gap if way > 0 else -wide), height + 0.6 * sizes.gap), sizes.note
    )
    return placed(measure, text, 0.0, (end, height), [Path(_LOOK, line), Path(_LOOK, flag, closed=True)])
