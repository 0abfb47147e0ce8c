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
from export.picture.values import NOTHING, Box, Floats
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
    heights: tuple[float, float] | None = None  # lowest and highest point, of what has three dimensions
    symbols: frozenset[str] = frozenset()  # layers whose lines are no geometry


def read_back(path: Path, expected: Expected) -> Checked:
    """Read a file in full and check it.

    Raises
    ------
    CheckFailed
        On the first thing that is wrong.
    """
    return check(opened(path), expected)


def opened(path: Path) -> Drawing:
    """Return a file as it is read in full.

    Raises
    ------
    CheckFailed
        If it cannot be read.
    """
    from ezdxf.filemanagement import readfile
    from ezdxf.lldxf.const import DXFError

    try:
        return readfile(path)
    except (DXFError, OSError) as error:
        raise CheckFailed(f"{path.name} cannot be read back: {error}") from error


def audit(doc: Drawing, fmt: Format) -> int:
    """Return the number of errors the library's audit finds: none, and the unit is the one it should be.

    Raises
    ------
    CheckFailed
        If there are any, or the unit is another.
    """
    errors = len(doc.audit().errors)
    same("errors found by the audit", 0, errors)
    if not fmt.old:
        same("$INSUNITS", units.UNITS[fmt.unit].insunits, doc.header["$INSUNITS"])
    return errors


def check(doc: Drawing, expected: Expected) -> Checked:
    """Check a document and return what was checked.

    Raises
    ------
    CheckFailed
        On the first thing that is wrong.
    """
    errors = audit(doc, expected.fmt)
    space = list(doc.modelspace())
    stray = {entity.dxf.layer for entity in _all(doc)} - expected.layers
    same("layers beside those declared", set(), stray)
    counts = Counter(entity.dxf.name for entity in space if entity.dxftype() == "INSERT")
    for name in expected.blocks:
        same(f"references to block {name!r}", 1, counts[name])
    inside = (entity for block in doc.blocks if not block.is_any_layout for entity in block)
    links = sum(1 for entity in inside if entity.dxftype() == "INSERT")
    same("links", expected.links, links)
    extents = geometry(doc, expected.symbols)
    _near(expected, (*expected.extents, *(expected.heights or (0.0, 0.0))), extents)
    return {
        "audit_errors": errors,
        "unit": expected.fmt.unit,
        "entities": len(space),
        "pieces": len(expected.blocks),
        "links": links,
        "extents": _rounded(extents if expected.heights else extents[:4], expected.fmt.decimals),
    }


def _rounded(extents: tuple[float, ...], decimals: int) -> list[float] | None:
    return [round(value, decimals) for value in extents] if np.isfinite(extents).all() else None


def geometry(doc: Drawing, symbols: frozenset[str] = frozenset()) -> tuple[float, ...]:
    """Return left, bottom, right, top, lowest, highest of the corners of all lines in blocks, where they are put.

    Lines on layers of `symbols` are left out.
    """
    found = [
        corners(doc.blocks.get(entity.dxf.name), symbols) + np.array(entity.dxf.insert)
        for entity in doc.modelspace()
        if entity.dxftype() == "INSERT"
    ]
    points = np.concatenate([np.zeros((0, 3)), *found])
    if not len(points):
        return (*NOTHING, 0.0, 0.0)
    low, high = points.min(axis=0), points.max(axis=0)
    return tuple(float(value) for value in (low[0], low[1], high[0], high[1], low[2], high[2]))


def corners(layout: BaseLayout, symbols: frozenset[str] = frozenset()) -> Floats:
    """Return the corners (n, 3) of all lines of a block, those of points and links not."""
    found = [points for entity in layout if entity.dxf.layer not in symbols and len(points := _points(entity))]
    return np.concatenate(found) if found else np.zeros((0, 3))


def _points(entity: DXFEntity) -> Floats:
    match entity.dxftype():
        case "LINE":
            return np.array([entity.dxf.start, entity.dxf.end])
        case "LWPOLYLINE":
            flat = np.asarray(entity.lwpoints.values)[:, :2]  # type: ignore[attr-defined]
            return np.pad(flat, ((0, 0), (0, 1)))
        case "POLYLINE":
            return np.array(list(entity.points()))  # type: ignore[attr-defined]
    return np.empty((0, 3))


def _all(doc: Drawing) -> Iterator[DXFEntity]:
    """All entities of the model space and of every block that is no paper space."""
    for block in doc.blocks:
        if not block.is_any_paperspace:
            yield from block


def same(what: str, expected: object, found: object) -> None:
    """Check that something found is what was expected.

    Raises
    ------
    CheckFailed
        If it is not.
    """
    if expected != found:
        raise CheckFailed(f"{what}: expected {expected}, found {found}")


def _near(expected: Expected, wanted: tuple[float, ...], found: tuple[float, ...]) -> None:
    apart = _PLACES * 10.0**-expected.fmt.decimals
    if not np.allclose(wanted, found, rtol=1e-12, atol=apart):
        raise CheckFailed(f"extents: expected {wanted}, found {found}")
