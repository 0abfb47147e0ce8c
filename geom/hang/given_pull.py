r"""A hanging member that stretches, under a given horizontal pull.

Under a pull H a member between two supports can have but one shape, and with a = H/w, beta = H/EA

    lam = S/2a,   nu = |v|/2a,   u + beta R(u) = lam,   R = sqrt(sinh(u)^2 + (nu/(1 + (lam - u) coth u))^2)

gives its u and its unstretched length 2a R: the left side rises with u. The functions take one-dimensional
arrays; the letters are those of `geom.hang.elastic_forms`.
"""

import numpy as np

from geom.hang import elastic_forms as forms
from geom.hang.chunked import Floats, repair
from geom.hang.closing import sinhc_minus_one
from geom.hang.formulas import chord
from geom.hang.roots import newton, secant

# u of the level inextensible member with the least end pull, u tanh u = 1 (Lamb, "Mechanics", Encyclopaedia
# Britannica, 11th ed., 1911: span at most 1.326 times the length whose weight is the strength)
_LEAST_PULL = 1.19967864025773


def shape_at(log_lam: Floats, span: Floats, rise: Floats, soft: Floats) -> tuple[Floats, ...]:
    """Give (span, rise, length, excess, soft, u), as the functions of `elastic_forms` take them, at ln lam.

    With y = b/2, A = y coth u: (L^2 - D^2)/4a^2 = sinh(u)^2 - u^2 - y (2u + y) - nu^2 A (2 + A)/(1 + A)^2.
    """
    lam = np.exp(log_lam)
    a = 0.5 * span / lam
    nu, beta = 0.5 * np.abs(rise) / a, a * soft
    u = lam.copy()
    start = lam / (1.0 + beta * chord(span, rise) / span)
    repair(
        (soft > 0.0) & (lam > 0.0), u, lambda u, *args: newton(_angle, u, *args, bracket=(0.0, args[0])),
        start, lam, nu, beta,
    )  # fmt: skip
    half, _, _ = _half_length(u, lam, nu)
    length, y, p = 2.0 * a * half, beta * half, sinhc_minus_one(u)
    bent = y / np.tanh(u)
    drop = nu / (1.0 + bent)
    more = u * u * p * (2.0 + p) - y * (2.0 * u + y) - drop * drop * bent * (2.0 + bent)
    distance = chord(span, rise)
    excess = 2.0 * a * more / (length + distance) * 2.0 * a
    repair(lam == 0.0, length, lambda d: d, distance)
    repair(lam == 0.0, excess, np.zeros_like, distance)
    return span, rise, length, excess, soft, u


def _angle(u: Floats, lam: Floats, nu: Floats, beta: Floats) -> tuple[Floats, Floats]:
    half, drop, whole = _half_length(u, lam, nu)
    sinh = np.sinh(u)
    slope = (sinh * np.cosh(u) + drop * (drop / whole) * (1.0 / np.tanh(u) + (lam - u) / (sinh * sinh))) / half
    return u + beta * half - lam, 1.0 + beta * slope


def _half_length(u: Floats, lam: Floats, nu: Floats) -> tuple[Floats, Floats, Floats]:
    """Give R, its part nu/(1 + A) and 1 + A."""
    whole = 1.0 + (lam - u) / np.tanh(u)
    drop = nu / whole
    return chord(np.sinh(u), drop), drop, whole


def log_end_pull(log_lam: Floats, span: Floats, rise: Floats, soft: Floats) -> Floats:
    """Give ln(T/w) at the upper support."""
    shape = shape_at(log_lam, span, np.abs(rise), soft)
    return np.log(chord(forms.parameter(span, shape[2], soft, shape[5]), forms.downs(*shape)[1]))


def log_at_least(span: Floats, rise: Floats, soft: Floats) -> Floats:
    """Give ln lam of the least end pull, where d ln T/d ln a falls through 0."""
    start = np.log(np.where(span > 0.0, _LEAST_PULL, np.nan))
    return secant(_end_pull_growth, start, span, np.abs(rise), soft, reach=0.5)


def _end_pull_growth(log_lam: Floats, span: Floats, rise: Floats, soft: Floats) -> Floats:
    """Give -d ln T/d ln a with S, v, EA held.

    T/w = a sqrt(1 + g^2), g = R + nu/(tanh u + y), y = beta R. By ln a: lam' = -lam, nu' = -nu,
    y' = y + beta R', u' = -lam - y', and R R' = sinh u cosh u u' - q (q + q (1 + A)'/(1 + A)), q = nu/(1 + A).
    """
    lam = np.exp(log_lam)
    nu, beta = rise * lam / span, 0.5 * span * soft / lam
    u = shape_at(log_lam, span, rise, soft)[5]
    half, drop, whole = _half_length(u, lam, nu)
    y, sinh, cosh, tanh = beta * half, np.sinh(u), np.cosh(u), np.tanh(u)
    # u' = -lam - y - beta R' and y' = y + beta R' put into the last equation, which is linear in R'
    in_whole = drop * drop / whole
    known = sinh * cosh * (-lam - y) - drop * drop - in_whole * (y / tanh + y * (lam + y) / (sinh * sinh))
    factor = half + beta * (sinh * cosh + in_whole * (1.0 / tanh + y / (sinh * sinh)))
    half_by = known / factor
    y_by = y + beta * half_by
    u_by = -lam - y_by
    below = tanh + y
    g = half + nu / below
    g_by = half_by - nu / below * (1.0 + ((1.0 - tanh * tanh) * u_by + y_by) / below)
    growth: Floats = 1.0 + g * g_by / (1.0 + g * g)
    return -growth
