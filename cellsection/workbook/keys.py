"""A cell of a sheet as one whole number, so that a reference is an addition and a column is a range of numbers.

The key of a cell is its row times 32,768 plus its column, both counted from 1. Sheets have 16,384 columns at most, so a
key that leaves a sheet sideways names no cell of another row; it is simply nowhere.
"""

from __future__ import annotations

from collections.abc import Iterator

from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.book import Bounds, Position

__all__ = ["ACROSS", "DOWN", "ROWS", "SHIFT", "cell_key", "inside", "keys_of", "offset", "position", "wrapped"]

SHIFT = 15
DOWN = 1 << SHIFT  # from a cell to the one below it
ACROSS = DOWN - 1  # the part of a key that says the column
ROWS = ~ACROSS  # the part that says the row


def cell_key(row: int, column: int) -> int:
    """The key of a cell.

    >>> position(cell_key(7, 3))
    (7, 3)
    """
    return (row << SHIFT) + column


def position(key: int) -> Position:
    """Row and column of a key."""
    return (key >> SHIFT, key & ACROSS)


def inside(key: int) -> bool:
    """Whether a key lies on a sheet."""
    return 0 < key >> SHIFT <= LAST_ROW and 0 < key & ACROSS <= LAST_COLUMN


def offset(number: int, last: int) -> int:
    """The shorter way to another row or column: beyond the last one a sheet begins again, as names count on."""
    return (number + last // 2) % last - last // 2


def wrapped(key: int) -> int:
    """The key on the sheet for one that an offset has taken beyond an edge: there the sheet begins again.

    >>> position(wrapped(cell_key(3, 1) - 2))
    (3, 16383)
    """
    row, column = key >> SHIFT, key & ACROSS
    if column >= LAST_COLUMN + LAST_COLUMN // 2:  # taken off to the left, it has borrowed from the row
        row, column = row + 1, column - DOWN
    return cell_key((row - 1) % LAST_ROW + 1, (column - 1) % LAST_COLUMN + 1)


def keys_of(area: Bounds) -> Iterator[int]:
    """The keys of an area, row by row."""
    top, left, bottom, right = area
    for row in range(top, bottom + 1):
        yield from range((row << SHIFT) + left, (row << SHIFT) + right + 1)
