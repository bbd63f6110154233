"""Values set where they stand: every byte of a sheet between the changed cells stays as it was."""

from __future__ import annotations

import stat
import zipfile
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from hypothesis import given
from hypothesis import strategies as some

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits, Position, column_letters
from cellsection.workbook.package import Package
from cellsection.workbook.plaincells import with_plain_values
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.sheetxml import Sheet, sheet_with_values, with_values_anywhere
from cellsection.workbook.values import ErrorValue, Scalar
from cellsection.workbook.write import Written, write_values
from cellsection.workbook.xlsxvalues import saved_form
from tests.workbook.small import MAIN, Cell, parts_of, saved, zipped

SHEET = "xl/worksheets/sheet1.xml"


def sheet(rows: str, prefix: str = "") -> str:
    name = f"xmlns:{prefix[:-1]}" if prefix else "xmlns"
    return f'<{prefix}worksheet {name}="{MAIN}"><{prefix}sheetData>{rows}</{prefix}sheetData></{prefix}worksheet>'


def written(xml: str, values: dict[Position, Scalar]) -> str:
    return sheet_with_values(xml.encode(), Sheet(values), "book.xlsx").decode()


F = "<f>A1</f>"


@pytest.mark.parametrize(
    ("before", "value", "after"),
    [
        (f'<c r="B7" s="3">{F}<v/></c>', 6.0, f'<c r="B7" s="3">{F}<v>6</v></c>'),
        (f'<c r="B7" s="3">{F}<v></v></c>', 0.1, f'<c r="B7" s="3">{F}<v>0.1</v></c>'),
        (f'<c r="B7">{F}</c>', "web", f'<c r="B7" t="str">{F}<v>web</v></c>'),
        (f'<c r="B7" t="str" s="1">{F}<v>web</v></c>', 2.0, f'<c r="B7" s="1">{F}<v>2</v></c>'),
        (f"<c t='n' r='B7'>{F}<v>1</v></c>", True, f"<c r='B7' t=\"b\">{F}<v>1</v></c>"),
        (f'<c r="B7" t="b">{F}<v>1</v></c>', ErrorValue("#N/A"), f'<c r="B7" t="e">{F}<v>#N/A</v></c>'),
        (f'<c r="B7" t="e" vm="1">{F}<v>#VALUE!</v></c>', 1e300, f'<c r="B7">{F}<v>1e+300</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', ErrorValue("#SPILL!"), f'<c r="B7" t="e">{F}<v>#VALUE!</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', " a<b&c", f'<c r="B7" t="str">{F}<v xml:space="preserve"> a&lt;b&amp;c</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', "\r_x0041_", f'<c r="B7" t="str">{F}<v>_x000D__x005F_x0041_</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', None, f'<c r="B7">{F}</c>'),
        (f'<c r="B7">{F}<v>1</v><extLst/></c>', 2.0, f'<c r="B7">{F}<v>2</v><extLst/></c>'),
        (f'<c r="B7" t="s">{F}<v>3</v></c>', "web", f'<c r="B7" t="str">{F}<v>web</v></c>'),
        (f'<c r="B7" t="d">{F}<v>2024-03-01</v></c>', 45353.0, f'<c r="B7">{F}<v>45353</v></c>'),
        ('<c r="B7"><f t="shared" si="0"/><v>1</v></c>', 2.0, '<c r="B7"><f t="shared" si="0"/><v>2</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', 0.1 + 0.2, f'<c r="B7">{F}<v>0.30000000000000004</v></c>'),
        (f'<c r="B7">{F}<v>1</v></c>', 123456789012345680.0, f'<c r="B7">{F}<v>1.2345678901234568e+17</v></c>'),
        (f'<c r="B7" t="str">{F}<v xml:space="preserve"> a</v></c>', "", f'<c r="B7" t="str">{F}<v></v></c>'),
        ('<c r="B7" t="inlineStr"><f/><is><t>a</t></is></c>', "b", '<c r="B7" t="str"><f/><v>b</v></c>'),
    ],
)
@pytest.mark.parametrize("note", ["", "<!-- a note -->"], ids=["plain", "careful"])
def test_only_the_value_and_its_kind_change_in_a_cell(before: str, value: Scalar, after: str, note: str) -> None:
    around = f'<row r="7" ht="12.8"><c r="A7" s="1"><v>1</v></c>{note}{{}}<c r="C7"/></row>\n<row r="9"/>'
    assert written(sheet(around.format(before)), {(7, 2): value}) == sheet(around.format(after))


SCALARS = some.one_of(
    some.floats(allow_nan=False, allow_infinity=False),
    some.text(max_size=12),
    some.booleans(),
    some.sampled_from([ErrorValue("#N/A"), ErrorValue("#CALC!"), None]),
)


@given(some.lists(some.tuples(some.booleans(), SCALARS, SCALARS), min_size=1, max_size=6))
def test_the_fast_and_the_careful_way_write_the_same_and_it_is_read_back(
    cells: list[tuple[bool, Scalar, Scalar]],
) -> None:
    values: dict[Position, Scalar] = {(1, k): new for k, (wanted, _, new) in enumerate(cells, start=1) if wanted}
    rows = ""
    for k, (_, old, _) in enumerate(cells, start=1):
        kind, v = saved_form("" if old is None else old, b"", {})
        rows += f'<c r="{column_letters(k)}1"{kind.decode()}>{F}{v.decode()}</c>'
    data = sheet(f'<row r="1">{rows}</row>').encode()
    plain = with_plain_values(data, values, {"#CALC!": "1"})
    assert plain is not None
    assert plain == with_values_anywhere(data, Sheet(values, rich={"#CALC!": "1"}), "book.xlsx")
    with TemporaryDirectory() as folder:
        parts = {**parts_of({"S": {}}, {}), SHEET: plain.decode()}
        read = read_book(zipped(Path(folder, "book.xlsx"), parts), Limits()).sheets[0].values
    for place, value in values.items():
        richer = value == ErrorValue("#CALC!")  # which another part would hold
        assert read.get(place) == (ErrorValue("#VALUE!") if richer else value)


AREA = '<f t="array" ref="B2:C4">A1</f>'


@pytest.mark.parametrize(
    ("rows", "after"),
    [
        (f'<row r="2"><c r="B2">{AREA}</c></row>',
         f'<row r="2"><c r="B2">{AREA}<v>1</v></c><c r="C2"><v>2</v></c></row><row r="3"><c r="B3"><v>3</v></c></row>'),
        (f'<row r="2"><c r="B2">{AREA}</c><c r="D2"/></row><row r="3" ht="9"/><row r="5"/>',
         f'<row r="2"><c r="B2">{AREA}<v>1</v></c><c r="C2"><v>2</v></c><c r="D2"/></row>'
         '<row r="3" ht="9"><c r="B3"><v>3</v></c></row><row r="5"/>'),
        (f'<row r="2"><c r="B2">{AREA}</c><c r="C2" s="4"/></row><row r="3"><c r="A3"/><c r="C3"/></row>',
         f'<row r="2"><c r="B2">{AREA}<v>1</v></c><c r="C2" s="4"><v>2</v></c></row>'
         '<row r="3"><c r="A3"/><c r="B3"><v>3</v></c><c r="C3"/></row>'),
    ],
)  # fmt: skip
def test_cells_of_an_array_formula_that_the_file_lacks_are_put_in_their_place(rows: str, after: str) -> None:
    assert written(sheet(rows), {(2, 2): 1.0, (2, 3): 2.0, (3, 2): 3.0}) == sheet(after)


def test_cells_and_rows_without_addresses_are_counted(tmp_path: Path) -> None:
    rows = f"<row><c><v>1</v></c><c>{F}</c></row><row><c>{F}<v>5</v></c></row>"
    assert written(sheet(rows), {(1, 2): 1.0, (2, 1): 2.0}) == sheet(
        f"<row><c><v>1</v></c><c>{F}<v>1</v></c></row><row><c>{F}<v>2</v></c></row>"
    )


def test_the_prefix_of_the_file_is_kept() -> None:
    rows = '<x:row r="1"><x:c r="A1"><x:f t="array" ref="A1:A2">B1</x:f></x:c></x:row>'
    assert written(sheet(rows, "x:"), {(1, 1): 1.0, (2, 1): 2.0}) == sheet(
        '<x:row r="1"><x:c r="A1"><x:f t="array" ref="A1:A2">B1</x:f><x:v>1</x:v></x:c></x:row>'
        '<x:row r="2"><x:c r="A2"><x:v>2</x:v></x:c></x:row>',
        "x:",
    )


def test_a_wide_part_becomes_a_narrow_one() -> None:
    wide = '<?xml version="1.0" encoding="UTF-16"?>' + sheet(f'<row r="1"><c r="A1">{F}</c></row>')
    new = sheet_with_values(wide.encode("utf-16"), Sheet({(1, 1): "é"}), "book.xlsx")
    assert new.decode("utf-8") == sheet(f'<row r="1"><c r="A1" t="str">{F}<v>é</v></c></row>')


def test_a_value_without_room_in_the_file_is_refused() -> None:
    rows = '<row r="1"><c r="A1" cm="1"><f t="array" ref="A1:A2">B1</f></c></row>'
    with pytest.raises(WorkbookError, match="outgrown"):
        written(sheet(rows), {(3, 1): 1.0})


def test_the_cells_of_a_data_table_are_written(tmp_path: Path) -> None:
    cells: dict[str, Cell] = {
        "A1": 1.0, "B1": "<f>A1*10</f><v>0</v>", "A2": 2.0, "A3": 3.0,
        "B2": '<f t="dataTable" ref="B2:B3" dt2D="0" dtr="0" r1="A1"/><v>0</v>', "B3": "<v>0</v>",
    }  # fmt: skip
    path, out = saved(tmp_path, {"S": cells}), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    values = read_book(out, Limits()).sheets[0].values
    assert [values[place] for place in ((1, 2), (2, 2), (3, 2))] == [10, 20, 30]  # ten times 1, 2 and 3


def new_values(path: Path, values: dict[str, Scalar], sheet_name: str = "S") -> Recalculation:
    cells = [FormulaCell(sheet_name, a, 0.0, v, Status.RECALCULATED) for a, v in values.items()]
    return Recalculation(str(path), (sheet_name,), cells)


def test_the_packing_of_every_part_is_kept(tmp_path: Path) -> None:
    path = tmp_path / "book.xlsx"
    with zipfile.ZipFile(path, "w") as package:
        for k, (name, content) in enumerate(parts_of({"S": {"A1": "=1"}}, {}).items()):
            method = zipfile.ZIP_STORED if k % 2 else zipfile.ZIP_DEFLATED
            package.writestr(zipfile.ZipInfo(name, (2026, 3, 1, 12, 0, 0)), content, method)
    out = tmp_path / "out.xlsx"
    write_values(path, new_values(path, {"A1": 5.0}), out)
    with zipfile.ZipFile(path) as old, zipfile.ZipFile(out) as new:
        told = [[(i.filename, i.compress_type, i.date_time) for i in z.infolist()] for z in (old, new)]
    assert told[0] == told[1]
    assert read_book(out, Limits()).sheets[0].values == {(1, 1): 5.0}


def test_a_sheet_whose_values_all_hold_is_left_alone(tmp_path: Path) -> None:
    path, out = saved(tmp_path, {"S": {"A1": "<f>1+1</f><v>2.0</v>"}}), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    with Package(path, Limits()) as old, Package(out, Limits()) as new:
        assert old.part(SHEET) == new.part(SHEET)  # 2.0 too, though it would be written as 2


def test_cells_that_could_not_be_recalculated_keep_their_values(tmp_path: Path) -> None:
    cells = {"A1": "<f>NOSUCHFUNCTION(1)</f><v>7</v>", "B1": "<f>A1+1</f><v>8</v>", "C1": "<f>1+1</f><v>9</v>"}
    path, out = saved(tmp_path, {"S": cells}), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    assert read_book(out, Limits()).sheets[0].values == {(1, 1): 7.0, (1, 2): 8.0, (1, 3): 2.0}


def test_a_copy_that_another_format_is_expected_of_is_refused(tmp_path: Path) -> None:
    path = saved(tmp_path, {"S": {"A1": "=1"}})
    with pytest.raises(WorkbookError, match="another format"):
        write_values(path, new_values(path, {"A1": 5.0}), tmp_path / "out.xlsm")


def test_values_of_another_book_are_refused(tmp_path: Path) -> None:
    path = saved(tmp_path, {"S": {"A1": "=1"}})
    with pytest.raises(WorkbookError, match="no sheet T"):
        write_values(path, new_values(path, {"A1": 5.0}, "T"), tmp_path / "out.xlsx")
    assert not (tmp_path / "out.xlsx").exists()


def test_a_link_to_the_book_is_the_book(tmp_path: Path) -> None:
    path = saved(tmp_path, {"S": {"A1": "=1"}})
    (tmp_path / "link.xlsx").hardlink_to(path)
    with pytest.raises(WorkbookError, match="replace itself"):
        write_values(path, new_values(path, {"A1": 5.0}), tmp_path / "link.xlsx")


def test_the_copy_has_the_rights_of_any_new_file(tmp_path: Path) -> None:
    path, out, new = saved(tmp_path, {"S": {"A1": "=1"}}), tmp_path / "out.xlsx", tmp_path / "new"
    new.touch()
    write_values(path, new_values(path, {"A1": 5.0}), out)
    assert stat.S_IMODE(out.stat().st_mode) == stat.S_IMODE(new.stat().st_mode)


def test_a_file_that_is_replaced_keeps_its_rights_and_its_links(tmp_path: Path) -> None:
    path, link = saved(tmp_path, {"S": {"A1": "=1"}}), tmp_path / "link.xlsx"
    path.chmod(0o640)
    link.symlink_to(path)
    with pytest.raises(WorkbookError, match="replace itself"):
        write_values(path, new_values(path, {"A1": 5.0}), link)
    write_values(path, new_values(path, {"A1": 5.0}), link, replace=True)
    assert link.is_symlink()
    assert stat.S_IMODE(path.stat().st_mode) == 0o640
    assert read_book(path, Limits()).sheets[0].values == {(1, 1): 5.0}


def test_a_link_that_leads_nowhere_is_in_the_way(tmp_path: Path) -> None:
    path, link = saved(tmp_path, {"S": {"A1": "=1"}}), tmp_path / "link.xlsx"
    link.symlink_to(tmp_path / "nowhere.xlsx")
    with pytest.raises(WorkbookError, match="there already"):
        write_values(path, new_values(path, {"A1": 5.0}), link)


@pytest.mark.parametrize("sign", ["<!-- -->", "<?note?>"])
def test_a_sheet_with_a_note_in_it_is_written_the_careful_way(sign: str) -> None:
    false = '<c r="A1"><f>B1</f><v>1</v></c>'
    note = sign.replace(" ", false).replace("note", f"note {false}")
    rows = f'{note}<row r="1">{false}</row>'
    assert written(sheet(rows), {(1, 1): 2.0}) == sheet(f'{note}<row r="1">{false.replace(">1<", ">2<")}</row>')


def test_texts_keep_the_letters_of_a_part_in_another_encoding() -> None:
    xml = '<?xml version="1.0" encoding="ISO-8859-1"?>' + sheet(
        f'<row r="1"><c r="A1">{F}</c><c r="B1" t="str"><v>é</v></c></row>'
    )
    new = sheet_with_values(xml.encode("latin-1"), Sheet({(1, 1): "Ø ő"}), "book.xlsx").decode("utf-8")
    assert ">é<" in new
    assert ">Ø ő<" in new
    assert "8859" not in new


def test_a_file_that_is_there_stays_whole_where_the_copy_fails(tmp_path: Path) -> None:
    path, out = saved(tmp_path, {"S": {"A1": "=1"}}), tmp_path / "out.xlsx"
    out.write_bytes(b"what was there")
    with zipfile.ZipFile(path, "a") as package:
        package.writestr("docProps/late.xml", b"<late/>" * 100)
    data = bytearray(path.read_bytes())
    at = data.index(b"docProps/late.xml") + len(b"docProps/late.xml")
    data[at : at + 4] = b"\xff\xff\xff\xff"
    path.write_bytes(data)
    with pytest.raises(WorkbookError, match="late"):
        write_values(path, new_values(path, {"A1": 5.0}), out, replace=True)
    assert out.read_bytes() == b"what was there"
    assert sorted(each.name for each in tmp_path.iterdir()) == ["book.xlsx", "out.xlsx"]


def test_a_signature_that_no_longer_holds_is_told(tmp_path: Path) -> None:
    signed = {**parts_of({"S": {"A1": "=1"}}, {}), "_xmlsignatures/sig1.xml": "<Signature/>"}
    path = zipped(tmp_path / "book.xlsx", signed)
    assert "signature" in write_values(path, new_values(path, {"A1": 5.0}), tmp_path / "out.xlsx").notes[0]
    assert write_values(path, new_values(path, {}), tmp_path / "same.xlsx") == Written()
