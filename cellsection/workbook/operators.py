"""The operators on single values, and their spreading over arrays."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from math import isfinite
from typing import TypeAlias

from cellsection.workbook.coercion import DIV0, NA, NUM, VALUE, compared, number_of, text_of
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = ["BINARY", "element", "negative", "per_cent", "snapped", "spread", "width_height"]

Result: TypeAlias = Scalar | Array
LONGEST_TEXT = 32_767  # characters that a cell can hold


def numbers(a: Scalar, b: Scalar) -> tuple[float, float] | ErrorValue:
    """Both operands as numbers, or the first error among them."""
    x = number_of(a)
    if isinstance(x, ErrorValue):
        return x
    y = number_of(b)
    return y if isinstance(y, ErrorValue) else (x, y)


def finite(x: float) -> Scalar:
    """A result, or #NUM! where it overflowed."""
    return x if isfinite(x) else NUM


def plus(a: Scalar, b: Scalar) -> Scalar:
    """A + b"""
    if a.__class__ is float and b.__class__ is float:
        return finite(a + b)
    pair = numbers(a, b)
    return pair if isinstance(pair, ErrorValue) else finite(pair[0] + pair[1])


def minus(a: Scalar, b: Scalar) -> Scalar:
    """A - b"""
    if a.__class__ is float and b.__class__ is float:
        return finite(a - b)
    pair = numbers(a, b)
    return pair if isinstance(pair, ErrorValue) else finite(pair[0] - pair[1])


def times(a: Scalar, b: Scalar) -> Scalar:
    """A * b"""
    if a.__class__ is float and b.__class__ is float:
        return finite(a * b)
    pair = numbers(a, b)
    return pair if isinstance(pair, ErrorValue) else finite(pair[0] * pair[1])


def over(a: Scalar, b: Scalar) -> Scalar:
    """A / b"""
    pair = numbers(a, b)
    if isinstance(pair, ErrorValue):
        return pair
    return finite(pair[0] / pair[1]) if pair[1] else DIV0


def power(a: Scalar, b: Scalar) -> Scalar:
    """A ^ b; 0^0 and fractional powers of negative numbers are #NUM!, 0 to a negative power is #DIV/0!."""
    pair = numbers(a, b)
    if isinstance(pair, ErrorValue):
        return pair
    x, y = pair
    if x == 0.0 and y <= 0.0:
        return NUM if y == 0.0 else DIV0
    if x < 0.0 and y != int(y):
        return NUM
    try:
        return finite(x**y)
    except OverflowError:
        return NUM


def joined(a: Scalar, b: Scalar) -> Scalar:
    """A & b"""
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
    "+": plus,
    "-": minus,
    "*": times,
    "/": over,
    "^": power,
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
    """A function of single values called for every element of the arrays among its operands."""
    shapes = [width_height(operand) for operand in operands if isinstance(operand, tuple)]
    rows, columns = max(shape[0] for shape in shapes), max(shape[1] for shape in shapes)
    if len(set(shapes)) == 1:
        if len(operands) == 2 and all(isinstance(operand, tuple) for operand in operands):
            first, second = operands
            return tuple(tuple(map(call, a, b)) for a, b in zip(first, second, strict=True))  # type: ignore[arg-type]
        if len(operands) == 1:
            return tuple(tuple(map(call, row)) for row in operands[0])  # type: ignore[union-attr]
    return tuple(
        tuple(call(*(element(operand, r, c) for operand in operands)) for c in range(columns)) for r in range(rows)
    )
