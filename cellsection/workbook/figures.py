"""Logical values as numbers, which they are to the application of .ods files: 1 and 0, only shown as words.

OpenDocument 1.3 part 4, 4.5 leaves open whether a logical is a type of its own. To LibreOffice it is a number, so that
SUM counts it, TRUE()=1 holds and TRUE()&"" is "1" (tried with version 7.4); a book saved by it is calculated its way.
The file says of each value whether it is shown as a word; a result is handed out as its saved value is.
"""

from __future__ import annotations

from typing import Any

from cellsection.workbook.coercion import NUM, VALUE, number_of
from cellsection.workbook.expressions import otherwise
from cellsection.workbook.machine import Code, Unsupported
from cellsection.workbook.operators import BINARY
from cellsection.workbook.values import ErrorValue, Scalar

__all__ = ["COMPARISONS", "SHOWS", "as_figure", "as_shown", "counting", "raising", "told_apart"]

COMPARISONS = frozenset(("=", "<>", "<", ">", "<=", ">="))
SHOWS = frozenset(("ISLOGICAL", "TYPE"))  # functions that ask how a value is shown, which a calculation does not know
NUMBERED = "saved as Err:"  # one number of the application stands for several error values
LIKE = frozenset((NUM, VALUE))


def as_figure(value: Any) -> Any:
    """A value with its logicals as numbers.

    >>> as_figure(True), as_figure(((False, "x"),)), as_figure("x")
    (1.0, ((0.0, 'x'),), 'x')
    """
    if value.__class__ is bool:
        return float(value)
    if value.__class__ is tuple and value and value[0].__class__ is tuple:
        return tuple(tuple(float(x) if x.__class__ is bool else x for x in row) for row in value)
    return value


def counting(code: Code) -> Code:
    """Code whose logical results are numbers."""
    return lambda k: as_figure(code(k))


def raising(left: Code, right: Code) -> Code:
    """Code for left ^ right."""
    return lambda k: otherwise(raised, left(k), right(k))


def told_apart(name: str, argument: Code, call: Code) -> Code:
    """A call that asks how its argument is shown, which is not known of 1 and 0."""

    def run(k: int) -> Any:
        if argument(k) in (0.0, 1.0):
            raise Unsupported(f"function {name} of a number that may be shown as a logical")
        return call(k)

    return run


def raised(a: Scalar, b: Scalar) -> Scalar:
    """The power a ^ b, where 0 ^ 0 is 1 (OpenDocument 1.3 part 4, 6.16.46 leaves it open)."""
    result = BINARY["^"](a, b)
    return 1.0 if isinstance(result, ErrorValue) and number_of(a) == 0.0 and number_of(b) == 0.0 else result


def as_shown(value: Scalar, saved: Scalar) -> Scalar:
    """A result as its saved value is shown: as a word, and an error by the number that the application has for it."""
    if isinstance(saved, bool) and value in (0.0, 1.0) and isinstance(value, float):
        return bool(value)
    if isinstance(saved, ErrorValue) and saved.message.startswith(NUMBERED) and {saved, value} <= LIKE:
        return ErrorValue(saved.code, value.message, value.origin) if isinstance(value, ErrorValue) else value
    return value
