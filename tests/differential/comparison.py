"""Cell by cell: what this program makes of a book against what LibreOffice makes of it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import FormulaCell, Status
from cellsection.workbook.values import ErrorValue, Scalar
from tests.differential.expressions import Piece, shape
from tests.differential.generator import GeneratedBook, generate
from tests.differential.office import calculated
from tests.differential.written import letters, write_book

if TYPE_CHECKING:
    from pathlib import Path

__all__ = ["RELATIVE", "Difference", "Outcome", "agree", "compare_books"]

RELATIVE = 1e-9  # of the larger of two numbers
ABSOLUTE = 1e-12  # and near zero


@dataclass(frozen=True, slots=True)
class Difference:
    """A formula cell that comes out differently, though every call within it agrees.

    ours, theirs : the two values; LibreOffice's errors as it shows them ("Err:502")
    element : row and column within the area of an array formula, counted from 0
    path : the file that was recalculated here, "xlsx" or "ods"
    """

    piece: Piece
    ours: Scalar
    theirs: Scalar
    shown: str
    array: bool
    element: tuple[int, int]
    path: str
    row: int

    @property
    def group(self) -> str:
        """Function and kinds of argument."""
        arguments = ", ".join(shape(each) for each in self.piece.arguments)
        return f"{self.piece.head}({arguments})" + (" in an array formula" if self.array else "")


@dataclass(slots=True)
class Outcome:
    """What a run found."""

    cells: int = 0
    equal: int = 0
    follows: int = 0  # differ because a call within differs
    unsupported: Counter[str] = field(default_factory=Counter)
    differences: list[Difference] = field(default_factory=list)


def agree(ours: Scalar, theirs: Scalar) -> bool:
    """Whether two values are the same: numbers to 1e-9, errors by code; a logical is also the number 1 or 0."""
    if isinstance(ours, ErrorValue) or isinstance(theirs, ErrorValue):
        return ours == theirs
    if isinstance(ours, str) or isinstance(theirs, str):
        return (
            (ours or "") == (theirs or "") if not isinstance(ours, float) and not isinstance(theirs, float) else False
        )
    a, b = float(ours or 0.0), float(theirs or 0.0)
    return abs(a - b) <= max(RELATIVE * max(abs(a), abs(b)), ABSOLUTE)


COMPLEX = frozenset(name for name in (*BUILTINS, "COMPLEX") if name.startswith("IM") or name == "COMPLEX")


def complex_of(value: Scalar) -> complex | None:
    """The complex number that a result in text spells."""
    try:
        return complex(str(value).lower().replace("i", "j")) if isinstance(value, str) else None
    except ValueError:
        return None


def alike(ours: Scalar, theirs: Scalar) -> bool:
    """Whether two complex numbers written as text are the same to 1e-9 of their size, whatever digits they show."""
    a, b = complex_of(ours), complex_of(theirs)
    return a is not None and b is not None and abs(a - b) <= max(RELATIVE * max(abs(a), abs(b)), ABSOLUTE)


def shown(value: Scalar) -> str:
    """An error as LibreOffice shows it."""
    return value.message.removeprefix("saved as ") if isinstance(value, ErrorValue) else ""


Cells = dict[tuple[str, str], FormulaCell]


def cells_of(path: Path) -> Cells:
    """A book recalculated here, its cells by sheet and address."""
    return {(cell.sheet, cell.address): cell for cell in recalculate(path, seed=1).cells}


def compare_books(soffice: str, seeds: list[int], cells: int, folder: Path) -> Iterator[Outcome]:
    """Generate books of so many cells, calculate them in both programs and compare; an outcome a book."""
    books = [generate(seed, cells) for seed in seeds]
    paths = [write_book(folder / f"book{b.seed}.xlsx", b.sheets, b.names, b.tables) for b in books]
    for book, ours, theirs in zip(books, paths, calculated(soffice, paths, folder), strict=True):
        opened = cells_of(theirs)
        yield compared(book, cells_of(ours), opened, "xlsx")
        yield compared(book, opened, opened, "ods")


def compared(book: GeneratedBook, ours: Cells, theirs: Cells, path: str) -> Outcome:
    """Compare the cells of a book; theirs carry LibreOffice's values as the saved ones."""
    outcome = Outcome()
    for case in book.cases:
        places = [(case.row, case.column), *case.within]
        pieces = [case.piece, *case.piece.calls()]
        differs: dict[int, bool] = {}
        values: dict[int, Scalar] = {}
        for piece, (row, column) in reversed(list(zip(pieces, places, strict=True))):
            bad = False
            for r, c in [(r, c) for r in range(2) for c in range(3)] if case.array else [(0, 0)]:
                key = (case.sheet, f"{letters(column + c)}{row + r}")
                mine, other = ours[key], theirs[key].saved
                outcome.cells += 1
                if (r, c) == (0, 0):
                    values[id(piece)] = mine.value
                if mine.status is not Status.RECALCULATED:
                    outcome.unsupported[f"{mine.status.value}: {mine.reason}"] += 1
                    bad = True
                elif agree(mine.value, other) or (piece.head in COMPLEX and alike(mine.value, other)):
                    outcome.equal += 1
                elif any(differs[id(each)] for each in piece.calls()):
                    outcome.follows += 1
                    bad = True
                else:
                    bad = True
                    known = filled(piece, values)
                    found = Difference(known, mine.value, other, shown(other), case.array, (r, c), path, row)
                    outcome.differences.append(found)
            differs[id(piece)] = bad
    return outcome


def filled(piece: Piece, values: dict[int, Scalar]) -> Piece:
    """The piece with the values of the calls within."""
    arguments = tuple(replace(each, value=values[id(each)]) if each.head else each for each in piece.arguments)
    return replace(piece, arguments=arguments)
