"""What `stock` prints: the standards' chains and ropes and the materials, with what their figures rest on."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from export.plaintext import aligned, indented, rounded
from geom.setting.materials import Material
from geom.setting.stock import Stock

# Heading, decimals, and the figure in the unit of the trade's own tables.
_SIZES: tuple[tuple[str, int, Callable[[Stock], float | None]], ...] = (
    ("wire, mm", 2, lambda s: _times(s.wire, 1e3)),
    ("pitch, mm", 2, lambda s: _times(s.pitch, 1e3)),
    ("width, mm", 2, lambda s: _times(s.width, 1e3)),
    ("diameter, mm", 2, lambda s: _times(s.diameter, 1e3)),
    ("mass, kg/m", 4, lambda s: s.mass_per_metre),
    ("area, mm2", 3, lambda s: _times(s.area, 1e6)),
    ("modulus, GPa", 1, lambda s: _times(s.modulus, 1e-9)),
    ("breaking load, kN", 2, lambda s: _times(s.breaking_load, 1e-3)),
)


def stocks(found: Sequence[Stock]) -> Iterator[str]:
    """Yield the lines of a list of stock: sizes that rest on the same under one heading."""
    groups: dict[tuple[str, ...], list[Stock]] = {}
    for stock in found:
        groups.setdefault(_grounds(stock), []).append(stock)
    for (title, *grounds), sizes in groups.items():
        yield f"{sizes[0].kind}: {title}"
        yield from indented(line for line in grounds if line)
        yield from indented(_table(sizes))
        yield ""


def _grounds(stock: Stock) -> tuple[str, ...]:
    """Return what sizes of one heading share: title, source, notes, what to confirm, what it is not for."""
    return (
        stock.title,
        f"source: {stock.source}{f' ({stock.standing})' if stock.standing else ''}",
        f"worked out: {'; '.join(stock.notes)}" if stock.notes else "",
        f"confirm: {stock.confirm}" if stock.confirm else "",
        stock.scope,
    )


def _table(sizes: Sequence[Stock]) -> list[str]:
    columns = [(head, [_text(of(stock), decimals) for stock in sizes]) for head, decimals, of in _SIZES]
    columns = [(head, cells) for head, cells in columns if any(cell != "-" for cell in cells)]
    lacking = [stock.lacking and f"not as it stands: {stock.lacking}" for stock in sizes]
    names = ("name", [stock.name for stock in sizes])
    heads, cells = zip(names, *columns, ("", lacking), strict=True)
    return aligned(heads, list(zip(*cells, strict=True)))


def _times(value: float | None, factor: float) -> float | None:
    return None if value is None else value * factor


def _text(value: float | None, decimals: int) -> str:
    return "-" if value is None else rounded(value, decimals)


def materials(found: Sequence[Material]) -> Iterator[str]:
    """Yield the lines of a list of materials."""
    if not found:
        return
    heads = ("name", "density, kg/m3", "expansion, 1e-6/K", "what it is", "standing", "confirm")
    rows = [
        (m.name, rounded(m.density, 1), _text(_times(m.expansion, 1e6), 2), m.source, m.standing, m.confirm)
        for m in found
    ]
    yield "materials (no strength is listed: it belongs to the lot in hand and to the code in force)"
    yield from indented(aligned(heads, rows))
