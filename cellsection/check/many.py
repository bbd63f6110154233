"""Many books, one after the other, in several processes or on somebody else's executor; reports in the books' order."""

from __future__ import annotations

import os
from collections import deque
from functools import partial
from itertools import islice
from pathlib import Path
from typing import TYPE_CHECKING, Literal

from cellsection.check.compare import Tolerance
from cellsection.check.examine import check_book
from cellsection.check.findings import Report

if TYPE_CHECKING:
    from collections.abc import Callable, Generator, Iterable, Iterator
    from concurrent.futures import Executor, Future
    from datetime import datetime

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
    met = (Path(path) for path in paths)
    tolerance = tolerance or Tolerance()
    check = partial(_checked, tolerance=tolerance, limits=limits, clock=clock, seed=seed, trace=trace)
    if executor is not None:

        def taken(path: Path, coming: Future[Report]) -> Report:
            try:
                return coming.result()
            except Exception as fault:  # whatever an executor raises where a worker dies; it is for this book only
                if trace:
                    raise
                reason = f"its worker did not come back ({type(fault).__name__}). Check this book alone."
                return Report(str(path), tolerance, clock=clock, seed=seed, unreadable=reason)

        yield from _in_order(met, ahead or AHEAD_OF_EXECUTOR, lambda path: executor.submit(check, path), taken)
        return
    first = list(islice(met, LOOKED_AT))
    workers = jobs or (_worthwhile(first) if memory is None else os.cpu_count() or 1)
    if len(first) < LOOKED_AT:
        workers = min(workers, len(first))
    if workers <= 1 and memory is None:
        for path in _chained(first, met):
            yield check(path)
        return
    from cellsection.check.pool import Crew
    from cellsection.workbook.book import Limits

    crew = Crew(max(workers, 1), memory, (limits or Limits()).seconds)

    def died(path: Path) -> Report:
        return Report(str(path), tolerance, clock=clock, seed=seed, unreadable=crew.obituary)

    try:
        yield from _in_order(
            _chained(first, met),
            crew.workers * AHEAD,
            lambda path: crew.submit(check, path),
            lambda path, coming: crew.result(coming, check, path) or died(path),
        )
    finally:
        crew.close()


def _in_order(
    paths: Iterator[Path],
    ahead: int,
    submit: Callable[[Path], Future[Report]],
    result: Callable[[Path, Future[Report]], Report],
) -> Iterator[Report]:
    """The reports in the order of the books, of which no more than `ahead` are handed out and not yet taken back."""
    handed: deque[tuple[Path, Future[Report]]] = deque()
    try:
        while True:
            for path in islice(paths, ahead - len(handed)):
                handed.append((path, submit(path)))
            if not handed:
                return
            path, coming = handed.popleft()
            yield result(path, coming)
    finally:
        for _, coming in handed:
            coming.cancel()


def _chained(first: list[Path], rest: Iterator[Path]) -> Iterator[Path]:
    yield from first
    yield from rest


def _worthwhile(first: list[Path]) -> int:
    """How many processes pay for these books, the first of perhaps many more."""
    many = len(first) == LOOKED_AT or sum(path.stat().st_size for path in first if path.is_file()) > WORTH_PROCESSES
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
