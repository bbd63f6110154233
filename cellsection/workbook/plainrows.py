"""Rows of a sheet written the way the applications write them, read without a parser in half its time.

XML allows much that no application writes in a row of cells: comments, prefixes, attributes in any order. Here only the
usual spelling is read, a whole row or none; from the first row that is unusual, all goes to the parser. So nothing is
read here that the parser would read otherwise, and what is damaged is left to it to tell.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from math import nan
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from cellsection.workbook.values import Scalar
    from cellsection.workbook.worksheet import SheetReader

__all__ = ["not_plain"]

ATTRIBUTES = r'(?: [\w:]++="[^"<&\x00-\x1f]*+")*+'
TEXT = r"[^<&\x00-\x08\x0b-\x1f]*+(?:&(?:amp|lt|gt|quot|apos);[^<&\x00-\x08\x0b-\x1f]*+)*+"
SPACE = r'(?: xml:space="preserve")?+'
ROW = re.compile(rf'\s*+<row r="([0-9]{{1,7}})"({ATTRIBUTES}) ?(?:/>|>(.*?)</row>)', re.ASCII | re.DOTALL)
CELL = re.compile(
    rf'(\s*+<c r="([A-Z]{{1,3}})([0-9]{{1,7}})"({ATTRIBUTES})(?: ?/>|>'
    rf"(?:<f({ATTRIBUTES})(?: ?/>|>({TEXT})</f>))?+"
    rf"(?:(<v ?/>|<v{SPACE}></v>)|<v{SPACE}>({TEXT})</v>|<is><t{SPACE}>(?!<)({TEXT})</t></is>)?+</c>))",
    re.ASCII,
)
ATTRIBUTE = re.compile(r' ([\w:]+)="([^"]*)"', re.ASCII)
ENTITY = re.compile("&(amp|lt|gt|quot|apos);")
ENTITIES = {"amp": "&", "lt": "<", "gt": ">", "quot": '"', "apos": "'"}
SHEET_DATA = b"<sheetData>"
ROW_END = b"</row>"
# In the head of a part: a comment or an instruction, which might hold anything, and another encoding.
UNUSUAL = re.compile(rb"""<!|(?<!\A)<\?|\A<\?xml[^>]*encoding=["'](?!utf-8["'])""", re.IGNORECASE)
LONGEST_ROW = 4_000_000  # bytes; a longer one is the parser's


def not_plain(pieces: Iterable[bytes], reader: SheetReader) -> Iterator[bytes]:
    """What of a sheet part is to go through the parser: all but the rows that are read here."""
    pieces, head = iter(pieces), b""
    for piece in pieces:
        head += piece
        if SHEET_DATA in head or len(head) > LONGEST_ROW:
            break
    head, found, rest = head.partition(SHEET_DATA)
    yield head + found  # the parser has read it before it asks for more
    if found and reader.path == ["worksheet", "sheetData"] and not UNUSUAL.search(head):
        plain, more = PlainRows(reader), True
        while more:
            end = rest.rfind(ROW_END) + len(ROW_END)
            if end >= len(ROW_END):
                unread = plain.read(rest[:end])
                rest = unread + rest[end:]
                more = not unread
            piece = next(pieces, b"")
            rest += piece
            more = more and len(piece) > 0 and len(rest) < LONGEST_ROW
    yield rest
    yield from pieces


class PlainRows:
    """Reads rows into a reader."""

    def __init__(self, reader: SheetReader) -> None:
        self.reader = reader
        self.columns: dict[str, int] = {}  # by their letters
        self.cells: dict[str, dict[str, str]] = {}  # attributes, by how they are written
        self.formulas: dict[str, dict[str, str]] = {}

    def read(self, data: bytes) -> bytes:
        """Read whole rows; returns the first unusual one with all behind it."""
        try:
            rows = data.decode()
        except UnicodeDecodeError:
            return data
        if "xmlns" in rows:  # what follows might be something else under the same name
            return data
        at = 0
        for row in ROW.finditer(rows):
            number, attributes, content = row.groups()
            cells = CELL.findall(content) if content else []
            if row.start() != at or sum([len(cell[0]) for cell in cells]) != len(content or ""):
                break
            hidden = "1" if ' hidden="1"' in attributes or ' hidden="true"' in attributes else "0"
            self.reader.read_row({"r": number, "hidden": hidden})
            self.read_cells(number, cells)
            at = row.end()
        return rows[at:].encode()

    def read_cells(self, stated_row: str, cells: list[tuple[str, ...]]) -> None:
        """Put the cells of a row away; any that is not simply the next one goes the way of the parser's."""
        reader, values, columns, known = self.reader, self.reader.values, self.columns, self.cells
        strings, read_f, row, last, filled = reader.strings, reader.formulas.read_f, int(stated_row), 0, 0
        for _, letters, stated, written, f, f_text, empty, v, text in cells:
            attributes = known.get(written)
            if attributes is None:
                attributes = known[written] = dict(ATTRIBUTE.findall(written))
            column = columns.get(letters, 0)
            if column <= last or stated != stated_row or text or reader.backwards:
                saved = plain_text(v or text) if v or text or empty else None
                formula = self.attributes(f) if f or f_text else None
                reader.column = last
                reader.read_c({"r": letters + stated, **attributes}, saved, formula, plain_text(f_text))
                last = columns[letters] = reader.column
                continue
            last = column
            if v or empty:
                kind = attributes.get("t", "n")
                if kind == "n" and v:
                    try:
                        number = float(v)
                    except ValueError:
                        number = nan
                    plain = number - number == 0.0 and "_" not in v and v.isascii()  # finite, and as XML writes numbers
                    value: Scalar = number if plain else reader.value(kind, plain_text(v), None)
                elif kind == "s" and v.isdecimal() and len(v) < 10 and int(v) < len(strings):
                    value = strings[int(v)]
                else:
                    value = reader.value(kind, plain_text(v), attributes.get("vm"))
                if value is not None:
                    values[row, column] = value
                    filled = column
            if f or f_text:
                read_f(plain_text(f_text), self.attributes(f), (row, column), attributes.get("cm"))
                filled = column
        if filled:
            reader.bottom, reader.right = max(reader.bottom, row), max(reader.right, filled)
        reader.column = last

    def attributes(self, written: str) -> dict[str, str]:
        """The attributes of a formula; those of the children of a shared formula come again and again."""
        known = self.formulas.get(written)
        if known is None:
            known = dict(ATTRIBUTE.findall(written))
            if len(self.formulas) < 10_000:
                self.formulas[written] = known
        return known


def plain_text(text: str) -> str:
    """The characters of a text."""
    return ENTITY.sub(lambda match: ENTITIES[match[1]], text) if "&" in text else text
