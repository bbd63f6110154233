"""Where things stand: the sheets, the rows that one sheet tells another, and the names of ranges."""

from __future__ import annotations

from typing import TYPE_CHECKING

from openpyxl.workbook.defined_name import DefinedName

if TYPE_CHECKING:
    from openpyxl import Workbook

__all__ = [
    "BENDING",
    "FAULT_ROWS",
    "FIRST",
    "GIRDER",
    "GUIDE",
    "HAND",
    "HAND_HEAD",
    "HAND_TOP",
    "HAND_TOTALS",
    "HEAD",
    "LAST",
    "LEDGER",
    "LEDGER_COLUMNS",
    "LEDGER_HEAD",
    "LEDGER_LIST",
    "LEDGER_TOP",
    "LEDGER_TOTALS",
    "PARTS",
    "WORKINGS",
    "name_range",
]

GIRDER, LEDGER, BENDING, GUIDE, WORKINGS = "Girder", "Ledger", "Bending", "Read me", "Workings"

PARTS = 14  # parts the table has room for
HEAD = 11  # row of the parts block's headers on Girder
FIRST, LAST = HEAD + 1, HEAD + PARTS
FAULT_ROWS = 3  # faults shown in words; their number is always shown
LEDGER_COLUMNS = "BCDEFGHIJKLM"  # on Ledger: part, A, x, y, A·x, A·y, own Ix, own Iy, dx, dy, A·dy², A·dx²
LEDGER_HEAD = 7
LEDGER_TOP, LEDGER_TOTALS = LEDGER_HEAD + 1, LEDGER_HEAD + 1 + PARTS
HAND = LEDGER_TOTALS + 2  # heading of the same by hand
HAND_HEAD = HAND + 2
HAND_TOP, HAND_TOTALS = HAND_HEAD + 1, HAND_HEAD + 1 + PARTS
LEDGER_LIST = 36  # on Workings: row of the header of the ledger as CS_LEDGER gives it, in the same columns


def name_range(book: Workbook, name: str, area: str) -> None:
    """Give a range a name that the whole workbook knows."""
    book.defined_names[name] = DefinedName(name, attr_text=area)
