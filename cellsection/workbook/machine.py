"""The state of a running recalculation: the cells, what is still to compute, and what taints a result.

A formula reads cells through here. A read of a cell that is not computed yet raises Pending with the cells it needs;
the driver in recalculate computes those first and starts the formula again. So only cells that are really demanded
can form a circle, and chains of any length need no recursion.
"""

from __future__ import annotations

import time
from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW, address
from cellsection.workbook.areas import CellArea
from cellsection.workbook.book import Book, Bounds, Formula, Limits, Position
from cellsection.workbook.coercion import REF
from cellsection.workbook.keys import ACROSS, DOWN, SHIFT, cell_key, keys_of, position
from cellsection.workbook.relative import shown_text
from cellsection.workbook.results import Status
from cellsection.workbook.values import Array, ErrorValue, Scalar

if TYPE_CHECKING:
    from random import Random

    from cellsection.workbook.recalculate import Driver

__all__ = [
    "PENDING",
    "SETTLING",
    "Code",
    "Machine",
    "Moment",
    "Pending",
    "Place",
    "Resolve",
    "Special",
    "Taint",
    "TimeUp",
    "Unsupported",
]

Place: TypeAlias = tuple[int, int]  # index of the sheet, key of the cell
Code: TypeAlias = Callable[[int], Any]  # a compiled formula or part of one: from the key of its cell to its value
Resolve: TypeAlias = Callable[[str], "Callable[..., object] | None"]
KEPT_FROM, KEPT_CELLS = 64, 4_000_000  # areas of at least this size are kept once read, this many cells in all


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


class TimeUp(BaseException):  # so that no function takes it for a fault of its own
    """The time allowed for a book is used up."""


@dataclass(frozen=True, slots=True)
class Taint:
    """Why a value is not a plain recalculated one."""

    status: Status
    reason: str


@dataclass(frozen=True, slots=True)
class Moment:
    """What a recalculation is told of that which changes from one to the next.

    clock : the moment to calculate for; the present where there is none
    known : what kinds of change it settles ("day", "time"), so that what depends on them is verified and not volatile
    seed : what random numbers begin from, so that they come out the same again
    """

    clock: datetime | None = None
    known: frozenset[str] = frozenset()
    seed: int | None = None


class Special:
    """Stands in the store for a cell that is pending, or whose value is tainted."""

    __slots__ = ("taint", "value")

    def __init__(self, value: Scalar = None, taint: Taint | None = None) -> None:
        self.value, self.taint = value, taint


PENDING = Special()
SETTLING = Taint(Status.VOLATILE, "is part of a circle that is being iterated")
WEIGHT = {Status.VOLATILE: 1, Status.NOT_VERIFIED: 2, Status.CYCLE: 3, Status.UNSUPPORTED: 4}
Store: TypeAlias = dict[int, Any]


class Machine:
    """All cells of a book under recalculation. It is the Context that builtins are passed, see builtins/registry.

    spills : areas that dynamic formulas are known to fill beyond what the file says, by the place of the formula
    moment : what moment to calculate for, and what chance begins from
    """

    def __init__(
        self,
        book: Book,
        resolve: Resolve | None,
        limits: Limits,
        spills: dict[Place, Bounds],
        moment: Moment | None = None,
    ) -> None:
        self.book, self.resolve, self.limits = book, resolve, limits
        moment = moment or Moment()
        self.started, self.known, self.seed = moment.clock or datetime.now(), moment.known, moment.seed
        self.names = [sheet.name for sheet in book.sheets]
        self.sheet_index = {sheet.name.casefold(): k for k, sheet in enumerate(book.sheets)}
        self.stores: list[Store] = []
        self.formulas: list[dict[int, Formula]] = []
        self.owners: list[dict[int, int]] = []  # cells of an array formula's area -> its first cell
        self.extent: list[Position] = []
        for index, sheet in enumerate(book.sheets):
            self.add_sheet(sheet.values, sheet.formulas)
            for key, formula in self.formulas[index].items():
                if area := spills.get((index, key), formula.area if formula.kind != "cell" else None):
                    self.own_area(index, key, area)
        self.sheet, self.key = 0, cell_key(1, 1)
        self.taint: Taint | None = None
        self.whole: dict[Place, Array] = {}  # what a formula gave, where that is more than its own cell shows
        self.driver: Driver | None = None  # which computes the cells
        self.supposing = False  # while it is asked what a cell would come to if others held other values
        self.remarks: dict[Place, str] = {}  # what a reader should know of one cell
        self.filled: dict[Place, Bounds] = {}  # first cell of an array formula -> the area it fills
        self.areas: dict[tuple[int, int, int, int, int], tuple[Array, Taint | None]] = {}
        self.kept_cells = 0
        self.references: dict[tuple[int, str], Code | None] = {}  # texts that INDIRECT has read
        self.deadline = time.monotonic() + limits.seconds
        self.drawing: Random | None = None  # random numbers of the running formula

    def add_sheet(self, values: dict[Position, Scalar], formulas: dict[Position, Formula]) -> int:
        """A sheet's cells: constants stand, formula cells wait. Gives its index."""
        store: Store = {(row << SHIFT) + column: value for (row, column), value in values.items()}
        if self.book.format == "ods":  # logical values are numbers there, see figures
            store.update((key, float(value)) for key, value in store.items() if value.__class__ is bool)
        waiting = {(row << SHIFT) + column: formula for (row, column), formula in formulas.items()}
        store.update(dict.fromkeys(waiting, PENDING))
        self.stores.append(store)
        self.formulas.append(waiting)
        self.owners.append({})
        self.extent.append((max(store) >> SHIFT, max(map(ACROSS.__and__, store))) if store else (0, 0))
        return len(self.stores) - 1

    def own_area(self, index: int, first: int, area: Bounds) -> None:
        """The cells an array formula fills wait for it; cells with a formula of their own do not."""
        top, left, bottom, right = area
        if (bottom - top + 1) * (right - left + 1) > self.limits.array_cells:
            return
        formulas, owners = self.formulas[index], self.owners[index]
        cells = [key for key in keys_of(area) if key not in formulas]
        owners.update(dict.fromkeys(cells, first))
        self.stores[index].update(dict.fromkeys(cells, PENDING))
        last, end = self.extent[index]
        self.extent[index] = (max(last, bottom), max(end, right))

    def settle_saved(self, index: int, key: int, taint: Taint) -> None:
        """A cell that cannot be recalculated, and the area its array formula fills, keep their saved values."""
        saved, owners = self.book.sheets[index].values, self.owners[index]
        area = self.formulas[index][key].area
        for each in (key, *(other for other in (keys_of(area) if area else ()) if owners.get(other) == key)):
            self.stores[index][each] = Special(saved.get((each >> SHIFT, each & ACROSS)), taint)

    # ---- reading

    def cell(self, index: int, key: int) -> Scalar:
        """The value of a cell; raises Pending where it is not computed yet."""
        value = self.stores[index].get(key)
        if value.__class__ is Special:
            return self.special(index, key, value)
        return value

    def special(self, index: int, key: int, value: Special) -> Scalar:
        """A cell that is pending (raises Pending) or tainted (the formula takes the taint over)."""
        if value is PENDING:
            raise Pending([(index, key)])
        self.touch(index, key, value.taint)
        return value.value

    def touch(self, index: int, key: int, taint: Taint | None) -> None:
        """The running formula depends on a tainted cell."""
        if taint is None:
            return
        if taint.status is Status.VOLATILE or taint.status is Status.NOT_VERIFIED:
            self.stain(taint)
        else:
            self.stain(Taint(Status.NOT_VERIFIED, f"depends on {self.address(index, key)}: {taint.reason}"))

    def stain(self, taint: Taint) -> None:
        """Note why the running formula's value is not a plain one; the weightier reason stays."""
        if self.taint is None or weight(taint) > weight(self.taint):
            self.taint = taint

    def area_values(self, index: int, top: int, left: int, bottom: int, right: int) -> Array:
        """Values of a rectangle, clipped to the used area; finished ones are kept, they do not change any more."""
        last, end = self.extent[index]
        bottom, right = min(bottom, last), min(right, end)
        if bottom < top or right < left:
            return ()
        cells = (bottom - top + 1) * (right - left + 1)
        if cells < KEPT_FROM:
            return self.read_area(index, top, left, bottom, right)
        key = (index, top, left, bottom, right)
        kept = self.areas.get(key)
        if kept is None:
            self.check_size(cells)
            self.check_time()
            outer, self.taint = self.taint, None
            try:
                array = self.read_area(index, top, left, bottom, right)
            finally:
                taint, self.taint = self.taint, outer
            kept = (array, taint)
            if self.kept_cells < KEPT_CELLS and taint is not SETTLING:
                self.kept_cells += cells
                self.areas[key] = kept
        if kept[1] is not None:
            self.stain(kept[1])
        return kept[0]

    def read_area(self, index: int, top: int, left: int, bottom: int, right: int) -> Array:
        """A rectangle with its special cells resolved; a mostly blank one is read by what the store holds of it."""
        store, width, height = self.stores[index], right - left + 1, bottom - top + 1
        start, stop = (top << SHIFT) + left, (bottom << SHIFT) + left + 1
        get = store.get
        if width * height > 20 * len(store) + 1000:
            lines = rows = sparse_rows(store, top, left, bottom, right)
        elif height < width:
            lines = rows = [tuple(map(get, range(first, first + width))) for first in range(start, stop, DOWN)]
        else:
            lines = [tuple(map(get, range(start + k, stop + k, DOWN))) for k in range(width)]
            rows = list(zip(*lines, strict=True))
        if any(Special in set(map(type, line)) for line in lines):
            self.resolve_special(index, top, left, rows)
        return tuple(rows)

    def resolve_special(self, index: int, top: int, left: int, rows: list[tuple[Any, ...]]) -> None:
        """Put values for the special cells of some rows; raises Pending with all that still wait."""
        pending: list[Place] = []
        for r, row in enumerate(rows):
            if Special not in set(map(type, row)):
                continue
            values = list(row)
            for c, value in enumerate(row):
                if value is PENDING:
                    pending.append((index, cell_key(top + r, left + c)))
                elif value.__class__ is Special:
                    values[c] = self.special(index, cell_key(top + r, left + c), value)
            rows[r] = tuple(values)
        if pending:
            raise Pending(pending)

    # ---- caps

    def check_size(self, cells: int) -> None:
        """Refuse an array beyond the cap."""
        if cells > self.limits.array_cells:
            raise Unsupported(f"an array of {cells:,} cells (more than {self.limits.array_cells:,})")

    def check_time(self) -> None:
        """Refuse to go on beyond the time cap."""
        if time.monotonic() > self.deadline:
            raise TimeUp

    # ---- what builtins ask of their context (registry.Context)

    @property
    def row(self) -> int:
        """Row of the running formula."""
        return self.key >> SHIFT

    @property
    def column(self) -> int:
        """Column of the running formula."""
        return self.key & ACROSS

    def area(self, sheet: str, top: int, left: int, bottom: int, right: int) -> CellArea | ErrorValue:
        """An area by sheet name; #REF! where there is no such sheet or the area leaves it."""
        index = self.sheet_index.get(sheet.casefold())
        if index is None or not (1 <= top <= bottom <= LAST_ROW and 1 <= left <= right <= LAST_COLUMN):
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
        from cellsection.workbook.compile import reference_code

        place = (self.sheet_index[sheet.casefold()], text)
        if place not in self.references:
            self.references[place] = reference_code(self, *place)
        code = self.references[place]
        found = REF if code is None else code(cell_key(1, 1))
        area = found[0] if found.__class__ is tuple and found else found
        return found if isinstance(area, CellArea) else REF

    def formula_at(self, sheet: str, row: int, column: int) -> Formula | None:
        """The formula of a cell, None where there is none."""
        return self.formulas[self.sheet_index[sheet.casefold()]].get(cell_key(row, column))

    def has_formula(self, sheet: str, row: int, column: int) -> bool:
        """Whether a cell holds a formula."""
        return self.formula_at(sheet, row, column) is not None

    def hidden_row(self, sheet: str, row: int) -> bool:
        """Whether a row is hidden."""
        index = self.sheet_index[sheet.casefold()]
        return index < len(self.book.sheets) and row in self.book.sheets[index].hidden_rows

    def formula_call(self, sheet: str, row: int, column: int) -> str:
        """Outermost function of a cell's formula, "" where there is none."""
        formula = self.formula_at(sheet, row, column)
        return formula.text.partition("(")[0].strip().upper() if formula else ""

    def formula_text(self, sheet: str, row: int, column: int) -> str:
        """The formula of a cell as the engineer reads it, "" where there is none."""
        formula = self.formula_at(sheet, row, column)
        return shown_text(formula, (row, column)) if formula else ""

    def supposed(self, given: list[tuple[CellArea, Scalar]], wanted: CellArea) -> Scalar:
        """What a cell would come to if others held other values."""
        from cellsection.workbook.whatif import supposed

        assert self.driver is not None
        places = {(area.index, cell_key(area.top, area.left)): value for area, value in given}
        return supposed(self.driver, places, (wanted.index, cell_key(wanted.top, wanted.left)))

    def unsupported(self, construct: str) -> None:
        """The running formula needs what is not supported."""
        raise Unsupported(construct)

    def now(self) -> datetime:
        """When the recalculation began, or the moment it was given."""
        return self.started

    def chance(self) -> Random:
        """Random numbers; with a seed the same ones for the same cell in every recalculation."""
        from random import Random

        if self.drawing is None:
            self.drawing = Random(None if self.seed is None else f"{self.seed} {self.address(self.sheet, self.key)}")
        return self.drawing

    def address(self, index: int, key: int) -> str:
        """Sheet!A1 as a report shows it."""
        return f"{self.names[index]}!{address(position(key))}"


def weight(taint: Taint) -> float:
    """How much a taint says: of two the heavier one stays."""
    return 1.5 if taint is SETTLING else WEIGHT[taint.status]


def sparse_rows(store: Store, top: int, left: int, bottom: int, right: int) -> list[tuple[Any, ...]]:
    """A rectangle read by what the store holds; its blank rows are one and the same object."""
    blank = (None,) * (right - left + 1)
    rows: list[tuple[Any, ...]] = [blank] * (bottom - top + 1)
    touched: dict[int, list[Any]] = {}
    for key, value in store.items():
        row, column = key >> SHIFT, key & ACROSS
        if top <= row <= bottom and left <= column <= right:
            touched.setdefault(row - top, list(blank))[column - left] = value
    for r, values in touched.items():
        rows[r] = tuple(values)
    return rows
