"""Calls that do not evaluate all their arguments: IF and its kin."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import FormulaError
from cellsection.workbook.areas import as_array, plain
from cellsection.workbook.calls import check_count
from cellsection.workbook.coercion import NA, VALUE, equal, logical_of, number_of
from cellsection.workbook.machine import Code
from cellsection.workbook.nodes import ArrayConstant, Call, Missing, Node
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Compiler

__all__ = ["FORMS", "Form", "arguments"]

# compiler, call, whether arrays are taken whole, whether one value is wanted (else a reference may come back)
Form: TypeAlias = "Callable[[Compiler, Call, bool, bool], Code]"


def arguments(node: Call, least: int, most: int | None) -> tuple[Node, ...]:
    """The arguments of a form, their number checked."""
    check_count(node.name, len(node.arguments), least, most)
    return node.arguments


def branch(compiler: Compiler, node: Node, spread: bool, as_value: bool) -> Code:
    """A branch: a reference stays one (IF may choose between areas), an empty one counts as 0."""
    if isinstance(node, Missing):
        return lambda k: 0.0
    return compiler.value(node, spread) if as_value else compiler.operand(node, spread)


def form_if(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """IF(test, then, [else]): the branch not chosen is not evaluated."""
    test_node, then_node, *rest = arguments(node, 2, 3)
    test, then = compiler.value(test_node, spread), branch(compiler, then_node, spread, as_value)
    other: Code = branch(compiler, rest[0], spread, as_value) if rest else (lambda k: False)

    def run(k: int) -> Any:
        truth = test(k)
        if truth.__class__ is not bool:
            if truth.__class__ is tuple:
                return choose_each(k, truth, (other, then))
            truth = logical_of(truth)
            if truth.__class__ is ErrorValue:
                return truth
        return then(k) if truth else other(k)

    return run


def choose_each(k: int, tests: Any, branches: tuple[Code, Code]) -> Any:
    """IF over an array of tests: a branch is evaluated if any test asks for it."""
    truths = tuple(tuple(map(logical_of, row)) for row in tests)
    needed = {truth for row in truths for truth in row if truth.__class__ is bool}
    no, yes = (plain(branches[truth](k)) if truth in needed else 0.0 for truth in (False, True))
    return spread_over(picked, (truths, yes, no))


def guard(caught: Callable[[Any], bool]) -> Form:
    """IFERROR and IFNA."""

    def form(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
        value_node, other_node = arguments(node, 2, 2)
        value = branch(compiler, value_node, spread, True)
        other = branch(compiler, other_node, spread, True)

        def run(k: int) -> Any:
            found = value(k)
            if found.__class__ is tuple:
                if not any(caught(each) for row in found for each in row):
                    return found
                return spread_over(lambda a, b: b if caught(a) else a, (found, other(k)))
            return other(k) if caught(found) else found

        return run

    return form


def form_ifs(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """IFS(test, value, ...): the first test that holds."""
    nodes = arguments(node, 2, None)
    if len(nodes) % 2:
        raise FormulaError("IFS takes pairs of test and value", construct="IFS without a value")
    pairs = [
        (compiler.value(nodes[place], spread), branch(compiler, nodes[place + 1], spread, as_value))
        for place in range(0, len(nodes), 2)
    ]

    def run(k: int) -> Any:
        for place, (test, value) in enumerate(pairs):
            met = test(k)
            if met.__class__ is tuple:
                later = pairs[place + 1 :]
                return overlaid(NA, [(met, plain(value(k))), *((t(k), plain(v(k))) for t, v in later)])
            truth = logical_of(met)
            if truth.__class__ is ErrorValue:
                return truth
            if truth:
                return value(k)
        return NA

    return run


def overlaid(last: Any, tests: list[tuple[Any, Any]]) -> Any:
    """Tests that are arrays, each with its value: element by element the first that holds, else the last value."""
    for test, value in reversed(tests):
        last = spread_over(picked, (as_array(test), value, last))
    return last


def picked(test: Any, yes: Any, no: Any) -> Any:
    """One of two values, or the error of the test that should decide."""
    truth = logical_of(test)
    return truth if truth.__class__ is ErrorValue else yes if truth else no


def form_switch(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """SWITCH(value, case, result, ..., [default])"""
    nodes = arguments(node, 3, None)
    subject = compiler.value(nodes[0], spread)
    pairs = [
        (compiler.value(nodes[place], spread), branch(compiler, nodes[place + 1], spread, as_value))
        for place in range(1, len(nodes) - 1, 2)
    ]
    default: Code = branch(compiler, nodes[-1], spread, as_value) if len(nodes) % 2 == 0 else lambda k: NA

    def run(k: int) -> Any:
        value = subject(k)
        if value.__class__ is ErrorValue:
            return value
        for place, (case, result) in enumerate(pairs):
            met = case(k)
            if value.__class__ is tuple or met.__class__ is tuple:
                later = [(spread_over(matches, (as_array(value), c(k))), plain(r(k))) for c, r in pairs[place:]]
                return overlaid(plain(default(k)), later)
            if met.__class__ is ErrorValue:
                return met
            if equal(value, met):
                return result(k)
        return default(k)

    return run


def matches(value: Any, case: Any) -> Any:
    """Whether a case is met, or the error among the two."""
    return next((each for each in (value, case) if each.__class__ is ErrorValue), None) or equal(value, case)


def form_choose(compiler: Compiler, node: Call, spread: bool, as_value: bool) -> Code:
    """CHOOSE(index, value, ...): CHOOSE({1,2}, B:B, A:A) puts areas side by side."""
    nodes = arguments(node, 2, None)
    index = compiler.value(nodes[0], spread)
    # Where an array chooses, whole areas are chosen from, in ordinary cells too.
    whole = spread or isinstance(nodes[0], ArrayConstant)
    choices = [branch(compiler, each, whole, as_value) for each in nodes[1:]]

    def number(at: Any) -> Any:
        found = number_of(at)
        if isinstance(found, ErrorValue):
            return found
        return int(found) if 1 <= int(found) <= len(choices) else VALUE

    def run(k: int) -> Any:
        at = index(k)
        if at.__class__ is not tuple:
            chosen = number(at)
            return chosen if chosen.__class__ is ErrorValue else choices[chosen - 1](k)
        wanted = tuple(tuple(map(number, row)) for row in at)
        needed = {each for row in wanted for each in row}
        values = [plain(choice(k)) if place in needed else 0.0 for place, choice in enumerate(choices, start=1)]
        return spread_over(lambda n, *each: n if n.__class__ is ErrorValue else each[n - 1], (wanted, *values))

    return run


FORMS: dict[str, Form] = {
    "IF": form_if,
    "IFERROR": guard(lambda value: value.__class__ is ErrorValue),
    "IFNA": guard(lambda value: value == NA),
    "IFS": form_ifs,
    "SWITCH": form_switch,
    "CHOOSE": form_choose,
}
