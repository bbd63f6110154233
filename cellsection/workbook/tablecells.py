"""The cells of one sheet of an OpenDocument spreadsheet.

table ─ table-row ─┬─ table-cell            value-type, value, formula, matrix spans in its attributes
                   │    └─ p ─ span, s, …   the text as it is shown
                   └─ covered-table-cell    part of a merged cell; may hold a value all the same

Cells carry no addresses: they are counted, with repeats. A repeated blank costs nothing, however often it is repeated;
a repeated value is written out as far as the caps allow.
"""

from __future__ import annotations

import re
from datetime import datetime
from typing import Literal

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.book import Bounds, Formula, Sheet
from cellsection.workbook.literals import read_date, read_duration, read_number
from cellsection.workbook.markup import LONGEST_TEXT, refused
from cellsection.workbook.package import Package
from cellsection.workbook.relative import Columns
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["OFFICE", "TABLE", "TEXT", "TableReader", "without_prefix"]

TABLE = "urn:oasis:names:tc:opendocument:xmlns:table:1.0 "
OFFICE = "urn:oasis:names:tc:opendocument:xmlns:office:1.0 "
TEXT = "urn:oasis:names:tc:opendocument:xmlns:text:1.0 "
CALCEXT = "urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0 "
ROW, CELL, COVERED = TABLE + "table-row", TABLE + "table-cell", TABLE + "covered-table-cell"
PARAGRAPH, SPACES = TEXT + "p", TEXT + "s"
WITHIN = frozenset(TEXT + name for name in ("span", "a", "ruby", "ruby-base", "sheet-name", "title", "date", "time"))
SIGNS = {TEXT + "tab": "\t", TEXT + "line-break": "\n"}
# Errors that the application shows by number, as it turns them into named ones itself when it saves an .xlsx file
# (502, 511, 520 and 522 tried with version 7.4; 503, 521 and 523 to 532 from memory).
NUMBERED = {
    "Err:502": "#VALUE!", "Err:503": "#NUM!", "Err:504": "#VALUE!", "Err:508": "#NAME?", "Err:511": "#VALUE!",
    "Err:519": "#VALUE!", "Err:521": "#NULL!", "Err:522": "#VALUE!", "Err:523": "#NUM!", "Err:524": "#REF!",
    "Err:525": "#NAME?", "Err:532": "#DIV/0!",
}  # fmt: skip
SHOWN_ERROR = re.compile(r"#(?:NULL!|DIV/0!|VALUE!|REF!|NAME\?|NUM!|N/A)|Err:5[0-9]{2}", re.ASCII)


def without_prefix(text: str) -> tuple[str, Literal["excel", "openformula"] | None]:
    """A formula without its prefix and sign, and its language; None where that is not supported.

    >>> without_prefix("of:=SUM([.A1:.A3])"), without_prefix("oooc:=[.A1]")
    (('SUM([.A1:.A3])', 'openformula'), ('oooc:=[.A1]', None))
    """
    prefix, colon, body = text.partition(":=")
    if colon and prefix.isalnum():
        language = {"of": "openformula", "msoxl": "excel"}.get(prefix)
        return (body, language) if language else (text, None)  # type: ignore[return-value]
    return text.removeprefix("="), "openformula"


class TableReader:
    """Takes the elements of a table as they come."""

    def __init__(self, package: Package, sheet: Sheet, epoch: datetime) -> None:
        self.package, self.sheet, self.epoch, self.limits = package, sheet, epoch, package.limits
        self.source = ""  # where the sheet's cells are taken from, if from elsewhere
        self.row = self.rows = self.column = 0  # rows: how many the row at hand stands for
        self.cell: dict[str, str] | None = None
        self.pieces: list[str] = []  # of the text of the cell at hand
        self.length = self.paragraphs = self.array_cells = 0
        self.columns = Columns("openformula")
        self.within = 0  # how many elements deep in a paragraph
        self.hidden: list[tuple[int, int]] = []  # first row and the row after the last

    def start(self, name: str, attributes: dict[str, str]) -> bool:
        """An element begins; whether it is entered."""
        if self.within:
            if name == SPACES:
                count = self.count(attributes, TEXT + "c", 32_767)
                self.data(" " * count)
            elif name in SIGNS:
                self.data(SIGNS[name])
            elif name not in WITHIN:
                return False
            self.within += 1
        elif self.cell is not None:
            if name != PARAGRAPH:
                return False
            self.within = 1
            if self.paragraphs:
                self.data("\n")
            self.paragraphs += 1
        elif name in (CELL, COVERED):
            if not self.rows:
                raise refused("has a cell outside of rows")
            self.cell, self.paragraphs, self.length, self.pieces = attributes, 0, 0, []
        elif name == ROW:
            self.rows = self.count(attributes, TABLE + "number-rows-repeated", LAST_ROW)
            self.column = 0
            if attributes.get(TABLE + "visibility", "visible") != "visible":
                self.hidden.append((self.row + 1, self.row + self.rows + 1))
        else:
            return False
        return True

    def data(self, text: str) -> None:
        """Text, whole or a piece of it; what stands outside of paragraphs is none."""
        if self.within:
            self.pieces.append(text)
            self.length += len(text)
            if self.length > LONGEST_TEXT:
                raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters near row {self.row + 1}")

    def end(self, name: str) -> None:
        """An element that was entered ends."""
        if self.within:
            self.within -= 1
        elif name in (CELL, COVERED):
            if self.cell is not None:
                self.read_cell(self.cell)
            self.cell = None
        elif name == ROW:
            self.row += self.rows
            self.rows = 0
        elif name == TABLE + "table":
            bottom = self.sheet.bottom
            rows = (range(first, min(after, bottom + 1)) for first, after in self.hidden)
            self.sheet.hidden_rows = frozenset(row for each in rows for row in each)

    def count(self, attributes: dict[str, str], name: str, most: int) -> int:
        """How often something is repeated or how far it spans."""
        text = attributes.get(name, "1")
        count = int(text) if text.isdecimal() and text.isascii() and len(text) < 12 else 0
        if not 1 <= count <= most:
            raise refused(f'says {name.rpartition(" ")[2]}="{text[:20]}", which must be from 1 to {most:,}')
        return count

    def read_cell(self, cell: dict[str, str]) -> None:
        """A cell ends: it stands for `rows` rows and as many columns as it says."""
        across, sheet = self.count(cell, TABLE + "number-columns-repeated", 2**31), self.sheet
        first, column = self.column + 1, self.column + across
        self.column = column
        text, value = cell.get(TABLE + "formula"), self.value(cell)
        if value is None and text is None:
            return
        row, last = self.row + 1, self.row + self.rows
        if column > LAST_COLUMN or last > LAST_ROW:
            raise refused(f"holds a value in row {row} that is repeated beyond the end of the sheet")
        if across * self.rows + len(sheet.values) + len(sheet.formulas) > self.limits.cells:
            raise self.package.refused(f"sheet {sheet.name} holds more than {self.limits.cells:,} cells")
        for r in range(row, last + 1):
            for c in range(first, column + 1):
                if value is not None:
                    sheet.values[r, c] = value
                if text is not None:
                    sheet.formulas[r, c] = self.formula(text, cell, r, c)
        sheet.bottom, sheet.right = max(sheet.bottom, last), max(sheet.right, column)

    def formula(self, text: str, cell: dict[str, str], row: int, column: int) -> Formula:
        """A formula, relative to the cell it stands in; an array formula with the area it spans."""
        body, language = without_prefix(text)
        if language is None:
            return Formula(body, row, column, kind="missing")
        down, across = TABLE + "number-matrix-rows-spanned", TABLE + "number-matrix-columns-spanned"
        if down not in cell and across not in cell:
            return self.columns.formula(body, row, column) if language == "openformula" else Formula(body, row, column)
        rows, columns = self.count(cell, down, LAST_ROW), self.count(cell, across, LAST_COLUMN)
        self.array_cells += rows * columns
        if self.array_cells > self.limits.array_cells:
            raise self.package.refused(
                f"the array formulas of sheet {self.sheet.name} fill more than {self.limits.array_cells:,} cells"
            )
        area: Bounds = (row, column, row + rows - 1, column + columns - 1)
        return Formula(body, row, column, kind="array", area=area, language=language)

    def value(self, cell: dict[str, str]) -> Scalar:
        """The saved value of the cell at hand by its stated type."""
        kind, shown = cell.get(OFFICE + "value-type"), "".join(self.pieces)
        calculated = TABLE + "formula" in cell
        if cell.get(CALCEXT + "value-type") == "error" or (
            calculated and SHOWN_ERROR.fullmatch(shown) and nothing(cell)
        ):
            return ErrorValue(NUMBERED.get(shown, shown if shown.startswith("#") else "#VALUE!"), f"saved as {shown}")
        if kind in ("float", "percentage", "currency"):
            number = read_number(cell.get(OFFICE + "value", ""))
            if calculated and shown in ("TRUE", "FALSE") and number in (0.0, 1.0):
                return number == 1.0  # how the application saves the truth that a formula gave
            return number
        if kind == "boolean":
            return cell.get(OFFICE + "boolean-value") == "true"
        if kind == "date":
            return read_date(cell.get(OFFICE + "date-value", ""), self.epoch)
        if kind == "time":
            return read_duration(cell.get(OFFICE + "time-value", ""))
        if kind == "string":
            return cell.get(OFFICE + "string-value", shown)
        return shown if shown or (calculated and self.paragraphs) else None  # empty text that a formula gave


def nothing(cell: dict[str, str]) -> bool:
    """Whether a cell holds no value of its own beside what it shows, as older files save errors."""
    return not cell.get(OFFICE + "string-value") and cell.get(OFFICE + "value", "0") in ("0", "NaN")
