"""Reading an OpenDocument spreadsheet (ODF 1.3, formulas in OpenFormula) into a Book, one function per element.

Cells carry no addresses: they are counted, with repeats. A repeated blank costs nothing here, however many times it is
repeated; a repeated value is written out as far as the caps allow.
"""

from __future__ import annotations

from datetime import datetime
from typing import Literal

from lxml import etree

from cellsection.workbook.book import Book, Bounds, Formula, Limits, Sheet, Table, column_number
from cellsection.workbook.package import Package, parsed
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["read_ods"]

TABLE = "{urn:oasis:names:tc:opendocument:xmlns:table:1.0}"
OFFICE = "{urn:oasis:names:tc:opendocument:xmlns:office:1.0}"
TEXT = "{urn:oasis:names:tc:opendocument:xmlns:text:1.0}"
CALCEXT = "{urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0}"
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384
GROUPS = frozenset(("table-row-group", "table-rows", "table-header-rows", "table-columns", "table-header-columns"))
# What the application writes for errors that have no name of their own (its numbers are in its manual).
NUMBERED = {
    "Err:502": "#VALUE!", "Err:503": "#NUM!", "Err:504": "#VALUE!", "Err:508": "#NAME?", "Err:511": "#VALUE!",
    "Err:519": "#VALUE!", "Err:524": "#REF!", "Err:525": "#NAME?", "Err:532": "#DIV/0!",
}  # fmt: skip


def read_ods(package: Package, limits: Limits) -> Book:
    """The whole book, every sheet's cells included."""
    book = Book(str(package.path), "ods")
    root = parsed(package.part("content.xml"), package.name, "content.xml")
    spreadsheet = root.find(f".//{OFFICE}spreadsheet")
    if spreadsheet is None:
        raise package.refused("it is an OpenDocument file but no spreadsheet")
    read_calculation_settings(spreadsheet, book)
    cells = 0
    for element in spreadsheet.findall(f"{TABLE}table"):
        sheet = Sheet(element.get(f"{TABLE}name", ""))
        book.sheets.append(sheet)
        read_table(element, sheet, package, limits)
        cells += len(sheet.values)
        if cells > limits.cells:
            raise package.refused(f"it holds more than {limits.cells:,} cells")
        read_named_expressions(element, sheet.name, book)
    read_named_expressions(spreadsheet, "", book)
    read_database_ranges(spreadsheet, book)
    return book


def local(element: etree._Element) -> str:
    """An element's name without its namespace."""
    return element.tag.rpartition("}")[2] if isinstance(element.tag, str) else ""


def read_calculation_settings(spreadsheet: etree._Element, book: Book) -> None:
    """Null date and iteration."""
    for settings in spreadsheet.findall(f"{TABLE}calculation-settings"):
        for null_date in settings.findall(f"{TABLE}null-date"):
            day = null_date.get(f"{TABLE}date-value", "1899-12-30")
            book.date1904 = day == "1904-01-01"
            if day not in ("1899-12-30", "1904-01-01"):
                book.notes.append(f"the book counts days from {day}, which is not supported")
        for iteration in settings.findall(f"{TABLE}iteration"):
            book.iterate = iteration.get(f"{TABLE}status") == "enable"
            if book.iterate:
                book.notes.append("the book asks for iterative calculation")
        if settings.get(f"{TABLE}precision-as-shown") == "true":
            book.notes.append("the book asks for calculation with the precision as displayed, which is not supported")


def repeats(element: etree._Element, name: str, package: Package, most: int) -> int:
    """How often a row or cell is repeated."""
    text = element.get(f"{TABLE}{name}", "1")
    count = int(text) if text.isdigit() else 0
    if not 1 <= count <= most:
        raise package.refused(f'{name} is "{text[:20]}", it must be from 1 to {most:,}')
    return count


def read_table(element: etree._Element, sheet: Sheet, package: Package, limits: Limits) -> None:
    """The rows of a sheet, those in groups too."""
    row, pending = 0, list(reversed(element))
    while pending:
        child = pending.pop()
        name = local(child)
        if name in GROUPS:
            pending.extend(reversed(child))
        elif name == "table-row":
            count = repeats(child, "number-rows-repeated", package, LAST_ROW)
            row += read_table_row(child, sheet, row + 1, count, package, limits)
            if len(sheet.values) > limits.cells:
                raise package.refused(f"sheet {sheet.name} holds more than {limits.cells:,} cells")


def read_table_row(
    element: etree._Element, sheet: Sheet, row: int, count: int, package: Package, limits: Limits
) -> int:
    """The cells of a row that stands for `count` rows; returns count."""
    column = 0
    for cell in element:
        name = local(cell)
        if name not in ("table-cell", "covered-table-cell"):
            continue
        across = repeats(cell, "number-columns-repeated", package, 2**31)
        text = cell.get(f"{TABLE}formula")
        value = read_value(cell)
        if value is not None or text is not None:
            if across * count > limits.array_cells or column + across > 4 * LAST_COLUMN or row + count - 1 > LAST_ROW:
                raise package.refused(f"a cell with content in row {row} is repeated {across} x {count} times")
            for r in range(row, row + count):
                for c in range(column + 1, column + across + 1):
                    if value is not None:
                        sheet.values[r, c] = value
                    if text is not None:
                        sheet.formulas[r, c] = read_formula(text, cell, r, c)
            sheet.bottom, sheet.right = max(sheet.bottom, row + count - 1), max(sheet.right, column + across)
        column += across
    return count


def read_formula(text: str, cell: etree._Element, row: int, column: int) -> Formula:
    """A formula with its language prefix; an array formula with the area it spans."""
    prefix, colon, rest = text.partition(":=")
    known = colon and prefix in ("of", "msoxl")
    language: Literal["excel", "openformula"] = "excel" if prefix == "msoxl" else "openformula"
    body = rest if known else text.removeprefix("=")
    rows, columns = cell.get(f"{TABLE}number-matrix-rows-spanned"), cell.get(f"{TABLE}number-matrix-columns-spanned")
    if rows or columns:
        area: Bounds = (row, column, row + int(rows or 1) - 1, column + int(columns or 1) - 1)
        return Formula(body, row, column, kind="array", area=area, language=language)
    if colon and not known:
        return Formula(text, row, column, kind="missing", language=language)
    return Formula(body, row, column, language=language)


def read_value(cell: etree._Element) -> Scalar:
    """The saved value of a cell by its stated type."""
    kind = cell.get(f"{OFFICE}value-type") or cell.get(f"{CALCEXT}value-type")
    if cell.get(f"{CALCEXT}value-type") == "error":
        shown = text_of(cell)
        return ErrorValue(NUMBERED.get(shown, shown if shown.startswith("#") else "#VALUE!"))
    if kind in ("float", "percentage", "currency"):
        return float(cell.get(f"{OFFICE}value", "0"))
    if kind == "boolean":
        return cell.get(f"{OFFICE}boolean-value") == "true"
    if kind == "date":
        return read_date(cell.get(f"{OFFICE}date-value", ""))
    if kind == "time":
        return read_time(cell.get(f"{OFFICE}time-value", ""))
    if kind == "string":
        stated = cell.get(f"{OFFICE}string-value")
        return text_of(cell) if stated is None else stated
    return None


def read_date(text: str) -> float:
    """An ISO date, with or without its time, as a serial number."""
    moment = datetime.fromisoformat(text.rstrip("Z"))
    return (moment - datetime(1899, 12, 30)).total_seconds() / 86400


def read_time(text: str) -> float:
    """A duration such as PT12H30M05S as a fraction of a day."""
    sign = -1.0 if text.startswith("-") else 1.0
    seconds, number, days = 0.0, "", 0.0
    for c in text.lstrip("-").removeprefix("P"):
        if c.isdigit() or c in ".,":
            number += "." if c == "," else c
        elif c == "T":
            continue
        else:
            seconds += float(number or 0) * {"H": 3600, "M": 60, "S": 1}.get(c, 0)
            days += float(number or 0) if c == "D" else 0.0
            number = ""
    return sign * (days + seconds / 86400)


def text_of(cell: etree._Element) -> str:
    """The text of a cell: its paragraphs joined by line ends, comments left out."""
    return "\n".join(paragraph(child) for child in cell if child.tag == f"{TEXT}p")


def paragraph(element: etree._Element) -> str:
    """The text of a paragraph; runs of spaces and tabs are elements of their own."""
    pieces = [element.text or ""]
    for child in element:
        name = local(child)
        if name == "s":
            pieces.append(" " * min(int(child.get(f"{TEXT}c", "1")), 32_767))
        elif name == "tab":
            pieces.append("\t")
        elif name == "line-break":
            pieces.append("\n")
        elif name not in ("annotation", "note"):
            pieces.append(paragraph(child))
        pieces.append(child.tail or "")
    return "".join(pieces)


def cell_place(address: str) -> tuple[str, int, int]:
    """Sheet, row and column of $Sheet.$A$1."""
    sheet, _, cell = address.rpartition(".")
    bare = cell.replace("$", "")
    letters = "".join(c for c in bare if c.isalpha())
    digits = bare[len(letters) :]
    return sheet.lstrip("$").strip("'").replace("''", "'"), int(digits or 1), column_number(letters) if letters else 1


def read_named_expressions(element: etree._Element, scope: str, book: Book) -> None:
    """Named ranges and expressions, of the whole book or of one sheet."""
    for group in element.findall(f"{TABLE}named-expressions"):
        for named in group:
            name = named.get(f"{TABLE}name", "").upper()
            _, row, column = cell_place(named.get(f"{TABLE}base-cell-address", ".A1"))
            address = named.get(f"{TABLE}cell-range-address")
            text = named.get(f"{TABLE}expression", "") if address is None else f"[{bracketed(address)}]"
            body = text.partition(":=")[2] if text.startswith("of:=") else text
            book.names[scope.upper(), name] = Formula(body, row, column, language="openformula")


def bracketed(address: str) -> str:
    """A range address as a reference in a formula."""
    first, colon, last = address.partition(":")
    sheet = first.rpartition(".")[0]
    if colon and last.rpartition(".")[0] == sheet:
        last = "." + last.rpartition(".")[2]
    return first + colon + last


def read_database_ranges(spreadsheet: etree._Element, book: Book) -> None:
    """Database ranges can be named in formulas too."""
    for group in spreadsheet.findall(f"{TABLE}database-ranges"):
        for named in group:
            name, address = named.get(f"{TABLE}name", ""), named.get(f"{TABLE}target-range-address", "")
            if not address or name.startswith("__Anonymous"):
                continue
            first, _, last = address.partition(":")
            sheet, top, left = cell_place(first)
            _, bottom, right = cell_place(last or first)
            book.tables.setdefault(name.upper(), Table(name, sheet, (top, left, bottom, right), (), header=False))
