"""What became of the cells, handed out: each formula cell with its saved and its new value.

Nearly every cell of a sound book comes to the very value saved, and there is nothing else to say of it. Such cells are
counted and not made, until somebody asks for all of them.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from functools import partial
from typing import TYPE_CHECKING, overload

from cellsection.workbook.book import column_letters
from cellsection.workbook.figures import as_shown
from cellsection.workbook.keys import position
from cellsection.workbook.machine import Special
from cellsection.workbook.relative import shown_text
from cellsection.workbook.results import FormulaCell, Status
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.recalculate import Driver

__all__ = ["FormulaCells"]


class FormulaCells(Sequence[FormulaCell]):
    """All formula cells of a book, sheet by sheet and row by row, the areas of array formulas included."""

    def __init__(self, driver: Driver) -> None:
        self.driver = driver
        self.sheets = range(len(driver.machine.book.sheets))
        self.made: list[FormulaCell] | None = None
        self.told_apart: list[FormulaCell] | None = None

    def all(self) -> list[FormulaCell]:
        """Every cell, made when first asked for."""
        if self.made is None:
            self.made = [cell for index in self.sheets for cell in self.of_sheet(index, self.keys(index))]
        return self.made

    def __len__(self) -> int:
        """How many there are; none needs to be made for that."""
        machine = self.driver.machine
        return sum(len(machine.formulas[index].keys() | machine.owners[index].keys()) for index in self.sheets)

    @overload
    def __getitem__(self, place: int) -> FormulaCell: ...
    @overload
    def __getitem__(self, place: slice) -> list[FormulaCell]: ...
    def __getitem__(self, place: int | slice) -> FormulaCell | list[FormulaCell]:
        """A cell, or several, by place."""
        return self.all()[place]

    def __iter__(self) -> Iterator[FormulaCell]:
        """The cells one after another."""
        return iter(self.all())

    def apart(self) -> list[FormulaCell]:
        """The cells of which there is more to say than that they hold; see Recalculation.apart."""
        if self.told_apart is None:
            self.told_apart = [cell for index in self.sheets for cell in self.of_sheet(index, self.keys_apart(index))]
        return self.told_apart

    def keys(self, index: int) -> Iterable[int]:
        """The keys of a sheet's formula cells, row by row."""
        machine = self.driver.machine
        return sorted(machine.formulas[index].keys() | machine.owners[index].keys())

    def keys_apart(self, index: int) -> Iterable[int]:
        """The keys of those that are to be told apart."""
        machine, compiled = self.driver.machine, self.driver.by_formula[index]
        sheet, store, formulas = machine.book.sheets[index], machine.stores[index], machine.formulas[index]
        saved = sheet.values.get
        plain = {formula for formula, form in compiled.items() if not form.notes and form.call[:3].upper() != "CS_"}
        found = set(machine.owners[index])
        found |= {key for place, key in machine.remarks if place == index}
        found |= {key for place, key in machine.whole if place == index}
        found |= {key for place, key in machine.filled if place == index}  # a spill may have shrunk to its own cell
        # The positions of the book's cells and the keys of the machine's come in one order: they are made so.
        for place, (key, formula) in zip(sheet.formulas, formulas.items(), strict=True):
            value, before = store[key], saved(place)
            alike = value == before and value.__class__ is before.__class__ is not ErrorValue
            if not alike or before is None or formula not in plain:
                found.add(key)
        return sorted(found)

    def of_sheet(self, index: int, keys: Iterable[int]) -> Iterator[FormulaCell]:
        """Some of the formula cells of a sheet."""
        machine = self.driver.machine
        sheet, store = machine.book.sheets[index], machine.stores[index]
        owners, formulas, saved = machine.owners[index], machine.formulas[index], sheet.values
        figures = machine.book.format == "ods"
        name, compiled, filled = sheet.name, self.driver.by_formula[index], machine.filled
        letters = [column_letters(column) for column in range(machine.extent[index][1] + 1)]
        for key in keys:
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
                place,
            )
