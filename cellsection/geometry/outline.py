"""Outlines: closed chains of segments, from corners, from rounded corners, from arcs."""

from __future__ import annotations

from itertools import pairwise
from math import fsum, hypot, radians, sqrt, tan
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry.moments import cosine_sine
from cellsection.geometry.segments import Arc, Line, Segment

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

__all__ = [
    "Corner",
    "Loop",
    "arc_chain",
    "area",
    "backwards",
    "box",
    "chain",
    "closed",
    "drawn",
    "drawn_closely",
    "ellipse_chain",
    "rounded",
]

Loop = tuple[Segment, ...]
# Lengths below this share of the outline's size are rounding: a fillet that fills its space exactly leaves such a side.
ROUNDING = 1e-12


class Corner(NamedTuple):
    """A corner of an outline and the radius to which it is rounded.

    column : the dimension that gave the radius, for messages
    """

    x: float
    y: float
    r: float = 0.0
    column: str = "r"


def area(loop: Sequence[Segment]) -> float:
    """Signed area: positive where the loop runs anticlockwise."""
    x0, y0 = loop[0].x1, loop[0].y1
    return fsum(segment.integrals(x0, y0).A for segment in loop)


def box(segments: Iterable[Segment]) -> tuple[float, float, float, float]:
    """xmin, ymin, xmax, ymax of the corners and arc ends."""
    xs, ys = zip(*((segment.x1, segment.y1) for segment in segments), strict=True)
    return min(xs), min(ys), max(xs), max(ys)


def drawn(loop: Loop, points: int) -> list[tuple[float, float]]:
    """Exactly `points` points along the outline and back to its start: corners, arc ends, and points on the arcs."""
    pieces = [1] * len(loop)
    arcs = [(i, hypot(arc.bx, arc.by)) for i, arc in enumerate(loop) if isinstance(arc, Arc)]
    for _ in range(points - 1 - len(loop) if arcs else 0):
        # A further point goes to the arc whose chords stray most; n chords stray 1/n² of what one does.
        most = max(arcs, key=lambda arc: arc[1] / pieces[arc[0]] ** 2)[0]
        pieces[most] += 1
    path = [(loop[0].x1, loop[0].y1)]
    for segment, count in zip(loop, pieces, strict=True):
        path += segment.drawn(count)
    path[-1] = path[0]
    return path + path[-1:] * (points - len(path))


def drawn_closely(loop: Loop, chord: float) -> list[tuple[float, float]]:
    """Corners, and points on the arcs so near to each other that no chord strays by more than `chord`."""
    return [point for segment in loop for point in segment.drawn(segment.divisions(chord))]


def backwards(loop: Sequence[Segment]) -> Loop:
    """The loop run through in the other sense."""
    return tuple(segment.reversed() for segment in reversed(loop))


def closed(loop: Sequence[Segment]) -> bool:
    """Whether each segment starts where the one before it ends, to rounding."""
    left, low, right, high = box(loop)
    gap = ROUNDING * max(right - left, high - low, abs(left), abs(right), abs(low), abs(high))
    return all(
        hypot(after.x1 - before.x2, after.y1 - before.y2) <= gap
        for before, after in zip(loop, (*loop[1:], loop[0]), strict=True)
    )


def chain(points: Sequence[tuple[float, float]]) -> tuple[Line, ...]:
    """Straight sides between the points and back to the first."""
    return tuple(Line(*start, *end) for start, end in zip(points, (*points[1:], points[0]), strict=True))


def arc_chain(x: float, y: float, r: float, start: float, sweep: float) -> tuple[Arc, ...]:
    """Arcs of a quarter turn at most, about the centre (x, y), from the angle `start` through `sweep`, in degrees.

    Quarter turns of a circle begin and end exactly at its extreme points.
    """
    pieces = max(1, -int(-abs(sweep) // 90.0))
    angles = [start + sweep * i / pieces for i in range(pieces + 1)]
    points = [(x + r * c, y + r * s) for c, s in map(cosine_sine, angles)]
    if abs(sweep) == 360.0:
        points[-1] = points[0]
    # tan of a quarter of a right angle is sqrt 2 - 1, exactly rounded.
    T = sqrt(2.0) - 1.0 if abs(sweep) == 90.0 * pieces else tan(radians(abs(sweep)) / (4.0 * pieces))
    signed = T if sweep > 0.0 else -T
    return tuple(Arc.circular(*first, *last, signed) for first, last in pairwise(points))


def ellipse_chain(x: float, y: float, a: float, b: float) -> Loop:
    """The ellipse with semi-axes a along x and b along y about (x, y), as four stretched quarter circles."""
    unit = arc_chain(0.0, 0.0, 1.0, 0.0, 360.0)
    return tuple(arc.mapped(a, 0.0, 0.0, b).moved(x, y) for arc in unit)


def rounded(corners: Sequence[Corner]) -> Loop:
    """The closed outline through the corners, each rounded by the arc that touches both of its sides.

    Raises InputError naming the radius' dimension where two arcs need more of a side than there is.

    >>> len(rounded([Corner(0, 0), Corner(4, 0), Corner(4, 3, r=1), Corner(0, 3)]))
    5
    """
    touches = [
        _touches(before, corner, after)
        for before, corner, after in zip((corners[-1], *corners[:-1]), corners, (*corners[1:], corners[0]), strict=True)
    ]
    small = ROUNDING * max(abs(value) for corner in corners for value in corner[:2])
    segments: list[Segment] = []
    for i, (corner, touch) in enumerate(zip(corners, touches, strict=True)):
        following, after = corners[(i + 1) % len(corners)], touches[(i + 1) % len(corners)]
        side = hypot(following.x - corner.x, following.y - corner.y)
        left = side - touch.length - after.length
        if left < -small:
            raise _too_large(corner, following, touch, after, side)
        end = touch.end
        if touch.length:
            segments.append(Arc.circular(*touch.start, *end, touch.T))
        if left > small:
            segments.append(Line(*end, *after.start))
    # A side used up by two arcs leaves their ends a rounding error apart.
    return tuple(_joined(segments))


class _Touch(NamedTuple):
    """Where the arc of a corner leaves the side before and meets the side after, and how much of each it takes."""

    start: tuple[float, float]
    end: tuple[float, float]
    length: float
    T: float


def _touches(before: Corner, corner: Corner, after: Corner) -> _Touch:
    if not corner.r:
        return _Touch((corner.x, corner.y), (corner.x, corner.y), 0.0, 0.0)
    inward, outward = _direction(before, corner), _direction(corner, after)
    cross = inward[0] * outward[1] - inward[1] * outward[0]
    dot = inward[0] * outward[0] + inward[1] * outward[1]
    half = cross / (1.0 + dot)  # tan of half of the turning; 1 at a right angle, without rounding
    length = corner.r * abs(half)
    start = (corner.x - inward[0] * length, corner.y - inward[1] * length)
    end = (corner.x + outward[0] * length, corner.y + outward[1] * length)
    return _Touch(start, end, length, half / (1.0 + sqrt(1.0 + half * half)))


def _direction(start: Corner, end: Corner) -> tuple[float, float]:
    dx, dy = end.x - start.x, end.y - start.y
    length = hypot(dx, dy)
    return dx / length, dy / length


def _too_large(corner: Corner, following: Corner, touch: _Touch, after: _Touch, side: float) -> InputError:
    large = corner if touch.length >= after.length else following
    need = touch.length + after.length
    return InputError(
        f"{large.column} = {large.r:g} does not fit: the rounding needs {need:g} of a side that is {side:g} long",
        remedy="Enter a smaller radius",
        column=large.column,
    )


def _joined(segments: list[Segment]) -> Iterable[Segment]:
    for segment, after in zip(segments, (*segments[1:], segments[0]), strict=True):
        if (segment.x2, segment.y2) == (after.x1, after.y1):
            yield segment
        elif isinstance(segment, Line):
            yield Line(segment.x1, segment.y1, after.x1, after.y1)
        else:
            yield Arc(segment.x1, segment.y1, after.x1, after.y1, segment.bx, segment.by, segment.T)
