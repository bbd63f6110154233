"""A sheet for the tests: examples run on their cells, once in Python alone and once out of a saved workbook."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

from openpyxl import Workbook
from openpyxl.utils import get_column_letter, range_boundaries
from openpyxl.worksheet.formula import ArrayFormula

from cellsection.catalogue import CATALOGUE
from cellsection.hosts.headless import recalculate

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

    from cellsection.catalogue.record import Table

__all__ = ["in_python", "in_workbook"]

ADDRESS = re.compile(r'"[^"]*"|\b[A-Z]{1,2}[0-9]+(?::[A-Z]{1,2}[0-9]+)?\b')
FREE = "AA1"  # where formulas go: no example reaches as far


def cells_of(tables: Mapping[str, Table]) -> dict[tuple[int, int], Any]:
    """The cells of the tables by row and column."""
    found = {}
    for first, rows in tables.items():
        column, row, _, _ = range_boundaries(first)
        found |= {(row + r, column + c): cell for r, cells in enumerate(rows) for c, cell in enumerate(cells)}
    return found


def in_python(formula: str, tables: Mapping[str, Table]) -> Any:
    """The result of a formula that nests cell functions, INDEX and LEFT, without any host."""
    cells = cells_of(tables)

    def area(address: str) -> Any:
        left, top, right, bottom = range_boundaries(address)
        rows = tuple(tuple(cells.get((r, c)) for c in range(left, right + 1)) for r in range(top, bottom + 1))
        return rows if ":" in address else rows[0][0]

    names = {name: function.call for name, function in CATALOGUE.items()}
    names |= {"AREA": area, "INDEX": lambda rows, r, c: rows[r - 1][c - 1], "LEFT": lambda text, count: text[:count]}
    text = ADDRESS.sub(lambda met: met[0] if met[0].startswith('"') else f'AREA("{met[0]}")', formula.removeprefix("="))
    return eval(text, {"__builtins__": {}}, names)  # the formulas are this project's own


def in_workbook(folder: Path, formula: str, tables: Mapping[str, Table], rows: int = 1, columns: int = 1) -> Any:
    """The result of a formula in a saved workbook, recalculated: one value, or an array formula's area as rows."""
    book = Workbook()
    sheet = book.active
    for (row, column), cell in cells_of(tables).items():
        sheet.cell(row, column, cell)
    left, top, _, _ = range_boundaries(FREE)
    area = f"{FREE}:{get_column_letter(left + columns - 1)}{top + rows - 1}"
    sheet[FREE] = formula if rows == columns == 1 else ArrayFormula(area, formula)
    book.save(folder / "example.xlsx")
    values = {cell.address: cell.value for cell in recalculate(folder / "example.xlsx").cells}
    if rows == columns == 1:
        return values[FREE]
    return tuple(tuple(values[f"{get_column_letter(left + c)}{top + r}"] for c in range(columns)) for r in range(rows))
