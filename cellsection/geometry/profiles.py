"""Rolled, welded and extruded profiles: I, tee, channel, angle, box, tube; the cold-formed ones beside them.

Each stands upright with the bottom left of the box around it at the origin. Radii left blank are 0: sharp corners.
A radius may fill its space exactly; webs and flanges must leave something between them.
"""

from __future__ import annotations

from math import hypot

from cellsection.errors import InputError
from cellsection.geometry.limits import at_most, below
from cellsection.geometry.outline import Corner, arc_chain, rounded
from cellsection.geometry.region import Region

__all__ = ["angle", "box", "channel", "i_section", "tee", "tube"]

SMALLER_RADIUS = "Enter a smaller radius"
THINNER_FLANGE = "Enter a thinner flange or a greater depth h"
THINNER_WEB = "Enter a thinner web or a wider flange"


def i_section(
    h: float, b: float, tw: float, tf: float, r: float = 0.0, b2: float | None = None, tf2: float | None = None
) -> Region:
    """I or H: depth h, flanges b x tf, web tw, root radius r; b2 and tf2 where the bottom flange differs.

    The web stands in the middle of both flanges. Source of the example: IPE 300, A = 53.8 cm² and Iy = 8360 cm⁴, from
    the mills' section tables (from memory).

    >>> ipe300 = i_section(h=300, b=150, tw=7.1, tf=10.7, r=15).centroidal()
    >>> round(ipe300.A / 1e2, 1), round(ipe300.Ix / 1e4, -1)
    (53.8, 8360.0)
    """
    bottom, lower = b if b2 is None else b2, tf if tf2 is None else tf2
    below("tf", tf, h, "the depth h", THINNER_FLANGE)
    column = "tf" if tf2 is None else "tf2"
    meaning = "half of the depth h" if tf2 is None else "what the depth h leaves under the top flange"
    below(column, lower, h / 2.0 if tf2 is None else h - tf, f"{meaning}: no web is left", THINNER_FLANGE)
    below("tw", tw, b, "the flange width b", THINNER_WEB)
    below("tw", tw, bottom, "the bottom flange width b2", "Use a tee, or enter a wider bottom flange")
    at_most("r", r, (h - tf - lower) / 2.0, "half of the clear depth between the flanges", SMALLER_RADIUS)
    at_most("r", r, (min(b, bottom) - tw) / 2.0, "the outstand of the flange (b - tw)/2", SMALLER_RADIUS)
    middle, top = max(b, bottom) / 2.0, h - tf
    left, right = middle - tw / 2.0, middle + tw / 2.0
    outline = [
        Corner(middle - bottom / 2.0, 0.0),
        Corner(middle + bottom / 2.0, 0.0),
        Corner(middle + bottom / 2.0, lower),
        Corner(right, lower, r),
        Corner(right, top, r),
        Corner(middle + b / 2.0, top),
        Corner(middle + b / 2.0, h),
        Corner(middle - b / 2.0, h),
        Corner(middle - b / 2.0, top),
        Corner(left, top, r),
        Corner(left, lower, r),
        Corner(middle - bottom / 2.0, lower),
    ]
    return Region((rounded(outline),))


def tee(h: float, b: float, tw: float, tf: float, r: float = 0.0) -> Region:
    """Flange b x tf on top, stem tw below it, over all h, root radius r.

    >>> tee(h=60, b=90, tw=30, tf=20).centroidal().y       # 90 x 20 at 50 and 30 x 40 at 20
    38.0
    """
    below("tf", tf, h, "the depth h: no stem is left", THINNER_FLANGE)
    below("tw", tw, b, "the flange width b", THINNER_WEB)
    at_most("r", r, h - tf, "the depth of the stem h - tf", SMALLER_RADIUS)
    at_most("r", r, (b - tw) / 2.0, "the outstand of the flange (b - tw)/2", SMALLER_RADIUS)
    left, right, under = (b - tw) / 2.0, (b + tw) / 2.0, h - tf
    outline = [
        Corner(left, 0.0),
        Corner(right, 0.0),
        Corner(right, under, r),
        Corner(b, under),
        Corner(b, h),
        Corner(0.0, h),
        Corner(0.0, under),
        Corner(left, under, r),
    ]
    return Region((rounded(outline),))


def channel(h: float, b: float, tw: float, tf: float, r: float = 0.0, r2: float = 0.0, slope: float = 0.0) -> Region:
    """Web tw on the left, flanges b x tf to the right, over all h, root radius r, toe radius r2 inside the tips.

    slope : of the inside of the flanges, as a ratio: 0.08 for 8 %. The flange is then thicker at the web and thinner at
        its tip, and tf is its thickness at half of the flange width b, as in the European tables of taper flange
        channels up to 300 deep. Where a table gives tf at another distance u from the back of the web, enter
        tf + slope·(u - b/2).

    Source of the example: UPN 100, A = 13.5 cm², from the mills' section tables (from memory).

    >>> upn100 = channel(h=100, b=50, tw=6, tf=8.5, r=8.5, r2=4.5, slope=0.08)
    >>> round(upn100.moments().A / 1e2, 1)
    13.5
    """
    below("tw", tw, b, "the flange width b", THINNER_WEB)
    rise = slope * (b / 2.0 - tw)  # of the inside face between half of the width and the web
    tip, root = tf - slope * b / 2.0, tf + rise
    if not tip > 0.0:
        raise InputError(
            f"slope = {slope:g} leaves the tip of the flange no thickness: at most {2.0 * tf / b:.4g}, 2·tf/b",
            remedy="Enter the slope as a ratio, 0.08 for 8 %",
            column="slope",
        )
    below("tf", root, h / 2.0, "half of the depth h, at the web: no web is left", THINNER_FLANGE)
    at_most("r2", r2, tip, "the thickness of the flange's tip", SMALLER_RADIUS)
    at_most("r", r, h / 2.0 - root, "half of the clear depth between the flanges", SMALLER_RADIUS)
    at_most("r", r + r2, b - tw, "with r2, the inside width of the flange b - tw", SMALLER_RADIUS)
    outline = [
        Corner(0.0, 0.0),
        Corner(b, 0.0),
        Corner(b, tip, r2, "r2"),
        Corner(tw, root, r),
        Corner(tw, h - root, r),
        Corner(b, h - tip, r2, "r2"),
        Corner(b, h),
        Corner(0.0, h),
    ]
    return Region((rounded(outline),))


def angle(h: float, b: float, t: float, r: float = 0.0, r2: float = 0.0) -> Region:
    """Upright leg h on the left, lying leg b at the bottom, both t thick, root radius r, toe radius r2 inside the tips.

    Source of the example: L 75 x 50 x 6, A = 7.19 cm², EN 10056-1 (from memory).

    >>> round(angle(h=75, b=50, t=6, r=7, r2=3.5).moments().A / 1e2, 2)
    7.19
    """
    short = min(h, b)
    below("t", t, short, "the shorter leg", "Enter a thinner leg, or the lengths of both legs over all")
    at_most("r2", r2, t, "the thickness of the legs t", SMALLER_RADIUS)
    at_most("r", r + r2, short - t, "with r2, the inside length of the shorter leg", SMALLER_RADIUS)
    outline = [
        Corner(0.0, 0.0),
        Corner(b, 0.0),
        Corner(b, t, r2, "r2"),
        Corner(t, t, r),
        Corner(t, h, r2, "r2"),
        Corner(0.0, h),
    ]
    return Region((rounded(outline),))


def box(b: float, h: float, tw: float, tf: float, ro: float = 0.0, ri: float = 0.0) -> Region:
    """Width b and height h over all, walls tw left and right, tf top and bottom, outside radius ro, inside radius ri.

    ro blank and ri given is a box of sharp edges and filleted inside corners. Otherwise ri may not exceed ro.
    Source of the example: 50 x 50 x 4 hot-finished, A = 7.19 cm², EN 10210-2 (from memory).

    >>> round(box(b=50, h=50, tw=4, tf=4, ro=6, ri=4).moments().A / 1e2, 2)
    7.19
    """
    below("tw", tw, b / 2.0, "half of the width b: the hollow vanishes", "Use a rectangle, or enter a thinner wall")
    below("tf", tf, h / 2.0, "half of the height h: the hollow vanishes", "Use a rectangle, or enter a thinner wall")
    at_most("ro", ro, min(b, h) / 2.0, "half of the smaller side", SMALLER_RADIUS)
    at_most("ri", ri, min(b - 2.0 * tw, h - 2.0 * tf) / 2.0, "half of the smaller side of the hollow", SMALLER_RADIUS)
    if ro:
        at_most("ri", ri, ro, "the outside radius ro", "Enter the outside radius in ro, the inside radius in ri")
    # From the centre of the outside corner to the far side of the inside corner.
    dx, dy = ro - tw - ri, ro - tf - ri
    if dx > 0.0 and dy > 0.0:
        reach = hypot(dx, dy) + ri
        if reach >= ro:
            raise InputError(
                f"ro = {ro:g} cuts through the wall at its corners: the hollow reaches {reach:g} from the centre of ro",
                remedy="Enter a smaller outside radius or a greater inside radius",
                column="ro",
            )
    outer = rounded(
        [Corner(0.0, 0.0, ro, "ro"), Corner(b, 0.0, ro, "ro"), Corner(b, h, ro, "ro"), Corner(0.0, h, ro, "ro")]
    )
    inner = [(tw, tf), (tw, h - tf), (b - tw, h - tf), (b - tw, tf)]
    return Region((outer, rounded([Corner(x, y, ri, "ri") for x, y in inner])))


def tube(d: float, t: float) -> Region:
    """Outside diameter d, wall t. Source of the example: π·t·(d - t).

    >>> tube(d=48.3, t=4).moments().A
    556.6902
    """
    below("t", t, d / 2.0, "half of the diameter d: the bore vanishes", "Use a circle, or enter a thinner wall")
    r = d / 2.0
    return Region((arc_chain(r, r, r, 0.0, 360.0), arc_chain(r, r, r - t, 0.0, -360.0)))
