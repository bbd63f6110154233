"""How far the material reaches in a direction, where cut-outs may have trimmed it."""

from __future__ import annotations

from itertools import combinations, pairwise
from typing import TYPE_CHECKING

from cellsection.errors import InputError
from cellsection.geometry.cut import spans
from cellsection.geometry.meetings import meetings
from cellsection.geometry.moments import cosine_sine

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from cellsection.geometry.region import Region
    from cellsection.geometry.segments import Segment

__all__ = ["reach"]

# Slivers thinner than this share of the section are rounding: a cut-out flush with an edge leaves one.
SLIVER = 1e-9


def reach(solids: Sequence[Region], cut_outs: Sequence[Region], direction: float) -> float:
    """The greatest x cos φ + y sin φ of the material, φ the `direction` in degrees; exact on lines and arcs.

    Material is wherever more solids than cut-outs lie over each other: a bar in the hole cut for it is material.
    Raises InputError where none is left.

    No corner, crossing or turning point of an outline lies between two neighbouring levels of the method, so a level
    midway between them sees as many spans of material as any other; the answer is the upper of the two highest such
    levels with material between them.

    >>> from cellsection.geometry import SHAPES, placed
    >>> plate = SHAPES["rectangle"].build(b=100, h=20)
    >>> groove = placed(SHAPES["rectangle"].build(b=100, h=8), 50, 20, datum="top")
    >>> reach([plate], [groove], direction=90)
    12.0
    """
    ux, uy = cosine_sine(direction)
    extents = [region.bounds(direction) for region in solids]
    top, bottom = max(box[2] for box in extents), min(box[0] for box in extents)
    sliver = SLIVER * max(top - bottom, max(box[3] for box in extents) - min(box[1] for box in extents))
    near = [region for region in cut_outs if region.bounds(direction)[2] > top - sliver]
    if not near:
        return top
    signed = [(region, 1) for region in solids] + [(region, -1) for region in cut_outs]
    for high, low in _slabs([region for region, _sign in signed], ux, uy, top, bottom, sliver):
        if _material(signed, ux, uy, (high + low) / 2.0) > sliver:
            return high
    raise InputError("cut-outs leave no material", remedy="Check the signs, and the places and sizes of the cut-outs")


def _slabs(
    regions: Sequence[Region], ux: float, uy: float, top: float, bottom: float, sliver: float
) -> Iterator[tuple[float, float]]:
    """Neighbouring levels, from the top down, between which no outline has a corner, a turning point or a crossing."""
    segments: list[tuple[int, Segment, float, float]] = []
    for i, region in enumerate(regions):
        for loop in region.loops:
            segments += [(i, segment, *segment.extent(ux, uy)) for segment in loop]
    # Arc ends are levels, too: between them and the extremes an arc only rises or falls.
    levels = {value for _i, _segment, low, high in segments for value in (low, high)}
    levels |= {ux * segment.x1 + uy * segment.y1 for _i, segment, _low, _high in segments}
    bands = [top, *sorted((level for level in levels if bottom < level < top), reverse=True), bottom]
    for high, low in pairwise(bands):
        if high - low <= sliver:
            continue
        active = [(i, segment) for i, segment, least, most in segments if least < high and most > low]
        crossings = {
            level
            for (i, one), (j, other) in combinations(active, 2)
            if i != j
            for x, y in meetings(one, other)
            if low < (level := ux * x + uy * y) < high
        }
        yield from (
            (upper, lower)
            for upper, lower in pairwise([high, *sorted(crossings, reverse=True), low])
            if upper - lower > sliver
        )


def _material(signed: Sequence[tuple[Region, int]], ux: float, uy: float, level: float) -> float:
    """Length of the level along which solids outnumber cut-outs."""
    changes = []
    for region, sign in signed:
        for start, end in spans(region, ux, uy, level):
            changes += [(start, sign), (end, -sign)]
    changes.sort()
    length, count = 0.0, 0
    for (place, change), (after, _change) in pairwise(changes):
        count += change
        if count > 0:
            length += after - place
    return length
