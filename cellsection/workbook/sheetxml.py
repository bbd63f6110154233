"""New values in the XML of one sheet of an .xlsx package, set where they stand.

The part is walked once to learn where the cells to be changed lie. Cells and rows that the file does not hold yet (an
array formula's area may lack them, a spill may have grown) are put in where they belong.
"""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Mapping
from dataclasses import dataclass, field
from itertools import product

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import address, read_ref
from cellsection.workbook.book import Bounds, Position, column_letters
from cellsection.workbook.markup import feed, new_parser
from cellsection.workbook.plaincells import with_plain_values
from cellsection.workbook.splice import Edit, Span, as_utf8, name_of, opened, replaced, with_attribute, without
from cellsection.workbook.values import Scalar
from cellsection.workbook.xlsxvalues import saved_form

__all__ = ["Sheet", "sheet_with_values", "with_values_anywhere"]


@dataclass(frozen=True, slots=True)
class Sheet:
    """What is to be written into a sheet.

    values : the new values of cells
    areas : what each array formula now fills, by its first cell
    dynamic : numbers of metadata that mark a formula which spills
    rich : numbers of metadata that stand for an error which a <v> cannot hold, by the error's code
    """

    values: Mapping[Position, Scalar]
    areas: Mapping[Position, Bounds] = field(default_factory=dict)
    dynamic: frozenset[str] = frozenset()
    rich: Mapping[str, str] = field(default_factory=dict)


@dataclass(slots=True)
class CellSpan(Span):
    """Where a cell or a row lies, and what in it."""

    inner: dict[str, Span] = field(default_factory=dict)
    cells: list[tuple[int, int]] = field(default_factory=list)  # of a row: column and start of each


def sheet_with_values(data: bytes, sheet: Sheet, where: str) -> bytes:
    """A sheet part with new values in some of its cells. Raises WorkbookError where they have no place in it."""
    data = as_utf8(data, where)
    plain = with_plain_values(data, sheet.values, sheet.rich)
    return plain if plain is not None else with_values_anywhere(data, sheet, where)


def with_values_anywhere(data: bytes, sheet: Sheet, where: str) -> bytes:
    """The same for a sheet that is not plain: cells may be missing, and be spelt in any way that XML allows."""
    found = Locator(data, sheet)
    feed(found.parser, [data], where)
    if found.sheet_data is None:
        raise WorkbookError(f"{where} holds no cells", remedy="Save the workbook again")
    edits = reshaped(data, found, sheet)
    new: dict[int, dict[int, Scalar]] = defaultdict(dict)
    for (row, column), value in sheet.values.items():
        cell = found.cells.get((row, column))
        if (cell is None or "f" not in cell.inner) and (row, column) not in found.filled:
            raise WorkbookError(
                f"{where} has no room for {address((row, column))}: an array formula has outgrown its saved area",
                remedy="Open the book in the application and save it once",
            )
        if cell is not None:
            edits += changed_cell(data, cell, value, sheet.rich)
        elif value is not None:
            new[row][column] = value
    rows: list[tuple[int, bytes]] = []  # new rows, and the places of those after them
    prefix = name_of(data[found.sheet_data.start : found.sheet_data.opened]).rpartition(b"sheetData")[0]
    for row, cells in sorted(new.items()):
        made = [(column, new_cell(prefix, row, column, cells[column], sheet.rich)) for column in sorted(cells)]
        if row in found.rows:
            edits += filled_in(data, found.rows[row], made, found.rows[row].cells)
        else:
            tag = prefix + b"row"
            rows.append((row, b'<%b r="%d">%b</%b>' % (tag, row, b"".join(cell for _, cell in made), tag)))
    edits += filled_in(data, found.sheet_data, rows, sorted((r, span.start) for r, span in found.rows.items()))
    if new:
        edits += widened(data, found, new)
    return replaced(data, edits)


class Locator:
    """Walks a sheet part and notes where the wanted cells, all rows and the areas of array formulas lie."""

    def __init__(self, data: bytes, sheet: Sheet) -> None:
        self.data, self.sheet = data, sheet
        self.parser = new_parser(self.start, self.end)
        self.cells: dict[Position, CellSpan] = {}
        self.rows: dict[int, CellSpan] = {}
        self.spilling: dict[Position, Span] = {}  # the <f> of each formula that spills
        self.sheet_data: CellSpan | None = None
        self.dimension: Span | None = None
        self.filled: set[Position] = set()  # by array formulas and data tables
        self.path: list[tuple[str, Span | None]] = []
        self.row = self.column = 0
        self.metadata = ""

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        local, depth = name.rpartition(" ")[2], len(self.path)
        span: Span | None = None
        at = self.parser.CurrentByteIndex
        if depth == 1 and local == "sheetData":
            span = self.sheet_data = CellSpan(*opened(self.data, at))
        elif depth == 1 and local == "dimension":
            span = self.dimension = Span(*opened(self.data, at))
        elif depth == 2 and local == "row":
            self.row, self.column = int(attributes.get("r") or self.row + 1), 0
            span = self.rows[self.row] = CellSpan(*opened(self.data, at))
        elif depth == 3 and local == "c":
            area = read_ref(attributes.get("r", ""))
            self.row, self.column = area[:2] if area else (self.row, self.column + 1)
            self.metadata = attributes.get("cm", "")
            parent = self.path[-1][1]
            if isinstance(parent, CellSpan):
                parent.cells.append((self.column, at))
            if (self.row, self.column) in self.sheet.values:
                span = self.cells[self.row, self.column] = CellSpan(*opened(self.data, at))
        elif depth == 4 and local in ("f", "v", "is"):
            span = self.start_inner(local, attributes, at)
        self.path.append((local, span))

    def start_inner(self, local: str, attributes: dict[str, str], at: int) -> Span | None:
        """An element of a cell begins: its formula, its value or its own text."""
        span, parent, position = None, self.path[-1][1], (self.row, self.column)
        if isinstance(parent, CellSpan):
            span = parent.inner[local] = Span(*opened(self.data, at))
        if local == "f":
            area = read_ref(attributes.get("ref", "")) if attributes.get("t") in ("array", "dataTable") else None
            if self.metadata in self.sheet.dynamic and position in self.sheet.areas:
                self.spilling[position] = span = span or Span(*opened(self.data, at))
                self.fill(self.sheet.areas[position])
            if area:
                self.fill(area)
        return span

    def fill(self, area: Bounds) -> None:
        """The cells of an area belong to a formula."""
        self.filled.update(product(range(area[0], area[2] + 1), range(area[1], area[3] + 1)))

    def end(self, _: str) -> None:
        """An element ends."""
        _, span = self.path.pop()
        if span is not None:
            span.close(self.data, self.parser.CurrentByteIndex)


def reshaped(data: bytes, found: Locator, sheet: Sheet) -> list[Edit]:
    """The areas of spilling formulas, where they have grown or shrunk."""
    edits = []
    for position, formula in found.spilling.items():
        area = sheet.areas[position]
        old = tag = data[formula.start : formula.opened]
        ref = address(position) if area[:2] == area[2:] else f"{address(position)}:{address(area[2:])}"
        if b'"%b"' % ref.encode() not in tag:
            tag = with_attribute(with_attribute(tag, b"t", b"array"), b"ref", ref.encode())
        if tag != old:
            edits.append((formula.start, formula.opened, tag))
    return edits


def widened(data: bytes, found: Locator, new: Mapping[int, Mapping[int, Scalar]]) -> list[Edit]:
    """The stated extent of the sheet, so that it holds the cells which are put in."""
    if found.dimension is None:
        return []
    tag = data[found.dimension.start : found.dimension.opened]
    stated = re.search(rb"""\sref\s*=\s*["']([^"']*)["']""", tag)
    area = read_ref(stated[1].decode("ascii", "replace")) if stated else None
    if area is None:
        return []
    rows, columns = (
        [*new, area[0], area[2]],
        [area[1], area[3], *(column for cells in new.values() for column in cells)],
    )
    wide = (min(rows), min(columns), max(rows), max(columns))
    if wide == area:
        return []
    ref = f"{address(wide[:2])}:{address(wide[2:])}"
    return [(found.dimension.start, found.dimension.opened, with_attribute(tag, b"ref", ref.encode()))]


def changed_cell(data: bytes, cell: CellSpan, value: Scalar, rich: Mapping[str, str]) -> list[Edit]:
    """What to replace in a cell that the file holds: its t, and its <v> after its <f>."""
    tag = data[cell.start : cell.opened]
    name = name_of(tag)
    kind, v = saved_form(value, name.rpartition(b"c")[0], rich)
    bare = without(tag, (b"t", b"vm"))
    if cell.empty:
        return [(cell.start, cell.end, b"%b%b>%b</%b>" % (bare, kind, v, name) if v else bare + b"/>")]
    edits = [(cell.start, cell.opened, bare + kind + b">")]
    old, formula, kept = cell.inner.get("v"), cell.inner.get("f"), cell.inner.get("is")
    if old is not None:
        edits.append((old.start, old.end, v))
    else:
        place = formula.end if formula is not None else cell.opened
        edits.append((place, place, v))
    if kept is not None:
        edits.append((kept.start, kept.end, b""))
    return edits


def new_cell(prefix: bytes, row: int, column: int, value: Scalar, rich: Mapping[str, str]) -> bytes:
    """A cell that the file does not hold yet."""
    kind, v = saved_form(value, prefix, rich)
    tag = prefix + b"c"
    return b'<%b r="%b%d"%b>%b</%b>' % (tag, column_letters(column).encode(), row, kind, v, tag)


def filled_in(data: bytes, parent: Span, made: list[tuple[int, bytes]], there: list[tuple[int, int]]) -> list[Edit]:
    """New rows or cells put before the first that comes after them, or at the end of what holds them.

    What a row says of the columns that it spans, a hint to readers that may be missing, is left out.
    """
    if not made:
        return []
    tag = data[parent.start : parent.opened]
    bare = without(tag, (b"spans",))
    if parent.empty:
        return [(parent.start, parent.end, b"%b>%b</%b>" % (bare, b"".join(xml for _, xml in made), name_of(tag)))]
    edits = [(parent.start, parent.opened, bare + b">")] if b"spans" in tag else []
    for number, xml in made:
        place = next((start for other, start in there if other > number), parent.closed)
        edits.append((place, place, xml))
    return edits
