"""Every workbook of a folder, read and written: set CELLSECTION_BOOKS to the folder to run these.

A book is either refused with a remedy, or read, recalculated and written to a copy that reads back as it should.
"""

from __future__ import annotations

from pathlib import Path

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Limits, Sheet
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import Recalculation, Status
from cellsection.workbook.values import ErrorValue, Scalar
from cellsection.workbook.write import write_values


def wanted(sheet: Sheet, recalculation: Recalculation) -> dict[tuple[int, int], Scalar]:
    """The values that a copy of the sheet is to hold."""
    values = dict(sheet.values)
    for cell in recalculation.cells:
        place = read_ref(cell.address)
        if cell.sheet == sheet.name and place and cell.status in (Status.RECALCULATED, Status.VOLATILE):
            newer = isinstance(cell.value, ErrorValue) and cell.value.code in ("#SPILL!", "#CALC!")
            if cell.value is None:
                values.pop(place[:2], None)
            elif not (newer and cell.value != cell.saved):
                values[place[:2]] = cell.value
            else:  # the format has no room for it
                values[place[:2]] = ErrorValue("#VALUE!")
    return values


def test_a_book_is_refused_with_a_remedy_or_read_and_written(book_at_hand: Path, tmp_path: Path) -> None:
    before = book_at_hand.read_bytes()
    try:
        book = read_book(book_at_hand, Limits())
    except WorkbookError as refusal:
        assert refusal.remedy  # noqa: PT017 - either way is well
        return
    recalculation = recalculate(book_at_hand)
    out = tmp_path / f"out{book_at_hand.suffix}"
    try:
        write_values(book_at_hand, recalculation, out)
    except WorkbookError as refusal:
        assert refusal.remedy  # noqa: PT017
        assert not list(tmp_path.iterdir())
    else:
        copy = read_book(out, Limits())
        assert [s.name for s in copy.sheets] == [s.name for s in book.sheets]
        for old, new in zip(book.sheets, copy.sheets, strict=True):
            assert new.values == wanted(old, recalculation)
            assert new.formulas.keys() == old.formulas.keys()
    assert book_at_hand.read_bytes() == before
