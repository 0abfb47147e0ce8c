"""A member that stretches as it hangs: the values that follow from its lengths, weight, stiffness and half angle."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from geom.hang import elastic_forms as forms
from geom.hang.chunked import Floats, broadcast, evaluate, evaluate_one
from geom.hang.formulas import chord
from geom.hang.member import Points, Pulls


@dataclass(frozen=True, eq=False)
class Stretched:
    """Members hanging under their own weight and stretching by it, as arrays of one shape.

    Made by the functions of `geom.hang.elastic`. Everything is NaN for an element that cannot hang. The weight
    stays with the material: a metre that stretches weighs what it weighed.

    Attributes
    ----------
    span, level_difference : ndarray
        Plan distance between the supports and elevation of `to` over `from`, metres.
    length : ndarray
        Unstretched length, metres.
    excess : ndarray
        Unstretched length less chord, metres; negative where the member must stretch to reach.
    weight : ndarray
        Weight per unstretched length, newton per metre.
    stiffness : ndarray
        Modulus times area, newton; infinite for a member that does not stretch.
    u : ndarray
        Half the angle between the end tangents, as asinh(V/H); S/2a without stretch. Infinite for two strands on
        a plumb line.
    """

    span: Floats
    level_difference: Floats
    length: Floats
    excess: Floats
    weight: Floats
    stiffness: Floats
    u: Floats

    @cached_property
    def softness(self) -> Floats:
        """Weight per length over stiffness, 1/m: the strain for each metre of its own that hangs under a point."""
        return self.weight / self.stiffness

    @cached_property
    def chord(self) -> Floats:
        """Straight distance between the supports, metres."""
        return evaluate_one(chord, self.span, self.level_difference)

    @cached_property
    def parameter(self) -> Floats:
        """Horizontal pull over weight per unstretched length, metres."""
        return evaluate_one(forms.parameter, self.span, self.length, self.softness, self.u)

    @cached_property
    def horizontal(self) -> Floats:
        """Horizontal pull, newton."""
        return self.weight * self.parameter

    @cached_property
    def pulls(self) -> Pulls:
        """Pulls on the supports, newton."""
        return Pulls(*evaluate(_pulls, *self._shape, self.weight))

    @cached_property
    def hung_length(self) -> Floats:
        """Length as it hangs, stretched, metres."""
        return evaluate_one(forms.hung_length, *self._shape)

    @cached_property
    def sag(self) -> Floats:
        """Greatest vertical distance under the chord, metres; that under the upper support on a plumb line."""
        return evaluate_one(forms.sag, *self._shape)

    @cached_property
    def sag_mid(self) -> Floats:
        """Vertical distance under the chord at mid-span, metres; NaN for a taut member on a plumb line."""
        return evaluate_one(forms.sag_mid, *self._shape)

    @cached_property
    def sag_arc(self) -> Floats:
        """Unstretched arc from `from` to where the sag is greatest, metres."""
        span, rise, length, _, soft, u = self._shape
        return evaluate_one(forms.arc_of_sag, span, rise, length, soft, u)

    @cached_property
    def sag_at(self) -> Floats:
        """Plan distance from `from` to where the sag is greatest, metres."""
        return self._points(self.sag_arc).plan

    @cached_property
    def lowest_arc(self) -> Floats:
        """Unstretched arc from `from` to the lowest point of the member, metres."""
        return np.clip(self.pulls.vertical_from / self.weight, 0.0, self.length)

    @cached_property
    def lowest_at(self) -> Floats:
        """Plan distance from `from` to the lowest point of the member, metres."""
        inside = np.clip(self._points(self.lowest_arc).plan, 0.0, self.span)
        return np.where(self.pulls.vertical_to <= 0.0, self.span, inside)

    @cached_property
    def below_from(self) -> Floats:
        """Depth of the member's lowest point under the support `from`, metres."""
        return evaluate_one(forms.lowest_below_from, *self._shape)

    @cached_property
    def below_to(self) -> Floats:
        """Depth of the member's lowest point under the support `to`, metres."""
        span, rise, *rest = self._shape
        return evaluate_one(forms.lowest_below_from, span, -rise, *rest)

    @property
    def lowest(self) -> Floats:
        """Elevation of the member's lowest point over the support `from`, metres; 0 or negative."""
        return np.asarray(0.0 - self.below_from)

    @cached_property
    def slope_from(self) -> Floats:
        """Angle under the horizontal at which the member leaves `from`, radians; negative: upwards."""
        return self._slope(self.pulls.vertical_from, -self.level_difference)

    @cached_property
    def slope_to(self) -> Floats:
        """Angle under the horizontal at which the member leaves `to`, radians; negative: upwards."""
        return self._slope(self.pulls.vertical_to, self.level_difference)

    def at_arc(self, distance: ArrayLike) -> Points:
        """Give points of the members at unstretched distances along them.

        Parameters
        ----------
        distance : array_like, shape () or (..., n)
            Unstretched distances along the member from `from`, metres, against the members' shape with one axis
            added at its end (a single number: no axis added). Beyond the supports the curve goes on.

        Returns
        -------
        Points

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        return Points(*evaluate(_points, *self._along(distance)))

    def arc_at(self, distance: ArrayLike) -> Floats:
        """Give the unstretched arcs from `from` to points at plan distances between the supports.

        Parameters
        ----------
        distance : array_like, shape () or (..., n)
            Plan distances from `from`, metres; shapes as in `at_arc`.

        Returns
        -------
        ndarray
            Metres.

        Raises
        ------
        ValueError
            The shapes do not broadcast.
        """
        x, span, _, length, _, soft, u, down = self._along(distance)
        return evaluate_one(forms.arc_at, x, span, length, soft, u, -down)

    @property
    def _shape(self) -> tuple[Floats, ...]:
        return self.span, self.level_difference, self.length, self.excess, self.softness, self.u

    @property
    def _shape_and_down(self) -> tuple[Floats, ...]:
        return *self._shape, self.pulls.vertical_from / self.weight

    def _along(self, distance: ArrayLike) -> tuple[Floats, ...]:
        along = np.asarray(distance, dtype=np.float64)
        shape = self._shape_and_down
        if along.ndim:
            shape = tuple(values[..., np.newaxis] for values in shape)
        return broadcast(along, *shape)

    def _points(self, distance: Floats) -> Points:
        return Points(*evaluate(_points, distance, *self._shape_and_down))

    def _slope(self, down: Floats, drop: Floats) -> Floats:
        # exactly taut, or the lower end of a plumb line that just reaches: along the chord
        straight = np.isinf(self.horizontal) | ((self.horizontal == 0.0) & (down == 0.0))
        return np.where(straight, np.arctan2(drop, self.span), np.arctan2(down, self.horizontal))


def _pulls(*shape_and_weight: Floats) -> tuple[Floats, ...]:
    *shape, weight = shape_and_weight
    span, _, length, _, soft, u = shape
    a, (down, down_to) = forms.parameter(span, length, soft, u), forms.downs(*shape)
    return tuple(weight * pull for pull in (a, chord(a, down), chord(a, down_to), down, down_to))


def _points(s: Floats, *shape_and_down: Floats) -> tuple[Floats, ...]:
    span, rise, length, _, soft, u, down = shape_and_down
    a = forms.parameter(span, length, soft, u)
    x, z = forms.point(s, a, -down, soft)
    taut = a == np.inf
    if taut.any():
        share = s / chord(span, rise)
        x, z = np.where(taut, share * span, x), np.where(taut, share * rise, z)
    return x, z
