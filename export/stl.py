"""Binary STL: written as a stream.

An 80-byte header that does not begin with "solid", the number of facets (uint32), and for each facet the outward
normal and three corners (float32) and an unused uint16; little-endian, anticlockwise seen from outside, no unit
(StereoLithography Interface Specification, 1989). Ours are in millimetres from a stated origin: float32 holds
seven digits, 1 um at 10 m. Reading back is in `export.stl_check`.
"""

from collections.abc import Iterable, Iterator

import numpy as np
from numpy.typing import NDArray

from geom.solids import Facets, Mesh, Solid

HEADER = 80
COUNT = np.dtype("<u4")
FACET = np.dtype([("normal", "<f4", 3), ("corners", "<f4", (3, 3)), ("unused", "<u2")])
# The same 50 bytes with the twelve numbers in one piece, which copies four times faster.
_RECORD = np.dtype([("numbers", "V48"), ("unused", "<u2")])
_MM = 1000.0


def solid_origin(solid: Solid, within: float) -> NDArray[np.float64]:
    """Point a solid's coordinates are taken from, (3,) m: its own, else the low corner of its box.

    Parameters
    ----------
    solid : Solid
        The solid.
    within : float
        Chord tolerance, m, of the facets the box is put round.

    Returns
    -------
    ndarray, shape (3,)
        Rounded down to a millimetre where it is the box's, so that the figures state it exactly.
    """
    if solid.origin is not None:
        return solid.origin
    low, _ = solid.body.extents(within)
    return np.asarray(np.floor(low * _MM) / _MM)


def solid_stl(solid: Solid, within: float, *, origin: NDArray[np.float64] | None = None) -> Iterator[bytes]:
    """Bytes of the STL file of a solid, in millimetres from its origin.

    Parameters
    ----------
    solid : Solid
        The solid, m.
    within : float
        Greatest distance of a drawn line from the true one, m.
    origin : ndarray, shape (3,), optional
        Where the file's zero is, m; that of `solid_origin` where not given.
    """
    if origin is None:
        origin = solid_origin(solid, within)
    body = solid.body.moved(-origin).scaled(_MM)
    return binary_stl(body.chunks(within * _MM), body.facets(within * _MM), name=solid.mark)


def mesh_stl(mesh: Mesh, *, name: str) -> Iterator[bytes]:
    """Bytes of the STL file of a mesh that is in millimetres already."""
    return binary_stl(mesh.chunks(), len(mesh.faces), name=name)


def binary_stl(chunks: Iterable[Facets], count: int, *, name: str) -> Iterator[bytes]:
    """Bytes of an STL file, a chunk of facets at a time.

    Parameters
    ----------
    chunks : iterable of ndarray, shape (k, 4, 3)
        Unit normal and corners of the facets, mm.
    count : int
        How many facets the chunks hold together: the file states it before them.
    name : str
        Goes into the header, which states the unit as well.

    Raises
    ------
    ValueError
        If the chunks hold another number of facets.
    """
    # Readers take a file that begins with "solid" for the text form.
    header = f"STL mm {name}".encode("ascii", "replace")[:HEADER].ljust(HEADER)
    yield header + np.array(count, COUNT).tobytes()
    written = 0
    for facets in chunks:
        written += len(facets)
        yield _records(facets)
    if written != count:
        raise ValueError(f"{written} facets were written and {count} announced")


def _records(facets: Facets) -> bytes:
    records = np.zeros(len(facets), _RECORD)
    numbers = np.ascontiguousarray(facets, dtype="<f4").reshape(-1, 12)
    records["numbers"] = numbers.view("V48")[:, 0]
    return records.tobytes()
