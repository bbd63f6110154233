"""Calls that do not evaluate all their arguments: IF and its kin, LET, LAMBDA and the functions that take one."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import FormulaError
from cellsection.workbook.coercion import CALC, NA, VALUE, equal, logical_of, number_of
from cellsection.workbook.machine import CellArea, Machine, Unsupported
from cellsection.workbook.nodes import Call, Invoke, Missing, Name, Node
from cellsection.workbook.operators import element, width_height
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Code, Compiler

__all__ = ["FORMS", "LambdaValue", "invoke", "named_lambda"]

Form: TypeAlias = "Callable[[Compiler, Call, bool], Code]"


def arguments(node: Call, least: int, most: int | None) -> tuple[Node, ...]:
    """The arguments of a form, their number checked."""
    given = len(node.arguments)
    if given < least or (most is not None and given > most):
        raise FormulaError(
            f"{node.name} does not take {given} arguments", construct=f"{node.name} with {given} arguments"
        )
    return node.arguments


def plain(value: Any) -> Any:
    """An area read as an array, anything else as it is."""
    return value.whole() if isinstance(value, CellArea) else value


def alone(value: Any, name: str) -> Any:
    """A value that must be single; an array there is reported, not guessed at."""
    if value.__class__ is tuple:
        raise Unsupported(f"{name} over an array")
    return value


def branch(compiler: Compiler, node: Node, spread: bool) -> Code:
    """A branch: a reference stays one (IF may choose between areas), an empty one counts as 0."""
    if isinstance(node, Missing):
        return lambda m: 0.0
    return compiler.operand(node, spread)


def form_if(compiler: Compiler, node: Call, spread: bool) -> Code:
    """IF(test, then, [else]): the branch not chosen is not evaluated."""
    test_node, then_node, *rest = arguments(node, 2, 3)
    test, then = compiler.value(test_node, spread), branch(compiler, then_node, spread)
    other: Code = branch(compiler, rest[0], spread) if rest else (lambda m: False)

    def call(m: Machine) -> Any:
        value = test(m)
        if value.__class__ is tuple:
            return choose_each(m, value, (other, then))
        truth = value if value.__class__ is bool else logical_of(value)
        if truth.__class__ is ErrorValue:
            return truth
        return then(m) if truth else other(m)

    return call


def choose_each(m: Machine, tests: Any, branches: tuple[Code, Code]) -> Any:
    """IF over an array of tests: both branches are evaluated if they are needed at all."""
    truths = [[logical_of(test) for test in row] for row in tests]
    needed = {truth for row in truths for truth in row if not isinstance(truth, ErrorValue)}
    values = {truth: plain(branches[truth](m)) for truth in needed}
    shapes = [width_height(tests), *(width_height(value) for value in values.values() if isinstance(value, tuple))]
    rows, columns = max(s[0] for s in shapes), max(s[1] for s in shapes)

    def pick(r: int, c: int) -> Any:
        truth = element(tuple(map(tuple, truths)), r, c)
        return truth if isinstance(truth, ErrorValue) else element(values[bool(truth)], r, c)

    return tuple(tuple(pick(r, c) for c in range(columns)) for r in range(rows))


def guard(caught: Callable[[Any], bool]) -> Form:
    """IFERROR and IFNA."""

    def form(compiler: Compiler, node: Call, spread: bool) -> Code:
        value_node, other_node = arguments(node, 2, 2)
        value = compiler.value(value_node, spread)
        other = compiler.value(other_node, spread) if not isinstance(other_node, Missing) else lambda m: 0.0

        def call(m: Machine) -> Any:
            found = value(m)
            if found.__class__ is tuple:
                if not any(caught(each) for row in found for each in row):
                    return found
                instead = other(m)
                return spread_over(lambda a, b: b if caught(a) else a, (found, instead))
            return other(m) if caught(found) else found

        return call

    return form


def form_ifs(compiler: Compiler, node: Call, spread: bool) -> Code:
    """IFS(test, value, ...): the first test that holds."""
    nodes = arguments(node, 2, None)
    if len(nodes) % 2:
        raise FormulaError("IFS takes pairs of test and value", construct="IFS without a value")
    pairs = [
        (compiler.value(nodes[k], spread), branch(compiler, nodes[k + 1], spread)) for k in range(0, len(nodes), 2)
    ]

    def call(m: Machine) -> Any:
        for test, value in pairs:
            truth = logical_of(alone(test(m), node.name))
            if isinstance(truth, ErrorValue):
                return truth
            if truth:
                return value(m)
        return NA

    return call


def form_switch(compiler: Compiler, node: Call, spread: bool) -> Code:
    """SWITCH(value, case, result, ..., [default])"""
    nodes = arguments(node, 3, None)
    subject = compiler.value(nodes[0], spread)
    pairs = [
        (compiler.value(nodes[k], spread), branch(compiler, nodes[k + 1], spread)) for k in range(1, len(nodes) - 1, 2)
    ]
    default: Code = branch(compiler, nodes[-1], spread) if len(nodes) % 2 == 0 else lambda m: NA

    def call(m: Machine) -> Any:
        value = alone(subject(m), node.name)
        if isinstance(value, ErrorValue):
            return value
        for case, result in pairs:
            met = alone(case(m), node.name)
            if isinstance(met, ErrorValue):
                return met
            if equal(value, met):
                return result(m)
        return default(m)

    return call


def form_choose(compiler: Compiler, node: Call, spread: bool) -> Code:
    """CHOOSE(index, value, ...)"""
    nodes = arguments(node, 2, None)
    index, choices = compiler.value(nodes[0], spread), [branch(compiler, each, spread) for each in nodes[1:]]

    def chosen(m: Machine, at: Any) -> Any:
        number = number_of(at)
        if isinstance(number, ErrorValue):
            return number
        return choices[int(number) - 1](m) if 1 <= int(number) <= len(choices) else VALUE

    def call(m: Machine) -> Any:
        at = index(m)
        if at.__class__ is not tuple:
            return chosen(m, at)
        if len(at) > 1:
            raise Unsupported("CHOOSE over an upright array")
        columns = [plain(chosen(m, each)) for each in at[0]]  # CHOOSE({1,2}, a, b) puts areas side by side
        if any(width_height(column)[1] > 1 for column in columns):
            raise Unsupported("CHOOSE over areas of several columns")
        rows = max(width_height(column)[0] for column in columns)
        return tuple(tuple(element(column, r, 0) for column in columns) for r in range(rows))

    return call


class LambdaValue:
    """A function made by LAMBDA: parameters, and the code of its body with the values in force where it was made."""

    __slots__ = ("body", "captured", "slots")

    def __init__(self, slots: list[list[Any]], body: Code, captured: list[tuple[list[Any], Any]]) -> None:
        self.slots, self.body, self.captured = slots, body, captured

    def __call__(self, m: Machine, values: list[Any]) -> Any:
        """The body's value with the parameters bound to values; those left out are blank."""
        if len(values) > len(self.slots):
            return VALUE
        bound = [*self.captured, *zip(self.slots, [*values, *([None] * (len(self.slots) - len(values)))], strict=True)]
        for slot, value in bound:
            slot.append(value)
        try:
            return self.body(m)
        finally:
            for slot, _ in bound:
                slot.pop()


def parameter(node: Node) -> str:
    """Name of a parameter."""
    if not isinstance(node, Name):
        raise FormulaError("a parameter of LET or LAMBDA must be a plain name", construct="LAMBDA parameter")
    return node.text.upper().removeprefix("_XLPM.").removeprefix("_XLOP.")


def form_let(compiler: Compiler, node: Call, spread: bool) -> Code:
    """LET(name, value, ..., calculation)"""
    nodes = arguments(node, 3, None)
    if len(nodes) % 2 == 0:
        raise FormulaError("LET lacks its calculation", construct="LET")
    bound: list[tuple[list[Any], Code]] = []
    depth = len(compiler.scopes)
    try:
        for k in range(0, len(nodes) - 1, 2):
            code = compiler.operand(nodes[k + 1], spread)
            slot: list[Any] = []
            compiler.scopes.append({parameter(nodes[k]): slot})
            bound.append((slot, code))
        body = compiler.operand(nodes[-1], spread)
    finally:
        del compiler.scopes[depth:]

    def call(m: Machine) -> Any:
        done = 0
        try:
            for slot, code in bound:
                slot.append(code(m))
                done += 1
            return body(m)
        finally:
            for slot, _ in bound[:done]:
                slot.pop()

    return call


def form_lambda(compiler: Compiler, node: Call, spread: bool) -> Code:
    """LAMBDA(parameter, ..., body)"""
    nodes = arguments(node, 1, None)
    slots: list[list[Any]] = []
    scope: dict[str, list[Any]] = {}
    for each in nodes[:-1]:
        slot: list[Any] = []
        slots.append(slot)
        scope[parameter(each)] = slot
    outer = [slot for around in compiler.scopes for slot in around.values()]
    compiler.scopes.append(scope)
    try:
        body = compiler.operand(nodes[-1], True)
    finally:
        compiler.scopes.pop()
    return lambda m: LambdaValue(slots, body, [(slot, slot[-1]) for slot in outer if slot])


def invoke(compiler: Compiler, node: Invoke, spread: bool) -> Code:
    """A call of whatever the callee gives."""
    callee = compiler.operand(node.callee, True)
    codes = [compiler.operand(each, spread) for each in node.arguments]

    def call(m: Machine) -> Any:
        function = callee(m)
        if isinstance(function, ErrorValue):
            return function
        return function(m, [code(m) for code in codes]) if isinstance(function, LambdaValue) else VALUE

    return call


def named_lambda(compiler: Compiler, node: Call, spread: bool) -> Code | None:
    """A call of a LAMBDA kept under a defined name or bound by LET; None where the name is neither."""
    key = node.name
    known = any(key in scope for scope in compiler.scopes) or any(
        (scope, key) in compiler.machine.book.names for scope in (compiler.machine.names[compiler.sheet].upper(), "")
    )
    return invoke(compiler, Invoke(Name(node.name), node.arguments), spread) if known else None


def single(value: Any) -> Any:
    """What a LAMBDA gives for one element must be one value."""
    value = plain(value)
    if isinstance(value, tuple):
        return value[0][0] if width_height(value) == (1, 1) else CALC
    return 0.0 if value is None else value


def with_lambda(work: Callable[[Machine, LambdaValue, list[Any]], Any], least: int) -> Form:
    """A function whose last argument is a LAMBDA."""

    def form(compiler: Compiler, node: Call, spread: bool) -> Code:
        nodes = arguments(node, least, None)
        codes = [compiler.operand(each, True) for each in nodes]

        def call(m: Machine) -> Any:
            values = [plain(code(m)) for code in codes]
            for value in values:
                if isinstance(value, ErrorValue):
                    return value
            function = values[-1]
            return work(m, function, values[:-1]) if isinstance(function, LambdaValue) else VALUE

        return call

    return form


def rows_of(value: Any) -> tuple[tuple[Any, ...], ...]:
    """A value as an array."""
    return value if isinstance(value, tuple) else ((value,),)


def work_map(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """MAP(array, ..., lambda)"""
    return spread_over(lambda *each: single(function(m, list(each))), [rows_of(value) for value in values])


def work_reduce(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """REDUCE([initial], array, lambda)"""
    total = values[0] if len(values) > 1 else None
    for row in rows_of(values[-1]):
        for each in row:
            total = plain(function(m, [total, each]))
    return total


def work_scan(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """SCAN([initial], array, lambda)"""
    total: Any = values[0] if len(values) > 1 else None
    result = []
    for row in rows_of(values[-1]):
        line = []
        for each in row:
            total = single(function(m, [total, each]))
            line.append(total)
        result.append(tuple(line))
    return tuple(result)


def work_byrow(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """BYROW(array, lambda)"""
    return tuple((single(function(m, [(row,)])),) for row in rows_of(values[0]))


def work_bycol(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """BYCOL(array, lambda)"""
    columns = zip(*rows_of(values[0]), strict=True)
    return (tuple(single(function(m, [tuple((each,) for each in column)])) for column in columns),)


def work_makearray(m: Machine, function: LambdaValue, values: list[Any]) -> Any:
    """MAKEARRAY(rows, columns, lambda)"""
    rows, columns = number_of(values[0]), number_of(values[1])
    if isinstance(rows, ErrorValue) or isinstance(columns, ErrorValue) or rows < 1 or columns < 1:
        return VALUE
    m.check_size(int(rows) * int(columns))
    return tuple(
        tuple(single(function(m, [float(r + 1), float(c + 1)])) for c in range(int(columns))) for r in range(int(rows))
    )


def is_error(value: Any) -> bool:
    """Any error value."""
    return isinstance(value, ErrorValue)


FORMS: dict[str, Form] = {
    "IF": form_if,
    "IFERROR": guard(is_error),
    "IFNA": guard(lambda value: value == NA),
    "IFS": form_ifs,
    "SWITCH": form_switch,
    "CHOOSE": form_choose,
    "LET": form_let,
    "LAMBDA": form_lambda,
    "MAP": with_lambda(work_map, 2),
    "REDUCE": with_lambda(work_reduce, 2),
    "SCAN": with_lambda(work_scan, 2),
    "BYROW": with_lambda(work_byrow, 2),
    "BYCOL": with_lambda(work_bycol, 2),
    "MAKEARRAY": with_lambda(work_makearray, 3),
}
