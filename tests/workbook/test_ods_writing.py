"""Recalculated values in a copy of an .ods book: every byte of content.xml between the changed values stays."""

from __future__ import annotations

import zipfile
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as some

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits, Position
from cellsection.workbook.literals import EPOCH, read_date, read_duration
from cellsection.workbook.odsvalues import date_text, duration_text
from cellsection.workbook.odsxml import content_with_values
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.values import ErrorValue, Scalar
from cellsection.workbook.write import write_values
from tests.workbook.small import zipped
from tests.workbook.test_ods import NAMESPACES, book, row

HEAD = f"<office:document-content {NAMESPACES}><office:body><office:spreadsheet>"
TAIL = "</office:spreadsheet></office:body></office:document-content>"
F = 'table:formula="of:=[.A1]"'
CELL = "table:table-cell"


def content(rows: str, before: str = "") -> str:
    return f'{HEAD}{before}<table:table table:name="S">{rows}</table:table>{TAIL}'


def written(xml: str, values: dict[Position, Scalar]) -> str:
    return content_with_values(xml.encode(), {"S": values}, "book.ods").decode()


def held(kind: str, value: str, shown: str, extra: str = "") -> str:
    name = {"date": "date-value", "time": "time-value", "boolean": "boolean-value", "string": "string-value"}
    stated = f'office:{name.get(kind, "value")}="{value}"'
    return f'office:value-type="{kind}" {extra}{stated} calcext:value-type="{kind}"><text:p>{shown}</text:p>'


ERROR = 'office:value-type="string" office:string-value="" calcext:value-type="error"><text:p>{}</text:p>'


@pytest.mark.parametrize(
    ("before", "value", "after"),
    [
        (held("float", "1", "1"), 6.0, held("float", "6", "6")),
        (held("float", "1", "1"), 0.1 + 0.2, held("float", "0.30000000000000004", "0.3")),
        (held("percentage", "0.5", "50%"), 0.25, held("percentage", "0.25", "25%")),
        (held("currency", "1", "1 €", 'office:currency="EUR" '), 2.5,
         held("currency", "2.5", "2.5", 'office:currency="EUR" ')),
        (held("date", "2024-03-01", "1 March"), 45353.25, held("date", "2024-03-02T06:00:00", "2024-03-02 06:00:00")),
        (held("date", "2024-03-01", "1 March"), 45353.0, held("date", "2024-03-02", "2024-03-02")),
        (held("date", "2024-03-01", "1 March"), 1e10, held("float", "10000000000", "10000000000")),
        (held("time", "PT1H", "1:00"), 0.75, held("time", "PT18H00M00S", "18:00:00")),
        (held("boolean", "true", "TRUE"), False, held("boolean", "false", "FALSE")),
        (held("float", "1", "TRUE"), False, held("float", "0", "FALSE")),
        (held("float", "1", "TRUE"), 0.0, held("float", "0", "FALSE")),
        (held("float", "1", "TRUE"), 2.0, held("float", "2", "2")),
        (held("float", "1", "1"), True, held("boolean", "true", "TRUE")),
        (held("float", "1", "1"), ErrorValue("#DIV/0!"), ERROR.format("#DIV/0!")),
        (held("float", "1", "1"), ErrorValue("#SPILL!"), ERROR.format("#VALUE!")),
        (ERROR.format("#N/A"), 2.0, held("float", "2", "2")),
        (ERROR.format("#N/A"), "web", held("string", "web", "web")),
        (held("string", "a", "a</text:p><text:p>b"), "c", held("string", "c", "c")),
        (held("float", "1", "1"), ' a  <&">\n\tb',
         held("string", " a  &lt;&amp;&quot;>&#10;&#9;b",
              '<text:s/>a <text:s/>&lt;&amp;"&gt;</text:p><text:p><text:tab/>b')),
        (held("float", "1", "1"), "", held("string", "", "").replace("<text:p></text:p>", "<text:p/>")),
    ],
)  # fmt: skip
def test_only_the_value_and_what_shows_it_change_in_a_cell(before: str, value: Scalar, after: str) -> None:
    rows = (
        '<table:table-row table:style-name="ro1"><table:table-cell table:style-name="ce1"/>'
        f"<{CELL} table:style-name='ce2' {F} {{}}</{CELL}><!-- a note --></table:table-row>\n"
    )
    assert written(content(rows.format(before)), {(1, 2): value}) == content(rows.format(after))


def test_a_cell_that_was_never_computed_gets_its_value() -> None:
    assert written(content(row(f"<{CELL} {F}/>")), {(1, 1): 2.0}) == content(
        row(f"<{CELL} {F} {held('float', '2', '2')}</{CELL}>")
    )


def test_a_comment_in_a_cell_is_kept() -> None:
    note = "<office:annotation><text:p>a plate</text:p></office:annotation>"
    before = row(f"<{CELL} {F} {held('float', '1', '1').replace('><', f'>{note}<', 1)}</{CELL}>")
    after = row(f"<{CELL} {F} {held('float', '2', '2').replace('><', f'>{note}<', 1)}</{CELL}>")
    assert written(content(before), {(1, 1): 2.0}) == content(after)


def test_a_number_is_set_between_other_attributes_and_in_its_own_paragraph() -> None:
    cell = '<{0} {1} office:value-type="float" office:value="{2}" x="1"><text:p y="2">{2}</text:p></{0}>'
    assert written(content(row(cell.format(CELL, F, "1"))), {(1, 1): 2.5}) == content(row(cell.format(CELL, F, "2.5")))


def test_a_formula_that_speaks_of_values_is_no_value() -> None:
    tricky = """table:formula='of:=&quot; office:value="7" &quot;&amp;1' """
    for kind, old, value, shown in (("string", "", "y", "y"), ("float", 'office:value="1"', 2.0, "2")):
        before = f'<{CELL} {tricky}office:value-type="{kind}" {old}><text:p>x</text:p></{CELL}>'
        new = written(content(row(before)), {(1, 1): value})
        assert tricky in new
        assert new.count(f"<text:p>{shown}</text:p>") == 1


REPEATED = f'<{CELL} {F} table:number-columns-repeated="4" office:value-type="float" office:value="1"/>'


def test_a_cell_that_stands_for_several_is_written_out_where_they_differ(tmp_path: Path) -> None:
    path = book(tmp_path, row(REPEATED))
    new = written(content(row(REPEATED)), {(1, 2): 5.0, (1, 3): 5.0})
    assert new.count("<table:table-cell") == 3  # 1, twice 5, 1
    with zipfile.ZipFile(path) as package:
        zipped(tmp_path / "new.ods", {"mimetype": package.read("mimetype"), "content.xml": new})
    sheet = read_book(tmp_path / "new.ods", Limits()).sheets[0]
    assert sheet.values == {(1, 1): 1.0, (1, 2): 5.0, (1, 3): 5.0, (1, 4): 1.0}
    assert sorted(sheet.formulas) == [(1, 1), (1, 2), (1, 3), (1, 4)]


def test_a_row_that_stands_for_several_is_written_out_where_they_differ(tmp_path: Path) -> None:
    last = row("<table:table-cell/>", repeated=100)
    new = written(content(row(REPEATED, repeated=5) + last), {(2, 1): 7.0, (3, 1): 7.0, (4, 4): 8.0})
    assert new.count("<table:table-row") == 5  # 1, 2 to 3, 4, 5, and the blank ones
    zipped(tmp_path / "new.ods", {"content.xml": new})
    sheet = read_book(tmp_path / "new.ods", Limits()).sheets[0]
    expected = {(r, c): 1.0 for r in range(1, 6) for c in range(1, 5)} | {(2, 1): 7.0, (3, 1): 7.0, (4, 4): 8.0}
    assert sheet.values == expected
    assert len(sheet.formulas) == 20


def test_the_cells_of_an_array_formula_are_written(tmp_path: Path) -> None:
    spans = 'table:number-matrix-rows-spanned="2" table:number-matrix-columns-spanned="2"'
    first = f'<{CELL} table:formula="of:=[.E1:.F2]*2" {spans} office:value-type="float" office:value="0"/>'
    other = f'<{CELL} office:value-type="float" office:value="0"/>'
    numbers = [f'<{CELL} office:value-type="float" office:value="{each}"/>' for each in (1, 2, 3, 4)]
    gap = f'<{CELL} table:number-columns-repeated="2"/>'
    path = book(tmp_path, row(first, other, gap, *numbers[:2]) + row(other, other, gap, *numbers[2:]))
    write_values(path, recalculate(path), tmp_path / "out.ods")
    values = read_book(tmp_path / "out.ods", Limits()).sheets[0].values
    assert [values[place] for place in ((1, 1), (1, 2), (2, 1), (2, 2))] == [2, 4, 6, 8]


def test_values_without_room_are_refused() -> None:
    for place in ((1, 1), (9, 9)):
        with pytest.raises(WorkbookError, match="no room"):
            written(content(row(f'<{CELL} office:value-type="float" office:value="1"/>')), {place: 2.0})


def test_a_text_that_xml_cannot_hold_is_refused() -> None:
    with pytest.raises(WorkbookError, match="control character"):
        written(content(row(f"<{CELL} {F}/>")), {(1, 1): "\x07"})


def test_dates_count_from_the_null_date_of_the_book() -> None:
    settings = (
        '<table:calculation-settings><table:null-date table:date-value="1904-01-01"/></table:calculation-settings>'
    )
    before = content(row(f"<{CELL} {F} {held('date', '1904-01-02', 'x')}</{CELL}>"), settings)
    assert 'office:date-value="1904-01-03"' in written(before, {(1, 1): 2.0})


def test_kept_changes_and_values_of_other_books_are_no_cells_of_the_sheet() -> None:
    change = f"<table:tracked-changes><{CELL} {F}/></table:tracked-changes>"
    cached = f"<table:table table:name=\"'other'#$S\">{row(f'<{CELL} {F}/>')}</table:table>"
    before = content(row(f"<{CELL} {F}/>"), change + cached)
    after = content(row(f"<{CELL} {F} {held('float', '2', '2')}</{CELL}>"), change + cached)
    assert written(before, {(1, 1): 2.0}) == after


def new_values(path: Path, value: Scalar) -> Recalculation:
    return Recalculation(str(path), ("S",), [FormulaCell("S", "A1", 0.0, value, Status.RECALCULATED)])


def test_every_other_part_stays_and_a_signature_is_told(tmp_path: Path) -> None:
    path = book(tmp_path, row(f"<{CELL} {F}/>"))
    with zipfile.ZipFile(path) as package:
        parts = {name: package.read(name) for name in package.namelist()}
    parts |= {"META-INF/documentsignatures.xml": b"<document-signatures/>", "Pictures/1.png": b"\x89PNG"}
    parts |= {"Basic/Standard/Module1.xml": b"<module/>"}
    with zipfile.ZipFile(path, "w") as package:
        for name, data in parts.items():
            package.writestr(name, data, zipfile.ZIP_STORED if name == "mimetype" else zipfile.ZIP_DEFLATED)
    result = write_values(path, new_values(path, 5.0), tmp_path / "out.ods")
    assert result.changed == ("content.xml",)
    assert [note.split(";")[0] for note in result.notes] == [
        "the digital signature of the book does not hold for the copy",
        "its macros are kept as they are",
    ]
    with zipfile.ZipFile(tmp_path / "out.ods") as copy:
        assert copy.namelist() == list(parts)
        assert copy.infolist()[0].compress_type == zipfile.ZIP_STORED
        assert [name for name in parts if copy.read(name) != parts[name]] == ["content.xml"]
    head = (tmp_path / "out.ods").read_bytes()[:38]
    assert (
        head[30:] == b"mimetype"
    )  # OpenDocument 1.3 part 2, 3.3: the first entry, stored, so that a file tells itself


def test_a_copy_that_fails_leaves_nothing(tmp_path: Path) -> None:
    path = book(tmp_path, row(f"<{CELL} {F}/>"))
    with pytest.raises(WorkbookError):
        write_values(path, new_values(path, "\x07"), tmp_path / "out.ods")
    assert [each.name for each in tmp_path.iterdir()] == ["book.ods"]


@given(some.floats(-1e5, 1e6))
def test_a_duration_is_read_back_as_it_was(days: float) -> None:
    read = read_duration(duration_text(days))
    assert isinstance(read, float)
    assert read == pytest.approx(days, rel=1e-14, abs=0)


@given(some.floats(-6e5, 2.9e6))
def test_a_date_is_read_back_to_a_microsecond_or_is_none(day: float) -> None:
    text = date_text(day, EPOCH)
    read = read_date(text, EPOCH)
    assert isinstance(read, float)
    assert abs(read - day) <= 1e-6 / 86400 + 1e-15 * abs(day)
