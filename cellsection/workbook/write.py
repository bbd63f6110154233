"""Recalculated values put into a copy of a workbook: only the values of formula cells change, nothing else.

In a sheet part, the <v> and the t of the cells whose value has changed are set where they stand; every byte between
them stays. Every other part of the package keeps its contents byte for byte. The copy is written whole under a
temporary name beside its place and then moved there, so that a file is there whole or not at all.
"""

from __future__ import annotations

import os
import zipfile
from collections import defaultdict
from pathlib import Path

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Limits, Position
from cellsection.workbook.package import Package, canonical
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.sheetxml import sheet_with_values
from cellsection.workbook.values import Scalar
from cellsection.workbook.xlsx import sheet_parts, workbook_part

__all__ = ["write_values"]

WRITTEN = (Status.RECALCULATED, Status.VOLATILE)
SIGNATURES = "_xmlsignatures/"


def write_values(
    path: str | Path, recalculation: Recalculation, out: str | Path, *, limits: Limits | None = None
) -> tuple[str, ...]:
    """Write a copy of the workbook at `path` to `out` with the recalculated values in its formula cells.

    Cells that could not be recalculated keep their saved values. Returns what the reader of the copy should know, such
    as a signature that no longer holds. Raises WorkbookError where the copy would replace the original, where the
    format cannot be written yet (.ods), and where the file cannot be read or written.
    """
    source, target = Path(path), Path(out)
    if target.exists() and source.exists() and source.samefile(target):
        raise WorkbookError(f"{source.name} would replace itself", remedy="Give the copy another name")
    if target.suffix.lower() != source.suffix.lower():
        raise WorkbookError(
            f"the copy of {source.name} is to be named {target.name}, which another format is expected of",
            remedy=f'Let its name end in "{source.suffix}"',
        )
    with Package(source, limits or Limits()) as package:
        if "content.xml" in package:
            raise WorkbookError(f"{source.name}: values cannot be written into .ods yet", remedy="Save it as .xlsx")
        changed = changed_parts(package, recalculation)
        write_copy(package, target, changed)
        signed = any(name.startswith(SIGNATURES) for name in package.names)
    return ("the digital signature of the book does not hold for the copy",) if signed and changed else ()


def changed_parts(package: Package, recalculation: Recalculation) -> dict[str, bytes]:
    """The sheet parts with new values, by their canonical name."""
    by_sheet: dict[str, dict[Position, Scalar]] = defaultdict(dict)
    for cell in recalculation.cells:
        if cell.status in WRITTEN and differs(cell):
            by_sheet[cell.sheet][position_of(cell.address)] = cell.value
    main = workbook_part(package)
    changed: dict[str, bytes] = {}
    for entry, relation in sheet_parts(package, package.tree(main), package.relationships(main)):
        values = by_sheet.pop(entry.get("name"), None)
        if values:
            part = relation.target
            where = f"{package.where(part)} (sheet {entry.get('name')})"
            changed[canonical(part)] = sheet_with_values(package.part(part), values, where)
    if by_sheet:
        raise WorkbookError(
            f"{package.name} has no sheet {next(iter(by_sheet))}, of which there are recalculated values",
            remedy="Recalculate this very book and write its values",
        )
    return changed


def differs(cell: FormulaCell) -> bool:
    """Whether the recalculated value is not exactly what the file holds."""
    if not cell.has_saved:
        return cell.value is not None
    return type(cell.value) is not type(cell.saved) or cell.value != cell.saved


def position_of(address: str) -> Position:
    """Row and column of A1."""
    area = read_ref(address)
    if area is None:
        raise ValueError(f"{address} is no cell address")
    return area[:2]


def write_copy(package: Package, target: Path, changed: dict[str, bytes]) -> None:
    """A copy of the package with some parts replaced, written whole or not at all."""
    temporary = target.with_name(f".{target.name}.{os.getpid()}.part")
    try:
        with temporary.open("xb") as file:
            with zipfile.ZipFile(file, "w") as copy:
                package.copy_into(copy, changed)
            file.flush()
            os.fsync(file.fileno())
        temporary.replace(target)
    except OSError as problem:
        raise WorkbookError(
            f"{target} cannot be written ({problem.strerror or problem})", remedy="Check the folder and its rights"
        ) from None
    finally:
        temporary.unlink(missing_ok=True)
