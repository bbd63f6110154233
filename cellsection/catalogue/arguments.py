"""How each kind of argument is read from what a cell hands over: in one place, so that all functions agree.

A host hands over a number, text, logical, None (blank, or left out), or rows of those. A single cell counts as a
1 x 1 table where a table is wanted, and a 1 x 1 table as a single cell where a single value is wanted.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING, Any, NamedTuple, TypeAlias

from cellsection.errors import InputError
from cellsection.section.headers import quoted
from cellsection.section.parts import read_rows
from cellsection.section.rows import PartRow, number_fault

if TYPE_CHECKING:
    from cellsection.section.part import Part

__all__ = [
    "Argument", "ReadBlock", "anything", "block", "blocks", "choice", "column", "number", "position", "table", "words",
]  # fmt: skip

Cell: TypeAlias = float | str | bool | None
Raw: TypeAlias = Cell | Sequence[Sequence[Cell]]
PLAIN = frozenset((float, int, str, bool, type(None)))


class ReadBlock(NamedTuple):
    """A parts block as a function gets it: its rows, the parts they make, and its length unit ("" without one)."""

    rows: tuple[PartRow, ...]
    parts: tuple[Part, ...]
    unit: str


@dataclass(frozen=True, slots=True)
class Argument:
    """An argument of a cell function.

    kind : what it is, in a word or two, for the manual
    reader : turns what the cell hands over into what the formula takes
    dimension : L, L², ° or "" where it has none
    default : what stands for it where it is left out, as the manual writes it
    """

    name: str
    kind: str
    reader: Callable[[Raw], Any]
    help: str
    dimension: str = ""
    optional: bool = False
    default: str = ""
    repeats: bool = False

    def read(self, raw: Raw, *, given: bool, number: int = 1) -> Any:
        """The argument's value for the formula; None where it is left out or blank and may be.

        Raises InputError that names the argument (and which of the repeated ones).
        """
        name = f"{self.name} {number}" if self.repeats else self.name
        value = single(raw)
        if value is None or value == "":
            if self.optional:
                return None
            state = "is blank" if given else "is missing"
            raise InputError(f"the argument {state}", remedy=f"Give {self.help}", argument=name)
        try:
            return self.reader(raw)
        except InputError as problem:
            if problem.argument:
                raise
            raise InputError(
                problem.fault, remedy=problem.remedy, argument=name, row=problem.row, column=problem.column
            ) from None


def single(raw: Raw) -> Any:
    """The value of a single cell, also where it comes as a table of one; a larger table as it is."""
    if isinstance(raw, (tuple, list)) and len(raw) == 1 and len(raw[0]) == 1:
        return raw[0][0]
    return raw


def one_value(raw: Raw) -> Any:
    """The value of a single cell, where a range will not do."""
    value = single(raw)
    if isinstance(value, (tuple, list)):
        raise InputError("a range stands where one value should", remedy="Point at one cell")
    return value


def rows_of(raw: Raw) -> tuple[tuple[Cell, ...], ...]:
    """A table, also where it is a single cell."""
    if isinstance(raw, (tuple, list)):
        return tuple(tuple(row) for row in raw)
    return ((raw,),)  # type: ignore[return-value]


def plain_number(cell: Any, row: int | None = None, column: str = "") -> float:
    """A cell that must hold a number."""
    fault = number_fault(cell)
    if fault:
        remedy = "Retype as a number" if isinstance(cell, str) and cell.strip() else "Enter a number"
        raise InputError(fault, remedy=remedy, row=row, column=column)
    return float(cell)


def read_parts(raw: Raw) -> ReadBlock:
    """A parts block. Impossible dimensions are refused here too, before a block is moved or joined.

    A book asks much of few blocks, so those met last are kept as they were read.
    """
    rows = rows_of(raw)
    kinds = tuple(tuple(type(cell) for cell in row) for row in rows)
    if PLAIN.issuperset(kind for row in kinds for kind in row):
        return kept(rows, kinds)
    return kept.__wrapped__(rows, kinds)


@lru_cache(maxsize=64)
def kept(table: tuple[tuple[Cell, ...], ...], kinds: tuple[tuple[type, ...], ...]) -> ReadBlock:  # noqa: ARG001
    """A block read. `kinds` keeps apart what Python holds for equal, TRUE and 1."""
    rows, unit = read_rows(table)
    return ReadBlock(rows, tuple(row.part() for row in rows), unit)


def block(name: str, text: str = "the parts block: the range with its header row") -> Argument:
    """A parts block."""
    return Argument(name, "parts block", read_parts, text)


def blocks(name: str, text: str) -> Argument:
    """Parts blocks, one or more."""
    return Argument(name, "parts blocks", read_parts, text, repeats=True)


def number(name: str, text: str, dimension: str = "", default: str = "", *, optional: bool = False) -> Argument:
    """A number."""

    def read(raw: Raw) -> float:
        return plain_number(one_value(raw))

    return Argument(name, "number", read, text, dimension, optional or bool(default), default)


def choice(name: str, text: str, options: Sequence[str]) -> Argument:
    """One of a few words."""

    def read(raw: Raw) -> str:
        value = one_value(raw)
        if not isinstance(value, str) or value.strip().lower() not in options:
            raise InputError(
                f"{quoted(value)} is not one of {', '.join(options)}", remedy=f"Choose from {', '.join(options)}"
            )
        return value.strip().lower()

    return Argument(name, "word", read, text)


def words(name: str, text: str, options: Sequence[str], default: str) -> Argument:
    """A word out of a list, or a range of them; given to the formula as rows, or one word alone."""
    known = {option.casefold(): option for option in options}

    def one(cell: Any, row: int | None) -> str:
        option = known.get(cell.strip().casefold()) if isinstance(cell, str) else None
        if option is None:
            raise InputError(f"{quoted(cell)} is no symbol here", remedy=f"Choose from {', '.join(options)}", row=row)
        return option

    def read(raw: Raw) -> str | tuple[tuple[str, ...], ...]:
        value = single(raw)
        if not isinstance(value, (tuple, list)):
            return one(value, None)
        return tuple(tuple(one(cell, k) for cell in row) for k, row in enumerate(value, start=1))

    return Argument(name, "word or words", read, text, "", True, default)


def table(name: str, text: str, dimension: str, *, blanks: bool = False) -> Argument:
    """A table of numbers; `blanks` where cells may be left blank (None)."""

    def read(raw: Raw) -> tuple[tuple[float | None, ...], ...]:
        return tuple(
            tuple(
                None if blanks and (cell is None or cell == "") else plain_number(cell, r, str(c))
                for c, cell in enumerate(row, start=1)
            )
            for r, row in enumerate(rows_of(raw), start=1)
        )

    return Argument(name, "numbers", read, text, dimension)


def column(name: str, text: str, dimension: str = "", default: str = "", *, optional: bool = False) -> Argument:
    """A value for all parts, or a column with one for each; read as it is, for the parts reader to judge."""

    def read(raw: Raw) -> tuple[Cell, ...]:
        rows = rows_of(raw)
        if len(rows) == 1:
            return rows[0]
        if any(len(row) != 1 for row in rows):
            raise InputError("more than one column is given", remedy="Give one value, or one column of values")
        return tuple(row[0] for row in rows)

    return Argument(name, "value or column", read, text, dimension, optional or bool(default), default)


def position(name: str, text: str) -> Argument:
    """A part, by its label or its number."""

    def read(raw: Raw) -> float | str:
        value = one_value(raw)
        return value.strip() if isinstance(value, str) else plain_number(value)

    return Argument(name, "label or number", read, text)


def anything(name: str, text: str) -> Argument:
    """A value of any kind."""

    def read(raw: Raw) -> Cell:
        return one_value(raw)  # type: ignore[no-any-return]

    return Argument(name, "value", read, text)
