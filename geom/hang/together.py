"""What pieces made of several members share: one solid, cautions said once, the greatest difference."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from geom.result import Caution, Piece, Quantity
from geom.solids import Solid, Union


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
