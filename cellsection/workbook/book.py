"""A saved workbook as plain data: what the readers fill and the evaluator works on.

Cells are keyed by (row, column), counted from 1. A formula is written relative to the cell it was typed in; the
children of a shared formula hold the very same Formula object as their master, so that it is compiled once.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import Literal, TypeAlias

from cellsection.workbook.values import Scalar

__all__ = ["Book", "Bounds", "Formula", "Limits", "Position", "Sheet", "Table", "column_letters", "column_number"]

NUMBER = re.compile(r"[0-9]{1,20}(?:\.[0-9]{1,30})?(?:[Ee][+-]?[0-9]{1,2})?", re.ASCII)
Position: TypeAlias = tuple[int, int]
Bounds: TypeAlias = tuple[int, int, int, int]  # top, left, bottom, right, ends included


@dataclass(frozen=True, slots=True)
class Limits:
    """How much a book may ask for before it is refused, so that a hostile file costs seconds and not the machine."""

    unzipped_bytes: int = 1_000_000_000  # of all parts together
    ratio: int = 400  # unpacked to packed size of a part over 10 MB; real sheets reach 50
    parts: int = 20_000
    markup_bytes: int = 500_000_000  # of the parts that are read: sheets, texts, names; not pictures
    cells: int = 4_000_000  # values and formulas; one takes about 250 bytes of memory
    array_cells: int = 2_000_000  # of one array, and of all array formulas of a sheet
    formula_length: int = 100_000
    nesting: int = 500
    seconds: float = 60.0


@dataclass(slots=True, eq=False)
class Formula:
    """A formula as written in its cell, without its leading sign. Compared by identity: children share their master's.

    kind : an ordinary cell, an array formula over `area`, a data table over `area`, or missing: its shared
        formula is not in the file, or it is written in a language that is not supported, and then `text` has its prefix
    dynamic : written by an application with dynamic arrays, so that it spills instead of intersecting
    language : the spelling of references and separators
    key : its relative form, where that is known already; see relative
    """

    text: str
    row: int
    column: int
    kind: Literal["cell", "array", "data table", "missing"] = "cell"
    area: Bounds | None = None
    dynamic: bool = False
    language: Literal["excel", "openformula"] = "excel"
    key: tuple[str | int, ...] | None = None


@dataclass(slots=True)
class Sheet:
    """One sheet: constants and saved values of formula cells in `values`, formulas in `formulas`."""

    name: str
    values: dict[Position, Scalar] = field(default_factory=dict)
    formulas: dict[Position, Formula] = field(default_factory=dict)
    bottom: int = 0
    right: int = 0
    part: str = ""
    hidden: bool = False
    hidden_rows: frozenset[int] = frozenset()


@dataclass(frozen=True, slots=True)
class Table:
    """A table that structured references name: its whole area with header and totals rows."""

    name: str
    sheet: str
    area: Bounds
    columns: tuple[str, ...]
    header: bool = True
    totals: bool = False


@dataclass(slots=True)
class Book:
    """A whole workbook."""

    path: str
    format: Literal["xlsx", "ods"]
    sheets: list[Sheet] = field(default_factory=list)
    names: dict[tuple[str, str], Formula] = field(default_factory=dict)
    tables: dict[str, Table] = field(default_factory=dict)
    externals: dict[str, tuple[str, list[Sheet]]] = field(default_factory=dict)
    date1904: bool = False
    iterate: bool = False  # circles are worked off by iteration, in so many rounds, until changes are so small
    rounds: int = 100
    change_allowed: float = 0.001
    notes: list[str] = field(default_factory=list)

    def iterated(self, rounds: str, change: str) -> None:
        """The book asks for iteration, in so many rounds at most and until changes are so small; "" for the usual."""
        self.iterate = True
        if rounds.isdecimal() and rounds.isascii() and 0 < len(rounds) < 6:
            self.rounds = max(int(rounds), 1)
        if NUMBER.fullmatch(change):
            self.change_allowed = float(change)
        self.notes.append(
            f"the book asks for iterative calculation of circles, in {self.rounds:,} rounds at most, to changes of "
            f"{self.change_allowed:g} or less"
        )


def column_letters(column: int) -> str:
    """Letters of a column.

    >>> column_letters(28)
    'AB'
    """
    letters = ""
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


def column_number(letters: str) -> int:
    """Number of a column from its letters.

    >>> column_number("AB")
    28
    """
    number = 0
    for letter in letters.upper():
        number = number * 26 + ord(letter) - 64
    return number
