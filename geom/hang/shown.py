"""What is said beside hangings in their elevation: levels of supports, fittings, and of a run the facts of each bay."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Iterator, Sequence
from dataclasses import replace
from itertools import groupby, pairwise
from math import isfinite

from geom.hang.asked import Asked
from geom.result import Dimension, Label, Piece, Said, View, fixed
from geom.setting.fittings import End
from geom.setting.supports import Support

_SAME = 1e-6  # m: levels and spans nearer than this are one on any drawing
_MOST_SPANS = 12  # bays that are dimensioned one by one: past it equal ones that follow one another are put together
_ROUNDED = 0.0005  # m: sags that differ by less are one on a drawing
_FITTED = "takes {}"


def fittings(member: Asked) -> tuple[Label, ...]:
    """Return what stands at each end that has fittings: names, the length they take, the rope used up in making it."""
    ends = ((member.start, member.fit_from), (member.end, member.fit_to))
    return tuple(
        Label(fixed(support.at, 3), " + ".join(fit.names) or "fitting", "fitting", below=(_takes(fit),))
        for support, fit in ends
        if fit.takes or fit.grip
    )


def _takes(fit: End) -> Said:
    return Said(f"{_FITTED}, grip {{}}", (fit.takes, fit.grip)) if fit.grip else Said(_FITTED, (fit.takes,))


def levels(start: Support, end: Support) -> tuple[Dimension, ...]:
    """Return the levels of the two supports of a hanging, once where they are one."""
    p, q = fixed(start.at, 3), fixed(end.at, 3)
    if abs(p[2] - q[2]) < _SAME:
        return (Dimension("level", q, q, float(q[2]), "supports", "above"),)
    return tuple(Dimension("level", at, at, float(at[2]), "", "above") for at in (p, q))


def with_bays(view: View, bays: Sequence[Piece], supports: Sequence[Label]) -> View:
    """Return the unfolded elevation of a run with what the fitter needs at each bay, and the levels of the supports.

    Sags and lowest points are said under each bay; the sag is dimensioned in the first and the deepest of them, and
    the lowest point of all. `supports` are the marks of the run's supports in order.
    """
    held = [label for label in view.labels or () if label.role == "support"]
    if len(supports) == len(held):  # a support that is met twice has one mark
        held = [replace(label, text=support.text) for label, support in zip(held, supports, strict=True)]
    named = {pull.support for bay in bays for pull in bay.pulls if pull.named}
    levels_ = tuple(_run_levels(held, named))
    if len(held) > _MOST_SPANS:  # so many that only names are worth their room: the others follow from the bays
        held = [label if label.text in named else replace(label, text="") for label in held]
    middles = [label for label in view.labels or () if label.role == "part"]
    shown = (replace(label, role="bay", below=tuple(bay_facts(bay))) for label, bay in zip(middles, bays, strict=True))
    loads = [label for label in view.labels or () if label.role == "load"]
    return replace(view, labels=(*held, *loads, *shown), dimensions=(*_sizes(view.dimensions), *levels_))


def bay_facts(bay: Piece) -> Iterator[Said]:
    """Yield the lines under a bay's mark: links or cut length, fittings at its ends, sag, lowest point."""
    cuts = [
        Said(f"{cut.links} links") if cut.links is not None else Said("cut {}", (cut.cut_length,)) for cut in bay.cuts
    ]
    cuts = cuts or [Said("along {}", (bay.figures.pin_to_pin,))]  # of a member over saddles, which is cut as one
    yield Said(" + ".join(cut.text for cut in cuts), tuple(length for cut in cuts for length in cut.lengths))
    takes = [_taken(bay, end) for end in (0, 1)]
    if any(takes):
        yield Said("takes {} / {}", (takes[0], takes[1]))
    for name, value in (("sag", bay.figures.sag), ("lowest", bay.figures.lowest)):
        if isfinite(value):
            yield Said(f"{name} {{}}", (value,))


def _taken(bay: Piece, end: int) -> float:
    """Length the fittings at one end of a bay take, m, as its label there says."""
    at = bay.pulls[end].at
    lengths = [label.below[0].lengths[0] for label in bay.labels if label.role == "fitting" and (label.at == at).all()]
    return lengths[0] if lengths else 0.0


def _sizes(found: Sequence[Dimension]) -> Iterator[Dimension]:
    """Bays and total, the sag of the first and the deepest bay, the lowest point of all, and what else was measured."""
    spans = [replace(one, says="", tells=number == 0) for number, one in enumerate(_said(found, "span"))]
    equal = len(spans) > _MOST_SPANS and max(abs(one.value - spans[0].value) for one in spans) < _SAME
    yield from _grouped(spans) if len(spans) > _MOST_SPANS and not equal else spans[: 1 if equal else None]
    sags = _said(found, "sag under chord")
    if sags:
        yield replace(sags[0], says="sag", tells=True)
        deepest = max(sags, key=lambda one: one.value)
        if deepest.value - sags[0].value > _ROUNDED:
            yield replace(deepest, says="sag")
    lowest = _said(found, "lowest point")
    if lowest:
        yield replace(min(lowest, key=lambda one: one.value), tells=True)
    for one in found:
        if one.says not in ("span", "sag under chord", "lowest point", "level difference"):
            total = one.kind == "horizontal" and not one.says
            yield replace(one, tells=total, says=f"{len(spans)} equal bays" if total and equal else one.says)


def _said(found: Iterable[Dimension], says: str) -> list[Dimension]:
    return [one for one in found if one.says == says]


def _grouped(spans: Sequence[Dimension]) -> Iterator[Dimension]:
    """Spans of many bays: the first of equal ones that follow one another, and all of them together."""
    for _, group in groupby(spans, key=lambda one: round(one.value / _SAME)):
        first, *rest = group
        yield first
        if rest:
            whole = sum(one.value for one in (first, *rest))
            says = f"{len(rest) + 1} equal bays"
            yield replace(first, q=rest[-1].q, value=whole, says=says, tells=False)


def _run_levels(supports: Sequence[Label], named: Collection[str]) -> Iterator[Dimension]:
    """The level of the supports, once for those that follow one another at one height."""
    breaks = [n for n in range(1, len(supports)) if abs(supports[n].at[2] - supports[n - 1].at[2]) >= _SAME]
    for first, after in pairwise([0, *breaks, len(supports)]):
        group = supports[first:after]
        at = group[0].at
        yield Dimension("level", at, at, float(at[2]), _whose(group, first, named, whole=not breaks), "above")


def _whose(group: Sequence[Label], first: int, named: Collection[str], *, whole: bool) -> str:
    """Which supports have a level: `all supports`, `P1 to P4`; those without a name are counted along the run."""
    if whole:
        return "all supports"
    if all(label.text in named for label in group):
        return group[0].text + (f" to {group[-1].text}" if len(group) > 1 else "")
    return f"support {first + 1}" if len(group) == 1 else f"supports {first + 1} to {first + len(group)}"
