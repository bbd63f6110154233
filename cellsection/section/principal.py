"""Principal axes: the axes of greatest and least second moment through the centroid."""

from __future__ import annotations

from math import atan2, degrees, hypot
from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.section.transformed import Transformed, radius_of_gyration, transformed

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["Principal", "principal", "principal_axes"]


class Principal(NamedTuple):
    """Principal second moments I1 >= I2 [L⁴], the angle from x to axis 1 [°], radii of gyration r1 >= r2 [L]."""

    I1: float
    I2: float
    angle: float
    r1: float
    r2: float


def principal(parts: Sequence[Part]) -> Principal:
    """Principal moments and axes of the transformed section through its centroid.

    angle : from the x axis to axis 1, the axis about which the moment is I1, in degrees anticlockwise, above -90 and up
        to 90. It is exactly 0 or 90 where Ixy vanishes, and 0 where I1 = I2 as well: then every axis is principal.
        Below the `rounding` of the transformed section both Ixy and Ix - Iy count as zero.

    Source: I1,2 = (Ix + Iy)/2 ± √(((Ix - Iy)/2)² + Ixy²), tan 2θ = -2·Ixy/(Ix - Iy), e.g. Gere, Mechanics of
    Materials, chapter 12 (from memory).
    """
    section = transformed(parts)
    I1, I2, angle = principal_axes(section)
    return Principal(I1, I2, angle, radius_of_gyration(I1, section.A), radius_of_gyration(I2, section.A))


def principal_axes(section: Transformed) -> tuple[float, float, float]:
    """I1, I2 and the angle in degrees of a transformed section; raises InputError where I2 is not positive.

    >>> principal_axes(Transformed(A=1, x=0, y=0, Ix=3.0, Iy=3.0, Ixy=-2.0, rounding=1e-12))
    (5.0, 1.0, 45.0)
    """
    _A, _x, _y, Ix, Iy, Ixy, rounding = section
    difference = Ix - Iy if abs(Ix - Iy) > rounding else 0.0
    if not Ixy:
        # No product moment: x and y are the axes themselves, to the last digit.
        return max(Ix, Iy), min(Ix, Iy), 90.0 if difference < 0.0 else 0.0
    I1 = (Ix + Iy) / 2.0 + hypot((Ix - Iy) / 2.0, Ixy)
    I2 = (Ix * Iy - Ixy * Ixy) / I1  # the product of both is the determinant; taking the difference would cancel
    if not I2 > 0.0:
        raise InputError(
            f"the least second moment I2 = {I2:g} is not positive, which no real section has",
            remedy="Check the signs, and that every cut-out lies inside a solid part",
        )
    return I1, I2, degrees(atan2(0.0 - 2.0 * Ixy, difference)) / 2.0
