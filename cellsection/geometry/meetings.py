"""Where two segments meet: exact for lines and arcs of circles and ellipses."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

from cellsection.geometry.segments import Arc, Line, Segment

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["meetings", "real_roots"]

SLACK = 1e-9  # beyond the ends of a segment, in its own z


def meetings(one: Segment, other: Segment) -> list[tuple[float, float]]:
    """The points that two segments share; none is listed where one runs along the other.

    >>> meetings(Line(0, 0, 2, 2), Line(0, 2, 2, 0))
    [(1.0, 1.0)]
    """
    if isinstance(one, Line):
        return _on_line(one, other)
    if isinstance(other, Line):
        return _on_line(other, one)
    return _of_arcs(one, other)


def _on_line(line: Line, other: Segment) -> list[tuple[float, float]]:
    dx, dy = line.x2 - line.x1, line.y2 - line.y1
    length = dx * dx + dy * dy
    found = []
    for z in other.stations(-dy, dx, dx * line.y1 - dy * line.x1):
        x, y = other.point(z)
        share = ((x - line.x1) * dx + (y - line.y1) * dy) / length
        if -SLACK <= share <= 1.0 + SLACK:
            found.append((x, y))
    return found


def _of_arcs(one: Arc, other: Arc) -> list[tuple[float, float]]:
    """The points of `one` whose place X, Y in the frame of the other's half chord and rise is on its curve.

    From the parametrisation X = (1 + T²) z / (1 + T² z²), Y = (1 - z²) / (1 + T² z²) follows, z eliminated,
    X² + (1 - T²) Y + T² Y² = 1; the arc is its part with Y >= 0. With the parametrisation of `one` inserted that is a
    quartic in z.
    """
    ex, ey = (other.x2 - other.x1) / 2.0, (other.y2 - other.y1) / 2.0
    size = ex * other.by - ey * other.bx
    if not size:
        return []
    mx, my = (one.x1 + one.x2 - other.x1 - other.x2) / 2.0, (one.y1 + one.y2 - other.y1 - other.y2) / 2.0
    fx, fy, t2 = (one.x2 - one.x1) / 2.0, (one.y2 - one.y1) / 2.0, one.T * one.T
    # Quadratics in z, lowest power first: the place of the point times the denominator 1 + T² z².
    x = (mx + one.bx, fx * (1.0 + t2), mx * t2 - one.bx)
    y = (my + one.by, fy * (1.0 + t2), my * t2 - one.by)
    X = tuple((px * other.by - py * other.bx) / size for px, py in zip(x, y, strict=True))
    Y = tuple((ex * py - ey * px) / size for px, py in zip(x, y, strict=True))
    W, T2 = (1.0, 0.0, t2), other.T * other.T
    squares = (_product(X, X), _product(Y, W), _product(Y, Y), _product(W, W))
    quartic = [a + (1.0 - T2) * b + T2 * c - d for a, b, c, d in zip(*squares, strict=True)]
    found = []
    for z in real_roots(quartic, -1.0, 1.0):
        rise = (Y[0] + z * (Y[1] + z * Y[2])) / (1.0 + t2 * z * z)
        if rise >= -SLACK:
            found.append(one.point(z))
    return found


def real_roots(coefficients: Sequence[float], low: float, high: float) -> list[float]:
    """Real roots within [low, high] of a polynomial, lowest power first, each once.

    Between the roots of its derivative a polynomial is monotonic, and there each sign change is halved down to one
    root; a double root is found where the polynomial almost vanishes at a root of the derivative.

    >>> real_roots([-1.0, 0.0, 4.0], -1.0, 1.0)
    [-0.5, 0.5]
    """
    scale = max(map(abs, coefficients))
    terms = list(coefficients)
    while terms and abs(terms[-1]) <= 1e-15 * scale:
        terms.pop()
    if len(terms) < 2:
        return []
    if len(terms) == 2:
        root = -terms[0] / terms[1]
        return [root] if low <= root <= high else []
    turning = real_roots([power * term for power, term in enumerate(terms)][1:], low, high)
    nodes = sorted({low, *turning, high})
    values = [_value(terms, node) for node in nodes]
    found = [node for node, value in zip(nodes, values, strict=True) if abs(value) <= 1e-14 * scale]
    for (start, end), (first, last) in zip(pairwise(nodes), pairwise(values), strict=True):
        if start in found or end in found or first * last > 0.0:
            continue
        rising = last > first
        while start < (middle := (start + end) / 2.0) < end:
            if (_value(terms, middle) < 0.0) == rising:
                start = middle
            else:
                end = middle
        found.append(middle)
    return sorted(found)


def _value(terms: Sequence[float], z: float) -> float:
    total = 0.0
    for term in reversed(terms):
        total = total * z + term
    return total


def _product(one: Sequence[float], other: Sequence[float]) -> list[float]:
    total = [0.0] * (len(one) + len(other) - 1)
    for i, a in enumerate(one):
        for j, b in enumerate(other):
            total[i + j] += a * b
    return total
