"""The composite section: its totals about the centroid, and its moments about any other axes."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry import second_moments
from cellsection.section.principal import principal_axes
from cellsection.section.transformed import radius_of_gyration, transformed

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["Totals", "about", "totals"]


class Totals(NamedTuple):
    """Of the transformed section about its centroid.

    A [L²] · x, y of the centroid [L] · Ix, Iy, Ixy, and the polar Ip = Ix + Iy [L⁴] · rx, ry radii of gyration [L] ·
    I1 >= I2 principal moments [L⁴] · angle from x to axis 1 [°], above -90 and up to 90
    """

    A: float
    x: float
    y: float
    Ix: float
    Iy: float
    Ixy: float
    Ip: float
    rx: float
    ry: float
    I1: float
    I2: float
    angle: float


def totals(parts: Sequence[Part]) -> Totals:
    """Totals of the parts, each weighted by its sign and modular ratio.

    Raises InputError where the parts make no real section: no parts, no net area, second moments not positive.
    Source: parallel-axis theorem and transformed section, e.g. Gere, Mechanics of Materials, chapters 6 and 12 (from
    memory).

    >>> from cellsection.geometry import SHAPES, placed
    >>> from cellsection.section import Part
    >>> flange = SHAPES["rectangle"].build(b=8, h=1)
    >>> web = SHAPES["rectangle"].build(b=0.5, h=12)
    >>> girder = [
    ...     Part("top", "rectangle", placed(flange, 0, 6.5)),
    ...     Part("web", "rectangle", placed(web, 0, 0)),
    ...     Part("bottom", "rectangle", placed(flange, 0, -6.5)),
    ... ]
    >>> totals(girder).Ix                   # 0.5·12³/12 + 2·(8·1³/12 + 8·6.5²)
    749.333333
    """
    section = transformed(parts)
    A, x, y, Ix, Iy, Ixy, _rounding = section
    I1, I2, angle = principal_axes(section)
    rx, ry = radius_of_gyration(Ix, A), radius_of_gyration(Iy, A)
    return Totals(A, x, y, Ix, Iy, Ixy, Ix + Iy, rx, ry, I1, I2, angle)


def about(parts: Sequence[Part], x: float, y: float, turn: float = 0.0) -> tuple[float, float, float]:
    """Ix, Iy, Ixy of the transformed section about axes through (x, y), turned by `turn` degrees anticlockwise [L⁴].

    Source: parallel-axis theorem, then the transformation of second moments; as for `totals`.

    >>> from cellsection.geometry import SHAPES
    >>> from cellsection.section import Part
    >>> about([Part("", "rectangle", SHAPES["rectangle"].build(b=6, h=4))], x=0, y=0)   # b·h³/3, h·b³/3, b²·h²/4
    (128.0, 288.0, 144.0)
    """
    for argument, value in (("x", x), ("y", y)):
        if not isfinite(value):
            raise InputError(f"{argument} = {value} is not a number", remedy="Give a number", argument=argument)
    A, xc, yc, Ix, Iy, Ixy, _rounding = transformed(parts)
    dx, dy = xc - x, yc - y
    return second_moments(Ix + A * dy * dy, Iy + A * dx * dx, Ixy + A * dx * dy, turn)
