"""Solve designs and write drawings, solids, tables and figures.

Each design gets a folder of its own, DIR/NAME/, and every file in it begins with that name.
"""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from export.cli import complain, tell
from export.options import round_of, shared
from export.progress import Report

if TYPE_CHECKING:
    from export.outputs import Output
    from export.save import Saved
    from export.work import Worked

_FIGURES = "figures"  # always written, by save itself


@click.command("export", help=__doc__)
@shared
@click.option(
    "--into",
    required=True,
    type=click.Path(file_okay=False),
    callback=lambda _ctx, _param, text: _folder(text),
    metavar="DIR",
    help="Where to write.",
)
@click.option(
    "--only",
    multiple=True,
    metavar="WORD,...",
    help="Write only these files, by the word in their names (cuts,drawing), and the figures.",
)
@click.option("--verify", is_flag=True, help="Read every written file back in full.")
@click.option("--real-links", is_flag=True, help="Make solids of real links, however many there are.")
def export(  # noqa: D103, PLR0913, PLR0917 - click hands over each option as a parameter; the help is the module's
    designs: tuple[Path, ...],
    into: Path,
    only: tuple[str, ...],
    within: str | None,
    verify: bool,
    real_links: bool,
    quiet: bool,
    debug: bool,  # looked up where failures are said
) -> int:
    from export.outputs import Choices, with_cautions
    from export.save import Order, save

    made, partial = _asked_for(only)

    def act(worked: Worked, report: Report) -> None:
        assert worked.result is not None
        choices = Choices(worked.within, real_links, report)
        result = with_cautions(worked.result, made, choices)
        order = Order(
            result,
            worked.path.stem,
            worked.made_from,
            made,
            partial=partial,
            choices=choices,
            verify=verify,
        )
        _say(replace(worked, result=result), save(order, into), quiet=quiet, verified=verify)

    return round_of(designs, act, within=within, quiet=quiet, unique=True)


def _folder(text: str) -> Path:
    """Return the folder to write into.

    Raises
    ------
    click.BadParameter
        If the text is empty, as a variable that was never set leaves it: that is not the folder one stands in.
    """
    if not text.strip():
        raise click.BadParameter("it is empty; give a folder, or . for this one")
    return Path(text)


def _asked_for(only: tuple[str, ...]) -> tuple[list[Output], bool]:
    """Return the outputs to be made, and whether others are left out.

    Raises
    ------
    click.BadParameter
        If a word names no output, or there is none.
    """
    from export.outputs import outputs
    from geom.errors import near

    known = outputs()
    words = [word.strip() for part in only for word in part.split(",") if word.strip()]
    for word in words:
        if word not in known and word != _FIGURES:
            names = sorted((*known, _FIGURES))
            hint = near(word, names) or f"; known are {', '.join(names)}"
            raise click.BadParameter(f"{word!r} is no file of ours{hint}", param_hint="--only")
    if only and not words:
        raise click.BadParameter("it names no file; leave it out for all of them", param_hint="--only")
    made = [output for name, output in known.items() if not only or name in words]
    return made, len(made) < len(known)


def _say(worked: Worked, saved: Saved, *, quiet: bool, verified: bool) -> None:
    from export.summary import cautions

    if saved.disagreement:
        complain(
            f"{saved.folder}: was left unfinished by an earlier run or changed since ({saved.disagreement}); "
            "it was written anew"
        )
    if quiet or worked.result is None:
        return
    tell(f"{worked.path.name} -> {saved.folder}")
    for word, names in (("", saved.written), ("left as it was: ", saved.kept), ("removed: ", saved.removed)):
        for name in names:
            tell(f"  {word}{name}")
    if verified:
        count = len(saved.written)
        tell(f"  verified: {count} {'file' if count == 1 else 'files'} read back in full")
    for line in cautions(worked.result.cautions):
        tell(f"  {line}")


COMMAND = export
