"""A view of one piece as it is printed at one scale: its geometry, symbols, dimensions, marks and title."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from export.picture import labels, symbols
from export.picture.dimensions import Measure, measures, outside
from export.picture.drawn import Drawn, enter, ground_of, printed
from export.picture.ground import Ground
from export.picture.inside import column, inside, lines
from export.picture.labels import Wanted
from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.strip import strip
from export.picture.titles import title
from export.picture.values import (
    Box,
    Floats,
    Group,
    Panel,
    Path,
    Text,
    around,
    xy,
)
from export.picture.views import Drawing, Seen, is_plan, lines_of, seen
from export.picture.wording import Wording
from geom.result import Label, Piece, View

_MOST_ASIDE = 6  # dimensions in a column beside a view; more are no longer told apart
_END = 1e-4  # m: a line that ends within this of a support is held there
_CROWDED = 12  # labels of a view from which on supports may stand for those behind them
_BEHIND = 1.2  # in heights of a support's symbol: nearer ones cannot be told apart
_FIRST = frozenset({"support", "fitting", "station"})  # marks placed first even where they are many
_NARROW = 0.6  # of a figure's width: a wider text of a level may not find room under it
_FEW = 40  # marks of a view that are placed before the dimensions inside it


Marks = Literal["free", "within", "none"]


@dataclass(frozen=True)
class Print:
    """How a panel is printed: metres of geometry in a unit of print, sizes of the rest, words of figures."""

    per: float
    sizes: Sizes
    wording: Wording


@dataclass(frozen=True)
class Subject:
    """One view to be printed: what does not change with the scale. `cautions` are the numbers of its cautions."""

    piece: Piece
    view: View
    seen: Seen
    labels: tuple[Label, ...]
    measures: tuple[Measure, ...]
    above: tuple[bool, ...]  # of each label whether what is there hangs from it
    cautions: tuple[int, ...] = ()


def subject(piece: Piece, view: View, drawing: Drawing, wording: Wording, cautions: Sequence[int] = ()) -> Subject:
    """Return a view of a piece ready to be printed at any scale."""
    shown = seen(piece, view, drawing)
    found = labels_of(piece) if view.labels is None else view.labels
    above = tuple(_held_from_above(shown, view.frame.flat(np.array([label.at for label in found]).reshape(-1, 3))))
    told = tuple(measures(view.dimensions, view.frame, wording))
    return Subject(piece, view, shown, found, told, above, tuple(cautions))


def labels_of(piece: Piece) -> tuple[Label, ...]:
    """Return a piece's own labels, or those of its parts, each text at a place once."""
    if piece.labels:
        return piece.labels
    found = {(label.text, label.at.tobytes()): label for part in piece.parts for label in labels_of(part)}
    return tuple(found.values())


def elevation(subject: Subject, print_: Print, *, marks: Marks = "free") -> Panel:
    """Return a view as it is printed, its title under it.

    Marks may stand round it ("free"), only in the room it takes without them ("within"), or are left out ("none").
    """
    per, sizes = print_.per, print_.sizes
    drawn = Drawn()
    geometry = printed(subject.seen.box, per)
    wanted = _symbols(subject, print_, drawn)
    core = around(geometry, drawn.box)
    held = _with_blocks(wanted, _with_levels(subject.measures, core, per, sizes), sizes)
    bay_marks = [mark for mark in wanted if mark.role == "bay"]
    wanted = [mark for mark in wanted if mark.role != "bay"]
    bays = strip(bay_marks, held[1], sizes)
    if bays is not None and bays.rows == 1:
        held = around(held, (held[0], bays.box[1], held[2], held[3]))
    rows = outside(subject.measures, per, held, sizes)
    if bays is not None and bays.rows > 1:  # wider than their bays: extension lines would run through them
        bays = strip(bay_marks, rows.box[1], sizes)
    if bays is not None:
        drawn.texts += bays.texts
        drawn.dropped += bays.dropped
    drawn.dimensions += rows.placed
    said = _title(subject, core, print_)
    over_title = (core[0], core[1], core[0] + max(line.box[2] for line in said), core[1])
    aside = [] if bays is None else [bays.box]
    aside += [_aside(measure, core, sizes) for measure in subject.measures if measure.kind == "level"]
    taken = around(rows.box, over_title, *labels.reserved(wanted, sizes), *aside)
    if marks != "none":
        beside = [measure for measure in subject.measures if not measure.in_rows(per, held, sizes)]
        ground = ground_of(taken, sizes, free=marks == "free")
        _mark(subject, wanted, beside, ground, print_, drawn)
    return with_title(_panel(subject, drawn, per, core, taken), said, sizes)


def _panel(subject: Subject, drawn: Drawn, per: float, core: Box, taken: Box) -> Panel:
    piece, view, seen_ = subject.piece, subject.view, subject.seen
    return Panel(
        piece.mark if view is piece.views[0] else f"{piece.mark} {view.name}",
        "plan" if is_plan(view.frame) else "elevation",
        per,
        (Group(piece.mark, seen_.strokes, seen_.links, tuple(drawn.paths), tuple(drawn.circles), tuple(drawn.texts)),),
        tuple(drawn.dimensions),
        core=core,
        box=around(core, taken, drawn.box),
        dropped=drawn.dropped,
    )


def _title(subject: Subject, core: Box, print_: Print) -> list[Text]:
    room = core[2] - core[0]
    return title(subject.piece, subject.view, print_.wording, print_.sizes, room=room, cautions=subject.cautions)


def _symbols(subject: Subject, print_: Print, drawn: Drawn) -> list[Wanted]:
    """Draw the symbols of a view's labels and of its ground, and return the marks to be placed beside them."""
    frame, sizes, per = subject.view.frame, print_.sizes, print_.per
    flat_labels = frame.flat(np.array([label.at for label in subject.labels]).reshape(-1, 3)) / per
    wanted = []
    shown: list[Floats] = []
    crowded = len(subject.labels) > _CROWDED
    for label, at, over in zip(subject.labels, flat_labels, subject.above, strict=True):
        if crowded and label.role == "support":
            # of supports one behind another in the view the first stands for all; the plan names them
            if any(np.abs(at - other).max() < _BEHIND * sizes.symbol for other in shown):
                continue
            shown.append(at)
        along = None if label.along is None else frame.flat(label.along[None] + frame.origin)[0] / per
        mark = _symbol(label, at, along, above=over, plan=is_plan(frame), print_=print_, drawn=drawn)
        if label.text or label.below:
            wanted.append(replace(mark, below=tuple(print_.wording.said(line) for line in label.below)))
    for line in lines_of(subject.piece) if subject.view.lines is None else subject.view.lines:
        if line.role in ("floor", "ground") and not is_plan(frame):
            points = frame.flat(line.curve.points(per))
            drawn.paths += symbols.ground_hatching(points / per, sizes)
    return wanted


def _held_from_above(shown: Seen, places: Floats) -> list[bool]:
    """Whether what is at each place (n, 2) m runs down from it, so that its support stands over it.

    Told by the lines that end there; where none does, by which half of the view it is in.
    """
    ends = [
        (stroke.points[first], stroke.points[second])
        for stroke in shown.strokes
        if stroke.look.heavy or stroke.look.layer == "AXIS"
        for first, second in ((0, 1), (-1, -2))
    ]
    middle = (shown.box[1] + shown.box[3]) / 2
    if not ends:
        return [bool(place[1] >= middle) for place in places]
    tips, nexts = np.array([end[0] for end in ends]), np.array([end[1] for end in ends])
    steps = nexts - tips
    falls = steps[:, 1] / np.maximum(np.hypot(steps[:, 0], steps[:, 1]), 1e-12)
    return [
        bool(falls[here].sum() < 0 if len(here) else place[1] >= middle)
        for place, here in zip(places, _near(places, tips), strict=True)
    ]


def _near(places: Floats, tips: Floats) -> Iterator[NDArray[np.int64]]:
    """Yield the tips (m, 2) at each place (n, 2), looked for among those that are as far right: sorted, for nets."""
    order = np.argsort(tips[:, 0], kind="stable")
    across = tips[order, 0]
    firsts = np.searchsorted(across, places[:, 0] - _END)
    lasts = np.searchsorted(across, places[:, 0] + _END)
    for place, first, last in zip(places, firsts.tolist(), lasts.tolist(), strict=True):
        beside = order[first:last]
        yield np.sort(beside[np.abs(tips[beside] - place).max(axis=1) < _END])


def _symbol(  # noqa: PLR0913 - what a symbol depends on
    label: Label, at: Floats, along: Floats | None, *, above: bool, plan: bool, print_: Print, drawn: Drawn
) -> Wanted:
    sizes = print_.sizes
    clear = 0.3 * sizes.gap
    match label.role:
        case "support" if not plan:
            drawn.paths += symbols.support(at, sizes, above=above)
            away = 1.0 if above else -1.0
            at = at + xy(0.0, away * 0.7 * sizes.symbol)
            return Wanted(label.text, at, label.role, 0.75 * sizes.symbol, first=(0, int(away)))
        case "support" | "held point":
            drawn.paths += symbols.held_point(at, sizes)
            clear = 0.45 * sizes.symbol
        case "load" if plan:
            drawn.circles.append(symbols.dot(at, sizes, "load"))
        case "load" if label.reach > 0:
            tip = at - xy(0.0, label.reach / print_.per)
            drawn.paths += [Path(LOOKS["load"], np.stack([at, tip])), *symbols.bob(tip, sizes)]
            at, clear = tip + xy(0.0, 0.5 * sizes.arrow), 0.5 * sizes.arrow
        case "load":
            drawn.paths += symbols.load_arrow(at, sizes, above=False)
            at, clear = at - xy(0.0, 1.6 * sizes.arrow), 0.5 * sizes.arrow
        case "node":
            drawn.circles.append(symbols.dot(at, sizes, "node"))
    return Wanted(label.text, at, label.role, clear, along)


def _with_levels(found: Sequence[Measure], core: Box, per: float, sizes: Sizes) -> Box:
    """The box that rows stand off: a level said under the lowest line needs a line of text of it."""
    lowest = [float(measure.q[1]) / per for measure in found if measure.kind == "level" and measure.side == "inside"]
    foot = min(lowest, default=core[1]) - 2.0 * sizes.note
    return (core[0], min(core[1], foot), core[2], core[3])


def _with_blocks(wanted: Sequence[Wanted], held: Box, sizes: Sizes) -> Box:
    """The box that rows stand off where marks of narrow blocks will stand outside their ring."""
    blocks = [mark for mark in wanted if mark.role == "block"]
    if len(blocks) < 2:
        return held
    steps = np.abs(np.diff([mark.at for mark in blocks], axis=0)).max(axis=1)
    wide = max(Text(LOOKS["mark"], mark.text, (0, 0), sizes.note).width for mark in blocks)
    if float(np.median(steps)) > wide * sizes.small / sizes.note:
        return held
    room = max(0.0, wide + 3 * sizes.note - sizes.first_row)
    return (held[0] - room, held[1], held[2] + room, held[3])


def _aside(measure: Measure, core: Box, sizes: Sizes) -> Box:
    """The room a level takes beside a figure that is too narrow to have it under itself; else none."""
    wide = Text(LOOKS["dimension"], measure.text, (0, 0), sizes.note).width
    if wide < _NARROW * (core[2] - core[0]):
        return core
    return (core[0], core[1], core[2] + wide + 5 * sizes.gap, core[3])


def _mark(
    subject: Subject, wanted: Sequence[Wanted], beside: Sequence[Measure], ground: Ground, print_: Print, drawn: Drawn
) -> None:
    """Place the marks, then the dimensions inside the figure, which find a place further off.

    Of many marks only those of supports go first.
    """
    enter(ground, subject.seen, drawn, print_.per)
    few = len(wanted) <= _FEW
    measured = lines(beside, print_.per, ground, print_.sizes)
    first = labels.place([mark for mark in wanted if few or mark.role in _FIRST], ground, print_.sizes)
    within = inside(beside, measured, ground, print_.sizes)
    rest = labels.place([mark for mark in wanted if not (few or mark.role in _FIRST)], ground, print_.sizes)
    drawn.dimensions += within.placed
    for placed in (first, rest):
        drawn.texts += placed.texts
        drawn.paths += placed.paths
        drawn.circles += placed.circles
    # a few there was no room for where they belong stand in a column beside the view
    aside = column(within.left, around(printed(subject.seen.box, print_.per), drawn.box), print_.sizes)
    if len(aside) > _MOST_ASIDE or not (
        ground.wide or max((one.box[2] for one in aside), default=0.0) <= ground.box[2]
    ):
        aside = []
    drawn.dimensions += aside
    drawn.dropped += len(within.left) - len(aside) + first.dropped + rest.dropped


def with_title(panel: Panel, lines: Sequence[Text], sizes: Sizes) -> Panel:
    """Return a panel with lines of title under all it shows, flush with the left of its geometry."""
    top = panel.box[1] - 1.5 * sizes.note
    titles = tuple(replace(line, at=(line.at[0] + panel.core[0], line.at[1] + top)) for line in lines)
    return replace(panel, titles=titles, box=around(panel.box, *(line.box for line in titles)))


def lowered(panel: Panel, by: float) -> Panel:
    """Return a panel with its title moved down, so that the titles of a row stand in one line."""
    titles = tuple(replace(line, at=(line.at[0], line.at[1] - by)) for line in panel.titles)
    return replace(panel, titles=titles, box=around(panel.box, *(line.box for line in titles)))
