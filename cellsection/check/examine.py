"""From a recalculated book to its report: cells compared, echoes folded into causes, acceptance checks read."""

from __future__ import annotations

import re
from collections import defaultdict
from dataclasses import replace
from typing import TYPE_CHECKING

from cellsection.check.compare import Tolerance, agree, kind
from cellsection.check.findings import (
    Cycle,
    Difference,
    Error,
    Finding,
    Note,
    NotVerified,
    Report,
    Spot,
    Tally,
    UnmetCheck,
    Unsaved,
    Unsupported,
)
from cellsection.check.places import split_address
from cellsection.errors import WorkbookError
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from datetime import datetime
    from pathlib import Path
    from typing import Literal

    from cellsection.check.findings import Cells
    from cellsection.workbook.book import Limits
    from cellsection.workbook.results import FormulaCell, Recalculation
    from cellsection.workbook.values import Scalar

__all__ = ["NO_FAULTS", "check_book", "examine"]

FAULTS_TOLD = 3
OTHER_BOOK = "reads saved values of another book"  # how the evaluator's note on such a cell opens
CODE_AS_TEXT = "an error is saved as the text of its code"
NO_FAULTS = "no faults"  # what CS_FAULTS says of a sound parts block
FUNCTION_IN_FRONT = re.compile(r"CS_\w+[:,] *")
SECTION_FUNCTION = re.compile(r"\bCS[_.]\w+ *\(", re.IGNORECASE)
STANDARD = Tolerance()


def check_book(
    path: str | Path,
    *,
    relative: float = STANDARD.relative,
    absolute: float = STANDARD.absolute,
    limits: Limits | None = None,
    clock: datetime | Literal["saved"] | None = None,
    seed: int | None = None,
) -> Report:
    """Recalculate a saved workbook and compare every formula cell with the value the file holds; it is not changed.

    path : an .xlsx, .xlsm or .ods file
    relative, absolute : the tolerance for numbers, see `Tolerance`; both zero or more
    limits : how much a book may ask for before it is refused
    clock : the moment that TODAY and NOW give, "saved" for the one at which the book was saved, where it says so; else
        the present
    seed : makes random numbers come out the same again

    A file that cannot be read is a report too: its verdict is UNREADABLE, `unreadable` says why and what to do.
    """
    from cellsection.hosts.headless import recalculate  # the evaluator loads when there is a book to evaluate

    tolerance = Tolerance(relative, absolute)
    try:
        try:
            report = examine(recalculate(path, limits=limits, clock=clock, seed=seed), tolerance)
        except WorkbookError as undated:
            if clock != "saved":
                raise
            report = examine(recalculate(path, limits=limits, seed=seed), tolerance)  # raises where that was not it
            note = Note(f"{undated.fault}, so that what depends on the day is compared by kind only")
            report = replace(report, notes=(note, *report.notes))
    except WorkbookError as unreadable:
        report = Report(str(path), tolerance, unreadable=str(unreadable))
    except OSError as failure:
        reason = f"{path} cannot be opened: {failure.strerror or failure}"
        remedy = "Look at its name, and whether you may read it"
        report = Report(str(path), tolerance, unreadable=f"{reason}. {remedy}.")
    return replace(report, clock=clock, seed=seed)


def examine(book: Recalculation, tolerance: Tolerance = STANDARD) -> Report:
    """The report on a recalculated book."""
    examination = _Examination(tolerance)
    apart = book.apart()
    alike = len(book.cells) - len(apart)  # nearly all of a sound book
    for cell in apart:
        examination.take(cell)
    examination.tally.cells += alike
    examination.tally.hold += alike
    return Report(
        path=str(book.path),
        tolerance=tolerance,
        sheets=tuple(book.sheets),
        tally=examination.tally,
        findings=tuple(examination.findings(book)),
        notes=(*map(Note, book.notes), *examination.cell_notes()),
    )


class _Examination:
    """The cells of one book on their way to findings, sorted as they come."""

    def __init__(self, tolerance: Tolerance) -> None:
        self.tolerance = tolerance
        self.tally = Tally()
        self.unmet: list[UnmetCheck] = []
        self.differences: list[Difference] = []
        self.unsaved: list[tuple[str, str]] = []
        # The cells that show an error, by the cell where it arises; and whether each holds what the file holds.
        self.errors: dict[tuple[str, str], list[tuple[FormulaCell, bool]]] = defaultdict(list)
        self.unverified: dict[Status, dict[str, list[FormulaCell]]] = {
            Status.UNSUPPORTED: defaultdict(list),
            Status.CYCLE: defaultdict(list),
            Status.NOT_VERIFIED: defaultdict(list),
        }
        self.notes: dict[str, list[tuple[str, str]]] = defaultdict(list)
        self.faults_seen: set[tuple[str, str]] = set()

    def take(self, cell: FormulaCell) -> None:
        """Count one formula cell and sort it to what will be said of it."""
        self.tally.cells += 1
        if cell.notes:
            for note in cell.notes:
                self.notes[note].append((cell.sheet, cell.address))
            self.tally.external += any(note.startswith(OTHER_BOOK) for note in cell.notes)
        if cell.status in self.unverified:
            self.tally.not_verified += 1
            self.unverified[cell.status][cell.reason].append(cell)
            return
        holds = self._compare(cell)
        if self._is_check(cell):
            self._judge(cell)
            if not _meets(cell):
                return
        volatile = cell.status is Status.VOLATILE
        if isinstance(cell.value, ErrorValue) and (holds or not volatile):
            self.errors[_origin(cell)].append((cell, holds))
        elif cell.has_saved and not holds:
            self.differences.append(Difference(_spot(cell), cell.saved, cell.value, volatile))

    def _compare(self, cell: FormulaCell) -> bool:
        """Whether the cell holds what the file holds; counted."""
        if not cell.has_saved:
            self.tally.unsaved += 1
            self.unsaved.append((cell.sheet, cell.address))
            return True  # nothing to contradict
        if _other_edition(cell):
            # The numbers are verified by this edition all the same; a newer one must not spoil every book there is.
            self.notes[f'saved with "{cell.saved}", checked with "{cell.value}"'].append((cell.sheet, cell.address))
            holds = True
            self.tally.hold += 1
        elif cell.status is Status.VOLATILE:
            holds = _one_kind(cell.saved, cell.value)
            self.tally.volatile += holds
            self.tally.not_verified += not holds
            return holds
        else:
            holds = agree(cell.saved, cell.value, self.tolerance)
            if isinstance(cell.value, ErrorValue) and cell.saved == cell.value.code:
                self.notes[CODE_AS_TEXT].append((cell.sheet, cell.address))
            self.tally.hold += holds
        self.tally.differ += not holds
        return holds

    # Acceptance checks

    def _is_check(self, cell: FormulaCell) -> bool:
        """Whether the cell is an acceptance check. An array of CS_FAULTS is one check, read at its first cell."""
        call = cell.call.upper()
        if call == "CS_FAULTS":
            formula = cell.sheet, cell.formula
            first = formula not in self.faults_seen
            self.faults_seen.add(formula)
            return first
        return call == "CS_AGREES"

    def _judge(self, cell: FormulaCell) -> None:
        self.tally.checks += 1
        self.tally.checks_met += _meets(cell)
        if not _meets(cell):
            saved = cell.saved if cell.has_saved else None
            cause = _cause(cell.value) if isinstance(cell.value, ErrorValue) else _faults(cell)
            self.unmet.append(UnmetCheck(_spot(cell), _expected(cell), saved, cell.value, cause))

    # Findings

    def findings(self, book: Recalculation) -> list[Finding]:
        """All findings: what does not hold first, then what could not be verified."""
        return [
            *self.unmet,
            *self.differences,
            *self._error_findings(book),
            *self._unverified_findings(),
            *([Unsaved(tuple(self.unsaved))] if self.unsaved else []),
        ]

    def _error_findings(self, book: Recalculation) -> list[Finding]:
        if not self.errors:
            return []
        formulas = {key: cell for cell in book.apart() if (key := (cell.sheet, cell.address)) in self.errors}
        by_cause: dict[tuple[str, object], list[tuple[str, str]]] = defaultdict(list)
        for origin, met in self.errors.items():
            value = met[0][0].value
            assert isinstance(value, ErrorValue)
            # The same words from several functions of the same parts are one cause; without words each cell is its own.
            by_cause[value.code, _bare(value.message) or origin].append(origin)
        return [self._error(code, origins, formulas) for (code, _), origins in by_cause.items()]

    def _error(self, code: str, origins: list[tuple[str, str]], formulas: dict[tuple[str, str], FormulaCell]) -> Error:
        met = [each for origin in origins for each in self.errors[origin]]
        value, source = met[0][0].value, formulas.get(origins[0])
        assert isinstance(value, ErrorValue)
        spot, arising = _spot(source) if source else Spot(*origins[0]), set(origins)
        return Error(
            spot=spot,
            code=code,
            cause=_bare(value.message) if len(origins) > 1 else value.message,
            saved=source.saved if source and source.has_saved else None,
            cells=tuple(origins),
            echoes=tuple(key for cell, _ in met if (key := (cell.sheet, cell.address)) not in arising),
            saved_alike=all(holds for _, holds in met),
            refused=bool(value.message and code == "#VALUE!" and SECTION_FUNCTION.search(spot.formula)),
        )

    def _unverified_findings(self) -> list[Finding]:
        cause_of: dict[tuple[str, str], tuple[Status, str]] = {}
        for status in (Status.UNSUPPORTED, Status.CYCLE):
            for reason, cells in self.unverified[status].items():
                cause_of.update({(cell.sheet, cell.address): (status, reason) for cell in cells})
        dependants: dict[tuple[Status, str], list[FormulaCell]] = defaultdict(list)
        for reason, cells in self.unverified[Status.NOT_VERIFIED].items():
            named = reason.removeprefix("depends on ").partition(": ")[0]  # no sheet name has a colon in it
            cause = cause_of.get(split_address(named), (Status.NOT_VERIFIED, reason))
            dependants[cause] += cells
        found: list[Finding] = []
        for reason, cells in self.unverified[Status.UNSUPPORTED].items():
            after = _cells(dependants.pop((Status.UNSUPPORTED, reason), []))
            found.append(Unsupported(reason, _spot(cells[0]), _cells(cells), after))
        for reason, cells in self.unverified[Status.CYCLE].items():
            circle = reason.removeprefix("circular reference ")
            found.append(Cycle(circle, _cells(cells), _cells(dependants.pop((Status.CYCLE, reason), []))))
        found += [NotVerified(reason, _cells(cells)) for (_, reason), cells in dependants.items()]
        return found

    def cell_notes(self) -> list[Note]:
        """The notes of the cells, each text once."""
        return [Note(text, tuple(cells)) for text, cells in self.notes.items()]


def _faults(cell: FormulaCell) -> str:
    """What CS_FAULTS found, though its cell shows a part's name only: a sentence a fault, the first few."""
    if cell.call.upper() != "CS_FAULTS" or cell.whole is None:
        return ""
    rows = [tuple("" if each is None else str(each) for each in row) for row in cell.whole]
    told = [f"{row[0]} {row[1]}: {row[2]}. {row[3]}." for row in rows[:FAULTS_TOLD] if len(row) == 4]
    more = f" And {len(rows) - FAULTS_TOLD} more." if len(rows) > FAULTS_TOLD else ""
    return " ".join(told) + more


def _other_edition(cell: FormulaCell) -> bool:
    """Whether the cell prints the edition of the functions, and was saved with another one."""
    texts = isinstance(cell.saved, str) and isinstance(cell.value, str)
    return cell.call.upper() == "CS_EDITION" and texts and cell.saved != cell.value


def _one_kind(saved: Scalar, value: Scalar) -> bool:
    """Whether two values are of one kind, which is all that can be asked of a volatile cell."""
    blank = (None, "")
    return kind(saved) == kind(value) or (saved in blank and value in blank)


def _expected(cell: FormulaCell) -> Scalar:
    return NO_FAULTS if cell.call.upper() == "CS_FAULTS" else True


def _meets(cell: FormulaCell) -> bool:
    return cell.value == _expected(cell) and kind(cell.value) == kind(_expected(cell))


def _origin(cell: FormulaCell) -> tuple[str, str]:
    """Sheet and cell where the error in a cell arises: the cell itself where nothing else is known."""
    assert isinstance(cell.value, ErrorValue)
    if not cell.value.origin:
        return cell.sheet, cell.address
    sheet, address = split_address(cell.value.origin)
    return sheet or cell.sheet, address


def _bare(message: str) -> str:
    """What a section function said, without its name in front."""
    return FUNCTION_IN_FRONT.sub("", message)


def _cause(error: ErrorValue) -> str:
    return _bare(error.message) or (f"{error.code} from {error.origin}" if error.origin else error.code)


def _spot(cell: FormulaCell) -> Spot:
    return Spot(cell.sheet, cell.address, cell.formula)


def _cells(cells: list[FormulaCell]) -> Cells:
    return tuple((cell.sheet, cell.address) for cell in cells)
