"""Rectangles of cells: what a reference in a formula gives, read when a function asks for its values."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Any

from cellsection.workbook.coercion import VALUE
from cellsection.workbook.keys import ACROSS, SHIFT, cell_key
from cellsection.workbook.values import Array, Scalar

if TYPE_CHECKING:
    from cellsection.workbook.machine import Machine

__all__ = ["CellArea", "as_array", "intersected", "is_union", "narrowed", "plain"]


class CellArea:
    """A rectangle of cells; see values.Area for the promise."""

    __slots__ = ("bottom", "index", "left", "machine", "right", "top")

    def __init__(self, machine: Machine, index: int, top: int, left: int, bottom: int, right: int) -> None:
        self.machine, self.index = machine, index
        self.top, self.left, self.bottom, self.right = top, left, bottom, right

    @property
    def sheet(self) -> str:
        """Name of the sheet."""
        return self.machine.names[self.index]

    @property
    def shape(self) -> tuple[int, int]:
        """Rows and columns as written."""
        return (self.bottom - self.top + 1, self.right - self.left + 1)

    @property
    def single(self) -> bool:
        """Whether it is one cell."""
        return self.top == self.bottom and self.left == self.right

    def value(self, row: int, column: int) -> Scalar:
        """The value at row, column of the area, counted from 1."""
        return self.machine.cell(self.index, cell_key(self.top + row - 1, self.left + column - 1))

    def values(self) -> Array:
        """The values, clipped to the used area of the sheet."""
        return self.machine.area_values(self.index, self.top, self.left, self.bottom, self.right)

    def whole(self) -> Array:
        """The values in the full shape, blanks where the sheet ends."""
        rows, columns = self.shape
        values = self.values()
        if len(values) == rows and (not values or len(values[0]) == columns):
            return values
        self.machine.check_size(rows * columns)
        width = len(values[0]) if values else 0
        beside = (None,) * (columns - width)
        padded = [row + beside for row in values] if beside else values
        return (*padded, *(((None,) * columns,) * (rows - len(padded))))  # the blank rows are one and the same object

    def cells(self) -> Iterator[Scalar]:
        """The values row by row."""
        for row in self.values():
            yield from row

    def resized(self, rows: int, columns: int) -> CellArea:
        """The area of another size from the same first cell."""
        return CellArea(self.machine, self.index, self.top, self.left, self.top + rows - 1, self.left + columns - 1)

    def part(self, row: int, column: int) -> CellArea:
        """One row, one column or one cell of the area, counted from 1; 0 means all of them."""
        top, bottom = (self.top + row - 1,) * 2 if row else (self.top, self.bottom)
        left, right = (self.left + column - 1,) * 2 if column else (self.left, self.right)
        return CellArea(self.machine, self.index, top, left, bottom, right)


def is_union(value: Any) -> bool:
    """Whether a result is several areas together."""
    return value.__class__ is tuple and bool(value) and value[0].__class__ is CellArea


def plain(value: Any) -> Any:
    """An area read as an array, anything else as it is."""
    if value.__class__ is CellArea:
        return value.whole()
    return VALUE if is_union(value) else value


def narrowed(key: int, value: Any) -> Any:
    """A value outside array formulas: an area gives one of its cells; an array of values stays what it is.

    So {1,2,3}*2 and LARGE(A1:A9,{1,2}) are arrays anywhere, and only references are cut down to one cell.
    """
    return value if value.__class__ is tuple and not is_union(value) else intersected(key, value)


def as_array(value: Any) -> Array:
    """A result as an array: areas are read, single values become 1 x 1."""
    value = plain(value)
    return value if value.__class__ is tuple else ((value,),)


def intersected(key: int, value: Any) -> Scalar:
    """One value out of an area: its only cell, or the one in the formula's own row or column; of an array the first."""
    if value.__class__ is tuple:
        return VALUE if not value or value[0].__class__ is CellArea else value[0][0]
    if value.__class__ is not CellArea:
        return value  # type: ignore[no-any-return]
    tall, wide = value.top != value.bottom, value.left != value.right
    row = key >> SHIFT if tall else value.top
    column = key & ACROSS if wide else value.left
    if (tall and wide) or not (value.top <= row <= value.bottom and value.left <= column <= value.right):
        return VALUE
    return value.machine.cell(value.index, cell_key(row, column))
