"""Cold-formed profiles: strip of one thickness bent about inside radii.

r is the inside radius of every bend, and the outside of the bend is r + t. With r blank or 0 the corners are sharp
inside and outside, as in calculations on sharp-cornered midlines. A lip may consist of its bend alone.
"""

from __future__ import annotations

from cellsection.geometry.limits import at_most, below
from cellsection.geometry.outline import Corner, rounded
from cellsection.geometry.region import Region

__all__ = ["lipped_channel", "zed"]

LONGER_LIP = "Enter the lip over all, its bend included"


def lipped_channel(h: float, b: float, c: float, t: float, r: float = 0.0) -> Region:
    """Web h on the left, flanges b to the right, lips c turned inwards, all over all; thickness t, inside radius r.

    Source of the example: 9 x 2.5 x 0.059 with 0.773 lips and 3/16 bends, A = 0.881 in², AISI Manual (from memory).

    >>> round(lipped_channel(h=9, b=2.5, c=0.773, t=0.059, r=0.1875).moments().A, 3)
    0.881
    """
    bend = r + t
    _strip_fits(h, b, t, r, bends=2)
    _lip_fits(c, t, r)
    below("c", c, h / 2.0, "half of the depth h: the lips meet", "Enter shorter lips, or use a box")
    outer, inner = (bend, r) if r else (0.0, 0.0)
    outline = [
        Corner(0.0, 0.0, outer),
        Corner(b, 0.0, outer),
        Corner(b, c),
        Corner(b - t, c),
        Corner(b - t, t, inner),
        Corner(t, t, inner),
        Corner(t, h - t, inner),
        Corner(b - t, h - t, inner),
        Corner(b - t, h - c),
        Corner(b, h - c),
        Corner(b, h, outer),
        Corner(0.0, h, outer),
    ]
    return Region((rounded(outline),))


def zed(h: float, b: float, t: float, c: float = 0.0, r: float = 0.0) -> Region:
    """Web h, top flange b to the left of it, bottom flange b to the right, as the letter Z; lips c turned inwards.

    h, b and c are over all, each flange from the far side of the web; so the whole is 2·b - t wide. t thickness, r
    inside radius, c blank or 0 for no lips. Source of the example: Ixy = -b·t·(h - t)·(b - t)/2 of the sharp-cornered
    zed without lips, e.g. Gere, Mechanics of Materials, chapter 12 (from memory).

    >>> zed(h=200, b=90, t=15).centroidal().Ixy            # -90·15·185·75/2
    -9365625.0
    """
    _strip_fits(h, b, t, r, bends=2 if c else 1)
    if c:
        _lip_fits(c, t, r)
        at_most("c", c, h, "the depth h", "Enter shorter lips")
    outer, inner = (r + t, r) if r else (0.0, 0.0)
    web, right = b - t, 2.0 * b - t  # left side of the web, tip of the bottom flange
    tip = [Corner(right, 0.0, outer), Corner(right, c), Corner(right - t, c), Corner(right - t, t, inner)]
    if not c:
        tip = [Corner(right, 0.0), Corner(right, t)]
    lower = [Corner(web, 0.0, outer), *tip, Corner(b, t, inner)]
    # The upper half is the lower one turned half a turn about the middle of the web.
    upper = [Corner(right - corner.x, h - corner.y, corner.r) for corner in lower]
    return Region((rounded([*lower, *upper]),))


def _strip_fits(h: float, b: float, t: float, r: float, bends: int) -> None:
    below("t", t, h / 2.0, "half of the depth h", "Enter a thinner strip or a greater depth h")
    below("t", t, b / bends, "what the flange b leaves", "Enter a thinner strip or a wider flange b")
    at_most("r", r, h / 2.0 - t, "half of the clear depth h - 2·t", "Enter a smaller radius")
    at_most("r", r, b / bends - t, "the room for the bends of the flange", "Enter a smaller radius")


def _lip_fits(c: float, t: float, r: float) -> None:
    below("t", t, c, "the lip c over all", LONGER_LIP)
    at_most("r", r, c - t, "what the lip c leaves for its bend, c - t", LONGER_LIP)
