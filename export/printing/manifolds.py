"""Bodies as the solid modeller's manifolds and back, in millimetres.

The modeller takes float32 meshes as exact to about 1e-7 of their size and keeps what it makes as far from
degenerate, so that its surfaces stay closed when a file's float32 merges their corners.
"""

from collections.abc import Iterator

import numpy as np
from manifold3d import Error, Manifold, OpType
from manifold3d import Mesh as ModellerMesh

from export.outputs import CheckFailed
from geom.solids import Balls, Body, Faceted, Links, Mesh, Union

MM = 1000.0  # the modeller's unit, in metres

# Edges shorter than this are taken away from what was joined or cut: a file's float32 would merge their ends.
_SHORTEST = 1e-3  # mm
_SINGLE = 2.0**-21  # of the size: four roundings of float32


class ModellerError(CheckFailed):
    """The modeller made nothing usable; the text says of what."""


def joined(body: Body, within: float) -> Manifold:
    """Join everything a body consists of into one solid: what overlaps is counted once.

    Parameters
    ----------
    body : Body
        The body, m.
    within : float
        Chord tolerance of its facets, m.

    Raises
    ------
    ModellerError
        If the modeller refuses a surface.
    """
    return checked(Manifold.batch_boolean(list(_parts(body, within)), OpType.Add), "joining")


def faceted(solid: Manifold) -> Faceted:
    """Return a manifold as a body, m.

    Raises
    ------
    ModellerError
        If nothing is left of it.
    """
    size = float(np.abs(solid.bounding_box()).max())
    # As an original of its own: edges between what was joined from different solids are kept otherwise.
    clean = checked(solid, "cutting").as_original().simplify(max(_SHORTEST, _SINGLE * size))
    mesh = checked(clean, "simplifying").to_mesh()
    vertices = np.asarray(mesh.vert_properties, dtype=np.float64)[:, :3]
    return Faceted(Mesh(vertices, np.asarray(mesh.tri_verts)).scaled(1 / MM))


def checked(solid: Manifold, doing: str) -> Manifold:
    """Return a manifold that holds something.

    Raises
    ------
    ModellerError
        If it is empty or broken.
    """
    if solid.status() != Error.NoError or solid.is_empty():
        text = f"{doing} for the print failed ({solid.status().name}); leave `bed` and joined `links` out of [print]"
        raise ModellerError(text)
    return solid


def _parts(body: Body, within: float) -> Iterator[Manifold]:
    """Yield manifolds none of which overlaps itself: one for each link, ball, bar and so on."""
    if isinstance(body, Union):
        for part in body.bodies:
            yield from _parts(part, within)
    elif isinstance(body, Links | Balls):
        one = _manifold(body.template(within))
        turns = body.turns if isinstance(body, Links) else np.broadcast_to(np.eye(3), (len(body.places), 3, 3))
        for place, turn in zip(body.places * MM, turns, strict=True):
            yield one.transform(np.column_stack([turn, place]))
    else:
        # Bodies that share no vertex may overlap (members at a node): each is joined as its own.
        yield from _manifold(body.mesh(within)).decompose()


def _manifold(mesh: Mesh) -> Manifold:
    vertices = (mesh.vertices * MM).astype(np.float32)
    return checked(Manifold(ModellerMesh(vertices, mesh.faces.astype(np.uint32))), "reading a surface")
