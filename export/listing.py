"""The tables of a whole design, gathered from the neutral result: cuts, stock, supports, cautions, pieces' own."""

from __future__ import annotations

import math
from collections import defaultdict
from collections.abc import Iterable, Iterator, Sequence

import numpy as np
from numpy.typing import NDArray

from geom.result import NAN, Column, PatternCut, Piece, Result, StockPattern, StockPlan, Table, Unit

_NONE = Unit("")
_METRES = Unit("m")
_NEWTONS = Unit("N")
_HUNG = "as hung"


def cuts(result: Result) -> Table:
    """Return the cut list: a row for each bay, strand, block or member."""
    rows = result.cuts
    return Table(
        "cuts",
        (
            _text("mark", "mark", (cut.mark for cut in rows)),
            _text("piece", "piece", (cut.piece for cut in rows)),
            _text("stock", "stock", (cut.stock for cut in rows)),
            _numbers("cut_length", _METRES, "cut length", (cut.cut_length for cut in rows)),
            _numbers("pin_to_pin", _METRES, "pin to pin", (cut.pin_to_pin for cut in rows)),
            _numbers("links", _NONE, "links", (cut.links for cut in rows)),
            _numbers("copies", _NONE, "copies", (cut.copies for cut in rows)),
            _numbers("mass", Unit("kg"), "mass of one", (cut.mass for cut in rows)),
        ),
    )


def stock_plan(result: Result) -> Table:
    """Return what to buy and how to cut it: a row for each mark on each way of cutting, or one for the stock."""
    rows = [row for plan in result.stock_plan for row in _plan_rows(plan)]
    return Table(
        "stock plan",
        (
            _text("stock", "stock", (plan.stock for plan, _, _ in rows)),
            _numbers("needed", _NONE, "reels or bars needed", (plan.needed for plan, _, _ in rows)),
            _numbers("least_possible", _NONE, "least possible", (plan.least_possible for plan, _, _ in rows)),
            _numbers("order_length", _METRES, "order length", (plan.order_length for plan, _, _ in rows)),
            _numbers("order_links", _NONE, "links bought", (plan.links for plan, _, _ in rows)),
            _numbers("links_lost", _NONE, "links lost to cuts", (plan.links_lost for plan, _, _ in rows)),
            _numbers("length", _METRES, "length of a reel", (p.length if p else None for _, p, _ in rows)),
            _numbers("count", _NONE, "reels cut so", (p.count if p else None for _, p, _ in rows)),
            _numbers("left", _METRES, "left of each", (p.left if p else None for _, p, _ in rows)),
            _text("mark", "mark", (c.mark if c else None for _, _, c in rows)),
            _numbers("on_each", _NONE, "of it on each", (c.count if c else None for _, _, c in rows)),
        ),
    )


def _plan_rows(plan: StockPlan) -> Iterator[tuple[StockPlan, StockPattern | None, PatternCut | None]]:
    if not plan.patterns:
        yield plan, None, None
    for pattern in plan.patterns:
        for cut in pattern.cuts:
            yield plan, pattern, cut


def supports(result: Result) -> Table:
    """Return the pulls on supports: a row for each support and case."""
    rows = [(support, case) for support in result.supports for case in support.by_case]
    codes = {support.mark: code for support, code in zip(result.supports, _codes(result), strict=True)}
    at = np.array([support.at for support, _ in rows], dtype=np.float64).reshape(-1, 3)
    pull = np.array([case.pull for _, case in rows], dtype=np.float64).reshape(-1, 3)
    return Table(
        "supports",
        (
            _text("mark", "support", (support.mark for support, _ in rows)),
            _text("case", "case", (case.case for _, case in rows)),
            _text("standing", "what it includes", (case.standing for _, case in rows)),
            *(Column(f"at_{c}", _METRES, c, at[:, i]) for i, c in enumerate("xyz")),
            *(Column(f"pull_{c}", _NEWTONS, f"pull along {c}", pull[:, i]) for i, c in enumerate("xyz")),
            _numbers("magnitude", _NEWTONS, "pull", (case.magnitude for _, case in rows)),
            _numbers("moment", Unit("Nm"), "moment at the foot", (case.moment for _, case in rows)),
            _text("pieces", "pieces", (", ".join(support.pieces) for support, _ in rows)),
            _text("cautions", "cautions on them", (codes[support.mark] for support, _ in rows)),
        ),
    )


def _codes(result: Result) -> Iterator[str]:
    """Yield for each support the codes of the cautions on its pieces; their words are in the figures."""
    of_piece: dict[str, list[tuple[int, str]]] = defaultdict(list)
    for number, caution in enumerate(result.cautions):
        of_piece[caution.piece].append((number, caution.code))
    for support in result.supports:
        found = sorted(entry for piece in support.pieces for entry in of_piece[piece])
        yield ", ".join(dict.fromkeys(code for _, code in found))


def cautions(result: Result) -> Table:
    """Return every caution: what a user must know of a piece before it is hung or stood up."""
    rows = result.cautions
    return Table(
        "cautions",
        (
            _text("piece", "piece", (caution.piece for caution in rows)),
            _text("code", "code", (caution.code for caution in rows)),
            _text("text", "caution", (caution.text for caution in rows)),
            _text("source", "source", (caution.source for caution in rows)),
        ),
    )


def own(result: Result) -> list[Table]:
    """Return the tables of pieces and their parts, those of one name joined, in order of first appearance."""
    found: dict[str, list[tuple[str, Table]]] = {}
    for piece in _all(result.pieces):
        for table in piece.tables:
            found.setdefault(table.name, []).append((table.piece or piece.mark, table))
    return [_joined(name, tables) for name, tables in found.items()]


def own_named(result: Result, name: str) -> Table | None:
    """Return the pieces' own tables of one name as one table; None if no piece has any."""
    return next((table for table in own(result) if table.name == name), None)


def design(result: Result) -> Table:
    """Return what holds for all tables: title, where its coordinates count from, what its pulls include."""
    x, y, z = result.setting.site.origin
    said = {
        "title": result.title,
        "coordinates": f"count from x {x:.12g} m, y {y:.12g} m, z {z:.12g} m of the site",
        "pulls": "dead load only, where a table does not say what else they include",
    }
    return Table("design", (_text("what", "what", said), _text("value", "value", said.values())))


def with_origin(table: Table, result: Result) -> Table:
    """Return a table of coordinates with the site coordinates that they count from, where a design has such."""
    origin = result.setting.site.origin
    if not any(origin):
        return table
    rows = length(table)
    added = (
        Column(f"origin_{c}", _METRES, f"from site {c}", np.full(rows, o)) for c, o in zip("xyz", origin, strict=True)
    )
    return Table(table.name, (*table.columns, *added), table.piece)


def every(result: Result) -> list[Table]:
    """Return every table of a design that has a row."""
    tables = (design(result), cuts(result), stock_plan(result), supports(result), *own(result), cautions(result))
    return [table for table in tables if length(table)]


def length(table: Table) -> int:
    """Return how many rows a table has."""
    return len(table.columns[0].values) if table.columns else 0


def _all(pieces: Iterable[Piece]) -> Iterator[Piece]:
    for piece in pieces:
        yield piece
        yield from _all(piece.parts)


def _joined(name: str, tables: Sequence[tuple[str, Table]]) -> Table:
    """Put tables under one another after a column of the pieces' marks; a column that one lacks is empty there."""
    heads: dict[tuple[str, str], Column] = {}
    for _, table in tables:
        for column in table.columns:
            heads.setdefault((column.key, column.unit.suffix), column)
    marks = _text("piece", "piece", (mark for mark, table in tables for _ in range(length(table))))
    columns = [marks] if ("piece", "") not in heads else []
    return Table(name, (*columns, *(_stacked(head, [table for _, table in tables]) for head in heads.values())))


def _stacked(head: Column, tables: Sequence[Table]) -> Column:
    parts = [_part(head, table) for table in tables]
    if any(isinstance(part, tuple) for part in parts):
        values: tuple[str | None, ...] | NDArray[np.float64] = tuple(text for part in parts for text in _texts(part))
    else:
        values = np.concatenate([np.asarray(part, dtype=np.float64) for part in parts])
    return Column(head.key, head.unit, head.heading, values)


def _part(head: Column, table: Table) -> NDArray[np.float64] | NDArray[np.int64] | tuple[str | None, ...]:
    for column in table.columns:
        if (column.key, column.unit.suffix) == (head.key, head.unit.suffix):
            return column.values
    return (None,) * length(table) if isinstance(head.values, tuple) else np.full(length(table), np.nan)


def _texts(part: object) -> tuple[str | None, ...]:
    if isinstance(part, tuple):
        return part
    return tuple(None if math.isnan(value) else f"{value:.12g}" for value in np.asarray(part).tolist())


def _text(key: str, heading: str, values: Iterable[str | None]) -> Column:
    return Column(key, _NONE, heading, tuple(values))


def _numbers(key: str, unit: Unit, heading: str, values: Iterable[float | None]) -> Column:
    found = [NAN if value is None else value for value in values]
    return Column(key, unit, heading, np.array(found, dtype=np.float64))
