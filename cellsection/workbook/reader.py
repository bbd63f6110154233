"""The face of the readers: a file of any supported kind in, a Book out."""

from __future__ import annotations

import gc
from pathlib import Path

from cellsection.workbook.book import Book, Limits
from cellsection.workbook.package import Package

__all__ = ["read_book"]


def read_book(path: str | Path, limits: Limits) -> Book:
    """Read a saved workbook, .xlsx, .xlsm or .ods, told apart by content. Raises WorkbookError."""
    collecting = gc.isenabled()
    gc.disable()  # nothing made here refers back to itself; looking for that again and again costs a sixth of the time
    try:
        with Package(path, limits) as package:
            if "content.xml" in package:
                from cellsection.workbook.ods import read_ods

                return read_ods(package)
            from cellsection.workbook.xlsx import read_xlsx

            return read_xlsx(package)
    finally:
        if collecting:
            gc.enable()
