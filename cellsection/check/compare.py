"""Whether a recalculated value agrees with the saved one: by kind first, numbers within a tolerance."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.values import Scalar

__all__ = ["REFUSAL", "Tolerance", "agree", "kind"]

REFUSAL = "#CS! "  # how a cell opens whose function refused its input, in the host that cannot return error values


@dataclass(frozen=True, slots=True)
class Tolerance:
    """How far a recalculated number may lie from the saved one.

    relative : share of the larger of the two magnitudes; the applications save 15 to 17 digits, so that 1e-9 leaves
        room for sums added up in another order and for nothing else
    absolute : in the unit of the number; for results that cancel to nearly nothing. It must stay far below the
        smallest number that means something in the book

    Numbers agree when either is kept.
    """

    relative: float = 1e-9
    absolute: float = 1e-12

    def covers(self, saved: float, value: float) -> bool:
        """Whether two numbers agree.

        >>> Tolerance().covers(1000.0, 1000.0000001), Tolerance().covers(1000.0, 1000.001)
        (True, False)
        """
        return math.isclose(saved, value, rel_tol=self.relative, abs_tol=self.absolute)

    def __str__(self) -> str:
        relative, absolute = (f"{each:g}".replace("e-0", "e-") for each in (self.relative, self.absolute))
        return f"relative {relative}, absolute {absolute}"


def kind(value: Scalar) -> str:
    """The kind of a value in a word: number, text, truth, error or blank.

    >>> [kind(value) for value in (2.0, "2", True, ErrorValue("#N/A"), None)]
    ['number', 'text', 'truth', 'error', 'blank']
    """
    if value is None:
        return "blank"
    if isinstance(value, bool):
        return "truth"
    if isinstance(value, str):
        return "text"
    return "error" if isinstance(value, ErrorValue) else "number"


def agree(saved: Scalar, value: Scalar, tolerance: Tolerance) -> bool:
    """Whether the recalculated value is what the file says.

    The two must be of one kind: the text "2" is not the number 2, nor is TRUE the number 1. Texts must be equal
    character by character, errors equal in their code. Three exceptions, because the files know no better: empty text
    and a blank are stored alike; where a host wrote the refusal of a function as text, an error agrees with it; and so
    it does with its own code, as some programs store it for text.

    >>> agree("2", 2.0, Tolerance()), agree("", None, Tolerance())
    (False, True)
    """
    if isinstance(saved, str) and isinstance(value, ErrorValue):
        return saved.startswith(REFUSAL) or saved == value.code
    if (saved is None or saved == "") and (value is None or value == ""):
        return True
    if kind(saved) != kind(value):
        return False
    if isinstance(saved, (float, int)) and isinstance(value, (float, int)) and not isinstance(value, bool):
        return tolerance.covers(saved, value)
    return saved == value
