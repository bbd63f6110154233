"""Recalculated books made by hand, so that the check is tested apart from the evaluator."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.values import Scalar

REFUSED = ErrorValue(
    "#VALUE!",
    "CS_TOTALS, argument parts: row 3, column tw: thickness 0 is not positive. Enter the plate thickness.",
    "Girder!F12",
)


def cell(
    address: str,
    saved: Scalar,
    value: Scalar,
    *,
    formula: str = "=A1",
    sheet: str = "Girder",
    status: Status = Status.RECALCULATED,
    call: str = "",
    reason: str = "",
    notes: tuple[str, ...] = (),
    has_saved: bool = True,
) -> FormulaCell:
    return FormulaCell(sheet, address, saved, value, status, call, reason, notes, has_saved, text=lambda: formula)


def book(*cells: FormulaCell, path: str = "girder.xlsx", notes: tuple[str, ...] = ()) -> Recalculation:
    sheets = tuple(dict.fromkeys(each.sheet for each in cells)) or ("Girder",)
    return Recalculation(path, sheets, list(cells), list(notes))


def troubled() -> Recalculation:
    """One of everything a check can find."""
    hand_over = ErrorValue("#DIV/0!", "", "Girder!Q1")
    circle = "Girder!P1 -> Girder!P2 -> Girder!P1"
    return book(
        cell("C4", 1.0, 1.0),
        cell("C5", 125440000.0, 126440000.5, formula="=SUM(C1:C4)"),
        cell("C6", "plate", 3.0, formula="=A6"),
        cell("F12", 5.0, REFUSED, formula='=CS_TOTALS(A4:I7,"Ix")', call="CS_TOTALS"),
        *(cell(f"F{row}", 5.0, REFUSED, formula="=F12*2") for row in range(13, 25)),
        cell("K1", "no faults", "web", call="CS_FAULTS", formula="=CS_FAULTS(A4:I7)"),
        cell("K2", True, False, call="CS_AGREES", formula="=CS_AGREES(C4,C5)"),
        cell("K3", True, True, call="CS_AGREES", formula="=CS_AGREES(C4,C4)"),
        cell("M1", 1.0, 1.0, status=Status.UNSUPPORTED, reason="function FORECAST", formula="=FORECAST(1,A1,B1)"),
        cell("M2", 1.0, 1.0, status=Status.NOT_VERIFIED, reason="Girder!M1", formula="=M1"),
        cell("P1", 1.0, 1.0, status=Status.CYCLE, reason=circle, formula="=P2"),
        cell("P2", 1.0, 1.0, status=Status.CYCLE, reason=circle, formula="=P1"),
        cell("P3", 1.0, 1.0, status=Status.NOT_VERIFIED, reason="Girder!P2", formula="=P2"),
        cell("Q1", hand_over, hand_over, formula="=1/0"),
        cell("Q2", hand_over, hand_over, formula="=Q1"),
        cell("R1", None, 2.0, has_saved=False),
        cell("S1", 44000.0, 44001.0, status=Status.VOLATILE, call="NOW", formula="=NOW()"),
        cell("S2", 44000.0, "", status=Status.VOLATILE, formula='=IF(DAY(S1)=1,S1,"")'),
        cell("T1", 7.0, 7.0, notes=("reads saved values of another book (Loads.xlsx)",)),
        *(cell(f"B{row}", float(row), row + 1.0, sheet="Crane hall", formula="=Girder!C5") for row in range(1, 40)),
        notes=("iterative calculation is switched on in this book",),
    )
