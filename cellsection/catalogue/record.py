"""How a cell function is declared: one frozen record, from which every host, the manual and the tests follow.

A record is checked when it is made, so a bad one stops the import with a line that says what is wrong with it.
"""

from __future__ import annotations

import inspect
import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from math import isfinite
from typing import Any, TypeAlias

from cellsection.catalogue.arguments import Argument, Raw
from cellsection.errors import InputError

__all__ = ["CellFunction", "Example", "Returns", "Table"]

Cell: TypeAlias = float | str | bool | None
Table: TypeAlias = tuple[tuple[Cell, ...], ...]

# What all hosts take (Excel's function wizard and the classic add-in are the narrowest).
NAME = re.compile(r"CS_[A-Z0-9_]+")
ARGUMENT_NAME = re.compile(r"[a-z][a-z0-9_]*")
LONGEST_HELP = 255
WIZARD = 254  # number of arguments plus the length of their names
# Words the Excel side's macro language keeps for itself, as far as an argument might be so called.
RESERVED_WORDS = """
    and as call case caller const date dim do each else end enum event exit false for friend function get goto if in is
    let like loop me mod new next not nothing null of on option optional or print private property public rem resume
    return select set static step stop string sub then to true type until variant wend while with xor
"""
RESERVED = frozenset(RESERVED_WORDS.split())


@dataclass(frozen=True, slots=True)
class Returns:
    """What a function gives: how it looks in cells, and what it means."""

    layout: str
    help: str


@dataclass(frozen=True, slots=True)
class Example:
    """A worked example: cells by the address of their first cell, the formula, and its result checkable by hand.

    why : the hand calculation, in one line
    """

    formula: str
    cells: Mapping[str, Table]
    result: Cell | Table
    why: str


@dataclass(frozen=True)
class CellFunction:
    """A cell function as every host sees it.

    formula : the Python function; its parameters are the arguments by name
    source : where the formula comes from
    """

    name: str
    formula: Callable[..., Any]
    arguments: tuple[Argument, ...]
    returns: Returns
    help: str
    source: str
    example: Example

    def __post_init__(self) -> None:
        fault = self._fault()
        if fault:
            raise ValueError(f"{self.name}: {fault}")

    def _fault(self) -> str:
        """What is wrong with the record, "" where nothing is."""
        parameters = list(inspect.signature(self.formula).parameters.values())
        names = [argument.name for argument in self.arguments]
        if not NAME.fullmatch(self.name):
            return "a name is CS_ and capitals, digits or underscores"
        if [parameter.name for parameter in parameters] != names:
            return f"arguments {names} differ from the formula's {[p.name for p in parameters]}"
        for argument in self.arguments:
            if not ARGUMENT_NAME.fullmatch(argument.name) or argument.name in RESERVED:
                return f"{argument.name} is no argument name in every host"
            if not argument.help or len(argument.help) > LONGEST_HELP:
                return f"the help of {argument.name} is missing or longer than {LONGEST_HELP}"
        optional = [argument.optional or argument.repeats for argument in self.arguments]
        if optional != sorted(optional):
            return "an argument that may be left out stands before one that may not"
        if any(argument.repeats for argument in self.arguments[:-1]):
            return "only the last argument may repeat"
        if any(argument.repeats for argument in self.arguments) and any(a.optional for a in self.arguments):
            return "an optional argument and a repeated one do not go together"
        if len(names) + sum(map(len, names)) > WIZARD:
            return f"too many or too long arguments for the function wizard ({WIZARD})"
        if not self.help or len(self.help) > LONGEST_HELP or "\n" in self.help:
            return f"the help is missing, longer than {LONGEST_HELP} or more than a line"
        if not self.source:
            return "no source is given"
        if not self.example.formula.startswith("=") or self.name not in self.example.formula:
            return "the example does not call the function"
        if not self.example.why:
            return "the example has no hand calculation"
        if not (self.returns.layout and self.returns.help):
            return "what it returns is not said"
        return ""

    @property
    def signature(self) -> str:
        """The call as the manual writes it: CS_TOTALS(parts, [which])."""
        shown = []
        for argument in self.arguments:
            text = f"{argument.name}, ..." if argument.repeats else argument.name
            shown.append(f"[{text}]" if argument.optional else text)
        return f"{self.name}({', '.join(shown)})"

    def call(self, *raw: Raw) -> Cell | Table:
        """The function on values as a host hands them over; the result as cells.

        raw : an argument each: a number, text, logical, None for a blank or an argument left out, or a table as a
            tuple (or list) of rows of those
        Raises InputError with argument, row, column and remedy.
        """
        fixed = [argument for argument in self.arguments if not argument.repeats]
        if len(raw) > len(self.arguments) and len(fixed) == len(self.arguments):
            raise InputError(
                f"{len(raw)} arguments are given, it takes {len(self.arguments)}", remedy=f"Write {self.signature}"
            )
        values = [
            argument.read(raw[k] if k < len(raw) else None, given=k < len(raw)) for k, argument in enumerate(fixed)
        ]
        if len(fixed) < len(self.arguments):
            last = self.arguments[-1]
            rest = raw[len(fixed) :] or (None,)
            values.extend(last.read(each, given=True, number=k) for k, each in enumerate(rest, start=1))
        return as_cells(self.formula(*values))


def as_cells(result: Any) -> Cell | Table:
    """A result as plain cells. A number that is not finite is a fault of the program, and is not handed out."""
    if isinstance(result, (tuple, list)):
        return tuple(tuple(as_cell(cell) for cell in row) for row in result)
    return as_cell(result)


def as_cell(value: Any) -> Cell:
    """One cell of a result. A blank is an empty text, since a blank out of a function shows as 0 in a cell."""
    if value is None:
        return ""
    if isinstance(value, (bool, str)):
        return value
    number = float(value)
    if not isfinite(number):
        raise InputError("the result is not a finite number", remedy="Check the size of the numbers entered")
    return number
