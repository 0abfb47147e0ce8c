"""Where the command `sagwright` starts (`python -m export` does the same)."""

import sys

from export.cli import cli


def main() -> None:
    """Run the command line."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):  # a terminal that lacks a letter shows a mark in its place
            stream.reconfigure(errors="replace")
    cli(prog_name="sagwright")


if __name__ == "__main__":
    main()
