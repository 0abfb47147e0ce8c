"""Design files as users bring them: which ones the arguments of a command mean, and their text."""

from __future__ import annotations

import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from geom.errors import near

_ENDING = ".toml"


class NotText(ValueError):
    """A file that is not UTF-8 text; `line` is where it stops being so."""

    def __init__(self, text: str, line: int) -> None:
        super().__init__(text)
        self.line = line


@dataclass(frozen=True)
class Found:
    """The design files that were meant, each once, and a line for each argument that means none."""

    paths: tuple[Path, ...]
    problems: tuple[str, ...]


def find(arguments: Sequence[Path]) -> Found:
    """Return the design files that arguments mean; a folder stands for those directly in it, in order of name."""
    paths: dict[str, Path] = {}
    problems: list[str] = []
    for argument in arguments:
        meant = _meant(argument)
        if isinstance(meant, str):
            problems.append(meant)
            continue
        for path in meant:
            if _is_text(path.name):
                paths.setdefault(os.path.abspath(path), path)
            else:
                problems.append(f"{path}: its name is not UTF-8 text, which names of results are made of; rename it")
    return Found(tuple(paths.values()), tuple(problems))


def _meant(argument: Path) -> list[Path] | str:
    if argument.is_dir():
        inside = sorted(p for p in argument.iterdir() if _is_design(p) and p.is_file())
        return inside or f"{argument}: there is no design in this folder; a design is a file ending in {_ENDING}"
    if not argument.exists():
        hint = near(argument.name, _designs_beside(argument)) or f"; give a design ({_ENDING}) or a folder of them"
        return f"{argument}: there is no such file or folder{hint}"
    if argument.suffix.casefold() != _ENDING:
        return f"{argument}: is no design; a design is a file ending in {_ENDING}"
    return [argument]


def _is_text(name: str) -> bool:
    """Whether a file's name can be written in UTF-8: bytes that are not are read as lone surrogates."""
    try:
        name.encode()
    except UnicodeEncodeError:
        return False
    return True


def _is_design(path: Path) -> bool:
    return path.suffix.casefold() == _ENDING and not path.name.startswith(".")


def _designs_beside(path: Path) -> list[str]:
    return [p.name for p in path.parent.iterdir() if _is_design(p)] if path.parent.is_dir() else []


def same_names(paths: Sequence[Path]) -> list[str]:
    """Return a line for each design whose name another has already: their results would share a folder.

    Capitals count as small letters, as on many disks.
    """
    first: dict[str, Path] = {}
    lines = []
    for path in paths:
        other = first.setdefault(path.stem.casefold(), path)
        if other is not path:
            lines.append(f"{path}: has the same name as {other}; rename one of them, nothing was written")
    return lines


def text_of(content: bytes) -> str:
    """Return a design file's text (a byte order mark is left out).

    Raises
    ------
    NotText
        If it is not UTF-8.
    """
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = content[: error.start].count(b"\n") + 1
        found = content[error.start]
        raise NotText(f"is not UTF-8 text (byte 0x{found:02x}); save the file as UTF-8", line) from error
