"""The state of a running recalculation: the cells, what is still to compute, and what taints a result.

A formula reads cells through here. A read of a cell that is not computed yet raises Pending with the cells it needs;
the driver in recalculate computes those first and starts the formula again. So only cells that are really demanded
can form a circle, and chains of any length need no recursion.
"""

from __future__ import annotations

import time
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from datetime import datetime
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import FormulaError
from cellsection.workbook.book import Book, Bounds, Formula, Limits, Position, column_letters
from cellsection.workbook.coercion import REF
from cellsection.workbook.relative import shown_text
from cellsection.workbook.results import Status
from cellsection.workbook.values import Array, ErrorValue, Scalar

if TYPE_CHECKING:
    from cellsection.workbook.compile import Code

__all__ = ["CellArea", "Machine", "Pending", "Special", "Taint", "Unsupported"]

Place: TypeAlias = tuple[int, Position]  # index of the sheet, row and column


class Pending(Exception):  # noqa: N818 - a formula on hold, not a fault
    """Cells that must be computed before the formula can go on."""

    def __init__(self, places: list[Place]) -> None:
        super().__init__()
        self.places = places


class Unsupported(Exception):  # noqa: N818 - a finding, not a fault of the program
    """The formula needs a construct that is not supported."""

    def __init__(self, construct: str) -> None:
        super().__init__(construct)
        self.construct = construct


@dataclass(frozen=True, slots=True)
class Taint:
    """Why a value is not a plain recalculated one."""

    status: Status
    reason: str


class Special:
    """Stands in the store for a cell that is pending, or whose value is tainted."""

    __slots__ = ("taint", "value")

    def __init__(self, value: Scalar = None, taint: Taint | None = None) -> None:
        self.value, self.taint = value, taint


PENDING = Special()
WEIGHT = {Status.VOLATILE: 1, Status.NOT_VERIFIED: 2, Status.CYCLE: 3, Status.UNSUPPORTED: 4}
Store: TypeAlias = dict[Position, "Scalar | Special"]


class CellArea:
    """A rectangle of cells; see values.Area for the promise."""

    __slots__ = ("bottom", "index", "left", "machine", "right", "top")

    def __init__(self, machine: Machine, index: int, top: int, left: int, bottom: int, right: int) -> None:
        self.machine, self.index = machine, index
        self.top, self.left, self.bottom, self.right = top, left, bottom, right

    @property
    def sheet(self) -> str:
        """Name of the sheet."""
        return self.machine.names[self.index]

    @property
    def shape(self) -> tuple[int, int]:
        """Rows and columns as written."""
        return (self.bottom - self.top + 1, self.right - self.left + 1)

    def value(self, row: int, column: int) -> Scalar:
        """The value at row, column of the area, counted from 1."""
        return self.machine.cell(self.index, (self.top + row - 1, self.left + column - 1))

    def values(self) -> Array:
        """The values, clipped to the used area of the sheet."""
        return self.machine.area_values(self.index, self.top, self.left, self.bottom, self.right)

    def whole(self) -> Array:
        """The values in the full shape, blanks where the sheet ends."""
        rows, columns = self.shape
        values = self.values()
        if len(values) == rows and (not values or len(values[0]) == columns):
            return values
        self.machine.check_size(rows * columns)
        width = len(values[0]) if values else 0
        padded = [row + (None,) * (columns - width) for row in values]
        return (*padded, *(((None,) * columns,) * (rows - len(padded))))

    def cells(self) -> Iterator[Scalar]:
        """The values row by row."""
        for row in self.values():
            yield from row

    def resized(self, rows: int, columns: int) -> CellArea:
        """The area of another size from the same first cell."""
        return CellArea(self.machine, self.index, self.top, self.left, self.top + rows - 1, self.left + columns - 1)

    def part(self, row: int, column: int) -> CellArea:
        """One row, one column or one cell of the area, counted from 1; 0 means all of them."""
        top, bottom = (self.top + row - 1,) * 2 if row else (self.top, self.bottom)
        left, right = (self.left + column - 1,) * 2 if column else (self.left, self.right)
        return CellArea(self.machine, self.index, top, left, bottom, right)


class Machine:
    """All cells of a book under recalculation."""

    def __init__(
        self, book: Book, resolve: Callable[[str], Callable[..., object] | None] | None, limits: Limits
    ) -> None:
        self.book, self.resolve, self.limits = book, resolve, limits
        self.names = [sheet.name for sheet in book.sheets]
        self.sheet_index = {sheet.name.casefold(): k for k, sheet in enumerate(book.sheets)}
        self.stores: list[Store] = []
        self.owners: list[dict[Position, Position]] = []  # cells of an array formula's area -> its first cell
        self.extent: list[tuple[int, int]] = []
        for sheet in book.sheets:
            self.add_sheet(sheet.values, sheet.formulas)
        self.own: Store = {}
        self.sheet, self.row, self.column = 0, 1, 1
        self.formula: Formula | None = None
        self.taint: Taint | None = None
        self.notes: set[str] = set()
        self.code: dict[object, Code] = {}
        self.whole: dict[Place, Array] = {}  # what a formula gave, where that is more than its own cell shows
        self.filled: dict[tuple[int, Position], Bounds] = {}  # first cell of an array formula -> the area it fills
        self.areas: dict[tuple[int, Bounds], tuple[Array, Taint | None]] = {}
        self.cached_cells = 0
        self.deadline = time.monotonic() + limits.seconds
        self.started = datetime.now()

    def add_sheet(self, values: dict[Position, Scalar], formulas: dict[Position, Formula]) -> None:
        """A sheet's cells: constants stand, formula cells and the areas of array formulas wait."""
        store: Store = dict(values)
        owners: dict[Position, Position] = {}
        bottom = max((position[0] for position in values), default=0)
        right = max((position[1] for position in values), default=0)
        for position, formula in formulas.items():
            store[position] = PENDING
            bottom, right = max(bottom, position[0]), max(right, position[1])
            if formula.kind == "array" and formula.area:
                top, left, last, end = formula.area
                if (last - top + 1) * (end - left + 1) > self.limits.array_cells:
                    continue
                bottom, right = max(bottom, last), max(right, end)
                for row in range(top, last + 1):
                    for column in range(left, end + 1):
                        if (row, column) not in formulas:
                            owners[row, column] = position
                            store[row, column] = PENDING
        self.stores.append(store)
        self.owners.append(owners)
        self.extent.append((bottom, right))

    # ---- states of a cell

    @staticmethod
    def is_pending(value: object) -> bool:
        """Whether a cell still waits to be computed."""
        return value is PENDING

    def settle_saved(self, index: int, position: Position, taint: Taint) -> None:
        """A cell that cannot be recalculated, and the area its array formula fills, keep their saved values."""
        store, saved = self.stores[index], self.book.sheets[index].values
        store[position] = Special(saved.get(position), taint)
        area = self.book.sheets[index].formulas[position].area
        if area is not None:
            owners, (top, left, bottom, right) = self.owners[index], area
            for filled in ((r, c) for r in range(top, bottom + 1) for c in range(left, right + 1)):
                if owners.get(filled) == position:
                    store[filled] = Special(saved.get(filled), taint)

    # ---- reading

    def cell(self, index: int, position: Position) -> Scalar:
        """The value of a cell; raises Pending where it is not computed yet."""
        value = self.stores[index].get(position)
        if value.__class__ is Special:
            return self.special(index, position, value)
        return value  # type: ignore[return-value]

    def special(self, index: int, position: Position, value: Special) -> Scalar:
        """A cell that is pending (raises Pending) or tainted (the formula takes the taint over)."""
        if value is PENDING:
            raise Pending([(index, position)])
        self.touch(index, position, value.taint)
        return value.value

    def touch(self, index: int, position: Position, taint: Taint | None) -> None:
        """The running formula depends on a tainted cell."""
        if taint is None:
            return
        if taint.status is Status.VOLATILE or taint.status is Status.NOT_VERIFIED:
            self.stain(taint)
        else:
            self.stain(Taint(Status.NOT_VERIFIED, f"depends on {self.address(index, position)}: {taint.reason}"))

    def stain(self, taint: Taint) -> None:
        """Note why the running formula's value is not a plain one; the weightier reason stays."""
        if self.taint is None or WEIGHT[taint.status] > WEIGHT[self.taint.status]:
            self.taint = taint

    def area_values(self, index: int, top: int, left: int, bottom: int, right: int) -> Array:
        """Values of a rectangle, clipped to the used area; finished ones are kept, they do not change any more."""
        last, end = self.extent[index]
        bottom, right = min(bottom, last), min(right, end)
        if bottom < top or right < left:
            return ()
        key = (index, (top, left, bottom, right))
        kept = self.areas.get(key)
        if kept is not None:
            if kept[1] is not None:
                self.stain(kept[1])
            return kept[0]
        self.check_size((bottom - top + 1) * (right - left + 1))
        rows, filled = self.read_rows(index, top, left, bottom, right)
        pending: list[Place] = []
        outer, self.taint = self.taint, None
        for r in filled:
            values = rows[r]
            for c, value in enumerate(values):
                if value.__class__ is Special:
                    if value is PENDING:
                        pending.append((index, (top + r, left + c)))
                    else:
                        values[c] = self.special(index, (top + r, left + c), value)
        taint, self.taint = self.taint, outer
        if pending:
            raise Pending(pending)
        array: Array = tuple(map(tuple, rows))
        if self.cached_cells < 5_000_000:
            self.cached_cells += len(rows) * (right - left + 1)
            self.areas[key] = (array, taint)
        if taint is not None:
            self.stain(taint)
        return array

    def read_rows(
        self, index: int, top: int, left: int, bottom: int, right: int
    ) -> tuple[list[list[Any]], Iterable[int]]:
        """What the store holds of a rectangle, and which rows hold anything; a mostly blank one is read sparsely."""
        store, width, height = self.stores[index], right - left + 1, bottom - top + 1
        if width * height < 20 * len(store) + 1000:
            get = store.get
            columns = range(left, right + 1)
            return [[get((row, column)) for column in columns] for row in range(top, bottom + 1)], range(height)
        rows: list[list[Any]] = [[None] * width] * height  # blank rows are one and the same until they hold something
        touched: set[int] = set()
        for (row, column), value in store.items():
            if top <= row <= bottom and left <= column <= right:
                r = row - top
                if r not in touched:
                    touched.add(r)
                    rows[r] = [None] * width
                rows[r][column - left] = value
        return rows, sorted(touched)

    def check_size(self, cells: int) -> None:
        """Refuse an array beyond the cap."""
        if cells > self.limits.array_cells:
            raise Unsupported(f"an array of {cells:,} cells (more than {self.limits.array_cells:,})")

    # ---- what builtins ask of their context (registry.Context)

    def area(self, sheet: str, top: int, left: int, bottom: int, right: int) -> CellArea | ErrorValue:
        """An area by sheet name; #REF! where there is no such sheet or the area leaves it."""
        index = self.sheet_index.get(sheet.casefold())
        if index is None or top < 1 or left < 1 or bottom > 1_048_576 or right > 16_384 or bottom < top or right < left:
            return REF
        return CellArea(self, index, top, left, bottom, right)

    @property
    def sheet_name(self) -> str:
        """Name of the sheet of the running formula."""
        return self.names[self.sheet]

    @property
    def date1904(self) -> bool:
        """Whether serial numbers count from 1904."""
        return self.book.date1904

    @property
    def sheet_names(self) -> tuple[str, ...]:
        """All sheets of the book, in order."""
        return tuple(sheet.name for sheet in self.book.sheets)

    def reference(self, text: str, sheet: str) -> Any:
        """The area that a text names, read as a reference typed on the given sheet; #REF! where it names none."""
        from cellsection.workbook.compile import Compiler
        from cellsection.workbook.grammar import parsed
        from cellsection.workbook.nodes import Join, Name, Reference, Structured

        language = "openformula" if self.book.format == "ods" and text.startswith("[") else "excel"
        try:
            tree = parsed(text.strip().removeprefix("="), 1, 1, language)
            if isinstance(tree, Reference) and tree.sheet is None and self.book.format == "ods":
                tree = parsed(text.strip(), 1, 1, language)
            if not isinstance(tree, (Reference, Join, Name, Structured)):
                return REF
            compiler = Compiler(self)
            compiler.sheet = self.sheet_index[sheet.casefold()]
            here = (self.row, self.column)
            self.row, self.column = 1, 1
            try:
                found = compiler.operand(tree, True)(self)
            finally:
                self.row, self.column = here
        except FormulaError:
            return REF
        area = found[0] if isinstance(found, tuple) and found else found
        return found if isinstance(area, CellArea) else REF

    def has_formula(self, sheet: str, row: int, column: int) -> bool:
        """Whether a cell holds a formula."""
        index = self.sheet_index[sheet.casefold()]
        return index < len(self.book.sheets) and (row, column) in self.book.sheets[index].formulas

    def hidden_row(self, sheet: str, row: int) -> bool:
        """Whether a row is hidden."""
        index = self.sheet_index[sheet.casefold()]
        return index < len(self.book.sheets) and row in self.book.sheets[index].hidden_rows

    def formula_call(self, sheet: str, row: int, column: int) -> str:
        """Outermost function of a cell's formula, "" where there is none."""
        index = self.sheet_index[sheet.casefold()]
        formula = self.book.sheets[index].formulas.get((row, column)) if index < len(self.book.sheets) else None
        return formula.text.partition("(")[0].strip().upper() if formula else ""

    def formula_text(self, sheet: str, row: int, column: int) -> str:
        """The formula of a cell as the engineer reads it, "" where there is none."""
        index = self.sheet_index[sheet.casefold()]
        formula = self.book.sheets[index].formulas.get((row, column)) if index < len(self.book.sheets) else None
        return shown_text(formula, (row, column)) if formula else ""

    def unsupported(self, construct: str) -> None:
        """The running formula needs what is not supported."""
        raise Unsupported(construct)

    def now(self) -> datetime:
        """When the recalculation began."""
        return self.started

    def address(self, index: int, position: Position) -> str:
        """Sheet!A1 as a report shows it."""
        return f"{self.names[index]}!{column_letters(position[1])}{position[0]}"

    def check_time(self) -> None:
        """Refuse to go on beyond the time cap."""
        if time.monotonic() > self.deadline:
            raise FormulaError(f"the recalculation took more than {self.limits.seconds:g} s", construct="time cap")
