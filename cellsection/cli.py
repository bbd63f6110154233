"""The command line: `cellsection check`, `cellsection functions`, `cellsection start`.

Start-up is part of the speed of a check, so each command imports what it needs when it runs.
"""

from __future__ import annotations

import io
import sys
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

import cellsection

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Sequence

    from cellsection.catalogue import Argument, CellFunction
    from cellsection.check import Report

__all__ = ["commands", "main"]

CANNOT = 4  # exit code where the command itself cannot be carried out: wrong option, unknown name, file in the way
BUSY = 500_000  # bytes of a book from which a person at a terminal is told that it is being worked on


class Refusal(click.ClickException):
    """A command that cannot be carried out, in one line."""

    exit_code = CANNOT

    def show(self, file: Any = None) -> None:
        """Print the line on stderr."""
        click.echo(f"cellsection: {self.message}", file=file, err=True)


def main() -> None:
    """Run the command line; the program's entry point."""
    for stream in (sys.stdout, sys.stderr):  # a console that cannot show a ² must not end the run
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")
    try:
        sys.exit(commands.main(prog_name="cellsection", standalone_mode=False) or 0)
    except click.Abort:
        sys.exit(130)
    except click.ClickException as refusal:
        refusal.show()
        sys.exit(CANNOT)
    except BrokenPipeError:  # the reader of our output has seen enough
        sys.stderr.close()
        sys.exit(1)


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(cellsection.__version__, prog_name="cellsection", message="%(prog)s %(version)s")
def commands() -> None:
    """Section functions for calc workbooks, and a check that recalculates saved workbooks without their application.

    \b
    Examples:
      cellsection check girder.xlsx         does the saved workbook hold?
      cellsection functions CS_TOTALS       what a cell function takes and returns
      cellsection start girder new.xlsx     a template workbook to fill in
    """  # noqa: D301 - a \b keeps the lines below it as they are


@commands.command(short_help="Recalculate saved workbooks and compare them with the file.")
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


@commands.command()
@click.argument("name", required=False)
def functions(name: str | None) -> None:
    """List the cell functions, or explain one.

    \b
    Examples:
      cellsection functions
      cellsection functions CS_TOTALS
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.catalogue import CATALOGUE

    if name is None:
        page = click.HelpFormatter(width=_page_width())
        page.write_dl([(each.name, each.help) for each in CATALOGUE.values()])
        click.echo(page.getvalue(), nl=False)
        click.echo("\nOne of them in full: cellsection functions CS_TOTALS")
        return
    spelled = name.upper().replace(".", "_", 1)
    if spelled not in CATALOGUE:
        from difflib import get_close_matches

        near = get_close_matches(spelled, CATALOGUE, n=3) or get_close_matches(f"CS_{spelled}", CATALOGUE, n=3)
        remedy = f"Did you mean {' or '.join(near)}?" if near else "cellsection functions lists them all."
        raise Refusal(f"there is no cell function {name}. {remedy}")
    click.echo(_explained(CATALOGUE[spelled]), nl=False)


def _explained(function: CellFunction) -> str:
    """One cell function in full: what it takes, what it gives, an example worked by hand, the source."""
    page = click.HelpFormatter(width=_page_width())
    page.write(f"{function.signature}\n")
    with page.indentation():
        page.write_text(function.help)
    with page.section("Takes"):
        page.write_dl([(argument.name, _argument_in_words(argument)) for argument in function.arguments])
    with page.section("Gives"):
        page.write_text(f"{function.returns.layout}: {function.returns.help}")
    with page.section("Example"):
        for first, rows in function.example.cells.items():
            page.write_text(f"from {first}:")
            texts = [[_cell_in_words(cell) for cell in row] for row in rows]
            widths = [max(map(len, column)) for column in zip(*texts, strict=True)]
            for row in texts:
                padded = (text.ljust(width) for text, width in zip(row, widths, strict=True))
                page.write(f"    {'  '.join(padded).rstrip()}\n")
        page.write_text(f"{function.example.formula}  gives  {_result_in_words(function.example.result)}")
        page.write_text(function.example.why)
    with page.section("Source"):
        page.write_text(function.source)
    return page.getvalue()


@commands.command()
@click.argument("template")
@click.argument("out", metavar="OUT.xlsx", type=click.Path(path_type=Path))
def start(template: str, out: Path) -> None:
    """Write a template workbook to fill in, under a new name.

    A file that is there already is never overwritten.

    \b
    Templates:
      girder              a built-up girder: parts, section, drawing, faults, checks
      crane-hall-girder   the same filled in: a crane girder that is strengthened

    \b
    Example:
      cellsection start girder "crane girder axis B.xlsx"
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.errors import CellsectionError
    from cellsection.templates import build

    if out.suffix.lower() != ".xlsx":
        raise Refusal(f"a template is written as an .xlsx file, and {out} does not end so. Name it {out.stem}.xlsx.")
    if out.exists():
        raise Refusal(f"{out} is there already and is not overwritten. Choose another name, or move it away.")
    if not out.parent.is_dir():
        raise Refusal(f"there is no folder {out.parent}. Make it first, or choose another place.")
    try:
        build(template, out)
    except (CellsectionError, OSError) as failure:
        raise Refusal(str(failure)) from failure
    click.echo(f"{out} is written. Fill in the parts, save it, then: cellsection check {_quoted(out)}")


def _quoted(path: Path) -> str:
    return f'"{path}"' if " " in str(path) else str(path)


def _page_width() -> int:
    """Columns of a page of help: those of the terminal, at most what reads well."""
    from shutil import get_terminal_size

    return min(get_terminal_size().columns, 100)


def _argument_in_words(argument: Argument) -> str:
    dimension = f" [{argument.dimension}]" if argument.dimension else ""
    left_out = f" (may be left out{': ' + argument.default if argument.default else ''})" if argument.optional else ""
    again = " (any number of them)" if argument.repeats else ""
    return f"{argument.help}{dimension}{left_out}{again}"


def _cell_in_words(cell: object) -> str:
    if cell is None:
        return ""
    return f"{cell:.10g}" if isinstance(cell, float) else str(cell).upper() if isinstance(cell, bool) else str(cell)


def _result_in_words(result: object) -> str:
    """A result on one line; the rows of a table are parted by semicolons, as in an array written in a cell."""
    if isinstance(result, tuple):
        return "; ".join(", ".join(map(_cell_in_words, row)) for row in result)
    return _cell_in_words(result)
