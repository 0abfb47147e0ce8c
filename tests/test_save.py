"""Writing a folder of results: whole or known not to be, ours or left alone."""

from __future__ import annotations

import dataclasses
import fcntl
import hashlib
import json
import os
import subprocess
import sys
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

from export.outputs import CheckFailed, Choices, File, Output
from export.save import NamesClash, Order, save
from export.staging import CannotSave
from geom.result import Result
from tests.hand_made import result, writing
from tests.killed import contents, order

FILES = {"cuts.csv": b"cuts", "drawing.dxf": b"drawing"}


def asked(*outputs: Output, design: str = "design 1", **changes: Any) -> Order:  # noqa: ANN401
    made = Order(result(), "court", design, outputs or (writing("made", dict(FILES)),))
    return dataclasses.replace(made, **changes)


def figures(into: Path) -> dict[str, Any]:
    found: dict[str, Any] = json.loads((into / "court" / "court-figures.json").read_bytes())
    return found


def test_the_figures_hold_the_hash_of_every_other_file(tmp_path: Path) -> None:
    saved = save(asked(), tmp_path)
    listed = {entry["name"]: entry["sha256"] for entry in figures(tmp_path)["files"]}
    there = {p.name: hashlib.sha256(p.read_bytes()).hexdigest() for p in saved.folder.iterdir()}
    del there["court-figures.json"]
    assert listed == there
    assert set(there) == {"court-cuts.csv", "court-drawing.dxf"}


def test_what_was_checked_of_a_file_and_its_own_figures_stand_in_its_entry(tmp_path: Path) -> None:
    def write(_result: Result, _choices: Choices) -> Iterator[File]:
        yield File("solid-S1.stl", [b"x"], lambda: {"volume_m3": 0.5}, {"origin_m": (1.0, 2.0, 3.0)})

    output = Output("solid", write, lambda path, _result, _choices: {"bytes": path.stat().st_size})
    save(asked(output, verify=True), tmp_path)
    (entry,) = figures(tmp_path)["files"]
    assert entry["origin_m"] == [1.0, 2.0, 3.0]
    assert entry["checked"] == {"volume_m3": 0.5, "bytes": 1}


def test_nothing_but_the_folder_of_results_is_left_behind(tmp_path: Path) -> None:
    save(asked(), tmp_path)
    assert [p.name for p in tmp_path.iterdir()] == ["court"]


def test_the_same_design_gives_the_same_bytes_over_an_older_run_as_into_an_empty_folder(tmp_path: Path) -> None:
    save(order("1"), tmp_path / "a")
    save(order("2"), tmp_path / "a")
    save(order("2"), tmp_path / "b")
    assert contents(tmp_path / "a") == contents(tmp_path / "b")


def test_files_that_are_no_longer_made_are_removed(tmp_path: Path) -> None:
    save(order("1"), tmp_path)
    saved = save(order("2"), tmp_path)
    assert saved.removed == ("court-gone.csv",)
    assert not (tmp_path / "court" / "court-gone.csv").exists()


def test_files_of_anybody_else_are_left_alone(tmp_path: Path) -> None:
    save(order("1"), tmp_path)
    others = {"notes.txt": "mine", "court-letter.pdf": "mine too", ".hidden": ""}
    for name, text in others.items():
        (tmp_path / "court" / name).write_text(text)
    save(order("2"), tmp_path)
    assert {name: (tmp_path / "court" / name).read_text() for name in others} == others


def test_a_file_in_the_way_that_is_not_ours_is_not_overwritten(tmp_path: Path) -> None:
    (tmp_path / "court").mkdir()
    (tmp_path / "court" / "court-cuts.csv").write_text("mine")
    with pytest.raises(CannotSave, match=r"court-cuts\.csv is there and was not written by sagwright"):
        save(asked(), tmp_path)
    assert contents(tmp_path) == {"court/court-cuts.csv": "mine"}


@pytest.mark.parametrize("text", ["", "{}", "[]", '{"version": "1", "files": [{"name": "court-x"}]}', "[" * 5000])
def test_a_figures_file_that_is_not_ours_is_not_overwritten(tmp_path: Path, text: str) -> None:
    (tmp_path / "court").mkdir()
    (tmp_path / "court" / "court-figures.json").write_text(text)
    with pytest.raises(CannotSave, match=r"court-figures\.json is there"):
        save(asked(), tmp_path)


@pytest.mark.parametrize("name", ["../precious.txt", "/etc/hostname", "court-../../precious.txt", "precious.txt"])
def test_figures_that_list_what_cannot_be_ours_do_not_lead_to_its_removal(tmp_path: Path, name: str) -> None:
    (tmp_path / "precious.txt").write_text("mine")
    (tmp_path / "court").mkdir()
    (tmp_path / "court" / "precious.txt").write_text("mine")
    forged = {"version": "0", "files": [{"name": name, "sha256": hashlib.sha256(b"mine").hexdigest()}]}
    (tmp_path / "court" / "court-figures.json").write_text(json.dumps(forged))
    with pytest.raises(CannotSave, match="not written by sagwright"):
        save(asked(), tmp_path)
    assert (tmp_path / "precious.txt").read_text() == "mine"
    assert (tmp_path / "court" / "precious.txt").read_text() == "mine"


@pytest.mark.parametrize(
    ("spoil", "said"),
    [
        (lambda path: path.write_text("half"), "court-cuts.csv differs"),
        (lambda path: path.unlink(), "court-cuts.csv is missing"),
    ],
)
def test_a_folder_that_disagrees_with_its_figures_is_reported_and_written_anew(
    tmp_path: Path, spoil: Callable[[Path], object], said: str
) -> None:
    save(asked(), tmp_path)
    whole = contents(tmp_path)
    spoil(tmp_path / "court" / "court-cuts.csv")
    assert save(asked(), tmp_path).disagreement == said
    assert contents(tmp_path) == whole
    assert save(asked(), tmp_path).disagreement == ""


def test_a_link_in_the_folder_is_replaced_and_not_written_through(tmp_path: Path) -> None:
    save(asked(), tmp_path)
    target = tmp_path / "elsewhere"
    target.write_text("mine")
    cuts = tmp_path / "court" / "court-cuts.csv"
    cuts.unlink()
    cuts.symlink_to(target)
    save(asked(), tmp_path)
    assert target.read_text() == "mine"
    assert cuts.read_bytes() == b"cuts"
    assert not cuts.is_symlink()


def test_a_folder_that_is_a_link_is_refused(tmp_path: Path) -> None:
    (tmp_path / "elsewhere").mkdir()
    (tmp_path / "court").symlink_to(tmp_path / "elsewhere")
    with pytest.raises(CannotSave, match="is a link"):
        save(asked(), tmp_path)
    assert list((tmp_path / "elsewhere").iterdir()) == []


def test_a_staging_folder_that_is_not_ours_is_not_emptied(tmp_path: Path) -> None:
    staging = tmp_path / ".court.staging"
    staging.mkdir()
    (staging / "court-notes").write_text("mine")
    with pytest.raises(CannotSave, match="was not made by sagwright"):
        save(asked(), tmp_path)
    assert (staging / "court-notes").read_text() == "mine"


@pytest.mark.parametrize("stem", ["", ".", "..", "a/b", "../court"])
def test_a_name_that_leads_out_of_the_folder_is_refused(tmp_path: Path, stem: str) -> None:
    with pytest.raises(CannotSave, match="is no name for a folder"):
        save(dataclasses.replace(asked(), stem=stem), tmp_path / "into")
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("name", ["../escaped.csv", "a/b.csv", "a\\b.csv", "a\0b.csv"])
def test_a_file_that_would_lead_out_of_the_folder_is_refused(tmp_path: Path, name: str) -> None:
    with pytest.raises(CannotSave, match="is no name for a file"):
        save(asked(writing("made", {name: b""})), tmp_path / "into")
    assert contents(tmp_path) == {}


def test_two_files_of_one_name_are_refused_capitals_or_not(tmp_path: Path) -> None:
    with pytest.raises(NamesClash, match=r"court-solid-A\.stl would be the name of two files"):
        save(asked(writing("solid", {"solid-a.stl": b"1", "solid-A.stl": b"2"})), tmp_path)
    assert contents(tmp_path) == {}


@pytest.mark.parametrize(
    "failure", [OSError(28, "No space left on device"), CheckFailed("not closed"), KeyboardInterrupt()]
)
def test_a_run_that_fails_leaves_the_folder_as_it_was(tmp_path: Path, failure: Exception) -> None:
    save(order("1"), tmp_path)
    before = contents(tmp_path)
    with pytest.raises(type(failure)):
        save(asked(writing("made", {"a.csv": b"other"}, failure)), tmp_path)
    assert contents(tmp_path) == before


def test_a_check_that_fails_when_read_back_stops_the_run(tmp_path: Path) -> None:
    def verify(path: Path, _result: Result, _choices: Choices) -> dict[str, object]:
        raise CheckFailed(f"{path.name}: not closed")

    output = dataclasses.replace(writing("made", dict(FILES)), verify=verify)
    with pytest.raises(CheckFailed, match=r"court-cuts\.csv: not closed"):
        save(asked(output, verify=True), tmp_path)
    assert contents(tmp_path) == {}


CUTS, DRAWING = writing("cuts", {"cuts.csv": b"cuts"}), writing("drawing", {"drawing.dxf": b"drawing"})


def test_files_left_out_stay_while_the_design_is_unchanged(tmp_path: Path) -> None:
    save(asked(CUTS, DRAWING), tmp_path)
    whole = contents(tmp_path)
    saved = save(asked(CUTS, partial=True), tmp_path)
    assert saved.kept == ("court-drawing.dxf",)
    assert contents(tmp_path) == whole


def test_files_left_out_are_removed_once_the_design_has_changed(tmp_path: Path) -> None:
    save(asked(CUTS, DRAWING), tmp_path)
    saved = save(asked(CUTS, partial=True, design="design 2"), tmp_path)
    assert saved.removed == ("court-drawing.dxf",)
    assert [entry["name"] for entry in figures(tmp_path)["files"]] == ["court-cuts.csv"]


def test_a_file_left_out_that_is_not_as_written_does_not_stay(tmp_path: Path) -> None:
    save(asked(CUTS, DRAWING), tmp_path)
    (tmp_path / "court" / "court-drawing.dxf").write_bytes(b"half")
    assert save(asked(CUTS, partial=True), tmp_path).removed == ("court-drawing.dxf",)


def test_a_file_that_its_own_output_no_longer_makes_does_not_stay(tmp_path: Path) -> None:
    save(asked(writing("solid", {"solid-S1.stl": b"1", "solid-S2.stl": b"2"}), CUTS), tmp_path)
    saved = save(asked(writing("solid", {"solid-S1.stl": b"1"}), partial=True), tmp_path)
    assert saved.kept == ("court-cuts.csv",)
    assert saved.removed == ("court-solid-S2.stl",)


@pytest.mark.parametrize(("mask", "mode"), [(0o022, 0o644), (0o077, 0o600), (0o002, 0o664)])
def test_files_have_the_mode_that_the_mask_leaves(tmp_path: Path, mask: int, mode: int) -> None:
    before = os.umask(mask)
    try:
        saved = save(asked(), tmp_path)
    finally:
        os.umask(before)
    assert {p.stat().st_mode & 0o777 for p in saved.folder.iterdir()} == {mode}


def test_a_second_run_at_the_same_time_is_refused(tmp_path: Path) -> None:
    staging = tmp_path / ".court.staging"
    staging.mkdir()
    with (staging / "sagwright-staging").open("w") as marker:
        fcntl.flock(marker, fcntl.LOCK_EX)
        with pytest.raises(CannotSave, match="another run is writing it"):
            save(asked(), tmp_path)
    save(asked(), tmp_path)
    assert [p.name for p in tmp_path.iterdir()] == ["court"]


def test_chunks_are_written_as_they_come_and_never_gathered(tmp_path: Path) -> None:
    """Each chunk must be on its way to the disk before the next is asked for, else a large solid fills the memory."""
    size = 1 << 20
    seen: list[int] = []

    def chunks() -> Iterator[bytes]:
        for _ in range(5):
            seen.append((tmp_path / ".court.staging" / "court-big.stl").stat().st_size)
            yield bytes(size)

    def write(_result: Result, _choices: Choices) -> Iterator[File]:
        yield File("big.stl", chunks(), dict)

    save(asked(Output("solid", write, lambda _path, _result, _choices: {})), tmp_path)
    assert seen == [0, size, 2 * size, 3 * size, 4 * size]


@pytest.mark.parametrize("first", ["", "1"])
def test_a_run_killed_at_any_step_leaves_no_half_file_and_is_mended_by_the_next(tmp_path: Path, first: str) -> None:
    """Whatever the moment: files under their final names are whole, and the next run ends as if nothing had been."""
    program = [sys.executable, "-m", "tests.killed", str(tmp_path / "into"), first]
    run = subprocess.run(program, capture_output=True, check=True, cwd=Path(__file__).parents[1], timeout=120)
    tried = json.loads(run.stdout)
    assert len(tried) > 30
    assert all(one["killed"] for one in tried[:-1])
    old, new = {}, {}
    if first:
        save(order("1"), tmp_path / "old")
        old = contents(tmp_path / "old" / "court")
    save(order("2"), tmp_path / "new")
    new = contents(tmp_path / "new" / "court")
    between = 0
    for one in tried:
        left = one["left"]
        for name, text in left.items():
            assert text in (old.get(name), new.get(name)), (name, text)
        assert one["after"] == {f"court/{name}": text for name, text in new.items()}
        finished = left in (old, new, {})
        between += not finished
        assert bool(one["said"]) == (not finished), one
    assert between >= 3
