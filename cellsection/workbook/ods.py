"""Reading an OpenDocument spreadsheet (ODF 1.3, formulas in OpenFormula) into a Book, one function per element.

content.xml ─ spreadsheet ─┬─ calculation-settings
                           ├─ table ─ table-row ─ table-cell ─ p     see spreadsheet_table
                           ├─ named-expressions, also within a table
                           └─ database-ranges
"""

from __future__ import annotations

import re
from datetime import datetime

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Formula, Sheet, Table, column_number
from cellsection.workbook.literals import EPOCH, EPOCH_1904
from cellsection.workbook.markup import DEEPEST, Element, TreeBuilder, feed, new_parser, refused
from cellsection.workbook.package import Package
from cellsection.workbook.tablecells import OFFICE, TABLE, TableReader, without_prefix

__all__ = ["read_ods"]

STYLE = "urn:oasis:names:tc:opendocument:xmlns:style:1.0 "
MANIFEST = "META-INF/manifest.xml"
WHOLE = frozenset(  # small elements of which a tree is built
    TABLE + name for name in ("calculation-settings", "named-expressions", "database-ranges", "table-source")
) | {STYLE + "style"}
ENTERED = frozenset(  # elements that may hold what we look for; all others are passed over with all that is in them
    [OFFICE + name for name in ("document-content", "automatic-styles", "body", "spreadsheet")]
    + [TABLE + name for name in ("table", "table-row-group", "table-rows", "table-header-rows")]
)
LONGEST_ADDRESS = 1_000  # characters: two sheet names and two cells take a tenth of them
ADDRESS = re.compile(
    r"""\$?(?P<sheet>'(?:[^']|'')*'|[^.'\[\]]*)\.\$?(?P<column>[A-Za-z]{1,3})\$?(?P<row>[0-9]{1,7})""", re.ASCII
)


def read_ods(package: Package) -> Book:
    """The whole book, every sheet's cells included."""
    if MANIFEST in package and any(True for _ in package.tree(MANIFEST).along("file-entry", "encryption-data")):
        raise WorkbookError(f"{package.name} is encrypted", remedy="Save it without a password")
    reader = ContentReader(package)
    parser = new_parser(reader.start, reader.end, reader.data)
    feed(parser, package.pieces("content.xml"), package.where("content.xml"))
    if not reader.is_spreadsheet:
        raise WorkbookError(f"{package.name} is an OpenDocument file but no spreadsheet", remedy="Name a spreadsheet")
    return reader.book


class ContentReader:
    """Takes the elements of content.xml as they come and hands each to the function for it."""

    def __init__(self, package: Package) -> None:
        self.package, self.book = package, Book(str(package.path), "ods")
        self.is_spreadsheet = False
        self.depth = self.passed_over = 0  # passed_over: depth of the element that is passed over, 0 where none is
        self.builder: TreeBuilder | None = None
        self.table: TableReader | None = None
        self.epoch = EPOCH
        self.not_shown: set[str] = set()  # styles of sheets that are hidden
        self.cells = 0

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        self.depth += 1
        if self.depth > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")
        if self.builder is not None:
            self.builder.start(name, attributes)
        elif self.passed_over or (self.table is not None and self.table.start(name, attributes)):
            return
        elif name in WHOLE:
            self.builder = TreeBuilder(name, attributes)
        elif name not in ENTERED or (name == TABLE + "table" and self.table is not None):
            self.passed_over = self.depth
        elif name == TABLE + "table":
            sheet = Sheet(attributes.get(TABLE + "name", ""))
            sheet.hidden = attributes.get(TABLE + "style-name") in self.not_shown
            self.table = TableReader(self.package, sheet, self.epoch)
        elif name == OFFICE + "spreadsheet":
            self.is_spreadsheet = True

    def end(self, name: str) -> None:
        """An element ends."""
        if self.builder is not None:
            if self.builder.end():
                element, self.builder = self.builder.root, None
                self.read(element)
        elif self.passed_over:
            if self.passed_over == self.depth:
                self.passed_over = 0
        elif self.table is not None:
            self.table.end(name)
            if name == TABLE + "table":
                self.keep(self.table)
                self.table = None
        self.depth -= 1

    def data(self, text: str) -> None:
        """Text, whole or a piece of it."""
        if self.builder is not None:
            self.builder.data(text)
        elif self.table is not None and not self.passed_over:
            self.table.data(text)

    def keep(self, table: TableReader) -> None:
        """A sheet is complete; one that only keeps the values of another book is none of ours."""
        sheet = table.sheet
        if table.source and "'#" in sheet.name:
            file, _, name = sheet.name.rpartition("#")
            sheet.name = name.removeprefix("$")
            self.book.externals.setdefault(file.strip("'"), (table.source, []))[1].append(sheet)
            return
        if any(sheet.name.casefold() == other.name.casefold() for other in self.book.sheets):
            raise WorkbookError(
                f"{self.package.name} has two sheets named {sheet.name}", remedy="Rename one and save it again"
            )
        self.book.sheets.append(sheet)
        self.cells += len(sheet.values) + len(sheet.formulas)
        if self.cells > self.package.limits.cells:
            raise self.package.refused(f"it holds more than {self.package.limits.cells:,} cells")

    def read(self, element: Element) -> None:
        """One of the small elements is complete."""
        if element.name == "calculation-settings":
            self.read_calculation_settings(element)
        elif element.name == "named-expressions":
            read_named_expressions(element, self.table.sheet.name if self.table else "", self.book)
        elif element.name == "database-ranges":
            read_database_ranges(element, self.book)
        elif element.name == "table-source" and self.table is not None:
            self.table.source = element.get("http://www.w3.org/1999/xlink href") or "another book"
        elif any(each.get(TABLE + "display") == "false" for each in element.along("table-properties")):
            self.not_shown.add(element.get(STYLE + "name"))

    def read_calculation_settings(self, settings: Element) -> None:
        """Null date, iteration, and what changes the meaning of formulas; they come before the first table."""
        book, notes = self.book, self.book.notes
        for null_date in settings.along("null-date"):
            day = null_date.get(TABLE + "date-value", "1899-12-30")
            book.date1904 = day == "1904-01-01"
            if book.date1904:
                self.epoch = EPOCH_1904
            elif day != "1899-12-30":
                try:
                    self.epoch = datetime.fromisoformat(day)
                except ValueError:
                    raise refused(f'counts days from "{day[:24]}", which is no date') from None
                notes.append(f"the book counts days from {day}, which is not supported in formulas")
        for iteration in settings.along("iteration"):
            if iteration.get(TABLE + "status") == "enable":
                book.iterated(iteration.get(TABLE + "steps"), iteration.get(TABLE + "maximum-difference"))
        if settings.get(TABLE + "precision-as-shown") == "true":
            notes.append("the book asks for calculation with the precision as displayed, which is not supported")
        if settings.get(TABLE + "search-criteria-must-apply-to-whole-cell") == "false":
            notes.append("the book's search criteria match parts of cells, which is not supported")


def read_named_expressions(element: Element, scope: str, book: Book) -> None:
    """Named ranges and expressions, of the whole book or of one sheet; relative ones count from their base cell."""
    for named in element.children:
        name = named.get(TABLE + "name")
        base = ADDRESS.fullmatch(named.get(TABLE + "base-cell-address", ".A1"))
        row, column = (int(base["row"]), column_number(base["column"])) if base else (1, 1)
        address = named.get(TABLE + "cell-range-address")
        body, language = without_prefix(f"of:=[{bracketed(address)}]" if address else named.get(TABLE + "expression"))
        if language is None:
            book.notes.append(f"the name {name} is left out: its formula is in a language that is not supported")
            continue
        book.names[scope.upper(), name.upper()] = Formula(body, row, column, language=language)


def bracketed(address: str) -> str:
    """A range address as a reference in a formula: the second cell does not repeat its sheet.

    >>> bracketed("$'a:b'.$A$1:$'a:b'.$B$2"), bracketed("$S.$A$1")
    ("$'a:b'.$A$1:.$B$2", '$S.$A$1')
    """
    first = ADDRESS.match(address)
    if first is None or not address[first.end() :].startswith(":"):
        return address
    rest = address[first.end() + 1 :]
    last = ADDRESS.fullmatch(rest)
    if last is not None and last["sheet"] == first["sheet"]:
        rest = rest[rest.index(last["sheet"]) + len(last["sheet"]) :] if last["sheet"] else rest
    return f"{first[0]}:{rest}"


def read_database_ranges(element: Element, book: Book) -> None:
    """Database ranges: a formula can name them as it names a range."""
    for named in element.along("database-range"):
        name, address = named.get(TABLE + "name"), named.get(TABLE + "target-range-address")
        cells = list(ADDRESS.finditer(address)) if len(address) < LONGEST_ADDRESS else []
        if not cells or name.startswith("__Anonymous"):
            continue
        sheet = cells[0]["sheet"].strip("'").replace("''", "'")
        (top, left), (bottom, right) = (
            (int(each["row"]), column_number(each["column"])) for each in (cells[0], cells[-1])
        )
        book.tables.setdefault(name.upper(), Table(name, sheet, (top, left, bottom, right), (), header=False))
