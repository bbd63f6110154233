"""The syntax tree of a formula: what both spellings, the application's and OpenFormula's, are read into.

A reference keeps its coordinates relative where the formula says so, so that one tree serves every cell a shared
formula fills: `Coordinate(-2, True)` is two rows (or columns) before the formula's own cell, `Coordinate(7, False)` is
row (or column) 7. A whole column has no rows.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple, TypeAlias

from cellsection.workbook.values import Scalar

__all__ = [
    "ArrayConstant",
    "Binary",
    "Call",
    "Constant",
    "Coordinate",
    "Invoke",
    "Join",
    "Missing",
    "Name",
    "Node",
    "Reference",
    "Spill",
    "Structured",
    "Unary",
]


class Coordinate(NamedTuple):
    """A row or a column: an offset from the formula's own cell, or a number counted from 1."""

    number: int
    relative: bool


@dataclass(frozen=True, slots=True)
class Constant:
    """A number, text, logical or error written in the formula."""

    value: Scalar


@dataclass(frozen=True, slots=True)
class Missing:
    """An argument left empty between its separators."""


@dataclass(frozen=True, slots=True)
class ArrayConstant:
    """{1,2;3,4}"""

    rows: tuple[tuple[Scalar, ...], ...]


@dataclass(frozen=True, slots=True)
class Reference:
    """A cell, an area, whole rows or columns; on the own sheet, another, several (3-D) or another book's."""

    top: Coordinate | None
    left: Coordinate | None
    bottom: Coordinate | None
    right: Coordinate | None
    sheet: str | None = None
    last_sheet: str | None = None
    book: str | None = None

    @property
    def single(self) -> bool:
        """Whether it is written as one cell."""
        return self.top == self.bottom and self.left == self.right and self.top is not None and self.left is not None


@dataclass(frozen=True, slots=True)
class Name:
    """A defined name, a table or a parameter of LET and LAMBDA; perhaps of one sheet or another book."""

    text: str
    sheet: str | None = None
    book: str | None = None


@dataclass(frozen=True, slots=True)
class Structured:
    """Table[[#Headers],[first]:[last]]; `this_row` where it is read in the formula's own row."""

    table: str
    items: tuple[str, ...]
    first: str | None
    last: str | None


@dataclass(frozen=True, slots=True)
class Unary:
    """A sign, the per cent behind an operand, or @ (one value out of an area)."""

    sign: str
    operand: Node


@dataclass(frozen=True, slots=True)
class Binary:
    """An operator between two operands."""

    sign: str
    left: Node
    right: Node
    bracketed: bool = False


@dataclass(frozen=True, slots=True)
class Join:
    """Reference operators: ":" the area spanned, " " the area common, "~" both together."""

    sign: str
    left: Node
    right: Node


@dataclass(frozen=True, slots=True)
class Spill:
    """A1#: the area a dynamic array formula fills."""

    anchor: Node


@dataclass(frozen=True, slots=True)
class Call:
    """A function call; `name` without file prefixes, upper case."""

    name: str
    arguments: tuple[Node, ...]


@dataclass(frozen=True, slots=True)
class Invoke:
    """A call of whatever value the callee gives: LAMBDA(x, x*2)(3)."""

    callee: Node
    arguments: tuple[Node, ...]


Node: TypeAlias = (
    Constant | Missing | ArrayConstant | Reference | Name | Structured | Unary | Binary | Join | Spill | Call | Invoke
)
