"""The row under a run: at each bay its mark, and under it what the fitter needs there."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from export.picture.sizes import Sizes
from export.picture.tags import Tag, Wanted, lines_of, tag_of
from export.picture.values import Box, Text, around, xy

_MOST_ROWS = 6  # one under another, so that neighbours stand clear of one another


@dataclass(frozen=True)
class Strip:
    """The texts of a row of bays, and the box round them."""

    texts: tuple[Text, ...]
    box: Box
    rows: int = 1
    dropped: int = 0  # bays whose facts there was no room for


def strip(wanted: Sequence[Wanted], foot: float, sizes: Sizes) -> Strip | None:
    """Return the row of bays under a height of the print, or None where there are none.

    Marks keep their height as long as neighbours stand clear; narrow bays have smaller text, then stand in rows.
    """
    if not wanted:
        return None
    tags, rows = next(_fitting(wanted, sizes))
    high = max(2 * tag.half[1] for tag in tags) + 1.5 * sizes.gap
    texts: list[Text] = []
    for number, tag in enumerate(tags):
        top = foot - sizes.gap - number % rows * high
        texts += lines_of(tag, xy(float(tag.wanted.at[0]), top - tag.half[1]))
    dropped = sum(not tag.wanted.below and bool(mark.below) for tag, mark in zip(tags, wanted, strict=True))
    return Strip(tuple(texts), around(*(text.box for text in texts)), rows, dropped)


def _fitting(wanted: Sequence[Wanted], sizes: Sizes) -> Iterator[tuple[list[Tag], int]]:
    for note, small in ((sizes.note, sizes.note), (sizes.note, sizes.small), (sizes.small, sizes.small)):
        tags = [tag_of(mark, note, small) for mark in wanted]
        if _clear(tags, 1, sizes):
            yield tags, 1
    for rows in range(2, _MOST_ROWS):
        if _clear(tags, rows, sizes):
            yield tags, rows
    # so narrow that even the rows are full: marks alone, which the tables explain
    yield [tag_of(replace(mark, below=()), sizes.small) for mark in wanted], _MOST_ROWS


def _clear(tags: Sequence[Tag], rows: int, sizes: Sizes) -> bool:
    """Whether marks stand clear of the next in their row, when every row takes each `rows`-th of them."""
    return all(
        float(after.wanted.at[0] - before.wanted.at[0]) >= before.half[0] + after.half[0] + 1.5 * sizes.gap
        for before, after in zip(tags, tags[rows:], strict=False)
    )
