"""Operators as closures: numbers met on both sides are worked on at once, all else goes the way of operators.py."""

from __future__ import annotations

import operator
from collections.abc import Callable
from typing import Any, TypeAlias

from cellsection.workbook.coercion import NUM, compared
from cellsection.workbook.machine import Code
from cellsection.workbook.operators import BINARY, snapped
from cellsection.workbook.operators import spread as spread_over

__all__ = ["binary_code", "chain_code", "snapping"]

Apply: TypeAlias = Callable[[Any, Any], Any]


def otherwise(apply: Apply, a: Any, b: Any) -> Any:
    """An operator where its operands are not both numbers: turned into what it wants, or arrays gone through."""
    if a.__class__ is tuple or b.__class__ is tuple:
        return spread_over(apply, (a, b))
    return apply(a, b)


def plus(left: Code, right: Code) -> Code:
    """The sum of two numbers."""
    apply = BINARY["+"]

    def run(k: int) -> Any:
        a, b = left(k), right(k)
        if a.__class__ is float and b.__class__ is float:
            x = a + b
            return x if x - x == 0.0 else NUM
        return otherwise(apply, a, b)

    return run


def minus(left: Code, right: Code) -> Code:
    """The difference of two numbers."""
    apply = BINARY["-"]

    def run(k: int) -> Any:
        a, b = left(k), right(k)
        if a.__class__ is float and b.__class__ is float:
            x = a - b
            return x if x - x == 0.0 else NUM
        return otherwise(apply, a, b)

    return run


def times(left: Code, right: Code) -> Code:
    """The product of two numbers."""
    apply = BINARY["*"]

    def run(k: int) -> Any:
        a, b = left(k), right(k)
        if a.__class__ is float and b.__class__ is float:
            x = a * b
            return x if x - x == 0.0 else NUM
        return otherwise(apply, a, b)

    return run


def over(left: Code, right: Code) -> Code:
    """The quotient of two numbers."""
    apply = BINARY["/"]

    def run(k: int) -> Any:
        a, b = left(k), right(k)
        if a.__class__ is float and b.__class__ is float and b != 0.0:
            x = a / b
            return x if x - x == 0.0 else NUM
        return otherwise(apply, a, b)

    return run


def comparing(sign: str, test: Callable[[Any, Any], bool]) -> Callable[[Code, Code], Code]:
    """A comparison. Numbers that differ by more than the 15th digit need no closer look."""
    apply = BINARY[sign]

    def made(left: Code, right: Code) -> Code:
        def run(k: int) -> Any:
            a, b = left(k), right(k)
            if a.__class__ is float and b.__class__ is float:
                return test(a, b) if a == b or abs(a - b) > 1e-14 * abs(a) else test(compared(a, b), 0)
            return otherwise(apply, a, b)

        return run

    return made


DIRECT: dict[str, Callable[[Code, Code], Code]] = {
    "+": plus,
    "-": minus,
    "*": times,
    "/": over,
    "=": comparing("=", operator.eq),
    "<>": comparing("<>", operator.ne),
    "<": comparing("<", operator.lt),
    ">": comparing(">", operator.gt),
    "<=": comparing("<=", operator.le),
    ">=": comparing(">=", operator.ge),
}


def binary_code(sign: str, left: Code, right: Code) -> Code:
    """An operator between two single values."""
    direct = DIRECT.get(sign)
    if direct is not None:
        return direct(left, right)
    apply = BINARY[sign]
    return lambda k: otherwise(apply, left(k), right(k))


def chain_code(first: Code, steps: list[tuple[str, Code]]) -> Code:
    """Operators one after another, a + b - c & ...: a loop, so that long sums need no deep stack."""
    work = [(BINARY[sign], code) for sign, code in steps]

    def run(k: int) -> Any:
        a = first(k)
        for apply, code in work:
            a = otherwise(apply, a, code(k))
        return a

    return run


def snapping(sign: str, left: Code, right: Code) -> Code:
    """The last addition or subtraction of a formula, see operators.snapped."""
    apply = BINARY[sign]

    def run(k: int) -> Any:
        a, b = left(k), right(k)
        if a.__class__ is tuple or b.__class__ is tuple:
            return spread_over(apply, (a, b))
        return snapped(apply(a, b), a)

    return run
