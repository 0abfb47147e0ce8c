"""From a solved arch to a neutral piece: figures, lines, marks, tables, cuts, parts, solids, pushes, cautions."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from geom.arch.asked import AskedArch
from geom.arch.bodies import flats, solids
from geom.arch.cautions import cautions
from geom.arch.figures import ArchFigures, BlockRows, OrdinateRows, WidthRows
from geom.arch.making import Made, value_of
from geom.arch.ring import LineName, Ring
from geom.arch.views import beds, block_mark, labels, lines, support_mark, view
from geom.result import NAN, Column, Cut, Piece, Pull, Quantity, Table, Unit, Used, fixed
from geom.setting.options import Setting

Floats = NDArray[np.float64]

_METRES, _NONE, _KILOGRAMS = Unit("m"), Unit(""), Unit("kg")
_SOLVED = 1e-9  # of the value: over what any of the room's solvers leaves, a millionth of what can be measured
_DEGREES = Unit("deg", 180.0 / np.pi)
_SAME = 1e-6  # m: widths nearer than this are one on any drawing


def fill(asked: AskedArch, made: Made, setting: Setting) -> Piece:
    """Return the piece of a solved arch."""
    figures = _figures(asked, made, setting)
    mass = figures.volume * asked.material.density
    unit = Unit("N") if asked.fact == "thrust" else _METRES
    wanted = asked.value[-1]  # of `through` the elevation
    return Piece(
        mark=asked.mark,
        kind="arch",
        what=_what(asked),
        views=(view(asked, made),),
        mass=mass,
        figures=figures,
        used=Used(
            source=asked.material.cited,
            weight=asked.unit_weight * asked.profile.thickness,
            density=asked.material.density,
        ),
        copies=asked.copies,
        intended=Quantity(asked.fact, wanted, unit),
        difference=Quantity(asked.fact, _difference(asked, made), unit),
        facts=_facts(asked, made.ring, figures, mass),
        lines=lines(asked, made, setting.drawing.within),
        labels=labels(asked, made),
        solids=solids(asked, made, setting),
        flats=flats(asked, made, setting),
        tables=tuple(_tables(asked, figures)),
        cuts=_cuts(asked, figures),
        pulls=_pulls(asked, figures),
        cautions=cautions(asked, made),
    )


def _difference(asked: AskedArch, made: Made) -> float:
    """Return made minus intended: an arch is solved exactly, so that what a solver's tolerance leaves is nought."""
    wanted = asked.value[-1]
    off = value_of(asked, made) - wanted
    return 0.0 if abs(off) <= _SOLVED * max(abs(wanted), asked.span) else off


def _what(asked: AskedArch) -> str:
    hung = {"axis": "its axis", "intrados": "its intrados", "extrados": "its extrados"}[asked.profile.curve]
    return f"arch of {asked.material.name}, {hung} the catenary"


def _figures(asked: AskedArch, made: Made, setting: Setting) -> ArchFigures:
    ring, plane, within = made.ring, asked.plane, setting.drawing.within

    def drawn(name: LineName) -> Floats:
        return fixed(plane.placed(ring.sample(name, within)), -1, 3)

    most = ring.greatest_thickness
    stones = made.stones
    return ArchFigures(
        span=ring.span("axis"),
        rise=ring.rise("axis"),
        axis_length=ring.length("axis"),
        thrust=made.thrust.horizontal,
        tie_pull=NAN,
        crown_radius=ring.crown_radius,
        springing_from=fixed(plane.turned(made.thrust.on_from), 3),
        springing_to=fixed(plane.turned(made.thrust.on_to), 3),
        intrados=drawn("intrados"),
        axis=drawn("axis"),
        extrados=drawn("extrados"),
        area=ring.area,
        volume=ring.area * asked.depth,
        under_area=ring.under_area,
        blocks=_blocks(asked, made, within),
        setting_out=_ordinates(made),
        parameter=ring.shape.scale,
        clear_span=ring.span("intrados"),
        clear_rise=ring.rise("intrados"),
        intrados_length=ring.length("intrados"),
        extrados_length=ring.length("extrados"),
        greatest_thickness=most if np.isfinite(most) else NAN,
        eccentricity=made.thrust.eccentricity,
        different_blocks=stones.different if stones else None,
        keystone=block_mark(asked, stones.keystone) if stones and stones.keystone is not None else None,
        clear_widths=_widths(asked, made),
    )


def _blocks(asked: AskedArch, made: Made, within: float) -> BlockRows | None:
    stones = made.stones
    if stones is None:
        return None
    volume = stones.blocks.area * asked.depth
    return BlockRows(
        mark=tuple(block_mark(asked, number) for number in range(len(stones))),
        area=fixed(stones.blocks.area),
        volume=fixed(volume),
        mass=fixed(volume * asked.material.density),
        joint_from=fixed(stones.start.slope),
        joint_to=fixed(stones.end.slope),
        face=fixed(stones.blocks.inner_length),
        back=fixed(stones.blocks.outer_length),
        form=np.asarray(stones.forms + 1, dtype=np.int64),
        outline=tuple(fixed(asked.plane.placed(outline), -1, 3) for outline in stones.blocks.outlines(within)),
    )


def _ordinates(made: Made) -> OrdinateRows | None:
    table = made.table
    if table is None:
        return None
    return OrdinateRows(
        x=fixed(table.x),
        intrados=fixed(table.intrados),
        axis=fixed(table.axis),
        extrados=fixed(table.extrados),
        along_intrados=fixed(table.along_intrados),
        along_axis=fixed(table.along_axis),
        along_extrados=fixed(table.along_extrados),
    )


def _widths(asked: AskedArch, made: Made) -> WidthRows | None:
    return None if made.widths is None else WidthRows(fixed(asked.wanted.widths_at), fixed(made.widths))


def _facts(asked: AskedArch, ring: Ring, figures: ArchFigures, mass: float) -> tuple[Quantity, ...]:
    """Return what a shop needs under the elevation: sizes over all, the feet's beds, what the ring is made of."""
    outline = np.concatenate([ring.sample(name, asked.profile.thickness / 1000) for name in ("intrados", "extrados")])
    wide, high = np.ptp(outline, axis=0).tolist()
    blocks = (Quantity("blocks", float(len(figures.blocks.mark))),) if figures.blocks else ()
    joint = (Quantity("joint", asked.wanted.joint, _METRES),) if figures.blocks and asked.wanted.joint else ()
    return (
        *blocks,
        *joint,
        Quantity("width over all", wide, _METRES),
        Quantity("height over all", high, _METRES),
        *_beds(asked, ring),
        Quantity("thickness", asked.profile.thickness, _METRES),
        Quantity("depth", asked.depth, _METRES),
        Quantity("length of axis", figures.axis_length, _METRES),
        Quantity("mass", mass, _KILOGRAMS),
        Quantity("horizontal thrust", figures.thrust, Unit("N")),
    )


def _beds(asked: AskedArch, ring: Ring) -> tuple[Quantity, ...]:
    """Return the widths of the beds the ring stands on, level feet's alone: a radial foot is as wide as it is thick."""
    if asked.profile.foot != "level":
        return ()
    first, second = beds(ring)
    if abs(first - second) < _SAME:
        return (Quantity("foot bed", first, _METRES),)
    return (Quantity("first foot bed", first, _METRES), Quantity("second foot bed", second, _METRES))


def _tables(asked: AskedArch, figures: ArchFigures) -> list[Table]:
    found = []
    if figures.setting_out is not None:
        found.append(Table("setting out", _ordinate_columns(figures.setting_out), asked.mark))
    if figures.clear_widths is not None:
        widths = figures.clear_widths
        columns = (
            Column("height", _METRES, "height over the lower springing", widths.height),
            Column("width", _METRES, "clear width", widths.width),
        )
        found.append(Table("clear widths", columns, asked.mark))
    if figures.blocks is not None:
        found.append(Table("blocks", _block_columns(figures.blocks), asked.mark))
    return found


def _ordinate_columns(rows: OrdinateRows) -> tuple[Column, ...]:
    return (
        Column("x", _METRES, "from the first springing", rows.x),
        Column("intrados", _METRES, "intrados over the springing line", rows.intrados),
        Column("axis", _METRES, "axis over the springing line", rows.axis),
        Column("extrados", _METRES, "extrados over the springing line", rows.extrados),
        Column("along_intrados", _METRES, "along the intrados", rows.along_intrados),
        Column("along_axis", _METRES, "along the axis", rows.along_axis),
        Column("along_extrados", _METRES, "along the extrados", rows.along_extrados),
    )


def _block_columns(rows: BlockRows) -> tuple[Column, ...]:
    return (
        Column("mark", _NONE, "block", rows.mark),
        Column("form", _NONE, "form (mirror images alike)", rows.form),
        Column("face", _METRES, "length along the intrados", rows.face),
        Column("back", _METRES, "length along the extrados", rows.back),
        Column("joint_from", _DEGREES, "first joint: slope of the axis there; 90 at a level foot", rows.joint_from),
        Column("joint_to", _DEGREES, "second joint: slope of the axis there; -90 at a level foot", rows.joint_to),
        Column("area", Unit("m2"), "area of its elevation", rows.area),
        Column("volume", Unit("m3"), "volume", rows.volume),
        Column("mass", _KILOGRAMS, "mass", rows.mass),
    )


def _cuts(asked: AskedArch, figures: ArchFigures) -> tuple[Cut, ...]:
    """Return a row for each block. A block is cut to an outline, not to a length."""
    if figures.blocks is None:
        return ()
    return tuple(
        Cut(mark, asked.mark, asked.material.name, NAN, NAN, None, asked.copies, mass)
        for mark, mass in zip(figures.blocks.mark, figures.blocks.mass.tolist(), strict=True)
    )


def _pulls(asked: AskedArch, figures: ArchFigures) -> tuple[Pull, ...]:
    """Return the pushes on the springings."""
    ends = (("from", asked.start, figures.springing_from), ("to", asked.end, figures.springing_to))
    return tuple(
        Pull(support_mark(asked, end), bool(support.name), fixed(support.at, 3), {"as hung": push}, support.height)
        for end, support, push in ends
    )
