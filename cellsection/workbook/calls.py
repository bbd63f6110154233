"""Calls of builtins and of the host's functions: each argument taken as the function declares it."""

from __future__ import annotations

from collections.abc import Callable
from math import isfinite
from typing import TYPE_CHECKING, Any

from cellsection.errors import FormulaError, InputError
from cellsection.workbook.builtins.registry import Builtin, ErrorResult
from cellsection.workbook.coercion import NUM, VALUE, logical_of, number_of, text_of
from cellsection.workbook.machine import CellArea, Machine, Taint, Unsupported
from cellsection.workbook.nodes import Call, Missing
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Code, Compiler

__all__ = ["builtin_call", "host_call"]

EMPTY = {"number": 0.0, "text": "", "logical": False}
SCALAR_KINDS = frozenset(("number", "text", "logical", "value", "any"))


def taken(kind: str, value: Any) -> Any:
    """A single value as a declared argument takes it; an error value comes back as itself."""
    if kind == "number":
        return value if value.__class__ is float else number_of(value)
    if kind == "text":
        return text_of(value)
    if kind == "logical":
        return logical_of(value)
    return value


def given_back(result: Any) -> Any:
    """What a builtin returns as the evaluator keeps it: numbers are finite floats."""
    if result.__class__ is float:
        return result if isfinite(result) else NUM
    if result.__class__ is int:
        return float(result)
    return result


def constantly(value: Any) -> Code:
    """Code that gives one value."""
    return lambda m: value


def builtin_call(compiler: Compiler, declared: Builtin, node: Call, spread: bool) -> Code:
    """Code for a call of a builtin. A wrong number of arguments raises FormulaError."""
    from cellsection.workbook.compile import as_array

    given = len(node.arguments)
    if given < declared.least or (declared.most is not None and given > declared.most):
        most = "any number of" if declared.most is None else f"at most {declared.most}"
        raise FormulaError(
            f"{declared.name} takes at least {declared.least} and {most} arguments, not {given}",
            construct=f"{declared.name} with {given} arguments",
        )
    kinds = [declared.kind(k) for k in range(given)]
    codes: list[Code] = []
    for kind, argument in zip(kinds, node.arguments, strict=True):
        if isinstance(argument, Missing):
            codes.append(constantly(EMPTY.get(kind)))
        elif kind in SCALAR_KINDS:
            codes.append(compiler.value(argument, spread))
        else:
            codes.append(compiler.operand(argument, spread or kind in ("array", "table")))
    function, wants_context = declared.call, declared.context
    scalar_at = [k for k, kind in enumerate(kinds) if kind in SCALAR_KINDS]
    passes = [kind == "any" for kind in kinds]
    name = declared.name

    def once(m: Machine, values: list[Any]) -> Any:
        """The call proper: single values coerced, errors passed on."""
        arguments: list[Any] = [m] if wants_context else []
        for kind, value, passing in zip(kinds, values, passes, strict=True):
            if kind in SCALAR_KINDS:
                value = taken(kind, value)
                if not passing and value.__class__ is ErrorValue:
                    return value
            arguments.append(value)
        try:
            return given_back(function(*arguments))
        except ErrorResult as stop:
            return stop.error
        except OverflowError:
            return NUM
        except (ArithmeticError, ValueError, TypeError, LookupError, AttributeError) as problem:
            # A fault of the builtin, not of the book: reported as what it is, never as a value.
            raise Unsupported(f"function {name} with these arguments ({problem})") from problem

    def call(m: Machine) -> Any:
        values: list[Any] = []
        lifted = False
        for kind, code in zip(kinds, codes, strict=True):
            value = code(m)
            if kind in SCALAR_KINDS:
                lifted = lifted or value.__class__ is tuple
            elif kind == "array":
                value = (
                    value
                    if value.__class__ is tuple and not (value and value[0].__class__ is CellArea)
                    else as_array(value)
                )
            elif kind == "reference" and not isinstance(value, CellArea):
                if isinstance(value, ErrorValue):
                    return value
                if not (isinstance(value, tuple) and value and isinstance(value[0], CellArea)):
                    return VALUE
            values.append(value)
        if declared.volatile:
            m.stain(Taint(Status.VOLATILE, f"{name} changes from one calculation to the next"))
        if not lifted:
            return once(m, values)

        def element(*parts: Any) -> Any:
            now = list(values)
            for k, part in zip(scalar_at, parts, strict=True):
                now[k] = part
            result = once(m, now)
            if isinstance(result, CellArea):
                result = result.value(1, 1)
            return result[0][0] if isinstance(result, tuple) else result

        return spread_over(element, [values[k] for k in scalar_at])

    return call


def host_call(compiler: Compiler, node: Call, function: Callable[..., Any]) -> Code:
    """Code for a call of a function the host hands in; its InputError becomes an error value that says why."""
    codes = [compiler.operand(argument, True) for argument in node.arguments]
    name = node.name

    def call(m: Machine) -> Any:
        arguments: list[Any] = []
        for code in codes:
            value = code(m)
            if isinstance(value, CellArea):
                whole = value.bottom - value.top >= 1_048_575 or value.right - value.left >= 16_383
                value = value.values() if whole else value.whole()
                if len(value) == 1 and len(value[0]) == 1:
                    value = value[0][0]
            if isinstance(value, ErrorValue):
                return value
            if isinstance(value, tuple) and value and isinstance(value[0], CellArea):
                return VALUE  # areas joined by a union are no one range
            if isinstance(value, tuple):
                for row in value:
                    for each in row:
                        if each.__class__ is ErrorValue:
                            return each
            arguments.append(value)
        try:
            return given_back(function(*arguments))
        except InputError as problem:
            return ErrorValue("#VALUE!", f"{name}: {problem}", m.address(m.sheet, (m.row, m.column)))
        except Exception as fault:
            # A fault of the function spoils its own cell and what depends on it, not the whole book; it is reported.
            raise Unsupported(f"{name} fails at this input ({type(fault).__name__}: {fault})") from fault

    return call
