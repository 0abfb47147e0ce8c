"""Mass, area and force of chain and rope from their sizes. SI throughout."""

import math

__all__ = [
    "LAY",
    "STEEL",
    "breaking_load",
    "legs_area",
    "link_mass",
    "metal_area",
    "packing",
    "rope_mass",
    "strand_mass_factor",
    "wire_of_mass",
]

STEEL = 7850.0  # kg/m3, common practice
LAY = 1.02  # wire in a strand is 2 % longer than the strand: common practice for usual lays


def link_mass(wire: float, pitch: float, width: float, density: float = STEEL) -> float:
    """Return the mass per metre of chain of stadium-shaped links, kg/m.

    The centre line of a link is two half circles of diameter b - d and two straights, L = pi (b - d) + 2 (p + 2 d - b);
    by Pappus a link has the volume L pi d2 / 4, and there is one in every pitch.

    Parameters
    ----------
    wire, pitch, width : float
        Wire d, inside length p and outside width b, m.
    density : float
        kg/m3.
    """
    line = math.pi * (width - wire) + 2.0 * (pitch + 2.0 * wire - width)
    return density * line * math.pi * wire**2 / 4.0 / pitch


def wire_of_mass(mass: float, pitch: float, width_in_wires: float, density: float = STEEL) -> float:
    """Return the wire d of a chain of known mass per metre, m, whose links are `width_in_wires` d wide.

    The mass rises with d (L does, and so does its section), so that there is one d, found by Newton's method from
    above, where the cubic is convex and steps never pass the root.
    """
    slope = math.pi * (width_in_wires - 1.0) + 2.0 * (2.0 - width_in_wires)
    volume = 4.0 * mass * pitch / (math.pi * density)  # of a link over pi / 4: (2 p + slope d) d2
    wire = math.sqrt(volume / (2.0 * pitch))
    for _ in range(50):
        step = ((2.0 * pitch + slope * wire) * wire**2 - volume) / ((4.0 * pitch + 3.0 * slope * wire) * wire)
        wire -= step
        if abs(step) <= 1e-15 * wire:
            break
    return wire


def legs_area(wire: float) -> float:
    """Return the section of both legs of a link, m2."""
    return math.pi * wire**2 / 2.0


def packing(wires: int) -> float:
    """Return the share of the circle that a strand of equal wires in full layers fills, n / (2 m + 1)2.

    A wire in the middle and m layers of 6, 12, 18, ... wires: n = 1 + 3 m (m + 1), over a circle of 2 m + 1 wires.

    Raises
    ------
    ValueError
        If so many wires make no full layers.
    """
    layers = round((math.sqrt((4 * wires - 1) / 3.0) - 1.0) / 2.0)
    if layers < 1 or 1 + 3 * layers * (layers + 1) != wires:
        raise ValueError(f"{wires} wires make no full layers; a strand has 7, 19, 37, 61 or 91")
    return wires / (2 * layers + 1) ** 2


def metal_area(diameter: float, factor: float) -> float:
    """Return the metallic area C d2 of a rope, m2 (EN 12385-2, 3.10: C = pi f / 4, f its fill)."""
    return factor * diameter**2


def rope_mass(diameter: float, factor: float) -> float:
    """Return the mass of a rope, kg/m: W d2 is kg per 100 m with d in mm (EN 12385-2, 3.10)."""
    return factor * (1000.0 * diameter) ** 2 / 100.0


def strand_mass_factor(fill: float, density: float = STEEL) -> float:
    """Return W of a bare spiral strand: a metal of 7850 kg/m3 weighs 0.785 C d2 per 100 m, and 2 % more by its lay."""
    return density * 1e-4 * math.pi * fill / 4.0 * LAY


def breaking_load(diameter: float, factor: float, grade: float) -> float:
    """Return the least breaking load K d2 Rr of a rope, N (EN 12385-2, 3.10); `grade` in Pa."""
    return factor * diameter**2 * grade
