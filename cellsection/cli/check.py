"""`cellsection check`: recalculate saved workbooks and compare them with the file."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING

import click

from cellsection.cli.refusal import Refusal

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Sequence

    from cellsection.check import Report

__all__ = ["check"]

BUSY = 500_000  # bytes of a book from which a person at a terminal is told that it is being worked on


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
@click.option("--json", "as_json", is_flag=True, help="Print the whole result as JSON (docs/checking.md).")
@click.option(
    "--processes", metavar="NUMBER", type=click.IntRange(1), help="Books checked at a time.  [default: as many as pay]"
)
@click.option("--trace", is_flag=True, help="Show the Python traceback of an internal fault.")
def check(
    books: tuple[Path, ...],
    relative: float,
    absolute: float,
    every: bool,
    as_json: bool,
    processes: int | None,
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
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.check import Tolerance, worst
    from cellsection.check.many import check_books

    paths = list(_expanded(books))
    if not paths:
        raise Refusal("there are no workbooks (.xlsx, .xlsm, .ods) in " + ", ".join(map(str, books)))
    found: list[Report] = []
    for report in _with_progress(
        paths, check_books(paths, Tolerance(relative, absolute), processes=processes or 0, trace=trace)
    ):
        found.append(report)
        if not as_json:
            _show(report, every=every, first=len(found) == 1)
    if as_json:
        _show_json(found)
    else:
        _show_closing(found)
    click.get_current_context().exit(worst(report.verdict for report in found).value)


def _expanded(books: Sequence[Path]) -> Iterator[Path]:
    """The books, with folders replaced by the books in them."""
    from cellsection.check.many import books_in

    for each in books:
        if each.is_dir():
            yield from books_in(each)
        else:
            yield each


def _with_progress(paths: Sequence[Path], reports: Iterable[Report]) -> Iterator[Report]:
    """The reports; meanwhile a person at a terminal reads which book is being worked on, where that takes a while."""
    large = any(path.is_file() and path.stat().st_size > BUSY for path in paths)
    told = sys.stderr.isatty() and (large or len(paths) > 3)
    coming = iter(reports)
    for number, path in enumerate(paths, start=1):
        if told:
            click.echo(f"\r\033[K  checking {number} of {len(paths)}: {path.name[:50]} ...", nl=False, err=True)
        report = next(coming, None)
        if told:
            click.echo("\r\033[K", nl=False, err=True)
        if report is None:
            return
        yield report


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


def _show_closing(reports: Sequence[Report]) -> None:
    from cellsection.check.report import closing_line

    click.echo()
    click.echo(closing_line(reports))


def _show_json(reports: Sequence[Report]) -> None:
    import json

    from cellsection.check.record import record

    click.echo(json.dumps(record(reports), indent=2, allow_nan=False))
