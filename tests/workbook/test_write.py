"""Recalculated values in a copy: the right cells change and nothing else does."""

from __future__ import annotations

import zipfile
from pathlib import Path

import openpyxl
import pytest
from openpyxl.worksheet.formula import ArrayFormula

from cellsection.errors import WorkbookError
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.write import write_values


def built(folder: Path) -> Path:
    """A book as openpyxl writes it: formulas without saved values, a second sheet with none."""
    book = openpyxl.Workbook()
    page = book.active
    page.title = "Girder"
    page["A1"], page["A2"] = 2, 3
    page["B1"], page["B2"], page["B3"], page["B4"] = "=A1*A2", '="web "&A1', "=A1<A2", "=1/0"
    page["C1"] = ArrayFormula("C1:D2", "=TRANSPOSE(A1:A2)*{1;2}")
    page["A1"].comment = openpyxl.comments.Comment("a plate", "the workshop")
    book.create_sheet("Notes")["A1"] = "no formula here"
    path = folder / "book.xlsx"
    book.save(path)
    return path


def test_values_are_there_for_whoever_opens_the_copy(tmp_path: Path) -> None:
    path, out = built(tmp_path), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    page = openpyxl.load_workbook(out, data_only=True)["Girder"]
    assert [page[a].value for a in ("B1", "B2", "B3", "B4")] == [6, "web 2", True, "#DIV/0!"]
    assert [page[a].value for a in ("C1", "D1", "C2", "D2")] == [2, 3, 4, 6]
    formulas = openpyxl.load_workbook(out)["Girder"]
    assert formulas["B1"].value == "=A1*A2"
    assert formulas["C1"].value.ref == "C1:D2"


def test_every_other_part_stays_byte_for_byte(tmp_path: Path) -> None:
    path, out = built(tmp_path), tmp_path / "out.xlsx"
    before = path.read_bytes()
    write_values(path, recalculate(path), out)
    assert path.read_bytes() == before
    with zipfile.ZipFile(path) as old, zipfile.ZipFile(out) as new:
        assert old.namelist() == new.namelist()
        changed = [name for name in old.namelist() if old.read(name) != new.read(name)]
    assert changed == ["xl/worksheets/sheet1.xml"]


def test_a_written_copy_recalculates_to_what_it_holds(tmp_path: Path) -> None:
    path, out = built(tmp_path), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    for cell in recalculate(out).cells:
        assert cell.value == cell.saved, cell.address


def test_a_book_never_replaces_itself(tmp_path: Path) -> None:
    path = built(tmp_path)
    with pytest.raises(WorkbookError, match="replace itself"):
        write_values(path, recalculate(path), path)


def test_nothing_is_left_where_the_copy_cannot_be_written(tmp_path: Path) -> None:
    path = built(tmp_path)
    with pytest.raises((WorkbookError, OSError)):
        write_values(path, recalculate(path), tmp_path / "missing" / "out.xlsx")
    assert sorted(p.name for p in tmp_path.iterdir()) == ["book.xlsx"]
