"""The solids: one watertight STL file for each piece as it hangs or stands, in millimetres from a stated origin."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import replace
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from export.outputs import Checked, CheckFailed, Choices, File, Output
from export.printing.prepare import Printed, Wishes, prepared
from export.stl import solid_origin, solid_stl
from export.stl_check import expected_size, verify_stl
from geom.curves import Polyline
from geom.result import Caution, Result
from geom.setting.options import Print
from geom.solids import Body, Links, Solid, Sweep, Union

MOST_REAL_LINKS = 2000
"""Links of a design that are made one by one unless more are asked for: each is some 700 facets, 35 kB of file."""
_VOLUME = 0.01
"""Share of the true volume that a print's facets may be off by; sections keep their area, so they are far nearer."""
_STRAIGHT = 1e-9
"""Radians of turn from link to link under which a line is straight: rounding alone turns it by some 1e-15."""
_MM3 = 1e9


def _links_in(body: Body) -> int:
    if isinstance(body, Union):
        return sum(_links_in(part) for part in body.bodies)
    return len(body.places) if isinstance(body, Links) else 0


def _too_many(result: Result, choices: Choices) -> bool:
    links = sum(_links_in(solid.body) for piece in result.pieces for solid in piece.solids)
    return links > MOST_REAL_LINKS and not choices.real_links


def as_tubes(body: Body) -> Body:
    """Return a body with each run of links as a tube of the chain's width through their middles."""
    if isinstance(body, Union):
        return replace(body, bodies=tuple(as_tubes(part) for part in body.bodies))
    if isinstance(body, Links) and len(body.places) > 1:
        half = body.turns[[0, -1], :, 0] * (body.link.pitch / 2)
        line = np.vstack([body.places[0] - half[0], body.places, body.places[-1] + half[1]])
        return Sweep(Polyline(_corners(line)), body.link.width / 2)
    return body


def _corners(line: NDArray[np.float64]) -> NDArray[np.float64]:
    """The corners of a line (n, 3) that it turns at: a plumb strand has none but its ends."""
    ways = np.diff(line, axis=0)
    ways /= np.linalg.norm(ways, axis=1, keepdims=True)
    turns = np.linalg.norm(np.diff(ways, axis=0), axis=1) > _STRAIGHT
    return np.asarray(line[np.concatenate([[True], turns, [True]])])


def _wishes(result: Result) -> Wishes:
    asked = result.setting.printing
    return Wishes(
        scale=asked.scale,
        least_wall=asked.least_wall,
        joined=asked.links == "joined",
        gap=asked.gap,
        bed=asked.bed,
    )


def _within(result: Result, choices: Choices) -> float:
    return float(choices.within or result.setting.drawing.within)


def _solids(result: Result, choices: Choices) -> Iterator[Solid]:
    tubes = _too_many(result, choices)
    for piece in result.pieces:
        for solid in piece.solids:
            body = as_tubes(solid.body) if tubes else solid.body
            yield replace(solid, body=body, volume=body.volume if body is not solid.body else solid.volume)


def _printed(result: Result, choices: Choices) -> Iterator[tuple[Solid, Printed]]:
    wishes, within = _wishes(result), _within(result, choices)
    for solid in _solids(result, choices):
        yield solid, prepared(solid, wishes, within)


def cautions(result: Result, choices: Choices) -> Iterator[Caution]:
    """Yield what the solids are not: real links, true walls."""
    if _too_many(result, choices):
        yield Caution(
            "links as tubes",
            "",
            f"The design has over {MOST_REAL_LINKS} links: its solids show each chain as a tube of the chain's width. "
            "Ask for --real-links to have the links all the same.",
            "a limit of this program",
        )
    if result.setting.prints:
        yield _print_caution(result.setting.printing)


def _print_caution(asked: Print) -> Caution:
    """What is done to every solid; what it came to for each stands with its file in the figures."""
    done = [
        f"they are at 1:{asked.scale:g}" if asked.scale != 1 else "",
        f"walls under {asked.least_wall * 1e3:g} mm are thickened to it" if asked.least_wall else "",
        f"links are joined by {asked.gap * 1e3:g} mm of overlap" if asked.links == "joined" else "",
        "what is larger than the bed is cut up" if asked.bed else "",
    ]
    said = "; ".join(filter(None, done)) or "they are at full size"
    return Caution("print", "", f"The solids are models for printing and no full-size parts: {said}.", "[print]")


def write(result: Result, choices: Choices) -> Iterator[File]:
    """Yield a file for each solid, or for each part of it that fits the printer's bed."""
    for solid, printed in _printed(result, choices):
        for part in printed.parts:
            yield _file(solid.mark, part.name, part.solid, printed)


def _file(mark: str, part: str, solid: Solid, printed: Printed) -> File:
    within = printed.within
    origin = solid_origin(solid, within)
    facets = solid.body.facets(within)
    name = f"solid-{mark}-{part}.stl" if part else f"solid-{mark}.stl"
    return File(
        name,
        solid_stl(solid, within, origin=origin),
        lambda: _checked(solid, facets, within),
        {"origin_m": origin, **({"notes": list(printed.notes)} if printed.notes else {})},
    )


def _bodies(body: Body) -> Iterable[Body]:
    return (inner for part in body.bodies for inner in _bodies(part)) if isinstance(body, Union) else (body,)


def _checked(solid: Solid, facets: int, within: float) -> Checked:
    """Check one link of each kind, and every other body whole: closed, outside out, of the true volume."""
    count = 0
    for body in _bodies(solid.body):
        one = body.link.mesh(within) if isinstance(body, Links) else body.mesh(within)
        true = body.link.volume if isinstance(body, Links) else body.volume
        if not one.is_watertight or not abs(one.volume - true) <= _VOLUME * true:
            raise CheckFailed(f"solid {solid.mark}: a surface of {one.volume:.4g} m3 is not the {true:.4g} m3 it is of")
        count += len(body.places) if isinstance(body, Links) else 1
    return {
        "unit": "mm",
        "watertight": True,
        "bodies": count,
        "facets": facets,
        "bytes": expected_size(facets),
        "volume_mm3": solid.volume * _MM3,
    }


def verify(path: Path, _result: Result, _choices: Choices) -> Checked:
    """Read a whole file back: size, closed surface, positive volume, no facet inside out."""
    report = verify_stl(path)
    if report.problems:
        raise CheckFailed(f"{path.name}: {'; '.join(report.problems)}")
    return {
        "facets_read": report.facets,
        "volume_read_mm3": report.volume,
        "low_mm": report.low,
        "high_mm": report.high,
    }


OUTPUT = Output("solid", write, verify, cautions)
