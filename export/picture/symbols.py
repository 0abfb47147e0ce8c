"""Small symbols of fixed printed size: supports, held points, loads, the ground."""

import numpy as np

from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.values import Circle, Floats, Path, xy

_MOST_STROKES = 400  # of the hatching of one line of ground: enough for two metres of paper


def support(at: Floats, sizes: Sizes, *, above: bool) -> list[Path]:
    """Return a support at a printed point (2,): a triangle with its tip there and ground hatching behind its base.

    What hangs is held from `above`, where the member does not run; what stands is carried from below.
    """
    size = sizes.symbol
    way = 1.0 if above else -1.0
    half = size * 0.55
    base = at + np.array([[-half, way * size], [half, way * size]])
    ground = base + np.array([[-0.25 * size, 0], [0.25 * size, 0]])
    return [
        Path(LOOKS["held point"], np.stack([at, *base]), closed=True),
        Path(LOOKS["support"], ground),
        *_strokes(ground, way * size * 0.35, size * 0.4, "hatching"),
    ]


def held_point(at: Floats, sizes: Sizes, *, share: float = 1.0) -> list[Path]:
    """Return the cross of a held point on plan, at a share of its size where many stand close together."""
    arm = sizes.symbol * 0.4 * share
    return [
        Path(LOOKS["held point"], at + np.array([[-arm, -arm], [arm, arm]])),
        Path(LOOKS["held point"], at + np.array([[-arm, arm], [arm, -arm]])),
    ]


def bob(tip: Floats, sizes: Sizes) -> list[Path]:
    """Return the bob of a plumb line that reaches down to `tip`."""
    high, half = sizes.arrow, sizes.arrow * 0.35
    drop = np.array([[0, 0], [half, 0.65 * high], [half * 0.6, high], [-half * 0.6, high], [-half, 0.65 * high]])
    return [Path(LOOKS["load"], tip + drop, closed=True)]


def load_arrow(at: Floats, sizes: Sizes, *, above: bool) -> list[Path]:
    """Return an arrow downwards for a load: hung under its point, or standing on it."""
    long, head = 3.2 * sizes.arrow, sizes.arrow
    tip = at if above else at + xy(0.0, -long)
    return [
        Path(LOOKS["load"], np.stack([tip + xy(0.0, long), tip])),
        Path(LOOKS["load"], tip + np.array([[-0.3 * head, head], [0, 0], [0.3 * head, head]])),
    ]


def dot(at: Floats, sizes: Sizes, role: str) -> Circle:
    """Return a small circle at a printed point."""
    return Circle(LOOKS[role], (float(at[0]), float(at[1])), 0.3 * sizes.gap)


def ground_hatching(points: Floats, sizes: Sizes) -> list[Path]:
    """Return the hatching under a line of ground through printed points (n, 2)."""
    if points[0, 0] > points[-1, 0]:
        points = points[::-1]
    return _strokes(points, -0.6 * sizes.symbol, 1.2 * sizes.symbol, "ground hatching")


def north(at: Floats, sizes: Sizes) -> list[Path]:
    """Return an arrow up the sheet, its foot at a printed point."""
    high, half = 2.4 * sizes.title, 0.25 * sizes.title
    tip = at + xy(0.0, high)
    return [
        Path(LOOKS["note"], np.stack([at, tip])),
        Path(LOOKS["note"], tip + np.array([[-half, -2 * half], [0, 0], [half, -2 * half]])),
    ]


def _strokes(line: Floats, drop: float, apart: float, role: str) -> list[Path]:
    """Short strokes at 45 degrees from a line, `drop` up or down."""
    reach = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(line, axis=0).T))])
    count = min(_MOST_STROKES, max(2, round(reach[-1] / apart)))
    at = (np.arange(count) + 0.5) / count * reach[-1]
    tops = np.stack([np.interp(at, reach, line[:, 0]), np.interp(at, reach, line[:, 1])], axis=1)
    feet = tops + xy(drop, drop)
    return [Path(LOOKS[role], np.stack([top, foot])) for top, foot in zip(tops, feet, strict=True)]
