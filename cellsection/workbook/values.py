"""What a cell can hold, and how the applications turn one kind of value into another.

A value is a float, a str, a bool, None (a blank cell) or an ErrorValue. An array is a tuple of row tuples of values;
there is no numpy in this room. An Area is a rectangle of cells that a formula refers to.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol, TypeAlias

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["Area", "Array", "ErrorValue", "Scalar"]


@dataclass(frozen=True, slots=True)
class ErrorValue:
    """An error in a cell: its code, and for a report the reason and the cell where it arose.

    Two errors are equal when their codes are: the reason and origin only explain.
    """

    code: str
    message: str = ""
    origin: str = ""

    def __eq__(self, other: object) -> bool:
        return isinstance(other, ErrorValue) and other.code == self.code

    def __hash__(self) -> int:
        return hash(self.code)

    def __str__(self) -> str:
        return self.code


Scalar: TypeAlias = float | str | bool | ErrorValue | None
Array: TypeAlias = tuple[tuple[Scalar, ...], ...]


class Area(Protocol):
    """A rectangle of cells on one sheet, rows and columns counted from 1, ends included.

    `shape` is (rows, columns) as written, `values()` is clipped to the used area of the sheet (its rows and columns
    start at top and left; what is cut off is blank). Reading a cell that is not computed yet suspends the formula.
    """

    sheet: str
    top: int
    left: int
    bottom: int
    right: int

    @property
    def shape(self) -> tuple[int, int]:
        """Rows and columns as written."""
        ...

    def values(self) -> Array:
        """The values, clipped to the used area of the sheet."""
        ...

    def value(self, row: int, column: int) -> Scalar:
        """The value at row, column of the area, counted from 1."""
        ...

    def cells(self) -> Iterator[Scalar]:
        """The values of the clipped area, row by row; blanks are None."""
        ...
