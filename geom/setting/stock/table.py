"""The table of standard stock that travels with the program, and how names in it are compared."""

import re
import tomllib
from collections.abc import Mapping
from functools import cache
from importlib.resources import files
from typing import Any

__all__ = ["KN", "KN_PER_MM2", "PER_METRE", "key", "table"]

PER_METRE = 1000.0  # mm; divided by, since 52 / 1000 is the double nearest to 0.052 and 52 * 0.001 is not
KN = 1e3  # N
KN_PER_MM2 = 1e9  # Pa


@cache
def table() -> Mapping[str, Any]:
    """Return stock.toml as it is written there: mm, kg/m, kN, kN/mm2."""
    return tomllib.loads(files("geom.setting.stock").joinpath("stock.toml").read_text("utf-8"))


def key(name: str) -> str:
    """Return a name without what is written differently: capitals, spaces, hyphens, times sign, decimal comma, mm."""
    return re.sub(r"[\s_-]|mm$", "", name.casefold().replace("×", "x").replace(",", "."))
