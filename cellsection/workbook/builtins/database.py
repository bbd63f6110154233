"""The functions of a list with headings: DSUM and its kin, which take their criteria from a range with headings too."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from typing import Any

from cellsection.workbook.builtins.mathematics import fail, total
from cellsection.workbook.builtins.registry import ErrorResult, builtin
from cellsection.workbook.builtins.statistics import mean, variance
from cellsection.workbook.builtins.traits import criterion
from cellsection.workbook.coercion import NUM, VALUE, number_of, text_of
from cellsection.workbook.values import Array, ErrorValue, Scalar

SIGNS = ("<", ">", "=")


def folded(cell: Scalar) -> str:
    """A heading for comparison: any case; an error value is passed on."""
    text = text_of(cell)
    if isinstance(text, ErrorValue):
        raise ErrorResult(text)
    return text.casefold()


def column_named(headings: tuple[Scalar, ...], name: Scalar) -> int | None:
    """Place of the first heading that reads like the name; a heading that is an error is none."""
    if isinstance(name, ErrorValue):
        return None
    wanted = folded(name)
    for k, heading in enumerate(headings):
        if heading is not None and not isinstance(heading, ErrorValue) and folded(heading) == wanted:
            return k
    return None


def field_of(headings: tuple[Scalar, ...], field: Array) -> int | None:
    """The column a field names by heading or by number from 1; None where it is left blank."""
    if len(field) != 1 or len(field[0]) != 1:
        raise ErrorResult(VALUE)
    name = field[0][0]
    if name is None:
        return None
    if isinstance(name, str):
        found = column_named(headings, name)
    else:
        number = number_of(name)
        if isinstance(number, ErrorValue):
            raise ErrorResult(number)
        found = int(number) - 1
    if found is None or not 0 <= found < len(headings):
        raise ErrorResult(VALUE)
    return found


def asked(wanted: Scalar) -> Callable[[Scalar], bool]:
    """What a criterion asks; here a plain text asks for cells that begin with it."""
    if isinstance(wanted, str) and wanted and not wanted.startswith(SIGNS):
        return criterion(wanted + "*")
    return criterion(wanted)


def conditions(
    headings: tuple[Scalar, ...], criteria: Array
) -> list[list[tuple[int | None, Callable[[Scalar], bool]]]]:
    """The rows of criteria: one of them must hold, and of it everything that is not blank."""
    return [
        [
            (column_named(headings, name), asked(wanted))
            for name, wanted in zip(criteria[0], row, strict=True)
            if wanted is not None
        ]
        for row in criteria[1:]
    ]


def records(database: Array, criteria: Array) -> Iterator[tuple[Scalar, ...]]:
    """The rows that meet the criteria. A criterion under a heading that the list does not have is met by none."""
    if len(database) < 2 or len(criteria) < 2:
        raise ErrorResult(VALUE)
    rows = conditions(database[0], criteria)
    for record in database[1:]:
        if any(all(at is not None and holds(record[at]) for at, holds in row) for row in rows):
            yield record


def chosen(database: Array, field: Array, criteria: Array) -> list[Scalar]:
    """Cells of the field in the rows that meet the criteria."""
    at = field_of(database[0], field)
    if at is None:
        raise ErrorResult(VALUE)
    return [record[at] for record in records(database, criteria)]


def numbers(database: Array, field: Array, criteria: Array) -> list[float]:
    """The numbers among the chosen cells; an error value among them is passed on."""
    found = []
    for cell in chosen(database, field, criteria):
        if isinstance(cell, ErrorValue):
            raise ErrorResult(cell)
        if isinstance(cell, float):
            found.append(cell)
    return found


REDUCED: dict[str, Callable[[list[float]], float]] = {
    "DSUM": total,
    "DPRODUCT": lambda values: math.prod(values) if values else 0.0,
    "DAVERAGE": mean,
    "DMIN": lambda values: min(values, default=0.0),
    "DMAX": lambda values: max(values, default=0.0),
    "DVAR": lambda values: variance(values, True),
    "DVARP": lambda values: variance(values, False),
    "DSTDEV": lambda values: math.sqrt(variance(values, True)),
    "DSTDEVP": lambda values: math.sqrt(variance(values, False)),
}


def declare_reduced() -> None:
    """The functions that make one number of the chosen ones."""
    for name, reduced in REDUCED.items():

        def call(database: Array, field: Array, criteria: Array, reduced: Any = reduced) -> float:
            return float(reduced(numbers(database, field, criteria)))

        builtin(name, "array array array")(call)


declare_reduced()


@builtin("DCOUNT", "array array array")
def dcount(database: Array, field: Array, criteria: Array) -> float:
    if field_of(database[0], field) is None:
        return float(sum(1 for _ in records(database, criteria)))
    return float(sum(isinstance(cell, float) for cell in chosen(database, field, criteria)))


@builtin("DCOUNTA", "array array array")
def dcounta(database: Array, field: Array, criteria: Array) -> float:
    if field_of(database[0], field) is None:
        return float(sum(1 for _ in records(database, criteria)))
    return float(sum(cell is not None for cell in chosen(database, field, criteria)))


@builtin("DGET", "array array array")
def dget(database: Array, field: Array, criteria: Array) -> Any:
    found = chosen(database, field, criteria)
    if not found:
        return VALUE
    return found[0] if len(found) == 1 else fail(NUM)
