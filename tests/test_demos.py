"""Every demo design through every output, and the figures that its scenario was worked out to have."""

from __future__ import annotations

import json
import math
import tomllib
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner

from export.cli import cli

ROOT = Path(__file__).resolve().parent.parent
DEMOS = sorted((ROOT / "demo_designs").glob("*.toml"))


@pytest.fixture(scope="module")
def written(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """All demos written once, every file read back in full."""
    into = tmp_path_factory.mktemp("out")
    done = CliRunner().invoke(cli, ["export", str(ROOT / "demo_designs"), "--into", str(into), "--verify", "--quiet"])
    assert done.exit_code == 0, done.output
    return into


def figures(written: Path, stem: str) -> Any:  # noqa: ANN401 - JSON
    return json.loads((written / stem / f"{stem}-figures.json").read_text())


def same(found: object, other: object) -> None:
    """Compare two documents of figures, numbers within rounding."""
    if isinstance(found, dict):
        assert isinstance(other, dict)
        assert found.keys() == other.keys()
        for key in found:
            same(found[key], other[key])
    elif isinstance(found, list):
        assert isinstance(other, list)
        assert len(found) == len(other)
        for one, two in zip(found, other, strict=True):
            same(one, two)
    elif isinstance(found, float):
        assert other == pytest.approx(found, rel=1e-9, abs=1e-9)
    else:
        assert found == other


@pytest.mark.parametrize("demo", DEMOS, ids=lambda path: path.stem)
def test_a_demo_writes_its_files_and_lists_each_with_what_was_checked(demo: Path, written: Path) -> None:
    folder = written / demo.stem
    document = figures(written, demo.stem)
    listed = {entry["name"] for entry in document["files"]}
    assert listed | {f"{demo.stem}-figures.json"} == {path.name for path in folder.iterdir()}
    assert all(entry["checked"] for entry in document["files"])
    for word in ("drawing.dxf", "model.dxf", "cuts.csv", "supports.csv", "tables.xlsx", "preview.svg"):
        assert f"{demo.stem}-{word}" in listed


@pytest.mark.parametrize("demo", DEMOS, ids=lambda path: path.stem)
def test_a_demo_has_no_figure_that_is_no_number(demo: Path, written: Path) -> None:
    text = (written / demo.stem / f"{demo.stem}-figures.json").read_text()
    assert "NaN" not in text
    assert "Infinity" not in text


@pytest.mark.parametrize("demo", DEMOS, ids=lambda path: path.stem)
def test_the_supports_of_a_demo_carry_its_whole_weight(demo: Path, written: Path) -> None:
    """What hangs and what stands alike: the pulls (pushes) downward add up to the mass of all pieces and hardware."""
    document = figures(written, demo.stem)
    down = -sum(support["pull_N"][2] for support in document["supports"])
    mass = sum(piece["mass_kg"] for piece in document["pieces"])
    parts = [part for piece in document["pieces"] for part in (piece, *piece.get("bays", ()))]
    carried = sum(load["force_N"] for part in parts for load in part.get("loads", ()))
    carried += _spread(demo, document)
    behind = sum(piece.get("counterweight_kg") or 0.0 for piece in document["pieces"])
    lying = sum(part["mass_kg"] * part["lying_m"] / part["hung_length_m"] for part in parts if part.get("lying_m"))
    # fittings weigh as their member does, or by their own mass
    assert down == pytest.approx((mass + behind - lying) * 9.80665 + carried, rel=0.1)
    level = [sum(support["pull_N"][axis] for support in document["supports"]) for axis in (0, 1)]
    assert math.hypot(*level) < 1e-6 * down


def _spread(demo: Path, document: Any) -> float:  # noqa: ANN401 - JSON
    """What a load spread over the plan comes to, N: as the design has it, over the spans found."""
    spans = {piece["mark"]: piece.get("span_m") for piece in document["pieces"]}
    hangings = tomllib.loads(demo.read_text()).get("hanging", [])
    spread = ((entry["mark"], str(entry["spread"]).removesuffix(" N/m")) for entry in hangings if "spread" in entry)
    return float(sum(float(load) * spans[mark] for mark, load in spread))


def test_what_hangs_and_what_lies_of_the_barrier_chain_are_its_length(written: Path) -> None:
    """H = w c of the hanging ends; each of them is sqrt(h^2 + 2 h c) long and reaches c acosh(1 + h/c) in (statics)."""
    barrier = figures(written, "foundry-yard")["pieces"][0]
    assert barrier["hanging_m"] + barrier["lying_m"] == pytest.approx(barrier["pin_to_pin_m"], rel=1e-9)
    c = barrier["pull_horizontal_N"] / barrier["used"]["weight_N_per_m"]
    assert barrier["hanging_m"] / 2 == pytest.approx(math.sqrt(1.4**2 + 2 * 1.4 * c), rel=1e-3)
    lying = 3.0 - 2 * c * math.acosh(1 + 1.4 / c)
    assert barrier["lying_m"] == pytest.approx(lying, rel=1e-3)


def test_the_quay_hangs_as_its_scenario_says(written: Path) -> None:
    """Worked out twice, independently, from the scenario's inputs (smooth catenaries of length n p + fittings)."""
    document = figures(written, "ropewalk-quay")
    (run,) = document["pieces"]
    bays = run["bays"]
    assert [bay["links"]["count"] for bay in bays] == [35] * 7 + [29]
    sags = [1000 * bay["sag_m"] for bay in bays]
    assert sags == pytest.approx([242.0, 242.0, 242.0, 240.7, 240.7, 242.0, 242.0, 267.0], abs=0.05)
    assert [1000 * bay["clearance_m"] for bay in bays[:5]] == pytest.approx([658, 658, 658, 659, 659], abs=0.5)
    sloping = bays[3]
    # 271.547 without stretch, which adds 8 micrometres
    assert 1000 * sloping["below_from_m"] == pytest.approx(271.5, abs=0.05)
    assert 1000 * sloping["below_to_m"] == pytest.approx(211.5, abs=0.05)
    assert _neighbours(bays[0]) == {33: None, 34: 148, 36: 311, 37: 369}
    gate = {row["count"]: 1000 * row["sag_m"] for row in bays[7]["links"]["neighbours"]}
    assert (gate[27], gate[28]) == pytest.approx((95.2, 198.7), abs=0.05)
    assert any(caution["code"] == "out of reach" and caution["piece"] == "Q.8" for caution in document["cautions"])
    assert all(bay["links"]["ends"] == "same way" for bay in bays)
    assert sum(cut["links"] for cut in document["cuts"]) == 274
    assert run["mass_kg"] == pytest.approx(15.67, abs=0.005)
    (plan,) = document["stock_plan"]
    assert (plan["links"], plan["links_lost"]) == (281, 7)
    assert plan["patterns"][0]["length_m"] == pytest.approx(14.628, abs=1e-9)


def test_the_handrail_pulls_as_its_counterweight_and_the_rise_say(written: Path) -> None:
    """By hand: 9 kg at the last saddle, which stands as high as the first; without stretch T changes by w dz alone."""
    (run,) = figures(written, "rope-walk-handrail")["pieces"]
    weight = 0.52 * 9.80665
    assert run["pull_to_N"] == pytest.approx(9 * 9.80665, rel=1e-9)
    assert run["pull_from_N"] == pytest.approx(9 * 9.80665, rel=1e-9)
    pulls = [bay["pull_to_N"] for bay in run["bays"]]
    rises = [0.38, 0.58, 0.58, 0.38, 0.0]
    assert pulls == pytest.approx([9 * 9.80665 + weight * rise for rise in rises], rel=1e-9)
    # level between the two crown posts: sag w S^2/8H of the parabola, the catenary's within (w S/H)^2/48
    crown = run["bays"][2]
    assert crown["sag_m"] == pytest.approx(weight * 1.8**2 / (8 * crown["pull_horizontal_N"]), rel=1e-3)


def test_somebody_who_sits_on_a_swag_pulls_the_quays_bollards_as_its_scenario_says(written: Path) -> None:
    """100 kg, static, the chain's own weight included, the bay alone; worked out twice from the scenario's inputs."""
    bay = figures(written, "ropewalk-quay")["pieces"][0]["bays"][0]
    cases = {case["case"]: case for case in bay["cases"]}
    middle, worst = cases["person at mid"], cases["person at worst end"]
    assert (middle["standing"], worst["standing"]) == ("misuse", "misuse")
    assert middle["pull_horizontal_N"] == pytest.approx(1603.0, abs=0.05)
    assert middle["pull_from_N"] == pytest.approx(1679.4, abs=0.05)
    assert 0.9 * middle["pull_horizontal_N"] == pytest.approx(1442.7, abs=0.05)
    assert max(worst["pull_from_N"], worst["pull_to_N"]) == pytest.approx(1686.4, abs=0.05)
    assert 1000 * worst["mark_m"] == pytest.approx(859, abs=0.5)
    bollard = figures(written, "ropewalk-quay")["supports"][0]
    moments = {case["case"]: case["moment_Nm"] for case in bollard["by_case"]}
    assert moments["person at mid"] == pytest.approx(1442.7, abs=0.05)
    assert bollard["magnitude_N"] < 30.0, "a misuse is merged into no pull as hung"


def _neighbours(bay: Any) -> dict[int, int | None]:  # noqa: ANN401
    return {
        row["count"]: None if row["sag_m"] is None else round(1000 * row["sag_m"]) for row in bay["links"]["neighbours"]
    }


def test_the_same_design_gives_the_same_bytes(written: Path, tmp_path: Path) -> None:
    done = CliRunner().invoke(cli, ["export", str(ROOT / "demo_designs"), "--into", str(tmp_path), "--quiet"])
    assert done.exit_code == 0
    for path in tmp_path.rglob("*"):
        if path.is_file() and not path.name.endswith("-figures.json"):
            assert path.read_bytes() == (written / path.relative_to(tmp_path)).read_bytes(), path.name


def test_the_readmes_picture_is_what_its_first_design_makes(written: Path) -> None:
    picture = ROOT / "demo_designs" / "first-swag.svg"
    assert picture.read_bytes() == (written / "first-swag" / "first-swag-preview.svg").read_bytes()
