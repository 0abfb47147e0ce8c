"""How wide text is, so that nothing printed lies over anything else.

Widths are in cap heights: a drawing's text height is the height of its capitals (ISO 3098-1). The table holds for each
character the wider advance of two open-licence sans fonts, Liberation Sans 2 (SIL Open Font License; its advances are
those most programs' default sans has too) and DejaVu Sans 2.37 (Bitstream Vera licence), rounded up to 0.05: a box
measured here holds the text whichever of them a reader finds.
"""

import math
from collections.abc import Iterable, Iterator
from functools import lru_cache
from itertools import chain

WIDTHS = {
    character: width
    for width, characters in {
        0.4: "'ijl",
        0.45: " ,.I·",
        0.5: "-/:;\\f|",
        0.55: "!()[]t²³",
        0.6: "r",
        0.65: '"',
        0.7: "*`°",
        0.75: "Jsz",
        0.8: "ck",
        0.85: "?L_aeovxy–",
        0.9: "$0123456789FTbdghnpqu{}µ",
        0.95: "Z",
        1.0: "ABEKPSVXY",
        1.05: "CHNRU",
        1.1: "&D",
        1.15: "#+<=>GOQ^w~±×",
        1.25: "M",
        1.35: "%m½",
        1.4: "W",
        1.5: "@…",
    }.items()
    for character in characters
}
WIDEST = 1.5  # of a character not in the table; ideographs are as wide as their em, 1.45 cap heights
EM = 1.37  # font size over cap height of DejaVu Sans; of Liberation Sans 1.45, so text is never higher than meant
DESCENT = 0.33  # how far g and y reach under the line, in cap heights, the deeper of the two fonts


@lru_cache(maxsize=65536)
def width(text: str) -> float:
    """Return the width of a line of text in cap heights."""
    return sum(WIDTHS.get(character, WIDEST) for character in text)


def wrapped(text: str, widest: float, indent: float = 0.0) -> list[str]:
    """Return the text in lines of at most `widest` cap heights, broken at spaces; words are where they are longer.

    The first line is shorter by an `indent`, and empty where not even a word has room after it.
    """
    lines: list[str] = [""] if indent else []
    for word in chain.from_iterable(_parted(word, widest) for word in text.split()):
        longer = f"{lines[-1]} {word}" if lines and lines[-1] else word
        if lines and width(longer) <= widest - (indent if len(lines) == 1 else 0.0):
            lines[-1] = longer
        else:
            lines.append(word)
    return lines


def _parted(word: str, widest: float) -> Iterator[str]:
    """Yield a word in parts of at most `widest` cap heights, of one character at least."""
    if width(word) <= widest:
        yield word
        return
    part = ""
    for character in word:
        if part and width(part + character) > widest:
            yield part
            part = ""
        part += character
    yield part


def joined(parts: Iterable[str], widest: float, between: str = ", ") -> list[str]:
    """Return parts set one after another in lines of at most `widest` cap heights; a part is never broken."""
    lines: list[str] = []
    for part in parts:
        longer = f"{lines[-1]}{between}{part}" if lines else part
        if lines and width(longer) <= widest:
            lines[-1] = longer
        else:
            lines.append(part)
    return lines


def fits(text: str, height: float, room: float) -> bool:
    """Return whether text of a height is at most as wide as the room it has."""
    return width(text) * height <= room or math.isclose(width(text) * height, room)
