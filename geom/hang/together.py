"""What pieces made of several members share: one solid, cautions said once, the greatest difference."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np

from geom.result import Caution, Column, Piece, Quantity, Table, Unit, Used
from geom.solids import Solid, Union

_NONE = Unit("")


def one_solid(mark: str, parts: Sequence[Piece]) -> tuple[Solid, ...]:
    """Return the solids of all parts as one, called by the piece's mark; none where no part has any."""
    solids = [solid for part in parts for solid in part.solids]
    if not solids:
        return ()
    if len(solids) == 1:
        return (replace(solids[0], mark=mark),)
    return (Solid(mark, sum(solid.volume for solid in solids), Union(tuple(solid.body for solid in solids))),)


def said_once(mark: str, parts: Sequence[Piece]) -> tuple[Caution, ...]:
    """Return the parts' cautions: one that holds for every part alike is the piece's, others stay their part's."""
    found: dict[tuple[str, str], dict[str, Caution]] = {}
    for part in parts:
        for caution in part.cautions:
            found.setdefault((caution.code, caution.text), {})[part.mark] = caution
    return tuple(
        caution
        for alike in found.values()
        for caution in (
            [replace(next(iter(alike.values())), piece=mark)] if len(alike) == len(parts) else alike.values()
        )
    )


def worst(parts: Sequence[Piece], wanted: Quantity | None = None) -> Quantity | None:
    """Return the greatest difference of all parts, or of those asked for what is `wanted`; None where none has any."""
    found = [
        part.difference for part in parts if part.difference is not None and (wanted is None or part.intended == wanted)
    ]
    return max(found, key=_size, default=None)


def _size(quantity: Quantity) -> float:
    return abs(quantity.value) if quantity.value is not None else 0.0


def one_used(parts: Sequence[Piece]) -> Used:
    """Return what all parts were computed from; of several stocks only their sources."""
    found = list(dict.fromkeys(part.used for part in parts))
    return found[0] if len(found) == 1 else Used("; ".join(dict.fromkeys(used.source for used in found)))


def by_stock(mark: str, strands: Sequence[Piece]) -> Table:
    """Return the table of what is needed of each stock: strands, links, length, mass."""
    names = list(dict.fromkeys(strand.stocks[0].name for strand in strands))
    of = np.array([names.index(strand.stocks[0].name) for strand in strands])
    cuts = [strand.cuts[0] for strand in strands]
    links = np.array([cut.links or 0 for cut in cuts])
    length, mass = np.array([cut.cut_length for cut in cuts]), np.array([cut.mass for cut in cuts])
    counted = np.bincount(of, links)
    return Table(
        "strands by stock",
        (
            Column("stock", _NONE, "stock", tuple(names)),
            Column("strands", _NONE, "strands", np.bincount(of).astype(np.int64)),
            Column("links", _NONE, "links", np.where(counted > 0, counted, np.nan)),
            Column("cut_length", Unit("m"), "cut length in all", np.bincount(of, length)),
            Column("mass", Unit("kg"), "mass", np.bincount(of, mass)),
        ),
        mark,
    )
