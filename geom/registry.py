"""Registration of kinds and layouts: each file in `geom/kinds` ends by naming what it adds; nothing else lists them.

A kind solves all its pieces of a design in one call. A layout owns no mathematics: it spreads what the user wrote into
pieces of a kind (a run into its bays, a curtain into its strands) and gathers the solved parts into one piece again, so
that all hangings of a design, laid out or single, are still one call of the hanging kind.
"""

from __future__ import annotations

import importlib
import pkgutil
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from types import ModuleType
from typing import Any

from geom.fields import Feature
from geom.result import Piece
from geom.setting.options import Setting

Path = tuple[str | int, ...]


@dataclass(frozen=True)
class Fault:
    """What is wrong with one key of a piece: the key's path within the piece, and the words with the remedy."""

    key: Path
    text: str


@dataclass(frozen=True)
class Refusal:
    """A piece that cannot be made, with every reason found."""

    faults: tuple[Fault, ...]


def refuse(key: str, text: str) -> Refusal:
    """Return the refusal of a piece for one reason at one key ("" for the piece as a whole)."""
    return Refusal((Fault((key,) if key else (), text),))


Outcome = Piece | Refusal


@dataclass(frozen=True)
class Kind:
    """A kind of feature: its table's name in a design file, the class of what is written, and its solver.

    `solve(pieces, setting)` returns one outcome for each piece, in order.
    """

    name: str
    model: type[Feature]
    solve: Callable[[Sequence[Any], Setting], Sequence[Outcome]]


@dataclass(frozen=True)
class Layout:
    """A layout of pieces of another kind.

    `expand(piece, setting)` returns the parts to solve, or a refusal; `gather(piece, parts, setting)` makes one piece
    of the solved parts. `part` is the word for a part in an error line ("bay 3: ..."); `place(piece, index, key)`
    returns the path of the key that a part's fault is reported at.
    """

    name: str
    model: type[Feature]
    of: str
    expand: Callable[[Any, Setting], Sequence[Feature] | Refusal]
    gather: Callable[[Any, Sequence[Piece], Setting], Outcome]
    part: str = "part"
    place: Callable[[Any, int, Path], Path] = lambda _piece, _index, key: key


def modules(package: ModuleType) -> list[ModuleType]:
    """Import and return every module found in a package's folder, in order of name."""
    names = sorted(info.name for info in pkgutil.iter_modules(package.__path__))
    return [importlib.import_module(f"{package.__name__}.{name}") for name in names]


def kinds() -> dict[str, Kind | Layout]:
    """Return every kind and layout by its name.

    Raises
    ------
    RuntimeError
        If two files claim one name, or a layout is of a kind that no file adds.
    """
    package = importlib.import_module("geom.kinds")
    found: dict[str, Kind | Layout] = {}
    for module in modules(package):
        entry = getattr(module, "KIND", None) or getattr(module, "LAYOUT", None)
        if entry is None:
            continue
        if entry.name in found:
            raise RuntimeError(f"two files in geom/kinds add {entry.name!r}")
        found[entry.name] = entry
    for entry in found.values():
        if isinstance(entry, Layout) and not isinstance(found.get(entry.of), Kind):
            raise RuntimeError(f"layout {entry.name!r} is of {entry.of!r}, which no file in geom/kinds adds")
    return found
