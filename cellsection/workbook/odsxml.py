"""New values in the content of an OpenDocument spreadsheet, set where they stand.

content.xml is walked once to learn where the cells to be changed lie; cells are counted as spreadsheet_table counts
them. A cell or row that stands for several, which no longer agree, is written out as far as they differ.
"""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from datetime import datetime
from itertools import groupby

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import address
from cellsection.workbook.book import Bounds, Position
from cellsection.workbook.literals import EPOCH
from cellsection.workbook.markup import feed, new_parser
from cellsection.workbook.ods import ENTERED
from cellsection.workbook.odsvalues import CALCEXT, WORDS, Names, form, number_text
from cellsection.workbook.splice import Edit, Span, as_utf8, name_of, opened, replaced, with_attribute, without
from cellsection.workbook.tablecells import CELL, COVERED, OFFICE, PARAGRAPH, ROW, TABLE
from cellsection.workbook.values import Scalar

__all__ = ["content_with_values"]

ACROSS, DOWN = TABLE + "number-columns-repeated", TABLE + "number-rows-repeated"
GONE_INTO = ENTERED | {TABLE + "calculation-settings"}
SPANNED = TABLE + "number-matrix-rows-spanned", TABLE + "number-matrix-columns-spanned"
NEEDED = (OFFICE, TABLE, PARAGRAPH.rpartition(" ")[0] + " ")


@dataclass(slots=True)
class CellSpan(Span):
    """Where a cell lies: its first column, how many it stands for, what its attributes say, its paragraphs."""

    column: int = 0
    count: int = 1
    attributes: dict[str, str] = field(default_factory=dict)
    paragraphs: list[Span] = field(default_factory=list)


@dataclass(slots=True)
class RowSpan(Span):
    """Where a row lies: its sheet and number, how many it stands for, and those of its cells that change."""

    sheet: str = ""
    top: int = 0
    count: int = 1
    cells: list[CellSpan] = field(default_factory=list)


def content_with_values(data: bytes, values: Mapping[str, Mapping[Position, Scalar]], where: str) -> bytes:
    """content.xml with new values in cells, by sheet. Raises WorkbookError where they have no place in it."""
    data = as_utf8(data, where)
    found = Locator(data, values)
    feed(found.parser, [data], where)
    names = found.names(where)
    edits: list[Edit] = []
    placed: dict[str, set[Position]] = {sheet: set() for sheet in values}
    by_row: dict[str, dict[int, dict[int, Scalar]]] = {sheet: {} for sheet in values}
    for sheet, wanted in values.items():
        for (number, column), value in wanted.items():
            by_row[sheet].setdefault(number, {})[column] = value
    for row in found.rows:
        rows = {
            number: at_columns(row, by_row[row.sheet][number])
            for number in found.wanted_rows(row.sheet, row.top, row.count)
        }
        for number, cells in rows.items():
            for cell, new in cells:
                found.check(row.sheet, number, cell, new, where)
                placed[row.sheet].update((number, column) for column in new)
        edits += changed_row(data, row, rows, names, found.epoch)
    for sheet, wanted in values.items():
        for place, value in wanted.items():
            if value is not None and place not in placed[sheet]:
                raise no_room(where, sheet, place)
    return replaced(data, edits)


def no_room(where: str, sheet: str, place: Position) -> WorkbookError:
    """A refusal of a value for a cell that the file does not hold as one with a formula."""
    return WorkbookError(
        f"{where} has no room for {sheet}!{address(place)}: no formula there, nor the area of one",
        remedy="Open the book in the application and save it once",
    )


def at_columns(row: RowSpan, wanted: Mapping[int, Scalar]) -> list[tuple[CellSpan, dict[int, Scalar]]]:
    """The cells of a row that change, each with its new values by column."""
    found = []
    for cell in row.cells:
        span = range(cell.column, cell.column + cell.count)
        columns = span if len(span) < len(wanted) else sorted(wanted)  # a blank may stand for the whole row
        new = {column: wanted[column] for column in columns if column in wanted and column in span}
        if new:
            found.append((cell, new))
    return found


class Locator:
    """Walks content.xml and notes where the wanted cells lie, with the rows that hold them."""

    def __init__(self, data: bytes, values: Mapping[str, Mapping[Position, Scalar]]) -> None:
        self.data, self.values = data, values
        self.parser = new_parser(self.start, self.end)
        self.parser.StartNamespaceDeclHandler = self.declared
        self.prefixes: dict[str, str] = {}
        self.by_row = {sheet: sorted({row for row, _ in wanted}) for sheet, wanted in values.items()}
        self.columns: dict[tuple[str, int], set[int]] = {}
        for sheet, wanted in values.items():
            for row, column in wanted:
                self.columns.setdefault((sheet, row), set()).add(column)
        self.rows: list[RowSpan] = []
        self.areas: dict[str, list[Bounds]] = {}  # of array formulas, by sheet
        self.epoch = EPOCH
        self.sheet: str | None = None
        self.row: RowSpan | None = None
        self.cell: CellSpan | None = None
        self.depth = self.passed_over = self.number = self.column = 0

    def declared(self, prefix: str | None, uri: str) -> None:
        """A namespace is declared; those of the outermost element hold everywhere."""
        if not self.depth and prefix:
            self.prefixes.setdefault(uri + " ", prefix)

    def names(self, where: str) -> Names:
        """How the file spells the attributes that hold a value."""
        if not all(uri in self.prefixes for uri in NEEDED):
            raise WorkbookError(
                f"{where} does not declare its namespaces where all files do", remedy="Save the workbook again"
            )
        office, table, text = (self.prefixes[uri] for uri in NEEDED)
        return Names(office, table, text, self.prefixes.get(CALCEXT, ""))

    def wanted_rows(self, sheet: str, top: int, count: int) -> list[int]:
        """The rows with new values among so many."""
        rows = self.by_row.get(sheet, [])
        return rows[bisect_left(rows, top) : bisect_left(rows, top + count)]

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins; what cannot hold cells is passed over."""
        self.depth += 1
        at = self.parser.CurrentByteIndex
        if self.passed_over:
            return
        if self.cell is not None and name == PARAGRAPH:
            self.cell.paragraphs.append(Span(*opened(self.data, at)))
            self.passed_over = self.depth
        elif self.row is not None and name in (CELL, COVERED):
            self.start_cell(attributes, at)
        elif self.sheet is not None and name == ROW:
            count = int(attributes.get(DOWN, "1"))
            self.row = RowSpan(*opened(self.data, at), 0, 0, self.sheet, self.number + 1, count)
            self.number, self.column = self.number + count, 0
        elif name == TABLE + "null-date":
            self.epoch = datetime.fromisoformat(attributes.get(TABLE + "date-value", "1899-12-30"))
            self.passed_over = self.depth
        elif name == TABLE + "table" and self.sheet is None:
            self.sheet, self.number = attributes.get(TABLE + "name", ""), 0
        elif name == TABLE + "table" or name not in GONE_INTO:
            self.passed_over = self.depth

    def start_cell(self, attributes: dict[str, str], at: int) -> None:
        """A cell begins: noted where a new value is for it."""
        assert self.row is not None
        row, count, first = self.row, int(attributes.get(ACROSS, "1")), self.column + 1
        self.column += count
        down, across = SPANNED
        if down in attributes or across in attributes:
            last = (row.top + int(attributes.get(down, "1")) - 1, first + int(attributes.get(across, "1")) - 1)
            self.areas.setdefault(row.sheet, []).append((row.top, first, *last))
        if count == row.count == 1:
            wanted = (row.top, first) in self.values.get(row.sheet, ())
        else:
            rows = self.wanted_rows(row.sheet, row.top, row.count)
            wanted = any(not self.columns[row.sheet, each].isdisjoint(range(first, first + count)) for each in rows)
        if wanted:
            self.cell = CellSpan(*opened(self.data, at), 0, 0, first, count, attributes)
            row.cells.append(self.cell)
        else:
            self.passed_over = self.depth

    def end(self, name: str) -> None:
        """An element ends."""
        at = self.parser.CurrentByteIndex
        if self.passed_over:
            if self.passed_over == self.depth:
                self.passed_over = 0
                if self.cell is not None and name == PARAGRAPH:
                    self.cell.paragraphs[-1].close(self.data, at)
        elif self.cell is not None:
            self.cell.close(self.data, at)
            self.cell = None
        elif self.row is not None:
            self.row.close(self.data, at)
            if self.row.cells:
                self.rows.append(self.row)
            self.row = None
        elif name == TABLE + "table":
            self.sheet = None
        self.depth -= 1

    def check(self, sheet: str, row: int, cell: CellSpan, new: Mapping[int, Scalar], where: str) -> None:
        """Refuse to write over what no formula gave."""
        if TABLE + "formula" not in cell.attributes:
            for column in new:
                areas = self.areas.get(sheet, [])
                if not any(a[0] <= row <= a[2] and a[1] <= column <= a[3] for a in areas):
                    raise no_room(where, sheet, (row, column))


def changed_row(
    data: bytes,
    row: RowSpan,
    rows: Mapping[int, list[tuple[CellSpan, dict[int, Scalar]]]],
    names: Names,
    epoch: datetime,
) -> Iterator[Edit]:
    """What to replace in a row; one that stands for several is written out where they differ."""
    if row.count == 1:
        for cells in rows.values():
            for cell, new in cells:
                yield from changed_cells(data, cell, new, names, epoch)
        return
    raw = data[row.start : row.end]
    pieces: list[tuple[bytes, int]] = []
    done = row.top
    for number, cells in rows.items():
        edits = [edit for cell, new in cells for edit in changed_cells(data, cell, new, names, epoch)]
        pieces += [(raw, number - done)] if number > done else []
        pieces.append((replaced(raw, moved(edits, row.start)), 1))
        done = number + 1
    pieces += [(raw, row.top + row.count - done)] if row.top + row.count > done else []
    yield row.start, row.end, repeated(pieces, names.rows_repeated)


def changed_cells(data: bytes, cell: CellSpan, new: Mapping[int, Scalar], names: Names, epoch: datetime) -> list[Edit]:
    """What to replace in a cell; one that stands for several is written out where they differ."""
    if cell.count == 1:
        return changed_cell(data, cell, next(iter(new.values())), names, epoch)
    raw = data[cell.start : cell.end]
    pieces: list[tuple[bytes, int]] = []
    done = cell.column
    for column, value in sorted(new.items()):
        pieces += [(raw, column - done)] if column > done else []
        pieces.append((replaced(raw, moved(changed_cell(data, cell, value, names, epoch), cell.start)), 1))
        done = column + 1
    pieces += [(raw, cell.column + cell.count - done)] if cell.column + cell.count > done else []
    return [(cell.start, cell.end, repeated(pieces, names.columns_repeated))]


def moved(edits: list[Edit], start: int) -> list[Edit]:
    """Edits counted from a place."""
    return [(first - start, last - start, new) for first, last, new in edits]


def repeated(pieces: list[tuple[bytes, int]], attribute: bytes) -> bytes:
    """Elements one after another, those that are alike as one that says how many it stands for."""
    written = []
    for xml, group in groupby(pieces, key=lambda piece: piece[0]):
        count, end = sum(each for _, each in group), opened(xml, 0)[1]
        tag = xml[:end]
        if count > 1:
            tag = with_attribute(tag, attribute, b"%d" % count)
        else:
            tag = without(tag, (attribute,)) + (b"/>" if tag.endswith(b"/>") else b">")
        written.append(tag + xml[end:])
    return b"".join(written)


def changed_cell(data: bytes, cell: CellSpan, value: Scalar, names: Names, epoch: datetime) -> list[Edit]:
    """What to replace in a single cell: the attributes that hold its value, and its paragraphs."""
    tag = data[cell.start : cell.opened]
    if isinstance(value, float) and (edits := changed_number(data, cell, tag, value, names)):
        return edits
    shown = b"\n".join(data[each.opened : each.closed] for each in cell.paragraphs)
    attributes, text = form(value, cell.attributes, shown, names, epoch)
    tag = names.with_value(tag, attributes)
    if cell.empty:
        name = name_of(tag)
        return [(cell.start, cell.end, tag[:-2].rstrip() + b">" + text + b"</%b>" % name if text else tag)]
    edits = [(cell.start, cell.opened, tag)]
    if cell.paragraphs:
        edits.append((cell.paragraphs[0].start, cell.paragraphs[0].end, text))
        edits += [(each.start, each.end, b"") for each in cell.paragraphs[1:]]
    else:
        edits.append((cell.closed, cell.closed, text))
    return edits


def changed_number(data: bytes, cell: CellSpan, tag: bytes, value: float, names: Names) -> list[Edit]:
    """The same, fast, for a number in the place of a number that is no date, no percentage, no truth; else nothing."""
    stated = names.value_opened
    at = tag.find(stated)
    if at < 0 or b"='" in tag or cell.attributes.get(OFFICE + "value-type") != "float" or len(cell.paragraphs) != 1:
        return []
    (paragraph,) = cell.paragraphs
    if paragraph.empty or data[paragraph.opened : paragraph.closed] in WORDS:
        return []
    first = at + len(stated)
    return [
        (cell.start + first, cell.start + tag.index(b'"', first), number_text(value).encode()),
        (paragraph.opened, paragraph.closed, b"%.15g" % value),
    ]
