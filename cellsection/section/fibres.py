"""Extreme fibres and elastic section moduli."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from cellsection.errors import InputError
from cellsection.geometry import cosine_sine, second_moments
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
    """Extreme fibres of the material present, and elastic moduli, in axes turned by `turn` degrees about the centroid."""
    section = transformed(parts)
    c, s = cosine_sine(turn)
    x, y = c * section.x + s * section.y, c * section.y - s * section.x
    Ix, Iy, _Ixy = second_moments(section.Ix, section.Iy, section.Ixy, turn)
    boxes = [part.region.bounds(turn) for part in parts if part.sign > 0]
    left, low, right, high = (
        pick(values) for pick, values in zip((min, min, max, max), zip(*boxes, strict=True), strict=True)
    )
    reaches = {"top": high - y, "bottom": y - low, "left": x - left, "right": right - x}
    for side, distance in reaches.items():
        if not distance > 0.0:
            raise InputError(f"the centroid lies outside the {side} fibre", remedy="Check the signs")
    return Fibres(*(Fibre(d, (Ix if side in ("top", "bottom") else Iy) / d) for side, d in reaches.items()))
