"""New values in the XML of one sheet, set where they stand: each change is a stretch of bytes and what replaces it.

The part is walked once to learn where the cells to be changed lie. Cells and rows that the file does not hold yet (an
array formula's area may lack them) are put in where they belong.
"""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Mapping
from dataclasses import dataclass, field
from itertools import product

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import address, read_ref
from cellsection.workbook.book import Position, column_letters
from cellsection.workbook.markup import feed, new_parser
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["sheet_with_values"]

TAG = re.compile(rb"""<([^\s/>]+)[^"'>]*(?:"[^"]*"[^"'>]*|'[^']*'[^"'>]*)*>""")
KIND, RICH = (re.compile(rb"""\s+%b\s*=\s*(?:"[^"]*"|'[^']*')""" % name) for name in (b"t", b"vm"))
WIDE = (b"\xff\xfe", b"\xfe\xff")  # how a part in UTF-16 opens
DECLARATION = re.compile(r"\s*<\?xml[^>]*\?>")
ESCAPE = re.compile("[\x00-\x08\x0b-\x1f\ud800-\udfff\ufffe\uffff]|_(?=x[0-9A-Fa-f]{4}_)")
# The errors that the file format can hold; newer ones are saved as #VALUE! beside a richer value that is not written.
KNOWN_ERRORS = frozenset(("#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A", "#GETTING_DATA"))


@dataclass(slots=True)
class Span:
    """Where an element lies in the part: its start tag, its content, its end tag."""

    start: int
    opened: int
    inner: dict[str, Span] = field(default_factory=dict)
    cells: list[tuple[int, int]] = field(default_factory=list)  # of a row: column and start of each
    closed: int = 0
    end: int = 0

    @property
    def empty(self) -> bool:
        """Whether it is a tag without content, such as <row/>."""
        return self.end == self.opened


def sheet_with_values(data: bytes, values: Mapping[Position, Scalar], where: str) -> bytes:
    """A sheet part with new values in some of its cells. Raises WorkbookError where they have no place in it."""
    if data.startswith(WIDE):
        data = DECLARATION.sub("", data.decode("utf-16"), count=1).encode()
    found = Locator(data, values)
    feed(found.parser, [data], where)
    edits: list[tuple[int, int, bytes]] = []
    new: dict[int, dict[int, Scalar]] = defaultdict(dict)
    for (row, column), value in values.items():
        cell = found.cells.get((row, column))
        if (cell is None or "f" not in cell.inner) and (row, column) not in found.filled:
            raise WorkbookError(
                f"{where} has no room for {address((row, column))}: an array formula has outgrown its saved area",
                remedy="Open the book in the application and save it once",
            )
        if cell is not None:
            edits += changed_cell(data, cell, value)
        elif value is not None:
            new[row][column] = value
    if found.sheet_data is None:
        raise WorkbookError(f"{where} holds no cells", remedy="Save the workbook again")
    rows: list[tuple[int, bytes]] = []  # new rows, and the places of those after them
    prefix = TAG.match(data, found.sheet_data.start)[1].rpartition(b"sheetData")[0]  # type: ignore[index]
    for row, cells in sorted(new.items()):
        made = [(column, new_cell(prefix, row, column, value)) for column, value in sorted(cells.items())]
        if row in found.rows:
            edits += filled_in(data, found.rows[row], made, found.rows[row].cells)
        else:
            tag = prefix + b"row"
            rows.append((row, b'<%b r="%d">%b</%b>' % (tag, row, b"".join(cell for _, cell in made), tag)))
    edits += filled_in(data, found.sheet_data, rows, sorted((r, span.start) for r, span in found.rows.items()))
    return replaced(data, edits)


class Locator:
    """Walks a sheet part and notes where the wanted cells, all rows and the areas of array formulas lie."""

    def __init__(self, data: bytes, wanted: Mapping[Position, Scalar]) -> None:
        self.data, self.wanted = data, wanted
        self.parser = new_parser(self.start, self.end)
        self.cells: dict[Position, Span] = {}
        self.rows: dict[int, Span] = {}
        self.sheet_data: Span | None = None
        self.filled: set[Position] = set()  # by array formulas
        self.path: list[tuple[str, Span | None]] = []
        self.row = self.column = 0

    def span(self) -> Span:
        """The element that begins here."""
        at = self.parser.CurrentByteIndex
        tag = TAG.match(self.data, at)
        assert tag is not None  # the parser has seen it
        return Span(at, tag.end())

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        local, depth, span = name.rpartition(" ")[2], len(self.path), None
        if depth == 1 and local == "sheetData":
            span = self.sheet_data = self.span()
        elif depth == 2 and local == "row":
            self.row, self.column = int(attributes.get("r") or self.row + 1), 0
            span = self.rows[self.row] = self.span()
        elif depth == 3 and local == "c":
            area = read_ref(attributes.get("r", ""))
            self.row, self.column = area[:2] if area else (self.row, self.column + 1)
            parent = self.path[-1][1]
            if parent is not None:
                parent.cells.append((self.column, self.parser.CurrentByteIndex))
            if (self.row, self.column) in self.wanted:
                span = self.cells[self.row, self.column] = self.span()
        elif depth == 4 and local in ("f", "v", "is"):
            parent = self.path[-1][1]
            if parent is not None:
                span = parent.inner[local] = self.span()
            area = read_ref(attributes.get("ref", "")) if attributes.get("t") == "array" else None
            if area:
                self.filled.update(product(range(area[0], area[2] + 1), range(area[1], area[3] + 1)))
        self.path.append((local, span))

    def end(self, _: str) -> None:
        """An element ends; one without content ends with its start tag."""
        _, span = self.path.pop()
        if span is not None:
            if self.data[span.opened - 2 : span.opened] == b"/>":
                span.closed = span.end = span.opened
            else:
                span.closed = self.parser.CurrentByteIndex
                span.end = self.data.index(b">", span.closed) + 1


def changed_cell(data: bytes, cell: Span, value: Scalar) -> list[tuple[int, int, bytes]]:
    """What to replace in a cell that the file holds: its t, and its <v> after its <f>."""
    tag = data[cell.start : cell.opened]
    name = TAG.match(tag)[1]  # type: ignore[index]
    kind, v = saved_form(value, name.rpartition(b"c")[0])
    bare = RICH.sub(b"", KIND.sub(b"", tag)).rstrip(b"/>").rstrip()
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


def new_cell(prefix: bytes, row: int, column: int, value: Scalar) -> bytes:
    """A cell that the file does not hold yet."""
    kind, v = saved_form(value, prefix)
    tag = prefix + b"c"
    return b'<%b r="%b%d"%b>%b</%b>' % (tag, column_letters(column).encode(), row, kind, v, tag)


def filled_in(
    data: bytes, parent: Span, made: list[tuple[int, bytes]], there: list[tuple[int, int]]
) -> list[tuple[int, int, bytes]]:
    """New rows or cells put before the first that comes after them, or at the end of what holds them."""
    if made and parent.empty:
        name = TAG.match(data, parent.start)[1]  # type: ignore[index]
        tag = data[parent.start : parent.opened].rstrip(b"/>").rstrip()
        return [(parent.start, parent.end, b"%b>%b</%b>" % (tag, b"".join(xml for _, xml in made), name))]
    edits = []
    for number, xml in made:
        place = next((start for other, start in there if other > number), parent.closed)
        edits.append((place, place, xml))
    return edits


def saved_form(value: Scalar, prefix: bytes) -> tuple[bytes, bytes]:
    """The t attribute and the <v> that hold a value, each with its markup."""
    kind, text, space = b"", "", b""
    if value is None:
        return b"", b""
    if isinstance(value, bool):
        kind, text = b' t="b"', str(int(value))
    elif isinstance(value, ErrorValue):
        kind, text = b' t="e"', value.code if value.code in KNOWN_ERRORS else "#VALUE!"
    elif isinstance(value, str):
        kind, text = b' t="str"', ESCAPE.sub(lambda m: f"_x{ord(m[0]):04X}_", value)
        text = text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")
        space = b' xml:space="preserve"' if text != text.strip() else b""
    else:
        text = repr(int(value)) if value == int(value) and abs(value) < 1e15 else repr(value)
    return kind, b"<%bv%b>%b</%bv>" % (prefix, space, text.encode(), prefix)


def replaced(data: bytes, edits: list[tuple[int, int, bytes]]) -> bytes:
    """The part with its edits made; what is put in at a place comes before what is replaced from there."""
    pieces, done = [], 0
    for start, end, new in sorted(edits, key=lambda edit: edit[:2]):  # stable: what is put in keeps its order
        pieces += [data[done:start], new]
        done = end
    return b"".join([*pieces, data[done:]])
