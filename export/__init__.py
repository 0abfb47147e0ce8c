"""Everything that enters or leaves the program."""
