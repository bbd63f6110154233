"""Calls of builtins and of the host's functions: each argument taken as the function declares it."""

from __future__ import annotations

from collections.abc import Callable
from math import isfinite
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import FormulaError, InputError
from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.areas import CellArea, as_array, is_union, narrowed
from cellsection.workbook.builtins.registry import Builtin, ErrorResult
from cellsection.workbook.coercion import NUM, VALUE, logical_of, number_of, text_of
from cellsection.workbook.machine import Code, Machine, Taint, Unsupported
from cellsection.workbook.nodes import Call, Missing
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.results import Status
from cellsection.workbook.values import Array, ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Compiler

__all__ = ["builtin_call", "given_back", "host_call"]

Taker: TypeAlias = Callable[[Any], Any]  # turns what was found into what the function wants, or into an error value

EMPTY = {"number": 0.0, "measure": 0.0, "text": "", "logical": False}
SCALAR_KINDS = frozenset(("number", "measure", "text", "logical", "value", "any"))


def measured(value: Any) -> Any:
    """A number, where a logical counts as none."""
    return VALUE if value.__class__ is bool else number_of(value)


TAKERS: dict[str, Taker] = {"number": number_of, "measure": measured, "text": text_of, "logical": logical_of}


def given_back(result: Any) -> Any:
    """What a function returns as the evaluator keeps it: numbers are finite floats."""
    kind = result.__class__
    if kind is float:
        return result if result - result == 0.0 else NUM
    if kind is int:
        return float(result)
    if kind is tuple and not is_union(result):
        proper = (str, bool, None.__class__, ErrorValue)
        for row in result:
            if any(x - x != 0.0 if x.__class__ is float else x.__class__ not in proper for x in row):
                return tuple(tuple(map(given_back, each)) for each in result)
    return result


def reference_of(value: Any) -> Any:
    """What a function that takes a reference is passed: an area or several, an error value where there is none."""
    if value.__class__ is CellArea or value.__class__ is ErrorValue or is_union(value):
        return value
    return VALUE


def array_of(value: Any) -> Any:
    """What a function that takes an array is passed."""
    return value if value.__class__ is tuple and not is_union(value) else as_array(value)


def same(value: Any) -> Any:
    """A value as it is."""
    return value


def check_count(name: str, given: int, least: int, most: int | None) -> None:
    """A wrong number of arguments raises FormulaError."""
    if given < least or (most is not None and given > most):
        upper = "any number of" if most is None else f"at most {most}"
        raise FormulaError(
            f"{name} takes at least {least} and {upper} arguments, not {given}",
            construct=f"{name} with {given} arguments",
        )


def builtin_call(compiler: Compiler, declared: Builtin, node: Call, spread: bool, as_value: bool) -> Code:
    """Code for a call of a builtin. A wrong number of arguments raises FormulaError."""
    check_count(declared.name, len(node.arguments), declared.least, declared.most)
    if declared.repeats > 1 and (len(node.arguments) - len(declared.kinds)) % declared.repeats:
        raise FormulaError(
            f"{declared.name} takes its last arguments in pairs, and {len(node.arguments)} arguments leave one over",
            construct=f"{declared.name} with {len(node.arguments)} arguments",
        )
    kinds = [declared.kind(k) for k in range(len(node.arguments))]
    codes: list[Code] = []
    for kind, argument in zip(kinds, node.arguments, strict=True):
        if isinstance(argument, Missing):
            codes.append(constantly(EMPTY.get(kind)))
        elif kind in SCALAR_KINDS:
            codes.append(compiler.value(argument, spread))
        else:
            codes.append(compiler.operand(argument, spread or kind in ("array", "table")))
    work = protected(compiler.machine, declared, kinds)
    call = lifted(work, codes, kinds)
    if not as_value:
        return call
    return compiler.read(call, True) if spread else reading(call)


def protected(machine: Machine, declared: Builtin, kinds: list[str]) -> Callable[[list[Any]], Any]:
    """The call proper, for single values: arguments taken as declared, errors passed on, a proper result given back."""
    function, name = declared.call, declared.name
    # place of an argument, what turns it into what is declared, whether a number is that already, whether errors stop
    steps: list[tuple[int, Taker, bool, bool]] = []
    for place, kind in enumerate(kinds):
        if kind in SCALAR_KINDS:
            if kind != "any":
                steps.append((place, TAKERS.get(kind, same), kind in ("number", "measure", "value"), True))
        elif kind in ("array", "reference"):
            steps.append((place, array_of, False, False) if kind == "array" else (place, reference_of, False, True))
    before: tuple[Any, ...] = (machine,) if declared.context else ()
    volatile: Taint | None = None
    if declared.volatile and declared.volatile not in machine.known:
        volatile = Taint(Status.VOLATILE, f"{name} changes from one calculation to the next")

    def work(values: list[Any]) -> Any:
        for place, take, number_is, stops in steps:
            value = values[place]
            if number_is and value.__class__ is float:
                continue
            value = values[place] = take(value)
            if stops and value.__class__ is ErrorValue:
                return value
        if volatile is not None:
            machine.stain(volatile)
        try:
            result = function(*before, *values)
        except ErrorResult as stop:
            return stop.error
        except OverflowError:
            return NUM
        except (ArithmeticError, ValueError, TypeError, LookupError, AttributeError) as problem:
            # A fault of the builtin, not of the book: reported as what it is, never as a value.
            raise Unsupported(f"function {name} with these arguments ({problem})") from problem
        if result.__class__ is bool or result.__class__ is str:
            return result
        if result.__class__ is tuple and len(result) > 1 and result[0].__class__ is tuple:
            machine.check_size(len(result) * len(result[0]))
        return given_back(result)

    return work


def constantly(value: Any) -> Code:
    """Code that gives one value."""
    return lambda k: value


def reading(call: Code) -> Code:
    """A call whose result is wanted as one value."""

    def run(k: int) -> Any:
        result = call(k)
        return narrowed(k, result) if result.__class__ is CellArea or result.__class__ is tuple else result

    return run


def lifted(work: Callable[[list[Any]], Any], codes: list[Code], kinds: list[str]) -> Code:
    """The call as a whole; made for each element where an argument that takes a single value meets an array."""
    scalar_at = [place for place, kind in enumerate(kinds) if kind in SCALAR_KINDS]
    if not scalar_at:
        return lambda k: work([code(k) for code in codes])

    def run(k: int) -> Any:
        values = [code(k) for code in codes]
        for place in scalar_at:
            if values[place].__class__ is tuple:
                break
        else:
            return work(values)

        def element(*parts: Any) -> Any:
            now = values.copy()
            for place, part in zip(scalar_at, parts, strict=True):
                now[place] = part
            result = work(now)
            if result.__class__ is CellArea:
                return result.value(1, 1)
            return result[0][0] if result.__class__ is tuple and result else result

        return spread_over(element, [values[place] for place in scalar_at])

    return run


# ---- the host's functions


def host_call(compiler: Compiler, node: Call, function: Callable[..., Any]) -> Code:
    """Code for a call of a function the host hands in; its InputError becomes an error value that says why.

    The function is passed numbers, texts, logicals, None for a blank, and tuples of row tuples of these; an error value
    among them goes first, without a call.
    """
    codes = [compiler.operand(argument, True) for argument in node.arguments]
    machine, name = compiler.machine, node.name

    def run(k: int) -> Any:
        arguments: list[Any] = []
        for code in codes:
            value = handed_over(code(k))
            error = first_error(value) if value.__class__ is tuple else value
            if error.__class__ is ErrorValue:
                return error
            arguments.append(value)
        try:
            return received(function(*arguments))
        except InputError as problem:
            return ErrorValue("#VALUE!", f"{name}: {problem}", machine.address(machine.sheet, k))
        except Exception as fault:
            # A fault of the function spoils its own cell and what depends on it, not the whole book; it is reported.
            raise Unsupported(f"{name} fails at this input ({type(fault).__name__}: {fault})") from fault

    return run


def handed_over(value: Any) -> Any:
    """An argument as the host's function is passed it: full shape, whole columns and rows clipped to what is used."""
    if value.__class__ is CellArea:
        if value.single:
            return value.value(1, 1)
        rows, columns = value.shape
        return (value.values() or ((None,),)) if rows == LAST_ROW or columns == LAST_COLUMN else value.whole()
    return VALUE if is_union(value) or callable(value) else value


def first_error(rows: Array) -> ErrorValue | None:
    """The first error value in an array, row by row."""
    if not any(ErrorValue in set(map(type, row)) for row in rows):
        return None
    return next(cell for row in rows for cell in row if isinstance(cell, ErrorValue))


def received(result: Any) -> Any:
    """What the host's function gave: a single value or rows of them, numbers as finite floats."""
    if isinstance(result, (tuple, list)):
        return tuple(tuple(received(cell) for cell in row) for row in result)
    if isinstance(result, (bool, str)) or result is None:
        return result
    number = float(result)
    return number if isfinite(number) else NUM
