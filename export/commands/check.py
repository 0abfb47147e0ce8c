"""Solve designs and print what comes of them, with cautions; write nothing."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from export.cli import tell
from export.options import round_of, shared
from export.progress import Report

if TYPE_CHECKING:
    from export.work import Worked


@click.command("check", help=__doc__)
@shared
def check(  # noqa: D103 - the help is the module's
    designs: tuple[Path, ...],
    within: str | None,
    quiet: bool,
    debug: bool,  # looked up where failures are said
) -> int:
    from export.summary import summary

    def act(worked: Worked, _report: Report) -> None:
        if worked.result is not None and not quiet:
            for line in summary(worked.result):
                tell(line)

    return round_of(designs, act, within=within, quiet=quiet)


COMMAND = check
