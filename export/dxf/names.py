"""Names of blocks: a piece's own mark wherever the format allows it."""

from __future__ import annotations

import re

# R12 takes capitals, figures and $ - _ only, and at most 31 of them (DXF reference, R12)
_R12 = re.compile(r"[^A-Z0-9$_-]")
_R12_LONGEST = 31


class Names:
    """Names given to blocks of one document, each once; readers do not tell capitals from small letters."""

    def __init__(self, *, old: bool) -> None:
        self._old = old
        self._given: dict[str, str] = {}
        self._taken: set[str] = set()

    def of(self, mark: str, view: str = "") -> str:
        """Return the name of a piece's block, or of a further view of it; `$` cannot be in a mark."""
        wanted = f"{mark}${view}" if view else mark
        if wanted not in self._given:
            name = self._free(_R12.sub("_", wanted.upper())[:_R12_LONGEST] if self._old else wanted)
            self._given[wanted] = name
            self._taken.add(name.casefold())
        return self._given[wanted]

    def fresh(self, name: str) -> str:
        """Return a name like one that is given already."""
        found = self._free(name)
        self._taken.add(found.casefold())
        return found

    def _free(self, name: str) -> str:
        number, free = 1, name
        while free.casefold() in self._taken:
            number += 1
            end = f"${number}"
            free = f"{name[: _R12_LONGEST - len(end)] if self._old else name}{end}"
        return free
