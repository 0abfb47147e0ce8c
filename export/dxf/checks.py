"""What is checked of a DXF file, while it is made and when it is read back."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from export.dxf.document import Format
from export.outputs import Checked, CheckFailed
from export.picture.values import NOTHING, Box, around, box_of
from geom import units

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.entities.dxfentity import DXFEntity
    from ezdxf.layouts.base import BaseLayout

_PLACES = (
    2.0  # how many units of the last place a corner may be off: two roundings, of the point and of its block's place
)


@dataclass(frozen=True)
class Expected:
    """What a file must hold: blocks referred to once, how many links, extents of the geometry (drawing units)."""

    fmt: Format
    layers: frozenset[str]
    blocks: tuple[str, ...]
    links: int
    extents: Box


def read_back(path: Path, expected: Expected) -> Checked:
    """Read a file in full and check it.

    Raises
    ------
    CheckFailed
        On the first thing that is wrong.
    """
    from ezdxf.filemanagement import readfile
    from ezdxf.lldxf.const import DXFError

    try:
        doc = readfile(path)
    except (DXFError, OSError) as error:
        raise CheckFailed(f"{path.name} cannot be read back: {error}") from error
    return check(doc, expected)


def check(doc: Drawing, expected: Expected) -> Checked:
    """Check a document and return what was checked.

    Raises
    ------
    CheckFailed
        On the first thing that is wrong.
    """
    errors = len(doc.audit().errors)
    _same("errors found by the audit", 0, errors)
    if not expected.fmt.old:
        _same("$INSUNITS", units.UNITS[expected.fmt.unit].insunits, doc.header["$INSUNITS"])
    space = list(doc.modelspace())
    stray = {entity.dxf.layer for entity in _all(doc)} - expected.layers
    _same("layers beside those declared", set(), stray)
    counts = Counter(entity.dxf.name for entity in space if entity.dxftype() == "INSERT")
    for name in expected.blocks:
        _same(f"references to block {name!r}", 1, counts[name])
    inside = (entity for block in doc.blocks if not block.is_any_layout for entity in block)
    links = sum(1 for entity in inside if entity.dxftype() == "INSERT")
    _same("links", expected.links, links)
    extents = geometry(doc)
    _near(expected, extents)
    return {
        "audit_errors": errors,
        "unit": expected.fmt.unit,
        "entities": len(space),
        "pieces": len(expected.blocks),
        "links": links,
        "extents": [round(value, expected.fmt.decimals) for value in extents],
    }


def geometry(doc: Drawing) -> Box:
    """Return the box round the corners of all lines in blocks, where their references put them, drawing units."""
    boxes = []
    for entity in doc.modelspace():
        if entity.dxftype() == "INSERT":
            x, y, _ = entity.dxf.insert
            left, bottom, right, top = corners(doc.blocks.get(entity.dxf.name))
            boxes.append((left + x, bottom + y, right + x, top + y))
    return around(*boxes) if boxes else NOTHING


def corners(layout: BaseLayout) -> Box:
    """Return the box round the corners of all lines of a block."""
    found = [points for entity in layout if len(points := _points(entity))]
    return box_of(np.concatenate(found)) if found else NOTHING


def _points(entity: DXFEntity) -> np.ndarray:
    match entity.dxftype():
        case "LINE":
            return np.array([entity.dxf.start.vec2, entity.dxf.end.vec2])
        case "LWPOLYLINE":
            return np.asarray(entity.lwpoints.values)[:, :2]  # type: ignore[attr-defined]
        case "POLYLINE":
            return np.array([vertex.vec2 for vertex in entity.points()])  # type: ignore[attr-defined]
    return np.empty((0, 2))


def _all(doc: Drawing) -> Iterator[DXFEntity]:
    """All entities of the model space and of every block that is no paper space."""
    for block in doc.blocks:
        if not block.is_any_paperspace:
            yield from block


def _same(what: str, expected: object, found: object) -> None:
    if expected != found:
        raise CheckFailed(f"{what}: expected {expected}, found {found}")


def _near(expected: Expected, found: Box) -> None:
    apart = _PLACES * 10.0**-expected.fmt.decimals
    if not np.allclose(expected.extents, found, rtol=1e-12, atol=apart):
        raise CheckFailed(f"extents: expected {expected.extents}, found {found}")
