"""Random workbooks recalculated here and in LibreOffice, compared cell by cell; fails at a difference not known."""

from __future__ import annotations

import shutil
import tempfile
import time
from pathlib import Path
from typing import TYPE_CHECKING

from tests.differential.comparison import compare_books
from tests.differential.report import added, summary

if TYPE_CHECKING:
    from tests.differential.comparison import Outcome

__all__ = ["run"]

BOOK = 4000  # formula cells a book
BATCH = 4  # books a LibreOffice process converts


def run(cells: int, seed: int) -> int:
    """Compare at least so many formula cells and print what was found; 1 where a difference is not explained."""
    soffice = shutil.which("soffice")
    if not soffice:
        print("LibreOffice (soffice) is not on the search path.")
        return 1
    start = time.perf_counter()
    outcomes: list[Outcome] = []
    with tempfile.TemporaryDirectory() as scratch:
        while (done := sum(each.cells for each in outcomes)) < cells:
            books = min(BATCH, -(-(cells - done) // (2 * BOOK)))  # each is compared as .xlsx and as .ods
            outcomes += compare_books(soffice, list(range(seed, seed + books)), BOOK, Path(scratch))
            seed += books
    text, unexplained = summary(added(outcomes))
    print(text)
    print(f"{time.perf_counter() - start:.0f} seconds")
    return int(unexplained > 0)
