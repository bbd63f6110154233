"""The builtin spreadsheet functions, a family a file; importing this package declares them all."""

from cellsection.workbook.builtins.registry import BUILTINS

__all__ = ["BUILTINS"]
