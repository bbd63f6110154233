"""The shipped workbooks in a real LibreOffice: opened as saved, and its own functions calculated anew."""

from __future__ import annotations

import subprocess
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest
from openpyxl import load_workbook
from openpyxl.worksheet.formula import ArrayFormula

from cellsection.templates import TEMPLATES

if TYPE_CHECKING:
    from collections.abc import Iterator

    from openpyxl import Workbook

pytestmark = pytest.mark.libreoffice

WORKBOOKS = Path(__file__).resolve().parents[2] / "workbooks"
# Calculate everything anew when a file is opened, as a person would by Ctrl+Shift+F9.
ALWAYS = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse">
<value>0</value></prop></item></oor:items>
"""


def converted(soffice: str, book: Path, folder: Path, *, anew: bool) -> Workbook:
    """The workbook as LibreOffice saves it, its values."""
    profile = folder / "profile"
    (profile / "user").mkdir(parents=True)
    if anew:
        (profile / "user" / "registrymodifications.xcu").write_text(ALWAYS, encoding="utf-8")
    out = folder / "out"
    command = [soffice, f"-env:UserInstallation={profile.as_uri()}", "--headless", "--convert-to", "xlsx"]
    subprocess.run([*command, "--outdir", str(out), str(book)], check=True, capture_output=True, timeout=120)
    return load_workbook(out / book.name, data_only=True)


def printed(book: Workbook) -> Iterator[tuple[str, str, Any]]:
    """What stands in the print areas."""
    for sheet in book:
        for row in sheet[sheet.print_area.rpartition("!")[2].replace("$", "")]:
            for cell in row:
                if cell.value not in (None, ""):
                    yield sheet.title, cell.coordinate, cell.value


def differing(expected: dict[tuple[str, str], Any], met: Workbook) -> list[tuple[str, str, Any, Any]]:
    found = []
    for (sheet, address), value in expected.items():
        other = met[sheet][address].value
        same = other == pytest.approx(value, rel=1e-9, abs=1e-9) if isinstance(value, float | int) else other == value
        if not same:
            found.append((sheet, address, value, other))
    return found


@pytest.mark.parametrize("name", TEMPLATES)
def test_libreoffice_prints_the_saved_values_and_no_error(name: str, soffice: str, tmp_path: Path) -> None:
    # Our functions are not there. Beside the printed pages stand arrays and logicals: it calculates those in any case.
    book = WORKBOOKS / f"{name}.xlsx"
    saved = {(sheet, address): value for sheet, address, value in printed(load_workbook(book, data_only=True))}
    met = converted(soffice, book, tmp_path, anew=False)
    shown = [each for each in printed(met) if str(each[2]).startswith(("#", "Err:"))]
    assert not shown
    assert len(saved) > 300
    assert not differing(saved, met)


@pytest.mark.parametrize("name", TEMPLATES)
def test_libreoffice_calculates_the_plain_formulas_to_the_same_values(name: str, soffice: str, tmp_path: Path) -> None:
    book = WORKBOOKS / f"{name}.xlsx"
    formulas, saved = load_workbook(book), load_workbook(book, data_only=True)
    left: dict[tuple[str, str], Any] = {}
    for sheet in formulas:
        values = saved[sheet.title]
        for row in list(sheet.iter_rows()):
            for cell in row:
                if cell.data_type != "f":
                    continue
                text = cell.value.text if isinstance(cell.value, ArrayFormula) else str(cell.value)
                if "CS_" not in text:
                    left[sheet.title, cell.coordinate] = values[cell.coordinate].value
                else:  # LibreOffice does not know our functions here: their results stand in for them
                    cell.value = values[cell.coordinate].value
    plain = tmp_path / "plain.xlsx"
    formulas.save(plain)
    met = converted(soffice, plain, tmp_path, anew=True)
    expected = {place: value for place, value in left.items() if value is not None}
    assert len(expected) > 60
    assert not differing(expected, met)
