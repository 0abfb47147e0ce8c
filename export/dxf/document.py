"""A new DXF document: unit, layers, line types, text and dimension styles, all declared before anything is drawn.

Header variables and group codes as in the DXF reference (R12 to R2010): coordinates carry no unit, $INSUNITS only names
it, and R12 has no such variable, so every file says its unit in a note as well.
"""

from __future__ import annotations

import io
import logging
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from export.picture.looks import Colour, Look, dashes
from export.picture.sizes import PAPER
from geom import units

if TYPE_CHECKING:
    from ezdxf.document import Drawing

_COLOURS: Mapping[Colour, int] = {"plain": 7, "warm": 1, "grey": 8}  # 7 is black on white and white on black
_METRIC = frozenset({"mm", "cm", "m"})
# One place of these is 1e-8 m or a little more: far under any tolerance, over the noise of rounding.
_DECIMALS = {"mm": 5, "cm": 6, "m": 8, "in": 6, "ft": 7}
# The file of the font most machines have, or have one of the same widths for (export.picture.text).
_FONT = "arial.ttf"
TEXT_STYLE = "NOTES"
DIMENSION_STYLE = "BUILDING"
# Of the references to the pieces' blocks, whose lines are on their own layers. To freeze it hides the blocks, so it is
# one nobody freezes: the members of a net are the net, and nothing else is on it.
BLOCKS_LAYER = "MEMBERS"
_CHUNK = 1 << 20  # characters handed on at a time


@dataclass(frozen=True)
class Format:
    """What a DXF file is written in: version, unit, and how many of its units one printed millimetre is."""

    version: str  # "R2010" or "R12"
    unit: str
    printed: float = 1.0

    @property
    def factor(self) -> float:
        """Drawing units in a metre: the one place where geometry leaves the metre."""
        return 1 / units.UNITS[self.unit].metres

    @property
    def decimals(self) -> int:
        """Decimals coordinates are rounded to."""
        return _DECIMALS[self.unit]

    @property
    def old(self) -> bool:
        """Whether it is R12: no unit, no light polylines, no line widths."""
        return self.version == "R12"


def new(fmt: Format, layers: Mapping[str, Look]) -> Drawing:
    """Return an empty document with the layers, line types and styles of drawings."""
    from ezdxf.filemanagement import new as new_document

    with _quietly(fmt), _undated():
        doc = new_document(fmt.version, setup=False)
    if not fmt.old:
        doc.header["$INSUNITS"] = units.UNITS[fmt.unit].insunits
        doc.header["$MEASUREMENT"] = int(fmt.unit in _METRIC)
    doc.header["$LTSCALE"] = 1.0
    if not fmt.old:
        doc.header["$PSLTSCALE"] = 0  # dashes are laid out for the print scale already
        doc.header["$LWDISPLAY"] = 1
    doc.header["$LUNITS"] = {"ft": 4, "in": 5}.get(fmt.unit, 2)
    _line_types(doc, fmt, layers)
    for name, look in layers.items():
        doc.layers.add(name, color=_COLOURS[look.colour], linetype=look.linetype, lineweight=look.width)
    doc.styles.add(TEXT_STYLE, font=_FONT)
    doc.header["$TEXTSTYLE"] = TEXT_STYLE
    _dimension_style(doc, fmt)
    return doc


@contextmanager
def _quietly(fmt: Format) -> Iterator[None]:
    """Keep the library from saying on stderr that R12 has no unit: our notes say it."""
    logger = logging.getLogger("ezdxf")
    before = logger.level
    logger.setLevel(logging.ERROR if fmt.old else before)
    try:
        yield
    finally:
        logger.setLevel(before)


@contextmanager
def _undated() -> Iterator[None]:
    """Keep time and chance out of what the library writes."""
    from ezdxf._options import options

    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True
    try:
        yield
    finally:
        options.write_fixed_meta_data_for_testing = before


def _line_types(doc: Drawing, fmt: Format, layers: Mapping[str, Look]) -> None:
    del layers  # every line type in use by any layer or line is defined, whether this file needs it or not
    for name, says in (("DASHED", "_ _ _ _"), ("CENTER", "____ . ____"), ("PHANTOM", "____ . . ____")):
        lengths = [round(length * fmt.printed, fmt.decimals) for length in dashes(name)]  # type: ignore[arg-type]
        total = sum(abs(length) for length in lengths)
        doc.linetypes.add(name, [total, *lengths], description=says)


def _dimension_style(doc: Drawing, fmt: Format) -> None:
    """Oblique strokes, text over the line; sizes as printed, DIMSCALE brings them to the drawing."""
    attributes: dict[str, object] = {
        "dimscale": fmt.printed, "dimtxt": PAPER.note, "dimtsz": PAPER.arrow / 2, "dimasz": PAPER.arrow,
        "dimexo": PAPER.gap, "dimexe": PAPER.overshoot, "dimgap": PAPER.gap * 0.6, "dimdli": PAPER.row,
        "dimtad": 1, "dimtih": 0, "dimtoh": 0, "dimtix": 0, "dimtofl": 1, "dimtmove": 2, "dimupt": 1,
        "dimlfac": 12.0 if fmt.unit == "ft" else 1.0,
        "dimlunit": {"ft": 4, "in": 5}.get(fmt.unit, 2),
        "dimdec": {"mm": 0, "cm": 1, "m": 3}.get(fmt.unit, 4),
        "dimfrac": 2, "dimzin": 1 if fmt.unit == "ft" else 0, "dimpost": '<>"' if fmt.unit == "in" else "",
        "dimclrd": 256, "dimclre": 256, "dimclrt": 256, "dimlwd": -1, "dimlwe": -1, "dimtxsty": TEXT_STYLE,
    }  # fmt: skip
    style = doc.dimstyles.new(DIMENSION_STYLE)
    for name, value in attributes.items():
        if style.dxf.is_supported(name):
            style.dxf.set(name, value)
    style.copy_to_header(doc)
    doc.header["$DIMSTYLE"] = DIMENSION_STYLE


def attributes(look: Look, layers: Mapping[str, Look], fmt: Format) -> dict[str, object]:
    """Return layer, and what differs from the layer's own look, as an entity takes them."""
    found: dict[str, object] = {"layer": look.layer}
    of_layer = layers[look.layer]
    if look.linetype != of_layer.linetype:
        found["linetype"] = look.linetype
    if look.colour != of_layer.colour:
        found["color"] = _COLOURS[look.colour]
    if look.width != of_layer.width and not fmt.old:
        found["lineweight"] = look.width
    return found


def chunks(
    doc: Drawing, box: tuple[float, float, float, float], *, height: tuple[float, float] = (0.0, 0.0)
) -> Iterator[bytes]:
    """Yield the document as bytes, the same for the same content whatever the day or the hash seed.

    `box` and `height` are the extents written into the header, drawing units.
    """
    space = doc.modelspace()
    space.reset_extents((box[0], box[1], height[0]), (box[2], box[3], height[1]))
    space.reset_limits(box[:2], box[2:])
    if doc.dxfversion > "AC1009":
        # the library adds classes in the order of a set, which the hash seed decides
        for name in sorted(doc.entitydb.dxf_types_in_use()):
            doc.classes.add_class(name)
        doc.classes.classes = dict(sorted(doc.classes.classes.items()))
    wide, high = box[2] - box[0], box[3] - box[1]
    if np.isfinite(box).all():
        # opened on the whole drawing, in a window about twice as wide as high
        doc.set_modelspace_vport(1.1 * max(high, wide / 2), ((box[0] + box[2]) / 2, (box[1] + box[3]) / 2))
    stream = io.StringIO()
    with _undated():
        doc.write(stream)
    text = stream.getvalue()
    for start in range(0, len(text), _CHUNK):
        yield doc.encode(text[start : start + _CHUNK])
