"""The sheet Workings: what the other sheets show, as the functions give it, and what feeds the drawing.

All array formulas stand here, each of exactly the right size. The sheets that are read and printed take their cells
from here one by one: LibreOffice calculates array formulas anew when it opens a file, and where it does not know the
functions it would show an error in place of the saved values. The values of other formulas it shows as saved.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from openpyxl.utils import get_column_letter

from cellsection.templates.drawing import POINTS, Side, Trace
from cellsection.templates.layout import (
    FAULT_ROWS,
    FIRST,
    GIRDER,
    LAST,
    LEDGER_LIST,
    PARTS,
    WORKINGS,
    name_range,
)
from cellsection.templates.style import (
    CAPTION,
    HEADER,
    LEDGER_LOOKS,
    LENGTH,
    PLAIN,
    QUIET,
    SMALL,
    array,
    furnish,
    heading,
    put,
    title_strip,
    widths,
)

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["traces", "workings_sheet"]

FRAME = 4  # row of the heading over the frame
LINES = 13  # over the axes and dimensions
FAULTS = 27  # over the list of faults
OUTLINES = LEDGER_LIST + PARTS + 3  # over the outlines
WIDE = 6  # columns an outline takes: as given, solid, cut-out
CUT_OUT = "B4531F"

MIDDLE = 3  # the point of a dimension line that carries its text
LABEL_SIDE: dict[str, Side] = {
    "axis x": "r",
    "axis y": "t",
    "height over all": "l",
    "width over all": "b",
    "centroid to below": "r",
    "centroid to above": "r",
}

# The lines around the section: name, text of their label, and their points as (x, y) formulas of the frame's names.
# The ends of a dimension carry a short oblique stroke, drawn forth and back.
Points = tuple[tuple[str, str], ...]


def workings_sheet(book: Workbook) -> Worksheet:
    """Add the sheet to the workbook."""
    sheet: Worksheet = book.create_sheet(WORKINGS)
    widths(sheet, {"A": 24} | {get_column_letter(column): 10.5 for column in range(2, 2 + WIDE * PARTS)})
    title_strip(sheet, "Workings", "M", "Feeds the drawing, the ledger and the list of faults; nothing is typed here.")
    _frame(book, sheet)
    _lines(sheet)
    _faults(book, sheet)
    _ledger(sheet)
    _outlines(sheet)
    furnish(sheet, f"A1:M{FAULTS - 1}", across=True)
    return sheet


def _frame(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, FRAME, "Frame of the drawing", "A:M", "1 is the height, or the width over 1.25 where that is more")
    rows = (
        ("parts in use", f"=COUNTA({GIRDER}!C{FIRST}:C{LAST})", None, "0"),
        ("centroid x, y", "=centroid_x", "=centroid_y", LENGTH),
        ("extent left, right of it", "=fibre_left", "=fibre_right", LENGTH),
        ("extent below, above it", "=fibre_bottom", "=fibre_top", LENGTH),
        ("width, height over all", "=B7+C7", "=B8+C8", LENGTH),
        ("middle x, y", "=B6+(C7-B7)/2", "=C6+(C8-B8)/2", LENGTH),
        ("length drawn as 1", "=MAX(B9/1.25,C9)", None, LENGTH),
    )
    for row, (text, x, y, shown) in enumerate(rows, start=FRAME + 1):
        put(sheet, f"A{row}", text)
        put(sheet, f"B{row}", x, PLAIN.but(format=shown))
        if y:
            put(sheet, f"C{row}", y, PLAIN.but(format=shown))
    name_range(book, "parts_used", f"{WORKINGS}!$B$5")
    name_range(book, "drawn_as_1", f"{WORKINGS}!$B$11")


def _dimension(along: str, low: str, high: str, *, upright: bool) -> Points:
    """The points of a dimension line at `along` from `low` to `high`, with its strokes; the middle carries the text."""
    stroke = "0.012"

    def point(place: str, across: str, by: str = "") -> tuple[str, str]:
        x, y = (f"={across}{by}", f"={place}{by}") if upright else (f"={place}{by}", f"={across}{by}")
        return x, y

    return (
        point(low, along, f"-{stroke}"),
        point(low, along, f"+{stroke}"),
        point(low, along),
        point(f"({low}+{high})/2", along),
        point(high, along),
        point(high, along, f"-{stroke}"),
        point(high, along, f"+{stroke}"),
    )


# In the frame: half of the width and height, and the centroid.
HALF_W, HALF_H = "$B$9/2/drawn_as_1", "$C$9/2/drawn_as_1"
XC, YC = "($B$6-$B$10)/drawn_as_1", "($C$6-$C$10)/drawn_as_1"
LEFT, RIGHT, BELOW = f"(-{HALF_W}-0.14)", f"({HALF_W}+0.14)", f"(-{HALF_H}-0.075)"
LINES_DRAWN: tuple[tuple[str, str, Points], ...] = (
    ("axis x", '="x"', ((f"=-{HALF_W}-0.04", f"={YC}"), (f"={HALF_W}+0.19", f"={YC}"))),
    ("axis y", '="y"', ((f"={XC}", f"=-{HALF_H}-0.04"), (f"={XC}", f"={HALF_H}+0.05"))),
    ("height over all", "=ROUND(C9,1)", _dimension(LEFT, f"(-{HALF_H})", f"({HALF_H})", upright=True)),
    ("width over all", "=ROUND(B9,1)", _dimension(BELOW, f"(-{HALF_W})", f"({HALF_W})", upright=False)),
    ("centroid to below", "=ROUND(B8,1)", _dimension(RIGHT, f"(-{HALF_H})", YC, upright=True)),
    ("centroid to above", "=ROUND(C8,1)", _dimension(RIGHT, YC, f"({HALF_H})", upright=True)),
)


def _lines(sheet: Worksheet) -> None:
    heading(sheet, LINES, "Axes and dimensions", "A:M", "points in the frame, its middle at 0, 0")
    put(sheet, f"A{LINES + 2}", "text")
    put(sheet, f"A{LINES + 3}", "x, y")
    for index, (name, text, points) in enumerate(LINES_DRAWN):
        column = 2 + 2 * index
        x, y = get_column_letter(column), get_column_letter(column + 1)
        put(sheet, f"{x}{LINES + 1}", name, CAPTION)
        put(sheet, f"{x}{LINES + 2}", f'{text}&""' if "ROUND" in text else text, PLAIN.but(align="right"))
        for row, (px, py) in enumerate(points, start=LINES + 3):
            put(sheet, f"{x}{row}", px, PLAIN.but(format=SMALL))
            put(sheet, f"{y}{row}", py, PLAIN.but(format=SMALL))


def _faults(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, FAULTS, "Faults", "A:M")
    put(sheet, f"A{FAULTS + 1}", "number of faults")
    put(sheet, f"B{FAULTS + 1}", '=IF(faults="no faults",0,ROWS(CS_FAULTS(parts,gap)))', PLAIN.but(format="0"))
    name_range(book, "fault_count", f"{WORKINGS}!$B${FAULTS + 1}")
    first, last = FAULTS + 2, FAULTS + 1 + FAULT_ROWS
    for number, row in enumerate(range(first, last + 1), start=1):
        put(sheet, f"A{row}", number, PLAIN.but(align="right"))
    some = f'IF($A${first}:$A${last}<=fault_count,CS_FAULTS(parts,gap),"")'
    array(sheet, f"B{first}:E{last}", f'=IF(fault_count=0,"",{some})')
    name_range(book, "fault_list", f"{WORKINGS}!$B${first}:$E${last}")


def _ledger(sheet: Worksheet) -> None:
    heading(sheet, LEDGER_LIST - 2, "Ledger", "A:M")
    last = LEDGER_LIST + PARTS
    for number, row in enumerate(range(LEDGER_LIST, last + 1)):
        put(sheet, f"A{row}", number, PLAIN.but(align="right"))  # the header row is 0: one comparison picks all in use
    numbers = f"$A${LEDGER_LIST}:$A${last}"
    area = f"B{LEDGER_LIST}:M{last}"
    array(sheet, area, f'=IF({numbers}<=parts_used,CS_LEDGER(parts),"")', LEDGER_LOOKS)
    put(sheet, f"A{last + 1}", "total", PLAIN.but(align="right"))
    array(sheet, f"B{last + 1}:M{last + 1}", "=INDEX(CS_LEDGER(parts),parts_used+2,0)", LEDGER_LOOKS)


def _outlines(sheet: Worksheet) -> None:
    heading(sheet, OUTLINES, "Outlines", f"A:{get_column_letter(1 + WIDE * PARTS)}")
    rows = ("number", "sign of its area", "outline by CS_OUTLINE; scaled to the frame, solid; cut-out")
    for row, text in enumerate(rows, start=OUTLINES + 1):
        put(sheet, f"A{row}", text)
    top, bottom = OUTLINES + 4, OUTLINES + 3 + POINTS
    for number in range(1, PARTS + 1):
        x, y, *drawn = (get_column_letter(2 + WIDE * (number - 1) + each) for each in range(WIDE))
        put(sheet, f"{x}{OUTLINES + 1}", number, HEADER.but(align="right"))
        area = f"$C${LEDGER_LIST + number}"
        put(sheet, f"{x}{OUTLINES + 2}", f"=IF({x}{OUTLINES + 1}<=parts_used,SIGN({area}),0)")
        for letter, text in zip((x, y, *drawn), ("x", "y", "x solid", "y solid", "x cut", "y cut"), strict=True):
            put(sheet, f"{letter}{OUTLINES + 3}", text, CAPTION.but(align="right"))
        outline = f"CS_OUTLINE(parts,{x}${OUTLINES + 1},{POINTS})"
        if number > 1:  # a part the table does not have repeats the one before
            left, right = (get_column_letter(2 + WIDE * (number - 2) + each) for each in range(2))
            outline = f"IF({x}${OUTLINES + 1}<=parts_used,{outline},{left}{top}:{right}{bottom})"
        array(sheet, f"{x}{top}:{y}{bottom}", f"={outline}", PLAIN.but(format=LENGTH))
        for letter, source, middle, sign in zip(drawn, (x, y) * 2, ("$B$10", "$C$10") * 2, ">><<", strict=True):
            for row in range(top, bottom + 1):
                scaled = f"({source}{row}-{middle})/drawn_as_1"
                put(sheet, f"{letter}{row}", f"=IF({x}${OUTLINES + 2}{sign}0,{scaled},0)", PLAIN.but(format=SMALL))


def traces() -> list[Trace]:
    """All lines of the drawing: axes and dimensions first, the parts over them, the cut-outs on top."""
    first = LINES + 3
    found = []
    for index, (name, _, points) in enumerate(LINES_DRAWN):
        column = 2 + 2 * index
        axis = name.startswith("axis")
        trace = Trace(
            WORKINGS,
            first,
            first + len(points) - 1,
            column,
            weight=0.5,
            colour=QUIET,
            dash="lgDashDot" if axis else "solid",
            label=f"{WORKINGS}!${get_column_letter(column)}${LINES + 2}",
            labelled=1 if axis else MIDDLE,
            position=LABEL_SIDE[name],
            upright=name in ("height over all", "centroid to below", "centroid to above"),
        )
        found.append(trace)
    top, bottom = OUTLINES + 4, OUTLINES + 3 + POINTS
    starts = [4 + WIDE * part for part in range(PARTS)]
    found += [Trace(WORKINGS, top, bottom, column) for column in starts]
    found += [Trace(WORKINGS, top, bottom, column + 2, weight=1, colour=CUT_OUT, dash="sysDash") for column in starts]
    return found
