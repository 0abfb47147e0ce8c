"""The figures of a hanging member, as the figures file has them."""

from __future__ import annotations

from dataclasses import dataclass

from geom.result import NAN, Degrees, Metres, MetresArray, Newtons


@dataclass(frozen=True)
class Neighbour:
    """What another count of links would give; NaN where it cannot reach."""

    count: int
    sag: Metres
    lowest_z: Metres
    pull_horizontal: Newtons


@dataclass(frozen=True)
class LinksFigures:
    """Whole links. `overall` is over the outsides of the end links, n p + 2 d."""

    count: int
    pitch: Metres
    ends: str
    overall: Metres
    neighbours: tuple[Neighbour, ...]
    rigid_off: Metres = NAN  # greatest distance of rigid links' hinges and middles from the catenary


@dataclass(frozen=True)
class LoadFigures:
    """One load: the point of the member that carries it, and how far along the made member, from its `from` end."""

    mark: str
    at: MetresArray
    mark_: Metres
    underside: Metres
    force: Newtons


@dataclass(frozen=True)
class SagPerSupport:
    """Change of the greatest sag for a small move of one support: outward along the span, and upward; m/m."""

    from_out: float
    from_up: float
    to_out: float
    to_up: float


@dataclass(frozen=True)
class Band:
    """What may come out as hung where all that is left open errs one way: null where it would not reach.

    `shorter` and `longer` are what cutting, or the pitch of the links, may make of the length; the greatest sag has
    the supports nearer by what they may give.
    """

    shorter: Metres
    longer: Metres
    supports_nearer: Metres
    sag_least: Metres
    sag_greatest: Metres
    lowest_least: Metres
    lowest_greatest: Metres
    clearance_least: Metres
    clearance_greatest: Metres


@dataclass(frozen=True)
class HangingFigures:
    """Figures of one member as hung; elevations and points in the design's axes."""

    span: Metres
    level_difference: Metres
    pin_to_pin: Metres
    hung_length: Metres
    sag: Metres
    sag_mid: Metres
    lowest: Metres
    below_from: Metres
    below_to: Metres
    clearance: Metres
    clearance_at: Metres
    parameter: Metres
    pull_horizontal: Newtons
    pull_from: Newtons
    pull_to: Newtons
    slope_from: Degrees
    slope_to: Degrees
    links: LinksFigures | None
    loads: tuple[LoadFigures, ...]
    sag_per_length: float
    points: MetresArray
    capacity_used: float = NAN  # greatest end pull over the breaking load, only where the user certifies one
    lowest_at: Metres = NAN  # plan distance of the lowest point from the `from` support
    sag_at: Metres = NAN  # plan distance of the greatest sag from the `from` support
    sag_per_kelvin: Metres = NAN  # change of the greatest sag for a kelvin
    sag_per_support: SagPerSupport | None = None
    band: Band | None = None
    hanging: Metres = NAN  # over a floor, as made: what hangs, and what lies on it
    lying: Metres = NAN
