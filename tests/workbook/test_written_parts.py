"""A whole book written in place, chart, image, macros and table in it: part by part, and as others read it."""

from __future__ import annotations

import os
import struct
import subprocess
import zipfile
import zlib
from pathlib import Path

import openpyxl
import pytest
from openpyxl.chart import BarChart, Reference
from openpyxl.comments import Comment
from openpyxl.workbook.defined_name import DefinedName
from openpyxl.worksheet.formula import ArrayFormula
from openpyxl.worksheet.table import Table

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits
from cellsection.workbook.package import Package
from cellsection.workbook.reader import read_book
from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.write import write_values
from tests.workbook.small import MAIN, PACKAGE, RELATIONS, parts_of, zipped

EXPECTED = {  # by hand from the plates below
    "D2": 6000, "D3": 4800, "D4": 10800, "E2": "flange 300x20", "E3": True, "E4": "#DIV/0!",
    "F2": 12000, "F3": 9600,
}  # fmt: skip


def picture() -> bytes:
    """A grey dot (PNG, W3C recommendation 2003)."""
    blocks = [
        (b"IHDR", struct.pack(">IIBBBBB", 1, 1, 8, 0, 0, 0, 0)),
        (b"IDAT", zlib.compress(b"\0\x80")),
        (b"IEND", b""),
    ]
    packed = [struct.pack(">I", len(d)) + n + d + struct.pack(">I", zlib.crc32(n + d)) for n, d in blocks]
    return b"\x89PNG\r\n\x1a\n" + b"".join(packed)


DRAWING = "http://schemas.openxmlformats.org/drawingml/2006"
ANCHOR = f"""<oneCellAnchor xmlns="{DRAWING}/spreadsheetDrawing" xmlns:a="{DRAWING}/main" xmlns:r="{RELATIONS}">
<from><col>7</col><colOff>0</colOff><row>19</row><rowOff>0</rowOff></from><ext cx="95250" cy="95250"/>
<pic><nvPicPr><cNvPr id="9" name="dot"/><cNvPicPr/></nvPicPr><blipFill><a:blip r:embed="rDot"/></blipFill>
<spPr><a:prstGeom prst="rect"/></spPr></pic><clientData/></oneCellAnchor>"""


def with_picture(parts: dict[str, str | bytes]) -> dict[str, str | bytes]:
    """The picture on the drawing of the first sheet (openpyxl would need another library for it)."""
    link = f'<Relationship Id="rDot" Type="{RELATIONS}/image" Target="../media/image1.png"/></Relationships>'
    put_in = {
        "xl/drawings/drawing1.xml": ("</wsDr>", f"{ANCHOR}</wsDr>"),
        "xl/drawings/_rels/drawing1.xml.rels": ("</Relationships>", link),
        "[Content_Types].xml": ("<Override", '<Default Extension="png" ContentType="image/png"/><Override'),
    }
    for name, (old, new) in put_in.items():
        text = parts[name]
        assert isinstance(text, bytes)
        assert old.encode() in text
        parts[name] = text.replace(old.encode(), new.encode(), 1)
    return {**parts, "xl/media/image1.png": picture()}


def crane_hall(folder: Path) -> Path:
    """A book as an office keeps it; no cell has been computed."""
    book = openpyxl.Workbook()
    page = book.active
    page.title = "Girder"
    for line in (["part", "b", "h", "A"], ["flange", 300, 20, "=B2*C2"], ["web", 12, 400, "=B3*C3"]):
        page.append(line)
    page["D4"], page["E2"], page["E3"], page["E4"] = "=SUM(areas)", '=A2&" "&B2&"x"&C2', "=D2>D3", "=D2/0"
    page["F2"] = ArrayFormula("F2:F3", "=D2:D3*2")
    page["A1"].comment = Comment("widths in mm", "the workshop")
    book.defined_names["areas"] = DefinedName("areas", attr_text="Girder!$D$2:$D$3")
    page.add_table(Table(displayName="Plates", ref="A1:D3"))
    chart = BarChart()
    chart.add_data(Reference(page, min_col=4, min_row=1, max_row=3), titles_from_data=True)
    page.add_chart(chart, "H2")
    book.create_sheet("Notes")["A1"] = "checked by the workshop"
    path = folder / "girder.xlsx"
    book.save(path)
    with zipfile.ZipFile(path) as package:
        parts = with_picture({name: package.read(name) for name in package.namelist()})
    parts |= {"xl/vbaProject.bin": b"\xd0\xcf\x11\xe0 stands for macros", "customXml/item1.xml": "<plates/>"}
    return zipped(path, parts)


def values_of(path: Path) -> dict[str, object]:
    page = openpyxl.load_workbook(path, data_only=True)["Girder"]
    return {address: page[address].value for address in EXPECTED}


def test_only_the_sheet_with_formulas_changes(tmp_path: Path) -> None:
    path, out = crane_hall(tmp_path), tmp_path / "out.xlsx"
    assert write_values(path, recalculate(path), out).changed == ("xl/worksheets/sheet1.xml",)
    with zipfile.ZipFile(path) as old, zipfile.ZipFile(out) as new:
        names = old.namelist()
        assert new.namelist() == names
        assert [name for name in names if old.read(name) != new.read(name)] == ["xl/worksheets/sheet1.xml"]
    for kind in ("charts/chart", "media/image", "drawings/drawing", "tables/table", "comments", "vbaProject", "styles"):
        assert any(kind in name for name in names), kind


def test_openpyxl_reads_the_new_values_and_all_that_was_there(tmp_path: Path) -> None:
    path, out = crane_hall(tmp_path), tmp_path / "out.xlsx"
    write_values(path, recalculate(path), out)
    assert values_of(out) == EXPECTED
    page = openpyxl.load_workbook(out)["Girder"]
    assert len(page._charts) == 1
    assert (list(page.tables), page["A1"].comment.text) == (["Plates"], "widths in mm")
    assert page["D2"].value == "=B2*C2"


@pytest.mark.libreoffice
@pytest.mark.parametrize("kind", ["xlsx", "ods"])
def test_libreoffice_opens_the_copy_with_the_new_values(tmp_path: Path, soffice: str, kind: str) -> None:
    path = crane_hall(tmp_path)
    if kind == "ods":
        path = converted(soffice, path, "ods")
    stale = tmp_path / f"stale.{kind}"
    result = recalculate(path)
    for cell in result.cells:
        cell.value = 7.0
    write_values(path, result, stale)
    out = tmp_path / f"out.{kind}"
    write_values(stale, recalculate(stale), out)
    assert values_of(converted(soffice, out, "xlsx")) == EXPECTED


def converted(soffice: str, path: Path, kind: str) -> Path:
    """A book as LibreOffice saves it."""
    folder = path.parent / f"as-{kind}-{path.stem}"
    profile = (path.parent / "profile").as_uri()
    command = [soffice, f"-env:UserInstallation={profile}", "--headless", "--convert-to", kind, "--outdir", str(folder)]
    subprocess.run([*command, str(path)], check=True, capture_output=True, timeout=180)
    return folder / f"{path.stem}.{kind}"


CHAIN = f'<calcChain xmlns="{MAIN}"><c r="A1" i="1"/><c r="{{}}"/></calcChain>'
METADATA = (
    f'<metadata xmlns="{MAIN}"><metadataTypes><metadataType name="XLDAPR"/></metadataTypes>'
    '<futureMetadata name="XLDAPR"><bk><extLst><ext><x:dynamicArrayProperties xmlns:x="urn:x" fDynamic="1"/></ext>'
    '</extLst></bk></futureMetadata><cellMetadata><bk><rc t="1" v="0"/></bk></cellMetadata></metadata>'
)


def spilling(folder: Path, count: int, saved: int, listed: str = "C1") -> Path:
    """A book whose formula in B2 spills `count` cells down, as saved when it spilled `saved`."""
    end = f"B{saved + 1}"
    cells = [f'<row r="1" spans="1:2"><c r="A1"><f>1+1</f><v>2</v></c><c r="B1"><v>{count}</v></c></row>']
    for k in range(1, saved + 1):
        formula = f'<f t="array" ref="B2:{end}">_xlfn.SEQUENCE(B1)</f>' if k == 1 else ""
        metadata = ' cm="1"' if k == 1 else ""
        cells.append(f'<row r="{k + 1}"><c r="B{k + 1}"{metadata}>{formula}<v>{k}</v></c></row>')
    sheet = f'<worksheet xmlns="{MAIN}"><dimension ref="A1:{end}"/><sheetData>{"".join(cells)}</sheetData></worksheet>'
    parts = {**parts_of({"S": {}}, {}), "xl/worksheets/sheet1.xml": sheet, "xl/metadata.xml": METADATA}
    links = "".join(
        f'<Relationship Id="{part}" Type="{RELATIONS}/{kind}" Target="{part}.xml"/>'
        for kind, part in (("sheetMetadata", "metadata"), ("calcChain", "calcChain"))
    )
    key = "xl/_rels/workbook.xml.rels"
    parts[key] = parts[key].replace("</Relationships>", f"{links}</Relationships>")
    parts["xl/calcChain.xml"] = CHAIN.format(listed)
    types = f'<Types xmlns="{PACKAGE.replace("relationships", "content-types")}">{{}}</Types>'
    override = '<Override PartName="/xl/{}.xml" ContentType="x"/>'
    parts["[Content_Types].xml"] = types.format(override.format("calcChain") + override.format("metadata"))
    return zipped(folder / "spill.xlsx", parts)


def sheet_of(path: Path) -> str:
    with Package(path, Limits()) as package:
        return package.part("xl/worksheets/sheet1.xml").decode()


def test_a_spill_that_has_grown_gets_its_cells(tmp_path: Path) -> None:
    path, out = spilling(tmp_path, count=4, saved=2), tmp_path / "out.xlsx"
    assert write_values(path, recalculate(path), out).dropped == ()
    xml = sheet_of(out)
    assert '<dimension ref="A1:B5"/>' in xml
    assert '<f t="array" ref="B2:B5">' in xml
    assert read_book(out, Limits()).sheets[0].values == {
        (1, 1): 2,
        (1, 2): 4,
        (2, 2): 1,
        (3, 2): 2,
        (4, 2): 3,
        (5, 2): 4,
    }
    assert all(cell.value == cell.saved for cell in recalculate(out).cells)


@pytest.mark.parametrize("count", [1, 2])
def test_a_spill_that_has_shrunk_leaves_blanks_and_its_new_area(tmp_path: Path, count: int) -> None:
    path, out = spilling(tmp_path, count=count, saved=4), tmp_path / "out.xlsx"
    assert write_values(path, recalculate(path), out).dropped == ()
    assert f'<f t="array" ref="{"B2" if count == 1 else "B2:B3"}">' in sheet_of(out)
    spilled = {(k + 1, 2): float(k) for k in range(1, count + 1)}
    assert read_book(out, Limits()).sheets[0].values == {(1, 1): 2, (1, 2): count} | spilled


def test_an_order_of_calculation_that_names_a_blank_cell_goes_with_what_mentions_it(tmp_path: Path) -> None:
    path, out = spilling(tmp_path, count=2, saved=4, listed="B5"), tmp_path / "out.xlsx"
    assert write_values(path, recalculate(path), out).dropped == ("xl/calcChain.xml",)
    with zipfile.ZipFile(out) as package:
        assert "xl/calcChain.xml" not in package.namelist()
        for name in ("[Content_Types].xml", "xl/_rels/workbook.xml.rels"):
            text = package.read(name).decode()
            assert "calcChain" not in text
            assert "metadata" in text
    assert read_book(out, Limits()).sheets[0].values[3, 2] == 2


def test_a_spill_that_is_blocked_shows_its_error_in_its_own_cell_only(tmp_path: Path) -> None:
    path, out = spilling(tmp_path, count=4, saved=2), tmp_path / "out.xlsx"
    with zipfile.ZipFile(path) as package:
        parts: dict[str, str | bytes] = {name: package.read(name) for name in package.namelist()}
    key = "xl/worksheets/sheet1.xml"
    taken = b'<row r="5"><c r="B5" t="inlineStr"><is><t>taken</t></is></c></row></sheetData>'
    parts[key] = bytes(parts[key]).replace(b"</sheetData>", taken)  # type: ignore[arg-type]
    write_values(zipped(path, parts), recalculate(path), out)
    xml = sheet_of(out)
    assert '<c r="B2" cm="1" t="e"><f t="array" ref="B2">_xlfn.SEQUENCE(B1)</f><v>#VALUE!</v></c>' in xml
    assert '<c r="B3"></c>' in xml
    assert "taken" in xml


def test_a_disk_that_is_full_leaves_what_was_there(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path, out = crane_hall(tmp_path), tmp_path / "out.xlsx"
    out.write_bytes(b"what was there")

    def full(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(WorkbookError, match="No space left"):
        write_values(path, recalculate(path), out, replace=True)
    assert out.read_bytes() == b"what was there"
    assert sorted(each.name for each in tmp_path.iterdir()) == ["girder.xlsx", "out.xlsx"]
