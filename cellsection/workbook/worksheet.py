"""The cells of one sheet of an .xlsx package, and the shared strings that they point into.

worksheet ─ sheetData ─ row ─ c ─┬─ f    the formula: its own, shared, of an array, of a data table
                                 ├─ v    the saved value, a number in most cells
                                 └─ is   text kept in the cell
sst ─ si ─┬─ t, r ─ t                    text, whole or in runs
          └─ rPh                         how it is read aloud; left out

This is where the time goes when a book is read: each part is walked once, and a plain number put away without a call.
"""

from __future__ import annotations

import re

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Bounds, Formula, Position, Sheet, column_letters, column_number
from cellsection.workbook.literals import EPOCH, EPOCH_1904, read_date, read_number
from cellsection.workbook.markup import DEEPEST, LONGEST_TEXT, feed, new_parser, refused
from cellsection.workbook.metadata import Metadata
from cellsection.workbook.package import Package
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["LAST_COLUMN", "LAST_ROW", "address", "read_ref", "read_sst", "read_v", "read_worksheet", "unescaped"]

REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})", re.ASCII)
ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384


def unescaped(text: str) -> str:
    r"""_x000D_ and its kind turned into the character they stand for.

    >>> unescaped("plate_x000D_web _x005F_x000D_")
    'plate\rweb _x000D_'
    """
    if "_x" not in text:
        return text
    plain = ESCAPED.sub(lambda m: chr(int(m[1], 16)), text)
    return plain.encode("utf-16", "surrogatepass").decode("utf-16", "replace")  # two halves of a character joined


def read_sst(package: Package, part: str) -> list[str]:
    """The shared strings; rich text runs joined, phonetic readings left out. What the part counts itself is ignored."""
    strings: list[str] = []
    text, runs, aloud, depth = "", "", 0, 0

    def start(name: str, _: dict[str, str]) -> None:
        nonlocal text, runs, aloud, depth
        depth += 1
        text = ""
        if name.endswith(" si"):
            runs = ""
        elif name.endswith(" rPh"):
            aloud = depth
        elif depth > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")

    def end(name: str) -> None:
        nonlocal runs, aloud, depth
        if name.endswith(" t"):
            if not aloud:
                runs += text
        elif name.endswith(" si"):
            strings.append(unescaped(runs))
        elif depth == aloud:
            aloud = 0
        depth -= 1

    def data(piece: str) -> None:
        nonlocal text
        text += piece
        if len(text) > LONGEST_TEXT:
            raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters")

    feed(new_parser(start, end, data), package.pieces(part), package.where(part))
    return strings


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


def read_ref(ref: str) -> Bounds | None:
    """A1:B3 as bounds; None where it is no range.

    >>> read_ref("B3:A1"), read_ref("C2"), read_ref("A:A")
    ((1, 1, 3, 2), (2, 3, 2, 3), None)
    """
    matches = [REFERENCE.fullmatch(each) for each in ref.split(":")]
    places = [(int(m[2]), column_number(m[1])) for m in matches if m]
    if len(places) != len(matches) or not 1 <= len(places) <= 2:
        return None
    rows, columns = sorted(place[0] for place in places), sorted(place[1] for place in places)
    within = rows[0] > 0 and rows[-1] <= LAST_ROW and columns[-1] <= LAST_COLUMN
    return (rows[0], columns[0], rows[-1], columns[-1]) if within else None


def address(position: Position) -> str:
    """A1."""
    return f"{column_letters(position[1])}{position[0]}"


class Formulas:
    """The formulas of one sheet as they are met; shared ones are tied to their master."""

    def __init__(self, package: Package, sheet: Sheet, metadata: Metadata) -> None:
        self.package, self.sheet, self.metadata, self.limits = package, sheet, metadata, package.limits
        self.shared: dict[str, Formula] = {}
        self.orphans: list[tuple[Position, str]] = []
        self.array_cells = 0

    def read_f(self, text: str, f: dict[str, str], position: Position, cm: str | None) -> None:
        """A formula: ordinary, shared (children map to their master's object), of an array, of a data table."""
        kind = f.get("t", "normal")
        if "_x" in text:
            text = unescaped(text)
        if kind == "shared":
            index = f.get("si", "")
            master = self.shared.get(index)
            if text and (master is None or "ref" in f):
                formula = self.shared[index] = Formula(text, *position)
            elif text:  # a child that carries its own text
                formula = Formula(text, *position)
            elif master is not None:
                formula = master
            else:
                self.orphans.append((position, index))
                return
        elif kind == "array":
            dynamic = cm is not None and cm in self.metadata.dynamic
            area = self.area(f, position)
            formula = Formula(text, *position, kind="array", area=area, dynamic=dynamic)
        elif kind == "dataTable":
            formula = Formula(text, *position, kind="data table", area=self.area(f, position))
        elif text:
            formula = Formula(text, *position, dynamic=cm is not None and cm in self.metadata.dynamic)
        else:
            return
        self.sheet.formulas[position] = formula

    def area(self, f: dict[str, str], position: Position) -> Bounds:
        """The area that a formula fills, within the caps; its own cell where it says nothing."""
        ref = f.get("ref") or address(position)
        area = read_ref(ref)
        if area is None or area[:2] != position:
            raise WorkbookError(
                f'{self.package.name}: the formula in {self.sheet.name}!{address(position)} fills "{ref[:24]}", '
                "which is no area that begins there",
                remedy="Save the workbook again",
            )
        self.array_cells += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
        if self.array_cells > self.limits.array_cells:
            raise self.package.refused(
                f"the array formulas of sheet {self.sheet.name} fill more than {self.limits.array_cells:,} cells"
            )
        return area

    def settle_orphans(self, notes: list[str]) -> None:
        """Children that came before their master find it; those without one are unsupported."""
        missing = 0
        for position, index in self.orphans:
            master = self.shared.get(index)
            missing += master is None
            self.sheet.formulas[position] = master or Formula("", *position, kind="missing")
        if missing:
            notes.append(f"sheet {self.sheet.name}: {missing:,} cells share a formula that is not in the file")


def read_worksheet(
    package: Package, sheet: Sheet, strings: list[str], metadata: Metadata, date1904: bool, notes: list[str]
) -> None:
    """Rows and cells of a sheet, into sheet.values and sheet.formulas."""
    reader = SheetReader(package, sheet, strings, metadata, date1904)
    parser = new_parser(reader.start, reader.end, reader.data)
    feed(parser, package.pieces(sheet.part), package.where(sheet.part))
    reader.formulas.settle_orphans(notes)
    sheet.bottom, sheet.right, sheet.hidden_rows = reader.bottom, reader.right, frozenset(reader.hidden)


class SheetReader:
    """Takes the elements of a sheet part as they come; the cell is put away when it ends."""

    def __init__(self, package: Package, sheet: Sheet, strings: list[str], metadata: Metadata, date1904: bool) -> None:
        self.package, self.sheet, self.strings, self.metadata, self.date1904 = (
            package,
            sheet,
            strings,
            metadata,
            date1904,
        )
        self.values, self.known, self.most = sheet.values, sheet.formulas, package.limits.cells
        self.formulas = Formulas(package, sheet, metadata)
        self.columns: dict[str, int] = {}  # by their letters, those met so far
        self.hidden: list[int] = []
        self.row_name = self.c_name = self.f_name = self.v_name = self.t_name = self.is_name = self.r_ph_name = ""
        self.row = self.column = self.bottom = self.right = 0
        self.row_text, self.digits = "", 0  # the row as its cells' addresses end
        self.backwards = False  # a row came out of order, so that a cell may come twice
        self.depth = self.aloud = 0  # aloud: depth of the phonetic reading that is being passed over
        self.text = ""
        self.c: dict[str, str] = {}  # the attributes of the cell at hand, its formula's, and their texts
        self.f: dict[str, str] | None = None
        self.f_text = ""
        self.v: str | None = None

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        self.depth += 1
        if self.text:
            if self.depth > 4 and self.text.strip():
                raise refused(f"mixes text and elements near row {self.row}")
            self.text = ""
        if name == self.c_name:
            self.c, self.f, self.v = attributes, None, None
        elif name == self.f_name:
            self.f = attributes
        elif name == self.row_name:
            self.read_row(attributes)
        elif name == self.is_name:
            self.v = ""
        elif name == self.r_ph_name:
            self.aloud = self.depth
        elif self.depth == 1:  # transitional and strict files, and any prefix, read alike
            space = name.rpartition(" ")[0]
            self.row_name, self.c_name, self.f_name, self.v_name, self.t_name, self.is_name, self.r_ph_name = (
                f"{space} {each}".strip() for each in ("row", "c", "f", "v", "t", "is", "rPh")
            )
        elif self.depth > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")

    def data(self, piece: str) -> None:
        """Text, whole or a piece of it."""
        if self.text:
            self.text += piece
            if len(self.text) > LONGEST_TEXT:
                raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters near row {self.row}")
        else:
            self.text = piece

    def end(self, name: str) -> None:
        """An element ends."""
        self.depth -= 1
        if name == self.v_name:
            self.v = self.text
        elif name == self.c_name:
            self.read_c()
        elif name == self.f_name:
            self.f_text = self.text
        elif name == self.t_name:
            if not self.aloud and self.v is not None:
                self.v += self.text
        elif self.depth < self.aloud:
            self.aloud = 0
        self.text = ""

    def read_row(self, row: dict[str, str]) -> None:
        """A row begins: as stated, or the next one where it does not say."""
        before, stated = self.row, row.get("r", "")
        self.row_text, self.digits, self.column = stated, len(stated), 0
        if not stated:
            self.row = before + 1
        else:
            self.row = int(stated) if stated.isdecimal() and stated.isascii() and len(stated) < 8 else 0
        if not 0 < self.row <= LAST_ROW:
            raise self.no_cell(f'row "{stated[:24]}"')
        if self.row <= before:
            self.backwards = True
        if row.get("hidden") in ("1", "true"):
            self.hidden.append(self.row)
        if len(self.values) + len(self.known) > self.most:
            raise self.package.refused(f"sheet {self.sheet.name} holds more than {self.most:,} cells")

    def read_c(self) -> None:
        """A cell ends: its saved value and its formula are put away."""
        c, v, before = self.c, self.v, self.column
        r = c.get("r", "")
        digits = self.digits
        column = self.columns.get(r[:-digits]) if digits and r[-digits:] == self.row_text else None
        if column is None:
            column = self.read_r(r)
        self.column = column
        if v is None and self.f is None:
            return
        row = self.row
        position = (row, column)
        if (column <= before or self.backwards) and (position in self.values or position in self.known):
            raise WorkbookError(
                f"{self.package.name}: sheet {self.sheet.name} has the cell {address(position)} twice",
                remedy="Save the workbook again",
            )
        if column > self.right:
            self.right = column
        if row > self.bottom:
            self.bottom = row
        if v is not None:
            kind = c.get("t", "n")
            if kind == "n":
                try:
                    value = float(v)
                except ValueError:
                    value = float("nan")
                if value - value == 0.0 and "_" not in v:  # finite
                    self.values[position] = value
                else:
                    self.put(position, read_number(v))
            elif kind == "s":
                self.values[position] = self.string(v)
            elif kind == "e" and "vm" in c:
                self.values[position] = ErrorValue(self.metadata.errors.get(c["vm"], v.strip()))
            else:
                self.put(position, read_v(v, kind, self.date1904))
        if self.f is not None:
            self.formulas.read_f(self.f_text, self.f, position, c.get("cm"))

    def put(self, position: Position, value: Scalar) -> None:
        """A value; a blank is none."""
        if value is not None:
            self.values[position] = value

    def string(self, index: str) -> Scalar:
        """A shared string by its place in the list."""
        try:
            place = int(index)
        except ValueError:
            place = -1
        if 0 <= place < len(self.strings):
            return self.strings[place]
        return ErrorValue("#VALUE!", "its text is missing from the file")

    def read_r(self, r: str) -> int:
        """The column of a cell from its address, or the next one where it has none; the row is checked too."""
        if not r:
            if not (self.row > 0 and self.column < LAST_COLUMN):
                raise self.no_cell(f"row {self.row}, column {self.column + 1}")
            return self.column + 1
        area = read_ref(r) if ":" not in r else None
        if area is None:
            raise self.no_cell(f'"{r[:24]}"')
        row, column = area[:2]
        if row == self.row:
            if self.row_text:
                self.columns[r[: -self.digits]] = column
        else:  # in another row than the one it is written in; its own address counts
            self.row, self.backwards = row, True
            self.row_text, self.digits = "", 0
        return column

    def no_cell(self, what: str) -> WorkbookError:
        """A refusal of a place that is none."""
        return WorkbookError(
            f"{self.package.name}: sheet {self.sheet.name} has a cell at {what}, which is no cell address",
            remedy="Save the workbook again",
        )
