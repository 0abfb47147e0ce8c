"""Every key of arches, nets and of what pieces share can be wrong, and says so on its line, once, with a remedy."""

from __future__ import annotations

import pytest

from tests.bad_arches_and_nets import ARCH, BAD_ARCHES, BAD_NETS, NET
from tests.bad_designs import Bad
from tests.test_bad_input import problems_of

ALL = [*BAD_ARCHES, *BAD_NETS]


@pytest.mark.parametrize("base", [ARCH, NET], ids=["arch", "net"])
def test_the_designs_that_are_made_wrong_are_right_before(base: str) -> None:
    assert [problem.render("bad.toml") for problem in problems_of(base)] == []


@pytest.mark.parametrize("bad", ALL, ids=lambda bad: bad.name)
def test_a_wrong_key_is_named_once_with_its_line_and_a_remedy(bad: Bad) -> None:
    found = problems_of(bad.text)
    said = [problem.render("bad.toml") for problem in found]
    assert len(said) == 1, said
    assert found[0].key == bad.key, said
    assert bad.words in found[0].text, said
    assert found[0].line == bad.line, said
    assert len(said[0].splitlines()) == 1
