"""What `keys` says of a design's tables is what their models read."""

from __future__ import annotations

import pytest
from click.testing import CliRunner

from export.cli import cli
from export.keylist import tables


def _said(*words: str) -> tuple[int, str]:
    done = CliRunner().invoke(cli, ["keys", *words])
    return done.exit_code, done.output


def test_the_overview_has_every_table_and_every_key() -> None:
    code, said = _said()
    assert code == 0
    for name, model in tables().items():
        assert name in said
        assert all(key in said for key in model.keys())  # noqa: SIM118


@pytest.mark.parametrize("name", sorted(tables()))
def test_each_key_of_a_table_is_explained(name: str) -> None:
    code, said = _said(name)
    assert code == 0
    lines = said.splitlines()
    for key, entry in zip(tables()[name].keys(), tables()[name].model_fields.values(), strict=True):
        assert entry.description
        assert any(line.startswith(key) and entry.description in line for line in lines)


def test_a_table_that_is_not_known_is_answered_with_the_nearest() -> None:
    code, said = _said("hangin")
    assert code == 2
    assert "did you mean 'hanging'" in said
