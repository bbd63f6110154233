"""From an openpyxl workbook to a file: values cached, the same bytes every time, whole or not at all."""

from __future__ import annotations

import re
import tempfile
from datetime import datetime
from pathlib import Path
from typing import TYPE_CHECKING
from zipfile import ZIP_DEFLATED, ZipFile, ZipInfo

from cellsection.hosts.headless import recalculate
from cellsection.workbook.write import write_values

if TYPE_CHECKING:
    from openpyxl import Workbook

__all__ = ["write_book"]

STAMP = datetime(2026, 12, 1)  # the files tell the edition of the templates, not the hour of the build
MODIFIED = re.compile(rb"(<dcterms:modified[^>]*>)[^<]*")
ENGINE = 191029  # calculation engine an application names in the file; of its own age or newer, it trusts saved values


def write_book(book: Workbook, out: Path) -> None:
    """Write the workbook with the values of the headless recalculation; a file that is there already is replaced.

    Raises WorkbookError where it cannot be recalculated, OSError where it cannot be written; then `out` is as before.
    """
    book.properties.creator = "cellsection"
    book.properties.created = STAMP
    book.calculation.calcId = ENGINE
    book.calculation.fullCalcOnLoad = False
    with tempfile.TemporaryDirectory(dir=out.parent, prefix=".cellsection-") as folder:
        bare, filled, settled = (Path(folder, each) for each in ("bare.xlsx", "filled.xlsx", "settled.xlsx"))
        book.save(bare)
        write_values(bare, recalculate(bare), filled)
        _settle(filled, settled)
        settled.replace(out)


def _settle(source: Path, out: Path) -> None:
    """Copy the parts of a file under one fixed time, so that the same content gives the same bytes."""
    with ZipFile(source) as parts, ZipFile(out, "w", ZIP_DEFLATED) as copy:
        for each in parts.infolist():
            content = parts.read(each)
            if each.filename == "docProps/core.xml":
                content = MODIFIED.sub(rb"\g<1>" + STAMP.isoformat().encode() + b"Z", content)
            entry = ZipInfo(each.filename, STAMP.timetuple()[:6])
            entry.compress_type = ZIP_DEFLATED
            entry.external_attr = 0o600 << 16
            copy.writestr(entry, content)
