"""The wire ropes and strands of the standards, of any diameter."""

from __future__ import annotations

import math
import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from functools import cache
from typing import Any

from geom.setting.materials import find_material
from geom.setting.stock.formulas import breaking_load, metal_area, packing, rope_mass, strand_mass_factor
from geom.setting.stock.record import Stock
from geom.setting.stock.table import KN_PER_MM2, PER_METRE, key, table
from geom.units import STANDARD_GRAVITY

__all__ = ["RopeClass", "classes", "rope", "rope_class"]

_SCOPE = (
    "Not for lifting, nor for hanging loads over people, without the supplier's certificate and a licensed engineer."
)
_STAINLESS = " stainless"
# "7x19-5", "6x19 FC - 10 mm", "1x19-6 stainless"
_NAME = re.compile(r"(?P<name>.*\S)\s*[- ]\s*(?P<size>[0-9]+(?:[.,][0-9]+)?)\s*(?:mm)?(?P<metal>\s+stainless)?", re.I)

_THICKEST = 500.0  # mm: more than any strand made, and a slip of the unit is found


@dataclass(frozen=True)
class RopeClass:
    """A class of rope by its factors.

    Parameters
    ----------
    area, mass : float
        C and W: metallic area C d2, mass W d2 kg per 100 m with d in mm.
    modulus : float
        Pa, on the metallic area.
    force, grade, within : float, float, (float, float) or None
        K and rope grade Rr, Pa, of the breaking load K d2 Rr, and the diameters it holds for, mm; None: not known.
    usual, sizes : (float, float) or None, tuple of float
        Range of diameters it is commonly made in, and those that are listed, mm.
    """

    name: str
    title: str
    source: str
    standing: str
    area: float
    mass: float
    modulus: float
    metal: str = ""
    stretch: str = ""
    force: float | None = None
    grade: float = math.nan
    within: tuple[float, float] = (0.0, math.inf)
    usual: tuple[float, float] = (0.0, math.inf)
    sizes: tuple[float, ...] = ()
    note: str = ""

    def stock(self, size: float) -> Stock:
        """Return the rope of `size` mm."""
        diameter = size / PER_METRE
        notes = [self.note] if self.note else []
        load = None
        if self.force is not None and self.within[0] <= size <= self.within[1]:
            load = breaking_load(diameter, self.force, self.grade)
            notes.append(f"breaking load worked out at rope grade {self.grade / 1e6:g} N/mm2")
        if not self.usual[0] <= size <= self.usual[1]:
            notes.append(f"commonly made from {self.usual[0]:g} to {self.usual[1]:g} mm only, from memory")
        stretch = f" Constructional stretch {self.stretch} unless pre-stretched, from memory." if self.stretch else ""
        return Stock(
            name=f"{self.name}-{size:g}{self.metal}",
            kind="rope",
            mass_per_metre=rope_mass(diameter, self.mass),
            diameter=diameter,
            modulus=self.modulus,
            area=metal_area(diameter, self.area),
            breaking_load=load,
            expansion=find_material("stainless" if self.metal else "steel").expansion,
            title=f"{self.title}{',' + self.metal if self.metal else ''}",
            source=self.source,
            standing=self.standing,
            confirm=f"Modulus from memory, EN 1993-1-11:2006, table 3.1: use the supplier's.{stretch}",
            scope=_SCOPE,
            notes=tuple(notes),
        )


@cache
def classes() -> Mapping[str, RopeClass]:
    """Return every class of rope by the key of its name."""
    listed = [*_stranded(), *_spiral(), *_structural()]
    return {key(entry.name + entry.metal): entry for entry in listed}


def _stranded() -> Iterator[RopeClass]:
    for row in table()["rope"]["class"]:
        plain = RopeClass(
            name=row["name"],
            title=row["title"],
            source=f"{row['edition']}: C, W and K of the class read in two copies of the table",
            standing="trade copy",
            area=row["C"],
            mass=row["W"],
            modulus=row["modulus"] * KN_PER_MM2,
            stretch=row["stretch"],
            force=row["K"],
            grade=table()["rope"]["grade"] * 1e6,
            usual=tuple(row["usual"]),
            sizes=tuple(row["sizes"]),
            note=row.get("note", ""),
        )
        yield plain
        if "stainless" in row:
            yield _stainless(plain, row["stainless"])


def _stainless(plain: RopeClass, row: Mapping[str, Any]) -> RopeClass:
    return replace(
        plain,
        metal=_STAINLESS,
        source=f"{plain.source}; the mass is that of carbon steel, stainless is up to 2 % heavier",
        modulus=row["modulus"] * KN_PER_MM2,
        force=row.get("K"),
        grade=row.get("grade", math.nan) * 1e6,
        within=tuple(row.get("within", plain.within)),
    )


def _spiral() -> Iterator[RopeClass]:
    figures = table()["rope"]["strand_figures"]
    for row in table()["rope"]["strand"]:
        fill = packing(row["wires"])
        plain = RopeClass(
            name=row["name"],
            title="spiral strand",
            source="area by packing of equal wires, mass of bare wire and 2 % for lay; breaking load: the supplier's",
            standing="worked out",
            area=math.pi * fill / 4.0,
            mass=strand_mass_factor(fill),
            modulus=figures["modulus"] * KN_PER_MM2,
            stretch=figures["stretch"],
            usual=tuple(row["usual"]),
            sizes=tuple(row["sizes"]),
        )
        yield plain
        density = find_material("stainless").density
        mass, modulus = strand_mass_factor(fill, density), figures["stainless_modulus"] * KN_PER_MM2
        yield replace(plain, metal=_STAINLESS, mass=mass, modulus=modulus)


def _structural() -> Iterator[RopeClass]:
    for row in table()["rope"]["structural"]:
        area = math.pi * row["fill"] / 4.0
        yield RopeClass(
            name=row["name"],
            title="structural strand or rope, protected against corrosion",
            source="EN 1993-1-11:2006, table 2.2: fill and weight of the metal",
            standing="from memory",
            area=area,
            # w A / g, in kg per 100 m with d in mm
            mass=row["weight"] * 1e3 / STANDARD_GRAVITY * area * 1e-4,
            modulus=row["modulus"] * KN_PER_MM2,
        )


def rope_class(name: str) -> RopeClass | None:
    """Return the class of a name like "7x19", "6x19 IWRC" or "1x19 stainless"; None where it is of no class at all.

    Raises
    ------
    ValueError
        If it is half of a name: a class without its core, or one that is not made in stainless here.
    """
    known, asked = classes(), key(name)
    if asked in known:
        return known[asked]
    cores = [entry.name for entry in known.values() if key(entry.name) in (asked + "fc", asked + "iwrc")]
    if cores:
        raise ValueError(f"is made with a fibre or a steel core; write {' or '.join(map(repr, cores))}")
    if asked.removesuffix(key(_STAINLESS)) in known:
        raise ValueError("is not in the tables in stainless; add it as a stock of your own, by mass and area")
    return None


def rope(name: str) -> Stock | None:
    """Return the rope of a name like "7x19-5" or "6x19 IWRC-12 mm"; None where it is of no class of rope at all.

    Raises
    ------
    ValueError
        If the class is known and something is missing: the diameter, or which core it has.
    """
    form = _NAME.fullmatch(name.strip())
    entry = rope_class(name if form is None else form["name"] + (form["metal"] or ""))
    if entry is None:
        return None
    if form is None:
        raise ValueError(f'gives no diameter; write it behind the class, like "{entry.name}-6{entry.metal}"')
    size = float(form["size"].replace(",", "."))
    if not 0.0 < size <= _THICKEST:
        raise ValueError(f"is no rope that is made; give a diameter of more than 0 and up to {_THICKEST:g} mm")
    return entry.stock(size)
