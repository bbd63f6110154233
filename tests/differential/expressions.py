"""Formulas as trees: each piece knows its text, what form it has, and, where it is written or read, its value."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from cellsection.workbook.coercion import text_number
from cellsection.workbook.values import Array, ErrorValue, Scalar

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["Piece", "kind_of", "kinds_in", "shape"]


@dataclass(frozen=True, slots=True)
class Piece:
    """A piece of a formula.

    form : "typed", "cell", "range", "column", "constant" (an array constant), "name", "missing", "call" or "operator"
    head : the function or the operator of a call
    value : what a typed value, a cell or an area holds; of a call it is filled in from the cell that repeats it
    """

    form: str
    text: str
    head: str = ""
    arguments: tuple[Piece, ...] = ()
    value: Scalar | Array = None

    def calls(self) -> Iterator[Piece]:
        """The calls and operations within, not the piece itself."""
        for each in self.arguments:
            if each.head:
                yield each
                yield from each.calls()


def kind_of(value: Scalar) -> str:
    """The kind of a single value, in the words of the report."""
    if value is None:
        return "blank"
    if isinstance(value, bool):
        return "logical"
    if isinstance(value, ErrorValue):
        return "error"
    if isinstance(value, str):
        if value == "":
            return "empty text"
        return "text" if text_number(value) is None else "numeric text"
    return "number"


def kinds_in(value: Scalar | Array) -> frozenset[str]:
    """The kinds of value in an area or array."""
    if isinstance(value, tuple):
        return frozenset(kind_of(cell) for row in value for cell in row)
    return frozenset((kind_of(value),))


def shape(piece: Piece) -> str:
    """Form and kinds of an argument, as differences are grouped by them."""
    if piece.form == "missing":
        return "missing"
    kinds = "+".join(sorted(kinds_in(piece.value)))
    form = {"call": "result", "operator": "result"}.get(piece.form, piece.form)
    return f"{form} {kinds}"
