"""The header row of a parts block: which column holds what, and in which length unit.

Columns are found by header, in any order, in any case. A length column may carry its unit in brackets, `b [mm]`;
lengths are converted to the first unit met. A header that is not known is ignored, as notes and marks are, unless it
looks like a slip for a known one: a misspelt dimension must not be lost.
"""

from __future__ import annotations

import re
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from difflib import get_close_matches

from cellsection.errors import InputError
from cellsection.geometry import SHAPES

__all__ = ["LENGTHS", "ORDER", "UNITS", "WORDS", "Column", "one_line", "quoted", "read_header"]

UNITS = {"mm": 0.001, "cm": 0.01, "m": 1.0, "in": 0.0254, "ft": 0.3048}  # metres; the inch and foot of 1959

ANGLES = frozenset(("angle", "turn"))
PLAIN = frozenset(("slope", "sign", "n", "strength", "stage"))
WORDS = frozenset(("part", "shape", "datum", "mirrored", "no tension"))
DIMENSIONS = tuple(dict.fromkeys(name for shape in SHAPES.values() for name in (*shape.required, *shape.optional)))
LENGTHS = frozenset(("x", "y", *DIMENSIONS)) - ANGLES - PLAIN
ORDER = (  # the columns of a block that a function returns, as far as they are used
    "part", "shape", "b", "h", "d", "b2", "a", "r", "ro", "ri", "r2", "t", "tw", "tf", "tf2", "c", "angle", "slope",
    "x", "y", "x2", "y2", "turn", "sign", "n", "datum", "mirrored", "strength", "stage", "no tension",
)  # fmt: skip
KNOWN = frozenset(ORDER)
HEADER = re.compile(r"\s*(?P<name>[^\[\]]*?)\s*(?:\[\s*(?P<unit>[^\[\]]*?)\s*\])?\s*")
LONGEST = 40  # letters of a cell or header that a message repeats
UNIT_BEHIND = re.compile(r"(?:mm|cm|m|in|ft|°|deg)$")
NUMBERED = re.compile(r"([a-z]+)[0-9]+")
# Other names of columns that may be left out, so that the part would be taken without them and nobody would notice.
# (A needed dimension under another name is missed in its row.) They only count where the column itself is missing.
OTHER_NAMES = {
    "radius": "r", "rootradius": "r", "filletradius": "r", "cornerradius": "r", "toeradius": "r2", "lip": "c",
    "xc": "x", "xoffset": "x", "offsetx": "x", "yc": "y", "yoffset": "y", "offsety": "y", "rotation": "turn",
    "rotate": "turn", "turned": "turn", "cutout": "sign", "hole": "sign", "void": "sign", "modularratio": "n",
    "mirror": "mirrored", "reference": "datum", "origin": "datum", "fy": "strength",
    "modularration": "n", "nratio": "n", "e": "n", "emodulus": "n", "youngsmodulus": "n", "m": "n",
    "rot": "turn", "theta": "turn", "alpha": "turn", "θ": "turn", "α": "turn", "φ": "turn",
    "xbar": "x", "xpos": "x", "xposition": "x", "x̄": "x",
    "ybar": "y", "ypos": "y", "yposition": "y", "ȳ": "y", "elevation": "y", "level": "y",
    "+/-": "sign", "±": "sign", "adddeduct": "sign",
}  # fmt: skip
# Headers of a number of pieces, which a block does not read: each piece is a row of its own.
PIECES = frozenset(("qty", "quantity", "count", "pieces", "pcs", "noof"))


@dataclass(frozen=True, slots=True)
class Column:
    """A column that counts: its position from 0, its name, its header as typed, and the factor to the block's unit."""

    index: int
    name: str
    header: str
    factor: float = 1.0


def quoted(cell: object, longest: int = LONGEST) -> str:
    """A cell as a message shows it: on one line, cut where it is long.

    >>> quoted("200"), quoted(True), quoted(3.0), quoted(None)
    ('"200"', 'TRUE', '3', 'a blank cell')
    """
    if cell is None or (isinstance(cell, str) and not cell.strip()):
        return "a blank cell"
    if isinstance(cell, str):
        return f'"{one_line(cell, longest)}"'
    if isinstance(cell, bool):
        return str(cell).upper()
    return f"{cell:g}" if isinstance(cell, float) else one_line(str(cell))


def one_line(text: str, longest: int = LONGEST) -> str:
    """A text without its line breaks, cut where it is long."""
    line = " ".join(text.split())
    return line if len(line) <= longest else line[: longest - 1] + "…"


def read_header(header: Sequence[object], used: Sequence[bool]) -> tuple[tuple[Column, ...], str]:
    """The columns that count, and the block's length unit ("" where none is named).

    used : for each column, whether a number stands below its header
    Raises InputError (row 1) for a missing `shape`, a doubled or misspelt header, numbers below none, an unknown unit,
    and length columns of which some name a unit and some do not.
    """
    columns: list[Column] = []
    unknown: list[tuple[str, bool]] = []
    unit, unitless = "", ""
    for index, cell in enumerate(header):
        if cell is None or (isinstance(cell, str) and not cell.strip()):
            if used[index]:
                raise InputError(
                    f"column {index + 1} holds numbers but has no header",
                    remedy="Give it a header, or leave it out of the range",
                    row=1,
                )
            continue
        if not isinstance(cell, str):
            raise InputError(
                f"the header of column {index + 1} is {quoted(cell)}, not text",
                remedy="Let the first row of the range be the headers: shape, b, h, x, y",
                row=1,
            )
        header_text = one_line(cell)
        match = HEADER.fullmatch(header_text)
        name = " ".join(match["name"].lower().split()) if match else ""
        if match is None or name not in KNOWN:
            unknown.append((header_text, used[index]))
            continue
        if match["name"] == "A" and used[index]:
            raise InputError(
                "A may be an area, or the apex offset a",
                remedy='Write "a" for the apex offset; name a column of areas in another way, such as "area"',
                row=1,
                column=header_text,
            )
        if any(column.name == name for column in columns):
            raise InputError(f'there are two columns "{name}"', remedy="Keep one of them", row=1, column=header_text)
        factor, named = unit_factor(name, match["unit"], header_text, unit)
        unit = unit or named
        if name in LENGTHS and not named and used[index]:
            unitless = unitless or header_text
        columns.append(Column(index, name, header_text, factor))
    for header_text, holds_numbers in unknown:
        refuse_slip(header_text, holds_numbers, {column.name for column in columns})
    if not any(column.name == "shape" for column in columns):
        raise InputError(
            'there is no column "shape"',
            remedy="Include the header row in the range, and name a shape in each row",
            row=1,
        )
    if unit and unitless:
        raise InputError(
            f"{unitless} names no length unit while another column is in {unit}",
            remedy=f"Write {unitless} [{unit}], or leave the unit away everywhere",
            row=1,
            column=unitless,
        )
    return tuple(columns), unit


def refuse_slip(header: str, used: bool, present: Collection[str]) -> None:
    """An unknown header with numbers below it that reads like a known one, or like another name of a missing one."""
    bare = re.sub(r"[^a-z0-9°]", "", re.sub(r"\[.*", "", header.lower()) or header.lower())
    candidates = [bare, UNIT_BEHIND.sub("", bare), header.strip().lower()]
    if used and bare in PIECES:
        raise InputError(
            f'"{header}" is not read, each part counts once',
            remedy="Enter a row for each piece, or give a column of numbering another name",
            row=1,
            column=header,
        )
    meant = next((name for name in ORDER for each in candidates if each == name.replace(" ", "")), None)
    if meant is None:
        numbered = (NUMBERED.fullmatch(each) for each in candidates)
        others = [*(OTHER_NAMES.get(each) for each in candidates), *(each[1] for each in numbered if each)]
        # A0 and A1 are areas.
        meant = next((each for each in others if each in KNOWN and each != "a" and each not in present), None)
    if meant is None:
        long = [name for name in ORDER if len(name) > 3]
        meant = next(iter(get_close_matches(bare, long, 1, 0.8)), None)
    if meant is not None and (used or meant in WORDS):
        bracket = f' or, with its unit, "{meant} [mm]"' if meant in LENGTHS else ""
        raise InputError(
            f'the header "{header}" is not known but looks like "{meant}"',
            remedy=f'Write "{meant}"{bracket}, or give the column another name',
            row=1,
            column=header,
        )


def unit_factor(name: str, unit: str | None, header: str, first: str) -> tuple[float, str]:
    """What a column's numbers are multiplied by, and the length unit it names."""
    if name == "slope" and unit == "%":
        return 0.01, ""
    if not unit or (name in PLAIN and unit == "-") or name in WORDS or name == "strength":
        return 1.0, ""
    if name in ANGLES:
        if unit.lower() in ("°", "deg", "degrees"):
            return 1.0, ""
        raise InputError(
            f'"{unit}" is not the unit of an angle', remedy=f"Give {name} in degrees, {name} [°]", row=1, column=header
        )
    if name in PLAIN:
        raise InputError(f"{name} has no unit", remedy=f"Write the header as {name}", row=1, column=header)
    if unit not in UNITS:
        raise InputError(
            f'"{unit}" is not a known length unit', remedy=f"Use one of {', '.join(UNITS)}", row=1, column=header
        )
    return (UNITS[unit] / UNITS[first] if first and first != unit else 1.0), unit
