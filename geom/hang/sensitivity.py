r"""How a hang answers to small changes, by implicit differentiation of its closing equations.

Lengths stand for pulls, divided by the weight of an unstretched metre: F = (a, y) along the member, y = y0 + s, its
size t, soft = w/EA. From `from` to the unstretched arc s a member reaches r = int (soft + 1/t) F ds (Irvine, "Cable
Structures", 1981, ch. 1). Changed by dF all along, it reaches further by A dF, with the flexibility

    A = int soft I + (1/t) n n' ds,     n the member's own normal,

and what closes between the supports gives dF. Seen along the chord, at the angle theta, the tangent is turned by delta
from it with sin(delta) = cos(theta) (s - s_sag)/t, s_sag the arc where it runs parallel to the chord: nothing is
subtracted that is nearly equal, however taut the member.

The sag is the depth of the point s_sag under the chord. As that point runs parallel to the chord, moving along the
member changes nothing, and only the flexibility up to it enters.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.stretched import Stretched

Floats = NDArray[np.float64]

# Over a turn of the tangent's asinh(slope) of at most this, ten points integrate to the last digit: the integrands'
# nearest pole is i pi/2 away, so that the error falls as 6^-20. Beyond, closed forms lose less than a digit.
_NARROW = 1.0
_POINTS, _WEIGHTS = np.polynomial.legendre.leggauss(10)


@dataclass(frozen=True, eq=False)
class Answers:
    """Changes of the greatest sag, each for a small change of one thing with all else held; the members' shape.

    length : for a change of unstretched length as hung, m/m
    softness : for a change of weight over stiffness, m for 1/m
    apart : for supports moved apart on plan, m/m
    raised : for `to` raised, m/m
    """

    length: Floats
    softness: Floats
    apart: Floats
    raised: Floats


def answers(hang: Stretched) -> Answers:
    """Return how the greatest sag of solved members changes; NaN where two strands hang on a plumb line."""
    with np.errstate(all="ignore"):
        return _answers(hang)


def sag_per_length(hang: Stretched) -> Floats:
    """Return d(sag)/d(unstretched length), m/m; of two strands on a plumb line that of the longer one's depth.

    Level, without stretch and nearly taut this is 3 S/(16 sag).
    """
    down = np.maximum(hang.pulls.vertical_from, hang.pulls.vertical_to) / hang.weight
    lean = np.abs(hang.level_difference) * hang.softness / (2.0 + hang.softness * hang.length) ** 2
    plumb = (0.5 - lean) * (1.0 + hang.softness * down)
    return np.where(hang.span > 0.0, answers(hang).length, plumb)


def sag_per_kelvin(hang: Stretched, expansion: Floats, growth: Floats) -> Floats:
    """Return d(sag)/d(temperature), m/K: the length grows, and its weight is spread over more of it.

    Parameters
    ----------
    hang : Stretched
        Solved members.
    expansion, growth : ndarray
        Coefficient of expansion, 1/K, and what a length has grown to from the shop's temperature, 1 + alpha dT.
    """
    rate = expansion / growth
    own = answers(hang)
    bent = np.where(hang.softness > 0.0, own.softness * hang.softness, 0.0)
    deep = sag_per_length(hang) * hang.length * rate
    return np.where(hang.span > 0.0, (own.length * hang.length - bent) * rate, deep)


def _answers(hang: Stretched) -> Answers:
    chord, s, soft = hang.chord, hang.sag_arc, hang.softness
    cos, sin = hang.span / chord, hang.level_difference / chord
    whole, part = _flexibility(hang, hang.length), _flexibility(hang, s)
    a, y1 = hang.parameter, hang.pulls.vertical_to / hang.weight
    y0 = y1 - hang.length
    more = soft + 1.0 / np.hypot(a, y1)

    def sag(along: Floats, across: Floats) -> Floats:
        """Deepen at s_sag where the far end would have to come back by this much, seen from the chord."""
        cc, cn, nn = whole
        determinant = cc * nn - cn * cn
        along_pull = (nn * along - cn * across) / determinant
        across_pull = (cc * across - cn * along) / determinant
        return np.asarray(-(part[1] * along_pull + part[2] * across_pull) / cos)

    def turned(x: Floats, z: Floats) -> tuple[Floats, Floats]:
        return cos * x + sin * z, cos * z - sin * x

    at = hang.sag_at
    soft_x, soft_z = a * hang.length, 0.5 * hang.length * (y0 + y1)
    here = a * s * hang.level_difference / hang.span - 0.5 * s * (2.0 * y0 + s)
    back_x, back_z = turned(-soft_x, -soft_z)
    end = turned(-a * more, -y1 * more)
    nothing, one = np.zeros_like(chord), np.ones_like(chord)
    return Answers(
        length=sag(*end),
        softness=sag(back_x, back_z) + here,
        apart=sag(*turned(one, nothing)) - at * hang.level_difference / hang.span**2,
        raised=sag(*turned(nothing, one)) + at / hang.span,
    )


def _flexibility(hang: Stretched, s: Floats) -> tuple[Floats, Floats, Floats]:
    """Return the flexibility from `from` to the unstretched arc s: along the chord, mixed, across it."""
    a, y0 = hang.parameter, -hang.pulls.vertical_from / hang.weight
    narrow = _narrow(hang, a, y0, s)
    wide = _wide(hang, a, y0, s)
    soft = hang.softness * s
    chosen = [np.where(2.0 * hang.u < _NARROW, few, many) for few, many in zip(narrow, wide, strict=True)]
    return chosen[0] + soft, chosen[1], chosen[2] + soft


def _narrow(hang: Stretched, a: Floats, y0: Floats, s: Floats) -> tuple[Floats, Floats, Floats]:
    """Integrate n n'/t ds by Gauss and Legendre."""
    way = hang.span / hang.chord
    along = 0.5 * s[..., np.newaxis] * (_POINTS + 1.0)
    t = np.hypot(a[..., np.newaxis], y0[..., np.newaxis] + along)
    sine = way[..., np.newaxis] * (along - hang.sag_arc[..., np.newaxis]) / t
    cosine2 = 1.0 - sine * sine
    weight = 0.5 * s[..., np.newaxis] * _WEIGHTS / t
    return (
        (weight * sine * sine).sum(axis=-1),
        -(weight * sine * np.sqrt(cosine2)).sum(axis=-1),
        (weight * cosine2).sum(axis=-1),
    )


def _wide(hang: Stretched, a: Floats, y0: Floats, s: Floats) -> tuple[Floats, Floats, Floats]:
    """Integrate n n' dphi, n = (-tanh phi, sech phi), in closed form, and turn it to the chord."""
    y = y0 + s
    t0, t = np.hypot(a, y0), np.hypot(a, y)
    turn = np.arcsinh(y / a) - np.arcsinh(y0 / a)
    xz, zz = a / t - a / t0, y / t - y0 / t0
    xx = turn - zz
    cos, sin = hang.span / hang.chord, hang.level_difference / hang.chord
    return (
        cos * cos * xx + 2.0 * cos * sin * xz + sin * sin * zz,
        cos * sin * (zz - xx) + (cos * cos - sin * sin) * xz,
        sin * sin * xx - 2.0 * cos * sin * xz + cos * cos * zz,
    )
