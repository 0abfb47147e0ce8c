"""One member over saddles as asked for: its whole length from one fact, and the bays it hangs in, in any state.

The pull at one place settles that at all others (`geom.hang.saddles`), and every bay sags less the more it is pulled.
So a fact of the hung member needs no search: each bay alone says what pull would give it the sag or the lowest point
asked for, and the greatest of these pulls makes it the greatest sag, or the lowest point, of all.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang import elastic_facts, links, saddles
from geom.hang.asked import Ground
from geom.hang.formulas import chord
from geom.hang.shopwork import rounded_pins
from geom.hang.stretched import Stretched
from geom.setting.fittings import End
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.setting.supports import Support
from geom.units import STANDARD_GRAVITY

Floats = NDArray[np.float64]

BY_LENGTH = ("length", "links", "slack")
# Of the least pull: how far over it the slackest member is taken that is said to rest, so that rounding cannot undo it.
_OVER_LEAST = 1e-9


@dataclass(frozen=True, eq=False)
class Sliding:
    """One member over saddles as asked for. `value` is in SI: m, m/m, N, a count, of a counterweight kg."""

    mark: str
    supports: tuple[Support, ...]
    stock: Stock
    fact: str
    value: float
    fit_from: End
    fit_to: End
    parity: str = "any"
    rounding: str = "nearest"
    copies: int = 1
    friction: float | None = None
    grounds: tuple[Ground | None, ...] = ()
    person: float = 0.0

    @property
    def points(self) -> Floats:
        """The supports, (n + 1, 3) m."""
        return np.array([support.at for support in self.supports], dtype=np.float64)

    @property
    def spans(self) -> Floats:
        """Plan distances from support to support, (n,) m."""
        step = np.diff(self.points, axis=0)
        return np.asarray(np.hypot(step[:, 0], step[:, 1]))

    @property
    def rises(self) -> Floats:
        """Each support over the one before, (n,) m."""
        return np.asarray(np.diff(self.points[:, 2]))

    @property
    def chords(self) -> float:
        """All straight distances from support to support together, m."""
        return float(chord(self.spans, self.rises).sum())

    @property
    def takes(self) -> float:
        """Length of the fittings at both ends together, m."""
        return self.fit_from.takes + self.fit_to.takes

    @property
    def grips(self) -> float:
        """Rope used up in making both ends, m."""
        return self.fit_from.grip + self.fit_to.grip

    @property
    def stiffness(self) -> float:
        """Modulus times area, N; infinite of what does not stretch."""
        return math.inf if self.stock.EA is None else self.stock.EA

    @property
    def hung_weight(self) -> float:
        """Weight that hangs behind the last support, N; 0 where the member ends there."""
        return self.value * STANDARD_GRAVITY if self.fact == "counterweight" else 0.0

    def growth(self, temperature: float, setting: Setting) -> float:
        """Return lengths at a temperature over those at the shop's."""
        return 1.0 + (self.stock.expansion or 0.0) * (temperature - setting.shop.temperature)


@dataclass(frozen=True, eq=False)
class Slid:
    """A member over saddles as made and hung.

    pin, wished : between the first and the last support at the shop's temperature, before stretch, m: as made, and as
        its fact asks for
    count : whole links, 0 of rope and rod
    hung : its bays as hung, fields of shape (n,)
    """

    asked: Sliding
    pin: float
    wished: float
    count: int
    hung: Stretched
    setting: Setting

    @property
    def growth(self) -> float:
        """Length as hung over that at the shop's temperature."""
        return self.asked.growth(self.setting.temperatures[1], self.setting)

    @property
    def bay_pins(self) -> Floats:
        """Lengths from support to support, as `pin`, (n,) m."""
        return np.asarray(self.hung.length / self.growth)

    def at(self, growths: Sequence[float], closer: Sequence[float]) -> list[Stretched]:
        """Return the bays in k states, solved together: growths of length, and how much nearer the supports are, m."""
        return bays_of(self.asked, self.pin, growths, closer)

    def of_pins(self, pins: Floats) -> Stretched:
        """Return the bays of members otherwise long, (k, n): as hung, between fixed ends."""
        return saddles.run(line_of(self.asked, self.growth), length=pins * self.growth).bays

    def slipping(self) -> tuple[Stretched, Stretched]:
        """Return the bays about to slip towards the last support over all saddles, and towards the first, as hung."""
        asked, mu = self.asked, self.asked.friction or 0.0
        line, both = line_of(asked, self.growth), np.array([mu, -mu])  # slipping back is friction turned round
        if asked.fact == "counterweight":
            found = saddles.slipping(line, both, toward_to=True, counterweight=np.full(2, asked.hung_weight))
        else:
            found = saddles.slipping(line, both, toward_to=True, length=np.full(2, self.pin * self.growth))
        return row(found, 0), row(found, 1)

    def value(self, hang: Stretched, pin: float) -> float:
        """Return the fact that was asked for, of solved bays of a length."""
        asked = self.asked
        lowest = float((hang.lowest + asked.points[:-1, 2]).min())
        values = {
            "length": pin, "links": float(self.count), "slack": pin / asked.chords, "sag": float(hang.sag.max()),
            "lowest": lowest, "pull": float(hang.horizontal[0]), "counterweight": asked.value,
        }  # fmt: skip
        return values[asked.fact]

    @property
    def difference(self) -> float:
        """Made minus intended; of rope and rod what rounding the cut to the shop's step does."""
        asked = self.asked
        if asked.fact == "counterweight":
            return 0.0
        if self.count:
            return self.value(self.hung, self.pin) - asked.value
        pin_, takes, grips = (np.array([value]) for value in (self.pin, asked.takes, asked.grips))
        pin = float(rounded_pins(pin_, takes, grips, self.setting.shop.step)[0])
        rounded = replace(self, pin=pin)
        return self.value(rounded.at([self.growth], [0.0])[0], pin) - self.value(self.hung, self.pin)


def line_of(asked: Sliding, growth: float | Floats, closer: Floats | None = None) -> saddles.Line:
    """Return supports and stock as the solver of saddles takes them, for one state or for k of them.

    Inner supports are pulled alike from both sides and stay; the first and the last lean in by half of `closer` each.
    """
    spans = asked.spans if closer is None else np.tile(asked.spans, (len(closer), 1))
    if closer is not None:
        spans[:, 0] -= 0.5 * closer
        spans[:, -1] -= 0.5 * closer
    weight = np.asarray(asked.stock.weight / growth)
    return saddles.Line(spans, asked.rises, weight[..., np.newaxis] if weight.ndim else weight, asked.stiffness)


def bays_of(asked: Sliding, pin: float, growths: Sequence[float], closer: Sequence[float]) -> list[Stretched]:
    """Return the bays of a member of a length at the shop's temperature; a counterweight leaves that as it comes."""
    grown = np.array(growths, dtype=np.float64)
    line = line_of(asked, grown, np.array(closer, dtype=np.float64))
    if asked.fact == "counterweight":
        found = saddles.run(line, counterweight=np.full(grown.shape, asked.hung_weight))
    else:
        found = saddles.run(line, length=pin * grown)
    return [row(found, number) for number in range(len(grown))]


def row(found: saddles.Run, number: int = 0) -> Stretched:
    """Return the bays of one run, fields of shape (n,)."""
    return Stretched(*(getattr(found.bays, field.name)[number] for field in fields(Stretched)))


def slackest(asked: Sliding, setting: Setting) -> Stretched:
    """Return the bays of the longest member that still rests on smooth saddles: one more bit and it all runs out."""
    growth = asked.growth(setting.temperatures[1], setting)
    weight, stiffness = asked.stock.weight / growth, asked.stiffness
    least = elastic_facts.least_end_pull(asked.spans, asked.rises, weight, stiffness)
    heights = np.concatenate([[0.0], np.cumsum(asked.rises)])
    upper = np.maximum(heights[:-1], heights[1:])
    needed = float((_stored(least * (1.0 + _OVER_LEAST), stiffness) - weight * upper).max())
    return _from_start(asked, growth, needed)


def wished(asked: Sliding, setting: Setting) -> float:
    """Return the whole length that a fact asks for, at the shop's temperature, m; NaN where nothing hangs so."""
    if asked.fact == "length":
        return asked.value
    if asked.fact == "links":
        return asked.value * (asked.stock.pitch or math.nan) + asked.takes
    if asked.fact == "slack":
        return asked.value * asked.chords
    growth = asked.growth(setting.temperatures[1], setting)
    if asked.fact == "counterweight":
        hang = row(saddles.run(line_of(asked, growth), counterweight=asked.hung_weight))
    else:
        hang = _from_start(asked, growth, _start(asked, growth))
    slid = Slid(asked, math.nan, math.nan, 0, hang, setting)
    as_asked = abs(slid.value(hang, math.nan) - asked.value) <= 1e-6 * max(abs(asked.value), 1.0)
    return float(hang.length.sum()) / growth if as_asked else math.nan


def fewest(asked: Sliding, setting: Setting) -> int:
    """Return the fewest links that are longer than the way over all supports."""
    growth = asked.growth(setting.temperatures[1], setting)
    room = asked.chords / growth - asked.takes
    least = max(1, math.floor(room / (asked.stock.pitch or math.nan)) + 1)
    short = asked.parity != "any" and least % 2 != (1 if asked.parity == "odd" else 0)
    return least + short


def made(asked: Sliding, pin: float, setting: Setting) -> Slid:
    """Return what can be made of a wished length: whole links of chain, and the bays it hangs in."""
    count, length = 0, pin
    if asked.stock.counted:
        count, length = _whole(asked, pin, setting)
    growth = asked.growth(setting.temperatures[1], setting)
    return Slid(asked, length, pin, count, bays_of(asked, length, [growth], [0.0])[0], setting)


def _whole(asked: Sliding, pin: float, setting: Setting) -> tuple[int, float]:
    """Count whole links. Behind a counterweight's support some of the last ones hang: the bays take what they take."""
    pitch = float(asked.stock.pitch or math.nan)
    if asked.fact == "counterweight":
        count = links.count(pin - asked.takes, pitch, rounding="up", parity=asked.parity)
        return int(count), pin
    if asked.fact == "links":
        return int(asked.value), pin
    least = fewest(asked, setting) if asked.rounding == "nearest" else 1
    count = links.count(pin - asked.takes, pitch, rounding=asked.rounding, parity=asked.parity, least=least)
    return int(count), int(count) * pitch + asked.takes


def _start(asked: Sliding, growth: float) -> float:
    """Return T + T^2/2EA at the first support for a fact as hung; -inf where no bay can have it."""
    spans, rises, weight, stiffness = asked.spans, asked.rises, asked.stock.weight / growth, asked.stiffness
    heights = np.concatenate([[0.0], np.cumsum(rises)])[:-1]
    if asked.fact == "pull":
        one = elastic_facts.from_pull(spans[:1], rises[:1], asked.value, weight, stiffness)
        return float(_stored(one.pulls.at_from, stiffness)[0])
    # of the two members that a bay can hold under one pull only the shallow one rests: no bay is deeper than this
    least = elastic_facts.least_end_pull(spans, rises, weight, stiffness)
    limit = elastic_facts.from_end_pull(spans, rises, least * (1.0 + _OVER_LEAST), weight, stiffness)
    if asked.fact == "sag":
        hang = elastic_facts.from_sag(spans, rises, asked.value, weight, stiffness)
        rests = asked.value <= limit.sag
    else:
        lower = asked.points[:-1, 2] + np.minimum(rises, 0.0)
        hang = elastic_facts.from_lowest(spans, rises, lower - asked.value, weight, stiffness)
        rests = asked.value >= limit.lowest + asked.points[:-1, 2]
    starts = _stored(hang.pulls.at_from, stiffness) - weight * heights
    return float(np.where(rests & np.isfinite(starts), starts, -np.inf).max())


def _from_start(asked: Sliding, growth: float, start: float) -> Stretched:
    """Return the bays whose T + T^2/2EA at the first support is given: by the pull that it makes at the last."""
    weight, stiffness = asked.stock.weight / growth, asked.stiffness
    stored = start + weight * float(asked.rises.sum())
    pull = 2.0 * stored / (1.0 + math.sqrt(1.0 + 2.0 * stored / stiffness)) if stored > 0.0 else math.nan
    return row(saddles.run(line_of(asked, growth), counterweight=pull))


def _stored(pull: Floats, stiffness: float) -> Floats:
    return np.asarray(pull + pull * (0.5 * pull / stiffness))
