"""What OpenDocument spreadsheets hold beside plain cells, as the application writes it (tried with its version 7.4)."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Limits
from cellsection.workbook.literals import read_duration
from cellsection.workbook.ods import bracketed
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import Status
from cellsection.workbook.values import ErrorValue, Scalar
from tests.workbook.test_ods import BLANK, book, formula, number, row

ERROR = 'office:value-type="string" office:string-value="" calcext:value-type="error"'


def read(path: Path, limits: Limits | None = None) -> Book:
    return read_book(path, limits or Limits())


def cell(attributes: str, shown: str = "") -> str:
    return f"<table:table-cell {attributes}>{f'<text:p>{shown}</text:p>' if shown else ''}</table:table-cell>"


@pytest.mark.parametrize(
    ("attributes", "shown", "value"),
    [
        (f'table:formula="of:=1/0" {ERROR}', "#DIV/0!", ErrorValue("#DIV/0!")),
        (f'table:formula="of:=SQRT(-1)" {ERROR}', "Err:502", ErrorValue("#VALUE!")),
        ('table:formula="of:=NA()" office:value-type="float" office:value="0"', "#N/A", ErrorValue("#N/A")),
        ('office:value-type="string"', "#N/A", "#N/A"),
        ('table:formula="of:=TRUE()" office:value-type="float" office:value="1"', "TRUE", True),
        ('office:value-type="float" office:value="1"', "TRUE", 1.0),
        ('table:formula="of:=&quot; a&quot;" office:value-type="string" office:string-value=" a"', "a", " a"),
        ('office:value-type="float" office:value="NaN"', "x", ErrorValue("#NUM!")),
        ('office:value-type="date" office:date-value="soon"', "x", ErrorValue("#NUM!")),
        ('office:value-type="currency" office:value="12.5"', "12.50", 12.5),
        ("", "typed", "typed"),
        ("", "", None),
    ],
)
def test_a_saved_value_is_read_as_the_application_means_it(
    tmp_path: Path, attributes: str, shown: str, value: Scalar
) -> None:
    found = read(book(tmp_path, row(cell(attributes, shown)))).sheets[0].values.get((1, 1))
    assert found == value
    assert type(found) is type(value)


def test_empty_text_that_a_formula_gave_is_a_saved_value(tmp_path: Path) -> None:
    cells = row('<table:table-cell table:formula="of:=&quot;&quot;"><text:p/></table:table-cell>')
    assert read(book(tmp_path, cells)).sheets[0].values == {(1, 1): ""}


def test_comments_drawings_and_spans_in_a_cell_are_told_apart(tmp_path: Path) -> None:
    content = (
        "<office:annotation><text:p>a comment</text:p></office:annotation>"
        "<text:p>top <text:span>flange<text:s text:c='2'/></text:span>HE<text:tab/>A<text:line-break/>B"
        "<text:note><text:p>a note</text:p></text:note></text:p><text:p>second</text:p>"
    )
    xml = f'<table:table-cell office:value-type="string">{content}</table:table-cell>'
    assert read(book(tmp_path, row(xml))).sheets[0].values == {(1, 1): "top flange  HE\tA\nB\nsecond"}


def test_rows_in_groups_count_and_tables_in_drawings_do_not(tmp_path: Path) -> None:
    inner = f"<table:table table:name='inner'>{row(number(9))}</table:table>"
    rows = f"<table:table-row-group><table:table-header-rows>{row(number(1))}</table:table-header-rows>{row(number(2))}"
    rows += f"</table:table-row-group><table:shapes>{inner}</table:shapes>{row(number(3))}"
    found = read(book(tmp_path, rows))
    assert [(s.name, s.values) for s in found.sheets] == [("S", {(1, 1): 1.0, (2, 1): 2.0, (3, 1): 3.0})]


def test_covered_cells_keep_their_place_and_their_value(tmp_path: Path) -> None:
    covered = '<table:covered-table-cell office:value-type="float" office:value="5"/>'
    values = read(book(tmp_path, row(number(1), covered, number(2)))).sheets[0].values
    assert values == {(1, 1): 1.0, (1, 2): 5.0, (1, 3): 2.0}


def test_hidden_rows_and_sheets_are_known(tmp_path: Path) -> None:
    hidden = row(number(2)).replace("<table:table-row", '<table:table-row table:visibility="collapse"')
    blank = '<table:table-row table:visibility="filter" table:number-rows-repeated="1000000"/>'
    sheet = read(book(tmp_path, row(number(1)) + hidden + row(number(3)) + blank)).sheets[0]
    assert sheet.hidden_rows == {2}


def test_a_formula_in_an_older_language_is_unsupported_and_keeps_its_value(tmp_path: Path) -> None:
    old = number(6, 'table:formula="oooc:=[.A1]*2"')
    array = number(6, 'table:formula="oooc:=[.A1]*2" table:number-matrix-rows-spanned="2"')
    cells = recalculate(book(tmp_path, row(number(3), old, array))).cells
    assert [(c.status, c.value) for c in cells] == [(Status.UNSUPPORTED, 6.0)] * 2
    assert all("oooc" in c.reason for c in cells)


@pytest.mark.parametrize("null_date", ["1899-12-30", "1904-01-01"])
def test_dates_count_from_the_null_date_of_the_book(tmp_path: Path, null_date: str) -> None:
    settings = (
        f"<table:calculation-settings><table:null-date table:date-value='{null_date}'/></table:calculation-settings>"
    )
    day = cell('office:value-type="date" office:date-value="1904-01-02"')
    found = read(book(tmp_path, row(day), before=settings))
    assert found.sheets[0].values[1, 1] == {"1899-12-30": 1463.0, "1904-01-01": 1.0}[null_date]
    assert found.date1904 == (null_date == "1904-01-01")


def test_values_of_another_book_kept_in_this_one_are_no_sheet_of_it(tmp_path: Path) -> None:
    kept = (
        "<table:table table:name=\"'file:///loads.ods'#Wind\"><table:table-source table:mode='copy-results-only'/>"
        f"{row(number(7))}</table:table>"
    )
    found = read(book(tmp_path, row(number(1)), after=kept))
    assert [s.name for s in found.sheets] == ["S"]
    assert found.externals["file:///loads.ods"][1][0].values == {(1, 1): 7.0}


def test_names_are_relative_to_their_base_cell_and_of_one_sheet_or_all(tmp_path: Path) -> None:
    def names(name: str) -> str:
        return (
            f"<table:named-expressions><table:named-expression table:name='{name}' table:base-cell-address='$S.$B$2'"
            " table:expression='[.A2]*10'/></table:named-expressions>"
        )

    found = read(book(tmp_path, row(number(1)) + names("own"), after=names("all")))
    assert {key: (f.text, f.row, f.column) for key, f in found.names.items()} == {
        ("S", "OWN"): ("[.A2]*10", 2, 2),
        ("", "ALL"): ("[.A2]*10", 2, 2),
    }


@pytest.mark.parametrize(
    ("address", "reference"),
    [
        ("$S.$A$1:.$B$2", "$S.$A$1:.$B$2"),
        ("$S.$A$1:$S.$B$2", "$S.$A$1:.$B$2"),
        ("$'a:b.c'.$A$1:$'a:b.c'.$B$2", "$'a:b.c'.$A$1:.$B$2"),
        ("$S.$A$1:$T.$B$2", "$S.$A$1:$T.$B$2"),
    ],
)
def test_a_range_address_becomes_a_reference(address: str, reference: str) -> None:
    assert bracketed(address) == reference


@pytest.mark.parametrize("spans", ["0", "-1", "x", "99999999"])
def test_an_impossible_matrix_span_is_refused(tmp_path: Path, spans: str) -> None:
    with pytest.raises(WorkbookError, match="number-matrix-rows-spanned"):
        read(book(tmp_path, row(formula("of:=1", f'table:number-matrix-rows-spanned="{spans}"'))))


def test_repeated_values_count_against_the_cap_before_they_are_written_out(tmp_path: Path) -> None:
    cells = row(number(1, 'table:number-columns-repeated="1000"'), BLANK, repeated=1000)
    with pytest.raises(WorkbookError, match="more than 10,000 cells"):
        read(book(tmp_path, cells), Limits(cells=10_000))


@pytest.mark.parametrize(
    ("text", "days"), [("PT00H30M00S", 1 / 48), ("P1DT12H", 1.5), ("-PT06H", -0.25), ("PT0,5S", 0.5 / 86400)]
)
def test_durations_are_days(text: str, days: float) -> None:
    assert read_duration(text) == days
