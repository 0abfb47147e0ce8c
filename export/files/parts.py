"""Flat parts to be cut at full size, `parts.dxf`: closed outlines on CUT, marks on ENGRAVE, the rest on NOTES."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from export.dxf.checks import audit, opened, same
from export.dxf.document import Format, chunks, new
from export.dxf.pen import Pen
from export.outputs import Checked, CheckFailed, Choices, File, Output
from export.picture import text as measure
from export.picture.engrave import Engraving, engraving
from export.picture.looks import CUT_LAYERS
from export.picture.scale import round_length
from export.picture.values import Box, Floats, Stroke, around, xy
from export.picture.views import SAME
from export.picture.wording import Wording
from geom import units
from geom.result import Flat, Piece, Result

if TYPE_CHECKING:
    from ezdxf.document import Drawing as Document

_APART = 0.1  # of the larger of two parts, between their boxes
_LEAST_APART = 0.03  # m: room for a clamp and for the line of notes under each
_NOTE_SHARE = 1 / 60  # of the widest part: height of the notes, held between these, m
_NOTE_LEAST, _NOTE_MOST = 0.0025, 0.01
_ROW_SHARE = 1.6  # how much wider than high the whole is laid out


@dataclass(frozen=True, eq=False)
class Part:
    """A part in its place: the lower left corner of its box at `at` (2,) m, its note under it."""

    flat: Flat
    outlines: tuple[Floats, ...]  # as drawn, closed, the first corner not repeated, m
    says: str
    mark: Engraving | None
    at: Floats
    note: float  # height of its note, m

    @property
    def box(self) -> Box:
        """Box round its outlines in place, m."""
        size = np.ptp(self.outlines[0], axis=0)
        return (float(self.at[0]), float(self.at[1]), float(self.at[0] + size[0]), float(self.at[1] + size[1]))

    @property
    def moved(self) -> Floats:
        """What brings its outlines into place, (2,) m."""
        return np.asarray(self.at - self.outlines[0].min(axis=0))


def write(result: Result, choices: Choices) -> Iterable[File]:
    """Yield the parts, where there are any."""
    if any(_flats(piece) for piece in result.pieces):
        made = _Made(result)
        yield File("parts.dxf", made.chunks(), made.checked)


def verify(path: Path, result: Result, choices: Choices) -> Checked:
    """Read the parts back in full and check them against those of the result."""
    return _Made(result).check(opened(path))


class _Made:
    """The parts on their way into a file."""

    def __init__(self, result: Result) -> None:
        self.fmt = Format(result.setting.drawing.version, result.setting.drawing_unit)
        flats = [(flat, piece.copies) for piece in result.pieces for flat in _flats(piece)]
        self.parts = laid_out(flats, Wording(self.fmt.unit, finer=1))
        self.document: Document | None = None

    def chunks(self) -> Iterator[bytes]:
        """Yield the file's bytes."""
        self.document = document(self.parts, self.fmt)
        left, bottom, right, top = (side * self.fmt.factor for side in around(*(part.box for part in self.parts)))
        yield from chunks(self.document, (left, bottom, right, top))

    def checked(self) -> Checked:
        """Check the document that was written."""
        assert self.document is not None, "the chunks are taken first"
        return self.check(self.document)

    def check(self, doc: Document) -> Checked:
        """Check a document: each outline closed, once and of its size; nothing but marks on ENGRAVE."""
        errors = audit(doc, self.fmt)
        space = doc.modelspace()
        outlines = [entity for entity in space if entity.dxf.layer == "CUT"]
        wanted = [outline for part in self.parts for outline in part.outlines]
        same("outlines", len(wanted), len(outlines))
        for outline, entity in zip(wanted, outlines, strict=True):
            _check_outline(outline * self.fmt.factor, entity, self.fmt)
        engraved = [entity for entity in space if entity.dxf.layer == "ENGRAVE"]
        same("marks", [part.flat.mark for part in self.parts if part.mark], [text.dxf.text for text in engraved])
        stray = {entity.dxf.layer for entity in space} - set(CUT_LAYERS)
        same("layers beside those declared", set(), stray)
        return {
            "audit_errors": errors,
            "unit": self.fmt.unit,
            "parts": len(self.parts),
            "outlines": len(outlines),
            "marks": len(engraved),
        }


def _check_outline(outline: Floats, entity: object, fmt: Format) -> None:
    kind = entity.dxftype()  # type: ignore[attr-defined]
    if kind not in ("LWPOLYLINE", "POLYLINE") or not entity.is_closed:  # type: ignore[attr-defined]
        raise CheckFailed(f"an outline is no closed polyline: {entity}")
    points = entity.vertices() if kind == "LWPOLYLINE" else (point.vec2 for point in entity.points())  # type: ignore[attr-defined]
    found = np.array([tuple(point) for point in points])
    size, wanted = np.ptp(found, axis=0), np.ptp(outline, axis=0)
    if len(found) != len(outline) or not np.allclose(size, wanted, rtol=1e-12, atol=2 * 10.0**-fmt.decimals):
        raise CheckFailed(f"an outline of {len(outline)} corners, {wanted}, has {len(found)}, {size}")


def _flats(piece: Piece) -> tuple[Flat, ...]:
    return piece.flats or tuple(flat for part in piece.parts for flat in _flats(part))


def laid_out(flats: Sequence[tuple[Flat, int]], wording: Wording) -> list[Part]:
    """Return parts in rows from the lower left in the order of the design, none over another nor over its note.

    `flats` are the parts with the number of copies of their piece.
    """
    outlines = [tuple(tidy(outline) for outline in flat.outlines) for flat, _ in flats]
    sizes = [np.ptp(closed[0], axis=0) for closed in outlines]
    note = note_height(float(max(size[0] for size in sizes)))
    says = [_says(flat, flat.copies * copies, size, wording) for (flat, copies), size in zip(flats, sizes, strict=True)]
    rooms = [
        np.array([max(size[0], measure.width(line) * note), size[1] + 2 * note])
        for size, line in zip(sizes, says, strict=True)
    ]
    places = _in_rows(rooms, [_apart(size) for size in sizes])
    return [
        Part(flat, closed, line, engraving(flat), place + xy(0.0, 2 * note), note)
        for (flat, _), closed, line, place in zip(flats, outlines, says, places, strict=True)
    ]


def note_height(widest: float) -> float:
    """Return the height of the notes for parts of which the widest is so wide, m."""
    return float(np.clip(_NOTE_SHARE * widest, _NOTE_LEAST, _NOTE_MOST))


def _in_rows(rooms: Sequence[Floats], gaps: Sequence[float]) -> list[Floats]:
    """Lower left corners (2,) of boxes in rows from the upper left, in all somewhat wider than high."""
    area = sum(float((room[0] + gap) * (room[1] + gap)) for room, gap in zip(rooms, gaps, strict=True))
    width = max(float(np.sqrt(area * _ROW_SHARE)), *(float(room[0]) for room in rooms))
    places: list[Floats] = []
    row: list[tuple[float, float]] = []  # left side and height of each box of the row
    x = y = gap_over = 0.0

    def close() -> None:
        foot = y - max(high for _, high in row)
        places.extend(xy(left, foot) for left, _ in row)

    for room, gap in zip(rooms, gaps, strict=True):
        if row and x + room[0] > width:
            close()
            y, x, row, gap_over = y - max(high for _, high in row) - gap_over, 0.0, [], 0.0
        row.append((x, float(room[1])))
        x, gap_over = x + float(room[0]) + gap, max(gap_over, gap)
    close()
    return places


def _apart(size: Floats) -> float:
    return max(_LEAST_APART, _APART * float(size.max()))


def _says(flat: Flat, count: int, size: Floats, wording: Wording) -> str:
    over_all = f"{wording.length(float(size[0]))} x {wording.length_with_unit(float(size[1]))} over all"
    return ", ".join(part for part in (f"{flat.mark}: {count} off", flat.what, over_all) if part)


def tidy(outline: Floats) -> Floats:
    """Return a closed outline (k, 2) without repeated corners, the first not repeated at the end."""
    step = np.abs(outline - np.roll(outline, 1, axis=0)).max(axis=1)
    return np.asarray(outline[step > SAME])


def document(parts: Sequence[Part], fmt: Format) -> Document:
    """Return the DXF document of parts in place, with a note under each and the check line under all."""
    doc = new(fmt, CUT_LAYERS)
    pen = Pen(doc.modelspace(), fmt, CUT_LAYERS)
    for part in parts:
        for outline in part.outlines:
            pen.stroke(Stroke(CUT_LAYERS["CUT"], outline + part.moved, closed=True))
    for part in parts:
        if part.mark is not None:
            _engrave(pen, part, part.mark)
        _say(pen, part.says, part.at - xy(0.0, 1.6 * part.note), part.note)
    _notes(pen, around(*(part.box for part in parts)), parts[0].note)
    return doc


def _engrave(pen: Pen, part: Part, mark: Engraving) -> None:
    """Write a part's mark with its middle at the place found: its foot is half its height under that."""
    down = 0.5 * mark.height * xy(np.sin(mark.angle), -np.cos(mark.angle))
    at = pen.geometry((mark.at + part.moved + down)[None])[0]
    pen.write(
        part.flat.mark, at, mark.height * pen.fmt.factor, CUT_LAYERS["ENGRAVE"], anchor="centre", angle=mark.angle
    )


def _say(pen: Pen, says: str, at: Floats, height: float) -> None:
    pen.write(says, pen.geometry(at[None])[0], height * pen.fmt.factor, CUT_LAYERS["NOTES"])


def _notes(pen: Pen, box: Box, note: float) -> None:
    """Unit and check line under all parts."""
    unit = units.UNITS[pen.fmt.unit].metres
    long = round_length(max(box[2] - box[0], 20 * note) / 2 / unit) * unit
    foot = xy(box[0], box[1] - 8 * note)
    for line in (
        [foot, foot + xy(long, 0)],
        *([end - xy(0, note / 2), end + xy(0, note / 2)] for end in (foot, foot + xy(long, 0))),
    ):
        pen.stroke(Stroke(CUT_LAYERS["NOTES"], np.stack(line)))
    _say(pen, f"UNITS {pen.fmt.unit}    check line {long / unit:g} {pen.fmt.unit}", foot + xy(0, note), note)


OUTPUT = Output("parts", write, verify)
