"""A saved workbook recalculated: every formula computed anew from the constants, in the order the formulas demand."""

from __future__ import annotations

import gc
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager
from datetime import datetime
from pathlib import Path
from typing import Any, Literal

from cellsection.errors import FormulaError
from cellsection.workbook.areas import CellArea, intersected, is_union
from cellsection.workbook.book import Book, Bounds, Formula, Limits
from cellsection.workbook.calls import given_back
from cellsection.workbook.circles import Circles
from cellsection.workbook.coercion import CALC
from cellsection.workbook.compile import Compiled, Compiler
from cellsection.workbook.filling import fill, signed
from cellsection.workbook.machine import (
    PENDING,
    SETTLING,
    Code,
    Machine,
    Moment,
    Pending,
    Place,
    Resolve,
    Special,
    Taint,
    TimeUp,
    Unsupported,
)
from cellsection.workbook.operators import LARGEST
from cellsection.workbook.outcome import FormulaCells
from cellsection.workbook.relative import Key, relative_key
from cellsection.workbook.results import Recalculation, Status
from cellsection.workbook.timelimit import time_limit
from cellsection.workbook.values import ErrorValue
from cellsection.workbook.whatif import data_table

__all__ = ["recalculate", "recalculated"]

DEPTH = 6000  # Python frames allowed while a long formula is compiled and run
PLAIN = frozenset((float, str, bool))  # classes of values that are kept as they are
FILLING = ("array", "data table")  # kinds of formula that fill an area
ROUNDS = 5  # times a book is begun again because a formula fills more cells than the file says


def recalculate(
    path: str | Path,
    *,
    resolve: Resolve | None = None,
    limits: Limits | None = None,
    clock: datetime | Literal["saved"] | None = None,
    seed: int | None = None,
) -> Recalculation:
    """Read a workbook and recalculate it. The file is not changed.

    resolve : gives the host's function for a name in capitals, or None; see hosts.headless
    clock : the moment that TODAY and NOW give; what depends on them is then verified like anything else. "saved" takes
        the moment at which the book says it was last saved, of which only the day is sure: times stay volatile.
        Without one it is the present, and both are volatile.
    seed : makes random numbers come out the same in every recalculation; they stay volatile, as the file does not say
        what its own numbers began from
    Raises WorkbookError where the file cannot be read, or does not say when it was saved though that is asked for;
    whatever is wrong with a formula is told by its cell's status.
    """
    from cellsection.workbook.reader import read_book, saved_moment

    limits = limits or Limits()
    if clock == "saved":
        moment = Moment(saved_moment(path, limits), frozenset(["day"]), seed)
    else:
        moment = Moment(clock, frozenset(["day", "time"] if clock else []), seed)
    return recalculated(read_book(path, limits), resolve, limits, moment)


def recalculated(
    book: Book,
    resolve: Resolve | None = None,
    limits: Limits | None = None,
    moment: Moment | None = None,
) -> Recalculation:
    """Recalculate a book that is already read; see recalculate."""
    limits = limits or Limits()
    spills: dict[Place, Bounds] = {}
    deadline = time.monotonic() + limits.seconds
    with deep_stack(), uncollected(), largest(limits.array_cells):
        for _ in range(ROUNDS):
            driver = Driver(Machine(book, resolve, limits, spills, moment))
            driver.machine.deadline = deadline
            driver.run()
            if not driver.grown:
                break
            spills |= driver.grown  # cells there may have been read as blank before: begin again, knowing better
    return Recalculation(book.path, tuple(sheet.name for sheet in book.sheets), FormulaCells(driver), list(book.notes))


@contextmanager
def deep_stack() -> Iterator[None]:
    """Room for formulas that nest deeply; beyond it they are a finding."""
    before = sys.getrecursionlimit()
    sys.setrecursionlimit(max(before, DEPTH))
    try:
        yield
    finally:
        sys.setrecursionlimit(before)


@contextmanager
def largest(cells: int) -> Iterator[None]:
    """The operators' own cap on the size of an array."""
    before = LARGEST.set(cells)
    try:
        yield
    finally:
        LARGEST.reset(before)


@contextmanager
def uncollected() -> Iterator[None]:
    """Without the search for circular garbage, of which a book makes none while its cells are read and computed."""
    running = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if running:
            gc.enable()


class Driver:
    """Computes every formula cell; what a formula waits for is computed first, on an explicit stack."""

    def __init__(self, machine: Machine) -> None:
        self.machine = machine
        machine.driver = self
        self.compiler = Compiler(machine)
        self.by_formula: list[dict[Formula, Compiled]] = [{} for _ in machine.book.sheets]
        self.by_key: dict[tuple[int, bool, str], dict[Key, Compiled]] = {}
        self.circles = Circles(self)
        self.open: dict[Place, None] = {}  # started and on hold, in the order they wait for one another
        self.grown: dict[Place, Bounds] = {}  # areas that turned out larger than the file says
        self.count = 0

    def run(self) -> None:
        """Compute all formula cells."""
        try:
            with time_limit(self.machine.deadline):
                self.compute_all()
        except TimeUp:
            self.give_up()

    def compute_all(self) -> None:
        """Compute the formula cells sheet by sheet, each with what it waits for."""
        machine = self.machine
        for index in range(len(machine.book.sheets)):
            store, known = machine.stores[index], self.by_formula[index].get
            for number, (key, formula) in enumerate(machine.formulas[index].items()):
                if not number % 256:
                    machine.check_time()
                if store[key] is not PENDING:
                    continue
                form = known(formula)
                try:
                    if form is not None and formula.kind == "cell":  # the most common case without detours
                        machine.sheet, machine.key, machine.taint, machine.drawing = index, key, None, None
                        value = form.run(key)
                        if value.__class__ in PLAIN and machine.taint is None:
                            store[key] = value
                        else:
                            self.take(index, key, formula, value)
                    else:
                        self.compute(index, key, formula)
                except Pending as hold:
                    self.settle((index, key), hold)
                except Exception:  # computed again on the careful way, which says what is wrong
                    self.compute_or_settle(index, key, formula)

    def compute_or_settle(self, index: int, key: int, formula: Formula) -> None:
        """Compute one cell, with what it waits for."""
        try:
            self.compute(index, key, formula)
        except Pending as hold:
            self.settle((index, key), hold)

    def settle(self, place: Place, hold: Pending) -> None:
        """Compute all that one cell waits for, and the cell itself."""
        machine, waiting = self.machine, self.open
        waiting[place] = None
        stack = [place, *map(self.owning, hold.places)]
        while stack:
            here = stack[-1]
            index, key = here
            if machine.stores[index].get(key) is not PENDING and here not in self.circles.heads:
                stack.pop()
                waiting.pop(here, None)
                continue
            waiting[here] = None
            try:
                self.compute(index, key, machine.formulas[index][key])
                if here in self.circles.heads:
                    self.circles.computed(here)
            except Pending as again:
                needed = [self.owning(each) for each in again.places]
                circle = next((each for each in needed if each in waiting), None)
                if circle is None:
                    stack.extend(needed)
                else:
                    self.circles.close(circle)

    def owning(self, place: Place) -> Place:
        """The cell whose formula fills this one."""
        index, key = place
        return (index, self.machine.owners[index].get(key, key))

    def give_up(self) -> None:
        """The time is up: what is not computed keeps its saved value and says so."""
        machine = self.machine
        reason = f"not reached within the time limit of {machine.limits.seconds:g} s"
        for index, key in (*self.circles.heads, *self.circles.members):
            machine.settle_saved(index, key, Taint(Status.NOT_VERIFIED, reason))
        for index, formulas in enumerate(machine.formulas):
            waiting = [key for key in formulas if machine.stores[index][key] is PENDING]
            filled = machine.owners[index].items()  # an area may be filled in part
            waiting += [owner for each, owner in filled if machine.stores[index].get(each) is PENDING]
            for key in waiting:
                machine.settle_saved(index, key, Taint(Status.NOT_VERIFIED, reason))

    def compute(self, index: int, key: int, formula: Formula) -> None:
        """Run one formula and keep what it gives. Raises Pending where it needs cells not computed yet."""
        machine = self.machine
        machine.sheet, machine.key, machine.taint, machine.drawing = index, key, None, None
        self.count += 1
        if not self.count % 256:
            machine.check_time()
        try:
            compiled = self.by_formula[index].get(formula) or self.compiled(formula, index)
            value = compiled.run(key)
            if value.__class__ is float and machine.taint is None and formula.kind == "cell":
                machine.stores[index][key] = value
            else:
                self.take(index, key, formula, value)
        except Unsupported as finding:
            machine.settle_saved(index, key, Taint(Status.UNSUPPORTED, finding.construct))
        except RecursionError:
            machine.settle_saved(index, key, Taint(Status.UNSUPPORTED, "formula nested too deeply"))
        except MemoryError:
            machine.settle_saved(index, key, Taint(Status.UNSUPPORTED, "formula that needs more memory than there is"))
        except Pending:
            raise
        except Exception as fault:
            # A fault of this program spoils its own cell and what depends on it, not the whole book; it is reported.
            what = f"this formula, at which the program fails ({type(fault).__name__}: {fault})"
            machine.settle_saved(index, key, Taint(Status.UNSUPPORTED, what))

    def take(self, index: int, key: int, formula: Formula, value: Any) -> None:
        """Put away what a formula gives, where that is more than a plain number."""
        machine, taint = self.machine, self.machine.taint
        if taint is SETTLING:
            self.circles.members[index, key] = None
        if taint is not None and taint.status is not Status.VOLATILE:
            machine.settle_saved(index, key, taint)
            return
        if value.__class__ is tuple and not is_union(value) and (len(value) > 1 or len(value[0]) > 1):
            machine.whole[index, key] = value
        if formula.kind in FILLING or (formula.dynamic and value.__class__ in (tuple, CellArea)):
            grown = fill(machine, (index, key), formula, value, taint)
            if grown is not None:
                self.grown[index, key] = grown
        else:
            self.keep(index, key, value)

    def keep(self, index: int, key: int, value: object) -> None:
        """Keep the value of an ordinary cell; a blank reads as 0."""
        machine = self.machine
        single = given_back(intersected(key, value))
        if single is None:
            single = 0.0
        elif isinstance(single, ErrorValue):
            single = signed(machine, single, (index, key))
        elif not isinstance(single, (float, str, bool)):
            single = signed(machine, CALC, (index, key))
        machine.stores[index][key] = single if machine.taint is None else Special(single, machine.taint)

    def compiled(self, formula: Formula, index: int) -> Compiled:
        """The compiled form of a formula: one for all that read alike relative to their cell."""
        try:
            known = self.by_form(formula, index)
        except FormulaError as problem:
            known = Compiled(fault=problem)
        if known.fault is not None:
            known.run = faulty(known.fault)
        self.by_formula[index][formula] = known
        return known

    def by_form(self, formula: Formula, index: int) -> Compiled:
        """As compiled, found by the formula's relative form, or compiled now. Raises FormulaError."""
        limit = self.machine.limits.formula_length
        if formula.kind == "data table":
            return Compiled(run=data_table(self, index, formula))
        if formula.kind == "missing" and formula.text:
            language = formula.text.partition(":=")[0]
            raise FormulaError(f"it is written in the language {language}", construct=f"formula language {language}")
        if formula.kind == "missing":
            raise FormulaError("its shared formula is missing", construct="shared formula without master")
        if len(formula.text) > limit:
            raise FormulaError(f"it has more than {limit:,} characters", construct="overlong formula")
        spread = formula.kind == "array" or formula.dynamic
        key = formula.key or relative_key(formula.text, formula.row, formula.column, formula.language)
        forms = self.by_key.setdefault((index, spread, formula.language), {})
        known = forms.get(key)
        if known is None:
            try:
                known = self.compiler.whole(formula, index)
            except FormulaError as problem:
                known = Compiled(fault=problem)
            except RecursionError:
                known = Compiled(fault=FormulaError("it nests too deeply", construct="deep nesting"))
            forms[key] = known
        return known


def faulty(fault: FormulaError) -> Code:
    """Code for a formula that could not be compiled."""

    def run(k: int) -> object:
        raise Unsupported(fault.construct)

    return run
