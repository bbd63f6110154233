"""Every published value that can be computed now reproduces as printed, or is listed with the reason."""

from __future__ import annotations

import doctest
from math import isclose

import pytest

from tests.published import outcome as outcome_module
from tests.published import published as published_module
from tests.published import sections as sections_module
from tests.published.awaited import awaited_chapter
from tests.published.exceptions import EXCEPTIONS
from tests.published.outcome import outcome, outcomes
from tests.published.published import Row, published, rows, sources
from tests.published.report import PAGE, TABLE, page, table

ROWS = 1407  # as many as the project's list of check values has
REGENERATE = "out of date; run: python -m tests.published.report"

COMPUTED_NOW = [row for row in rows() if awaited_chapter(row) is None]


def title(row: Row) -> str:
    return row.title


@pytest.mark.parametrize("row", [row for row in COMPUTED_NOW if row.id not in EXCEPTIONS], ids=title)
def test_the_value_is_as_published(row: Row) -> None:
    assert outcome(row).computed == row.value


@pytest.mark.parametrize("row", [row for row in COMPUTED_NOW if row.id in EXCEPTIONS], ids=title)
def test_a_listed_exception_still_fails_by_no_more_than_its_reason_says(row: Row) -> None:
    computed = outcome(row).computed
    assert computed is not None
    assert computed != row.value, "it reproduces now: take it off the list in exceptions.py"
    # So far every exception is a fine polygon in place of a curve; the published value is its exact formula's.
    assert row.last_digit.startswith("exact formula")
    assert isclose(computed, float(row.printed), rel_tol=1e-6)


def test_every_row_is_kept_once_and_has_one_state() -> None:
    assert len(rows()) == len({row.id for row in rows()}) == ROWS
    assert len(outcomes()) == ROWS  # raises where a row is neither computed nor awaited, or both
    assert set(EXCEPTIONS) <= {row.id for row in COMPUTED_NOW}


def test_every_source_says_what_it_is_and_who_typed_it() -> None:
    for source in sources():
        assert source.source
        assert source.units
        assert source.typed.startswith(("from memory for this project", "for this project, from a published copy"))


def test_the_last_digit_kept_beside_a_value_is_the_one_printed() -> None:
    for row in rows():
        if row.last_digit.startswith("exact formula"):
            continue
        shown, kept = published(row.printed), row.value
        trailing_zeros = "." not in row.printed and row.printed.endswith("0")
        assert shown.half == kept.half or (trailing_zeros and kept.half > shown.half), row.title


@pytest.mark.parametrize(
    ("printed", "last_digit", "note", "inside", "outside"),
    [
        ("0.1406", "", "", 0.14065, 0.1406501),
        ("171", "", "", 171.5, 171.51),
        ("12.3", "", "", 12.25, 12.2499),
        ("29400", "100", "", 29350.0, 29349.9),
        ("1.000", "", "", 0.9995, 0.9994),
        (".762", "", "", 0.7615, 0.7614),
        ("24.0", "exact formula: b^2 h^2/24", "", 24.000047, 24.000049),
        ("2.0", "exact formula: b", "(tolerance of the numerical recomputation 1e-12)", 2.0, 2.0 + 1e-11),
    ],
)
def test_the_tolerance_is_read_off_the_page(
    printed: str, last_digit: str, note: str, inside: float, outside: float
) -> None:
    value = published(printed, last_digit, note)
    assert inside == value
    assert outside != value


@pytest.mark.parametrize(
    "module", [published_module, sections_module, outcome_module], ids=lambda module: module.__name__
)
def test_the_examples_in_the_docstrings_hold(module: object) -> None:
    tried = doctest.testmod(module)  # type: ignore[arg-type]
    assert tried.attempted
    assert not tried.failed


def test_the_verification_page_is_current() -> None:
    assert PAGE.read_text(encoding="utf-8") == page(), REGENERATE
    assert TABLE.read_text(encoding="utf-8") == table(), REGENERATE
