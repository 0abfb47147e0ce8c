"""Loads as they are shown: marks on the drawing with their hangers' reach, and a table of clamp marks."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from geom.hang.carried import Load
from geom.hang.figures import HangingFigures
from geom.result import Column, Label, Table, Unit

_NONE, _METRES, _NEWTONS = Unit(""), Unit("m"), Unit("N")


def load_labels(figures: HangingFigures, loads: Sequence[Load]) -> tuple[Label, ...]:
    """Return the marks of a member's loads where they hang."""
    return tuple(
        Label(shown.at, shown.mark, "load", load.hanger) for shown, load in zip(figures.loads, loads, strict=True)
    )


def load_tables(mark: str, figures: HangingFigures) -> tuple[Table, ...]:
    """Return the table of a member's clamp marks; none where it carries nothing."""
    if not figures.loads:
        return ()
    loads = sorted(figures.loads, key=lambda load: load.mark_)
    at = np.array([load.at for load in loads])
    return (
        Table(
            "loads",
            (
                Column("load", _NONE, "load", tuple(load.mark for load in loads)),
                Column("mark", _METRES, "mark along the made member", np.array([load.mark_ for load in loads])),
                *(Column(f"at_{axis}", _METRES, f"at {axis}", at[:, k]) for k, axis in enumerate("xyz")),
                Column("underside", _METRES, "underside", np.array([load.underside for load in loads])),
                Column("force", _NEWTONS, "force", np.array([load.force for load in loads])),
            ),
            mark,
        ),
    )
