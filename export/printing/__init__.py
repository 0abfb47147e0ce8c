"""Solids made ready for a printer: scaled, thickened, joined and cut to its bed, in that order."""

from export.printing.prepare import Part, Printed, Wishes, prepared

__all__ = ["Part", "Printed", "Wishes", "prepared"]
