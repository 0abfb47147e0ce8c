"""From the made strands of a curtain to neutral pieces: figures, views, table, cuts, pulls, cautions."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterator, Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from geom.curves import Polyline, Segment
from geom.hang import strands
from geom.hang.asked import Asked
from geom.hang.cautions import cautions
from geom.hang.curtain import AskedCurtain, CurtainFigures, MadeCurtain, StrandFigures
from geom.hang.curtain_solids import solids
from geom.hang.curtain_views import hem_line, labels, view
from geom.hang.figures import LinksFigures, Neighbour
from geom.hang.links import ends_same_way, overall
from geom.hang.shopwork import used
from geom.hang.together import by_stock, one_used, worst
from geom.result import (
    NAN,
    Z_UP,
    Case,
    Caution,
    Column,
    Cut,
    Frame,
    Line,
    Piece,
    Pull,
    Quantity,
    Table,
    Unit,
    Used,
    View,
    fixed,
)
from geom.setting.options import Setting
from geom.setting.stock import Stock, use_of_capacity
from geom.setting.supports import Support
from geom.units import STANDARD_GRAVITY

Floats = NDArray[np.float64]

_NONE, _METRES, _NEWTONS = Unit(""), Unit("m"), Unit("N")
_RIGHT_ANGLE = math.pi / 2
_EVEN = 1e-6  # m: spacings nearer than this are one


def fill(asked: AskedCurtain, curtain: MadeCurtain, setting: Setting) -> Piece:
    """Return the piece of a curtain whose every strand can be made."""
    parts = tuple(_strands(asked, curtain, setting))
    whole = _figures(asked, curtain)
    mass = math.fsum(part.mass for part in parts)
    names = ", ".join(stock.name for stock in asked.kinds)
    return Piece(
        mark=asked.mark,
        kind="curtain",
        what=f"curtain of {whole.count} strands of {asked.kinds[0].kind} {names}",
        views=(view(asked, curtain, setting.drawing.within),),
        mass=mass,
        figures=whole,
        used=one_used(parts),
        stocks=asked.kinds,
        copies=asked.copies,
        difference=worst(parts),
        parts=parts,
        parts_name="strands",
        facts=_facts(asked, whole, curtain, mass),
        lines=(
            *(line for part in parts for line in part.lines),
            Line("edge", Polyline(asked.rail.corners), asked.mark),
            Line("chord", Polyline(hem_line(asked, setting.drawing.within, developed=False)), asked.mark),
        ),
        labels=labels(asked, asked.tops, curtain),
        solids=solids(asked, curtain),
        tables=(_table(asked, curtain), by_stock(asked.mark, parts), _hem_table(asked)),
        cuts=tuple(cut for part in parts for cut in part.cuts),
        pulls=tuple(pull for part in parts for pull in part.pulls),
        cautions=_cautions(asked, parts, curtain, setting),
    )


def _strands(asked: AskedCurtain, curtain: MadeCurtain, setting: Setting) -> Iterator[Piece]:
    """Yield the piece of each strand; everything is computed already, and only picked here."""
    made, tops = curtain.made, asked.tops
    counts, lows = strands.neighbours(curtain.wanted, made.count)
    columns: dict[str, Any] = {
        "along": asked.distance, "hem": curtain.wanted.hem, "count": made.count, "material": made.material,
        "length": made.length, "lowest": made.lowest, "over": made.over_hem, "pull": made.pull,
        "counts": counts, "lows": lows,
    }  # fmt: skip
    sources = {stock.name: used(stock, stretches=False) for stock in asked.kinds}
    for number, row in enumerate(zip(*(column.tolist() for column in columns.values()), strict=True)):
        at = dict(zip(columns, row, strict=True))
        yield _strand(asked, number, tops[number], at, sources[asked.stocks[number].name], setting)


def _strand(
    asked: AskedCurtain, number: int, top: Floats, at: Mapping[str, Any], source: Used, setting: Setting
) -> Piece:
    mark, stock = asked.strand(number), asked.stocks[number]
    figures = _strand_figures(asked, stock, top, at)
    mass = stock.mass_per_metre * at["material"]
    on_rail = at["pull"] + asked.fit_from.mass * STANDARD_GRAVITY
    links = at["count"] or None
    return Piece(
        mark=mark,
        kind="strand",
        what=f"{stock.kind} {stock.name}",
        views=(View("elevation", Frame(top, _ALONG, Z_UP)),),
        mass=mass,
        figures=figures,
        used=source,
        stocks=(stock,),
        copies=asked.copies,
        intended=Quantity("lowest", at["hem"], _METRES),
        difference=Quantity("lowest", at["over"], _METRES),
        cases=(_as_hung(figures, setting),),
        lines=(Line("axis", Segment(*figures.points), mark),),
        cuts=(Cut(mark, asked.mark, stock.name, at["material"], at["length"], links, asked.copies, mass),),
        pulls=(Pull(f"{mark}.from", False, top, {"as hung": fixed([0.0, 0.0, -on_rail])}),),
    )


_ALONG = fixed([1, 0, 0])


def _strand_figures(asked: AskedCurtain, stock: Stock, top: Floats, at: Mapping[str, Any]) -> StrandFigures:
    length, pull = at["length"], at["pull"]
    return StrandFigures(
        span=0.0,
        level_difference=-length,
        pin_to_pin=length,
        hung_length=length,
        sag=NAN,
        sag_mid=NAN,
        lowest=at["lowest"],
        below_from=length,
        below_to=0.0,
        clearance=NAN,
        clearance_at=NAN,
        parameter=0.0,
        pull_horizontal=0.0,
        pull_from=pull,
        pull_to=asked.fit_to.mass * STANDARD_GRAVITY,
        slope_from=_RIGHT_ANGLE,
        slope_to=-_RIGHT_ANGLE,
        links=_links(asked, stock, at) if stock.counted else None,
        loads=(),
        sag_per_length=NAN,
        points=fixed([top, [*top[:2], at["lowest"]]]),
        capacity_used=_capacity(stock, pull),
        lowest_at=0.0,
        along_rail=at["along"],
        hem=at["hem"],
        over_hem=at["over"],
    )


def _links(asked: AskedCurtain, stock: Stock, at: Mapping[str, Any]) -> LinksFigures:
    count, pitch, turns = at["count"], float(stock.pitch or NAN), asked.fit_from.turns + asked.fit_to.turns
    beside = zip(at["counts"], at["lows"], strict=True)
    return LinksFigures(
        count=count,
        pitch=pitch,
        ends="same way" if ends_same_way(count, turns) else "crossed",
        overall=float(overall(count, pitch, stock.wire or 0.0)),
        neighbours=tuple(Neighbour(n, NAN, low, 0.0) for n, low in beside if n > 0),
    )


def _capacity(stock: Stock, pull: float) -> float:
    share = use_of_capacity(stock, pull)
    return NAN if share is None else share


def _as_hung(figures: StrandFigures, setting: Setting) -> Case:
    return Case(
        case="as hung",
        standing="dead load only",
        temperature=setting.shop.temperature,
        lowest=figures.lowest,
        pull_horizontal=0.0,
        pull_from=figures.pull_from,
        pull_to=figures.pull_to,
    )


def _figures(asked: AskedCurtain, curtain: MadeCurtain) -> CurtainFigures:
    made, length = curtain.made, asked.rail.length
    on_rail = made.pull + asked.fit_from.mass * STANDARD_GRAVITY
    steps = np.diff(asked.distance)
    spacing = float(steps[0]) if len(steps) and np.ptp(steps) < _EVEN else NAN
    pull = float(on_rail.sum())
    return CurtainFigures(
        count=len(made.count),
        links_count=int(made.count.sum()) if any(stock.counted for stock in asked.kinds) else None,
        rail_length=length,
        spacing=spacing,
        pin_to_pin=float(made.length.sum()),
        lowest=float(made.lowest.min()),
        highest_lowest=float(made.lowest.max()),
        over_hem_least=float(made.over_hem.min()),
        over_hem_greatest=float(made.over_hem.max()),
        mass_on_rail=pull / STANDARD_GRAVITY,
        rail_load=pull / STANDARD_GRAVITY / length,
        greatest_rail_load=float(on_rail.max()) / STANDARD_GRAVITY / spacing,
        pull_on_rail=pull,
    )


def _facts(asked: AskedCurtain, whole: CurtainFigures, curtain: MadeCurtain, mass: float) -> tuple[Quantity, ...]:
    lengths = curtain.made.length
    word = "beads" if asked.kinds[0].kind == "beads" else "links"
    stocks = Counter(stock.name for stock in asked.stocks)
    return (
        *(Quantity(f"strands {name}" if len(stocks) > 1 else "strands", float(n)) for name, n in stocks.items()),
        Quantity(f"{word} in all", float(whole.links_count))
        if whole.links_count is not None
        else Quantity("cut length in all", float(curtain.made.material.sum()), _METRES),
        Quantity("shortest", float(lengths.min()), _METRES),
        Quantity("longest", float(lengths.max()), _METRES),
        Quantity("mass", mass, Unit("kg")),
        Quantity("pull on the rail", whole.pull_on_rail, _NEWTONS),
        Quantity("pull on a metre of rail", whole.pull_on_rail / whole.rail_length, Unit("N_per_m")),
    )


def _table(asked: AskedCurtain, curtain: MadeCurtain) -> Table:
    made, tops = curtain.made, asked.tops
    count = len(made.count)
    return Table(
        "strands",
        (
            Column("mark", _NONE, "strand", tuple(asked.strand(number) for number in range(count))),
            Column("along_rail", _METRES, "along the rail", asked.distance),
            *(Column(f"from_{axis}", _METRES, f"from {axis}", tops[:, k]) for k, axis in enumerate("xyz")),
            Column("stock", _NONE, "stock", tuple(stock.name for stock in asked.stocks)),
            Column("links", _NONE, "links", np.where(made.count > 0, made.count, np.nan)),
            Column("pin_to_pin", _METRES, "pin to pin", made.length),
            Column("cut_length", _METRES, "cut length", made.material),
            Column("lowest", _METRES, "lowest point", made.lowest),
            Column("hem", _METRES, "hem there", curtain.wanted.hem),
            Column("over_hem", _METRES, "over the hem", made.over_hem),
            Column("pull_from", _NEWTONS, "pull at from", made.pull),
        ),
        asked.mark,
    )


def _hem_table(asked: AskedCurtain) -> Table:
    distance, elevation = asked.hem.points.T
    columns = (
        Column("along_rail", _METRES, "along the rail", distance),
        Column("hem", _METRES, "elevation of the hem", elevation),
    )
    return Table("hem", columns, asked.mark)


def _cautions(
    asked: AskedCurtain, parts: tuple[Piece, ...], curtain: MadeCurtain, setting: Setting
) -> tuple[Caution, ...]:
    """What is to be known of its stocks and pulls, as of a hanging: that of the most loaded strand of each."""
    found = []
    for stock in asked.kinds:
        of = np.array([other.name == stock.name for other in asked.stocks])
        figures = parts[int(np.argmax(np.where(of, curtain.made.pull, -np.inf)))].figures
        start, end = (Support(tuple(point)) for point in figures.points.tolist())
        length = figures.pin_to_pin
        member = Asked(asked.mark, start, end, stock, "length", length, asked.fit_from, asked.fit_to)
        found += [*cautions(member, figures, length, setting), *_end_link(asked, stock, setting)]
    return tuple(dict.fromkeys(found))


def _end_link(asked: AskedCurtain, stock: Stock, setting: Setting) -> list[Caution]:
    """A link's wire reaches under its inside, which lengths are measured to."""
    if not stock.wire or asked.rounding != "down" or asked.fit_to.takes:
        return []
    reach = setting.stated(stock.wire)
    text = f"Lengths are to the inside of the last link; its wire reaches {reach} lower, and so may pass the hem."
    return [Caution("end link", asked.mark, text, "the pitch is the inside length of a link")]
