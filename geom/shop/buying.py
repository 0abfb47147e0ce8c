"""What to buy: the cuts of a design laid on the reels and bars of each stock, spares counted in."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from geom.result import NAN, Cut, PatternCut, StockPattern, StockPlan
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.shop.cutting import CuttingPlan, plan, plan_links


def stock_plans(cuts: Sequence[Cut], stock: Mapping[str, Stock], setting: Setting) -> tuple[StockPlan, ...]:
    """Return what to buy of each stock, in the order in which the cut list first names it.

    Parameters
    ----------
    cuts : sequence of Cut
        The whole cut list. Cuts of something that is no stock (blocks of an arch) are passed over.
    stock : mapping of str to Stock
        The stocks of the design by name.
    setting : Setting
        Kerf and spares of the shop.

    Notes
    -----
    Spares are a share of the order, not of the pieces: they add to the length ordered and are not cut.
    """
    names = dict.fromkeys(cut.stock for cut in cuts if cut.stock in stock)
    return tuple(_plan([cut for cut in cuts if cut.stock == name], stock[name], setting) for name in names)


def _plan(cuts: Sequence[Cut], stock: Stock, setting: Setting) -> StockPlan:
    counts = [cut.copies for cut in cuts]
    if stock.counted and stock.pitch:
        links = [cut.links or 0 for cut in cuts]
        lost = 1 if stock.kind == "chain" else 0
        found = plan_links(links, counts, pitch=stock.pitch, sold=stock.sold, wire=stock.wire or 0.0, lost=lost)
    else:
        found = plan([cut.cut_length for cut in cuts], counts, sold=stock.sold, kerf=setting.shop.kerf)
    return _stated(stock, cuts, found, setting.shop.spares)


def _stated(stock: Stock, cuts: Sequence[Cut], found: CuttingPlan, spares: float) -> StockPlan:
    extra = math.ceil(found.links * spares - 1e-9) if found.links is not None else None
    order = found.bought * (1.0 + spares) if found.needed is not None else NAN
    if extra is not None and stock.pitch and found.needed is not None:
        order = found.bought + extra * stock.pitch
    return StockPlan(
        stock=stock.name,
        needed=found.needed,
        least_possible=found.least_possible,
        patterns=tuple(
            StockPattern(
                length=pattern.length,
                count=pattern.count,
                cuts=tuple(PatternCut(cuts[place].mark, number) for place, number in pattern.cuts),
                left=pattern.left,
            )
            for pattern in found.patterns
        ),
        order_length=order,
        links=found.links,
        links_lost=found.links_lost,
        spares=extra,
    )
