"""Many books, one after the other, in several processes or on somebody else's executor; reports in the books' order."""

from __future__ import annotations

import os
from collections import deque
from functools import partial
from itertools import chain, islice
from pathlib import Path
from typing import TYPE_CHECKING, Literal

from cellsection.check.compare import Tolerance
from cellsection.check.examine import check_book
from cellsection.check.findings import Report

if TYPE_CHECKING:
    from collections.abc import Generator, Iterable, Iterator
    from concurrent.futures import Executor, Future
    from datetime import datetime

    from cellsection.check.pool import Borrowed, Crew
    from cellsection.workbook.book import Limits

__all__ = ["BOOKS", "books_in", "check_books"]

BOOKS = (".xlsx", ".xlsm", ".ods")
WORTH_PROCESSES = 1_000_000  # bytes of books in all, below which starting processes costs more than it saves
LOOKED_AT = 200  # books whose size is asked for to tell that; so many are worth processes in any case
AHEAD = 32  # books a worker that are handed out before the report on the first of them is taken
AHEAD_OF_EXECUTOR = 256  # books handed to an executor whose number of workers we do not know


def books_in(folder: Path) -> list[Path]:
    """The workbooks directly in a folder, by name; lock files of open books are left out."""
    return sorted(
        each
        for each in folder.iterdir()
        if each.suffix.lower() in BOOKS and not each.name.startswith((".", "~$")) and each.is_file()
    )


def check_books(
    paths: Iterable[str | Path],
    tolerance: Tolerance | None = None,
    *,
    limits: Limits | None = None,
    clock: datetime | Literal["saved"] | None = None,
    seed: int | None = None,
    jobs: int = 0,
    memory: int | None = None,
    executor: Executor | None = None,
    ahead: int = 0,
    trace: bool = False,
) -> Generator[Report, None, None]:
    """The report on each book, in the order of the books, each as soon as it and those before it are there.

    Only so many books are in work at a time, so that the paths of an archive may come from a generator and its
    reports need never be in memory together. A book that takes its worker down with it is reported as unreadable;
    the others are checked all the same. Leaving the iteration early, Ctrl-C among the reasons, ends the workers.

    tolerance, limits, clock, seed : see `check_book`
    jobs : how many books are checked at a time in processes of their own; 0 takes as many as there are cores where
        that is worth its start, 1 checks them in this process
    memory : bytes of address space that one worker may take; not kept on Windows, nor by an executor
    executor : check the books there instead, on a Dask cluster for example, whose workers must see the same files;
        it is not shut down
    ahead : how many books are handed to it at a time; 0 for 256
    trace : let an internal fault of cellsection come out as a Python traceback
    """
    tolerance = tolerance or Tolerance()
    coming: Iterator[Path] = map(Path, paths)
    check = partial(_checked, tolerance=tolerance, limits=limits, clock=clock, seed=seed, trace=trace)
    crew: Crew | Borrowed
    if executor is not None:
        from cellsection.check.pool import Borrowed

        crew, ahead = Borrowed(executor, trace), ahead or AHEAD_OF_EXECUTOR
    else:
        first = list(islice(coming, LOOKED_AT))
        coming = chain(first, coming)
        workers = min(jobs or _worthwhile(first, memory), len(first))
        if workers <= 1 and memory is None:
            yield from map(check, coming)
            return
        from cellsection.check.pool import Crew
        from cellsection.workbook.book import Limits

        crew = Crew(max(workers, 1), memory, (limits or Limits()).seconds)
        ahead = crew.workers * AHEAD
    handed: deque[tuple[Path, Future[Report]]] = deque()
    try:
        while True:
            for path in islice(coming, ahead - len(handed)):
                handed.append((path, crew.submit(check, path)))
            if not handed:
                return
            path, future = handed.popleft()
            found = crew.result(future, check, path)
            if isinstance(found, str):
                found = Report(str(path), tolerance, unreadable=found, clock=clock, seed=seed)
            yield found
    finally:
        crew.close(future for _, future in handed)


def _worthwhile(first: list[Path], memory: int | None) -> int:
    """How many processes pay for these books, the first of perhaps many more; a bound on memory needs them anyway."""
    many = (
        memory is not None
        or len(first) == LOOKED_AT
        or sum(path.stat().st_size for path in first if path.is_file()) > WORTH_PROCESSES
    )
    return os.cpu_count() or 1 if many else 1


def _checked(
    path: Path,
    *,
    tolerance: Tolerance,
    limits: Limits | None,
    clock: datetime | Literal["saved"] | None,
    seed: int | None,
    trace: bool,
) -> Report:
    """The report on one book; an internal fault is told as such and does not take the other books with it."""
    relative, absolute = tolerance.relative, tolerance.absolute
    try:
        return check_book(path, relative=relative, absolute=absolute, limits=limits, clock=clock, seed=seed)
    except MemoryError:
        reason = "it needs more memory than there is for it. Allow more, or check it alone."
    except Exception as fault:
        if trace:
            raise
        what = " ".join(f"{type(fault).__name__}: {fault}".split())
        reason = f"cellsection failed at it ({what}), which is a fault of cellsection, not of the book"
        reason = f"{reason}. Report it, with what --trace shows."
    return Report(str(path), tolerance, clock=clock, seed=seed, unreadable=reason)
