"""A generated workbook on disk: constants, formulas without saved values, array formulas, names and a table.

Formula cells carry the number format 0.00E+00, so that LibreOffice saves every result as a plain number in full and
neither as a date nor as a truth value.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING
from xml.sax.saxutils import escape, quoteattr
from zipfile import ZIP_DEFLATED, ZipFile

from cellsection.workbook.values import ErrorValue, Scalar

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path

__all__ = ["ArrayText", "Content", "FormulaText", "Sheets", "WrittenTable", "write_book"]

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006/relationships"
TYPES = "application/vnd.openxmlformats-officedocument.spreadsheetml"


@dataclass(frozen=True, slots=True)
class FormulaText:
    """A formula without its equals sign."""

    text: str


@dataclass(frozen=True, slots=True)
class ArrayText:
    """An array formula that fills an area."""

    text: str
    area: str


@dataclass(frozen=True, slots=True)
class WrittenTable:
    """A table of one sheet, its header row first."""

    name: str
    sheet: str
    area: str
    columns: tuple[str, ...]


Content = Scalar | FormulaText | ArrayText
Sheets = dict[str, dict[tuple[int, int], Content]]  # by sheet; the cells by row and column


@dataclass(slots=True)
class _Parts:
    """The parts of the package as they come."""

    types: list[str] = field(default_factory=list)
    sheets: list[str] = field(default_factory=list)
    links: list[str] = field(default_factory=list)


def write_book(path: Path, sheets: Sheets, names: dict[str, str], tables: tuple[WrittenTable, ...] = ()) -> Path:
    """Write the .xlsx file."""
    parts = _Parts()
    with ZipFile(path, "w", ZIP_DEFLATED, compresslevel=1) as package:
        for number, (name, cells) in enumerate(sheets.items(), start=1):
            own = [(k, table) for k, table in enumerate(tables, start=1) if table.sheet == name]
            part = f"xl/worksheets/sheet{number}.xml"
            package.writestr(part, "".join(_worksheet(cells, own)))
            parts.types.append(_override(part, "worksheet+xml"))
            parts.sheets.append(f'<sheet name={quoteattr(name)} sheetId="{number}" r:id="s{number}"/>')
            parts.links.append(_link(f"s{number}", "worksheet", f"worksheets/sheet{number}.xml"))
            if own:
                links = [_link(f"t{k}", "table", f"../tables/table{k}.xml") for k, _ in own]
                package.writestr(f"xl/worksheets/_rels/sheet{number}.xml.rels", _links(links))
            for k, table in own:
                package.writestr(f"xl/tables/table{k}.xml", _table(k, table))
                parts.types.append(_override(f"xl/tables/table{k}.xml", "table+xml"))
        parts.links.append(_link("styles", "styles", "styles.xml"))
        defined = "".join(f"<definedName name={quoteattr(n)}>{escape(t)}</definedName>" for n, t in names.items())
        package.writestr(
            "xl/workbook.xml",
            f'<workbook xmlns="{MAIN}" xmlns:r="{RELATIONS}"><sheets>{"".join(parts.sheets)}</sheets>'
            f"<definedNames>{defined}</definedNames></workbook>",
        )
        package.writestr("xl/_rels/workbook.xml.rels", _links(parts.links))
        package.writestr("xl/styles.xml", STYLES)
        package.writestr("_rels/.rels", _links([_link("book", "officeDocument", "xl/workbook.xml")]))
        package.writestr("[Content_Types].xml", _content_types(parts.types))
    return path


STYLES = (
    f'<styleSheet xmlns="{MAIN}"><fonts count="1"><font/></fonts><fills count="1"><fill/></fills>'
    '<borders count="1"><border/></borders><cellStyleXfs count="1"><xf/></cellStyleXfs>'
    '<cellXfs count="2"><xf/><xf numFmtId="11" applyNumberFormat="1"/></cellXfs></styleSheet>'
)


def _content_types(overrides: list[str]) -> str:
    return (
        '<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types">'
        '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        '<Default Extension="xml" ContentType="application/xml"/>'
        + _override("xl/workbook.xml", "sheet.main+xml")
        + _override("xl/styles.xml", "styles+xml")
        + "".join(overrides)
        + "</Types>"
    )


def _override(part: str, kind: str) -> str:
    return f'<Override PartName="/{part}" ContentType="{TYPES}.{kind}"/>'


def _link(key: str, kind: str, target: str) -> str:
    return f'<Relationship Id="{key}" Type="{RELATIONS}/{kind}" Target="{target}"/>'


def _links(links: list[str]) -> str:
    return f'<Relationships xmlns="{PACKAGE}">{"".join(links)}</Relationships>'


def _table(number: int, table: WrittenTable) -> str:
    columns = "".join(f'<tableColumn id="{k}" name={quoteattr(c)}/>' for k, c in enumerate(table.columns, start=1))
    return (
        f'<table xmlns="{MAIN}" id="{number}" name="{table.name}" displayName="{table.name}" ref="{table.area}">'
        f'<tableColumns count="{len(table.columns)}">{columns}</tableColumns></table>'
    )


def _worksheet(cells: dict[tuple[int, int], Content], tables: list[tuple[int, WrittenTable]]) -> Iterator[str]:
    yield f'<worksheet xmlns="{MAIN}" xmlns:r="{RELATIONS}"><sheetData>'
    open_row = 0
    for (row, column), content in sorted(cells.items(), key=lambda item: item[0]):
        if row != open_row:
            yield ("</row>" if open_row else "") + f'<row r="{row}">'
            open_row = row
        yield _cell(f"{letters(column)}{row}", content)
    yield ("</row>" if open_row else "") + "</sheetData>"
    if tables:
        yield f'<tableParts count="{len(tables)}">' + "".join(f'<tablePart r:id="t{k}"/>' for k, _ in tables)
        yield "</tableParts>"
    yield "</worksheet>"


def letters(column: int) -> str:
    """Letters of a column from 1 to 702."""
    first, second = divmod(column - 1, 26)
    return (chr(64 + first) if first else "") + chr(65 + second)


def _cell(address: str, content: Content) -> str:
    if isinstance(content, FormulaText):
        return f'<c r="{address}" s="1"><f>{escape(content.text)}</f></c>'
    if isinstance(content, ArrayText):
        return f'<c r="{address}" s="1"><f t="array" ref="{content.area}">{escape(content.text)}</f></c>'
    if isinstance(content, bool):
        return f'<c r="{address}" t="b"><v>{int(content)}</v></c>'
    if isinstance(content, ErrorValue):
        return f'<c r="{address}" t="e"><v>{escape(content.code)}</v></c>'
    if isinstance(content, str):
        return f'<c r="{address}" t="inlineStr"><is><t xml:space="preserve">{escape(content)}</t></is></c>'
    return f'<c r="{address}"><v>{content!r}</v></c>' if content is not None else f'<c r="{address}"/>'
