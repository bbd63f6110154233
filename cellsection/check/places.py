"""Addresses as the engineer reads them: `Girder!C4`, `'Crane hall'!B2`, and many of them as few rectangles."""

from __future__ import annotations

import re
from collections import defaultdict
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["address", "rectangles", "split_address"]

PLAIN = re.compile(r"[^\W\d][\w.]*")
LOOKS_LIKE_A_CELL = re.compile(r"[A-Za-z]{1,3}\d+|[Rr]\d*[Cc]\d*")
CELL = re.compile(r"\$?([A-Za-z]{1,3})\$?(\d+)")


def address(sheet: str, cell: str) -> str:
    """The address of a cell with its sheet, quoted where a formula would have to quote it.

    >>> address("Girder", "C4"), address("Crane hall", "C4"), address("B2", "C4"), address("'89", "C4")
    ('Girder!C4', "'Crane hall'!C4", "'B2'!C4", "'''89'!C4")
    """
    if PLAIN.fullmatch(sheet) and not LOOKS_LIKE_A_CELL.fullmatch(sheet):
        return f"{sheet}!{cell}"
    doubled = sheet.replace("'", "''")
    return f"'{doubled}'!{cell}"


def split_address(text: str) -> tuple[str, str]:
    """Sheet and cell of an address, quoted or not; the sheet is empty where none is written.

    >>> split_address("'Crane hall'!$C$4"), split_address("Crane hall!C4"), split_address("C4")
    (('Crane hall', 'C4'), ('Crane hall', 'C4'), ('', 'C4'))
    """
    sheet, _, cell = text.rpartition("!")
    if len(sheet) > 1 and sheet[0] == sheet[-1] == "'":
        sheet = sheet[1:-1].replace("''", "'")
    return sheet, cell.replace("$", "")


def rectangles(cells: Iterable[tuple[str, str]]) -> list[str]:
    """Cells, given as sheet and cell, gathered into as few rectangles as their columns allow; sheets keep their order.

    >>> rectangles([("Girder", "B2"), ("Girder", "B3"), ("Girder", "C2"), ("Girder", "C3"), ("Girder", "E9")])
    ['Girder!B2:C3', 'Girder!E9']
    """
    rows: dict[tuple[str, int], list[int]] = defaultdict(list)  # (sheet, column) -> its rows
    for sheet, cell in cells:
        column, row = _position(cell)
        rows[sheet, column].append(row)
    widths: dict[tuple[str, int, int], list[int]] = defaultdict(list)  # (sheet, first row, last row) -> its columns
    for (sheet, column), met in rows.items():
        for first, last in _runs(met):
            widths[sheet, first, last].append(column)
    order = {sheet: index for index, sheet in enumerate(dict.fromkeys(sheet for sheet, _ in rows))}
    found = [
        (order[sheet], top, left, bottom, right, sheet)
        for (sheet, top, bottom), columns in widths.items()
        for left, right in _runs(columns)
    ]
    return [_rectangle(sheet, top, left, bottom, right) for _, top, left, bottom, right, sheet in sorted(found)]


def _rectangle(sheet: str, top: int, left: int, bottom: int, right: int) -> str:
    first, last = f"{_letters(left)}{top}", f"{_letters(right)}{bottom}"
    return address(sheet, first if first == last else f"{first}:{last}")


def _runs(numbers: list[int]) -> list[tuple[int, int]]:
    """Numbers as runs of neighbours: [1, 2, 3, 7] is (1, 3), (7, 7)."""
    runs: list[tuple[int, int]] = []
    for number in sorted(set(numbers)):
        if runs and runs[-1][1] == number - 1:
            runs[-1] = (runs[-1][0], number)
        else:
            runs.append((number, number))
    return runs


def _position(cell: str) -> tuple[int, int]:
    met = CELL.fullmatch(cell)
    if not met:
        raise ValueError(f"{cell!r} is not the address of a cell")
    column = 0
    for letter in met[1].upper():
        column = column * 26 + ord(letter) - 64
    return column, int(met[2])


def _letters(column: int) -> str:
    letters = ""
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters
