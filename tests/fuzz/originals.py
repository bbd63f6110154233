"""Small sound books that use much of both formats, for damage to begin from."""

from __future__ import annotations

from cellsection.workbook.book import Book, Formula, Sheet, Table
from tests.fuzz.formulas import Spelling
from tests.workbook.small import MAIN, PACKAGE, RELATIONS, parts_of
from tests.workbook.test_ods import NAMESPACES

__all__ = ["CONSTANTS", "book_of", "ods_parts", "xlsx_parts"]

TYPES = "http://schemas.openxmlformats.org/package/2006/content-types"
CONSTANTS: dict[tuple[int, int], float | str | bool | None] = {
    (1, 1): 1.0, (2, 1): -2.5, (3, 1): 1e300, (4, 1): "text", (5, 1): True, (6, 1): "", (7, 1): 46_000.25,
    (1, 2): "alpha", (2, 2): "12", (3, 2): 0.0, (4, 2): 1e-300, (5, 2): "x" * 200, (6, 2): "3+4i", (7, 2): "FF",
    (1, 3): "a", (2, 3): "b", (3, 3): "c", (4, 3): 3.0, (5, 3): 4.0, (6, 3): 1e15, (7, 3): "éß😀",
    (9, 4): 9.0, (10, 4): 10.0, (11, 4): 11.0, (12, 4): -1.0,
}  # fmt: skip
DEFINED = {
    "alpha": "S!$A$1", "beta": "{1,2;3,4}", "deep": "alpha+twice(alpha)", "ring": "ring+1", "area": "S!$A$1:$C$9",
    "twice": "LAMBDA(x,2*x)", "endless": "LAMBDA(n,endless(n+1))",
}  # fmt: skip


def book_of(formulas: list[tuple[str, str]], spelling: Spelling) -> Book:
    """A book in memory with formulas in column G, each an ordinary cell, an array formula or a dynamic one."""
    sheet, other = Sheet("S", dict(CONSTANTS)), Sheet("Two", {(1, 1): 5.0, (2, 2): "z"})
    for row, (kind, text) in enumerate(formulas, start=1):
        area = (row, 7, row, 8) if kind == "array" else None
        sheet.formulas[row, 7] = Formula(
            text, row, 7, "array" if kind == "array" else "cell", area, kind == "dynamic", spelling
        )
    names = {("", name.casefold()): Formula(text, 1, 1) for name, text in DEFINED.items()}
    book = Book("book.xlsx", "xlsx" if spelling == "excel" else "ods", [sheet, other], names)
    book.tables["t"] = Table("T", "S", (1, 3, 7, 4), ("a", "b"))
    return book


def xlsx_parts() -> dict[str, bytes]:
    """The parts of a book with shared strings, styles, a table, names, formulas of all kinds, a calculation chain."""
    parts = {name: text.encode() for name, text in parts_of({"S": {}, "Two": {"A1": 5.0, "B2": "z"}}, DEFINED).items()}
    parts["xl/worksheets/sheet1.xml"] = SHEET.encode()
    parts["xl/_rels/workbook.xml.rels"] = parts["xl/_rels/workbook.xml.rels"].replace(
        b"</Relationships>",
        b"".join(
            f'<Relationship Id="{name}" Type="{RELATIONS}/{kind}" Target="{name}.xml"/>'.encode()
            for name, kind in (
                ("sharedStrings", "sharedStrings"),
                ("styles", "styles"),
                ("metadata", "sheetMetadata"),
                ("calcChain", "calcChain"),
            )
        )
        + b"</Relationships>",
    )
    parts["xl/worksheets/_rels/sheet1.xml.rels"] = (
        f'<Relationships xmlns="{PACKAGE}"><Relationship Id="t1" Type="{RELATIONS}/table"'
        ' Target="../tables/table1.xml"/></Relationships>'
    ).encode()
    parts["xl/tables/table1.xml"] = (
        f'<table xmlns="{MAIN}" id="1" name="T" displayName="T" ref="C1:D7" totalsRowCount="0"><tableColumns count="2">'
        '<tableColumn id="1" name="a"/><tableColumn id="2" name="b"/></tableColumns></table>'
    ).encode()
    parts["xl/sharedStrings.xml"] = (
        f'<sst xmlns="{MAIN}" count="3" uniqueCount="3"><si><t>alpha</t></si><si><r><t>b</t></r><r>'
        '<t xml:space="preserve"> c</t></r></si><si><t>_x0041_&amp;</t></si></sst>'
    ).encode()
    parts["xl/styles.xml"] = (
        f'<styleSheet xmlns="{MAIN}"><numFmts count="1"><numFmt numFmtId="164" formatCode="0.00"/></numFmts>'
        '<cellXfs count="2"><xf numFmtId="0"/><xf numFmtId="164"/></cellXfs></styleSheet>'
    ).encode()
    parts["xl/metadata.xml"] = (
        f'<metadata xmlns="{MAIN}"><metadataTypes count="1"><metadataType name="XLDAPR"/></metadataTypes>'
        '<futureMetadata name="XLDAPR" count="1"><bk><extLst><ext>'
        '<dynamicArrayProperties fDynamic="1" fCollapsed="0"/></ext></extLst></bk>'
        '</futureMetadata><cellMetadata count="1"><bk><rc t="1" v="0"/></bk></cellMetadata></metadata>'
    ).encode()
    parts["xl/calcChain.xml"] = f'<calcChain xmlns="{MAIN}"><c r="B1" i="1"/><c r="B2"/></calcChain>'.encode()
    parts["[Content_Types].xml"] = (
        f'<Types xmlns="{TYPES}"><Default Extension="xml" ContentType="application/xml"/>'
        '<Override PartName="/xl/calcChain.xml" ContentType="application/x"/></Types>'
    ).encode()
    parts["docProps/core.xml"] = b"<coreProperties><modified>2026-12-01T08:00:00Z</modified></coreProperties>"
    return parts


SHEET = (
    f'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n<worksheet xmlns="{MAIN}" xmlns:r="{RELATIONS}">'
    '<dimension ref="A1:G9"/><sheetData><row r="1" spans="1:7"><c r="A1"><v>1</v></c><c'
    ' r="B1"><f>A1*2</f><v>2</v></c>'
    '<c r="C1" t="s"><v>0</v></c><c r="D1" t="b"><v>1</v></c></row><row r="2"><c r="A2"'
    ' s="1"><v>2.5</v></c><c r="B2">'
    '<f t="shared" ref="B2:B4" si="0">A2+$A$1</f><v>3.5</v></c><c r="C2" t="s"><v>1</v></c><c r="D2"'
    ' t="e"><v>#N/A</v>'
    '</c></row><row r="3" hidden="1"><c r="A3"><v>3</v></c><c r="B3"><f t="shared"'
    ' si="0"/><v>4</v></c><c r="C3" t="s">'
    '<v>2</v></c><c r="D3" t="str"><f>C1&amp;"x"</f><v>alphax</v></c></row><row r="4"><c'
    ' r="A4"><v>4</v></c><c r="B4">'
    '<f t="shared" si="0"/><v>5</v></c><c r="C4" t="inlineStr"><is><t>inline</t></is></c><c r="D4"><f t="array" '
    'ref="D4:D5">A1:A2*2</f><v>2</v></c></row><row r="5"><c r="A5" t="d"><v>2026-12-01T00:00:00</v></c><c r="B5">'
    '<f>SUM(area)+deep</f><v>1</v></c><c r="D5"><v>5</v></c></row><row r="6"><c r="B6" cm="1">'
    '<f t="array" ref="B6:B8">SEQUENCE(3)</f><v>1</v></c><c r="D6"><f>SUM(T[a])</f><v>0</v></c></row>'
    '<row r="7"><c r="B7"><v>2</v></c><c r="D7">'
    '<f>COUNTIF(A:A,"&gt;2")</f><v>3</v></c></row><row r="8"><c r="B8"><v>3</v></c><c r="E8"><f'
    ' t="dataTable" ref="E8:E9" '
    'dt2D="0" dtr="0" r1="A1"/><v>0</v></c></row></sheetData><tableParts count="1"><tablePart'
    ' r:id="t1"/></tableParts></worksheet>'
)  # fmt: skip


def ods_parts() -> dict[str, bytes]:
    """The parts of an OpenDocument book with repeats, an array formula, names and a database range."""
    return {
        "mimetype": b"application/vnd.oasis.opendocument.spreadsheet",
        "content.xml": CONTENT.encode(),
        "meta.xml": b"<document-meta><meta><date>2026-12-01T08:00:00</date></meta></document-meta>",
        "META-INF/manifest.xml": b'<manifest><file-entry full-path="/" media-type="x"/></manifest>',
    }


CONTENT = (
    f'<?xml version="1.0" encoding="UTF-8"?>\n<office:document-content {NAMESPACES}><office:body><office:spreadsheet>'
    '<table:calculation-settings table:null-year="1930"><table:iteration table:status="disable" table:steps="100"/>'
    '</table:calculation-settings><table:table table:name="S"><table:table-column table:number-columns-repeated="4"/>'
    '<table:table-row><table:table-cell office:value-type="float"'
    ' office:value="1"><text:p>1</text:p></table:table-cell>'
    '<table:table-cell table:formula="of:=[.A1]*2" office:value-type="float" office:value="2"><text:p>2</text:p>'
    '</table:table-cell><table:table-cell'
    ' office:value-type="string"><text:p>al<text:span>pha</text:span><text:s text:c="2"/>'
    '</text:p></table:table-cell></table:table-row><table:table-row table:number-rows-repeated="2"><table:table-cell '
    'office:value-type="percentage" office:value="0.5"/><table:table-cell'
    ' table:number-columns-repeated="2"/><table:table-cell'
    ' office:value-type="boolean" office:boolean-value="true"/></table:table-row><table:table-row><table:table-cell '
    'office:value-type="date" office:date-value="2026-12-01"/><table:table-cell'
    ' table:formula="of:=SUM([.A1:.A3])+twice"'
    ' office:value-type="float" office:value="4"/><table:table-cell table:formula="of:=[.A1:.A2]*2" '
    'table:number-matrix-columns-spanned="1" table:number-matrix-rows-spanned="2"'
    ' office:value-type="float" office:value="2"/>'
    '<table:table-cell office:value-type="time" office:time-value="PT12H30M00S"/></table:table-row><table:table-row>'
    '<table:table-cell table:formula="of:=MSOXL:X" office:value-type="float" office:value="4"'
    ' calcext:value-type="float"/>'
    '<table:table-cell table:number-columns-repeated="16380"/></table:table-row><table:table-row '
    'table:number-rows-repeated="1048570"><table:table-cell table:number-columns-repeated="16384"/></table:table-row>'
    '</table:table><table:named-expressions><table:named-range table:name="area" table:base-cell-address="$S.$A$1" '
    'table:cell-range-address="$S.$A$1:.$A$3"/><table:named-expression table:name="twice"'
    ' table:base-cell-address="$S.$A$1" '
    'table:expression="of:=2*[.A1]"/></table:named-expressions><table:database-ranges>'
    '<table:database-range table:name="T" table:target-range-address="S.A1:S.C3"/>'
    '</table:database-ranges></office:spreadsheet></office:body></office:document-content'
    '>'
)  # fmt: skip
