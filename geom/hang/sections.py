r"""Sections of a member between its loads: each an elastic catenary in the plane of its own load.

A section of unstretched length L carries a steady load per unstretched metre, a vector w of any direction: its
weight, tilted by a side wind. With F(s) the tension, drawn forward along the member, F(s) = F0 - w s, and

    r(L) = int (1/EA + 1/|F|) F ds

(W. T. O'Brien and A. J. Francis, "Cable movements under two-dimensional loads", Journal of the Structural Division,
ASCE 90 (1964) ST3, in the plane; the vector form is the same seen in the plane of w and F). Referred to the tension F
at mid-length, n the direction against the load, F = c n + h, q = |w| L/2, V1 = c - q, V2 = c + q, T1, T2 the pulls at
both ends, p = 2L/(T1 + T2), eps = 2q/(T1 + T2), alpha = artanh(eps)/eps - 1, e = L/EA,

    r = (e + p) F + p alpha h,

and its derivative by F, the section's flexibility, is

    A I + B1 h h' + B2 (h n' + n h') + B3 n n',
    A  = e + p (1 + alpha)            B2 = -p c/(T1 T2)
    B3 = p (H^2 + R)/(2 T1 T2) - p (1 + alpha),    R = T1 T2 - V1 V2
    B1 = -2p/((T1 + T2)^2 T1 T2) (H^2 + c^2 + 2q^2 + T1 T2 + q^2 R/H^2).

No length is divided by a load and no load by a length, so that a section may be weightless, slack, plumb or of
no length.
"""

from dataclasses import dataclass
from typing import NamedTuple, TypeAlias

import numpy as np
from numpy.typing import NDArray

from geom.hang.chunked import Floats

Index: TypeAlias = NDArray[np.intp]

# Under this eps^2 artanh(eps)/eps - 1 is summed: above, its rounding error is 3 eps^-2 of 1e-16, 3e-14, below, the
# first term left out is 6e-18 of the sum.
_SERIES_END = 0.01
_TERMS = 8
# A plumb slack section turns back at a point of no pull, where the flexibility has no bound: of this part of its
# weight, 92 times that of a section that is as wide as it is long.
_LEAST_PULL = 1e-40
_TINY = 1e-300


@dataclass(frozen=True, eq=False)
class Sections:
    """Sections of members from `from` to `to`, K of each of n members.

    Attributes
    ----------
    length : ndarray, shape (n, K)
        Unstretched lengths, metres.
    stiffness : ndarray, shape (n, K)
        Modulus times area, newton; may be infinite.
    load : ndarray, shape (n, K, 3)
        Load per unstretched length, newton per metre: along the span, to its left, upward.
    point : ndarray, shape (n, K, 3)
        Point load at the end of each section, newton; none at the last.
    """

    length: Floats
    stiffness: Floats
    load: Floats
    point: Floats

    def of(self, chosen: Index) -> "Sections":
        """Give some of the members."""
        return Sections(self.length[chosen], self.stiffness[chosen], self.load[chosen], self.point[chosen])


class Law(NamedTuple):
    """What does not depend on the tension: L, e, n (n, K, 3), |w|, and the tension lost up to mid-length."""

    length: Floats
    give: Floats
    up: Floats
    weight: Floats
    lost: Floats


def law(sections: Sections) -> Law:
    """Prepare the closure of all sections in terms of the tension at the start of the member."""
    length = sections.length
    weight = _size(sections.load)
    up = -sections.load / np.where(weight > 0.0, weight, 1.0)[..., np.newaxis]
    up[..., 2] = np.where(weight > 0.0, up[..., 2], 1.0)
    whole = sections.load * length[..., np.newaxis]
    after = np.cumsum(whole + sections.point, axis=1)
    lost = after - sections.point - 0.5 * whole
    return Law(length, length / sections.stiffness, up, weight, lost)


def starts(sections: Sections, tension: Floats) -> Floats:
    """Give the tensions at the start of every section, (n, K, 3), from those at the start of the members, (n, 3)."""
    lost = np.cumsum(sections.load * sections.length[..., np.newaxis] + sections.point, axis=1)
    result = np.repeat(tension[:, np.newaxis], sections.length.shape[1], axis=1)
    result[:, 1:] -= lost[:, :-1]
    return result


def reach(part: Law, middle: Floats) -> Floats:
    """Give r, (n, K, 3), of sections with the tension `middle` (n, K, 3) at mid-length."""
    return _reach_and_parts(part, middle)[0]


def reach_and_flexibility(part: Law, middle: Floats) -> tuple[Floats, Floats]:
    """Give the sums over the sections of r, (n, 3), and of its derivative by the tension, (n, 3, 3)."""
    r, h, (c, q, v1, v2, t1, t2, p, alpha) = _reach_and_parts(part, middle)
    both, h2 = t1 * t2, _dot(h, h)
    v = v1 * v2
    turned = np.where(v > 0.0, h2 * (h2 + v1 * v1 + v2 * v2) / (both + np.abs(v)), both - v)
    total = t1 + t2
    b1 = h2 + c * c + 2.0 * q * q + both + q * q * turned / np.maximum(h2, _TINY)
    b1 *= -2.0 * p / (total * total * both)
    b2 = -p * c / both
    b3 = 0.5 * p * (h2 + turned) / both - p * (1.0 + alpha)
    n = part.up
    b1, b2, b3 = b1[..., np.newaxis], b2[..., np.newaxis], b3[..., np.newaxis]
    left = np.concatenate([h, n], axis=1)
    right = np.concatenate([b1 * h + b2 * n, b2 * h + b3 * n], axis=1)
    flexibility = np.matmul(left.transpose(0, 2, 1), right)
    flexibility[:, _DIAGONAL, _DIAGONAL] += (part.give + p * (1.0 + alpha)).sum(axis=1)[:, np.newaxis]
    return r.sum(axis=1), flexibility


_DIAGONAL = np.arange(3)


def stretched_length(part: Law, middle: Floats) -> Floats:
    """Give the lengths of the sections as stretched, (n, K), metres.

    L + (e/4) (T1 + T2 + 4 c^2/(T1 + T2)) + (e/L) H^2 (p/2) (1 + alpha), the integral of the pull over EA.
    """
    _, h, (c, _, _, _, t1, t2, _, alpha) = _reach_and_parts(part, middle)
    total = t1 + t2
    pull = 0.25 * (total + 4.0 * c * (c / total)) + _dot(h, h) * (1.0 + alpha) / total
    return part.length + part.give * pull


def _reach_and_parts(part: Law, middle: Floats) -> tuple[Floats, Floats, tuple[Floats, ...]]:
    c = _dot(middle, part.up)
    h = middle - c[..., np.newaxis] * part.up
    q = 0.5 * part.weight * part.length
    least = _LEAST_PULL * q
    h2 = _dot(h, h) + least * least
    v1, v2 = c - q, c + q
    t1, t2 = np.sqrt(h2 + v1 * v1), np.sqrt(h2 + v2 * v2)
    total = np.maximum(t1 + t2, _TINY)  # not even a section of no length and no pull divides by nothing
    eps = 2.0 * q / total
    slack = h2 / np.maximum(t1 + np.abs(v1), _TINY) + h2 / np.maximum(t2 + np.abs(v2), _TINY)
    less = np.where((v1 <= 0.0) & (v2 >= 0.0), slack, total - 2.0 * q) / total  # 1 - eps
    alpha, p = _artanh_excess(eps, less), 2.0 * part.length / total
    r = (part.give + p)[..., np.newaxis] * middle + (p * alpha)[..., np.newaxis] * h
    return r, h, (c, q, v1, v2, t1, t2, p, alpha)


def _artanh_excess(eps: Floats, less: Floats) -> Floats:
    square = eps * eps
    series = np.full_like(eps, 1.0 / (2.0 * _TERMS + 1.0))
    for term in range(_TERMS - 1, 0, -1):
        series *= square
        series += 1.0 / (2.0 * term + 1.0)
    direct = 0.5 * np.log1p(2.0 * eps / less) / np.maximum(eps, _TINY) - 1.0
    return np.where(square < _SERIES_END, series * square, direct)


def _dot(first: Floats, second: Floats) -> Floats:
    product: Floats = np.einsum("...i,...i->...", first, second)
    return product


def _size(vectors: Floats) -> Floats:
    return np.sqrt(_dot(vectors, vectors))
