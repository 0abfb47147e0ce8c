r"""Members that stretch, under loads: point loads, several stocks in series, a load spread over the plan, side wind.

Between loads a member is an elastic catenary (`geom.hang.sections`; W. T. O'Brien and A. J. Francis 1964; H. B.
Jayaraman and W. C. Knudson, "A curved element for the analysis of cable structures", Computers and Structures 14
(1981) 325-333), or, under a spread load, the curve of `geom.hang.spread`. Everything follows from the tension at the
start, one unknown vector (`geom.hang.tension`). A side wind tilts the load of every section and load; where there is
none, loads may be placed on plan instead of along the member, and their arcs are found with the tension
(`geom.hang.placed`).

All functions take arrays with one axis of members and solve all of them at once; NaN where no equilibrium was found.

Examples
--------
>>> from geom.hang.loaded import Loads, Stocks, hang
>>> wire = Stocks(length=[[16.4]], weight=[[1.5]], stiffness=[[2e6]])
>>> lanterns = Loads(at=[[4.0, 8.0, 12.0]], force=[[60.0, 60.0, 60.0]], on_plan=[[True, True, True]])
>>> round(float(hang(16.0, 0.0, wire, loads=lanterns).sag[0]), 3)
1.621
"""

import numpy as np
from numpy.typing import ArrayLike

from geom.hang.blown import blow
from geom.hang.loaded_member import Course, Loaded
from geom.hang.loading import Given, Loads, Stocks, gather, tensions, to_arrays
from geom.hang.placing import place

__all__ = ["Course", "Loaded", "Loads", "Stocks", "hang"]


def hang(
    span: ArrayLike, level_difference: ArrayLike, stocks: Stocks, *, loads: Loads | None = None, spread: ArrayLike = 0.0
) -> Loaded:
    """Hang members under their weight and loads.

    Parameters
    ----------
    span, level_difference : array_like, shape (n,) or ()
        Plan distance between the supports and elevation of `to` over `from`, metres.
    stocks : Stocks
        What the members are made of.
    loads : Loads, optional
        Point loads.
    spread : array_like, shape (n,) or ()
        Load on the plan, newton per metre, downward, 0 or more.

    Returns
    -------
    Loaded
        NaN where a load lies beyond an end, where nothing stretches and the length does not reach, and where no
        equilibrium was found.

    Raises
    ------
    ValueError
        The shapes do not broadcast, or a load is placed on plan in a side wind, where that place is not kept.
    """
    given = to_arrays(span, level_difference, stocks, loads, spread)
    windy = bool((given.aside != 0.0).any() or (given.force_aside != 0.0).any())
    if windy and bool(given.on_plan.any()):
        raise ValueError("a load is placed on plan in a side wind: give its distance along the member")
    with np.errstate(all="ignore"):
        if windy and bool((given.spread > 0.0).any()):
            return blow(given, _hang)
        return _hang(given)


def _hang(given: Given) -> Loaded:
    flat = (given.spread > 0.0) | given.on_plan.any(axis=1)
    arcs, start = given.at.copy(), np.empty((len(given.span), 3))
    chosen, others = np.flatnonzero(flat), np.flatnonzero(~flat)
    if others.size:
        start[others] = tensions(given.of(others), arcs[others])
    if chosen.size:
        start[chosen], arcs[chosen] = place(given.of(chosen))
    return gather(given, arcs, start)
