"""Matrices, and the functions that cut, stack, sort and filter arrays."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cmp_to_key
from math import isfinite
from operator import itemgetter
from typing import Any

from cellsection.workbook.builtins.logical import ERROR_NUMBERS
from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import array_of, whole
from cellsection.workbook.coercion import CALC, NA, NUM, VALUE, compared, logical_of, number_of
from cellsection.workbook.operators import check_array
from cellsection.workbook.values import Array, ErrorValue, Scalar


def matrix(array: Array) -> list[list[float]]:
    """An array of nothing but numbers."""
    for row in array:
        for cell in row:
            if isinstance(cell, ErrorValue):
                raise ErrorResult(cell)
            if not isinstance(cell, float):
                raise ErrorResult(VALUE)
    return [list(row) for row in array]  # type: ignore[arg-type]


def cells(rows: Any) -> Array:
    """Rows as an array."""
    return tuple(tuple(row) for row in rows)


@builtin("MMULT", "array array")
def mmult(a: Array, b: Array) -> Array:
    x, y = matrix(a), matrix(b)
    if len(x[0]) != len(y):
        raise ErrorResult(VALUE)
    check_array(len(x) * len(y[0]))
    columns = list(zip(*y, strict=True))
    product = [[sum(p * q for p, q in zip(row, column, strict=True)) for column in columns] for row in x]
    if not all(isfinite(each) for row in product for each in row):
        raise ErrorResult(NUM)  # one error for the whole, as the application saves it
    return cells(product)


def given(value: Scalar, default: float) -> float:
    """A number, or its default where it is left out or written but empty."""
    number = default if value is None else number_of(value)
    if isinstance(number, ErrorValue):
        raise ErrorResult(number)
    return number


def square(array: Array) -> list[list[float]]:
    """A square matrix."""
    rows = matrix(array)
    if len(rows) != len(rows[0]):
        raise ErrorResult(VALUE)
    return rows


@builtin("MDETERM", "array")
def mdeterm(array: Array) -> float:
    rows, result = square(array), 1.0
    n = len(rows)
    for k in range(n):
        pivot = max(range(k, n), key=lambda r: abs(rows[r][k]))
        if rows[pivot][k] == 0:
            return 0.0
        if pivot != k:
            rows[k], rows[pivot] = rows[pivot], rows[k]
            result = -result
        result *= rows[k][k]
        for r in range(k + 1, n):
            share = rows[r][k] / rows[k][k]
            for c in range(k, n):
                rows[r][c] -= share * rows[k][c]
    return result


@builtin("MINVERSE", "array")
def minverse(array: Array) -> Array:
    rows = square(array)
    n = len(rows)
    work = [row + [float(r == k) for r in range(n)] for k, row in enumerate(rows)]
    for k in range(n):
        pivot = max(range(k, n), key=lambda r: abs(work[r][k]))
        if abs(work[pivot][k]) < 1e-300:
            raise ErrorResult(NUM)
        work[k], work[pivot] = work[pivot], work[k]
        head = work[k][k]
        work[k] = [x / head for x in work[k]]
        for r in range(n):
            if r != k and work[r][k]:
                share = work[r][k]
                work[r] = [x - share * y for x, y in zip(work[r], work[k], strict=True)]
    return cells(row[n:] for row in work)


@builtin("MUNIT", "number")
def munit(n: float) -> Array:
    size = int(n)
    if size < 1:
        raise ErrorResult(VALUE)
    check_array(size * size)
    return cells([float(r == c) for c in range(size)] for r in range(size))


@builtin("TRANSPOSE", "array")
def transpose(array: Array) -> Array:
    return tuple(zip(*array, strict=True))


@builtin("SEQUENCE", "value value? value? value?")
def sequence(height: Scalar, width: Scalar = None, first: Scalar = None, by: Scalar = None) -> Array:
    r, c, start, step = int(given(height, 1.0)), int(given(width, 1.0)), given(first, 1.0), given(by, 1.0)
    if r < 1 or c < 1:
        raise ErrorResult(VALUE if r < 0 or c < 0 else CALC)
    check_array(r * c)
    return cells([start + (i * c + j) * step for j in range(c)] for i in range(r))


# ---- sorting and filtering


def error_number(cell: Scalar) -> int:
    """Place of an error value among the others, 0 of anything else."""
    return ERROR_NUMBERS.get(cell.code, 99) if isinstance(cell, ErrorValue) else 0


def order_key(descending: bool) -> Any:
    """Numbers, text, logicals, errors; downwards the other way round; blanks last either way."""

    def compare(a: Scalar, b: Scalar) -> int:
        if a is None or b is None:
            return (a is None) - (b is None)
        if isinstance(a, ErrorValue) or isinstance(b, ErrorValue):
            side = error_number(a) - error_number(b)
        else:
            side = compared(a, b)
        return -side if descending else side

    return cmp_to_key(compare)


def turned(array: Array) -> Array:
    """Rows and columns swapped."""
    return tuple(zip(*array, strict=True))


@builtin("SORT", "array array? array? logical?")
def sort(array: Array, index: Array = ((1.0,),), order: Array = ((1.0,),), by_column: bool = False) -> Array:
    rows = list(turned(array) if by_column else array)
    keys = [cell for row in index for cell in row]
    orders = [cell for row in order for cell in row] or [1.0]
    for k in range(len(keys) - 1, -1, -1):
        key, direction = keys[k], orders[k] if k < len(orders) else orders[-1]
        if not isinstance(key, float) or not 1 <= key <= len(rows[0]) or direction not in (1.0, -1.0):
            raise ErrorResult(VALUE)
        by, column = order_key(direction == -1.0), int(key) - 1
        rows = [row for _, row in sorted(((by(row[column]), row) for row in rows), key=itemgetter(0))]
    return turned(cells(rows)) if by_column else cells(rows)


@builtin("SORTBY", "array range range*")
def sortby(array: Array, first: Any, *rest: Any) -> Array:
    arguments = [first, *rest]
    upright = len(array_of(first)) == len(array) and len(array_of(first)[0]) == 1
    rows = list(enumerate(array if upright else turned(array)))
    for k in range(len(arguments) - 1 - (len(arguments) + 1) % 2, -1, -2):
        direction = array_of(arguments[k + 1])[0][0] if k + 1 < len(arguments) else 1.0
        keys = [cell for row in whole(arguments[k]) for cell in row]
        if len(keys) != len(rows) or direction not in (1.0, -1.0):
            raise ErrorResult(VALUE)
        by = order_key(direction == -1.0)
        rows = [pair for _, pair in sorted(((by(keys[pair[0]]), pair) for pair in rows), key=itemgetter(0))]
    result = cells(row for _, row in rows)
    return result if upright else turned(result)


@builtin("FILTER", "array array any?")
def filter_(array: Array, keep: Array, empty: Scalar = CALC) -> Any:
    level = len(keep) == 1 and len(keep[0]) == len(array[0]) and len(array) != 1
    flags = list(keep[0]) if level or len(keep) == 1 else [row[0] for row in keep]
    rows = turned(array) if level or (len(keep) == 1 and len(array) == 1) else array
    if len(flags) != len(rows):
        raise ErrorResult(VALUE)
    kept = []
    for flag, row in zip(flags, rows, strict=True):
        truth = logical_of(flag)
        if isinstance(truth, ErrorValue):
            raise ErrorResult(truth)
        if truth:
            kept.append(row)
    if not kept:
        return empty
    return turned(cells(kept)) if rows is not array else cells(kept)


@builtin("UNIQUE", "array logical? logical?")
def unique(array: Array, by_column: bool = False, once: bool = False) -> Array:
    rows = turned(array) if by_column else array

    def folded(row: Sequence[Scalar]) -> tuple[Any, ...]:
        return tuple((cell.__class__, cell.casefold() if isinstance(cell, str) else cell) for cell in row)

    counts: dict[Any, int] = {}
    for row in rows:
        counts[folded(row)] = counts.get(folded(row), 0) + 1
    seen: set[Any] = set()
    kept = []
    for row in rows:
        key = folded(row)
        if key not in seen and (not once or counts[key] == 1):
            kept.append(row)
        seen.add(key)
    if not kept:
        raise ErrorResult(CALC)
    return turned(cells(kept)) if by_column else cells(kept)


# ---- cutting and stacking


def cut(count: Scalar, length: int, drop: bool) -> slice:
    """The rows or columns that TAKE keeps or DROP leaves."""
    if count is None:
        return slice(None)
    n = int(given(count, 0.0))
    if drop:
        if abs(n) >= length:
            raise ErrorResult(CALC)
        return slice(n, None) if n >= 0 else slice(None, max(length + n, 0))
    if n == 0:
        raise ErrorResult(CALC)
    return slice(0, n) if n > 0 else slice(max(length + n, 0), None)


def cropped(array: Array, rows: Scalar, columns: Scalar, drop: bool) -> Array:
    """TAKE and DROP."""
    result = tuple(row[cut(columns, len(array[0]), drop)] for row in array[cut(rows, len(array), drop)])
    if not result or not result[0]:
        raise ErrorResult(CALC)
    return result


@builtin("TAKE", "array value? value?")
def take(array: Array, rows: Any = None, columns: Any = None) -> Array:
    return cropped(array, rows, columns, False)


@builtin("DROP", "array value? value?")
def drop(array: Array, rows: Any = None, columns: Any = None) -> Array:
    return cropped(array, rows, columns, True)


@builtin("VSTACK", "array+")
def vstack(*arrays: Array) -> Array:
    width = max(len(array[0]) for array in arrays)
    return tuple((*row, *((NA,) * (width - len(row)))) for array in arrays for row in array)


@builtin("HSTACK", "array+")
def hstack(*arrays: Array) -> Array:
    height = max(map(len, arrays))
    return tuple(
        tuple(cell for array in arrays for cell in (array[r] if r < len(array) else (NA,) * len(array[0])))
        for r in range(height)
    )


def listed(array: Array, ignore: float, by_column: bool) -> list[Scalar]:
    """All cells in a row, without blanks or errors where asked."""
    order = turned(array) if by_column else array
    found = [cell for row in order for cell in row]
    if int(ignore) in (1, 3):
        found = [cell for cell in found if cell is not None]
    if int(ignore) in (2, 3):
        found = [cell for cell in found if not isinstance(cell, ErrorValue)]
    if not found:
        raise ErrorResult(CALC)
    return found


@builtin("TOCOL", "array number? logical?")
def tocol(array: Array, ignore: float = 0.0, by_column: bool = False) -> Array:
    return tuple((cell,) for cell in listed(array, ignore, by_column))


@builtin("TOROW", "array number? logical?")
def torow(array: Array, ignore: float = 0.0, by_column: bool = False) -> Array:
    return (tuple(listed(array, ignore, by_column)),)


def wrapped(array: Array, count: float, pad: Scalar) -> Array:
    """A row or column cut into pieces of one length."""
    if len(array) > 1 and len(array[0]) > 1:
        raise ErrorResult(VALUE)
    n, items = int(count), [cell for row in array for cell in row]
    if n < 1:
        raise ErrorResult(NUM)
    if len(items) > n:  # what fits into one piece is not filled up
        items += [pad] * (-len(items) % n)
    return tuple(tuple(items[k : k + n]) for k in range(0, len(items), n))


@builtin("WRAPROWS", "array number any?")
def wraprows(array: Array, count: float, pad: Scalar = NA) -> Array:
    return wrapped(array, count, pad)


@builtin("WRAPCOLS", "array number any?")
def wrapcols(array: Array, count: float, pad: Scalar = NA) -> Array:
    return turned(wrapped(array, count, pad))


@builtin("EXPAND", "array value? value? any?")
def expand(array: Array, rows: Any = None, columns: Any = None, pad: Scalar = NA) -> Array:
    height, width = int(given(rows, len(array))), int(given(columns, len(array[0])))
    if height < len(array) or width < len(array[0]):
        raise ErrorResult(VALUE)
    check_array(height * width)
    body = [(*row, *((pad,) * (width - len(row)))) for row in array]
    return (*body, *(((pad,) * width,) * (height - len(array))))


def picks(arguments: tuple[Array, ...], length: int) -> list[int]:
    """Positions from 0; negative numbers count from the end."""
    found = []
    for argument in arguments:
        for row in argument:
            for cell in row:
                if not isinstance(cell, float) or not 1 <= abs(int(cell)) <= length:
                    raise ErrorResult(VALUE)
                found.append(int(cell) - 1 if cell > 0 else length + int(cell))
    return found


@builtin("CHOOSEROWS", "array array+")
def chooserows(array: Array, *numbers: Array) -> Array:
    return tuple(array[k] for k in picks(numbers, len(array)))


@builtin("CHOOSECOLS", "array array+")
def choosecols(array: Array, *numbers: Array) -> Array:
    columns = picks(numbers, len(array[0]))
    return tuple(tuple(row[k] for k in columns) for row in array)
