"""The operators on single values, and their spreading over arrays."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from contextvars import ContextVar
from math import isfinite
from typing import TypeAlias

from cellsection.workbook.coercion import DIV0, NA, NUM, VALUE, compared, number_of, text_of
from cellsection.workbook.machine import Unsupported
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = [
    "BINARY",
    "LARGEST",
    "LONGEST_TEXT",
    "check_array",
    "check_characters",
    "element",
    "negative",
    "per_cent",
    "snapped",
    "spread",
    "width_height",
]

Result: TypeAlias = Scalar | Array
LONGEST_TEXT = 32_767  # characters in a cell
CHARACTERS = 50  # in a cell of an array of the largest size; in a smaller one more
LARGEST: ContextVar[int] = ContextVar("cells of an array", default=2_000_000)  # set for each recalculation


def arithmetic(work: Callable[[float, float], Scalar]) -> Callable[[Scalar, Scalar], Scalar]:
    """An operator on two numbers: what is given is turned into numbers, the left one's error goes first."""

    def apply(a: Scalar, b: Scalar) -> Scalar:
        x = number_of(a)
        if isinstance(x, ErrorValue):
            return x
        y = number_of(b)
        if isinstance(y, ErrorValue):
            return y
        result = work(x, y)
        return NUM if isinstance(result, float) and not isfinite(result) else result

    return apply


def power(x: float, y: float) -> Scalar:
    """X ^ y; 0^0 and fractional powers of negative numbers are #NUM!, 0 to a negative power is #DIV/0!."""
    if x == 0.0 and y <= 0.0:
        return NUM if y == 0.0 else DIV0
    if x < 0.0 and y != int(y):
        return NUM
    try:
        return float(x**y)
    except OverflowError:
        return NUM


def joined(a: Scalar, b: Scalar) -> Scalar:
    """A & b; more than a cell can hold is #VALUE!."""
    x = text_of(a)
    if isinstance(x, ErrorValue):
        return x
    y = text_of(b)
    if isinstance(y, ErrorValue):
        return y
    return x + y if len(x) + len(y) <= LONGEST_TEXT else VALUE


def comparison(holds: Callable[[int], bool]) -> Callable[[Scalar, Scalar], Scalar]:
    """A comparison operator from what it asks of the order of its operands."""

    def compare(a: Scalar, b: Scalar) -> Scalar:
        if isinstance(a, ErrorValue):
            return a
        if isinstance(b, ErrorValue):
            return b
        return holds(compared(a, b))

    return compare


BINARY: dict[str, Callable[[Scalar, Scalar], Scalar]] = {
    "+": arithmetic(lambda x, y: x + y),
    "-": arithmetic(lambda x, y: x - y),
    "*": arithmetic(lambda x, y: x * y),
    "/": arithmetic(lambda x, y: x / y if y else DIV0),
    "^": arithmetic(power),
    "&": joined,
    "=": comparison(lambda order: order == 0),
    "<>": comparison(lambda order: order != 0),
    "<": comparison(lambda order: order < 0),
    ">": comparison(lambda order: order > 0),
    "<=": comparison(lambda order: order <= 0),
    ">=": comparison(lambda order: order >= 0),
}


def negative(a: Scalar) -> Scalar:
    """-a"""
    x = number_of(a)
    return x if isinstance(x, ErrorValue) else 0.0 - x


def per_cent(a: Scalar) -> Scalar:
    """a%"""
    x = number_of(a)
    return x if isinstance(x, ErrorValue) else x / 100


def snapped(result: Scalar, a: Scalar) -> Scalar:
    """The last addition or subtraction of a formula: zero where it cancels all but the last bits of its operands.

    The application does so (common practice: its sum of 0.1 + 0.2 - 0.3 shows 0), but not inside brackets.
    """
    if result.__class__ is float and result != 0.0:
        x = number_of(a)
        if x.__class__ is float and abs(result) < abs(x) * 2.0**-49:
            return 0.0
    return result


def check_array(cells: float) -> None:
    """Report an array beyond the cap, before it is made."""
    if cells > LARGEST.get():
        raise Unsupported(f"an array of {cells:,.0f} cells (more than {LARGEST.get():,})")


def check_characters(characters: int) -> None:
    """Report an array of texts that are too long in all."""
    most = CHARACTERS * LARGEST.get()
    if characters > most:
        raise Unsupported(f"an array of texts of more than {most:,} characters")


def width_height(value: Result) -> tuple[int, int]:
    """Rows and columns of a value or array."""
    return (len(value), len(value[0])) if isinstance(value, tuple) and value else (1, 1)


def element(value: Result, row: int, column: int) -> Scalar:
    """One element as arrays of different shape meet: a single row or column repeats, beyond the end is #N/A."""
    if not isinstance(value, tuple):
        return value
    rows, columns = len(value), len(value[0]) if value else 0
    r, c = (0 if rows == 1 else row), (0 if columns == 1 else column)
    return value[r][c] if r < rows and c < columns else NA


def spread(call: Callable[..., Scalar], operands: Sequence[Result]) -> Array:
    """A function of single values called for every element of the arrays among its operands.

    >>> spread(lambda a, b: a + b, (((1.0, 2.0),), ((10.0,), (20.0,))))
    ((11.0, 12.0), (21.0, 22.0))
    """
    shapes = [width_height(operand) for operand in operands if isinstance(operand, tuple)]
    rows, columns = max(shape[0] for shape in shapes), max(shape[1] for shape in shapes)
    check_array(rows * columns)  # a row meets a column: two arrays of allowed size make one that is not
    lines = zip(*(stretched(operand, rows, columns) for operand in operands), strict=True)
    result: list[tuple[Scalar, ...]] = []
    before: tuple[Sequence[Scalar], ...] = ()
    characters = 0
    for line in lines:
        # The blank rows behind the used area are one object many times over: what they give is worked out once.
        alike = len(before) > 0 and all(map(lambda new, old: new is old, line, before))
        result.append(result[-1] if alike else tuple(map(call, *line)))
        if not alike and str in map(type, result[-1]):  # few long texts fill more memory than many numbers
            characters += sum(len(each) for each in result[-1] if each.__class__ is str)
            check_characters(characters)
        before = line
    return tuple(result)


def stretched(operand: Result, rows: int, columns: int) -> list[Sequence[Scalar]]:
    """The rows of an operand as it meets arrays of another size: one row or column repeats, the rest is #N/A."""
    if not isinstance(operand, tuple):
        return [(operand,) * columns] * rows
    wide = len(operand[0]) if operand else 0
    lines: list[Sequence[Scalar]] = list(operand)
    if wide == 1 and columns > 1:
        lines = [line * columns for line in operand]
    elif wide < columns:
        lines = [(*line, *((NA,) * (columns - wide))) for line in operand]
    if len(lines) == 1:
        return lines * rows
    return lines + [(NA,) * columns] * (rows - len(lines))
