"""Extreme fibres and elastic section moduli."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry import cosine_sine, reach, second_moments
from cellsection.section.transformed import transformed

if TYPE_CHECKING:
    from collections.abc import Sequence

    from cellsection.section.part import Part

__all__ = ["Fibre", "Fibres", "fibres"]


class Fibre(NamedTuple):
    """Distance of the extreme fibre from the centroid [L], and the elastic section modulus there [L³]."""

    distance: float
    modulus: float


class Fibres(NamedTuple):
    """The extreme fibres in axes through the centroid: top and bottom go with Ix, left and right with Iy."""

    top: Fibre
    bottom: Fibre
    left: Fibre
    right: Fibre


def fibres(parts: Sequence[Part], turn: float = 0.0) -> Fibres:
    """Extreme fibres of the material present, and elastic moduli, in axes turned by `turn` degrees about the centroid.

    With `turn` the angle of the principal axes, these are the principal moduli. Material is where solid parts outnumber
    cut-outs, so that a notch in an edge moves the extreme fibre inwards; on lines and arcs it is found exactly.
    The moduli are I / distance of the transformed section: multiply the stress M / modulus by the part's own n.

    Raises InputError as `totals`, and where cut-outs leave no material, or none on one side of the centroid.
    Source: elastic section modulus S = I/c, any text, e.g. Gere, Mechanics of Materials, chapter 5 (from memory).

    >>> from cellsection.geometry import SHAPES
    >>> from cellsection.section import Part
    >>> fibres([Part("", "rectangle", SHAPES["rectangle"].build(b=60, h=120))]).top         # b·h²/6
    Fibre(distance=60.0, modulus=144000.0)
    """
    section = transformed(parts)
    c, s = cosine_sine(turn)
    x, y = c * section.x + s * section.y, c * section.y - s * section.x
    Ix, Iy, _Ixy = second_moments(section.Ix, section.Iy, section.Ixy, turn)
    solids = [part.region for part in parts if part.sign > 0]
    cut_outs = [part.region for part in parts if part.sign < 0]

    def fibre(side: str, direction: float, centroid: float, second_moment: float) -> Fibre:
        distance = reach(solids, cut_outs, turn + direction) - centroid
        if not distance > 0.0:
            raise InputError(
                f"the {side} of the centroid has no material, which no real section has",
                remedy="Check the signs, and that every cut-out has the n of the part it is cut out of",
            )
        return Fibre(distance, second_moment / distance)

    return Fibres(
        fibre("top", 90.0, y, Ix),
        fibre("bottom", -90.0, -y, Ix),
        fibre("left", 180.0, -x, Iy),
        fibre("right", 0.0, x, Iy),
    )
