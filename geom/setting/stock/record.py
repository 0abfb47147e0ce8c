"""A stock: what a member is made of, with what each of its figures rests on."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

from geom.units import STANDARD_GRAVITY

__all__ = ["Kind", "Stock", "use_of_capacity"]

Kind = Literal["chain", "beads", "rope", "rod"]


@dataclass(frozen=True)
class Stock:
    """A chain, ball chain, rope or rod. SI; None where a figure is not known.

    Parameters
    ----------
    name : str
        As a design names it.
    kind : "chain", "beads", "rope" or "rod"
    mass_per_metre : float
        kg/m. NaN only of what cannot be used as it stands (`lacking` says why).
    wire, pitch, width : float or None
        Of chain: wire, inside length and outside width of a link, m. Of ball chain: pitch.
    diameter : float or None
        Of rope and rod; of the balls of ball chain, m.
    modulus, area : float or None
        Modulus of elasticity, Pa, on an area, m2: both legs of a link, the metal of a rope.
    breaking_load, proof_load : float or None
        N. `certified` says whether the user vouches for the breaking load; no table does.
    density, expansion : float or None
        Of the material, kg/m3 and per kelvin.
    drag : float or None
        Drag coefficient for wind.
    sold : tuple of float
        Lengths of whole reels or bars, m.
    pitch_plus, pitch_minus, wire_tolerance : float or None
        How far one pitch may be over or under, and the wire either way, m.
    title : str
        What it is, in words.
    source, standing, confirm, scope : str
        Where the figures come from, how far they can be trusted, what to confirm, and what the stock is not for.
    notes : tuple of str
        What was worked out, and how.
    lacking : str
        Why it cannot be used as it stands, with the remedy; empty where it can.
    """

    name: str
    kind: Kind
    mass_per_metre: float
    wire: float | None = None
    pitch: float | None = None
    width: float | None = None
    diameter: float | None = None
    modulus: float | None = None
    area: float | None = None
    breaking_load: float | None = None
    proof_load: float | None = None
    certified: bool = False
    density: float | None = None
    expansion: float | None = None
    drag: float | None = None
    sold: tuple[float, ...] = ()
    pitch_plus: float | None = None
    pitch_minus: float | None = None
    wire_tolerance: float | None = None
    title: str = ""
    source: str = ""
    standing: str = ""
    confirm: str = ""
    scope: str = ""
    notes: tuple[str, ...] = ()
    lacking: str = ""

    @property
    def counted(self) -> bool:
        """Whether it is made of whole links or balls."""
        return self.kind in ("chain", "beads")

    @property
    def weight(self) -> float:
        """Weight, N/m."""
        return self.mass_per_metre * STANDARD_GRAVITY

    @property
    def EA(self) -> float | None:  # noqa: N802 - its name in every text
        """Stiffness, N; None for what is taken not to stretch."""
        return None if self.modulus is None or self.area is None else self.modulus * self.area

    @property
    def across(self) -> float | None:
        """What is seen from the side, m: the outside width of a link, the diameter of anything else."""
        return self.width if self.kind == "chain" else self.diameter

    @property
    def cited(self) -> str:
        """Where its figures come from and how far they can be trusted, in one line."""
        return "; ".join(
            filter(None, (f"{self.source} ({self.standing})" if self.standing else self.source, *self.notes))
        )

    def overall(self, links: int) -> float:
        """Return the length of so many links over the outside of the end links, n p + 2 d, m."""
        return links * (self.pitch or math.nan) + 2.0 * (self.wire or 0.0)

    def pitch_band(self, links: int) -> tuple[float, float] | None:
        """Return how far so many links may measure under and over, m, all links erring one way; None if not known."""
        if self.pitch_minus is None or self.pitch_plus is None:
            return None
        return links * self.pitch_minus, links * self.pitch_plus


def use_of_capacity(stock: Stock, pull: float) -> float | None:
    """Return the share of the breaking load that a pull (N) is; None unless the user vouches for the breaking load.

    Tables are no certificates, and nothing is said of a capacity on their word.
    """
    if stock.breaking_load is None or not stock.certified:
        return None
    return pull / stock.breaking_load
