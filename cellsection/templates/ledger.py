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
    LEDGER_TOP,
    LEDGER_TOTALS,
)
from cellsection.templates.style import (
    CAPTION,
    HEADER,
    LEDGER_LOOKS,
    PLAIN,
    TOTAL,
    array,
    furnish,
    heading,
    put,
    title_strip,
    when,
    widths,
)

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["ledger_sheet"]


def ledger_sheet(book: Workbook) -> Worksheet:
    """Add the sheet to the workbook."""
    sheet: Worksheet = book.create_sheet(LEDGER)
    widths(sheet, {"A": 4.3, "B": 21} | dict.fromkeys(LEDGER_COLUMNS[1:], 11.6) | {"N": 7.5, "O": 7})
    title_strip(sheet, "Ledger and checks", "O")
    put(sheet, "A3", f'={GIRDER}!C5&""', PLAIN.but(bold=True))
    _ledger(sheet)
    hand_ledger(sheet)
    acceptance_checks(book, sheet)
    furnish(sheet, f"A1:O{CHECKS + 11}")
    sheet.freeze_panes = "C3"
    return sheet


def _ledger(sheet: Worksheet) -> None:
    hint = "a row a part, by CS_LEDGER; dx and dy from the common centroid"
    heading(sheet, LEDGER_HEAD - 2, "1  Ledger", "A:O", hint)
    sheet.row_dimensions[LEDGER_HEAD - 1].height = 6
    for number, row in enumerate(range(LEDGER_HEAD, LEDGER_TOTALS)):
        # The header row counts as 0, so that one comparison picks the rows in use.
        put(sheet, f"A{row}", number, CAPTION.but(align="center", format='0;-0;"no."'))
    when(sheet, f"A{LEDGER_TOP}:A{LEDGER_TOTALS - 1}", f"$A{LEDGER_TOP}>parts_used", colour="FFFFFF")
    numbers = f"$A${LEDGER_HEAD}:$A${LEDGER_TOTALS - 1}"
    area = f"B{LEDGER_HEAD}:M{LEDGER_TOTALS - 1}"
    array(sheet, area, f'=IF({numbers}<=parts_used,CS_LEDGER(parts),"")', LEDGER_LOOKS)
    for column in LEDGER_COLUMNS:
        put(sheet, f"{column}{LEDGER_HEAD}", None, HEADER.but(align="left" if column == "B" else "right", size=10))
    put(sheet, f"A{LEDGER_TOTALS}", None, TOTAL)
    looks = [each.but(bold=True, over=TOTAL.over) for each in LEDGER_LOOKS]
    array(sheet, f"B{LEDGER_TOTALS}:M{LEDGER_TOTALS}", "=INDEX(CS_LEDGER(parts),parts_used+2,0)", looks)
