"""How a builtin spreadsheet function is declared: its name, and how it takes each argument.

    @builtin("ROUND", "number number")
    def round_(x: float, digits: float) -> float: ...

The words, one an argument (a `?` behind one: may be left out; the last may carry `*`, any number of them, or `+`, at
least one; the last two may both carry `*`, any number of such pairs):

    number text logical   a scalar, coerced as the application does; an error value is passed on without a call
    measure               a number, but a logical is #VALUE!: functions that once were the application's add-in
    value                 a scalar of any kind but an error (which is passed on without a call); blank stays None
    any                   a scalar of any kind, error values included
    array                 an Array: a reference is read, a scalar becomes 1 x 1; errors stay inside
    table                 as range, and an expression in its place is calculated as an array (LOOKUP, INDEX)
    range                 an Area where a reference was written, an Array, or a scalar typed in directly: for functions
                          that treat cells and typed values differently (SUM takes "2" typed in, not in a cell)
    reference             an Area (or a tuple of Areas for a union); anything else is #VALUE!

A function whose scalar arguments meet an array is called once an element and returns an array (in an array formula) or
takes the cell of its own row or column (elsewhere). An argument left out arrives as the Python default; one written but
empty (`IF(1,,2)`) arrives as blank None for value/any, 0.0 for number/measure, "" for text, False for logical.
A word `context` in front passes the running Context (own cell, workbook, clock) first.
A function returns a scalar, an Array or an Area, and raises ErrorResult to return an error value.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime
from typing import TYPE_CHECKING, Any, Literal, Protocol, TypeAlias, TypeVar

from cellsection.workbook.values import Area, ErrorValue

if TYPE_CHECKING:
    from random import Random

__all__ = ["BUILTINS", "Builtin", "Context", "ErrorResult", "builtin"]

F = TypeVar("F", bound=Callable[..., Any])
Volatility: TypeAlias = Literal["", "day", "time", "chance", "machine"]
KINDS = frozenset(("number", "measure", "text", "logical", "value", "any", "array", "range", "table", "reference"))


class Context(Protocol):
    """What a builtin may ask about the cell and the book it is calculated in."""

    row: int
    column: int

    @property
    def sheet_name(self) -> str:
        """Sheet of the running formula."""
        ...

    @property
    def sheet_names(self) -> tuple[str, ...]:
        """All sheets of the book, in order."""
        ...

    @property
    def date1904(self) -> bool:
        """Whether serial numbers count from 1904."""
        ...

    def area(self, sheet: str, top: int, left: int, bottom: int, right: int) -> Area | ErrorValue:
        """An area, #REF! where it leaves its sheet."""
        ...

    def reference(self, text: str, sheet: str) -> Any:
        """The area (or areas) that a text names, read as in a formula on the given sheet; #REF! where it names none."""
        ...

    def has_formula(self, sheet: str, row: int, column: int) -> bool:
        """Whether a cell holds a formula."""
        ...

    def hidden_row(self, sheet: str, row: int) -> bool:
        """Whether a row is hidden."""
        ...

    def formula_call(self, sheet: str, row: int, column: int) -> str:
        """Outermost function of a cell's formula, "" where there is none."""
        ...

    def formula_text(self, sheet: str, row: int, column: int) -> str:
        """The formula of a cell as the engineer reads it, "" where there is none."""
        ...

    def now(self) -> datetime:
        """When the recalculation began, or the moment it was given."""
        ...

    def chance(self) -> Random:
        """Random numbers; with a seed the same ones for the same cell in every recalculation."""
        ...

    def supposed(self, given: list[tuple[Any, Any]], wanted: Any) -> Any:
        """What a cell would come to if others held other values; each is told as an Area."""
        ...

    def unsupported(self, construct: str) -> None:
        """Report that the running formula needs what is not supported; does not return."""
        ...


class ErrorResult(Exception):  # noqa: N818 - it is a result on its way, not a fault of the program
    """Raised inside a builtin to return an error value."""

    def __init__(self, error: ErrorValue) -> None:
        super().__init__(error.code)
        self.error = error


@dataclass(frozen=True, slots=True)
class Builtin:
    """One spreadsheet function as the compiler sees it."""

    name: str
    call: Callable[..., Any]
    kinds: tuple[str, ...]  # one a declared argument; the last one repeats where `repeats`
    least: int  # fewest arguments
    most: int | None  # None: any number
    context: bool = False
    volatile: Volatility = ""
    repeats: int = 1  # how many of the last kinds take turns where there are more arguments than kinds

    def kind(self, index: int) -> str:
        """How argument number index, counted from 0, is taken."""
        last = len(self.kinds)
        return self.kinds[index if index < last else last - self.repeats + (index - last) % self.repeats]


BUILTINS: dict[str, Builtin] = {}


def builtin(name: str, arguments: str = "", *, volatile: Volatility = "") -> Callable[[F], F]:
    """Declare a builtin under its name (or several, separated by blanks: the old and the new spelling).

    volatile : what makes it give another value another time
    """
    words = arguments.split()
    context = words[:1] == ["context"]
    words = words[context:]
    least = sum(not word.endswith(("?", "*")) for word in words)
    most = None if words and words[-1].endswith(("*", "+")) else len(words)
    kinds = tuple(word.rstrip("?*+") for word in words)
    repeats = max(1, sum(word.endswith("*") for word in words))
    if unknown := set(kinds) - KINDS:
        raise ValueError(f"{name}: no argument kind {sorted(unknown)}; choose from {sorted(KINDS)}")

    def declare(call: F) -> F:
        for each in name.split():
            if each in BUILTINS:
                raise ValueError(f"{each} is declared twice")
            BUILTINS[each] = Builtin(each, call, kinds, least, most, context, volatile, repeats)
        return call

    return declare
