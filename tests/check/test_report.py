"""Reports in words, laid out, and as data."""

from __future__ import annotations

import json
from collections import Counter
from datetime import datetime

import pytest

from cellsection.check import Report, Tolerance, examine
from cellsection.check.layout import lay_out
from cellsection.check.record import LINE_SCHEMA, SCHEMA, line_record, record
from cellsection.check.report import calm_lines, closing_line, headline, places_in_words, value_in_words
from cellsection.workbook.values import ErrorValue
from tests.check.handmade import book, cell, troubled


def test_a_book_that_holds_takes_two_lines() -> None:
    report = examine(book(cell("C4", 1.0, 1.0), cell("K1", True, True, call="CS_AGREES")))
    assert headline(report) == "girder.xlsx: holds"
    assert calm_lines(report) == ["2 formula cells on 1 sheet: all hold", "1 acceptance check: met"]


def test_an_unreadable_book_is_told_in_one_line() -> None:
    report = Report("girder.xls", Tolerance(), unreadable="girder.xls is in the old format. Save it as .xlsx.")
    assert headline(report) == "girder.xls: unreadable"
    assert calm_lines(report) == ["girder.xls is in the old format. Save it as .xlsx."]


def test_errors_that_were_saved_so_are_told_where_they_arise() -> None:
    div = ErrorValue("#DIV/0!", "", "Girder!Q1")
    report = examine(book(cell("Q1", div, div), cell("Q2", div, div), cell("C4", 1.0, 1.0)))
    assert calm_lines(report)[1] == "2 cells show an error value, as in the saved file: arising in Girder!Q1"


def test_the_layout_shows_every_kind_of_finding(capsys: pytest.CaptureFixture[str]) -> None:
    lay_out(examine(troubled()))
    shown = capsys.readouterr().out
    for piece in (
        "girder.xlsx: does not hold",
        "Acceptance checks not met (2)",
        "Cells that do not hold (41)",
        "Girder!C5",
        "=SUM(C1:C4)",
        "125440000",
        "126440000.5",
        "and 31 more; --all lists them",
        "#VALUE!  Girder!F12  CS_TOTALS",
        "passed on to 12 cells: Girder!F13:F24",
        "function FORECAST",
        "1 cell depends on it, not verified: Girder!M2",
        "Girder!P1 -> Girder!P2 -> Girder!P1",
        "Girder!R1. Nothing to compare with",
        "#DIV/0!  Girder!Q1; passed on to 1 cell: Girder!Q2",
        "Volatile cells that came to another kind of value (1)",
        "--clock saved",
        "1 reads saved values of other books",
        "reads saved values of another book (Loads.xlsx): Girder!T1",
        "Errors that the saved file shows too (2 cells)",
        "iterative calculation is switched on in this book",
    ):
        assert piece in shown, piece
    assert not [line for line in shown.splitlines() if line != line.rstrip()]


def test_everything_is_shown_when_asked_for(capsys: pytest.CaptureFixture[str]) -> None:
    lay_out(examine(troubled()), every=True)
    shown = capsys.readouterr().out
    assert "more" not in shown
    assert "'Crane hall'!B39" in shown


def test_brackets_in_formulas_are_not_taken_for_styles(capsys: pytest.CaptureFixture[str]) -> None:
    lay_out(examine(book(cell("C4", 1.0, 2.0, formula="=[1]Loads!A1+Table[red]"))))
    assert "=[1]Loads!A1+Table[red]" in capsys.readouterr().out


def test_nothing_in_a_book_steers_the_terminal(capsys: pytest.CaptureFixture[str]) -> None:
    sly = "\x1b[2Jplate\u202e"
    note = cell("A3", 1.0, 1.0, sheet=sly, notes=(sly,))
    lay_out(examine(book(cell("A1", sly, 1.0, formula=f'="{sly}"'), cell("A2", 1.0, ErrorValue("#N/A", sly)), note)))
    shown = capsys.readouterr().out
    assert shown.count("plate") > 3
    assert all(line.isprintable() for line in shown.splitlines())


def test_a_long_text_is_cut_and_shown_whole_when_asked_for() -> None:
    text = "plate " * 40
    assert value_in_words(text).endswith('…"')
    assert value_in_words(text, every=True) == f'"{text.strip()}"'


def test_a_long_list_of_places_is_cut_with_a_count() -> None:
    cells = [("Girder", f"C{row}") for row in range(1, 60, 2)]
    assert places_in_words(cells).endswith("C17, C19 and 20 more places (--all lists them)")
    assert places_in_words(cells, every=True).count(", C") == 29


def test_the_closing_line_counts_the_books_and_states_the_tolerance() -> None:
    good, bad = examine(book(cell("C4", 1.0, 1.0))), examine(book(cell("C4", 1.0, 2.0)))
    assert closing_line(Counter([good.verdict]), good) == "Tolerance: relative 1e-9, absolute 1e-12."
    assert closing_line(Counter([good.verdict] * 2), good).startswith("2 books: all hold. ")
    counts = Counter(each.verdict for each in (good, bad, bad))
    assert closing_line(counts, bad).startswith("3 books: 1 holds, 2 do not hold. ")


def test_the_record_is_json_and_holds_every_finding() -> None:
    made = json.loads(json.dumps(record([examine(troubled())]), allow_nan=False))
    assert (made["schema"], made["verdict"], made["exit code"]) == (SCHEMA, "does not hold", 1)
    assert made["tolerance"] == {"relative": 1e-9, "absolute": 1e-12}
    (one,) = made["books"]
    kinds = [finding["kind"] for finding in one["findings"]]
    assert one["reading other books"] == 1
    assert len(kinds) == 2 + 42 + 2 + 1 + 1 + 1  # nothing is cut
    first = next(finding for finding in one["findings"] if finding["kind"] == "difference")
    assert first == {
        "kind": "difference",
        "verdict": "does not hold",
        "sheet": "Girder",
        "cell": "C5",
        "address": "Girder!C5",
        "formula": "=SUM(C1:C4)",
        "saved": 125440000.0,
        "recalculated": 126440000.5,
        "volatile": False,
    }
    assert one["formula cells"]["all"] == len(troubled().cells)


def test_the_record_keeps_the_kinds_of_values() -> None:
    cells = [cell("A1", None, 1.0), cell("A2", "2", 2.0), cell("A3", True, 1.0), cell("A4", ErrorValue("#N/A"), 1.0)]
    made = record([examine(book(*cells))])
    assert [finding["saved"] for finding in made["books"][0]["findings"]] == [None, "2", True, {"error": "#N/A"}]


def test_the_record_of_an_unreadable_book_says_why() -> None:
    made = record([Report("girder.xls", Tolerance(), unreadable="girder.xls is in the old format. Save it as .xlsx.")])
    assert made["exit code"] == 3
    assert made["books"][0]["unreadable"].startswith("girder.xls is in the old format")


def test_the_terms_of_the_check_are_told_in_words_and_as_data() -> None:
    report = Report("a.xlsx", Tolerance(), clock=datetime(2026, 12, 1, 14, 30), seed=7)
    said = "TODAY and NOW: 2026-12-01T14:30:00. Random numbers begin from 7."
    assert closing_line(Counter([report.verdict]), report).endswith(said)
    line = json.loads(json.dumps(line_record(report), allow_nan=False))
    assert (line["schema"], line["clock"], line["seed"]) == (LINE_SCHEMA, "2026-12-01T14:30:00", 7)
    assert (line["book"], line["verdict"], line["tolerance"]["relative"]) == ("a.xlsx", "holds", 1e-9)


def test_many_notes_and_long_ones_are_cut_with_a_count() -> None:
    report = examine(
        book(cell("C4", 1.0, 1.0), notes=tuple(f"circle {number} " + "A1 -> " * 99 for number in range(30)))
    )
    cut = calm_lines(report)
    assert cut[-1] == "and 20 notes more; --all lists them"
    assert max(map(len, cut)) == 200
    assert len(calm_lines(report, every=True)) == 31


def test_errors_of_one_code_that_were_saved_so_are_one_line(capsys: pytest.CaptureFixture[str]) -> None:
    cells = [
        cell(f"A{row}", error, error) for row in range(1, 60) for error in [ErrorValue("#N/A", "", f"Girder!A{row}")]
    ]
    lay_out(examine(book(*cells, cell("B1", 1.0, 2.0))))
    shown = capsys.readouterr().out
    assert "Errors that the saved file shows too (59 cells)\n    #N/A  Girder!A1:A59\n" in shown
