"""Recalculated values put into a copy of a workbook: only the values of formula cells change, nothing else.

In a sheet part the <v> and the t of formula cells are set; every other part of the package is copied byte for byte. The
copy is written whole under a temporary name and then moved into place, so that a file is there whole or not at all.
"""

from __future__ import annotations

import os
import tempfile
import zipfile
from collections import defaultdict
from pathlib import Path

from lxml import etree

from cellsection.errors import WorkbookError
from cellsection.workbook.book import Limits, Position, column_number
from cellsection.workbook.package import Package, parsed
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.values import ErrorValue, Scalar
from cellsection.workbook.xlsx import REFERENCE, children, local, relation_id, workbook_part

__all__ = ["write_values"]

WRITTEN = (Status.RECALCULATED, Status.VOLATILE)
PLAIN_ERRORS = frozenset(("#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A", "#SPILL!", "#CALC!"))


def write_values(path: str | Path, recalculation: Recalculation, out: str | Path) -> None:
    """Write a copy of the workbook at `path` to `out` with the recalculated values in its formula cells.

    Cells that could not be recalculated keep their saved values. Raises WorkbookError where the copy would replace the
    original, where the format cannot be written yet (.ods), and where the file cannot be read or written.
    """
    source, target = Path(path), Path(out)
    if target.exists() and source.resolve() == target.resolve():
        raise WorkbookError(f"{source.name} would replace itself", remedy="Give the copy another name")
    package = Package(source, Limits())
    try:
        if "content.xml" in package:
            raise WorkbookError(f"{source.name}: values cannot be written into .ods yet", remedy="Save it as .xlsx")
        changed = changed_parts(package, recalculation)
        write_copy(source, target, changed)
    finally:
        package.close()


def changed_parts(package: Package, recalculation: Recalculation) -> dict[str, bytes]:
    """The sheet parts with new values, by name."""
    by_sheet: dict[str, list[FormulaCell]] = defaultdict(list)
    for cell in recalculation.cells:
        if cell.status in WRITTEN:
            by_sheet[cell.sheet].append(cell)
    main = workbook_part(package)
    relations = package.relationships(main)
    changed: dict[str, bytes] = {}
    for entry in children(parsed(package.part(main), package.name, main), "sheets", "sheet"):
        cells = by_sheet.get(entry.get("name", ""))
        _, part, _ = relations.get(relation_id(entry), ("", "", False))
        if cells:
            changed[part] = sheet_with_values(package.part(part), cells, package.name, part)
    return changed


def sheet_with_values(data: bytes, cells: list[FormulaCell], book: str, part: str) -> bytes:
    """A sheet part with the values of its formula cells set."""
    root = parsed(data, book, part)
    sheet_data = next(children(root, "sheetData"))
    rows = {int(row.get("r", "0")): row for row in sheet_data if local(row.tag) == "row"}
    for cell in cells:
        position = position_of(cell.address)
        row = rows[position[0]] if position[0] in rows else new_row(sheet_data, rows, position[0])
        write_v(cell_element(row, position, cell.address), cell.value)
    return etree.tostring(root, xml_declaration=True, encoding="UTF-8", standalone=True)


def position_of(address: str) -> Position:
    """Row and column of A1."""
    match = REFERENCE.fullmatch(address)
    if match is None:
        raise ValueError(f"{address} is no cell address")
    return (int(match[2]), column_number(match[1]))


def new_row(sheet_data: etree._Element, rows: dict[int, etree._Element], number: int) -> etree._Element:
    """A row that the file does not hold yet, put in its place."""
    row = etree.Element(sheet_data.tag.replace("sheetData", "row"), r=str(number))
    sheet_data.insert(sum(1 for other in rows if other < number), row)
    rows[number] = row
    return row


def cell_element(row: etree._Element, position: Position, address: str) -> etree._Element:
    """The <c> of a cell, made where the file does not hold it yet."""
    place = 0
    for place, c in enumerate(row):  # noqa: B007 - where the loop stops is where a new cell goes
        column = position_of(c.get("r", ""))[1]
        if column == position[1]:
            return c
        if column > position[1]:
            break
    else:
        place = len(row)
    new = etree.Element(row.tag.replace("}row", "}c") if "}" in row.tag else "c", r=address)
    row.insert(place, new)
    return new


def write_v(c: etree._Element, value: Scalar) -> None:
    """Set the saved value of a cell: its <v>, and its t to say what kind it is."""
    namespace = c.tag[: -len("c")]
    for child in list(c):
        if local(child.tag) in ("v", "is"):
            c.remove(child)
    if "t" in c.attrib:
        del c.attrib["t"]
    if value is None:
        return
    v = etree.Element(f"{namespace}v")
    if isinstance(value, bool):
        c.set("t", "b")
        v.text = "1" if value else "0"
    elif isinstance(value, float):
        v.text = repr(int(value)) if value == int(value) and abs(value) < 1e15 else repr(value)
    elif isinstance(value, ErrorValue):
        c.set("t", "e")
        v.text = value.code if value.code in PLAIN_ERRORS else "#VALUE!"
    else:
        c.set("t", "str")
        v.text = value
    after = next((k + 1 for k, child in enumerate(c) if local(child.tag) == "f"), 0)
    c.insert(after, v)


def write_copy(source: Path, target: Path, changed: dict[str, bytes]) -> None:
    """A copy of the package with some parts replaced, written whole or not at all."""
    handle, name = tempfile.mkstemp(suffix=target.suffix, dir=target.parent)
    os.close(handle)
    temporary = Path(name)
    try:
        with zipfile.ZipFile(source) as old, zipfile.ZipFile(temporary, "w", zipfile.ZIP_DEFLATED) as new:
            for info in old.infolist():
                new.writestr(info, changed.get(info.filename) or old.read(info.filename), info.compress_type)
        temporary.replace(target)
    except OSError as problem:
        raise WorkbookError(
            f"{target} cannot be written ({problem})", remedy="Check the folder and its rights"
        ) from problem
    finally:
        temporary.unlink(missing_ok=True)
