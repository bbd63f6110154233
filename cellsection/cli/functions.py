"""`cellsection functions`: the cell functions, or one of them in full."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from cellsection.cli.refusal import Refusal

if TYPE_CHECKING:
    from cellsection.catalogue import Argument, CellFunction

__all__ = ["functions"]


@click.command()
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
