"""Recalculated values put into a copy of a workbook: only the values of formula cells change, nothing else.

In the part that holds the cells, the values that have changed are set where they stand; every byte between them stays.
Every other part of the package keeps its contents byte for byte. The copy is written whole under a temporary name
beside its place and then moved there, so that a file is there whole or not at all.
"""

from __future__ import annotations

import os
import shutil
import zipfile
from collections import defaultdict
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from cellsection.errors import WorkbookError
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Bounds, Limits, Position
from cellsection.workbook.calcchain import without_chain
from cellsection.workbook.metadata import read_metadata
from cellsection.workbook.package import Package, canonical
from cellsection.workbook.results import FormulaCell, Recalculation, Status
from cellsection.workbook.sheetxml import Sheet, sheet_with_values
from cellsection.workbook.values import Scalar
from cellsection.workbook.xlsx import sheet_parts, workbook_part

__all__ = ["WRITTEN", "Written", "differs", "refuse_in_the_way", "refuse_other_format", "write_values"]

CONTENT = "content.xml"
WRITTEN = (Status.RECALCULATED, Status.VOLATILE)
SIGNATURES = ("_xmlsignatures/", "meta-inf/documentsignatures")  # of the whole document; macros are signed apart
MACROS = ("/vbaproject.bin", "basic/", "scripts/")


@dataclass(frozen=True, slots=True)
class Written:
    """What was written: all else is byte for byte as in the original.

    changed : names of the parts that hold new values
    dropped : names of the parts that are left out, with what mentioned them
    notes : what the reader of the copy should know, such as a signature that no longer holds
    """

    changed: tuple[str, ...] = ()
    dropped: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()


def write_values(
    path: str | Path,
    recalculation: Recalculation,
    out: str | Path,
    *,
    limits: Limits | None = None,
    replace: bool = False,
) -> Written:
    """Write a copy of the workbook at `path` to `out` with the recalculated values in its formula cells.

    Cells that could not be recalculated keep their saved values.
    replace : whether a file that is there may be replaced, the workbook itself among them
    Raises WorkbookError where a file is in the way, and where one cannot be read or written; then nothing has changed.
    """
    source, target = Path(path), Path(out)
    refuse_other_format(source, target)
    refuse_in_the_way(source, target, replace)
    place = Path(os.path.realpath(target)) if target.is_symlink() else target
    temporary = place.with_name(f".{place.name}.{os.getpid()}.part")
    try:
        with Package(source, limits or Limits()) as package:
            changed, dropped = changed_parts(package, recalculation)
            named = tuple(name for name in package.names if canonical(name) in changed)
            notes = tuple(remarks(package, bool(changed)))
            write_copy(package, temporary, changed, dropped)
        refuse_in_the_way(source, target, replace)
        if place.exists():
            shutil.copymode(place, temporary)
        temporary.replace(place)
    except OSError as problem:
        raise WorkbookError(
            f"{target} cannot be written ({problem.strerror or problem})", remedy="Check the folder and its rights"
        ) from None
    finally:
        if temporary.parent.is_dir():
            temporary.unlink(missing_ok=True)
    return Written(named, dropped, notes)


def remarks(package: Package, changed: bool) -> Iterator[str]:
    """What the reader of the copy should know of parts that are copied as they are."""
    names = [canonical(name) for name in package.names]
    if changed and any(name.startswith(SIGNATURES) for name in names):
        yield "the digital signature of the book does not hold for the copy; sign it again"
    if any(name.endswith(MACROS[0]) or name.startswith(MACROS[1:]) for name in names):
        yield "its macros are kept as they are; they were not run"


def refuse_other_format(source: Path, target: Path) -> None:
    """Refuse a name that another format is expected of."""
    if target.suffix.lower() != source.suffix.lower():
        raise WorkbookError(
            f"the copy of {source.name} is to be named {target.name}, which another format is expected of",
            remedy=f'Let its name end in "{source.suffix}"',
        )


def refuse_in_the_way(source: Path, target: Path, replace: bool) -> None:
    """Refuse to write where a file is, unless it may be replaced."""
    if target.is_dir():
        raise WorkbookError(f"{target} is a folder", remedy="Name the file that is to be written")
    if replace or not os.path.lexists(target):
        return
    if target.exists() and source.exists() and source.samefile(target):
        raise WorkbookError(
            f"{source.name} would replace itself", remedy="Give the copy another name, or ask for it to be replaced"
        )
    raise WorkbookError(f"{target} is there already", remedy="Give the copy another name, or ask for it to be replaced")


def changed_parts(package: Package, recalculation: Recalculation) -> tuple[dict[str, bytes], tuple[str, ...]]:
    """The parts with new contents by their canonical name, and the parts that are left out."""
    by_sheet, areas = values_by_sheet(recalculation)
    if CONTENT in package:
        return changed_content(package, by_sheet), ()
    main = workbook_part(package)
    relations = package.relationships(main)
    parts = {each.kind: each.target for each in relations.values() if not each.external}
    metadata = read_metadata(package, parts)
    rich = {code: number for number, code in metadata.errors.items()}
    changed: dict[str, bytes] = {}
    blanked: dict[str, set[Position]] = {}
    for entry, relation in sheet_parts(package, package.tree(main), relations):
        values = by_sheet.pop(entry.get("name"), None)
        if values:
            part, name = relation.target, entry.get("name")
            where = f"{package.where(part)} (sheet {name})"
            sheet = Sheet(values, areas[name], metadata.dynamic, rich)
            changed[canonical(part)] = sheet_with_values(package.part(part), sheet, where)
            blanked[entry.get("sheetId")] = {place for place, value in values.items() if value is None}
    if by_sheet:
        raise no_such_sheet(package, next(iter(by_sheet)))
    chain, mentions = without_chain(package, main, relations, blanked)
    return changed | mentions, (chain,) if chain else ()


def changed_content(package: Package, by_sheet: dict[str, dict[Position, Scalar]]) -> dict[str, bytes]:
    """The one part of an .ods package that holds the cells, with new values."""
    from cellsection.workbook.odsxml import content_with_values

    if not by_sheet:
        return {}
    return {CONTENT: content_with_values(package.part(CONTENT), by_sheet, package.where(CONTENT))}


def values_by_sheet(
    recalculation: Recalculation,
) -> tuple[dict[str, dict[Position, Scalar]], dict[str, dict[Position, Bounds]]]:
    """The values to be written, and what each array formula fills, both by sheet and cell."""
    values: dict[str, dict[Position, Scalar]] = defaultdict(dict)
    areas: dict[str, dict[Position, Bounds]] = defaultdict(dict)
    changes, others = recalculation.sorted_out()
    values.update({sheet: changed.copy() for sheet, changed in changes.items()})
    for cell in others:
        if cell.status in WRITTEN:
            if differs(cell):
                values[cell.sheet][cell.place or position_of(cell.address)] = cell.value
            if cell.fills is not None:
                areas[cell.sheet][position_of(cell.address)] = cell.fills
    return values, areas


def no_such_sheet(package: Package, sheet: str) -> WorkbookError:
    """A refusal of values that belong to another book."""
    return WorkbookError(
        f"{package.name} has no sheet {sheet}, of which there are recalculated values",
        remedy="Recalculate this very book and write its values",
    )


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


def write_copy(package: Package, temporary: Path, changed: dict[str, bytes], dropped: tuple[str, ...]) -> None:
    """A copy of the package with some parts replaced or left out, flushed to the disk."""
    with temporary.open("xb") as file:
        with zipfile.ZipFile(file, "w") as copy:
            package.copy_into(copy, changed, frozenset(map(canonical, dropped)))
        file.flush()
        os.fsync(file.fileno())
