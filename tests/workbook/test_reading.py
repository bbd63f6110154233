"""Files read into books: what a cell holds, and clean refusals of what is no workbook, damaged or hostile."""

from __future__ import annotations

import zipfile
from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Limits
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.values import ErrorValue
from tests.workbook.small import MAIN, Results, parts_of, results, saved, zipped

SHEET = "xl/worksheets/sheet1.xml"
LIMITS = Limits()


def read(path: Path) -> Book:
    return read_book(path, LIMITS)


def with_parts(folder: Path, **changed: str | bytes | None) -> Path:
    """A small book with some parts replaced (None: left out)."""
    names = {"sheet": SHEET, "workbook": "xl/workbook.xml", "rels": "xl/_rels/workbook.xml.rels", "root": "_rels/.rels"}
    parts: dict[str, str | bytes] = dict(parts_of({"S": {"A1": 1.0, "B1": "=A1+1"}}, {}))
    for short, content in changed.items():
        if content is None:
            del parts[names[short]]
        else:
            parts[names[short]] = content
    return zipped(folder / "book.xlsx", parts)


def sheet(body: str) -> str:
    return f'<worksheet xmlns="{MAIN}"><sheetData>{body}</sheetData></worksheet>'


def test_every_kind_of_saved_value_is_read(tmp_path: Path) -> None:
    body = (
        '<row r="1"><c r="A1"><v>1.5</v></c><c r="B1" t="b"><v>1</v></c><c r="C1" t="e"><v>#N/A</v></c>'
        '<c r="D1" t="str"><f>"a"</f><v>a_x000D_b</v></c>'
        '<c r="E1" t="inlineStr"><is><r><t>bo</t></r><r><t>lt</t></r></is></c>'
        '<c r="F1" t="d"><v>2024-03-01</v></c><c><v>7</v></c></row>'
    )
    values = read(with_parts(tmp_path, sheet=sheet(body))).sheets[0].values
    assert [values.get((1, k)) for k in range(1, 8)] == [
        1.5, True, ErrorValue("#N/A"), "a\rb", "bolt", 45352.0, 7.0,
    ]  # fmt: skip


def test_prefixed_and_utf16_parts_read_alike(tmp_path: Path) -> None:
    prefixed = (
        f'<x:worksheet xmlns:x="{MAIN}"><x:sheetData>'
        '<x:row r="1"><x:c r="A1"><x:v>4</x:v></x:c></x:row></x:sheetData></x:worksheet>'
    )
    assert read(with_parts(tmp_path, sheet=prefixed)).sheets[0].values == {(1, 1): 4.0}
    wide = ('<?xml version="1.0" encoding="UTF-16"?>' + sheet('<row r="1"><c r="A1"><v>5</v></c></row>')).encode(
        "utf-16"
    )
    assert read(with_parts(tmp_path, sheet=wide)).sheets[0].values == {(1, 1): 5.0}


def test_children_of_a_shared_formula_hold_the_very_same_formula(tmp_path: Path) -> None:
    cells = {"B1": '<f t="shared" ref="B1:B2" si="0">A1*2</f>', "B2": '<f t="shared" si="0"/>'}
    formulas = read(saved(tmp_path, {"S": cells})).sheets[0].formulas
    assert formulas[2, 2] is formulas[1, 2]


def test_names_dates_and_settings_of_the_book_are_read(tmp_path: Path) -> None:
    settings = '<workbookPr date1904="1"/><calcPr iterate="1"/>'
    book = read(saved(tmp_path, {"S": {"A1": 1.0}}, {"Plates": "S!$A$1"}, settings))
    assert book.date1904
    assert book.iterate
    assert book.names["", "PLATES"].text == "S!$A$1"


def test_dates_count_from_1904_where_the_book_says_so(tmp_path: Path) -> None:
    path = saved(tmp_path, {"S": {"A1": "=DATE(1904,1,2)", "A2": "=YEAR(0)"}}, None, '<workbookPr date1904="1"/>')
    found = Results(recalculate(path))
    assert (found["A1"], found["A2"]) == (1.0, 1904.0)


@pytest.mark.parametrize(
    ("content", "word"),
    [
        (b"", "readable"),
        (b"plain text", "readable"),
        (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 600, r"is in the old binary format \(.xls\). Save it as .xlsx"),
        (
            b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 600 + "EncryptedPackage".encode("utf-16-le"),
            "is encrypted. Save it without a password",
        ),
        (b"PK\x03\x04" + b"\0" * 40, "readable"),
    ],
)
def test_what_is_no_workbook_is_refused_with_a_remedy(tmp_path: Path, content: bytes, word: str) -> None:
    path = tmp_path / "book.xlsx"
    path.write_bytes(content)
    with pytest.raises(WorkbookError, match=word) as refusal:
        read(path)
    assert refusal.value.remedy


def test_a_missing_file_is_a_clean_refusal(tmp_path: Path) -> None:
    with pytest.raises(WorkbookError, match="cannot be opened"):
        read(tmp_path / "nowhere.xlsx")


def test_a_truncated_file_is_refused(tmp_path: Path) -> None:
    path = with_parts(tmp_path)
    path.write_bytes(path.read_bytes()[:-30])
    with pytest.raises(WorkbookError):
        read(path)


@pytest.mark.parametrize(
    ("changed", "word"),
    [
        ({"sheet": None}, "lacks its part"),
        ({"root": None}, "not a workbook"),
        ({"rels": None}, "where its sheet S is"),
        ({"sheet": "<worksheet"}, "not well-formed"),
        ({"sheet": '<!DOCTYPE x [<!ENTITY a "b">]>' + sheet("")}, "document type"),
        ({"sheet": sheet('<row r="1"><c r="A0"><v>1</v></c></row>')}, "no cell address"),
        ({"sheet": sheet('<row r="1"><c r="ZZZZ1"><v>1</v></c></row>')}, "no cell address"),
    ],
)
def test_damage_is_named(tmp_path: Path, changed: dict[str, str | None], word: str) -> None:
    with pytest.raises(WorkbookError, match=word):
        read(with_parts(tmp_path, **changed))


@pytest.mark.parametrize("saved_value", ["NaN", "1e999", "0x10", "1_000"])
def test_a_saved_value_that_is_no_number_is_an_error_value_that_says_so(tmp_path: Path, saved_value: str) -> None:
    value = (
        read(with_parts(tmp_path, sheet=sheet(f'<row r="1"><c r="A1"><v>{saved_value}</v></c></row>')))
        .sheets[0]
        .values[1, 1]
    )
    assert isinstance(value, ErrorValue)
    assert saved_value in value.message


@pytest.mark.parametrize(
    ("limits", "word"),
    [(Limits(parts=2), "parts"), (Limits(unzipped_bytes=100), "unpacks"), (Limits(cells=0), "cells")],
)
def test_caps_refuse_a_book_that_asks_for_too_much(tmp_path: Path, limits: Limits, word: str) -> None:
    with pytest.raises(WorkbookError, match=word):
        read_book(with_parts(tmp_path), limits)


def test_a_part_that_unpacks_beyond_all_proportion_is_refused(tmp_path: Path) -> None:
    with pytest.raises(WorkbookError, match="times its size"):
        read_book(with_parts(tmp_path, sheet=sheet(" " * 20_000_000)), Limits(ratio=100))


def test_a_part_that_is_there_twice_is_refused(tmp_path: Path) -> None:
    path = with_parts(tmp_path)
    with zipfile.ZipFile(path, "a") as package, pytest.warns(UserWarning, match="Duplicate"):
        package.writestr(SHEET, sheet(""))
    with pytest.raises(WorkbookError, match="twice"):
        read(path)


def test_an_external_link_is_read_from_its_saved_values_and_said(tmp_path: Path) -> None:
    found = results(tmp_path, {"A1": "<f>[1]Loads!A1*2</f><v>8</v>"})
    assert "external" in found.cells["A1"].reason


def test_structured_references_read_their_table(tmp_path: Path) -> None:
    import openpyxl
    from openpyxl.worksheet.table import Table

    book = openpyxl.Workbook()
    page = book.active
    for row in (("part", "area"), ("web", 10), ("flange", 20)):
        page.append(row)
    page.add_table(Table(displayName="Parts", ref="A1:B3"))
    page["D1"], page["D2"], page["D3"] = "=SUM(Parts[area])", "=ROWS(Parts[#All])", "=Parts[[#This Row],[area]]*2"
    book.save(tmp_path / "table.xlsx")
    found = Results(recalculate(tmp_path / "table.xlsx"))
    assert [found["D1"], found["D2"], found["D3"]] == [30.0, 3.0, 40.0]
