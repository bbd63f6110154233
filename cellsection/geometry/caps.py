"""The four factors of a circular cap, the area between an arc and its chord.

A cap of half angle α on a circle, or any stretched image of one, is spanned by two vectors: e, half of the chord, and
b, from the middle of the chord to the middle of the arc. With D = b × e its integrals about the middle of the chord are

    ∫dA = D·area    ∫r dA = D·first·b    ∫r⊗r dA = D (rise·b⊗b + span·e⊗e)

and the factors depend on α alone. On the unit circle, with s = sin α, v = 1 - cos α, they are the textbook's

    α - s cos α,    2/3 s³ - cos α (α - s cos α),    ...

divided by powers of s and v. For a flat arc those differences lose every digit, so up to α = 1 they are summed as power
series with all factors α taken out; at α = 0 the factors are the parabola's 4/3, 8/15, 32/105 and 4/15.
"""

from __future__ import annotations

from functools import lru_cache
from math import atan, cos, factorial, sin
from typing import NamedTuple

__all__ = ["CapFactors", "cap_factors"]

TERMS = 15
SERIES_UP_TO = 1.0  # half angle in radians


class CapFactors(NamedTuple):
    """Area, first moment, and second moments along the rise b and along the half chord e, each divided by D."""

    area: float
    first: float
    rise: float
    span: float


def _series(lowest: int, numerator: tuple[tuple[int, int, int], ...], denominator: int) -> tuple[float, ...]:
    """Coefficients, from the power α^lowest on in steps of α², of a sum of c·sin(kα) and c·α·cos(kα).

    numerator : (c, k, 0) for c·sin(kα), (c, k, 1) for c·α·cos(kα); all divided by `denominator`
    """
    coefficients = []
    for power in range(lowest, lowest + 2 * TERMS, 2):
        total = sum(c * k ** (power - shift) * (power if shift else 1) for c, k, shift in numerator)
        sign = -1 if (power // 2) % 2 else 1
        coefficients.append(sign * total / (factorial(power) * denominator))
    return tuple(coefficients)


# α - sin 2α / 2
AREA = _series(3, ((-1, 2, 0),), 2)
# 3/4 sin α + 1/12 sin 3α - α cos α
FIRST = _series(5, ((9, 1, 0), (1, 3, 0), (-12, 1, 1)), 12)
# 3/4 α + 1/2 α cos 2α - 7/12 sin 2α - 1/48 sin 4α
RISE = _series(7, ((24, 2, 1), (-28, 2, 0), (-1, 4, 0)), 48)
# 1/4 α - 1/6 sin 2α + 1/48 sin 4α
SPAN = _series(5, ((-8, 2, 0), (1, 4, 0)), 48)


@lru_cache(maxsize=256)
def cap_factors(T: float) -> CapFactors:
    """Factors of the cap whose arc spans the angle 2α, from T = tan(α/2).

    T : 0 <= T, from the flattest arc to beyond the half circle at T = 1; a full circle has no chord

    Source: circular segment, e.g. Roark's Formulas for Stress and Strain, table of plane areas (from memory); the
    derivation runs as a test.

    >>> cap_factors(1.0).area       # half of the unit disc: π/2 on the half chord 1 and the rise 1
    1.5707963267948966
    >>> cap_factors(0.0)            # the parabola
    CapFactors(area=1.3333333333333333, first=0.5333333333333333, rise=0.3047619047619048, span=0.2666666666666667)
    """
    half = 2.0 * atan(T)
    if half <= SERIES_UP_TO:
        slope = half / T if T else 2.0
        to_sine, to_rise = slope * (1.0 + T * T) / 2.0, slope * slope * (1.0 + T * T) / 2.0  # α / s and α² / v
        area, first, rise, span = (_sum(terms, half * half) for terms in (AREA, FIRST, RISE, SPAN))
        return CapFactors(
            to_sine * to_rise * area,
            to_sine * to_rise**2 * first,
            to_sine * to_rise**3 * rise,
            to_sine**3 * to_rise * span,
        )
    s, v = 2.0 * T / (1.0 + T * T), 2.0 * T * T / (1.0 + T * T)
    area = half - sin(2.0 * half) / 2.0
    first = 0.75 * s + sin(3.0 * half) / 12.0 - half * cos(half)
    rise = 0.75 * half + half * cos(2.0 * half) / 2.0 - 7.0 / 12.0 * sin(2.0 * half) - sin(4.0 * half) / 48.0
    span = half / 4.0 - sin(2.0 * half) / 6.0 + sin(4.0 * half) / 48.0
    return CapFactors(area / (s * v), first / (s * v * v), rise / (s * v**3), span / (s**3 * v))


def _sum(coefficients: tuple[float, ...], square: float) -> float:
    total = 0.0
    for coefficient in reversed(coefficients):
        total = total * square + coefficient
    return total
