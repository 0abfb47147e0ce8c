"""The figures of a net, as the figures file has them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.result import NAN, Metres, MetresArray, Newtons, NewtonsArray, Rows


@dataclass(frozen=True, eq=False)
class NodeRows(Rows):
    """Every node as hung, `at` (n, 3) in the design's axes."""

    mark: tuple[str, ...]
    at: MetresArray
    anchored: NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class MemberRows(Rows):
    """Every member as hung, (m,) each; `from_` and `to` are marks of nodes.

    `hung_length` is of the shape that was solved, `pin_to_pin` what is made; `slack` says that the chord is shorter
    than the length by over 1 %. A pull is positive.
    """

    mark: tuple[str, ...]
    from_: tuple[str, ...]
    to: tuple[str, ...]
    chord: MetresArray
    force_from: NewtonsArray
    force_to: NewtonsArray
    horizontal: NewtonsArray
    hung_length: MetresArray
    pin_to_pin: MetresArray
    links: tuple[int | None, ...]
    slack: NDArray[np.bool_]


@dataclass(frozen=True)
class NetFigures:
    """Figures of one net. `depth` is from the lowest anchor to the lowest point, members included."""

    nodes: NodeRows
    members: MemberRows
    lowest: Metres
    depth: Metres
    residual: Newtons
    group_move: Metres = NAN
