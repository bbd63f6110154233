"""The sheet Ledger: the hand method by the section function, the same by plain formulas, and the acceptance checks."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.acceptance import CHECKS, acceptance_checks
from cellsection.templates.hand import hand_ledger
from cellsection.templates.layout import (
    GIRDER,
    LEDGER,
    LEDGER_COLUMNS,
    LEDGER_HEAD,
    LEDGER_LIST,
    LEDGER_TOTALS,
    PARTS,
    WORKINGS,
)
from cellsection.templates.style import (
    CAPTION,
    HEADER,
    LEDGER_LOOKS,
    PLAIN,
    TOTAL,
    furnish,
    heading,
    put,
    title_strip,
    widths,
)

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["ledger_sheet"]


def ledger_sheet(book: Workbook) -> Worksheet:
    """Add the sheet to the workbook."""
    sheet: Worksheet = book.create_sheet(LEDGER)
    widths(sheet, {"A": 4.3, "B": 21} | dict.fromkeys(LEDGER_COLUMNS[1:], 11.6) | {"N": 7.5, "O": 7, "Q": 12})
    title_strip(sheet, "Ledger and checks", "O")
    put(sheet, "A3", f'={GIRDER}!C5&""', PLAIN.but(bold=True))
    _ledger(sheet)
    hand_ledger(sheet)
    acceptance_checks(book, sheet)
    furnish(sheet, f"A1:O{CHECKS + 11}")
    sheet.freeze_panes = "C3"
    return sheet


def _ledger(sheet: Worksheet) -> None:
    hint = "a row a part, as CS_LEDGER gives it; dx and dy from the common centroid"
    heading(sheet, LEDGER_HEAD - 2, "1  Ledger", "A:O", hint)
    sheet.row_dimensions[LEDGER_HEAD - 1].height = 6
    put(sheet, f"A{LEDGER_HEAD}", "no.", CAPTION.but(align="center"))
    put(sheet, f"A{LEDGER_TOTALS}", None, TOTAL)
    for number in range(1, PARTS + 1):
        row = LEDGER_HEAD + number
        put(sheet, f"A{row}", f'=IF({number}<=parts_used,{number},"")', CAPTION.but(align="center"))
    for row in range(LEDGER_HEAD, LEDGER_TOTALS + 1):
        for column, look in zip(LEDGER_COLUMNS, LEDGER_LOOKS, strict=True):
            if row == LEDGER_HEAD:
                look = HEADER.but(align="left" if column == "B" else "right", size=10)
            elif row == LEDGER_TOTALS:
                look = look.but(bold=True, over=TOTAL.over)
            put(sheet, f"{column}{row}", f"={WORKINGS}!{column}{row - LEDGER_HEAD + LEDGER_LIST}", look)
