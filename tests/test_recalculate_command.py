"""`cellsection recalculate`: what it writes, what it refuses, what it says, and how it exits."""

from __future__ import annotations

import zipfile
from pathlib import Path

import openpyxl
import pytest
from click.testing import CliRunner, Result

from cellsection.cli import commands
from tests.check.small_book import write_book

STALE = {"A1": 300.0, "A2": 20.0, "B1": ("A1*A2", 1.0), "B2": ("SUM(A1:A2)", 320.0)}


def run(*arguments: object) -> Result:
    return CliRunner().invoke(commands, ["recalculate", *map(str, arguments)])


@pytest.fixture
def stale(tmp_path: Path) -> Path:
    """A book that was saved without being recalculated."""
    return write_book(tmp_path / "stale.xlsx", STALE)


def value(path: Path, address: str) -> object:
    return openpyxl.load_workbook(path, data_only=True).worksheets[0][address].value


def test_a_copy_with_new_values_is_written_and_the_book_stays(stale: Path, tmp_path: Path) -> None:
    before, out = stale.read_bytes(), tmp_path / "out.xlsx"
    result = run(stale, "-o", out)
    assert result.exit_code == 0
    assert result.output.splitlines() == [
        f"{out}: recalculated",
        "  2 formula cells on 1 sheet: 1 value changed, 1 as they were",
    ]
    assert (value(out, "B1"), value(out, "B2")) == (6000, 320)  # 300 * 20 and 300 + 20
    assert stale.read_bytes() == before


def test_a_file_in_the_way_is_refused_unless_told(stale: Path, tmp_path: Path) -> None:
    out = tmp_path / "out.xlsx"
    out.write_bytes(b"what was there")
    result = run(stale, "-o", out)
    assert result.exit_code == 4
    assert "--replace" in result.output
    assert out.read_bytes() == b"what was there"
    assert run(stale, "-o", out, "--replace").exit_code == 0
    assert value(out, "B1") == 6000


def test_the_book_itself_is_replaced_only_when_told(stale: Path) -> None:
    before = stale.read_bytes()
    result = run(stale, "-o", stale)
    assert result.exit_code == 4
    assert "replace itself" in result.output
    assert stale.read_bytes() == before
    assert run(stale, "-o", stale, "--replace").exit_code == 0
    assert value(stale, "B1") == 6000
    assert [each.name for each in stale.parent.iterdir()] == ["stale.xlsx"]


def test_cells_that_cannot_be_recalculated_are_told_with_their_places(tmp_path: Path) -> None:
    book = write_book(tmp_path / "book.xlsx", {**STALE, "C1": ("NOSUCHFUNCTION(A1)", 5.0), "C2": ("C1+1", 7.0)})
    result = run(book, "-o", tmp_path / "out.xlsx")
    assert result.exit_code == 2
    assert "recalculated in part" in result.output
    assert "2 kept, as they could not be recalculated" in result.output
    assert "NOSUCHFUNCTION: 1 cell, Girder!C1" in result.output
    assert "Girder!C2" in result.output
    assert [value(tmp_path / "out.xlsx", a) for a in ("B1", "C1", "C2")] == [6000, 5, 7]


def test_a_cell_that_was_never_computed_is_told(tmp_path: Path) -> None:
    book = write_book(tmp_path / "book.xlsx", {**STALE, "C1": ("A1+1", None)})
    result = run(book, "-o", tmp_path / "out.xlsx")
    assert result.exit_code == 0
    assert "1 cell had no saved value: Girder!C1" in result.output
    assert value(tmp_path / "out.xlsx", "C1") == 301


def test_differences_of_rounding_are_told_apart(tmp_path: Path) -> None:
    book = write_book(tmp_path / "book.xlsx", {**STALE, "B2": ("SUM(A1:A2)", 320.0000000001)})
    result = run(book, "-o", tmp_path / "out.xlsx")
    assert "1 of the changes is a matter of rounding" in result.output
    assert value(tmp_path / "out.xlsx", "B2") == 320


def test_a_moment_can_be_given(tmp_path: Path) -> None:
    book = write_book(tmp_path / "book.xlsx", {**STALE, "C1": ("YEAR(TODAY())", 1999.0)})
    assert run(book, "-o", tmp_path / "out.xlsx", "--clock", "2031-05-01").exit_code == 0
    assert value(tmp_path / "out.xlsx", "C1") == 2031
    result = run(book, "-o", tmp_path / "now.xlsx")
    assert "1 cell changes with the clock or by chance" in result.output


def test_a_signature_and_macros_are_told(stale: Path, tmp_path: Path) -> None:
    signed, out = stale.with_name("signed.xlsm"), tmp_path / "out.xlsm"
    signed.write_bytes(stale.read_bytes())
    with zipfile.ZipFile(signed, "a") as package:
        package.writestr("_xmlsignatures/sig1.xml", "<Signature/>")
        package.writestr("xl/vbaProject.bin", b"\xd0\xcf no macros at all")
    result = run(signed, "-o", out)
    assert "the digital signature of the book does not hold for the copy" in result.output
    assert "macros are kept" in result.output
    with zipfile.ZipFile(signed) as old, zipfile.ZipFile(out) as new:
        changed = [name for name in old.namelist() if old.read(name) != new.read(name)]
    assert changed == ["xl/worksheets/sheet1.xml"]


def test_a_book_that_cannot_be_read_exits_3_and_nothing_is_written(tmp_path: Path) -> None:
    (tmp_path / "book.xlsx").write_bytes(b"no workbook")
    for book in ("book.xlsx", "missing.xlsx"):
        result = run(tmp_path / book, "-o", tmp_path / "out.xlsx")
        assert result.exit_code == 3
        assert "not recalculated" in result.output
    assert [each.name for each in tmp_path.iterdir()] == ["book.xlsx"]


@pytest.mark.parametrize("out", ["out.xlsm", "missing/out.xlsx", "folder.xlsx"])
def test_a_copy_that_cannot_be_written_there_exits_4(stale: Path, out: str) -> None:
    (stale.parent / "folder.xlsx").mkdir()
    assert run(stale, "-o", stale.parent / out, "--replace").exit_code == 4
    assert sorted(each.name for each in stale.parent.iterdir()) == ["folder.xlsx", "stale.xlsx"]


def test_the_copy_has_to_be_named(stale: Path) -> None:
    assert run(stale).exit_code != 0
