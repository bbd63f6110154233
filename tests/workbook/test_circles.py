"""Circular references: named, or iterated where the book asks for it."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from cellsection.workbook.book import Book, Formula, Limits, Sheet
from cellsection.workbook.recalculate import recalculate, recalculated
from cellsection.workbook.results import FormulaCell, Status
from tests.workbook.small import saved as saved_book

ROOT = 0.7390851332151607  # cos x = x: 0.73908513321516064165..., OEIS A003957
COSINE = {"A1": "COS(B1)", "B1": "A1", "C1": "A1*1000"}


def cells(
    formulas: dict[str, str], saved: dict[str, float], rounds: str = "", change: str = "", limits: Limits | None = None
) -> dict[str, FormulaCell]:
    """The cells of a book that asks for iteration; all addresses are of one letter and one row."""
    sheet = Sheet("S")
    for address, text in formulas.items():
        row, column = int(address[1:]), ord(address[0]) - 64
        sheet.formulas[row, column] = Formula(text, row, column)
    for address, value in saved.items():
        sheet.values[int(address[1:]), ord(address[0]) - 64] = value
    book = Book("book", "xlsx", [sheet])
    book.iterated(rounds, change)
    return {cell.address: cell for cell in recalculated(book, None, limits).cells}


def test_saved_values_at_which_a_circle_rests_hold_and_what_depends_on_them_is_exact() -> None:
    found = cells(COSINE, {"A1": ROOT, "B1": ROOT, "C1": ROOT * 1000})
    assert {cell.status for cell in found.values()} == {Status.RECALCULATED}
    assert [cell.value for cell in found.values()] == [cell.saved for cell in found.values()]
    assert "is a circle that the book asks to iterate" in found["A1"].notes[0]
    assert found["C1"].notes == ()


def test_saved_values_within_the_change_that_the_book_allows_are_kept_and_the_distance_is_told() -> None:
    found = cells(COSINE, {"A1": ROOT + 3e-4, "B1": ROOT + 4e-4, "C1": (ROOT + 3e-4) * 1000})
    assert [cell.value for cell in found.values()] == [cell.saved for cell in found.values()]
    assert "0.0004 from the saved values at most" in found["A1"].notes[0]


def test_saved_values_away_from_the_circle_show_as_a_difference() -> None:
    found = cells(COSINE, {"A1": 0.9, "B1": 0.9, "C1": 900.0})
    assert found["A1"].value == pytest.approx(ROOT, rel=1e-12)
    assert found["C1"].value == pytest.approx(ROOT * 1000, rel=1e-12)
    assert "away from the saved values" in found["A1"].notes[0]


def test_a_smaller_change_allowed_refuses_what_a_larger_one_lets_pass() -> None:
    assert cells(COSINE, {"A1": ROOT + 3e-4, "B1": ROOT + 4e-4}, change="0.00001")["A1"].value != ROOT + 3e-4


def test_a_circle_that_does_not_settle_is_reported_and_what_depends_on_it_is_not_verified() -> None:
    found = cells({"A1": "A1+1", "B1": "A1*2"}, {"A1": 5.0, "B1": 10.0}, rounds="40")
    assert (found["A1"].status, found["A1"].value) == (Status.CYCLE, 5.0)
    assert "41 rounds" not in found["A1"].reason
    assert "40 rounds of iteration do not settle it: it still changes by 1" in found["A1"].reason
    assert (found["B1"].status, found["B1"].value) == (Status.NOT_VERIFIED, 10.0)


def test_several_circles_through_one_another_settle_at_the_solution_of_their_equations() -> None:
    formulas = {"A1": "B1/2+1", "B1": "C1*0.5+A1*0.1", "C1": "B1+A1*0.2+D1", "D1": "E1*0.3+1", "E1": "D1*0.2+C1*0.01"}
    found = cells(formulas, {})
    matrix = np.array([
        [1, -0.5, 0, 0, 0], [-0.1, 1, -0.5, 0, 0], [-0.2, -1, 1, -1, 0], [0, 0, 0, 1, -0.3], [0, 0, -0.01, -0.2, 1]
    ])  # fmt: skip
    exact = np.linalg.solve(matrix, np.array([1, 0, 0, 1, 0]))
    assert [cell.value for cell in found.values()] == pytest.approx(list(exact), rel=1e-11)


def test_a_circle_through_a_sum_over_many_cells_reads_none_of_them_stale() -> None:
    formulas = {f"A{row}": f"B1/{row + 100}" for row in range(1, 81)} | {"B1": "1+SUM(A1:A80)"}
    factor = sum(1 / (row + 100) for row in range(1, 81))
    assert cells(formulas, {})["B1"].value == pytest.approx(1 / (1 - factor), rel=1e-10)


def test_a_circle_through_an_unsupported_function_is_not_verified() -> None:
    found = cells({"A1": "B1+0*ODDITY(2)", "B1": "A1/2+1", "C1": "B1"}, {"A1": 2.0, "B1": 2.0, "C1": 2.0})
    assert [cell.status for cell in found.values()] == [Status.UNSUPPORTED, Status.NOT_VERIFIED, Status.NOT_VERIFIED]


def test_a_circle_that_iterates_beyond_the_time_cap_is_not_verified() -> None:
    formulas = {f"A{row}": f"A{row + 1}+1" for row in range(1, 2000)} | {"A2000": "A1/2"}
    found = cells(formulas, {}, rounds="30000", change="0", limits=Limits(seconds=0.05))
    assert {cell.status for cell in found.values()} <= {Status.NOT_VERIFIED, Status.CYCLE}


def test_a_book_that_does_not_ask_for_iteration_has_its_circle_named() -> None:
    sheet = Sheet("S", {(1, 1): 1.0})
    sheet.formulas = {(1, 1): Formula("B1", 1, 1), (1, 2): Formula("A1", 1, 2)}
    found = recalculated(Book("book", "xlsx", [sheet])).cells
    assert {cell.status for cell in found} == {Status.CYCLE}
    assert "S!A1 -> S!B1 -> S!A1" in found[0].reason


def test_rounds_and_change_are_read_from_the_file(tmp_path: Path) -> None:
    book = saved_book(
        tmp_path, {"S": {"A1": "=A1+1"}}, settings='<calcPr iterate="1" iterateCount="7" iterateDelta="0.5"/>'
    )
    result = recalculate(book)
    assert "7 rounds of iteration do not settle it" in result.cells[0].reason
    assert "in 7 rounds at most, to changes of 0.5 or less" in result.notes[0]
