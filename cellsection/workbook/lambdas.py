"""LET, LAMBDA and the functions that take a LAMBDA."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import FormulaError
from cellsection.workbook.areas import plain
from cellsection.workbook.coercion import CALC, VALUE, number_of
from cellsection.workbook.forms import Form, arguments
from cellsection.workbook.machine import Code, Machine
from cellsection.workbook.nodes import Call, Invoke, Missing, Name, Node
from cellsection.workbook.operators import check_characters, width_height
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Compiler

__all__ = ["LAMBDA_FORMS", "FunctionValue", "LambdaValue", "invoke_code", "named_lambda"]

OMITTED = object()  # stands for an argument that a call leaves out


class LambdaValue:
    """A function made by LAMBDA: parameters, and the code of its body with the values in force where it was made."""

    __slots__ = ("body", "captured", "machine", "omissions", "slots")

    def __init__(
        self,
        machine: Machine,
        slots: list[list[Any]],
        omissions: list[list[Any]],
        body: Code,
        captured: list[tuple[list[Any], Any]],
    ) -> None:
        self.machine, self.slots, self.omissions, self.body, self.captured = machine, slots, omissions, body, captured

    def __call__(self, k: int, values: list[Any]) -> Any:
        """The body's value with the parameters bound to values; those left out are blank."""
        if len(values) > len(self.slots):
            return VALUE
        self.machine.check_time()
        given = [*values, *([OMITTED] * (len(self.slots) - len(values)))]
        bound = list(self.captured)
        for slot, omission, value in zip(self.slots, self.omissions, given, strict=True):
            bound += [(slot, None if value is OMITTED else value), (omission, value is OMITTED)]
        for slot, value in bound:
            slot.append(value)
        try:
            return self.body(k)
        finally:
            for slot, _ in bound:
                slot.pop()


class FunctionValue(LambdaValue):
    """A function of the application itself, handed over by its name: BYROW(A1:C9,SUM)."""

    __slots__ = ("bodies", "compiler", "name")

    def __init__(self, compiler: Compiler, name: str) -> None:
        super().__init__(compiler.machine, [], [], lambda k: VALUE, [])
        self.compiler, self.name = compiler, name
        self.bodies: dict[int, tuple[list[list[Any]], Code]] = {}  # by the number of arguments

    def __call__(self, k: int, values: list[Any]) -> Any:
        """The function's value for these arguments."""
        if len(values) not in self.bodies:
            scope: dict[str, list[Any]] = {f"{self.name} {place}": [] for place in range(len(values))}
            outer, self.compiler.scopes = self.compiler.scopes, [scope]
            try:
                body = self.compiler.operand(Call(self.name, tuple(map(Name, scope))), True)
            finally:
                self.compiler.scopes = outer
            self.bodies[len(values)] = (list(scope.values()), body)
        slots, body = self.bodies[len(values)]
        for slot, value in zip(slots, values, strict=True):
            slot.append(None if value is OMITTED else value)
        try:
            return body(k)
        finally:
            for slot in slots:
                slot.pop()


def parameter(node: Node) -> str:
    """Name of a parameter."""
    if not isinstance(node, Name):
        raise FormulaError("a parameter of LET or LAMBDA must be a plain name", construct="LAMBDA parameter")
    return node.text.upper()


def form_let(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """LET(name, value, ..., calculation)"""
    nodes = arguments(node, 3, None)
    if len(nodes) % 2 == 0:
        raise FormulaError("LET lacks its calculation", construct="LET")
    bound: list[tuple[list[Any], Code]] = []
    depth = len(compiler.scopes)
    try:
        for place in range(0, len(nodes) - 1, 2):
            code = compiler.operand(nodes[place + 1], spread)
            slot: list[Any] = []
            compiler.scopes.append({parameter(nodes[place]): slot})
            bound.append((slot, code))
        body = compiler.value(nodes[-1], spread) if as_value else compiler.operand(nodes[-1], spread)
    finally:
        del compiler.scopes[depth:]

    def run(k: int) -> Any:
        done = 0
        try:
            for slot, code in bound:
                slot.append(code(k))
                done += 1
            return body(k)
        finally:
            for slot, _ in bound[:done]:
                slot.pop()

    return run


def form_lambda(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """LAMBDA(parameter, ..., body)"""
    nodes = arguments(node, 1, None)
    scope: dict[str, list[Any]] = {parameter(each): [] for each in nodes[:-1]}
    if len(scope) < len(nodes) - 1:
        raise FormulaError("a LAMBDA names a parameter twice", construct="LAMBDA parameter")
    slots = list(scope.values())
    omissions: list[list[Any]] = [[] for _ in slots]
    scope |= {omission_of(name): omission for name, omission in zip(list(scope), omissions, strict=True)}
    outer = [slot for around in compiler.scopes for slot in around.values()]
    compiler.scopes.append(scope)
    compiler.lambdas += 1
    try:
        body = compiler.operand(nodes[-1], True)
    finally:
        compiler.scopes.pop()
        compiler.lambdas -= 1
    machine = compiler.machine
    return lambda k: LambdaValue(machine, slots, omissions, body, [(slot, slot[-1]) for slot in outer if slot])


def omission_of(name: str) -> str:
    """Under which name a scope keeps whether the call left a parameter out; no name that a formula can hold."""
    return f"{name} omitted"


def form_isomitted(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """ISOMITTED(parameter): whether the call of the LAMBDA left it out."""
    (subject,) = arguments(node, 1, 1)
    for scope in reversed(compiler.scopes):
        omission = scope.get(omission_of(parameter(subject)))
        if omission is not None:
            return lambda k: omission[-1]
    return lambda k: False


def invoke_code(compiler: Compiler, node: Invoke, spread: bool) -> Code:
    """A call of whatever the callee gives."""
    callee = compiler.operand(node.callee, True)
    codes: list[Code] = [
        (lambda k: OMITTED) if isinstance(each, Missing) else compiler.operand(each, spread) for each in node.arguments
    ]

    def run(k: int) -> Any:
        function = callee(k)
        if isinstance(function, ErrorValue):
            return function
        return function(k, [code(k) for code in codes]) if isinstance(function, LambdaValue) else VALUE

    return run


def named_lambda(compiler: Compiler, node: Call, spread: bool) -> Code | None:
    """A call of a LAMBDA kept under a defined name or bound by LET; None where the name is neither."""
    key, names = node.name, compiler.machine.book.names
    known = any(key in scope for scope in compiler.scopes) or any(
        (scope, key) in names for scope in (compiler.machine.names[compiler.sheet].upper(), "")
    )
    return invoke_code(compiler, Invoke(Name(node.name), node.arguments), spread) if known else None


# ---- functions whose last argument is a LAMBDA: what they do with it, given the call of it


Apply: TypeAlias = Callable[..., Any]


def single(value: Any) -> Any:
    """What a LAMBDA gives for one element must be one value."""
    value = plain(value)
    if isinstance(value, tuple):
        return value[0][0] if width_height(value) == (1, 1) else CALC
    return 0.0 if value is None else value


def kept(call: Apply) -> Apply:
    """A LAMBDA whose single values are gathered in an array: what they hold in texts is counted as they come."""
    characters = 0

    def counted(*given: Any) -> Any:
        nonlocal characters
        value = single(call(*given))
        if value.__class__ is str:
            characters += len(value)
            check_characters(characters)
        return value

    return counted


def with_lambda(work: Callable[[Apply, list[Any], Machine], Any], least: int, most: int | None) -> Form:
    """A function whose last argument is a LAMBDA."""

    def form(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
        codes = [compiler.operand(each, True) for each in arguments(node, least, most)]
        machine = compiler.machine

        def run(k: int) -> Any:
            values = [plain(code(k)) for code in codes]
            for value in values:
                if isinstance(value, ErrorValue):
                    return value
            function = values.pop()
            if not isinstance(function, LambdaValue):
                return VALUE
            return work(lambda *given: function(k, list(given)), values, machine)

        return compiler.read(run, spread) if as_value else run

    return form


def rows_of(value: Any) -> tuple[tuple[Any, ...], ...]:
    """A value as an array."""
    return value if isinstance(value, tuple) else ((value,),)


def work_map(call: Apply, values: list[Any], machine: Machine) -> Any:
    """MAP(array, ..., lambda)"""
    return spread_over(lambda *each: single(call(*each)), [rows_of(value) for value in values])


def started(values: list[Any]) -> tuple[Any, list[list[Any]]]:
    """The value that REDUCE and SCAN begin with, and the rows that remain: without one it is the first element."""
    rows = [list(row) for row in rows_of(values[-1])]
    if len(values) > 1 and values[0] is not None:
        return values[0], rows
    return rows[0].pop(0), rows


def work_reduce(call: Apply, values: list[Any], machine: Machine) -> Any:
    """REDUCE([initial], array, lambda)"""
    total, rows = started(values)
    for row in rows:
        for each in row:
            total = plain(call(total, each))
    return total


def work_scan(call: Apply, values: list[Any], machine: Machine) -> Any:
    """SCAN([initial], array, lambda)"""
    total, rows = started(values)
    width = len(rows_of(values[-1])[0])
    result, call = [], kept(call)
    for row in rows:
        line = [single(total)] if len(row) < width else []
        for each in row:
            total = call(total, each)
            line.append(total)
        result.append(tuple(line))
    return tuple(result)


def work_byrow(call: Apply, values: list[Any], machine: Machine) -> Any:
    """BYROW(array, lambda)"""
    call = kept(call)
    return tuple((call((row,)),) for row in rows_of(values[0]))


def work_bycol(call: Apply, values: list[Any], machine: Machine) -> Any:
    """BYCOL(array, lambda)"""
    columns = zip(*rows_of(values[0]), strict=True)
    call = kept(call)
    return (tuple(call(tuple((each,) for each in column)) for column in columns),)


def work_makearray(call: Apply, values: list[Any], machine: Machine) -> Any:
    """MAKEARRAY(rows, columns, lambda)"""
    rows, columns = number_of(values[0]), number_of(values[1])
    if isinstance(rows, ErrorValue) or isinstance(columns, ErrorValue) or rows < 1 or columns < 1:
        return VALUE
    machine.check_size(int(rows) * int(columns))
    call = kept(call)
    return tuple(tuple(call(float(r + 1), float(c + 1)) for c in range(int(columns))) for r in range(int(rows)))


LAMBDA_FORMS: dict[str, Form] = {
    "LET": form_let,
    "LAMBDA": form_lambda,
    "ISOMITTED": form_isomitted,
    "MAP": with_lambda(work_map, 2, None),
    "REDUCE": with_lambda(work_reduce, 2, 3),
    "SCAN": with_lambda(work_scan, 2, 3),
    "BYROW": with_lambda(work_byrow, 2, 2),
    "BYCOL": with_lambda(work_bycol, 2, 2),
    "MAKEARRAY": with_lambda(work_makearray, 3, 3),
}
