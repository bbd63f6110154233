"""The time allowed for a book, kept even within one formula that does not come to an end.

Between formulas, and at each step of a LAMBDA, the machine looks at the clock itself. A single function can still be
busy for hours, in a product of two large matrices for example, and hundreds of functions that each look at the clock
would be hundreds of places to forget it. So a thread waits for the deadline and then has the interpreter raise TimeUp
in the thread that calculates, between two of its steps. A single step of a library in C is finished first.
"""

from __future__ import annotations

import sys
import threading
import time
from collections.abc import Iterator
from contextlib import contextmanager, suppress

from cellsection.workbook.machine import TimeUp

__all__ = ["time_limit"]


@contextmanager
def time_limit(deadline: float) -> Iterator[None]:
    """Raise TimeUp inside, in this thread, once time.monotonic() passes the deadline; never after it."""
    here, over, lock = threading.get_ident(), threading.Event(), threading.Lock()
    raised = False

    def wait() -> None:
        nonlocal raised
        patience = min(max(deadline - time.monotonic(), 0.0), threading.TIMEOUT_MAX)
        while not over.wait(patience):
            with lock:
                if not over.is_set() and not importing(here):
                    raised = True
                    raise_in(here, TimeUp)
                    return
            patience = 0.02

    # Where there are no threads (a browser's Python) the looks at the clock between formulas have to do.
    with suppress(RuntimeError):
        threading.Thread(target=wait, daemon=True, name="time limit of a book").start()
    try:
        yield
    finally:
        with lock:
            over.set()
        if raised:  # perhaps too late to have come out yet
            raise_in(here, None)


def importing(thread: int) -> bool:
    """Whether a thread is loading a module: broken off there, it would be left half loaded for every book to come."""
    frame = sys._current_frames().get(thread)
    while frame is not None:
        if frame.f_code.co_filename.startswith("<frozen importlib"):
            return True
        frame = frame.f_back
    return False


def raise_in(thread: int, what: type[BaseException] | None) -> None:
    """Have an exception raised in a thread at its next step; None takes one back that is still to come."""
    import ctypes  # needed by few books, and slow to load

    ctypes.pythonapi.PyThreadState_SetAsyncExc(ctypes.c_ulong(thread), ctypes.py_object(what) if what else None)
