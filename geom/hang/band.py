"""What cutting, the pitch of links and giving supports leave open: the least and the greatest sag that may come out."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from geom.hang.asked import Asked
from geom.hang.clearance import Grounds, least_over
from geom.hang.figures import Band
from geom.hang.intent import Lengths, Wish, hung
from geom.setting.options import Setting

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


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


def bands(
    members: Sequence[Asked], wish: Wish, lengths: Lengths, count: Ints, ground: Grounds, *, setting: Setting
) -> Bands:
    """Return the bands of all members: those a little shorter, and those a little longer with their supports given way.

    A chain is off by the tolerance of its pitch, all links erring one way; a rope by that of its cut. Near taut the sag
    answers out of proportion, so that both ends are solved for and not drawn from the slope.
    """
    tolerance, give = setting.shop.cut_tolerance, setting.site.support_give
    of_pitch = [member.stock.pitch_band(int(n)) or (0.0, 0.0) for member, n in zip(members, count, strict=True)]
    counted = np.isfinite(wish.pitch)[:, np.newaxis]
    off = np.where(counted, np.array(of_pitch).reshape(-1, 2), tolerance)
    less = Lengths(lengths.pin - off[:, 0], lengths.excess - off[:, 0])
    more = Lengths(lengths.pin + off[:, 1], lengths.excess + off[:, 1])
    least, most = hung(wish, less), hung(wish, more, closer=np.full(wish.span.shape, give))
    gaps = least_over(least, ground)[0], least_over(most, ground, moved=0.5 * give)[0]
    return Bands(
        off=off,
        sag=np.stack([least.sag, most.sag], axis=1),
        lowest=np.stack([least.lowest, most.lowest], axis=1),
        clearance=np.stack(gaps, axis=1),
        closer=give,
    )
