"""The six integrals of a plane area, about the origin and about its centroid, and how they are carried between axes."""

from __future__ import annotations

from math import cos, fsum, isfinite, radians, sin
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["Centroidal", "Moments", "cosine_sine", "second_moments", "summed"]


class Moments(NamedTuple):
    """Integrals of an area about the origin of the axes, x to the right and y up.

    A : ∫dA [L²]
    Qx, Qy : first moments about x and y, ∫y dA and ∫x dA [L³]
    Ix, Iy, Ixy : ∫y² dA, ∫x² dA and ∫xy dA [L⁴]
    """

    A: float
    Qx: float
    Qy: float
    Ix: float
    Iy: float
    Ixy: float


class Centroidal(NamedTuple):
    """Area, centroid, and the second moments about the axes through that centroid.

    This is the form in which a part far from the origin keeps its digits: its own second moments never meet the
    large A·y² that the parallel-axis theorem adds.

    >>> Centroidal(A=8.0, x=0.0, y=10.0, Ix=10.0, Iy=3.0, Ixy=0.0).about_origin().Ix
    810.0
    """

    A: float
    x: float
    y: float
    Ix: float
    Iy: float
    Ixy: float

    def about_origin(self) -> Moments:
        """The same area about the origin, by the parallel-axis theorem (Huygens and Steiner).

        Source: any text, e.g. Gere, Mechanics of Materials, chapter 12 (from memory).
        """
        A, x, y, Ix, Iy, Ixy = self
        return Moments(A, A * y, A * x, Ix + A * y * y, Iy + A * x * x, Ixy + A * x * y)


def summed(moments: Iterable[Moments]) -> Moments:
    """The sum, each integral added without intermediate rounding."""
    columns = zip(*moments, strict=True)
    return Moments(*(fsum(column) for column in columns))


def second_moments(Ix: float, Iy: float, Ixy: float, turn: float) -> tuple[float, float, float]:
    """Second and product moments about axes through the same point, turned anticlockwise by `turn` degrees.

    Source: transformation of second moments, e.g. Gere, Mechanics of Materials, chapter 12 (from memory):
    Ix' = Ix cos²θ + Iy sin²θ - 2 Ixy sinθ cosθ, and so on.

    >>> second_moments(300.0, 100.0, 50.0, turn=90.0)
    (100.0, 300.0, -50.0)
    """
    c, s = cosine_sine(turn)
    turned_x = Ix * c * c + Iy * s * s - 2.0 * Ixy * s * c
    turned_y = Ix * s * s + Iy * c * c + 2.0 * Ixy * s * c
    return turned_x, turned_y, (Ix - Iy) * s * c + Ixy * (c * c - s * s)


def cosine_sine(degrees: float) -> tuple[float, float]:
    """Cosine and sine of an angle in degrees, exact at every quarter turn.

    Raises InputError for an angle that is no finite number.

    >>> cosine_sine(90.0), cosine_sine(-540.0)
    ((0.0, 1.0), (-1.0, 0.0))
    """
    if not isfinite(degrees):
        raise InputError(f"the angle {degrees} is not a number", remedy="Enter an angle in degrees")
    turn = degrees % 360.0
    quarters, rest = divmod(turn, 90.0)
    # Within one quarter, and mirrored at 45 degrees, so that sin 30 and cos 60 are the very same number.
    c, s = (
        (cos(radians(rest)), sin(radians(rest)))
        if rest <= 45.0
        else (sin(radians(90.0 - rest)), cos(radians(90.0 - rest)))
    )
    return [(c, s), (-s, c), (-c, -s), (s, -c)][int(quarters) % 4]
