"""Progress on stderr: a bar for the designs and one for what is being made, where stderr is a terminal."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager

Report = Callable[[str, int, int], None]


def _silent(_what: str, _done: int, _total: int) -> None:
    """Show nothing."""


@contextmanager
def progress(designs: int, *, quiet: bool) -> Iterator[tuple[Report, Report]]:
    """Yield two reports, of designs and of what is made of one, each called with a name, how many are done, of all.

    Parameters
    ----------
    designs : int
        How many designs there are.
    quiet : bool
        Show nothing. Nothing is shown either where stderr is no terminal.
    """
    if quiet or not sys.stderr.isatty():
        yield _silent, _silent
        return
    from rich.console import Console
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TaskID, TextColumn

    columns = (TextColumn("{task.description}", markup=False), BarColumn(), MofNCompleteColumn())
    # Results go to stdout even while bars are shown: through the bars only where both are the same screen.
    both = sys.stdout.isatty()
    with Progress(*columns, console=Console(stderr=True), transient=True, redirect_stdout=both) as bars:

        def reporter(task: TaskID) -> Report:
            def report(what: str, done: int, total: int) -> None:
                bars.update(task, description=f"{what[:30]:30}", completed=done, total=total)

            return report

        yield reporter(bars.add_task("", total=designs)), reporter(bars.add_task("", total=None))
