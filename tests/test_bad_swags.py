"""Every way a key of swags and curtains can be wrong is answered with its line, its key and a remedy, once."""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner

from export.cli import cli
from geom.hang.intent import FACTS
from geom.kinds.curtain import Curtain
from geom.kinds.swags import Swags
from tests.bad_designs import Bad
from tests.bad_swags import BAD, BAD_CURTAINS, BAD_RINGS, BAD_ROWS, CURTAIN, RINGS, ROW, STEPS
from tests.test_bad_input import problems_of


@pytest.mark.parametrize("base", [ROW, STEPS, RINGS, CURTAIN], ids=["row", "steps", "rings", "curtain"])
def test_the_designs_that_are_made_wrong_are_right_before(base: str) -> None:
    assert problems_of(base) == ()


@pytest.mark.parametrize("bad", BAD, ids=lambda bad: bad.name)
def test_a_wrong_key_is_named_once_with_its_line_and_a_remedy(bad: Bad) -> None:
    found = problems_of(bad.text)
    said = [problem for problem in found if problem.key == bad.key and bad.words in problem.text]
    assert said, [problem.render("bad.toml") for problem in found]
    assert said[0].line == bad.line, said[0].render("bad.toml")
    assert len(said[0].render("bad.toml").splitlines()) == 1
    assert len({(problem.line, problem.key) for problem in found}) == 1, [p.render("bad.toml") for p in found]


@pytest.mark.parametrize("fact", FACTS)
@pytest.mark.parametrize("value", ['"?"', "[]", "true", '{ first = "?", last = "?" }', "{ one = 1 }"])
def test_every_fact_of_a_hanging_is_read_with_care_by_swags(fact: str, value: str) -> None:
    found = problems_of(ROW.replace("sag = [600, 650, 700, 750]", f"{fact} = {value}"))
    assert found
    assert {problem.line for problem in found} == {26}
    assert all(problem.key.startswith(fact) for problem in found)


def test_every_key_of_a_curtain_and_of_swags_is_made_wrong_somewhere() -> None:
    tried = {bad.key.split("[")[0].split(".")[0] for bad in (*BAD_ROWS, *BAD_RINGS)}
    assert set(Swags.keys()) <= tried | set(FACTS)
    assert set(Curtain.keys()) <= {bad.key.split("[")[0].split(".")[0] for bad in BAD_CURTAINS}


def test_a_wrong_curtain_leaves_the_swags_beside_it_to_be_checked_in_the_same_run() -> None:
    both = ROW.replace("sag = [600, 650, 700, 750]", "length = 2300") + CURTAIN[CURTAIN.index("[[curtain]]") :]
    found = problems_of(both.replace("hem = [[0, 900],", "hem = [[0, 2800],"))
    assert {(problem.feature, problem.key) for problem in found} == {('swags "B"', "length"), ('curtain "C"', "hem")}


@pytest.mark.parametrize("bad", [BAD_ROWS[-1], BAD_CURTAINS[20]], ids=lambda bad: bad.name)
def test_the_command_exits_with_2_and_writes_nothing(bad: Bad, tmp_path: Path) -> None:
    design = tmp_path / "bad.toml"
    design.write_text(bad.text)
    done = CliRunner().invoke(cli, ["export", str(design), "--into", str(tmp_path / "out")])
    assert done.exit_code == 2
    assert f"bad.toml:{bad.line}: " in done.stderr
    assert "Traceback" not in done.output
    assert not (tmp_path / "out").exists() or not any((tmp_path / "out").iterdir())
