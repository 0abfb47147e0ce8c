"""Everything that enters or leaves the program."""

__version__ = "0.1.0"
