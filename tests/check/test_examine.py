"""From recalculated cells to findings: echoes folded, acceptance checks read, each cell counted once."""

from __future__ import annotations

from dataclasses import astuple, replace
from typing import TYPE_CHECKING

import pytest

from cellsection.check import Verdict, examine, worst
from cellsection.check.findings import Cycle, Difference, Error, NotVerified, Tally, UnmetCheck, Unsaved, Unsupported
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue
from tests.check.handmade import REFUSED, book, cell, troubled

if TYPE_CHECKING:
    from cellsection.workbook.values import Scalar

DIV = ErrorValue("#DIV/0!", "", "Girder!Q1")


def test_a_book_whose_cells_all_agree_holds() -> None:
    report = examine(book(cell("C4", 1.0, 1.0), cell("C5", "web", "web")))
    assert report.verdict is Verdict.HOLDS
    assert report.findings == ()
    assert report.tally == Tally(cells=2, hold=2)


def test_a_book_without_formulas_holds() -> None:
    assert examine(book()).verdict is Verdict.HOLDS


def test_a_cell_that_does_not_hold_is_told_with_formula_saved_and_recalculated() -> None:
    report = examine(book(cell("C5", 1.0, 2.0, formula="=SUM(C1:C4)")))
    (found,) = report.findings
    assert isinstance(found, Difference)
    assert (str(found.spot), found.spot.formula, found.saved, found.recalculated) == (
        "Girder!C5",
        "=SUM(C1:C4)",
        1.0,
        2.0,
    )
    assert report.verdict is Verdict.DOES_NOT_HOLD


def test_the_echoes_of_an_error_are_folded_into_the_cell_where_it_arises() -> None:
    echoes = [cell(f"F{row}", 5.0, REFUSED, formula="=F12") for row in (13, 14, 15)]
    report = examine(book(*echoes, cell("F12", 5.0, REFUSED, formula='=CS_TOTALS(A4:I7,"Ix")')))
    (found,) = report.findings
    assert isinstance(found, Error)
    assert (str(found.spot), found.spot.formula) == ("Girder!F12", '=CS_TOTALS(A4:I7,"Ix")')
    assert "column tw" in found.cause
    assert found.cells == (("Girder", "F12"),)
    assert found.echoes == (("Girder", "F13"), ("Girder", "F14"), ("Girder", "F15"))
    assert report.tally.differ == 4


def test_one_cause_told_by_several_functions_is_one_error() -> None:
    words = 'parts, row 2, column tw: "10.2 mm" is text. Retype as a number.'
    totals = ErrorValue("#VALUE!", f"CS_TOTALS: {words}", "Girder!D29")
    fibres = ErrorValue("#VALUE!", f"CS_FIBRES: {words}", "Girder!D44")
    other = ErrorValue("#VALUE!", "CS_TOTALS: parts, row 3, column h: 0 is not positive. Enter it.", "Girder!D99")
    cells = [cell("D29", 1.0, totals), cell("D30", 1.0, totals), cell("D44", 1.0, fibres), cell("D99", 1.0, other)]
    first, second = examine(book(*cells)).findings
    assert isinstance(first, Error)
    assert isinstance(second, Error)
    assert first.cause == words
    assert first.cells == (("Girder", "D29"), ("Girder", "D44"))
    assert first.echoes == (("Girder", "D30"),)
    assert second.cells == (("Girder", "D99"),)


def test_errors_without_words_are_told_apart_by_where_they_arise() -> None:
    cells = [cell(at, 1.0, ErrorValue("#DIV/0!", "", f"Girder!{at}")) for at in ("A1", "A2")]
    assert [len(found.cells) for found in examine(book(*cells)).findings if isinstance(found, Error)] == [1, 1]


def test_an_error_arising_in_a_typed_in_value_names_that_cell() -> None:
    typed = ErrorValue("#N/A", "", "'Crane hall'!B2")
    (found,) = examine(book(cell("C4", 1.0, typed))).findings
    assert isinstance(found, Error)
    assert (found.spot.sheet, found.spot.cell, found.spot.formula) == ("Crane hall", "B2", "")
    assert found.echoes == (("Girder", "C4"),)


def test_an_error_the_saved_file_shows_too_is_told_but_holds() -> None:
    report = examine(book(cell("Q1", DIV, DIV), cell("Q2", DIV, DIV)))
    (found,) = report.findings
    assert isinstance(found, Error)
    assert found.saved_alike
    assert report.verdict is Verdict.HOLDS
    assert report.tally.hold == 2


def test_one_echo_that_was_saved_as_a_number_makes_the_error_count() -> None:
    report = examine(book(cell("Q1", DIV, DIV), cell("Q2", 4.0, DIV)))
    assert report.verdict is Verdict.DOES_NOT_HOLD
    assert report.tally.differ == 1


def test_refused_input_of_a_section_function_counts_though_it_was_saved_so() -> None:
    saved = ErrorValue("#VALUE!")
    report = examine(book(cell("F12", saved, REFUSED, formula='=2*CS_TOTALS(A4:I7,"Ix")')))
    (found,) = report.findings
    assert isinstance(found, Error)
    assert found.refused
    assert found.saved_alike
    assert report.verdict is Verdict.DOES_NOT_HOLD


@pytest.mark.parametrize(
    ("call", "value", "met"),
    [
        ("CS_AGREES", True, True),
        ("CS_AGREES", False, False),
        ("CS_AGREES", 1.0, False),
        ("CS_AGREES", "TRUE", False),
        ("CS_AGREES", DIV, False),
        ("CS_AGREES", None, False),
        ("CS_FAULTS", "no faults", True),
        ("CS_FAULTS", "web", False),
        ("CS_FAULTS", REFUSED, False),
        ("CS_FAULTS", True, False),
        ("cs_faults", "no faults", True),
    ],
)
def test_an_acceptance_check_is_met_by_its_one_good_value_only(call: str, value: object, met: bool) -> None:
    report = examine(book(cell("K1", value, value, call=call)))  # saved so: the comparison has nothing to say
    assert (report.tally.checks, report.tally.checks_met) == (1, int(met))
    assert report.verdict is (Verdict.HOLDS if met else Verdict.DOES_NOT_HOLD)
    assert [type(found) for found in report.findings] == ([] if met else [UnmetCheck])


def test_a_check_inside_another_formula_is_no_acceptance_check() -> None:
    report = examine(book(cell("K1", "no", "no", call="IF", formula='=IF(CS_AGREES(A1,A2),"yes","no")')))
    assert report.tally.checks == 0
    assert report.verdict is Verdict.HOLDS


def test_an_array_of_faults_is_one_check_read_at_its_first_cell() -> None:
    formula = "{=CS_FAULTS(A4:I7)}"
    rows = [("K1", "no faults"), ("L1", ""), ("K2", ""), ("L2", "")]
    report = examine(book(*(cell(at, value, value, call="CS_FAULTS", formula=formula) for at, value in rows)))
    assert (report.tally.checks, report.tally.checks_met) == (1, 1)
    assert report.verdict is Verdict.HOLDS


def test_an_unmet_check_names_the_cause_of_its_error() -> None:
    (found,) = examine(book(cell("K1", True, REFUSED, call="CS_AGREES"))).findings
    assert isinstance(found, UnmetCheck)
    assert "thickness 0 is not positive" in found.cause


def test_an_unsupported_construct_is_named_with_what_depends_on_it() -> None:
    report = examine(
        book(
            cell("M1", 1.0, 1.0, status=Status.UNSUPPORTED, reason="function FORECAST", formula="=FORECAST(1,A1,B1)"),
            cell("M2", 1.0, 1.0, status=Status.NOT_VERIFIED, reason="Girder!M1"),
            cell("M3", 1.0, 1.0, status=Status.UNSUPPORTED, reason="function FORECAST"),
        )
    )
    (found,) = report.findings
    assert isinstance(found, Unsupported)
    assert found.construct == "function FORECAST"
    assert found.cells == (("Girder", "M1"), ("Girder", "M3"))
    assert found.dependants == (("Girder", "M2"),)
    assert report.verdict is Verdict.NOT_VERIFIABLE
    assert report.tally == Tally(cells=3, not_verified=3)


def test_a_circle_is_told_once_with_what_depends_on_it() -> None:
    circle = "Girder!P1 -> Girder!P2 -> Girder!P1"
    cells = [cell(at, 1.0, 1.0, status=Status.CYCLE, reason=circle) for at in ("P1", "P2")]
    report = examine(book(*cells, cell("P3", 1.0, 1.0, status=Status.NOT_VERIFIED, reason="Girder!P2")))
    assert report.findings == (Cycle(circle, (("Girder", "P1"), ("Girder", "P2")), (("Girder", "P3"),)),)
    assert report.verdict is Verdict.NOT_VERIFIABLE


def test_a_cell_not_verified_for_another_reason_is_not_lost() -> None:
    report = examine(book(cell("A1", 1.0, 1.0, status=Status.NOT_VERIFIED, reason="the time allowed ran out")))
    assert report.findings == (NotVerified("the time allowed ran out", (("Girder", "A1"),)),)


def test_an_acceptance_check_that_could_not_be_verified_is_neither_met_nor_unmet() -> None:
    report = examine(book(cell("K1", True, True, call="CS_AGREES", status=Status.NOT_VERIFIED, reason="Girder!M1")))
    assert report.tally.checks == 0
    assert report.verdict is Verdict.NOT_VERIFIABLE


def test_a_cell_without_a_saved_value_is_not_verifiable() -> None:
    report = examine(book(cell("R1", None, 2.0, has_saved=False)))
    assert report.findings == (Unsaved((("Girder", "R1"),)),)
    assert report.verdict is Verdict.NOT_VERIFIABLE


def test_a_volatile_cell_is_compared_by_kind() -> None:
    good = cell("S1", 44000.0, 44001.0, status=Status.VOLATILE)
    assert examine(book(good)).verdict is Verdict.HOLDS
    assert examine(book(good)).tally == Tally(cells=1, volatile=1)


@pytest.mark.parametrize("value", ["not today", ErrorValue("#N/A", "", "Girder!S2"), True])
def test_a_volatile_cell_that_came_to_another_kind_is_not_verified_and_contradicts_nothing(value: Scalar) -> None:
    report = examine(book(cell("S2", 44000.0, value, status=Status.VOLATILE)))
    (found,) = report.findings
    assert isinstance(found, Difference)
    assert found.volatile
    assert report.tally == Tally(cells=1, not_verified=1)
    assert report.verdict is Verdict.NOT_VERIFIABLE


def test_errors_saved_as_the_text_of_their_code_hold_and_are_noted() -> None:
    error = ErrorValue("#N/A", "", "Girder!A1")
    report = examine(book(cell("A1", "#N/A", error), cell("A2", "#N/A", error)))
    assert report.verdict is Verdict.HOLDS
    assert [(note.text, len(note.cells)) for note in report.notes] == [("an error is saved as the text of its code", 2)]


def test_cells_that_read_other_books_are_counted_once() -> None:
    notes = "reads saved values of another book (a.xlsx)", "reads saved values of another book (b.xlsx)"
    report = examine(
        book(cell("A1", 1.0, 1.0, notes=notes), cell("A2", 1.0, 1.0, notes=notes[:1]), cell("A3", 1.0, 1.0))
    )
    assert report.tally == Tally(cells=3, hold=3, external=2)


def test_what_does_not_hold_weighs_more_than_what_is_not_verified() -> None:
    assert examine(troubled()).verdict is Verdict.DOES_NOT_HOLD
    everything = [Verdict.UNREADABLE, Verdict.DOES_NOT_HOLD, Verdict.NOT_VERIFIABLE, Verdict.HOLDS]
    for index, verdict in enumerate(everything):
        assert worst(reversed(everything[index:])) is verdict


def test_every_formula_cell_is_counted_exactly_once() -> None:
    made = troubled()
    tally = examine(made).tally
    cells, *counts = astuple(tally)
    assert cells == len(made.cells) == sum(counts[:5])


def test_a_note_of_many_cells_is_told_once() -> None:
    note = "external link [1] read from its saved values"
    report = examine(book(cell("A1", 1.0, 1.0, notes=(note,)), cell("A2", 1.0, 1.0, notes=(note,)), notes=("signed",)))
    assert [(each.text, len(each.cells)) for each in report.notes] == [("signed", 0), (note, 2)]
    assert report.verdict is Verdict.HOLDS


def test_another_edition_of_the_functions_is_said_and_does_not_spoil_the_book() -> None:
    printed = cell("P64", "cellsection 0.1.0 aaa", "cellsection 0.2.0 bbb", call="CS_EDITION", formula="=CS_EDITION()")
    report = examine(book(printed, cell("A1", 1.0, 1.0)))
    assert report.verdict.name == "HOLDS"
    assert report.tally.hold == 2
    (note,) = report.notes
    assert note.text == 'saved with "cellsection 0.1.0 aaa", checked with "cellsection 0.2.0 bbb"'
    typed_over = cell("P64", 5.0, "cellsection 0.2.0 bbb", call="CS_EDITION", formula="=CS_EDITION()")
    assert examine(book(typed_over)).verdict.name != "HOLDS"


def test_a_failed_fault_check_says_what_is_wrong_though_its_cell_shows_a_name_only() -> None:
    row = ("flange", "covers 200 mm² together with web", "that area counts twice", "Move or trim one of them")
    failed = replace(cell("B51", "flange", "flange", call="CS_FAULTS", formula="=CS_FAULTS(parts)"), whole=(row,) * 5)
    (finding,) = examine(book(failed)).findings
    told = "flange covers 200 mm² together with web: that area counts twice. Move or trim one of them."
    assert finding.cause == " ".join([told] * 3) + " And 2 more."
