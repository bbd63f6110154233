"""The cells of one sheet of an .xlsx package.

worksheet ─ sheetData ─ row ─ c ─┬─ f    the formula: its own, shared, of an array, of a data table
                                 ├─ v    the saved value, a number in most cells
                                 └─ is   text kept in the cell

This is where the time goes when a book is read. Rows written as the applications write them are read by plainrows; all
others, and all that is around the rows, come through the parser to here.
"""

from __future__ import annotations

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW, address, read_ref
from cellsection.workbook.book import Position, Sheet
from cellsection.workbook.literals import EPOCH, EPOCH_1904, read_date, read_number
from cellsection.workbook.markup import DEEPEST, LONGEST_TEXT, feed, new_parser, refused
from cellsection.workbook.metadata import Metadata
from cellsection.workbook.package import Package
from cellsection.workbook.plainrows import not_plain
from cellsection.workbook.sharedstrings import unescaped
from cellsection.workbook.sheetformulas import SheetFormulas
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["read_v", "read_worksheet"]


def read_worksheet(
    package: Package, sheet: Sheet, strings: list[str], metadata: Metadata, date1904: bool, notes: list[str]
) -> None:
    """Rows and cells of a sheet, into sheet.values and sheet.formulas."""
    reader = SheetReader(package, sheet, strings, metadata, date1904)
    parser = new_parser(reader.start, reader.end, reader.data)
    feed(parser, not_plain(package.pieces(sheet.part), reader), package.where(sheet.part))
    reader.formulas.settle_orphans(notes)
    sheet.bottom, sheet.right, sheet.hidden_rows = reader.bottom, reader.right, frozenset(reader.hidden)


def read_v(text: str, kind: str, date1904: bool) -> Scalar:
    """A value by the kind its cell states; shared strings (s) are looked up where they are met."""
    if kind == "n":
        return read_number(text)
    if kind in ("b", "e", "d") and not text.strip():
        return None
    if kind == "b":
        return text.strip() in ("1", "true")
    if kind == "e":
        return ErrorValue(text.strip())
    if kind == "d":
        return read_date(text.strip(), EPOCH_1904) if date1904 else read_date(text.strip(), EPOCH, day_60=True)
    return unescaped(text)


class SheetReader:
    """Takes the elements of a sheet part as they come; a cell is put away when it ends."""

    def __init__(self, package: Package, sheet: Sheet, strings: list[str], metadata: Metadata, date1904: bool) -> None:
        self.package, self.sheet, self.strings = package, sheet, strings
        self.metadata, self.date1904 = metadata, date1904
        self.values, self.known = sheet.values, sheet.formulas
        self.formulas = SheetFormulas(package, sheet, metadata)
        self.space = ""  # the namespace of the root: transitional, strict, and any prefix read alike
        self.path: list[str] = []  # names of the open elements; those of another namespace are ""
        self.row = self.column = self.bottom = self.right = 0
        self.backwards = False  # a row came out of order, so that a cell may come twice
        self.hidden: list[int] = []
        self.text = ""
        self.c: dict[str, str] = {}  # the attributes of the cell at hand, its formula's, and their texts
        self.f: dict[str, str] | None = None
        self.f_text = ""
        self.v: str | None = None

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        space, _, local = name.rpartition(" ")
        if not self.path:
            self.space = space
        own = local if space == self.space else ""
        if len(self.path) > 3 and self.text.strip():
            raise refused(f"mixes text and elements near row {self.row}")
        self.path.append(own)
        self.text = ""
        if own == "row":
            self.read_row(attributes)
        elif own == "c":
            self.c, self.f, self.v, self.f_text = attributes, None, None, ""
        elif own == "f":
            self.f = attributes
        elif own == "is":
            self.v = ""
        elif len(self.path) > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")

    def data(self, piece: str) -> None:
        """Text, whole or a piece of it."""
        self.text += piece
        if len(self.text) > LONGEST_TEXT:
            raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters near row {self.row}")

    def end(self, _: str) -> None:
        """An element ends."""
        own = self.path.pop()
        if own == "v":
            self.v = self.text
        elif own == "f":
            self.f_text = self.text
        elif own == "t" and self.v is not None and "rPh" not in self.path:  # rPh: how it is read aloud
            self.v += self.text
        elif own == "c":
            self.read_c(self.c, self.v, self.f, self.f_text)
        self.text = ""

    def read_row(self, row: dict[str, str]) -> None:
        """A row begins: as stated, or the next one where it does not say."""
        stated, before = row.get("r", ""), self.row
        if stated:
            self.row = int(stated) if stated.isdecimal() and stated.isascii() and len(stated) < 8 else 0
        else:
            self.row = before + 1
        if not 0 < self.row <= LAST_ROW:
            raise self.no_cell(f'row "{stated[:24]}"')
        self.column = 0
        self.backwards = self.backwards or self.row <= before
        if row.get("hidden") in ("1", "true"):
            self.hidden.append(self.row)
        if len(self.values) + len(self.known) > self.package.limits.cells:
            raise self.package.refused(f"sheet {self.sheet.name} holds more than {self.package.limits.cells:,} cells")

    def read_c(self, c: dict[str, str], v: str | None, f: dict[str, str] | None, f_text: str) -> None:
        """A cell ends: its attributes, the text of its <v> or <is>, the attributes and the text of its <f>."""
        before, r = (self.row, self.column), c.get("r")
        if r is None:
            self.column += 1
            if not (0 < self.row <= LAST_ROW and self.column <= LAST_COLUMN):
                raise self.no_cell(f"row {self.row}, column {self.column}")
        else:
            place = read_ref(r) if ":" not in r else None
            if place is None:
                raise self.no_cell(f'"{r[:24]}"')
            self.row, self.column = place[:2]
            self.backwards = self.backwards or self.row != before[0] or self.column <= before[1]
        value = self.value(c.get("t", "n"), v, c.get("vm")) if v is not None else None
        if value is None and not f and not f_text:
            return
        position = (self.row, self.column)
        if self.backwards:
            self.check_new(position)
        if value is not None:
            self.values[position] = value
        if f or f_text:
            self.formulas.read_f(f_text, f or {}, position, c.get("cm"))
        self.bottom, self.right = max(self.bottom, self.row), max(self.right, self.column)

    def check_new(self, position: Position) -> None:
        """Refuse a cell that was there before."""
        if position in self.values or position in self.known:
            raise WorkbookError(
                f"{self.package.name}: sheet {self.sheet.name} has the cell {address(position)} twice",
                remedy="Save the workbook again",
            )

    def value(self, kind: str, v: str, vm: str | None) -> Scalar:
        """The value that the text of a <v> or <is> stands for, by the kind and the metadata of its cell."""
        if kind == "s":
            return self.shared_string(v)
        if kind == "e" and vm is not None and vm in self.metadata.errors:
            return ErrorValue(self.metadata.errors[vm])
        return read_v(v, kind, self.date1904)

    def shared_string(self, index: str) -> Scalar:
        """A shared string by its place in the list."""
        place = int(index) if index.isdecimal() and len(index) < 10 else -1
        if 0 <= place < len(self.strings):
            return self.strings[place]
        return ErrorValue("#VALUE!", "its text is missing from the file")

    def no_cell(self, what: str) -> WorkbookError:
        """A refusal of a place that is none."""
        return WorkbookError(
            f"{self.package.name}: sheet {self.sheet.name} has a cell at {what}, which is no cell address",
            remedy="Save the workbook again",
        )
