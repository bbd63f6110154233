"""Tiny workbooks made for a test: just enough parts to be read, every byte of them in sight."""

from __future__ import annotations

import zipfile
from collections.abc import Mapping
from pathlib import Path
from xml.sax.saxutils import escape, quoteattr

from cellsection.workbook.recalculate import recalculate
from cellsection.workbook.results import FormulaCell, Recalculation
from cellsection.workbook.values import ErrorValue, Scalar

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006/relationships"

Cell = float | str | bool | None


def cell_xml(address: str, content: Cell) -> str:
    """A cell: "=..." is a formula without a saved value, "{=...}B1:B3" an array formula over an area."""
    if isinstance(content, bool):
        return f'<c r="{address}" t="b"><v>{int(content)}</v></c>'
    if isinstance(content, str) and content.startswith("="):
        return f'<c r="{address}"><f>{escape(content[1:])}</f></c>'
    if isinstance(content, str) and content.startswith("{="):
        text, _, area = content[2:].rpartition("}")
        return f'<c r="{address}"><f t="array" ref="{area}">{escape(text)}</f></c>'
    if isinstance(content, str) and content.startswith("<"):
        return f'<c r="{address}">{content}</c>'
    if isinstance(content, str):
        return f'<c r="{address}" t="inlineStr"><is><t xml:space="preserve">{escape(content)}</t></is></c>'
    return f'<c r="{address}"><v>{content!r}</v></c>'


def row_of(address: str) -> int:
    return int("".join(c for c in address if c.isdigit()))


def sheet_xml(cells: Mapping[str, Cell]) -> str:
    rows: dict[int, list[str]] = {}
    for address, content in cells.items():
        rows.setdefault(row_of(address), []).append(cell_xml(address, content))
    body = "".join(f'<row r="{number}">{"".join(rows[number])}</row>' for number in sorted(rows))
    return f'<worksheet xmlns="{MAIN}"><sheetData>{body}</sheetData></worksheet>'


def parts_of(sheets: Mapping[str, Mapping[str, Cell]], names: Mapping[str, str], settings: str = "") -> dict[str, str]:
    """The parts of a minimal workbook by name."""
    listed = "".join(f'<sheet name={quoteattr(n)} sheetId="{k}" r:id="r{k}"/>' for k, n in enumerate(sheets, start=1))
    defined = "".join(f"<definedName name={quoteattr(n)}>{escape(t)}</definedName>" for n, t in names.items())
    links = "".join(
        f'<Relationship Id="r{k}" Type="{RELATIONS}/worksheet" Target="worksheets/sheet{k}.xml"/>'
        for k in range(1, len(sheets) + 1)
    )
    return {
        "_rels/.rels": f'<Relationships xmlns="{PACKAGE}"><Relationship Id="a" Type="{RELATIONS}/officeDocument"'
        ' Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{RELATIONS}"><sheets>{listed}</sheets>'
        f"<definedNames>{defined}</definedNames>{settings}</workbook>",
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}">{links}</Relationships>',
        **{f"xl/worksheets/sheet{k}.xml": sheet_xml(cells) for k, cells in enumerate(sheets.values(), start=1)},
    }


def zipped(path: Path, parts: Mapping[str, str | bytes]) -> Path:
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as package:
        for name, content in parts.items():
            package.writestr(name, content)
    return path


def saved(
    folder: Path,
    sheets: Mapping[str, Mapping[str, Cell]],
    names: Mapping[str, str] | None = None,
    settings: str = "",
) -> Path:
    """A workbook on disk."""
    return zipped(folder / "book.xlsx", parts_of(sheets, names or {}, settings))


class Results:
    """A recalculation, its cells by address."""

    def __init__(self, recalculation: Recalculation) -> None:
        self.recalculation = recalculation
        self.cells: dict[str, FormulaCell] = {}
        first = recalculation.sheets[0]
        for cell in recalculation.cells:
            self.cells[cell.address if cell.sheet == first else f"{cell.sheet}!{cell.address}"] = cell

    def __getitem__(self, address: str) -> Scalar:
        """The recalculated value; an error value by its code."""
        value = self.cells[address].value
        return value.code if isinstance(value, ErrorValue) else value


def results(
    folder: Path,
    cells: Mapping[str, Cell],
    names: Mapping[str, str] | None = None,
    others: Mapping[str, Mapping[str, Cell]] | None = None,
    **options: object,
) -> Results:
    """Recalculate a book of one sheet S (and others)."""
    return Results(recalculate(saved(folder, {"S": cells, **(others or {})}, names), **options))  # type: ignore[arg-type]
