r"""The thrust of an arch under its own weight, and the line along which it runs.

A ring of three redundancies carries its weight in as many ways as there are lines of thrust (Heyman, *The stone
skeleton*, 1966). Two of them are given here:

* where the axis is the catenary, the line with H = w a through the middle of the crown, w being the weight per metre of
  axis: at every joint normal to the axis its force is normal to the joint, outward of the axis by
  :math:`t^2 \cos\theta (1 - \cos\theta)/(12 a)`;
* in any other ring, the line whose greatest eccentricity over thickness is least.

The second is a linear-fractional programme in three unknowns (Livesley, *Int. J. Num. Meth. Eng.* 12, 1978, in the
form with the force at one joint unknown), solved by Dinkelbach's iteration over linear programmes in the form of
Crouzeix, Ferland and Schaible (*J. Optim. Theory Appl.* 49, 1986). All forces are taken over the horizontal thrust
and all lengths over the thickness, so that no tolerance of the solver depends on the size of the arch: with forces as
they come, a thin arch is light, and any line seems good.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq, linprog

from geom.arch.cuts import Cuts, bodies, cut, feet, joined
from geom.arch.fit import Scale
from geom.arch.refusal import NoArch
from geom.arch.ring import Profile, Ring, stand
from geom.errors import SolveError

Floats = NDArray[np.float64]

PIECES = 200  # into which a ring is divided: joints a two-hundredth apart miss the greatest eccentricity by 1e-4 of it
_ROUNDS = 50  # of Dinkelbach, which takes 4 to 8
_SETTLED = 1e-9  # of the eccentricity over thickness: ten times the tolerance HiGHS can be asked for
_FEASIBLE = 1e-10  # the least that HiGHS takes
_FIRST_STEP, _LAST_STEP = 0.7, 1e-6  # of the logarithm of a scale: a doubling, and what no dimension shows
_TOO_LITTLE = "is less than any arch {} thick between these springings thrusts; give more"
_LEAST = 0.035  # of the span: no shape of a scale under a thirtieth is fitted


@dataclass(frozen=True)
class Joints:
    """A ring divided for statics: joints in order, and the weights between them.

    Attributes
    ----------
    centre, along : ndarray, shape (n, 2)
        Middles of the joints (m) and unit vectors square to them, toward ``to``.
    thickness : ndarray, shape (n,)
        Lengths of the joints, m.
    weight, weight_at : ndarray, shape (n - 1,)
        Weights of the pieces between joints (N per unit weight: m2) and abscissae of their centres of gravity, m.
    """

    centre: Floats
    along: Floats
    thickness: Floats
    weight: Floats
    weight_at: Floats


@dataclass(frozen=True)
class Thrust:
    """The thrust of a ring.

    Attributes
    ----------
    horizontal : float
        Horizontal thrust, N.
    on_from, on_to : ndarray, shape (2,)
        Forces (x, z) on the abutments, N: outward and down.
    weight : float
        Weight of the ring, N.
    eccentricity : float
        Greatest eccentricity over thickness of the line; over a half means that it leaves the ring.
    points : ndarray, shape (n, 2)
        The line where it passes the joints, m.
    """

    horizontal: float
    on_from: Floats
    on_to: Floats
    weight: float
    eccentricity: float
    points: Floats


def thrust(ring: Ring, unit_weight: float) -> Thrust:
    """Return the thrust of a ring under its own weight.

    Parameters
    ----------
    ring : Ring
        The ring.
    unit_weight : float
        Weight per area of its elevation, N/m2 (density x gravity x depth).
    """
    joints = divided(ring, PIECES)
    state = _crown_state(ring, joints) if ring.profile.curve == "axis" else _least_eccentric(ring, joints)
    return _thrust_of(joints, state, unit_weight)


def stand_with_thrust(span: float, level: float, horizontal: float, unit_weight: float, profile: Profile) -> Ring:
    """Return the ring whose own horizontal thrust is `horizontal` (N); the greater it is, the flatter the arch.

    Raises
    ------
    SolveError
        If no arch between the springings has it.
    """
    per_metre = unit_weight * profile.thickness
    floor = max(0.0, profile.thickness * -profile.share("intrados"))  # the scale from which the intrados does not fold
    if profile.curve == "axis":
        if horizontal <= per_metre * floor:
            raise NoArch(_TOO_LITTLE, profile.thickness, key="thrust")
        return stand(span, level, Scale(horizontal / per_metre), profile)

    def at(log: float) -> Ring:
        return stand(span, level, Scale(floor + float(np.exp(log))), profile)

    def shortfall(log: float) -> float:
        return thrust(at(log), unit_weight).horizontal / horizontal - 1.0

    guess = np.log(max(horizontal / per_metre - floor, _LEAST * span))
    low, high = _bracket(shortfall, float(guess), float(np.log(_LEAST * span)), profile.thickness)
    return at(float(brentq(shortfall, low, high, xtol=1e-13, rtol=1e-14)))


def divided(ring: Ring, pieces: int) -> Joints:
    """Return a ring divided by joints normal to its axis, at equal lengths of it, with both feet among them.

    A level foot bears the whole piece up to the first joint that reaches the intrados: joints that would run out on
    the foot are left out, since the foot carries part of what they would.
    """
    first, last = feet(ring)
    if ring.profile.foot == "level":
        start, end = ring.ends["intrados"]
        cuts = joined(first, _even(ring, start, end, pieces + 1), last)
    else:
        start, end = ring.ends["axis"]
        cuts = joined(first, _even(ring, start, end, pieces + 1)[1:-1], last)
    parts = bodies(ring, cuts[:-1], cuts[1:])
    centre = 0.5 * (cuts.bottom + cuts.top)
    return Joints(centre, cuts.along, cuts.length, parts.area, parts.centroid[:, 0])


def _even(ring: Ring, start: float, end: float, count: int) -> Cuts:
    length = float(ring.axis.length(start, end))
    # The outermost are at the very ends of the intrados: a rounding further out they would run out on the foot.
    inner = ring.axis.along(start, length * np.linspace(0.0, 1.0, count)[1:-1])
    return cut(ring, np.concatenate([[start], inner, [end]]))


@dataclass(frozen=True)
class _Forces:
    """Forces at the joints over the horizontal thrust, as affine functions of three unknowns.

    The unknowns are the whole weight, the upward push on the first joint (both over the horizontal thrust), and the
    moment about the first joint's middle (over horizontal thrust and the greatest thickness). `normal` (n, 4) and
    `moment` (n, 4) hold the coefficients and, last, the constant; a moment is anticlockwise, of what lies on the
    ``from`` side.
    """

    normal: Floats
    moment: Floats
    thickness: Floats  # over the greatest

    def eccentricity(self, state: Floats) -> Floats:
        """Return eccentricities over the joints' own thickness, outward positive."""
        full = np.append(state, 1.0)
        ratio: Floats = -(self.moment @ full) / (self.normal @ full) / self.thickness
        return ratio


def _forces(joints: Joints) -> _Forces:
    size = float(np.max(joints.thickness))
    weight = np.sum(joints.weight)
    carried = np.concatenate([[0.0], np.cumsum(joints.weight)]) / weight
    turning = np.concatenate([[0.0], np.cumsum(joints.weight * joints.weight_at)]) / weight
    (tx, tz), (x, z) = joints.along.T, joints.centre.T
    ones = np.ones_like(x)
    normal = np.stack([-tz * carried, tz, 0.0 * ones, tx], axis=-1)
    arm = (x[0] - x) / size
    moment = np.stack([(carried * x - turning) / size, arm, ones, -(z[0] - z) / size], axis=-1)
    return _Forces(normal, moment, joints.thickness / size)


def _crown_state(ring: Ring, joints: Joints) -> Floats:
    """Return the unknowns of the line with H = w a, level through the middle of the crown."""
    horizontal = ring.profile.thickness * ring.axis.crown_radius  # per unit weight, m2
    first, _ = feet(ring)
    # A crown beyond the springing leaves a part of negative area, which carries the sum on all the same.
    part = bodies(ring, first, cut(ring, np.zeros(1)))
    left, at = float(part.area[0]), float(part.centroid[0, 0])
    crown, start = ring.axis.point(0.0), joints.centre[0]
    push = left / horizontal
    moment = (start[1] - crown[1]) - (start[0] - crown[0]) * push + (at - crown[0]) * push
    return np.array([np.sum(joints.weight) / horizontal, push, moment / np.max(joints.thickness)])


def _least_eccentric(ring: Ring, joints: Joints) -> Floats:
    forces = _forces(joints)
    state = _crown_state(ring, joints)
    worst = float(np.max(np.abs(forces.eccentricity(state))))
    for _ in range(_ROUNDS):
        better = _programme(forces, state, worst)
        reached = float(np.max(np.abs(forces.eccentricity(better))))
        if reached >= worst - _SETTLED * max(1.0, worst):
            return state if worst < reached else better
        state, worst = better, reached
    raise SolveError(
        f"the line of thrust did not settle in {_ROUNDS} rounds; its eccentricity is {worst:g} thicknesses"
    )


def _programme(forces: _Forces, state: Floats, worst: float) -> Floats:
    """Return the unknowns with the least greatest (|moment| - worst x normal x thickness)/(last normal x thickness).

    That division makes Dinkelbach's step one of Newton's: without it steep arches, whose normal forces differ tenfold,
    take a hundred rounds.
    """
    allowed = worst * forces.normal * forces.thickness[:, None]
    rows = np.concatenate([forces.moment - allowed, -forces.moment - allowed, -forces.normal])
    last = forces.normal @ np.append(state, 1.0) * forces.thickness
    slack = np.concatenate([np.tile(-last, 2), np.zeros(len(forces.normal))])
    found = linprog(
        np.array([0.0, 0.0, 0.0, 1.0]),
        A_ub=np.column_stack([rows[:, :3], slack]),
        b_ub=-rows[:, 3],
        bounds=[(0.0, None), (None, None), (None, None), (None, None)],
        method="highs-ds",
        options={"primal_feasibility_tolerance": _FEASIBLE, "dual_feasibility_tolerance": _FEASIBLE},
    )
    if found.x is None:
        raise SolveError(f"no line of thrust was found: {found.message}")
    return np.asarray(found.x[:3], dtype=np.float64)


def _thrust_of(joints: Joints, state: Floats, unit_weight: float) -> Thrust:
    forces = _forces(joints)
    ratio = forces.eccentricity(state)
    outward = np.stack([-joints.along[:, 1], joints.along[:, 0]], axis=-1)
    weight = float(np.sum(joints.weight)) * unit_weight
    horizontal = weight / float(state[0])
    push = horizontal * float(state[1])
    return Thrust(
        horizontal=horizontal,
        on_from=np.array([-horizontal, -push]),
        on_to=np.array([horizontal, push - weight]),
        weight=weight,
        eccentricity=float(np.max(np.abs(ratio))),
        points=joints.centre + (ratio * joints.thickness)[:, None] * outward,
    )


def _bracket(rising: Callable[[float], float], guess: float, least: float, thickness: float) -> tuple[float, float]:
    """Return a bracket of logarithms of scales, none under `least`; arches too flat for their feet bound it above."""
    low, step = max(guess, least), _FIRST_STEP
    while _stands(rising, low) > 0.0:
        if low <= least:
            raise NoArch(_TOO_LITTLE, thickness, key="thrust")
        low, step = max(low - step, least), 2.0 * step
    step = _FIRST_STEP
    while step > _LAST_STEP:
        value = _stands(rising, low + step)
        if 0.0 <= value < float("inf"):
            return low, low + step
        if value < 0.0:
            low += step
        else:
            step *= 0.5
    raise NoArch("is more than any arch that stands on these springings thrusts; give less", key="thrust")


def _stands(rising: Callable[[float], float], log: float) -> float:
    try:
        return rising(log)
    except SolveError:
        return float("inf")
