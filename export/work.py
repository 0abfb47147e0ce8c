"""One design file taken through reading and solving, every problem of it said in one line each."""

from __future__ import annotations

import dataclasses
import hashlib
from dataclasses import dataclass
from pathlib import Path

from export.read.designs import NotText, text_of
from geom import units
from geom.design.reader import Design, read
from geom.errors import Problem
from geom.fields import FINEST
from geom.result import Result
from geom.solve import solve


@dataclass(frozen=True)
class Worked:
    """What came of a design file.

    Attributes
    ----------
    path : Path
        The file.
    result : Result or None
        The solved design; None if anything in it is wrong.
    made_from : str
        Hash of the file's bytes.
    within : float or None
        Greatest distance of a drawn curve from the true one, m, where the command line gave one.
    problems : tuple of str
        One line for each thing wrong, in order of line.
    """

    path: Path
    result: Result | None
    made_from: str
    within: float | None
    problems: tuple[str, ...]


def work(path: Path, within: str | None = None) -> Worked:
    """Read and solve a design file.

    What could be read is solved even where something else could not, so that the problems of both kinds show at once.

    Parameters
    ----------
    path : Path
        The file.
    within : str, optional
        A length to take in place of the design's `drawing.within`; a bare number is in the design's unit.

    Raises
    ------
    OSError
        If the file cannot be read.
    """
    content = path.read_bytes()
    digest = hashlib.sha256(content).hexdigest()
    try:
        reading = read(text_of(content), path.stem)
    except NotText as error:
        return Worked(path, None, digest, None, _lines(path, [Problem(error.line, "", "", str(error))]))
    problems = list(reading.problems)
    result, distance = None, None
    if reading.design is not None:
        try:
            distance = FINEST.check(units.length(within, reading.design.setting.unit), within) if within else None
        except ValueError as error:  # a bare length in the design's own unit
            problems.append(Problem(1, "", "--within", str(error)))
        solved = solve(_within(reading.design, distance))
        problems += solved.problems
        result = None if problems else solved.result
    return Worked(path, result, digest, distance, _lines(path, problems))


def _within(design: Design, distance: float | None) -> Design:
    """Return the design with another `drawing.within`, so that its figures' polylines keep to it too."""
    if distance is None:
        return design
    drawing = design.setting.drawing.model_copy(update={"within": distance})
    return dataclasses.replace(design, setting=dataclasses.replace(design.setting, drawing=drawing))


def _lines(path: Path, problems: list[Problem]) -> tuple[str, ...]:
    """Problems in order of line, one that both reader and solver met said once."""
    ordered = sorted(problems, key=lambda problem: problem.line)
    return tuple(dict.fromkeys(problem.render(path.name) for problem in ordered))
