"""The title under a view: mark, what it is, how many; then the lines a shop needs."""

from collections.abc import Sequence

from export.picture.looks import LOOKS
from export.picture.sizes import Sizes
from export.picture.text import joined, width, wrapped
from export.picture.values import Text
from export.picture.wording import Wording, said_pulls
from geom.result import Piece, View

_NARROWEST = 30.0  # of a title, in heights of the notes' text, however narrow the view is
_PULL_OF = "dead load only"


def title(
    piece: Piece, view: View, wording: Wording, sizes: Sizes, *, room: float, cautions: Sequence[int]
) -> list[Text]:
    """Return the lines of a piece's title, the first line's foot a title's height under the origin, x from 0.

    `room` is the width of the view (print units), `cautions` the numbers of those in the notes it is to be read with.
    """
    note = LOOKS["note"]
    widest = max(_NARROWEST, room / sizes.note)
    texts = [Text(LOOKS["mark"], piece.mark, (0.0, -sizes.title), sizes.title)]
    first = texts[0].width + 0.6 * sizes.title
    beside = wrapped(_what(piece, view), widest - first / sizes.note)
    lines = beside[1:]
    if first / sizes.note + width(beside[0]) > max(widest, 1.5 * _NARROWEST):
        lines = wrapped(_what(piece, view), widest)
    else:
        texts.append(Text(note, beside[0], (first, -sizes.title), sizes.note))
    lines = [*lines, *facts(piece, view, wording, widest)]
    step = sizes.leading * sizes.note
    texts += [Text(note, line, (0.0, -sizes.title - step * n), sizes.note) for n, line in enumerate(lines, 1)]
    if cautions:
        numbers = ", ".join(str(number) for number in cautions)
        foot = -sizes.title - step * (len(lines) + 1)
        texts.append(Text(LOOKS["caution"], f"see caution {numbers}", (0.0, foot), sizes.note))
    return texts


def facts(piece: Piece, view: View, wording: Wording, widest: float) -> list[str]:
    """Return a piece's facts in lines; pulls stand apart, with what they are of. Only its first view has them."""
    if view is not piece.views[0]:
        return []
    plain = [wording.quantity(fact) for fact in piece.facts if not said_pulls(fact.name)]
    pulls = [wording.quantity(fact) for fact in piece.facts if said_pulls(fact.name)]
    if piece.copies > 1 and plain:
        plain[-1] += " each"
    if pulls:
        pulls[-1] += f" ({_PULL_OF})"
    return [*joined(plain, widest), *joined(pulls, widest)]


def _what(piece: Piece, view: View) -> str:
    words = [piece.what or piece.kind]
    if len(piece.views) > 1:
        words.append(view.name)
    if piece.copies > 1:
        words.append(f"{piece.copies} off")
    return ", ".join(words)
