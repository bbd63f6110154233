"""Values written in place, shown on every book of a folder, part by part.

Of each book a copy is made in which the value of every formula cell is a wrong number; that copy is recalculated into a
second one. All parts of the second are then compared with those of the book, and its values with the recalculated ones,
as this library, openpyxl and LibreOffice read them.
"""

from __future__ import annotations

import re
import shutil
import subprocess
import tempfile
import warnings
import zipfile
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING
from xml.etree import ElementTree

from cellsection.check import Tolerance
from cellsection.check.compare import agree
from cellsection.check.many import books_in
from cellsection.check.report import counted
from cellsection.errors import WorkbookError
from cellsection.hosts.headless import recalculate
from cellsection.workbook.addresses import read_ref
from cellsection.workbook.book import Limits
from cellsection.workbook.reader import read_book
from cellsection.workbook.values import ErrorValue
from cellsection.workbook.write import WRITTEN, write_values

if TYPE_CHECKING:
    from collections.abc import Mapping

    from cellsection.workbook.results import Recalculation
    from cellsection.workbook.values import Scalar

__all__ = ["run"]

CONTENT = "content.xml"
FORMULA = "{urn:oasis:names:tc:opendocument:xmlns:table:1.0}formula"
HELD = ("value", "value-type", "date-value", "time-value", "boolean-value", "string-value", "currency")
PROGRAMS = ("openpyxl", "LibreOffice")
COPY, BOOK = "", " in the book itself"
WRONG = 123456.789  # what no cell of a book comes to
BESIDE = {  # what a book may hold beside cells: a pattern of part names, or of what stands in certain parts
    "charts": (r"xl/charts/chart\d*\.xml|Object \d+/content\.xml", r""),
    "images": (r"xl/media/.+|Pictures/.+", r""),
    "macros": (r"xl/vbaProject\.bin|Basic/.+/.+\.xml", r""),
    "names": (r"xl/workbook\.xml|content\.xml", r"<(?:\w+:)?(?:definedName|named-range|named-expression)[ >]"),
    "tables": (r"xl/tables/.+\.xml|content\.xml", r"<table xmlns|<(?:\w+:)?database-range "),
    "comments": (r"xl/comments.*\.xml|xl/comments/.+\.xml|content\.xml", r"<(?:\w+:)?(?:comment|annotation) "),
}


@dataclass
class Shown:
    """What became of one book."""

    cells: int
    kept: int  # cells that could not be recalculated
    changed: dict[str, tuple[int, int]]  # parts that differ from the book's: values written, those that are not its own
    same: int  # parts with the same bytes
    faults: list[str]
    equal: int  # cells whose values agree with the recalculated ones, as this library reads them
    opened: dict[tuple[str, str], tuple[int, int]]  # by other programs: cells that agree, cells read


def run(folder: Path, parts: bool) -> int:
    """Show every book, one line each and, where asked for, a line a part; 1 where anything is not as it should be."""
    soffice = shutil.which("soffice")
    wrong = 0
    print("book: parts, same + changed; formula cells; equal in the copy; as openpyxl and LibreOffice read it; beside")
    for path in books_in(folder):
        with tempfile.TemporaryDirectory() as place:
            try:
                shown = written_twice(path, Path(place), soffice)
            except WorkbookError as refusal:
                print(f"{path.name}: refused: {refusal}")
                wrong += 1
                continue
            opened = ", ".join(
                f"{program} {equal:,} of {read:,}{file}" for (program, file), (equal, read) in shown.opened.items()
            )
            print(
                f"{path.name}: parts {shown.same} + {len(shown.changed)}; {shown.cells:,}, {shown.kept:,} kept; "
                f"equal {shown.equal:,}; {opened}; {beside(path)}"
            )
            if parts:
                print(*part_lines(path, shown), sep="\n")
            for fault in shown.faults:
                print(f"    NOT AS IT SHOULD BE: {fault}")
            wrong += bool(shown.faults)
    print("all as they should be" if not wrong else f"{counted(wrong, 'book')} not as they should be")
    return int(wrong > 0)


def written_twice(path: Path, place: Path, soffice: str | None) -> Shown:
    """Spoil the values, recalculate the spoiled copy, and compare that with the book."""
    spoiled, out = (place / f"{name}{path.suffix}" for name in ("spoiled", "recalculated"))
    truth = recalculate(path, seed=1)
    wrong = [replace(c, value=WRONG) if c.status in WRITTEN and c.value is not None else c for c in truth.cells]
    write_values(path, replace(truth, cells=wrong), spoiled)
    again = recalculate(spoiled, seed=1)
    write_values(spoiled, again, out)
    before = contents(path)
    changed, faults = compared(path, before, contents(out), truth)
    expected = {(c.sheet, c.address): c.value for c in truth.cells if c.status in WRITTEN}
    copy = {s.name: s.values for s in read_book(out, Limits()).sheets}
    moving = {(c.sheet, c.address) for c in truth.cells if c.status.value == "volatile"}
    equal = sum(
        key in moving
        or any(agree(copy[key[0]].get(place_of(key[1])), v, Tolerance()) for v in (value, as_saved(value)))
        for key, value in expected.items()
    )
    if equal != len(expected):
        faults.append(f"{len(expected) - equal:,} values are not the recalculated ones")
    checked = {key: value for key, value in expected.items() if key not in moving}
    opened = as_others_read(path, out, checked, soffice, place)
    for name in PROGRAMS:
        if (name, BOOK) in opened and opened[name, COPY][0] < opened[name, BOOK][0]:
            faults.append(f"{name} does not read all values")
    return Shown(
        len(truth.cells), len(truth.cells) - len(expected), changed, len(before) - len(changed), faults, equal, opened
    )


def compared(
    path: Path, before: Mapping[str, bytes], after: Mapping[str, bytes], truth: Recalculation
) -> tuple[dict[str, tuple[int, int]], list[str]]:
    """The parts that differ, as `Shown.changed` has them, and what is wrong with any part."""
    faults = []
    if list(before) != list(after):
        faults.append(f"parts are missing, new or in another order: {sorted(set(before) ^ set(after))}")
    sheets: dict[str, list[str]] = {}
    for sheet in read_book(path, Limits()).sheets:
        sheets.setdefault(sheet.part or CONTENT, []).append(sheet.name)
    changed = {}
    for name in before:
        if before[name] != after.get(name):
            held = [c for c in truth.cells if c.sheet in sheets.get(name, ()) and c.status in WRITTEN]
            changed[name] = (len(held), sum(c.value != c.saved for c in held))
            formulas = {c.address for c in held}
            if name not in sheets:
                faults.append(f"{name} differs")
            elif name in after and without_values(before[name], formulas) != without_values(after[name], formulas):
                faults.append(f"{name} differs in more than values, or a spill fills other cells")
    return changed, faults


def as_others_read(
    book: Path, copy: Path, expected: Mapping[tuple[str, str], Scalar], soffice: str | None, place: Path
) -> dict[tuple[str, str], tuple[int, int]]:
    """The cells that openpyxl and LibreOffice read as expected, by program and file.

    They are asked for the book itself where they read other values in the copy: LibreOffice recalculates some cells as
    it opens a book, and openpyxl leaves control characters escaped.
    """
    opened = {}
    for program in PROGRAMS:
        for file, path in ((COPY, copy), (BOOK, book)):
            if program == "openpyxl" and path.suffix.lower() != ".ods":
                opened[program, file] = as_read(path, expected)
            elif program == "LibreOffice" and soffice:
                opened[program, file] = as_libreoffice_reads(soffice, path, expected, place / (file.strip() or "copy"))
            if opened.get((program, file), (0, 0))[0] == len(expected):
                break
    return opened


def contents(path: Path) -> dict[str, bytes]:
    """The bytes of every part, in the order of the file."""
    with zipfile.ZipFile(path) as package:
        return {info.filename: package.read(info) for info in package.infolist()}


def without_values(data: bytes, formulas: set[str]) -> str:
    """A sheet's XML in canonical form, its formula cells without their values: what has to stay.

    formulas : addresses of the formula cells, of an .xlsx sheet; in .ods they are those with a formula, and all cells
        of a book with array formulas
    """
    root = ElementTree.fromstring(data)
    for parent in root.iter():
        for cell in list(parent):
            local = cell.tag.rpartition("}")[2]
            if local == "c" and cell.get("r") in formulas:
                cell.attrib.pop("t", None)
                cell.attrib.pop("vm", None)
                for inner in [each for each in cell if each.tag.rpartition("}")[2] in ("v", "is")]:
                    cell.remove(inner)
            elif local == "table-cell" and (b"number-matrix" in data or cell.get(FORMULA) is not None):
                for name in [each for each in cell.attrib if each.rpartition("}")[2] in HELD]:
                    del cell.attrib[name]
                for inner in [each for each in cell if each.tag.rpartition("}")[2] == "p"]:
                    cell.remove(inner)
    return ElementTree.canonicalize(ElementTree.tostring(root, encoding="unicode"))


def place_of(address: str) -> tuple[int, int]:
    """Row and column of a cell."""
    area = read_ref(address)
    assert area is not None
    return area[:2]


def as_saved(value: Scalar) -> Scalar:
    """A value as the format holds it: an error that it does not know is #VALUE!."""
    known = ("#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A")
    return ErrorValue("#VALUE!") if isinstance(value, ErrorValue) and value.code not in known else value


def as_read(path: Path, expected: Mapping[tuple[str, str], Scalar]) -> tuple[int, int]:
    """How many cells openpyxl reads with the values that are expected, and how many it was asked for."""
    import openpyxl
    from openpyxl.utils.datetime import to_excel

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # of what openpyxl would lose, were it to save the book
        book = openpyxl.load_workbook(path, data_only=True)
    equal = 0
    for (sheet, address), value in expected.items():
        read = book[sheet][address].value if sheet in book.sheetnames else None
        if hasattr(read, "isoformat") or hasattr(read, "total_seconds"):
            read = to_excel(read, book.epoch)  # type: ignore[no-untyped-call]
        if isinstance(read, str) and isinstance(value, ErrorValue):
            read = ErrorValue(read)
        if isinstance(value, bool) and read in (0, 1):
            read = bool(read)
        read = float(read) if isinstance(read, int) and not isinstance(read, bool) else read
        equal += agree(read, as_saved(value), Tolerance(1e-9, 1e-9))
    return equal, len(expected)


def as_libreoffice_reads(
    soffice: str, path: Path, expected: Mapping[tuple[str, str], Scalar], place: Path
) -> tuple[int, int]:
    """How many cells have the expected values once LibreOffice has opened and saved the book; none if it does not."""
    command = [
        soffice, f"-env:UserInstallation={(place.parent / 'profile').as_uri()}", "--headless",
        "--convert-to", "xlsx", "--outdir", str(place), str(path),
    ]  # fmt: skip
    subprocess.run(command, capture_output=True, check=False, timeout=300)
    found = list(place.glob("*.xlsx"))
    return as_read(found[0], expected) if found else (0, len(expected))


def beside(path: Path) -> str:
    """How much of each kind a book holds beside its cells."""
    parts = contents(path)
    found = []
    for kind, (names, inner) in BESIDE.items():
        met = [data for name, data in parts.items() if re.fullmatch(names, name)]
        count = sum(len(re.findall(inner.encode(), data)) for data in met) if inner else len(met)
        if count:
            found.append(counted(count, kind[:-1]))
    return ", ".join(found) or "nothing"


def part_lines(path: Path, shown: Shown) -> list[str]:
    """A line a part: the same bytes, or how many of its values are new."""
    lines = []
    for name, data in contents(path).items():
        written, new = shown.changed.get(name, (0, 0))
        what = (
            f"{written:,} values set, {new:,} of them other than the book's" if name in shown.changed else "same bytes"
        )
        lines.append(f"    {name} ({len(data):,} bytes): {what}")
    return lines
