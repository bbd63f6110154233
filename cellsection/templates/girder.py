"""The sheet Girder: title block, parts table, section results, drawing, faults, notes."""

from __future__ import annotations

from typing import TYPE_CHECKING

from cellsection.templates.content import COLUMNS, LETTER
from cellsection.templates.entry import guard_inputs
from cellsection.templates.layout import FAULT_ROWS, FIRST, GIRDER, HEAD, LAST, name_range
from cellsection.templates.style import (
    CAPTION,
    HEADER,
    INPUT,
    LARGE,
    LENGTH,
    PLAIN,
    TITLE,
    Look,
    furnish,
    heading,
    input_area,
    judged,
    put,
    title_strip,
    when,
    widths,
)

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

    from cellsection.templates.content import Content

__all__ = ["CHART_AT", "girder_sheet"]

RESULTS = LAST + 2
VALUES = RESULTS + 2  # first row of CS_TOTALS
FAULTS = RESULTS + 22
NOTES = FAULTS + FAULT_ROWS + 5
CHART_AT = f"F{RESULTS + 1}"
WIDTHS = {"A": 4.3, "B": 21, "C": 12.5, "D": 11.5, "E": 11} | dict.fromkeys("FGHIJ", 7.8)
WIDTHS |= {"K": 8, "L": 8, "M": 6.5, "N": 5.5, "O": 5.5, "P": 12}

# The symbols of CS_TOTALS: what each means, the name of its value, how it is shown, what its unit adds to the length.
TOTALS = {
    "A": ("area", "area", LENGTH, "²"),
    "x": ("centroid", "centroid_x", LENGTH, ""),
    "y": ("", "centroid_y", LENGTH, ""),
    "Ix": ("second moments", "Ix", LARGE, "⁴"),
    "Iy": ("", "Iy", LARGE, "⁴"),
    "Ixy": ("product moment", "Ixy", LARGE, "⁴"),
    "Ip": ("polar moment", "Ip", LARGE, "⁴"),
    "rx": ("radii of gyration", "rx", LENGTH, ""),
    "ry": ("", "ry", LENGTH, ""),
    "I1": ("principal moments", "moment_1", LARGE, "⁴"),
    "I2": ("", "moment_2", LARGE, "⁴"),
    "angle": ("from x to axis 1", "angle_1", LENGTH, "°"),
}
FIBRES = ("top", "bottom", "left", "right")


def girder_sheet(book: Workbook, content: Content) -> Worksheet:
    """Add the sheet to the workbook."""
    sheet: Worksheet = book.create_sheet(GIRDER)
    widths(sheet, WIDTHS)
    title_strip(sheet, content.title, "P")
    put(sheet, "A1", content.title, TITLE.but(unlocked=True))
    _status(sheet)
    _title_block(sheet, content)
    _parts(sheet, content)
    _results(book, sheet)
    _faults(book, sheet, content)
    _notes(sheet, content)
    name_range(book, "parts", f"{GIRDER}!$B${HEAD}:$P${LAST}")
    guard_inputs(sheet, FIRST, LAST, f"P{FAULTS + 2}")
    furnish(sheet, f"A1:P{NOTES + 7}")
    sheet.freeze_panes = "A3"
    for pane in sheet.sheet_view.selection:
        pane.activeCell = pane.sqref = f"B{FIRST}"
    return sheet


def _status(sheet: Worksheet) -> None:
    """The verdict, where it stays in sight while the parts are typed."""
    text = (
        '=IFERROR(IF(fault_count=0,"no faults",fault_count&IF(fault_count=1," fault"," faults"))'
        '&"  ·  "&checks_met&" of "&ROWS(checks)&" checks agree","an entry cannot be read")'
    )
    look = Look(bold=True, align="center")
    for cell in sheet["K1:P1"][0]:
        put(sheet, cell.coordinate, None, look)
    sheet.merge_cells("K1:P1")
    put(sheet, "K1", text, look)
    sound = "IFERROR(AND(fault_count=0,checks_met=ROWS(checks)),FALSE)"
    judged(sheet, "K1:P1", sound, f"NOT({sound})")


def _title_block(sheet: Worksheet, content: Content) -> None:
    label = CAPTION.but(align="left", size=10)
    fields = {
        "B4": ("project", "C4:G4", content.project),
        "B5": ("member", "C5:G5", content.member),
        "I4": ("prepared by", "K4:M4", content.prepared_by),
        "I5": ("checked by", "K5:M5", content.checked_by),
        "O4": ("date", "P4", content.issued),
        "O5": ("revision", "P5", content.revision),
    }
    for address, (text, area, value) in fields.items():
        put(sheet, address, text, label.but(align="right", indent=1) if address[0] == "O" else label)
        look = INPUT.but(align="left", format="yyyy-mm-dd" if text == "date" else "@")
        if ":" in area:
            input_area(sheet, area, value or None, look)
        else:
            put(sheet, area, value or None, look)
    for row in (4, 5):
        sheet.row_dimensions[row].height = 20


def _parts(sheet: Worksheet, content: Content) -> None:
    heading(sheet, 7, "1  Parts", "A:P", "type in the tinted cells; leave the rows that are not needed blank")
    for row in (8, HEAD - 1):
        sheet.row_dimensions[row].height = 6 if row == 8 else 13
    axes = "Axes: x to the right, y up. turn: degrees anticlockwise about the datum. sign: 1 solid, -1 cut-out. "
    put(sheet, "A9", axes + "n: modular ratio. datum: the point of the part that x and y locate.", CAPTION)
    for address, text in {"D": "dimensions", "K": "place", "N": "counts as", "P": "located by"}.items():
        put(sheet, f"{address}{HEAD - 1}", text, _beside(CAPTION.but(italic=True), address))
    put(sheet, f"A{HEAD}", "no.", HEADER)
    for column, text in COLUMNS.items():
        put(
            sheet,
            f"{column}{HEAD}",
            text,
            _beside(HEADER, column),
        )
    for row in range(FIRST, LAST + 1):
        count = f'=IF(C{row}="","",COUNTA(C${FIRST}:C{row}))'
        put(sheet, f"A{row}", count, CAPTION.but(align="center"))
        for column in COLUMNS:
            put(
                sheet,
                f"{column}{row}",
                None,
                _beside(INPUT, column),
            )
    for row, entry in enumerate(content.parts, start=FIRST):
        for word, value in entry.items():
            sheet[f"{LETTER[word]}{row}"] = value
    when(sheet, f"B{FIRST}:P{LAST}", f"$N{FIRST}=-1", italic=True)


def _beside(look: Look, column: str) -> Look:
    """The look of a column of the parts table: words to the left, numbers to the right."""
    return look.but(align="left" if column in "BCP" else "right", indent=int(column == "P"))


def _results(book: Workbook, sheet: Worksheet) -> None:
    heading(sheet, RESULTS, "2  Section", "A:E")
    heading(sheet, RESULTS, "3  Drawing", "G:P", "to one scale, fitted to its frame; cut-outs dashed")
    sheet.row_dimensions[RESULTS + 1].height = 6
    quiet = CAPTION.but(size=10)
    for row, (symbol, (text, name, shown, power)) in enumerate(TOTALS.items(), start=VALUES):
        put(sheet, f"B{row}", text or None, quiet)
        put(sheet, f"C{row}", symbol, PLAIN.but(align="center"))
        put(sheet, f"D{row}", f"=CS_TOTALS(parts,C{row})", PLAIN.but(format=shown))
        name_range(book, name, f"{GIRDER}!$D${row}")
        unit = f'=length_unit&"{power}"' if power else "=length_unit"
        put(sheet, f"E{row}", "°" if power == "°" else unit, PLAIN.but(align="left", indent=1))
    put(sheet, f"E{VALUES + 1}", "=INDEX(CS_TOTALS(parts),2,3)", PLAIN.but(align="left", indent=1))
    name_range(book, "length_unit", f"{GIRDER}!$E${VALUES + 1}")
    _fibres(book, sheet, VALUES + len(TOTALS) + 1)


def _fibres(book: Workbook, sheet: Worksheet, head: int) -> None:
    for column, text, unit in (
        ("C", "fibre", ""),
        ("D", "distance", "=length_unit"),
        ("E", "modulus", '=length_unit&"³"'),
    ):
        align = "center" if column == "C" else "right"
        put(sheet, f"{column}{head}", text, PLAIN.but(bold=True, align=align))
        put(sheet, f"{column}{head + 1}", unit or None, CAPTION.but(align=align, under=HEADER.under))
    put(sheet, f"B{head + 2}", "extreme fibres", CAPTION.but(size=10))
    for number, word in enumerate(FIBRES, start=1):
        row = head + 1 + number
        put(sheet, f"C{row}", word, PLAIN.but(align="center"))
        put(sheet, f"D{row}", f"=INDEX(CS_FIBRES(parts),{number},2)", PLAIN.but(format=LENGTH))
        put(sheet, f"E{row}", f"=INDEX(CS_FIBRES(parts),{number},3)", PLAIN.but(format=LARGE))
        name_range(book, f"fibre_{word}", f"{GIRDER}!$D${row}")
        name_range(book, f"modulus_{word}", f"{GIRDER}!$E${row}")


def _faults(book: Workbook, sheet: Worksheet, content: Content) -> None:
    heading(sheet, FAULTS, "4  Faults", "A:P", "double-counted overlaps, cut-outs outside the solid, loose pieces")
    sheet.row_dimensions[FAULTS + 1].height = 6
    verdict = f"B{FAULTS + 2}"
    put(sheet, verdict, "=CS_FAULTS(parts,gap)", Look(bold=True))
    judged(sheet, verdict, f'{verdict}="no faults"', f'{verdict}<>"no faults"')
    name_range(book, "faults", f"{GIRDER}!$B${FAULTS + 2}")
    first = '=IF(fault_count=0,"","is the first of "&fault_count&IF(fault_count=1," fault"," faults"))'
    put(sheet, f"C{FAULTS + 2}", first, PLAIN.but(indent=1, align="left"))
    put(sheet, f"O{FAULTS + 2}", "pieces up to this far apart count as connected", CAPTION.but(align="right", size=10))
    put(sheet, f"P{FAULTS + 2}", content.gap, _beside(INPUT, "K"))
    name_range(book, "gap", f"{GIRDER}!$P${FAULTS + 2}")
    areas = ("B#", "C#:F#", "G#:K#", "L#:P#")  # part, fault, effect, remedy
    for number in range(1, FAULT_ROWS + 1):
        row = FAULTS + 2 + number
        sheet.row_dimensions[row].height = 28
        for column, area in enumerate(areas, start=1):
            place = area.replace("#", str(row))
            if ":" in place:
                sheet.merge_cells(place)
            look = PLAIN.but(wrap=True, upright="top", size=10, align="left")
            put(sheet, place.split(":")[0], f"=INDEX(fault_list,{number},{column})", look)
    more = f'=IF(fault_count>{FAULT_ROWS},"and "&fault_count-{FAULT_ROWS}&" more","")'
    put(sheet, f"B{FAULTS + 3 + FAULT_ROWS}", more, CAPTION)


def _notes(sheet: Worksheet, content: Content) -> None:
    heading(sheet, NOTES, "5  Notes", "A:P")
    input_area(
        sheet, f"A{NOTES + 2}:P{NOTES + 5}", "\n".join(content.notes), INPUT.but(wrap=True, upright="top", align="left")
    )
    sheet.row_dimensions[NOTES + 1].height = 6
    edition = CAPTION.but(align="right")
    put(sheet, f"P{NOTES + 7}", "=CS_EDITION()", edition)
