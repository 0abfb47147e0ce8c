"""The links of a chain."""

from dataclasses import dataclass, replace
from typing import Self

import numpy as np

from geom.curves.base import Array, Value, fixed, positive
from geom.solids.copies import Copies
from geom.solids.mesh import Mesh
from geom.solids.section import outline, round_sides
from geom.solids.skin import closed_skin

_FEWEST_BENDS = 5  # chords of a link's half circle: with fewer its crown reads as a corner
_ROUND = 1e-9  # straights shorter than this share of the width are rounding: the link is a ring
_APART = 1e-3  # of the wire, between neighbours that would touch: over the rounding of a file's float32


@dataclass(frozen=True, eq=False)
class Link(Value):
    """A link of round wire: two half circles joined by straights.

    Raises
    ------
    ValueError
        If the sizes make no such link.
    """

    wire: float  # m, diameter d
    pitch: float  # m, inside length p
    width: float  # m, outside width b

    def __post_init__(self) -> None:
        for name in ("wire", "pitch", "width"):
            self._set(**{name: positive(getattr(self, name), name=name)})
        if self.width <= 2 * self.wire:
            raise ValueError(f"a link {self.width} m wide of wire {self.wire} m thick has no opening")
        if self._straight < -_ROUND * self.width:
            raise ValueError("a link must be as long inside as it is wide inside, or longer")

    @property
    def centreline(self) -> float:
        """Length of the wire, m: two half circles of the radius (b - d)/2 and two straights p + 2d - b."""
        return np.pi * (self.width - self.wire) + 2 * self._straight

    @property
    def volume(self) -> float:
        """Volume of the wire, m3: its section times its centreline (Pappus)."""
        return np.pi / 4 * self.wire**2 * self.centreline

    def scaled(self, factor: float) -> Self:
        """Return the link scaled."""
        return type(self)(self.wire * factor, self.pitch * factor, self.width * factor)

    def thickened(self, wire: float) -> Self:
        """Return the link of wire of another diameter, m, bent along the same centreline."""
        more = wire - self.wire
        return type(self)(wire, self.pitch - more, self.width + more)

    def mesh(self, within: float) -> Mesh:
        """Surface about the link's own centre: x along the chain, y across its opening, z square to it.

        Section and centreline are polygons of the true area and length, so the volume is true; and the inside of
        the crown, where the neighbour bears, is a flat of the true place.
        """
        sides, bends = self._counts(within)
        section = outline(self.wire / 2, sides)
        line = self._line(bends, section[:, 0].max())
        edges = np.diff(line, axis=0)
        ways = edges / np.linalg.norm(edges, axis=1, keepdims=True)
        return closed_skin(line, ways, np.tile([0.0, 0.0, 1.0], (len(ways), 1)), None, (section,))

    def facets(self, within: float) -> int:
        """How many triangles the mesh has."""
        sides, bends = self._counts(within)
        return 4 * (bends + 1) * sides

    @property
    def _straight(self) -> float:
        return self.pitch + 2 * self.wire - self.width

    def _counts(self, within: float) -> tuple[int, int]:
        """Sides of the wire's section and chords of each half circle.

        The chords are odd, so that a flat lies across each crown. The neighbour's flat must be the shorter one,
        or its corners would cut into the crown: (R - r) tan(pi/2n) >= r sin(pi/m).
        """
        bends = max(_FEWEST_BENDS, 2 * (round_sides(self.width / 2, within) // 4) + 1)
        flat = (self.width / 2 - self.wire) * np.tan(np.pi / (2 * bends)) / (self.wire / 2)
        needed = np.pi / np.arcsin(min(1.0, flat))
        return max(round_sides(self.wire / 2, within), int(4 * np.ceil(needed / 4))), bends

    def _line(self, bends: int, inside: float) -> Array:
        """Polygon of the centreline, anticlockwise, the first corner again at the end, (n, 3) m.

        Half circles of n chords with the corners at the radius R', v = pi/2n, and straights s. The length is
        true, and the crown's flat lies the section's inside distance i outside half the pitch:

            4 n R' sin v + 2 s = L,    s/2 + R' cos v = p/2 + i = K
            so  R' = (L - 4 K) / (4 (n sin v - cos v)),  s = 2 (K - R' cos v)
        """
        v = np.pi / (2 * bends)
        crown = self.pitch / 2 + inside + _APART * self.wire
        radius = (self.centreline - 4 * crown) / (4 * (bends * np.sin(v) - np.cos(v)))
        angle = np.linspace(-np.pi / 2, np.pi / 2, bends + 1)
        half = radius * np.stack([np.cos(angle), np.sin(angle), np.zeros(bends + 1)], axis=1)
        half[:, 0] += crown - radius * np.cos(v)
        return np.concatenate([half, -half, half[:1]])


@dataclass(frozen=True, eq=False)
class Links(Copies):
    """Links of one kind in their places (see `link_frames`)."""

    places: Array  # (n, 3) m, centres
    turns: Array  # (n, 3, 3); columns: the links' x, y and z axes
    link: Link

    def __post_init__(self) -> None:
        places = fixed(self.places, None, 3, name="places")
        self._set(places=places, turns=fixed(self.turns, len(places), 3, 3, name="turns"))

    @property
    def volume(self) -> float:
        """Volume of all links, m3."""
        return len(self.places) * self.link.volume

    def facets(self, within: float) -> int:
        """How many triangles all links have."""
        return len(self.places) * self.link.facets(within)

    def scaled(self, factor: float) -> Self:
        """Return the links scaled about the origin."""
        return replace(self, places=self.places * factor, link=self.link.scaled(factor))

    def template(self, within: float) -> Mesh:
        """Surface of one link about its own centre."""
        return self.link.mesh(within)

    def axes(self) -> Array:
        """Turns of the copies, (n, 3, 3)."""
        return self.turns
