"""From a solved net to a neutral piece: figures, lines, marks, tables, cuts, pulls, solid, cautions."""

from __future__ import annotations

import numpy as np

from geom.net import views
from geom.net.asked import AskedNet
from geom.net.bodies import solids
from geom.net.cautions import cautions
from geom.net.figures import MemberRows, NetFigures, NodeRows
from geom.net.making import Made, alike, cuts, made
from geom.net.shape import NetShape
from geom.result import Case, Column, Piece, Pull, Quantity, Table, Unit, Used, fixed
from geom.setting.options import Setting

SLACK = 0.01  # share of its length by which a member's chord is shorter, from which on it is called slack

_METRES, _NEWTONS, _NONE = Unit("m"), Unit("N"), Unit("")


def fill(asked: AskedNet, shape: NetShape, intended: Quantity, setting: Setting) -> Piece:
    """Return the piece of a solved net.

    Parameters
    ----------
    intended : Quantity
        The fact asked for. What is made is not solved again, so the difference from it has no figure.
    """
    parts = made(asked, shape, setting.shop.step)
    figures = _figures(asked, shape, parts)
    stock = asked.stocks[0]
    mass = float(parts.mass.sum())
    return Piece(
        mark=asked.mark,
        kind="net",
        what=f"net of {', edges of '.join(f'{stock.kind} {stock.name}' for stock in asked.stocks)}",
        views=views.views(asked, shape),
        mass=mass,
        figures=figures,
        used=Used(source=stock.cited, weight=stock.weight),
        copies=asked.copies,
        intended=intended,
        cases=(_as_hung(figures, setting),),
        stocks=asked.stocks,
        facts=_facts(figures, shape, parts, mass, _pulls(asked, shape)),
        lines=views.lines(asked, shape),
        labels=views.labels(asked, shape),
        solids=solids(asked, shape, parts, setting.drawing.within),
        tables=(_nodes(asked, figures.nodes), _members(asked, figures.members), alike(asked, parts)),
        cuts=cuts(asked, parts),
        pulls=_pulls(asked, shape),
        cautions=cautions(asked, shape, parts, setting),
    )


def _figures(asked: AskedNet, shape: NetShape, parts: Made) -> NetFigures:
    marks = tuple(asked.node_mark(node) for node in range(len(shape.nodes)))
    starts, stops = shape.network.members.T.tolist()
    return NetFigures(
        nodes=NodeRows(marks, fixed(shape.nodes), shape.network.held),
        members=MemberRows(
            mark=tuple(asked.member_mark(member) for member in range(len(shape.length))),
            from_=tuple(marks[node] for node in starts),
            to=tuple(marks[node] for node in stops),
            chord=shape.chord,
            force_from=fixed(shape.force[:, 0]),
            force_to=fixed(shape.force[:, 1]),
            horizontal=shape.horizontal,
            hung_length=shape.length,
            pin_to_pin=fixed(parts.pin_to_pin),
            links=tuple(count or None for count in parts.count.tolist()),
            slack=shape.length - shape.chord > SLACK * shape.length,
        ),
        lowest=shape.lowest,
        depth=float(shape.nodes[shape.network.held, 2].min()) - shape.lowest,
        residual=shape.residual,
    )


def _as_hung(figures: NetFigures, setting: Setting) -> Case:
    """Return the only case: a net has a pull for each anchor and member, and no clearance without ground."""
    return Case(
        case="as hung",
        standing="dead load only",
        temperature=setting.shop.temperature,
        sag=figures.depth,
        lowest=figures.lowest,
    )


def _facts(
    figures: NetFigures, shape: NetShape, parts: Made, mass: float, pulls: tuple[Pull, ...]
) -> tuple[Quantity, ...]:
    """Return what a shop needs under the elevation; a fixing bears the vector sum of all members at it."""
    links = int(parts.count.sum())
    on_anchors = [float(np.linalg.norm(vector)) for pull in pulls for vector in pull.vectors.values()]
    return (
        Quantity("members", float(len(shape.length))),
        Quantity("links", float(links)) if links else Quantity("cut length", float(parts.cut.sum()), _METRES),
        Quantity("depth", figures.depth, _METRES),
        Quantity("mass", mass, Unit("kg")),
        Quantity("greatest end pull of a member", float(shape.force.max()), _NEWTONS),
        Quantity("greatest pull on an anchor (vector sum)", max(on_anchors), _NEWTONS),
    )


def _nodes(asked: AskedNet, nodes: NodeRows) -> Table:
    supports: list[str | None] = [None] * len(nodes.mark)
    for number, node in enumerate(asked.anchors.tolist()):
        supports[node] = asked.support_mark(number)
    columns = (
        Column("mark", _NONE, "node", nodes.mark),
        *(Column(axis, _METRES, axis, nodes.at[:, k]) for k, axis in enumerate("xyz")),
        Column("support", _NONE, "support", tuple(supports)),
    )
    return Table("nodes", columns, asked.mark)


def _members(asked: AskedNet, members: MemberRows) -> Table:
    links = np.array([np.nan if count is None else count for count in members.links])
    columns = (
        Column("mark", _NONE, "member", members.mark),
        Column("from", _NONE, "from", members.from_),
        Column("to", _NONE, "to", members.to),
        Column("stock", _NONE, "stock", tuple(asked.stocks[of].name for of in asked.stock_of.tolist())),
        Column("links", _NONE, "links", links),
        Column("pin_to_pin", _METRES, "pin to pin as made", members.pin_to_pin),
        Column("hung_length", _METRES, "length as hung", members.hung_length),
        Column("chord", _METRES, "chord", members.chord),
        Column("force_from", _NEWTONS, "pull at from", members.force_from),
        Column("force_to", _NEWTONS, "pull at to", members.force_to),
        Column("horizontal", _NEWTONS, "horizontal pull", members.horizontal),
        Column("slack", _NONE, "slack", tuple("yes" if slack else "no" for slack in members.slack.tolist())),
    )
    return Table("members", columns, asked.mark)


def _pulls(asked: AskedNet, shape: NetShape) -> tuple[Pull, ...]:
    """Return what the net pulls each support with, node and its ring included."""
    return tuple(
        Pull(
            asked.support_mark(number),
            bool(support and support.name),
            shape.nodes[node],
            {"as hung": fixed(reaction)},
            support.height if support else None,
        )
        for number, (node, support, reaction) in enumerate(
            zip(asked.anchors.tolist(), asked.supports, shape.reactions, strict=True)
        )
    )
