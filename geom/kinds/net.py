"""A net: nodes and members of chain, rope or rod over an outline, hung by force densities."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Annotated, Any, ClassVar

import numpy as np
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo

from geom.errors import SolveError, near, say
from geom.fields import Count, Feature, ForcePerLength, Mass, PointField, Section, Size, choice
from geom.net import force_density
from geom.net.asked import AskedNet
from geom.net.filling import fill
from geom.net.network import nearest, unheld
from geom.net.pattern import Pattern, PatternError, square
from geom.net.shape import NetShape
from geom.registry import Fault, Kind, Outcome, Refusal, refuse
from geom.result import Quantity, Unit
from geom.setting.options import Setting
from geom.setting.stock import Stock, StockRef
from geom.setting.supports import Support, SupportRef
from geom.units import STANDARD_GRAVITY

LATER = frozenset(
    {
        "lines", "layer", "centre", "inner_radius", "outer_radius", "spokes", "rings", "holes", "slack", "sag",
        "length", "links", "cover", "loads", "groups", "inverted", "section", "thickness", "wall", "material",
    }
)  # fmt: skip
LATER_PATTERNS = ("diagonal", "triangle", "hexagon", "ring")
WHOLE = ("corners", "edges")
NONE = "none"
_LINE = 1e-7  # of the net: anchors no farther off a line on plan are in it
MOST_LINKS = 1_000_000  # of all copies together: a design of more is refused
DEEPEST = 20.0
"""Depth over the outline's longest side, past which force densities are too small for the weights to mean anything: a
net that deep hangs in near plumb strands, and lengths grow without bound from there."""


def _pattern(raw: Any) -> str:  # noqa: ANN401 - as the file has it
    if raw in LATER_PATTERNS:
        raise ValueError(f'{say(raw)} is not laid out by this version yet; give "square"')
    if raw != "square":
        hint = near(raw, ("square", *LATER_PATTERNS)) if isinstance(raw, str) else ""
        raise ValueError(f'{say(raw)} is no pattern of a net{hint}; give "square"')
    return "square"


def _divisions(raw: Any) -> tuple[int, int]:  # noqa: ANN401
    values = raw if isinstance(raw, list) else [raw, raw]
    if len(values) != 2:
        raise ValueError(f"{say(raw)} is no division; give a whole number, or two: along the first side and the second")
    along, across = (_COUNT.validate_python(value) for value in values)
    return along, across


def _anchors(raw: Any, info: ValidationInfo) -> str | tuple[Support, ...]:  # noqa: ANN401
    if raw in WHOLE:
        return str(raw)
    if isinstance(raw, list) and raw:
        return _SUPPORTS.validate_python(raw, context=info.context)
    hint = near(raw, WHOLE) if isinstance(raw, str) else ""
    raise ValueError(f'{say(raw)} holds nothing{hint}; give "corners", "edges" or a list of supports\' names or points')


def _edge_stock(raw: Any, info: ValidationInfo) -> Stock | str:  # noqa: ANN401
    if raw == NONE:
        return NONE
    stock: Stock = _STOCK.validate_python(raw, context=info.context)
    return stock


_COUNT: TypeAdapter[int] = TypeAdapter(Count)
_SUPPORTS: TypeAdapter[tuple[Support, ...]] = TypeAdapter(tuple[SupportRef, ...])
_STOCK: TypeAdapter[Stock] = TypeAdapter(StockRef)


class ForceDensity(Section):
    """The key `force_density`: horizontal pull over plan distance of each member (force over length of a rod)."""

    field: ForcePerLength = Field(description='that of the members inside the outline, like "50 N/m"')
    edge: ForcePerLength | None = Field(
        None, description="that of the members along the edges; the field's, if left out"
    )


class Net(Feature):
    """The table [[net]]."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (("spacing", "divisions"),)
    later: ClassVar[frozenset[str]] = LATER

    pattern: Annotated[str, BeforeValidator(_pattern)] = Field("square", description="how members run")
    outline: tuple[PointField, ...] = Field(description="its corners in order, [[x, y, z], ...]")
    spacing: Size | None = Field(None, description="distance between neighbouring nodes on plan, as near as it divides")
    divisions: Annotated[tuple[int, int] | None, BeforeValidator(_divisions)] = Field(
        None, description="meshes along the sides: one number, or two"
    )
    anchors: Annotated[str | tuple[Support, ...], BeforeValidator(_anchors)] = Field(
        description='"corners", "edges", or a list of supports\' names or points'
    )
    stock: StockRef = Field(description='the stock of its members, like "DIN 763-8" or one of your own [stock.NAME]')
    edge_stock: Annotated[Stock | str | None, BeforeValidator(_edge_stock)] = Field(
        None, description='the stock along the edges, "none" for no members there; `stock`, if left out'
    )
    members: Annotated[str | None, choice("hanging", "straight")] = Field(
        None, description="each its own hanging curve (chain and rope), or straight (rod)"
    )
    force_density: ForceDensity = Field(description='{ field = "50 N/m", edge = "200 N/m" }')
    node_mass: Mass = Field(0.0, description="the mass of a ring or clamp at every node")


def solve(nets: Sequence[Net], setting: Setting) -> list[Outcome]:
    """Solve each net of a design: every net is one array call of its own."""
    return [_solve(net, setting) for net in nets]


def _solve(net: Net, setting: Setting) -> Outcome:
    try:
        asked = _asked(net, setting)
        if isinstance(asked, Refusal):
            return asked
        shape = _hang(asked)
    except PatternError as error:
        return refuse(error.key, str(error))
    except SolveError as error:
        return refuse("force_density", f"{error}; give more")
    return _too_deep(net, shape, setting) or _too_many(asked, shape) or _piece(net, asked, shape, setting)


def _piece(net: Net, asked: AskedNet, shape: NetShape, setting: Setting) -> Outcome:
    intended = Quantity("force_density", net.force_density.field, Unit("N_per_m"))
    return fill(asked, shape, intended, setting)


def _hang(asked: AskedNet) -> NetShape:
    loads = np.zeros((len(asked.pattern.nodes), 3))
    loads[:, 2] = -asked.node_mass * STANDARD_GRAVITY
    return force_density.solve(asked.network, asked.density, weight=asked.weight, loads=loads, straight=asked.straight)


def _asked(net: Net, setting: Setting) -> AskedNet | Refusal:
    """Return a net as its solver takes it, or why it cannot be laid out or held."""
    pattern = square(
        net.outline,
        divisions=net.divisions,
        spacing=net.spacing,
        edge_members=net.edge_stock != NONE,
        say=setting.stated,
    )
    held = _held(net, pattern, setting)
    if isinstance(held, Refusal):
        return held
    pattern, supports = held
    edge_stock = net.edge_stock if isinstance(net.edge_stock, Stock) else net.stock
    stocks = tuple(dict.fromkeys((net.stock, edge_stock)))
    stock_of = np.where(pattern.edge, len(stocks) - 1, 0)
    densities = net.force_density
    asked = AskedNet(
        mark=net.mark,
        pattern=pattern,
        anchors=np.array(sorted(supports), dtype=np.intp),
        supports=tuple(supports[node] for node in sorted(supports)),
        stocks=stocks,
        stock_of=stock_of,
        density=np.where(pattern.edge, densities.edge or densities.field, densities.field),
        straight=np.array([_is_straight(net, stock) for stock in stocks])[stock_of],
        node_mass=net.node_mass,
        copies=net.copies,
    )
    return _adrift(asked) or _in_line(asked) or asked


def _is_straight(net: Net, stock: Stock) -> bool:
    return net.members == "straight" if net.members is not None else stock.kind == "rod"


def _held(net: Net, pattern: Pattern, setting: Setting) -> tuple[Pattern, dict[int, Support | None]] | Refusal:
    """Return the pattern with its anchors where their supports are, and the support of each anchored node."""
    if not isinstance(net.anchors, str):
        return _held_at(net, net.anchors, pattern, setting)
    nodes = pattern.corners if net.anchors == "corners" else pattern.boundary
    if not len(nodes):
        text = 'have no node to hold where no members run along the edges; give "edges", or a list of supports'
        return refuse("anchors", f'"corners" {text}')
    return pattern, dict.fromkeys(nodes.tolist())


def _held_at(
    net: Net, anchors: Sequence[Support], pattern: Pattern, setting: Setting
) -> tuple[Pattern, dict[int, Support | None]] | Refusal:
    found = nearest(pattern.nodes, pattern.members, [support.at for support in anchors])
    faults, supports = [], dict[int, Support | None]()
    for place, (support, node, distance, far) in enumerate(
        zip(anchors, found.node.tolist(), found.distance.tolist(), found.too_far.tolist(), strict=True)
    ):
        at = ", ".join(setting.stated(float(value)) for value in pattern.nodes[node, :2])
        name = f"{net.mark}.N{node + 1} at [{at}] on plan"
        if far:
            text = f"is {setting.stated(distance)} from the nearest node, {name}, and half a mesh is only"
            text += f" {setting.stated(0.5 * float(found.mesh[place]))}; move it to a node, or change the spacing"
            faults.append(Fault(("anchors", place), text))
        elif node in supports:
            faults.append(Fault(("anchors", place), f"is at {name}, which another anchor holds already; leave one out"))
        supports[node] = support
    if faults:
        return Refusal(tuple(faults))
    nodes = pattern.nodes.copy()
    nodes[list(supports)] = [support.at for support in anchors]
    return replace(pattern, nodes=nodes), supports


def _adrift(asked: AskedNet) -> Refusal | None:
    loose = unheld(asked.network)
    if not len(loose):
        return None
    text = f"hold no part of the net that node {asked.node_mark(int(loose[0]))} belongs to"
    return refuse("anchors", f"{text}; add an anchor there, or give members along the edges")


def _in_line(asked: AskedNet) -> Refusal | None:
    """Force densities draw a net together over its anchors: over one to a point, over those on a line to that line."""
    plan = asked.pattern.nodes[asked.anchors, :2]
    spread = np.linalg.svd(plan - plan.mean(axis=0), compute_uv=False)
    if len(spread) > 1 and spread[1] > _LINE * float(np.ptp(asked.pattern.nodes[:, :2], axis=0).max()):
        return None
    return refuse("anchors", "let the whole net be drawn together; give at least three, not in one line on plan")


def _too_deep(net: Net, shape: NetShape, setting: Setting) -> Refusal | None:
    corners = np.array(net.outline)
    side = float(np.hypot(*(np.roll(corners, -1, axis=0) - corners)[:, :2].T).max())
    depth = float(shape.nodes[shape.network.held, 2].min()) - shape.lowest
    if depth <= DEEPEST * side:
        return None
    return refuse(
        "force_density",
        f"lets the net hang {setting.stated(depth)} deep, over {DEEPEST:g} times its longest side; give more",
    )


def _too_many(asked: AskedNet, shape: NetShape) -> Refusal | None:
    pitches = np.array([stock.pitch if stock.counted and stock.pitch else np.inf for stock in asked.stocks])
    links = float((shape.length / pitches[asked.stock_of]).sum()) * asked.copies
    members = len(shape.length) * asked.copies
    if links > MOST_LINKS:
        return refuse("stock", f"comes to {links:,.0f} links; give a longer pitch, or a net of {MOST_LINKS:,} at most")
    if members > MOST_LINKS:
        return refuse("copies", f"come to {members:,} members; make it {MOST_LINKS:,} at most")
    return None


KIND = Kind("net", Net, solve)
