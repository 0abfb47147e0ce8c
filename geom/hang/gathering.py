"""From the solved bays of a tied run to one piece: figures, one unfolded elevation, pulls by support."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang.figures import HangingFigures
from geom.hang.shape import Shape, dimensions, drawn
from geom.hang.shown import with_bays
from geom.hang.together import one_solid, worst
from geom.hang.unfolded import unfolded_shape, unfolded_solid
from geom.result import (
    Z_UP,
    Caution,
    Dimension,
    Frame,
    Label,
    Line,
    Metres,
    MetresArray,
    Piece,
    Pull,
    Quantity,
    Unit,
    View,
    fixed,
)
from geom.solids import Solid

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class RunFigures:
    """Figures of a run as a whole: its bays stand beside them. Tie marks are distances along the member."""

    pin_to_pin: Metres
    tie_marks: MetresArray
    span: Metres
    lowest: Metres


def gathered(mark: str, bays: Sequence[Piece], wanted: Quantity | None, *, copies: int) -> Piece:
    """Return a run of its solved bays.

    Parameters
    ----------
    mark : str
        The run's mark; bay n carries `<mark>.<n>`.
    bays : sequence of Piece
        Solved bays in order, each beginning where the one before ends.
    wanted : Quantity or None
        What one value was given of for all bays; a bay that was asked for something else has another intention.
    """
    figures = [bay.figures for bay in bays]
    pins = np.array([bay.pin_to_pin for bay in figures])
    whole = RunFigures(
        pin_to_pin=float(pins.sum()),
        tie_marks=fixed(np.concatenate([[0.0], np.cumsum(pins)])),
        span=float(sum(bay.span for bay in figures)),
        lowest=min(bay.lowest for bay in figures),
    )
    mass = sum(bay.mass for bay in bays)
    return Piece(
        mark=mark,
        kind="run",
        what=f"run of {len(bays)} {'bay' if len(bays) == 1 else 'bays'}, {bays[0].what}",
        views=(with_bays(_elevation(bays), bays, _labels(mark, bays)),),
        mass=mass,
        figures=whole,
        used=bays[0].used,
        stocks=bays[0].stocks,
        copies=copies,
        intended=wanted,
        difference=worst(bays, wanted) if wanted is not None else None,
        parts=tuple(bays),
        parts_name="bays",
        facts=_facts(bays, whole, mass),
        lines=tuple(line for bay in bays for line in bay.lines),
        labels=(*_labels(mark, bays), *(label for bay in bays for label in _loads(bay))),
        solids=one_solid(mark, bays),
        tables=tuple(table for bay in bays for table in bay.tables),
        cuts=tuple(replace(cut, piece=mark) for bay in bays for cut in bay.cuts),
        pulls=_pulls(mark, bays),
        cautions=_cautions(mark, bays),
    )


def _facts(bays: Sequence[Piece], whole: RunFigures, mass: float) -> tuple[Quantity, ...]:
    counts = [bay.figures.links.count for bay in bays if bay.figures.links is not None]
    first = (Quantity("links", float(sum(counts))),) if counts else ()
    pull = max(max(bay.figures.pull_from, bay.figures.pull_to) for bay in bays)
    return (
        *first,
        Quantity("pin to pin", whole.pin_to_pin, Unit("m")),
        Quantity("mass", mass, Unit("kg")),
        Quantity("greatest end pull", pull, Unit("N")),
    )


def _support_mark(mark: str, pull: Pull, bay: int, bays: int, *, last: bool) -> str:
    """A named support keeps its name; a bare point is called by the bay that begins there, the last by the last bay."""
    if pull.named:
        return pull.support
    if not last:
        return f"{mark}.{bay + 1}.from"
    return f"{mark}.{bays}.to" if bay + 1 == bays else f"{mark}.{bay + 2}.from"


def _pulls(mark: str, bays: Sequence[Piece]) -> tuple[Pull, ...]:
    return tuple(
        replace(pull, support=_support_mark(mark, pull, number, len(bays), last=last))
        for number, bay in enumerate(bays)
        for last, pull in zip((False, True), bay.pulls, strict=True)
    )


def _labels(mark: str, bays: Sequence[Piece]) -> tuple[Label, ...]:
    marks = dict.fromkeys((pull.support, tuple(pull.at)) for pull in _pulls(mark, bays))
    return tuple(Label(fixed(at), support, "support") for support, at in marks)


def _loads(bay: Piece) -> list[Label]:
    return [label for label in bay.labels if label.role == "load"]


def _cautions(mark: str, bays: Sequence[Piece]) -> tuple[Caution, ...]:
    """Cautions that hold for every bay alike are said once, of the run; others name their bay."""
    found: dict[tuple[str, str], list[str]] = {}
    first: dict[tuple[str, str], Caution] = {}
    for bay in bays:
        for caution in bay.cautions:
            found.setdefault((caution.code, caution.text), []).append(bay.mark)
            first.setdefault((caution.code, caution.text), caution)
    return tuple(
        replace(first[key], piece=mark if len(marks) == len(bays) else ", ".join(marks)) for key, marks in found.items()
    )


def _elevation(bays: Sequence[Piece]) -> View:
    """Unfold the bays into one plane, in order, so that each is seen true to scale whatever its direction on plan."""
    lines: list[Line] = []
    solids: list[Solid] = []
    marks: list[Label] = []
    bay_dimensions: list[Dimension] = []
    x = 0.0
    for number, bay in enumerate(bays):
        figures: HangingFigures = bay.figures
        shape = unfolded_shape(bay, x)
        lines += drawn(bay.mark, shape)
        solids += [unfolded_solid(solid, bay.frame, shape) for solid in bay.solids]
        bay_dimensions += _bay_dimensions(shape, figures)
        marks += [Label(shape.start, bay.labels[0].text, "support")] if number == 0 else []
        marks.append(Label(shape.end, bay.labels[1].text, "support"))
        marks += [replace(label, at=_beside(bay, shape, label.at)) for label in _loads(bay)]
        marks.append(Label(_middle(shape, figures), bay.mark, "part"))
        x += figures.span
    total = Dimension("horizontal", fixed(lines[0].curve.start), fixed(lines[-2].curve.end), x, "", "below", 2)
    frame = Frame(fixed(lines[0].curve.start), fixed([1, 0, 0]), Z_UP)
    shown = (*bay_dimensions, total) if len(bays) > 1 else tuple(bay_dimensions)
    return View("elevation", frame, shown, tuple(lines), tuple(marks), tuple(solids))


def _bay_dimensions(shape: Shape, figures: HangingFigures) -> list[Dimension]:
    """The span of a bay, its sag, its lowest level, its level difference; a run repeats no more."""
    return [d for d in dimensions(shape, figures) if d.says != "to lowest point"]


def _beside(bay: Piece, shape: Shape, at: Floats) -> Floats:
    """A point of a bay's plane where that is unfolded."""
    x, up = bay.frame.flat(at)
    return np.asarray(shape.start + np.array([x, 0.0, up]))


def _middle(shape: Shape, figures: HangingFigures) -> Floats:
    place = shape.start + (shape.end - shape.start) * 0.5
    return np.asarray(place - np.array([0.0, 0.0, figures.sag_mid]))
