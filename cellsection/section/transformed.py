"""The transformed section: areas and second moments of all parts, weighted by sign and modular ratio, summed."""

from __future__ import annotations

from math import fsum, hypot, sqrt
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry import Centroidal

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["Transformed", "named", "radius_of_gyration", "transformed", "weighted"]

# A product moment, or a difference between Ix and Iy, below this share of the larger cannot be told from rounding.
ROUNDING = 1e-12
EPSILON = 2.0**-52
LARGEST_RATIO = 1e12  # no two materials differ by more; a larger number is a slip


class Transformed(NamedTuple):
    """Area, centroid and second moments about the centroid of the transformed section.

    rounding : below this a product moment, or a difference of Ix and Iy, is rounding and counts as zero [L⁴]
    """

    A: float
    x: float
    y: float
    Ix: float
    Iy: float
    Ixy: float
    rounding: float


def weighted(part: Part) -> Centroidal:
    """Area and own second moments of a part times its sign and modular ratio, and its centroid."""
    A, x, y, Ix, Iy, Ixy = part.region.centroidal()
    w = part.weight
    return Centroidal(w * A, x, y, w * Ix, w * Iy, w * Ixy)


def transformed(parts: Sequence[Part]) -> Transformed:
    """The sums of the hand method: A, centroid, and Ix = Σ(own Ix + A·dy²) about it.

    Sources: parallel-axis theorem for composite areas and the transformed section of beams of two materials, e.g.
    Gere, Mechanics of Materials, chapters 6 and 12 (from memory).

    A symmetric section's Ixy is given as 0: what rounding leaves of it is not passed on as if it were a result.
    Raises InputError: no parts, a part whose sign or n cannot be, no net area, second moments that are not positive.
    """
    if not parts:
        raise InputError("there is no part", remedy="Enter a part with its shape and dimensions")
    for part in parts:
        if part.sign not in (1, -1):
            raise InputError(f"sign = {part.sign} is neither 1 nor -1", remedy="Enter 1 for solid, -1 for a cut-out")
        if not 0.0 < part.n <= LARGEST_RATIO:
            raise InputError(
                f"n = {part.n:g} is not a positive ratio", remedy="Enter E of the part over E of the reference"
            )
    rows = [weighted(part) for part in parts]
    net, gross = fsum(row.A for row in rows), fsum(abs(row.A) for row in rows)
    smallest = ROUNDING * gross
    if not net > smallest:
        met = "negative" if net < -smallest else "zero"
        raise InputError(
            f"the net area is {met}: cut-outs take away all that solid parts give",
            remedy="Check the signs: 1 for solid, -1 for a cut-out",
        )
    x, y = fsum(row.A * row.x for row in rows) / net, fsum(row.A * row.y for row in rows) / net
    Ix = fsum([row.Ix for row in rows] + [row.A * (row.y - y) ** 2 for row in rows])
    Iy = fsum([row.Iy for row in rows] + [row.A * (row.x - x) ** 2 for row in rows])
    Ixy = fsum([row.Ixy for row in rows] + [row.A * (row.x - x) * (row.y - y) for row in rows])
    for symbol, value in (("Ix", Ix), ("Iy", Iy)):
        if not value > 0.0:
            raise InputError(
                f"the second moment {symbol} = {value:g} is not positive, which no real section has",
                remedy="Check the signs, and that every cut-out lies inside a solid part",
            )
    larger = max(Ix, Iy)
    # Solids and cut-outs that almost cancel leave the rounding of what they were. Places are rounded, too, by EPSILON
    # of how far out they are, on an arm of about one radius of gyration.
    cancelled = max(fsum(abs(row.Ix) for row in rows), fsum(abs(row.Iy) for row in rows))
    shifted = gross * hypot(x, y) * sqrt(larger / net)
    rounding = ROUNDING * larger + EPSILON * (64.0 * cancelled + 8.0 * shifted)
    return Transformed(net, x, y, Ix, Iy, Ixy if abs(Ixy) > rounding else 0.0, rounding)


def radius_of_gyration(second_moment: float, area: float) -> float:
    """√(I/A) [L]. Raises InputError where either is not positive; a negative moment is never made positive.

    >>> radius_of_gyration(second_moment=64.0, area=4.0)
    4.0
    """
    if not (second_moment > 0.0 and area > 0.0):
        raise InputError(
            f"a radius of gyration needs a positive second moment and area, met {second_moment:g} and {area:g}",
            remedy="Check the signs, and that every cut-out lies inside a solid part",
        )
    return sqrt(second_moment / area)


def named(part: Part, parts: Sequence[Part] = ()) -> str:
    """What a message calls the part: its label, else its row or shape; the row too where `parts` share the label."""
    row = "" if part.row is None else f"row {part.row}"
    if not part.label:
        return row or part.shape
    shared = row and any(other.label == part.label for other in parts if other is not part)
    return f"{part.label} ({row})" if shared else part.label
