"""What `keys` prints: the tables of a design file and their keys, from the very models that read them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from pydantic.fields import FieldInfo

from export.plaintext import aligned
from geom.design.reader import NAMED, SECTIONS
from geom.fields import Section
from geom.registry import kinds


def tables() -> dict[str, type[Section]]:
    """Return the models of all tables by the name a user writes."""
    return {**{name: entry.model for name, entry in kinds().items()}, **SECTIONS, **NAMED}


def _written(name: str) -> str:
    if name in SECTIONS:
        return f"[{name}]"
    return f"[{name}.NAME]" if name in NAMED else f"[[{name}]]"


def overview(known: Mapping[str, type[Section]]) -> Iterator[str]:
    """Yield a line for each table with its keys."""
    yield 'A design begins with `title = "..."` and `unit = "mm"` (mm, cm, m, in or ft), the unit of bare lengths.'
    yield ""
    rows = [(_written(name), ", ".join(model.keys())) for name, model in known.items()]
    yield from aligned(("table", "keys"), rows)
    yield ""
    yield "sagwright keys TABLE says what each means."


def of_table(name: str, model: type[Section]) -> Iterator[str]:
    """Yield what a table is and a line for each of its keys; tables within it follow."""
    yield f"{_written(name)}  {(model.__doc__ or '').split(chr(10))[0]}"
    yield from _keys(model)
    for group in model.one_of:
        yield f"exactly one of: {', '.join(group)}"
    for group in model.at_most_one_of:
        yield f"at most one of: {', '.join(group)}"
    for key, inner in _inner(model):
        yield ""
        yield f"in {key}:"
        yield from _keys(inner)


def _keys(model: type[Section]) -> list[str]:
    rows = [
        (entry.alias or name, _default(name, entry, model), entry.description or "")
        for name, entry in model.model_fields.items()
    ]
    return aligned(("key", "if left out", "meaning"), rows)


def _default(name: str, entry: FieldInfo, model: type[Section]) -> str:
    if entry.is_required():
        return "needed"
    key = entry.alias or name
    if any(key in group for group in model.one_of):
        return "one of these"
    value = entry.default
    if isinstance(value, str):
        return f'"{value}"'
    # a length that is taken is kept in metres, and its explanation says it in the trade's unit
    return f"{value:g}" if isinstance(value, int | float) and value in (int(value), round(value, 2)) else "-"


def _inner(model: type[Section]) -> Iterator[tuple[str, type[Section]]]:
    for name, entry in model.model_fields.items():
        inner = _section(entry.annotation)
        if inner is not None:
            yield entry.alias or name, inner


def _section(annotation: Any) -> type[Section] | None:  # noqa: ANN401 - any type expression
    if isinstance(annotation, type) and issubclass(annotation, Section):
        return annotation
    return next(filter(None, (_section(inner) for inner in getattr(annotation, "__args__", ()))), None)
