"""Small .xlsx files written part by part, so that a test can say exactly what a file holds, wrong values included."""

from __future__ import annotations

from typing import TYPE_CHECKING
from xml.sax.saxutils import escape
from zipfile import ZipFile

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"
OFFICE = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
TYPES = "application/vnd.openxmlformats-officedocument.spreadsheetml"


def write_book(path: Path, cells: Mapping[str, object], sheet: str = "Girder", settings: str = "") -> Path:
    """A book of one sheet.

    cells : address -> a constant, or (formula without "=", saved value); a saved None: the file stores
        none. Texts that begin with # are stored as errors.
    settings : what the workbook part says beside its sheets
    """
    rows: dict[int, list[str]] = {}
    for address, content in cells.items():
        rows.setdefault(int(address.lstrip("ABCDEFGHIJKLMNOPQRSTUVWXYZ")), []).append(_c(address, content))
    data = "".join(f'<row r="{row}">{"".join(rows[row])}</row>' for row in sorted(rows))
    parts = {
        "[Content_Types].xml": f'<Types xmlns="{PACKAGE}/content-types">'
        '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        f'<Override PartName="/xl/workbook.xml" ContentType="{TYPES}.sheet.main+xml"/>'
        f'<Override PartName="/xl/worksheets/sheet1.xml" ContentType="{TYPES}.worksheet+xml"/></Types>',
        "_rels/.rels": f'<Relationships xmlns="{PACKAGE}/relationships">'
        f'<Relationship Id="rId1" Type="{OFFICE}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{OFFICE}"><sheets>'
        f'<sheet name="{escape(sheet)}" sheetId="1" r:id="rId1"/></sheets>{settings}</workbook>',
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}/relationships">'
        f'<Relationship Id="rId1" Type="{OFFICE}/worksheet" Target="worksheets/sheet1.xml"/></Relationships>',
        "xl/worksheets/sheet1.xml": f'<worksheet xmlns="{MAIN}"><sheetData>{data}</sheetData></worksheet>',
    }
    with ZipFile(path, "w") as book:
        for name, text in parts.items():
            book.writestr(name, f'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n{text}')
    return path


def _c(address: str, content: object) -> str:
    """The c element of a cell."""
    formula, value = content if isinstance(content, tuple) else (None, content)
    f = f"<f>{escape(formula)}</f>" if formula else ""
    match value:
        case None:
            return f'<c r="{address}">{f}</c>'
        case bool():
            return f'<c r="{address}" t="b">{f}<v>{int(value)}</v></c>'
        case str() if value.startswith("#"):
            return f'<c r="{address}" t="e">{f}<v>{value}</v></c>'
        case str() if formula:
            return f'<c r="{address}" t="str">{f}<v>{escape(value)}</v></c>'
        case str():
            return f'<c r="{address}" t="inlineStr"><is><t>{escape(value)}</t></is></c>'
        case _:
            return f'<c r="{address}">{f}<v>{value!r}</v></c>'


def link_other_book(path: Path, target: str, value: float) -> Path:
    """The book with a link [1] to another one, of which A1 of the sheet Loads is saved with the link."""
    with ZipFile(path) as book:
        parts = {name: book.read(name).decode() for name in book.namelist()}
    main, relations = "xl/workbook.xml", "xl/_rels/workbook.xml.rels"
    links = '<externalReferences><externalReference r:id="rId9"/></externalReferences>'
    parts[main] = parts[main].replace("</workbook>", f"{links}</workbook>")
    link = f'<Relationship Id="rId9" Type="{OFFICE}/externalLink" Target="externalLinks/externalLink1.xml"/>'
    parts[relations] = parts[relations].replace("</Relationships>", f"{link}</Relationships>")
    parts["xl/externalLinks/externalLink1.xml"] = (
        f'<externalLink xmlns="{MAIN}" xmlns:r="{OFFICE}"><externalBook r:id="rId1">'
        '<sheetNames><sheetName val="Loads"/></sheetNames><sheetDataSet><sheetData sheetId="0">'
        f'<row r="1"><cell r="A1"><v>{value}</v></cell></row>'
        "</sheetData></sheetDataSet></externalBook></externalLink>"
    )
    parts["xl/externalLinks/_rels/externalLink1.xml.rels"] = (
        f'<Relationships xmlns="{PACKAGE}/relationships"><Relationship Id="rId1" TargetMode="External" '
        f'Type="{OFFICE}/externalLinkPath" Target="{target}"/></Relationships>'
    )
    with ZipFile(path, "w") as book:
        for name, text in parts.items():
            book.writestr(name, text)
    return path
