"""The architecture: what is added by one file, which way imports point, and where the packages come from."""

from __future__ import annotations

import ast
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

import export.files
import geom
import geom.kinds
from export.outputs import Choices, outputs
from geom.design.reader import read
from geom.registry import kinds
from geom.solve import solve

ROOT = Path(__file__).resolve().parent.parent

KIND_FILE = '''
"""A plumb line: one strand that hangs straight down from a support."""

from pydantic import Field

from geom.curves import Segment
from geom.fields import Feature, Size
from geom.registry import Kind, refuse
from geom.result import PLAN, Line, Piece, Used, View
from geom.setting.supports import SupportRef


class Plumb(Feature):
    """The table [[plumb]]."""

    at: SupportRef = Field(description="what it hangs from")
    drop: Size = Field(description="how far it hangs")


def solve(plumbs, setting):
    """One piece for each, or a refusal of those that are over a metre."""
    return [_piece(p) if p.drop <= 1.0 else refuse("drop", "is over 1 m; give less") for p in plumbs]


def _piece(plumb):
    x, y, z = plumb.at.at
    line = Line("axis", Segment([x, y, z], [x, y, z - plumb.drop]), plumb.mark)
    return Piece(plumb.mark, "plumb", "plumb line", (View("plan", PLAN),), 0.0, None, Used("a test"), lines=(line,))


KIND = Kind("plumb", Plumb, solve)
'''

LAYOUT_FILE = '''
"""A row of plumb lines under one rail."""

from dataclasses import replace

from pydantic import Field

from geom.fields import Copies, Feature, Size
from geom.kinds.plumb import Plumb
from geom.registry import Layout
from geom.setting.supports import Support


class Row(Feature):
    """The table [[row]]."""

    count: Copies = Field(description="how many")
    drop: Size = Field(description="how far they hang")


def expand(row, setting):
    """One plumb line at each metre."""
    return [
        Plumb.model_construct(mark=f"{row.mark}.{n + 1}", at=Support((float(n), 0.0, 2.0)), drop=row.drop)
        for n in range(row.count)
    ]


def gather(row, parts, setting):
    """The first, with all lines."""
    return replace(parts[0], mark=row.mark, kind="row", lines=tuple(line for part in parts for line in part.lines))


LAYOUT = Layout("row", Row, "plumb", expand, gather, part="line")
'''

OUTPUT_FILE = '''
"""The marks of all pieces, one a line."""

from export.outputs import File, Output


def write(result, choices):
    """One small file."""
    yield File("marks.txt", ["\\n".join(piece.mark for piece in result.pieces).encode()], lambda: {"marks": 1})


OUTPUT = Output("marks", write, lambda path, result, choices: {"marks": 1})
'''


@pytest.fixture
def added(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[None]:
    """A kind, a layout and an output, each added by one file in a folder beside the project's own."""
    (tmp_path / "kinds").mkdir()
    (tmp_path / "files").mkdir()
    (tmp_path / "kinds" / "plumb.py").write_text(KIND_FILE)
    (tmp_path / "kinds" / "row.py").write_text(LAYOUT_FILE)
    (tmp_path / "files" / "marks.py").write_text(OUTPUT_FILE)
    monkeypatch.setattr(geom.kinds, "__path__", [*geom.kinds.__path__, str(tmp_path / "kinds")])
    monkeypatch.setattr(export.files, "__path__", [*export.files.__path__, str(tmp_path / "files")])
    yield
    for name in ("geom.kinds.plumb", "geom.kinds.row", "export.files.marks"):
        sys.modules.pop(name, None)


@pytest.mark.usefixtures("added")
def test_one_file_adds_a_kind_a_layout_and_an_output() -> None:
    assert {"plumb", "row", "hanging"} <= kinds().keys()
    text = 'unit = "m"\n[[row]]\nmark = "R"\ncount = 3\ndrop = 0.5\n[[plumb]]\nmark = "P"\nat = [9, 0, 2]\ndrop = 1\n'
    reading = read(text, "added")
    assert reading.problems == ()
    assert reading.design is not None
    result = solve(reading.design).result
    assert result is not None
    assert [(piece.mark, len(piece.lines)) for piece in result.pieces] == [("R", 3), ("P", 1)]
    (file,) = outputs()["marks"].write(result, Choices())
    assert b"".join(file.chunks) == b"R\nP"


@pytest.mark.usefixtures("added")
def test_a_layouts_part_that_cannot_be_made_is_reported_on_the_layouts_own_key() -> None:
    reading = read('unit = "m"\n[[row]]\nmark = "R"\ncount = 2\ndrop = 1.5\n', "added")
    assert reading.design is not None
    problems = solve(reading.design).problems
    assert [(p.line, p.feature, p.key) for p in problems] == [(5, 'row "R"', "drop")] * 2
    assert problems[1].text.startswith("line 2: is over 1 m")


def test_two_files_that_add_one_kind_are_an_error(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "twice.py").write_text("from geom.kinds.hanging import KIND\n")
    monkeypatch.setattr(geom.kinds, "__path__", [*geom.kinds.__path__, str(tmp_path)])
    try:
        with pytest.raises(RuntimeError, match="two files"):
            kinds()
    finally:
        sys.modules.pop("geom.kinds.twice", None)


def _imports(path: Path) -> set[str]:
    tree = ast.parse(path.read_text())
    found = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found |= {name.name for name in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            found |= {node.module} | {f"{node.module}.{name.name}" for name in node.names}
    return found


ROOMS_ABOVE = {
    "units": {"fields", "result", "setting", "hang", "arch", "net", "shop", "kinds", "design", "solve", "registry"},
    "curves": {"result", "setting", "hang", "arch", "net", "shop", "kinds", "design", "solve", "registry"},
    "solids": {"result", "setting", "hang", "arch", "net", "shop", "kinds", "design", "solve", "registry"},
    "setting": {"hang", "arch", "net", "shop", "kinds", "design", "solve", "registry"},
    "hang": {"arch", "net", "kinds", "design", "solve"},
    "arch": {"net", "kinds", "design", "solve"},
    "net": {"arch", "kinds", "design", "solve"},
    "shop": {"hang", "arch", "net", "kinds", "design", "solve"},
    "kinds": {"design", "solve"},
    "design": {"solve"},
}


@pytest.mark.parametrize("room", sorted(ROOMS_ABOVE))
def test_imports_point_one_way(room: str) -> None:
    folder = ROOT / "geom" / room
    files = [ROOT / "geom" / f"{room}.py"] if not folder.is_dir() else sorted(folder.rglob("*.py"))
    banned = tuple(f"geom.{above}" for above in ROOMS_ABOVE[room])
    wrong = {
        (file.name, name)
        for file in files
        for name in _imports(file)
        if name.startswith("export") or any(name == ban or name.startswith(ban + ".") for ban in banned)
    }
    assert not wrong


@pytest.mark.parametrize("library", ["ezdxf", "trimesh", "xlsxwriter", "manifold3d", "click", "rich"])
def test_the_geometry_knows_no_file_format(library: str) -> None:
    script = f"import sys, geom.solve, geom.registry as r; r.kinds(); print({library!r} in sys.modules)"
    done = subprocess.run([sys.executable, "-c", script], cwd=ROOT, capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "False"


def test_the_packages_tested_are_this_repositorys_own() -> None:
    assert Path(geom.__file__).resolve().parent.parent == ROOT
    assert Path(export.files.__file__).resolve().parent.parent.parent == ROOT
