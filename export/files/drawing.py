"""The drawing, `drawing.dxf`: elevations true to scale, plan, marks, dimensions, notes."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from export.dxf import checks, dimension
from export.dxf.document import BLOCKS_LAYER, Format, chunks, new
from export.dxf.links import LinkBlocks
from export.dxf.names import Names
from export.dxf.pen import Pen
from export.outputs import Checked, Choices, File, Output
from export.picture.looks import LAYERS
from export.picture.make import picture
from export.picture.values import SITE_PLAN, Box, Group, Panel, Picture, around, box_of, shifted
from export.picture.views import Drawing, links_drawn
from export.picture.wording import Wording
from geom.result import Result

if TYPE_CHECKING:
    from ezdxf.document import Drawing as Document


def write(result: Result, choices: Choices) -> Iterable[File]:
    """Yield the drawing."""
    setting = result.setting.drawing
    name = "drawing.dxf" if setting.version != "R12" else f"drawing-{result.setting.drawing_unit}.dxf"
    made = _Made(result, choices)
    yield File(name, made.chunks(), made.checked)


def verify(path: Path, result: Result, choices: Choices) -> Checked:
    """Read a drawing back in full and check it against the result it was made from."""
    made = _Made(result, choices)
    return checks.read_back(path, made.expected)


class _Made:
    """A drawing on its way into a file: its picture, then its document."""

    def __init__(self, result: Result, choices: Choices) -> None:
        setting = result.setting.drawing
        within = choices.within or setting.within
        self.marks = tuple(piece.mark for piece in result.pieces)
        few = links_drawn(result)
        wording = Wording(result.setting.drawing_unit)
        said = [
            f"Curves are drawn within {wording.fine(within)} of the true ones",
            *([] if few else ["Links are too many to be drawn one by one"]),
        ]
        self.picture = picture(result, Drawing(within, setting.curve == "arcs", few), extra=said)
        unit = result.setting.drawing_unit
        self.fmt = Format(setting.version, unit, self.picture.ratio / 1000 * Format(setting.version, unit).factor)
        self.document: Document | None = None

    @property
    def expected(self) -> checks.Expected:
        """What the file must show when it is read."""
        names = Names(old=self.fmt.old)
        blocks = tuple(names.of(mark) for mark in self.marks)
        return checks.Expected(
            self.fmt, frozenset(LAYERS), blocks, _links(self.picture), _geometry(self.picture, self.fmt)
        )

    def chunks(self) -> Iterator[bytes]:
        """Yield the file's bytes."""
        self.document = document(self.picture, self.fmt)
        yield from chunks(self.document, _extents(self.picture, self.fmt))

    def checked(self) -> Checked:
        """Check the document that was written."""
        assert self.document is not None, "the chunks are taken first"
        return {**checks.check(self.document, self.expected), "scale": self.picture.scale}


def document(drawn: Picture, fmt: Format) -> Document:
    """Return the DXF document of a picture: each piece a block called by its mark, dimensions and notes beside."""
    doc = new(fmt, LAYERS)
    names = Names(old=fmt.old)
    for panel in drawn.panels:  # pieces' own marks first: a further view must not take the name of a piece
        for group in panel.groups:
            names.of(group.mark)
    links = LinkBlocks(doc, fmt, LAYERS)
    for panel in drawn.panels:
        at = _place(drawn, panel.at, fmt)
        for group in panel.groups:
            name = names.of(group.mark, _view(panel, group))
            if name in doc.blocks:  # two views of one name
                name = names.fresh(name)
            _group(doc, group, name, links, Pen(doc.modelspace(), fmt, LAYERS, at))
        space = Pen(doc.modelspace(), fmt, LAYERS, at)
        for placed in panel.dimensions:
            dimension.add(doc, space, placed, panel.per)
        for line in panel.titles:
            space.text(line)
    space = Pen(doc.modelspace(), fmt, LAYERS, _place(drawn, drawn.notes.at, fmt))
    for line in drawn.notes.texts:
        space.text(line)
    for path in drawn.notes.paths:
        space.path(path)
    return doc


def _view(panel: Panel, group: Group) -> str:
    """Which view a block is of, where it is not the piece's first."""
    return "" if panel.name == group.mark else panel.name.removeprefix(group.mark).strip(" $")


def _group(doc: Document, group: Group, name: str, links: LinkBlocks, space: Pen) -> None:
    """Draw a piece in a block of its own and refer to it; what belongs to no piece goes into the space."""
    pen = Pen(doc.blocks.new(name), space.fmt, space.layers) if group.mark else space
    for stroke in group.strokes:
        pen.stroke(stroke)
    for row in group.links:
        links.draw(pen, row)
    for path in group.paths:
        pen.path(path)
    for circle in group.circles:
        pen.circle(circle)
    for text in group.texts:
        pen.text(text)
    if group.mark:
        space.block(name, space.moved, BLOCKS_LAYER)


def _place(drawn: Picture, at: tuple[float, float], fmt: Format) -> tuple[float, float]:
    """Return where a printed point is in the drawing: 0 is the plan's origin, so the site's, else the lower left."""
    plan = next((panel.at for panel in drawn.panels if panel.name == SITE_PLAN), drawn.box[:2])
    x, y = ((at[axis] - plan[axis]) * fmt.printed for axis in (0, 1))
    return round(x, fmt.decimals) + 0.0, round(y, fmt.decimals) + 0.0


def _extents(drawn: Picture, fmt: Format) -> Box:
    left, bottom = _place(drawn, drawn.box[:2], fmt)
    right, top = _place(drawn, drawn.box[2:], fmt)
    return (left, bottom, right, top)


def _geometry(drawn: Picture, fmt: Format) -> Box:
    """Box round the corners of all that is drawn in pieces' blocks."""
    boxes = []
    for panel in drawn.panels:
        at = _place(drawn, panel.at, fmt)
        for group in panel.groups:
            if group.mark:
                strokes = [_times(box_of(stroke.points), fmt.factor) for stroke in group.strokes]
                paths = [_times(box_of(path.points), fmt.printed) for path in group.paths]
                boxes.append(shifted(around(*strokes, *paths), at))
    return around(*boxes)


def _times(box: Box, factor: float) -> Box:
    return (box[0] * factor, box[1] * factor, box[2] * factor, box[3] * factor)


def _links(drawn: Picture) -> int:
    return sum(len(row.places) for panel in drawn.panels for group in panel.groups for row in group.links)


OUTPUT = Output("drawing", write, verify)
