"""From a typed design to the neutral result: each kind is handed all its pieces at once, supports are summed."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import cast

import numpy as np

from geom.design.reader import Design, Item, feature_name
from geom.errors import Problem
from geom.fields import Feature
from geom.registry import Fault, Kind, Layout, Outcome, Path, Refusal, kinds
from geom.result import NAN, Case, Caution, Floats, Piece, Pull, Result, Standing, Support, SupportCase, fixed
from geom.setting.options import Setting
from geom.setting.stock import Stock
from geom.shop.buying import stock_plans

AS_HUNG = "as hung"
MOST_MEMBERS = 1_000_000


@dataclass(frozen=True)
class Solved:
    """What came of solving: a result (None if any piece could not be made), and every problem met."""

    result: Result | None
    problems: tuple[Problem, ...]


def solve(design: Design) -> Solved:
    """Solve every piece of a design.

    Returns
    -------
    Solved
        The neutral result, or the problems of every piece that cannot be made, each on the line of its key.
    """
    outcomes = _outcomes(design)
    problems = [
        problem
        for item, outcome in zip(design.items, outcomes, strict=True)
        if isinstance(outcome, Refusal)
        for problem in _problems(design, item, outcome)
    ]
    pieces = tuple(outcome for outcome in outcomes if isinstance(outcome, Piece))
    problems += _clashes(design, pieces)
    if problems:
        return Solved(None, tuple(sorted(problems, key=lambda problem: problem.line)))
    cuts = tuple(cut for piece in pieces for cut in piece.cuts)
    result = Result(
        title=design.title,
        unit=design.setting.unit,
        setting=design.setting,
        pieces=pieces,
        supports=_supports(pieces),
        cuts=cuts,
        stock_plan=stock_plans(cuts, _stocks(pieces), design.setting),
        cautions=(*_cautions(pieces), *_unused(design)),
    )
    return Solved(result, ())


def _outcomes(design: Design) -> list[Outcome]:
    """Return one outcome for each item: a kind is called once, with its own pieces and those laid out."""
    found = kinds()
    outcomes: dict[int, Outcome] = {}
    waiting: dict[str, list[tuple[int, Sequence[Feature]]]] = defaultdict(list)
    for number, item in enumerate(design.items):
        entry = found[item.kind]
        parts = [item.feature] if isinstance(entry, Kind) else entry.expand(item.feature, design.setting)
        if isinstance(parts, Refusal):
            outcomes[number] = parts
        else:
            waiting[entry.name if isinstance(entry, Kind) else entry.of].append((number, parts))
    for name, batches in waiting.items():
        kind = cast(Kind, found[name])
        solved = iter(kind.solve([part for _, parts in batches for part in parts], design.setting))
        for number, parts in batches:
            item = design.items[number]
            outcomes[number] = _gathered(item, found[item.kind], [next(solved) for _ in parts], design.setting)
    return [outcomes[number] for number in range(len(design.items))]


def _gathered(item: Item, entry: Kind | Layout, parts: Sequence[Outcome], setting: Setting) -> Outcome:
    if isinstance(entry, Kind):
        return parts[0]
    faults = [
        Fault(entry.place(item.feature, number, fault.key), f"{entry.part} {number + 1}: {fault.text}")
        for number, part in enumerate(parts)
        if isinstance(part, Refusal)
        for fault in part.faults
    ]
    if faults:
        return Refusal(tuple(faults))
    return entry.gather(item.feature, [part for part in parts if isinstance(part, Piece)], setting)


def _problems(design: Design, item: Item, refusal: Refusal) -> Iterable[Problem]:
    for fault in refusal.faults:
        path: Path = (*item.path, *fault.key)
        yield Problem(design.positions.line(path), feature_name(item), _key(fault.key), fault.text)


def _key(path: Path) -> str:
    text = ""
    for step in path:
        text += f"[{step + 1}]" if isinstance(step, int) else (f".{step}" if text else step)
    return text


def _clashes(design: Design, pieces: Sequence[Piece]) -> list[Problem]:
    """Marks of parts are made (`R1.3`); one that another piece was given by hand is refused."""
    seen: dict[str, str] = {}
    problems = []
    for piece in pieces:
        for made in {piece.mark, *(part.mark for part in piece.parts), *(cut.mark for cut in piece.cuts)}:
            other = seen.setdefault(made.casefold(), piece.mark)
            if other.casefold() != piece.mark.casefold():  # two pieces of one mark are the reader's to report
                item = next(i for i in design.items if i.feature.mark == piece.mark)
                text = f'"{made}" would be the mark of two things, here and in "{other}"; give another mark'
                problems.append(Problem(design.positions.line((*item.path, "mark")), feature_name(item), "mark", text))
                break
    return problems


def _cautions(pieces: Sequence[Piece]) -> tuple[Caution, ...]:
    return tuple(dict.fromkeys(caution for piece in pieces for caution in piece.cautions))


def _unused(design: Design) -> tuple[Caution, ...]:
    """An entry that nothing refers to is most often a line forgotten, such as the fittings of a member."""
    if not design.unused:
        return ()
    text = f"{', '.join(design.unused)}: defined, and nothing in the design uses it; name it where it belongs."
    return (Caution("not used", "", text, "the design itself"),)


def _supports(pieces: Sequence[Piece]) -> tuple[Support, ...]:
    """Sum the pulls on each support over the pieces that hang on it, copies counted once."""
    pulls: dict[str, list[tuple[Piece, Pull]]] = defaultdict(list)
    for piece in pieces:
        for pull in piece.pulls:
            pulls[pull.support].append((piece, pull))
    # once for each piece, not for each support: a curtain of 2,000 strands has as many supports as parts with cases
    cases = {piece.mark: {case.case: case.standing for case in _cases(piece)} for piece in pieces}
    return tuple(_support(mark, entries, cases) for mark, entries in pulls.items())


def _support(mark: str, entries: Sequence[tuple[Piece, Pull]], cases: Mapping[str, Mapping[str, Standing]]) -> Support:
    standings = {case: standing for piece, _ in entries for case, standing in cases[piece.mark].items()}
    standings.setdefault(AS_HUNG, "dead load only")
    heights = [pull.height for _, pull in entries if pull.height is not None]
    height = heights[0] if heights else None
    by_case = tuple(
        _case(case, standing, _together(case, standing, [pull for _, pull in entries]), height)
        for case, standing in standings.items()
        if case == AS_HUNG or any(case in pull.vectors for _, pull in entries)
    )
    hung = next(case for case in by_case if case.case == AS_HUNG)
    return Support(
        mark=mark,
        at=entries[0][1].at,
        pull=hung.pull,
        magnitude=hung.magnitude,
        moment=hung.moment,
        by_case=by_case,
        pieces=tuple(dict.fromkeys(piece.mark for piece, _ in entries)),
    )


def _cases(piece: Piece) -> Iterable[Case]:
    """Cases of a piece, or those of its parts."""
    yield from piece.cases or ()
    for part in piece.parts:
        yield from part.cases or ()


def _together(case: str, standing: Standing, pulls: Sequence[Pull]) -> Floats:
    """Sum pulls in one case, as hung where a piece does not have it; of a misuse the worst of one member at a time."""
    if standing != "misuse":
        return _sum(pull.vectors.get(case, pull.vectors[AS_HUNG]) for pull in pulls)
    hung = _sum(pull.vectors[AS_HUNG] for pull in pulls)
    each = [hung + pull.vectors[case] - pull.vectors[AS_HUNG] for pull in pulls if case in pull.vectors]
    return max(each, key=lambda vector: float(np.linalg.norm(vector)))


def _sum(vectors: Iterable[Floats]) -> Floats:
    return np.asarray(np.sum(list(vectors), axis=0))


def _case(case: str, standing: Standing, pull: Floats, height: float | None) -> SupportCase:
    """Moment at the foot: the level part of the pull times the height over the foot.

    Pulls that balance leave rounding, some 1e-16 of each: what is under 1e-12 of the whole is nought.
    """
    pull = np.where(np.abs(pull) < 1e-12 * np.abs(pull).max(), 0.0, pull)
    moment = NAN if height is None else float(np.hypot(pull[0], pull[1])) * height
    return SupportCase(case, standing, fixed(pull, 3), float(np.linalg.norm(pull)), moment)


def _stocks(pieces: Sequence[Piece]) -> dict[str, Stock]:
    return {stock.name: stock for piece in pieces for stock in piece.stocks}
