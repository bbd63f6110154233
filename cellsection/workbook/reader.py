"""The face of the readers: a file of any supported kind in, a Book out."""

from __future__ import annotations

import gc
from datetime import UTC, datetime
from pathlib import Path

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Limits
from cellsection.workbook.package import Package

__all__ = ["read_book", "saved_moment"]


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


def saved_moment(path: str | Path, limits: Limits) -> datetime:
    """When a book says that it was last saved, without a time zone. Raises WorkbookError where it does not say.

    An .xlsx file says it in universal time, an .ods file in the local time of its author.
    """
    with Package(path, limits) as package:
        said = ""
        for part, way in (("docProps/core.xml", ("modified",)), ("meta.xml", ("meta", "date"))):
            if part in package:
                said = next((each.text for each in package.tree(part).along(*way)), said).strip()
        try:
            moment = datetime.fromisoformat(said)
        except ValueError:
            raise WorkbookError(
                f"{package.name} does not say when it was saved", remedy="Give the moment to calculate for instead"
            ) from None
    return moment.astimezone(UTC).replace(tzinfo=None) if moment.tzinfo else moment
