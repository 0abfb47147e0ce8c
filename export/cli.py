"""The command `sagwright`: commands found by file, loaded when called, and every failure said in one line.

Exit code: 0 done; 2 a design or the arguments are wrong; 1 anything else.
"""

from __future__ import annotations

import ast
import io
import os
import pkgutil
import sys
import traceback
from collections.abc import Callable, Sequence
from contextlib import suppress
from importlib import import_module
from typing import Any, NoReturn

import click

from export import __version__, commands
from geom.errors import near

WRONG = 2  # a design or the arguments
FAILED = 1  # anything else


class Commands(click.Group):
    """A group whose commands are the files in `export/commands`, each with a `COMMAND`.

    The overview is read from the first lines of those files without running them.
    """

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Return the names of all commands."""
        return sorted(info.name for info in pkgutil.iter_modules(commands.__path__))

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """Load one command."""
        if cmd_name not in self.list_commands(ctx):
            return None
        command = import_module(f"{commands.__name__}.{cmd_name}").COMMAND
        return command if isinstance(command, click.Command) else None

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """Return the command that is called.

        Raises
        ------
        click.UsageError
            If there is none of this name; the nearest is named.
        """
        name, names = args[0], self.list_commands(ctx)
        if name not in names and not name.startswith("-"):
            hint = near(name, names) or f"; there are {', '.join(names)}"
            raise click.UsageError(f"there is no command {name!r}{hint}", ctx)
        return super().resolve_command(ctx, args)

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the overview of commands."""
        with formatter.section("Commands"):
            formatter.write_dl([(name, _summary(name)) for name in self.list_commands(ctx)])

    def main(self, *args: Any, **kwargs: Any) -> NoReturn:  # noqa: ANN401 - click's own signature
        """Run a command, and leave with its exit code."""
        for name in ("stdout", "stderr"):
            if getattr(sys, name) is None:  # closed by who called us: what would be said is said to nobody
                setattr(sys, name, io.StringIO())
        kwargs["standalone_mode"] = False
        sys.exit(_guarded(lambda: super(Commands, self).main(*args, **kwargs)))


def _summary(name: str) -> str:
    source = pkgutil.get_data(commands.__name__, f"{name}.py") or b""
    return (ast.get_docstring(ast.parse(source)) or "").partition("\n")[0]


def _guarded(run: Callable[[], object]) -> int:
    """Run a command and turn whatever stops it into one line and an exit code."""
    try:
        code = run()
        sys.stdout.flush()
    except click.exceptions.NoArgsIsHelpError as error:
        error.show()
        return WRONG
    except click.UsageError as error:
        command = error.ctx.command_path if error.ctx else "sagwright"
        complain(f"{command}: {' '.join(error.format_message().split())} (see {command} --help)")
        return WRONG
    except click.ClickException as error:
        complain(f"sagwright: {error.format_message()}")
        return error.exit_code
    except click.Abort:
        complain("sagwright: stopped; nothing half-written was left under its own name")
        return FAILED
    except BrokenPipeError:  # the reader of our output has enough
        with suppress(OSError):
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return FAILED
    except Exception as error:  # noqa: BLE001 - the one place where every failure becomes a line
        complain(f"sagwright: {failure(error)}")
        return FAILED
    return code if isinstance(code, int) else 0


def failure(error: Exception) -> str:
    """Return what went wrong in one line; the traceback too where `--debug` was given."""
    if "--debug" in sys.argv:
        traceback.print_exception(error)
    if isinstance(error, OSError) and error.strerror:
        place = f"{error.filename}: " if error.filename else ""
        return f"{place}{error.strerror}"
    text = " ".join(str(error).split())
    return f"a fault in the program ({type(error).__name__}: {text}); run it with --debug for where it is"


def printable(text: str) -> str:
    """Return text for a terminal: what a design file holds must not move the cursor or ring the bell."""
    return "".join(c if c.isprintable() or c == "\n" else "?" for c in text)


def tell(text: str) -> None:
    """Write a line of results to stdout."""
    sys.stdout.write(f"{printable(text)}\n")


def complain(text: str) -> None:
    """Write one line of what is wrong to stderr."""
    sys.stderr.write(f"{printable(text)}\n")


def worst(codes: Sequence[int]) -> int:
    """Return the exit code of several designs: a failure of the machine weighs more than a wrong design."""
    return next((code for code in (FAILED, WRONG) if code in codes), 0)


@click.command(cls=Commands, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(__version__, prog_name="sagwright")
def cli() -> None:
    """Hanging chain, cable and inverted-catenary arches: from a design file to cut lists, drawings and solids."""
