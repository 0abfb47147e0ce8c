"""Solid bodies as values: they know their true volume and make watertight surfaces of triangles."""

from geom.solids.bars import Bars
from geom.solids.body import Body, Solid, Union
from geom.solids.copies import Balls
from geom.solids.faceted import Faceted
from geom.solids.frames import Places, link_frames, no_twist
from geom.solids.links import Link, Links
from geom.solids.mesh import Facets, Mesh, merged
from geom.solids.prism import Prism
from geom.solids.shell import Shell
from geom.solids.sweep import Sweep

__all__ = [
    "Balls",
    "Bars",
    "Body",
    "Faceted",
    "Facets",
    "Link",
    "Links",
    "Mesh",
    "Places",
    "Prism",
    "Shell",
    "Solid",
    "Sweep",
    "Union",
    "link_frames",
    "merged",
    "no_twist",
]
