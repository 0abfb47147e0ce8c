"""List the known chains, ropes and materials.

TEXT leaves only those whose name or description has every word of it.
"""

from __future__ import annotations

import click

from export.cli import WRONG, complain, tell


@click.command("stock", help=__doc__)
@click.argument("text", nargs=-1, metavar="[TEXT]")
@click.option("--debug", is_flag=True, help="Show where in the program a failure came from.")
def stock(text: tuple[str, ...], debug: bool) -> int:  # noqa: D103 - the help is the module's
    from export.stocklist import materials, stocks
    from geom.setting.materials import known_materials
    from geom.setting.stock import known
    from geom.setting.stock.names import suggestion

    words = " ".join(text)
    found, made_of = known(words), known_materials(words)
    for line in (*stocks(found), *materials(made_of)):
        tell(line)
    if not found and not made_of:
        complain(f"there is no stock or material {words!r}{suggestion(words)}")
        return WRONG
    return 0


COMMAND = stock
