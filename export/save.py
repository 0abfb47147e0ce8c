"""Writing a design's folder of results: every file is staged, checked, then moved into place, the figures last.

The figures hold the hash of each other file. Until they are moved, those of the run before stand in the folder and
disagree with what was moved already: a folder in which a run was stopped can thus be told from a finished one, and
the next run says so and writes it anew. No file is ever half-written under its own name.
"""

from __future__ import annotations

import json
import os
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from export.figures import Figures, belongs, chunks, document
from export.folder import Folder, look
from export.outputs import CheckFailed, Choices, File, Output
from export.staging import CannotSave, Staging, hash_of, is_own_name
from export.walk import plain
from geom.result import Result


class NamesClash(Exception):
    """Two files of one design would have the same name; the text says which and what to do."""


@dataclass(frozen=True)
class Order:
    """What to write.

    Attributes
    ----------
    result : Result
        The solved design.
    stem : str
        Its name: that of its design file, without the ending.
    made_from : str
        Hash of the design file.
    outputs : sequence of Output
        Those to be made now.
    partial : bool
        Whether other outputs were left out: their files stay while the design is unchanged.
    choices : Choices
        What the command line adds to the design.
    verify : bool
        Whether every staged file is read back in full before it is moved.
    """

    result: Result
    stem: str
    made_from: str
    outputs: Sequence[Output]
    partial: bool = False
    choices: Choices = field(default_factory=Choices)
    verify: bool = False


@dataclass(frozen=True)
class Saved:
    """What was done: files written, left from an earlier run, and removed, by name; what was amiss before."""

    folder: Path
    written: tuple[str, ...]
    kept: tuple[str, ...]
    removed: tuple[str, ...]
    disagreement: str


def save(order: Order, into: Path) -> Saved:
    """Write a design's results into `into/<stem>/`.

    Raises
    ------
    CannotSave
        If something that is not ours is in the way, or another run is at work there.
    NamesClash
        If two files would have one name.
    CheckFailed
        If a file is not what it should be; nothing is moved then.
    OSError
        If the disk is full, permission is missing and so on.
    """
    if Path(order.stem).name != order.stem or order.stem in ("", ".", ".."):
        raise CannotSave(f"{order.stem!r} is no name for a folder; rename the design file")
    with Staging(into, order.stem) as staging:
        folder = look(into / order.stem, order.stem, staging.journal)
        disagreement = folder.disagreement()
        made = _stage(order, staging)
        kept = _kept(order, folder, made)
        digest = _stage_figures(order, staging, folder.figures_name, [*made, *kept])
        written = {str(entry["name"]): str(entry["sha256"]) for entry in made} | {folder.figures_name: digest}
        kept_names = tuple(str(entry["name"]) for entry in kept)
        folder.refuse_foreign(written)
        removed = _move(staging, folder, written, frozenset(kept_names))
    return Saved(folder.path, tuple(written), kept_names, removed, disagreement)


def _stage(order: Order, staging: Staging) -> list[Figures]:
    """Make every file, and return what the figures say of each, in order of name."""
    made: dict[str, Figures] = {}
    for number, output in enumerate(order.outputs):
        order.choices.progress(output.name, number, len(order.outputs))
        for file in output.write(order.result, order.choices):
            name = f"{order.stem}-{file.name}"
            _refuse_clash(name, made, order.stem)
            made[name.casefold()] = _staged(order, staging, output, file)
    order.choices.progress("figures", len(order.outputs), len(order.outputs))
    return sorted(made.values(), key=lambda entry: str(entry["name"]))


def _refuse_clash(name: str, made: dict[str, Figures], stem: str) -> None:
    """Names that differ only by capitals are one name on many disks."""
    if not is_own_name(name, stem):
        raise CannotSave(f"{name!r} is no name for a file of {stem}")
    if other := made.get(name.casefold()):
        raise NamesClash(f"{name} would be the name of two files (beside {other['name']}); give another mark")


def _staged(order: Order, staging: Staging, output: Output, file: File) -> Figures:
    name = f"{order.stem}-{file.name}"
    digest = staging.write(name, file.chunks)
    checked = dict(file.checked())
    if order.verify:
        _read_back(staging.path(name), digest)
        checked |= output.verify(staging.path(name), order.result, order.choices)
    return {
        "name": name,
        "output": output.name,
        "sha256": digest,
        **{key: plain(value) for key, value in file.figures.items()},
        "checked": plain(checked),
    }


def _read_back(path: Path, digest: str) -> None:
    if hash_of(path) != digest:
        raise CheckFailed(f"{path.name}: what was read back is not what was written; look to the disk")


def _kept(order: Order, folder: Folder, made: Sequence[Figures]) -> list[Figures]:
    """Return the entries of files that an earlier run made of the same design by outputs left out now."""
    if not order.partial or not belongs(folder.figures, order.made_from):
        return []
    names = {str(entry["name"]).casefold() for entry in made}
    ran = {output.name for output in order.outputs}
    return [
        entry
        for name, entry in folder.entries.items()
        if entry.get("output") not in ran and name.casefold() not in names and folder.agrees(name)
    ]


def _stage_figures(order: Order, staging: Staging, name: str, entries: Sequence[Figures]) -> str:
    listed = sorted(entries, key=lambda entry: str(entry["name"]))
    figures = document(order.result, order.made_from, listed)
    digest = staging.write(name, chunks(figures))
    if order.verify:
        _read_back(staging.path(name), digest)
        if json.loads(staging.path(name).read_bytes()) != figures:
            raise CheckFailed(f"{name}: what was read back is not what was written")
    return digest


def _move(staging: Staging, folder: Folder, written: Mapping[str, str], kept: frozenset[str]) -> tuple[str, ...]:
    """Move the staged files into place, the figures last, and remove ours that are no longer made.

    Files are removed before the figures are moved: a run stopped in between leaves the old figures, which still list
    them.
    """
    new = {name: frozenset([digest]) for name, digest in written.items()}
    staging.record({n: folder.moved.get(n, frozenset()) | new.get(n, frozenset()) for n in {*folder.moved, *new}})
    folder.path.mkdir(exist_ok=True)
    *others, figures = written
    for name in others:
        staging.path(name).replace(folder.path / name)
    removed = tuple(_removable(folder, frozenset(written) | kept))
    for name in removed:
        (folder.path / name).unlink(missing_ok=True)
    staging.path(figures).replace(folder.path / figures)
    return removed


def _removable(folder: Folder, stay: frozenset[str]) -> Iterator[str]:
    """Yield names of ours that are there and not to stay, unless the disk takes them for one that is."""
    spelt = {name.casefold(): name for name in stay}
    for name in sorted(folder.own_names() - stay):
        path = folder.path / name
        if not os.path.lexists(path) or path.is_dir():
            continue
        same = spelt.get(name.casefold())
        if same is None or not os.path.samefile(path, folder.path / same):
            yield name
