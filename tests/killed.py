"""Run as a program: saves in a child that is killed at its n-th step on the disk, for every n, and says what was left.

Steps are what Python's audit hooks report (open, rename, remove, mkdir, rmdir; PEP 578) and each chunk of a file, so
that every moment between two changes of the disk is tried, not some moments picked by a clock.
"""

from __future__ import annotations

import json
import os
import shutil
import signal
import sys
from collections.abc import Iterator
from pathlib import Path

from export.save import Order, Saved, save
from tests.hand_made import result, writing

_STEPS = ("open", "os.rename", "os.remove", "os.mkdir", "os.rmdir", "os.listdir", "chunk")
_STEM = "court"


class _Chunks(list[bytes]):
    """Chunks that report each of themselves as a step."""

    def __iter__(self) -> Iterator[bytes]:
        for chunk in super().__iter__():
            sys.audit("chunk")
            yield chunk


def order(version: str) -> Order:
    """Return what is saved: version 2 no longer makes one of the files of version 1, and makes a new one."""
    texts = {"a.csv": f"a{version}", "b.csv": f"b{version}", "gone.csv" if version == "1" else "new.csv": "c"}
    files = {name: _Chunks(f"{text} {line}\n".encode() for line in range(3)) for name, text in texts.items()}
    return Order(result(), _STEM, f"design {version}", [writing("made", dict(files))])


def _killed_at(step: int, into: Path, version: str) -> bool:
    """Save in a child that dies before its step of this number; returns whether it came to that."""
    child = os.fork()
    if child == 0:
        count = 0

        def hook(event: str, _args: object) -> None:
            nonlocal count
            count += event in _STEPS
            if count == step and event != "os.kill":  # which the hook hears too
                os.kill(os.getpid(), signal.SIGKILL)

        sys.addaudithook(hook)
        save(order(version), into)
        os._exit(0)
    code = os.waitstatus_to_exitcode(os.waitpid(child, 0)[1])
    if code not in (0, -signal.SIGKILL):
        raise RuntimeError(f"the child failed with {code}")
    return code == -signal.SIGKILL


def contents(folder: Path) -> dict[str, str]:
    """Return every file under a folder, by its path."""
    return {str(p.relative_to(folder)): p.read_bytes().decode() for p in sorted(folder.rglob("*")) if p.is_file()}


def main(into: Path, first: str) -> None:
    """Try every step, from an empty folder or from one holding version 1, and print what was found as JSON."""
    found = []
    step = 0
    while True:
        step += 1
        shutil.rmtree(into, ignore_errors=True)
        if first:
            save(order(first), into)
        killed = _killed_at(step, into, "2")
        left = contents(into / _STEM)
        saved: Saved = save(order("2"), into)
        after = contents(into)
        found.append({"killed": killed, "left": left, "said": saved.disagreement, "after": after})
        if not killed:
            break
    print(json.dumps(found))  # noqa: T201 - this is its result


if __name__ == "__main__":
    main(Path(sys.argv[1]), sys.argv[2])
