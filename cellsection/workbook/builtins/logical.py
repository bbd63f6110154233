"""Logical and information functions. IF and the other lazy forms are with the compiler, in workbook/forms."""

from __future__ import annotations

from typing import Any

from cellsection.workbook.builtins.registry import Context, ErrorResult, builtin
from cellsection.workbook.builtins.traits import cells_of, flat
from cellsection.workbook.coercion import NA, VALUE, logical_of
from cellsection.workbook.values import ErrorValue, Scalar

ERROR_NUMBERS = {
    "#NULL!": 1, "#DIV/0!": 2, "#VALUE!": 3, "#REF!": 4, "#NAME?": 5, "#NUM!": 6, "#N/A": 7, "#GETTING_DATA": 8,
    "#SPILL!": 9, "#CALC!": 14,
}  # fmt: skip


def truths(arguments: Any) -> list[bool]:
    """The logicals and numbers among the arguments; text in cells does not count."""
    found: list[bool] = []
    for argument in arguments:
        if isinstance(argument, tuple) or hasattr(argument, "cells"):
            for cell in cells_of(argument):
                if isinstance(cell, ErrorValue):
                    raise ErrorResult(cell)
                if isinstance(cell, (bool, float)):
                    found.append(bool(cell))
        else:
            truth = logical_of(argument)
            if isinstance(truth, ErrorValue):
                raise ErrorResult(truth)
            found.append(truth)
    if not found:
        raise ErrorResult(VALUE)
    return found


@builtin("AND", "range+")
def and_(*arguments: Any) -> bool:
    return all(truths(arguments))


@builtin("OR", "range+")
def or_(*arguments: Any) -> bool:
    return any(truths(arguments))


@builtin("XOR", "range+")
def xor(*arguments: Any) -> bool:
    return sum(truths(arguments)) % 2 == 1


@builtin("NOT", "logical")
def not_(value: bool) -> bool:
    return not value


@builtin("TRUE", "")
def true() -> bool:
    return True


@builtin("FALSE", "")
def false() -> bool:
    return False


@builtin("NA", "")
def na() -> ErrorValue:
    return NA


@builtin("ISBLANK", "any")
def isblank(value: Scalar) -> bool:
    return value is None


@builtin("ISERROR", "any")
def iserror(value: Scalar) -> bool:
    return isinstance(value, ErrorValue)


@builtin("ISERR", "any")
def iserr(value: Scalar) -> bool:
    return isinstance(value, ErrorValue) and value != NA


@builtin("ISNA", "any")
def isna(value: Scalar) -> bool:
    return value == NA


@builtin("ISNUMBER", "any")
def isnumber(value: Scalar) -> bool:
    return isinstance(value, float)


@builtin("ISTEXT", "any")
def istext(value: Scalar) -> bool:
    return isinstance(value, str)


@builtin("ISNONTEXT", "any")
def isnontext(value: Scalar) -> bool:
    return not isinstance(value, str)


@builtin("ISLOGICAL", "any")
def islogical(value: Scalar) -> bool:
    return isinstance(value, bool)


@builtin("ISREF", "range")
def isref(value: Any) -> bool:
    return hasattr(value, "cells") or (isinstance(value, tuple) and bool(value) and hasattr(value[0], "cells"))


@builtin("ISFORMULA", "context reference")
def isformula(context: Context, area: Any) -> bool:
    return context.has_formula(area.sheet, area.top, area.left)


@builtin("ISEVEN", "number")
def iseven(x: float) -> bool:
    return int(x) % 2 == 0


@builtin("ISODD", "number")
def isodd(x: float) -> bool:
    return int(x) % 2 == 1


@builtin("N", "any")
def n(value: Scalar) -> Any:
    if isinstance(value, (float, ErrorValue)):
        return value
    return 1.0 if value is True else 0.0


@builtin("T", "any")
def t(value: Scalar) -> Any:
    return value if isinstance(value, (str, ErrorValue)) else ""


@builtin("TYPE", "range")
def type_(value: Any) -> float:
    if isinstance(value, tuple) or (hasattr(value, "shape") and value.shape != (1, 1)):
        return 64.0
    cell = value.value(1, 1) if hasattr(value, "value") else value
    if isinstance(cell, bool):
        return 4.0
    return 2.0 if isinstance(cell, str) else 16.0 if isinstance(cell, ErrorValue) else 1.0


@builtin("ERROR.TYPE", "any")
def error_type(value: Scalar) -> Any:
    return float(ERROR_NUMBERS.get(value.code, 0)) or NA if isinstance(value, ErrorValue) else NA


@builtin("SHEETS", "context reference?")
def sheets(context: Context, area: Any = None) -> float:
    if area is None:
        return float(len(context.sheet_names))
    return float(len(area)) if isinstance(area, tuple) else 1.0


@builtin("SHEET", "context range?")
def sheet(context: Context, which: Any = None) -> Any:
    names = [name.casefold() for name in context.sheet_names]
    if which is None:
        wanted = context.sheet_name
    elif isinstance(which, str):
        wanted = which
    elif hasattr(which, "sheet"):
        wanted = which.sheet
    elif isinstance(which, tuple) and which and hasattr(which[0], "sheet"):
        wanted = which[0].sheet
    elif isinstance(which, ErrorValue):
        return which
    else:  # no sheet is called so
        return NA
    return float(names.index(wanted.casefold()) + 1) if wanted.casefold() in names else NA


@builtin("CELL", "context text reference?")
def cell(context: Context, what: str, area: Any = None) -> Any:
    from cellsection.workbook.book import column_letters

    top, left = (area.top, area.left) if area is not None else (context.row, context.column)
    kind = what.strip().lower()
    if kind == "row":
        return float(top)
    if kind == "col":
        return float(left)
    if kind == "address":
        return f"${column_letters(left)}${top}"
    if kind in ("contents", "type"):
        value = area.value(1, 1) if area is not None else None
        if kind == "contents":
            return 0.0 if value is None else value
        return "b" if value is None else "l" if isinstance(value, str) else "v"
    context.unsupported(f'CELL("{kind}")')
    return VALUE


@builtin("INFO", "context text", volatile="machine")
def info(context: Context, what: str) -> Any:
    if what.strip().lower() == "numfile":
        return float(len(context.sheet_names))
    context.unsupported(f'INFO("{what}")')
    return VALUE


@builtin("COUNTBLANK", "range")
def countblank(area: Any) -> float:
    cells = flat(area)
    rows, columns = area.shape if hasattr(area, "shape") else (1, len(cells))
    return float(rows * columns - sum(not (c is None or c == "") for c in cells))
