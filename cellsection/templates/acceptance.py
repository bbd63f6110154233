"""The acceptance checks: results of the section functions against the hand computation, the ledger and each other."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.layout import HAND_TOP, HAND_TOTALS, LEDGER, LEDGER_TOTALS, name_range
from cellsection.templates.style import CAPTION, HEADER, LARGE, LENGTH, PLAIN, heading, judged, put

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["CHECKS", "acceptance_checks"]

CHECKS = HAND_TOTALS + 2
HEADERS = {
    "B": "of the section function",
    "F": "value",
    "H": "against",
    "L": "reference",
    "M": "difference",
    "O": "agrees",
}


def acceptance_checks(book: Workbook, sheet: Worksheet) -> None:
    """Put them on the sheet Ledger; the cells of CS_AGREES stand beside the page."""
    heading(sheet, CHECKS, "3  Acceptance checks", "A:O", "by CS_AGREES in column Q, within 1 in 1,000,000,000")
    sheet.row_dimensions[CHECKS + 1].height = 6
    head = CHECKS + 2
    for column in "ABCDEFGHIJKLMNO":
        put(sheet, f"{column}{head}", HEADERS.get(column), HEADER.but(align="left" if column in "BH" else "right"))
    put(sheet, f"Q{head}", "CS_AGREES", CAPTION.but(align="center"))
    checks = _checks(HAND_TOP, HAND_TOTALS, LEDGER_TOTALS)
    first, last = head + 1, head + len(checks)
    for row, (text, value, against, reference, shown) in enumerate(checks, start=first):
        put(sheet, f"B{row}", text)
        put(sheet, f"F{row}", value, PLAIN.but(format=shown))
        put(sheet, f"H{row}", against)
        put(sheet, f"L{row}", reference, PLAIN.but(format=shown))
        put(sheet, f"M{row}", f"=IF(L{row}=0,F{row},F{row}/L{row}-1)", PLAIN.but(format="0.0E+0"))
        put(sheet, f"O{row}", f'=IF(Q{row},"yes","no")', PLAIN.but(align="center"))
        put(sheet, f"Q{row}", f"=CS_AGREES(F{row},L{row})", PLAIN.but(align="center"))
    judged(sheet, f"O{first}:O{last}", f'O{first}="yes"', f'O{first}<>"yes"')
    name_range(book, "checks", f"{LEDGER}!$Q${first}:$Q${last}")
    put(sheet, f"H{last + 1}", "checks that agree", CAPTION)
    put(sheet, f"O{last + 1}", "=COUNTIF(checks,TRUE)", CAPTION.but(align="center", size=11))
    name_range(book, "checks_met", f"{LEDGER}!$O${last + 1}")


def _checks(top: int, hand: int, ledger: int) -> tuple[tuple[str, str, str, str, str], ...]:
    """Text, value, what it is held against, reference, format; `hand` and `ledger` are the rows of the totals."""
    column = {each: f"{each}{top}:{each}{hand - 1}" for each in "CE"}
    about = f"=H{hand}+SUMPRODUCT({column['C']},{column['E']},{column['E']})"
    both = '=CS_PRINCIPAL(parts,"I1")+CS_PRINCIPAL(parts,"I2")'
    depth = "fibre_top+fibre_bottom"
    return (
        ("area A", "=area", "by hand", f"=C{hand}", LENGTH),
        # A centroid at 0 cannot be held to a share of itself; with the depth added it can.
        ("centroid y plus the depth over all", f"=centroid_y+{depth}", "by hand", f"=E{hand}+{depth}", LENGTH),
        ("second moment Ix", "=Ix", "by hand: own Ix + A·dy²", f"=H{hand}+L{hand}", LARGE),
        ("second moment Iy", "=Iy", "by hand: own Iy + A·dx²", f"=I{hand}+M{hand}", LARGE),
        ("second moment Ix", "=Ix", "totals of the ledger", f"=H{ledger}+L{ledger}", LARGE),
        ("second moment Iy", "=Iy", "totals of the ledger", f"=I{ledger}+M{ledger}", LARGE),
        ("Ix about y = 0, CS_ABOUT", "=INDEX(CS_ABOUT(parts,0,0),1,2)", "by hand: own Ix + A·y²", about, LARGE),
        ("principal moments I1 + I2", both, "Ix + Iy", "=Ix+Iy", LARGE),
    )
