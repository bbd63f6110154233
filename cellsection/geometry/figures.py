"""Figures: rectangle, triangle, trapezoid, circle and its parts, ellipse, the corner piece, the plate."""

from __future__ import annotations

from math import cos, radians, sin, sqrt, tan

from cellsection.errors import InputError
from cellsection.geometry.limits import below
from cellsection.geometry.outline import arc_chain, chain, ellipse_chain
from cellsection.geometry.region import Region
from cellsection.geometry.segments import Arc, Line

__all__ = [
    "circle",
    "ellipse",
    "fillet",
    "half_circle",
    "plate",
    "rectangle",
    "sector",
    "segment",
    "trapezoid",
    "triangle",
]


def rectangle(b: float, h: float) -> Region:
    """Width b and height h, bottom left corner at the origin.

    >>> rectangle(b=200, h=12).centroidal()
    Centroidal(A=2400.0, x=100.0, y=6.0, Ix=28800.0, Iy=8000000.0, Ixy=0.0)
    """
    return Region((chain([(0.0, 0.0), (b, 0.0), (b, h), (0.0, h)]),))


def triangle(b: float, h: float, a: float | None = None) -> Region:
    """Base b on the x axis from the origin, apex at height h over x = a; a may lie outside the base, blank is b/2.

    Source of the example: b·h³/36.

    >>> triangle(b=6, h=4, a=1.5).centroidal().Ix
    10.666667
    """
    apex = b / 2.0 if a is None else a
    return Region((chain([(0.0, 0.0), (b, 0.0), (apex, h)]),))


def trapezoid(b: float, b2: float, h: float, a: float | None = None) -> Region:
    """Bottom side b on the x axis from the origin, top side b2 at height h, its left end over x = a.

    Blank a centres the top over the bottom. Source of the example: (b + b2)·h/2.

    >>> trapezoid(b=50, b2=30, h=10).moments().A
    400.0
    """
    left = (b - b2) / 2.0 if a is None else a
    return Region((chain([(0.0, 0.0), (b, 0.0), (left + b2, h), (left, h)]),))


def circle(d: float) -> Region:
    """Diameter d, the box around it at the origin. Source of the example: π·d⁴/64.

    >>> circle(d=2).centroidal().Ix
    0.7853982
    """
    return Region((arc_chain(d / 2.0, d / 2.0, d / 2.0, 0.0, 360.0),))


def half_circle(d: float) -> Region:
    """The upper half of a circle, its flat side on the x axis from the origin. Source of the example: y = 2·d/(3π).

    >>> half_circle(d=6).centroidal().y
    1.273240
    """
    return Region(((*arc_chain(d / 2.0, 0.0, d / 2.0, 0.0, 180.0), Line(0.0, 0.0, d, 0.0)),))


def sector(r: float, angle: float) -> Region:
    """Centre at the origin, from the x axis anticlockwise through `angle` degrees, less than a full turn.

    Source of the example: A = r²·α/2 with the angle α in radians.

    >>> sector(r=2, angle=90).moments().A
    3.141593
    """
    _part_of_a_turn(angle, "a sector")
    arcs = arc_chain(0.0, 0.0, r, 0.0, angle)
    return Region(((Line(0.0, 0.0, r, 0.0), *arcs, Line(arcs[-1].x2, arcs[-1].y2, 0.0, 0.0)),))


def segment(r: float, angle: float) -> Region:
    """What a level chord cuts off the top of a circle about the origin; `angle` in degrees is the whole central angle.

    More than 180 degrees is the larger part. Source of the example: A = r²·(α - sin α)/2.

    >>> segment(r=2, angle=180).moments().A
    6.283185
    """
    _part_of_a_turn(angle, "a segment")
    # About the middle of the chord: the centre may be a thousand times as far away as the segment is high.
    half, level = r * sin(radians(angle) / 2.0), r * cos(radians(angle) / 2.0)
    if angle > 180.0:
        arcs = arc_chain(0.0, -level, r, 90.0 - angle / 2.0, angle)
        return Region(((*arcs, Line(arcs[-1].x2, arcs[-1].y2, arcs[0].x1, arcs[0].y1)),), y=level)
    arc = Arc.circular(half, 0.0, -half, 0.0, tan(radians(angle) / 4.0))
    return Region(((arc, Line(-half, 0.0, half, 0.0)),), y=level)


def ellipse(b: float, h: float) -> Region:
    """Axes b along x and h along y, the box around it at the origin. Source of the example: π·b·h³/64.

    >>> ellipse(b=6, h=4).centroidal().Ix
    18.84956
    """
    return Region((ellipse_chain(b / 2.0, h / 2.0, b / 2.0, h / 2.0),))


def fillet(r: float) -> Region:
    """The concave corner piece: between the two axes and the quarter circle that touches both, corner at the origin.

    Source of the example: r²·(1 - π/4).

    >>> fillet(r=10).moments().A
    21.46018
    """
    arc = Arc.circular(r, 0.0, 0.0, r, 1.0 - sqrt(2.0))
    return Region(((Line(0.0, 0.0, r, 0.0), arc, Line(0.0, r, 0.0, 0.0)),))


def plate(x: float, y: float, x2: float, y2: float, t: float) -> Region:
    """A strip of thickness t about the line from (x, y) to (x2, y2), in the axes of the section themselves.

    >>> plate(x=0, y=0, x2=30, y2=40, t=2).moments().A
    100.0
    """
    return Region.strip(x, y, x2, y2, t)


def _part_of_a_turn(angle: float, shape: str) -> None:
    if not angle > 0.0:
        raise InputError(
            f"angle = {angle:g} is not positive", remedy="Enter its whole angle in degrees", column="angle"
        )
    below("angle", angle, 360.0, f"a full turn: {shape} ends before it", "Use a circle")
