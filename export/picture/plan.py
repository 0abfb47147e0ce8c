"""The plan under the elevations: all pieces in place from above, y up, held points as crosses, marks beside."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import numpy as np

from export.picture import labels, symbols
from export.picture.drawn import Drawn, enter, ground_of, printed
from export.picture.labels import Wanted
from export.picture.looks import LOOKS
from export.picture.panels import Marks, Print, Subject, with_title
from export.picture.sizes import Sizes
from export.picture.values import SITE_PLAN, Box, Floats, Group, Panel, Text, around
from export.picture.views import Drawing, Seen, is_plan, seen_on_plan
from geom.result import PLAN, Piece, Result

_OVER = 2.2  # room for a mark over a plan that is no more than a line, in heights of the text
_SMALLEST_CROSS = 0.25  # of its size, for rows of held points close together
_SAME = 1e-6  # m: supports nearer than this on plan are one cross


@dataclass(frozen=True)
class Site:
    """The plan to be printed: what each piece shows from above, and where it is held."""

    pieces: tuple[Piece, ...]
    seen: tuple[Seen, ...]
    held: tuple[Mapping[str, Floats], ...]  # of each piece: the support's mark -> (2,) m, each cross of the plan once

    @property
    def box(self) -> Box:
        """The upright box round all pieces, m."""
        return around(*(one.box for one in self.seen))


def site(result: Result, drawing: Drawing) -> Site:
    """Return the plan of all pieces ready to be printed at any scale."""
    shown = tuple(seen_on_plan(piece, PLAN, drawing) for piece in result.pieces)
    return Site(result.pieces, shown, tuple(_held(result.pieces)))


def in_line(subject: Subject, site: Site) -> tuple[float, float] | None:
    """Return where an elevation and the plan have the left end of the only piece, m, where both show it alike.

    None where its length is not seen on plan as in the elevation, as where it turns corners or lies across.
    """
    along = subject.view.frame.along
    if len(site.pieces) != 1 or is_plan(subject.view.frame) or along[0] < 1.0 - _SAME:
        return None
    (low, high), (left, right) = (_reach(seen_) for seen_ in (subject.seen, site.seen[0]))
    return (low, left) if abs((high - low) - (right - left)) < _SAME else None


def _reach(shown: Seen) -> tuple[float, float]:
    x = np.concatenate([np.zeros(0), *(stroke.points[:, 0] for stroke in shown.strokes)])
    return (float(x.min()), float(x.max())) if len(x) else (np.nan, np.nan)


def wanted(result: Result) -> bool:
    """Return whether a plan tells more than the views do: not where the only piece is drawn in plan already."""
    return not (len(result.pieces) == 1 and any(is_plan(view.frame) for view in result.pieces[0].views))


def plan(site: Site, print_: Print, *, marks: Marks = "free") -> Panel:
    """Return the plan as it is printed; marks as for an elevation."""
    per, sizes = print_.per, print_.sizes
    core = printed(site.box, per)
    drawn = [Drawn() for _ in site.pieces]
    share = float(np.clip(_apart(site) / per / sizes.symbol, _SMALLEST_CROSS, 1.0))
    for mine, held in zip(drawn, site.held, strict=True):
        for at in held.values():
            mine.paths += symbols.held_point(at / per, sizes, share=share)
    core = around(core, *(mine.box for mine in drawn))
    wanted_marks = [*_names(site, per), *_supports(site, print_)]
    over = (core[0], core[1], core[2], core[3] + _OVER * sizes.note)
    taken = around(over, *labels.reserved(wanted_marks, sizes))
    loose = Drawn()
    if marks != "none":
        ground = ground_of(taken, sizes, free=marks == "free")
        for mine, shown in zip(drawn, site.seen, strict=True):
            enter(ground, shown, mine, per)
        placed = labels.place(wanted_marks, ground, sizes)
        loose = Drawn(placed.paths, placed.circles, placed.texts, dropped=placed.dropped)
    groups = [
        Group(piece.mark, shown.strokes, shown.links, tuple(mine.paths))
        for piece, shown, mine in zip(site.pieces, site.seen, drawn, strict=True)
    ]
    groups.append(Group("", paths=tuple(loose.paths), circles=tuple(loose.circles), texts=tuple(loose.texts)))
    panel = Panel(SITE_PLAN, "plan", per, tuple(groups), core=core, box=around(taken, loose.box), dropped=loose.dropped)
    return with_title(panel, _title(sizes), sizes)


def _held(pieces: Iterable[Piece]) -> Iterable[dict[str, Floats]]:
    """Of each piece the supports it is the first to hang on, by their marks."""
    crossed: set[bytes] = set()
    for piece in pieces:
        mine = {}
        for pull in piece.pulls:
            place = np.round(pull.at[:2] / _SAME).astype(np.int64).tobytes()
            if place not in crossed:
                crossed.add(place)
                mine[pull.support] = pull.at[:2]
        yield mine


def _apart(site: Site) -> float:
    """How far held points are from the next one, as most are, m."""
    points = np.array([at for held in site.held for at in held.values()])
    if len(points) < 2:
        return np.inf
    from scipy.spatial import cKDTree

    distances = np.asarray(cKDTree(points).query(points, k=2)[0])
    return float(np.median(distances[:, 1]))


def _names(site: Site, per: float) -> Iterable[Wanted]:
    """The mark of each piece, beside the middle of its longest line."""
    for piece, shown in zip(site.pieces, site.seen, strict=True):
        if not shown.strokes:
            continue
        points = max(
            (stroke.points for stroke in shown.strokes), key=lambda points: float(np.ptp(points, axis=0).sum())
        )
        number = (len(points) - 1) // 2
        step = points[number + 1] - points[number]
        yield Wanted(piece.mark, (points[number] + step / 2) / per, "member", along=step / per)


def _supports(site: Site, print_: Print) -> Iterable[Wanted]:
    """Marks of the supports that have a name of their own."""
    named = {pull.support for piece in site.pieces for pull in piece.pulls if pull.named}
    for held in site.held:
        for mark, at in held.items():
            if mark in named:
                yield Wanted(mark, at / print_.per, "support", clear=0.45 * print_.sizes.symbol, first=(0, 1))


def _title(sizes: Sizes) -> list[Text]:
    title = Text(LOOKS["mark"], "Plan", (0.0, -sizes.title), sizes.title)
    beside = Text(
        LOOKS["note"], "all pieces in place, y up", (title.width + 0.6 * sizes.title, -sizes.title), sizes.note
    )
    return [title, beside]
