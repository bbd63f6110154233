"""Sums, counts and means of the cells that meet criteria."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from cellsection.workbook.builtins.mathematics import fail, total
from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.traits import array_of, criterion, stop_at
from cellsection.workbook.coercion import DIV0, VALUE
from cellsection.workbook.values import ErrorValue, Scalar


def extent(area: Any) -> tuple[int, int]:
    """Rows and columns of a range argument as written."""
    if hasattr(area, "shape"):
        return area.shape  # type: ignore[no-any-return]
    array = array_of(area)
    return (len(array), len(array[0]) if array else 0)


def looked_at(area: Any, rows: int, columns: int) -> Any:
    """An area of the given size from the first cell of another, as SUMIF takes its third argument."""
    if not hasattr(area, "resized"):
        return area
    return area if area.shape == (rows, columns) else area.resized(rows, columns)


def cell_at(array: Any, row: int, column: int) -> Scalar:
    """A cell of an array, blank beyond its clipped end."""
    return array[row][column] if row < len(array) and column < len(array[row]) else None


def places(pairs: tuple[Any, ...]) -> Iterator[tuple[int, int]]:
    """Row and column, from 0, of the places at which every range meets its criterion; an error in place of a range is
    passed on: COUNTIF(#REF!,1) is #REF!.
    """
    ranges, wanted = pairs[0::2], pairs[1::2]
    for each in ranges:
        stop_at(each)
    shape = extent(ranges[0])
    if any(extent(each) != shape for each in ranges[1:]):
        raise ErrorResult(VALUE)
    arrays = [array_of(each) for each in ranges]
    tests = [criterion(each) for each in wanted]
    rows = max(len(array) for array in arrays)
    columns = max((len(array[0]) if array else 0) for array in arrays)
    first, test = arrays[0], tests[0]
    if len(arrays) == 1:
        for r, row in enumerate(first):
            for c, cell in enumerate(row):
                if test(cell):
                    yield r, c
        return
    for r in range(rows):
        for c in range(columns):
            if all(check(cell_at(array, r, c)) for check, array in zip(tests, arrays, strict=True)):
                yield r, c


def chosen(values: Any, pairs: tuple[Any, ...]) -> Iterator[float]:
    """The numbers at the places that meet the criteria; an error value among them is passed on."""
    rows, columns = extent(pairs[0])
    array = array_of(looked_at(values, rows, columns))
    for r, c in places(pairs):
        cell = cell_at(array, r, c)
        if cell.__class__ is float:
            yield cell
        elif isinstance(cell, ErrorValue):
            raise ErrorResult(cell)


def checked(values: Any, pairs: tuple[Any, ...]) -> Iterator[float]:
    """As chosen, for the functions that want ranges of one size and whole pairs."""
    if len(pairs) % 2 or extent(values) != extent(pairs[0]):
        raise ErrorResult(VALUE)
    return chosen(values, pairs)


@builtin("SUMIF", "range any range?")
def sumif(area: Any, wanted: Scalar, values: Any = None) -> float:
    return total(chosen(area if values is None else values, (area, wanted)))


@builtin("AVERAGEIF", "range any range?")
def averageif(area: Any, wanted: Scalar, values: Any = None) -> float:
    found = list(chosen(area if values is None else values, (area, wanted)))
    return total(found) / len(found) if found else fail(DIV0)


@builtin("COUNTIF", "range any")
def countif(area: Any, wanted: Scalar) -> float:
    found = float(sum(1 for _ in places((area, wanted))))
    if criterion(wanted)(None):  # blanks beyond the used area meet it too
        rows, columns = extent(area)
        array = array_of(area)
        found += rows * columns - sum(len(row) for row in array)
    return found


@builtin("COUNTIFS", "range any range* any*")
def countifs(area: Any, wanted: Scalar, *rest: Any) -> float:
    if len(rest) % 2:
        return fail(VALUE)
    pairs = (area, wanted, *rest)
    found = float(sum(1 for _ in places(pairs)))
    if all(criterion(each)(None) for each in pairs[1::2]):
        rows, columns = extent(area)
        arrays = [array_of(each) for each in pairs[0::2]]
        found += rows * columns - max(map(len, arrays)) * max((len(a[0]) if a else 0) for a in arrays)
    return found


@builtin("SUMIFS", "range range any range* any*")
def sumifs(values: Any, area: Any, wanted: Scalar, *rest: Any) -> float:
    return total(checked(values, (area, wanted, *rest)))


@builtin("AVERAGEIFS", "range range any range* any*")
def averageifs(values: Any, area: Any, wanted: Scalar, *rest: Any) -> float:
    found = list(checked(values, (area, wanted, *rest)))
    return total(found) / len(found) if found else fail(DIV0)


@builtin("MAXIFS", "range range any range* any*")
def maxifs(values: Any, area: Any, wanted: Scalar, *rest: Any) -> float:
    return max(checked(values, (area, wanted, *rest)), default=0.0)


@builtin("MINIFS", "range range any range* any*")
def minifs(values: Any, area: Any, wanted: Scalar, *rest: Any) -> float:
    return min(checked(values, (area, wanted, *rest)), default=0.0)
