"""Arguments and options that several commands share, and the round over the designs they are about."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any, TypeVar

import click

from export.cli import FAILED, WRONG, complain, failure, worst
from export.progress import Report, progress

if TYPE_CHECKING:
    from export.work import Worked

F = TypeVar("F", bound=Callable[..., Any])

_SHARED = (
    click.argument("designs", nargs=-1, required=True, type=click.Path(path_type=Path), metavar="DESIGN..."),
    click.option(
        "--within", metavar="LENGTH", help="Greatest distance of a drawn curve from the true one, like '0.2 mm'."
    ),
    click.option("--quiet", is_flag=True, help="Say nothing but what is wrong."),
    click.option("--debug", is_flag=True, help="Show where in the program a failure came from."),
)


def shared(command: F) -> F:
    """Give a command the arguments and options of all commands on designs."""
    for decorate in reversed(_SHARED):
        command = decorate(command)
    return command


def round_of(
    designs: Sequence[Path],
    act: Callable[[Worked, Report], None],
    *,
    within: str | None,
    quiet: bool,
    unique: bool = False,
) -> int:
    """Read and solve each design and act on those that are right; say what is wrong with the others.

    Parameters
    ----------
    designs : sequence of Path
        Files, and folders of files, as given.
    act : callable
        Called with what came of a design, and with a report of progress.
    within : str or None
        The greatest distance of a drawn curve from the true one, as given.
    quiet : bool
        Show no progress.
    unique : bool
        Whether two designs of one name are refused before anything is done.

    Returns
    -------
    int
        The exit code.
    """
    from export.read.designs import find, same_names

    _check_distance(within)
    found = find(designs)
    clashes = same_names(found.paths) if unique else []
    for line in (*found.problems, *clashes):
        complain(line)
    if clashes:
        return WRONG
    codes = [WRONG] if found.problems else []
    with progress(len(found.paths), quiet=quiet) as (of_designs, of_one):
        for number, path in enumerate(found.paths):
            of_designs(path.stem, number, len(found.paths))
            codes.append(_one(path, within, lambda worked: act(worked, of_one)))
    return worst(codes)


def _one(path: Path, within: str | None, act: Callable[[Worked], None]) -> int:
    """Take one design through; whatever stops it, the others go on."""
    from export.outputs import CheckFailed
    from export.save import NamesClash
    from export.staging import CannotSave
    from export.work import work

    try:
        worked = work(path, within)
        if worked.result is not None:
            act(worked)
    except NamesClash as error:
        complain(f"{path.name}:1: {error}")
        return WRONG
    except (CannotSave, CheckFailed) as error:
        complain(f"{path.name}: {error}")
        return FAILED
    except BrokenPipeError:  # not this design's: nobody reads on
        raise
    except Exception as error:  # noqa: BLE001 - each design stands alone
        complain(f"{path.name}: {failure(error)}")
        return FAILED
    for line in worked.problems:
        complain(line)
    return WRONG if worked.problems else 0


def _check_distance(text: str | None) -> None:
    """Make sure that `--within` is a length that curves can be drawn within (a bare one in metres, the largest unit).

    Raises
    ------
    click.BadParameter
        If it is not.
    """
    from geom.fields import FINEST
    from geom.units import length

    try:
        if text is not None:
            FINEST.check(length(text, "m"), text)
    except ValueError as error:
        raise click.BadParameter(str(error), param_hint="--within") from error
