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
from cellsection.workbook.keys import cell_key, position
from cellsection.workbook.machine import Special
from cellsection.workbook.relative import shown_text
from cellsection.workbook.results import FormulaCell, Status

if TYPE_CHECKING:
    from cellsection.workbook.book import Position
    from cellsection.workbook.recalculate import Driver
    from cellsection.workbook.results import Changes
    from cellsection.workbook.values import Scalar

__all__ = ["FormulaCells"]

PLAIN = frozenset((float, str, bool))  # classes of values of which there may be nothing to say


class FormulaCells(Sequence[FormulaCell]):
    """All formula cells of a book, sheet by sheet and row by row, the areas of array formulas included."""

    def __init__(self, driver: Driver) -> None:
        self.driver = driver
        self.sheets = range(len(driver.machine.book.sheets))
        self.made: list[FormulaCell] | None = None
        self.told_apart: list[FormulaCell] | None = None
        self.sorted: tuple[Changes, list[FormulaCell]] | None = None
        self.parted: dict[int, tuple[dict[Position, Scalar], set[int]]] = {}

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
            keys = [
                sorted((*(cell_key(*place) for place in self.changed(index)), *self.remarkable(index)))
                for index in self.sheets
            ]
            self.told_apart = [cell for index in self.sheets for cell in self.of_sheet(index, keys[index])]
        return self.told_apart

    def sorted_out(self) -> tuple[Changes, list[FormulaCell]]:
        """The changes that need no words, and the other cells that are apart; see Recalculation.sorted_out."""
        if self.sorted is None:
            names = self.driver.machine.names
            changes = {names[index]: changed for index in self.sheets if (changed := self.changed(index))}
            keys = [sorted(self.remarkable(index)) for index in self.sheets]
            self.sorted = (changes, [cell for index in self.sheets for cell in self.of_sheet(index, keys[index])])
        return self.sorted

    def pairs(self) -> Iterator[tuple[Scalar, Scalar]]:
        """The saved and the new value of each of those changes."""
        for index in self.sheets:
            saved = self.driver.machine.book.sheets[index].values
            for place, value in self.changed(index).items():
                yield saved[place], value

    def keys(self, index: int) -> Iterable[int]:
        """The keys of a sheet's formula cells, row by row."""
        machine = self.driver.machine
        return sorted(machine.formulas[index].keys() | machine.owners[index].keys())

    def changed(self, index: int) -> dict[Position, Scalar]:
        """The cells recalculated to another value, and nothing else to be said of them, with that value."""
        return self.divided(index)[0]

    def remarkable(self, index: int) -> set[int]:
        """The keys of cells of which there is more to say than their values."""
        return self.divided(index)[1]

    def divided(self, index: int) -> tuple[dict[Position, Scalar], set[int]]:
        """Both, found when first asked for."""
        if index not in self.parted:
            machine, compiled = self.driver.machine, self.driver.by_formula[index]
            sheet, store, formulas = machine.book.sheets[index], machine.stores[index], machine.formulas[index]
            saved, figures = sheet.values.get, machine.book.format == "ods"
            plain = {formula for formula, form in compiled.items() if not form.notes and form.call[:3].upper() != "CS_"}
            told = set(machine.owners[index])
            told |= {key for place, key in machine.remarks if place == index}
            told |= {key for place, key in machine.whole if place == index}
            told |= {key for place, key in machine.filled if place == index}  # a spill may have shrunk to its own cell
            changed: dict[Position, Scalar] = {}
            # The positions of the book's cells and the keys of the machine's come in one order: they are made so.
            for place, (key, formula) in zip(sheet.formulas, formulas.items(), strict=True):
                value: Scalar = store[key]
                before = saved(place)
                if figures and before is not None and value.__class__ is float:
                    value = as_shown(value, before)
                if formula not in plain or value.__class__ not in PLAIN or before is None:
                    told.add(key)
                elif (value != before or value.__class__ is not before.__class__) and key not in told:
                    changed[place] = value
            self.parted[index] = (changed, told)
        return self.parted[index]

    def of_sheet(self, index: int, keys: Iterable[int]) -> Iterator[FormulaCell]:
        """Some of the formula cells of a sheet."""
        machine = self.driver.machine
        sheet, store = machine.book.sheets[index], machine.stores[index]
        owners, formulas, saved = machine.owners[index], machine.formulas[index], sheet.values
        figures = machine.book.format == "ods"
        name, compiled = sheet.name, self.driver.by_formula[index]
        remarks, whole, filled = machine.remarks, machine.whole, machine.filled
        letters = [column_letters(column) for column in range(machine.extent[index][1] + 1)]
        for key in keys:
            place = row, column = position(key)
            owner = owners.get(key, key) if owners else key
            formula = formulas[owner]
            form = compiled.get(formula)
            notes = form.notes if form else ()
            if remarks and (remark := remarks.get((index, owner))) is not None:
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
                whole.get((index, key)) if whole else None,
                filled.get((index, key)) if filled else None,
                place,
            )
