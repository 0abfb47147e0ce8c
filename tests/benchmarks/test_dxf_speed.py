"""How fast drawings are written, beside the DXF library alone writing the same entities in the same run."""

import gc
import io
import time
from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from ezdxf.document import Drawing as Document
from ezdxf.filemanagement import new

from export.files import drawing, model
from export.outputs import Choices, outputs
from geom.result import Result
from tests.designs import many, solved

pytestmark = pytest.mark.long

_SLOWER = 1.5  # times the library alone
_ROUNDS = 5

LONG_CHAINS = "\n".join(
    ['unit = "mm"']
    + [
        f'[[hanging]]\nmark = "C{n}"\nfrom = [0, {n}, 9000]\nto = [20000, {n}, 9000]\nstock = "DIN 763-4"\nsag = 4000'
        for n in range(8)
    ]
)


each_design = pytest.mark.parametrize("text", [LONG_CHAINS, many(60)], ids=["long chains", "many pieces"])


def best(*works: Callable[[], object]) -> list[float]:
    """The least processor time of each, s; they take turns, so that a busy machine is busy for all of them.

    What earlier tests left alive is frozen: the collector would walk it again and again while we measure.
    """
    times = [[float("inf")] for _ in works]
    gc.collect()
    gc.freeze()
    for _ in range(_ROUNDS):
        for work, taken in zip(works, times, strict=True):
            start = time.process_time()
            work()
            taken.append(time.process_time() - start)
    gc.unfreeze()
    return [min(taken) for taken in times]


def recipe(doc: Document) -> list[tuple[str, list[tuple[str, dict[str, Any], np.ndarray | None]]]]:
    """Every entity of a document as the library is asked for it: type, attributes, points of a polyline."""
    blocks = []
    for block in doc.blocks:
        entities = []
        for entity in block:
            values = {k: v for k, v in entity.dxfattribs().items() if k not in ("handle", "owner")}
            points: Any = None
            if entity.dxftype() == "LWPOLYLINE":
                points = [tuple(point) for point in entity.lwpoints]  # type: ignore[attr-defined]
            elif entity.dxftype() == "POLYLINE":
                points = [tuple(point) for point in entity.points()]  # type: ignore[attr-defined]
            entities.append((entity.dxftype(), values, points))
        blocks.append((block.name, entities))
    return blocks


def alone(version: str, blocks: list[tuple[str, list[tuple[str, dict[str, Any], Any]]]]) -> None:
    """Write the same entities with the library alone."""
    doc = new(version)
    for name, entities in blocks:
        if name.casefold().startswith("*paper"):
            continue
        layout: Any = doc.modelspace() if name.casefold().startswith("*model") else doc.blocks.new(name)
        for kind, values, points in entities:
            if kind == "LWPOLYLINE":
                layout.add_lwpolyline(points, format="xyseb", dxfattribs=values)
            elif kind == "POLYLINE":
                layout.add_polyline3d(points, dxfattribs={"layer": values["layer"]})
            elif kind == "INSERT":
                layout.add_blockref(values["name"], values["insert"], values)
            else:
                layout.new_entity(kind, values)
    doc.write(io.StringIO())


def write(result: Result, output: str) -> None:
    for file in outputs()[output].write(result, Choices()):
        for _ in file.chunks:
            pass


@each_design
def test_a_picture_is_written_at_most_half_slower_than_by_the_library_alone(text: str) -> None:
    made = drawing._Made(solved(text), Choices())
    blocks = recipe(drawing.document(made.picture, made.fmt))
    bare, ours = best(lambda: alone("R2010", blocks), lambda: list(made.chunks()))
    assert ours <= _SLOWER * bare, f"{ours:.3f} s against {bare:.3f} s"


def test_laying_out_a_drawing_of_long_chains_adds_little_to_writing_it() -> None:
    result = solved(LONG_CHAINS)
    made = drawing._Made(result, Choices())
    blocks = recipe(drawing.document(made.picture, made.fmt))
    bare, ours = best(lambda: alone("R2010", blocks), lambda: write(result, "drawing"))
    assert ours <= _SLOWER * bare, f"{ours:.3f} s against {bare:.3f} s"


@each_design
def test_a_model_is_written_at_most_half_slower_than_by_the_library_alone(text: str) -> None:
    result = solved(text)
    blocks = recipe(model._Made(result, Choices())._document())
    bare, ours = best(lambda: alone("R2010", blocks), lambda: write(result, "model"))
    assert ours <= _SLOWER * bare, f"{ours:.3f} s against {bare:.3f} s"
