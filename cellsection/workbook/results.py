"""What a recalculation hands out: each formula cell with its saved and its new value, and what could not be done."""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import Enum
from typing import TYPE_CHECKING, TypeAlias

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from cellsection.workbook.book import Bounds, Position
    from cellsection.workbook.values import Array, Scalar

__all__ = ["Changes", "FormulaCell", "Recalculation", "Status"]


class Status(Enum):
    """What became of a formula cell."""

    RECALCULATED = "recalculated"
    UNSUPPORTED = "unsupported"  # the formula itself uses something that is not supported; `reason` names it
    NOT_VERIFIED = "not verified"  # it depends on such a cell; `reason` names that cell
    VOLATILE = "volatile"  # its value depends on the clock, a random number or the machine; compared by kind only
    CYCLE = "cycle"  # it is part of a circular reference; `reason` names the circle cell by cell


@dataclass(slots=True)
class FormulaCell:
    """A cell that holds a formula, or lies in the area of an array formula.

    saved : the value stored in the file (None also where the file stores none)
    value : the recalculated value; the saved one where status is UNSUPPORTED, NOT_VERIFIED or CYCLE
    call : name of the outermost function of the formula in this project's or the application's own spelling
        ("CS_AGREES", "SUM"), "" where the formula is not one call
    fills : the area that the array formula in this cell fills, None for any other cell
    notes : what a reader should know though the value holds ("external link [1] read from its saved values")
    """

    sheet: str
    address: str
    saved: Scalar
    value: Scalar
    status: Status
    call: str = ""
    reason: str = ""
    notes: tuple[str, ...] = ()
    has_saved: bool = True
    text: Callable[[], str] = field(default=lambda: "", repr=False)
    whole: Array | None = field(
        default=None, repr=False
    )  # all that the formula gave, where it gave more than one value
    fills: Bounds | None = None
    place: Position | None = None  # row and column that the address names, where they are known

    @property
    def formula(self) -> str:
        """The formula as the engineer reads it, with its leading "="; array formulas in braces."""
        return self.text()


Changes: TypeAlias = "dict[str, dict[Position, Scalar]]"


@dataclass(slots=True)
class Recalculation:
    """A whole book, recalculated. The cells come sheet by sheet, row by row."""

    path: str
    sheets: tuple[str, ...]
    cells: Sequence[FormulaCell]
    notes: list[str] = field(default_factory=list)  # about the book: iterative calculation asked for, signature, ...

    def apart(self) -> Sequence[FormulaCell]:
        """The cells without those that are recalculated to the very value saved and have nothing else to be said of.

        All others are among them: errors, cells without a saved value, of array formulas, with a note, and acceptance
        checks. Of a large sound book they are few, and the rest need not be made.
        """
        made = getattr(self.cells, "apart", None)
        return self.cells if made is None else made()

    def sorted_out(self) -> tuple[Changes, Sequence[FormulaCell]]:
        """The same cells in two parts: the changes of which there is nothing to say but the values, and the others.

        A change is given by sheet and cell, with the new value.
        """
        made = getattr(self.cells, "sorted_out", None)
        return ({}, self.cells) if made is None else made()

    def pairs(self) -> Iterator[tuple[Scalar, Scalar]]:
        """The saved and the new value of each of these changes."""
        made = getattr(self.cells, "pairs", None)
        return iter(()) if made is None else made()
