"""Many books at once: in the order of the books, a bounded number in work, and none spoiled by its neighbour."""

from __future__ import annotations

import multiprocessing
import os
import signal
import subprocess
import sys
import time
from concurrent.futures import Executor, Future, ThreadPoolExecutor
from datetime import datetime
from itertools import count, islice
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from cellsection.check import Report, Tolerance, Verdict, check_books
from cellsection.check.findings import Unsupported
from cellsection.check.pool import Crew
from cellsection.workbook.book import Limits
from tests.check.deadly import check_or_die
from tests.check.small_book import write_book

if TYPE_CHECKING:
    from collections.abc import Iterator


@pytest.fixture
def books(tmp_path: Path) -> list[Path]:
    """Twenty books, of which every third does not hold."""
    return [
        write_book(tmp_path / f"book {number:02}.xlsx", {"A1": 300.0, "B1": ("A1*2", 600.0 + (number % 3 == 0))})
        for number in range(20)
    ]


def verdicts(reports: Iterator[Report]) -> list[tuple[str, Verdict]]:
    return [(Path(report.path).name, report.verdict) for report in reports]


EXPECTED = [(f"book {number:02}.xlsx", Verdict.HOLDS if number % 3 else Verdict.DOES_NOT_HOLD) for number in range(20)]


@pytest.mark.parametrize("jobs", [0, 1, 2])
def test_reports_come_in_the_order_of_the_books(books: list[Path], jobs: int) -> None:
    assert verdicts(check_books(books, jobs=jobs)) == EXPECTED


def test_the_books_may_come_from_a_generator_and_are_taken_as_they_are_needed(books: list[Path]) -> None:
    taken = []

    def archive() -> Iterator[Path]:
        for number in count():
            taken.append(number)
            yield books[number % 20]

    reports = check_books(archive(), jobs=2)
    assert verdicts(islice(reports, 3)) == EXPECTED[:3]
    reports.close()
    assert len(taken) < 300  # of endlessly many
    assert multiprocessing.active_children() == []


def test_a_book_that_takes_its_worker_down_spoils_no_other() -> None:
    names = ["a.xlsx", "deadly 1.xlsx", "b.xlsx", "c.xlsx", "deadly 2.xlsx", "d.xlsx"]
    crew = Crew(2, None, 300)
    try:
        coming = [(Path(name), crew.submit(check_or_die, Path(name))) for name in names]
        reports = [crew.result(each, check_or_die, path) for path, each in coming]
        later = crew.result(crew.submit(check_or_die, Path("e.xlsx")), check_or_die, Path("e.xlsx"))
    finally:
        crew.close()
    assert [isinstance(report, Report) for report in reports] == [not name.startswith("deadly") for name in names]
    assert "ended abruptly" in str(reports[1])
    assert isinstance(later, Report)
    assert multiprocessing.active_children() == []


def test_a_book_that_never_comes_back_is_given_up(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("cellsection.check.pool.MARGIN", 1.0)
    crew = Crew(1, None, 0.1)
    path = Path("endless.xlsx")
    try:
        assert "did not come back within 1 s" in str(crew.result(crew.submit(check_or_die, path), check_or_die, path))
    finally:
        crew.close()


def test_books_that_were_lost_with_a_killed_worker_are_checked_again(books: list[Path]) -> None:
    reports = check_books(books, jobs=2)
    first = next(reports)
    for worker in multiprocessing.active_children():
        worker.kill()
    assert [(Path(first.path).name, first.verdict), *verdicts(reports)] == EXPECTED


def test_busy_workers_are_ended_when_the_iteration_is_left() -> None:
    crew = Crew(2, None, 300)
    for _ in range(4):
        crew.submit(check_or_die, Path("endless.xlsx"))
    crew.close()  # returns, though the books would have taken ten minutes
    assert multiprocessing.active_children() == []


def test_where_no_process_can_be_started_no_book_is_blamed(tmp_path: Path) -> None:
    book = write_book(tmp_path / "good.xlsx", {"B1": ("1+1", 2.0)})
    unguarded = (
        "from cellsection.check import check_books\n"
        f"for report in check_books([{str(book)!r}] * 2, jobs=2): print(report.verdict.words)\n"
    )
    done = subprocess.run([sys.executable, "-"], input=unguarded, capture_output=True, text=True, check=False)
    assert "CellsectionError: processes for checking books cannot be started here" in done.stderr
    assert "unreadable" not in done.stdout


@pytest.mark.skipif(sys.platform == "win32", reason="a process cannot be sent Ctrl-C there without its console")
def test_ctrl_c_ends_the_run_without_a_traceback_and_leaves_no_process(books: list[Path]) -> None:
    command = [sys.executable, "-m", "cellsection", "check", *map(str, books * 200), "--jobs", "2", "--jsonl"]
    run = subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, start_new_session=True)
    assert run.stdout is not None
    run.stdout.readline()
    os.killpg(run.pid, signal.SIGINT)  # as a terminal does: to the workers as well
    _, told = run.communicate(timeout=60)
    assert run.returncode == 130
    assert "Traceback" not in told
    for _ in range(100):
        try:
            os.killpg(run.pid, 0)
        except ProcessLookupError:
            return
        time.sleep(0.1)
    pytest.fail("a process of the run is still there")


@pytest.mark.skipif(sys.platform == "win32", reason="address space cannot be bounded there, as docs/checking.md says")
def test_the_memory_of_a_worker_is_bounded_and_a_cell_that_wants_more_is_told(tmp_path: Path) -> None:
    cells = {f"A{row}": ("SUM(SEQUENCE(1400,1400)*2)", 1.0) for row in range(1, 3)}
    greedy = write_book(tmp_path / "greedy.xlsx", cells)
    small = write_book(tmp_path / "small.xlsx", {"B1": ("1+1", 2.0)})
    first, second = check_books([greedy, small], jobs=1, memory=256_000_000)
    (found,) = first.findings
    assert isinstance(found, Unsupported)
    assert "memory" in found.construct
    assert second.verdict is Verdict.HOLDS


def test_a_book_that_cannot_be_read_for_want_of_memory_is_told_so(
    books: list[Path], monkeypatch: pytest.MonkeyPatch
) -> None:
    def greedy(*_: object, **__: object) -> Report:
        raise MemoryError

    monkeypatch.setattr("cellsection.check.many.check_book", greedy)
    (report,) = check_books(books[:1])
    assert report.verdict is Verdict.UNREADABLE
    assert "more memory than there is" in report.unreadable


def test_limits_clock_and_seed_reach_every_worker(tmp_path: Path) -> None:
    # 2026-12-01 is day 46357 of the 1900 date system: 46023 is 2026-01-01, by the calendar 334 days before
    book = write_book(tmp_path / "today.xlsx", {"A1": ("TODAY()", 46357.0)})
    for jobs in (1, 2):
        reports = list(check_books([book, book], jobs=jobs, clock=datetime(2026, 12, 1), seed=7))
        assert [(each.tally.hold, each.tally.volatile, each.clock, each.seed) for each in reports] == [
            (1, 0, datetime(2026, 12, 1), 7)
        ] * 2
        (report, _) = check_books([book, book], jobs=jobs, limits=Limits(parts=1))
        assert report.verdict is Verdict.UNREADABLE


# Executors of others


class Counting(ThreadPoolExecutor):
    """Counts how many books are handed out and not yet done with."""

    def __init__(self) -> None:
        super().__init__(2)
        self.handed = 0

    def submit(self, *call: Any, **named: Any) -> Future[Any]:
        self.handed += 1
        return super().submit(*call, **named)


def test_an_executor_can_be_handed_in_and_is_given_so_many_books_at_a_time(books: list[Path]) -> None:
    with Counting() as executor:
        reports = check_books(books, executor=executor, ahead=4)
        assert verdicts(islice(reports, 1)) == EXPECTED[:1]
        assert executor.handed == 4
        assert verdicts(reports) == EXPECTED[1:]
        assert executor.submit(len, "left open").result() == 9


class Failing(Executor):
    """Loses the worker of every third book."""

    def __init__(self) -> None:
        self.numbers = count()

    def submit(self, call: Any, /, *arguments: Any, **named: Any) -> Future[Any]:
        future: Future[Any] = Future()
        if next(self.numbers) % 3 == 0:
            future.set_exception(RuntimeError("the worker is gone"))
        else:
            future.set_result(call(*arguments, **named))
        return future


def test_a_worker_that_an_executor_loses_spoils_its_own_book_only(books: list[Path]) -> None:
    reports = list(check_books(books, Tolerance(), executor=Failing()))
    unreadable = [number for number, report in enumerate(reports) if report.verdict is Verdict.UNREADABLE]
    assert unreadable == list(range(0, 20, 3))
    assert "did not come back (RuntimeError)" in reports[0].unreadable
