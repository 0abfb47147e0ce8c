"""From the text of a design file to a typed design, every problem with its place."""
