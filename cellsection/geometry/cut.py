"""A region cut by a straight line: the parts on both sides, and the spans of the line that lie inside."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

from cellsection.geometry.moments import cosine_sine
from cellsection.geometry.outline import Loop, area, box
from cellsection.geometry.region import Region
from cellsection.geometry.segments import Arc, Line, Segment

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["cut", "spans"]

# A corner nearer to the line than this share of the region's size or coordinates lies on it.
ON_THE_LINE = 4e-14


def cut(region: Region, x: float, y: float, turn: float = 0.0) -> tuple[Region | None, Region | None]:
    """The parts of a region above and below the line through (x, y) at `turn` degrees from the x axis.

    Exact on lines and arcs: every piece of an arc is an arc. A side without area is None. A part may fall into several
    pieces, which stay one Region. At 90 degrees "above" is the left side.

    >>> from cellsection.geometry.shapes import SHAPES
    >>> above, below = cut(SHAPES["half circle"].build(d=2), x=1, y=0, turn=90)
    >>> above.moments().A, below.centroidal().x             # π/4, and 1 + 4/(3π)
    (0.785398, 1.424413)
    """
    c, s = cosine_sine(turn)
    level = c * (y - region.y) - s * (x - region.x)
    left, low, right, high = box(segment for loop in region.local for segment in loop)
    near = ON_THE_LINE * max(right - left, high - low, *map(abs, (left, low, right, high)))
    pieces = [_pieces(loop, c, s, level, near) for loop in region.local]
    sides = []
    for side in (1, -1):
        # Outer outlines first, as everywhere: a hole clear of the line is found before the outline around it.
        loops = tuple(sorted(_loops(pieces, side, c, s), key=lambda loop: area(loop) <= 0.0))
        sides.append(Region(loops, region.x, region.y) if loops else None)
    return sides[0], sides[1]


def spans(region: Region, ux: float, uy: float, level: float) -> list[tuple[float, float]]:
    """Where the line ux·x + uy·y = level runs inside the region, as intervals of uy·x - ux·y, in order.

    (ux, uy) is a unit vector. For a level through a corner, along a side or touching an arc the result is that of a
    level just below it, lower by a rounding error of the region's size.

    >>> from cellsection.geometry.shapes import SHAPES
    >>> tee = SHAPES["tee"].build(h=60, b=90, tw=30, tf=20)
    >>> spans(tee, 0, 1, 50), spans(tee, 0, 1, 40)
    ([(0.0, 90.0)], [(30.0, 60.0)])
    """
    segments = [segment for loop in region.local for segment in loop]
    own = level - ux * region.x - uy * region.y
    corners = [value for segment in segments for value in segment.extent(ux, uy)]
    near = ON_THE_LINE * (max(corners) - min(corners))
    while any(abs(corner - own) <= near for corner in corners):
        own -= 2.0 * near
    met = []
    for segment in segments:
        for z in segment.stations(ux, uy, own):
            px, py = segment.point(z)
            met.append(uy * (region.x + px) - ux * (region.y + py))
    met.sort()
    return list(zip(met[::2], met[1::2], strict=True))


@dataclass(frozen=True, slots=True)
class _Piece:
    """A piece of an outline that belongs to one side of the line, 1 above or -1 below.

    along : it runs along the line; then its side is where the region lies, which is on its left
    """

    segment: Segment
    side: int
    along: bool


def _pieces(loop: Loop, c: float, s: float, level: float, near: float) -> list[_Piece]:
    """The loop's segments, split where they cross the line; each piece belongs to one side, so that none is lost."""

    def height(x: float, y: float) -> float:
        value = c * y - s * x - level
        return value if abs(value) > near else 0.0

    found = []
    for segment in loop:
        ends = height(segment.x1, segment.y1), height(segment.x2, segment.y2)
        splits = []
        for z in segment.stations(-s, c, level):
            px, py = segment.point(z)
            at_an_end = any(
                not end and abs(px - ex) + abs(py - ey) <= 4.0 * near
                for end, ex, ey in zip(ends, (segment.x1, segment.x2), (segment.y1, segment.y2), strict=True)
            )
            if not at_an_end and -1.0 < z < 1.0:
                splits.append(z)
        bounds, heights = [-1.0, *splits, 1.0], [ends[0], *(0.0 for _ in splits), ends[1]]
        for (start, end), (first, last) in zip(pairwise(bounds), pairwise(heights), strict=True):
            piece = segment.piece(start, end) if splits else segment
            middle = height(*piece.point(0.0)) if isinstance(piece, Arc) else 0.0
            farthest = max((first, middle, last), key=abs)
            forward = c * (piece.x2 - piece.x1) + s * (piece.y2 - piece.y1)
            found.append(_Piece(piece, 1 if (farthest or forward) > 0.0 else -1, not farthest))
    return found


def _loops(outlines: list[list[_Piece]], side: int, c: float, s: float) -> Iterator[Loop]:
    """The outlines of one side: chains of its pieces, closed along the line."""
    chains: list[list[_Piece]] = []
    for outline in outlines:
        if all(piece.side == side for piece in outline):
            yield tuple(piece.segment for piece in outline)
        else:
            chains += _chains(outline, side)

    def place(x: float, y: float) -> float:
        return side * (c * x + s * y)

    # With the region on the left of its outline, the line is run along in its own direction above, against it below.
    # Along the line ends and starts of chains alternate; so the first end goes with the first start, and so on. What
    # closes a side is run along backwards to close the other one: no area is lost between them.
    starts = sorted(range(len(chains)), key=lambda i: place(chains[i][0].segment.x1, chains[i][0].segment.y1))
    ends = sorted(range(len(chains)), key=lambda i: place(chains[i][-1].segment.x2, chains[i][-1].segment.y2))
    following = dict(zip(ends, starts, strict=True))
    left = set(following)
    while left:
        current = min(left)
        loop: list[Segment] = []
        wide = False
        while current in left:
            left.discard(current)
            loop += [piece.segment for piece in chains[current]]
            wide = wide or not all(piece.along for piece in chains[current])
            current = following[current]
            after = chains[current][0].segment
            if (loop[-1].x2, loop[-1].y2) != (after.x1, after.y1):
                loop.append(Line(loop[-1].x2, loop[-1].y2, after.x1, after.y1))
        if wide:
            yield tuple(loop)


def _chains(outline: list[_Piece], side: int) -> Iterator[list[_Piece]]:
    """Runs of pieces on one side, each from the line back to the line."""
    first = next(i for i, piece in enumerate(outline) if piece.side != side)
    chain: list[_Piece] = []
    for piece in (*outline[first:], *outline[:first]):
        if piece.side == side:
            chain.append(piece)
        elif chain:
            yield chain
            chain = []
    if chain:
        yield chain
