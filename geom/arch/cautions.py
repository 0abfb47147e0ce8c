"""What a user must know of an arch."""

from __future__ import annotations

from collections.abc import Iterator

from geom.arch.asked import AskedArch
from geom.arch.making import Made
from geom.result import Caution

_PRACTICE = "common practice"
_HEYMAN = "Heyman, The stone skeleton, 1966"
_THIRD, _HALF = 1.0 / 6.0, 0.5  # eccentricity over thickness at the middle third, and at the edge of the ring


def cautions(asked: AskedArch, made: Made) -> tuple[Caution, ...]:
    """Return the cautions that apply to one arch."""
    return tuple(Caution(code, asked.mark, text, source) for code, text, source in _cautions(asked, made))


def _cautions(asked: AskedArch, made: Made) -> Iterator[tuple[str, str, str]]:
    yield (
        "masonry",
        "Masonry takes no tension and needs abutments that do not move and loads as stated: a line of thrust inside "
        "the ring is necessary, and spreading abutments remove it. Centring stays until the ring is closed and the "
        "mortar has set. A licensed engineer checks ring, abutments and ground; local codes govern.",
        _HEYMAN,
    )
    yield (
        "own weight only",
        "Thrust and forces on the abutments are of the arch's own weight alone, joints counted as the material. A "
        "hanging curve stood up carries that in next to no thickness, which is no safety: fill, people, wind, frost "
        "and settlement are not in it, and no load is tried.",
        "H = w a of the catenary; " + _HEYMAN,
    )
    yield from _of_line(made)
    yield from _of_blocks(made)
    if asked.material.confirm:
        text = f"Mass and thrust rest on {asked.material.density:g} kg/m3 for {asked.material.name}: "
        yield "material to confirm", f"{text}{asked.material.confirm}.", asked.material.cited


def _of_line(made: Made) -> Iterator[tuple[str, str, str]]:
    worst = made.thrust.eccentricity
    if worst > _HALF:
        text = "The line of the thrust given leaves the ring: it does not stand by itself as drawn."
        yield "line of thrust leaves the ring", text, _HEYMAN
    elif worst > _THIRD:
        within = f"it comes within {_HALF - worst:.2f} thicknesses of an edge."
        text = f"The line of the thrust given leaves the middle third: {within}"
        yield "middle third", text, _HEYMAN


def _of_blocks(made: Made) -> Iterator[tuple[str, str, str]]:
    stones = made.stones
    if stones is None:
        return
    if stones.keystone is None:
        text = f"{len(stones)} blocks leave no keystone: a joint stands at the crown. An odd count has one."
        yield "no keystone", text, _PRACTICE
    if stones.run_out:
        text = (
            f"{stones.run_out} joints near the springings run out on the level foot instead of the intrados, so that "
            "blocks there have a thin edge. Fewer blocks, or a radial foot, have none."
        )
        yield "joints run out on the foot", text, "drawn geometry"
