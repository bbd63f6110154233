"""What several families share: which numbers count among the arguments, criteria, and single cells of an area."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator
from typing import Any

from cellsection.workbook.builtins.registry import ErrorResult
from cellsection.workbook.coercion import VALUE, compared, number_of, text_number
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = [
    "Wildcard", "array_of", "cells_of", "criterion", "flat", "is_area", "matcher", "numbers", "numbers_a",
    "stop_at", "whole",
]  # fmt: skip


def is_area(argument: Any) -> bool:
    """Whether an argument is a reference (an area, or a union of areas)."""
    return hasattr(argument, "values") or (
        isinstance(argument, tuple) and bool(argument) and hasattr(argument[0], "values")
    )


def cells_of(argument: Any) -> Iterator[Scalar]:
    """The cells of an area, union or array, row by row."""
    if hasattr(argument, "cells"):
        yield from argument.cells()
    elif isinstance(argument, tuple):
        for row in argument:
            yield from row.cells() if hasattr(row, "cells") else row
    else:
        yield argument


def array_of(argument: Any) -> Array:
    """A range argument as an array, clipped to the used area where it is a reference."""
    if hasattr(argument, "values"):
        return argument.values()  # type: ignore[no-any-return]
    if isinstance(argument, tuple):
        if argument and hasattr(argument[0], "values"):
            raise ErrorResult(VALUE)
        return argument
    return ((argument,),)


def whole(argument: Any) -> Array:
    """A range argument as an array in its full shape."""
    return argument.whole() if hasattr(argument, "whole") else array_of(argument)


def flat(argument: Any) -> list[Scalar]:
    """A range argument as one list, row by row."""
    return list(cells_of(argument))


def stop_at(error: Scalar) -> None:
    """Pass an error value on."""
    if isinstance(error, ErrorValue):
        raise ErrorResult(error)


def numbers(arguments: Iterable[Any]) -> Iterator[float]:
    """The numbers among range arguments: in cells and arrays only numbers count, typed values are turned into them."""
    for argument in arguments:
        if isinstance(argument, tuple) or hasattr(argument, "cells"):
            for cell in cells_of(argument):
                if cell.__class__ is float:
                    yield cell
                elif cell.__class__ is ErrorValue:
                    stop_at(cell)
        else:
            number = number_of(argument)
            stop_at(number)
            yield number  # type: ignore[misc]


def numbers_a(arguments: Iterable[Any]) -> Iterator[float]:
    """As numbers, but text in cells counts as 0 and logicals as 1 or 0 (AVERAGEA and its kin)."""
    for argument in arguments:
        if isinstance(argument, tuple) or hasattr(argument, "cells"):
            for cell in cells_of(argument):
                stop_at(cell)
                if cell is not None:
                    yield 0.0 if isinstance(cell, str) else float(cell)  # type: ignore[arg-type]
        else:
            yield from numbers((argument,))


class Wildcard:
    """A text to look for in which * stands for any text, ? for any character, and ~ takes the next one literally.

    The pieces between the stars are looked for one after the other, each from where the one before it ends: what they
    meet first serves as well as anything later, so that nothing is ever tried twice, however many stars there are.
    """

    def __init__(self, pattern: str) -> None:
        pieces, k = [""], 0
        lengths = [0]
        while k < len(pattern):
            c = pattern[k]
            if c == "*":
                pieces.append("")
                lengths.append(0)
            else:
                k += c == "~"
                literal = pattern[k : k + 1]  # a last ~ stands for nothing
                pieces[-1] += "." if c == "?" else re.escape(literal)
                lengths[-1] += len(literal)
            k += 1
        self.pieces = [re.compile(piece, re.IGNORECASE | re.DOTALL) for piece in pieces]
        self.last = lengths[-1]

    def whole(self, text: str) -> bool:
        """Whether it is all of a text."""
        if len(self.pieces) == 1:
            return self.pieces[0].fullmatch(text) is not None
        match = self.pieces[0].match(text)
        for piece in self.pieces[1:-1]:
            match = match and piece.search(text, match.end())
        at = len(text) - self.last
        return match is not None and match.end() <= at and self.pieces[-1].match(text, at) is not None

    def place(self, text: str, start: int) -> int | None:
        """Where it first stands in a text, from a place on."""
        first = match = self.pieces[0].search(text, start)
        for piece in self.pieces[1:]:
            match = match and piece.search(text, match.end())
        return first.start() if first and match else None


def matcher(text: str) -> Callable[[Scalar], bool]:
    """Whether a cell's text is the given one, wildcards honoured."""
    if any(c in text for c in "*?~"):
        pattern = Wildcard(text)
        return lambda cell: isinstance(cell, str) and pattern.whole(cell)
    folded = text.casefold()
    return lambda cell: isinstance(cell, str) and cell.casefold() == folded


ORDERS: dict[str, Callable[[int], bool]] = {
    "<=": lambda order: order <= 0,
    ">=": lambda order: order >= 0,
    "<": lambda order: order < 0,
    ">": lambda order: order > 0,
}


def criterion(wanted: Scalar) -> Callable[[Scalar], bool]:
    """What a criterion such as ">5", "<>bolt", "n*t" or 3 asks of a cell."""
    if isinstance(wanted, ErrorValue):
        return lambda cell: cell == wanted
    if wanted is None:
        return lambda cell: cell == 0.0 and not isinstance(cell, bool)
    if isinstance(wanted, bool):
        return lambda cell: cell is wanted
    if isinstance(wanted, float):
        return lambda cell: same_number(cell, wanted)
    sign = next((each for each in ("<=", ">=", "<>", "<", ">", "=") if wanted.startswith(each)), "")
    rest = wanted[len(sign) :]
    number = text_number(rest)
    if sign in ORDERS:
        return ordered(sign, rest, number)
    if sign == "<>" and number is not None:  # text that spells the number is not that number here
        return lambda cell: not (cell.__class__ is float and compared(cell, number) == 0)
    holds = equal_to(rest, number, explicit=bool(sign))
    if sign == "<>":
        return lambda cell: not holds(cell)
    return holds


def same_number(cell: Scalar, wanted: float) -> bool:
    """A number equal to the wanted one, or text that spells it."""
    if cell.__class__ is float:
        return compared(cell, wanted) == 0
    return isinstance(cell, str) and text_number(cell) == wanted


def equal_to(rest: str, number: float | None, explicit: bool) -> Callable[[Scalar], bool]:
    """The part of a criterion behind "=" or "<>", or all of it where it has no sign."""
    if rest == "":
        return (lambda cell: cell is None) if explicit else (lambda cell: cell is None or cell == "")
    if number is not None:
        return lambda cell: same_number(cell, number)
    if rest.upper() in ("TRUE", "FALSE"):
        truth = rest.upper() == "TRUE"
        return lambda cell: cell is truth
    if rest.startswith("#"):
        error = ErrorValue(rest.upper())
        return lambda cell: cell == error
    return matcher(rest)


def ordered(sign: str, rest: str, number: float | None) -> Callable[[Scalar], bool]:
    """A criterion with < or >: numbers are compared with numbers, text with text."""
    holds = ORDERS[sign]
    if not rest:  # ">" alone asks for more than nothing, which no cell is
        return lambda _: False
    if number is not None:
        return lambda cell: cell.__class__ is float and holds(compared(cell, number))
    return lambda cell: isinstance(cell, str) and cell != "" and holds(compared(cell, rest))
