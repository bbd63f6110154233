"""The files this project ships are those its builders build."""

from __future__ import annotations

import struct
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest
from openpyxl import load_workbook
from openpyxl.worksheet.formula import ArrayFormula

from cellsection.templates import TEMPLATES, build

if TYPE_CHECKING:
    from openpyxl import Workbook

ROOT = Path(__file__).resolve().parents[2]
REMEDY = "Run python -m cellsection.templates and look at what it changed"


def content(book: Workbook) -> dict[tuple[str, str], Any]:
    """What stands in every cell: text, number, formula, array formula with its area."""
    found: dict[tuple[str, str], Any] = {}
    for sheet in book:
        for row in sheet.iter_rows():
            for cell in row:
                value = cell.value
                if isinstance(value, ArrayFormula):
                    value = (value.ref, value.text)
                if value is not None:
                    found[sheet.title, cell.coordinate] = value
    return found


@pytest.mark.parametrize("name", TEMPLATES)
def test_a_shipped_workbook_is_not_stale(name: str, tmp_path: Path) -> None:
    shipped, built = ROOT / "workbooks" / f"{name}.xlsx", tmp_path / "built.xlsx"
    build(name, built)
    for data_only in (False, True):
        old, new = (content(load_workbook(each, data_only=data_only)) for each in (shipped, built))
        assert set(old) == set(new), REMEDY
        stale = [
            (*place, old[place], value)
            for place, value in new.items()
            if not (
                old[place] == pytest.approx(value, rel=1e-12, abs=1e-9)
                if isinstance(value, float | int)
                else old[place] == value
            )
        ]
        assert not stale, REMEDY


def test_no_workbook_is_shipped_that_no_builder_builds() -> None:
    assert {each.stem for each in (ROOT / "workbooks").glob("*.xlsx")} == set(TEMPLATES)


def test_the_picture_of_the_readme_is_a_png_of_the_stated_width() -> None:
    head = (ROOT / "docs" / "girder.png").read_bytes()[:24]
    assert head[:8] == b"\x89PNG\r\n\x1a\n"
    width, height = struct.unpack(">II", head[16:24])
    assert width == 1200
    assert 600 < height < 1600
