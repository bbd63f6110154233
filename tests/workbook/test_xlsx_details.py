"""What an .xlsx package may hold beside plain cells: strict files, metadata, other books, settings, damage by cell."""

from __future__ import annotations

from pathlib import Path

import pytest

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Book, Limits
from cellsection.workbook.literals import read_date
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculated
from cellsection.workbook.values import ErrorValue
from tests.workbook.small import MAIN, RELATIONS, Cell, parts_of, saved, zipped

RICH = "http://schemas.microsoft.com/office/2017/06/relationships"
STRICT = "http://purl.oclc.org/ooxml/spreadsheetml/main", "http://purl.oclc.org/ooxml/officeDocument/relationships"


def read(path: Path) -> Book:
    return read_book(path, Limits())


def related(folder: Path, rows: str, parts: dict[str, tuple[str, str]], settings: str = "") -> Book:
    """A book of these rows with more parts of the workbook: name -> (kind of relationship, content)."""
    whole = dict(parts_of({"S": {}}, {}, settings))
    links = "".join(
        f'<Relationship Id="x{k}" Type="{kind}" Target="{name}"/>' for k, (name, (kind, _)) in enumerate(parts.items())
    )
    rels = "xl/_rels/workbook.xml.rels"
    whole[rels] = whole[rels].replace("</Relationships>", links + "</Relationships>")
    whole["xl/worksheets/sheet1.xml"] = f'<worksheet xmlns="{MAIN}"><sheetData>{rows}</sheetData></worksheet>'
    return read(zipped(folder / "book.xlsx", {**whole, **{f"xl/{name}": each for name, (_, each) in parts.items()}}))


def test_strict_files_read_like_transitional_ones(tmp_path: Path) -> None:
    parts = parts_of({"S": {"A1": 4.0, "B1": "=A1"}}, {"Plate": "S!$A$1"})
    strict = {n: c.replace(MAIN, STRICT[0]).replace(RELATIONS, STRICT[1]) for n, c in parts.items()}
    book = read(zipped(tmp_path / "book.xlsx", strict))
    assert (book.sheets[0].values, list(book.sheets[0].formulas), list(book.names)) == (
        {(1, 1): 4.0}, [(1, 2)], [("", "PLATE")],
    )  # fmt: skip


def test_shared_strings_join_their_runs_and_leave_the_reading_aloud_out(tmp_path: Path) -> None:
    sst = (
        f'<sst xmlns="{MAIN}" uniqueCount="99"><si><t>web</t></si>'
        "<si><r><rPr><b/></rPr><t>top </t></r><r><t>flange</t></r><rPh sb='0' eb='1'><t>aloud</t></rPh></si><si/></sst>"
    )
    row = "".join(f'<c t="s"><v>{k}</v></c>' for k in range(4))
    book = related(tmp_path, f"<row>{row}</row>", {"sharedStrings.xml": (f"{RELATIONS}/sharedStrings", sst)})
    values = book.sheets[0].values
    assert [values[1, k] for k in range(1, 4)] == ["web", "top flange", ""]
    missing = values[1, 4]
    assert isinstance(missing, ErrorValue)
    assert "missing" in missing.message


METADATA = (
    f'<metadata xmlns="{MAIN}">'
    '<metadataTypes><metadataType name="XLDAPR"/><metadataType name="XLRICHVALUE"/></metadataTypes>'
    '<futureMetadata name="XLDAPR"><bk><extLst><ext>'
    '<dynamicArrayProperties xmlns="da" fDynamic="{spills}"/></ext></extLst></bk></futureMetadata>'
    '<futureMetadata name="XLRICHVALUE"><bk><extLst><ext><rvb xmlns="rd" i="0"/></ext></extLst></bk></futureMetadata>'
    '<cellMetadata><bk><rc t="1" v="0"/></bk></cellMetadata><valueMetadata><bk><rc t="2" v="0"/></bk></valueMetadata>'
    "</metadata>"
)


@pytest.mark.parametrize("spills", [0, 1])
def test_metadata_tells_a_formula_that_spills_and_an_error_newer_than_the_format(tmp_path: Path, spills: int) -> None:
    structure = '<rvStructures><s t="_error"><k n="errorType" t="i"/><k n="subType"/></s></rvStructures>'
    parts = {
        "metadata.xml": (f"{RELATIONS}/sheetMetadata", METADATA.replace("{spills}", str(spills))),
        "richData/v.xml": (f"{RICH}/rdRichValue", '<rvData><rv s="0"><v>13</v><v>3</v></rv></rvData>'),
        "richData/s.xml": (f"{RICH}/rdRichValueStructure", structure),
    }
    row = '<row r="1"><c r="A1" t="e" cm="1" vm="1"><f t="array" ref="A1">SEQUENCE(0)</f><v>#VALUE!</v></c></row>'
    sheet = related(tmp_path, row, parts).sheets[0]
    assert sheet.formulas[1, 1].dynamic == bool(spills)
    assert sheet.values[1, 1] == ErrorValue("#CALC!")  # the number 13, as the application saves it


def test_the_saved_values_of_another_book_are_read(tmp_path: Path) -> None:
    link = (
        f'<externalLink xmlns="{MAIN}"><externalBook><sheetNames><sheetName val="Loads"/></sheetNames><sheetDataSet>'
        '<sheetData sheetId="0"><row r="1"><cell r="A1"><v>5</v></cell><cell r="B2" t="str"><v>kN</v></cell></row>'
        '</sheetData><sheetData sheetId="7"/></sheetDataSet></externalBook></externalLink>'
    )
    settings = '<externalReferences><externalReference r:id="x0"/></externalReferences>'
    book = related(tmp_path, "", {"link1.xml": (f"{RELATIONS}/externalLink", link)}, settings)
    assert book.externals["1"][1][0].values == {(1, 1): 5.0, (2, 2): "kN"}


def test_a_name_of_another_book_reads_the_saved_cells_that_it_names(tmp_path: Path) -> None:
    link = (
        f'<externalLink xmlns="{MAIN}"><externalBook><sheetNames><sheetName val="Wind loads"/></sheetNames>'
        '<definedNames><definedName name="gust" refersTo="=\'Wind loads\'!$A$1:$A$2"/></definedNames>'
        '<sheetDataSet><sheetData sheetId="0"><row r="1"><cell r="A1"><v>5</v></cell></row><row r="2"><cell r="A2">'
        "<v>7</v></cell></row></sheetData></sheetDataSet></externalBook></externalLink>"
    )
    settings = '<externalReferences><externalReference r:id="x0"/></externalReferences>'
    row = '<row r="1"><c r="A1"><f>SUM([1]!gust)</f></c><c r="B1"><f>[1]!calm</f></c></row>'
    found = recalculated(related(tmp_path, row, {"link1.xml": (f"{RELATIONS}/externalLink", link)}, settings)).cells
    assert found[0].value == 12.0
    assert "saved values of another book" in found[0].notes[0]
    assert found[1].reason == "name of another book"


def test_what_the_book_says_of_its_calculation_is_noted(tmp_path: Path) -> None:
    notes = read(saved(tmp_path, {"S": {}}, None, '<calcPr calcMode="manual" fullPrecision="0" iterate="1"/>')).notes
    assert [word for word in ("by hand", "precision", "iterative") if any(word in note for note in notes)] == [
        "by hand", "precision", "iterative",
    ]  # fmt: skip


def test_hidden_rows_are_known(tmp_path: Path) -> None:
    parts = dict(parts_of({"S": {"A1": 1.0, "A2": 2.0}}, {}))
    sheet = "xl/worksheets/sheet1.xml"
    parts[sheet] = parts[sheet].replace('<row r="2">', '<row r="2" hidden="1">')
    assert read(zipped(tmp_path / "book.xlsx", parts)).sheets[0].hidden_rows == {2}


def test_a_name_is_kept_under_the_sheet_it_belongs_to(tmp_path: Path) -> None:
    parts = dict(parts_of({"S": {}, "T": {}}, {"gap": "S!$A$1"}))
    main = "xl/workbook.xml"
    parts[main] = parts[main].replace('name="gap"', 'name="gap" localSheetId="1"')
    assert list(read(zipped(tmp_path / "book.xlsx", parts)).names) == [("T", "GAP")]
    parts[main] = parts[main].replace('localSheetId="1"', 'localSheetId="9"')
    book = read(zipped(tmp_path / "book.xlsx", parts))
    assert not book.names
    assert "gap" in book.notes[0]


def test_a_child_without_its_shared_formula_is_noted(tmp_path: Path) -> None:
    book = read(saved(tmp_path, {"S": {"B1": '<f t="shared" si="7"/><v>6</v>'}}))
    assert book.sheets[0].formulas[1, 2].kind == "missing"
    assert "shares a formula that is not in the file" in book.notes[0]


@pytest.mark.parametrize(
    ("cells", "word"),
    [
        ({"A1": '<f t="array" ref="A1:XFD1048576">1</f>'}, "array formulas"),
        ({"B2": '<f t="array" ref="A1:B2">1</f>'}, "no area that begins there"),
        ({"B2": '<f t="array" ref="nonsense">1</f>'}, "no area that begins there"),
    ],
)
def test_an_impossible_array_formula_is_refused_by_cell(tmp_path: Path, cells: dict[str, Cell], word: str) -> None:
    with pytest.raises(WorkbookError, match=word):
        read(saved(tmp_path, {"S": cells}))


def test_two_sheets_of_one_name_are_refused(tmp_path: Path) -> None:
    parts = dict(parts_of({"S": {}, "T": {}}, {}))
    parts["xl/workbook.xml"] = parts["xl/workbook.xml"].replace('name="T"', 'name="s"')
    with pytest.raises(WorkbookError, match="two sheets"):
        read(zipped(tmp_path / "book.xlsx", parts))


@pytest.mark.parametrize(
    ("text", "serial"),  # as the application shows them beside each other; its 29 February 1900 is number 60
    [("1900-01-01", 1.0), ("1900-02-28", 59.0), ("1900-03-01", 61.0), ("2024-03-01T18:00:00Z", 45352.75)],
)
def test_saved_dates_count_as_the_application_counts(text: str, serial: float) -> None:
    assert read_date(text, day_60=True) == serial


@pytest.mark.parametrize("text", ["", "yesterday", "2024-13-01", "99999-01-01"])
def test_a_saved_date_that_is_none_says_so(text: str) -> None:
    value = read_date(text)
    assert isinstance(value, ErrorValue)
    assert "no date" in value.message
