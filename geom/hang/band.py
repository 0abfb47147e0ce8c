"""What cutting, the pitch of links and giving supports leave open: the least and the greatest sag that may come out."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from geom.hang.asked import Asked
from geom.hang.figures import Band
from geom.hang.intent import Lengths
from geom.hang.states import Looked, State, state

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Bands:
    """Bands of n members: everything of shape (n, 2), least and greatest sag; `off` shorter and longer, m."""

    off: Floats
    sag: Floats
    lowest: Floats
    clearance: Floats
    closer: float

    def of(self, number: int, base: float) -> Band | None:
        """Return one member's band, None where nothing is left open; `base` the elevation of its `from`, m."""
        shorter, longer = (float(value) for value in self.off[number])
        if not (shorter or longer or self.closer):
            return None
        (sag_least, sag_most), (high, low) = self.sag[number].tolist(), self.lowest[number].tolist()
        above, under = self.clearance[number].tolist()
        return Band(
            shorter=shorter, longer=longer, supports_nearer=self.closer, sag_least=sag_least, sag_greatest=sag_most,
            lowest_least=base + low, lowest_greatest=base + high, clearance_least=under, clearance_greatest=above,
        )  # fmt: skip


def bands(members: Sequence[Asked], look: Looked) -> Bands:
    """Return the bands of all members: those a little shorter, and those a little longer with their supports given way.

    A chain is off by the tolerance of its pitch, all links erring one way; a rope by that of its cut. Near taut the sag
    answers out of proportion, so that both ends are solved for and not drawn from the slope.
    """
    wish, made, setting = look.wish, look.made, look.setting
    tolerance, give = setting.shop.cut_tolerance, setting.site.support_give
    rows = zip(members, made.count.tolist(), strict=True)
    of_pitch = [member.stock.pitch_band(count) or (0.0, 0.0) for member, count in rows]
    counted = np.isfinite(wish.pitch)[:, np.newaxis]
    off = np.where(counted, np.array(of_pitch).reshape(-1, 2), tolerance)
    if not (off.any() or give):
        nothing = np.full(off.shape, np.nan)
        return Bands(off, nothing, nothing, nothing, give)
    least = _off(look, -off[:, 0], 0.0)
    most = _off(look, off[:, 1], give)
    return Bands(
        off=off,
        sag=np.stack([least.held.sag, most.held.sag], axis=1),
        lowest=np.stack([least.held.lowest, most.held.lowest], axis=1),
        clearance=np.stack([least.clearance, most.clearance], axis=1),
        closer=give,
    )


def _off(look: Looked, longer: Floats, closer: float) -> State:
    """Everything with other lengths, and with its supports nearer."""
    own = look.made.lengths
    made = replace(look.made, lengths=Lengths(own.pin + longer, own.excess + longer))
    return state(replace(look, made=made), "band", look.setting.temperatures[1], grown=look.wish.growth, closer=closer)
