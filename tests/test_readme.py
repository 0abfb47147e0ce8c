"""What the README shows is true: its design, its five lines of Python, its two commands, its table of files."""

from __future__ import annotations

import re
import subprocess
import sys
from pathlib import Path

import pytest

from export.outputs import outputs

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text()


def _blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", README, flags=re.DOTALL)


def test_the_first_design_is_the_demos() -> None:
    (design,) = _blocks("toml")
    assert design == (ROOT / "demo_designs" / "first-swag.toml").read_text()
    assert len([line for line in design.splitlines() if line]) <= 10


def test_the_lines_of_python_run_as_they_stand() -> None:
    (script,) = _blocks("python")
    done = subprocess.run([sys.executable, "-c", script], cwd=ROOT, capture_output=True, text=True, check=True)
    sag, pull = (float(word) for word in done.stdout.split())
    # 30 digits: level, sinh(u)/u = 17/16, a = 8/u, sag = 2 a sinh^2(u/2) = 2.50244036020; 2 m out of level,
    # sinh(u)/u = sqrt(17^2 - 2^2)/16, T = w a cosh(u + atanh(2/17)) = 25.7002867995
    assert sag == pytest.approx(2.50244036020, rel=1e-9)
    assert pull == pytest.approx(25.7002867995, rel=1e-9)


def test_there_are_exactly_two_commands() -> None:
    commands = re.findall(r"^    \$ (.*)$", README, flags=re.MULTILINE)
    assert len(commands) == 2
    assert "sagwright export demo_designs --into out" in commands[0]
    assert commands[1].endswith("pytest -q -n auto")


def test_every_output_has_its_row_in_the_table_of_files() -> None:
    rows = re.findall(r"^\| `courtyard-([a-z-]+)", README, flags=re.MULTILINE)
    words = {"solid" if row.startswith("solid") else row for row in rows}
    assert words == {*outputs(), "figures"}
