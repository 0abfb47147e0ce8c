"""The model, `model.dxf`: the same pieces in place, in three dimensions, each a block called by its mark."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from export.dxf import checks
from export.dxf.document import BLOCKS_LAYER, Format, chunks, new
from export.dxf.names import Names
from export.dxf.space import SpaceLinks, SpacePen
from export.outputs import Checked, Choices, File, Output
from export.picture.looks import LAYERS, LOOKS, look
from export.picture.panels import labels_of
from export.picture.scale import round_length
from export.picture.values import Box, Floats
from export.picture.views import SAME, lines_of, linked, links_drawn, solids_of
from geom import units
from geom.result import PLAN, Label, Piece, Result
from geom.solids import Balls, Links

if TYPE_CHECKING:
    from ezdxf.document import Drawing as Document

_SYMBOLS = frozenset({"SUPPORTS", "LOADS"})
_TEXT_SHARE = 1 / 120  # of the model's largest extent: the height of its marks
_CHECK_SHARE = 1 / 5  # of the same: at most so long is the check line


def write(result: Result, choices: Choices) -> Iterable[File]:
    """Yield the model."""
    made = _Made(result, choices)
    yield File("model.dxf", made.chunks(), made.checked)


def verify(path: Path, result: Result, choices: Choices) -> Checked:
    """Read a model back in full and check it against the result it was made from."""
    return checks.read_back(path, _Made(result, choices).expected)


@dataclass(frozen=True, eq=False)
class _Drawn:
    """A piece's curves as they are drawn: role, points (n, 3) m, closed; and what is drawn as links."""

    piece: Piece
    lines: tuple[tuple[str, Floats, bool], ...]
    links: tuple[Links | Balls, ...]


class _Made:
    """A model on its way into a file."""

    def __init__(self, result: Result, choices: Choices) -> None:
        setting = result.setting.drawing
        self.result = result
        self.fmt = Format(setting.version, result.setting.drawing_unit)
        within = choices.within or setting.within
        few = links_drawn(result)
        self.drawn = tuple(
            _Drawn(piece, tuple(_lines(piece, within)), tuple(linked(solids_of(piece))) if few else ())
            for piece in result.pieces
        )
        points = [line for one in self.drawn for _, line, _ in one.lines] or [np.zeros((1, 3))]
        self.low = np.min([line.min(axis=0) for line in points], axis=0)
        self.high = np.max([line.max(axis=0) for line in points], axis=0)
        self.document: Document | None = None

    @property
    def extents(self) -> Box:
        """Box round the curves on plan, drawing units."""
        low, high = self.low * self.fmt.factor, self.high * self.fmt.factor
        return (float(low[0]), float(low[1]), float(high[0]), float(high[1]))

    @property
    def expected(self) -> checks.Expected:
        """What the file must show when it is read."""
        names = Names(old=self.fmt.old)
        blocks = tuple(names.of(piece.mark) for piece in self.result.pieces)
        links = sum(len(body.places) for one in self.drawn for body in one.links)
        return checks.Expected(self.fmt, frozenset(LAYERS), blocks, links, self.extents, self.heights, _SYMBOLS)

    @property
    def heights(self) -> tuple[float, float]:
        """Lowest and highest point of the curves, drawing units."""
        return float(self.low[2] * self.fmt.factor), float(self.high[2] * self.fmt.factor)

    def chunks(self) -> Iterator[bytes]:
        """Yield the file's bytes."""
        self.document = self._document()
        yield from chunks(self.document, self.extents, height=self.heights)

    def checked(self) -> Checked:
        """Check the document that was written."""
        assert self.document is not None, "the chunks are taken first"
        return checks.check(self.document, self.expected)

    def _document(self) -> Document:
        doc = new(self.fmt, LAYERS)
        names = Names(old=self.fmt.old)
        largest = float((self.high - self.low).max()) or 1.0
        links = SpaceLinks(doc, self.fmt, LAYERS)
        for one in self.drawn:
            name = names.of(one.piece.mark)
            pen = SpacePen(doc.blocks.new(name), self.fmt, LAYERS)
            _piece(pen, one, links, _TEXT_SHARE * largest)
            doc.modelspace().add_blockref(name, (0.0, 0.0, 0.0), {"layer": BLOCKS_LAYER})
        _notes(SpacePen(doc.modelspace(), self.fmt, LAYERS), self.low, largest)
        return doc


def _lines(piece: Piece, within: float) -> Iterator[tuple[str, Floats, bool]]:
    """The curves of a piece, each once, as points (n, 3) without repeats."""
    known: set[tuple[str, bytes]] = set()
    for line in lines_of(piece):
        points = line.curve.points(within)
        new = np.abs(np.diff(points, axis=0)).max(axis=1) > SAME
        points = points[np.concatenate([[True], new])]
        grid = np.round(points / SAME).astype(np.int64)
        keys = {(line.role, grid.tobytes()), (line.role, grid[::-1].tobytes())}
        if len(points) > 1 and known.isdisjoint(keys):
            known |= keys
            closed = line.curve.closed and len(points) > 3
            yield line.role, points[:-1] if closed else points, closed


def _piece(pen: SpacePen, one: _Drawn, links: SpaceLinks, height: float) -> None:
    thick = any(role in ("intrados", "extrados") for role, _, _ in one.lines)
    for role, points, closed in one.lines:
        pen.line(points, look(role, thick=thick), closed=closed)
    for body in one.links:
        links.draw(pen, body)
    for label in labels_of(one.piece):
        _label(pen, label, one.piece, height)


def _label(pen: SpacePen, label: Label, piece: Piece, height: float) -> None:
    match label.role:
        case "support" | "held point":
            pen.cross(label.at, height, LOOKS["support"])
        case "load":
            drop = np.array([0.0, 0.0, label.reach or 2 * height])
            pen.line(np.stack([label.at, label.at - drop]), LOOKS["load"])
        case "node":
            pen.point(label.at, LOOKS["node"])
    frame = piece.frame
    beside = label.at + 0.6 * height * (frame.along + frame.up)
    pen.text(label.text, beside, height, frame, LOOKS["mark"])


def _notes(pen: SpacePen, low: Floats, largest: float) -> None:
    """Unit and check line, flat in front of the model."""
    height, unit = _TEXT_SHARE * largest, units.UNITS[pen.fmt.unit].metres
    long = round_length(_CHECK_SHARE * largest / unit) * unit
    at = low - np.array([0.0, 8 * height, 0.0])
    ends = np.stack([at, at + np.array([long, 0.0, 0.0])])
    pen.line(ends, LOOKS["note"])
    up = np.array([0.0, height, 0.0])
    for end in ends:
        pen.line(np.stack([end - up / 2, end + up / 2]), LOOKS["note"])
    pen.text(f"check line {long / unit:g} {pen.fmt.unit}", at + up, height, PLAN, LOOKS["note"])
    pen.text(f"UNITS {pen.fmt.unit}", at + 3 * up, height, PLAN, LOOKS["note"])


OUTPUT = Output("model", write, verify)
