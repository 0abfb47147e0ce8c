"""How large what is not geometry is printed."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Sizes:
    """Sizes on the print, in its own unit: millimetres on paper, pixels on a screen. Text by its capitals.

    Text heights are of the ISO 3098 series 1.8, 2.5, 3.5, 5, 7; the first dimension line stands 8 mm off the figure and
    the others 7 mm apart (common practice is 8 to 10 and 7).
    """

    note: float = 2.5
    small: float = 1.8
    title: float = 5.0
    heading: float = 7.0
    arrow: float = 2.5
    gap: float = 1.0
    first_row: float = 8.0
    row: float = 7.0
    overshoot: float = 1.5  # of an extension line past its dimension line
    symbol: float = 4.0  # height of a support's triangle
    leading: float = 1.7  # line to line, in heights of the text
    least_apart: float = 15.0  # between pieces, in heights of the notes' text

    @property
    def apart(self) -> float:
        """Least distance between two pieces."""
        return self.least_apart * self.note


PAPER = Sizes()
