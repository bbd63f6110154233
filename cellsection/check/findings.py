"""What a check can find in a book, each kind with its own facts and its weight for the verdict.

A finding says where it is, what the file holds, what was recalculated, and why; nothing about how that is printed.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import Enum
from typing import TYPE_CHECKING, ClassVar, Literal, TypeAlias

from cellsection.check.places import address

if TYPE_CHECKING:
    from collections.abc import Iterable
    from datetime import datetime

    from cellsection.check.compare import Tolerance
    from cellsection.workbook.values import Scalar

__all__ = [
    "Cycle",
    "Difference",
    "Error",
    "Finding",
    "NotVerified",
    "Note",
    "Report",
    "Spot",
    "Tally",
    "UnmetCheck",
    "Unsaved",
    "Unsupported",
    "Verdict",
    "worst",
]

Cells: TypeAlias = tuple[tuple[str, str], ...]  # (sheet, cell) each, in the order of the book


class Verdict(Enum):
    """What a check comes to; the value is the exit code of the command line."""

    HOLDS = 0
    DOES_NOT_HOLD = 1
    NOT_VERIFIABLE = 2
    UNREADABLE = 3

    @property
    def words(self) -> str:
        """The verdict as a report says it."""
        return {0: "holds", 1: "does not hold", 2: "not verifiable in part", 3: "unreadable"}[self.value]


SEVERITY = (Verdict.HOLDS, Verdict.NOT_VERIFIABLE, Verdict.DOES_NOT_HOLD, Verdict.UNREADABLE)


def worst(verdicts: Iterable[Verdict]) -> Verdict:
    """The verdict that counts for many: unreadable before does not hold before not verifiable before holds.

    >>> worst([Verdict.HOLDS, Verdict.DOES_NOT_HOLD, Verdict.NOT_VERIFIABLE]).words
    'does not hold'
    """
    return max(verdicts, key=SEVERITY.index, default=Verdict.HOLDS)


@dataclass(frozen=True, slots=True)
class Spot:
    """A cell and its formula; the formula is empty where the cell holds a constant."""

    sheet: str
    cell: str
    formula: str = ""

    @property
    def key(self) -> tuple[str, str]:
        """Sheet and cell."""
        return self.sheet, self.cell

    def __str__(self) -> str:
        return address(self.sheet, self.cell)


@dataclass(frozen=True, slots=True)
class Difference:
    """A cell whose recalculated value is not the saved one.

    volatile : it depends on the clock, a random number or the machine; it was compared by kind, and even that differs
    """

    kind: ClassVar[str] = "difference"
    spot: Spot
    saved: Scalar
    recalculated: Scalar
    volatile: bool = False

    @property
    def verdict(self) -> Verdict:
        """A difference counts; but a volatile cell may have been right when it was saved."""
        return Verdict.NOT_VERIFIABLE if self.volatile else Verdict.DOES_NOT_HOLD


@dataclass(frozen=True, slots=True)
class Error:
    """An error value, told once a cause; `echoes` are the cells that only pass it on.

    spot : the first cell where it arises
    cells : all cells where it arises, for the one cause
    saved_alike : the saved file shows the same error in every one of these cells, so that the book is consistent
    refused : a section function refused its input there; that counts though the file was saved so
    saved : what the file holds in the first of these cells, None where it stores nothing
    """

    kind: ClassVar[str] = "error"
    spot: Spot
    code: str
    cause: str
    saved: Scalar
    cells: Cells
    echoes: Cells
    saved_alike: bool
    refused: bool

    @property
    def verdict(self) -> Verdict:
        """An error that was saved as such is told but does not count, unless a section function refused its input."""
        return Verdict.HOLDS if self.saved_alike and not self.refused else Verdict.DOES_NOT_HOLD


@dataclass(frozen=True, slots=True)
class UnmetCheck:
    """An acceptance check of the sheet (CS_AGREES, CS_FAULTS) that is not met by the recalculated value."""

    kind: ClassVar[str] = "acceptance check not met"
    spot: Spot
    expected: Scalar
    saved: Scalar
    recalculated: Scalar
    cause: str = ""

    @property
    def verdict(self) -> Verdict:
        """An unmet check always counts, also where the file was saved so."""
        return Verdict.DOES_NOT_HOLD


@dataclass(frozen=True, slots=True)
class Unsupported:
    """A function or construct that is not supported, the cells that use it and the cells that depend on those."""

    kind: ClassVar[str] = "not supported"
    construct: str
    example: Spot
    cells: Cells
    dependants: Cells

    @property
    def verdict(self) -> Verdict:
        """Part of the book is not verified."""
        return Verdict.NOT_VERIFIABLE


@dataclass(frozen=True, slots=True)
class Cycle:
    """A circular reference, named cell by cell, and the cells that depend on it."""

    kind: ClassVar[str] = "circular reference"
    circle: str
    cells: Cells
    dependants: Cells

    @property
    def verdict(self) -> Verdict:
        """Part of the book is not verified."""
        return Verdict.NOT_VERIFIABLE


@dataclass(frozen=True, slots=True)
class NotVerified:
    """Cells that could not be verified for a reason that is none of the other findings."""

    kind: ClassVar[str] = "not verified"
    reason: str
    cells: Cells

    @property
    def verdict(self) -> Verdict:
        """Part of the book is not verified."""
        return Verdict.NOT_VERIFIABLE


@dataclass(frozen=True, slots=True)
class Unsaved:
    """Cells for which the file stores no value: recalculated, but there is nothing to compare with."""

    kind: ClassVar[str] = "no saved value"
    cells: Cells

    @property
    def verdict(self) -> Verdict:
        """Part of the book is not verified."""
        return Verdict.NOT_VERIFIABLE


Finding: TypeAlias = Difference | Error | UnmetCheck | Unsupported | Cycle | NotVerified | Unsaved


@dataclass(frozen=True, slots=True)
class Note:
    """What a reader should know though it decides nothing; no cells where it is about the whole book."""

    text: str
    cells: Cells = ()


@dataclass(slots=True)
class Tally:
    """How many formula cells the book has, each counted once from `hold` to `unsaved`, and what is among them."""

    cells: int = 0
    hold: int = 0
    differ: int = 0
    volatile: int = 0  # the kind of the value holds, which is all that can be asked
    not_verified: int = 0  # volatile cells of another kind among them
    unsaved: int = 0
    external: int = 0  # of all cells, those that read saved values of other books
    checks: int = 0
    checks_met: int = 0


@dataclass(frozen=True, slots=True)
class Report:
    """The check of one book.

    clock, seed : what was asked for, see `check_book`; None where nothing was
    """

    path: str
    tolerance: Tolerance
    sheets: tuple[str, ...] = ()
    tally: Tally = field(default_factory=Tally)
    findings: tuple[Finding, ...] = ()
    notes: tuple[Note, ...] = ()
    unreadable: str = ""  # fault and remedy, where the book could not be read
    clock: datetime | Literal["saved"] | None = None
    seed: int | None = None

    @property
    def verdict(self) -> Verdict:
        """What the check comes to."""
        return Verdict.UNREADABLE if self.unreadable else worst(finding.verdict for finding in self.findings)

    def of_kind(self, kind: str) -> list[Finding]:
        """The findings of one kind, in the order of the book."""
        return [finding for finding in self.findings if finding.kind == kind]
