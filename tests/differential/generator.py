"""Random workbooks over the supported language; the same seed gives the same book.

Sheet Data holds the constants, Base a list with headers and criteria, which is also the table `Stock`; Cases holds one
formula a row in column B, and to its right every call within that formula once more in a cell of its own, so that a
difference is seen where it arises. Arrays does the same for array formulas of two rows and three columns.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from random import Random
from typing import TYPE_CHECKING

from cellsection.workbook.values import Array, ErrorValue, Scalar
from tests.differential.expressions import Piece
from tests.differential.functions import PREFIXED, arguments_of, names, words_of
from tests.differential.values import AREAS, ERRORS, MILD, ODD, WORDS, number, typical
from tests.differential.written import ArrayText, FormulaText, Sheets, WrittenTable, letters

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["Case", "GeneratedBook", "generate"]

ROWS = 20
# Functions whose areas the application accepts as references only.
REFERENCES = words_of(
    """
    COUNTIF COUNTIFS SUMIF SUMIFS AVERAGEIF AVERAGEIFS MAXIFS MINIFS RANK RANK.EQ RANK.AVG SUBTOTAL COUNTBLANK
    OFFSET ISFORMULA FORMULATEXT AREAS SHEETS
    """
)
OPERATORS = ("+", "-", "*", "/", "^", "&", "=", "<>", "<", ">", "<=", ">=")
NAMED = {"Steel": "Data!$B$1:$B$20", "Factor": "Data!$C$1", "Half": "1/2", "Twice": "Data!$G$2*2"}
WIDE = ("number", "any", "text", "yes")  # words that very large numbers may stand under
NESTED = ("number", "any", "text", "yes")  # words that calls may stand under
FIELDS = ("mark", "grade", "length", "mass")


@dataclass(frozen=True, slots=True)
class Case:
    """A formula and where it stands; `within` are the places of its calls, in the order of Piece.calls."""

    sheet: str
    row: int
    column: int
    piece: Piece
    within: tuple[tuple[int, int], ...]
    array: bool


@dataclass(slots=True)
class GeneratedBook:
    """The content of a book and the cases in it."""

    seed: int
    sheets: Sheets
    cases: list[Case]
    formulas: int = 0  # formula cells, the areas of array formulas included
    names: dict[str, str] = field(default_factory=lambda: dict(NAMED))
    tables: tuple[WrittenTable, ...] = (WrittenTable("Stock", "Base", "A1:D13", FIELDS),)


def generate(seed: int, cells: int) -> GeneratedBook:
    """A book of about so many formula cells."""
    chance = Random(seed)
    data = constants(chance)
    book = GeneratedBook(seed, {"Data": dict(data), "Base": dict(stock(chance)), "Cases": {}, "Arrays": {}}, [])
    writer = Writer(chance, book.sheets)
    tried = names()
    chance.shuffle(tried)
    turn = 0
    while book.formulas < cells:
        pick = chance.random()
        depth = 0 if pick < 0.6 else 1 if pick < 0.9 else 2
        if chance.random() < 0.12:
            piece = writer.operation(depth)
        else:
            piece = writer.call(tried[turn % len(tried)], depth)
            turn += 1
        array = chance.random() < 0.12
        book.formulas += place(book, piece, array)
    return book


def place(book: GeneratedBook, piece: Piece, array: bool) -> int:
    """Write a case into its sheet; gives how many cells it takes."""
    sheet = "Arrays" if array else "Cases"
    cells = book.sheets[sheet]
    step, across = (3, 4) if array else (1, 1)
    row = 1 + step * sum(case.array == array for case in book.cases)
    pieces = [piece, *piece.calls()]
    for k, each in enumerate(pieces):
        column = 2 + across * k
        if array:
            area = f"{letters(column)}{row}:{letters(column + 2)}{row + 1}"
            cells[row, column] = ArrayText(each.text, area)
        else:
            cells[row, column] = FormulaText(each.text)
    within = tuple((row, 2 + across * k) for k in range(1, len(pieces)))
    book.cases.append(Case(sheet, row, 2, piece, within, array))
    return len(pieces) * (6 if array else 1)


def constants(chance: Random) -> dict[tuple[int, int], Scalar]:
    """The columns of Data: numbers, positive and whole ones, words, mixed, dates, fractions, with gaps, logicals,
    numbers as text, with errors, sorted.
    """
    ascending = sorted(round(chance.uniform(-50, 150), 1) for _ in range(ROWS))
    mixed: tuple[Callable[[], Scalar], ...] = (
        lambda: number(chance), lambda: chance.choice(WORDS), lambda: None, lambda: chance.random() < 0.5,
        lambda: number(chance),
    )  # fmt: skip
    columns: tuple[Callable[[int], Scalar], ...] = (
        lambda _: number(chance),
        lambda _: typical("positive", chance),
        lambda _: float(chance.randint(0, 9)),
        lambda _: chance.choice(WORDS),
        lambda _: chance.choice(mixed)(),
        lambda _: float(chance.randint(36_526, 47_000)),
        lambda _: typical("fraction", chance),
        lambda _: number(chance) if chance.random() < 0.7 else None,
        lambda _: chance.random() < 0.5,
        lambda _: chance.choice(("1", "2.5", "-3", "10%", "1e2", "12/25/2023", "x")),
        lambda _: chance.choice(ERRORS) if chance.random() < 0.3 else number(chance),
        lambda row: ascending[row - 1],
    )
    return {(row, k): make(row) for row in range(1, ROWS + 1) for k, make in enumerate(columns, start=1)}


def stock(chance: Random) -> dict[tuple[int, int], Scalar]:
    """A list with headers in A1:D13, and criteria in F1:G3."""
    cells: dict[tuple[int, int], Scalar] = {(1, k): name for k, name in enumerate(FIELDS, start=1)}
    for row in range(2, 14):
        cells[row, 1] = f"P{row - 1}"
        cells[row, 2] = chance.choice(("S235", "S355", "S460"))
        cells[row, 3] = float(chance.randint(1, 12)) if chance.random() < 0.9 else None
        cells[row, 4] = round(chance.uniform(5, 400), 1)
    cells |= {(1, 6): "grade", (1, 7): chance.choice(("length", "mass"))}
    cells |= {(2, 6): chance.choice(("S235", "S3*", "<>S460", None)), (2, 7): chance.choice((">4", "<100", None, 3.0))}
    cells |= {(3, 6): chance.choice(("S460", "=S235")), (3, 7): chance.choice((">=2", None))}
    return cells


class Writer:
    """Builds random expressions over the sheets of one book."""

    def __init__(self, chance: Random, sheets: Sheets) -> None:
        self.chance, self.sheets = chance, sheets
        self.top, self.bottom = 1, ROWS
        self.day = 40_000.0
        self.plain = False  # whether areas are references only

    def cell(self, sheet: str, row: int, column: int) -> Scalar:
        """A constant."""
        content = self.sheets[sheet].get((row, column))
        if isinstance(content, FormulaText | ArrayText):
            raise TypeError("constants only")
        return content

    def array(self, sheet: str, top: int, left: int, bottom: int, right: int) -> Array:
        """The constants of an area."""
        columns = range(left, right + 1)
        return tuple(tuple(self.cell(sheet, r, c) for c in columns) for r in range(top, bottom + 1))

    # ---- calls and operations

    def call(self, name: str, depth: int) -> Piece:
        """A call of a function with random arguments."""
        chance = self.chance
        length = chance.choice((2, 3, 4, 5, 8, 12, 20))
        self.top = chance.randint(1, ROWS - length + 1)
        self.bottom = self.top + length - 1
        words = arguments_of(name)
        if any(word.endswith("?") for word in words):
            least = sum(not word.endswith("?") for word in words)
            words = words[: chance.randint(least, len(words))]
        odd = chance.random() < 0.3  # one odd argument in about a third of the calls
        which = chance.randrange(len(words)) if words and odd else -1
        self.plain = name in REFERENCES
        arguments = tuple(
            self.unusual(word.rstrip("?"), lone=len(words) < 2)
            if k == which
            else self.argument(word.rstrip("?"), depth)
            for k, word in enumerate(words)
        )
        prefix = "_xlfn." if name in PREFIXED else ""
        return Piece("call", f"{prefix}{name}({','.join(each.text for each in arguments)})", name, arguments)

    def operation(self, depth: int) -> Piece:
        """An operator between two operands, a sign or a per cent."""
        chance = self.chance
        pick = chance.random()
        left = self.operand(depth)
        if pick < 0.1:
            return Piece("operator", f"-{left.text}", "negation", (left,))
        if pick < 0.2:
            return Piece("operator", f"{left.text}%", "%", (left,))
        sign, right = chance.choice(OPERATORS), self.operand(depth)
        return Piece("operator", f"{left.text}{sign}{right.text}", sign, (left, right))

    def operand(self, depth: int) -> Piece:
        """An operand, in brackets where it is an operation itself."""
        chance = self.chance
        piece = (
            self.odd(lone=True, wide=True)
            if chance.random() < 0.25
            else self.argument(chance.choice(("any", "number")), depth)
        )
        if piece.form == "operator" or (piece.form == "typed" and piece.text.startswith("-")):
            return Piece(piece.form, f"({piece.text})", piece.head, piece.arguments, piece.value)
        return piece

    # ---- arguments

    def argument(self, word: str, depth: int) -> Piece:
        """A typical argument under a word."""
        chance = self.chance
        if word in AREAS or word in ("block", "square", "base", "criteria", "reference"):
            return self.area(word)
        if depth and word in NESTED and chance.random() < 0.7:
            if chance.random() < 0.2:
                return self.operation(depth - 1)
            return self.call(chance.choice(INNER[word]), depth - 1)
        if word in ("number", "any", "text", "positive", "fraction", "yes") and chance.random() < 0.35:
            return self.reference(word)
        if word == "number" and chance.random() < 0.04:
            return chance.choice((self.named("Factor", self.cell("Data", 1, 3)), self.named("Half", 0.5)))
        value = self.dated(word) if word in ("day", "later", "soon") else typical(word, chance)
        return typed(value)

    def dated(self, word: str) -> float:
        """A day, or one after the last."""
        if word == "day":
            self.day = float(typical("day", self.chance))  # type: ignore[arg-type]
            return self.day
        return float(int(self.day) + self.chance.randint(1, 170 if word == "soon" else 4000))

    def named(self, name: str, value: Scalar | Array) -> Piece:
        """A defined name."""
        return Piece("name", name, value=value)

    def reference(self, word: str) -> Piece:
        """A cell of a column that suits the word."""
        columns = {"number": "ABCH", "any": "ABCDEFIJ", "text": "DDJ", "positive": "B", "fraction": "G", "yes": "I"}[
            word
        ]
        column, row = self.chance.choice(columns), self.chance.randint(1, ROWS)
        return Piece("cell", f"Data!{self.dollars(column, row)}", value=self.cell("Data", row, ord(column) - 64))

    def dollars(self, column: str, row: int) -> str:
        """A relative, mixed or absolute address."""
        return self.chance.choice((f"{column}{row}", f"${column}${row}", f"{column}${row}", f"${column}{row}"))

    def area(self, word: str) -> Piece:
        """An area, whole columns, an array constant, a named area or a column of the table."""
        chance = self.chance
        top, bottom = self.top, self.bottom
        if word == "base":
            return Piece(
                "range", chance.choice(("Base!A1:D13", "Base!$A$1:$D$13")), value=self.array("Base", 1, 1, 13, 4)
            )
        if word == "criteria":
            right, last = chance.choice((6, 7)), chance.choice((2, 2, 3))
            return Piece("range", f"Base!F1:{letters(right)}{last}", value=self.array("Base", 1, 6, last, right))
        if word == "reference":
            return self.reference("any") if chance.random() < 0.5 else self.rectangle("A", 2, top, bottom)
        if word == "square":
            size = chance.choice((1, 2, 2, 3))
            if chance.random() < 0.3:
                return constant(tuple(tuple(number(chance) for _ in range(size)) for _ in range(size)))
            first = min(top, ROWS - size + 1)
            return self.rectangle("A", size, first, first + size - 1)
        if word == "block":
            return self.rectangle(
                chance.choice("ACL"), chance.choice((1, 2, 3)) if chance.random() < 0.7 else 1, top, bottom
            )
        pick = chance.random()
        column = chance.choice(AREAS[word])
        if pick < 0.08 and word != "words":  # a million words joined take LibreOffice minutes
            return Piece(
                "column",
                f"Data!{column}:{column}",
                value=self.array("Data", 1, ord(column) - 64, ROWS, ord(column) - 64),
            )
        if pick < 0.16 and not self.plain:
            values = tuple((self.cell("Data", row, ord(column) - 64),) for row in range(top, min(bottom, top + 5) + 1))
            return constant(values)
        if pick < 0.19 and word in ("numbers", "positives"):
            return self.named("Steel", self.array("Data", 1, 2, ROWS, 2))
        if pick < 0.22 and word in ("numbers", "positives"):
            return Piece("range", "Stock[mass]", value=self.array("Base", 2, 4, 13, 4))
        return self.rectangle(column, 1, top, bottom)

    def rectangle(self, column: str, width: int, top: int, bottom: int) -> Piece:
        """An area of Data."""
        left = ord(column) - 64
        width = min(width, 12 - left + 1)
        last = letters(left + width - 1)
        text = f"Data!{self.dollars(column, top)}:{self.dollars(last, bottom)}"
        return Piece("range", text, value=self.array("Data", top, left, bottom, left + width - 1))

    def unusual(self, word: str, *, lone: bool) -> Piece:
        """An argument of another kind than the typical; where an area belongs, another area or cell."""
        if word in AREAS or word in ("block", "square", "base", "criteria", "reference"):
            if self.chance.random() < 0.5:
                return self.rectangle(self.chance.choice("DEHIJK"), 1, self.top, self.bottom)
            return self.reference("any")
        return self.odd(lone=lone, wide=word in WIDE)

    def odd(self, *, lone: bool, wide: bool) -> Piece:
        """An argument of another kind than the typical; a lone one is never left empty."""
        chance = self.chance
        pick = chance.random()
        if pick < 0.42:
            return typed(chance.choice(ODD if wide else MILD))
        if pick < 0.54:
            return Piece("cell", f"Data!M{chance.randint(1, 40)}", value=None)
        if pick < 0.74:
            column, row = chance.choice("DEHIJK"), chance.randint(1, ROWS)
            return Piece("cell", f"Data!{self.dollars(column, row)}", value=self.cell("Data", row, ord(column) - 64))
        if pick < 0.79:
            return typed(chance.choice(ERRORS))
        if pick < 0.84 and not lone:
            return Piece("missing", "")
        if pick < 0.94:
            return self.rectangle(chance.choice("DEHIJK"), 1, self.top, self.bottom)
        return constant((tuple(typical("any", chance) for _ in range(chance.choice((1, 2, 3)))),))


INNER = {
    "number": ("ABS", "SUM", "ROUND", "MAX", "MOD", "SQRT", "INT", "INDEX", "IF", "VLOOKUP", "POWER", "AVERAGE", "LEN",
               "SIGN"),
    "text": ("LEFT", "MID", "UPPER", "TEXT", "CONCATENATE", "TRIM", "SUBSTITUTE", "T", "RIGHT", "REPT", "FIXED", "IF"),
    "yes": ("AND", "OR", "NOT", "ISNUMBER", "ISTEXT", "ISERROR", "ISBLANK", "EXACT"),
    "any": ("IF", "IFERROR", "CHOOSE", "INDEX", "VLOOKUP", "LEFT", "SUM", "ROUND", "LOOKUP", "MIN", "VALUE", "AND",
            "COUNTIF"),
}  # fmt: skip


def typed(value: Scalar) -> Piece:
    """A value written in the formula."""
    return Piece("typed", literal(value), value=value)


def literal(value: Scalar) -> str:
    """A value as a formula spells it."""
    if value is None:
        return '""'
    if isinstance(value, bool):
        return str(value).upper()
    if isinstance(value, ErrorValue):
        return value.code
    if isinstance(value, str):
        return '"' + value.replace('"', '""') + '"'
    if value == int(value) and abs(value) < 1e15:
        return str(int(value))
    return repr(value).upper()


def constant(values: Array) -> Piece:
    """An array constant; what is blank becomes empty text, as an array constant knows no blanks."""
    filled = tuple(tuple("" if each is None else each for each in row) for row in values)
    text = ";".join(",".join(literal(each) for each in row) for row in filled)
    return Piece("constant", "{" + text + "}", value=filled)
