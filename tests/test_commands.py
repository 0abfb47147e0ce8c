"""The commands as a user meets them: what is printed where, what is written, and the exit code."""

from __future__ import annotations

import json
import os
import pty
import re
import resource
import signal
import subprocess
import sys
import time
import tomllib
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner, Result

from export import __version__, staging
from export.cli import cli
from export.outputs import CheckFailed, outputs
from export.plaintext import rounded
from tests.killed import contents

ROOT = Path(__file__).parents[1]

GOOD = """\
title = "A swag"
unit = "mm"

[[hanging]]
mark = "S1"
from = [0, 0, 3000]
to = [2400, 0, 3000]
stock = "DIN 763-6"
sag = 400
"""
# Line 4: a key that no reader knows. Line 12: a length that no solver can hang, 2 m over a span of 2.4 m.
WRONG = """\
title = "Two faults"
unit = "mm"
[shop]
stepp = 1

[[hanging]]
mark = "S1"
from = [0, 0, 3000]
to = [2400, 0, 3000]
stock = "DIN 763-6"
round = "down"
length = 2000
"""


def run(*arguments: str | Path) -> Result:
    return CliRunner().invoke(cli, [str(argument) for argument in arguments], prog_name="sagwright")


def program(*arguments: str | Path, **options: Any) -> subprocess.CompletedProcess[str]:  # noqa: ANN401
    command = [sys.executable, "-m", "export", *map(str, arguments)]
    return subprocess.run(command, cwd=ROOT, capture_output=True, text=True, timeout=60, check=False, **options)


@pytest.fixture
def design(tmp_path: Path) -> Path:
    path = tmp_path / "court.toml"
    path.write_text(GOOD, encoding="utf-8")
    return path


@pytest.fixture
def few(monkeypatch: pytest.MonkeyPatch) -> None:
    """Only the outputs of this test's concern, which are quick to make."""
    found = {name: output for name, output in outputs().items() if name in ("cuts", "supports", "tables")}
    monkeypatch.setattr("export.outputs.outputs", lambda: found)


def lines(text: str) -> list[str]:
    return text.splitlines()


@pytest.mark.usefixtures("few")
def test_export_writes_the_folder_and_prints_what_and_where(design: Path, tmp_path: Path) -> None:
    made = run("export", design, "--into", tmp_path / "out", "--verify")
    assert (made.exit_code, made.stderr) == (0, "")
    written = {p.name for p in (tmp_path / "out" / "court").iterdir()}
    assert written == {"court-cuts.csv", "court-supports.csv", "court-tables.xlsx", "court-figures.json"}
    assert lines(made.stdout)[0] == f"court.toml -> {tmp_path / 'out' / 'court'}"
    assert written <= {line.strip() for line in lines(made.stdout)}
    assert "  caution: S1: Pulls are of the dead load only" in made.stdout


@pytest.mark.usefixtures("few")
def test_verify_says_how_many_files_were_read_back(design: Path, tmp_path: Path) -> None:
    made = run("export", design, "--into", tmp_path / "out", "--verify")
    count = len(list((tmp_path / "out" / design.stem).iterdir()))
    assert [line.strip() for line in lines(made.stdout) if "read back" in line] == [
        f"verified: {count} files read back in full"
    ]
    assert "read back" not in run("export", design, "--into", tmp_path / "out").stdout


def test_check_says_which_bay_a_difference_is_of_and_what_an_arch_s_figures_mean() -> None:
    demos = Path(__file__).parents[1] / "demo_designs"
    said = run("check", demos / "ropewalk-quay.toml", demos / "garden-arch.toml").stdout
    assert "made minus asked for, in the worst bay" in said
    assert "thickness at which the inner parallel folds" in said
    assert "line of thrust off the axis over the thickness" in said
    assert "greatest thickness" not in said


@pytest.mark.usefixtures("few")
def test_quiet_says_nothing_where_nothing_is_wrong(design: Path, tmp_path: Path) -> None:
    made = run("export", design, "--into", tmp_path / "out", "--quiet")
    assert (made.exit_code, made.output) == (0, "")


def test_every_problem_of_a_file_is_one_line_reading_and_solving_alike(tmp_path: Path) -> None:
    path = tmp_path / "court.toml"
    path.write_text(WRONG, encoding="utf-8")
    made = run("export", path, "--into", tmp_path / "out")
    assert (made.exit_code, made.stdout) == (2, "")
    places = [re.match(r"court\.toml:(\d+): (.*?): (.*?): ", line) for line in lines(made.stderr)]
    assert [place.groups() if place else None for place in places] == [
        ("4", "[shop]", "stepp"),
        ("12", 'hanging "S1"', "length"),
    ]
    assert not (tmp_path / "out").exists()


@pytest.mark.usefixtures("few")
def test_each_design_stands_alone(design: Path, tmp_path: Path) -> None:
    (tmp_path / "wrong.toml").write_text(WRONG, encoding="utf-8")
    made = run("export", tmp_path / "wrong.toml", design, "--into", tmp_path / "out")
    assert made.exit_code == 2
    assert len(lines(made.stderr)) == 2
    assert [p.name for p in (tmp_path / "out").iterdir()] == ["court"]


@pytest.mark.usefixtures("few")
def test_a_folder_stands_for_the_designs_in_it(design: Path, tmp_path: Path) -> None:
    for name in ("also.TOML", ".hidden.toml", "notes.txt"):
        (tmp_path / name).write_text(GOOD, encoding="utf-8")
    (tmp_path / "deeper.toml").mkdir()
    (tmp_path / "linked.toml").symlink_to(design)
    made = run(
        "export", tmp_path, tmp_path / "deeper.toml" / ".." / "court.toml", "--into", tmp_path / "out", "--quiet"
    )
    assert made.exit_code == 0
    assert sorted(p.name for p in (tmp_path / "out").iterdir()) == ["also", "court", "linked"]


@pytest.mark.parametrize(
    ("name", "said"),
    [
        ("curt.toml", "there is no such file or folder; did you mean 'court.toml'?"),
        ("nowhere/a.toml", "there is no such file or folder; give a design (.toml) or a folder of them"),
        ("notes.txt", "is no design; a design is a file ending in .toml"),
        ("empty", "there is no design in this folder; a design is a file ending in .toml"),
    ],
)
def test_an_argument_that_means_no_design_is_one_line_and_exit_2(
    design: Path, tmp_path: Path, name: str, said: str
) -> None:
    (tmp_path / "notes.txt").touch()
    (tmp_path / "empty").mkdir()
    made = run("check", tmp_path / name)
    assert (made.exit_code, made.stdout) == (2, "")
    assert lines(made.stderr) == [f"{tmp_path / name}: {said}"]
    assert design.exists()


def test_a_file_that_is_not_utf_8_is_named_with_the_line(tmp_path: Path) -> None:
    path = tmp_path / "court.toml"
    path.write_bytes(b'unit = "mm"\ntitle = "Caf\xe9"\n')
    made = run("check", path)
    assert made.exit_code == 2
    assert lines(made.stderr) == ["court.toml:2: is not UTF-8 text (byte 0xe9); save the file as UTF-8"]


@pytest.mark.usefixtures("few")
def test_a_byte_order_mark_is_no_fault(tmp_path: Path) -> None:
    path = tmp_path / "court.toml"
    path.write_bytes(b"\xef\xbb\xbf" + GOOD.encode())
    assert run("check", path).exit_code == 0


@pytest.mark.parametrize("other", ["court.toml", "COURT.toml", "court.TOML"])
def test_two_designs_of_one_name_are_refused_before_anything_is_written(
    design: Path, tmp_path: Path, other: str
) -> None:
    (tmp_path / "b").mkdir()
    (tmp_path / "b" / other).write_text(GOOD, encoding="utf-8")
    made = run("export", design, tmp_path / "b", "--into", tmp_path / "out")
    assert made.exit_code == 2
    (line,) = lines(made.stderr)
    assert f"has the same name as {design}; rename one of them" in line
    assert not (tmp_path / "out").exists()


def test_an_unknown_word_after_only_names_the_nearest(design: Path, tmp_path: Path) -> None:
    made = run("export", design, "--into", tmp_path / "out", "--only", "cuts,suports")
    assert (made.exit_code, made.stdout) == (2, "")
    (line,) = lines(made.stderr)
    assert "'suports' is no file of ours; did you mean 'supports'?" in line
    assert not (tmp_path / "out").exists()


@pytest.mark.usefixtures("few")
@pytest.mark.parametrize(
    ("words", "written"),
    [(["cuts"], {"cuts.csv"}), (["cuts,", "tables"], {"cuts.csv", "tables.xlsx"}), (["figures"], set())],
)
def test_only_writes_what_was_asked_for_and_the_figures(
    design: Path, tmp_path: Path, words: list[str], written: set[str]
) -> None:
    options = [text for word in words for text in ("--only", word)]
    assert run("export", design, "--into", tmp_path, *options).exit_code == 0
    there = {p.name.removeprefix("court-") for p in (tmp_path / "court").iterdir()}
    assert there == written | {"figures.json"}


@pytest.mark.usefixtures("few")
def test_files_left_out_by_only_stay_until_the_design_is_changed(design: Path, tmp_path: Path) -> None:
    run("export", design, "--into", tmp_path)
    whole = contents_of(tmp_path / "court")
    made = run("export", design, "--into", tmp_path, "--only", "cuts")
    assert "  left as it was: court-tables.xlsx" in lines(made.stdout)
    assert contents_of(tmp_path / "court") == whole
    design.write_text(GOOD.replace("sag = 400", "sag = 300"), encoding="utf-8")
    made = run("export", design, "--into", tmp_path, "--only", "cuts")
    assert "  removed: court-tables.xlsx" in lines(made.stdout)
    assert {p.name for p in (tmp_path / "court").iterdir()} == {"court-cuts.csv", "court-figures.json"}


def contents_of(folder: Path) -> dict[str, bytes]:
    return {p.name: p.read_bytes() for p in folder.iterdir()}


@pytest.mark.usefixtures("few")
def test_a_folder_that_was_left_unfinished_is_said_so_and_written_anew(design: Path, tmp_path: Path) -> None:
    run("export", design, "--into", tmp_path)
    whole = contents_of(tmp_path / "court")
    (tmp_path / "court" / "court-cuts.csv").write_text("half")
    made = run("export", design, "--into", tmp_path, "--quiet")
    assert made.exit_code == 0
    (line,) = lines(made.stderr)
    assert "left unfinished by an earlier run or changed since (court-cuts.csv differs)" in line
    assert contents_of(tmp_path / "court") == whole


@pytest.mark.usefixtures("few")
def test_within_reaches_the_polylines_of_the_figures(design: Path, tmp_path: Path) -> None:
    points = {}
    for within in ("5 mm", "0.05", "0.05 mm"):
        assert run("export", design, "--into", tmp_path, "--within", within).exit_code == 0
        figures = json.loads((tmp_path / "court" / "court-figures.json").read_bytes())
        points[within] = figures["pieces"][0]["points_m"]
    assert points["0.05"] == points["0.05 mm"]
    assert len(points["0.05 mm"]) > 3 * len(points["5 mm"])


@pytest.mark.parametrize("within", ["0", "-1 mm", "wide", "3 kg", "", "1e-7", "0.0009 mm", "0.0009"])
def test_a_within_that_nothing_can_be_drawn_within_is_refused(design: Path, within: str) -> None:
    made = run("check", design, f"--within={within}")
    assert (made.exit_code, made.stdout) == (2, "")
    assert len(lines(made.stderr)) == 1
    assert "--within" in made.stderr


@pytest.mark.parametrize(
    "arguments",
    [
        ["export"],
        ["export", "a.toml"],
        ["exprt"],
        ["check", "--nope", "a.toml"],
        ["--nope"],
        ["check"],
        ["stock", "--nope"],
    ],
)
def test_wrong_arguments_are_one_line_and_exit_2(arguments: list[str]) -> None:
    made = run(*arguments)
    assert (made.exit_code, made.stdout) == (2, "")
    assert len(lines(made.stderr)) == 1
    assert "--help" in made.stderr


def test_a_misspelt_command_names_the_nearest() -> None:
    assert "did you mean 'export'?" in run("exprt", "a.toml").stderr


def full_disk(monkeypatch: pytest.MonkeyPatch) -> str:
    def write(*_args: object) -> str:
        raise OSError(28, "No space left on device", "out/court-cuts.csv")

    monkeypatch.setattr(staging.Staging, "write", write)
    return "court.toml: out/court-cuts.csv: No space left on device"


def failed_check(monkeypatch: pytest.MonkeyPatch) -> str:
    def write(*_args: object) -> str:
        raise CheckFailed("court-cuts.csv: 3 rows, not 4")

    monkeypatch.setattr(staging.Staging, "write", write)
    return "court.toml: court-cuts.csv: 3 rows, not 4"


def fault(monkeypatch: pytest.MonkeyPatch) -> str:
    monkeypatch.setattr("export.work.solve", lambda _design: 1 // 0)
    return (
        "court.toml: a fault in the program (ZeroDivisionError: integer division or modulo by zero); "
        "run it with --debug for where it is"
    )


@pytest.mark.usefixtures("few")
@pytest.mark.parametrize("fail", [full_disk, failed_check, fault])
def test_any_other_failure_is_one_line_and_exit_1(
    design: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, fail: Callable[[pytest.MonkeyPatch], str]
) -> None:
    said = fail(monkeypatch)
    made = run("export", design, "--into", tmp_path / "out")
    assert (made.exit_code, lines(made.stderr)) == (1, [said])
    assert made.stdout == ""
    assert not (tmp_path / "out").exists() or contents(tmp_path / "out") == {}


@pytest.mark.usefixtures("few")
def test_a_file_of_somebody_else_in_the_way_is_exit_1(design: Path, tmp_path: Path) -> None:
    (tmp_path / "court").mkdir()
    (tmp_path / "court" / "court-cuts.csv").write_text("mine")
    made = run("export", design, "--into", tmp_path)
    assert made.exit_code == 1
    (line,) = lines(made.stderr)
    assert "court-cuts.csv is there and was not written by sagwright" in line


@pytest.mark.usefixtures("few")
def test_an_interrupt_is_one_line_and_exit_1(design: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def interrupted(*_args: object) -> str:
        raise KeyboardInterrupt

    monkeypatch.setattr(staging.Staging, "write", interrupted)
    made = run("export", design, "--into", tmp_path / "out")
    assert made.exit_code == 1
    assert lines(made.stderr.strip()) == ["sagwright: stopped; nothing half-written was left under its own name"]
    assert contents(tmp_path / "out") == {}


def test_a_disk_that_takes_no_more_is_one_line_in_the_real_program(design: Path, tmp_path: Path) -> None:
    """A limit on the size of files (RLIMIT_FSIZE) fails a write half-way, as a full disk does."""

    def limit() -> None:
        signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
        resource.setrlimit(resource.RLIMIT_FSIZE, (1024, 1024))

    made = program("export", design, "--into", tmp_path / "out", "--only", "cuts,supports", preexec_fn=limit)
    assert made.returncode == 1
    (line,) = lines(made.stderr)
    assert re.fullmatch(r"court\.toml: .*court-\w+\.(csv|json): File too large", line)
    assert contents(tmp_path / "out") == {}


def test_a_traceback_shows_only_when_asked_for(tmp_path: Path, design: Path) -> None:
    blocked = tmp_path / "file"
    blocked.touch()
    for debug in ([], ["--debug"]):
        made = program("export", design, "--into", blocked / "out", "--only", "cuts", *debug)
        assert made.returncode == 1
        assert ("Traceback" in made.stderr) == bool(debug)
        assert lines(made.stderr)[-1].endswith("Not a directory")


def test_check_prints_figures_neighbours_pulls_and_cautions_and_writes_nothing(design: Path, tmp_path: Path) -> None:
    before = sorted(tmp_path.rglob("*"))
    made = run("check", design)
    assert (made.exit_code, made.stderr) == (0, "")
    assert sorted(tmp_path.rglob("*")) == before
    text = made.stdout
    assert re.search(r"^S1: hanging, chain DIN 763-6$", text, re.MULTILINE)
    assert re.search(r"^  asked for: sag +400 mm$", text, re.MULTILINE)
    assert re.search(r"^  span +2400 mm$", text, re.MULTILINE)
    assert re.search(r"^  pull horizontal +[0-9.]+ N \(dead load only\)$", text, re.MULTILINE)
    assert re.search(r"^  S1\.from +as hung +dead load only +[0-9.]+ N", text, re.MULTILINE)
    neighbours = text[text.index("neighbours") :].splitlines()[1:6]
    counts = [int(row.split()[0]) for row in neighbours[1:]]
    made_count = int(re.search(r"links: count +(\d+)", text)[1])  # type: ignore[index]
    assert counts == [made_count + step for step in (-2, -1, 1, 2)]
    assert "\ncautions\n  S1: Pulls are of the dead load only" in text


@pytest.mark.parametrize(("unit", "span"), [("mm", "2400 mm"), ("in", "94.488 in"), ("ft", "7'-10 1/2\"")])
def test_check_speaks_the_designs_unit(tmp_path: Path, unit: str, span: str) -> None:
    """2.4 m is 94.4882 in, and 7 ft 10.49 in."""
    path = tmp_path / "court.toml"
    lengths = {"[2400, 0": '["2400 mm", 0', "3000]": '"3000 mm"]', "= 400": '= "400 mm"', '"mm"\n': f'"{unit}"\n'}
    text = GOOD
    for old, new in lengths.items():
        text = text.replace(old, new)
    path.write_text(text, encoding="utf-8")
    assert re.search(rf"^  span +{re.escape(span)}$", run("check", path).stdout, re.MULTILINE)


def test_what_a_design_holds_cannot_reach_the_terminal_as_an_order(tmp_path: Path) -> None:
    path = tmp_path / "court.toml"
    path.write_text(GOOD.replace("A swag", "\\u001b[2J\\u0007 bell"), encoding="utf-8")
    made = run("check", path)
    assert made.exit_code == 2
    assert "court.toml:1: title: " in made.output
    assert "U+001B" in made.output
    assert "\x1b" not in made.output
    assert "\x07" not in made.output


def test_an_empty_folder_or_list_of_files_is_refused_and_nothing_written(
    design: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "elsewhere").mkdir()
    monkeypatch.chdir(tmp_path / "elsewhere")
    for options in (("--into", ""), ("--into", "out", "--only", ""), ("--into", "out", "--only", " , ")):
        made = run("export", design, *options)
        assert (made.exit_code, made.stdout) == (2, "")
        assert "; " in made.stderr
        assert list(Path().iterdir()) == []


@pytest.mark.skipif(sys.platform != "linux", reason="other systems' names are text")
def test_a_name_that_is_no_text_is_reported_and_the_others_are_written(design: Path, tmp_path: Path) -> None:
    odd = os.fsencode(design.parent) + b"/bad\xff.toml"
    Path(os.fsdecode(odd)).write_bytes(design.read_bytes())
    made = program("export", design.parent, "--into", tmp_path / "out", "--only", "cuts")
    assert made.returncode == 2
    assert "bad?.toml: its name is not UTF-8 text" in made.stderr
    assert (tmp_path / "out" / "court" / "court-cuts.csv").exists()


@pytest.mark.skipif(sys.platform == "win32", reason="a shell's closing of streams")
def test_a_run_whose_streams_are_closed_does_its_work(design: Path, tmp_path: Path) -> None:
    line = f'"{sys.executable}" -m export export "{design}" --into "{tmp_path}/out" --only cuts >&- 2>&-'
    assert subprocess.run(line, shell=True, cwd=ROOT, timeout=60, check=False).returncode == 0
    assert (tmp_path / "out" / "court" / "court-cuts.csv").exists()


def test_help_lists_every_command_and_loads_none_of_the_heavy_libraries() -> None:
    code = (
        "import sys; from export.cli import cli\n"
        "try: cli(['--help'])\n"
        "except SystemExit: pass\n"
        "loaded = {name.partition('.')[0] for name in sys.modules}\n"
        "print(sorted(loaded & {'numpy', 'scipy', 'pydantic', 'ezdxf', 'rich'}))"
    )
    made = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=True)
    assert lines(made.stdout)[-1] == "[]"
    for name in ("check", "export", "stock"):
        assert re.search(rf"^  {name} +\w", made.stdout, re.MULTILINE)


@pytest.mark.parametrize("command", ["export", "check", "stock"])
def test_every_command_explains_itself(command: str) -> None:
    made = run(command, "--help")
    assert made.exit_code == 0
    assert made.stdout.startswith(f"Usage: sagwright {command} ")


def test_the_version_is_that_of_the_distribution() -> None:
    stated = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]["version"]
    assert __version__ == stated
    assert run("--version").stdout == f"sagwright, version {stated}\n"


def test_results_go_to_stdout_and_bars_to_a_terminal_on_stderr(design: Path, tmp_path: Path) -> None:
    """The bars are drawn with escape sequences: none may get into a redirected result."""
    ours, theirs = pty.openpty()
    command = [sys.executable, "-m", "export", "export", str(design), "--into", str(tmp_path), "--only", "cuts"]
    environment = {**os.environ, "TERM": "xterm"}
    with subprocess.Popen(command, cwd=ROOT, stdout=subprocess.PIPE, stderr=theirs, env=environment) as made:
        os.close(theirs)
        assert made.stdout is not None
        out = made.stdout.read()
        shown = b""
        while chunk := _read(ours):
            shown += chunk
    os.close(ours)
    assert made.returncode == 0
    assert b"court-cuts.csv" in out
    assert b"\x1b" not in out
    assert b"\x1b" in shown


def _read(terminal: int) -> bytes:
    try:
        return os.read(terminal, 4096)
    except OSError:  # the other end is closed
        return b""


def test_a_reader_that_has_enough_is_no_fault(design: Path) -> None:
    command = f"'{sys.executable}' -m export check '{design}' | true"
    made = subprocess.run(["sh", "-c", command], cwd=ROOT, capture_output=True, text=True, check=True, timeout=60)
    assert made.stderr == ""


@pytest.mark.long
def test_the_real_program_killed_at_any_moment_is_mended_by_the_next_run(design: Path, tmp_path: Path) -> None:
    start = time.perf_counter()
    assert program("export", design, "--into", tmp_path / "whole").returncode == 0
    took = time.perf_counter() - start
    whole = contents_of(tmp_path / "whole" / "court")
    for part in range(1, 21):
        command = [sys.executable, "-m", "export", "export", str(design), "--into", str(tmp_path / "out")]
        with subprocess.Popen(command, cwd=ROOT, stdout=subprocess.DEVNULL) as made:
            time.sleep(took * part / 20)
            made.kill()
        left = tmp_path / "out" / "court"
        found = contents_of(left) if left.exists() else {}
        assert all(found[name] == whole[name] for name in found)
        if part % 4 == 0:
            assert program("export", design, "--into", tmp_path / "out").returncode == 0
            assert contents_of(left) == whole
            assert [p.name for p in (tmp_path / "out").iterdir()] == ["court"]


def test_stock_lists_sizes_masses_and_what_they_rest_on() -> None:
    """DIN 763, size 8: pitch 52 mm, outside width 33.6 mm (4.2 d), 1.1 kg/m, as copies of its table have it."""
    made = run("stock", "DIN", "763")
    assert (made.exit_code, made.stderr) == (0, "")
    text = made.stdout
    head = next(line for line in lines(text) if line.strip().startswith("name"))
    row = next(line for line in lines(text) if line.strip().startswith("DIN 763-8 "))
    assert re.split(r" {2,}", head.strip())[:5] == ["name", "wire, mm", "pitch, mm", "width, mm", "mass, kg/m"]
    assert re.split(r" {2,}", row.strip())[:5] == ["DIN 763-8", "8", "52", "33.6", "1.1"]
    for said in ("source: DIN 763", "(copy of the standard)", "confirm: ", "Not for lifting"):
        assert said in text
    assert "DIN 766" not in text


def test_stock_lists_materials_too_and_everything_without_a_text() -> None:
    assert re.search(r"^  brick +1900 ", run("stock", "brick").stdout, re.MULTILINE)
    everything = run("stock").stdout
    for name in ("DIN 763-8", "7x19-5", "EN 818-2-18", "brick", "steel"):
        assert re.search(rf"^  {re.escape(name)} ", everything, re.MULTILINE)


def test_a_stock_that_is_not_known_is_one_line_and_exit_2() -> None:
    made = run("stock", "DIM 763-8")
    assert (made.exit_code, made.stdout) == (2, "")
    assert lines(made.stderr) == ["there is no stock or material 'DIM 763-8'; did you mean 'DIN 763-8'?"]


@pytest.mark.parametrize(
    ("value", "decimals", "text"),
    [
        (1836.04, 1, "1836"), (0.0312, 1, "0.0312"), (-0.04, 0, "-0.04"), (12.25, 1, "12.2"), (0.0, 1, "0"),
        (-0.0, 1, "0"), (1e-12, 3, "0"), (999.96, 1, "1000"), (float("nan"), 1, "-"), (float("inf"), 1, "-"),
    ],
)  # fmt: skip
def test_numbers_are_shown_as_far_as_a_shop_can_use_them(value: float, decimals: int, text: str) -> None:
    assert rounded(value, decimals) == text


def test_the_same_design_gives_the_same_bytes_whatever_the_day_the_place_and_the_hash_seed(
    design: Path, tmp_path: Path
) -> None:
    found = []
    for seed, zone in (("1", "UTC-9"), ("2", "UTC+9")):
        into = tmp_path / seed
        environment = {**os.environ, "PYTHONHASHSEED": seed, "TZ": zone}
        assert program("export", design, "--into", into, env=environment).returncode == 0
        found.append(contents_of(into / "court"))
    first, second = found
    assert set(first) == set(second)
    assert [name for name in first if first[name] != second[name]] == []
    assert len(first) >= 5
