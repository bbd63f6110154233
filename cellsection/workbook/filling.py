"""Array results put into cells: over the area of an array formula, or spilled from a dynamic one."""

from __future__ import annotations

from typing import Any

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.areas import as_array
from cellsection.workbook.book import Bounds, Formula
from cellsection.workbook.calls import given_back
from cellsection.workbook.coercion import CALC, NA, SPILL
from cellsection.workbook.keys import keys_of, position
from cellsection.workbook.machine import PENDING, Machine, Place, Special, Taint
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = ["fill", "signed"]


def signed(machine: Machine, error: ErrorValue, place: Place) -> ErrorValue:
    """An error with the cell where it arises, which its dependants pass on."""
    return error if error.origin else ErrorValue(error.code, error.message, machine.address(*place))


def fill(machine: Machine, place: Place, formula: Formula, value: Any, taint: Taint | None) -> Bounds | None:
    """Put an array formula's result into its cells. Gives the area where it is larger than what waited for it.

    An array formula of fixed area is filled from its first cell: one value, row or column repeats, what is missing is
    #N/A. A dynamic formula fills as many cells as it has values, and none but its own where one of them is taken.
    """
    index, key = place
    array = as_array(value)
    if not array or not array[0]:
        array = ((CALC,),)
    known = {each for each, owner in machine.owners[index].items() if owner == key} if formula.dynamic else None
    row, column = position(key)
    rows, columns = len(array), len(array[0])
    area = formula.area or (row, column, row, column)
    if known is not None:
        area = (row, column, row + rows - 1, column + columns - 1)
        if blocked(machine, place, area):
            blocking = ErrorValue(SPILL.code, "the cells it should fill are not blank")
            array, rows, columns, area = ((blocking,),), 1, 1, (row, column, row, column)
    store, owners = machine.stores[index], machine.owners[index]
    grown = False
    for each in keys_of(area):
        owner = owners.get(each, each)
        if owner != key:
            if known is None or each in store:
                continue  # another formula's own cell within the area
            grown, owners[each] = True, key
        r, c = position(each)
        store[each] = kept(machine, place, at(array, rows, columns, r - row, c - column), taint)
    for each in known or ():  # a result that has shrunk leaves the rest of its saved area blank
        if store.get(each) is PENDING:
            store[each] = None
    machine.filled[place] = area
    return area if grown else None


def at(array: Array, rows: int, columns: int, r: int, c: int) -> Scalar:
    """One cell of a fixed area: a single row or column repeats, beyond the end is #N/A."""
    r, c = (0 if rows == 1 else r), (0 if columns == 1 else c)
    return array[r][c] if r < rows and c < columns else NA


def kept(machine: Machine, place: Place, value: Any, taint: Taint | None) -> Any:
    """A value as the store keeps it."""
    single = given_back(value)
    if single is None:
        single = 0.0
    elif isinstance(single, ErrorValue):
        single = signed(machine, single, place)
    elif not isinstance(single, (float, str, bool)):
        single = signed(machine, CALC, place)
    return single if taint is None else Special(single, taint)


def blocked(machine: Machine, place: Place, area: Bounds) -> bool:
    """Whether a spilling result would run into cells that hold something, or over the edge of the sheet."""
    index, key = place
    store, owners = machine.stores[index], machine.owners[index]
    if area[2] > LAST_ROW or area[3] > LAST_COLUMN:
        return True
    machine.check_size((area[2] - area[0] + 1) * (area[3] - area[1] + 1))
    return any(store.get(each) is not None and owners.get(each, each) != key for each in keys_of(area))
