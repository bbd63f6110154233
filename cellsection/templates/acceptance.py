"""The acceptance checks: results of the section functions against the hand computation, the ledger and each other."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.layout import HAND_TOTALS, LEDGER, LEDGER_TOTALS, name_range
from cellsection.templates.style import CAPTION, HEADER, LARGE, LENGTH, PLAIN, heading, judged, put

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["CHECKS", "acceptance_checks"]

CHECKS = HAND_TOTALS + 2


def acceptance_checks(book: Workbook, sheet: Worksheet) -> None:
    """Put them on the sheet Ledger."""
    heading(sheet, CHECKS, "3  Acceptance checks", "A:O", "each must come to TRUE; read by cellsection check")
    sheet.row_dimensions[CHECKS + 1].height = 6
    head = CHECKS + 2
    for column, text in {
        "B": "of the section function",
        "G": "value",
        "I": "against",
        "L": "reference",
        "N": "agrees",
    }.items():
        put(sheet, f"{column}{head}", text, HEADER.but(align="left" if column in "BI" else "right"))
    for column in "ACDEFHJKMO":
        put(sheet, f"{column}{head}", None, HEADER)
    h, t = HAND_TOTALS, LEDGER_TOTALS
    checks = (
        ("area A", "=area", "by hand", f"=C{h}"),
        ("height of the centroid y", "=centroid_y", "by hand", f"=E{h}"),
        ("second moment Ix", "=Ix", "by hand: own Ix + A·dy²", f"=H{h}+L{h}"),
        ("second moment Iy", "=Iy", "by hand: own Iy + A·dx²", f"=I{h}+M{h}"),
        ("second moment Ix", "=Ix", "the ledger's totals", f"=H{t}+L{t}"),
        ("second moment Iy", "=Iy", "the ledger's totals", f"=I{t}+M{t}"),
        (
            "Ix about the axes typed in, CS_ABOUT",
            "=INDEX(CS_ABOUT(parts,0,0),1,2)",
            "Ix + A·y²",
            "=Ix+area*centroid_y^2",
        ),
        ("principal moments I1 + I2", '=SUM(CS_PRINCIPAL(parts,"I1"),CS_PRINCIPAL(parts,"I2"))', "Ix + Iy", "=Ix+Iy"),
    )
    for row, (text, value, against, reference) in enumerate(checks, start=head + 1):
        shown = PLAIN.but(format=LENGTH if "area" in text or "centroid" in text else LARGE)
        put(sheet, f"B{row}", text)
        put(sheet, f"G{row}", value, shown)
        put(sheet, f"I{row}", against)
        put(sheet, f"L{row}", reference, shown)
        put(sheet, f"N{row}", f"=CS_AGREES(G{row},L{row})", PLAIN.but(align="right"))
    area = f"N{head + 1}:N{head + len(checks)}"
    judged(sheet, area, f"N{head + 1}=TRUE", f"N{head + 1}<>TRUE")
    name_range(book, "checks", f"{LEDGER}!$N${head + 1}:$N${head + len(checks)}")
    put(sheet, f"I{head + len(checks) + 1}", "checks that agree", CAPTION)
    put(sheet, f"N{head + len(checks) + 1}", "=COUNTIF(checks,TRUE)", CAPTION.but(align="right", size=11))
    name_range(book, "checks_met", f"{LEDGER}!$N${head + len(checks) + 1}")
