"""What a cell would come to if others held other values: data tables, and MULTIPLE.OPERATIONS of OpenDocument.

For one such question every formula cell of the book waits again, the cells asked about are given their other values,
and only what the wanted cell demands is computed; then the book is put back as it was.

Source: ISO/IEC 29500-1, 18.3.1.40 (dataTable: r1, r2, dt2D, dtr); OpenDocument 1.3 part 4, 6.14.11
(MULTIPLE.OPERATIONS).
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from typing import TYPE_CHECKING

from cellsection.errors import FormulaError
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Formula
from cellsection.workbook.circles import Circles
from cellsection.workbook.keys import cell_key
from cellsection.workbook.machine import PENDING, Code, Pending, Place, Special, Unsupported
from cellsection.workbook.values import Array, Scalar

if TYPE_CHECKING:
    from cellsection.workbook.recalculate import Driver

__all__ = ["data_table", "supposed"]

INPUTS = re.compile(r"TABLE\(([A-Z]{0,3}[0-9]{0,7}),([A-Z]{0,3}[0-9]{0,7})\)", re.ASCII)


def data_table(driver: Driver, index: int, formula: Formula) -> Code:
    """Code for a data table: the values of its whole area.

    The row above the area and the column to its left hold what the input cells are to be, and the formulas: in the
    corner where both inputs change, else in the column or row that the changing values do not take.
    """
    found = INPUTS.fullmatch(formula.text)
    area = formula.area
    if found is None or area is None or not any(found.groups()):
        raise FormulaError("the data table names no input cell", construct="data table without an input cell")
    across, down = (input_cell(index, text) for text in found.groups())
    top, left, bottom, right = area
    if top == 1 or left == 1:
        raise FormulaError("there is no room for its headings", construct="data table without headings")
    machine = driver.machine

    def heading(row: int, column: int) -> Scalar:
        return machine.cell(index, cell_key(row, column))

    def one(row: int, column: int) -> Scalar:
        given: dict[Place, Scalar] = {}
        if across is not None:
            given[across] = heading(top - 1, column)
        if down is not None:
            given[down] = heading(row, left - 1)
        wanted = (row if down is None else top - 1, column if across is None else left - 1)
        return supposed(driver, given, (index, cell_key(*wanted)))

    def run(_: int) -> Array:
        machine.check_size((bottom - top + 1) * (right - left + 1))
        for row in range(top - 1, bottom + 1):  # all that waits is asked for before the first question
            for column in range(left - 1, right + 1) if row == top - 1 else (left - 1,):
                heading(row, column)
        return tuple(tuple(one(row, column) for column in range(left, right + 1)) for row in range(top, bottom + 1))

    return run


def input_cell(index: int, text: str) -> Place | None:
    """An input cell, which is on the data table's own sheet."""
    area = read_ref(text) if text else None
    return (index, cell_key(*area[:2])) if area else None


def supposed(driver: Driver, given: Mapping[Place, Scalar], wanted: Place) -> Scalar:
    """The value of a cell, supposing other values for some cells. Taints the running formula as the cell is tainted."""
    machine = driver.machine
    with put_back(driver):
        for (index, key), value in given.items():
            machine.stores[index][key] = value
        index, key = wanted
        if machine.stores[index].get(key) is PENDING:
            driver.settle(driver.owning(wanted), Pending([]))
        value = machine.stores[index].get(key)
    machine.check_time()
    return machine.special(index, key, value) if value.__class__ is Special else value


@contextmanager
def put_back(driver: Driver) -> Iterator[None]:
    """All formula cells wait meanwhile; afterwards everything is as before."""
    machine = driver.machine
    if machine.supposing:
        raise Unsupported("a data table that depends on another one")
    kept = (driver.open, driver.circles, driver.grown)
    running = (machine.sheet, machine.key, machine.taint, machine.drawing)
    known = (machine.areas, machine.kept_cells, machine.filled, machine.whole, machine.remarks)
    stores, owners = [store.copy() for store in machine.stores], [each.copy() for each in machine.owners]
    driver.open, driver.circles, driver.grown = {}, Circles(driver), {}
    machine.areas, machine.filled, machine.whole, machine.remarks = {}, {}, {}, {}
    machine.supposing = True
    for store, formulas, owned in zip(machine.stores, machine.formulas, machine.owners, strict=True):
        store.update(dict.fromkeys(formulas, PENDING))
        store.update(dict.fromkeys(owned, PENDING))
    try:
        yield
    finally:
        machine.supposing = False
        for store, before in zip(machine.stores, stores, strict=False):  # sheets of other books may have been added
            store.clear()
            store.update(before)
        machine.owners[: len(owners)] = owners
        driver.open, driver.circles, driver.grown = kept
        machine.sheet, machine.key, machine.taint, machine.drawing = running
        machine.areas, machine.kept_cells, machine.filled, machine.whole, machine.remarks = known
