"""One published number: where it comes from, how this program computes it, how closely it must agree."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal

import numpy as np
import pytest


@dataclass(frozen=True)
class Published:
    """A value as it is printed.

    It is to be met within half a unit of its last printed digit, or within the wider `within` that its source
    asks for. "Re-keyed" in a source: read in a companion notebook that re-keys a textbook's examples, not in the
    book. "Derived" in a source or quantity: no answer is printed, it was worked out with 40 digits from the equations
    named, apart from this program.
    """

    case: str
    source: str
    quantity: str
    compute: Callable[[], object]
    printed: str
    within: float | None = None

    def __str__(self) -> str:
        return f"{self.case} {self.quantity}"

    @property
    def tolerance(self) -> float:
        exponent = Decimal(self.printed).as_tuple().exponent
        assert isinstance(exponent, int)
        # a thousandth of the half for the rounding of what is compared
        return self.within if self.within is not None else 0.5005 * 10.0**exponent

    def check(self) -> None:
        computed = float(np.asarray(self.compute()))
        assert computed == pytest.approx(float(self.printed), rel=0.0, abs=self.tolerance), self.source
