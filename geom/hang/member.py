"""A member as it hangs: the values that follow from its span, level difference, excess and half angle."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import along, formulas
from geom.hang.chunked import Floats, broadcast, evaluate, evaluate_one


@dataclass(frozen=True, eq=False)
class Pulls:
    """What hanging members pull with, newton, all of one shape.

    Attributes
    ----------
    horizontal : ndarray
        Horizontal pull, the same all along a member.
    at_from, at_to : ndarray
        Whole pull at each end.
    vertical_from, vertical_to : ndarray
        Downward pull on each support; negative where the member leaves its lower support upwards. Their
        sum is the member's weight.
    """

    horizontal: Floats
    at_from: Floats
    at_to: Floats
    vertical_from: Floats
    vertical_to: Floats


@dataclass(frozen=True, eq=False)
class Points:
    """Points of hanging members.

    Attributes
    ----------
    plan : ndarray
        Plan distance from the support `from`, metres.
    elevation : ndarray
        Elevation over the support `from`, metres.
    """

    plan: Floats
    elevation: Floats


@dataclass(frozen=True, eq=False)
class Hang:
    """Inextensible members hanging under their own weight, as arrays of one shape.

    Made by the functions of `geom.hang.catenary`. Everything is NaN for an element that cannot hang.
    Two limits are kept: an exactly taut member (`excess` 0) has an infinite parameter and no sag, and
    pulls without bound; two strands hanging from supports on one plumb line (`span` 0) have the parameter
    0 and no horizontal pull.

    Attributes
    ----------
    span : ndarray
        Plan distance between the supports, metres.
    level_difference : ndarray
        Elevation of `to` over `from`, metres; may be negative.
    length : ndarray
        Length of the member, metres.
    excess : ndarray
        Length less chord, metres, right to its own last digits.
    u : ndarray
        Half the span over the parameter; infinite on a plumb line.
    parameter : ndarray
        Horizontal pull over weight per length, metres: radius of curvature at the lowest point of the
        curve.
    """

    span: Floats
    level_difference: Floats
    length: Floats
    excess: Floats
    u: Floats
    parameter: Floats

    @cached_property
    def chord(self) -> Floats:
        """Straight distance between the supports, metres."""
        return evaluate_one(formulas.chord, self.span, self.level_difference)

    @cached_property
    def sag(self) -> Floats:
        """Greatest vertical distance under the chord, metres; (L + |v|)/2 on a plumb line, its limit."""
        return self._of_shape(formulas.sag)

    @cached_property
    def sag_mid(self) -> Floats:
        """Vertical distance under the chord at mid-span, metres."""
        return evaluate_one(formulas.sag_at_mid, self.length, self.u)

    @cached_property
    def sag_at(self) -> Floats:
        """Plan distance from `from` to where the sag is greatest, metres."""
        return self._of_shape(along.sag_at)

    @cached_property
    def vertex_at(self) -> Floats:
        """Plan distance from `from` to the lowest point of the whole curve, in the span or out of it, metres."""
        return self._of_shape(along.vertex_at)

    @cached_property
    def lowest_at(self) -> Floats:
        """Plan distance from `from` to the lowest point of the member, metres."""
        return np.asarray(np.clip(self.vertex_at, 0.0, self.span))

    @cached_property
    def below_from(self) -> Floats:
        """Depth of the member's lowest point under the support `from`, metres."""
        return self._of_shape(along.lowest_below_from)

    @cached_property
    def below_to(self) -> Floats:
        """Depth of the member's lowest point under the support `to`, metres."""
        return self._seen_from_to(along.lowest_below_from)

    @property
    def lowest(self) -> Floats:
        """Elevation of the member's lowest point over the support `from`, metres; 0 or negative."""
        return np.asarray(0.0 - self.below_from)

    @cached_property
    def slope_from(self) -> Floats:
        """Angle under the horizontal at which the member leaves `from`, radians; negative: upwards."""
        return self._of_shape(along.slope_from)

    @cached_property
    def slope_to(self) -> Floats:
        """Angle under the horizontal at which the member leaves `to`, radians; negative: upwards."""
        return self._seen_from_to(along.slope_from)

    def pulls(self, weight: ArrayLike) -> Pulls:
        """Give the pulls on the supports.

        Parameters
        ----------
        weight : array_like
            Weight per length of member, newton per metre; broadcasts against the members.

        Returns
        -------
        Pulls
            Infinite for an exactly taut member, but for the downward ones of a level one.

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        arrays = broadcast(self.span, self.level_difference, self.length, self.excess, self.u, weight)
        return Pulls(*evaluate(_pulls, *arrays))

    def at_plan(self, distance: ArrayLike) -> Points:
        """Give points of the members at plan distances.

        Parameters
        ----------
        distance : array_like, shape () or (..., n)
            Plan distances from `from`, metres, against the members' shape with one axis added at its end
            (a single number: no axis added). Beyond the supports the curve goes on.

        Returns
        -------
        Points
            NaN elevations on a plumb line, where the plan distance says nothing.

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        x, *shape = self._along(distance)
        return Points(x, evaluate_one(along.elevation_at, x, *shape))

    def at_length(self, distance: ArrayLike) -> Points:
        """Give points of the members at distances along them.

        Parameters
        ----------
        distance : array_like, shape () or (..., n)
            Distances along the member from `from`, metres; shapes as in `at_plan`.

        Returns
        -------
        Points

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        return Points(*evaluate(along.point_at_length, *self._along(distance)))

    def arc_at(self, distance: ArrayLike) -> Floats:
        """Give the length of member from `from` to points at plan distances.

        Parameters
        ----------
        distance : array_like, shape () or (..., n)
            Plan distances from `from`, metres; shapes as in `at_plan`.

        Returns
        -------
        ndarray
            Metres; NaN on a plumb line.

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        return evaluate_one(along.arc_at, *self._along(distance))

    def _of_shape(self, formula: Callable[..., Floats]) -> Floats:
        return evaluate_one(formula, self.span, self.level_difference, self.length, self.excess, self.u)

    def _seen_from_to(self, formula: Callable[..., Floats]) -> Floats:
        return evaluate_one(formula, self.span, -self.level_difference, self.length, self.excess, self.u)

    def _along(self, distance: ArrayLike) -> tuple[Floats, ...]:
        along = np.asarray(distance, dtype=np.float64)
        shape = [self.span, self.level_difference, self.length, self.excess, self.u]
        if along.ndim:
            shape = [values[..., np.newaxis] for values in shape]
        return broadcast(along, *shape)


def _pulls(span: Floats, rise: Floats, length: Floats, excess: Floats, u: Floats, weight: Floats) -> tuple[Floats, ...]:
    pulls = formulas.ends(span, rise, length, excess, u)
    for pull in pulls:
        np.multiply(pull, weight, out=pull)
    horizontal = span / u
    horizontal *= 0.5 * weight
    return horizontal, *pulls
