"""How regions lie over each other: layers, surplus, connected pieces. Arcs are drawn by chords; shapely does the rest.

Regions of straight sides are exact here, to rounding. An arc is drawn by chords that stray from it by CHORD of its
region's size, so that areas between arcs are known to about the stray times the length of the arcs, which `Flat.doubt`
holds; less than that is not distinguished from nothing.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from cellsection.geometry.segments import Arc

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from shapely.geometry.base import BaseGeometry

    from cellsection.geometry.region import Region

__all__ = ["CHORD", "Flat", "areal", "common", "connected", "flat", "layers", "surplus"]

CHORD = 2e-5
ROUNDING = 1e-9


@dataclass(frozen=True, slots=True)
class Flat:
    """A region as a shapely geometry.

    doubt : area [L²] that may be an effect of drawing arcs by chords, or of rounding
    stray : how far an outline may be from where it is drawn [L]
    """

    shape: BaseGeometry
    doubt: float
    stray: float


def flat(region: Region) -> Flat:
    """The region with its arcs drawn by chords."""
    left, low, right, high = region.bounds()
    size = max(right - left, high - low)
    shape = region.polygon(CHORD * size)
    curved = any(isinstance(segment, Arc) for loop in region.local for segment in loop)
    stray = CHORD * size if curved else ROUNDING * size
    return Flat(shape, ROUNDING * float(shape.area) + (stray * float(shape.length) if curved else 0.0), stray)


def layers(shapes: Iterable[BaseGeometry]) -> list[BaseGeometry]:
    """What at least one of the shapes covers, what at least two cover, and so on as deep as they lie.

    >>> from shapely import box
    >>> [layer.area for layer in layers([box(0, 0, 2, 1), box(1, 0, 3, 1)])]
    [3.0, 1.0]
    """
    import shapely

    deep: list[BaseGeometry] = []
    for shape in shapes:
        carried = shape
        for i, layer in enumerate(deep):
            # What this layer has already goes down to the next; the rest joins this one.
            below = common(layer, carried)
            deep[i] = areal(shapely.union(layer, carried))
            carried = below
        if carried.area > 0.0:
            deep.append(carried)
    return deep


def areal(shape: BaseGeometry) -> BaseGeometry:
    """The area of a shape alone: where outlines only touch, shapely gives points and lines along with it.

    >>> from shapely import box
    >>> areal(box(0, 0, 1, 1).intersection(box(1, 0, 2, 1))).area
    0.0
    """
    import shapely

    if shape.geom_type in ("Polygon", "MultiPolygon"):
        return shape
    return shapely.union_all([piece for piece in shapely.get_parts(shape) if piece.geom_type == "Polygon"])


def common(a: BaseGeometry, b: BaseGeometry) -> BaseGeometry:
    """The area that both shapes cover."""
    return areal(a.intersection(b))


def surplus(more: Sequence[BaseGeometry], fewer: Sequence[BaseGeometry], by: int = 1) -> BaseGeometry:
    """Where the shapes behind the layers `more` outnumber those behind `fewer` by `by` at least.

    >>> from shapely import box
    >>> surplus(layers([box(0, 0, 4, 1)]), layers([box(1, 0, 2, 1)])).area
    3.0
    """
    import shapely

    kept = []
    for i, layer in enumerate(more[by - 1 :]):
        kept.append(areal(shapely.difference(layer, fewer[i])) if i < len(fewer) else layer)
    return shapely.union_all(kept)


def connected(shape: BaseGeometry, gap: float, sliver: float) -> list[BaseGeometry]:
    """The pieces of a shape, those within `gap` of each other taken together; the largest area first.

    sliver : pieces thinner than this are left out: they come of arcs drawn by chords
    """
    import shapely

    pieces = [
        piece
        for piece in shapely.get_parts(shape)
        if piece.geom_type == "Polygon" and piece.area > sliver * piece.length / 2.0
    ]
    groups: list[list[BaseGeometry]] = []
    for piece in pieces:
        near = [group for group in groups if any(shapely.distance(piece, other) <= gap for other in group)]
        groups = [group for group in groups if group not in near]
        groups.append([piece, *(other for group in near for other in group)])
    return sorted((shapely.union_all(group) for group in groups), key=lambda group: -group.area)
