"""Patterns: where the nodes of a net start, and which of them are joined by members."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import ArrayLike

from geom.net.network import Flags, Floats, Indices, flags, indices
from geom.result import fixed

MOST_MEMBERS = 1_000_000  # a design of more is refused
_FLAT = 1e-9  # area over the square of the longest side, under which four corners are a line to any measure


class PatternError(ValueError):
    """A pattern that cannot be laid out; `key` is what to change ("outline", "spacing", "divisions", ...)."""

    def __init__(self, key: str, text: str) -> None:
        super().__init__(text)
        self.key = key


@dataclass(frozen=True, eq=False)
class Pattern:
    """A net as laid out, before it hangs.

    Parameters
    ----------
    outline : ndarray, shape (k, 3), m
        Its corners, in order.
    nodes : ndarray, shape (n, 3), m
        Each with at least one member.
    members : ndarray of int, shape (m, 2)
    edge : ndarray of bool, shape (m,)
        Members that run along the outline or the rim of a hole.
    corners : ndarray of int
        Nodes at the corners of the outline; fewer than corners where a corner has no member.
    boundary : ndarray of int
        Nodes on the outline, corners among them, in order round it from the first corner.
    rims : tuple of ndarray of int
        Nodes round each hole, in order.
    spacings : ndarray, shape (k, 2, 3), m
        Pairs of points a mesh apart: what is worth dimensioning of it.
    """

    outline: Floats
    nodes: Floats
    members: Indices
    edge: Flags
    corners: Indices
    boundary: Indices
    rims: tuple[Indices, ...] = ()
    spacings: Floats = field(default_factory=lambda: np.zeros((0, 2, 3)))

    def __post_init__(self) -> None:
        object.__setattr__(self, "outline", fixed(self.outline, -1, 3))
        object.__setattr__(self, "nodes", fixed(self.nodes, -1, 3))
        object.__setattr__(self, "members", indices(self.members).reshape(-1, 2))
        object.__setattr__(self, "edge", flags(self.edge))
        object.__setattr__(self, "corners", indices(self.corners))
        object.__setattr__(self, "boundary", indices(self.boundary))
        object.__setattr__(self, "rims", tuple(indices(rim) for rim in self.rims))
        object.__setattr__(self, "spacings", fixed(self.spacings, -1, 2, 3))


def square(
    outline: ArrayLike,
    *,
    divisions: tuple[int, int] | None = None,
    spacing: float | None = None,
    edge_members: bool = True,
    say: Callable[[float], str] = "{:g} m".format,
) -> Pattern:
    """Return a grid of four-sided meshes over a four-cornered outline.

    Nodes divide opposite sides into equal parts and are joined straight across (bilinear between the
    corners), so the elevations of the outline spread inward too. Nodes are numbered along the first side,
    row after row; all members along it come before those across it.

    Parameters
    ----------
    outline : array_like, shape (4, 3), m
        Corners in order, either way round; every corner points outward.
    divisions : (int, int)
        Meshes along the first side (and the third), and along the second (and the fourth).
    spacing : float, m
        Instead of `divisions`: each pair of opposite sides is divided into round(longer / spacing) equal
        parts, at least one; lengths are taken on plan.
    edge_members : bool
        False leaves out the members along the outline, and with them the corners, where nothing would meet.
    say : callable
        How a length in metres is put in a refusal.

    Raises
    ------
    PatternError
        If the outline is no four-cornered shape with an area on plan, or the divisions make no net.
    """
    corners = np.asarray(outline, dtype=np.float64)
    _check_outline(corners)
    nu, nv = _divisions(corners, divisions, spacing, say)
    whole = _grid(corners, nu, nv)
    return whole if edge_members else _without_edges(whole)


def _check_outline(corners: Floats) -> None:
    if corners.shape != (4, 3):
        count = len(corners) if corners.ndim else 0
        raise PatternError("outline", f"has {count} corners; give the four of a square net, [x, y, z] each, in order")
    plan = corners[:, :2] - corners[:, :2].mean(axis=0)
    sides = np.roll(plan, -1, axis=0) - plan
    longest = float(np.linalg.norm(sides, axis=1).max())
    for k in np.flatnonzero(np.linalg.norm(sides, axis=1) <= _FLAT * longest):
        raise PatternError("outline", f"has corners {k + 1} and {(k + 1) % 4 + 1} at one place on plan; move one")
    if _crosses(plan, 0) or _crosses(plan, 1):
        raise PatternError("outline", "has two sides that cross on plan; give the corners in order round the net")
    area = 0.5 * sum(_cross(plan[k], plan[(k + 1) % 4]) for k in range(4))  # positive anticlockwise
    if abs(area) <= _FLAT * longest**2:
        raise PatternError("outline", "lies on one line on plan and encloses no area; give four corners round one")
    turns = np.array([_cross(sides[k - 1], sides[k]) for k in range(4)])
    inward = np.flatnonzero(turns * np.sign(area) < -_FLAT * longest**2)
    if len(inward):
        raise PatternError(
            "outline",
            f"has corner {inward[0] + 1} pointing inward on plan, where meshes would lie over one another; "
            "give four corners that point outward",
        )


def _cross(a: Floats, b: Floats) -> float:
    return float(a[0] * b[1] - a[1] * b[0])


def _crosses(plan: Floats, first: int) -> bool:
    """Whether side `first` and the side opposite cut each other: each parts the ends of the other."""
    a, b, c, d = np.roll(plan, -first, axis=0)
    return _cross(b - a, c - a) * _cross(b - a, d - a) < 0.0 and _cross(d - c, a - c) * _cross(d - c, b - c) < 0.0


def _divisions(
    corners: Floats, divisions: tuple[int, int] | None, spacing: float | None, say: Callable[[float], str]
) -> tuple[int, int]:
    if (divisions is None) == (spacing is None):
        raise PatternError("spacing", "give spacing or divisions, one of the two")
    nu, nv = divisions if divisions is not None else _from_spacing(corners, spacing or 0.0, say)
    if nu < 1 or nv < 1:
        raise PatternError("divisions", f"{nu} by {nv} meshes make no net; give at least 1 each way")
    count = nu * (nv + 1) + nv * (nu + 1)
    if count > MOST_MEMBERS:
        key = "spacing" if divisions is None else "divisions"
        raise PatternError(
            key,
            f"{nu} by {nv} meshes come to {count:,} members; give a coarser net of {MOST_MEMBERS:,} at most",
        )
    return nu, nv


def _from_spacing(corners: Floats, spacing: float, say: Callable[[float], str]) -> tuple[int, int]:
    sides = np.linalg.norm((np.roll(corners, -1, axis=0) - corners)[:, :2], axis=1)
    if not 0.0 < spacing <= sides.max():
        raise PatternError(
            "spacing",
            f"{say(spacing)} does not fit an outline whose longest side is {say(float(sides.max()))} on plan; "
            "give more than 0 and at most that",
        )
    along, across = max(sides[0], sides[2]), max(sides[1], sides[3])
    return max(1, math.floor(along / spacing + 0.5)), max(1, math.floor(across / spacing + 0.5))


def _grid(corners: Floats, nu: int, nv: int) -> Pattern:
    u = (np.arange(nu + 1) / nu)[None, :, None]
    v = (np.arange(nv + 1) / nv)[:, None, None]
    first, second, third, fourth = corners
    steps = [(first, first + (second - first) / nu)] if nu > 1 else []
    steps += [(second, second + (third - second) / nv)] if nv > 1 else []
    nodes = (1 - v) * ((1 - u) * first + u * second) + v * ((1 - u) * fourth + u * third)
    at = np.arange((nu + 1) * (nv + 1)).reshape(nv + 1, nu + 1)
    along = np.stack([at[:, :-1], at[:, 1:]], axis=-1)
    across = np.stack([at[:-1], at[1:]], axis=-1)
    edge_along, edge_across = np.zeros(along.shape[:2], bool), np.zeros(across.shape[:2], bool)
    edge_along[[0, -1]] = True
    edge_across[:, [0, -1]] = True
    return Pattern(
        outline=corners,
        nodes=nodes.reshape(-1, 3),
        members=np.concatenate([along.reshape(-1, 2), across.reshape(-1, 2)]),
        edge=np.concatenate([edge_along.ravel(), edge_across.ravel()]),
        corners=at[[0, 0, -1, -1], [0, -1, -1, 0]],
        boundary=np.concatenate([at[0, :-1], at[:-1, -1], at[-1, :0:-1], at[:0:-1, 0]]),
        spacings=np.array(steps).reshape(-1, 2, 3),
    )


def _without_edges(whole: Pattern) -> Pattern:
    """Return the pattern without members along the outline, nor the nodes at which nothing is left."""
    members = whole.members[~whole.edge]
    if not len(members):
        raise PatternError(
            "edge_stock",
            "without members along the edges one mesh has no member; divide the outline or give edge_stock",
        )
    kept = np.zeros(len(whole.nodes), dtype=np.bool_)
    kept[members] = True
    number = np.cumsum(kept) - 1
    return replace(
        whole,
        nodes=whole.nodes[kept],
        members=number[members],
        edge=np.zeros(len(members), dtype=np.bool_),
        corners=number[whole.corners[kept[whole.corners]]],
        boundary=number[whole.boundary[kept[whole.boundary]]],
        rims=tuple(number[rim[kept[rim]]] for rim in whole.rims),
    )
