"""From the solved strands of a row of swags to one piece: figures, views, table, pulls by support."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang.row import Row, named, outlines
from geom.hang.row_views import kinds, views
from geom.hang.together import by_stock, one_solid, one_used, said_once, worst
from geom.result import (
    Column,
    Label,
    Metres,
    Newtons,
    NewtonsArray,
    Piece,
    Pull,
    Quantity,
    Table,
    Unit,
    fixed,
)

Floats = NDArray[np.float64]

_NONE, _METRES, _KILOGRAMS, _NEWTONS = Unit(""), Unit("m"), Unit("kg"), Unit("N")
_FEW_KINDS = 4  # so many different strands are said one by one under the drawing


@dataclass(frozen=True)
class SwagsFigures:
    """Figures of a row of swags as a whole; its strands stand beside them.

    `links_count` and `pin_to_pin` are of all strands together, `lowest` of the lowest strand and `highest_lowest` of
    the strand whose lowest point is the highest. Pulls are on the whole rail or ring that strands begin at and that
    they end at (one ring is both), hardware included.
    """

    count: int
    links_count: int | None
    pin_to_pin: Metres
    lowest: Metres
    highest_lowest: Metres
    sag_least: Metres
    sag_greatest: Metres
    greatest_end_pull: Newtons
    pull_on_from: NewtonsArray
    pull_on_to: NewtonsArray | None


def gathered(mark: str, strands: Sequence[Piece], row: Row, wanted: Quantity | None, *, copies: int) -> Piece:
    """Return a row of its solved strands.

    Parameters
    ----------
    mark : str
        The row's mark; strand n carries `<mark>.<n>`.
    strands : sequence of Piece
        Solved strands in order.
    row : Row
        Where they hang.
    wanted : Quantity or None
        What one value was given of for all strands.
    """
    shown = views(mark, strands, row)
    pulls = _pulls(mark, strands, row)
    whole = _figures(strands, row, pulls)
    mass = sum(strand.mass for strand in strands)
    stocks = {stock.name: stock for strand in strands for stock in strand.stocks}
    return Piece(
        mark=mark,
        kind="swags",
        what=_what(strands, row, list(stocks), alike=len(shown) == 1 and len(kinds(strands)) == 1),
        views=shown,
        mass=mass,
        figures=whole,
        used=one_used(strands),
        stocks=tuple(stocks.values()),
        copies=copies,
        intended=wanted,
        difference=worst(strands),
        parts=tuple(strands),
        parts_name="strands",
        facts=_facts(strands, row, whole, mass),
        lines=(*(line for strand in strands for line in strand.lines), *outlines(mark, row)),
        labels=_labels(strands, row),
        solids=one_solid(mark, strands),
        tables=(_table(mark, strands, row), by_stock(mark, strands)),
        cuts=tuple(replace(cut, piece=mark) for strand in strands for cut in strand.cuts),
        pulls=pulls,
        cautions=said_once(mark, strands),
    )


def word(strand: Piece) -> str:
    """Return what a strand's stock is counted in."""
    return "beads" if strand.stocks and strand.stocks[0].kind == "beads" else "links"


def _what(strands: Sequence[Piece], row: Row, stocks: Sequence[str], *, alike: bool) -> str:
    first = strands[0].stocks[0].kind if strands[0].stocks else ""
    of = f"{first} {', '.join(stocks)}".strip()
    count, drawn = len(strands), " alike, one drawn," if alike else ""
    return {
        "rails": f"row of {count} swags{drawn} of {of}",
        "ring": f"ring of {count} swags{drawn} of {of}",
        "rings": f"{count} drapes between two rings,{drawn} of {of}",
    }[row.between]


def _figures(strands: Sequence[Piece], row: Row, pulls: Sequence[Pull]) -> SwagsFigures:
    figures = [strand.figures for strand in strands]
    counts = [one.links.count for one in figures if one.links is not None]
    vectors = np.array([pull.vectors["as hung"] for pull in pulls])
    one_ring = row.between == "ring"
    return SwagsFigures(
        count=len(strands),
        links_count=sum(counts) if counts else None,
        pin_to_pin=float(np.sum([one.pin_to_pin for one in figures])),
        lowest=min(one.lowest for one in figures),
        highest_lowest=max(one.lowest for one in figures),
        sag_least=min(one.sag for one in figures),
        sag_greatest=max(one.sag for one in figures),
        greatest_end_pull=_greatest_pull(strands),
        pull_on_from=fixed(_tidy(vectors if one_ring else vectors[0::2])),
        pull_on_to=None if one_ring else fixed(_tidy(vectors[1::2])),
    )


def _tidy(vectors: Floats) -> Floats:
    """Sum of pulls; what cancels but for rounding, some 1e-16 of each, is nought under 1e-12 of the whole."""
    total = vectors.sum(axis=0)
    return np.where(np.abs(total) < 1e-12 * np.abs(vectors).sum(), 0.0, total)


def _greatest_pull(strands: Sequence[Piece]) -> float:
    return max(float(max(strand.figures.pull_from, strand.figures.pull_to)) for strand in strands)


def _facts(strands: Sequence[Piece], row: Row, whole: SwagsFigures, mass: float) -> tuple[Quantity, ...]:
    return (
        *_counts(strands, whole),
        *_diameters(row),
        Quantity("pin to pin in all", whole.pin_to_pin, _METRES),
        Quantity("mass", mass, _KILOGRAMS),
        Quantity("greatest horizontal pull", max(strand.figures.pull_horizontal for strand in strands), _NEWTONS),
        Quantity("greatest end pull", whole.greatest_end_pull, _NEWTONS),
    )


def _diameters(row: Row) -> tuple[Quantity, ...]:
    """Diameters of the circles that a ring's points are on."""
    wide = [curve.length / np.pi for curve in row.outlines]
    names = {"rails": (), "ring": ("diameter",), "rings": ("from diameter", "to diameter")}[row.between]
    return tuple(Quantity(name, value, _METRES) for name, value in zip(names, wide, strict=False))


def _counts(strands: Sequence[Piece], whole: SwagsFigures) -> tuple[Quantity, ...]:
    """How many strands there are of each count where they are few kinds, or how many links in all."""
    counted = [(strand.figures.links.count, word(strand)) for strand in strands if strand.figures.links is not None]
    if whole.links_count is None or not counted:
        return (Quantity("strands", float(len(strands))),)
    kinds = Counter(counted)
    if len(kinds) <= _FEW_KINDS:
        return tuple(Quantity(f"x {count} {of}", float(times)) for (count, of), times in kinds.items())
    counts, of = [count for count, _ in counted], counted[0][1]
    stocks = Counter(strand.stocks[0].name for strand in strands)
    return (
        *(Quantity(f"strands {name}" if len(stocks) > 1 else "strands", float(n)) for name, n in stocks.items()),
        Quantity(f"{of} in all", float(whole.links_count)),
        Quantity("in the shortest", float(min(counts))),
        Quantity("in the longest", float(max(counts))),
    )


def _pulls(mark: str, strands: Sequence[Piece], row: Row) -> tuple[Pull, ...]:
    """Pulls at every point; a point of a ring is one support, called by the strand that begins there."""
    pulls = [pull for strand in strands for pull in strand.pulls]
    if row.between != "ring":
        return tuple(pulls)
    names = [f"{mark}.{number % len(strands) + 1}.from" for number in range(len(strands) + 1)]
    return tuple(
        pull if pull.named else replace(pull, support=names[number // 2 + number % 2])
        for number, pull in enumerate(pulls)
    )


_MOST_MARKS = 20  # in the model, where nothing keeps marks apart


def _labels(strands: Sequence[Piece], row: Row) -> tuple[Label, ...]:
    return tuple(Label(row.starts[number], strands[number].mark, "part") for number in named(len(strands), _MOST_MARKS))


def _table(mark: str, strands: Sequence[Piece], row: Row) -> Table:
    figures = [strand.figures for strand in strands]
    links = [np.nan if one.links is None else float(one.links.count) for one in figures]
    return Table(
        "strands",
        (
            Column("mark", _NONE, "strand", tuple(strand.mark for strand in strands)),
            *(Column(f"from_{axis}", _METRES, f"from {axis}", row.starts[:, k]) for k, axis in enumerate("xyz")),
            *(Column(f"to_{axis}", _METRES, f"to {axis}", row.ends[:, k]) for k, axis in enumerate("xyz")),
            Column("stock", _NONE, "stock", tuple(strand.stocks[0].name for strand in strands)),
            Column("links", _NONE, "links", np.array(links)),
            Column("pin_to_pin", _METRES, "pin to pin", np.array([one.pin_to_pin for one in figures])),
            Column("sag", _METRES, "sag under chord", np.array([one.sag for one in figures])),
            Column("lowest", _METRES, "lowest point", np.array([one.lowest for one in figures])),
            Column("pull_from", _NEWTONS, "pull at from", np.array([one.pull_from for one in figures])),
            Column("pull_to", _NEWTONS, "pull at to", np.array([one.pull_to for one in figures])),
        ),
        mark,
    )
