"""Every way a key of a run over saddles can be wrong is answered with its line, its key and a remedy, and once."""

from __future__ import annotations

import pytest

from tests.bad_designs import Bad
from tests.bad_saddles import BAD, CHAIN, SADDLES, WEIGHED
from tests.test_bad_input import problems_of


@pytest.mark.parametrize("base", [SADDLES, WEIGHED, CHAIN])
def test_the_designs_that_are_made_wrong_are_right_before(base: str) -> None:
    assert problems_of(base) == ()


@pytest.mark.parametrize("bad", BAD, ids=lambda bad: bad.name)
def test_a_wrong_key_of_a_run_over_saddles_is_named_once_with_its_line(bad: Bad) -> None:
    found = problems_of(bad.text)
    said = [problem for problem in found if problem.key.split("[")[0] == bad.key and bad.words in problem.text]
    assert said, [problem.render("bad.toml") for problem in found]
    assert said[0].line == bad.line, said[0].render("bad.toml")
    assert len({(problem.line, problem.key) for problem in found}) == 1, [p.render("bad.toml") for p in found]
