"""How every sheet looks on paper and on screen: faces, lines, tints, formats, headings, page furniture.

Everything must read in black and white: an input cell has a tint and a fine line under it, a verdict is a word.
"""

from __future__ import annotations

from copy import copy
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING
from weakref import WeakKeyDictionary

from openpyxl.formatting.rule import Rule
from openpyxl.styles import Alignment, Border, Font, PatternFill, Protection, Side
from openpyxl.styles.differential import DifferentialStyle
from openpyxl.worksheet.formula import ArrayFormula
from openpyxl.worksheet.properties import PageSetupProperties

if TYPE_CHECKING:
    from collections.abc import Iterable

    from openpyxl import Workbook
    from openpyxl.cell import Cell
    from openpyxl.styles.cell_style import StyleArray
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = [
    "CAPTION",
    "HEADER",
    "INK",
    "INPUT",
    "LARGE",
    "LEDGER_LOOKS",
    "LENGTH",
    "LINE",
    "PLAIN",
    "QUIET",
    "SMALL",
    "TITLE",
    "TOTAL",
    "Look",
    "array",
    "furnish",
    "heading",
    "input_area",
    "judged",
    "put",
    "title_strip",
    "when",
    "widths",
]

CAUTION = "Results are for review by a licensed engineer before use; local codes govern."
FACE = "Calibri"  # Carlito, its metric twin, stands in where it is missing
INK, QUIET, LINE = "22303C", "66727E", "B4BDC5"
TINT, SOUND, CARE = "F6F1E6", "DDEBDF", "F8DDB0"

LENGTH = "#,##0.00"
LARGE = "##0.000E+0"  # powers of a thousand, so that mm⁴ read as millions and thousands of millions
SMALL = "0.000"
ROW = 16.5  # points, the height of a row

FINE = Side(style="thin", color=LINE)
STRONG = Side(style="medium", color=INK)
RULE = Side(style="thin", color=INK)


@dataclass(frozen=True)
class Look:
    """The look of one kind of cell."""

    size: float = 11
    bold: bool = False
    italic: bool = False
    colour: str = INK
    align: str = "general"
    upright: str = "center"
    wrap: bool = False
    indent: int = 0
    format: str = "General"
    tint: str = ""
    under: Side | None = None
    over: Side | None = None
    unlocked: bool = False

    def but(self, **changes: object) -> Look:
        """The same look with some things changed."""
        return replace(self, **changes)  # type: ignore[arg-type]


PLAIN = Look()
TITLE = Look(size=20, bold=True)
CAPTION = Look(size=9, colour=QUIET)
HEADER = Look(bold=True, align="center", under=FINE)
TOTAL = Look(bold=True, over=FINE)
# A row of a ledger: part, A, x, y, A·x, A·y, own Ix, own Iy, dx, dy, A·dy², A·dx².
LEDGER_LOOKS = [
    PLAIN.but(align="left"),
    *[PLAIN.but(format=LENGTH)] * 3,
    *[PLAIN.but(format=LARGE)] * 4,
    *[PLAIN.but(format=LENGTH)] * 2,
    *[PLAIN.but(format=LARGE)] * 2,
]
INPUT = Look(tint=TINT, under=FINE, unlocked=True)


# The styles of a workbook under construction, by look: the library compares style objects one by one, which is slow.
_STYLES: WeakKeyDictionary[Workbook, dict[Look, StyleArray]] = WeakKeyDictionary()


def put(sheet: Worksheet, address: str, value: object = None, look: Look = PLAIN) -> None:
    """Put a value or a formula into a cell, with its look; a value of None only gives the look."""
    cell = sheet[address]
    if value is not None:
        cell.value = value
    assert sheet.parent is not None
    styles = _STYLES.setdefault(sheet.parent, {})
    if look not in styles:
        _dress(cell, look)
        styles[look] = copy(cell._style)
    cell._style = copy(styles[look])


def _dress(cell: Cell, look: Look) -> None:
    """Give a cell its look."""
    cell.font = Font(name=FACE, size=look.size, bold=look.bold, italic=look.italic, color=look.colour)
    cell.alignment = Alignment(horizontal=look.align, vertical=look.upright, wrap_text=look.wrap, indent=look.indent)
    cell.border = Border(bottom=look.under, top=look.over)
    cell.number_format = look.format
    cell.protection = Protection(locked=not look.unlocked)
    cell.fill = PatternFill("solid", start_color=look.tint) if look.tint else PatternFill()


def array(sheet: Worksheet, area: str, formula: str, looks: Iterable[Look] | Look = PLAIN) -> None:
    """Put one array formula over the whole area; one look for all, or a look a column."""
    rows = list(sheet[area]) if ":" in area else [(sheet[area],)]
    columns = [looks] * len(rows[0]) if isinstance(looks, Look) else list(looks)
    for row in rows:
        for cell, look in zip(row, columns, strict=True):
            put(sheet, cell.coordinate, None, look)
    first = rows[0][0].coordinate
    sheet[first] = ArrayFormula(area if ":" in area else f"{first}:{first}", formula)


def input_area(sheet: Worksheet, area: str, value: object = None, look: Look = INPUT) -> None:
    """One input over merged cells."""
    rows = list(sheet[area])
    for row in rows:
        for cell in row:
            put(sheet, cell.coordinate, None, look if row is rows[-1] else look.but(under=None))
    sheet.merge_cells(area)
    if value is not None:
        sheet[rows[0][0].coordinate].value = value


def heading(sheet: Worksheet, row: int, text: str, columns: str, hint: str = "") -> None:
    """A chapter heading with a fine line under it across the columns ("B:E"), and a hint at its right end."""
    first, last = columns.split(":")
    for cell in sheet[f"{first}{row}:{last}{row}"][0]:
        put(sheet, cell.coordinate, None, Look(under=RULE))
    put(sheet, f"{first}{row}", text, Look(size=12, bold=True, under=RULE))
    if hint:
        put(sheet, f"{last}{row}", hint, CAPTION.but(align="right", italic=True, under=RULE))
    sheet.row_dimensions[row].height = 19


def title_strip(sheet: Worksheet, title: str, last: str, under: str = CAUTION) -> None:
    """The two rows on top of a sheet, to its last column: its title, and the caution or what the sheet is for."""
    put(sheet, "A1", title, TITLE)
    sheet.row_dimensions[1].height = 30
    for cell in sheet[f"A2:{last}2"][0]:
        put(sheet, cell.coordinate, None, Look(size=10, italic=True, under=STRONG))
    sheet["A2"] = under
    sheet.row_dimensions[2].height = 19


def widths(sheet: Worksheet, columns: dict[str, float]) -> None:
    """Column widths, in characters."""
    for column, width in columns.items():
        sheet.column_dimensions[column].width = width


def judged(sheet: Worksheet, area: str, good: str, bad: str) -> None:
    """Tint an area by two conditions; the words in the cells say the same without colour."""
    when(sheet, area, bad, tint=CARE, bold=True)
    when(sheet, area, good, tint=SOUND)


def when(
    sheet: Worksheet,
    area: str,
    condition: str,
    *,
    tint: str = "",
    colour: str = INK,
    bold: bool | None = None,
    italic: bool | None = None,
) -> None:
    """A look that the cells of an area take on a condition, written for its first cell."""
    fill = PatternFill(bgColor=tint) if tint else None
    look = DifferentialStyle(font=Font(bold=bold, italic=italic, color=colour), fill=fill)
    sheet.conditional_formatting.add(area, Rule(type="expression", dxf=look, formula=[condition]))


def furnish(sheet: Worksheet, area: str, *, across: bool = False, locked: bool = True) -> None:
    """Page and window of a sheet: A4, all on one page, footer, quiet window; locked without a password.

    area : what is printed
    across : the page lies on its long side
    locked : only the input cells can be typed in, until the sheet's protection is taken off
    """
    sheet.sheet_view.showGridLines = False
    sheet.sheet_view.zoomScale = 100
    sheet.sheet_format.defaultRowHeight, sheet.sheet_format.customHeight = ROW, True
    sheet.print_area = area
    sheet.print_title_rows = "1:2"  # for the day it grows beyond one page
    sheet.page_setup.orientation = "landscape" if across else "portrait"
    sheet.page_setup.paperSize = 9  # A4
    sheet.page_setup.fitToWidth = sheet.page_setup.fitToHeight = 1
    sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
    sheet.page_margins.left = sheet.page_margins.right = 0.55  # inches
    sheet.page_margins.top, sheet.page_margins.bottom = 0.55, 0.7
    sheet.page_margins.header = sheet.page_margins.footer = 0.35
    sheet.print_options.horizontalCentered = True
    for part, text in (("left", "&F · &A"), ("right", "sheet &P of &N")):
        footer = getattr(sheet.oddFooter, part)
        footer.text, footer.size, footer.font = text, 8, f"{FACE},Regular"
    sheet.protection.sheet = locked
    sheet.protection.formatCells = sheet.protection.formatColumns = sheet.protection.formatRows = False
