"""The figures file: every figure of a design as one JSON document, SI throughout.

Its keys are fixed by the dataclasses of `geom.result` and of each kind's figures; this module only lays them in order.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator, Mapping, Sequence

from export import __version__
from export.walk import Plain, plain, record
from geom.result import Case, Piece, Result

Figures = dict[str, Plain]


def document(result: Result, made_from: str, files: Sequence[Figures]) -> Figures:
    """Return the figures of a result.

    Parameters
    ----------
    result : Result
        The solved design.
    made_from : str
        Hash of the design file, by which a later run knows whether files it does not make again still belong to it.
    files : sequence of dict
        `name`, `sha256` and `checked` of each other file.
    """
    return {
        "title": result.title,
        "version": __version__,
        "design_sha256": made_from,
        "unit": result.unit,
        "origin_m": plain(result.setting.site.origin),
        "pieces": [piece(entry) for entry in result.pieces],
        "cuts": plain(result.cuts),
        "stock_plan": plain(result.stock_plan),
        "supports": plain(result.supports),
        "cautions": plain(result.cautions),
        "files": list(files),
    }


def belongs(found: Mapping[str, object], made_from: str) -> bool:
    """Return whether figures found on disk are of this very design, made by this version of the program."""
    return found.get("version") == __version__ and found.get("design_sha256") == made_from


def piece(entry: Piece) -> Figures:
    """Return the figures of a piece, with those of its parts under their name (`bays`, `strands`)."""
    found: Figures = {
        "mark": entry.mark,
        "kind": entry.kind,
        "what": entry.what,
        "copies": entry.copies,
        "mass_kg": plain(entry.mass),
        "intended": plain(entry.intended),
        "difference": plain(entry.difference),
        "used": plain(entry.used),
        "cautions": plain(entry.cautions),
        "cases": None if entry.cases is None else [_case(case) for case in entry.cases],
    }
    if entry.figures is not None:
        found |= record(entry.figures)
    if entry.parts_name:
        found[entry.parts_name] = [piece(part) for part in entry.parts]
    return found


def _case(case: Case) -> Figures:
    """Return one case; what only this case has stands beside what all have."""
    found = record(case, leave_out=frozenset({"added"}))
    return found if case.added is None else found | record(case.added)


def lines(value: Plain, indent: str = "") -> Iterator[str]:
    """Yield a document as JSON text, to be read by people too: an object without objects in it takes one line.

    Raises
    ------
    ValueError
        If a number in it is not finite: that is no JSON.
    """
    if isinstance(value, dict) and _opens(value.values()):
        members = [(f"{_text(key)}: ", entry) for key, entry in value.items()]
        yield from _opened("{}", members, indent)
    elif isinstance(value, list) and _opens(value):
        yield from _opened("[]", [("", entry) for entry in value], indent)
    else:
        yield _text(value)


def _opens(entries: Iterable[Plain]) -> bool:
    """Objects and lists of objects are laid out; a list of points is one line, however long."""
    return any(isinstance(entry, dict) or (isinstance(entry, list) and _opens(entry[:1])) for entry in entries)


def _opened(brackets: str, members: Sequence[tuple[str, Plain]], indent: str) -> Iterator[str]:
    inner = indent + "  "
    yield brackets[0]
    for number, (key, entry) in enumerate(members):
        yield f"{',' if number else ''}\n{inner}{key}"
        yield from lines(entry, inner)
    yield f"\n{indent}{brackets[1]}"


def _text(value: Plain) -> str:
    return json.dumps(value, ensure_ascii=False, allow_nan=False)


def chunks(found: Figures) -> Iterator[bytes]:
    """Yield the bytes of a figures file."""
    buffer: list[str] = []
    for text in lines(found):
        buffer.append(text)
        if len(buffer) >= 4096:
            yield "".join(buffer).encode()
            buffer.clear()
    yield ("".join(buffer) + "\n").encode()
