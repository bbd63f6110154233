"""A saved workbook recalculated: every formula computed anew from the constants, in the order the formulas demand."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from functools import partial
from pathlib import Path
from typing import Any

from cellsection.errors import FormulaError
from cellsection.workbook.book import Book, Formula, Limits, Sheet, column_letters
from cellsection.workbook.calls import given_back
from cellsection.workbook.coercion import NA, SPILL, VALUE
from cellsection.workbook.compile import Compiled, Compiler, intersected
from cellsection.workbook.machine import CellArea, Machine, Pending, Place, Special, Taint, Unsupported
from cellsection.workbook.relative import relative_key, shown_text
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = ["recalculate", "recalculated"]

Resolve = Callable[[str], "Callable[..., object] | None"]
DEPTH = 6000  # Python frames allowed while a long formula is compiled and run


def recalculate(path: str | Path, *, resolve: Resolve | None = None, limits: Limits | None = None) -> Recalculation:
    """Read a workbook and recalculate it. The file is not changed.

    resolve : gives the host's function for a name in capitals, or None; see hosts.headless
    Raises WorkbookError where the file cannot be read; whatever is wrong with a formula is told by its cell's status.
    """
    from cellsection.workbook.reader import read_book

    limits = limits or Limits()
    return recalculated(read_book(path, limits), resolve, limits)


def recalculated(book: Book, resolve: Resolve | None = None, limits: Limits | None = None) -> Recalculation:
    """Recalculate a book that is already read."""
    limits = limits or Limits()
    machine = Machine(book, resolve, limits)
    before = sys.getrecursionlimit()
    sys.setrecursionlimit(max(before, DEPTH))
    driver = Driver(machine)
    try:
        driver.run()
    finally:
        sys.setrecursionlimit(before)
    cells = [cell for index, sheet in enumerate(book.sheets) for cell in formula_cells(driver, index, sheet)]
    return Recalculation(book.path, tuple(s.name for s in book.sheets), cells, [*book.notes, *sorted(machine.notes)])


class Driver:
    """Computes every formula cell; what a formula waits for is computed first, on an explicit stack."""

    def __init__(self, machine: Machine) -> None:
        self.machine = machine
        self.compiler = Compiler(machine)
        self.by_formula: dict[Formula, Compiled] = {}
        self.by_key: dict[tuple[int, bool, str, str], Compiled] = {}
        self.open: dict[Place, None] = {}  # started and on hold, in the order they wait for one another
        self.count = 0

    def run(self) -> None:
        """Compute all formula cells."""
        for index, sheet in enumerate(self.machine.book.sheets):
            store = self.machine.stores[index]
            for position in sheet.formulas:
                if self.machine.is_pending(store.get(position)):
                    self.settle((index, position))

    def settle(self, place: Place) -> None:
        """Compute one cell and all it waits for."""
        machine, stack, waiting = self.machine, [place], self.open
        while stack:
            here = stack[-1]
            index, position = here
            if not machine.is_pending(machine.stores[index].get(position)):
                stack.pop()
                continue
            owner = machine.owners[index].get(position)
            if owner is not None:
                here = (index, owner)
            waiting[here] = None
            try:
                self.compute(here)
            except Pending as hold:
                needed = [self.owning(each) for each in hold.places]
                circle = next((each for each in needed if each in waiting), None)
                if circle is None:
                    stack.extend(needed)
                    continue
                self.close_circle(circle)
            waiting.pop(here, None)

    def owning(self, place: Place) -> Place:
        """The cell whose formula fills this one."""
        index, position = place
        return (index, self.machine.owners[index].get(position, position))

    def close_circle(self, start: Place) -> None:
        """Cells that wait for one another in a circle keep their saved values and say so."""
        order = list(self.open)
        circle = order[order.index(start) :]
        names = [self.machine.address(*place) for place in circle]
        shown = names if len(names) <= 12 else [*names[:11], f"... {len(names) - 12} more ...", names[-1]]
        reason = "circular reference " + " -> ".join([*shown, names[0]])
        if self.machine.book.iterate:
            reason += "; the book asks for iterative calculation, which is not carried out"
        for index, position in circle:
            self.machine.settle_saved(index, position, Taint(Status.CYCLE, reason))
            self.open.pop((index, position), None)

    def compute(self, place: Place) -> None:
        """Run one formula and keep what it gives."""
        machine = self.machine
        index, position = place
        machine.sheet, machine.own = index, machine.stores[index]
        machine.row, machine.column = position
        machine.taint = None
        self.count += 1
        if not self.count % 512:
            machine.check_time()
        formula = machine.book.sheets[index].formulas[position]
        try:
            compiled = self.compiled(formula, index)
            if compiled.fault is not None:
                raise Unsupported(compiled.fault.construct)
            value = compiled.run(machine)
        except Unsupported as finding:
            machine.settle_saved(index, position, Taint(Status.UNSUPPORTED, finding.construct))
            return
        except (TypeError, ValueError, AttributeError, LookupError, ArithmeticError) as fault:
            # A fault of the evaluator spoils this cell and what depends on it, not the book; it is reported.
            construct = f"this formula ({type(fault).__name__}: {fault})"
            machine.settle_saved(index, position, Taint(Status.UNSUPPORTED, construct))
            return
        except RecursionError:
            machine.settle_saved(index, position, Taint(Status.UNSUPPORTED, "formula nested too deeply"))
            return
        taint = machine.taint
        if taint is not None and taint.status is not Status.VOLATILE:
            machine.settle_saved(index, position, taint)
            return
        if (
            isinstance(value, tuple)
            and value
            and not isinstance(value[0], CellArea)
            and (len(value) > 1 or len(value[0]) > 1)
        ):
            machine.whole[place] = value
        if formula.kind == "array":
            self.fill(place, formula, value, taint)
            return
        if formula.dynamic and isinstance(value, (tuple, CellArea)):
            self.fill(place, formula, value, taint)
            return
        single = given_back(intersected(machine, value))
        if single is None:
            single = 0.0
        if not isinstance(single, (float, str, bool, ErrorValue)):
            single = ErrorValue("#CALC!", "the formula gives a function, not a value")
        if isinstance(single, ErrorValue):
            single = self.signed(single, place)
        machine.own[position] = Special(single, taint) if taint is not None else single

    def signed(self, error: ErrorValue, place: Place) -> ErrorValue:
        """An error with the cell where it arises, which its dependants pass on."""
        return error if error.origin else ErrorValue(error.code, error.message, self.machine.address(*place))

    def fill(self, place: Place, formula: Formula, value: Any, taint: Taint | None) -> None:
        """Spread an array formula's result over its area: one value fills it, what is missing is #N/A."""
        machine, (index, (row, column)) = self.machine, place
        array: Array = (
            value.whole() if isinstance(value, CellArea) else value if isinstance(value, tuple) else ((value,),)
        )
        if array and isinstance(array[0], CellArea):
            array = ((VALUE,),)
        rows, columns = len(array), len(array[0]) if array else 0
        area = formula.area or (row, column, row, column)
        if formula.dynamic:
            area = (row, column, row + rows - 1, column + columns - 1)
        store, owners = machine.stores[index], machine.owners[index]
        places = ((r, c) for r in range(area[0], area[2] + 1) for c in range(area[1], area[3] + 1))
        if formula.dynamic and any(p in store and owners.get(p, p) != (row, column) for p in places):
            array, rows, columns, area = ((SPILL,),), 1, 1, (row, column, row, column)
        for r in range(area[0], area[2] + 1):
            for c in range(area[1], area[3] + 1):
                i, j = (0 if rows == 1 else r - row), (0 if columns == 1 else c - column)
                single: Scalar = array[i][j] if i < rows and j < columns else NA
                single = 0.0 if single is None else given_back(single)
                if isinstance(single, ErrorValue):
                    single = self.signed(single, place)
                if (r, c) != (row, column) and owners.get((r, c)) != (row, column):
                    if formula.dynamic and (r, c) not in store:
                        owners[r, c] = (row, column)
                    else:
                        continue
                store[r, c] = Special(single, taint) if taint is not None else single
        top, left, bottom, right = formula.area or area
        for r in range(top, bottom + 1):  # a result that has shrunk leaves the rest of its saved area blank
            for c in range(left, right + 1):
                if owners.get((r, c)) == (row, column) and machine.is_pending(store.get((r, c))):
                    store.pop((r, c))
        machine.filled[index, (row, column)] = area
        last, end = machine.extent[index]
        machine.extent[index] = (max(last, area[2]), max(end, area[3]))

    def compiled(self, formula: Formula, index: int) -> Compiled:
        """The compiled form of a formula: one for all that read alike relative to their cell."""
        known = self.by_formula.get(formula)
        if known is None:
            known = self.by_formula[formula] = self.by_form(formula, index)
        return known

    def by_form(self, formula: Formula, index: int) -> Compiled:
        """As compiled, found by the formula's relative form, or compiled now."""
        limit = self.machine.limits.formula_length
        if formula.kind == "data table":
            return Compiled(fault=FormulaError("data tables are not supported", construct="data table"))
        if formula.kind == "missing" and formula.text:
            language = formula.text.partition(":=")[0]
            return Compiled(
                fault=FormulaError(
                    f"it is written in the language {language}", construct=f"formula language {language}"
                )
            )
        if formula.kind == "missing":
            return Compiled(
                fault=FormulaError("its shared formula is missing", construct="shared formula without master")
            )
        if len(formula.text) > limit:
            fault = FormulaError(f"it has more than {limit:,} characters", construct="overlong formula")
            return Compiled(fault=fault)
        spread = formula.kind == "array" or formula.dynamic
        form = relative_key(formula.text, formula.row, formula.column, formula.language)
        key = (index, spread, formula.language, form)
        known = self.by_key.get(key)
        if known is None:
            try:
                known = self.compiler.whole(formula, index)
            except FormulaError as problem:
                known = Compiled(fault=problem)
            except RecursionError:
                known = Compiled(fault=FormulaError("it nests too deeply", construct="deep nesting"))
            self.by_key[key] = known
        return known


def formula_cells(driver: Driver, index: int, sheet: Sheet) -> Iterator[FormulaCell]:
    """The formula cells of a sheet, row by row, the areas of array formulas included."""
    store, owners = driver.machine.stores[index], driver.machine.owners[index]
    for position in sorted({*sheet.formulas, *owners}):
        owner = owners.get(position, position)
        formula = sheet.formulas[owner]
        found = store.get(position)
        status, reason, value = Status.RECALCULATED, "", found
        if isinstance(found, Special):
            value = found.value
            if found.taint is not None:
                status, reason = found.taint.status, found.taint.reason
        yield FormulaCell(
            sheet.name,
            f"{column_letters(position[1])}{position[0]}",
            sheet.values.get(position),
            value,  # type: ignore[arg-type]
            status,
            call=driver.compiled(formula, index).call,
            reason=reason,
            has_saved=position in sheet.values,
            text=partial(shown_text, formula, owner),
            whole=driver.machine.whole.get((index, position)),
        )
