"""How a hang answers to small changes, by implicit differentiation of its closing equations."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from geom.hang.catenary import Hang

Floats = NDArray[np.float64]

_NEARLY_TAUT = 1e-4
"""Under this u = S/2a the closed form has lost half its digits (its error grows as eps/u^2, 2e-8 there) and the first
term of the series is as good (its error grows as u^2, 1e-8 there)."""


def sag_per_length(hang: Hang) -> Floats:
    """Return the change of the greatest sag for a small change of length, both along one family of hangs.

    Parameters
    ----------
    hang : Hang
        Solved members of any shape; NaN where they have no span.

    Returns
    -------
    ndarray
        d(sag)/d(length), m/m, of the members' shape.

    Notes
    -----
    With t = v/S, u = S/2a, the plan middle at mu = asinh(t u/sinh u) parameters from the vertex and the sag greatest
    where the curve runs parallel to the chord, at beta = asinh t::

        sag = a (cosh mu cosh u + t (beta - mu) - sqrt(1 + t^2)),      L^2 = v^2 + (2 a sinh u)^2

    Both are differentiated by a with S and v held. Level and nearly taut this is 3 S/(16 sag).
    """
    span, level, a, length, u = np.broadcast_arrays(
        hang.span, hang.level_difference, hang.parameter, hang.length, hang.u
    )
    with np.errstate(all="ignore"):
        slope = level / span
        chord2 = span**2 + level**2
        taut = 3.0 * chord2 / (4.0 * span**2 * u)
        deep = _closed_form(slope, a, length, np.minimum(u, 300.0))
    return np.where(u < _NEARLY_TAUT, taut, np.where(u > 300.0, 0.5, deep))


def _closed_form(t: Floats, a: Floats, length: Floats, u: Floats) -> Floats:
    sinh, cosh = np.sinh(u), np.cosh(u)
    ratio = t * u / sinh
    mu, beta = np.arcsinh(ratio), np.arcsinh(t)
    cosh_mu = np.sqrt(1.0 + ratio**2)
    mu_by_u = t * (sinh - u * cosh) / sinh**2 / cosh_mu
    sag_over_a = cosh_mu * cosh + t * (beta - mu) - np.sqrt(1.0 + t**2)
    by_u = cosh_mu * sinh + (ratio * cosh - t) * mu_by_u
    sag_by_a = sag_over_a - u * by_u
    length_by_a = 4.0 * a * sinh * (sinh - u * cosh) / length
    out: Floats = sag_by_a / length_by_a
    return out
