"""OpenDocument spreadsheets: repeats, typed values, arrays, names, and their formula language."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.values import ErrorValue
from tests.workbook.small import Results, zipped

NAMESPACES = (
    'xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0"'
    ' xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0"'
    ' xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0"'
    ' xmlns:calcext="urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0"'
)
BLANK = "<table:table-cell/>"
STRING = 'office:value-type="string"'


def number(value: float, extra: str = "") -> str:
    return f'<table:table-cell office:value-type="float" office:value="{value}" {extra}/>'


def formula(text: str, extra: str = "") -> str:
    return f'<table:table-cell table:formula="{text}" office:value-type="float" office:value="0" {extra}/>'


def book(folder: Path, rows: str, after: str = "", before: str = "") -> Path:
    content = (
        f"<office:document-content {NAMESPACES}><office:body><office:spreadsheet>{before}"
        f'<table:table table:name="S">{rows}</table:table>{after}'
        "</office:spreadsheet></office:body></office:document-content>"
    )
    return zipped(
        folder / "book.ods", {"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": content}
    )


def row(*cells: str, repeated: int | str = 1) -> str:
    return f'<table:table-row table:number-rows-repeated="{repeated}">{"".join(cells)}</table:table-row>'


def test_cells_are_counted_with_their_repeats(tmp_path: Path) -> None:
    cells = row(number(1), '<table:table-cell table:number-columns-repeated="3"/>', number(2)) + row(
        BLANK, repeated=1_000_000
    )
    cells += row(number(3, 'table:number-columns-repeated="2"'), repeated=2)
    values = read_book(book(tmp_path, cells), Limits()).sheets[0].values
    assert values == {
        (1, 1): 1.0, (1, 5): 2.0,
        (1_000_002, 1): 3.0, (1_000_002, 2): 3.0, (1_000_003, 1): 3.0, (1_000_003, 2): 3.0,
    }  # fmt: skip


@pytest.mark.parametrize("repeats", ["-5", "abc", "0", "99999999999"])
def test_an_absurd_repeat_of_rows_is_refused(tmp_path: Path, repeats: str) -> None:
    with pytest.raises(WorkbookError, match="number-rows-repeated"):
        read_book(book(tmp_path, row(number(1), repeated=repeats)), Limits())


def test_a_value_repeated_beyond_the_sheet_is_refused(tmp_path: Path) -> None:
    with pytest.raises(WorkbookError, match="repeated"):
        read_book(book(tmp_path, row(number(1, 'table:number-columns-repeated="1000000000"'))), Limits())


def test_typed_values_are_read(tmp_path: Path) -> None:
    cells = row(
        '<table:table-cell office:value-type="percentage" office:value="0.25"/>',
        '<table:table-cell office:value-type="date" office:date-value="2024-03-01"/>',
        '<table:table-cell office:value-type="time" office:time-value="PT12H00M00S"/>',
        '<table:table-cell office:value-type="boolean" office:boolean-value="true"/>',
        f'<table:table-cell {STRING}><text:p>a<text:s text:c="2"/>b</text:p><text:p>c</text:p></table:table-cell>',
        f'<table:table-cell {STRING} calcext:value-type="error"><text:p>#DIV/0!</text:p></table:table-cell>',
    )
    values = read_book(book(tmp_path, cells), Limits()).sheets[0].values
    assert [values[1, k] for k in range(1, 7)] == [0.25, 45352.0, 0.5, True, "a  b\nc", ErrorValue("#DIV/0!")]


def test_openformula_is_calculated(tmp_path: Path) -> None:
    names = (
        '<table:named-expressions><table:named-range table:name="plates" table:base-cell-address="$S.$A$1"'
        ' table:cell-range-address="$S.$A$1:.$B$1"/></table:named-expressions>'
    )
    cells = row(
        number(2),
        number(3),
        formula("of:=SUM([.A1:.B1])*2"),
        formula("of:=IF([.A1]&lt;[.B1];10;20)"),
        formula("of:=SUM(plates)"),
        formula("of:={1;2|3;4}", 'table:number-matrix-rows-spanned="1" table:number-matrix-columns-spanned="2"'),
        BLANK,
        formula("of:=[$S.$A$1]^2"),
    )
    found = Results(recalculate(book(tmp_path, cells, names)))
    assert [found[a] for a in ("C1", "D1", "E1", "F1", "G1", "H1")] == [10.0, 10.0, 5.0, 1.0, 2.0, 4.0]
    assert found.cells["C1"].formula == "of:=SUM([.A1:.B1])*2"


def test_the_service_spelling_of_old_versions_reaches_the_host_function(tmp_path: Path) -> None:
    from cellsection.hosts.headless import recalculate as with_sections

    header = "".join(
        f'<table:table-cell office:value-type="string"><text:p>{word}</text:p></table:table-cell>'
        for word in ("shape", "b", "h")
    )
    part = (
        '<table:table-cell office:value-type="string"><text:p>rectangle</text:p></table:table-cell>'
        + number(6)
        + number(4)
    )
    path = book(tmp_path, row(header) + row(part) + row(formula("of:=CS.TOTALS([.A1:.C2];&quot;Ix&quot;)")))
    assert Results(with_sections(path))["A3"] == 32.0  # 6·4³/12


def test_a_document_that_is_no_spreadsheet_is_refused(tmp_path: Path) -> None:
    content = f"<office:document-content {NAMESPACES}><office:body/></office:document-content>"
    with pytest.raises(WorkbookError, match="no spreadsheet"):
        read_book(zipped(tmp_path / "text.ods", {"content.xml": content}), Limits())
