"""A syntax tree turned into nested Python closures, once for each distinct relative form of a formula.

A closure takes the Machine, reads cells through it and returns a value. Every node can be compiled two ways:

    value    one value, or an array where `spread` is true (array formulas and arguments that take arrays);
             elsewhere an area gives the cell of the formula's own row or column (implicit intersection)
    operand  what a function that takes references wants: an Area where a reference was written, else as value
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, TypeAlias

from cellsection.errors import FormulaError
from cellsection.workbook.book import Formula
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.coercion import NULL, REF, VALUE
from cellsection.workbook.grammar import parsed
from cellsection.workbook.machine import CellArea, Machine, Special, Unsupported
from cellsection.workbook.nodes import (
    ArrayConstant,
    Binary,
    Call,
    Constant,
    Coordinate,
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
from cellsection.workbook.operators import BINARY, negative, per_cent, snapped
from cellsection.workbook.operators import spread as spread_over
from cellsection.workbook.values import Array, ErrorValue, Scalar

__all__ = ["Code", "Compiler", "as_array", "intersected"]

Code: TypeAlias = Callable[[Machine], Any]


def as_array(value: Any) -> Array:
    """A result as an array: areas are read, single values become 1 x 1."""
    if isinstance(value, CellArea):
        return value.whole()
    return value if isinstance(value, tuple) else ((value,),)


def intersected(machine: Machine, area: Any) -> Scalar:
    """One value out of an area: its only cell, or the one in the formula's own row or column."""
    if isinstance(area, tuple):
        return VALUE if area and isinstance(area[0], CellArea) else (area[0][0] if area else None)
    if not isinstance(area, CellArea):
        return area  # type: ignore[no-any-return]
    rows, columns = area.shape
    row = area.top if rows == 1 else machine.row
    column = area.left if columns == 1 else machine.column
    if area.top <= row <= area.bottom and area.left <= column <= area.right and (rows == 1 or columns == 1):
        return machine.cell(area.index, (row, column))
    return VALUE


def nothing(m: Machine) -> Any:
    """What a formula that could not be compiled would give."""
    return None


@dataclass(frozen=True, slots=True)
class Compiled:
    """A formula ready to run: its code, the function it is a call of ("" if none), or why it cannot be run."""

    run: Code = nothing
    call: str = ""
    fault: FormulaError | None = None


def narrowed(machine: Machine, result: Any) -> Any:
    """A value outside array formulas: an area gives one of its cells; an array of values stays what it is.

    So {1,2,3}*2 and LARGE(A1:A9,{1,2}) are arrays anywhere, and only references are cut down to one cell.
    """
    if isinstance(result, tuple) and not (result and isinstance(result[0], CellArea)):
        return result
    return intersected(machine, result)


class Compiler:
    """Compiles the formulas of one book; scopes hold the parameters of LET and LAMBDA in force."""

    def __init__(self, machine: Machine) -> None:
        self.machine = machine
        self.scopes: list[dict[str, list[Any]]] = []
        self.naming: list[tuple[str, str]] = []
        self.sheet = 0

    # ---- the two ways

    def value(self, node: Node, spread: bool) -> Code:
        """Code for one value, or an array where `spread`."""
        if isinstance(node, Constant):
            constant = node.value
            return lambda m: constant
        if isinstance(node, Missing):
            return lambda m: None
        if isinstance(node, ArrayConstant):
            rows = node.rows
            return lambda m: rows
        if isinstance(node, Reference) and node.single and node.book is None and node.last_sheet is None:
            return self.cell(node)
        if isinstance(node, Unary):
            return self.unary(node, spread)
        if isinstance(node, Binary):
            return self.binary(node, spread)
        code = self.operand(node, spread)
        if spread:

            def read(m: Machine) -> Any:
                result = code(m)
                if not isinstance(result, CellArea):
                    return result
                # A name or a function that comes to one cell is that cell, as where the cell itself is written.
                one = (result.top, result.left) == (result.bottom, result.right)
                return m.cell(result.index, (result.top, result.left)) if one else result.whole()

            return read
        return lambda m: narrowed(m, code(m))

    def operand(self, node: Node, spread: bool) -> Code:
        """Code for an Area where a reference was written, else for a value."""
        if isinstance(node, Reference):
            return self.reference(node)
        if isinstance(node, Join):
            return self.join(node)
        if isinstance(node, Spill):
            return self.spill(node)
        if isinstance(node, Structured):
            return self.structured(node)
        if isinstance(node, Name):
            return self.name(node, spread)
        if isinstance(node, Call):
            return self.call(node, spread)
        if isinstance(node, ArrayConstant):
            rows = node.rows
            return lambda m: rows
        if isinstance(node, Invoke):
            from cellsection.workbook.forms import invoke

            return invoke(self, node, spread)
        return self.value(node, spread)

    # ---- references

    def sheet_of(self, name: str | None) -> int | None:
        """Index of a sheet named in a reference; None means the formula's own."""
        if name is None:
            return None
        index = self.machine.sheet_index.get(name.casefold())
        if index is None:
            raise FormulaError(f'there is no sheet "{name}"', construct=f'reference to missing sheet "{name}"')
        return index

    def cell(self, node: Reference) -> Code:
        """Code for a single cell: the commonest node, so the most direct."""
        if node.sheet == "#REF!":
            return lambda m: REF
        assert node.top is not None
        assert node.left is not None
        (row, row_moves), (column, column_moves) = node.top, node.left
        index = self.sheet_of(node.sheet)
        if index is None:

            def read_own(m: Machine) -> Any:
                position = (row + m.row if row_moves else row, column + m.column if column_moves else column)
                value = m.own.get(position)
                if value.__class__ is Special:
                    return m.special(m.sheet, position, value)
                return value

            return read_own
        store = self.machine.stores[index]

        def read(m: Machine) -> Any:
            position = (row + m.row if row_moves else row, column + m.column if column_moves else column)
            value = store.get(position)
            if value.__class__ is Special:
                return m.special(index, position, value)
            return value

        return read

    def reference(self, node: Reference) -> Code:
        """Code for an area; of several sheets (3-D) a tuple of areas; of another book its saved values."""
        if node.sheet == "#REF!":
            return lambda m: REF
        if node.book is not None:
            index = self.external(node.book, node.sheet)
            indexes: list[int | None] = [index]
        elif node.last_sheet is not None:
            first, last = self.sheet_of(node.sheet), self.sheet_of(node.last_sheet)
            assert first is not None
            assert last is not None
            indexes = list(range(min(first, last), max(first, last) + 1))
        else:
            indexes = [self.sheet_of(node.sheet)]

        def place(c: Coordinate | None, own: int, default: int) -> int:
            if c is None:
                return default
            return c.number + own if c.relative else c.number

        def areas(m: Machine) -> Any:
            top, bottom = place(node.top, m.row, 1), place(node.bottom, m.row, 1_048_576)
            left, right = place(node.left, m.column, 1), place(node.right, m.column, 16_384)
            if top > bottom:
                top, bottom = bottom, top
            if left > right:
                left, right = right, left
            if top < 1 or left < 1:
                return REF
            found = [CellArea(m, m.sheet if i is None else i, top, left, bottom, right) for i in indexes]
            return found[0] if len(found) == 1 else tuple(found)

        return areas

    def external(self, book: str, sheet: str | None) -> int:
        """Index of the sheet that holds another book's saved values; it is added when first named."""
        machine = self.machine
        file, sheets = machine.book.externals.get(book, ("", []))
        found = next((s for s in sheets if sheet is not None and s.name.casefold() == sheet.casefold()), None)
        if found is None:
            raise FormulaError(
                f"nothing is saved of the other book [{book}]", construct="external link without saved values"
            )
        machine.notes.add(f"reads saved values of another book ({file or book})")
        key = f"[{book}]{found.name}"
        if key.casefold() not in machine.sheet_index:
            machine.sheet_index[key.casefold()] = len(machine.names)
            machine.names.append(key)
            machine.add_sheet(found.values, {})
        return machine.sheet_index[key.casefold()]

    def join(self, node: Join) -> Code:
        """Code for the reference operators."""
        left, right = self.operand(node.left, True), self.operand(node.right, True)
        sign = node.sign

        def joined(m: Machine) -> Any:
            a, b = left(m), right(m)
            for each in (a, b):
                if isinstance(each, ErrorValue):
                    return each
            if sign == "~":
                both = (*(a if isinstance(a, tuple) else (a,)), *(b if isinstance(b, tuple) else (b,)))
                return both if all(isinstance(each, CellArea) for each in both) else VALUE
            if not (isinstance(a, CellArea) and isinstance(b, CellArea)) or a.index != b.index:
                return VALUE
            if sign == ":":
                return CellArea(
                    m, a.index, min(a.top, b.top), min(a.left, b.left), max(a.bottom, b.bottom), max(a.right, b.right)
                )
            top, bottom = max(a.top, b.top), min(a.bottom, b.bottom)
            first, last = max(a.left, b.left), min(a.right, b.right)
            return CellArea(m, a.index, top, first, bottom, last) if top <= bottom and first <= last else NULL

        return joined

    def spill(self, node: Spill) -> Code:
        """Code for A1#: the area that the formula in A1 fills, once it is computed."""
        anchor = self.operand(node.anchor, True)

        def area(m: Machine) -> Any:
            start = anchor(m)
            if not isinstance(start, CellArea):
                return start if isinstance(start, ErrorValue) else REF
            place = (start.top, start.left)
            m.cell(start.index, place)  # make sure that it is computed
            filled = m.filled.get((start.index, place))
            return CellArea(m, start.index, *filled) if filled else REF

        return area

    def structured(self, node: Structured) -> Code:
        """Code for a structured reference."""
        table = self.machine.book.tables.get(node.table.upper())
        if table is None and not node.table and self.machine.formula is not None:
            here = self.machine
            table = next(
                (
                    t
                    for t in here.book.tables.values()
                    if here.sheet_index.get(t.sheet.casefold()) == self.sheet
                    and t.area[0] <= here.formula.row <= t.area[2]  # type: ignore[union-attr]
                    and t.area[1] <= here.formula.column <= t.area[3]  # type: ignore[union-attr]
                ),
                None,
            )
        if table is None:
            raise FormulaError(f'there is no table "{node.table}"', construct=f"table {node.table}")
        index = self.machine.sheet_index[table.sheet.casefold()]
        top, left, bottom, right = table.area
        names = [column.casefold() for column in table.columns]
        try:
            first = left + names.index(node.first.casefold()) if node.first else left
            last = left + names.index(node.last.casefold()) if node.last else right
        except ValueError:
            raise FormulaError(
                f"table {table.name} has no column {node.first}", construct=f"table {table.name}"
            ) from None
        body = (top + table.header, bottom - table.totals)
        items = {item.casefold() for item in node.items}
        spans = {
            "#all": (top, bottom),
            "#data": body,
            "#headers": (top, top),
            "#totals": (bottom, bottom),
        }
        if "#this row" in items:
            inside = range(body[0], body[1] + 1)
            return lambda m: CellArea(m, index, m.row, first, m.row, last) if m.row in inside else VALUE
        if "#totals" in items and not table.totals:
            return lambda m: REF
        chosen = [spans[item] for item in items if item in spans] or [body]
        start, end = min(s[0] for s in chosen), max(s[1] for s in chosen)
        return lambda m: CellArea(m, index, start, first, end, last)

    def name(self, node: Name, spread: bool) -> Code:
        """Code for a parameter in force, a defined name or a table."""
        key = node.text.upper()
        for scope in reversed(self.scopes):
            if key in scope:
                slot = scope[key]
                return lambda m: slot[-1]
        book = self.machine.book
        if node.book is not None and node.book not in ("0", ""):
            raise FormulaError(f"name {node.text} of another book", construct="name of another book")
        own = (node.sheet or self.machine.names[self.sheet]).upper()
        defined = book.names.get((own, key)) or book.names.get(("", key))
        if defined is None and key in book.tables:
            return self.structured(Structured(node.text, (), None, None))
        if defined is None:
            undefined = ErrorValue("#NAME?", f"the name {node.text} is not defined")
            return lambda m: undefined
        if (own, key) in self.naming:
            raise FormulaError(f"the name {node.text} refers to itself", construct=f"circular name {node.text}")
        self.naming.append((own, key))
        try:
            tree = parsed(defined.text, defined.row, defined.column, defined.language, self.machine.limits.nesting)
            return self.operand(tree, spread)
        finally:
            self.naming.pop()

    # ---- operators

    def unary(self, node: Unary, spread: bool) -> Code:
        """Code for a sign, the per cent, or @."""
        if node.sign == "@":
            inner = self.operand(node.operand, False)
            return lambda m: intersected(m, inner(m))
        operand = self.value(node.operand, spread)
        if node.sign == "+":
            return operand
        apply = negative if node.sign == "-" else per_cent

        def signed(m: Machine) -> Any:
            value = operand(m)
            return spread_over(apply, (value,)) if value.__class__ is tuple else apply(value)

        return signed

    def binary(self, node: Binary, spread: bool) -> Code:
        """Code for an operator between two values."""
        left, right = self.value(node.left, spread), self.value(node.right, spread)
        apply = BINARY[node.sign]

        def both(m: Machine) -> Any:
            a, b = left(m), right(m)
            if a.__class__ is tuple or b.__class__ is tuple:
                return spread_over(apply, (a, b))
            return apply(a, b)

        return both

    # ---- functions

    def call(self, node: Call, spread: bool) -> Code:
        """Code for a call: special form, builtin, the host's function, or a LAMBDA by name."""
        from cellsection.workbook.calls import builtin_call, host_call
        from cellsection.workbook.forms import FORMS, named_lambda

        if node.name == "ANCHORARRAY" and len(node.arguments) == 1:  # how a file spells A1#
            return self.spill(Spill(node.arguments[0]))
        if node.name == "SINGLE" and len(node.arguments) == 1:  # how a file spells @
            return self.unary(Unary("@", node.arguments[0]), spread)
        form = FORMS.get(node.name)
        if form is not None:
            return form(self, node, spread)
        declared = BUILTINS.get(node.name)
        if declared is not None:
            return builtin_call(self, declared, node, spread)
        own = named_lambda(self, node, spread)
        if own is not None:
            return own
        resolve = self.machine.resolve
        function = resolve(node.name) if resolve else None
        if function is not None:
            return host_call(self, node, function)
        construct = f"function {node.name}"

        def unsupported(m: Machine) -> Any:
            raise Unsupported(construct)

        return unsupported

    def whole(self, formula: Formula, sheet: int) -> Compiled:
        """A whole formula; its last addition or subtraction is snapped to zero where it cancels."""
        self.sheet = sheet
        self.machine.formula = formula
        tree = parsed(formula.text, formula.row, formula.column, formula.language, self.machine.limits.nesting)
        spread = formula.kind == "array" or formula.dynamic
        if isinstance(tree, Binary) and tree.sign in "+-" and not tree.bracketed and not spread:
            left, right, apply = self.value(tree.left, False), self.value(tree.right, False), BINARY[tree.sign]

            def last(m: Machine) -> Any:
                a, b = left(m), right(m)
                if a.__class__ is tuple or b.__class__ is tuple:
                    return spread_over(apply, (a, b))
                return snapped(apply(a, b), a)

            return Compiled(last)
        return Compiled(self.value(tree, spread), tree.name if isinstance(tree, Call) else "")
