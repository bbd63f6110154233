"""The handbook tables of plane areas, read through the cell functions.

Curves that are no chain of lines and arcs (spandrel, semisegment, sine wave) are typed as polygons with CHORDS chords
along the curve; where that does not meet the stated tolerance the row is listed among the exceptions.
"""

from __future__ import annotations

from collections.abc import Callable
from math import cos, degrees, pi, sin, sqrt

from tests.published.published import Row
from tests.published.sections import Block, Section, block

__all__ = ["CHORDS", "figure"]

CHORDS = 2000
Readings = dict[str, Callable[[Section], float]]


def polygon(points: list[tuple[float, float]]) -> Block:
    nodes = [{"shape": "node", "x": x, "y": y} for x, y in points]
    return block("", {"shape": "polygon", "x": None, "y": None}, *nodes)


def regular_polygon(sides: int, circumradius: float) -> Block:
    turns = [2 * pi * i / sides for i in range(sides)]
    return polygon([(circumradius * cos(turn), circumradius * sin(turn)) for turn in turns])


def under_curve(height: Callable[[float], float], end: float) -> Block:
    """The area between the x axis and a curve, from x = 0 to `end`, as a polygon."""
    stations = [end * i / CHORDS for i in range(CHORDS + 1)]
    curve = [(x, height(x)) for x in reversed(stations)]
    return polygon([(0.0, 0.0), (end, 0.0), *(point for point in curve if point not in ((0.0, 0.0), (end, 0.0)))])


def total(symbol: str) -> Callable[[Section], float]:
    return lambda section: section.totals[symbol]


def about(symbol: str, x: float = 0.0, y: float = 0.0) -> Callable[[Section], float]:
    return lambda section: section.about(x, y)[symbol]


AT_ORIGIN = {"datum": "bottom left", "x": 0.0, "y": 0.0}
CENTROIDAL: Readings = {symbol: total(symbol) for symbol in ("A", "Ix", "Iy", "Ixy")}
ABOUT_CORNER: Readings = {
    "A": total("A"),
    "xbar": total("x"),
    "ybar": total("y"),
    "Ix base": about("Ix"),
    "Iy": about("Iy"),
    "Ixy": about("Ixy"),
}
ABOUT_CENTRE: Readings = {
    "A": total("A"),
    "xbar": total("x"),
    "Ix (axis of symmetry)": about("Ix"),
    "Iy0 (through the centre)": about("Iy"),
}


def figure(row: Row) -> tuple[Block, Readings]:
    """The figure of a row as a parts block, and how each of its quantities is read."""
    name = row.section
    dimension = row.number
    if name.startswith("quarter circle"):
        quarter = {"shape": "sector", "r": dimension("r"), "angle": 90.0, **AT_ORIGIN}
        return block("", quarter), {
            "xbar=ybar": total("x"),
            "Ix centroidal": total("Ix"),
            "Ix about edge": about("Ix"),
            "Ixy about edges": about("Ixy"),
            "Ixy centroidal": total("Ixy"),
        }
    if name.startswith(("triangle b=6", "right triangle")):
        b, h, c = (dimension(letter) for letter in "bhc")
        triangle = block("", {"shape": "triangle", "b": b, "h": h, "a": c, **AT_ORIGIN})
        return triangle, CENTROIDAL | {"Ixy edges": about("Ixy"), "Ixy centroid": total("Ixy")}
    if name.startswith("equilateral triangle"):
        a = dimension("a")
        return block("", {"shape": "triangle", "b": a, "h": a * sqrt(3) / 2, "a": a / 2}), {"I": total("Ix")}
    if name.startswith("circle d="):
        return block("", {"shape": "circle", "d": dimension("d")}), {"I": total("Ix")}
    if name.startswith("ellipse"):
        return block("", {"shape": "ellipse", "b": 2 * dimension("a"), "h": 2 * dimension("b")}), CENTROIDAL
    if name.startswith("regular hexagon"):
        return regular_polygon(6, dimension("d") / sqrt(3)), {"I": total("Ix")}
    if name.startswith("regular octagon"):
        return regular_polygon(8, dimension("R")), {"I": total("Ix")}
    if name.startswith(("semisegment", "spandrel")):
        b, h, n = (dimension(letter) for letter in "bhn")
        curves = {
            "y=h(1-(x/b)^n)": lambda x: h * (1 - (x / b) ** n),
            "y=h(x/b)^n": lambda x: h * (x / b) ** n,
        }
        return under_curve(curves[row.given["curve"]], b), ABOUT_CORNER
    if name.startswith("sine half-wave"):
        b, h = dimension("b"), dimension("h")
        half = under_curve(lambda x: h * sin(pi * x / (2 * b)), 2 * b)
        return half, {"Iy/(h b^3)": lambda section: section.totals["Iy"] / (h * b**3)}
    if name.startswith("circular sector"):
        # The sector runs anticlockwise from the x axis; turned back by half its angle it lies evenly about x.
        r, half_angle = dimension("r"), degrees(dimension("alpha"))
        part = {"shape": "sector", "r": r, "angle": 2 * half_angle, "turn": -half_angle, **AT_ORIGIN}
        return block("", part), ABOUT_CENTRE
    if name.startswith("circular segment"):
        # The chord is at the bottom; turned by a quarter it stands upright, at r·cos(alpha) from the circle's centre.
        r, alpha = dimension("r"), dimension("alpha")
        part = {"shape": "segment", "r": r, "angle": degrees(2 * alpha), "turn": -90.0, "datum": "bottom"}
        return block("", part | {"x": r * cos(alpha), "y": 0.0}), ABOUT_CENTRE
    return block(""), {}
