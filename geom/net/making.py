"""What is cut for a net: whole links of chain, lengths of rope and rod."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang import links
from geom.net.asked import AskedNet
from geom.net.network import Floats
from geom.net.shape import NetShape
from geom.result import Column, Cut, Table, Unit
from geom.shop.rounding import cut_length


@dataclass(frozen=True, eq=False)
class Made:
    """What is made of each member, (m,) each.

    Parameters
    ----------
    count : ndarray of int
        Whole links, 0 where the stock has none.
    pin_to_pin : ndarray, m
        Node to node as made: the links' inside lengths, or the length found.
    cut : ndarray, m
        Of the material.
    mass : ndarray, kg
        Of one copy.
    """

    count: NDArray[np.int64]
    pin_to_pin: Floats
    cut: Floats
    mass: Floats


def made(asked: AskedNet, shape: NetShape, step: float) -> Made:
    """Return each member as it can be made: whole links nearest to the length found, or a cut rounded to `step`, m."""
    count = np.zeros(len(shape.length), dtype=np.int64)
    pins, cut = shape.length.copy(), shape.length.copy()
    for number, stock in enumerate(asked.stocks):
        of = asked.stock_of == number
        if stock.counted and stock.pitch:
            count[of] = links.count(shape.length[of], stock.pitch)
            pins[of] = cut[of] = count[of] * stock.pitch
        else:
            cut[of] = cut_length(shape.length[of], step=step)
    per_metre = np.array([stock.mass_per_metre for stock in asked.stocks])[asked.stock_of]
    return Made(count, pins, cut, per_metre * cut)


def cuts(asked: AskedNet, made: Made) -> tuple[Cut, ...]:
    """Return a row of the cut list for each member."""
    return tuple(
        Cut(asked.member_mark(n), asked.mark, asked.stocks[of].name, cut, pins, count or None, asked.copies, mass)
        for n, (of, cut, pins, count, mass) in enumerate(
            zip(
                asked.stock_of.tolist(),
                made.cut.tolist(),
                made.pin_to_pin.tolist(),
                made.count.tolist(),
                made.mass.tolist(),
                strict=True,
            )
        )
    )


def alike(asked: AskedNet, made: Made) -> Table:
    """Return the table of members that are cut alike: stock, links, cut length, how many in one net."""
    key = np.stack([asked.stock_of.astype(np.float64), made.cut], axis=1)
    _, first, number = np.unique(key, axis=0, return_index=True, return_counts=True)
    stocks = tuple(asked.stocks[of].name for of in asked.stock_of[first])
    chain = made.count[first]
    columns = (
        Column("stock", Unit(""), "stock", stocks),
        Column("links", Unit(""), "links", np.where(chain > 0, chain, np.nan)),
        Column("cut_length", Unit("m"), "cut length", made.cut[first]),
        Column("pin_to_pin", Unit("m"), "pin to pin", made.pin_to_pin[first]),
        Column("members", Unit(""), "members in one net", number.astype(np.int64)),
        Column("mass", Unit("kg"), "mass of one", made.mass[first]),
    )
    return Table("members alike", columns, asked.mark)
