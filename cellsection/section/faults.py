"""What is wrong with a built-up section although its parts can be summed."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from math import fsum
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry.overlap import Flat, areal, common, connected, flat, layers, surplus
from cellsection.section.composite import totals
from cellsection.section.transformed import named

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from shapely.geometry.base import BaseGeometry

    from cellsection.section.part import Part

__all__ = ["Fault", "faults"]

# Pieces nearer than this share of the section's size touch each other, whatever the gap.
TOUCHING = 1e-5
SAME_RATIO = 1e-9


class Fault(NamedTuple):
    """One fault in one line: the part, what is wrong, what it does to the results, and what to do."""

    part: str
    fault: str
    effect: str
    remedy: str


def faults(parts: Sequence[Part], gap: float | None = None, unit: str = "") -> tuple[Fault, ...]:
    """Every fault found, none where the section is sound.

    gap : pieces up to this far apart count as connected, through lacing, welds or mortar [L]. Blank: parts must touch,
        and a part that a cut-out divides stays one, as a plate does beside its bolt holes. With a gap, 0 among them,
        the pieces that cut-outs leave are looked at instead.
    unit : of length, for the texts

    Reported are: totals that no real section has; two solid parts that cover the same area; cut-outs outside solid
    parts, twice at the same place, or with another n than the part they are cut out of; pieces not connected with the
    rest. A part set into the hole that is cut for it is no overlap. Arcs are drawn by chords that stray by 2e-5 of the
    part's size; an overlap below that is not seen.

    >>> from cellsection.geometry import SHAPES, placed
    >>> from cellsection.section import Part
    >>> web = placed(SHAPES["rectangle"].build(b=10, h=400), 0, 200)
    >>> flange = placed(SHAPES["rectangle"].build(b=200, h=20), 0, 0)
    >>> print(faults([Part("web", "rectangle", web), Part("flange", "rectangle", flange)], unit="mm")[0].fault)
    covers 100 mm² together with flange
    """
    found = []
    try:
        totals(parts)
    except InputError as error:
        found.append(Fault("all parts", error.fault, "there are no totals", error.remedy))
    if parts and not _plates_side_by_side(parts, gap or 0.0):
        seen = _Seen(parts, unit)
        found += [*seen.overlaps(), *seen.cut_outs(), *seen.loose(gap)]
    return tuple(found)


def _plates_side_by_side(parts: Sequence[Part], gap: float) -> bool:
    """Whether all parts are solid upright rectangles that hang together without overlapping: nothing is to be drawn.

    Most girders of plates are, and a workbook of one then never loads the drawing library. A rectangle is told by its
    area, which is that of its bounding box. Whatever is not plainly sound is looked at in full.
    """
    boxes = [part.region.bounds() for part in parts]
    size = max(*(b[2] - b[0] for b in boxes), *(b[3] - b[1] for b in boxes))
    for part, (left, low, right, high) in zip(parts, boxes, strict=True):
        area = (right - left) * (high - low)
        if part.sign < 0 or abs(part.region.moments().A - area) > 1e-12 * area:
            return False
    reached, waiting = [boxes[0]], boxes[1:]
    for here in reached:  # grows while it is walked: whatever touches a box that is reached is reached
        for other in list(waiting):
            across = max(here[0], other[0]) - min(here[2], other[2])  # negative where they lie over each other
            along = max(here[1], other[1]) - min(here[3], other[3])
            if max(across, along) <= max(gap, TOUCHING * size):
                reached.append(other)
                waiting.remove(other)
    return not waiting and all(
        max(max(a[0], b[0]) - min(a[2], b[2]), max(a[1], b[1]) - min(a[3], b[3])) >= -1e-12 * size
        for a, b in combinations(boxes, 2)
    )


@dataclass(frozen=True, slots=True)
class _Laid:
    """A part, what messages call it, and its flattened region."""

    part: Part
    name: str
    flat: Flat

    @property
    def shape(self) -> BaseGeometry:
        return self.flat.shape


class _Seen:
    """The parts laid over each other, and the questions asked about them."""

    def __init__(self, parts: Sequence[Part], unit: str) -> None:
        laid = [_Laid(part, named(part, parts), flat(part.region)) for part in parts]
        self.solids = [each for each in laid if each.part.sign > 0]
        self.cuts = [each for each in laid if each.part.sign < 0]
        self.solid = layers(each.shape for each in self.solids)
        self.cut = layers(each.shape for each in self.cuts)
        self.unit = unit

    def overlaps(self) -> Iterator[Fault]:
        """Solid parts that count the same area twice, no cut-out taking it away again."""
        if len(self.solid) < 2:
            return
        twice = surplus(self.solid, self.cut, by=2)
        for one, other in combinations(self.solids, 2):
            area = float(common(common(one.shape, other.shape), twice).area)
            if area > one.flat.doubt + other.flat.doubt:
                yield Fault(
                    one.name,
                    f"covers {self._area(area)} together with {other.name}",
                    "that area counts twice",
                    "Move or trim one of them, or cut the area out of the other one; a bar entered with n - 1 may stay",
                )

    def cut_outs(self) -> Iterator[Fault]:
        """Cut-outs that take away what is not there, or at another modular ratio than it was given."""
        import shapely

        solid = self.solid[0] if self.solid else shapely.Polygon()
        doubt = fsum(each.flat.doubt for each in self.solids)
        for each in self.cuts:
            area = float(each.shape.difference(solid).area)
            if area > each.flat.doubt + doubt:
                share = "all of it" if area > each.shape.area - doubt else self._area(area)
                yield Fault(
                    each.name,
                    f"cut-out, {share} outside the solid parts",
                    "area is taken away that was never there",
                    "Move the cut-out into its part, or enter only the piece inside",
                )
            yield from self._other_ratio(each)
        if len(self.cut) < 2:
            return
        missing = common(surplus(self.cut, self.solid), solid)
        for one, other in combinations(self.cuts, 2):
            area = float(common(common(one.shape, other.shape), missing).area)
            if area > one.flat.doubt + other.flat.doubt:
                yield Fault(
                    one.name,
                    f"cut-out, covers {self._area(area)} together with the cut-out {other.name}",
                    "that area is taken away twice",
                    "Move or trim one of them",
                )

    def _other_ratio(self, cut: _Laid) -> Iterator[Fault]:
        """A cut-out whose n is that of none of the parts it lies in."""
        import shapely

        same = [each for each in self.solids if abs(each.part.n - cut.part.n) <= SAME_RATIO * cut.part.n]
        if len(same) == len(self.solids):
            return
        rest = areal(cut.shape.difference(shapely.union_all([each.shape for each in same])))
        for each in self.solids:
            if each in same:
                continue
            area = float(common(rest, each.shape).area)
            if area > cut.flat.doubt + each.flat.doubt + fsum(one.flat.doubt for one in same):
                yield Fault(
                    cut.name,
                    f"cut-out with n = {cut.part.n:g} in {each.name} with n = {each.part.n:g}",
                    "its area is taken away at the wrong stiffness",
                    f"Enter n = {each.part.n:g} for the cut-out",
                )

    def loose(self, gap: float | None) -> Iterator[Fault]:
        """Pieces that do not touch the largest one, nor each other through the gap."""
        if not self.solids:
            return
        material = self.solid[0] if gap is None else surplus(self.solid, self.cut)
        if material.is_empty:
            return
        left, low, right, high = material.bounds
        stray = max(each.flat.stray for each in (*self.solids, *self.cuts))
        touching = 2.0 * stray + TOUCHING * max(right - left, high - low)
        groups = connected(material, max(gap or 0.0, touching), sliver=2.0 * stray)
        for group in groups[1:]:
            names = [each.name for each in self.solids if common(each.shape, group).area > each.flat.doubt]
            distance = min(float(group.distance(other)) for other in groups if other is not group)
            yield Fault(
                ", ".join(names),
                f"not connected with the rest: {distance:.4g}{self._space}{self.unit} apart",
                "the totals take all pieces to act as one",
                "Close the gap, or name the distance that lacing or welds bridge as gap",
            )

    @property
    def _space(self) -> str:
        return " " if self.unit else ""

    def _area(self, value: float) -> str:
        return f"{value:.4g}{self._space}{self.unit}{'²' if self.unit else ''}"
