"""What stands in a design's folder of results already, and whose it is.

Ours is what the figures there list, the figures themselves, and what a run that was stopped had moved (known by its
hash). Everything else is somebody else's and is never touched.
"""

from __future__ import annotations

import json
import os
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path
from typing import Any

from export.staging import CannotSave, Hashes, hash_of, is_own_name

FIGURES = "figures.json"


@dataclass(frozen=True)
class Folder:
    """A folder of results as it was found.

    Attributes
    ----------
    path : Path
        Where it is; it may not exist yet.
    stem : str
        The design's name, with which every file in it begins.
    figures : dict
        The figures found there, empty if there are none of ours.
    moved : dict of str to frozenset of str
        Files that a stopped run had moved there already, with the hashes they may have.
    """

    path: Path
    stem: str
    figures: Mapping[str, Any] = field(default_factory=dict)
    moved: Hashes = field(default_factory=dict)

    @property
    def figures_name(self) -> str:
        """Name of the figures file."""
        return f"{self.stem}-{FIGURES}"

    @cached_property
    def entries(self) -> dict[str, dict[str, Any]]:
        """What the figures say of each other file, by name."""
        return {entry["name"]: entry for entry in self.figures.get("files", ())}

    def owns(self, name: str) -> bool:
        """Return whether a file here is known to be ours."""
        return name in self.entries or name in self.moved or (name == self.figures_name and bool(self.figures))

    def own_names(self) -> frozenset[str]:
        """Return the names of all files here, but the figures, that are known to be ours."""
        return frozenset(self.entries) | (frozenset(self.moved) - {self.figures_name})

    def agrees(self, name: str) -> bool:
        """Return whether a listed file is what the figures say."""
        return hash_of(self.path / name) == self.entries[name].get("sha256")

    def disagreement(self) -> str:
        """Return what is not as the figures say, in words; empty if all is."""
        if not self.figures:
            return f"{_some(sorted(self.moved))} without figures" if self.moved else ""
        wrong = sorted(name for name in self.entries if not self.agrees(name))
        missing = [name for name in wrong if not os.path.lexists(self.path / name)]
        other = [name for name in wrong if name not in missing]
        said = [f"{_some(names)} {what}" for names, what in ((other, "differs"), (missing, "is missing")) if names]
        return ", ".join(said)

    def refuse_foreign(self, names: Iterable[str]) -> None:
        """Make sure that files of these names may be written.

        Raises
        ------
        CannotSave
            If one of them is there and not known to be ours, or is no file.
        """
        there = sorted(name for name in names if os.path.lexists(self.path / name))
        foreign = [n for n in there if not self.owns(n) or (self.path / n).is_dir()]
        if foreign:
            raise CannotSave(
                f"{self.path}: {_some(foreign)} is there and was not written by sagwright; "
                "move it away, or export into another folder"
            )


def look(path: Path, stem: str, journal: Hashes) -> Folder:
    """Return what stands in a folder of results.

    Raises
    ------
    CannotSave
        If the folder is a link or no folder: what it leads to is not ours to write in.
    """
    if path.is_symlink() or (path.exists() and not path.is_dir()):
        raise CannotSave(f"{path}: is a link or no folder; move it away, or export into another folder")
    moved = {name: hashes for name, hashes in journal.items() if hash_of(path / name) in hashes}
    return Folder(path, stem, _figures(path / f"{stem}-{FIGURES}", stem), moved)


def _figures(path: Path, stem: str) -> dict[str, Any]:
    """Return figures that a run of ours wrote, or nothing if there are none or they are not ours."""
    try:
        found: Any = json.loads(path.read_bytes()) if not path.is_symlink() else None
        ours = isinstance(found["version"], str) and all(
            is_own_name(entry["name"], stem) and isinstance(entry["sha256"], str) for entry in found["files"]
        )
    except (OSError, ValueError, TypeError, KeyError, RecursionError):
        return {}
    return dict(found) if ours else {}


def _some(names: list[str]) -> str:
    """Return the first names of a list, and how many more there are."""
    more = f" and {len(names) - 2} more" if len(names) > 2 else ""
    return ", ".join(names[:2]) + more
