"""Every key of arches, nets and of what pieces share can be wrong, and says so on its line, once, with a remedy."""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner

from export.cli import cli
from geom.design.reader import NAMED, SECTIONS
from geom.registry import kinds
from tests.bad_arches_and_nets import ARCH, BAD_ARCHES, BAD_NETS, NET
from tests.bad_designs import Bad
from tests.bad_sections import BAD, SHARED
from tests.test_bad_input import problems_of

ALL = [*BAD_ARCHES, *BAD_NETS, *BAD]
BASES = {"arch": ARCH, "net": NET, "shared": SHARED}
TRIED = {"arch": BAD_ARCHES, "net": BAD_NETS}

REMEDIES = (
    "; give", "; write", "; put", "; look", "; remove", "; add", "; or add", "; leave", "; use", "; move",
    "; did you mean",
)  # fmt: skip
WRONG = [
    '"?"', "true", "[]", "[[]]", "{}", "{ a = 1 }", "1e300", "-1e300", "nan", '"1 parsec"', "2026-01-01", '"\\u0000"',
]  # fmt: skip
"""What a key may be given that hardly any takes: no text, number, list or table is right for all."""

HEADERS = {
    "[[arch]]": (ARCH, kinds()["arch"].model), "[[net]]": (NET, kinds()["net"].model),
    **{f"[{name}]": (SHARED, model) for name, model in SECTIONS.items()},
    "[support.P1]": (SHARED, NAMED["support"]), "[fitting.hook]": (SHARED, NAMED["fitting"]),
    "[material.mine]": (SHARED, NAMED["material"]), "[stock.chain]": (SHARED, NAMED["stock"]),
    "[stock.rope]": (SHARED, NAMED["stock"]), "[stock.lot]": (SHARED, NAMED["stock"]),
}  # fmt: skip
KEYS = [(header, key) for header, (_, model) in HEADERS.items() for key in model.keys()]  # noqa: SIM118


def rendered(text: str) -> list[str]:
    return [problem.render("bad.toml") for problem in problems_of(text)]


@pytest.mark.parametrize("base", BASES.values(), ids=BASES)
def test_the_designs_that_are_made_wrong_are_right_before(base: str) -> None:
    assert rendered(base) == []


@pytest.mark.parametrize("bad", ALL, ids=lambda bad: bad.name)
def test_a_wrong_key_is_named_once_with_its_line_and_a_remedy(bad: Bad) -> None:
    found, said = problems_of(bad.text), rendered(bad.text)
    assert len(said) == 1, said
    assert found[0].key == bad.key, said
    assert bad.words in found[0].text, said
    assert found[0].line == bad.line, said
    assert len(said[0].splitlines()) == 1


@pytest.mark.parametrize("bad", ALL[:: len(ALL) // 12], ids=lambda bad: bad.name)
def test_the_command_exits_with_2_and_writes_nothing(bad: Bad, tmp_path: Path) -> None:
    design = tmp_path / "bad.toml"
    design.write_text(bad.text, encoding="utf-8")
    done = CliRunner().invoke(cli, ["export", str(design), "--into", str(tmp_path / "out")])
    assert (done.exit_code, done.stdout) == (2, "")
    assert done.stderr.startswith(f"bad.toml:{bad.line}: ")
    assert len(done.stderr.splitlines()) == 1
    assert "Traceback" not in done.stderr
    assert [path.name for path in tmp_path.iterdir()] == ["bad.toml"]


@pytest.mark.parametrize("table", TRIED)
def test_every_key_of_a_kind_is_made_wrong_somewhere(table: str) -> None:
    tried = {bad.key.split("[")[0].split(".")[0] for bad in TRIED[table]}
    assert set(kinds()[table].model.keys()) <= tried


def test_every_key_of_what_is_shared_is_made_wrong_somewhere() -> None:
    tried = {bad.key.split("[")[0].split(".")[0] for bad in BAD}
    for model in (*SECTIONS.values(), *NAMED.values()):
        assert set(model.keys()) <= tried, model


def _with(base: str, header: str, key: str, value: str) -> tuple[str, int]:
    """Return a design with another value of a key, added under its header where it is absent, and the value's line."""
    lines = base.splitlines()
    start = lines.index(header) + 1
    stop = next((n for n in range(start, len(lines)) if not lines[n] or lines[n].startswith("[")), len(lines))
    number = next((n for n in range(start, stop) if lines[n].split("=")[0].strip() == key), None)
    place = start if number is None else number
    lines[place : place if number is None else place + 1] = [f"{key} = {value}"]
    return "\n".join(lines) + "\n", place + 1


@pytest.mark.parametrize(("header", "key"), KEYS, ids=[f"{header} {key}" for header, key in KEYS])
def test_whatever_stands_at_a_key_is_taken_or_answered_there_with_a_remedy(header: str, key: str) -> None:
    for value in WRONG:
        text, line = _with(HEADERS[header][0], header, key, value)
        found, said = problems_of(text), rendered(text)
        assert all(len(one.splitlines()) == 1 and any(word in one for word in REMEDIES) for one in said), said
        assert len({(problem.line, problem.key) for problem in found}) == len(found), said
        assert not said or any(problem.line == line or "given together" in problem.text for problem in found), said


def test_a_design_of_too_many_pieces_is_refused_before_any_is_read(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("geom.design.reader.MOST_PIECES", 2)
    several = ARCH + ARCH[ARCH.index("[[arch]]") :] + NET[NET.index("[[net]]") :]
    assert rendered(several) == ["bad.toml:1: 3 pieces are more than the 2 of one design; divide it"]


def test_links_are_counted_over_all_members_of_a_design_and_the_one_too_many_is_named() -> None:
    one = '[[hanging]]\nmark = "S{0}"\nfrom = [0, {0}, 0]\nto = ["9 km", {0}, 0]\nstock = "DIN 763-6"\nlinks = 250000\n'
    text = 'unit = "mm"\n' + "".join(one.format(number) for number in range(6))
    (said,) = rendered(text)
    assert said.startswith('bad.toml:31: hanging "S4": links: comes to 1250000 links up to here')
    assert rendered(text.replace("links = 250000\n", "links = 250000\ncopies = 2\n")) != []
