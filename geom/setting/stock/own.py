"""From what a user wrote of a stock to the stock: what was left out is worked out where it can be, and said so."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import replace
from typing import cast

from geom.errors import say
from geom.setting.materials import Material
from geom.setting.stock.draft import Draft, Faulty
from geom.setting.stock.entry import StockEntry
from geom.setting.stock.links import beads, chain
from geom.setting.stock.names import find_base
from geom.setting.stock.record import Kind, Stock
from geom.setting.stock.ropes import rope_class

__all__ = ["Faulty", "user_stock"]

# W of a rope where only its mass is given: between the 0.38 and 0.41 of steel-core classes.
_USUAL_MASS = 0.40
_NOT_FOR_LIFTING = (
    "Decorative, untested and general-purpose chain is not for lifting nor for hanging loads over people; whether this "
    "stock is certified for more is for its supplier to say."
)
_ROPE_SCOPE = (
    "Not for lifting, nor for hanging loads over people, without the supplier's certificate and a licensed engineer."
)
_SCOPES: Mapping[str, str] = {"chain": _NOT_FOR_LIFTING, "beads": _NOT_FOR_LIFTING, "rope": _ROPE_SCOPE, "rod": ""}


def user_stock(name: str, entry: StockEntry) -> Stock:
    """Return a stock of the user's own.

    Raises
    ------
    Faulty
        If something is missing that cannot be worked out, or cannot be; `key` says which key.
    """
    draft = Draft(name, entry, _base(name, entry), _material(entry))
    stock = _MAKERS[draft.base.kind](draft)
    return _finished(draft, stock)


def _base(name: str, entry: StockEntry) -> Stock:
    """Return what the entry starts from: a standard's stock, or nothing but a kind."""
    if entry.like is None and entry.construction is None:
        if entry.kind is None:
            raise Faulty("kind", 'is missing; give "chain", "beads", "rope" or "rod", or `like` a standard\'s stock')
        return Stock(name, cast(Kind, entry.kind), math.nan)
    base = _constructed(entry) if entry.like is None else _found(entry.like)
    if entry.kind not in (None, base.kind):
        raise Faulty("kind", f"is {say(entry.kind)}, but {base.name} is a {base.kind}; leave `kind` out")
    return base


def _found(like: str) -> Stock:
    try:
        return find_base(like)
    except ValueError as error:
        raise Faulty("like", str(error)) from error


def _constructed(entry: StockEntry) -> Stock:
    try:
        found = rope_class(entry.construction or "")
    except ValueError as error:
        raise Faulty("construction", f"{say(entry.construction)} {error}") from error
    if found is None:
        listed = '"7x7", "7x19", "6x19 IWRC", "1x19", "1x19 stainless"'
        raise Faulty(
            "construction", f"{say(entry.construction)} is in no table; give one like {listed}, or leave it out"
        )
    diameter = _across(entry)
    if diameter is None:
        raise Faulty("diameter", f"is missing; give the diameter of the {entry.construction}")
    return found.stock(round(diameter * 1e3, 9))  # 0.0063 m is 6.3 mm


def _across(entry: StockEntry) -> float | None:
    """Return the diameter of a rope, rod or ball: written `diameter`, or `width` or `wire` where it alone is given."""
    given = [value for value in (entry.diameter, entry.width, entry.wire) if value is not None]
    if len(set(given)) > 1 and entry.diameter is None:
        raise Faulty("diameter", "is missing; give it, as `wire` and `width` are of a link, and differ")
    return given[0] if given else None


def _material(entry: StockEntry) -> Material | None:
    if entry.density is not None:
        return Material("material", entry.density)
    return entry.material


def _rope(draft: Draft) -> Stock:
    entry, base = draft.entry, draft.base
    diameter, area = _across(entry), entry.area or base.area
    if entry.like is not None and diameter not in (None, base.diameter):
        raise Faulty("diameter", f"is another than that of {base.name}; give `construction` and `diameter` instead")
    mass = entry.mass_per_metre
    if mass is None and not math.isnan(base.mass_per_metre):
        mass = base.mass_per_metre
    if mass is None:
        if area is None or draft.material is None:
            raise Faulty("mass_per_metre", "is missing; give it, or the rope's `construction` and `diameter`")
        mass = draft.material.density * area
        draft.notes.append("mass per metre of the metal alone; core and grease add up to a fifth")
    if diameter is None:
        diameter = base.diameter or _drawn(draft, mass)
    if entry.modulus is not None and area is None:
        raise Faulty(
            "area",
            "is missing; `modulus` counts on the metal, not on the circle, which is 30 to 90 % too stiff: give it, or "
            "the `construction`",
        )
    return replace(base, mass_per_metre=mass, diameter=diameter, area=area)


def _drawn(draft: Draft, mass: float) -> float:
    """Return the diameter of a steel-core wire rope of this mass, m: for drawing it only."""
    diameter = math.sqrt(100.0 * mass / _USUAL_MASS) * 1e-3
    draft.notes.append(f"diameter of {diameter * 1e3:.1f} mm worked out from the mass: measure it")
    return diameter


def _rod(draft: Draft) -> Stock:
    entry = draft.entry
    diameter, area, mass = _across(entry), entry.area, entry.mass_per_metre
    if diameter is None and area is None and mass is None:
        raise Faulty("diameter", "is missing; give it, or `area` or `mass_per_metre`")
    if area is None:
        area = math.pi * diameter**2 / 4.0 if diameter else cast(float, mass) / draft.assumed().density
    if mass is None:
        material = draft.assumed()
        mass = material.density * area
        draft.notes.append(f"mass per metre from the section, {material.name} of {material.density:g} kg/m3")
    if diameter is None:
        diameter = math.sqrt(4.0 * area / math.pi)
        draft.notes.append("drawn as a round of the same section")
    return replace(draft.base, mass_per_metre=mass, diameter=diameter, area=area)


_MAKERS: Mapping[str, Callable[[Draft], Stock]] = {"chain": chain, "beads": beads, "rope": _rope, "rod": _rod}


def _finished(draft: Draft, stock: Stock) -> Stock:
    """Return the stock with what all kinds have: stiffness, strength, material, where its figures come from."""
    entry, base, material = draft.entry, draft.base, draft.material
    if entry.certified is not None and entry.breaking_load is None:
        raise Faulty("certified", "stands alone; give the `breaking_load` that is certified")
    own = f"the design's own [stock.{draft.name}]"
    like = f", otherwise {base.name}: {base.source}" if entry.like or entry.construction else ""
    expansion = entry.expansion
    if expansion is None:
        expansion = material.expansion if material is not None else stock.expansion
    return replace(
        stock,
        name=draft.name,
        modulus=entry.modulus or stock.modulus,
        breaking_load=entry.breaking_load or stock.breaking_load,
        certified=entry.breaking_load is not None and entry.certified is not False,
        density=material.density if material is not None else stock.density,
        expansion=expansion,
        drag=entry.drag,
        sold=entry.sold,
        title=base.title or stock.kind,
        source=f"{entry.source or own}{like}",
        standing=f"user's own, otherwise {base.standing}" if like else "user's own",
        scope=base.scope or _SCOPES[stock.kind],
        notes=(*stock.notes, *draft.notes) if like else tuple(draft.notes),
        lacking="",
    )
