"""Worker processes for many books: started lean, bounded in memory and time, replaced when one of them dies."""

from __future__ import annotations

import multiprocessing
import os
import threading
from concurrent.futures import CancelledError, ProcessPoolExecutor
from concurrent.futures.process import BrokenProcessPool
from typing import TYPE_CHECKING, Any, TypeAlias

from cellsection.errors import CellsectionError

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable
    from concurrent.futures import Executor, Future
    from multiprocessing.process import BaseProcess
    from pathlib import Path

    from cellsection.check.findings import Report

    Check: TypeAlias = Callable[[Path], Report]

__all__ = ["Borrowed", "Crew"]

PATIENCE = 1.25  # a book that keeps its worker busy for so much longer than its time limit is given up with the worker
LONGEST = threading.TIMEOUT_MAX / 2  # what an alarm can be set to; at least three weeks on any platform
MARGIN = 10.0  # seconds, likewise; for reading and reporting, which the time limit does not count


class Pool:
    """A ProcessPoolExecutor whose workers can be ended at once."""

    def __init__(self, workers: int, memory: int | None) -> None:
        # Forked workers would copy the threads of whoever calls us; a spawned one starts Python from nothing.
        way = "forkserver" if "forkserver" in multiprocessing.get_all_start_methods() else "spawn"
        context = multiprocessing.get_context(way)
        self.executor = ProcessPoolExecutor(workers, context, initializer=_begin, initargs=(memory,))
        self.processes: set[BaseProcess] = set()

    def submit(self, *call: Any) -> Future[Any]:
        """Hand out a call. Raises BrokenProcessPool where a worker has died."""
        before = set(multiprocessing.active_children())
        try:
            return self.executor.submit(*call)
        finally:
            self.processes |= set(multiprocessing.active_children()) - before

    def close(self) -> None:
        """End the workers, those that are busy too, and wait until they are gone."""
        for process in self.processes:
            process.kill()
        self.executor.shutdown(cancel_futures=True)


class Crew:
    """Workers for many books, of which one that dies spoils the book it had and no other.

    A pool whose worker dies does not say at which book, and gives up all that it had in hand. Those books are then
    checked one by one in a process apart, where the guilty one stands out, while a new pool goes on with the rest.

    workers : how many books are checked at a time
    memory : bytes of address space a worker may take, None for no bound; kept where the platform can (not on Windows)
    seconds : time limit of a book
    """

    def __init__(self, workers: int, memory: int | None, seconds: float) -> None:
        self.workers, self.memory = workers, memory
        self.patience = min(seconds * PATIENCE + MARGIN, LONGEST)
        self.pool = Pool(workers, memory)
        self.apart: Pool | None = None

    def submit(self, check: Check, path: Path) -> Future[Report]:
        """Hand out a book."""
        try:
            return self.pool.submit(_within, self.patience, check, path)
        except BrokenProcessPool:
            self.pool.close()
            self.pool = Pool(self.workers, self.memory)
            return self.pool.submit(_within, self.patience, check, path)

    def result(self, coming: Future[Report], check: Check, path: Path) -> Report | str:
        """The report on a book that was handed out, or why there is none: it takes its worker down with it."""
        try:
            return coming.result()
        except (BrokenProcessPool, CancelledError):
            pass
        self.apart = self.apart or Pool(1, self.memory)
        try:
            report: Report = self.apart.submit(_within, self.patience, check, path).result()
            return report
        except BrokenProcessPool:
            self.apart.close()
            self.apart = Pool(1, self.memory)
            self._blame_no_book(self.apart)
            return (
                "the process that checked it ended abruptly: it was out of memory, was ended from outside, or did not "
                f"come back within {self.patience:,.0f} s. Check this book alone."
            )

    def _blame_no_book(self, fresh: Pool) -> None:
        """Raise where a worker dies that has been given no book yet."""
        try:
            fresh.submit(os.getpid).result()
        except BrokenProcessPool:
            raise CellsectionError(
                "processes for checking books cannot be started here. Check the books one at a time (jobs=1, no bound "
                'on memory), allow more memory, or call from a file, below if __name__ == "__main__".'
            ) from None

    def close(self, handed: Iterable[Future[Report]] = ()) -> None:  # noqa: ARG002 - they end with their workers
        """End all workers, and with them what they have in hand."""
        self.pool.close()
        if self.apart is not None:
            self.apart.close()


class Borrowed:
    """Somebody else's executor, with the face of a Crew. Whatever it raises for a book spoils that book only."""

    def __init__(self, executor: Executor, trace: bool) -> None:
        self.executor, self.trace = executor, trace

    def submit(self, check: Check, path: Path) -> Future[Report]:
        """Hand out a book."""
        return self.executor.submit(check, path)

    def result(self, coming: Future[Report], check: Check, path: Path) -> Report | str:  # noqa: ARG002 - as a Crew
        """The report on a book that was handed out, or why there is none."""
        try:
            return coming.result()
        except Exception as fault:
            if self.trace:
                raise
            return f"its worker did not come back ({type(fault).__name__}). Check this book alone."

    def close(self, handed: Iterable[Future[Report]]) -> None:
        """Give back the executor without the books it has not begun."""
        for each in handed:
            each.cancel()


def _within(seconds: float, check: Check, path: Path) -> Report:
    """Check one book in a worker, which is ended where the book does not come back.

    A book's own time limit ends its recalculation with a finding; this is for what never looks at the clock, such as
    a call into a compiled library. The pool notices the worker's end.
    """
    import faulthandler

    with open(os.devnull, "w") as nowhere:  # noqa: PTH123 - a device
        faulthandler.dump_traceback_later(seconds, exit=True, file=nowhere)
        try:
            return check(path)
        finally:
            faulthandler.cancel_dump_traceback_later()


def _begin(memory: int | None) -> None:
    """Prepare a worker: Ctrl-C ends it without a word, its memory is bounded, and it does not outlive its parent."""
    import signal

    signal.signal(signal.SIGINT, signal.SIG_DFL)
    if memory is not None:
        try:
            import resource
        except ImportError:  # Windows
            pass
        else:
            _, most = resource.getrlimit(resource.RLIMIT_AS)
            bound = memory if most == resource.RLIM_INFINITY else min(memory, most)
            resource.setrlimit(resource.RLIMIT_AS, (bound, most))
    threading.Thread(target=_end_with_parent, daemon=True).start()


def _end_with_parent() -> None:
    parent = multiprocessing.parent_process()
    if parent is not None:
        parent.join()
        os._exit(1)
