"""List the tables of a design file and their keys.

TABLE is one of them, like hanging or shop: its keys with what each means, which are needed, and what is taken where one
is left out.
"""

from __future__ import annotations

import click

from export.cli import WRONG, complain, tell


@click.command("keys", help=__doc__)
@click.argument("table", required=False)
@click.option("--debug", is_flag=True, help="Show where in the program a failure came from.")
def keys(table: str | None, debug: bool) -> int:  # noqa: D103 - the help is the module's
    from export.keylist import of_table, overview, tables
    from geom.errors import near

    known = tables()
    if table is None:
        for line in overview(known):
            tell(line)
        return 0
    name = table.strip("[]")
    if name not in known:
        listed = ", ".join(known)
        complain(f"there is no table {table!r} in a design{near(name, known) or f'; known are {listed}'}")
        return WRONG
    for line in of_table(name, known[name]):
        tell(line)
    return 0


COMMAND = keys
