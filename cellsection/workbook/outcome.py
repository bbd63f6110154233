"""What became of the cells, handed out: each formula cell with its saved and its new value."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial
from typing import TYPE_CHECKING

from cellsection.workbook.book import column_letters
from cellsection.workbook.figures import as_shown
from cellsection.workbook.keys import position
from cellsection.workbook.machine import Special
from cellsection.workbook.relative import shown_text
from cellsection.workbook.results import FormulaCell, Status

if TYPE_CHECKING:
    from cellsection.workbook.recalculate import Driver

__all__ = ["formula_cells"]


def formula_cells(driver: Driver, index: int) -> Iterator[FormulaCell]:
    """The formula cells of a sheet, row by row, the areas of array formulas included."""
    machine = driver.machine
    sheet, store = machine.book.sheets[index], machine.stores[index]
    owners, formulas, saved = machine.owners[index], machine.formulas[index], sheet.values
    figures = machine.book.format == "ods"
    name, compiled, filled = sheet.name, driver.by_formula[index], machine.filled
    letters = [column_letters(column) for column in range(machine.extent[index][1] + 1)]
    for key in sorted({*formulas, *owners}) if owners else sorted(formulas):
        place = row, column = position(key)
        owner = owners.get(key, key) if owners else key
        formula = formulas[owner]
        form = compiled.get(formula)
        notes = form.notes if form else ()
        if (remark := machine.remarks.get((index, owner))) is not None:
            notes = (*notes, remark)
        status, reason, value = Status.RECALCULATED, "", store.get(key)
        if value.__class__ is Special:
            if value.taint is not None:
                status, reason = value.taint.status, value.taint.reason
            value = value.value
        if figures and place in saved:
            value = as_shown(value, saved[place])
        yield FormulaCell(
            name,
            f"{letters[column]}{row}",
            saved.get(place),
            value,
            status,
            form.call if form else "",
            reason,
            notes,
            place in saved,
            partial(shown_text, formula, place if owner == key else position(owner)),
            machine.whole.get((index, key)),
            filled.get((index, key)) if filled else None,
        )
