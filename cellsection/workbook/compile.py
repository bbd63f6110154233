"""A syntax tree turned into nested Python closures, once for each distinct relative form of a formula.

A closure takes the key of the formula's cell and returns a value. Closures and not generated source: they are a little
slower to run but made twenty times faster, and most forms of an engineer's workbook fill ten cells, not ten thousand.
Every node can be compiled two ways:

    value    one value, or an array where `spread` is true (array formulas and arguments that take arrays);
             elsewhere an area gives the cell of the formula's own row or column (implicit intersection)
    operand  what a function that takes references wants: an Area where a reference was written, else as value
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from cellsection.errors import FormulaError
from cellsection.workbook.areas import CellArea, narrowed, plain
from cellsection.workbook.book import Formula
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.calls import builtin_call, host_call
from cellsection.workbook.expressions import binary_code, chain_code, snapping
from cellsection.workbook.figures import COMPARISONS, SHOWS, as_figure, counting, raising, told_apart
from cellsection.workbook.forms import FORMS
from cellsection.workbook.grammar import parsed
from cellsection.workbook.lambdas import LAMBDA_FORMS, invoke_code, named_lambda
from cellsection.workbook.machine import Code, Machine, Unsupported
from cellsection.workbook.nodes import (
    ArrayConstant,
    Binary,
    Call,
    Constant,
    Invoke,
    Join,
    Missing,
    Name,
    Node,
    Reference,
    Spill,
    Structured,
    Unary,
)
from cellsection.workbook.operators import negative, per_cent
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.references import area_code, cell_code, join_code, name_code, spill_code, structured_code

__all__ = ["Compiled", "Compiler", "reference_code"]

LONG = 20  # so many operators in a row are worked off in a loop
ALL_FORMS = {**FORMS, **LAMBDA_FORMS}


def nothing(k: int) -> Any:
    """What a formula that could not be compiled would give."""
    return None


@dataclass(slots=True)
class Compiled:
    """The compiled form of a formula: what to run and what is known of it."""

    run: Code = nothing
    call: str = ""  # outermost function
    notes: tuple[str, ...] = ()
    fault: FormulaError | None = None


class Compiler:
    """Compiles the formulas of one book against its machine."""

    def __init__(self, machine: Machine) -> None:
        self.machine = machine
        self.sheet = 0
        self.formula: Formula | None = None
        self.scopes: list[dict[str, list[Any]]] = []  # parameters of LET and LAMBDA in force, innermost last
        self.lambdas = 0  # bodies of LAMBDA around the node being compiled
        self.naming: dict[tuple[str, str], list[Code]] = {}  # names being compiled
        self.notes: set[str] = set()
        self.figures = machine.book.format == "ods"  # logical values are numbers there

    def whole(self, formula: Formula, sheet: int) -> Compiled:
        """A whole formula; its last addition or subtraction is snapped to zero where it cancels."""
        self.sheet, self.formula, self.notes = sheet, formula, set()
        tree = parsed(formula.text, formula.row, formula.column, formula.language, self.machine.limits.nesting)
        if formula.kind == "array" or formula.dynamic:
            code = self.operand(tree, True)
        elif isinstance(tree, Binary) and tree.sign in "+-" and not tree.bracketed:
            code = snapping(tree.sign, self.value(tree.left, False), self.value(tree.right, False))
        else:
            code = self.value(tree, False)
        call = tree.name if isinstance(tree, Call) else ""
        return Compiled(code, call, tuple(sorted(self.notes)))

    # ---- the two ways

    def value(self, node: Node, spread: bool) -> Code:
        """Code for one value, or an array where `spread`."""
        if isinstance(node, Constant):
            constant = as_figure(node.value) if self.figures else node.value
            return lambda k: constant
        if isinstance(node, Reference) and node.single and node.book is None and node.last_sheet is None:
            return cell_code(self, node)
        if isinstance(node, Binary):
            return self.binary(node, spread)
        if isinstance(node, Call):
            return self.call(node, spread, as_value=True)
        if isinstance(node, Unary):
            return self.unary(node, spread)
        if isinstance(node, Missing):
            return lambda k: None
        if isinstance(node, ArrayConstant):
            rows = node.rows
            return lambda k: rows
        return self.read(self.operand(node, spread), spread)

    def operand(self, node: Node, spread: bool) -> Code:
        """Code for an Area where a reference was written, else for a value."""
        if isinstance(node, Reference):
            return area_code(self, node)
        if isinstance(node, Call):
            return self.call(node, spread, as_value=False)
        if isinstance(node, Name):
            return name_code(self, node, spread)
        if isinstance(node, Join):
            return join_code(self, node)
        if isinstance(node, Spill):
            return spill_code(self, node)
        if isinstance(node, Structured):
            return structured_code(self, node)
        if isinstance(node, ArrayConstant):
            rows = node.rows
            return lambda k: rows
        if isinstance(node, Invoke):
            return invoke_code(self, node, spread)
        return self.value(node, spread)

    def read(self, code: Code, spread: bool) -> Code:
        """Code for the value of what may be an area."""
        if not spread:
            return lambda k: narrowed(k, code(k))

        def whole(k: int) -> Any:
            result = code(k)
            if result.__class__ is not CellArea:
                return plain(result)
            # A name or a function that comes to one cell is that cell, as where the cell itself is written.
            return result.value(1, 1) if result.single else result.whole()

        return whole

    # ---- operators

    def unary(self, node: Unary, spread: bool) -> Code:
        """Code for a sign, the per cent, or @."""
        if node.sign == "@":
            return self.read(self.operand(node.operand, False), False)
        operand = self.value(node.operand, spread)
        if node.sign == "+":
            return operand
        apply = negative if node.sign == "-" else per_cent

        def signed(k: int) -> Any:
            value = operand(k)
            return spread_over(apply, (value,)) if value.__class__ is tuple else apply(value)

        return signed

    def binary(self, node: Binary, spread: bool) -> Code:
        """Code for an operator between two values, or for a whole row of them."""
        first: Node = node
        steps: list[tuple[str, Node]] = []
        while isinstance(first, Binary):
            steps.append((first.sign, first.right))
            first = first.left
        code = self.value(first, spread)
        if len(steps) > LONG:
            return chain_code(code, [(sign, self.value(right, spread)) for sign, right in reversed(steps)])
        for sign, right in reversed(steps):
            if self.figures and sign == "^":
                code = raising(code, self.value(right, spread))
                continue
            code = binary_code(sign, code, self.value(right, spread))
            if self.figures and sign in COMPARISONS:
                code = counting(code)
        return code

    # ---- functions

    def call(self, node: Call, spread: bool, as_value: bool) -> Code:
        """Code for a call: special form, builtin, the host's function, or a LAMBDA by name."""
        if node.name == "ANCHORARRAY" and len(node.arguments) == 1:  # how a file spells A1#
            code = spill_code(self, Spill(node.arguments[0]))
        elif node.name == "SINGLE" and len(node.arguments) == 1:  # how a file spells @
            return self.unary(Unary("@", node.arguments[0]), spread)
        elif (form := ALL_FORMS.get(node.name)) is not None:
            code = form(self, node, spread, as_value)
            return counting(code) if self.figures else code
        elif (declared := BUILTINS.get(node.name)) is not None:
            code = builtin_call(self, declared, node, spread, as_value)
            if self.figures and node.name in SHOWS and len(node.arguments) == 1:
                code = told_apart(node.name, self.value(node.arguments[0], False), code)
            return counting(code) if self.figures else code
        elif (own := named_lambda(self, node, spread)) is not None:
            code = own
        else:
            return self.foreign(node)
        return self.read(code, spread) if as_value else code

    def foreign(self, node: Call) -> Code:
        """Code for a call of a function that is not the application's own: the host's, or nobody's."""
        resolve = self.machine.resolve
        function = resolve(node.name) if resolve else None
        if function is not None:
            return host_call(self, node, function)
        construct = f"function {node.name}"

        def unsupported(k: int) -> Any:
            raise Unsupported(construct)

        return unsupported

    def later(self, name: tuple[str, str], text: str) -> Code:
        """Code for a name inside its own definition, which only the body of a LAMBDA may hold."""
        if not self.lambdas:
            raise FormulaError(f"the name {text} refers to itself", construct=f"circular name {text}")
        waiting = self.naming[name]
        return lambda k: waiting[0](k)


def reference_code(machine: Machine, sheet: int, text: str) -> Code | None:
    """Code for a reference that a text names, as typed in A1 of a sheet; None where it names none."""
    text = text.strip()
    tries = [(text, "excel")]
    if machine.book.format == "ods" and "." in text:  # Sheet.A1:B3, as its application spells references in texts
        ends = [end if "." in end else f".{end}" for end in text.split(":")]
        tries.insert(0, (f"[{':'.join(ends)}]", "openformula"))
    for spelled, language in tries:
        try:
            tree = parsed(spelled, 1, 1, language)
            if isinstance(tree, (Reference, Join, Name, Structured, Spill)):
                compiler = Compiler(machine)
                compiler.sheet = sheet
                return compiler.operand(tree, True)
        except FormulaError:
            continue
    return None
