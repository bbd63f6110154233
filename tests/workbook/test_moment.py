"""The clock and chance: volatile as a rule, fixed on request."""

from __future__ import annotations

from datetime import datetime
from pathlib import Path
from zipfile import ZipFile

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Formula, Sheet
from cellsection.workbook.machine import Moment
from cellsection.workbook.recalculate import recalculate, recalculated
from cellsection.workbook.results import FormulaCell, Status
from tests.workbook.small import parts_of

NOON = datetime(2024, 2, 29, 12, 0)  # serial number 45351.5, from memory; the leap day follows 2024-01-01 = 45292


def cells(formulas: list[str], moment: Moment | None = None) -> list[FormulaCell]:
    sheet = Sheet("S")
    for row, text in enumerate(formulas, start=1):
        sheet.formulas[row, 1] = Formula(text, row, 1)
    return recalculated(Book("book", "xlsx", [sheet]), moment=moment).cells


def test_a_given_clock_is_verified_like_anything_else() -> None:
    found = cells(["TODAY()", "NOW()", "YEAR(A1)"], Moment(NOON, frozenset(["day", "time"])))
    assert [(c.value, c.status) for c in found] == [
        (45351.0, Status.RECALCULATED),
        (45351.5, Status.RECALCULATED),
        (2024.0, Status.RECALCULATED),
    ]


def test_without_a_clock_what_depends_on_it_is_volatile() -> None:
    assert {c.status for c in cells(["TODAY()", "NOW()", "YEAR(A1)"])} == {Status.VOLATILE}


def test_a_seed_gives_the_same_random_numbers_again_and_others_in_other_cells() -> None:
    formulas = ["RAND()", "RAND()", "RANDBETWEEN(1,1000000)", "SUM(RANDARRAY(3,3))"]
    first, again = cells(formulas, Moment(seed=7)), cells(formulas, Moment(seed=7))
    assert [c.value for c in first] == [c.value for c in again]
    assert first[0].value != first[1].value
    assert [c.value for c in cells(formulas, Moment(seed=8))] != [c.value for c in first]
    assert {c.status for c in first} == {Status.VOLATILE}  # the file does not say what its own began from


CORE = (
    '<cp:coreProperties xmlns:cp="http://schemas.openxmlformats.org/package/2006/metadata/core-properties" '
    'xmlns:dcterms="http://purl.org/dc/terms/"><dcterms:modified>2024-02-29T12:00:00Z</dcterms:modified>'
    "</cp:coreProperties>"
)


def book_of_today(folder: Path, core: str) -> Path:
    path = folder / "book.xlsx"
    with ZipFile(path, "w") as target:
        for name, text in parts_of({"S": {"A1": "=TODAY()", "A2": "=NOW()"}}, {}).items():
            target.writestr(name, text)
        if core:
            target.writestr("docProps/core.xml", core)
    return path


def test_the_day_a_book_was_saved_is_taken_from_the_book(tmp_path: Path) -> None:
    today, now = recalculate(book_of_today(tmp_path, CORE), clock="saved").cells
    assert (today.value, today.status) == (45351.0, Status.RECALCULATED)
    assert (now.value, now.status) == (45351.5, Status.VOLATILE)  # the time of day is not sure


def test_a_book_that_does_not_say_when_it_was_saved_is_refused_when_that_is_asked(tmp_path: Path) -> None:
    with pytest.raises(WorkbookError, match="does not say when it was saved"):
        recalculate(book_of_today(tmp_path, ""), clock="saved")
