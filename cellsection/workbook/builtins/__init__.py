"""The builtin spreadsheet functions, a family a file; importing this package declares them all."""

from cellsection.workbook.builtins import (
    arrays,
    conditional,
    dates,
    distributions,
    financial,
    integers,
    logical,
    lookup,
    mathematics,
    regression,
    statistics,
    text,
)
from cellsection.workbook.builtins.registry import BUILTINS

__all__ = [
    "BUILTINS",
    "arrays",
    "conditional",
    "dates",
    "distributions",
    "financial",
    "integers",
    "logical",
    "lookup",
    "mathematics",
    "regression",
    "statistics",
    "text",
]
