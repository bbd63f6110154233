"""Every book in a folder: the share of its formula cells that equal the saved value, the time, what is unsupported.

TODAY gives the day the book was saved. Cells that change all the same (NOW, RAND) are counted apart.
"""

from __future__ import annotations

import time
from typing import TYPE_CHECKING

from cellsection.check import Tolerance, Verdict
from cellsection.check.findings import Cycle, Difference, Unsupported
from cellsection.check.many import books_in, check_books
from cellsection.check.report import counted

if TYPE_CHECKING:
    from pathlib import Path

    from cellsection.check import Report

__all__ = ["run"]

TOLD = 3  # differences of a book that are named


def run(folder: Path) -> int:
    """Check and print, book by book; 1 where a book could not be read."""
    heading = (
        f"{'book':36} {'formulas':>9} {'equal':>8} {'volatile':>8} {'differ':>7} {'unverified':>10} {'seconds':>8}"
    )
    print(heading + "  not supported")
    cells = equal = changing = unreadable = 0
    for path in books_in(folder):
        start = time.perf_counter()
        (report,) = check_books([path], Tolerance(), jobs=1, clock="saved")
        seconds = time.perf_counter() - start
        if report.verdict is Verdict.UNREADABLE:
            print(f"{path.name[:36]:36} {report.unreadable}")
            unreadable += 1
            continue
        tally = report.tally
        cells += tally.cells
        equal += tally.hold
        changing += tally.volatile
        unverified = tally.not_verified + tally.unsaved
        share = tally.hold / (tally.cells - tally.volatile) if tally.cells > tally.volatile else 1.0
        numbers = f"{tally.cells:9,} {share:8.2%} {tally.volatile:8,} {tally.differ:7,} {unverified:10,} {seconds:8.2f}"
        print(f"{path.name[:36]:36} {numbers}  {_unsupported(report)}")
        for each in [each for each in report.findings if isinstance(each, Difference)][:TOLD]:
            print(f"{'':36}   {each.spot}: saved {str(each.saved)[:30]}, recalculated {str(each.recalculated)[:30]}")
    compared = cells - changing
    print(f"{'all':36} {cells:9,} {equal / compared if compared else 1.0:8.2%} {changing:8,}")
    return int(unreadable > 0)


def _unsupported(report: Report) -> str:
    """What is not supported, each with the number of cells that use it."""
    met = [f"{each.construct} ({len(each.cells):,})" for each in report.findings if isinstance(each, Unsupported)]
    circles = sum(len(each.cells) for each in report.findings if isinstance(each, Cycle))
    if circles:
        met.append(f"circular ({circles:,})")
    more = len(met) - 6
    return ", ".join(met[:6]) + (f" and {counted(more, 'more')}" if more > 0 else "")
