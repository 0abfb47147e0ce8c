"""Swags: a row of hangings between two rails, round a ring, or between two rings."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Annotated, Any, ClassVar, get_args, get_origin

import numpy as np
from numpy.typing import NDArray
from pydantic import BeforeValidator, Field, TypeAdapter, ValidationInfo, create_model

from geom.curves import Arc, Curve, Polyline
from geom.fields import Copies, PointField, Section, Size
from geom.hang import links
from geom.hang.intent import FACTS
from geom.hang.rail import even, rail, ring
from geom.hang.refusals import MOST_LINKS
from geom.hang.row import Row
from geom.hang.shopwork import wanted_of
from geom.hang.swags import gathered
from geom.kinds.hanging import Hanging, Member
from geom.registry import Fault, Layout, Outcome, Path, Refusal, refuse
from geom.result import Piece
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.setting.stock.zones import Zones, by_strand
from geom.setting.supports import Support

Floats = NDArray[np.float64]

LATER = frozenset({"sag_mid", "end_pull", "branch", "through", "slope_from", "slope_to"}) & Hanging.later
"""Facts that a hanging does not know yet; what it learns is a fact of swags with it."""

_BESIDE_FACTS = tuple(key for key in ("branch",) if key in Hanging.model_fields)
"""Keys of a hanging that go with a fact: which of two members an end pull means."""


class Ring(Section):
    """A level ring of points, the first at +x, going anticlockwise seen from above."""

    centre: PointField = Field(description="its centre, [x, y, z]")
    diameter: Size = Field(description="the diameter of the circle that its points are on")
    points: Copies = Field(description="how many points, evenly round")

    @property
    def places(self) -> Floats:
        """Its points, (n, 3) m."""
        return ring(self.centre, self.diameter, self.points)

    @property
    def circle(self) -> Curve:
        """The circle that its points are on."""
        return Arc(np.array(self.centre), self.diameter / 2, _X, _Y, 0.0, 2.0 * np.pi)


_X, _Y = np.array([1.0, 0.0, 0.0]), np.array([0.0, 1.0, 0.0])


class Steps(Section):
    """From one value to another in even steps, the first strand's to the last one's."""

    first: Any
    last: Any


def _values(name: str) -> Any:  # noqa: ANN401 - an annotated type
    """Return the type of a fact: one value, one for each strand, or even steps; read as a hanging reads it."""
    kind: Any = Hanging.model_fields[name].annotation
    each: TypeAdapter[tuple[Any, ...]] = TypeAdapter(tuple[kind, ...])
    one: TypeAdapter[Any] = TypeAdapter(kind)
    keys: dict[str, Any] = {
        "first": (kind, Field(description="the first strand's value")),
        "last": (kind, Field(description="the last strand's value")),
    }
    steps = create_model(f"Steps of {name}", __base__=Steps, **keys)
    of_points = _is_point(kind)

    def read(raw: Any, info: ValidationInfo) -> Any:  # noqa: ANN401 - as the file has it
        if isinstance(raw, dict):
            return steps.model_validate(raw, context=info.context)
        if isinstance(raw, list) and not (of_points and raw and not isinstance(raw[0], list)):
            if not raw:
                raise ValueError("is an empty list; give one value, or one for each strand")
            return each.validate_python(raw, context=info.context)
        return (one.validate_python(raw, context=info.context),)

    return Annotated[tuple[Any, ...] | steps | None, BeforeValidator(read)]


def _is_point(kind: Any) -> bool:  # noqa: ANN401 - any type expression
    """Whether values of a type are points, which a file writes as lists themselves."""
    return get_origin(kind) is tuple or any(_is_point(part) for part in get_args(kind))


_EACH = "one value, a list of one for each strand, or { first, last }"


def _facts() -> dict[str, Any]:
    fields = {
        name: (_values(name), Field(None, description=f"{Hanging.model_fields[name].description}: {_EACH}"))
        for name in FACTS
    }
    beside = {name: (Hanging.model_fields[name].annotation, Hanging.model_fields[name]) for name in _BESIDE_FACTS}
    return fields | beside


class SwagsBase(Member):
    """The table [[swags]] but for its facts, which are those of a hanging."""

    one_of: ClassVar[tuple[tuple[str, ...], ...]] = (FACTS, ("rail_from", "ring"))
    at_most_one_of: ClassVar[tuple[tuple[str, ...], ...]] = (
        ("rail_to", "ring"),
        ("rail_from", "to_ring"),
        ("count", "ring"),
    )
    later: ClassVar[frozenset[str]] = LATER

    stock: Zones = Field(  # type: ignore[assignment]
        description="one stock, or zones [{ of = ..., count = ... }, ...] in the order of the strands"
    )
    rail_from: tuple[PointField, ...] | None = Field(None, description="points of the rail they hang from")
    rail_to: tuple[PointField, ...] | None = Field(None, description="points of the rail they hang to")
    count: Copies | None = Field(None, description="how many, evenly along both rails, both ends included")
    ring: Ring | None = Field(None, description="the ring they hang round, { centre, diameter, points }")
    to_ring: Ring | None = Field(None, description="the ring they hang to, point by point, from `ring`")

    @property
    def fact(self) -> str:
        """Which fact was given."""
        return next(name for name in FACTS if getattr(self, name, None) is not None)


Swags = create_model("Swags", __base__=SwagsBase, __doc__="The table [[swags]].", **_facts())


def expand(swags: SwagsBase, _setting: Setting) -> list[Hanging] | Refusal:
    """Return the strands of a row as hangings."""
    faults = tuple(_faults(swags))
    if faults:
        return Refusal(faults)
    row = _row(swags)
    count, faults = len(row.starts), ()
    values = _each(swags, count)
    if len(values) not in (1, count):
        text = f"has {len(values)} values for {count} strands; give one, {count}, or {{ first, last }}"
        faults += (Fault((swags.fact,), text),)
    try:
        stocks = by_strand(swags.stock, count)
    except ValueError as error:
        faults += (Fault(("stock",), str(error)),)
    if faults:
        return Refusal(faults)
    points = zip(row.starts.tolist(), row.ends.tolist(), strict=True)
    return [
        _strand(swags, number, (tuple(start), tuple(end)), stocks[number], values[number % len(values)])
        for number, (start, end) in enumerate(points)
    ]


def _faults(swags: SwagsBase) -> Sequence[Fault]:
    """Why the strands cannot be laid out."""
    if swags.ring is not None:
        return _ring_faults(swags.ring, swags.to_ring)
    found = []
    if swags.rail_to is None:
        found.append(Fault(("rail_to",), "is missing; give the points of the rail they hang to, [[x, y, z], ...]"))
    if swags.count is None:
        found.append(Fault(("count",), "is missing; give how many hang between the rails"))
    elif swags.count < 2:
        found.append(Fault(("count",), "1 cannot stand at both ends of the rails; give 2 or more, or a [[hanging]]"))
    for key, points in (("rail_from", swags.rail_from), ("rail_to", swags.rail_to)):
        try:
            rail(points if points is not None else _ANY_RAIL)
        except ValueError as error:
            found.append(Fault((key,), str(error)))
    return found


_ANY_RAIL = ((0.0, 0.0, 0.0), (1.0, 0.0, 0.0))  # stands for one that is missing, which is said already


def _ring_faults(ring: Ring, other: Ring | None) -> Sequence[Fault]:
    if other is not None and other.points != ring.points:
        text = f"has {other.points} points and `ring` has {ring.points}; give both as many: point goes to point"
        return [Fault(("to_ring", "points"), text)]
    if other is None and ring.points < 2:
        return [Fault(("ring", "points"), "1 has no next point to hang to; give 2 or more")]
    return []


def _row(swags: SwagsBase) -> Row:
    """Return where the strands hang; a ring's last strand ends where its first began."""
    if swags.ring is not None and swags.to_ring is None:
        places = swags.ring.places
        return Row("ring", places, np.roll(places, -1, axis=0), (swags.ring.circle,))
    if swags.ring is not None and swags.to_ring is not None:
        return Row("rings", swags.ring.places, swags.to_ring.places, (swags.ring.circle, swags.to_ring.circle))
    rails = [rail(points) for points in (swags.rail_from, swags.rail_to) if points is not None]
    starts, ends = (one.at(even(one.length, swags.count or 0)) for one in rails)
    return Row("rails", starts, ends, tuple(Polyline(one.corners) for one in rails), rails[0])


def _each(swags: SwagsBase, count: int) -> tuple[Any, ...]:
    """Return the fact's values: one, or one for each strand."""
    given = getattr(swags, swags.fact)
    if not isinstance(given, Steps):
        return tuple(given)
    first, last = np.asarray(given.first, dtype=np.float64), np.asarray(given.last, dtype=np.float64)
    between = first + np.multiply.outer(np.arange(count) / max(count - 1, 1), last - first)
    if swags.fact == "links":  # steps that are not whole come to the nearest count of the parity asked for
        inner = links.count(between[1:-1], 1.0, parity=swags.parity)
        return (given.first, *inner.tolist(), given.last)
    return tuple(tuple(value) if isinstance(value, list) else value for value in between.tolist())


def _strand(swags: SwagsBase, number: int, ends: tuple[Any, Any], stock: Stock, value: Any) -> Hanging:  # noqa: ANN401
    beside = {key: getattr(swags, key) for key in _BESIDE_FACTS}
    keys: dict[str, Any] = {swags.fact: value} | beside
    return Hanging.model_construct(
        mark=f"{swags.mark}.{number + 1}",
        copies=swags.copies,
        from_=Support(ends[0]),
        to=Support(ends[1]),
        stock=stock,
        parity=swags.parity,
        round=swags.round,
        fittings=swags.fittings,
        **keys,
    )


def gather(swags: SwagsBase, parts: Sequence[Piece], _setting: Setting) -> Outcome:
    """Make one piece of the solved strands."""
    counted = sum(part.figures.links.count for part in parts if part.figures.links is not None) * swags.copies
    if counted > MOST_LINKS:
        key = "ring" if swags.count is None else "count"
        return refuse(key, f"comes to {counted} links, copies included; a design has at most {MOST_LINKS}: give fewer")
    given = getattr(swags, swags.fact)
    wanted = wanted_of(swags.fact, given[0]) if isinstance(given, tuple) and len(given) == 1 else None
    return gathered(swags.mark, parts, _row(swags), wanted, copies=swags.copies)


def place(swags: SwagsBase, number: int, key: Path) -> Path:
    """Return where a strand's fault is reported: at its rail or ring, at its value in a list, or at the row's key."""
    if key and key[0] in ("from", "to"):
        on_rails = swags.ring is None
        last = "to_ring" if swags.to_ring is not None else "ring"
        return (f"rail_{key[0]}",) if on_rails else (last if key[0] == "to" else "ring",)
    if key and key[0] == swags.fact:
        given = getattr(swags, swags.fact)
        if isinstance(given, Steps):
            return (*key, "first") if number == 0 else key
        return (*key, number) if len(given) > 1 else key
    return key


LAYOUT = Layout("swags", Swags, "hanging", expand, gather, part="strand", place=place)
