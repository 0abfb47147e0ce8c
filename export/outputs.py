"""Registration of outputs: each file in `export/files` ends with `OUTPUT = Output(...)`; nothing else lists them."""

from __future__ import annotations

import importlib
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path

from geom.registry import modules
from geom.result import Caution, Result

Checked = Mapping[str, object]


class CheckFailed(Exception):
    """A file that was written is not what it should be: which, what was expected, what was found."""


@dataclass(frozen=True)
class Choices:
    """What the command line adds to the design: the greatest distance of drawn curves (m), links always real."""

    within: float | None = None
    real_links: bool = False
    progress: Callable[[str, int, int], None] = lambda _what, _done, _total: None


@dataclass(frozen=True)
class File:
    """One file to write: its name after `<stem>-`, its bytes in chunks, and what was checked while they were made.

    `checked` is called when the last chunk has been taken; it raises CheckFailed when a check fails. `figures` are
    added to the file's entry in the figures (a solid's `origin_m`).
    """

    name: str
    chunks: Iterable[bytes]
    checked: Callable[[], Checked]
    figures: Mapping[str, object] = field(default_factory=dict)


@dataclass(frozen=True)
class Output:
    """An output: the word `--only` knows it by, its writer, and its check of a written file read back in full.

    `write(result, choices)` yields the files. `verify(path, result, choices)` reads one of them back, returns what was
    checked and raises CheckFailed on the first thing that is wrong. `cautions(result, choices)` says what a user must
    know of the way this output shows the result (links drawn as tubes, walls thickened for a print).
    """

    name: str
    write: Callable[[Result, Choices], Iterable[File]]
    verify: Callable[[Path, Result, Choices], Checked]
    cautions: Callable[[Result, Choices], Iterable[Caution]] = lambda _result, _choices: ()


def with_cautions(result: Result, made: Iterable[Output], choices: Choices) -> Result:
    """Return the result with the cautions of the outputs that are to be made of it, for every output to show."""
    added = (caution for output in made for caution in output.cautions(result, choices))
    return replace(result, cautions=tuple(dict.fromkeys((*result.cautions, *added))))


def outputs() -> dict[str, Output]:
    """Return every output by its name.

    Raises
    ------
    RuntimeError
        If two files claim one name.
    """
    package = importlib.import_module("export.files")
    found: dict[str, Output] = {}
    for module in modules(package):
        entry = getattr(module, "OUTPUT", None)
        if entry is None:
            continue
        if entry.name in found:
            raise RuntimeError(f"two files in export/files add {entry.name!r}")
        found[entry.name] = entry
    return found
