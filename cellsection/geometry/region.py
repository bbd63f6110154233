"""A plane region bounded by closed outlines of lines and arcs: its area integrals, bounds and movements."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from math import hypot
from typing import TYPE_CHECKING

from cellsection.errors import InputError
from cellsection.geometry.limits import SMALLEST, place, positive
from cellsection.geometry.moments import Centroidal, Moments, cosine_sine, summed
from cellsection.geometry.outline import Loop, area, backwards, box, chain, closed, drawn, drawn_closely
from cellsection.geometry.simple import refuse_crossing

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from shapely.geometry.base import BaseGeometry

    from cellsection.geometry.segments import Segment

__all__ = ["Region"]

# Corners whose enclosed area is less than this share of the square around them lie on one line, but for rounding.
FLAT = 1e-14


@dataclass(frozen=True)
class Region:
    """An area in the plane: outer outlines anticlockwise, holes clockwise.

    local : the outlines about a local origin near the region itself
    x, y : where that local origin is

    Moving only changes x and y, so a part a thousand spans away from the origin keeps every digit of its own shape.

    >>> plate = Region.from_points([(0, 0), (200, 0), (200, 12), (0, 12)])
    >>> plate.centroidal().Ix                                               # 200 x 12³ / 12
    28800.0
    >>> plate.moved(0, 1e9).centroidal().Ix
    28800.0
    """

    local: tuple[Loop, ...]
    x: float = 0.0
    y: float = 0.0

    @classmethod
    def from_loops(cls, *loops: Iterable[Segment]) -> Region:
        """The region bounded by outlines that run in their own sense, outer ones first.

        Raises InputError where an outline is not closed, or the area they enclose is not positive.
        """
        local = tuple(tuple(loop) for loop in loops)
        if not all(closed(loop) for loop in local):
            raise InputError("the outline is not closed", remedy="End each outline where it starts")
        if not (area(local[0]) > 0.0 and sum(area(loop) for loop in local) > 0.0):
            raise InputError("the outline encloses no area", remedy="Run outer outlines anticlockwise, holes clockwise")
        return cls(local)

    @classmethod
    def from_points(cls, points: Sequence[tuple[float, float]]) -> Region:
        """The polygon with these corners, in either sense; the first may be repeated at the end.

        Raises InputError: fewer than three different corners, no area, sides that cross each other. Sides that only
        touch, as those of a cut that leads to a hole, are allowed.

        >>> Region.from_points([(0, 0), (0, 3), (4, 0)]).moments().A
        6.0
        """
        for point in points:
            for column, value in zip("xy", point, strict=True):
                place(column, value)
        # Repeated corners, the first at the end among them, are dropped; the rest keep the numbers the engineer knows.
        kept = [
            (number, float(point[0]), float(point[1]))
            for number, point in enumerate(points, start=1)
            if tuple(point) != tuple(points[number % len(points)])
        ]
        if len({corner[1:] for corner in kept}) < 3:
            raise InputError(
                f"the outline has {len({corner[1:] for corner in kept})} different corners",
                remedy="Enter three corners or more",
                column="x",
            )
        _number, x, y = kept[0]
        local = chain([(px - x, py - y) for _number, px, py in kept])
        enclosed = area(local)
        reach = max(hypot(side.x1, side.y1) for side in local)
        if reach < SMALLEST or abs(enclosed) <= FLAT * reach * reach:
            raise InputError(
                "the outline encloses no area: its corners lie on one line, or it crosses itself",
                remedy="List corners that enclose an area, in their order along the outline",
                column="x",
            )
        refuse_crossing(local, abs(enclosed), [number for number, _x, _y in kept])
        return cls((local if enclosed > 0.0 else backwards(local),), x, y)

    @classmethod
    def strip(cls, x: float, y: float, x2: float, y2: float, t: float) -> Region:
        """A plate of thickness t whose middle line runs from (x, y) to (x2, y2), its ends square.

        >>> Region.strip(0, 0, 30, 40, t=2).centroidal()[:3]
        (100.0, 15.0, 20.0)
        """
        for column, value in (("x", x), ("y", y), ("x2", x2), ("y2", y2)):
            place(column, value)
        positive("t", t)
        ax, ay = (x2 - x) / 2.0, (y2 - y) / 2.0
        half = hypot(ax, ay)
        if not half > 0.0:
            raise InputError("the plate ends where it starts", remedy="Enter x2, y2 different from x, y", column="x2")
        nx, ny = -ay / half * t / 2.0, ax / half * t / 2.0
        corners = [(-ax - nx, -ay - ny), (ax - nx, ay - ny), (ax + nx, ay + ny), (-ax + nx, -ay + ny)]
        return cls((chain(corners),), (x + x2) / 2.0, (y + y2) / 2.0)

    def centroidal(self) -> Centroidal:
        """Area, centroid, and second moments about the centroid."""
        own = self._own
        return own._replace(x=self.x + own.x, y=self.y + own.y)

    def moments(self) -> Moments:
        """Area, first and second moments about the origin of the axes."""
        return self.centroidal().about_origin()

    @cached_property
    def _own(self) -> Centroidal:
        """The integrals about the local origin: summed about the middle of the box, which no segment is far from."""
        left, low, right, high = box(segment for loop in self.local for segment in loop)
        x0, y0 = (left + right) / 2.0, (low + high) / 2.0
        A, Qx, Qy, Ix, Iy, Ixy = summed(segment.integrals(x0, y0) for loop in self.local for segment in loop)
        if not A > 0.0:
            raise InputError(
                "the area is lost in rounding: one dimension is many orders smaller than another",
                remedy="Check the dimensions and their units",
            )
        dx, dy = Qy / A, Qx / A
        return Centroidal(A, x0 + dx, y0 + dy, Ix - A * dy * dy, Iy - A * dx * dx, Ixy - A * dx * dy)

    def bounds(self, turn: float = 0.0) -> tuple[float, float, float, float]:
        """The box around the region, xmin, ymin, xmax, ymax, in axes turned anticlockwise by `turn` degrees; exact.

        >>> Region.from_points([(0, 0), (30, 0), (30, 10), (0, 10)]).bounds(turn=90.0)
        (0.0, -30.0, 10.0, 0.0)
        """
        c, s = cosine_sine(turn)
        across = [segment.extent(c, s) for loop in self.local for segment in loop]
        up = [segment.extent(-s, c) for loop in self.local for segment in loop]
        x, y = c * self.x + s * self.y, c * self.y - s * self.x
        return (
            x + min(low for low, _high in across),
            y + min(low for low, _high in up),
            x + max(high for _low, high in across),
            y + max(high for _low, high in up),
        )

    def moved(self, dx: float, dy: float) -> Region:
        """The region moved by dx to the right and dy upwards."""
        return replace(self, x=self.x + dx, y=self.y + dy)

    def turned(self, degrees: float, about: tuple[float, float] = (0.0, 0.0)) -> Region:
        """The region turned anticlockwise about a point."""
        c, s = cosine_sine(degrees)
        dx, dy = self.x - about[0], self.y - about[1]
        local = tuple(tuple(segment.mapped(c, -s, s, c) for segment in loop) for loop in self.local)
        return Region(local, about[0] + c * dx - s * dy, about[1] + s * dx + c * dy)

    def mirrored(self) -> Region:
        """The region mirrored left to right about the y axis: x becomes -x."""
        mirrors = (tuple(segment.mapped(-1.0, 0.0, 0.0, 1.0) for segment in loop) for loop in self.local)
        return Region(tuple(backwards(loop) for loop in mirrors), 0.0 - self.x, self.y)

    @property
    def loops(self) -> tuple[Loop, ...]:
        """The outlines in the axes themselves."""
        return tuple(tuple(segment.moved(self.x, self.y) for segment in loop) for loop in self.local)

    def outline(self, points: int) -> list[tuple[float, float]]:
        """Exactly `points` points along the outer outline and back to its start, every corner among them.

        Arcs share the points that corners leave, so that the flattest drawing strays least; spare points repeat the
        last one. Raises InputError where there are fewer points than corners.

        >>> Region.from_points([(0, 0), (4, 0), (0, 3)]).outline(5)
        [(0.0, 0.0), (4.0, 0.0), (0.0, 3.0), (0.0, 0.0), (0.0, 0.0)]
        """
        loop = self.local[0]
        if points < len(loop) + 1:
            raise InputError(
                f"{points:g} points cannot show an outline of {len(loop)} sides",
                remedy=f"Ask for {len(loop) + 1} points or more",
                argument="points",
            )
        path = drawn(loop, points)
        return [(self.x + x, self.y + y) for x, y in path]

    def polygon(self, chord: float) -> BaseGeometry:
        """The region as a shapely geometry, its arcs drawn by chords that stray from them by no more than `chord`."""
        import shapely

        rings = [[(self.x + x, self.y + y) for x, y in drawn_closely(loop, chord)] for loop in self.local]
        outer = [ring for ring, loop in zip(rings, self.local, strict=True) if area(loop) > 0.0]
        holes = [ring for ring, loop in zip(rings, self.local, strict=True) if area(loop) <= 0.0]
        if len(outer) == 1:
            shape = shapely.Polygon(outer[0], holes)
            return shape if shape.is_valid else shapely.make_valid(shape)
        solid = shapely.union_all([shapely.make_valid(shapely.Polygon(ring)) for ring in outer])
        return shapely.difference(
            solid, shapely.union_all([shapely.make_valid(shapely.Polygon(ring)) for ring in holes])
        )
