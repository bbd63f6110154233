"""Logical values of .ods files are numbers. Expected values are what LibreOffice 7.4 saved for these formulas."""

from __future__ import annotations

import pytest

from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.results import FormulaCell, Status
from cellsection.workbook.values import ErrorValue, Scalar

COLUMN: dict[tuple[int, int], Scalar] = {(1, 1): True, (2, 1): False, (3, 1): 3.0, (5, 1): "x"}


def cell(formula: str, saved: Scalar = None) -> FormulaCell:
    """One formula beside A1:A5 = TRUE, FALSE, 3, =A3>2, x."""
    sheet = Sheet("S", dict(COLUMN))
    sheet.formulas[4, 1] = Formula("[.A3]>2", 4, 1, language="openformula")
    sheet.formulas[1, 4] = Formula(formula, 1, 4, language="openformula")
    if saved is not None:
        sheet.values[1, 4] = saved
    found = recalculated(Book("book", "ods", [sheet])).cells
    return next(each for each in found if each.address == "D1")


@pytest.mark.parametrize(
    ("formula", "value"),
    [
        ("SUM([.A1:.A5])", 5.0),
        ("COUNT([.A1:.A5])", 4.0),
        ("SUMPRODUCT([.A1:.A4]>0)", 3.0),
        ("COUNTIF([.A1:.A5];1)", 2.0),
        ("COUNTIF([.A1:.A5];TRUE())", 2.0),
        ("MATCH(TRUE();[.A1:.A5];0)", 1.0),
        ('IF([.A4]=1;"y";"n")', "y"),
        ('[.A1]&""', "1"),
        ('TRUE()&"z"', "1z"),
        ('IF(TRUE()>"a";1;2)', 2.0),
        ("0^0", 1.0),
        ("MEDIAN([.A1:.A4])", 1.0),
        ("LEN([.A1])", 1.0),
    ],
)
def test_logical_values_count_as_numbers(formula: str, value: Scalar) -> None:
    assert cell(formula).value == value


def test_a_result_is_shown_as_its_saved_value_is() -> None:
    assert cell("[.A1]=1", saved=True).value is True
    assert cell("[.A1]=1", saved=1.0).value == 1.0
    assert cell("MAX([.A1:.A2])", saved=True).value is True


def test_an_error_that_the_file_holds_by_number_agrees_with_what_the_number_stands_for() -> None:
    numbered = ErrorValue("#VALUE!", "saved as Err:502")
    assert cell("SQRT(-1)", saved=numbered).value == numbered
    assert cell("1/0", saved=numbered).value == ErrorValue("#DIV/0!")


@pytest.mark.parametrize("formula", ["ISLOGICAL([.A1])", "TYPE([.A1])"])
def test_what_asks_how_a_number_is_shown_is_reported(formula: str) -> None:
    assert cell(formula).status is Status.UNSUPPORTED


def test_books_of_the_other_application_keep_logical_values_apart() -> None:
    sheet = Sheet("S", dict(COLUMN))
    sheet.formulas[1, 4] = Formula("SUM(A1:A3)", 1, 4)
    assert recalculated(Book("book", "xlsx", [sheet])).cells[0].value == 3.0
