"""When a recalculated value agrees with the saved one."""

from __future__ import annotations

import pytest

from cellsection.check.compare import Tolerance, agree, kind
from cellsection.workbook.values import ErrorValue

STANDARD = Tolerance()


@pytest.mark.parametrize(
    ("saved", "value", "tolerance", "holds"),
    [
        (1000.0, 1000.0000009, STANDARD, True),  # 0.9e-9 of the value
        (1000.0, 1000.0000011, STANDARD, False),
        (-1000.0, 1000.0, STANDARD, False),
        (0.0, 0.9e-12, STANDARD, True),
        (0.0, 1.1e-12, STANDARD, False),
        (3.0e-10, 5.0e-10, STANDARD, False),  # small numbers mean something too
        (100.0, 101.0, Tolerance(relative=0.01), True),
        (0.0, 0.5, Tolerance(absolute=1.0), True),
        (100.0, 100.0, Tolerance(0.0, 0.0), True),
        (100.0, 100.00000000000001, Tolerance(0.0, 0.0), False),
    ],
)
def test_numbers_agree_within_either_tolerance(saved: float, value: float, tolerance: Tolerance, holds: bool) -> None:
    assert agree(saved, value, tolerance) is holds
    assert agree(value, saved, tolerance) is holds


@pytest.mark.parametrize(
    ("saved", "value"),
    [("2", 2.0), (1.0, True), (0.0, False), ("TRUE", True), (0.0, None), (0.0, ""), ("#N/A!", ErrorValue("#N/A"))],
)
def test_values_of_different_kinds_never_agree(saved: object, value: object) -> None:
    assert not agree(saved, value, Tolerance(1.0, 1e9))
    assert not agree(value, saved, Tolerance(1.0, 1e9))


@pytest.mark.parametrize(
    ("saved", "value", "holds"),
    [
        ("web", "web", True),
        ("web", "Web", False),
        ("web", "web ", False),
        (True, True, True),
        (True, False, False),
        (ErrorValue("#N/A"), ErrorValue("#N/A", "a reason", "Girder!C4"), True),
        (ErrorValue("#N/A"), ErrorValue("#VALUE!"), False),
        (None, "", True),
        ("", None, True),
        (None, None, True),
    ],
)
def test_texts_truths_errors_and_blanks_agree_only_when_equal(saved: object, value: object, holds: bool) -> None:
    assert agree(saved, value, STANDARD) is holds


def test_a_refusal_written_as_text_agrees_with_an_error() -> None:
    refusal = "#CS! row 3, column tw: thickness 0 is not positive. Enter the plate thickness."
    assert agree(refusal, ErrorValue("#VALUE!"), STANDARD)
    assert not agree(refusal, 5.0, STANDARD)
    assert not agree("some other text", ErrorValue("#VALUE!"), STANDARD)


def test_an_error_saved_as_the_text_of_its_code_agrees_with_that_error_only() -> None:
    # so written by an online spreadsheet: <c r="F2" t="str"><f>NA()</f><v>#N/A</v></c>
    assert agree("#N/A", ErrorValue("#N/A"), STANDARD)
    assert not agree("#N/A", ErrorValue("#VALUE!"), STANDARD)
    assert not agree(ErrorValue("#N/A"), "#N/A", STANDARD)


def test_truth_is_a_kind_of_its_own() -> None:
    assert kind(True) == "truth"
    assert kind(1.0) == "number"
