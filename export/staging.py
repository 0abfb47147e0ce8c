"""A folder beside the results in which files are made before they are moved into place.

It holds, while a run lasts, a marker that is locked (so that a second run of the same design waits for nobody's
half-written files, and a run that was killed is told from one that is still at work: the system drops the lock with
the process), the files made so far under their final names, and, once they are being moved, a journal of their
hashes. A run killed between two moves leaves files that no figures list yet; the journal tells the next run that they
are ours.
"""

from __future__ import annotations

import contextlib
import errno
import hashlib
import json
import os
import stat
import sys
from collections.abc import Iterable, Iterator, Mapping
from pathlib import Path
from types import TracebackType

if sys.platform != "win32":  # there are no such locks on Windows: two runs at once are then the user's to avoid
    import fcntl

MARKER = "sagwright-staging"
_JOURNAL = "sagwright-journal.json"
_NEW_JOURNAL = "sagwright-journal.new"
_NO_FOLLOW = getattr(os, "O_NOFOLLOW", 0)
_BLOCK = 1 << 20  # bytes read at once: large enough that the hash, not the system call, takes the time

Hashes = dict[str, frozenset[str]]


class CannotSave(Exception):
    """The folder is not as it would have to be; the text says what is in the way and what to do."""


def is_own_name(name: object, stem: str) -> bool:
    """Return whether a text can be the name of a result file of this design: `<stem>-...`, no path."""
    return (
        isinstance(name, str)
        and name.startswith(f"{stem}-")
        and not any(c in name for c in ("/", "\\", "\0"))
        and Path(name).name == name
    )


def hash_of(path: Path) -> str | None:
    """Return the SHA-256 of a regular file; None if there is none (a link is not followed)."""
    try:
        with os.fdopen(os.open(path, os.O_RDONLY | _NO_FOLLOW | getattr(os, "O_BINARY", 0)), "rb") as file:
            if not stat.S_ISREG(os.fstat(file.fileno()).st_mode):
                return None
            digest = hashlib.sha256()
            while block := file.read(_BLOCK):
                digest.update(block)
    except OSError:
        return None
    return digest.hexdigest()


class Staging:
    """The staging folder of one design, locked from `with` to its end.

    Attributes
    ----------
    folder : Path
        Where it is, `.<stem>.staging` beside the folder of results.
    journal : dict of str to frozenset of str
        Hashes of files that an earlier run was moving when it was stopped, by name.
    """

    def __init__(self, into: Path, stem: str) -> None:
        self.folder = into / f".{stem}.staging"
        self.stem = stem
        self.journal: Hashes = {}
        self._lock = -1

    def __enter__(self) -> Staging:
        self.folder.parent.mkdir(parents=True, exist_ok=True)
        while not self._locked():
            pass
        self.journal = self._read_journal()
        self._empty()
        return self

    def __exit__(self, kind: type[BaseException] | None, _error: object, _trace: TracebackType | None) -> None:
        """Leave nothing behind, but after a failure the journal, if there is one."""
        with contextlib.suppress(OSError):
            self._empty()
            if kind is None:
                (self.folder / _JOURNAL).unlink(missing_ok=True)
            if not (self.folder / _JOURNAL).exists():
                (self.folder / MARKER).unlink(missing_ok=True)
                self.folder.rmdir()
        os.close(self._lock)

    def path(self, name: str) -> Path:
        """Return where a file of this name is staged."""
        return self.folder / name

    def write(self, name: str, chunks: Iterable[bytes]) -> str:
        """Write a file chunk by chunk and return its SHA-256, worked out on the way."""
        digest = hashlib.sha256()
        try:
            with self.path(name).open("xb") as file:
                for chunk in chunks:
                    file.write(chunk)
                    digest.update(chunk)
        except OSError as error:
            error.filename = error.filename or str(self.path(name))  # a full disk does not say where
            raise
        return digest.hexdigest()

    def record(self, hashes: Mapping[str, Iterable[str]]) -> None:
        """Write the journal: it is complete on disk before the first file is moved."""
        new = self.folder / _NEW_JOURNAL
        text = json.dumps({name: sorted(found) for name, found in sorted(hashes.items())}, indent=1)
        with new.open("w", encoding="utf-8") as file:
            file.write(text)
            file.flush()
            os.fsync(file.fileno())
        new.replace(self.folder / _JOURNAL)

    def _locked(self) -> bool:
        """Make, recognise and lock the folder; False if another run removed it meanwhile."""
        with contextlib.suppress(FileExistsError):
            self.folder.mkdir()
        self._recognise()
        marker = self.folder / MARKER
        try:
            self._lock = os.open(marker, os.O_RDWR | os.O_CREAT | _NO_FOLLOW, 0o666)
        except FileNotFoundError:
            return False
        if not self._take_lock():
            os.close(self._lock)
            raise CannotSave(f"{self.folder.parent / self.stem}: another run is writing it; wait for its end")
        with contextlib.suppress(FileNotFoundError):
            if os.path.samestat(os.stat(marker), os.fstat(self._lock)):
                return True
        os.close(self._lock)
        return False

    def _recognise(self) -> None:
        try:
            mode = self.folder.lstat().st_mode
            ours = stat.S_ISDIR(mode) and ((names := os.listdir(self.folder)) == [] or MARKER in names)
        except FileNotFoundError:
            return
        if not ours:
            raise CannotSave(f"{self.folder}: is in the way and was not made by sagwright; move it away")

    def _take_lock(self) -> bool:
        if sys.platform != "win32":
            try:
                fcntl.flock(self._lock, fcntl.LOCK_EX | fcntl.LOCK_NB)
            except OSError as error:
                # Some network file systems know no locks: then as where there are none.
                return error.errno not in (errno.EWOULDBLOCK, errno.EACCES)
        return True

    def _read_journal(self) -> Hashes:
        try:
            raw = json.loads((self.folder / _JOURNAL).read_text(encoding="utf-8"))
            return {n: frozenset(map(str, found)) for n, found in raw.items() if is_own_name(n, self.stem)}
        except (OSError, ValueError, AttributeError, TypeError):
            return {}

    def _empty(self) -> None:
        """Remove staged files; anything that is not ours stays, and the folder with it."""
        for path in self._staged():
            path.unlink(missing_ok=True)

    def _staged(self) -> Iterator[Path]:
        for path in sorted(self.folder.iterdir()):
            if path.name == _NEW_JOURNAL or is_own_name(path.name, self.stem):
                yield path
