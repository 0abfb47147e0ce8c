"""The ring of an arch: intrados, axis and extrados as parallels of one shape, with thickness and feet.

The elevation has the ``from`` springing of the face line at (0, 0), x along the span, z upward, in metres.

A level foot is the horizontal plane through the springing of the face line: every line of the ring runs on, or stops,
where it meets that plane. A radial foot is the normal through the springing.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from geom.arch.fit import KEYS, Fact, Family, Fit, Folds, fit
from geom.arch.parallel import Parallel, arc_moments, straight_moments
from geom.arch.refusal import NoArch, under
from geom.arch.shapes import Catenary, Shape
from geom.errors import SolveError

Floats = NDArray[np.float64]
LineName = Literal["intrados", "axis", "extrados"]
Foot = Literal["level", "radial"]

_THICKNESS = 1e6  # thicknesses in a span, or the reverse: past it rounding shows in areas, and nothing is built
_HALVES: dict[LineName, float] = {"intrados": -0.5, "axis": 0.0, "extrados": 0.5}  # of the thickness, from the axis


@dataclass(frozen=True)
class Profile:
    """What an arch is, apart from where it stands.

    Attributes
    ----------
    thickness : float
        Along the normal, m.
    curve : str
        The line that has the shape; the others are its parallels.
    face : str
        The line that springs at the springings and that facts are of.
    foot : str
        How the ring ends there.
    family : callable
        Makes the shape of a scale.
    """

    thickness: float
    curve: LineName = "axis"
    face: LineName = "axis"
    foot: Foot = "level"
    family: Family = Catenary

    def offset(self, line: LineName) -> float:
        """Return how far a line lies outward of the line with the shape, m."""
        return self.share(line) * self.thickness

    def share(self, line: LineName) -> float:
        """Return how far a line lies outward of the line with the shape, in thicknesses."""
        return _HALVES[line] - _HALVES[self.curve]


@dataclass(frozen=True)
class Ring:
    """A ring in place. `ends` holds the parameters (``from``, ``to``) at which each line meets the feet.

    With a level foot the lines end at different parameters, with a radial one all at the same. `crown` (x, z) is that
    of the line with the shape, `springing` (x, z) the ``to`` springing of the face line, m.
    """

    profile: Profile
    shape: Shape
    crown: tuple[float, float]
    springing: tuple[float, float]
    ends: dict[LineName, tuple[float, float]]

    def line(self, name: LineName) -> Parallel:
        """Return one of the three lines."""
        return Parallel(self.shape, self.profile.offset(name), self.crown)

    @cached_property
    def intrados(self) -> Parallel:
        """The inner line."""
        return self.line("intrados")

    @cached_property
    def axis(self) -> Parallel:
        """The middle line."""
        return self.line("axis")

    @cached_property
    def extrados(self) -> Parallel:
        """The outer line."""
        return self.line("extrados")

    @property
    def crown_inside(self) -> bool:
        """Whether the arch has its highest point between its springings."""
        start, end = self.ends[self.profile.face]
        return start <= 0.0 <= end

    def feet(self, name: LineName) -> Floats:
        """Return the two ends (2, 2) of a line, m."""
        feet = self.line(name).point(np.array(self.ends[name]))
        # what is known without rounding is said without it
        if name == self.profile.face:
            return np.array([(0.0, 0.0), self.springing])
        if self.profile.foot == "level":
            feet[:, 1] = 0.0, self.springing[1]
        return feet

    def span(self, name: LineName) -> float:
        """Return the distance on plan between the ends of a line, m."""
        feet = self.feet(name)
        return float(feet[1, 0] - feet[0, 0])

    def rise(self, name: LineName) -> float:
        """Return the height of a line's highest point over its lower end, m."""
        offset = self.profile.offset(name)
        drops = self.shape.drop(np.array(self.ends[name]), offset)
        return float(np.max(drops) - (0.0 if self.crown_inside else np.min(drops)))

    def length(self, name: LineName) -> float:
        """Return the length of a line between the feet, m."""
        return float(self.line(name).length(*self.ends[name]))

    def sample(self, name: LineName, within: float) -> Floats:
        """Return a polyline (n, 2) of a line from foot to foot, nowhere more than `within` (m) off it."""
        points = self.line(name).sample(*self.ends[name], within)
        points[[0, -1]] = self.feet(name)
        return points

    @property
    def crown_radius(self) -> float:
        """Radius of the intrados at the crown, m; NaN where the arch has its crown beyond a springing."""
        return self.intrados.crown_radius if self.crown_inside else float("nan")

    @cached_property
    def area(self) -> float:
        """Area of the elevation, m2: with radial feet thickness times length of the axis, exactly."""
        return float(self._moments[0])

    @property
    def centroid(self) -> Floats:
        """Centre of gravity of the elevation (2,), m."""
        return np.asarray(self.crown + self._moments[1:] / self._moments[0])

    @property
    def under_area(self) -> float:
        """Area between the intrados and the straight line between its own two ends, m2."""
        feet = self.feet("intrados")
        about = feet[:1]
        start, end = (np.array([q]) for q in self.ends["intrados"])
        edge = arc_moments(self.intrados, end, start, about) + straight_moments(feet[:1], feet[1:], about)
        return float(edge[0, 0])

    @cached_property
    def _moments(self) -> Floats:
        about = np.array([self.crown])
        inner, outer = self.feet("intrados"), self.feet("extrados")
        (i0, i1), (e0, e1) = ((np.array([q]) for q in self.ends[name]) for name in ("intrados", "extrados"))
        edge = arc_moments(self.intrados, i0, i1, about) + arc_moments(self.extrados, e1, e0, about)
        edge += straight_moments(inner[1:], outer[1:], about) + straight_moments(outer[:1], inner[:1], about)
        moments: Floats = edge[0]
        return moments

    @property
    def greatest_thickness(self) -> float:
        """The thickness at which this shape's intrados begins to fold where it is sharpest, m; infinite if never."""
        share = -self.profile.share("intrados")
        return self.shape.least_radius / share if share > 0.0 else float("inf")


def stand(span: float, level: float, fact: Fact, profile: Profile) -> Ring:
    """Return the ring whose face line springs at (0, 0) and (`span`, `level`), m, and holds the fact.

    Raises
    ------
    SolveError
        If there is no such arch; names the key and what would be right.
    """
    if not span / _THICKNESS <= profile.thickness <= span * _THICKNESS:
        text = "{} is no thickness of an arch over {}; give from {} to {}"
        raise NoArch(text, profile.thickness, span, span / _THICKNESS, span * _THICKNESS, key="thickness")
    try:
        fitted = fit(span, level, fact, family=profile.family, offset=profile.offset(profile.face))
    except Folds as error:
        raise _too_thick(span, level, fact, profile) from error
    share = -profile.share("intrados")
    if share * profile.thickness >= fitted.shape.least_radius:
        raise _too_thick(span, level, fact, profile)
    return _placed(fitted, (span, level), profile)


def greatest_thickness(span: float, level: float, fact: Fact, profile: Profile) -> float:
    """Return the thickness (m) that an arch with these springings and this fact can approach; infinite if any will do.

    At the limit the least radius of the shape is the intrados' offset from it, so that thickness and scale are in
    proportion: the shape is fitted with all offsets shares of its scale.
    """
    share = -profile.share("intrados")
    if share <= 0.0:
        return float("inf")
    radius = profile.family(1.0).least_radius
    of_scale = radius / share
    fitted = fit(span, level, fact, family=profile.family, share=profile.share(profile.face) * of_scale)
    return of_scale * fitted.shape.scale


def _too_thick(span: float, level: float, fact: Fact, profile: Profile) -> NoArch:
    try:
        most = greatest_thickness(span, level, fact, profile)
    except SolveError:
        most = 0.0
    if not 0.0 < most < float("inf"):
        text = "makes the arch steeper than a ring {} thick can be; give less"
        return NoArch(text, profile.thickness, key=KEYS[type(fact)])
    return NoArch(
        "{} folds the intrados, which bends too sharply at the crown for it; give less than {}, or a flatter arch",
        profile.thickness, under(most), key="thickness",
    )  # fmt: skip


def _placed(fitted: Fit, springing: tuple[float, float], profile: Profile) -> Ring:
    face, shape = profile.face, fitted.shape
    start = shape.point(fitted.start) + fitted.offset * shape.normal(fitted.start)
    crown = (-float(start[0]), -float(start[1]))
    ends: dict[LineName, tuple[float, float]] = dict.fromkeys(_HALVES, (fitted.start, fitted.end))
    if profile.foot == "level":
        _check_level_foot(fitted, profile)
        ends = {name: ends[name] if name == face else _level_ends(fitted, profile.offset(name)) for name in _HALVES}
    return Ring(profile, shape, crown, springing, ends)


def _level_ends(fitted: Fit, offset: float) -> tuple[float, float]:
    # Drops are measured from the face's crown, so that no elevations are subtracted.
    face_drops = fitted.shape.drop(np.array([fitted.start, fitted.end]), fitted.offset)
    start, end = fitted.shape.at_drop(face_drops + (offset - fitted.offset), offset)
    return -float(start), float(end)


def _check_level_foot(fitted: Fit, profile: Profile) -> None:
    if not fitted.crown_inside:
        raise NoArch(
            '"level" needs the crown between the springings, and this arch still rises at its upper one; '
            'give foot = "radial", or a higher crown',
            key="foot",
        )
    drops = fitted.shape.drop(np.array([fitted.start, fitted.end]), fitted.offset)
    clear = float(np.min(drops)) + profile.offset("intrados") - fitted.offset
    if clear <= 0.0:
        raise NoArch(
            '"level" would cut the ring away, since its intrados stays {} under a springing; '
            'give foot = "radial", more rise, or face = "intrados"',
            abs(round(clear, 9)), key="foot",
        )  # fmt: skip
