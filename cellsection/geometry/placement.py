"""Where a part goes: mirrored in its own axes, located by a point of its own, turned about that point."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.errors import InputError
from cellsection.geometry.limits import place

if TYPE_CHECKING:
    from cellsection.geometry.region import Region

__all__ = ["DATUMS", "datum_point", "placed"]

# Each word as shares of the width and the height of the box around the region; the centroid is no such point.
BOX_POINTS = {
    "centre": (0.5, 0.5),
    "bottom": (0.5, 0.0),
    "top": (0.5, 1.0),
    "left": (0.0, 0.5),
    "right": (1.0, 0.5),
    "bottom left": (0.0, 0.0),
    "bottom right": (1.0, 0.0),
    "top left": (0.0, 1.0),
    "top right": (1.0, 1.0),
}
DATUMS: tuple[str, ...] = ("centroid", *BOX_POINTS)


def datum_point(region: Region, datum: str = "centroid") -> tuple[float, float]:
    """The point of a region that a datum word names.

    Raises InputError naming the words there are.
    """
    if datum == "centroid":
        own = region.centroidal()
        return own.x, own.y
    if datum not in BOX_POINTS:
        raise InputError(f"datum {datum!r} is not known", remedy=f"Enter one of {', '.join(DATUMS)}", column="datum")
    left, low, right, high = region.bounds()
    across, up = BOX_POINTS[datum]
    return left + across * (right - left), low + up * (high - low)


def placed(
    region: Region, x: float, y: float, turn: float = 0.0, datum: str = "centroid", mirrored: bool = False
) -> Region:
    """The region with its datum at (x, y), turned about it by `turn` degrees anticlockwise.

    mirrored : first mirror it left to right in its own axes; the datum is a point of the mirrored region, so that the
        `left` of a mirrored channel is the tips of its flanges

    >>> from cellsection.geometry.shapes import SHAPES
    >>> placed(SHAPES["rectangle"].build(b=200, h=12), x=0, y=500, datum="bottom").bounds()
    (-100.0, 500.0, 100.0, 512.0)
    """
    place("x", x)
    place("y", y)
    shape = region.mirrored() if mirrored else region
    px, py = datum_point(shape, datum)
    moved = shape.moved(x - px, y - py)
    return moved.turned(turn, about=(x, y)) if turn else moved
