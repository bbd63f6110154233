"""The two kinds of boundary segment, each knowing its own six integrals in closed form.

By Green's theorem the integrals of an area are integrals along its boundary. Taken about a point, the contribution of
one segment is that of the triangle between the point and the segment's chord, plus, for an arc, that of the cap between
chord and arc. Both are exact, and both keep their digits for arcs of any flatness (`caps.py` says how).
"""

from __future__ import annotations

from dataclasses import dataclass
from math import atan, atan2, ceil, cos, hypot, inf, sin, sqrt, tan

from cellsection.geometry.caps import cap_factors
from cellsection.geometry.moments import Moments

__all__ = ["Arc", "Line", "Segment"]

# A stationary point this near an arc's end differs from the end by less than a rounding error of the radius.
AT_THE_END = 1e-8


@dataclass(frozen=True, slots=True)
class Line:
    """A straight segment from (x1, y1) to (x2, y2).

    >>> Line(4.0, 0.0, 4.0, 3.0).integrals().A      # the triangle (0, 0), (4, 0), (4, 3)
    6.0
    """

    x1: float
    y1: float
    x2: float
    y2: float

    def integrals(self, x0: float = 0.0, y0: float = 0.0) -> Moments:
        """Integrals over the triangle (x0, y0), start, end, about (x0, y0); positive where that is anticlockwise.

        Source: Green's theorem; the derivation runs as a test.
        """
        return _triangle(self.x1 - x0, self.y1 - y0, self.x2 - x0, self.y2 - y0)

    def point(self, z: float) -> tuple[float, float]:
        """The point at z, from -1 at the start to 1 at the end."""
        return _between(self.x1, self.x2, z), _between(self.y1, self.y2, z)

    def extent(self, ux: float, uy: float) -> tuple[float, float]:
        """Least and greatest ux·x + uy·y along the segment."""
        first, last = ux * self.x1 + uy * self.y1, ux * self.x2 + uy * self.y2
        return (first, last) if first <= last else (last, first)

    def stations(self, ux: float, uy: float, level: float) -> list[float]:
        """Every z in [-1, 1] at which the segment crosses the line ux·x + uy·y = level; none where it lies along it."""
        first, last = ux * self.x1 + uy * self.y1 - level, ux * self.x2 + uy * self.y2 - level
        if first == last or (first > 0.0 and last > 0.0) or (first < 0.0 and last < 0.0):
            return []
        return [(first + last) / (first - last)]

    def piece(self, start: float, end: float) -> Line:
        """The segment between two of its own z."""
        return Line(*self.point(start), *self.point(end))

    def moved(self, dx: float, dy: float) -> Line:
        """The segment moved."""
        return Line(self.x1 + dx, self.y1 + dy, self.x2 + dx, self.y2 + dy)

    def mapped(self, xx: float, xy: float, yx: float, yy: float) -> Line:
        """The segment under x' = xx·x + xy·y, y' = yx·x + yy·y, which turns, mirrors or stretches it."""
        (x1, y1), (x2, y2) = (_image(xx, xy, yx, yy, x, y) for x, y in ((self.x1, self.y1), (self.x2, self.y2)))
        return Line(x1, y1, x2, y2)

    def reversed(self) -> Line:
        """The same points from end to start."""
        return Line(self.x2, self.y2, self.x1, self.y1)

    @property
    def sweep(self) -> float:
        """Angle through which the segment turns, in radians: none."""
        return 0.0

    def divisions(self, chord: float) -> int:  # noqa: ARG002 - as an arc
        """In how many chords the segment is drawn without straying more than `chord` from it: one."""
        return 1

    def drawn(self, pieces: int) -> list[tuple[float, float]]:
        """Points after the start, evenly spaced."""
        return [self.point(2.0 * i / pieces - 1.0) for i in range(1, pieces + 1)]


@dataclass(frozen=True, slots=True)
class Arc:
    """An arc of a circle or an ellipse, of half a turn at most, from (x1, y1) to (x2, y2).

    bx, by : from the middle of the chord to the middle of the arc
    T : tangent of a quarter of the angle it spans, 0 < T <= 1; for an ellipse, the angle on the circle it is a
        stretched image of

    The points of the arc, for z from -1 to 1, with m the middle and e half of the chord, are
    m + (e (1 + T²) z + b (1 - z²)) / (1 + T² z²): the circle's rational parametrisation, which needs no centre and no
    radius, turns into a parabola as T vanishes, and is carried along by any turning, mirroring or stretching.

    >>> quarter = Arc.circular(1.0, 0.0, 0.0, 1.0, T=sqrt(2.0) - 1.0)
    >>> quarter.integrals().A                       # a quarter of the unit disc, π/4
    0.785398163397448
    """

    x1: float
    y1: float
    x2: float
    y2: float
    bx: float
    by: float
    T: float

    @classmethod
    def circular(cls, x1: float, y1: float, x2: float, y2: float, T: float) -> Arc:
        """The arc of a circle between two points, anticlockwise for a positive T, clockwise for a negative one.

        T : tangent of a quarter of the angle spanned, -1 <= T <= 1, not 0
        """
        ex, ey = (x2 - x1) / 2.0, (y2 - y1) / 2.0
        return cls(x1, y1, x2, y2, ey * T, -ex * T, abs(T))

    def integrals(self, x0: float = 0.0, y0: float = 0.0) -> Moments:
        """Integrals over the sector-like area (x0, y0), start, along the arc to its end, about (x0, y0).

        Source: Green's theorem, as the triangle of the chord and the cap upon it; the derivation runs as a test.
        """
        A, Qx, Qy, Ix, Iy, Ixy = _triangle(self.x1 - x0, self.y1 - y0, self.x2 - x0, self.y2 - y0)
        mx, my, ex, ey = *self._middle(x0, y0), *self._half_chord()
        bx, by = self.bx, self.by
        area, first, rise, span = cap_factors(self.T)
        size = bx * ey - by * ex
        a, q, f, g = size * area, size * first, size * rise, size * span
        return Moments(
            A + a,
            Qx + a * my + q * by,
            Qy + a * mx + q * bx,
            Ix + a * my * my + 2.0 * q * my * by + f * by * by + g * ey * ey,
            Iy + a * mx * mx + 2.0 * q * mx * bx + f * bx * bx + g * ex * ex,
            Ixy + a * mx * my + q * (mx * by + my * bx) + f * bx * by + g * ex * ey,
        )

    def point(self, z: float) -> tuple[float, float]:
        """The point at z, from -1 at the start over 0 in the middle to 1 at the end."""
        if abs(z) == 1.0:
            return (self.x2, self.y2) if z > 0.0 else (self.x1, self.y1)
        (mx, my), (ex, ey), T2 = self._middle(), self._half_chord(), self.T * self.T
        along, out = (1.0 + T2) * z / (1.0 + T2 * z * z), (1.0 - z * z) / (1.0 + T2 * z * z)
        return mx + ex * along + self.bx * out, my + ey * along + self.by * out

    def extent(self, ux: float, uy: float) -> tuple[float, float]:
        """Least and greatest ux·x + uy·y along the arc, exact."""
        values = [ux * self.x1 + uy * self.y1, ux * self.x2 + uy * self.y2]
        z = self._turning_point(ux, uy)
        if abs(z) < 1.0 - AT_THE_END:
            x, y = self.point(z)
            values.append(ux * x + uy * y)
        return min(values), max(values)

    def stations(self, ux: float, uy: float, level: float) -> list[float]:
        """Every z in [-1, 1] at which the arc meets the line ux·x + uy·y = level, in order.

        Inserting the parametrisation gives a quadratic in z.
        """
        (mx, my), (ex, ey), T2 = self._middle(), self._half_chord(), self.T * self.T
        e, b, k = ux * ex + uy * ey, ux * self.bx + uy * self.by, level - ux * mx - uy * my
        roots = _quadratic(b + k * T2, -e * (1.0 + T2), k - b)
        return sorted(z for z in roots if -1.0 <= z <= 1.0)

    def piece(self, start: float, end: float) -> Arc:
        """The arc between two of its own z, start < end."""
        first, last = atan(self.T * start), atan(self.T * end)  # half of the angles from the middle of the arc
        half, middle = (last - first) / 2.0, first + last
        # Unit vectors of the circle, stretched: N out of the chord, E along it.
        (ex, ey), T = self._half_chord(), self.T
        to_E, to_N = (1.0 + T * T) / (2.0 * T), (1.0 + T * T) / (2.0 * T * T)
        along, out = to_E * sin(middle), to_N * cos(middle)
        rise = 2.0 * sin(half) ** 2
        bx, by = rise * (out * self.bx + along * ex), rise * (out * self.by + along * ey)
        # N turns towards E: at the angle θ from the middle the outward vector is N cos θ + E sin θ.
        return Arc(*self.point(start), *self.point(end), bx, by, tan(half))

    def moved(self, dx: float, dy: float) -> Arc:
        """The arc moved."""
        return Arc(self.x1 + dx, self.y1 + dy, self.x2 + dx, self.y2 + dy, self.bx, self.by, self.T)

    def mapped(self, xx: float, xy: float, yx: float, yy: float) -> Arc:
        """The arc under x' = xx·x + xy·y, y' = yx·x + yy·y, which turns, mirrors or stretches it."""
        pairs = ((self.x1, self.y1), (self.x2, self.y2), (self.bx, self.by))
        (x1, y1), (x2, y2), (bx, by) = (_image(xx, xy, yx, yy, x, y) for x, y in pairs)
        return Arc(x1, y1, x2, y2, bx, by, self.T)

    def reversed(self) -> Arc:
        """The same points from end to start."""
        return Arc(self.x2, self.y2, self.x1, self.y1, self.bx, self.by, self.T)

    @property
    def sweep(self) -> float:
        """Angle through which the arc turns, in radians, positive; of an ellipse that of the circle behind it."""
        return 4.0 * atan(self.T)

    def divisions(self, chord: float) -> int:
        """In how many chords, two at least, the arc is drawn without straying more than `chord` from it."""
        (ex, ey), T = self._half_chord(), self.T
        to_E, to_N = (1.0 + T * T) / (2.0 * T), (1.0 + T * T) / (2.0 * T * T)
        nn, ee = to_N * hypot(self.bx, self.by), to_E * hypot(ex, ey)
        across = to_E * to_N * (ex * self.bx + ey * self.by)
        # The longest radius vector: the larger singular value of the map from the unit circle.
        radius = sqrt((nn * nn + ee * ee) / 2.0 + hypot((nn * nn - ee * ee) / 2.0, across))
        # A chord over the angle 2δ strays by radius (1 - cos δ) = 2 radius sin²(δ/2).
        half = 2.0 * atan2(sqrt(chord), sqrt(max(2.0 * radius - chord, 0.0)))
        return max(2, ceil(self.sweep / (2.0 * half)))

    def drawn(self, pieces: int) -> list[tuple[float, float]]:
        """Points after the start, at equal angles."""
        turn = atan(self.T)
        return [
            self.point(tan(turn * (2.0 * i / pieces - 1.0)) / self.T if i < pieces else 1.0)
            for i in range(1, pieces + 1)
        ]

    def _middle(self, x0: float = 0.0, y0: float = 0.0) -> tuple[float, float]:
        return ((self.x1 - x0) + (self.x2 - x0)) / 2.0, ((self.y1 - y0) + (self.y2 - y0)) / 2.0

    def _half_chord(self) -> tuple[float, float]:
        return (self.x2 - self.x1) / 2.0, (self.y2 - self.y1) / 2.0

    def _turning_point(self, ux: float, uy: float) -> float:
        """The z at which ux·x + uy·y is stationary: p (1 - T² z²) = 2 q z, of the two roots the one near 0."""
        (ex, ey), T = self._half_chord(), self.T
        p, q = ux * ex + uy * ey, ux * self.bx + uy * self.by
        root = hypot(q, p * T)
        bottom = q + root if q >= 0.0 else q - root
        return p / bottom if bottom else inf


Segment = Line | Arc


def _triangle(x1: float, y1: float, x2: float, y2: float) -> Moments:
    """Integrals over the triangle origin, first point, second point."""
    cross = x1 * y2 - x2 * y1
    sx, sy = x1 + x2, y1 + y2
    return Moments(
        cross / 2.0,
        cross * sy / 6.0,
        cross * sx / 6.0,
        cross * (y1 * y1 + y1 * y2 + y2 * y2) / 12.0,
        cross * (x1 * x1 + x1 * x2 + x2 * x2) / 12.0,
        cross * (x1 * y1 + x2 * y2 + sx * sy) / 24.0,
    )


def _between(first: float, last: float, z: float) -> float:
    """From first at z = -1 to last at z = 1, exact at both."""
    return first + (last - first) * ((1.0 + z) / 2.0) if z < 0.0 else last - (last - first) * ((1.0 - z) / 2.0)


def _image(xx: float, xy: float, yx: float, yy: float, x: float, y: float) -> tuple[float, float]:
    return xx * x + xy * y, yx * x + yy * y


def _quadratic(a: float, b: float, c: float) -> list[float]:
    """Real roots of a z² + b z + c, by the form that does not cancel; none where all is zero."""
    under = b * b - 4.0 * a * c
    if under < 0.0:
        return []
    q = -(b + sqrt(under)) / 2.0 if b >= 0.0 else (sqrt(under) - b) / 2.0
    roots = [q / a] if a else []
    if q:
        roots.append(c / q)
    return roots
