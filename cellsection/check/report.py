"""A report in words: plain lines for a calm result, and the pieces the laid-out one (layout.py) is made of."""

from __future__ import annotations

from typing import TYPE_CHECKING, Literal

from cellsection.check.compare import kind
from cellsection.check.findings import Error, Verdict
from cellsection.check.places import rectangles

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence
    from datetime import datetime

    from cellsection.check.findings import Cells, Report
    from cellsection.workbook.values import Scalar

__all__ = [
    "LISTED",
    "calm_lines",
    "checks_line",
    "closing_line",
    "counted",
    "headline",
    "moment_in_words",
    "notes_in_words",
    "places_in_words",
    "printable",
    "saved_errors_in_words",
    "tally_line",
    "value_in_words",
]

LISTED = 10  # how much of a long list is shown unless all of it is asked for
LONGEST_TEXT = 60  # of a text value, likewise
LONGEST_NOTE = 200


def headline(report: Report) -> str:
    """The book and its verdict.

    The first line of every report; the verdict is one of the four of `Verdict`.
    """
    return f"{report.path}: {report.verdict.words}"


def calm_lines(report: Report, *, every: bool = False) -> list[str]:
    """What there is to say below the headline of a book that holds, or that could not be read."""
    if report.verdict is Verdict.UNREADABLE:
        return [report.unreadable]
    lines = list(filter(None, (tally_line(report), checks_line(report))))
    errors = [finding for finding in report.findings if isinstance(finding, Error)]
    if errors:
        cells = tuple(key for error in errors for key in (*error.cells, *error.echoes))
        arise = [key for error in errors for key in error.cells]
        shown = f"{counted(len(cells), 'cell shows', 'cells show')} an error value, as in the saved file"
        among = "" if len(arise) == len(cells) else "arising in "
        lines.append(f"{shown}: {among}{places_in_words(arise, every=every)}")
    return lines + notes_in_words(report, every=every)


def notes_in_words(report: Report, *, every: bool = False) -> list[str]:
    """The notes, a line each, with their cells; many notes and long ones are cut."""
    lines = []
    for note in report.notes if every else report.notes[:LISTED]:
        line = shortened(note.text, LONGEST_NOTE, every=every)
        if len(note.cells) > 1:
            line += f", {len(note.cells):,} cells"
        lines.append(line + (f": {places_in_words(note.cells, every=every)}" if note.cells else ""))
    more = len(report.notes) - len(lines)
    return [*lines, f"and {counted(more, 'note')} more; --all lists them"] if more else lines


def saved_errors_in_words(errors: Sequence[Error], *, every: bool = False) -> list[str]:
    """Errors that the saved file shows too, a line for each code and cause: they are told, and cry no alarm."""
    alike: dict[tuple[str, str], list[Error]] = {}
    for error in errors:
        alike.setdefault((error.code, error.cause), []).append(error)
    lines = []
    for (code, cause), met in alike.items():
        arise = [key for error in met for key in error.cells]
        echoes = [key for error in met for key in error.echoes]
        line = f"{code}  {places_in_words(arise, every=every)}"
        if echoes:
            line += f"; passed on to {counted(len(echoes), 'cell')}: {places_in_words(echoes, every=every)}"
        lines.append(line + (f"  {shortened(cause, LONGEST_NOTE, every=every)}" if cause and cause != code else ""))
    return lines


def tally_line(report: Report) -> str:
    """How many formula cells there are, and how they fared.

    Every formula cell is in exactly one of the counts.
    """
    tally = report.tally
    if not tally.cells:
        return f"no formula cells on {counted(len(report.sheets), 'sheet')}"
    parts = [
        (tally.hold, "hold"),
        (tally.differ, "do not hold" if tally.differ != 1 else "does not hold"),
        (tally.volatile, "volatile (compared by kind)"),
        (tally.not_verified, "not verified"),
        (tally.unsaved, "without a saved value"),
    ]
    met = [f"{count:,} {word}" for count, word in parts if count]
    if tally.hold == tally.cells:
        met = ["all hold"] if tally.cells > 1 else ["it holds"]
    line = f"{counted(tally.cells, 'formula cell')} on {counted(len(report.sheets), 'sheet')}: {', '.join(met)}"
    if tally.external:
        line += f"; {counted(tally.external, 'reads', 'read')} saved values of other books"
    return line


def checks_line(report: Report) -> str:
    """How the acceptance checks of the sheets fared; empty where there are none."""
    tally = report.tally
    unmet = tally.checks - tally.checks_met
    said = f"{tally.checks_met:,} met, {unmet:,} not met" if unmet else ("all met" if tally.checks > 1 else "met")
    return f"{counted(tally.checks, 'acceptance check')}: {said}" if tally.checks else ""


def closing_line(counts: Mapping[Verdict, int], report: Report) -> str:
    """One line for many books: how many came to each verdict, and on what terms, which any one report tells."""
    total = sum(counts.values())
    words = {
        Verdict.HOLDS: ("holds", "hold"),
        Verdict.DOES_NOT_HOLD: ("does not hold", "do not hold"),
        Verdict.NOT_VERIFIABLE: ("is not verifiable in part", "are not verifiable in part"),
        Verdict.UNREADABLE: ("is unreadable", "are unreadable"),
    }
    met = [f"{count:,} {words[verdict][count != 1]}" for verdict in Verdict if (count := counts.get(verdict, 0))]
    if counts.get(Verdict.HOLDS) == total > 1:
        met = ["all hold"]
    sentences = [f"{counted(total, 'book')}: {', '.join(met)}"] if total > 1 else []
    sentences.append(f"Tolerance: {report.tolerance}")
    if report.clock is not None:
        moment = "the day each book was saved" if report.clock == "saved" else moment_in_words(report.clock)
        sentences.append(f"TODAY and NOW: {moment}")
    if report.seed is not None:
        sentences.append(f"Random numbers begin from {report.seed}")
    return ". ".join(sentences) + "."


def moment_in_words(clock: datetime | Literal["saved"]) -> str:
    """A moment as it is given to `--clock`.

    >>> from datetime import datetime
    >>> moment_in_words(datetime(2026, 12, 1)), moment_in_words(datetime(2026, 12, 1, 14, 30)), moment_in_words("saved")
    ('2026-12-01', '2026-12-01T14:30:00', 'saved')
    """
    return clock if isinstance(clock, str) else clock.isoformat().removesuffix("T00:00:00")


def value_in_words(value: Scalar, *, every: bool = False) -> str:
    """A value as a report shows it: numbers to 15 digits, texts in quotes.

    >>> [value_in_words(value) for value in (125440000.0, "no faults", True, None)]
    ['125440000', '"no faults"', 'TRUE', 'blank']
    """
    if value is None:
        return "blank"
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, str):
        return f'"{shortened(value, LONGEST_TEXT, every=every)}"'
    return str(value) if kind(value) == "error" else f"{value:.15g}"


def printable(text: str) -> str:
    r"""A text without the signs that steer a terminal: what stands in a book must not reach it.

    >>> printable("a plate\x1b[2J") == "a plate\N{REPLACEMENT CHARACTER}[2J"
    True
    """
    return text if text.isprintable() else "".join(_printable(sign) for sign in text)


def _printable(sign: str) -> str:
    return sign if sign.isprintable() else " " if sign.isspace() else "\N{REPLACEMENT CHARACTER}"


def shortened(text: str, longest: int, *, every: bool = False) -> str:
    """A text on one line, cut where it is too long to be read in passing."""
    line = printable(" ".join(text.split()))
    return line if every or len(line) <= longest else line[: longest - 1] + "…"


def places_in_words(cells: Cells | Sequence[tuple[str, str]], *, every: bool = False) -> str:
    """Where cells are, as rectangles; a sheet is named once for those that follow it, and a long list cut with a count.

    >>> places_in_words([("Girder", "C4"), ("Girder", "C5"), ("Girder", "E9"), ("Loads", "A1")])
    'Girder!C4:C5, E9, Loads!A1'
    """
    found = rectangles(cells)
    listed = found if every else found[:LISTED]
    more = counted(len(found) - len(listed), "more place", "more places")
    words, before = [], ""
    for each in listed:
        sheet, mark, area = each.rpartition("!")
        words.append(area if sheet == before else sheet + mark + area)
        before = sheet
    return ", ".join(words) + (f" and {more} (--all lists them)" if len(found) > len(listed) else "")


def counted(count: int, one: str, many: str = "") -> str:
    """A count with its noun.

    >>> counted(1, "sheet"), counted(1200, "sheet")
    ('1 sheet', '1,200 sheets')
    """
    return f"{count:,} {one if count == 1 else many or one + 's'}"
