"""A mark with the outline it stands in, and how it is entered into the picture and its ground."""

from dataclasses import dataclass, field

import numpy as np

from export.picture import text as measure
from export.picture.ground import ANY, TEXT, Ground
from export.picture.looks import LOOKS
from export.picture.values import Circle, Floats, Path, Text
from geom.result import LabelRole

_SHORT_MARK = 3  # characters that a triangle of a support mark holds
_LINE = 1.5  # line to line of what stands under a mark, in heights of its text


@dataclass(frozen=True, slots=True, eq=False)
class Wanted:
    """A mark to be placed: its printed point (2,), how far its symbol reaches, the direction of its member.

    `below` are lines of small text under it.
    """

    text: str
    at: Floats
    role: LabelRole
    clear: float = 0.0
    along: Floats | None = None
    first: tuple[int, int] | None = None  # which of the places around is tried first
    below: tuple[str, ...] = ()


@dataclass
class Marks:
    """Marks in place, and how many there was no room for."""

    texts: list[Text] = field(default_factory=list)
    paths: list[Path] = field(default_factory=list)
    circles: list[Circle] = field(default_factory=list)
    dropped: int = 0


@dataclass(frozen=True, slots=True)
class Tag:
    """A mark with the outline it stands in: half its width and height round its middle."""

    wanted: Wanted
    height: float
    half: tuple[float, float]
    middle: float = 0.0  # of the text over the middle of the outline
    small: float = 0.0  # height of the lines under it

    @property
    def round(self) -> bool:
        """Whether it stands in a circle."""
        return self.wanted.role == "node"


def tag_of(wanted: Wanted, height: float, small: float = 0.0) -> Tag:
    """Return a mark with its outline at a height of its text, and of the lines under it."""
    wide = measure.width(wanted.text) * height
    if wanted.role == "node":
        radius = float(np.hypot(wide, height)) / 2 + 0.2 * height
        return Tag(wanted, height, (radius, radius))
    if wanted.role == "support" and len(wanted.text) <= _SHORT_MARK:
        base, high = _triangle(wide, height)
        return Tag(wanted, height, (base / 2, high / 2), 0.75 * height - high / 2)
    if wanted.below:
        small = min(small or height, height)
        wide = max(wide, *(measure.width(line) * small for line in wanted.below))
        high = (height if wanted.text else 0.0) + _LINE * small * len(wanted.below)
        return Tag(wanted, height, (wide / 2, high / 2), 0.0, small)
    return Tag(wanted, height, (wide / 2, height / 2))


def _triangle(wide: float, height: float) -> tuple[float, float]:
    """Base and height of a triangle 0.9 as high as wide that holds a text a quarter of its height over the base."""
    base = wide + 0.4 * height + 1.25 * height / 0.9
    return base, 0.9 * base


def free(tag: Tag, middle: Floats, angle: float, ground: Ground, margin: float) -> bool:
    """Return whether a mark round a middle touches nothing."""
    (x, y), (wide, high) = middle.tolist(), tag.half
    if tag.round:
        return ground.free_disc(middle, wide + margin)
    if angle == np.pi / 2:
        wide, high = high, wide
    elif angle:
        return ground.free_turned(corners(tag, middle, angle), ANY, margin)
    return ground.free((x - wide, y - high, x + wide, y + high), ANY, margin)


def corners(tag: Tag, middle: Floats, angle: float) -> Floats:
    """Return the corners (4, 2) of a mark's outline round a middle."""
    wide, high = tag.half
    box = np.array([[-wide, -high], [wide, -high], [wide, high], [-wide, high]])
    if angle == 0:
        return np.asarray(middle + box)
    cos, sin = np.cos(angle), np.sin(angle)
    return np.asarray(middle + box @ np.array([[cos, sin], [-sin, cos]]))


def enter(tag: Tag, middle: Floats, angle: float, ground: Ground, marks: Marks) -> bool:
    """Draw a mark round its middle, and take the ground under it."""
    ground.area(corners(tag, middle, angle), TEXT)
    if tag.wanted.below:
        marks.texts += lines_of(tag, middle, angle)
        return True
    foot = middle + (tag.middle - tag.height / 2) * np.array([-np.sin(angle), np.cos(angle)])
    at = (float(foot[0]), float(foot[1]))
    marks.texts.append(Text(LOOKS["mark"], tag.wanted.text, at, tag.height, "centre", angle))
    if tag.round:
        marks.circles.append(Circle(LOOKS["mark"], (float(middle[0]), float(middle[1])), tag.half[0]))
    elif tag.middle:
        wide, high = tag.half
        outline = middle + np.array([[-wide, -high], [wide, -high], [0, high]])
        marks.paths.append(Path(LOOKS["mark"], outline, closed=True))
    return True


def lines_of(tag: Tag, middle: Floats, angle: float = 0.0) -> list[Text]:
    """Return the texts of a mark with lines under it, one under another round its middle."""
    down = np.array([np.sin(angle), -np.cos(angle)])
    foot = middle - tag.half[1] * down
    texts = []
    if tag.wanted.text:
        foot = foot + tag.height * down
        texts.append(
            Text(LOOKS["mark"], tag.wanted.text, (float(foot[0]), float(foot[1])), tag.height, "centre", angle)
        )
    for number, line in enumerate(tag.wanted.below):
        step = _LINE if number or tag.wanted.text else (1 + _LINE) / 2
        foot = foot + step * tag.small * down
        texts.append(Text(LOOKS["mark"], line, (float(foot[0]), float(foot[1])), tag.small, "centre", angle))
    return texts
