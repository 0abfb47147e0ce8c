"""Materials of arches and of stock: densities and expansions, with what each rests on."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Annotated, Any

from pydantic import BeforeValidator, Field, ValidationInfo

from geom.errors import near, say
from geom.fields import Density, Expansion, Modulus, Section, Text, known, look_up

__all__ = ["Material", "MaterialEntry", "MaterialRef", "find_material", "known_materials", "user_material"]


@dataclass(frozen=True)
class Material:
    """One material.

    Parameters
    ----------
    density : float
        kg/m3.
    strength : float or None
        Crushing strength, Pa; only the user's own has one.
    expansion : float or None
        Per kelvin.
    source, standing, confirm : str
        What it is of, how far the figures can be trusted, and what to confirm.
    """

    name: str
    density: float
    strength: float | None = None
    expansion: float | None = None
    source: str = ""
    standing: str = ""
    confirm: str = ""

    @property
    def cited(self) -> str:
        """Where its figures come from and how far they can be trusted, in one line."""
        return f"{self.name}, {self.source} ({self.standing})" if self.standing else self.source


class MaterialEntry(Section):
    """The table [material.NAME]."""

    density: Density = Field(description="its density, kg/m3")
    strength: Modulus | None = Field(None, description='its crushing strength, like "5 MPa"; without it, unlimited')
    expansion: Expansion | None = Field(None, description="its thermal expansion, per kelvin")
    source: Text = Field("", description="where its figures come from")


def user_material(name: str, entry: MaterialEntry) -> Material:
    """Return a material of the user's own."""
    return Material(
        name=name,
        density=entry.density,
        strength=entry.strength,
        expansion=entry.expansion,
        source=entry.source or f"the design's own [material.{name}]",
    )


@cache
def _table() -> Mapping[str, Material]:
    """Return every material by its name and other names, in small letters."""
    text = files("geom.setting").joinpath("materials.toml").read_text("utf-8")
    table: dict[str, Material] = {}
    for row in tomllib.loads(text)["material"]:
        expansion = row.get("expansion")
        material = Material(
            name=row["name"],
            density=float(row["density"]),
            expansion=None if expansion is None else expansion / 1e6,
            source=row["source"],
            standing=row["standing"],
            confirm=row["confirm"],
        )
        table |= {name.casefold(): material for name in (row["name"], *row.get("also", ()))}
    return table


def known_materials(text: str = "") -> list[Material]:
    """Return the materials of the table whose name or description has every word of `text`."""
    words = text.casefold().split()
    listed = dict.fromkeys(_table().values())
    return [m for m in listed if all(word in f"{m.name} {m.source}".casefold() for word in words)]


def find_material(name: str) -> Material:
    """Return a material of the table by its name; capitals and spaces around it do not matter.

    Raises
    ------
    ValueError
        If there is none of that name; the nearest is suggested.
    """
    try:
        return _table()[" ".join(name.casefold().split())]
    except KeyError:
        hint = near(name, _table()) or "; add it as [material.NAME] with its density"
        raise ValueError(f"there is no material {say(name)}{hint}") from None


def _material(raw: Any, info: ValidationInfo) -> Material:  # noqa: ANN401 - as the file has it
    if isinstance(raw, Material):
        return raw
    if not isinstance(raw, str):
        raise ValueError(f'{say(raw)} is no material; give its name, like "brick"')
    own = known(info).named.get("material", {})
    if raw in own:
        mine: Material = look_up("material", raw, info)
        return mine
    try:
        return find_material(raw)
    except ValueError:
        hint = near(raw, [*own, *_table()]) or "; add it as [material.NAME] with its density"
        raise ValueError(f"there is no material {say(raw)}{hint}") from None


MaterialRef = Annotated[Material, BeforeValidator(_material)]
