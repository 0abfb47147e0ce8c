"""Cross-sections: round ones by their radius, any other as a polygon."""

import numpy as np

from geom.curves.base import Array, fixed, positive

Section = float | Array  # a radius, m, or a polygon (k, 2) m: x to the level side, y upwards

_FEWEST = 8  # sides of a round section: with fewer it reads as a nut


def checked(section: Section, *, name: str) -> Section:
    """Return a section with its polygon anticlockwise and read-only.

    Raises
    ------
    ValueError
        If a radius is not positive or a polygon is no polygon.
    """
    if np.ndim(section) == 0:
        return positive(float(section), name=name)
    outline = fixed(section, None, 2, name=name)
    turned = _shoelace(outline)
    if len(outline) < 3 or turned == 0:
        raise ValueError(f"{name} must be a polygon with an area")
    return outline if turned > 0 else fixed(outline[::-1], None, 2, name=name)


def checked_hole(hole: Section | None, section: Section) -> Section | None:
    """Return the hole of a section, checked like it.

    Raises
    ------
    ValueError
        If it is of another kind than the section, has another number of corners, or is as large.
    """
    if hole is None:
        return None
    hole = checked(hole, name="hole")
    if np.shape(hole) != np.shape(section):
        raise ValueError("the hole must be round in a round section, else have as many corners")
    if area(hole) >= area(section):
        raise ValueError("the hole must be smaller than the section")
    return hole


def area(section: Section) -> float:
    """True area of a section, m2."""
    if isinstance(section, np.ndarray):
        return abs(_shoelace(section))
    return float(np.pi * section**2)


def round_sides(radius: float, within: float) -> int:
    """How many sides a round section gets: a multiple of four.

    The sagitta of m sides is r (1 - cos(pi/m)) = 2 r sin^2(pi/2m).
    """
    ratio = min(1.0, positive(within, name="within") / (2 * radius))
    sides = np.pi / (2 * np.arcsin(np.sqrt(ratio)))
    return int(4 * np.ceil(max(sides, _FEWEST) / 4 - 1e-9))


def outline(section: Section, sides: int) -> Array:
    """Polygon of a section, (k, 2) m, anticlockwise.

    A round section of m sides has the radius r sqrt(2 pi / (m sin(2 pi/m))), with which the area
    (m/2) r^2 sin(2 pi/m) is pi r^2. Its sides, not its corners, face along both axes.
    """
    if isinstance(section, np.ndarray):
        return section
    angle = (np.arange(sides) + 0.5) * 2 * np.pi / sides
    radius = section * np.sqrt(2 * np.pi / (sides * np.sin(2 * np.pi / sides)))
    return np.asarray(radius * np.stack([np.cos(angle), np.sin(angle)], axis=1))


def polygons(section: Section, hole: Section | None, within: float) -> tuple[Array, ...]:
    """Polygon of a section and, where there is one, of its hole, with as many corners."""
    sides = 0 if isinstance(section, np.ndarray) else round_sides(section, within)
    solid = (outline(section, sides),)
    return solid if hole is None else (*solid, outline(hole, sides))


def _shoelace(outline: Array) -> float:
    x, y = (outline - outline[0]).T
    return float(x @ np.roll(y, -1) - y @ np.roll(x, -1)) / 2
