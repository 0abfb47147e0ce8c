"""How long `--help` takes, against the least that any program using arrays takes."""

from __future__ import annotations

import subprocess
import sys
import time
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
_ROUNDS = 7


def _least(*arguments: str) -> float:
    """Return the least time of some runs, s: what else the machine does can only add to it."""
    times = []
    for _ in range(_ROUNDS):
        start = time.perf_counter()
        subprocess.run([sys.executable, *arguments], cwd=ROOT, stdout=subprocess.DEVNULL, check=True)
        times.append(time.perf_counter() - start)
    return min(times)


@pytest.mark.long
def test_help_takes_no_longer_than_three_times_the_import_of_numpy() -> None:
    """Both are measured in one run on one machine, so that the ratio holds on any."""
    assert _least("-m", "export", "--help") < 3.0 * _least("-c", "import numpy")
