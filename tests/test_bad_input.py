"""Every way a key can be wrong is answered with exit code 2, its line, its key and a remedy, and nothing written."""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner

from export.cli import cli
from geom.design.reader import read
from geom.errors import Problem
from geom.solve import solve
from tests.bad_designs import BAD_HANGINGS, BAD_RUNS, HANGING, RUN, Bad

ALL = [*BAD_HANGINGS, *BAD_RUNS]


def problems_of(text: str) -> tuple[Problem, ...]:
    reading = read(text, "bad")
    solved = solve(reading.design).problems if reading.design is not None else ()
    return reading.problems + solved


@pytest.mark.parametrize("base", [HANGING, RUN])
def test_the_designs_that_are_made_wrong_are_right_before(base: str) -> None:
    assert problems_of(base) == ()


@pytest.mark.parametrize("bad", ALL, ids=lambda bad: bad.name)
def test_a_wrong_key_is_named_with_its_line_and_a_remedy(bad: Bad) -> None:
    found = problems_of(bad.text)
    said = [problem for problem in found if problem.key == bad.key and bad.words in problem.text]
    assert said, [problem.render("bad.toml") for problem in found]
    assert said[0].line == bad.line, said[0].render("bad.toml")
    assert len(said[0].render("bad.toml").splitlines()) == 1


@pytest.mark.parametrize("bad", ALL, ids=lambda bad: bad.name)
def test_one_fault_is_reported_once(bad: Bad) -> None:
    found = problems_of(bad.text)
    assert len({(problem.line, problem.key) for problem in found}) == 1, [p.render("bad.toml") for p in found]


@pytest.mark.parametrize("bad", [ALL[0], ALL[21], ALL[27], ALL[-4]], ids=lambda bad: bad.name)
def test_the_command_exits_with_2_and_writes_nothing(bad: Bad, tmp_path: Path) -> None:
    design = tmp_path / "bad.toml"
    design.write_text(bad.text)
    done = CliRunner().invoke(cli, ["export", str(design), "--into", str(tmp_path / "out")])
    assert done.exit_code == 2
    assert f"bad.toml:{bad.line}: " in done.stderr
    assert "Traceback" not in done.output
    assert not (tmp_path / "out").exists() or not any((tmp_path / "out").iterdir())


def test_all_problems_of_a_file_are_reported_at_once_from_reading_and_solving_alike() -> None:
    second = '[[hanging]]\nmark = "S2"\nfrom = "A"\nto = [4000, 0, 3000]\nstock = "mine"\nlength = 3900\n'
    text = HANGING.replace("sag  = 600", "sag = -1").replace("copies = 2", "copys = 2") + second
    found = problems_of(text)
    assert {(problem.feature, problem.key) for problem in found} == {
        ('hanging "S1"', "sag"),
        ('hanging "S1"', "copys"),
        ('hanging "S2"', "length"),
    }


def test_what_refers_to_a_wrong_entry_is_not_reported_again() -> None:
    found = problems_of(HANGING.replace("takes = 32", "takes = -32"))
    assert [(problem.feature, problem.key) for problem in found] == [("[fitting.shackle]", "takes")]


def test_a_mark_given_twice_is_refused_whatever_its_capitals() -> None:
    second = HANGING[HANGING.index("[[hanging]]") :].replace('"S1"', '"s1"')
    (problem,) = problems_of(HANGING + second)
    assert problem.key == "mark"
    assert "already the mark of" in problem.text


def test_an_entry_that_nothing_uses_is_cautioned_and_one_that_is_used_is_not() -> None:
    text = HANGING.replace('fittings = { from = "shackle", to = ["shackle", 48] }\n', "")
    reading = read(text, "bad")
    assert reading.design is not None
    result = solve(reading.design).result
    assert result is not None
    (caution,) = [caution for caution in result.cautions if caution.code == "not used"]
    assert "[fitting.shackle]" in caution.text
    assert "support.A" not in caution.text
    assert "stock.mine" not in caution.text
