"""The tables of rolled, hollow and cold-formed sections: a row as a parts block, its quantity read from the functions.

European tables call the strong axis y-y and the weak one z-z; here x is to the right and y up, so their y-y is our x.
"""

from __future__ import annotations

from collections.abc import Callable
from math import radians, tan

from tests.published.published import Row
from tests.published.sections import Block, Section, block

__all__ = ["AMERICAN", "EUROPEAN", "rolled_block"]

Reading = Callable[[Section], float]
MILLIMETRES, INCHES = "mm", "in"


def i_part(row: Row) -> dict[str, float | str | None]:
    """EN tables give h b tw tf r; the AISC Manual d bf tw tf and kdes, the depth of flange and fillet together."""
    if "kdes" in row.given:
        return {
            "shape": "tee" if row.source.shape == "T" else "I",
            "h": row.number("d"),
            "b": row.number("bf"),
            "tw": row.number("tw"),
            "tf": row.number("tf"),
            "r": row.number("kdes") - row.number("tf"),
        }
    return {"shape": "I", **{name: row.number(name) for name in ("h", "b", "tw", "tf", "r")}}


def channel_part(row: Row) -> dict[str, float | str | None]:
    return {"shape": "channel", **{name: row.number(name) for name in ("h", "b", "tw", "tf", "r")}}


def tapered_channel_part(row: Row) -> dict[str, float | str | None]:
    """Flange thickness is stated at tf_at from the back of the web; the shape takes it at half the flange's width."""
    h, b, tw, slope = (row.number(name) for name in ("h", "b", "tw", "slope"))
    tf = row.number("tf") + slope * (row.number("tf_at") - b / 2)
    radii = {"r": row.number("r1"), "r2": row.number("r2")}
    return {"shape": "channel", "h": h, "b": b, "tw": tw, "tf": tf, **radii, "slope": slope}


def american_channel_part(row: Row) -> dict[str, float | str | None]:
    """Slope 1:6 with the mean thickness at mid-outstand, sharp corners, as the row's note says."""
    b, tw, slope = row.number("bf"), row.number("tw"), 1 / 6
    tf = row.number("tf_mean") + slope * ((tw + b) / 2 - b / 2)
    return {"shape": "channel", "h": row.number("d"), "b": b, "tw": tw, "tf": tf, "slope": slope}


def angle_part(row: Row) -> dict[str, float | str | None]:
    radii = {"r": row.number("r1"), "r2": row.number("r2")} if "r1" in row.given else {}
    return {"shape": "angle", "h": row.number("a"), "b": row.number("b"), "t": row.number("t"), **radii}


def wall(row: Row) -> float:
    """Nominal wall of EN hollow sections, design wall of American ones."""
    return row.number("T" if "T" in row.given else "tdes")


def box_part(row: Row) -> dict[str, float | str | None]:
    t = wall(row)
    radii = {name: row.number(name) for name in ("ro", "ri")}
    return {"shape": "box", "b": row.number("B"), "h": row.number("H"), "tw": t, "tf": t, **radii}


def tube_part(row: Row) -> dict[str, float | str | None]:
    return {"shape": "tube", "d": row.number("D"), "t": wall(row)}


def lipped_channel_part(row: Row) -> dict[str, float | str | None]:
    """D B d are overall sizes, R the inside radius of the bends."""
    sizes = {ours: row.number(theirs) for ours, theirs in (("h", "D"), ("b", "B"), ("c", "d"), ("t", "t"), ("r", "R"))}
    return {"shape": "lipped channel", **sizes}


PARTS: dict[str, Callable[[Row], dict[str, float | str | None]]] = {
    "I": i_part,
    "T": i_part,
    "U": channel_part,
    "UPN": tapered_channel_part,
    "UPN-type taper 1:6, no radii": american_channel_part,
    "L": angle_part,
    "RHS": box_part,
    "CHS": tube_part,
    "": lipped_channel_part,
}


def rolled_block(row: Row) -> Block:
    """The section of a row, bottom left of its bounding box at the origin."""
    unit = MILLIMETRES if row.source.group.startswith("EN") else INCHES
    at = {"x": 0.0, "y": 0.0, "datum": "bottom left"}
    return block(unit, PARTS[row.source.shape](row) | at)


def total(symbol: str) -> Reading:
    return lambda section: section.totals[symbol]


def principal(symbol: str) -> Reading:
    return lambda section: section.principal[symbol]


def smaller_modulus(*sides: str) -> Reading:
    """The modulus a table prints: that of the farther fibre."""
    return lambda section: min(section.fibre(side)[1] for side in sides)


def distance(side: str) -> Reading:
    return lambda section: section.fibre(side)[0]


STRONG = smaller_modulus("top", "bottom")
WEAK = smaller_modulus("left", "right")


def half_section_moment(section: Section) -> float:
    """First moment of the upper half of a channel about its axis of symmetry, from the totals row of the ledger."""
    header, values = section.block
    size = {column.split(" [")[0]: value for column, value in zip(header, values, strict=True)}
    h, b, tw, tf, r = (size[name] for name in ("h", "b", "tw", "tf", "r"))
    at = {"datum": "bottom left", "turn": None}
    flange = {"shape": "rectangle", "b": b, "h": tf, "x": 0.0, "y": h / 2 - tf, **at}
    web = {"shape": "rectangle", "b": tw, "h": h / 2 - tf, "x": 0.0, "y": 0.0, **at}
    fillet = {"shape": "fillet", "r": r, "x": tw, "y": h / 2 - tf, "datum": "bottom left", "turn": -90.0}
    return Section(block(MILLIMETRES, flange, web, fillet)).ledger[-1]["A·y"]


EUROPEAN: dict[str, Reading] = {
    "A": total("A"),
    **dict.fromkeys(("I", "Iy", "Iyy", "Iy=Iz", "Iy(strong)"), total("Ix")),
    **dict.fromkeys(("Iz", "Izz"), total("Iy")),
    **dict.fromkeys(("i", "iy", "iyy", "iy=iz"), total("rx")),
    **dict.fromkeys(("iz", "izz"), total("ry")),
    **dict.fromkeys(("Wel", "Wel,y", "Wel,yy"), STRONG),
    **dict.fromkeys(("Wel,z", "Wel,zz"), WEAK),
    "Iu": principal("I1"),
    "Iv": principal("I2"),
    "iu": principal("r1"),
    "iv": principal("r2"),
    "tan alpha": lambda section: abs(tan(radians(section.principal["angle"]))),
    **dict.fromkeys(("c", "cx(along long leg)"), distance("bottom")),
    "cy(along short leg)": distance("left"),
    **dict.fromkeys(("ys(centroid from back of web)", "cz(centroid from back of web)", "ez"), distance("left")),
    "Sy (first moment of half section)": half_section_moment,
    "sy=Iy/Sy": lambda section: section.totals["Ix"] / half_section_moment(section),
}
AMERICAN: dict[str, Reading] = {
    "A": total("A"),
    **dict.fromkeys(("I", "Ix"), total("Ix")),
    "Iy": total("Iy"),
    **dict.fromkeys(("r", "rx"), total("rx")),
    "ry": total("ry"),
    **dict.fromkeys(("S", "Sx"), STRONG),
    "Sy": WEAK,
    "rz": principal("r2"),
    "y": distance("bottom"),
    "x": distance("left"),
    "ybar(from top of flange)": distance("top"),
}
