"""Curves in space as values: they know their points within a tolerance, their lengths and their tangents."""

from geom.curves.arc import Arc
from geom.curves.base import Along, Curve
from geom.curves.catenary import Catenary, catenary_points, hanging_strands
from geom.curves.elastic import ElasticCatenary
from geom.curves.joined import Joined
from geom.curves.measure import worst_chord
from geom.curves.offset import Offset
from geom.curves.sampled import Sampled
from geom.curves.straight import Polyline, Segment

__all__ = [
    "Along",
    "Arc",
    "Catenary",
    "Curve",
    "ElasticCatenary",
    "Joined",
    "Offset",
    "Polyline",
    "Sampled",
    "Segment",
    "catenary_points",
    "hanging_strands",
    "worst_chord",
]
