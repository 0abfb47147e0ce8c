r"""How a loaded hang answers to small changes, by implicit differentiation of its closing equations.

Its loads stay at their marks. With the flexibility A of all sections by the tension T at `from`, and A_s up to the arc
where it hangs deepest under the chord (`geom.hang.sections`), what closes between the supports gives dT:

    A dT = dR - (1/EA + 1/|F|) F dL,        F the tension at `to`, R from support to support

of a length dL added at the `to` end, and the point at s moves by A_s dT. Warmed, every length grows alike and its
weight with it stays, so that what a section reaches with given pulls grows as its length: there dR is - R alpha dT.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from geom.hang.loaded import Loaded
from geom.hang.sections import Sections, law, reach_and_flexibility
from geom.hang.sensitivity import Answers

Floats = NDArray[np.float64]


def answers_loaded(hang: Loaded, rate: Floats) -> tuple[Answers, Floats]:
    """Return how the greatest sag of loaded members changes, and by a kelvin, m/K; NaN under a spread load.

    Parameters
    ----------
    hang : Loaded
        n members in no wind.
    rate : ndarray, shape (n,)
        Growth of a length for a kelvin, 1/K.
    """
    with np.errstate(all="ignore"):
        return _answers(hang, rate)


def _answers(hang: Loaded, rate: Floats) -> tuple[Answers, Floats]:
    own, span, rise = hang.sections, hang.span, hang.level_difference
    _, whole = _flexibility(own, hang.tension)
    point, part = _flexibility(_up_to(own, _deepest(hang)), hang.tension)
    slope = rise / span
    under = np.stack([slope, np.zeros_like(slope), -np.ones_like(slope)], axis=1)
    last, stiffness = hang.course.after[:, -1], own.stiffness[:, -1]
    ahead = last * (1.0 / stiffness + 1.0 / np.linalg.norm(last, axis=1))[:, np.newaxis]
    across = np.stack([span, np.zeros_like(span), rise], axis=1)
    out, up = np.broadcast_to([1.0, 0.0, 0.0], across.shape), np.broadcast_to([0.0, 0.0, 1.0], across.shape)

    def sag(closing: Floats) -> Floats:
        moved = (part @ np.linalg.solve(whole, closing[..., np.newaxis]))[..., 0]
        return np.where(hang.spread > 0.0, np.nan, (under * moved).sum(axis=1))

    x = point[:, 0]
    kelvin = sag(-across) + (under * point).sum(axis=1)
    none = np.full_like(span, np.nan)
    answers = Answers(length=sag(-ahead), softness=none, apart=sag(out) - x * rise / span**2, raised=sag(up) + x / span)
    return answers, kelvin * rate


def _flexibility(sections: Sections, tension: Floats) -> tuple[Floats, Floats]:
    part = law(sections)
    missing = np.isnan(tension[:, 0])
    start = np.where(missing[:, np.newaxis], [1.0, 0.0, 0.0], tension)
    reached, flexibility = reach_and_flexibility(part, start[:, np.newaxis] - part.lost)
    flexibility[missing] = np.eye(3)
    reached[missing] = np.nan
    return reached, flexibility


def _deepest(hang: Loaded) -> Floats:
    """Return the unstretched arcs from `from` to where the members stand farthest under the chord, (n,) m."""
    own, course = hang.sections, hang.course
    slope = (hang.level_difference / hang.span)[:, np.newaxis]
    arc = (course.before[:, :, 2] - slope * course.before[:, :, 0]) / own.load[:, :, 2]
    arc = np.clip(np.nan_to_num(arc), 0.0, own.length)
    ends = np.cumsum(own.length, axis=1)
    arcs = np.concatenate([ends - own.length + arc, ends], axis=1)
    points = hang.at_arc(np.minimum(arcs, ends[:, -1:]))
    under = np.nan_to_num(points[:, :, 2] - slope * points[:, :, 0])
    return np.asarray(arcs[np.arange(len(arcs)), np.argmin(under, axis=1)])


def _up_to(sections: Sections, arc: Floats) -> Sections:
    """Return the sections up to an arc; those beyond it of no length."""
    begin = np.cumsum(sections.length, axis=1) - sections.length
    length = np.clip(arc[:, np.newaxis] - begin, 0.0, sections.length)
    return Sections(length, sections.stiffness, sections.load, sections.point)
