"""A net as asked for, free of how it was written."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from geom.net.network import Flags, Floats, Indices, Network, flags, indices
from geom.net.pattern import Pattern
from geom.result import fixed
from geom.setting.stock import Stock
from geom.setting.supports import Support


@dataclass(frozen=True, eq=False)
class AskedNet:
    """One net, ready to be solved.

    Parameters
    ----------
    mark : str
    pattern : Pattern
        As laid out; where an anchor is a support, its node stands there.
    anchors : ndarray of int, shape (k,)
        Held nodes, rising.
    supports : tuple of Support or None
        Of each anchor the support it is held by; None where it is held at the node itself.
    stocks : tuple of Stock
        The stocks of its members, and `stock_of` (m,) which of them each member is made of.
    density : ndarray, shape (m,), N/m
        Force density of each member, at rest in the shape to be found.
    straight : ndarray of bool, shape (m,)
        Members that are straight; the others hang in curves of their own.
    node_mass : float, kg
        At every node.
    """

    mark: str
    pattern: Pattern
    anchors: Indices
    supports: tuple[Support | None, ...]
    stocks: tuple[Stock, ...]
    stock_of: Indices
    density: Floats
    straight: Flags
    node_mass: float = 0.0
    copies: int = 1

    def __post_init__(self) -> None:
        m = len(self.pattern.members)
        object.__setattr__(self, "anchors", indices(self.anchors))
        object.__setattr__(self, "stock_of", indices(self.stock_of))
        object.__setattr__(self, "density", fixed(self.density, m))
        object.__setattr__(self, "straight", flags(self.straight))

    @property
    def network(self) -> Network:
        """The net as its solvers see it."""
        return Network(
            self.pattern.nodes, self.pattern.members, np.isin(np.arange(len(self.pattern.nodes)), self.anchors)
        )

    @property
    def weight(self) -> Floats:
        """Weight of each member, (m,) N/m."""
        return np.array([stock.weight for stock in self.stocks])[self.stock_of]

    def node_mark(self, node: int) -> str:
        """Mark of a node, `<net>.N<n>` from 1."""
        return f"{self.mark}.N{node + 1}"

    def member_mark(self, member: int) -> str:
        """Mark of a member, `<net>.<n>` from 1."""
        return f"{self.mark}.{member + 1}"

    def support_mark(self, anchor: int) -> str:
        """Mark of the support of an anchor: its own name, else its node's mark."""
        support = self.supports[anchor]
        return support.name if support is not None and support.name else self.node_mark(int(self.anchors[anchor]))
