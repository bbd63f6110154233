"""The sections of the tables computed by hand, without the library: rectangles and corner pieces summed exactly.

A rolled section is rectangles, plus the concave corner piece at every root, less the same piece at every rounded
corner. The corner piece of radius r lies between two perpendicular lines and the quarter circle that touches both; its
integrals from the corner are those of the square r x r less those of the quarter circle about (r, r):

    A = r²(1 - π/4)    ∫u dA = r³(5/6 - π/4)    ∫u² dA = r⁴(1 - 5π/16)    ∫uv dA = r⁴(19/24 - π/4)

No boundary integral is used, so agreement with the library is agreement of two methods. The tapered channel alone is
a polygon with arcs of 4000 chords.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from math import atan, cos, fsum, pi, sin

from mpmath import mp, mpf

__all__ = [
    "HandTotals",
    "angle",
    "arc",
    "box",
    "channel",
    "i_section",
    "lipped_channel",
    "polygon",
    "tapered_channel",
    "tee",
    "tube",
]

mp.dps = 30


@dataclass
class HandTotals:
    """Running sums of the hand method about the origin, and what follows from them about the centroid."""

    A: mpf = field(default_factory=mpf)
    Qx: mpf = field(default_factory=mpf)
    Qy: mpf = field(default_factory=mpf)
    Ixo: mpf = field(default_factory=mpf)
    Iyo: mpf = field(default_factory=mpf)
    Ixyo: mpf = field(default_factory=mpf)

    def rectangle(self, x1: float, y1: float, x2: float, y2: float, weight: float = 1) -> HandTotals:
        """Add the rectangle between two opposite corners, times weight."""
        x1, y1, x2, y2 = (mpf(str(v)) if isinstance(v, float) else mpf(v) for v in (x1, y1, x2, y2))
        b, h, w = x2 - x1, y2 - y1, mpf(weight)
        area, x, y = w * b * h, (x1 + x2) / 2, (y1 + y2) / 2
        self.A += area
        self.Qx += area * y
        self.Qy += area * x
        self.Ixo += area * (h**2 / 12 + y**2)
        self.Iyo += area * (b**2 / 12 + x**2)
        self.Ixyo += area * x * y
        return self

    def corner(self, x: float, y: float, right: int, up: int, r: float, weight: float = 1) -> HandTotals:
        """Add the corner piece of radius r at the corner (x, y), lying to its right (1) or left (-1), up or down."""
        x, y, r = (mpf(str(v)) if isinstance(v, float) else mpf(v) for v in (x, y, r))
        w, pi_ = mpf(weight), mp.pi
        area, first = w * r**2 * (1 - pi_ / 4), w * r**3 * (mpf(5) / 6 - pi_ / 4)
        second, product = w * r**4 * (1 - 5 * pi_ / 16), w * r**4 * (mpf(19) / 24 - pi_ / 4)
        self.A += area
        self.Qx += area * y + up * first
        self.Qy += area * x + right * first
        self.Ixo += area * y**2 + 2 * y * up * first + second
        self.Iyo += area * x**2 + 2 * x * right * first + second
        self.Ixyo += area * x * y + x * up * first + y * right * first + right * up * product
        return self

    @property
    def x(self) -> mpf:
        return self.Qy / self.A

    @property
    def y(self) -> mpf:
        return self.Qx / self.A

    @property
    def Ix(self) -> mpf:
        return self.Ixo - self.A * self.y**2

    @property
    def Iy(self) -> mpf:
        return self.Iyo - self.A * self.x**2

    @property
    def Ixy(self) -> mpf:
        return self.Ixyo - self.A * self.x * self.y

    @property
    def principal(self) -> tuple[mpf, mpf]:
        mean, half = (self.Ix + self.Iy) / 2, (self.Ix - self.Iy) / 2
        radius = mp.sqrt(half**2 + self.Ixy**2)
        return mean + radius, mean - radius


def i_section(h: float, b: float, tw: float, tf: float, r: float) -> HandTotals:
    """Doubly symmetric I, bottom left of its bounding box at the origin, as all of these."""
    left, right = (b - tw) / 2, (b + tw) / 2
    total = HandTotals().rectangle(0, 0, b, tf).rectangle(0, h - tf, b, h).rectangle(left, tf, right, h - tf)
    for x, side in ((left, -1), (right, 1)):
        total.corner(x, tf, side, 1, r).corner(x, h - tf, side, -1, r)
    return total


def channel(h: float, b: float, tw: float, tf: float, r: float) -> HandTotals:
    """Channel of parallel flanges, the back of its web on the left."""
    total = HandTotals().rectangle(0, 0, tw, h).rectangle(tw, 0, b, tf).rectangle(tw, h - tf, b, h)
    return total.corner(tw, tf, 1, 1, r).corner(tw, h - tf, 1, -1, r)


def tee(h: float, b: float, tw: float, tf: float, r: float) -> HandTotals:
    """Tee with its flange on top."""
    left, right = (b - tw) / 2, (b + tw) / 2
    total = HandTotals().rectangle(0, h - tf, b, h).rectangle(left, 0, right, h - tf)
    return total.corner(left, h - tf, -1, -1, r).corner(right, h - tf, 1, -1, r)


def angle(h: float, b: float, t: float, r1: float, r2: float) -> HandTotals:
    """Angle of upright leg h and lying leg b, heel at the origin, root r1 and toes r2."""
    total = HandTotals().rectangle(0, 0, t, h).rectangle(t, 0, b, t).corner(t, t, 1, 1, r1)
    return total.corner(t, h, -1, -1, r2, -1).corner(b, t, -1, -1, r2, -1)


def box(h: float, b: float, t: float, ro: float, ri: float) -> HandTotals:
    """Rectangular hollow section of outside radius ro and inside radius ri."""
    total = HandTotals()
    for inset, r, weight in ((0, ro, 1), (t, ri, -1)):
        total.rectangle(inset, inset, b - inset, h - inset, weight)
        for x, side in ((inset, 1), (b - inset, -1)):
            total.corner(x, inset, side, 1, r, -weight).corner(x, h - inset, side, -1, r, -weight)
    return total


def tube(d: float, t: float) -> HandTotals:
    """Circular hollow section; A = π(D² - d²)/4, I = π(D⁴ - d⁴)/64."""
    outer, inner = mpf(str(d)), mpf(str(d)) - 2 * mpf(str(t))
    A, inertia, centre = mp.pi * (outer**2 - inner**2) / 4, mp.pi * (outer**4 - inner**4) / 64, outer / 2
    return HandTotals(A, A * centre, A * centre, inertia + A * centre**2, inertia + A * centre**2, A * centre**2)


def lipped_channel(h: float, b: float, c: float, t: float, r: float) -> HandTotals:
    """Channel with inward lips of overall depth c, four bends of inside radius r, the back of its web on the left."""
    total = HandTotals().rectangle(0, 0, t, h)
    for y, up in ((0, 1), (h, -1)):
        inside = y + up * t
        total.rectangle(t, min(y, inside), b, max(y, inside))
        total.rectangle(b - t, min(inside, y + up * c), b, max(inside, y + up * c))
        total.corner(0, y, 1, up, r + t, -1).corner(b, y, -1, up, r + t, -1)
        total.corner(t, inside, 1, up, r).corner(b - t, inside, -1, up, r)
    return total


def polygon(points: list[tuple[float, float]]) -> HandTotals:
    """Any polygon, by the trapezia under its sides (the surveyor's formula)."""
    terms: list[tuple[float, ...]] = []
    for (x1, y1), (x2, y2) in zip(points, points[1:] + points[:1], strict=True):
        cross = x1 * y2 - x2 * y1
        terms.append(
            (
                cross / 2,
                cross * (y1 + y2) / 6,
                cross * (x1 + x2) / 6,
                cross * (y1**2 + y1 * y2 + y2**2) / 12,
                cross * (x1**2 + x1 * x2 + x2**2) / 12,
                cross * (x1 * y2 + 2 * x1 * y1 + 2 * x2 * y2 + x2 * y1) / 24,
            )
        )
    return HandTotals(*(mpf(fsum(column)) for column in zip(*terms, strict=True)))


def arc(
    centre: tuple[float, float], r: float, start: float, end: float, chords: int = 4000
) -> list[tuple[float, float]]:
    turns = (start + (end - start) * i / chords for i in range(chords + 1))
    return [(centre[0] + r * cos(turn), centre[1] + r * sin(turn)) for turn in turns] if r else [centre]


def tapered_channel(
    h: float, b: float, tw: float, tf: float, at: float, slope: float, r1: float, r2: float
) -> HandTotals:
    """Channel whose flanges are tf thick at the distance `at` from the back of the web.

    Their inside faces slope by `slope`. The root circle touches web and inside face, the toe circle the inside face
    and the flange's end.
    """
    lean = atan(slope)

    def inside_face(x: float) -> float:
        return tf - slope * (x - at)

    # A circle of radius r touches the sloping face from above (below) where its centre is r / cos(lean) above (below).
    root = (tw + r1, inside_face(tw + r1) + r1 / cos(lean))
    toe = (b - r2, inside_face(b - r2) - r2 / cos(lean))
    lower = [(0.0, 0.0), (b, 0.0), *arc(toe, r2, 0.0, pi / 2 - lean), *arc(root, r1, -pi / 2 - lean, -pi)]
    return polygon(lower + [(x, h - y) for x, y in reversed(lower)])
