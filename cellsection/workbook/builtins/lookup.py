"""Finding values by position or content, and references made at run time."""

from __future__ import annotations

from typing import Any

from cellsection.workbook.builtins.patterns import compiled
from cellsection.workbook.builtins.r1c1 import from_r1c1
from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.builtins.traits import array_of, cells_of, matcher, whole
from cellsection.workbook.coercion import NA, REF, VALUE, compared, equal, text_of
from cellsection.workbook.values import Array, ErrorValue, Scalar


def rank(value: Scalar) -> int:
    """Kinds are never mixed in a search: numbers, text, logicals."""
    return 2 if isinstance(value, bool) else 1 if isinstance(value, str) else 0


def column_of(array: Array, index: int) -> list[Scalar]:
    """A column of an array."""
    return [row[index] for row in array]


def exact(wanted: Scalar, cells: list[Scalar], wild: bool = True) -> int | None:
    """Position of the first equal cell; text may carry wildcards."""
    if isinstance(wanted, str):
        if wild:
            holds = matcher(wanted)
            return next((k for k, cell in enumerate(cells) if holds(cell)), None)
        folded = wanted.casefold()
        return next((k for k, cell in enumerate(cells) if isinstance(cell, str) and cell.casefold() == folded), None)
    if wanted.__class__ is float:
        try:
            return cells.index(wanted)
        except ValueError:
            pass
    if wanted is None:
        wanted = 0.0
    kind = wanted.__class__
    return next((k for k, cell in enumerate(cells) if cell.__class__ is kind and equal(cell, wanted)), None)


def below(wanted: Scalar, cells: list[Scalar]) -> int | None:
    """Position of the last cell not above the wanted one in cells sorted upwards, by binary search."""
    if wanted is None:
        wanted = 0.0
    kind = rank(wanted)
    low, high, found = 0, len(cells) - 1, None
    while low <= high:
        middle = (low + high) // 2
        probe = middle
        while probe <= high and (
            cells[probe] is None or isinstance(cells[probe], ErrorValue) or rank(cells[probe]) != kind
        ):
            probe += 1
        if probe > high:
            high = middle - 1
            continue
        if compared(cells[probe], wanted) <= 0:
            found, low = probe, probe + 1
        else:
            high = middle - 1
    return found


def above(wanted: Scalar, cells: list[Scalar]) -> int | None:
    """Position of the last cell not below the wanted one, in cells sorted downwards."""
    found = None
    for k, cell in enumerate(cells):
        if cell is None or isinstance(cell, ErrorValue) or rank(cell) != rank(wanted):
            continue
        if compared(cell, wanted) < 0:
            break
        found = k
    return found


def table_search(wanted: Scalar, keys: list[Scalar], approximate: bool) -> int:
    """Where VLOOKUP and HLOOKUP find their key; #N/A where they do not."""
    found = below(wanted, keys) if approximate else exact(wanted, keys)
    if found is None:
        raise ErrorResult(NA)
    return found


@builtin("VLOOKUP", "value range number logical?")
def vlookup(wanted: Scalar, table: Any, column: float, approximate: bool = True) -> Scalar:
    array = array_of(table)
    width = table.shape[1] if hasattr(table, "shape") else len(array[0])
    if column < 1:
        return VALUE
    if int(column) > width:
        return REF
    row = table_search(wanted, column_of(array, 0) if array else [], approximate)
    return array[row][int(column) - 1] if int(column) <= len(array[row]) else None


@builtin("HLOOKUP", "value range number logical?")
def hlookup(wanted: Scalar, table: Any, row: float, approximate: bool = True) -> Scalar:
    array = array_of(table)
    height = table.shape[0] if hasattr(table, "shape") else len(array)
    if row < 1:
        return VALUE
    if int(row) > height:
        return REF
    column = table_search(wanted, list(array[0]) if array else [], approximate)
    return array[int(row) - 1][column] if int(row) <= len(array) else None


@builtin("LOOKUP", "value table table?")
def lookup(wanted: Scalar, area: Any, results: Any = None) -> Scalar:
    array = whole(area)
    rows, columns = len(array), len(array[0]) if array else 0
    if results is None:
        keys = list(array[0]) if columns > rows else column_of(array, 0)
        values = list(array[-1]) if columns > rows else column_of(array, columns - 1)
    else:
        keys, values = list(cells_of(array)), list(cells_of(whole(results)))
    found = below(wanted, keys)
    if found is None:
        return NA
    return values[found] if found < len(values) else NA


@builtin("MATCH", "value range number?")
def match(wanted: Scalar, area: Any, kind: float = 1.0) -> Any:
    array = array_of(area)
    if array and len(array) > 1 and len(array[0]) > 1:
        return NA
    cells = list(cells_of(array))
    found = exact(wanted, cells) if kind == 0 else below(wanted, cells) if kind > 0 else above(wanted, cells)
    return NA if found is None else float(found + 1)


def by_pattern(context: Context, pattern: str, cells: list[Scalar]) -> int | None:
    """Position of the first text that a regular expression meets. Whether it must meet all of a text is not known:
    where that decides, the search is reported.
    """
    position = None
    for k, cell in enumerate(cells):
        if not isinstance(cell, str):
            continue
        expression = compiled(context, pattern, cell, False)
        if expression.search(cell) is None:
            continue
        if expression.fullmatch(cell) is None:
            context.unsupported("a search by a regular expression that meets part of a text")
        position = k
        break
    return position


def searched(
    context: Context, wanted: Scalar, cells: list[Scalar], match_mode: float, search_mode: float
) -> int | None:
    """Position by XMATCH's rules."""
    order = list(range(len(cells)))
    if search_mode in (-1, -2):
        order.reverse()
    viewed = [cells[k] for k in order]
    if match_mode == 3:
        pattern = text_of(wanted)
        position = None if isinstance(pattern, ErrorValue) else by_pattern(context, pattern, viewed)
        return None if position is None else order[position]
    position = exact(wanted, viewed, wild=match_mode == 2)
    if position is None and wanted is None:
        position = next((k for k, cell in enumerate(viewed) if cell is None), None)
    if position is None and match_mode in (-1, 1):
        best: int | None = None
        for k, cell in enumerate(viewed):
            if cell is None or isinstance(cell, ErrorValue) or rank(cell) != rank(wanted):
                continue
            side = compared(cell, wanted)
            if side == match_mode and (best is None or compared(cell, viewed[best]) == -match_mode):
                best = k
        position = best
    return None if position is None else order[position]


@builtin("XMATCH", "context value range number? number?")
def xmatch(context: Context, wanted: Scalar, area: Any, match_mode: float = 0.0, search_mode: float = 1.0) -> Any:
    array = whole(area)
    if array and len(array) > 1 and len(array[0]) > 1:
        return VALUE
    found = searched(context, wanted, list(cells_of(array)), match_mode, search_mode)
    return NA if found is None else float(found + 1)


@builtin("XLOOKUP", "context value range range any? number? number?")
def xlookup(
    context: Context,
    wanted: Scalar,
    area: Any,
    results: Any,
    missing: Scalar = NA,
    match_mode: float = 0.0,
    search_mode: float = 1.0,
) -> Any:
    keys, values = whole(area), whole(results)
    upright = len(keys[0]) == 1
    if not upright and len(keys) > 1:
        return VALUE
    if (len(values) if upright else len(values[0])) != (len(keys) if upright else len(keys[0])):
        return VALUE
    found = searched(context, wanted, list(cells_of(keys)), match_mode, search_mode)
    if found is None:
        return NA if missing is None else missing
    if upright:
        return (values[found],) if len(values[found]) > 1 else values[found][0]
    return tuple((row[found],) for row in values) if len(values) > 1 else values[0][found]


@builtin("INDEX", "table number? number? number?")
def index(area: Any, row: float = 0.0, column: float | None = None, number: float = 1.0) -> Any:
    if isinstance(area, tuple) and area and hasattr(area[0], "cells"):
        if not 1 <= number <= len(area):
            return REF
        area = area[int(number) - 1]
    if isinstance(area, ErrorValue):
        return area
    rows, columns = area.shape if hasattr(area, "shape") else (len(array_of(area)), len(array_of(area)[0]))
    r, c = int(row), int(column or 0)
    if column is None and rows == 1 and r:
        r, c = 1, r
    elif column is None and columns == 1:
        c = 1
    if r < 0 or c < 0:
        return VALUE
    if r > rows or c > columns:
        return REF
    if hasattr(area, "part"):
        return area.part(r, c)
    array = array_of(area)
    picked = array if not r else (array[r - 1],)
    if c:
        picked = tuple((each[c - 1],) for each in picked)
    return picked[0][0] if len(picked) == 1 and len(picked[0]) == 1 else picked


def extent(size: float) -> int:
    """Rows or columns, cut to a whole number; a positive share of one is one."""
    return 1 if 0 < size < 1 else int(size)


@builtin("OFFSET", "context reference number number number? number?")
def offset(
    context: Context, area: Any, down: float, right: float, height: float | None = None, width: float | None = None
) -> Any:
    if isinstance(area, tuple):
        return VALUE
    rows, columns = area.shape
    top, left = area.top + int(down), area.left + int(right)
    high, wide = extent(rows if height is None else height), extent(columns if width is None else width)
    if not high or not wide:
        return REF
    bottom, end = (top + high - 1, left + wide - 1)
    if high < 0:
        top, bottom = top + high + 1, top
    if wide < 0:
        left, end = left + wide + 1, left
    return context.area(area.sheet, top, left, bottom, end)


@builtin("INDIRECT", "context text logical?")
def indirect(context: Context, text: str, a1: bool = True) -> Any:
    if not a1:
        found = from_r1c1(text.strip(), context.row, context.column)
        if found is None:
            return REF
        text = found
    return context.reference(text, context.sheet_name)


@builtin("ROW", "context reference?")
def row_(context: Context, area: Any = None) -> Any:
    if area is None:
        return float(context.row)
    first = area[0] if isinstance(area, tuple) else area
    rows = first.shape[0]
    return float(first.top) if rows == 1 else tuple((float(first.top + k),) for k in range(min(rows, 1_048_576)))


@builtin("COLUMN", "context reference?")
def column_(context: Context, area: Any = None) -> Any:
    if area is None:
        return float(context.column)
    first = area[0] if isinstance(area, tuple) else area
    columns = first.shape[1]
    return float(first.left) if columns == 1 else (tuple(float(first.left + k) for k in range(columns)),)


@builtin("ROWS", "range")
def rows_(area: Any) -> float:
    return float(area.shape[0] if hasattr(area, "shape") else len(array_of(area)))


@builtin("COLUMNS", "range")
def columns_(area: Any) -> float:
    return float(area.shape[1] if hasattr(area, "shape") else len(array_of(area)[0]))


@builtin("AREAS", "reference")
def areas(area: Any) -> float:
    return float(len(area)) if isinstance(area, tuple) else 1.0


@builtin("ADDRESS", "number number number? logical? text?")
def address(row: float, column: float, kind: float = 1.0, a1: bool = True, sheet: str = "") -> Any:
    from cellsection.workbook.book import column_letters

    r, c = int(row), int(column)
    if not (1 <= kind <= 4) or not (1 <= r <= 1_048_576 and 1 <= c <= 16_384):
        return VALUE
    if a1:
        text = f"{'$' if kind in (1, 3) else ''}{column_letters(c)}{'$' if kind in (1, 2) else ''}{r}"
    else:
        text = f"R{r if kind in (1, 2) else f'[{r}]'}C{c if kind in (1, 3) else f'[{c}]'}"
    if not sheet:
        return text
    plain = sheet.replace("_", "").replace(".", "").isalnum() and not sheet[0].isdigit()
    return f"{sheet}!{text}" if plain else "'" + sheet.replace("'", "''") + f"'!{text}"


@builtin("HYPERLINK", "text value?")
def hyperlink(target: str, shown: Scalar = None) -> Scalar:
    return target if shown is None else shown


@builtin("FORMULATEXT", "context reference")
def formulatext(context: Context, area: Any) -> Any:
    text = context.formula_text(area.sheet, area.top, area.left) if not isinstance(area, tuple) else ""
    if text.startswith(("of:", "{of:")):  # the applications answer in their own spelling of references
        context.unsupported("FORMULATEXT of a formula in OpenFormula's spelling")
    return text or NA


@builtin("MULTIPLE.OPERATIONS", "context reference reference value reference? value?")
def multiple_operations(context: Context, wanted: Any, first: Any, x: Any, second: Any = None, y: Any = None) -> Any:
    given = [(first, x)] if second is None else [(first, x), (second, y)]
    return context.supposed(given, wanted)
