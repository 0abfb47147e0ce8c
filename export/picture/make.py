"""From a result to the picture on its sheet: the largest print scale at which everything fits."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from export.picture import notes as noting
from export.picture import plan as planning
from export.picture.arrange import FEED, Arranged, Foot, arrange
from export.picture.drawn import printed
from export.picture.panels import Marks, Print, Subject, elevation, subject
from export.picture.plan import Site
from export.picture.scale import Scale, Sheet, scales, sheets
from export.picture.sizes import PAPER
from export.picture.values import Box, Panel, Picture, around, shifted
from export.picture.views import Drawing
from export.picture.wording import Wording
from geom.result import Result

_SMALLEST = 25.0  # printed mm: once all geometry is smaller, a smaller scale makes no more room for its text
_MORE_SCALES = 1  # smaller scales looked at for the sake of marks: at still smaller ones they have less room
_FEW_DROPPED = 12  # marks without room that a smaller scale may still find it for
_MORE_SHEETS = 1.5  # times the fewest sheets possible: so much a larger scale may cost
_TITLE_ROOM = 12.0  # at least this much stands under each view, mm: mark and two lines
_MARKS: tuple[Marks, ...] = ("free", "within")  # tried in turn
# Widths of the notes' columns, mm, and how many, tried in turn: the cautions beside the rest, or under it.
_NOTES = ((120.0, 2), (90.0, 2), (170.0, 1), (120.0, 1))


@dataclass(frozen=True)
class Contents:
    """What is drawn, at whatever scale."""

    subjects: tuple[Subject, ...]
    site: Site | None
    words: noting.Words
    wording: Wording
    ends: tuple[float, float] | None = None  # of elevation and plan, m, where the plan stands in line under it

    @property
    def largest(self) -> float:
        """Longest side of any view, m."""
        boxes = [one.seen.box for one in self.subjects]
        return max((max(box[2] - box[0], box[3] - box[1]) for box in boxes), default=0.0)


def contents(result: Result, drawing: Drawing, *, extra: Sequence[str] = ()) -> Contents:
    """Return all views of a result, its plan and its notes."""
    wording = Wording(result.setting.drawing_unit)
    words = noting.words(result, extra=extra)
    subjects = tuple(
        subject(piece, view, drawing, wording, words.of(piece.mark)) for piece in result.pieces for view in piece.views
    )
    site = planning.site(result, drawing) if planning.wanted(result) else None
    ends = planning.in_line(subjects[0], site) if site is not None else None
    return Contents(subjects, site, words, wording, ends)


def picture(result: Result, drawing: Drawing, *, extra: Sequence[str] = ()) -> Picture:
    """Return the picture of a result on the sheet its design names.

    The scale is the largest at which everything fits one sheet; where some mark finds no room at that, the next one is
    looked at, and taken if it has room for all. Where no scale brings that about, as the text of many pieces takes more
    than a sheet whatever the scale, it is the largest at which that takes hardly more sheets than any scale does. The
    plan of pieces far apart, larger than the sheet at any scale that shows them, stands under it by itself; and where
    no scale brings a view or the notes on the sheet, the next larger one is taken.
    """
    found = contents(result, drawing, extra=extra)
    for on in sheets(result.setting.drawing.sheet):
        shown = _fitted(found, on) or _plan_apart(found, on)
        if shown is not None:
            return shown
    raise AssertionError("sheets grow without end")


def _fitted(found: Contents, on: Sheet) -> Picture | None:
    """The picture on one sheet or several; None where some view, the plan or the notes fit none at any scale."""
    candidates = list(_candidates(found))
    best: Picture | None = None
    left = 0
    for scale in candidates:
        if _unmarked(found, scale, on) is None:
            continue
        marked = _marked(found, scale, on)
        if marked is None:
            continue
        shown = _picture(marked, scale, on)
        if best is None or shown.dropped == 0:
            best = shown
        left += 1
        if best.dropped == 0 or best.dropped > _FEW_DROPPED or left > _MORE_SCALES:
            break
    return best or _on_sheets(found, candidates, on)


def _plan_apart(found: Contents, on: Sheet) -> Picture | None:
    """The picture with its plan, too large for the sheet, under the last one."""
    if found.site is None:
        return None
    says = next((one.says for one in scales(found.wording.unit) if _holds(on, found.site.box, one)), None)
    note = f"The plan is larger than the sheet and stands under it{f': print it at {says}' if says else ''}"
    shown = _fitted(replace(found, site=None, words=found.words.with_line(note)), on)
    if shown is None:
        return None
    plan = planning.plan(found.site, Print(shown.ratio / 1000, PAPER, found.wording), marks="free")
    left, bottom, _, _ = shown.box
    at = (left - plan.box[0], bottom - FEED * PAPER.note - plan.box[3])
    return replace(shown, panels=(*shown.panels, replace(plan, at=at)), box=around(shown.box, shifted(plan.box, at)))


def _holds(on: Sheet, box: Box, scale: Scale) -> bool:
    """Whether geometry (m) with the least of marks round it goes on a sheet at a scale."""
    wide, high = (1000.0 / scale.ratio * (box[k + 2] - box[k]) + 2 * _TITLE_ROOM for k in (0, 1))
    return wide <= on.width and high <= on.height


def _on_sheets(found: Contents, candidates: Sequence[Scale], on: Sheet) -> Picture | None:
    """The picture on several sheets: scales are tried upwards from the smallest, as long as few sheets are added."""
    upwards = list(reversed(candidates)) or [next(one for one in scales(found.wording.unit) if one.ratio == 1)]
    fewest, fitting = 0, []
    for scale in upwards:
        arranged = _unmarked(found, scale, on, feed=True)
        fewest = fewest or (arranged.sheets if arranged else 0)
        if arranged is None or arranged.sheets > _MORE_SHEETS * fewest:
            break
        fitting.append(scale)
    shown = (_marked(found, scale, on, feed=True) for scale in reversed(fitting))
    return next((_picture(one, scale, on) for one, scale in zip(shown, reversed(fitting), strict=True) if one), None)


def _candidates(found: Contents) -> Iterator[Scale]:
    """Scales from the largest on, down to where geometry takes no room any more."""
    for scale in scales(found.wording.unit):
        if found.largest * 1000 / scale.ratio < _SMALLEST:
            return
        yield scale


def _unmarked(found: Contents, scale: Scale, on: Sheet, *, feed: bool = False) -> Arranged | None:
    """Everything but the marks in place at a scale, if it fits: first tried with no more than the geometry."""
    print_ = Print(scale.ratio / 1000, PAPER, found.wording)
    bare = _bare(found, print_)
    if _too_large(bare, found.site, print_, on, feed=feed):
        return None
    if _arranged(found, scale, (bare, None), on, feed=feed) is None:
        return None
    return _arranged(found, scale, _panels(found, print_, marks="none"), on, feed=feed)


def _too_large(bare: Sequence[Panel], site: Site | None, print_: Print, on: Sheet, *, feed: bool) -> bool:
    """Whether views together, or the plan, are larger than the paper: seen without arranging thousands of them."""
    together = sum((panel.box[2] - panel.box[0]) * (panel.box[3] - panel.box[1]) for panel in bare)
    left, bottom, right, top = printed(site.box, print_.per) if site else (0.0, 0.0, 0.0, 0.0)
    return (not feed and together > on.width * on.height) or right - left > on.width or top - bottom > on.height


def _arranged(  # noqa: PLR0913 - what an arrangement depends on
    found: Contents,
    scale: Scale,
    panels: tuple[list[Panel], Panel | None],
    on: Sheet,
    *,
    dropped: int = 1,
    sheets: int = 2,
    feed: bool = False,
) -> Arranged | None:
    """Views, plan and notes in place, the notes in the first of their shapes that has room."""
    heading = noting.heading(found.words, PAPER, width=on.width)
    for width, columns in _NOTES:
        notes = noting.notes(
            found.words, scale, on, found.wording, PAPER,
            width=width, dropped=dropped, sheets=sheets, columns=columns,
        )  # fmt: skip
        arranged = arrange(panels[0], Foot(heading, panels[1], notes), on, PAPER, feed=feed)
        if arranged is not None:
            return arranged
    return None


def _marked(found: Contents, scale: Scale, on: Sheet, *, feed: bool = False) -> Arranged | None:
    """Everything in place at a scale at which it fits without marks.

    Where it does not fit with them, marks are held to the room that is taken anyway: a smaller scale would leave them
    still less.
    """
    print_ = Print(scale.ratio / 1000, PAPER, found.wording)
    for marks in _MARKS:
        views, plan = _panels(found, print_, marks=marks)
        dropped = sum(panel.dropped for panel in views) + (plan.dropped if plan else 0)
        sheets = 1
        for _ in range(3):  # the notes say how many sheets there are, and may take another line for it
            arranged = _arranged(found, scale, (views, plan), on, dropped=dropped, sheets=sheets, feed=feed)
            if arranged is None or arranged.sheets == sheets:
                break
            sheets = arranged.sheets
        if arranged is not None:
            return arranged
    return None


def _bare(found: Contents, print_: Print) -> list[Panel]:
    """Views with no more than their geometry and the least of a title: what must fit in any case."""
    panels = []
    for one in found.subjects:
        core = printed(one.seen.box, print_.per)
        panels.append(
            Panel("", "elevation", print_.per, (), core=core, box=(core[0], core[1] - _TITLE_ROOM, *core[2:]))
        )
    return panels


def _panels(found: Contents, print_: Print, *, marks: Marks) -> tuple[list[Panel], Panel | None]:
    views = [elevation(one, print_, marks=marks) for one in found.subjects]
    if found.site is None:
        return views, None
    plan = planning.plan(found.site, print_, marks=marks)
    if found.ends is not None:
        views[0], plan = (
            replace(one, line=end / print_.per) for one, end in zip((views[0], plan), found.ends, strict=True)
        )
    return views, plan


def _picture(arranged: Arranged, scale: Scale, on: Sheet) -> Picture:
    return Picture(
        arranged.panels, arranged.notes, scale.says, scale.ratio, arranged.box, arranged.sheets, (on.width, on.height)
    )
