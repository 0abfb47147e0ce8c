"""How a row of swags is shown: the spans laid over one another, and the row along its rail or round its ring."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.curves import Polyline, Segment
from geom.hang.rail import even
from geom.hang.row import Row, every, named, outlines, zones
from geom.hang.shape import Shape, dimensions, drawn
from geom.hang.unfolded import unfolded_shape, unfolded_solid
from geom.result import PLAN, Z_UP, Dimension, Frame, Label, Line, Piece, View, fixed

Floats = NDArray[np.float64]

SAME = 1e-6
"""Lengths nearer than this are alike, m: a hundredth of what any shop measures, a million times rounding."""
_MOST_OVERLAID = 60  # more curves over one another than this are a black patch on any sheet
_MOST_UPRIGHT = 300  # strands seen from their ends: nearer than a millimetre on an A3 sheet past this
_MOST_MARKS = 10  # of strands in a row: two views stand abreast on an A4 sheet, and a mark takes some eight millimetres
_MOST_NUMBERS = 40  # round a ring, where nothing but numbers stands
_FEW_KINDS = 5  # different strands that are each marked
_PLACES = (0.5, 0.36, 0.64, 0.27, 0.73)  # of the span, where marks of curves over one another stand


@dataclass(frozen=True, eq=False)
class _Strand:
    """A strand in the plane of the overlay: its shape there, its mark and its piece."""

    piece: Piece
    shape: Shape

    @property
    def lowest(self) -> Floats:
        """Its lowest point, (3,) m."""
        x = self.shape.start[0] + self.piece.figures.lowest_at
        return np.array([x, 0.0, self.piece.figures.lowest])

    def at(self, share: float) -> Floats:
        """The point at a share of its span, (3,) m."""
        points = self.shape.curve.points(max(self.piece.figures.sag, SAME) / 1000)
        x = self.shape.start[0] + share * (self.shape.end[0] - self.shape.start[0])
        return np.array([x, 0.0, np.interp(x, points[:, 0], points[:, 2])])


def views(mark: str, strands: Sequence[Piece], row: Row) -> tuple[View, ...]:
    """Return the views of a row: square to the spans; then along the rail, or a ring's plan with its points numbered.

    Of a ring of strands all alike no number matters, and the plan of all pieces shows the rest.
    """
    alike = kinds(strands)
    second = None
    if row.between == "rails":
        second = _along_rail(strands, row)
    elif len(alike) > 1:
        second = _plan(mark, strands, row)
    return (_overlay(strands, alike, row), *([] if second is None else [second]))


def kinds(strands: Sequence[Piece]) -> dict[int, list[int]]:
    """Return strands that are alike by the first of them: of one stock and shape, at one height.

    Sizes are alike within `SAME`; steps of it begin off any round number, so that rounding parts no alike ones.
    """
    sizes = np.array(
        [
            (s.figures.span, s.figures.level_difference, s.figures.pin_to_pin, s.pulls[0].at[2], s.figures.lowest)
            for s in strands
        ]
    )
    steps = np.floor(sizes / SAME + 0.381966).astype(np.int64)
    found: dict[tuple[str, bytes], list[int]] = {}
    for number, strand in enumerate(strands):
        found.setdefault((strand.stocks[0].name, steps[number].tobytes()), []).append(number)
    return {numbers[0]: numbers for numbers in found.values()}


def ranges(mark: str, numbers: Sequence[int]) -> str:
    """Return marks of strands in words, those that follow one another put together: `B.1 to B.20, B.41`."""
    breaks = np.flatnonzero(np.diff(numbers) > 1) + 1
    runs = np.split(np.asarray(numbers) + 1, breaks)
    return ", ".join(f"{mark}.{run[0]}" + (f" to {run[-1]}" if len(run) > 1 else "") for run in runs)


def _overlay(strands: Sequence[Piece], alike: Mapping[int, Sequence[int]], row: Row) -> View:
    laid = {number: _Strand(strands[number], unfolded_shape(strands[number], 0.0)) for number in alike}
    first = laid[0]
    frame = Frame(first.shape.start, fixed([1, 0, 0]), Z_UP)
    if len(alike) == 1:
        solids = tuple(unfolded_solid(solid, first.piece.frame, first.shape) for solid in first.piece.solids)
        lines = drawn(first.piece.mark, first.shape)
        name = f"elevation of one, all {len(strands)} alike"
        shown = dimensions(first.shape, first.piece.figures)
        return View(name, frame, shown, lines, tuple(_ends([first], row)), solids)
    marked = _marked(strands, alike)
    name = "elevation square to the spans, strands laid over one another"
    return View(name, frame, _spans(strands, laid), _curves(laid, marked), _overlay_labels(laid, marked, row), ())


def _marked(strands: Sequence[Piece], alike: Mapping[int, Sequence[int]]) -> dict[int, str]:
    """Return which strands are marked in the overlay and how: all kinds if few, else first, middle, last, extremes."""
    row = strands[0].mark.rsplit(".", 1)[0]
    if len(alike) <= _FEW_KINDS:
        return {number: ranges(row, numbers) for number, numbers in alike.items()}
    leader = {number: first for first, numbers in alike.items() for number in numbers}
    chosen: dict[int, set[int]] = {}
    for number in (*_extremes(strands), 0, (len(strands) - 1) // 2, len(strands) - 1):
        chosen.setdefault(leader[number], set()).add(number)
    return {first: ranges(row, sorted(numbers)) for first, numbers in chosen.items()}


def _extremes(strands: Sequence[Piece]) -> tuple[int, int]:
    """Numbers of the strands of greatest and of least sag."""
    sags = [strand.figures.sag for strand in strands]
    return int(np.argmax(sags)), int(np.argmin(sags))


def _curves(laid: Mapping[int, _Strand], marked: Mapping[int, str]) -> tuple[Line, ...]:
    """Curves of all kinds, of very many only so many; chords of those that are marked."""
    numbers = list(laid)
    if len(numbers) > _MOST_OVERLAID:
        picked = np.unique(np.rint(even(len(numbers) - 1, _MOST_OVERLAID)).astype(np.int64))
        numbers = [numbers[place] for place in picked]
    shown = dict.fromkeys((*marked, *numbers))
    return tuple(
        line
        for number in shown
        for line in drawn(laid[number].piece.mark, laid[number].shape)[: 2 if number in marked else 1]
    )


def _overlay_labels(laid: Mapping[int, _Strand], marked: Mapping[int, str], row: Row) -> tuple[Label, ...]:
    names = (
        Label(laid[number].at(share), text, "part")
        for (number, text), share in zip(marked.items(), _PLACES, strict=False)
    )
    return (*_ends([laid[number] for number in marked], row), *names)


def _ends(laid: Sequence[_Strand], row: Row) -> list[Label]:
    """Supports at the ends of some strands, each place once: what they hang from is said at the first."""
    names = {"rails": ("from rail", "to rail"), "ring": ("", ""), "rings": ("from ring", "to ring")}[row.between]
    found: dict[bytes, Label] = {}
    for strand in laid:
        for end, name in zip((strand.shape.start, strand.shape.end), names, strict=True):
            text = name if strand is laid[0] else ""
            found.setdefault(np.round(end / SAME).tobytes(), Label(end, text, "support"))
    return list(found.values())


def _spans(strands: Sequence[Piece], laid: Mapping[int, _Strand]) -> tuple[Dimension, ...]:
    """Spans of the narrowest and the widest, sags and lowest levels of the deepest and the shallowest."""
    by_span = sorted(laid.values(), key=lambda strand: strand.piece.figures.span)
    one_span = by_span[-1].piece.figures.span - by_span[0].piece.figures.span < SAME
    wide = [by_span[-1]] if one_span else [by_span[0], by_span[-1]]
    found = [
        Dimension(
            "horizontal", strand.shape.start, strand.shape.end, strand.piece.figures.span,
            "span" if one_span else f"span of {strand.piece.mark}", "below", 1,
        )
        for strand in wide
    ]  # fmt: skip
    deepest, shallowest = (_like(strands, laid, number) for number in _extremes(strands))
    found += [*_depth(deepest, left=False), *_depth(shallowest, left=True)]
    return tuple(found)


def _like(strands: Sequence[Piece], laid: Mapping[int, _Strand], number: int) -> _Strand:
    """Return a strand in the plane of the overlay, whether or not it is the first of its kind."""
    return laid.get(number) or _Strand(strands[number], unfolded_shape(strands[number], 0.0))


def _depth(strand: _Strand, *, left: bool) -> list[Dimension]:
    """The sag and the lowest level of one strand; between level supports the sag stands outside, where it is read."""
    figures, mark = strand.piece.figures, strand.piece.mark
    level = Dimension("level", strand.lowest, strand.lowest, figures.lowest, f"lowest point of {mark}", "below")
    if abs(figures.level_difference) < SAME and figures.span > 0.0:
        end = strand.shape.start if left else strand.shape.end
        says = f"sag of {mark}"
        return [Dimension("vertical", end, strand.lowest, figures.sag, says, "left" if left else "right"), level]
    sag = [one for one in dimensions(strand.shape, figures) if one.says == "sag under chord"]
    return [*(Dimension("vertical", d.p, d.q, d.value, f"sag of {mark}", "inside") for d in sag), level]


def _along_rail(strands: Sequence[Piece], row: Row) -> View | None:
    """The row as seen along the spans: each strand edge-on under the rail, and the line of their lowest points."""
    rail = row.rail
    if rail is None or rail.plan[-1] < SAME:
        return None  # one strand over another: nothing is seen along the rail
    x = rail.developed(even(rail.length, len(strands)))
    low = np.array([strand.figures.lowest for strand in strands])
    tops = np.maximum(row.starts[:, 2], row.ends[:, 2])
    rails = [Polyline(_flat(rail.plan, rail.corners[:, 2]))]
    if np.abs(row.starts[:, 2] - row.ends[:, 2]).max() > SAME:
        rails.append(Polyline(_flat(x, row.ends[:, 2])))
    feet, heads = _flat(x, low), _flat(x, tops)
    step = every(len(strands), _MOST_UPRIGHT)
    lines = (
        *(Line("axis", Segment(heads[n], feet[n]), strands[n].mark) for n in range(0, len(strands), step)),
        *(Line("edge", curve) for curve in rails),
        Line("chord", Polyline(feet)),
    )
    labels = tuple(Label(feet[n], strands[n].mark, "part") for n in named(len(strands), _MOST_MARKS))
    shown = "" if step == 1 else f", every {step}th strand"
    name = f"elevation along the rail with the line of lowest points{shown}"
    return View(name, Frame(heads[0], fixed([1, 0, 0]), Z_UP), _of_rail(strands, x, heads, feet), lines, labels, ())


def _of_rail(strands: Sequence[Piece], x: Floats, heads: Floats, feet: Floats) -> tuple[Dimension, ...]:
    low, high = int(np.argmin(feet[:, 2])), int(np.argmax(feet[:, 2]))
    found = [
        Dimension("horizontal", heads[0], heads[-1], float(x[-1]), "rail", "above", 2),
        *zones([strand.stocks[0].name for strand in strands], heads),
        *(
            Dimension("level", feet[n], feet[n], float(feet[n, 2]), f"lowest point of {strands[n].mark}", "below")
            for n in dict.fromkeys((low, high))
        ),
        Dimension("level", heads[-1], heads[-1], float(heads[-1, 2]), "rail", "right"),
    ]
    steps = np.diff(x)
    if np.ptp(steps) < SAME and len(steps) > 1:
        says = f"spacing, {len(steps)} equal"
        found.append(Dimension("horizontal", heads[0], heads[1], float(steps[0]), says, "above", 0))
    return tuple(found)


def _flat(x: Floats, z: Floats) -> Floats:
    return np.stack([x, np.zeros_like(x), z], axis=-1)


def _plan(mark: str, strands: Sequence[Piece], row: Row) -> View:
    """The ring from above: its points numbered as the strands that begin there."""
    lines = (*(strand.lines[0] for strand in strands), *outlines(mark, row))
    step = every(len(strands), _MOST_NUMBERS)
    labels = [
        Label(at, str(number + 1) if number % step == 0 else "", "held point") for number, at in enumerate(row.starts)
    ]
    if row.between == "rings":
        labels += [Label(at, "", "held point") for at in row.ends]
    return View("plan, numbers where strands begin", PLAN, _diameters(row), lines, tuple(labels), ())


def _diameters(row: Row) -> tuple[Dimension, ...]:
    found = []
    for rank, curve in enumerate(row.outlines):
        wide = curve.length / np.pi
        found.append(
            Dimension(
                "horizontal", curve.start - np.array([wide, 0.0, 0.0]), curve.start, wide, "diameter", "below", rank
            )
        )
    return tuple(found)
