"""Whether the sides of a polygon cross each other: then its integrals count some of its area twice, or negatively."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from cellsection.geometry.segments import Line

__all__ = ["refuse_crossing"]

# Up to this many sides the pairs are tried here; shapely, which takes a while to load, is asked about longer outlines.
FEW_SIDES = 150
AGREE = 1e-9


def refuse_crossing(sides: Sequence[Line], enclosed: float, numbers: Sequence[int]) -> None:
    """Raise InputError where the outline crosses itself, or runs to a corner and straight back.

    sides : of a closed polygon
    enclosed : the area by its boundary integral, positive
    numbers : of the corner at which each side starts, as the engineer counts them

    Sides that meet are no fault by themselves (a cut that leads to a hole is run along twice). The outline is sound
    where its boundary integral equals the area it covers by the even-odd rule, which shapely gives.
    """
    for i, side in enumerate(sides):
        # A spike has no area, yet an extreme fibre would be looked for at its tip.
        if _folded(sides[i - 1], side):
            raise InputError(
                f"the outline runs to corner {numbers[i]} and straight back",
                remedy="Leave that corner out, or correct its place",
                column="x",
            )
    if len(sides) <= FEW_SIDES and next(_meeting(sides), None) is None:
        return
    import shapely

    shape = shapely.Polygon([(side.x1, side.y1) for side in sides])
    if shape.is_valid or abs(shapely.make_valid(shape).area - enclosed) <= AGREE * enclosed:
        return
    pairs = [pair for pair in _meeting(sides) if _cross(sides[pair[0]], sides[pair[1]])] or list(_meeting(sides))
    first, second = (f"{numbers[i]}-{numbers[(i + 1) % len(sides)]}" for i in pairs[0])
    raise InputError(
        f"the outline crosses itself where side {first} meets side {second}",
        remedy="List the corners in the order in which they follow each other along the outline",
        column="x",
    )


def _meeting(sides: Sequence[Line]) -> Iterator[tuple[int, int]]:
    """Pairs of sides, other than neighbours, that cross or touch."""
    count = len(sides)
    for i, side in enumerate(sides):
        left, right, low, high = _box(side)
        for j in range(i + 1, count):
            other = sides[j]
            if (
                max(other.x1, other.x2) < left
                or min(other.x1, other.x2) > right
                or max(other.y1, other.y2) < low
                or min(other.y1, other.y2) > high
            ):
                continue
            neighbours = j == i + 1 or (i == 0 and j == count - 1)
            if not neighbours and not _apart(side, other):
                yield i, j


def _box(side: Line) -> tuple[float, float, float, float]:
    return min(side.x1, side.x2), max(side.x1, side.x2), min(side.y1, side.y2), max(side.y1, side.y2)


def _side_of(line: Line, x: float, y: float) -> float:
    """Twice the area between the line and the point, 0 within rounding."""
    ax, ay, bx, by = line.x2 - line.x1, line.y2 - line.y1, x - line.x1, y - line.y1
    cross = ax * by - ay * bx
    return cross if abs(cross) > 1e-12 * (abs(ax * by) + abs(ay * bx)) else 0.0


def _apart(one: Line, other: Line) -> bool:
    """Whether one of the two lies wholly on one side of the other's line; else, their boxes meeting, they meet."""
    return any(
        _side_of(line, far.x1, far.y1) * _side_of(line, far.x2, far.y2) > 0.0
        for line, far in ((one, other), (other, one))
    )


def _cross(one: Line, other: Line) -> bool:
    """Whether each has its ends on the two sides of the other."""
    return all(
        _side_of(line, far.x1, far.y1) * _side_of(line, far.x2, far.y2) < 0.0
        for line, far in ((one, other), (other, one))
    )


def _folded(before: Line, after: Line) -> bool:
    """Whether the outline turns back where the two meet."""
    ax, ay, bx, by = before.x2 - before.x1, before.y2 - before.y1, after.x2 - after.x1, after.y2 - after.y1
    return ax * bx + ay * by < 0.0 and _side_of(before, after.x2, after.y2) == 0.0
