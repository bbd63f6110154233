"""References as closures: cells and areas, of other sheets and books, joined, spilled, in tables and by name."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from cellsection.errors import FormulaError
from cellsection.workbook.addresses import LAST_COLUMN, LAST_ROW
from cellsection.workbook.areas import CellArea
from cellsection.workbook.book import Table
from cellsection.workbook.builtins import BUILTINS
from cellsection.workbook.coercion import NULL, REF, VALUE
from cellsection.workbook.grammar import parsed
from cellsection.workbook.keys import ACROSS, ROWS, SHIFT, cell_key, inside, offset, wrapped
from cellsection.workbook.lambdas import FunctionValue
from cellsection.workbook.machine import Code, Special
from cellsection.workbook.nodes import Coordinate, Join, Name, Reference, Spill, Structured
from cellsection.workbook.values import ErrorValue

if TYPE_CHECKING:
    from cellsection.workbook.compile import Compiler

HANDED_OVER = "_XLETA."  # how a file spells the name of a function that is an argument itself

__all__ = ["area_code", "cell_code", "join_code", "name_code", "spill_code", "structured_code"]


def sheet_of(compiler: Compiler, name: str | None) -> int:
    """Index of the sheet a reference names; its own where it names none."""
    if name is None:
        return compiler.sheet
    index = compiler.machine.sheet_index.get(name.casefold())
    if index is None:
        raise FormulaError(f'there is no sheet "{name}"', construct=f'reference to missing sheet "{name}"')
    return index


def cell_code(compiler: Compiler, node: Reference) -> Code:
    """Code for a single cell: the commonest node, so the most direct."""
    assert node.top is not None
    assert node.left is not None
    (row, row_moves), (column, column_moves) = node.top, node.left
    row = offset(row, LAST_ROW) if row_moves else row
    column = offset(column, LAST_COLUMN) if column_moves else column
    machine, index = compiler.machine, sheet_of(compiler, node.sheet)
    get, step = machine.stores[index].get, cell_key(row, column)

    def met(key: int, value: Any) -> Any:
        """What is no plain value: a cell that waits or is tainted, a blank, or one beyond the edge of the sheet."""
        if value.__class__ is Special:
            return machine.special(index, key, value)
        return None if inside(key) else machine.cell(index, wrapped(key))

    if row_moves and column_moves:

        def read(k: int) -> Any:
            value = get(k + step)
            return met(k + step, value) if value.__class__ is Special or value is None else value

    elif row_moves:

        def read(k: int) -> Any:
            key = (k & ROWS) + step
            value = get(key)
            return met(key, value) if value.__class__ is Special or value is None else value

    elif column_moves:

        def read(k: int) -> Any:
            key = (k & ACROSS) + step
            value = get(key)
            return met(key, value) if value.__class__ is Special or value is None else value

    else:

        def read(k: int) -> Any:
            value = get(step)
            return machine.special(index, step, value) if value.__class__ is Special else value

    return read


def area_code(compiler: Compiler, node: Reference) -> Code:
    """Code for an area; of several sheets (3-D) a tuple of areas; of another book its saved values."""
    machine = compiler.machine
    if node.sheet == "#REF!":
        return lambda k: REF
    if node.book is not None:
        indexes = [external(compiler, node.book, node.sheet)]
    elif node.last_sheet is not None:
        first, last = sheet_of(compiler, node.sheet), sheet_of(compiler, node.last_sheet)
        indexes = list(range(min(first, last), max(first, last) + 1))
    else:
        indexes = [sheet_of(compiler, node.sheet)]
    index = indexes[0]

    tops, bottoms = along(node.top, 1), along(node.bottom, LAST_ROW)
    lefts, rights = along(node.left, 1), along(node.right, LAST_COLUMN)

    def area(k: int) -> CellArea:
        row, column = k >> SHIFT, k & ACROSS
        (top, top_moves), (bottom, bottom_moves) = tops, bottoms
        (left, left_moves), (right, right_moves) = lefts, rights
        if top_moves:
            top = (top + row - 1) % LAST_ROW + 1
        if bottom_moves:
            bottom = (bottom + row - 1) % LAST_ROW + 1
        if left_moves:
            left = (left + column - 1) % LAST_COLUMN + 1
        if right_moves:
            right = (right + column - 1) % LAST_COLUMN + 1
        if top > bottom:
            top, bottom = bottom, top
        if left > right:
            left, right = right, left
        return CellArea(machine, index, top, left, bottom, right)

    if len(indexes) == 1:
        return area

    def areas(k: int) -> Any:
        one = area(k)
        return tuple(CellArea(machine, each, one.top, one.left, one.bottom, one.right) for each in indexes)

    return areas


def along(end: Coordinate | None, default: int) -> Coordinate:
    """One end of an area; a whole column or row has none of its own."""
    return end or Coordinate(default, False)


def external(compiler: Compiler, book: str, sheet: str | None) -> int:
    """Index of the sheet that holds another book's saved values; it is added when first named."""
    machine = compiler.machine
    file, sheets = machine.book.externals.get(book, ("", []))
    found = next((s for s in sheets if sheet is not None and s.name.casefold() == sheet.casefold()), None)
    if found is None:
        raise FormulaError(
            f"nothing is saved of the other book [{book}]", construct="external link without saved values"
        )
    compiler.notes.add(f"reads saved values of another book ({file or book})")
    key = f"[{book}]{found.name}"
    if key.casefold() not in machine.sheet_index:
        machine.names.append(key)
        machine.sheet_index[key.casefold()] = machine.add_sheet(found.values, {})
    return machine.sheet_index[key.casefold()]


def join_code(compiler: Compiler, node: Join) -> Code:
    """Code for the reference operators."""
    left, right = compiler.operand(node.left, True), compiler.operand(node.right, True)
    work = {":": spanned, " ": common, "~": together}[node.sign]

    def joined(k: int) -> Any:
        a, b = left(k), right(k)
        for each in (a, b):
            if each.__class__ is ErrorValue:
                return each
        return work(a, b)

    return joined


def together(a: Any, b: Any) -> Any:
    """a~b, or (a,b): both areas."""
    both = (*(a if a.__class__ is tuple else (a,)), *(b if b.__class__ is tuple else (b,)))
    return both if all(each.__class__ is CellArea for each in both) else VALUE


def spanned(a: Any, b: Any) -> Any:
    """a:b, the smallest area that holds both."""
    if not (a.__class__ is CellArea and b.__class__ is CellArea and a.index == b.index):
        return VALUE
    top, left = min(a.top, b.top), min(a.left, b.left)
    return CellArea(a.machine, a.index, top, left, max(a.bottom, b.bottom), max(a.right, b.right))


def common(a: Any, b: Any) -> Any:
    """What two areas share; #NULL! where they share nothing."""
    firsts, seconds = (each if each.__class__ is tuple else (each,) for each in (a, b))
    if not all(each.__class__ is CellArea for each in (*firsts, *seconds)):
        return VALUE
    found = []
    for one in firsts:
        for two in seconds:
            top, bottom = max(one.top, two.top), min(one.bottom, two.bottom)
            left, right = max(one.left, two.left), min(one.right, two.right)
            if one.index == two.index and top <= bottom and left <= right:
                found.append(CellArea(one.machine, one.index, top, left, bottom, right))
    return NULL if not found else found[0] if len(found) == 1 else tuple(found)


def spill_code(compiler: Compiler, node: Spill) -> Code:
    """Code for A1#: the area that the formula in A1 fills, once it is computed."""
    anchor, machine = compiler.operand(node.anchor, True), compiler.machine

    def area(k: int) -> Any:
        start = anchor(k)
        if start.__class__ is not CellArea:
            return start if start.__class__ is ErrorValue else REF
        key = cell_key(start.top, start.left)
        machine.cell(start.index, key)  # make sure that it is computed
        filled = machine.filled.get((start.index, key))
        return CellArea(machine, start.index, *filled) if filled else REF

    return area


def structured_code(compiler: Compiler, node: Structured) -> Code:
    """Code for a structured reference."""
    machine = compiler.machine
    table = machine.book.tables.get(node.table.upper()) if node.table else own_table(compiler)
    if table is None:
        raise FormulaError(f'there is no table "{node.table}"', construct=f"table {node.table}")
    index = machine.sheet_index[table.sheet.casefold()]
    top, left, bottom, right = table.area
    names = [column.casefold() for column in table.columns]
    for name in (node.first, node.last):
        if name and name.casefold() not in names:
            raise FormulaError(f"table {table.name} has no column {name}", construct=f"table {table.name}")
    first = left + names.index(node.first.casefold()) if node.first else left
    last = left + names.index(node.last.casefold()) if node.last else right
    first, last = min(first, last), max(first, last)
    start, end = top + table.header, bottom - table.totals
    items = {item.casefold() for item in node.items}
    if "#this row" in items:

        def this_row(k: int) -> Any:
            row = k >> SHIFT
            return CellArea(machine, index, row, first, row, last) if start <= row <= end else VALUE

        return this_row
    spans = {"#all": (top, bottom), "#data": (start, end)}
    if table.header:
        spans["#headers"] = (top, top)
    if table.totals:
        spans["#totals"] = (bottom, bottom)
    chosen = [spans[item] for item in items if item in spans] if items else [(start, end)]
    if len(chosen) < max(len(items), 1):
        return lambda k: REF  # the table has no such row
    from_row, to_row = min(s[0] for s in chosen), max(s[1] for s in chosen)
    return lambda k: CellArea(machine, index, from_row, first, to_row, last)


def own_table(compiler: Compiler) -> Table | None:
    """The table that holds the formula being compiled."""
    formula, machine = compiler.formula, compiler.machine
    for table in machine.book.tables.values():
        top, left, bottom, right = table.area
        here = machine.sheet_index.get(table.sheet.casefold()) == compiler.sheet
        if formula and here and top <= formula.row <= bottom and left <= formula.column <= right:
            return table
    return None


def name_code(compiler: Compiler, node: Name, spread: bool) -> Code:
    """Code for a parameter in force, a defined name or a table."""
    key = node.text.upper()
    for scope in reversed(compiler.scopes):
        if key in scope:
            slot = scope[key]
            return lambda k: slot[-1]
    machine = compiler.machine
    own = (node.sheet or machine.names[compiler.sheet]).upper()
    scope_name = own if (own, key) in machine.book.names else ""
    if node.book is not None and node.book not in ("0", ""):
        scope_name = f"[{node.book}]"
        if (scope_name, key) not in machine.book.names:
            raise FormulaError(f"name {node.text} of another book", construct="name of another book")
    defined = machine.book.names.get((scope_name, key))
    if defined is None and key in machine.book.tables:
        return structured_code(compiler, Structured(node.text, (), None, None))
    if defined is None and key.startswith(HANDED_OVER) and key.removeprefix(HANDED_OVER) in BUILTINS:
        function = FunctionValue(compiler, key.removeprefix(HANDED_OVER))
        return lambda k: function
    if defined is None:
        undefined = ErrorValue("#NAME?", f"the name {node.text} is not defined")
        return lambda k: undefined
    if (scope_name, key) in compiler.naming:
        return compiler.later((scope_name, key), node.text)
    waiting: list[Code] = []
    compiler.naming[scope_name, key] = waiting
    outer, compiler.scopes = compiler.scopes, []  # the parameters around a name are not seen inside it
    try:
        tree = parsed(defined.text, defined.row, defined.column, defined.language, machine.limits.nesting)
        code = compiler.operand(tree, spread)
    finally:
        compiler.scopes = outer
        del compiler.naming[scope_name, key]
    waiting.append(code)
    return code
