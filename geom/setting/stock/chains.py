"""The round-link chains of the standards."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from functools import cache
from typing import Any

from geom.setting.materials import Material, find_material
from geom.setting.stock.formulas import legs_area, link_mass
from geom.setting.stock.record import Stock
from geom.setting.stock.table import KN, KN_PER_MM2, PER_METRE, key, table

__all__ = ["chains", "in_material", "mass_note"]


@cache
def chains() -> Mapping[str, Stock]:
    """Return every chain of the table by the key of its name, of its other names and of `wire x pitch`."""
    found: dict[str, Stock] = {}
    for standard in table()["chain"]["standard"]:
        for row in standard["rows"]:
            for stock, size, metal in _sizes(standard, dict(zip(standard["columns"], row, strict=True))):
                for name in (standard["name"], *standard.get("also", ())):
                    found[key(f"{name}-{size}{metal}")] = stock
                    if stock.pitch:
                        found[key(f"{name}-{size}x{stock.pitch * PER_METRE:g}{metal}")] = stock
    return found


def _sizes(standard: Mapping[str, Any], row: Mapping[str, Any]) -> Iterator[tuple[Stock, str, str]]:
    """Yield a row's chain, and the same links in the other metals they are made of, each with its size and metal."""
    size = row["size"] if isinstance(row["size"], str) else f"{row['size']:g}"
    plain = _chain(standard, row, size)
    yield plain, size, ""
    metals = standard.get("metals", {})
    if row["size"] in metals.get("sizes", ()):
        for metal in metals["names"]:
            yield in_material(plain, find_material(metal), name=f"{plain.name} {metal}"), size, metal


def _chain(standard: Mapping[str, Any], row: Mapping[str, Any], size: str) -> Stock:
    def of(column: str) -> float | None:
        value = row.get(column, "-")
        return None if value == "-" else float(value)

    def metres(column: str) -> float | None:
        return None if (value := of(column)) is None else value / PER_METRE

    def newtons(column: str) -> float | None:
        return None if (value := of(column)) is None else value * KN

    wire = row.get("wire", row["size"]) / PER_METRE
    pitch, width, mass = metres("pitch"), metres("width"), of("mass")
    material = find_material(standard["material"])
    notes = [standard["notes"][size]] if size in standard.get("notes", {}) else []
    if mass is None and pitch and width:
        mass = link_mass(wire, pitch, width, material.density)
        notes.append(mass_note(material))
    name = f"{standard['name']}-{size}"
    return Stock(
        name=name,
        kind="chain",
        mass_per_metre=float("nan") if mass is None else mass,
        wire=wire,
        pitch=pitch,
        width=width,
        modulus=table()["chain"]["modulus"] * KN_PER_MM2,
        area=legs_area(wire),
        breaking_load=newtons("break"),
        proof_load=newtons("proof"),
        density=material.density,
        expansion=material.expansion,
        pitch_plus=metres("pitch_plus"),
        pitch_minus=metres("pitch_minus"),
        wire_tolerance=metres("wire_tolerance"),
        title=standard["title"],
        source=f"{standard['edition']}: {standard['read']}",
        standing=standard["standing"],
        confirm=f"{standard['confirm']} Modulus: {table()['chain']['modulus_source']}.",
        scope=standard["scope"],
        notes=tuple(notes),
        lacking="" if pitch else _LACKING.format(name=name),
    )


_LACKING = (
    "has no pitch and no width in the tables; measure 11 links or more, and add a stock of your own with "
    'like = "{name}", width = ... and measured = {{ links = 11, length = ... }}'
)


def mass_note(material: Material) -> str:
    """Return the note of a mass that was worked out from links."""
    return f"mass per metre from the link's geometry, {material.name} of {material.density:g} kg/m3"


def in_material(stock: Stock, material: Material, *, name: str) -> Stock:
    """Return the same links in another material: mass by geometry, and neither strength nor stiffness.

    Strength does not go with density, so none is given.
    """
    mass = float("nan")
    if stock.wire and stock.pitch and stock.width:
        mass = link_mass(stock.wire, stock.pitch, stock.width, material.density)
    return replace(
        stock,
        name=name,
        mass_per_metre=mass,
        modulus=None,
        area=None,
        breaking_load=None,
        proof_load=None,
        density=material.density,
        expansion=material.expansion,
        title=f"{stock.title}, {material.name}",
        confirm=f"Loads: the supplier's, since strength does not go with density. {material.confirm}".strip(),
        notes=(mass_note(material),),
    )
