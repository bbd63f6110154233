"""A report laid out for the eye: tables of what does not hold, paragraphs of why. Only this file imports rich."""

from __future__ import annotations

import sys
from io import StringIO
from typing import TYPE_CHECKING, Any, TypeVar

from rich.console import Console, Group
from rich.padding import Padding
from rich.table import Table
from rich.text import Text

from cellsection.check.compare import kind
from cellsection.check.findings import Cycle, Difference, Error, NotVerified, UnmetCheck, Unsaved, Unsupported, Verdict
from cellsection.check.report import (
    LISTED,
    checks_line,
    counted,
    notes_in_words,
    places_in_words,
    printable,
    saved_errors_in_words,
    shortened,
    tally_line,
    value_in_words,
)

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from rich.console import JustifyMethod, RenderableType

    from cellsection.check.findings import Finding, Report
    from cellsection.workbook.values import Scalar

__all__ = ["lay_out"]

COLOUR = {
    Verdict.HOLDS: "green",
    Verdict.DOES_NOT_HOLD: "red",
    Verdict.NOT_VERIFIABLE: "yellow",
    Verdict.UNREADABLE: "red",
}
WIDTH_OF_A_FILE = 120  # where the output is no terminal and so has no width of its own
LONGEST_FORMULA = 80
F = TypeVar("F", bound="Finding")


def lay_out(report: Report, *, every: bool = False) -> None:
    """Print the report; `every` shows long lists, texts and formulas whole."""
    console = Console(highlight=False, markup=False, emoji=False)
    if console.is_terminal:
        _write(console, report, every)
        return
    page = Console(file=StringIO(), width=WIDTH_OF_A_FILE, highlight=False, markup=False, emoji=False)
    with page.capture() as captured:
        _write(page, report, every)
    for line in captured.get().splitlines():
        sys.stdout.write(line.rstrip() + "\n")  # tables pad their cells; a file needs no blanks at the end of a line


def _write(console: Console, report: Report, every: bool) -> None:
    console.print(
        _assembled(f"{report.path}: ", (report.verdict.words, f"bold {COLOUR[report.verdict]}")), soft_wrap=True
    )
    for line in filter(None, (tally_line(report), checks_line(report))):
        console.print(f"  {line}", soft_wrap=True)
    for title, body in _sections(report, every):
        console.print()
        console.print(_text(f"  {title}", style="bold"))
        console.print(Padding(body, (0, 0, 0, 4), expand=False))


def _sections(report: Report, every: bool) -> Iterator[tuple[str, RenderableType]]:
    """The sections of a report that have something in them, each with its title."""
    if unmet := _of(report, UnmetCheck):
        yield f"Acceptance checks not met ({len(unmet):,})", _unmet_checks(unmet, every)
    differences = _of(report, Difference)
    if differing := [each for each in differences if not each.volatile]:
        yield f"Cells that do not hold ({len(differing):,})", _differences(differing, every)
    errors = _of(report, Error)
    if counting := [each for each in errors if each.verdict is not Verdict.HOLDS]:
        yield f"Errors ({len(counting):,})", _paragraphs([_error(each, every) for each in counting], every)
    if unsupported := _of(report, Unsupported):
        yield (
            f"Not supported ({len(unsupported):,})",
            _paragraphs([_unsupported(each, every) for each in unsupported], every),
        )
    if cycles := _of(report, Cycle):
        yield f"Circular references ({len(cycles):,})", _paragraphs([_cycle(each, every) for each in cycles], every)
    if changing := [each for each in differences if each.volatile]:
        yield f"Volatile cells that came to another kind of value ({len(changing):,})", _changing(changing, every)
    if unverified := _of(report, NotVerified):
        lines = [_text(f"{each.reason}: {places_in_words(each.cells, every=every)}") for each in unverified]
        yield "Not verified for another reason", _paragraphs(lines, every)
    if unsaved := _of(report, Unsaved):
        cells = unsaved[0].cells
        said = "Nothing to compare with; save the book in its application, or recalculate it into a copy"
        yield f"No saved value ({len(cells):,})", _text(f"{places_in_words(cells, every=every)}. {said}.")
    if saved_alike := [each for each in errors if each.verdict is Verdict.HOLDS]:
        count = sum(len(each.cells) + len(each.echoes) for each in saved_alike)
        lines = [_text(line) for line in saved_errors_in_words(saved_alike, every=every)]
        yield f"Errors that the saved file shows too ({counted(count, 'cell')})", _paragraphs(lines, every)
    if report.notes:
        yield "Notes", Group(*map(_text, notes_in_words(report, every=every)))


def _of(report: Report, kind_of_finding: type[F]) -> list[F]:
    return [finding for finding in report.findings if isinstance(finding, kind_of_finding)]


def _differences(differences: Sequence[Difference], every: bool) -> RenderableType:
    table = _table("cell", ">saved", ">recalculated", ">relative difference", "formula")
    for each in _first(differences, every):
        off = _relative_difference(each.saved, each.recalculated)
        _row(
            table,
            str(each.spot),
            _value(each.saved, every),
            _value(each.recalculated, every),
            off,
            _formula(each.spot.formula, every),
        )
    return Group(table, *_rest(differences, every))


def _changing(changing: Sequence[Difference], every: bool) -> RenderableType:
    said = "They depend on the date, the time or a random number; --clock saved calculates for the day of saving."
    table = _table("cell", ">saved", ">recalculated", "formula")
    for each in _first(changing, every):
        values = _value(each.saved, every), _value(each.recalculated, every)
        _row(table, str(each.spot), *values, _formula(each.spot.formula, every))
    return Group(_text(said, style="dim"), table, *_rest(changing, every))


def _unmet_checks(unmet: Sequence[UnmetCheck], every: bool) -> RenderableType:
    table = _table("cell", "expected", "saved", "recalculated", "formula")
    for each in _first(unmet, every):
        values = (each.expected, each.saved, each.recalculated)
        _row(table, str(each.spot), *(_value(value, every) for value in values), _formula(each.spot.formula, every))
    causes = dict.fromkeys(each.cause for each in unmet if each.cause)
    because = [_text(f"because {cause}") for cause in causes]
    return Group(table, *_rest(unmet, every), *_first(because, every), *_rest(because, every))


def _error(error: Error, every: bool) -> RenderableType:
    place = str(error.spot) if len(error.cells) == 1 else f"{len(error.cells):,} cells"
    lines: list[RenderableType] = []
    if len(error.cells) > 1:
        lines.append(_text(f"arises in {places_in_words(error.cells, every=every)}"))
    if error.spot.formula:
        first = f"first {error.spot}  " if len(error.cells) > 1 else ""
        saved = f"   saved: {value_in_words(error.saved, every=every)}" if not error.saved_alike else ""
        lines.append(_text(f"{first}{_formula(error.spot.formula, every)}{saved}", style="dim"))
    if error.echoes:
        cells = counted(len(error.echoes), "cell")
        lines.append(_text(f"passed on to {cells}: {places_in_words(error.echoes, every=every)}"))
    return _entry(_assembled((f"{error.code}  {place}", "bold"), f"  {error.cause}"), lines)


def _unsupported(each: Unsupported, every: bool) -> RenderableType:
    cells = f" in {counted(len(each.cells), 'cell')}: {places_in_words(each.cells, every=every)}"
    formula = each.example.formula.strip("={} ")  # a formula that is missing in the file has nothing to show
    example = [_text(f"{each.example}  {_formula(each.example.formula, every)}", style="dim")] if formula else []
    return _entry(_assembled((each.construct, "bold"), cells), [*example, *_dependants(each.dependants, every)])


def _cycle(each: Cycle, every: bool) -> RenderableType:
    return _entry(_text(each.circle), _dependants(each.dependants, every))


def _dependants(cells: tuple[tuple[str, str], ...], every: bool) -> list[Text]:
    if not cells:
        return []
    depend = counted(len(cells), "cell depends", "cells depend")
    return [_text(f"{depend} on it, not verified: {places_in_words(cells, every=every)}")]


# The small pieces


def _text(text: str, style: str = "") -> Text:
    return Text(printable(text), style=style)


def _assembled(*pieces: str | tuple[str, str]) -> Text:
    """Pieces of text in a row, some with a style."""
    text = Text()
    for piece in pieces:
        words, style = (piece, "") if isinstance(piece, str) else piece
        text.append(printable(words), style=style)
    return text


def _table(*columns: str) -> Table:
    """A table without lines; a heading that opens with > is set flush right."""
    table = Table(box=None, padding=(0, 2, 0, 0), header_style="dim", show_edge=False)
    for column in columns:
        justify: JustifyMethod = "right" if column.startswith(">") else "left"
        table.add_column(column.lstrip(">"), justify=justify, no_wrap=column == "cell", overflow="fold")
    return table


def _row(table: Table, *texts: str) -> None:
    table.add_row(*(_text(text) for text in texts))


def _entry(heading: Text, lines: Sequence[RenderableType]) -> RenderableType:
    """A heading with its lines set in below it."""
    return Group(heading, Padding(Group(*lines), (0, 0, 0, 2), expand=False)) if lines else heading


def _paragraphs(found: Sequence[RenderableType], every: bool) -> RenderableType:
    return Group(*_first(found, every), *_rest(found, every))


def _first(found: Sequence[Any], every: bool) -> Sequence[Any]:
    return found if every else found[:LISTED]


def _rest(found: Sequence[object], every: bool) -> list[Text]:
    more = 0 if every else len(found) - LISTED
    return [_text(f"and {more:,} more; --all lists them", style="dim")] if more > 0 else []


def _value(value: Scalar, every: bool) -> str:
    return value_in_words(value, every=every)


def _formula(formula: str, every: bool) -> str:
    return shortened(formula, LONGEST_FORMULA, every=every)


def _relative_difference(saved: Scalar, value: Scalar) -> str:
    """How far two numbers lie apart as a share of the larger; other kinds are apart altogether."""
    if kind(saved) == kind(value) == "number":
        assert isinstance(saved, float) and isinstance(value, float)  # noqa: PT018 - told by kind
        return f"{abs(saved - value) / max(abs(saved), abs(value)):.1e}"
    return "" if kind(saved) == kind(value) else "other kind"
