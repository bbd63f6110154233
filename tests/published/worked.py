"""The worked examples of textbooks and design guides, typed as parts blocks and read through the cell functions.

Each function returns the values of one example by quantity, in the block's units; stresses that are only M·y/I, and
moduli at a level that is no extreme fibre, are worked out here from what the functions return.
"""

from __future__ import annotations

from collections.abc import Callable
from math import pi, sqrt

from tests.published.published import Row
from tests.published.sections import Section, block

__all__ = ["worked_example"]

Values = dict[str, float]


def sandwich_beam(row: Row) -> Values:
    b, h, core_depth, E1, E2, M = (row.number(name) for name in ("b", "h", "hc", "E1", "E2", "M"))
    face = (h - core_depth) / 2
    faces = [{"shape": "rectangle", "b": b, "h": face, "y": side * (core_depth + face) / 2} for side in (1, -1)]
    core = {"shape": "rectangle", "b": b, "h": core_depth, "y": 0.0}
    transformed = Section(block("mm", *faces, {**core, "n": E2 / E1})).totals["Ix"]
    return {
        "I1 faces": Section(block("mm", *faces)).totals["Ix"],
        "I2 core": Section(block("mm", core)).totals["Ix"],
        "face stress": M * h / 2 / transformed,
        "core stress": M * core_depth / 2 / transformed * E2 / E1,
    }


def channel_beam(row: Row) -> Values:
    b, h, t = (row.number(name) for name in ("b", "h", "t"))
    section = Section(block("mm", {"shape": "channel", "h": b, "b": h, "tw": t, "tf": t, "turn": -90.0}))
    (c1, S1), (c2, S2) = section.fibre("top"), section.fibre("bottom")
    return {"c1": c1, "c2": c2, "I": section.totals["Ix"], "S1": S1, "S2": S2}


def wide_flange_beam(row: Row) -> Values:
    b, h, clear, t = (row.number(name) for name in ("b", "h", "h1", "t"))
    part = {"shape": "I", "h": h, "b": b, "tw": t, "tf": (h - clear) / 2}
    return {"I": Section(block("mm", part)).totals["Ix"]}


def wood_box_beam(row: Row) -> Values:
    (bf, tf), (tw, h) = row.numbers("flange"), row.numbers("web")
    flanges = [{"shape": "rectangle", "b": bf, "h": tf, "x": 0.0, "y": side * (h - tf) / 2} for side in (1, -1)]
    webs = [{"shape": "rectangle", "b": tw, "h": h, "x": side * (bf + tw) / 2, "y": 0.0} for side in (1, -1)]
    section = Section(block("mm", *flanges, *webs))
    top = section.ledger[0]
    return {"I": section.totals["Ix"], "Q": top["A"] * top["dy"]}


def tee_casting(row: Row) -> Values:
    (b, t), (stem, depth) = row.numbers("flange"), row.numbers("stem")
    tee = {"shape": "tee", "h": depth + t, "b": b, "tw": stem, "tf": t, "y": 0.0, "datum": "bottom"}
    section = Section(block("mm", tee))
    moment = row.number("M")
    return {
        "ybar from bottom": section.totals["y"],
        "I": section.totals["Ix"],
        "extreme stress, flange side": moment / section.fibre("top")[1],
        "extreme stress, stem side": moment / section.fibre("bottom")[1],
    }


def steel_tee_in_oak(row: Row) -> Values:
    n, moment = row.number("n"), row.number("M")
    # Dimensions from the title of the example: flange 200 x 20 on a web 20 x 300, a timber 75 x 300 on each side of it.
    flange = {"shape": "rectangle", "b": 200.0, "h": 20.0, "x": 0.0, "y": 160.0, "n": n}
    web = {"shape": "rectangle", "b": 20.0, "h": 300.0, "x": 0.0, "y": 0.0, "n": n}
    oak = [{"shape": "rectangle", "b": 75.0, "h": 300.0, "x": x, "y": 0.0, "n": 1.0} for x in (-47.5, 47.5)]
    section = Section(block("mm", flange, web, *oak))
    return {
        "Ybar above mid-height of the timbers": section.totals["y"],
        "I (transformed to wood)": section.totals["Ix"],
        "max wood stress": moment / section.fibre("bottom")[1],
    }


def cover_plated_w14(row: Row) -> Values:
    """The rolled beam is given by A and I alone; it is typed as the rectangle that has both."""
    areas, levels, own = row.numbers("A"), row.numbers("y"), row.numbers("I0")
    parts = []
    for area, level, inertia in zip(areas, levels, own, strict=True):
        depth = sqrt(12 * inertia / area)
        parts.append({"shape": "rectangle", "b": area / depth, "h": depth, "y": level})
    totals = Section(block("in", *parts)).totals
    return {"Ybar": totals["y"], "Ix": totals["Ix"], "kx": totals["rx"]}


def welded_i(row: Row) -> Values:
    (b, tf), (tw, web) = row.numbers("flange"), row.numbers("web")
    section = Section(block("in", {"shape": "I", "h": web + 2 * tf, "b": b, "tw": tw, "tf": tf}))
    modulus = section.fibre("top")[1]
    return {"Ix": section.totals["Ix"], "S": modulus, "My (50 ksi)": 50 * modulus / 12}


def uncracked_concrete_beam(row: Row) -> Values:
    """Three bars of the tabulated area at d; they displace concrete, so the same circles are cut out of it."""
    b, h, d, steel, n = (row.number(name) for name in ("b", "h", "d", "As", "n"))
    diameter = sqrt(4 * steel / 3 / pi)
    bars = [(x, h - d) for x in (-3.0, 0.0, 3.0)]
    concrete = {"shape": "rectangle", "b": b, "h": h, "x": 0.0, "y": h / 2, "sign": 1.0, "n": 1.0}
    holes = [{"shape": "circle", "d": diameter, "x": x, "y": y, "sign": -1.0, "n": 1.0} for x, y in bars]
    steel_bars = [{"shape": "circle", "d": diameter, "x": x, "y": y, "sign": 1.0, "n": n} for x, y in bars]
    totals = Section(block("in", concrete, *holes, *steel_bars)).totals
    return {"uncracked NA from top": h - totals["y"], "uncracked transformed I": totals["Ix"]}


def girder_with_slab(row: Row) -> Values:
    (bt, tt), (tw, web), (bb, tb), (bs, ts) = (row.numbers(name) for name in ("tf", "web", "bf", "slab"))
    top = tb + web + tt
    girder = [
        {"shape": "rectangle", "b": bt, "h": tt, "y": top - tt / 2},
        {"shape": "rectangle", "b": tw, "h": web, "y": tb + web / 2},
        {"shape": "rectangle", "b": bb, "h": tb, "y": tb / 2},
    ]
    values: Values = {}
    for stage, ratio in (("girder", None), ("n", row.number("n")), ("3n", 3 * row.number("n"))):
        slab = {"shape": "rectangle", "b": bs, "h": ts, "y": row.number("slab_centroid"), "n": ratio and 1 / ratio}
        section = Section(block("in", *girder, *([slab] if ratio else [])))
        totals = section.totals
        composite = f"composite {stage}" if ratio else stage
        values |= {
            f"A {composite}": totals["A"],
            f"centroid {stage}" + ("" if ratio else " from bottom"): totals["y"],
            f"I {composite}": totals["Ix"],
            f"Sbot {stage}": section.fibre("bottom")[1],
            "Stop girder" + (f" {stage}" if ratio else ""): totals["Ix"] / (top - totals["y"]),
        }
    return values


def cold_formed_midline(row: Row) -> Values:
    """Five strips about the midline, sharp corners; the wider flange is the compressed one, on top."""
    h, wide, narrow, lip, t = (row.number(name) for name in ("hp", "bp1", "bp2", "cp", "t"))
    strips = [(0, 0, 0, h), (0, h, wide, h), (wide, h, wide, h - lip), (0, 0, narrow, 0), (narrow, 0, narrow, lip)]
    plates = [{"shape": "plate", "x": x, "y": y, "x2": x2, "y2": y2, "t": t} for x, y, x2, y2 in strips]
    return {"gross NA from compressed flange": h - Section(block("mm", *plates)).totals["y"]}


EXAMPLES: dict[str, Callable[[Row], Values]] = {
    "sandwich beam 200x160, core 150": sandwich_beam,
    "channel b=300 h=80 t=12 (web horizontal, on top)": channel_beam,
    "I shape b=165 h=320 h1=290 t=7.5, V=45 kN": wide_flange_beam,
    "wood box beam: two 40x180 flanges, two 15x280 webs, V=10.5 kN, F=800 N": wood_box_beam,
    "T casting 90x20 on 30x40, M=3 kN m": tee_casting,
    "steel T (200x20, 20x300) + two oak 75x300, M=50 kN m": steel_tee_in_oak,
    "W14x38 + plate 9x3/4 on the upper flange": cover_plated_w14,
    "built-up I: flanges 8x1, web 12x1/2": welded_i,
    "RC beam 10x25, d=23, As=3 No.8=2.37, n=8": uncracked_concrete_beam,
    "girder 14x5/8 + 54x1/2 + 14x7/8, slab 103x8, haunch 3.5 from web top, n=8 / 3n=24": girder_with_slab,
    "lipped channel h=200 b1=74 b2=66 c=20.8 r=3 tnom=2 t=1.96 (midline, sharp corners)": cold_formed_midline,
}


def worked_example(row: Row) -> Values:
    """The values of a row's example by quantity, empty where the example is not typed here."""
    return EXAMPLES[row.section](row) if row.section in EXAMPLES else {}
