"""Standard stock found by name, and listed."""

from functools import cache, lru_cache

from geom.errors import near, say
from geom.setting.stock.chains import chains
from geom.setting.stock.record import Stock
from geom.setting.stock.ropes import classes, rope
from geom.setting.stock.table import key

__all__ = ["find", "find_base", "known", "suggestion"]

# No name in the tables is longer than 40; beyond this none is looked for.
_LONGEST = 80


@lru_cache(maxsize=256)
def find_base(name: str) -> Stock:
    """Return a standard's stock by name, even one that cannot be used as it stands.

    Capitals, spaces and hyphens do not matter. A chain is a standard and its wire ("DIN 763-6", "DIN 766-13x36"), a
    rope its class and diameter ("7x19-5", "6x19 IWRC-12", "1x19-6 stainless").

    Raises
    ------
    ValueError
        If there is none; the nearest is suggested.
    """
    found = chains().get(key(name)) if len(name) <= _LONGEST else None
    if found is None:
        try:
            found = rope(name) if len(name) <= _LONGEST else None
        except ValueError as error:
            raise ValueError(f"{say(name)} {error}") from error
    if found is None:
        raise ValueError(f"there is no stock {say(name)}{suggestion(name)}")
    return found


def find(name: str) -> Stock:
    """Return a standard's stock by name, ready to be used.

    Raises
    ------
    ValueError
        If there is none, or the tables lack what it needs; the text says what would be right.
    """
    found = find_base(name)
    if found.lacking:
        raise ValueError(f"{say(name)} {found.lacking}")
    return found


@lru_cache(maxsize=256)  # a name misspelt is misspelt in every piece of a design
def suggestion(name: str, own: tuple[str, ...] = ()) -> str:
    """Return the sizes of the standard it names, the nearest of the design's own and the tables, or where to look."""
    asked = key(name[:_LONGEST].rpartition("-")[0])
    same = [s.name.rpartition("-") for s in _plain() if asked and key(s.name.rpartition("-")[0]) == asked]
    if same:
        sizes = [size for _, _, size in same]
        unit = "" if sizes[0].endswith("in") else " mm"
        return f"; {same[0][0]} is listed in {', '.join(sizes[:-1])} and {sizes[-1]}{unit}"
    names = [*own, *dict.fromkeys(stock.name for stock in _listed())]
    return near(name, names) or '; `sagwright stock` lists the known ones, "DIN 763-8" or "7x19-5"; or add your own'


def _plain() -> list[Stock]:
    """Return the chains of the tables in their own metal, which alone have a stiffness."""
    return [stock for stock in dict.fromkeys(chains().values()) if stock.EA is not None]


@cache
def _listed() -> tuple[Stock, ...]:
    """Return every chain, and the ropes of the usual diameters."""
    ropes = [entry.stock(size) for entry in classes().values() for size in entry.sizes or (40.0,)]
    return (*dict.fromkeys(chains().values()), *ropes)


def known(text: str = "") -> list[Stock]:
    """Return the standard stocks whose name, kind or title have every word of `text`; or the one that it names.

    Ropes are made in any diameter: the usual ones are listed, and one named exactly is found all the same.
    """
    words = text.casefold().split()
    found = [s for s in _listed() if all(word in f"{s.name} {s.kind} {s.title}".casefold() for word in words)]
    if not found and words:
        try:
            return [find_base(text)]
        except ValueError:
            return []
    return found
