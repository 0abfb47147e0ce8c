"""Views in rows from the top left in the order of the design, plan under them, notes at the left foot."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from export.picture.panels import lowered
from export.picture.scale import Sheet
from export.picture.sizes import Sizes
from export.picture.values import Box, Notes, Panel, around, shifted

_TENTH = 0.1  # of the larger of two pieces: the least distance between them, if that is more than the text's
_BETWEEN = 2.0  # between all that is printed of two views, in heights of the notes' text
_LAST_ROWS = 3  # so many rows, or all of them, are tried beside the notes
FEED = 40.0  # between sheets, in heights of the notes' text, when one is not enough


@dataclass(frozen=True)
class Arranged:
    """Everything in place, the upper left corner of the first sheet's drawing space at the origin."""

    panels: tuple[Panel, ...]
    notes: Notes
    box: Box
    sheets: int = 1


@dataclass(frozen=True)
class Foot:
    """What is arranged round the views: the heading over them, plan and notes under them."""

    heading: Panel | None
    plan: Panel | None
    notes: Notes


@dataclass(frozen=True)
class _Row:
    """Panels side by side, their geometry standing on y = 0."""

    panels: tuple[Panel, ...]

    @property
    def box(self) -> Box:
        return around(*(shifted(panel.box, panel.at) for panel in self.panels))

    @property
    def core(self) -> Box:
        return around(*(shifted(panel.core, panel.at) for panel in self.panels))


def arrange(views: Sequence[Panel], foot: Foot, sheet: Sheet, sizes: Sizes, *, feed: bool = False) -> Arranged | None:
    """Return views, plan and notes in place on a sheet, or None where they do not fit it.

    Rows take the sheet's whole width, the plan stands under them or to the right of the notes, whichever fills the
    sheet more evenly; where there is no height for that, the last rows stand to the right of the notes too. With `feed`
    as many sheets are taken as it takes, one under another; then None only where one view is larger than one.
    """
    rows = list(_rows(views, sheet.width, sizes))
    if any(row.box[2] - row.box[0] > sheet.width for row in rows):
        return None
    beside = sheet.width - (foot.notes.box[2] - foot.notes.box[0]) - sizes.apart
    options = [len(rows)] if feed else sorted({0, *range(max(0, len(rows) - _LAST_ROWS), len(rows) + 1)}, reverse=True)
    for whole in options:
        rest = views[sum(len(row.panels) for row in rows[:whole]) :]
        widths = (beside,) if rest else (sheet.width, beside)
        found = [_arranged(rows[:whole], rest, foot, (sheet, narrow), sizes, feed=feed) for narrow in widths]
        fitting = [one for one in found if one is not None]
        if fitting:
            return min(fitting, key=lambda one: _fullness(one, sheet))
    return None


def _fullness(arranged: Arranged, sheet: Sheet) -> float:
    """How much of the sheet's width or height is taken, the larger: the less, the better balanced."""
    left, bottom, right, top = arranged.box
    return max((right - left) / sheet.width, (top - bottom) / sheet.height)


def _arranged(
    whole: Sequence[_Row], rest: Sequence[Panel], foot: Foot, room: tuple[Sheet, float], sizes: Sizes, *, feed: bool
) -> Arranged | None:
    """Rows over the whole width, then the notes with what is left beside them, or with the plan over them."""
    sheet, narrow = room
    blocks = [*whole]
    if foot.heading is not None:
        blocks.insert(0, _Row((replace(foot.heading, at=(-foot.heading.box[0], -foot.heading.box[1])),)))
    left, bottom, _, _ = foot.notes.box
    stand_in = Panel("", "notes", 1.0, (), core=foot.notes.box, box=foot.notes.box, at=(-left, -bottom))
    rows = _last_rows(rest, foot.plan, narrow, sizes)
    if narrow < sheet.width and rows:
        if foot.plan is not None and foot.plan.line is not None:
            if whole and not feed:
                return None  # the plan would stand beside the notes, out of line with the elevation
            rows = _in_line(rows)
        blocks.append(_with_notes(rows, stand_in, sheet.width - narrow, sizes))
    else:
        blocks = _in_line([*blocks, *rows, _Row((stand_in,))])
    if any(block.box[2] - block.box[0] > sheet.width for block in blocks):
        return None
    placed, sheets = _stacked(blocks, sheet, sizes, feed=feed)
    return None if placed is None else _read(placed, foot, sheets)


def _last_rows(rest: Sequence[Panel], plan: Panel | None, width: float, sizes: Sizes) -> list[_Row]:
    """Rows of what stands last; a plan that is to stand in line with an elevation begins one of its own."""
    if plan is None:
        return list(_rows(rest, width, sizes))
    if plan.line is None:
        return list(_rows([*rest, plan], width, sizes))
    return [*_rows(rest, width, sizes), *_rows([plan], width, sizes)]


def _in_line(rows: Sequence[_Row]) -> list[_Row]:
    """Move the row of the plan, or that of the elevation, to the right until both ends stand in one line."""
    ends = [one.at[0] + one.line for row in rows for one in row.panels if one.line is not None]
    return [_moved(row, max(ends)) for row in rows] if ends else list(rows)


def _moved(row: _Row, end: float) -> _Row:
    lined = [one for one in row.panels if one.line is not None]
    if not lined:
        return row
    by = end - lined[0].at[0] - (lined[0].line or 0.0)
    return _Row(tuple(replace(one, at=(one.at[0] + by, one.at[1])) for one in row.panels))


def _with_notes(rows: Sequence[_Row], notes: Panel, left: float, sizes: Sizes) -> _Row:
    """One row of the notes and, to their right, rows of views; both stand on the foot."""
    placed, _ = _stacked(rows, None, sizes, feed=False)
    assert placed is not None  # without a sheet there is no end to the room
    foot = min(row.box[1] for row in placed)
    right = [replace(panel, at=(panel.at[0] + left, panel.at[1] - foot)) for row in placed for panel in row.panels]
    return _Row((notes, *right))


def _read(placed: Sequence[_Row], foot: Foot, sheets: int) -> Arranged:
    panels = [panel for row in placed for panel in row.panels]
    views = tuple(panel for panel in panels if panel.kind != "notes")
    notes = replace(foot.notes, at=next(panel.at for panel in panels if panel.kind == "notes"))
    box = around(*(shifted(panel.box, panel.at) for panel in views), shifted(notes.box, notes.at))
    return Arranged(views, notes, box, sheets)


_TEXT = ("heading", "notes")  # kinds that are text alone; the notes have a stand-in among the panels


def apart(one: Panel, other: Panel, sizes: Sizes) -> float:
    """Return the least distance between the geometry of two views."""
    larger = max(max(p.core[2] - p.core[0], p.core[3] - p.core[1]) for p in (one, other))
    return max(sizes.apart, _TENTH * larger)


def _rows(panels: Sequence[Panel], width: float, sizes: Sizes) -> Iterator[_Row]:
    row: list[Panel] = []
    for panel in panels:
        placed = _beside(row, panel, sizes)
        if row and placed.at[0] + placed.box[2] > width:
            yield _Row(levelled(row))
            row, placed = [], _beside([], panel, sizes)
        row.append(placed)
    if row:
        yield _Row(levelled(row))


def _beside(row: Sequence[Panel], panel: Panel, sizes: Sizes) -> Panel:
    """Put a panel to the right of a row, its geometry's foot at 0; the first one at the left edge."""
    x = -panel.box[0]
    if row:
        last = row[-1]
        by_core = last.at[0] + last.core[2] + apart(last, panel, sizes) - panel.core[0]
        by_box = max(one.at[0] + one.box[2] for one in row) + _BETWEEN * sizes.note - panel.box[0]
        x = max(by_core, by_box)
    return replace(panel, at=(x, -panel.core[1]))


def levelled(row: Sequence[Panel]) -> tuple[Panel, ...]:
    """Bring the titles of a row to one height."""
    tops = [panel.at[1] + max((line.box[3] for line in panel.titles), default=0.0) for panel in row]
    lowest = min(tops)
    return tuple(lowered(panel, top - lowest) for panel, top in zip(row, tops, strict=True))


def _stacked(blocks: Sequence[_Row], sheet: Sheet | None, sizes: Sizes, *, feed: bool) -> tuple[list[_Row] | None, int]:
    """Rows one under another, downwards from 0; a row that does not fit any more begins a new sheet, with `feed`.

    Without a sheet there is no end to the room.
    """
    placed: list[_Row] = []
    sheets, top, last = 1, 0.0, None
    for row in blocks:
        y = top - row.box[3]
        if last is not None:
            by_box = last.box[1] - _BETWEEN * sizes.note - row.box[3]
            by_core = last.core[1] - _least_apart(last, row, sizes) - row.core[3]
            y = min(by_box, by_core)
        if sheet is not None and y + row.box[1] < top - sheet.height:
            if not feed or row.box[3] - row.box[1] > sheet.height:
                return None, sheets
            top -= sheet.height + FEED * sizes.note
            sheets += 1
            y = top - row.box[3]
        moved = tuple(replace(panel, at=(panel.at[0], panel.at[1] + y)) for panel in row.panels)
        last = _Row(moved)
        placed.append(last)
    return placed, sheets


def _least_apart(above: _Row, below: _Row, sizes: Sizes) -> float:
    pairs = [
        (one, other)
        for one in above.panels
        for other in below.panels
        if one.kind not in _TEXT and other.kind not in _TEXT
    ]
    return max((apart(one, other, sizes) for one, other in pairs), default=0.0)
