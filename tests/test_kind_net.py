"""Nets as written in a design: what is laid out, held, solved, cut and said."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from export.figures import piece as figures_of
from geom.curves import Catenary, Segment
from geom.design.reader import read
from geom.net.figures import NetFigures
from geom.result import Piece, Result
from geom.solids import Balls, Bars, Links, Union
from geom.solve import solve

GRAVITY = 9.80665  # m/s2, 3rd CGPM, 1901
STOCKS = """
[stock.chain]
kind = "chain"
wire = 6
pitch = 42
width = 21.6
mass_per_metre = "0.63 kg/m"
[stock.rope]
kind = "rope"
diameter = 8
mass_per_metre = "0.25 kg/m"
[stock.rod]
kind = "rod"
diameter = 10
mass_per_metre = "0.6 kg/m"
"""
COURT = """
[[net]]
mark = "K"
outline = [[0, 0, 3500], [6000, 0, 3500], [6000, 4000, 3500], [0, 4000, 3500]]
spacing = 1000
anchors = "edges"
stock = "chain"
force_density = { field = "9 N/m" }
"""


def design(net: str = COURT, before: str = "", **changes: str) -> str:
    """Return a design file of one net, some of its lines replaced or added."""
    lines = [line for line in net.strip().splitlines() if line.split(" ")[0] not in changes]
    return "\n".join(['unit = "mm"', before, STOCKS, *lines, *(f"{k} = {v}" for k, v in changes.items() if v)])


def solved(text: str) -> Result:
    reading = read(text, "court")
    assert [problem.text for problem in reading.problems] == []
    assert reading.design is not None
    result = solve(reading.design)
    assert [problem.text for problem in result.problems] == []
    assert result.result is not None
    return result.result


def net_of(text: str) -> Piece:
    (piece,) = solved(text).pieces
    return piece


def problems(text: str) -> list[str]:
    """Return every problem of reading, or else of solving, as `key: text`."""
    reading = read(text, "court")
    found = reading.problems
    if not found:
        assert reading.design is not None
        found = solve(reading.design).problems
    return [f"{problem.key}: {problem.text}" for problem in found]


def line_of(text: str, start: str) -> int:
    return next(number for number, line in enumerate(text.splitlines(), 1) if line.startswith(start))


def test_a_court_without_edge_members_has_its_nodes_members_and_anchors() -> None:
    figures: NetFigures = net_of(design(edge_stock='"none"')).figures
    # Counted by hand: 15 inner nodes and 16 on the edges; 3 lines of 6 members and 5 of 4.
    assert len(figures.nodes.mark) == 31
    assert figures.nodes.anchored.sum() == 16
    assert len(figures.members.mark) == 38
    assert figures.members.mark[:2] == ("K.1", "K.2")
    assert figures.nodes.mark[0] == "K.N1"
    inner = figures.nodes.at[~figures.nodes.anchored]
    assert inner[:, :2] == pytest.approx(np.array([[x, y] for y in (1, 2, 3) for x in range(1, 6)]), abs=1e-9)
    assert np.all(inner[:, 2] < 3.5)


@pytest.mark.parametrize("members", ["", '"hanging"', '"straight"'])
def test_supports_carry_the_weight_of_all_lengths_and_of_a_ring_at_every_node(members: str) -> None:
    result = solved(design(node_mass='"0.2 kg"', members=members))
    (piece,) = result.pieces
    figures: NetFigures = piece.figures
    weight = 0.63 * GRAVITY * figures.members.hung_length.sum() + 35 * 0.2 * GRAVITY
    total = np.sum([support.pull for support in result.supports], axis=0)
    assert total == pytest.approx([0, 0, -weight], rel=1e-9, abs=1e-9)
    assert figures.residual < 1e-9
    assert len(result.supports) == 20


def test_every_free_node_is_in_balance_by_the_figures_alone() -> None:
    figures: NetFigures = net_of(design(anchors='"corners"', force_density='{ field = "20 N/m" }')).figures
    members, nodes = figures.members, figures.nodes
    number = {mark: k for k, mark in enumerate(nodes.mark)}
    balance = np.zeros((len(nodes.mark), 3))
    for k in range(len(members.mark)):
        a, b = number[members.from_[k]], number[members.to[k]]
        way = nodes.at[b] - nodes.at[a]
        level = members.horizontal[k] * way[:2] / np.hypot(*way[:2])
        # With V_from + V_to = w L and T^2 = H^2 + V^2, V_to - V_from = (T_to^2 - T_from^2)/(w L).
        weight = 0.63 * GRAVITY * members.hung_length[k]
        rise = (members.force_to[k] ** 2 - members.force_from[k] ** 2) / weight
        down_from, down_to = (weight - rise) / 2, (weight + rise) / 2
        balance[a] += [*level, -down_from]
        balance[b] += [*-level, -down_to]
    assert np.abs(balance[~nodes.anchored]).max() < 1e-7
    assert balance[nodes.anchored, 2].sum() == pytest.approx(-0.63 * GRAVITY * members.hung_length.sum(), rel=1e-9)


def test_the_keys_of_the_figures_are_those_agreed() -> None:
    found = figures_of(net_of(design()))
    nodes, members = found["nodes"], found["members"]
    assert isinstance(nodes, list)
    assert isinstance(members, list)
    assert nodes[0] == {"mark": "K.N1", "at_m": [0, 0, 3.5], "anchored": True}
    first = members[0]
    assert isinstance(first, dict)
    assert set(first) == {
        "mark", "from", "to", "chord_m", "force_from_N", "force_to_N", "horizontal_N", "hung_length_m", "pin_to_pin_m",
        "links", "slack",
    }  # fmt: skip
    assert (first["from"], first["to"]) == ("K.N1", "K.N2")
    assert found["intended"] == {"force_density_N_per_m": 9.0}
    assert found["difference"] is None
    assert found["group_move_m"] is None
    assert {"lowest_m", "residual_N"} <= set(found)
    cases = found["cases"]
    assert isinstance(cases, list)
    assert [(case["case"], case["clearance_m"]) for case in cases if isinstance(case, dict)] == [("as hung", None)]


def test_members_are_cut_of_the_whole_links_nearest_to_the_length_found() -> None:
    piece = net_of(design())
    figures: NetFigures = piece.figures
    links = np.array(figures.members.links, dtype=np.float64)
    assert figures.members.pin_to_pin == pytest.approx(links * 0.042, rel=1e-12)
    assert np.abs(figures.members.pin_to_pin - figures.members.hung_length).max() <= 0.021 + 1e-12
    assert [cut.mark for cut in piece.cuts] == list(figures.members.mark)
    assert [cut.links for cut in piece.cuts] == links.tolist()
    assert sum(cut.mass for cut in piece.cuts) == pytest.approx(piece.mass, rel=1e-12)
    assert piece.mass == pytest.approx(0.63 * 0.042 * links.sum(), rel=1e-12)
    (said,) = [caution for caution in piece.cautions if caution.code == "whole links"]
    assert "not solved again" in said.text


def test_rope_is_cut_to_the_shops_step() -> None:
    piece = net_of(design(stock='"rope"', before='[shop]\nstep = "5 mm"'))
    figures: NetFigures = piece.figures
    cuts = np.array([cut.cut_length for cut in piece.cuts])
    assert np.abs(np.round(cuts / 0.005) - cuts / 0.005).max() < 1e-9
    assert np.abs(cuts - figures.members.hung_length).max() <= 0.0025 + 1e-9
    assert figures.members.pin_to_pin == pytest.approx(figures.members.hung_length, rel=1e-12)
    assert set(figures.members.links) == {None}
    assert not [caution for caution in piece.cautions if caution.code == "whole links"]


def test_edges_of_another_stock_weigh_pull_and_are_cut_as_such() -> None:
    piece = net_of(
        design(anchors='"corners"', edge_stock='"rope"', force_density='{ field = "20 N/m", edge = "90 N/m" }')
    )
    figures: NetFigures = piece.figures
    edges = [line.mark for line in piece.lines if line.role == "edge"]
    assert len(edges) == 2 * (6 + 4)
    assert {cut.mark for cut in piece.cuts if cut.stock == "rope"} == set(edges)
    along = np.isin(figures.members.mark, edges)
    step = np.array(
        [[figures.nodes.mark.index(mark) for mark in ends] for ends in (figures.members.from_, figures.members.to)]
    )
    plan = np.linalg.norm((figures.nodes.at[step[1]] - figures.nodes.at[step[0]])[:, :2], axis=1)
    assert figures.members.horizontal / plan == pytest.approx(np.where(along, 90.0, 20.0), rel=1e-9)
    weight = GRAVITY * np.where(along, 0.25, 0.63) @ figures.members.hung_length
    assert sum(pull.vectors["as hung"][2] for pull in piece.pulls) == pytest.approx(-weight, rel=1e-9)
    assert {stock.name for stock in piece.stocks} == {"chain", "rope"}


def test_chain_hangs_in_curves_and_rods_run_straight_unless_told_otherwise() -> None:
    curves = {
        kind: [line.curve for line in net_of(design(stock=f'"{kind}"')).lines if line.role != "chord"]
        for kind in ("chain", "rod")
    }
    assert all(isinstance(curve, Catenary) for curve in curves["chain"])
    assert all(isinstance(curve, Segment) for curve in curves["rod"])
    told = net_of(design(stock='"chain"', members='"straight"'))
    assert all(isinstance(line.curve, Segment) for line in told.lines)
    assert told.figures.members.hung_length == pytest.approx(told.figures.members.chord, rel=1e-14)
    assert not told.figures.members.slack.any()


def test_lines_run_from_node_to_node_in_the_lengths_of_the_figures() -> None:
    piece = net_of(design())
    figures: NetFigures = piece.figures
    at = dict(zip(figures.nodes.mark, figures.nodes.at, strict=True))
    by_mark = {line.mark: line.curve for line in piece.lines if line.role != "chord"}
    for mark, start, stop, length in zip(
        figures.members.mark, figures.members.from_, figures.members.to, figures.members.hung_length, strict=True
    ):
        curve = by_mark[mark]
        assert np.array_equal(curve.start, at[start])
        assert np.array_equal(curve.end, at[stop])
        # The curve's own length, from its parameter H/w alone.
        own = Catenary(curve.start, curve.end, curve.parameter)  # type: ignore[attr-defined]
        assert own.length == pytest.approx(length, rel=1e-9)


def test_the_lowest_point_counts_members_that_hang_under_their_nodes() -> None:
    piece = net_of(design())
    figures: NetFigures = piece.figures
    drawn = min(line.curve.points(1e-5)[:, 2].min() for line in piece.lines)
    assert figures.lowest == pytest.approx(drawn, abs=2e-5)
    assert figures.lowest < figures.nodes.at[:, 2].min() - 0.001
    assert figures.depth == pytest.approx(3.5 - figures.lowest, rel=1e-12)


def test_a_member_over_a_hundredth_longer_than_its_chord_is_slack() -> None:
    members = net_of(design(force_density='{ field = "9 N/m" }')).figures.members
    assert members.slack.tolist() == (members.chord < 0.99 * members.hung_length).tolist()
    assert members.slack.any()
    assert not net_of(design(force_density='{ field = "200 N/m" }')).figures.members.slack.any()


SUPPORTS = """
[support.A]
at = [20, -10, 3400]
height = 3400
[support.B]
at = [6000, 0, 3600]
[support.C]
at = [6000, 4000, 3500]
[support.D]
at = [0, 4000, 3500]
"""


def test_a_net_is_held_at_its_supports_where_they_are_and_pulls_them_by_name() -> None:
    result = solved(design(before=SUPPORTS, anchors='["A", "B", "C", "D", [3000, 2000, 3300]]'))
    (piece,) = result.pieces
    figures: NetFigures = piece.figures
    assert [support.mark for support in result.supports] == ["A", "B", "K.N18", "D", "C"]
    assert figures.nodes.at[0] == pytest.approx([0.02, -0.01, 3.4], abs=1e-12)
    assert figures.nodes.at[17] == pytest.approx([3.0, 2.0, 3.3], abs=1e-12)
    held = result.supports[0]
    assert held.moment == pytest.approx(3.4 * np.hypot(*held.pull[:2]), rel=1e-12)
    table = next(table for table in piece.tables if table.name == "nodes")
    assert table.columns[-1].values[0] == "A"
    assert table.columns[-1].values[17] == "K.N18"


def test_two_nets_on_one_support_pull_it_together_and_copies_count_once() -> None:
    one = design(before=SUPPORTS, anchors='["A", "B", "C", "D"]')
    two = one + "\n" + design(anchors='["A", "B", "C", "D"]', mark='"M"', copies="3").split(STOCKS)[1]
    single, double = solved(one), solved(two)
    assert len(double.supports) == 4
    for alone, both in zip(single.supports, double.supports, strict=True):
        assert both.pull == pytest.approx(2 * alone.pull, rel=1e-12)
        assert both.pieces == ("K", "M")
    assert [cut.copies for cut in double.cuts] == [1] * 58 + [3] * 58


def test_links_stand_along_each_member_in_their_number() -> None:
    piece = net_of(design(anchors='"corners"', force_density='{ field = "20 N/m" }'))
    (solid,) = piece.solids
    assert isinstance(solid.body, Union)
    bodies = [body for body in solid.body.bodies if isinstance(body, Links)]
    assert len(bodies) == len(piece.lines) - 4
    for body, line, count in zip(bodies, piece.lines, piece.figures.members.links, strict=False):
        assert len(body.places) == count
        joints = line.curve.at(np.linspace(0, line.curve.length, count + 1)).points
        assert body.places == pytest.approx((joints[1:] + joints[:-1]) / 2, abs=1e-9)
        assert np.linalg.det(body.turns) == pytest.approx(1.0, abs=1e-12)
        along = np.diff(joints, axis=0)
        assert np.einsum("ni,ni->n", body.turns[:, :, 0], along) == pytest.approx(
            np.linalg.norm(along, axis=1), rel=1e-9
        )
        # Neighbours stand a quarter turn apart: the opening of each (y) is square to the next one's, but for the bend.
        assert np.abs(np.einsum("ni,ni->n", body.turns[1:, :, 1], body.turns[:-1, :, 1])).max() < 1e-9
        # The first link's opening lies in the member's vertical plane.
        assert body.turns[0, :, 1] @ np.cross(along[0], [0, 0, 1]) == pytest.approx(0.0, abs=1e-12)
    assert solid.volume == pytest.approx(sum(body.volume for body in bodies), rel=1e-12)


def test_rope_and_rod_are_tubes_of_their_thickness() -> None:
    piece = net_of(design(stock='"rope"'))
    (solid,) = piece.solids
    assert isinstance(solid.body, Union)
    (bars,) = solid.body.bodies
    assert isinstance(bars, Bars)
    assert solid.volume == pytest.approx(np.pi * 0.004**2 * piece.figures.members.hung_length.sum(), rel=1e-12)
    mesh = solid.mesh(0.001)
    assert mesh.volume == pytest.approx(solid.volume, rel=0.01)


def test_members_cut_alike_are_counted_together() -> None:
    piece = net_of(design())
    table = next(table for table in piece.tables if table.name == "members alike")
    found: dict[str, Any] = {column.key: column.values for column in table.columns}
    assert sum(found["members"]) == len(piece.figures.members.mark)
    links = list(piece.figures.members.links)
    assert {count: links.count(count) for count in links} == dict(zip(found["links"], found["members"], strict=True))


def test_views_are_two_elevations_and_a_plan_with_outline_mesh_depth_and_lowest_point() -> None:
    piece = net_of(design())
    said = [(d.kind, d.says, round(d.value, 9)) for view in piece.views for d in view.dimensions]
    assert ("horizontal", "side on plan", 6.0) in said
    assert ("horizontal", "side on plan", 4.0) in said
    assert [entry for entry in said if entry[1] == "mesh as laid out"] == [
        ("horizontal", "mesh as laid out", 1.0), ("vertical", "mesh as laid out", 1.0),
    ]  # fmt: skip
    depth = next(d for d in piece.views[0].dimensions if d.says == "depth under lowest anchor")
    assert depth.value == pytest.approx(piece.figures.depth, rel=1e-12)
    level = next(d for d in piece.views[0].dimensions if d.kind == "level")
    # The level points at a point of a drawn member, there where it is lowest.
    points = np.concatenate([line.curve.points(1e-6) for line in piece.lines if line.role == "member"])
    assert np.linalg.norm(points - level.q, axis=1).min() < 0.01
    roles = [label.role for label in piece.labels]
    assert (roles.count("support"), roles.count("node"), roles.count("member")) == (20, 15, 58)


REFUSED: list[tuple[dict[str, str], list[str]]] = [
    ({"pattern": '"hexagon"'}, ['pattern: "hexagon" is not laid out by this version yet; give "square"']),
    ({"pattern": '"squre"'},
     ["pattern: \"squre\" is no pattern of a net; did you mean 'square'?; give \"square\""]),
    ({"divisions": "4"}, ["divisions: `spacing` and `divisions` are given together; give just one of them"]),
    ({"spacing": ""}, ["spacing: is missing; give one of spacing, divisions"]),
    ({"spacing": "", "divisions": "0"}, ["divisions: 0 is out of range; give a whole number from 1 to 1000000"]),
    ({"spacing": "", "divisions": "[4, 4, 4]"},
     ["divisions: [4, 4, 4] is no division; give a whole number, or two: along the first side and the second"]),
    ({"spacing": "7000"},
     ["spacing: 7000 mm does not fit an outline whose longest side is 6000 mm on plan; "
      "give more than 0 and at most that"]),
    ({"spacing": "3"},
     ["spacing: 2000 by 1333 meshes come to 5,335,333 members; give a coarser net of 1,000,000 at most"]),
    ({"outline": "[[0, 0, 0], [6000, 4000, 0], [6000, 0, 0], [0, 4000, 0]]"},
     ["outline: has two sides that cross on plan; give the corners in order round the net"]),
    ({"outline": "[[0, 0, 0], [1, 0, 0], [1, 1, 0]]"},
     ["outline: has 3 corners; give the four of a square net, [x, y, z] each, in order"]),
    ({"anchors": '"corner"'},
     ["anchors: \"corner\" holds nothing; did you mean 'corners'?; give \"corners\", \"edges\" or a list "
      "of supports' names or points"]),
    ({"anchors": '["P1"]'}, ['anchors[1]: there is no support "P1"; add it as [support.P1]']),
    ({"anchors": '"corners"', "edge_stock": '"none"'},
     ['anchors: "corners" have no node to hold where no members run along the edges; give "edges", '
      "or a list of supports"]),
    ({"anchors": "[[0, 0, 3500], [2500, 1500, 3500]]"},
     ["anchors[2]: is 707.107 mm from the nearest node, K.N10 at [2000 mm, 1000 mm] on plan, and half a "
      "mesh is only 500 mm; move it to a node, or change the spacing"]),
    ({"anchors": "[[0, 0, 3500], [100, 0, 3500]]"},
     ["anchors[2]: is at K.N1 at [0 mm, 0 mm] on plan, which another anchor holds already; leave one out"]),
    ({"spacing": "", "divisions": "[6, 1]", "edge_stock": '"none"', "anchors": "[[1000, 0, 3500]]"},
     ["anchors: hold no part of the net that node K.N2 belongs to; add an anchor there, or give "
      "members along the edges"]),
    ({"force_density": ""},
     ['force_density: is missing; give { field = "50 N/m", edge = "200 N/m" }']),
    ({"force_density": '{ edge = "9 N/m" }'},
     ['force_density.field: is missing; give that of the members inside the outline, like "50 N/m"']),
    ({"force_density": '{ field = "0.01 N/m" }'},
     ["force_density: a weight per metre of 617.819 times the force density hangs too deep to solve; give more"]),
    ({"members": '"slack"'}, ['members: "slack" is not known here; give one of "hanging", "straight"']),
    ({"slack": "1.08"}, ["slack: is not solved by this version yet; leave it out"]),
    ({"cover": '"0.1 kN/m2"'}, ["cover: is not solved by this version yet; leave it out"]),
    ({"node_mas": "2"}, ["node_mas: is not known; did you mean 'node_mass'?"]),
]  # fmt: skip


@pytest.mark.parametrize(("changes", "expected"), REFUSED)
def test_what_cannot_be_meant_is_said_in_one_line_on_its_key(changes: dict[str, str], expected: list[str]) -> None:
    assert problems(design(**changes)) == expected


def test_a_net_far_deeper_than_wide_is_refused() -> None:
    (said,) = problems(design(anchors='"corners"', force_density='{ field = "2 N/m" }'))
    assert said.startswith("force_density: lets the net hang ")
    assert said.endswith(" deep, over 20 times its longest side; give more")


def test_a_refusal_while_solving_stands_on_the_line_of_its_key() -> None:
    text = design(spacing="7000")
    reading = read(text, "court")
    assert reading.design is not None
    (problem,) = solve(reading.design).problems
    assert (problem.feature, problem.key, problem.line) == ('net "K"', "spacing", line_of(text, "spacing"))


def test_cautions_say_what_pulls_are_of_and_how_many_members_come_out_too_short() -> None:
    # Meshes of 6/7 m take 20.4 links of 42 mm: rounded to 20, they do not reach.
    taut = net_of(design(spacing="", divisions="[7, 4]", force_density='{ field = "300 N/m" }'))
    codes = {caution.code: caution.text for caution in taut.cautions}
    assert {"dead load only", "no stretch", "whole links", "shallow sag"} <= codes.keys()
    figures: NetFigures = taut.figures
    short = int((figures.members.pin_to_pin <= figures.members.chord).sum())
    assert short >= 7 * 5
    assert f"{short} of 67 come out shorter than the distance of their nodes" in codes["whole links"]
    loose = {caution.code for caution in net_of(design(stock='"rope"')).cautions}
    assert not {"whole links", "shallow sag"} & loose


@pytest.mark.parametrize(
    "path", sorted((Path(__file__).parent.parent / "demo_designs").glob("*net*.toml")), ids=lambda p: p.stem
)
def test_demos_of_nets_hang_in_balance(path: Path) -> None:
    result = solved(path.read_text())
    nets = [piece for piece in result.pieces if piece.kind == "net"]
    assert nets
    for piece in nets:
        assert piece.figures.residual < 1e-8
        assert piece.figures.depth > 0.05


def test_ball_chain_is_a_ball_for_each_count() -> None:
    beads = '[stock.beads]\nkind = "beads"\npitch = 6\ndiameter = 4\nmass_per_metre = "0.05 kg/m"'
    piece = net_of(design(before=beads, stock='"beads"', force_density='{ field = "1 N/m" }'))
    (solid,) = piece.solids
    assert isinstance(solid.body, Union)
    balls = [body for body in solid.body.bodies if isinstance(body, Balls)]
    assert [len(body.places) for body in balls] == list(piece.figures.members.links)
    assert solid.volume == pytest.approx(sum(piece.figures.members.links) * np.pi / 6 * 0.004**3, rel=1e-9)
