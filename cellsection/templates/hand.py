"""The ledger once more by plain formulas, row by row beside the parts table: what a checker would do by hand.

Upright rectangles, circles and I shapes are worked out here; other parts take their own area, centroid and second
moments from the ledger, so that at least the sums are independent. The column `by` says which.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.content import LETTER
from cellsection.templates.layout import (
    FIRST,
    GIRDER,
    HAND,
    HAND_HEAD,
    HAND_TOP,
    HAND_TOTALS,
    LEDGER_COLUMNS,
    LEDGER_HEAD,
    LEDGER_TOP,
    LEDGER_TOTALS,
    PARTS,
)
from cellsection.templates.style import CAPTION, HEADER, LEDGER_LOOKS, PLAIN, TOTAL, heading, put

if TYPE_CHECKING:
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["hand_ledger"]


def hand_ledger(sheet: Worksheet) -> None:
    """Put it on the sheet Ledger, under the function's own."""
    hint = "upright rectangles, circles, I shapes by plain formulas; others take A, x, y, own Ix, own Iy from above"
    heading(sheet, HAND, "2  The same by hand", "A:O", hint)
    sheet.row_dimensions[HAND + 1].height = 6
    put(sheet, f"A{HAND_HEAD}", "no.", CAPTION.but(align="center"))
    for column in LEDGER_COLUMNS:
        look = HEADER.but(align="left" if column == "B" else "right", size=10)
        put(sheet, f"{column}{HAND_HEAD}", f"={column}{LEDGER_HEAD}", look)
    put(sheet, f"N{HAND_HEAD}", "by", HEADER)
    put(sheet, f"O{HAND_HEAD}", "sign·n", HEADER)
    for offset in range(PARTS):
        _hand_row(sheet, HAND_TOP + offset, FIRST + offset)
    _hand_totals(sheet)


def _hand_row(sheet: Worksheet, row: int, part: int) -> None:
    """One part by plain formulas, `part` its row on the sheet Girder."""
    cell = {word: f"{GIRDER}!${column}{part}" for word, column in LETTER.items()}
    by, no = f"$N{row}", f"$A{row}"

    def filled(formula: str) -> str:
        return f'=IF({by}="","",{formula})'

    def hand(column: str, formula: str) -> str:
        """By hand where that is possible, else from the ledger above."""
        return filled(f'IF({by}="ledger",INDEX({column}${LEDGER_TOP}:{column}${LEDGER_TOTALS - 1},{no}),{formula})')

    kinds = f'OR({cell["shape"]}="rectangle",{cell["shape"]}="circle",{cell["shape"]}="I")'
    put(sheet, no.replace("$", ""), f"={GIRDER}!A{part}", CAPTION.but(align="center"))
    put(
        sheet,
        f"N{row}",
        f'=IF({cell["shape"]}="","",IF(AND({kinds},MOD({cell["turn"]},180)=0),"hand","ledger"))',
        CAPTION.but(align="center", size=10),
    )
    weight = f'IF({cell["sign"]}="",1,{cell["sign"]})*IF({cell["n"]}="",1,{cell["n"]})'
    put(sheet, f"O{row}", filled(weight), PLAIN.but(align="center"))
    formulas = {
        "B": filled(f'{cell["part"]}&""'),
        "C": hand("C", f"$O{row}*{_by_shape(cell, AREA)}"),
        "D": hand("D", _centroid(cell, "x", "b", "left", "right")),
        "E": hand("E", _centroid(cell, "y", "h", "bottom", "top")),
        "F": filled(f"C{row}*D{row}"),
        "G": filled(f"C{row}*E{row}"),
        "H": hand("H", f"$O{row}*{_by_shape(cell, OWN_IX)}"),
        "I": hand("I", f"$O{row}*{_by_shape(cell, OWN_IY)}"),
        "J": filled(f"D{row}-D${HAND_TOTALS}"),
        "K": filled(f"E{row}-E${HAND_TOTALS}"),
        "L": filled(f"C{row}*K{row}^2"),
        "M": filled(f"C{row}*J{row}^2"),
    }
    for (column, formula), look in zip(formulas.items(), LEDGER_LOOKS, strict=True):
        put(sheet, f"{column}{row}", formula, look)


# By shape: rectangle, circle, I. The root fillet r of an I shape is a square less a quarter circle: its area is
# (1-pi/4) r², its first moment about the edge it touches (5/6-pi/4) r³, its second (1-5 pi/16) r⁴.
AREA = (
    "{b}*{h}",
    "PI()*{d}^2/4",
    "(2*{b}*{tf}+({h}-2*{tf})*{tw}+4*(1-PI()/4)*{r}^2)",
)
OWN_IX = (
    "{b}*{h}^3/12",
    "PI()*{d}^4/64",
    "(({b}*{h}^3-({b}-{tw})*({h}-2*{tf})^3)/12+4*((1-PI()/4)*{r}^2*({h}/2-{tf})^2"
    "-2*(5/6-PI()/4)*{r}^3*({h}/2-{tf})+(1-5*PI()/16)*{r}^4))",
)
OWN_IY = (
    "{h}*{b}^3/12",
    "PI()*{d}^4/64",
    "((2*{tf}*{b}^3+({h}-2*{tf})*{tw}^3)/12+4*((1-PI()/4)*{r}^2*({tw}/2)^2"
    "+2*(5/6-PI()/4)*{r}^3*({tw}/2)+(1-5*PI()/16)*{r}^4))",
)


def _by_shape(cell: dict[str, str], formulas: tuple[str, str, str]) -> str:
    rectangle, circle, i_shape = (each.format(**cell) for each in formulas)
    shape = cell["shape"]
    return f'IF({shape}="rectangle",{rectangle},IF({shape}="circle",{circle},{i_shape}))'


def _centroid(cell: dict[str, str], axis: str, size: str, low: str, high: str) -> str:
    """The centroid of a symmetric shape along one axis, from its datum; half a turn swaps the sides."""
    half = f'IF({cell["shape"]}="circle",{cell["d"]},{cell[size]})/2'
    side = f'(ISNUMBER(SEARCH("{low}",{cell["datum"]}))-ISNUMBER(SEARCH("{high}",{cell["datum"]})))'
    return f"{cell[axis]}+{side}*{half}*IF(MOD({cell['turn']},360)=180,-1,1)"


def _hand_totals(sheet: Worksheet) -> None:
    row = HAND_TOTALS
    put(sheet, f"A{row}", None, TOTAL)
    put(sheet, f"B{row}", "total", TOTAL)
    for column, look in zip(LEDGER_COLUMNS[1:], LEDGER_LOOKS[1:], strict=True):
        formula: str | None = f"=SUM({column}{HAND_TOP}:{column}{row - 1})"
        if column in "DE":
            formula = f"={'F' if column == 'D' else 'G'}{row}/C{row}"
        elif column in "JK":
            formula = None
        put(sheet, f"{column}{row}", formula, TOTAL.but(format=look.format))
    for column in "NO":
        put(sheet, f"{column}{row}", None, TOTAL)
