"""The picture laid out anew for a screen: the sheet's text would be four pixels high there."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from export.picture import plan as planning
from export.picture.arrange import levelled
from export.picture.dimensions import Measure
from export.picture.panels import Print, Subject, elevation, subject
from export.picture.sizes import Sizes
from export.picture.values import Box, Panel, around, shifted
from export.picture.views import Drawing, is_plan
from export.picture.wording import Wording, listed
from geom.result import Result

# Sizes in pixels; text by its capitals, which are 1/1.37 of the font size at most: 12 px, 11 px, 19 px and 22 px fonts.
SCREEN = Sizes(
    note=8.8, small=8.1, title=14.0, heading=16.0, arrow=8.0, gap=4.0, first_row=26.0, row=22.0, overshoot=4.0,
    symbol=13.0, leading=1.9,
)  # fmt: skip
WIDTH = 900.0
MARGIN = 18.0
_BETWEEN = 28.0
_MOST_ABREAST = 3
_MOST_PIECES = 12
_HIGHEST = {1: 420.0, 2: 300.0, 3: 240.0}  # pixels of geometry, by how many stand abreast
_WIDE, _WIDER = 2.2, 4.5  # width to height from which on a view stands with one other, or alone
_SMALLER = 1.02  # a scale that is too large is made this much smaller than its overlap asks for
_TRIES = 6  # each takes off what printed things stand over the column
_MOST_MARKS = 12  # of one kind in a view; a net's marks are for its drawing
_FINE = 4000.0  # a curve is within its view's size over this: a quarter of a pixel


@dataclass(frozen=True)
class Screen:
    """Everything on the screen, pixels, y up from the foot of the last line; `rest` names what is not drawn."""

    panels: tuple[Panel, ...]
    box: Box
    rest: str


def screen(result: Result) -> Screen:
    """Return elevations, plan under them, for a screen: the first dozen pieces, three abreast at most."""
    wording = Wording(result.setting.drawing_unit)
    subjects = [_subject(result, number, wording) for number in range(min(len(result.pieces), _MOST_PIECES))]
    if len(result.pieces) == 1:
        found = _one(subjects[0], result, wording)
        if found is not None:
            return Screen(found, around(*(shifted(panel.box, panel.at) for panel in found)), "")
    placed: list[Panel] = []
    y = 0.0
    for row in _shared(subjects):
        panels, y = _row(row, y, wording)
        placed += panels
    if not (len(subjects) == 1 and is_plan(subjects[0].view.frame)):
        plan = _plan(result, wording)
        placed.append(replace(plan, at=(MARGIN - plan.box[0], y - plan.box[3])))
    rest = [piece.mark for piece in result.pieces[_MOST_PIECES:]]
    box = around(*(shifted(panel.box, panel.at) for panel in placed))
    return Screen(tuple(placed), box, listed(rest, 20))


def _one(one: Subject, result: Result, wording: Wording) -> tuple[Panel, ...] | None:
    """The elevation of the only piece and its plan in line under it at one scale; None where they are not alike."""
    site = _fine_site(result)
    ends = planning.in_line(one, site)
    if ends is None:
        return None
    column = WIDTH - 2 * MARGIN
    over = _fitted(one, column, _HIGHEST[1], wording)
    per = over.per
    for _ in range(_TRIES):
        over, under = elevation(one, Print(per, SCREEN, wording)), planning.plan(site, Print(per, SCREEN, wording))
        x, left = (end / per for end in ends)
        # both from the left margin, then the one whose line is nearer it moved to the other
        line = max(x - over.box[0], left - under.box[0])
        right = max(line - x + over.box[2], line - left + under.box[2])
        if right <= column:
            break
        per *= right / column * _SMALLER
    first = replace(over, at=(MARGIN + line - x, -over.box[3]))
    second = replace(under, at=(MARGIN + line - left, first.at[1] + over.box[1] - _BETWEEN - under.box[3]))
    return first, second


def _subject(result: Result, number: int, wording: Wording) -> Subject:
    piece = result.pieces[number]
    view = piece.views[0]
    coarse = subject(piece, view, Drawing(1.0), wording).seen.box
    within = max(coarse[2] - coarse[0], coarse[3] - coarse[1], 1e-6) / _FINE
    full = subject(piece, view, Drawing(within), wording)
    counts = Counter(one.role for one in full.labels)
    marks = tuple(one if counts[one.role] <= _MOST_MARKS else replace(one, text="", below=()) for one in full.labels)
    return replace(full, labels=marks, measures=tuple(_telling(full.measures)))


def _telling(found: Sequence[Measure]) -> list[Measure]:
    """The dimensions that tell the shape as it was asked for; else the widest, the sag or rise, the lowest level."""
    told = [one for one in found if one.tells]
    if told:
        return told
    named = [one for one in found if one.says] or list(found)
    level = [one for one in named if one.kind == "horizontal"]
    told += [max(level, key=lambda one: one.value)] if level else []
    upright = [one for one in named if one.kind == "vertical" and one.side == "inside"]
    upright = upright or [one for one in named if one.kind == "vertical"]
    told += [max(upright, key=lambda one: one.value)] if upright else []
    levels = [one for one in named if one.kind == "level"]
    told += [min(levels, key=lambda one: one.value)] if levels else []
    return told


def _shared(subjects: Sequence[Subject]) -> list[list[Subject]]:
    """Rows of views in order: wide ones alone, somewhat wide ones in pairs, others three abreast."""
    rows: list[list[Subject]] = []
    free = 0.0
    for one in subjects:
        share = 1 / _most_abreast(one, len(subjects))
        if share > free + 1e-9:
            rows.append([])
            free = 1.0
        rows[-1].append(one)
        free -= share
    return rows


def _most_abreast(one: Subject, count: int) -> int:
    shape = _shape(one)
    fit = 1 if shape > _WIDER else 2 if shape > _WIDE else _MOST_ABREAST
    return max(1, min(fit, count))


def _shape(one: Subject) -> float:
    left, bottom, right, top = one.seen.box
    return (right - left) / max(top - bottom, 1e-9)


def _fitted(one: Subject, column: float, highest: float, wording: Wording) -> Panel:
    """A view as large as its column and the height allow; what is printed beside the geometry is taken off."""
    left, bottom, right, top = one.seen.box
    size = np.maximum([right - left, top - bottom], 1e-9)
    wide = column
    for _ in range(_TRIES):
        per = float(max(size[0] / max(wide, 60.0), size[1] / highest))
        panel = elevation(one, Print(per, SCREEN, wording))
        over = panel.box[2] - panel.box[0] - column
        if over <= 0:
            break
        wide = min(wide, size[0] / per) - over
    return panel


def _row(row: Sequence[Subject], y: float, wording: Wording) -> tuple[list[Panel], float]:
    """One row from `y` down, its columns of one width; and where the next one begins."""
    column = (WIDTH - 2 * MARGIN - (len(row) - 1) * _BETWEEN) / len(row)
    panels = [_fitted(one, column, _HIGHEST[len(row)], wording) for one in row]
    lefts = [MARGIN + number * (column + _BETWEEN) for number in range(len(row))]
    level = levelled(
        [replace(panel, at=(left - panel.box[0], -panel.core[1])) for panel, left in zip(panels, lefts, strict=True)]
    )
    box = around(*(shifted(panel.box, panel.at) for panel in level))
    placed = [replace(panel, at=(panel.at[0], panel.at[1] + y - box[3])) for panel in level]
    return placed, y - (box[3] - box[1]) - _BETWEEN


def _fine_site(result: Result) -> planning.Site:
    """The plan to be printed, its curves as fine as a screen shows."""
    box = around(*(one.box for one in planning.site(result, Drawing(1.0)).seen))
    return planning.site(result, Drawing(max(box[2] - box[0], box[3] - box[1], 1e-9) / _FINE))


def _plan(result: Result, wording: Wording) -> Panel:
    site = _fine_site(result)
    box = around(*(one.box for one in site.seen))
    size = np.maximum([box[2] - box[0], box[3] - box[1]], 1e-9)
    wide = WIDTH - 2 * MARGIN
    for _ in range(_TRIES):
        per = float(max(size[0] / wide, size[1] / _HIGHEST[1]))
        panel = planning.plan(site, Print(per, SCREEN, wording))
        over = panel.box[2] - panel.box[0] - (WIDTH - 2 * MARGIN)
        if over <= 0:
            break
        wide = min(wide, size[0] / per) - over
    return panel
