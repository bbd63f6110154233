"""`cellsection recalculate`: a copy of a saved workbook with recalculated values in its formula cells."""

from __future__ import annotations

from functools import partial
from itertools import chain, starmap
from pathlib import Path
from typing import TYPE_CHECKING, Literal

import click

from cellsection.cli.options import host_options
from cellsection.cli.refusal import Refusal

if TYPE_CHECKING:
    from collections.abc import Iterator
    from datetime import datetime

    from cellsection.workbook.book import Limits
    from cellsection.workbook.results import FormulaCell, Recalculation
    from cellsection.workbook.write import Written

__all__ = ["recalculate"]

COMPLETE, PARTLY, UNREADABLE = 0, 2, 3
LISTED = 10  # reasons, unless all are asked for


@click.command(short_help="Write a copy of a workbook with recalculated values.")
@click.argument("book", metavar="BOOK", type=click.Path(path_type=Path))
@click.option(
    "-o", "--out", metavar="OUT", required=True, type=click.Path(path_type=Path), help="The copy to be written."
)
@click.option("--replace", is_flag=True, help="Replace OUT where it is there already; OUT may be BOOK itself.")
@click.option("--all", "every", is_flag=True, help="Show long lists whole.")
@host_options
def recalculate(
    book: Path,
    out: Path,
    replace: bool,
    every: bool,
    limits: Limits | None,
    clock: datetime | Literal["saved"] | None,
    seed: int | None,
) -> None:
    """Recalculate a saved workbook without its application and write the values into a copy.

    BOOK is an .xlsx, .xlsm or .ods file. In the copy the values of formula cells are new; all else is byte for byte as
    it was: formulas, formats, charts, images, macros, comments. A cell that cannot be recalculated keeps its saved
    value, and is told. OUT is written whole or not at all.

    \b
    Exit codes:
      0  written, every formula cell recalculated
      2  written, but some cells could not be verified and keep their saved values
      3  the book could not be read, or its values have no place in it; nothing is written
      4  the command itself cannot be carried out; nothing is written

    \b
    Examples:
      cellsection recalculate girder.xlsx -o "girder recalculated.xlsx"
      cellsection recalculate girder.xlsx -o girder.xlsx --replace
      cellsection recalculate girder.ods -o dated.ods --clock 2026-12-01
    """  # noqa: D301 - a \b keeps the lines below it as they are
    from cellsection.check.report import printable
    from cellsection.errors import WorkbookError
    from cellsection.hosts import headless
    from cellsection.workbook.write import refuse_in_the_way, refuse_other_format, write_values

    try:
        refuse_in_the_way(book, out, replace=replace)
        refuse_other_format(book, out)
    except WorkbookError as refusal:
        raise Refusal(_with_option(str(refusal))) from None
    if not out.parent.is_dir():
        raise Refusal(f"there is no folder {out.parent}. Make it first, or choose another place.")
    try:
        recalculated = headless.recalculate(book, limits=limits, clock=clock, seed=seed)
        written = write_values(book, recalculated, out, limits=limits, replace=replace)
    except WorkbookError as refusal:
        click.echo(f"{book}: {click.style('not recalculated', fg='red', bold=True)}")
        click.echo(f"  {printable(str(refusal))}")
        click.get_current_context().exit(UNREADABLE)
    except OSError as failure:
        raise Refusal(f"{out} cannot be written ({failure.strerror or failure}). Check the folder.") from None
    held = [cell for cell in recalculated.sorted_out()[1] if not _computed(cell)]
    state = click.style("recalculated in part" if held else "recalculated", fg=None if held else "green", bold=True)
    click.echo(f"{out}: {state}")
    for line in _lines(recalculated, held, written, every=every):
        click.echo(f"  {printable(line)}")
    click.get_current_context().exit(PARTLY if held else COMPLETE)


def _with_option(message: str) -> str:
    """A refusal of the writer, with the option that it asks for."""
    return message.replace("or ask for it to be replaced", "or add --replace")


def _computed(cell: FormulaCell) -> bool:
    """Whether the copy holds a recalculated value of the cell."""
    from cellsection.workbook.write import WRITTEN

    return cell.status in WRITTEN


def _lines(recalculated: Recalculation, held: list[FormulaCell], written: Written, *, every: bool) -> Iterator[str]:
    """What there is to say of a copy that is written."""
    from cellsection.check.compare import Tolerance, agree
    from cellsection.check.report import counted, places_in_words
    from cellsection.workbook.results import Status
    from cellsection.workbook.write import differs

    cells = recalculated.cells
    plain, apart = recalculated.sorted_out()
    changed = [cell for cell in apart if _computed(cell) and differs(cell)]
    many = len(changed) + sum(map(len, plain.values()))
    same = len(cells) - len(held) - many
    tally = [counted(many, "value changed", "values changed") if many else "no value changed"]
    if same and many:
        tally.append(f"{same:,} as they were")
    if held:
        tally.append(f"{len(held):,} kept, as they could not be recalculated")
    book = f"{counted(len(cells), 'formula cell')} on {counted(len(recalculated.sheets), 'sheet')}"
    yield f"{book}: {', '.join(tally)}" if cells else f"no formula cells on {book.rpartition(' on ')[2]}"
    others = [(cell.saved, cell.value) for cell in changed if cell.has_saved]
    rounded = sum(starmap(partial(agree, tolerance=Tolerance()), chain(recalculated.pairs(), others)))
    if rounded:
        are = counted(rounded, "of the changes is", "of the changes are")
        yield f"{are} a matter of rounding, below 1e-9 of the value"
    fresh = [(cell.sheet, cell.address) for cell in changed if not cell.has_saved]
    if fresh:
        yield f"{counted(len(fresh), 'cell')} had no saved value: {places_in_words(fresh, every=every)}"
    yield from _reasons(held, every=every)
    moving = [(cell.sheet, cell.address) for cell in apart if cell.status is Status.VOLATILE]
    if moving:
        what = counted(len(moving), "cell changes", "cells change")
        where = places_in_words(moving, every=every)
        yield f"{what} with the clock or by chance from one recalculation to the next: {where}"
    for name in written.dropped:
        yield f"left out: {name}, which the application makes anew"
    yield from written.notes
    yield from recalculated.notes


def _reasons(held: list[FormulaCell], *, every: bool) -> Iterator[str]:
    """Why cells keep their saved values, with their places."""
    from cellsection.check.report import counted, places_in_words
    from cellsection.workbook.results import Status

    said = {
        Status.UNSUPPORTED: "not supported: {}",
        Status.CYCLE: "{}",
        Status.NOT_VERIFIED: "not verified, {}",
    }
    groups: dict[str, list[tuple[str, str]]] = {}
    for cell in held:
        groups.setdefault(said[cell.status].format(cell.reason), []).append((cell.sheet, cell.address))
    listed = list(groups.items()) if every else list(groups.items())[:LISTED]
    for reason, cells in listed:
        yield f"{reason}: {counted(len(cells), 'cell')}, {places_in_words(cells, every=every)}"
    if len(listed) < len(groups):
        yield f"and {counted(len(groups) - len(listed), 'more reason')} (--all lists them)"
