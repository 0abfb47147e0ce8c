"""What `check` prints: the figures of each piece in the design's unit, pulls with what they include, cautions.

Like the figures file it is a walk over the kinds' own figures, so that a new kind is shown without a line added here.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import is_dataclass

from export.plaintext import aligned, indented, pairs, shown
from export.walk import entries
from geom.result import Case, Caution, Piece, Quantity, Result, StockPlan, Support, Unit

_MOST_ROWS = 12  # of a table within a piece, and of parts shown in full: about half a screen
_WORST = {"bays": ", in the worst bay", "strands": ", of the worst strand"}  # of the parts of a piece
_SAID = {  # figures whose key alone could be mistaken
    "greatest thickness": "thickness at which the inner parallel folds",
    "eccentricity": "line of thrust off the axis over the thickness",
}
_MOST_LINES = 100  # of parts shown in one line each


def summary(result: Result) -> Iterator[str]:
    """Yield the lines of a design's summary."""
    yield result.title
    for piece in result.pieces:
        yield ""
        yield from _piece(piece, result.unit)
    yield from _section("pulls on supports", _supports(result.supports, result.unit))
    yield from _section("to buy", [_stock(plan, result.unit) for plan in result.stock_plan])
    yield from _section("cautions", [_caution(caution) for caution in result.cautions])
    yield ""


def cautions(found: Iterable[Caution]) -> list[str]:
    """Return a line for each caution, with its source."""
    return [f"caution: {_caution(caution)}" for caution in found]


def _caution(caution: Caution) -> str:
    piece = f"{caution.piece}: " if caution.piece else ""
    return f"{piece}{caution.text}{f' ({caution.source})' if caution.source else ''}"


def _piece(piece: Piece, unit: str) -> Iterator[str]:
    copies = f", {piece.copies} off" if piece.copies > 1 else ""
    yield f"{piece.mark}: {piece.kind}, {piece.what}{copies}"
    standing = f" ({piece.cases[0].standing})" if piece.cases else ""
    figures = (
        (name, f"{text}{standing}" if name.startswith("pull") else text) for name, text in _singles(piece.figures, unit)
    )
    yield from indented(pairs([*_asked(piece, unit), *figures]))
    yield from indented(_tables(piece.figures, unit))
    yield from indented(_cases([("", case) for case in piece.cases or ()], unit))
    yield from indented(_parts(piece, unit))


def _asked(piece: Piece, unit: str) -> Iterator[tuple[str, str]]:
    if piece.intended is not None:
        name = piece.intended.name.replace("_", " ")
        yield f"asked for: {name}", shown(piece.intended.value, piece.intended.unit, unit)
        if piece.difference is not None:
            where = _WORST.get(piece.parts_name, "")
            yield f"made minus asked for{where}", shown(piece.difference.value, piece.difference.unit, unit)
    yield "mass", shown(piece.mass, Unit("kg"), unit)


def _singles(figures: object, unit: str, prefix: str = "") -> Iterator[tuple[str, str]]:
    """Yield name and value of each single figure, those within a group (`links`) after its name."""
    for name, of, value in _fields(figures):
        if is_dataclass(value) and not isinstance(value, Quantity):
            yield from _singles(value, unit, f"{prefix}{name}: ")
        elif isinstance(value, Quantity):
            yield f"{prefix}{_SAID.get(name, name)}", shown(value.value, value.unit, unit)
        elif isinstance(value, str | int | float):
            text = shown(value, of, unit)
            if text != "-":
                yield f"{prefix}{_SAID.get(name, name)}", text


def _tables(figures: object, unit: str, prefix: str = "") -> Iterator[str]:
    """Yield each short table within a piece's figures (neighbours, bends, loads)."""
    for name, _, value in _fields(figures):
        if is_dataclass(value) and not isinstance(value, Quantity):
            yield from _tables(value, unit, f"{prefix}{name}: ")
        elif isinstance(value, tuple) and 0 < len(value) <= _MOST_ROWS and is_dataclass(value[0]):
            yield f"{prefix}{name}"
            yield from indented(aligned(_heads(value[0]), [_row(row, unit) for row in value]))


def _fields(figures: object) -> Iterator[tuple[str, Unit, object]]:
    if is_dataclass(figures):
        for entry in entries(type(figures)):
            yield entry.name.replace("_", " ").strip(), entry.unit, getattr(figures, entry.name)


def _heads(row: object) -> list[str]:
    return [name for name, _, _ in _fields(row)]


def _row(row: object, unit: str) -> list[str]:
    return [shown(value, of, unit) for _, of, value in _fields(row)]


def _cases(cases: Sequence[tuple[str, Case]], unit: str) -> Iterator[str]:
    """Yield a table of cases, each after the mark of its part."""
    if cases:
        heads = [
            "part",
            "case",
            "pulls include",
            "temperature",
            "sag",
            "lowest",
            "clearance",
            "horizontal",
            "from",
            "to",
        ]
        rows = [[mark, *_row(case, unit)[: len(heads) - 1]] for mark, case in cases]
        part = 0 if any(mark for mark, _ in cases) else 1
        yield "cases"
        yield from indented(aligned(heads[part:], [row[part:] for row in rows]))


def _parts(piece: Piece, unit: str) -> Iterator[str]:
    """Yield a table of the parts' facts, one of their cases, and their short tables, equal ones once."""
    shown_parts = piece.parts[:_MOST_LINES]
    if not shown_parts:
        return
    yield piece.parts_name
    heads = ["mark", *(fact.name for fact in shown_parts[0].facts)]
    rows = [[part.mark, *(shown(fact.value, fact.unit, unit) for fact in part.facts)] for part in shown_parts]
    yield from indented(aligned(heads, [row for row in rows if len(row) == len(heads)]))
    if len(piece.parts) > _MOST_LINES:
        yield f"  and {len(piece.parts) - _MOST_LINES} more"
    yield from _cases([(part.mark, case) for part in shown_parts for case in part.cases or ()], unit)
    tables: dict[tuple[str, ...], list[str]] = {}
    for part in shown_parts:
        tables.setdefault(tuple(_tables(part.figures, unit)), []).append(part.mark)
    for lines, marks in list(tables.items())[:_MOST_ROWS]:
        yield from (lines and (", ".join(marks), *indented(lines)))


def _supports(supports: Sequence[Support], unit: str) -> list[str]:
    newtons = Unit("N")
    heads = ["support", "case", "standing", "pull", "along x", "along y", "along z", "moment at foot"]
    rows = [
        [
            support.mark,
            case.case,
            case.standing,
            shown(case.magnitude, newtons, unit),
            *(shown(part, newtons, unit) for part in case.pull.tolist()),
            shown(case.moment, Unit("Nm"), unit),
        ]
        for support in supports[:_MOST_LINES]
        for case in support.by_case
    ]
    more = [f"and {len(supports) - _MOST_LINES} more"] if len(supports) > _MOST_LINES else []
    return [*aligned(heads, rows), *more] if rows else []


def _stock(plan: StockPlan, unit: str) -> str:
    found = [("needed", plan.needed), ("least possible", plan.least_possible), ("links", plan.links)]
    said = [f"{name} {value}" for name, value in found if value is not None]
    if math.isfinite(plan.order_length):
        said.append(f"length {shown(plan.order_length, Unit('m'), unit)}")
    return f"{plan.stock}: {', '.join(said)}"


def _section(title: str, lines: Sequence[str]) -> Iterator[str]:
    if lines:
        yield ""
        yield title
        yield from indented(lines)
