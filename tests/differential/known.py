"""The known kinds of difference from LibreOffice, as data: where, when, why, and which side follows what.

A record names its functions (or operators) and the condition on the arguments and the two values; nothing is taken as
explained that no record meets. docs/differences.md is written from the records.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING, Literal, TypeAlias

from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from collections.abc import Callable

    from tests.differential.comparison import Difference

__all__ = ["Condition", "Known", "Side", "explanation", "record", "records"]

Side: TypeAlias = Literal["ours", "LibreOffice", "both", "neither", "silent", "unknown"]


@dataclass(frozen=True, slots=True)
class Condition:
    """When a record applies, in words and as a test."""

    words: str
    holds: Callable[[Difference], bool]

    def __and__(self, other: Condition) -> Condition:
        return Condition(f"{self.words}; {other.words}", lambda d: self.holds(d) and other.holds(d))

    def __or__(self, other: Condition) -> Condition:
        return Condition(f"{self.words}, or {other.words}", lambda d: self.holds(d) or other.holds(d))


@dataclass(frozen=True, slots=True)
class Known:
    """One kind of difference.

    key : short name, unique
    heads : the functions and operators concerned; none where the condition names a construct that any may meet
    standard, excel : the side that does as OpenFormula says ("silent" where it leaves it open), and as Excel does
    """

    key: str
    heads: frozenset[str]
    when: Condition
    reason: str
    standard: Side
    excel: Side
    errors: bool | None = False  # whether both sides give errors; None: whether or not

    def explains(self, difference: Difference) -> bool:
        """Whether it is of this kind."""
        both = isinstance(difference.ours, ErrorValue) and isinstance(difference.theirs, ErrorValue)
        if self.errors is not None and self.errors != both:
            return False
        return (not self.heads or difference.piece.head in self.heads) and self.when.holds(difference)


def record(
    key: str, heads: str, when: Condition, reason: str, *, standard: Side, excel: Side, errors: bool | None = False
) -> Known:
    """A record, its functions separated by blanks."""
    return Known(key, frozenset(heads.split()), when, reason, standard, excel, errors)


def explanation(difference: Difference) -> Known | None:
    """The first record that a difference meets."""
    return next((record for record in records() if record.explains(difference)), None)


@cache
def records() -> tuple[Known, ...]:
    """All records, those on kinds of argument before those on single functions and those on error codes."""
    from tests.differential.known_codes import CODES
    from tests.differential.known_functions import FUNCTIONS
    from tests.differential.known_values import KINDS

    return KINDS + FUNCTIONS + CODES
