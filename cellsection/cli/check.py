"""`cellsection check`: recalculate saved workbooks and compare them with the file."""

from __future__ import annotations

from collections import Counter
from contextlib import closing
from pathlib import Path
from typing import TYPE_CHECKING

import click

from cellsection.cli.options import host_options
from cellsection.cli.progress import Progress
from cellsection.cli.refusal import Refusal
from cellsection.errors import CellsectionError

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence
    from datetime import datetime
    from typing import Literal

    from cellsection.check import Report, Verdict
    from cellsection.workbook.book import Limits

__all__ = ["check"]

LEAST_MEMORY = 256  # MB of address space below which Python with its libraries cannot begin


@click.command(short_help="Recalculate saved workbooks and compare them with the file.")
@click.argument("books", metavar="BOOK...", nargs=-1, required=True, type=click.Path(path_type=Path))
@click.option(
    "--relative",
    metavar="NUMBER",
    type=click.FloatRange(0, 1),
    default=1e-9,
    help="Relative tolerance, of the larger of the two values.  [default: 1e-9]",
)
@click.option(
    "--absolute",
    metavar="NUMBER",
    type=click.FloatRange(0),
    default=1e-12,
    help="Absolute tolerance, in the unit of the cell; a number holds when it keeps either.  [default: 1e-12]",
)
@click.option("--all", "every", is_flag=True, help="Show long lists, texts and formulas whole.")
@click.option("--json", "as_json", is_flag=True, help="Print the whole result as one JSON object (docs/checking.md).")
@click.option(
    "--jsonl", "as_lines", is_flag=True, help="Print a JSON object a line and book, each as soon as it is there."
)
@click.option(
    "-j", "--jobs", metavar="NUMBER", type=click.IntRange(1), help="Books checked at a time.  [default: as many as pay]"
)
@click.option(
    "--memory",
    metavar="MB",
    type=click.IntRange(LEAST_MEMORY),
    help="The most memory that a book may take, checked in a process apart; not on Windows.  [default: no bound]",
)
@host_options
@click.option("--trace", is_flag=True, help="Show the Python traceback of an internal fault.")
def check(
    books: tuple[Path, ...],
    relative: float,
    absolute: float,
    every: bool,
    as_json: bool,
    as_lines: bool,
    jobs: int | None,
    memory: int | None,
    limits: Limits | None,
    clock: datetime | Literal["saved"] | None,
    seed: int | None,
    trace: bool,
) -> None:
    """Recalculate saved workbooks and compare every formula cell with the value in the file.

    BOOK is an .xlsx, .xlsm or .ods file, or a folder of them. No book is changed. Cells whose outermost function is
    CS_AGREES or CS_FAULTS are acceptance checks: they must come to TRUE and to "no faults".

    \b
    Exit codes:
      0  every book holds
      1  a cell does not hold, or an acceptance check is not met
      2  nothing contradicts, but part of a book could not be verified
      3  a book could not be read
      4  the command itself cannot be carried out
      For many books the worst counts: 3 before 1 before 2 before 0.

    \b
    Examples:
      cellsection check girder.xlsx
      cellsection check calcs/ --relative 1e-6
      cellsection check girder.xlsx --json > girder.json
      cellsection check archive/ --jobs 8 --clock saved --jsonl > archive.jsonl
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.check import Tolerance, check_books, worst

    if as_json and as_lines:
        raise Refusal("--json and --jsonl are two ways to print the result. Give one of them.")
    paths = list(_expanded(books))
    if not paths:
        raise Refusal("there are no workbooks (.xlsx, .xlsm, .ods) in " + ", ".join(map(str, books)))
    reports = check_books(
        paths,
        Tolerance(relative, absolute),
        limits=limits,
        clock=clock,
        seed=seed,
        jobs=jobs or 0,
        memory=memory and memory * 1_000_000,
        trace=trace,
    )
    kept: list[Report] = []  # only where all must be there before anything can be printed
    counts: Counter[Verdict] = Counter()
    try:
        with closing(reports), Progress(paths) as progress:
            for report in reports:
                progress.withdraw()
                if as_json:
                    kept.append(report)
                elif as_lines:
                    _show_line(report)
                else:
                    _show(report, every=every, first=not counts)
                counts[report.verdict] += 1
                progress.advance()
    except CellsectionError as failure:  # what is wrong with a book is in its report; this is about the run
        raise Refusal(str(failure)) from failure
    if as_json:
        _show_json(kept)
    elif not as_lines:
        _show_closing(counts, report)
    click.get_current_context().exit(worst(counts).value)


def _expanded(books: Sequence[Path]) -> Iterator[Path]:
    """The books, with folders replaced by the books in them."""
    from cellsection.check.many import books_in

    for each in books:
        if each.is_dir():
            yield from books_in(each)
        else:
            yield each


def _show(report: Report, *, every: bool, first: bool) -> None:
    """Print one report: a calm one in plain lines, one with something to lay out through rich."""
    from cellsection.check.findings import Verdict
    from cellsection.check.report import calm_lines, printable

    if not first:
        click.echo()
    if report.verdict in (Verdict.HOLDS, Verdict.UNREADABLE):
        colour = "green" if report.verdict is Verdict.HOLDS else "red"
        click.echo(f"{report.path}: {click.style(report.verdict.words, fg=colour, bold=True)}")
        for line in calm_lines(report, every=every):
            click.echo(f"  {printable(line)}")
    else:
        from cellsection.check.layout import lay_out

        lay_out(report, every=every)


def _show_closing(counts: Mapping[Verdict, int], last: Report) -> None:
    from cellsection.check.report import closing_line

    click.echo()
    click.echo(closing_line(counts, last))


def _show_json(reports: Sequence[Report]) -> None:
    import json

    from cellsection.check.record import record

    click.echo(json.dumps(record(reports), indent=2, allow_nan=False))


def _show_line(report: Report) -> None:
    import json

    from cellsection.check.record import line_record

    click.echo(json.dumps(line_record(report), allow_nan=False))  # echo flushes, so that a reader has it at once
