"""A chain or ball chain of the user's own: its links from what was written, measured or weighed."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import cast

from geom.setting.materials import find_material
from geom.setting.stock import formulas
from geom.setting.stock.chains import in_material, mass_note
from geom.setting.stock.draft import Draft, Faulty
from geom.setting.stock.record import Stock

__all__ = ["beads", "chain"]

# Outside width of a link in wires where none is given: between the 3.4 of DIN 766 and the 4.2 of DIN 763.
_USUAL_WIDTH = 3.5
# Ball over pitch where no diameter is given: the 4.5 mm balls at 6 mm of blind-control chain, from memory.
_USUAL_BALL = 0.75
_FEW_LINKS = 11  # of the gauge of DIN 766, over which the tolerance of calibrated chain is given


def chain(draft: Draft) -> Stock:
    """Return a chain; of wire, width and mass what was left out is worked out where it can be."""
    entry, base = draft.entry, draft.base
    pitch = _pitch(draft)
    if pitch is None:
        raise Faulty(
            "pitch", "is missing; give the inside length of a link, or `measured` = { links = 11, length = ... }"
        )
    wire, width = entry.wire or base.wire, entry.width or base.width
    if draft.material is not None and base.wire:
        base = in_material(base, draft.material, name=base.name)
    mass = entry.mass_per_metre
    if mass is None:
        mass = _link_mass(draft, base, wire, pitch, width)
    else:
        wire, width = _links_of_mass(draft, mass, wire, pitch, width)
    wire, width = cast(float, wire), cast(float, width)
    _check_link(draft, wire, pitch, width)
    measured = entry.pitch is not None or entry.measured is not None
    return replace(
        base,
        mass_per_metre=mass,
        wire=wire,
        pitch=pitch,
        width=width,
        pitch_plus=None if measured else base.pitch_plus,
        pitch_minus=None if measured else base.pitch_minus,
        area=entry.area or formulas.legs_area(wire),
    )


def _pitch(draft: Draft) -> float | None:
    entry = draft.entry
    if entry.measured is None:
        return entry.pitch or draft.base.pitch
    pitch = entry.measured.length / entry.measured.links
    draft.notes.append(f"pitch as measured over {entry.measured.links} links")
    if entry.measured.links < _FEW_LINKS:
        draft.notes.append(f"{_FEW_LINKS} links or more measure a pitch better")
    return pitch


def _link_mass(draft: Draft, base: Stock, wire: float | None, pitch: float, width: float | None) -> float:
    """Return the mass per metre by the link's geometry: a standard's listed mass corrected by it, or all of it."""
    for key, value in (("wire", wire), ("width", width)):
        if value is None:
            raise Faulty(key, "is missing; give it, and the mass is worked out, or weigh a length: `mass_per_metre`")
    wire, width = cast(float, wire), cast(float, width)
    if base.wire and base.pitch and base.width and not math.isnan(base.mass_per_metre):
        before, now = formulas.link_mass(base.wire, base.pitch, base.width), formulas.link_mass(wire, pitch, width)
        if now != before:
            draft.notes.append(f"mass per metre of {base.name}, corrected by the link's geometry")
        return base.mass_per_metre * now / before
    material = draft.assumed()
    draft.notes.append(mass_note(material))
    return formulas.link_mass(wire, pitch, width, material.density)


def _links_of_mass(
    draft: Draft, mass: float, wire: float | None, pitch: float, width: float | None
) -> tuple[float, float]:
    """Return wire and width of a chain whose mass is known; what was left out is worked out for drawing it."""
    if wire is None:
        if width is not None:
            raise Faulty("wire", "is missing; give the wire of the link")
        density = (draft.material or find_material("steel")).density
        wire = formulas.wire_of_mass(mass, pitch, _USUAL_WIDTH, density)
        draft.notes.append(f"wire of {wire * 1e3:.2f} mm worked out from the mass: measure it")
        if draft.entry.modulus is not None and draft.entry.area is None:
            raise Faulty("area", "is missing; `modulus` counts on the section of both legs of a link, or give `wire`")
    if width is None:
        width = _USUAL_WIDTH * wire
        draft.notes.append(f"width taken as {_USUAL_WIDTH:g} wires: measure it")
    return wire, width


def _check_link(draft: Draft, wire: float, pitch: float, width: float) -> None:
    if pitch < 2.0 * wire:
        raise Faulty(
            "measured" if draft.entry.measured else "pitch",
            f"of {pitch * 1e3:.4g} mm is less than two wires of {wire * 1e3:.4g} mm, which lie inside each link; "
            "give the inside length",
        )
    if width < 3.0 * wire * (1.0 - 1e-9):
        if width <= 2.0 * wire:
            raise Faulty("width", f"of {width * 1e3:.4g} mm leaves nothing between two wires; give the outside width")
        draft.notes.append("links narrower than three wires do not bear at their crowns: measure the pitch")


def beads(draft: Draft) -> Stock:
    """Return a ball chain."""
    entry = draft.entry
    pitch = _pitch(draft)
    if pitch is None:
        raise Faulty("pitch", "is missing; measure many balls and divide by their number: `measured`")
    if entry.mass_per_metre is None:
        raise Faulty("mass_per_metre", "is missing; weigh a length, since balls are hollow and no formula holds")
    diameter = entry.diameter or entry.width or entry.wire
    if diameter is None:
        diameter = _USUAL_BALL * pitch
        draft.notes.append(f"balls taken as {_USUAL_BALL:g} of the pitch: measure them")
    return replace(draft.base, mass_per_metre=entry.mass_per_metre, pitch=pitch, diameter=diameter, area=entry.area)
