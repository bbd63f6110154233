"""The sheet Read me: how to use the workbook, in ten lines."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.layout import GUIDE, PARTS
from cellsection.templates.style import CAPTION, CARE, INPUT, PLAIN, SOUND, furnish, heading, put, title_strip, widths

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["guide_sheet"]

LINES = (
    "Split the section into simple parts, one row each, in the table on Girder. All lengths in one unit.",
    "For each part choose its shape and type the dimensions that shape has; the cell says which.",
    "Place it: x and y are where its datum lies. A plate on top of another: datum bottom, y the level it stands on.",
    "Turn it if it does not stand upright. A channel as a cap, its web on top: shape channel, turn -90, datum left.",
    "Take holes away as parts with sign -1, inside the solid. Where a hole parts a plate, type its width as gap.",
    f"There is room for {PARTS} parts. For more, make a second table on a sheet of your own; CS_JOINED joins both.",
    "Read Faults first: where parts overlap, area counts twice. Then the checks on Ledger, sums by plain formulas.",
    "Use the results in your own sheets: they have names, such as area, centroid_y, Ix, Iy, modulus_top.",
    "Save. Then cellsection check recalculates the saved file without this application, and names what differs.",
    "Where cellsection is not installed the saved values can be read and printed; a new calculation shows #NAME?.",
)


def guide_sheet(book: Workbook) -> Worksheet:
    """Add the sheet to the workbook."""
    sheet: Worksheet = book.create_sheet(GUIDE)
    widths(sheet, {"A": 4.3, "B": 21, "C": 90})
    title_strip(sheet, "Read me", "C")
    heading(sheet, 4, "How to use this workbook", "A:C")
    for number, line in enumerate(LINES, start=1):
        row = 4 + number
        put(sheet, f"A{row}", number, CAPTION.but(align="center"))
        put(sheet, f"B{row}", line)
        sheet.row_dimensions[row].height = 21
    row = 6 + len(LINES)
    heading(sheet, row, "What the tints mean", "A:C")
    meanings = (
        ("input", INPUT, "type here; all other cells are locked, without a password"),
        ("no faults", PLAIN.but(tint=SOUND), "holds"),
        ("2 faults", PLAIN.but(tint=CARE, bold=True), "look here before you use a result"),
    )
    for offset, (text, look, meaning) in enumerate(meanings, start=2):
        put(sheet, f"B{row + offset}", text, look.but(align="center", unlocked=False))
        put(sheet, f"C{row + offset}", meaning, PLAIN.but(indent=1, align="left"))
        sheet.row_dimensions[row + offset].height = 19
    furnish(sheet, f"A1:C{row + 5}")
    return sheet
