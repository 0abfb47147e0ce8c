"""A small result made by hand, for tests of what leaves: nothing in it is solved."""

from __future__ import annotations

import dataclasses
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from export.outputs import Checked, Choices, File, Output
from geom.result import (
    NAN,
    PLAN,
    Case,
    Caution,
    Column,
    Cut,
    Degrees,
    Metres,
    MetresArray,
    PatternCut,
    Piece,
    Quantity,
    Result,
    StockPattern,
    StockPlan,
    Support,
    SupportCase,
    Table,
    Unit,
    Used,
    View,
    fixed,
)
from geom.setting.options import Drawing, Setting

METRE = Unit("m")


@dataclass(frozen=True, eq=False)
class SwagFigures:
    """As a kind would have them: a length, an angle kept in radians, a figure without meaning, points."""

    sag: Metres
    slope_from: Degrees
    clearance: Metres
    points: MetresArray


def piece(mark: str, **changes: object) -> Piece:
    made = Piece(
        mark=mark,
        kind="hanging",
        what="chain",
        views=(View("elevation", PLAN),),
        mass=1.25,
        figures=SwagFigures(0.25, np.pi / 6, NAN, fixed([[0, 0, 0], [1, 0, -0.25], [2, 0, 0]])),
        used=Used("weighed", weight=10.8),
        intended=Quantity("sag", 0.26, METRE),
        difference=Quantity("sag", -0.01, METRE),
        cases=(Case("as hung", "dead load only", 20.0, sag=0.25, pull_horizontal=12.5),),
    )
    return dataclasses.replace(made, **changes)  # type: ignore[arg-type]


def cut(mark: str, length: float = 1.884, stock: str = "DIN 763-8") -> Cut:
    return Cut(mark, mark.partition(".")[0], stock, length, length + 0.064, 35, 4, 2.0724)


def result(unit: str = "mm", **changes: object) -> Result:
    pull = fixed([12.5, 0, -5.4])
    hung = SupportCase("as hung", "dead load only", pull, 13.6165, NAN)
    hot = SupportCase("hottest", "dead load only", fixed([12.0, 0, -5.4]), 13.1590, 3.5)
    plan = StockPlan("DIN 763-8", 1, 1, (StockPattern(15.0, 1, (PatternCut("S1", 4),), 7.464),), order_length=15.0)
    made = Result(
        title="By hand",
        unit=unit,
        setting=Setting(unit=unit, drawing=Drawing()),
        pieces=(piece("S1"), piece("S2")),
        supports=(Support("P1", fixed([0, 0, 3]), pull, 13.6165, NAN, (hung, hot), ("S1", "S2")),),
        cuts=(cut("S1"), cut("S2", 2.0)),
        stock_plan=(plan,),
        cautions=(Caution("not for lifting", "S1", "Not for lifting.", "common practice"),),
    )
    return dataclasses.replace(made, **changes)  # type: ignore[arg-type]


def table(name: str, **columns: Iterable[float] | tuple[str | None, ...]) -> Table:
    """Return a table of lengths (m) and texts."""
    return Table(
        name,
        tuple(
            Column(key, Unit(""), key, values)
            if isinstance(values, tuple)
            else Column(key, METRE, key, np.array(values, dtype=np.float64))
            for key, values in columns.items()
        ),
    )


def writing(name: str, files: dict[str, bytes | list[bytes]], failure: Exception | None = None) -> Output:
    """Return an output that writes given files, and fails after them if a failure is given."""

    def write(_result: Result, _choices: Choices) -> Iterator[File]:
        for file, content in files.items():
            yield File(file, iter([content] if isinstance(content, bytes) else content), lambda: {"made": True})
        if failure is not None:
            raise failure

    def verify(path: Path, _result: Result, _choices: Choices) -> Checked:
        return {"bytes_read_back": path.stat().st_size}

    return Output(name, write, verify)
