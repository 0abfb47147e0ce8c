"""Reading an STL file back: whether it is whole, closed and the right way out.

Closed and consistently wound means that every edge is run along as often in one direction as in the other: the
surface has no boundary. The sum over all facets of

    h(u, v) - h(v, u)      for the facet's edges u -> v

with h a 64-bit hash of the two ends' coordinates is then 0 modulo 2^64, and for any other file it is not, but by
a chance of 2^-64. The sum does not ask for the order of the facets, so that a file of any size is checked in one
pass with no table of its edges (the method of fingerprints: Blum, Evans, Gemmell, Kannan and Naor, "Checking the
correctness of memories", 1994).
"""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from export.stl import COUNT, FACET, HEADER
from geom.solids import Mesh

_FACETS_A_READ = 1 << 13  # 400 kB, which with its working copies stays in the processor's cache
# Of the surface: rounding to float32 turns the thinnest slivers of a cut solid over, which no printer sees.
_SLIVERS = 1e-6

Words = NDArray[np.uint64]


@dataclass(frozen=True)
class StlReport:
    """What was found in an STL file, in its own unit (ours are in mm)."""

    facets: int
    size: int  # bytes of the file
    closed: bool  # no edge without its opposite
    volume: float  # mm3; negative when inside out
    area: float  # mm2
    low: tuple[float, float, float]  # mm
    high: tuple[float, float, float]  # mm
    degenerate: int  # facets with two corners in one place
    misdirected: float  # mm2, area of facets whose stated normal is against their winding

    @property
    def problems(self) -> tuple[str, ...]:
        """What is wrong with it; empty when it can be printed."""
        wanted = expected_size(self.facets)
        found = (
            (self.facets == 0, "it has no facets"),
            (self.size != wanted, f"it has {self.size} bytes and should have {wanted}"),
            (not self.closed, "its surface is not closed"),
            (not self.volume > 0, f"its volume is {self.volume:g} mm3"),
            (self.misdirected > _SLIVERS * self.area, f"normals of {self.misdirected:g} mm2 point inwards"),
        )
        return tuple(text for wrong, text in found if wrong)


def expected_size(facets: int) -> int:
    """Bytes of an STL file of so many facets."""
    return HEADER + COUNT.itemsize + FACET.itemsize * facets


def read_stl(path: Path) -> Mesh:
    """Read an STL file, corners of the same coordinates made one; mm as in the file.

    Raises
    ------
    ValueError
        If it is no whole binary STL file.
    """
    records = np.concatenate([np.zeros(0, FACET), *_facets(path)])
    corners = records["corners"].reshape(-1, 3) + np.float32(0)  # -0 becomes 0
    vertices, rows = np.unique(corners, axis=0, return_inverse=True)
    return Mesh(vertices.astype(np.float64), rows.reshape(-1, 3))


def verify_stl(path: Path) -> StlReport:
    """Read a whole STL file back and report on it.

    Parameters
    ----------
    path : Path
        The file.

    Raises
    ------
    ValueError
        If it is too short for the facets it announces, or has bytes after them, or a coordinate is not finite.
    """
    edges = np.zeros(1, np.uint64)  # an array, since sums of arrays wrap without a word
    sums = np.zeros(4)
    low, high = np.full(3, np.inf), np.full(3, -np.inf)
    for records in _facets(path):
        # Corner, axis, facet: long rows of one coordinate are several times faster than triples.
        corners = np.ascontiguousarray(records["corners"].transpose(1, 2, 0)) + np.float32(0)  # -0 becomes 0
        low, high = np.minimum(low, corners.min(axis=(0, 2))), np.maximum(high, corners.max(axis=(0, 2)))
        edges += _open_edges(corners)
        sums += _sums(corners.astype(np.float64), records["normal"].T)
    if not np.isfinite([low, high]).all() and _announced(path):
        raise ValueError(f"{path.name}: a coordinate is not a number")
    volume, area, degenerate, misdirected = sums.tolist()
    return StlReport(
        facets=_announced(path),
        size=path.stat().st_size,
        closed=not edges.any(),
        volume=volume,
        area=area,
        low=_point(low),
        high=_point(high),
        degenerate=round(degenerate),
        misdirected=misdirected,
    )


def _point(values: NDArray[np.float64]) -> tuple[float, float, float]:
    x, y, z = values.tolist()
    return x, y, z


def _announced(path: Path) -> int:
    head = np.fromfile(path, np.uint8, count=HEADER + COUNT.itemsize)
    if len(head) < HEADER + COUNT.itemsize:
        raise ValueError(f"{path.name}: too short for an STL file")
    return int(head[HEADER:].view(COUNT)[0])


def _facets(path: Path) -> Iterator[NDArray[np.void]]:
    """Records of the file, some at a time."""
    count, size = _announced(path), path.stat().st_size
    if size != expected_size(count):
        raise ValueError(f"{path.name}: {size} bytes, but {count} facets are {expected_size(count)}")
    with path.open("rb") as file:
        file.seek(HEADER + COUNT.itemsize)
        for start in range(0, count, _FACETS_A_READ):
            yield np.fromfile(file, FACET, count=min(_FACETS_A_READ, count - start))


def _sums(corners: NDArray[np.float64], normals: NDArray[np.float32]) -> NDArray[np.float64]:
    """Volume, area, number of facets without three corners apart, area of facets wound against their normal."""
    a, b, c = corners
    (x1, y1, z1), (x2, y2, z2) = b - a, c - a
    cross = np.stack([y1 * z2 - z1 * y2, z1 * x2 - x1 * z2, x1 * y2 - y1 * x2])
    same = (a == b).all(axis=0) | (b == c).all(axis=0) | (c == a).all(axis=0)
    areas = np.sqrt((cross * cross).sum(axis=0)) / 2
    against = areas[(cross * normals).sum(axis=0) < 0]
    return np.array([(a * cross).sum() / 6, areas.sum(), same.sum(), against.sum()])


def _open_edges(corners: NDArray[np.float32]) -> Words:
    """Sum of h(u, v) - h(v, u) over the facets' edges, modulo 2^64, for corners (3, 3, n)."""
    x, y, z = corners.view(np.uint32).astype(np.uint64).transpose(1, 0, 2)
    # A corner's three words in one: odd factors lose no bit, mixing lets each bit move all.
    start = _mixed(_mixed(x + y * _ODD[0]) + z * _ODD[1])
    end = np.roll(start, -1, axis=0)
    return np.asarray((_mixed(start * _ODD[2] + end) - _mixed(end * _ODD[2] + start)).sum(dtype=np.uint64))


# Odd factors from the golden ratio, sqrt 2 and sqrt 3: 2^64 times their fractions, made odd.
_ODD = np.array([0x9E3779B97F4A7C15, 0x6A09E667F3BCC909, 0xBB67AE8584CAA73B], dtype=np.uint64)


def _mixed(words: Words) -> Words:
    """Mix 64-bit words one to one (the finaliser of Steele, Lea and Flood's SplitMix generator, 2014)."""
    words = words ^ (words >> np.uint64(30))
    words = words * np.uint64(0xBF58476D1CE4E5B9)
    words = words ^ (words >> np.uint64(27))
    words = words * np.uint64(0x94D049BB133111EB)
    return words ^ (words >> np.uint64(31))
