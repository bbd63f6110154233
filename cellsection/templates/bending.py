"""The sheet Bending of the filled example: an engineer's own sheet on top of the section results.

Plain spreadsheet formulas, with the section functions called again where the girder as built and its upper chord
are needed.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from openpyxl.worksheet.datavalidation import DataValidation

from cellsection.templates.layout import BENDING, FIRST, GIRDER, HEAD, name_range
from cellsection.templates.style import (
    CAPTION,
    HEADER,
    INPUT,
    LARGE,
    LENGTH,
    PLAIN,
    TOTAL,
    Look,
    furnish,
    heading,
    judged,
    put,
    title_strip,
    widths,
)

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

__all__ = ["bending_sheet"]

ACTIONS, SECTION, MOMENTS, STRESSES, CHORD, TABLE = 5, 18, 28, 35, 47, 56  # rows of the headings
I_ROW, CAP_ROW, LEFT_HOLE, RIGHT_HOLE, PLATE_ROW = FIRST, FIRST + 1, FIRST + 3, FIRST + 4, FIRST + 2
ONE, TWO = "#,##0.0", "0.00"
CHORD_BUILT = '=CS_TOTALS(chord_as_built,"Iy")'
SYMBOL = PLAIN.but(align="center", italic=True)
UNIT = PLAIN.but(align="left", indent=1)
REMARK = CAPTION.but(align="left")


def bending_sheet(book: Workbook) -> Worksheet:
    """Add the sheet to the workbook: actions, the girder as built and strengthened, stresses, utilisation."""
    sheet: Worksheet = book.create_sheet(BENDING)
    widths(sheet, {"A": 4.3, "B": 30, "C": 10, "D": 14, "E": 14, "F": 9} | dict.fromkeys("GHIJKL", 8.5) | {"M": 9})
    title_strip(sheet, "Bending", "M")
    put(sheet, "A3", f'={GIRDER}!C5&""', PLAIN.but(bold=True))
    _actions(book, sheet)
    _sections(book, sheet)
    _moments(sheet)
    _stresses(sheet)
    _chord(book, sheet)
    _table_value(sheet)
    furnish(sheet, f"A1:M{TABLE + 4}", locked=False)
    sheet.freeze_panes = "A3"
    return sheet


def _line(sheet: Worksheet, row: int, text: str, symbol: str, unit: str, remark: str = "") -> None:
    put(sheet, f"B{row}", text)
    put(sheet, f"C{row}", symbol, SYMBOL)
    put(sheet, f"F{row}", unit, UNIT)
    if remark:
        put(sheet, f"G{row}", remark, REMARK)


def _both(sheet: Worksheet, row: int, formula: str, look: Look) -> None:
    """The same formula for the girder as built (column D) and strengthened (column E)."""
    for column in "DE":
        put(sheet, f"{column}{row}", formula.replace("#", column), look)


def _columns(sheet: Worksheet, row: int) -> None:
    for column, text in {"D": "as built", "E": "strengthened"}.items():
        put(sheet, f"{column}{row}", text, HEADER.but(align="right"))


def _actions(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, ACTIONS, "1  Actions", "A:M", "tinted cells are typed in")
    rows: tuple[tuple[str, str, float | str, str, str, str], ...] = (
        ("span", "L", 7.2, "m", "span", TWO),
        ("wheel base of the crane", "a", 2.5, "m", "wheel_base", TWO),
        ("wheel load, vertical", "P", 95, "kN", "wheel_load", ONE),
        ("wheel load, lateral", "H", 4.8, "kN", "lateral_load", ONE),
        ("dynamic factor", "φ", 1.1, "", "dynamic_factor", TWO),
        ("partial factor", "γ", 1.35, "", "partial_factor", TWO),
        ("weight of the rail", "gr", 0.33, "kN/m", "rail_weight", TWO),
        ("unit weight of steel", "ρ", 78.5, "kN/m³", "steel_weight", ONE),
        ("steel grade of the girder", "", "S235", "", "steel_grade", "@"),
    )
    for row, (text, symbol, value, unit, name, shown) in enumerate(rows, start=ACTIONS + 2):
        _line(sheet, row, text, symbol, unit)
        put(sheet, f"E{row}", value, INPUT.but(align="right", format=shown))
        name_range(book, name, f"{BENDING}!$E${row}")
    grades = DataValidation("list", formula1='"S235,S275,S355"', allow_blank=False)
    grades.errorTitle, grades.error, grades.showErrorMessage = "steel grade", "Choose S235, S275 or S355.", True
    grades.add(f"E{ACTIONS + 1 + len(rows)}")
    sheet.add_data_validation(grades)
    top = ACTIONS + 2
    put(sheet, f"H{top}", "yield strength by thickness, nominal, EN 10025-2", CAPTION)
    for column, text in zip("HIJK", ("up to", "S235", "S275", "S355"), strict=True):
        put(sheet, f"{column}{top + 1}", text, HEADER.but(align="right"))
    for row, values in enumerate(((40, 225, 265, 345), (16, 235, 275, 355)), start=top + 2):
        for column, value in zip("HIJK", values, strict=True):
            shown = '0" mm"' if column == "H" else "0"
            put(sheet, f"{column}{row}", value, INPUT.but(align="right", format=shown))
    put(sheet, f"L{top + 2}", "N/mm²", UNIT)
    name_range(book, "strengths", f"{BENDING}!$I${top + 2}:$K${top + 3}")
    name_range(book, "thicknesses", f"{BENDING}!$H${top + 2}:$H${top + 3}")
    name_range(book, "grades", f"{BENDING}!$I${top + 1}:$K${top + 1}")


def _sections(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, SECTION, "2  Section", "A:M", "as built: the rolled I alone; strengthened: all parts")
    _columns(sheet, SECTION + 1)
    name_range(book, "as_built", f"{GIRDER}!$B${HEAD}:$P${I_ROW}")
    rows = (
        ("area", "A", "mm²", '=CS_TOTALS(as_built,"A")', "=area", LENGTH),
        ("second moment", "Ix", "mm⁴", '=CS_TOTALS(as_built,"Ix")', "=Ix", LARGE),
        ("elastic modulus, top", "Wx,t", "mm³", "=INDEX(CS_FIBRES(as_built),1,3)", "=modulus_top", LARGE),
        ("elastic modulus, bottom", "Wx,b", "mm³", "=INDEX(CS_FIBRES(as_built),2,3)", "=modulus_bottom", LARGE),
        ("second moment, chord", "Iy,c", "mm⁴", '=CS_TOTALS(chord_as_built,"Iy")', '=CS_TOTALS(chord,"Iy")', LARGE),
        ("half width of the chord", "e", "mm", f"={GIRDER}!D{I_ROW}/2", f"={GIRDER}!E{CAP_ROW}/2", ONE),
    )
    for row, (text, symbol, unit, built, now, shown) in enumerate(rows, start=SECTION + 2):
        _line(sheet, row, text, symbol, unit)
        put(sheet, f"D{row}", built, PLAIN.but(format=shown))
        put(sheet, f"E{row}", now, PLAIN.but(format=shown))
    gain = SECTION + 3
    put(sheet, f"G{gain}", f'="by a factor of "&ROUND(E{gain}/D{gain},2)', REMARK)
    put(sheet, f"G{SECTION + 6}", "lateral loads go to the upper chord alone, chapter 5", REMARK)


def _moments(sheet: Worksheet) -> None:
    heading(
        sheet,
        MOMENTS,
        "3  Bending moments",
        "A:M",
        "simply supported; two wheels at their worst, or one at mid-span",
    )
    _columns(sheet, MOMENTS + 1)
    first = MOMENTS + 2
    wheels = "MAX((2*span-wheel_base)^2/(8*span),span/4)"
    _line(sheet, first, "weight of girder and rail", "g", "kN/m", "A·ρ + gr")
    _both(sheet, first, f"=#{SECTION + 2}*1E-6*steel_weight+rail_weight", PLAIN.but(format=TWO))
    _line(sheet, first + 1, "moment, vertical", "Mx", "kNm", "γ·[φ·P·(2L - a)²/(8L) + g·L²/8]")
    vertical = f"=partial_factor*(dynamic_factor*wheel_load*{wheels}+#{first}*span^2/8)"
    _both(sheet, first + 1, vertical, PLAIN.but(format=ONE))
    _line(sheet, first + 2, "moment, lateral", "My", "kNm", "γ·H·(2L - a)²/(8L)")
    _both(sheet, first + 2, f"=partial_factor*lateral_load*{wheels}", PLAIN.but(format=ONE))


def _stresses(sheet: Worksheet) -> None:
    heading(sheet, STRESSES, "4  Stresses and utilisation", "A:M", "elastic, at the extreme fibres")
    _columns(sheet, STRESSES + 1)
    section, moments, row = SECTION + 2, MOMENTS + 3, STRESSES + 2
    shown = PLAIN.but(format=ONE)
    lines = (
        ("top, from the vertical moment", "σx", f"=#{moments}*1E6/#{section + 2}", "Mx/Wx,t"),
        ("top, from the lateral moment", "σy", f"=#{moments + 1}*1E6*#{section + 5}/#{section + 4}", "My·e/Iy,c"),
        ("top, together", "σt", f"=#{row}+#{row + 1}", "σx + σy"),
        ("bottom", "σb", f"=#{moments}*1E6/#{section + 3}", "Mx/Wx,b"),
    )
    for offset, (text, symbol, formula, remark) in enumerate(lines):
        _line(sheet, row + offset, text, symbol, "N/mm²", remark)
        _both(sheet, row + offset, formula, shown)
    thickest = f"MAX({GIRDER}!G{I_ROW}:G{CAP_ROW},{GIRDER}!E{PLATE_ROW})"
    _line(sheet, row + 4, "strength of the thickest part", "fy", "N/mm²", "by grade and thickness, chapter 1")
    strength = f"=INDEX(strengths,MATCH({thickest},thicknesses,-1),MATCH(steel_grade,grades,0))"
    _both(sheet, row + 4, strength, shown)
    _line(sheet, row + 5, "utilisation", "η", "", "larger of σt and σb, over fy")
    for column in "ABCDEF":
        put(sheet, f"{column}{row + 5}", None, TOTAL)
    put(sheet, f"B{row + 5}", None, TOTAL)
    put(sheet, f"C{row + 5}", None, TOTAL.but(align="center", italic=True))
    _both(sheet, row + 5, f"=MAX(#{row + 2},#{row + 3})/#{row + 4}", TOTAL.but(format=TWO))
    _both(sheet, row + 6, f'=IF(#{row + 5}<=1,"within strength","over strength")', PLAIN.but(align="right"))
    judged(sheet, f"D{row + 6}:E{row + 6}", f"D{row + 5}<=1", f"D{row + 5}>1")


def _chord(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, CHORD, "5  Upper chord", "A:M", "a parts block of its own: top flange as built, cap, holes")
    head = CHORD + 2
    headers = [
        "part",
        "shape",
        "b [mm]",
        "h [mm]",
        "tw [mm]",
        "tf [mm]",
        "r [mm]",
        "x [mm]",
        "y [mm]",
        "turn",
        "sign",
        "datum",
    ]
    cells = "BCDEFGHIJKLM"
    for column, text in zip(cells, headers, strict=True):
        look = HEADER.but(align="left" if column in "BCM" else "right", indent=int(column == "M"))
        put(sheet, f"{column}{head}", text, look)

    def of(column: str, row: int) -> str:
        return f"={GIRDER}!{column}{row}"

    rows: list[dict[str, str]] = [
        {"B": "top flange", "C": "rectangle", "D": of("D", I_ROW), "E": of("G", I_ROW)}
        | {"I": of("K", I_ROW), "J": of("E", I_ROW), "M": "top"},
        {"B": of("B", CAP_ROW), "C": of("C", CAP_ROW), "D": of("D", CAP_ROW), "E": of("E", CAP_ROW)}
        | {"F": of("F", CAP_ROW), "G": of("G", CAP_ROW), "H": of("I", CAP_ROW), "I": of("K", CAP_ROW)}
        | {"J": of("L", CAP_ROW), "K": of("M", CAP_ROW), "M": of("P", CAP_ROW)},
    ]
    for hole in (LEFT_HOLE, RIGHT_HOLE):
        entry = {"B": "B", "C": "C", "D": "D", "E": "E", "I": "K", "J": "L", "L": "N", "M": "P"}
        rows.append({column: of(source, hole) for column, source in entry.items()})
    for row, entry_row in enumerate(rows, start=head + 1):
        for column in cells:
            look = PLAIN.but(align="left" if column in "BCM" else "right", indent=int(column == "M"))
            put(sheet, f"{column}{row}", entry_row.get(column), look)
    name_range(book, "chord_as_built", f"{BENDING}!$B${head}:$M${head + 1}")
    name_range(book, "chord", f"{BENDING}!$B${head}:$M${head + 4}")


def _table_value(sheet: Worksheet) -> None:
    heading(sheet, TABLE, "6  Against the printed section table", "A:M")
    row = TABLE + 2
    put(sheet, f"B{row}", "second moment of the rolled I")
    put(sheet, f"C{row}", "Ix", SYMBOL)
    put(sheet, f"D{row}", 482000000, INPUT.but(align="right", format=LARGE))
    put(sheet, f"E{row}", f"=D{SECTION + 3}", PLAIN.but(format=LARGE))
    put(sheet, f"F{row}", "mm⁴", UNIT)
    put(sheet, f"D{row - 1}", "printed", HEADER.but(align="right"))
    put(sheet, f"E{row - 1}", "here", HEADER.but(align="right"))
    put(sheet, f"O{row}", f"=CS_AGREES(E{row},D{row},0.0001)", PLAIN.but(align="center"))
    put(sheet, f"G{row}", f'=IF(O{row},"agrees","differs")', PLAIN.but(align="center"))
    put(sheet, f"H{row}", "within 1 in 10,000 by CS_AGREES in column O; the table gives 48 200 cm⁴", REMARK)
    judged(sheet, f"G{row}", f'G{row}="agrees"', f'G{row}<>"agrees"')
