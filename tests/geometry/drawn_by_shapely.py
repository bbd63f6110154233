"""Every shape drawn a second time, from shapely's boxes, discs and buffers, without a line of the library.

Discs are polygons of 4·QUARTER sides; their area is short by (π/2/QUARTER)²/6 of itself. A radius at a corner that is
no right angle comes from morphology: rolling a disc along the outside or inside of the sharp outline.
"""

from __future__ import annotations

from math import cos, pi, radians, sin
from typing import Any

import numpy as np
import shapely
from shapely import Point, Polygon, box

__all__ = ["QUARTER", "drawing", "integrals"]

QUARTER = 500
Drawing = Any


def integrals(shape: Drawing) -> tuple[float, ...]:
    """A, x, y of the centroid, and Ix, Iy, Ixy about it, by the surveyor's sums over the rings."""
    total = np.zeros(6)
    cx, cy = shape.centroid.coords[0]
    for polygon in shapely.get_parts(shape):
        oriented = shapely.geometry.polygon.orient(polygon)
        for ring in (oriented.exterior, *oriented.interiors):
            x, y = (np.asarray(values) for values in ring.xy)
            x, y = x - cx, y - cy
            x1, y1, x2, y2 = x[:-1], y[:-1], x[1:], y[1:]
            cross = x1 * y2 - x2 * y1
            total += [
                cross.sum() / 2,
                0.0,
                0.0,
                (cross * (y1 * y1 + y1 * y2 + y2 * y2)).sum() / 12,
                (cross * (x1 * x1 + x1 * x2 + x2 * x2)).sum() / 12,
                (cross * (x1 * y2 + 2 * x1 * y1 + 2 * x2 * y2 + x2 * y1)).sum() / 24,
            ]
    return (float(total[0]), cx, cy, *(float(value) for value in total[3:]))


def disc(x: float, y: float, r: float) -> Drawing:
    return Point(x, y).buffer(r, quad_segs=QUARTER)


def concave(x: float, y: float, right: int, up: int, r: float) -> Drawing:
    """The corner piece at (x, y) that lies to its right or left, up or down."""
    return box(*sorted_box(x, y, x + right * r, y + up * r)).difference(disc(x + right * r, y + up * r, r))


def sorted_box(x1: float, y1: float, x2: float, y2: float) -> tuple[float, float, float, float]:
    return min(x1, x2), min(y1, y2), max(x1, x2), max(y1, y2)


def joined(*pieces: Drawing) -> Drawing:
    return shapely.union_all(pieces)


def round_box(x1: float, y1: float, x2: float, y2: float, r: float) -> Drawing:
    sharp = box(x1, y1, x2, y2)
    corners = [(x1, y1, 1, 1), (x2, y1, -1, 1), (x2, y2, -1, -1), (x1, y2, 1, -1)]
    return sharp.difference(joined(*(concave(x, y, right, up, r) for x, y, right, up in corners)))


def pie(r: float, start: float, sweep: float) -> Drawing:
    turns = np.linspace(radians(start), radians(start + sweep), 4 * QUARTER + 1)
    return Polygon([(0.0, 0.0), *((r * cos(turn), r * sin(turn)) for turn in turns)])


def i_section(h: float, b: float, tw: float, tf: float, r: float, b2: float, tf2: float) -> Drawing:
    m, top = max(b, b2) / 2, h - tf
    corners = [(m - tw / 2, -1), (m + tw / 2, 1)]
    return joined(
        box(m - b / 2, top, m + b / 2, h),
        box(m - b2 / 2, 0, m + b2 / 2, tf2),
        box(m - tw / 2, 0, m + tw / 2, h),
        *(concave(x, tf2, side, 1, r) for x, side in corners),
        *(concave(x, top, side, -1, r) for x, side in corners),
    )


def tee(h: float, b: float, tw: float, tf: float, r: float) -> Drawing:
    m, top = b / 2, h - tf
    stem = box(m - tw / 2, 0, m + tw / 2, h)
    return joined(box(0, top, b, h), stem, concave(m - tw / 2, top, -1, -1, r), concave(m + tw / 2, top, 1, -1, r))


def channel(h: float, b: float, tw: float, tf: float, r: float, r2: float, slope: float) -> Drawing:
    def face(x: float) -> float:
        return tf + slope * (b / 2 - x)

    far = b + h
    solid = Polygon([(-far, -far), (b, -far), (b, face(b)), (tw, face(tw)), (tw, h + far), (-far, h + far)])
    # Web and flange are made thick behind their faces, so that opening by r2 rounds the inside of the tip and nothing
    # else. Closing by r rounds the root; it starts from the sharp outline too, for a buffer of a drawn arc is coarse.
    opened = solid.buffer(-r2, quad_segs=QUARTER).buffer(r2, quad_segs=QUARTER) if r2 else solid
    closed = solid.buffer(r, quad_segs=QUARTER).buffer(-r, quad_segs=QUARTER) if r else solid
    lower = closed.difference(solid.difference(opened)).intersection(box(0, 0, b, h / 2))
    return joined(lower, shapely.affinity.scale(lower, 1, -1, origin=(0, h / 2)))


def angle(h: float, b: float, t: float, r: float, r2: float) -> Drawing:
    tips = joined(concave(b, t, -1, -1, r2), concave(t, h, -1, -1, r2))
    return joined(box(0, 0, b, t), box(0, 0, t, h), concave(t, t, 1, 1, r)).difference(tips)


def lipped_channel(h: float, b: float, c: float, t: float, r: float) -> Drawing:
    outer, inner = (
        (round_box(0, 0, b, h, r + t), round_box(t, t, b - t, h - t, r))
        if r
        else (
            box(0, 0, b, h),
            box(t, t, b - t, h - t),
        )
    )
    return outer.difference(inner).difference(box(b - t, c, b, h - c))


def zed(h: float, b: float, t: float, c: float, r: float) -> Drawing:
    # The lower half: half of a lipped channel as deep as needed for its lip.
    deep = 2 * (h + c)
    half = lipped_channel(deep, b, c, t, r).intersection(box(0, 0, b, h / 2 if c <= h / 2 else c))
    web_and_flange = joined(half, box(0, min(h / 2, r + t), t, h / 2))
    lower = shapely.affinity.translate(web_and_flange, b - t, 0)
    return joined(lower, shapely.affinity.rotate(lower, 180, origin=(b - t / 2, h / 2)))


def drawing(word: str, **d: float) -> Drawing:
    """The shape in the same axes as the library's."""
    match word:
        case "rectangle":
            return box(0, 0, d["b"], d["h"])
        case "triangle":
            return Polygon([(0, 0), (d["b"], 0), (d["a"], d["h"])])
        case "trapezoid":
            return Polygon([(0, 0), (d["b"], 0), (d["a"] + d["b2"], d["h"]), (d["a"], d["h"])])
        case "circle":
            return disc(d["d"] / 2, d["d"] / 2, d["d"] / 2)
        case "half circle":
            return disc(d["d"] / 2, 0, d["d"] / 2).intersection(box(0, 0, d["d"], d["d"]))
        case "sector":
            return pie(d["r"], 0, d["angle"])
        case "segment":
            half = d["angle"] / 2
            level = d["r"] * cos(radians(half))
            turns = np.linspace(radians(90 - half), radians(90 + half), 4 * QUARTER + 1)
            arc = [(d["r"] * cos(turn), d["r"] * sin(turn)) for turn in turns]
            return Polygon([*arc, (arc[-1][0], level), (arc[0][0], level)])
        case "ellipse":
            return shapely.affinity.scale(disc(d["b"] / 2, d["h"] / 2, 1), d["b"] / 2, d["h"] / 2)
        case "tube":
            r = d["d"] / 2
            return disc(r, r, r).difference(disc(r, r, r - d["t"]))
        case "box":
            tw, tf = d["tw"], d["tf"]
            inner = round_box(tw, tf, d["b"] - tw, d["h"] - tf, d["ri"])
            return round_box(0, 0, d["b"], d["h"], d["ro"]).difference(inner)
        case "fillet":
            return concave(0, 0, 1, 1, d["r"])
        case "plate":
            return shapely.LineString([(d["x"], d["y"]), (d["x2"], d["y2"])]).buffer(d["t"] / 2, cap_style="flat")
    shapes = {"I": i_section, "tee": tee, "channel": channel, "angle": angle, "zed": zed}
    return (shapes | {"lipped channel": lipped_channel})[word](**d)


SHORT = (pi / 2 / QUARTER) ** 2 / 6
