r"""Nets by force densities.

H.-J. Schek, "The force density method for form finding and computation of general networks", 1974. A
member's force density q is its force over its length. With the branch-node matrix C (C_f: columns of the
free nodes, C_a: of the anchors) and Q = diag(q), the equilibrium of the free nodes is linear in their
coordinates,

    (C_f' Q C_f) x_f = f_x - C_f' Q C_a x_a            and the same in y and z,

with one sparse symmetric positive definite matrix for all three (f: loads).

**Straight members** weigh on their nodes, half each: f_z contains -(w/2) |C_f|' l, where the lengths l are
those of the shape found.

**Hanging members** are as linear. Let q = H/S be the horizontal pull over the distance S on plan. Such a
member is a catenary of parameter c = H/w, so that

    u = S/(2c) = S w/(2 H) = w/(2 q)

is a constant of the member, whatever shape the net takes. By the closed forms of a catenary between two
points (level difference v, length L)

    L^2 = (S sinh(u)/u)^2 + v^2
    vertical pull at the ends = (w v/2) coth u -+ w L/2 = (q u coth u) v -+ w L/2

the member pulls on its ends like a straight one of force density q on plan and q u coth u upward, and
weighs half on each. So x and y are solved with q, z with q u coth u, and the hung net is in exact
equilibrium. Without weight u = 0 and u coth u = 1: the straight net.

In both models x and y do not depend on z, and what is left is one equation in the elevations,

    K z + (w/2) |C_f|' sqrt(s^2 + (C z)^2) = f_z,        s = S (straight) or S sinh(u)/u (hanging),

solved by back-solves of what the nodes lack to balance, with one factor of K (or of the matrix of x and y,
where that is near). Where that converges slowly (deep nets of heavy members) it is finished by Newton's
method. For hanging members q u coth u > w/2, so the Jacobian is an M-matrix for every z, with entries
bounded away from zero: there is exactly one solution, and since the equation is convex in z Newton's method
falls to it monotonically from anywhere (Ortega and Rheinboldt, "Iterative Solution of Nonlinear Equations
in Several Variables", 1970, ch. 13.3). For straight members of q < w/2 there may be none: a member cannot
hold more than its density says.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy.sparse.linalg import SuperLU

from geom.errors import SolveError
from geom.net.elevations import Upright, elevations
from geom.net.members import shape_of, sinh_over, u_coth
from geom.net.network import Floats, Network
from geom.net.shape import NetShape
from geom.net.system import System, factored, system_of

_MOST_U = 100.0  # a member of u = 100 is 1e41 times as long as its plan distance: nothing anyone asks for
_ALIKE = 0.05  # spread of u coth u up to which a second factorisation costs more than the back-solves it saves
_BALANCED = 1e-6  # residual over the greatest force; rounding alone leaves under 1e-9 at 100,000 nodes


def solve(
    network: Network,
    density: ArrayLike,
    *,
    weight: ArrayLike = 0.0,
    loads: ArrayLike | None = None,
    straight: ArrayLike = False,
) -> NetShape:
    """Return the net in equilibrium under force densities, its own weight and loads.

    A hanging member comes out at least S sinh(u)/u long, u = w/(2 q): a density of half the weight per
    metre makes it 1.18 times its plan distance, one of a tenth 14.8 times.

    Parameters
    ----------
    density : array_like, shape () or (m,), N/m
        Of a straight member its force over its length, of a hanging one its horizontal pull over its plan
        distance; positive.
    weight : array_like, shape () or (m,), N/m
        Per metre of the length found.
    loads : array_like, shape (n, 3), N
        On nodes, z up.
    straight : array_like of bool, shape () or (m,)
        Which members are straight, weighing half on either node; the others hang in catenaries of their own.

    Raises
    ------
    ValueError
        If a density is not positive, a weight is negative, or no anchor holds a part of the net.
    SolveError
        If a weight per metre is over 200 times the force density, if straight members are too heavy for their
        densities to hold, or if the shape was not reached.
    """
    system = system_of(network, density, weight, loads)
    lumped = np.broadcast_to(np.asarray(straight, dtype=np.bool_), system.weight.shape)
    # A straight member is one of u = 0 that keeps its weight.
    u = np.where(lumped, 0.0, system.weight / (2.0 * system.density))
    if np.any(u > _MOST_U):
        raise SolveError(f"a weight per metre of {2.0 * u.max():g} times the force density hangs too deep to solve")
    factor = factored(system.matrix(system.density))
    level = _level(system, factor)
    upright, factor = _upright(system, u, _across(system, level), factor)
    nodes = np.column_stack([level, elevations(upright, factor, level)])
    return _checked(shape_of(system, u, nodes, lumped))


def _level(system: System, factor: SuperLU | None) -> Floats:
    """Return x and y (n, 2) of all nodes."""
    level = system.network.nodes[:, :2].copy()
    if factor is not None:
        free, held = system.network.free, system.network.held
        middle = level[held].mean(axis=0)  # solved about the anchors' middle: rounding is of the net's size
        fixed_part = system.branch @ np.where(held[:, None], level - middle, 0.0)
        pull = system.loads[free, :2] - system.loose.T @ (system.density[:, None] * fixed_part)
        level[free] = middle + factor.solve(pull)
    return level


def _across(system: System, level: Floats) -> Floats:
    """Return the plan distance (m,) of the members' ends."""
    across: Floats = system.branch @ level
    return np.hypot(across[:, 0], across[:, 1])


def _upright(system: System, u: Floats, plan: Floats, factor: SuperLU | None) -> tuple[Upright, SuperLU | None]:
    """Return the equation of the elevations, and the factor of its matrix."""
    ratio, s, half, load = u_coth(u), sinh_over(u) * plan, 0.5 * system.weight, system.loads[:, 2]
    on_free = ratio[~system.network.held[system.network.members].all(axis=1)]
    least, most = on_free.min(initial=np.inf), on_free.max(initial=1.0)
    if most - least > _ALIKE * (most + least):
        upward = system.density * ratio
        return Upright(system, upward, s, half, load), factored(system.matrix(upward))
    # Upward densities are the level ones times about r: divided by r, the matrix is nearly that of x and y. Each
    # member's density is so near that a back-solve with its factor leaves (most - least)/(most + least) of an error.
    r = 0.5 * (most + least) if on_free.size else 1.0
    return Upright(system, system.density * (ratio / r), s, half / r, load / r), factor


def _checked(shape: NetShape) -> NetShape:
    greatest = float(shape.force.max(initial=0.0))
    if not shape.residual <= _BALANCED * greatest:
        raise SolveError(
            f"a node is left out of balance by {shape.residual:.1e} N, where members pull {greatest:.1e} N"
        )
    return shape
