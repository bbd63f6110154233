"""Many books, one after the other or in several processes; the reports come in the order of the books."""

from __future__ import annotations

import os
from pathlib import Path
from typing import TYPE_CHECKING

from cellsection.check.compare import Tolerance
from cellsection.check.examine import check_book
from cellsection.check.findings import Report

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["BOOKS", "books_in", "check_books"]

BOOKS = (".xlsx", ".xlsm", ".ods")
WORTH_PROCESSES = 1_000_000  # bytes of books in all, below which starting processes costs more than it saves


def books_in(folder: Path) -> list[Path]:
    """The workbooks directly in a folder, by name; lock files of open books are left out."""
    return sorted(
        each
        for each in folder.iterdir()
        if each.suffix.lower() in BOOKS and not each.name.startswith((".", "~$")) and each.is_file()
    )


def check_books(
    paths: Sequence[Path], tolerance: Tolerance, *, processes: int = 0, trace: bool = False
) -> Iterator[Report]:
    """The report on each book.

    processes : how many books are checked at a time; 0 takes as many as there are cores where that is worth its start
    trace : let an internal fault of cellsection come out as a Python traceback
    """
    if not processes:
        size = sum(path.stat().st_size for path in paths if path.is_file())
        processes = os.cpu_count() or 1 if size > WORTH_PROCESSES else 1
    processes = min(processes, len(paths))
    if processes <= 1:
        for path in paths:
            yield _checked(path, tolerance, trace)
        return
    from concurrent.futures import ProcessPoolExecutor  # costs its start-up only where it pays
    from concurrent.futures.process import BrokenProcessPool

    with ProcessPoolExecutor(processes) as pool:
        waiting = [pool.submit(_checked, path, tolerance, trace) for path in paths]
        for path, report in zip(paths, waiting, strict=True):
            try:
                yield report.result()
            except BrokenProcessPool:
                reason = "the process that read it, or one beside it, ended abruptly. Check this book alone."
                yield Report(str(path), tolerance, unreadable=reason)


def _checked(path: Path, tolerance: Tolerance, trace: bool) -> Report:
    """The report on one book; an internal fault is told as such and does not take the other books with it."""
    try:
        return check_book(path, relative=tolerance.relative, absolute=tolerance.absolute)
    except Exception as fault:
        if trace:
            raise
        what = " ".join(f"{type(fault).__name__}: {fault}".split())
        reason = f"cellsection failed at it ({what}), which is a fault of cellsection, not of the book"
        return Report(str(path), tolerance, unreadable=f"{reason}. Report it, with what --trace shows.")
