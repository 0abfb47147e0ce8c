"""The preview, `preview.svg`: elevations and plan to look at without other software, text as text."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from pathlib import Path
from xml.etree import ElementTree
from xml.sax.saxutils import escape

import numpy as np

from export.dxf.links import outlines
from export.outputs import Checked, CheckFailed, Choices, File, Output
from export.picture import notes as noting
from export.picture.looks import LOOKS, Colour, Look
from export.picture.screen import MARGIN, SCREEN, WIDTH, Screen, screen
from export.picture.text import EM, wrapped
from export.picture.values import SITE_PLAN, Circle, Floats, Links, Panel, Stroke, Text
from export.picture.wording import counted, listed
from geom.result import Result

_COLOURS: dict[Colour, str] = {"plain": "#111", "warm": "#b5300a", "grey": "#888"}
_DASHES = {"CONTINUOUS": "", "DASHED": "6 4", "CENTER": "14 3 2 3", "PHANTOM": "14 3 2 3 2 3"}
_LEAST_LINK = 5.0  # pixels: a link shorter than this is not told from a line
_MOST_LINKS = 800  # drawn one by one: over that the file would outgrow what a preview may weigh
_MOST_CAUTIONS = 6
_HEAVY = 30  # printed width in 1/100 mm from which on a stroke is two pixels wide
_STYLE = (
    ".p path,.p circle,.p use{fill:none;vector-effect:non-scaling-stroke;stroke-linecap:round;stroke-linejoin:round}"
    "text{font-family:sans-serif;fill:#111}"
)


def write(result: Result, choices: Choices) -> Iterable[File]:
    """Yield the preview."""
    made = _Made(result)
    yield File("preview.svg", made.chunks(), made.checked)


def verify(path: Path, result: Result, choices: Choices) -> Checked:
    """Read a preview back and check it against the result it was made from."""
    return _Made(result).check(path.read_bytes())


class _Made:
    """A preview on its way into a file."""

    def __init__(self, result: Result) -> None:
        self.result = result
        self.screen = screen(result)
        self.data = b""

    def chunks(self) -> Iterator[bytes]:
        """Yield the file's bytes."""
        self.data = svg(self.result, self.screen).encode()
        yield self.data

    def checked(self) -> Checked:
        """Check what was written."""
        return self.check(self.data)

    def check(self, data: bytes) -> Checked:
        """Check that a file is well-formed, names every piece that is drawn and has no small text."""
        try:
            root = ElementTree.fromstring(data)
        except ElementTree.ParseError as error:
            raise CheckFailed(f"preview.svg is no well-formed XML: {error}") from error
        texts = list(root.iter("{http://www.w3.org/2000/svg}text"))
        said = {"".join(text.itertext()) for text in texts}
        missing = {panel.groups[0].mark for panel in self.screen.panels if panel.name != SITE_PLAN} - said
        if missing:
            raise CheckFailed(f"preview.svg does not name {sorted(missing)}")
        smallest = min(float(text.get("font-size", "0")) for text in texts)
        return {"texts": len(texts), "smallest_text_px": smallest, "bytes": len(data)}


def svg(result: Result, shown: Screen) -> str:
    """Return the picture on a screen as SVG."""
    room = (WIDTH - 2 * MARGIN) / SCREEN.heading
    head = [Text(LOOKS["mark"], line, (MARGIN, 0.0), SCREEN.heading) for line in wrapped(_title(result), room)]
    foot = _foot(result, shown)
    over = MARGIN + _height(head) + SCREEN.heading
    middle = over + shown.box[3] - shown.box[1] + MARGIN
    high = middle + _height([line[0] for line in foot]) + MARGIN
    parts = [
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{WIDTH:.0f}" height="{high:.0f}" '
        f'viewBox="0 0 {WIDTH:.0f} {high:.0f}" role="img" aria-labelledby="t d">',
        f'<title id="t">{escape(_title(result))}</title>',
        f'<desc id="d">{escape(_description(result, shown))}</desc>',
        f"<style>{_STYLE}</style>",
        '<rect width="100%" height="100%" fill="#fff"/>',
        *_column([[line] for line in head], MARGIN),
    ]
    few = sum(_count(panel) for panel in shown.panels) <= _MOST_LINKS
    for number, panel in enumerate(shown.panels):
        parts += _panel(panel, number, (panel.at[0], over + shown.box[3] - panel.at[1]), few=few)
    return "\n".join([*parts, *_column(foot, middle), "</svg>", ""])


def _title(result: Result) -> str:
    return " ".join((result.title or "Untitled").split())


def _description(result: Result, shown: Screen) -> str:
    drawn = [panel.groups[0].mark for panel in shown.panels if panel.name != SITE_PLAN]
    plan = " and the plan of all pieces" if any(panel.name == SITE_PLAN for panel in shown.panels) else ""
    return (
        f"Elevations of {listed(drawn)}{plan}, of {counted(len(result.pieces), 'piece')}, with what tells their shape."
    )


def _foot(result: Result, shown: Screen) -> list[list[Text]]:
    """The lines under the picture, each of one text or more: what is not drawn, unit, what pulls include, cautions."""
    said = [f"Not drawn: {shown.rest}"] if shown.rest else []
    pulls = "; pulls are of the dead load only" if any(piece.pulls for piece in result.pieces) else ""
    said.append(f"Lengths in {result.setting.drawing_unit}{pulls}. The drawing carries all dimensions and marks.")
    room = (WIDTH - 2 * MARGIN) / SCREEN.note
    lines = [[_note(part)] for line in said for part in wrapped(line, room)]
    cautions = noting.words(result).cautions
    for head, line in cautions[:_MOST_CAUTIONS]:
        lines += _caution(head, line, room)
    if len(cautions) > _MOST_CAUTIONS:
        lines += _caution(f"and {len(cautions) - _MOST_CAUTIONS} more cautions", "the drawing has all", room)
    return lines


def _note(line: str, indent: float = 0.0) -> Text:
    return Text(LOOKS["note"], line, (MARGIN + indent, 0.0), SCREEN.note)


def _caution(head: str, line: str, room: float) -> list[list[Text]]:
    """A caution's lines, the first after its head."""
    first = replace(_note(head), look=LOOKS["caution"])
    indent = first.width + SCREEN.note
    beside, *under = wrapped(line, room, indent / SCREEN.note)
    return [[first, *([_note(beside, indent)] if beside else [])], *([_note(part)] for part in under)]


def _height(lines: Sequence[Text]) -> float:
    return sum(line.height * SCREEN.leading for line in lines)


def _column(lines: Sequence[Sequence[Text]], top: float) -> list[str]:
    """Lines of text one under another from `top` down."""
    written, foot = [], top
    for line in lines:
        foot += line[0].height * SCREEN.leading
        written += [_text(replace(text, at=(text.at[0], -foot))) for text in line]
    return written


def _count(panel: Panel) -> int:
    return sum(len(row.places) for group in panel.groups for row in group.links)


def _panel(panel: Panel, number: int, at: tuple[float, float], *, few: bool) -> list[str]:
    """One view with its origin at a place of the screen; y is turned downwards point by point."""
    lines: dict[Look, list[str]] = {}
    parts = [f'<g class="p" transform="translate({_n(at[0])} {_n(at[1])})">']
    for group in panel.groups:
        for row_number, row in enumerate(group.links):
            if few and (row.pitch + 2 * row.wire) / panel.per >= _LEAST_LINK:
                parts += _links(row, panel.per, f"l{number}-{row_number}")
        for stroke in group.strokes:
            lines.setdefault(stroke.look, []).append(_d(stroke.points / panel.per, closed=stroke.closed))
        for path in group.paths:
            lines.setdefault(path.look, []).append(_d(path.points, closed=path.closed))
        parts += [_circle(circle) for circle in group.circles]
    for placed in panel.dimensions:
        for path in placed.paths:
            lines.setdefault(path.look, []).append(_d(path.points, closed=path.closed))
    parts += [f'<path d="{"".join(subpaths)}"{_pen(look)}/>' for look, subpaths in lines.items()]
    texts = [*(text for group in panel.groups for text in group.texts), *panel.titles]
    texts += [placed.text for placed in panel.dimensions]
    return [*parts, *(_text(text) for text in texts), "</g>"]


def _links(row: Links, per: float, name: str) -> list[str]:
    """The faces of a link once, and a use of one for each link."""
    parts = ["<defs>"]
    for face in sorted(set(row.face_on.tolist())):
        shapes = "".join(_outline(outline, per) for outline in outlines(row, face_on=face))
        parts.append(f'<path id="{name}{"f" if face else "e"}" d="{shapes}"{_pen(LOOKS["link"], 1)}/>')
    parts.append("</defs>")
    x, y = (row.places / per).T
    turns = np.round(-np.degrees(row.angles), 1)
    for left, up, turn, face in zip(x.tolist(), y.tolist(), turns.tolist(), row.face_on.tolist(), strict=True):
        place = f"translate({_n(left)} {_n(-up)})rotate({_n(turn)})"
        parts.append(f'<use href="#{name}{"f" if face else "e"}" transform="{place}"/>')
    return parts


def _outline(outline: Stroke, per: float) -> str:
    """A closed line of straights and half circles."""
    points = outline.points / per
    bulges = outline.bulges if outline.bulges is not None else np.zeros(len(points))
    d = f"M{_n(points[0][0], 2)} {_n(-points[0][1], 2)}"
    for number, bulge in enumerate(bulges):
        start, end = points[number], points[(number + 1) % len(points)]
        radius = float(np.hypot(*(end - start))) / 2
        arc = f"A{_n(radius, 2)} {_n(radius, 2)} 0 0 0 " if bulge else "L"
        d += f"{arc}{_n(end[0], 2)} {_n(-end[1], 2)}"
    return d + "Z"


def _d(points: Floats, *, closed: bool) -> str:
    pairs = "L".join(f"{_n(x)} {_n(-y)}" for x, y in points.tolist())
    return f"M{pairs}{'Z' if closed else ''}"


def _circle(circle: Circle) -> str:
    x, y = circle.at
    return f'<circle cx="{_n(x)}" cy="{_n(-y)}" r="{_n(circle.radius)}"{_pen(circle.look)}/>'


def _pen(look: Look, width: int = 0) -> str:
    dashes = _DASHES[look.linetype]
    dashed = f' stroke-dasharray="{dashes}"' if dashes else ""
    return f' stroke="{_COLOURS[look.colour]}" stroke-width="{width or (2 if look.width >= _HEAVY else 1)}"{dashed}'


def _text(text: Text) -> str:
    x, y = text.at
    values = f'x="{_n(x)}" y="{_n(-y)}" font-size="{_n(text.height * EM)}"'
    if text.anchor != "left":
        values += f' text-anchor="{"middle" if text.anchor == "centre" else "end"}"'
    if text.angle:
        values += f' transform="rotate({_n(-np.degrees(text.angle))} {_n(x)} {_n(-y)})"'
    if text.look.colour != "plain":
        values += f' style="fill:{_COLOURS[text.look.colour]}"'
    return f"<text {values}>{escape(text.text)}</text>"


def _n(value: float, decimals: int = 1) -> str:
    """Return a number as short as it can be written."""
    said = f"{value:.{decimals}f}".rstrip("0").rstrip(".")
    return "0" if said in ("-0", "") else said


OUTPUT = Output("preview", write, verify)
