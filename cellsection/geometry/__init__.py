"""Regions bounded by lines and arcs: their integrals in closed form, their placement, how they overlap and are cut."""

from cellsection.geometry.cut import cut, spans
from cellsection.geometry.moments import Centroidal, Moments, cosine_sine, second_moments
from cellsection.geometry.placement import DATUMS, datum_point, placed
from cellsection.geometry.reach import reach
from cellsection.geometry.region import Region
from cellsection.geometry.segments import Arc, Line, Segment
from cellsection.geometry.shapes import SHAPES, Shape

__all__ = [
    "DATUMS",
    "SHAPES",
    "Arc",
    "Centroidal",
    "Line",
    "Moments",
    "Region",
    "Segment",
    "Shape",
    "cosine_sine",
    "cut",
    "datum_point",
    "placed",
    "reach",
    "second_moments",
    "spans",
]
